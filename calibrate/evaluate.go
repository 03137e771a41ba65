package calibrate

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/hydraulic"
)

// Workspace evaluates a model at given unknowns. It belongs to one goroutine.
type Workspace struct {
	m       *Model
	params  hydraulic.Parameters
	conds   []hydraulic.Conditions
	solvers []*hydraulic.Solver
	states  []*hydraulic.State
	offset  []float64 // by gauge, SI
	gain    []float64
	level   []float64 // by tap, m
	profile []float64
	baro    []float64   // by round
	own     []float64   // by observation: onReading
	leaks   [][]float64 // by round and point: onLeak, which no jet sees
	grad    *hydraulic.Gradient
	sum     *hydraulic.Gradient
}

// NewWorkspace makes one, at the expected values.
func (m *Model) NewWorkspace() *Workspace {
	w := &Workspace{m: m, params: m.System.NewParameters(),
		offset: make([]float64, len(m.Survey.Gauges)), gain: make([]float64, len(m.Survey.Gauges)),
		level: make([]float64, len(m.Survey.Taps)), profile: make([]float64, len(m.Survey.Taps)),
		baro: make([]float64, len(m.Rounds)), grad: m.System.NewGradient(), sum: m.System.NewGradient(),
		states: make([]*hydraulic.State, len(m.Rounds)), own: make([]float64, len(m.Obs))}
	for _, r := range m.Rounds {
		c := r.Conditions
		c.Head = append([]float64(nil), c.Head...)
		c.DrawOff = append([]float64(nil), c.DrawOff...)
		w.conds = append(w.conds, c)
		w.solvers = append(w.solvers, m.System.NewSolver())
		w.leaks = append(w.leaks, make([]float64, len(m.Survey.Points)))
	}
	w.reset()
	return w
}

// reset puts everything at its expected value.
func (w *Workspace) reset() {
	copy(w.params.LnRough, w.m.base.LnRough)
	copy(w.params.LnK, w.m.base.LnK)
	copy(w.params.HeadFactor, w.m.base.HeadFactor)
	for i := range w.conds {
		copy(w.conds[i].Head, w.m.Rounds[i].Conditions.Head)
		copy(w.conds[i].DrawOff, w.m.Rounds[i].Conditions.DrawOff)
		clear(w.leaks[i])
	}
	for _, s := range [][]float64{w.offset, w.gain, w.level, w.profile, w.baro, w.own} {
		clear(s)
	}
}

// set puts the unknowns at u, in prior standard deviations from their means.
func (w *Workspace) set(unknowns []Unknown, u []float64) {
	w.reset()
	for k, x := range unknowns {
		theta := x.Center + u[k]*x.SD
		if theta == 0 {
			continue
		}
		for _, t := range x.Targets {
			w.move(t, theta*t.Weight)
		}
	}
}

func (w *Workspace) move(t Target, by float64) {
	switch t.class {
	case onRoughness:
		w.params.LnRough[t.index] += by
	case onLoss:
		w.params.LnK[t.index] += by
	case onMachine:
		w.params.HeadFactor[t.index] += by
	case onDrawOff:
		w.eachRound(t.round, func(r int) { w.conds[r].DrawOff[t.index] += by })
	case onLeak:
		w.eachRound(t.round, func(r int) {
			w.conds[r].DrawOff[t.index] += by
			w.leaks[r][t.index] += by
		})
	case onLevel:
		w.eachRound(t.round, func(r int) { w.conds[r].Head[t.index] += by })
	case onOffset:
		w.offset[t.index] += by
	case onGain:
		w.gain[t.index] += by
	case onTapLevel:
		w.level[t.index] += by
	case onProfile:
		w.profile[t.index] += by
	case onBarometer:
		w.baro[t.index] += by
	case onReading:
		w.own[t.index] += by
	}
}

func (w *Workspace) eachRound(round int, do func(int)) {
	if round != everyRound {
		do(round)
		return
	}
	for r := range w.conds {
		do(r)
	}
}

// solve solves every round at the present values, each from its last state.
func (w *Workspace) solve() error {
	for r := range w.conds {
		s, err := w.solvers[r].Solve(&w.params, &w.conds[r], w.states[r])
		if err != nil {
			return fmt.Errorf("round %s: %w", w.m.Rounds[r].Name, err)
		}
		w.states[r] = s
	}
	return nil
}

// flowing reports whether any water moves in the round as last solved: more than
// 1 ml/s somewhere, below what any meter shows.
func (w *Workspace) flowing(round int) bool {
	for _, q := range w.states[round].Flow {
		if math.Abs(q) > 1e-6 {
			return true
		}
	}
	return false
}

// readParts is what the steady model alone says an observation should read; e is
// the tap's profile factor.
func (w *Workspace) readParts(o Observation, e float64) float64 {
	sum := 0.0
	for _, p := range o.parts {
		sum += p.weight * p.factor(e) * w.readPart(o.Round, p)
	}
	return sum
}

