package stat_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"

	"tapround/calibrate/lsq"
	"tapround/calibrate/stat"
)

// TestCorrelatedW: its square is the drop of the sum of squares when that one reading
// is set free, whatever the correlation, and for independent readings it is WTest.
func TestCorrelatedW(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		rng := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 8))
		n := rapid.IntRange(1, 4).Draw(t, "unknowns")
		m := n + rapid.IntRange(2, 8).Draw(t, "extra rows")
		x, y := randomDense(rng, m, n), mat.Col(nil, 0, randomDense(rng, m, 1))
		cov := mat.NewSymDense(m, nil)
		if rapid.Bool().Draw(t, "correlated") {
			cov.SymOuterK(1, randomDense(rng, m, m))
		}
		for i := range m {
			cov.SetSym(i, i, cov.At(i, i)+0.5+rng.Float64())
		}
		var ch mat.Cholesky
		if !ch.Factorize(cov) {
			t.Fatal("covariance")
		}
		var l mat.TriDense
		ch.LTo(&l)
		// fit returns the adjustment with the extra columns g, whitened by the factor.
		fit := func(g *mat.Dense) *lsq.Result {
			a := x
			if g != nil {
				a = new(mat.Dense)
				a.Augment(x, g)
			}
			var wa mat.Dense
			var wy mat.VecDense
			if wa.Solve(&l, a) != nil || wy.SolveVec(&l, mat.NewVecDense(m, y)) != nil {
				t.Fatal("whitening")
			}
			res, err := lsq.Linear(&wa, wy.RawVector().Data, nil)
			if err != nil || !res.Status.OK() {
				t.Fatal(err, res.Status)
			}
			return res
		}
		base := fit(nil)
		c, err := base.Covariance()
		if err != nil {
			t.Fatal(err)
		}
		var v mat.VecDense
		v.MulVec(x, mat.NewVecDense(n, base.X))
		v.SubVec(&v, mat.NewVecDense(m, y))
		var xc, xcx mat.Dense
		xc.Mul(x, c)
		xcx.Mul(&xc, x.T())
		qvv := mat.NewSymDense(m, nil)
		for i := range m {
			for j := i; j < m; j++ {
				qvv.SetSym(i, j, cov.At(i, j)-(xcx.At(i, j)+xcx.At(j, i))/2)
			}
		}
		w, err := stat.CorrelatedW(v.RawVector().Data, cov, qvv)
		if err != nil {
			t.Fatal(err)
		}
		for i := range m {
			g := mat.NewDense(m, 1, nil)
			g.Set(i, 0, 1)
			drop := base.SumSquares - fit(g).SumSquares
			near(t, "w squared", w[i]*w[i], drop, 1e-7*(1+drop))
		}
		diagonal := true
		for i := range m {
			for j := range i {
				diagonal = diagonal && cov.At(i, j) == 0
			}
		}
		if diagonal {
			for i, u := range stat.WTest(base.R, base.Leverage()) {
				near(t, "w of independent readings", w[i], u, 1e-8*(1+math.Abs(u)))
			}
		}
	})
}

// TestUnchecked: a reading that nothing checks has no w, and no error in it would ever
// be found.
func TestUnchecked(t *testing.T) {
	w := stat.WTest([]float64{1e-17, 2}, []float64{1, 0.75})
	if w[0] != 0 || w[1] != 4 {
		t.Errorf("w is %v, want 0 and 4", w)
	}
	if d := stat.DetectableError(0.1, 0, 17); !math.IsInf(d, 1) {
		t.Errorf("detectable error without redundancy is %g", d)
	}
	near(t, "detectable error", stat.DetectableError(0.1, 0.25, 16), 0.8, 1e-15)
	near(t, "effect of an error in a reading that tells nothing", stat.ExternalEffect(1, 16), 0, 0)
	near(t, "effect at half redundancy", stat.ExternalEffect(0.5, 16), 4, 1e-12)
}
