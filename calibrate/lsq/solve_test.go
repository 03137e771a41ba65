package lsq_test

import (
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/optimize"
	"pgregory.net/rapid"

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
// log-decrement form of a pressure-loss fit: h = exp(a) q^exp(b) with a prior row.
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

// TestBounds draws linear problems with bounds and checks the conditions that define
// their minimum (Karush, Kuhn and Tucker): the gradient vanishes off the bounds and
// points outward on them.
func TestBounds(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 1))
		n := rapid.IntRange(1, 12).Draw(t, "unknowns")
		m := n + rapid.IntRange(0, 20).Draw(t, "extra rows")
		a := mat.NewDense(m, n, normals(r, m*n))
		p := linear(a, normals(r, m))
		p.Lower, p.Upper = make([]float64, n), make([]float64, n)
		for k := range n {
			p.Lower[k], p.Upper[k] = -0.3*r.Float64(), 0.3*r.Float64()
			if r.IntN(4) == 0 {
				p.Lower[k] = math.Inf(-1)
			}
		}
		res, err := lsq.Solve(p, make([]float64, n), lsq.Settings{})
		if err != nil || !res.Status.OK() {
			t.Fatalf("%v, %v", err, res.Status)
		}
		for k := range n {
			g := mat.Dot(a.ColView(k), mat.NewVecDense(m, res.R))
			// The gradient is a sum of m products of order one.
			const tol = 1e-7
			x := res.X[k]
			switch {
			case x < p.Lower[k] || x > p.Upper[k]:
				t.Fatalf("unknown %d is %g, outside %g to %g", k, x, p.Lower[k], p.Upper[k])
			case res.AtBound[k] && x == p.Lower[k] && g < -tol, res.AtBound[k] && x == p.Upper[k] && g > tol:
				t.Fatalf("unknown %d is held at %g against the gradient %g", k, x, g)
			case !res.AtBound[k] && math.Abs(g) > tol:
				t.Fatalf("unknown %d is free with gradient %g", k, g)
			case res.AtBound[k] && x != p.Lower[k] && x != p.Upper[k]:
				t.Fatalf("unknown %d is marked as held at %g", k, x)
			}
		}
	})
}

// TestBoundHeldInCovariance: an unknown at its bound counts as fixed, so that the
// others' covariance is that of the problem without it.
func TestBoundHeldInCovariance(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 7))
	a := mat.NewDense(12, 3, normals(r, 36))
	p := linear(a, normals(r, 12))
	p.Lower = []float64{math.Inf(-1), 2, math.Inf(-1)}
	res, err := lsq.Solve(p, make([]float64, 3), lsq.Settings{})
	if err != nil || !res.Status.OK() {
		t.Fatal(err, res.Status)
	}
	if !slices.Equal(res.AtBound, []bool{false, true, false}) || res.X[1] != 2 || res.Rank != 2 {
		t.Fatalf("at bound %v, x %v, rank %d", res.AtBound, res.X, res.Rank)
	}
	cov, err := res.Covariance()
	if err != nil {
		t.Fatal(err)
	}
	b := mat.NewDense(12, 2, nil)
	for i := range 12 {
		b.SetRow(i, []float64{a.At(i, 0), a.At(i, 2)})
	}
	var ata, want mat.Dense
	ata.Mul(b.T(), b)
	if err := want.Inverse(&ata); err != nil {
		t.Fatal(err)
	}
	for i, at := range []int{0, 2} {
		for j, with := range []int{0, 2} {
			if d := math.Abs(cov.At(at, with) - want.At(i, j)); d > 1e-12 {
				t.Errorf("covariance of %d and %d is off by %g", at, with, d)
			}
		}
		if cov.At(at, 1) != 0 {
			t.Errorf("covariance of %d with the held unknown is %g", at, cov.At(at, 1))
		}
	}
	if sum := floatsSum(res.Leverage()); math.Abs(sum-2) > 1e-12 {
		t.Errorf("leverages sum to %g, want the two free unknowns", sum)
	}
}

func floatsSum(v []float64) float64 {
	s := 0.0
	for _, x := range v {
		s += x
	}
	return s
}

// TestUnevaluable: where a point cannot be evaluated the step is shortened.
func TestUnevaluable(t *testing.T) {
	// ln x has its root at 1; from 9 a full Gauss-Newton step leads to 9 - 9 ln 9 < 0.
	for _, say := range []error{errors.New("negative"), nil} {
		p := lsq.Problem{M: 1, N: 1,
			Residuals: func(x, r []float64) error {
				r[0] = math.Log(x[0])
				if x[0] <= 0 {
					return say // nil: the residual itself is not a number
				}
				return nil
			},
			Jacobian: func(x []float64, j *mat.Dense) error { j.Set(0, 0, 1/x[0]); return nil },
		}
		res, err := lsq.Solve(p, []float64{9}, lsq.Settings{})
		if err != nil || !res.Status.OK() || math.Abs(res.X[0]-1) > 1e-9 {
			t.Errorf("error %v: %v, %+v", say, err, res)
		}
		if _, err := lsq.Solve(p, []float64{-1}, lsq.Settings{}); err == nil {
			t.Error("a start that cannot be evaluated is no error")
		}
	}
}

// TestStatus: each way to end is told apart.
func TestStatus(t *testing.T) {
	exp := lsq.Problem{M: 2, N: 1,
		Residuals: func(x, r []float64) error { r[0], r[1] = math.Exp(x[0])-2, math.Exp(-x[0])-2; return nil },
		Jacobian: func(x []float64, j *mat.Dense) error {
			j.Set(0, 0, math.Exp(x[0]))
			j.Set(1, 0, -math.Exp(-x[0]))
			return nil
		},
	}
	wrong := exp
	wrong.Jacobian = func(x []float64, j *mat.Dense) error { j.Set(0, 0, -1); j.Set(1, 0, 1); return nil }
	rosenbrock := lsq.Problem{M: 2, N: 2,
		Residuals: func(x, r []float64) error { r[0], r[1] = 10*(x[1]-x[0]*x[0]), 1-x[0]; return nil },
		Jacobian: func(x []float64, j *mat.Dense) error {
			j.SetRow(0, []float64{-20 * x[0], 10})
			j.SetRow(1, []float64{-1, 0})
			return nil
		},
	}
	for _, c := range []struct {
		name  string
		p     lsq.Problem
		start []float64
		set   lsq.Settings
		want  lsq.Status
	}{
		{"derivative of the wrong sign", wrong, []float64{1}, lsq.Settings{}, lsq.Stalled},
		{"too few steps", rosenbrock, []float64{-1.2, 1}, lsq.Settings{MaxIterations: 3}, lsq.IterationLimit},
		{"residuals that vanish", rosenbrock, []float64{-1.2, 1}, lsq.Settings{}, lsq.Converged},
		{"start at the answer", rosenbrock, []float64{1, 1}, lsq.Settings{}, lsq.Converged},
	} {
		res, err := lsq.Solve(c.p, c.start, c.set)
		if err != nil || res.Status != c.want {
			t.Errorf("%s: %v, %v, want %v", c.name, err, res.Status, c.want)
		}
		if res.Status.OK() != (c.want == lsq.Converged) {
			t.Errorf("%s: OK is %v", c.name, res.Status.OK())
		}
	}
}
