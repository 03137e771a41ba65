package lsq_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"

	"tapround/calibrate/lsq"
)

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

// TestBoundInOneStep: a step that meets a bound solves again for the other unknowns, so
// that a linear problem with one bound in the way is done at once.
func TestBoundInOneStep(t *testing.T) {
	a := mat.NewDense(3, 2, []float64{0.9, 1, 0.3, 0, -1, 0.2})
	p := linear(a, []float64{5, 1, -2})
	p.Upper = []float64{math.Inf(1), 0.5}
	res, err := lsq.Solve(p, []float64{0, 0}, lsq.Settings{Radius: 100})
	if err != nil || !res.Status.OK() || res.X[1] != 0.5 || !res.AtBound[1] {
		t.Fatalf("%v, %v at %v", err, res.Status, res.X)
	}
	// With x1 = 0.5 the rows leave 4.5, 1, -2.1 for 0.9, 0.3, -1.
	near(t, "the free unknown", res.X[0], (4.5*0.9+0.3+2.1)/(0.81+0.09+1), 1e-12)
	if res.Iterations != 1 {
		t.Errorf("%d steps, want one", res.Iterations)
	}
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
