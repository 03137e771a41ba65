package hydraulic

import (
	"fmt"
	"math"
)

const (
	// pressed, m, is how hard a one-way link must be pressed shut, or open, before it is
	// taken as closed, or opened again; less is within what a solution leaves open. A
	// link that nothing presses stands open, so that a dead end behind a check valve
	// keeps the head of what fills it.
	pressed = 1e-6
	// Patterns settle in one or two rounds. After allAtOnce of them only the link that
	// is furthest off switches, so that two cannot throw each other over for ever; then
	// every link may need a round of its own.
	allAtOnce = 4
	mostRound = 300
)

// guessPattern finds which one-way links close: with the barrier up the problem is one
// of monotone losses, and what runs backwards in its solution is closed.
func (v *Solver) guessPattern() {
	if !v.sys.oneWay {
		return
	}
	v.rest()
	v.barrier = true
	// Where even this does not converge, the signs of the last flows are still the best
	// guess there is; whether they are right is found out by settle.
	_ = v.newton()
	v.barrier = false
	for i, w := range v.sys.ways {
		if v.in[i] && w.against(v.flow[i]) && math.Abs(v.flow[i])*v.stiffness/v.sys.size[i] > pressed {
			v.blocked[i] = true
		}
	}
}

// settle solves for the present pattern of closed one-way links and corrects the
// pattern until both agree: no open link runs backwards, no closed one is pressed open.
func (v *Solver) settle() error {
	for round := 0; ; round++ {
		if err := v.feed(); err != nil {
			return err
		}
		v.rest()
		if err := v.newton(); err != nil {
			return err
		}
		if !v.sys.oneWay {
			return nil
		}
		worst := v.switchWrong(round < allAtOnce)
		if worst < 0 {
			var err error
			if worst, err = v.settleIdle(); worst < 0 {
				return err
			}
		}
		if round == mostRound {
			name := v.sys.links[worst].Name
			return &Unsolvable{Cause: "no steady state was found: one-way links open and close in turn, among them " + name, Links: []string{name}}
		}
	}
}

// switchWrong closes what runs backwards and opens what is pressed open: all such
// links, or only the one furthest off. It returns that one, -1 if there is none.
func (v *Solver) switchWrong(all bool) int {
	at, worst := -1, 0.0
	least := v.leastBackflow()
	for i := range v.sys.links {
		off := v.off(i, least)
		if off <= 0 {
			continue
		}
		if off > worst {
			at, worst = i, off
		}
		if all {
			v.turn(i)
		}
	}
	if at >= 0 && !all {
		v.turn(at)
	}
	return at
}

func (v *Solver) turn(i int) {
	v.blocked[i] = !v.blocked[i]
	v.in[i] = !v.blocked[i]
	v.flow[i] = v.guess(i) / 10
}

// leastBackflow is what counts as flow against a link's way: what a balance may leave
// open does not.
func (v *Solver) leastBackflow() float64 {
	return flowTolerance * math.Max(leastFlow, v.largestFlow())
}

// off says by how much, in units of head, a one-way link is on the wrong side; 0 where
// it is right.
func (v *Solver) off(i int, least float64) float64 {
	w := v.sys.ways[i]
	switch {
	case w == free || v.shut[i]:
		return 0
	case v.in[i]:
		if q := math.Abs(v.flow[i]); w.against(v.flow[i]) && q > least {
			return q * barrierHeads[0] / v.sys.size[i]
		}
	case v.blocked[i] && v.live[v.sys.links[i].From] && v.live[v.sys.links[i].To]:
		h, _ := v.bare(i, 0)
		open := v.drop(i) - h
		if w == backwardOnly {
			open = -open
		}
		if open > pressed/10 {
			return open
		}
	}
	return 0
}

// mayRunElsewhere reports that a machine whose curve bends is off its curve, or that
// none was found to run at all, so that another duty may exist which the descent
// passes by: one that does not hold by itself.
func (v *Solver) mayRunElsewhere(err error) bool {
	for i, bends := range v.sys.bends {
		if bends && !v.shut[i] && (err != nil || v.blocked[i] || v.beyond(i)) {
			return true
		}
	}
	return false
}

func (v *Solver) beyond(i int) bool {
	_, _, beyond := v.sys.links[i].Machine.Curve.At(v.flow[i], v.ratio[i])
	return beyond
}

// duty looks for a solution with every bending machine on its curve, by plain Newton
// steps from the middle of the curves. Where there is none the state stays as it was.
func (v *Solver) duty() bool {
	flow, head := append([]float64(nil), v.flow...), append([]float64(nil), v.head...)
	blocked := append([]bool(nil), v.blocked...)
	e, b := v.headError, v.flowError
	for i, bends := range v.sys.bends {
		v.blocked[i] = v.blocked[i] && !bends
	}
	if v.feed() == nil {
		v.start()
		if v.plain() && v.sound() {
			return true
		}
	}
	copy(v.flow, flow)
	copy(v.head, head)
	copy(v.blocked, blocked)
	v.headError, v.flowError = e, b
	_ = v.feed() // it fed this pattern before
	v.evaluate(v.flow, v.loss, v.slope)
	return false
}

// plain takes full steps with the true slopes.
func (v *Solver) plain() bool {
	const few = 20 // from the middle of the curve it is near, or there is no such duty
	for step := 0; step < few; step++ {
		v.evaluate(v.flow, v.loss, v.slope)
		e, b := v.residuals()
		if e <= headTolerance/1e3 && b <= flowTolerance*math.Max(leastFlow, v.largestFlow()) {
			return true
		}
		if v.factorise() != nil || !v.solve(false) {
			return false
		}
		v.steps++
		for i := range v.sys.points {
			if r := v.sys.row[i]; r >= 0 && v.live[i] {
				v.head[i] += v.y[r]
			}
		}
		for i := range v.sys.links {
			v.flow[i] += v.x[i]
		}
	}
	return false
}

// sound reports that no one-way link is on the wrong side and every bending machine is
// on its curve.
func (v *Solver) sound() bool {
	least := v.leastBackflow()
	for i := range v.sys.links {
		if v.off(i, least) > 0 || (v.sys.bends[i] && v.in[i] && v.beyond(i)) {
			return false
		}
	}
	return true
}

// caveats lists what a reader of the state should know.
func (v *Solver) caveats() []string {
	s := v.sys
	var out []string
	say := func(format string, a ...any) { out = append(out, fmt.Sprintf(format, a...)) }
	for i := range s.links {
		l := &s.links[i]
		switch {
		case v.shut[i]:
		case l.Machine != nil && v.blocked[i] && l.Machine.Turbine:
			say("%s gets less head than it takes at rest: nothing flows through it", s.title(i))
		case l.Machine != nil && v.blocked[i]:
			say("%s meets more head than it can give: nothing flows through it", s.title(i))
		case l.Machine != nil && v.in[i] && v.beyond(i):
			say("%s runs beyond the ends of its works curve, which was continued in a straight line", s.title(i))
		case s.bends[i] && v.in[i] && v.slope[i] < 0:
			say("%s runs where its works curve bends the wrong way: such a duty may not hold without regulation", s.title(i))
		case v.blocked[i] && s.points[l.To].Kind == Outlet:
			say("%s stands below its outlet %s, which would draw air: nothing flows through it", s.title(i), s.points[l.To].Name)
		case v.blocked[i] && s.points[l.From].Kind == Outlet:
			say("%s stands below its outlet %s, which would draw air: nothing flows through it", s.title(i), s.points[l.From].Name)
		}
	}
	return out
}
