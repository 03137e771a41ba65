package calibrate

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"

	"tapround/survey"
)

// TestDerivatives holds every derivative of every reading by every unknown and every
// cause against central differences, with both friction laws, away from the prior means.
func TestDerivatives(t *testing.T) {
	for _, law := range []survey.FrictionLaw{survey.DarcyWeisbach, survey.HazenWilliams} {
		s := works()
		s.Info.FrictionLaw = law
		s.Info.AsNewYear = survey.Some(1980)
		exactly(t, s)
		m := modelOf(t, s)
		if len(m.Unread) > 0 || len(m.Obs) < 40 {
			t.Fatalf("%d observations, %d unread", len(m.Obs), len(m.Unread))
		}
		spreads := DefaultSpreads()
		causes := []Unknown{m.Fouled(1, spreads), m.FouledGroup("old", spreads), m.Throttled(1, spreads), m.OffsetOf(0, spreads), m.GainOf(4, spreads),
			m.LevelOf(2, spreads), m.ReservoirOf(0, spreads), m.Unrecorded(m.PointIndex("D"), []int{0, 1}, spreads), m.OffCurve(0, spreads), m.Misread(3, 1)}
		f, err := m.prepare(causes, Options{})
		if err != nil {
			t.Fatal(err)
		}
		rng := rand.New(rand.NewPCG(4, 2))
		for k := range f.U {
			f.U[k] = 0.3 * rng.NormFloat64()
			if f.Unknowns[k].Open {
				f.U[k] = 0.006 / f.Unknowns[k].SD
			}
		}
		n := len(m.Obs)
		j := mat.NewDense(n, len(f.U), nil)
		if err := f.derive(f.U, j); err != nil {
			t.Fatal(err)
		}
		up, down := make([]float64, n), make([]float64, n)
		u := append([]float64(nil), f.U...)
		for k := range u {
			// The step is a balance of curvature (h^2) against the tolerance of the
			// heads, 1e-8 m over an own uncertainty of some 0.02 m.
			h := 1e-3
			if f.Unknowns[k].Open {
				h = 1e-5 // its SD is many litres a second
			}
			u[k] = f.U[k] + h
			if err := f.evaluate(u, up); err != nil {
				t.Fatal(err)
			}
			u[k] = f.U[k] - h
			if err := f.evaluate(u, down); err != nil {
				t.Fatal(err)
			}
			u[k] = f.U[k]
			for i := 0; i < n; i++ {
				diff := (up[i] - down[i]) / (2 * h)
				if got := j.At(i, k); math.Abs(got-diff) > 2e-3+2e-4*math.Abs(diff) {
					t.Errorf("%v: d(%s %s %s)/d(%s %s %s) = %.6g, by differences %.6g", law, m.Obs[i].Head.Round, m.Obs[i].Head.Tap, m.Obs[i].Head.Kind,
						f.Unknowns[k].Kind, f.Unknowns[k].Item, f.Unknowns[k].Quantity, got, diff)
				}
			}
		}
	}
}
