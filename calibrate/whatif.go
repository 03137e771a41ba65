package calibrate

import (
	"math"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/hydraulic"
)

// WhatIf is one round of a fit under other draw-offs: what would be read if the crew
// drew more, or nothing. It holds its own solver, so the fit stays as it is.
type WhatIf struct {
	f     *Fit
	w     *Workspace
	round int
	Scale float64
}

// WhatIf solves a round with all its draw-offs multiplied by scale. An error means that
// the system cannot pass that much.
func (f *Fit) WhatIf(round int, scale float64) (*WhatIf, error) {
	w := &Workspace{m: f.Model, params: f.work.params, conds: f.work.conds, solvers: make([]*hydraulic.Solver, len(f.work.solvers)),
		states: make([]*hydraulic.State, len(f.work.states)), leaks: f.work.leaks, profile: f.work.profile,
		grad: f.Model.System.NewGradient(), sum: f.Model.System.NewGradient()}
	w.conds = append([]hydraulic.Conditions(nil), f.work.conds...)
	c := &w.conds[round]
	c.DrawOff = append([]float64(nil), c.DrawOff...)
	for i, d := range c.DrawOff {
		// What leaves unrecorded goes on whatever the crew does.
		leak := f.work.leaks[round][i]
		c.DrawOff[i] = (d-leak)*scale + leak
	}
	w.solvers[round] = f.Model.System.NewSolver()
	s, err := w.solvers[round].Solve(&w.params, c, f.work.states[round])
	if err != nil {
		return nil, err
	}
	w.states[round] = s
	return &WhatIf{f: f, w: w, round: round, Scale: scale}, nil
}

// Read is what the probes would read, each with its weight (1 and -1 for a difference),
// with the uncertainty that the fit leaves.
func (x *WhatIf) Read(probes []hydraulic.Probe, weights []float64) Estimate {
	o := Observation{Round: x.round, gauge: -1, tap: -1, other: -1}
	for i, p := range probes {
		o.parts = append(o.parts, part{probe: p, weight: weights[i]})
	}
	e := Estimate{Value: x.w.readParts(o, 0), SD: math.NaN()}
	if math.IsNaN(e.Value) || x.w.gradient(o) != nil {
		return e
	}
	g := mat.NewVecDense(len(x.f.Unknowns), nil)
	for k, u := range x.f.Unknowns {
		d := 0.0
		for _, t := range u.Targets {
			v := t.Weight * x.w.along(t, -1, o, 1)
			if t.class == onDrawOff {
				v *= x.Scale
			}
			d += v
		}
		g.SetVec(k, d*u.SD)
	}
	e.SD = math.Sqrt(math.Max(0, mat.Inner(g, x.f.Cov(), g)))
	return e
}

// Flow of a link under these draw-offs, m3/s.
func (x *WhatIf) Flow(link int) float64 { return x.w.states[x.round].Flow[link] }

// LevelError is what the fit says of a tap's recorded level, recorded minus true, m: a
// reading there with a sound gauge shows it. A tap whose level is taken as exact has none.
func (x *WhatIf) LevelError(tap string) Estimate {
	if k := x.f.Model.UnknownOf("tap", tap, "level_error"); k >= 0 {
		v, sd := x.f.ItemTheta(k)
		return Estimate{Value: v, SD: sd}
	}
	return Estimate{}
}

// Offset is what the fit says of a gauge's offset, as head, m.
func (x *WhatIf) Offset(gauge string) Estimate {
	k := x.f.Model.UnknownOf("gauge", gauge, "offset")
	if k < 0 {
		return Estimate{}
	}
	v, sd := x.f.ItemTheta(k)
	w := x.f.Model.Rounds[x.round].Density * x.f.Conditions(x.round).Gravity
	return Estimate{Value: v / w, SD: sd / w}
}
