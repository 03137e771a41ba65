package calibrate

import (
	"math"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/hydraulic"
)

// Estimate is a fitted quantity with its standard uncertainty.
type Estimate struct{ Value, SD float64 }

// Low and High are the ends of the 95 % interval.
func (e Estimate) Low() float64  { return e.Value - 1.959964*e.SD }
func (e Estimate) High() float64 { return e.Value + 1.959964*e.SD }

// Read is what a probe reads in a round by the fit, with its standard
// uncertainty u^2 = g' C g (JCGM 100:2008, 5.2.2). NaN where nothing feeds the place.
func (f *Fit) Read(round int, p hydraulic.Probe) Estimate {
	return f.combine(round, []part{{probe: p, weight: 1}})
}

// Drop is what the first probe reads above the second, with its uncertainty.
func (f *Fit) Drop(round int, a, b hydraulic.Probe) Estimate {
	return f.combine(round, []part{{probe: a, weight: 1}, {probe: b, weight: -1}})
}

func (f *Fit) combine(round int, parts []part) Estimate {
	o := Observation{Round: round, parts: parts, gauge: -1, tap: -1, other: -1}
	e := Estimate{Value: f.work.readParts(o, 0), SD: math.NaN()}
	if math.IsNaN(e.Value) {
		return e
	}
	g, err := f.sensitivity(o)
	if err != nil {
		return e
	}
	e.SD = math.Sqrt(math.Max(0, mat.Inner(g, f.Cov(), g)))
	return e
}

// sensitivity is the derivative of a model quantity by U.
func (f *Fit) sensitivity(o Observation) (*mat.VecDense, error) {
	if err := f.work.gradient(o); err != nil {
		return nil, err
	}
	g := mat.NewVecDense(len(f.Unknowns), nil)
	for k, x := range f.Unknowns {
		d := 0.0
		for _, t := range x.Targets {
			d += t.Weight * f.work.along(t, -1, o, 1)
		}
		g.SetVec(k, d*x.SD)
	}
	return g, nil
}

// Flow is the fitted flow of a pipe or machine in a round.
func (f *Fit) Flow(round, link int) Estimate {
	return f.Read(round, hydraulic.Probe{Point: -1, Link: link, View: hydraulic.Flow, Depth: math.NaN()})
}

// FlowOf is the fitted flow without its uncertainty.
func (f *Fit) FlowOf(round, link int) float64 { return f.work.states[round].Flow[link] }

// State is the solved state of a round at the estimate.
func (f *Fit) State(round int) *hydraulic.State { return f.work.states[round] }

// LnRough and LnK are the fitted parameters of the works.
func (f *Fit) LnRough(link int) float64 { return f.work.params.LnRough[link] }

// LnKOf is ln K of a fitting by its flat index.
func (f *Fit) LnKOf(flat int) float64 { return f.work.params.LnK[flat] }

// Conditions of a round at the estimate.
func (f *Fit) Conditions(round int) hydraulic.Conditions { return f.work.conds[round] }
