package hydraulic

import (
	"fmt"
	"math"
)

const (
	// What a solution may leave open: 1e-7 m along a link, 1e-9 of the largest flow at a
	// junction. Where nothing flows, 1e-9 of leastFlow stands for it: 1e-12 m3/s, a drop
	// of water in half a day.
	headTolerance = 1e-7
	flowTolerance = 1e-9
	leastFlow     = 1e-3
	// Steps go on below that while they still gain, down to about the rounding of a head
	// of 1,000 m, since sensitivities are compared and differences of heads are read.
	headGoal  = 1e-12
	flowGoal  = 1e-13
	mostGains = 12
	ulp       = 0x1p-52
	// Newton needs 4 to 8 steps from a near start and some 20 with many links to switch;
	// a hundred is far beyond anything that converges.
	mostSteps = 100
	// A full step is kept when the content is still falling at its end, or rising by no
	// more than this share of the first slope: near the solution that is always so.
	overshoot = 0.1
)

// newton solves for the links that are in, from the present flows.
func (v *Solver) newton() error {
	v.evaluate(v.flow, v.loss, v.slope)
	best, gains := math.Inf(1), 0
	for step := 0; ; step++ {
		e, b := v.residuals()
		scale := math.Max(leastFlow, v.largestFlow())
		// Beyond heads of 1e8 m a head's own rounding is more than the tolerance.
		open := math.Max(e/math.Max(headTolerance, 4*ulp*largest(v.head)), b/(flowTolerance*scale))
		if open <= 1 && ((e <= headGoal && b <= flowGoal*scale) || open > 0.9*best || gains == mostGains) {
			return nil
		}
		if open <= 1 {
			gains++
		}
		if step == mostSteps || math.IsNaN(open) {
			return v.stuck()
		}
		best = math.Min(best, open)
		if err := v.factorise(); err != nil {
			return err
		}
		v.steps++
		balanced := b <= flowTolerance*scale
		if !balanced || !v.solve(false) || !v.falls() {
			v.solve(true)
		}
		v.step(balanced)
	}
}

// evaluate fills loss and slope of the links that are in.
func (v *Solver) evaluate(flow, loss, slope []float64) {
	for i := range v.sys.links {
		if v.in[i] {
			loss[i], slope[i] = v.law(i, flow[i])
		}
	}
}

// residuals leaves each link's open energy in s and each junction's open balance in b,
// signed as what a step has to add, and returns the largest of both.
func (v *Solver) residuals() (e, b float64) {
	s := v.sys
	for i, p := range s.points {
		if r := s.row[i]; r >= 0 && p.Kind == Junction {
			v.b[r] = 0
			if v.live[i] {
				v.b[r] = -v.draw[i]
			}
		}
	}
	for i := range s.links {
		v.s[i] = 0
		if v.in[i] {
			v.s[i] = v.drop(i) - v.loss[i]
			v.addEnds(v.b, i, -v.flow[i])
		}
	}
	v.headError, v.flowError = largest(v.s), largest(v.b)
	return v.headError, v.flowError
}

func (v *Solver) drop(i int) float64 { return v.head[v.sys.links[i].From] - v.head[v.sys.links[i].To] }

// falls reports whether the content falls along the step x: always, unless a machine's
// slope makes it otherwise.
func (v *Solver) falls() bool {
	if len(v.odd) == 0 {
		return true
	}
	first := 0.0
	for i := range v.sys.links {
		if v.in[i] {
			first -= v.slope[i] * v.x[i] * v.x[i]
		}
	}
	return first < 0
}

// step moves to the new heads, and along x as far as the content keeps falling. The
// heads are those at which the step is a whole one: they do not depend on the old.
func (v *Solver) step(balanced bool) {
	for i := range v.sys.points {
		if r := v.sys.row[i]; r >= 0 && v.live[i] {
			v.head[i] += v.y[r]
		}
	}
	after := v.try(1)
	if before := v.fall(v.loss); balanced && before < 0 && !v.near() {
		v.shorten(before, after)
	}
	v.flow, v.trialFlow = v.trialFlow, v.flow
	v.loss, v.trialLoss = v.trialLoss, v.loss
	v.slope, v.trialSlope = v.trialSlope, v.slope
}

// shorten looks, by halving, for the least content along a step that overshoots it. The
// content's slope along the step rises from before at its start to after at its end.
func (v *Solver) shorten(before, after float64) {
	const trials = 30
	t, lo, hi := 1.0, 0.0, 1.0
	for k := 0; k < trials; k++ {
		switch {
		case !(after <= -overshoot*before): // not a number counts as too far
			hi = t
		case t < 1 && after < before/2:
			lo = t
		default:
			return
		}
		t = (lo + hi) / 2
		after = v.try(t)
	}
}

// try evaluates the flows at a share t of the step and returns the content's slope
// along the step there.
func (v *Solver) try(t float64) float64 {
	for i := range v.sys.links {
		v.trialFlow[i] = v.flow[i] + t*v.x[i]
	}
	v.evaluate(v.trialFlow, v.trialLoss, v.trialSlope)
	return v.fall(v.trialLoss)
}

// fall is the content's slope along the step for given losses. Flows that balance make
// the heads of the junctions drop out of the sum; they are kept for their cancellation.
func (v *Solver) fall(loss []float64) float64 {
	sum := 0.0
	for i := range v.sys.links {
		if v.in[i] {
			sum += v.x[i] * (loss[i] - v.drop(i))
		}
	}
	return sum
}

// near reports that the step is too small for the content to tell: a full one is right.
func (v *Solver) near() bool {
	const small = 1e-6 // m, still far above rounding
	for i := range v.sys.links {
		if v.in[i] && math.Abs(v.slope[i]*v.x[i]) > small {
			return false
		}
	}
	return true
}

func (v *Solver) largestFlow() float64 {
	most := 0.0
	for i := range v.sys.links {
		if v.in[i] {
			most = math.Max(most, math.Abs(v.flow[i]))
		}
	}
	return most
}

// runaway names a machine that has left its curve at the far end, where the curve bends
// the wrong way: continued, it gains ever more, or takes ever less, than the pipes ask
// for, and a duty far out means nothing.
func (v *Solver) runaway() error {
	s := v.sys
	for i, bends := range s.bends {
		if bends && v.in[i] && v.slope[i] < 0 && v.flow[i] > s.size[i]*v.ratio[i] && v.beyond(i) {
			return &Unsolvable{Cause: fmt.Sprintf("%s finds no duty on its works curve: continued beyond its last point, the curve leaves what the pipes ask for further and further behind", s.title(i)), Links: []string{s.links[i].Name}}
		}
	}
	return nil
}

// stuck names the link that stays furthest from its energy balance, a machine where
// one has run away.
func (v *Solver) stuck() error {
	s := v.sys
	if err := v.runaway(); err != nil {
		return err
	}
	at, worst := -1, 0.0
	for i := range s.links {
		if !v.in[i] {
			continue
		}
		if e := math.Abs(v.s[i]); at < 0 || e > worst || math.IsNaN(e) {
			at, worst = i, e
		}
	}
	if at < 0 {
		return &Unsolvable{Cause: "no steady state was found"}
	}
	l := s.links[at]
	return &Unsolvable{Cause: fmt.Sprintf("no steady state was found: %s between %s and %s still misses its energy balance by %.2g m after %d steps", s.title(at), s.points[l.From].Name, s.points[l.To].Name, worst, mostSteps),
		Points: []string{s.points[l.From].Name, s.points[l.To].Name}, Links: []string{l.Name}}
}
