package hydraulic

import (
	"math"

	"tapround/calibrate/sparse"
)

// Solver is the workspace of one goroutine: it solves rounds one after another, and
// reads and differentiates the last solved one.
type Solver struct {
	sys    *System
	matrix *sparse.Factor // nil: no junctions

	// The round, copied.
	lnRough, factor, ratio, jet []float64 // per link; ratio: speed over rated speed; jet: loss at 1 m3/s
	forth, back                 []float64 // per link: fittings' loss at 1 m3/s
	unit                        []float64 // per flat fitting: loss forwards at 1 m3/s
	head, draw                  []float64 // per point; head of an outlet is its elevation
	shut, pipeShut, fittingShut []bool
	viscosity, gravity          float64

	// The state.
	flow    []float64 // per link
	blocked []bool    // per link: one-way, with the head against it
	live    []bool    // per point: fed
	in      []bool    // per link: open and fed, part of the equations
	barrier bool      // one-way links leak stiffly backwards instead of closing
	// stiffness is the head, m, that presses a flow of a link's own size back through it
	// while the barrier is up.
	stiffness float64
	state     *State // nil: nothing solved

	// What steps need.
	loss, slope, trialLoss, trialSlope, trialFlow []float64 // per link
	conduct, s, x                                 []float64 // per link
	b, y, dy, rhs                                 []float64 // per row
	entries                                       []float64
	odd                                           []int // links whose slope does not stand in the matrix as it is
	spare                                         [][]float64
	queue                                         []int
	mark                                          []bool // per point
	steps                                         int
	headError, flowError                          float64

	// What gradients need, filled at the first one.
	tabulated bool
	byParam   []float64 // per link: loss by ln k, ln C or head factor
	byMinor   []float64 // per flat fitting: loss by ln K
}

// NewSolver makes a workspace.
func (s *System) NewSolver() *Solver {
	n, m := len(s.points), len(s.links)
	perLink := func() []float64 { return make([]float64, m) }
	perRow := func() []float64 { return make([]float64, s.rows) }
	v := &Solver{sys: s,
		lnRough: perLink(), factor: perLink(), ratio: perLink(), jet: perLink(), forth: perLink(), back: perLink(),
		unit: make([]float64, s.flat), head: make([]float64, n), draw: make([]float64, n),
		shut: make([]bool, m), pipeShut: make([]bool, m), fittingShut: make([]bool, s.flat),
		flow: perLink(), blocked: make([]bool, m), live: make([]bool, n), in: make([]bool, m),
		loss: perLink(), slope: perLink(), trialLoss: perLink(), trialSlope: perLink(), trialFlow: perLink(),
		conduct: perLink(), s: perLink(), x: perLink(), b: perRow(), y: perRow(), dy: perRow(), rhs: perRow(),
		entries: make([]float64, s.values), queue: make([]int, 0, n), mark: make([]bool, n),
		byParam: perLink(), byMinor: make([]float64, s.flat)}
	if s.rows > 0 {
		v.matrix = s.plan.NewFactor()
	}
	return v
}

// Solve finds heads and flows. warm is an earlier state of the same system to start
// from, or nil; the answer does not depend on it, unless a machine whose curve bends has
// more than one duty. An error is an *Unsolvable that names the cause; the solver then
// has no state to read.
func (v *Solver) Solve(p *Parameters, c *Conditions, warm *State) (*State, error) {
	v.state, v.tabulated, v.steps = nil, false, 0
	if err := v.take(p, c); err != nil {
		return nil, err
	}
	err := v.seek(warm)
	if err != nil && warm != nil {
		err = v.seek(nil)
	}
	if v.mayRunElsewhere(err) && v.duty() {
		err = nil
	}
	if err == nil {
		err = v.runaway()
	}
	if err != nil {
		return nil, err
	}
	v.state = v.finish()
	return v.state, nil
}

// seek solves from an earlier state, or from scratch.
func (v *Solver) seek(warm *State) error {
	clear(v.blocked)
	if err := v.feed(); err != nil {
		return err
	}
	v.start()
	if warm != nil && v.startFrom(warm) {
		return v.settle()
	}
	var err error
	for _, v.stiffness = range barrierHeads {
		v.guessPattern()
		if err = v.settle(); err == nil || !v.sys.oneWay {
			return err
		}
		// Where the way that is open loses more than the barrier does, too much was closed.
		clear(v.blocked)
		_ = v.feed() // it fed this pattern before
		v.start()
	}
	return err
}

// start sets the flows and heads of a cold start.
func (v *Solver) start() {
	s := v.sys
	level, count := 0.0, 0
	for i, p := range s.points {
		if p.Kind != Junction {
			level, count = level+v.head[i], count+1
		}
	}
	if count > 0 {
		level /= float64(count)
	}
	for i, p := range s.points {
		if p.Kind == Junction {
			v.head[i] = level
		}
	}
	for i := range s.links {
		v.flow[i] = v.guess(i)
	}
}

// guess is a flow of the link's size in the direction it may take.
func (v *Solver) guess(i int) float64 {
	switch {
	case !v.in[i]:
		return 0
	case v.sys.ways[i] == backwardOnly:
		return -v.sys.size[i]
	}
	return v.sys.size[i]
}

// startFrom takes flows, heads and closed links of an earlier state. It reports false
// where that state's closed links do not fit the round: the pattern must be found anew.
func (v *Solver) startFrom(warm *State) bool {
	s := v.sys
	mustMatch(len(warm.Flow) == len(s.links) && len(warm.Closed) == len(s.links) && len(warm.Head) == len(s.points), "values in the earlier state")
	for i := range s.links {
		if v.in[i] && !warm.Closed[i] {
			v.flow[i] = warm.Flow[i]
		}
	}
	for i, p := range s.points {
		if p.Kind == Junction && finite(warm.Head[i]) {
			v.head[i] = warm.Head[i]
		}
	}
	if !s.oneWay {
		return true
	}
	fed := count(v.live)
	for i, w := range s.ways {
		v.blocked[i] = v.blocked[i] || (v.in[i] && w != free && warm.Closed[i])
	}
	if v.feed() == nil && count(v.live) == fed {
		return true
	}
	clear(v.blocked)
	_ = v.feed() // it fed this pattern before
	v.start()
	return false
}

func count(of []bool) int {
	n := 0
	for _, yes := range of {
		if yes {
			n++
		}
	}
	return n
}

// finish is the state as the caller sees it.
func (v *Solver) finish() *State {
	s := v.sys
	st := &State{Head: append([]float64(nil), v.head...), Flow: make([]float64, len(s.links)), Closed: make([]bool, len(s.links)),
		Iterations: v.steps, HeadError: v.headError, FlowError: v.flowError}
	for i := range s.links {
		if v.in[i] {
			st.Flow[i] = v.flow[i]
		}
		st.Closed[i] = v.shut[i] || v.blocked[i]
	}
	copy(v.flow, st.Flow)
	for i, p := range s.points {
		switch {
		case p.Kind == Junction && !v.live[i]:
			st.Head[i] = math.NaN()
		case p.Kind == Outlet && s.spouts[i] >= 0:
			st.Head[i] = v.outletHead(i, s.spouts[i])
		}
	}
	st.Caveats = v.caveats()
	return st
}

// outletHead is the total head at outlet p at the end of link i.
func (v *Solver) outletHead(p, i int) float64 {
	e, _ := v.spout(i, v.flow[i])
	return v.head[p] + e.V
}
