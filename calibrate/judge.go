package calibrate

import (
	"math"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/friction"
	"tapround/calibrate/stat"
)

// Theta is unknown k in its working scale: ln(fitted/expected), or SI.
func (f *Fit) Theta(k int) float64 { return f.Unknowns[k].Center + f.U[k]*f.Unknowns[k].SD }

// ThetaSD is its standard uncertainty.
func (f *Fit) ThetaSD(k int) float64 { return math.Sqrt(f.Cov().At(k, k)) * f.Unknowns[k].SD }

// Value is unknown k as a quantity in SI: Expected times exp(theta) for a
// logarithmic one, Expected + theta for the others, with the ends of the linear
// 95 % interval.
func (f *Fit) Value(k int) (value, low, high float64) {
	x, t, s := f.Unknowns[k], f.Theta(k), 1.959964*f.ThetaSD(k)
	if x.Log {
		return x.Expected * math.Exp(t), x.Expected * math.Exp(t-s), x.Expected * math.Exp(t+s)
	}
	return x.Expected + t, x.Expected + t - s, x.Expected + t + s
}

// Told is the share of unknown k that comes from the readings rather than from
// its prior: 1 - (posterior SD / prior SD)^2, between 0 and 1. Where a cause acts on the
// same quantity the two are taken together.
func (f *Fit) Told(k int) float64 {
	causes := f.actingOn(k)
	if k >= len(f.Model.Unknowns) || len(causes) == 0 {
		return clamp(1-f.Cov().At(k, k)/f.spread[k], 0, 1)
	}
	_, sd := f.ItemTheta(k)
	prior := sq(f.Unknowns[k].SD)
	for _, c := range causes {
		prior += sq(f.Unknowns[c].SD)
	}
	return clamp(1-sd*sd/prior, 0, 1)
}

// DoF is the number of readings in use less the causes and less the unknowns
// whose prior only keeps the problem determined. Every other unknown brings its
// own prior row, so that the two cancel.
func (f *Fit) DoF() int {
	d := -f.Causes
	for i := range f.Model.Obs {
		if f.weight == nil || f.weight[i] > 0 {
			d++
		}
	}
	for k, x := range f.Unknowns {
		if x.Open && f.Told(k) > 0.5 { // an open flow that no reading sees takes none away
			d--
		}
	}
	return d
}

// OpenBelow reports whether a pipe's roughness could as well be nothing: the readings
// have told an upper bound but cannot tell the wall from a smooth one, as the likelihood
// hardly changes when ln k is lowered by five (a factor of 150).
func (f *Fit) OpenBelow(k int) bool {
	x := f.Unknowns[k]
	if x.Kind != "pipe" || x.Quantity != "roughness" || f.Told(k) < 0.5 {
		return false
	}
	x.SD, x.Sign = 1, 0
	here, err := f.Profiled([]Unknown{x}, []float64{0})
	if err != nil {
		return false
	}
	smooth, err := f.Profiled([]Unknown{x}, []float64{-5})
	return err == nil && smooth-here < 3.841
}

// GlobalP is the probability that sound works (with the causes allowed) and
// stated uncertainties give a sum of squares at least as large as Phi.
func (f *Fit) GlobalP() (p float64, ok bool) {
	if f.DoF() < 1 {
		return 0, false
	}
	return stat.ChiSquareSurvival(f.Phi, float64(f.DoF())), true
}

// Redundancy of observation i: the share of an error in it that shows in its own
// difference, 0 (nothing checks it) to 1 (Baarda 1968).
func (f *Fit) Redundancy(i int) float64 {
	row := mat.NewVecDense(len(f.U), append([]float64(nil), f.J.RawRowView(i)...))
	return clamp(1-mat.Inner(row, f.Cov(), row), 0, 1)
}

// Normalised is the w statistic of observation i, measured minus fitted: the
// difference over its own standard deviation (Baarda 1968). Not ok where nothing
// checks the reading.
func (f *Fit) Normalised(i int) (w float64, ok bool) {
	r := f.Redundancy(i)
	if r < 1e-6 {
		return 0, false
	}
	return -f.R[i] / math.Sqrt(r), true
}

// Fitted is what observation i should read by the fit, in the unit of its Value.
func (f *Fit) Fitted(i int) float64 { return f.work.predict(i) }

// PriorW is the w statistic of the prior row of unknown k: how far its estimate
// stands from what is expected of a sound item, in units of the standard deviation
// that this difference has when all is sound. w = u / sqrt(1 - c_kk).
func (f *Fit) PriorW(k int) (w float64, ok bool) {
	d := f.spread[k] - f.Cov().At(k, k)
	if d < 1e-6 {
		return 0, false
	}
	return f.U[k] / math.Sqrt(d), true
}

// ItemTheta is the whole departure of an item from its expected value in the
// working scale, with its standard uncertainty: unknown k together with the group
// it belongs to and any cause that acts on the same quantity. An unknown that acts
// in single rounds (a draw-off, a level) stands for itself.
func (f *Fit) ItemTheta(k int) (theta, sd float64) {
	own := f.Unknowns[k]
	if len(own.Targets) != 1 || own.Targets[0].round != everyRound {
		return f.Theta(k), f.ThetaSD(k)
	}
	t := own.Targets[0]
	g := mat.NewVecDense(len(f.Unknowns), nil)
	for c, x := range f.Unknowns {
		for _, other := range x.Targets {
			if other.class == t.class && other.index == t.index {
				g.SetVec(c, g.AtVec(c)+other.Weight*x.SD)
				theta += other.Weight * f.Theta(c)
			}
		}
	}
	return theta, math.Sqrt(math.Max(0, mat.Inner(g, f.Cov(), g)))
}

// ItemExcess is the head that a pipe or fitting loses beyond a sound one of expected
// roughness or coefficient, at the fitted flow of the round, m; positive where it
// loses more, whichever way the water runs.
func (f *Fit) ItemExcess(round int, kind, item string) float64 {
	m := f.Model
	c := f.Conditions(round)
	if kind == "pipe" {
		l := m.LinkIndex(item)
		q, p := math.Abs(f.FlowOf(round, l)), m.System.Link(l).Pipe
		return p.Loss(q, f.LnRough(l), c.Viscosity, c.Gravity).H - p.Loss(q, m.base.LnRough[l], c.Viscosity, c.Gravity).H
	}
	flat := m.FlatFitting(item)
	if flat < 0 {
		return math.NaN()
	}
	at := m.fitPlace[flat]
	q, fit := math.Abs(f.FlowOf(round, at.link)), m.System.Link(at.link).Pipe.Fittings[at.order]
	now, _ := friction.Minor(q, math.Exp(f.LnKOf(flat)), fit.Bore, c.Gravity)
	sound, _ := friction.Minor(q, math.Exp(m.base.LnK[flat]), fit.Bore, c.Gravity)
	return now - sound
}

// PriorShare is what the prior row of unknown k adds to Phi.
func (f *Fit) PriorShare(k int) float64 { return f.U[k] * f.U[k] / f.spread[k] }
