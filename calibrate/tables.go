package calibrate

import (
	"math"

	"tapround/calibrate/hydraulic"
	"tapround/survey"
)

// LinkNames lists pipes, then machines, in the order of their tables.
func (m *Model) LinkNames() []string {
	var out []string
	for _, p := range m.Survey.Pipes {
		out = append(out, p.Name)
	}
	for _, x := range m.Survey.Machines {
		out = append(out, x.Name)
	}
	return out
}

// LinkLength is a pipe's length, 0 for a machine.
func (m *Model) LinkLength(link int) float64 { return m.lengthOf(link) }

// TapIndex finds a tap by name; -1 where there is none.
func (m *Model) TapIndex(name string) int { return find(m.taps, name) }

// Velocity is the section mean in a pipe, m/s; not ok for a machine.
func (f *Fit) Velocity(round, link int) (float64, bool) {
	if link >= len(f.Model.Survey.Pipes) {
		return 0, false
	}
	d := f.Model.Survey.Pipes[link].Bore
	return f.FlowOf(round, link) / (math.Pi / 4 * d * d), true
}

// MeasuredFlow is the weighted mean of the meters read on a pipe in a round, m3/s.
func (m *Model) MeasuredFlow(round, link int) (float64, bool) {
	sum, weight := 0.0, 0.0
	for _, o := range m.Obs {
		if o.Round == round && o.Head.Quantity == survey.VolumeFlow && o.parts[0].probe.Link == link {
			w := 1 / sq(o.Head.U())
			sum, weight = sum+w*o.Head.Value, weight+w
		}
	}
	return sum / weight, weight > 0
}

// Whole is unknown k of sound works with everything else that acts on the same
// item (its group, a cause): the item's fitted value in SI and its linear 95 %
// interval.
func (f *Fit) Whole(k int) (value, low, high float64) {
	x := f.Unknowns[k]
	theta, sd := f.ItemTheta(k)
	if x.Kind == "pipe" && len(f.actingOn(k)) > 0 {
		sd = math.Hypot(sd, f.LawSD(k))
	}
	s := 1.959964 * sd
	if x.Log {
		return x.Expected * math.Exp(theta), x.Expected * math.Exp(theta-s), x.Expected * math.Exp(theta+s)
	}
	return x.Expected + theta, x.Expected + theta - s, x.Expected + theta + s
}

// actingOn lists the causes that act on the quantity of unknown k.
func (f *Fit) actingOn(k int) []int {
	own := f.Unknowns[k]
	var out []int
	if len(own.Targets) != 1 || own.Targets[0].round != everyRound {
		return nil
	}
	for c := len(f.Model.Unknowns); c < len(f.Unknowns); c++ {
		for _, t := range f.Unknowns[c].Targets {
			if t.class == own.Targets[0].class && t.index == own.Targets[0].index {
				out = append(out, c)
			}
		}
	}
	return out
}

// LawSD is what a pipe's bore and the friction law itself, which are no unknowns, add to
// the uncertainty of its ln roughness (or ln C) when that is reported as a finding: 1 % of
// bore is 5 % of loss, and both act through d ln h / d ln k at the largest flow.
func (f *Fit) LawSD(k int) float64 {
	l := f.Model.LinkIndex(f.Unknowns[k].Item)
	p := f.Model.Priors
	if f.Unknowns[k].Quantity == "c_value" {
		return 2.63 * p.LnBore
	}
	most, round := 0.0, 0
	for r := range f.Model.Rounds {
		if q := math.Abs(f.FlowOf(r, l)); q > most {
			most, round = q, r
		}
	}
	c := f.Conditions(round)
	loss := f.Model.System.Link(l).Pipe.Loss(most, f.LnRough(l), c.Viscosity, c.Gravity)
	slope := 0.05 // all but smooth: the interval is open there anyway
	if loss.H > 0 {
		slope = math.Max(slope, loss.DParam/loss.H)
	}
	return math.Hypot(p.FrictionLaw, 5*p.LnBore) / slope
}

// PipeLine is the grade lines along one pipe in a round: at its ends, both sides of each
// fitting, and its taps.
func (f *Fit) PipeLine(round, link int) []Vertex {
	from, to := f.Model.endsOf(link)
	vs := f.alongWith(Way{Legs: []Leg{{link, math.Inf(-1), math.Inf(1)}}, Points: []int{from, to}}, round, true)
	out := vs[:1]
	for _, v := range vs[1:] {
		// A fitting at the very end has its near side at the end: one vertex is enough.
		if last := out[len(out)-1]; v.At != last.At || v.Total != last.Total {
			out = append(out, v)
		}
	}
	return out
}

// HeadsAt gives velocity head and piezometric head at a tap in a round by the fit;
// NaN where nothing feeds it.
func (f *Fit) HeadsAt(round int, tap string) (velocity, piezometric float64) {
	s := f.work.solvers[round]
	return s.Read(f.Model.ProbeOf(tap, hydraulic.VelocityHead)), s.Read(f.Model.ProbeOf(tap, hydraulic.Piezometric))
}

// RoundIndex finds a round by name; -1 where there is none.
func (m *Model) RoundIndex(name string) int { return find(m.rounds, name) }

// LocalVelocityAt is the velocity head at a pitot opening by the fit; depth from the
// near wall, not stated: the centreline.
func (f *Fit) LocalVelocityAt(round int, tap string, depth survey.Maybe) float64 {
	p := f.Model.ProbeOf(tap, hydraulic.LocalVelocityHead)
	if depth.OK {
		p.Depth = depth.V
	}
	return f.work.solvers[round].Read(p)
}
