package lsq_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/optimize"

	"tapround/calibrate/lsq"
)

// linear is the problem |A x - y|^2.
func linear(a *mat.Dense, y []float64) lsq.Problem {
	m, n := a.Dims()
	return lsq.Problem{M: m, N: n,
		Residuals: func(x, r []float64) error {
			for i := range r {
				r[i] = mat.Dot(a.RowView(i), mat.NewVecDense(n, x)) - y[i]
			}
			return nil
		},
		Jacobian: func(_ []float64, j *mat.Dense) error { j.Copy(a); return nil },
	}
}

func normals(r *rand.Rand, n int) []float64 {
	v := make([]float64, n)
	for i := range v {
		v[i] = r.NormFloat64()
	}
	return v
}

// TestSecondOpinion compares with the Newton method of gonum/optimize on the
// loss of head h = exp(a) q^exp(b) over the flow, with a prior row on b.
func TestSecondOpinion(t *testing.T) {
	q := []float64{0.5, 1, 1.5, 2, 3, 4}
	h := []float64{0.31, 1.02, 2.35, 3.8, 8.4, 14.9}
	p := lsq.Problem{M: len(q) + 1, N: 2,
		Residuals: func(x, r []float64) error {
			for i := range q {
				r[i] = (math.Exp(x[0])*math.Pow(q[i], math.Exp(x[1])) - h[i]) / 0.05
			}
			r[len(q)] = (x[1] - math.Ln2) / 0.1
			return nil
		},
		Jacobian: func(x []float64, j *mat.Dense) error {
			for i := range q {
				f := math.Exp(x[0]) * math.Pow(q[i], math.Exp(x[1])) / 0.05
				j.Set(i, 0, f)
				j.Set(i, 1, f*math.Log(q[i])*math.Exp(x[1]))
			}
			j.Set(len(q), 1, 1/0.1)
			return nil
		},
	}
	res, err := lsq.Solve(p, []float64{1, 0}, lsq.Settings{})
	if err != nil || !res.Status.OK() {
		t.Fatal(err, res.Status)
	}
	r := make([]float64, p.M)
	j := mat.NewDense(p.M, 2, nil)
	newton, err := optimize.Minimize(optimize.Problem{
		Func: func(x []float64) float64 {
			_ = p.Residuals(x, r)
			v := mat.NewVecDense(p.M, r)
			return mat.Dot(v, v)
		},
		Grad: func(g, x []float64) {
			_ = p.Residuals(x, r)
			_ = p.Jacobian(x, j)
			for k := range g {
				g[k] = 2 * mat.Dot(j.ColView(k), mat.NewVecDense(p.M, r))
			}
		},
		Hess: func(s *mat.SymDense, x []float64) {
			_ = p.Jacobian(x, j)
			s.SymOuterK(2, j.T())
		},
	}, []float64{0.5, 0.5}, &optimize.Settings{GradientThreshold: 1e-9}, &optimize.Newton{})
	if newton == nil {
		t.Fatal(err)
	}
	for k := range res.X {
		// Two minimisers of one function; the other stops at a gradient of 1e-9 of terms
		// of order 1e3.
		if d := math.Abs(res.X[k] - newton.X[k]); d > 1e-9 {
			t.Errorf("unknown %d: %.12f, Newton gives %.12f", k, res.X[k], newton.X[k])
		}
	}
	if d := math.Abs(res.SumSquares - newton.F); d > 1e-9*newton.F {
		t.Errorf("sum of squares %g, Newton gives %g", res.SumSquares, newton.F)
	}
}