func (w *Workspace) readPart(round int, p part) float64 {
	if p.drawn {
		return w.conds[round].DrawOff[p.point] - w.leaks[round][p.point] - p.stated
	}
	return w.solvers[round].Read(p.probe)
}

// predict gives what observation i should read with all shared errors.
func (w *Workspace) predict(i int) float64 {
	o := w.m.Obs[i]
	h := o.Head
	y := w.readParts(o, w.profile[o.tap])
	if o.gauge >= 0 {
		y = y*(1+w.gain[o.gauge]) + h.PerGauge*w.offset[o.gauge]
	}
	y += h.PerTap * w.level[o.tap]
	if o.other >= 0 {
		y += h.PerOther * w.level[o.other]
	}
	if h.BarometerSD > 0 {
		y += w.baro[o.Round]
	}
	return y + w.own[i]
}

// row fills dst[k] with d prediction(i) / d u_k for each unknown.
func (w *Workspace) row(i int, unknowns []Unknown, dst []float64) error {
	o := w.m.Obs[i]
	if err := w.gradient(o); err != nil {
		return err
	}
	gain := 1.0
	if o.gauge >= 0 {
		gain += w.gain[o.gauge]
	}
	for k, x := range unknowns {
		d := 0.0
		for _, t := range x.Targets {
			d += t.Weight * w.along(t, i, o, gain)
		}
		dst[k] = d * x.SD
	}
	return nil
}

// gradient leaves the sum of the parts' gradients in w.sum.
func (w *Workspace) gradient(o Observation) error {
	w.sum.Zero()
	for _, p := range o.parts {
		if p.drawn {
			continue
		}
		if err := w.solvers[o.Round].Gradient(p.probe, w.grad); err != nil {
			return err
		}
		e := 0.0
		if p.power > 0 && o.tap >= 0 {
			e = w.profile[o.tap]
		}
		w.sum.AddScaled(p.weight*p.factor(e), w.grad)
	}
	return nil
}

// along is the derivative of observation i by one target.
func (w *Workspace) along(t Target, i int, o Observation, gain float64) float64 {
	h := o.Head
	here := t.round == everyRound || t.round == o.Round
	switch t.class {
	case onRoughness:
		return gain * w.sum.LnRough[t.index]
	case onLoss:
		return gain * w.sum.LnK[t.index]
	case onMachine:
		return gain * w.sum.HeadFactor[t.index]
	case onDrawOff, onLeak:
		if !here {
			return 0
		}
		d := w.sum.DrawOff[t.index]
		if p := o.parts[0]; p.drawn && p.point == t.index && t.class == onDrawOff {
			d += p.weight * p.factor(w.profile[o.tap])
		}
		return gain * d
	case onLevel:
		if here {
			return gain * w.sum.FixedHead[t.index]
		}
	case onOffset:
		if t.index == o.gauge {
			return h.PerGauge
		}
	case onGain:
		if t.index == o.gauge {
			return w.readParts(o, w.profile[o.tap])
		}
	case onTapLevel:
		d := 0.0
		if t.index == o.tap {
			d += h.PerTap
		}
		if o.other >= 0 && t.index == o.other {
			d += h.PerOther
		}
		return d
	case onProfile:
		if t.index == o.tap {
			d := 0.0
			for _, p := range o.parts {
				if p.power > 0 {
					// d (1+e)^n / de = n (1+e)^(n-1)
					d += p.weight * w.readPart(o.Round, p) * float64(p.power) * part{power: p.power - 1}.factor(w.profile[o.tap])
				}
			}
			return gain * d
		}
	case onBarometer:
		if t.index == o.Round && h.BarometerSD > 0 {
			return 1
		}
	case onReading:
		if t.index == i {
			return 1
		}
	}
	return 0
}

// differences fills r with the whitened differences of the readings, predicted
// minus measured over the reading's own SD.
func (w *Workspace) differences(weight, r []float64) error {
	for i, o := range w.m.Obs {
		r[i] = (w.predict(i) - o.Head.Value) / o.Head.Own * rootWeight(weight, i)
		if math.IsNaN(r[i]) {
			return fmt.Errorf("round %s, tap %s: nothing feeds this part of the system", o.Head.Round, o.Head.Tap)
		}
	}
	return nil
}

// derivatives fills the first rows of j with d differences / d U.
func (w *Workspace) derivatives(weight []float64, unknowns []Unknown, j *mat.Dense) error {
	for i, o := range w.m.Obs {
		row := j.RawRowView(i)
		if err := w.row(i, unknowns, row); err != nil {
			return err
		}
		scale := rootWeight(weight, i) / o.Head.Own
		for k := range row {
			row[k] *= scale
		}
	}
	return nil
}

func rootWeight(weight []float64, i int) float64 {
	if weight == nil {
		return 1
	}
	return math.Sqrt(weight[i])
}
