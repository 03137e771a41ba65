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
	s := 1.959964 * sd
	if x.Log {
		return x.Expected * math.Exp(theta), x.Expected * math.Exp(theta-s), x.Expected * math.Exp(theta+s)
	}
	return x.Expected + theta, x.Expected + theta - s, x.Expected + theta + s
}

// PipeLine is the grade lines along one pipe in a round: at its ends, both sides of each
// fitting, and its taps.
func (f *Fit) PipeLine(round, link int) []Vertex {
	from, to := f.Model.endsOf(link)
	return f.alongWith(Way{Legs: []Leg{{link, math.Inf(-1), math.Inf(1)}}, Points: []int{from, to}}, round, true)
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
