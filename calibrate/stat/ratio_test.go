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

// TestDropOfSumOfSquares: in linear problems T is exactly the drop of the sum of
// squares when the fault becomes an unknown, and the size its estimate.
func TestDropOfSumOfSquares(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		rng := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 5))
		n := rapid.IntRange(1, 6).Draw(t, "unknowns")
		m := n + rapid.IntRange(1, 12).Draw(t, "extra rows")
		j, y, g := randomDense(rng, m, n), randomDense(rng, m, 1), randomDense(rng, m, 1)
		// Each unknown has a standard normal prior: z = y - 0 has V = I + J J'.
		v := mat.NewSymDense(m, nil)
		v.SymOuterK(1, j)
		for i := range m {
			v.SetSym(i, i, v.At(i, i)+1)
		}
		d, err := stat.NewDetector(v)
		if err != nil {
			t.Fatal(err)
		}
		T, size, sd := d.Ratio(mat.Col(nil, 0, y), mat.Col(nil, 0, g))
		sound := solvePrior(t, j, y, nil)
		fault := solvePrior(t, j, y, g)
		fsd, err := fault.SD()
		if err != nil {
			t.Fatal(err)
		}
		near(t, "T", T, sound.SumSquares-fault.SumSquares, 1e-9*(1+T))
		near(t, "size", size, fault.X[n], 1e-8*(1+math.Abs(size)))
		near(t, "sd", sd, fsd[n], 1e-8*sd)
		near(t, "global", d.Global(mat.Col(nil, 0, y)), sound.SumSquares, 1e-9*(1+sound.SumSquares))
	})
}

func randomDense(r *rand.Rand, m, n int) *mat.Dense {
	a := mat.NewDense(m, n, nil)
	for i := range m {
		for k := range n {
			a.Set(i, k, r.NormFloat64())
		}
	}
	return a
}

// solvePrior stacks prior rows under j, with a free column g where given.
func solvePrior(t *rapid.T, j, y, g *mat.Dense) *lsq.Result {
	m, n := j.Dims()
	cols := n
	if g != nil {
		cols++
	}
	a, z := mat.NewDense(m+n, cols, nil), make([]float64, m+n)
	for i := range m {
		for k := range n {
			a.Set(i, k, j.At(i, k))
		}
		if g != nil {
			a.Set(i, n, g.At(i, 0))
		}
		z[i] = y.At(i, 0)
	}
	for k := range n {
		a.Set(m+k, k, 1)
	}
	res, err := lsq.Linear(a, z, nil)
	if err != nil || !res.Status.OK() {
		t.Fatal(err, res.Status)
	}
	return res
}

// TestDependent: balances or readings that repeat others are an error, and a fault that
// reaches nothing has no ratio.
func TestDependent(t *testing.T) {
	a := mat.NewDense(2, 2, []float64{1, -1, 2, -2})
	if _, err := stat.Reconcile([]float64{1, 2}, identity(2), a); err == nil {
		t.Error("two balances that are one pass")
	}
	flat := mat.NewSymDense(2, []float64{1, 1, 1, 1})
	if _, err := stat.CorrelatedW([]float64{1, 2}, flat, flat); err == nil {
		t.Error("readings of one error pass")
	}
	d, err := stat.NewDetector(identity(2))
	if err != nil {
		t.Fatal(err)
	}
	if ratio, size, sd := d.Ratio([]float64{1, 2}, []float64{0, 0}); ratio != 0 || size != 0 || !math.IsInf(sd, 1) {
		t.Errorf("a fault that reaches nothing has ratio %g, size %g, deviation %g", ratio, size, sd)
	}
	if c := d.Cosine([]float64{0, 0}, []float64{1, 0}); c != 0 {
		t.Errorf("cosine with nothing is %g", c)
	}
}
