package hydraulic

import (
	"fmt"
	"math"

	"tapround/calibrate/friction"
	"tapround/calibrate/sparse"
)

// Solver is the workspace of one goroutine. It keeps the factor of the last solved
// state, from which Gradient works.
type Solver struct {
	sys     *System
	factor  *sparse.Factor
	p       *Parameters
	c       *Conditions
	st      *State
	values  []float64
	rhs, dh []float64
	loss    []float64 // per link: H_from - H_to that its flow asks for (outlet's velocity head included)
	slope   []float64
	blocked []bool // one-way link found to be closed
	shut    []bool // closed on purpose
	live    []bool // per point: fed through open links
	ext     []float64
	// What every gradient at the solution needs, filled once by finish: slope of each
	// link, its loss's derivative by its own parameter, and each fitting's loss (0 where
	// the coefficient met is not a parameter).
	atSlope, atParam, atMinor []float64
}

// NewSolver makes a workspace.
func (s *System) NewSolver() *Solver {
	n, m := len(s.points), len(s.links)
	return &Solver{sys: s, factor: s.plan.NewFactor(), values: make([]float64, s.entries), rhs: make([]float64, s.rows), dh: make([]float64, s.rows),
		loss: make([]float64, m), slope: make([]float64, m), blocked: make([]bool, m), shut: make([]bool, m), live: make([]bool, n),
		ext: make([]float64, n), atSlope: make([]float64, m), atParam: make([]float64, m), atMinor: make([]float64, s.flat)}
}

const (
	// Newton's last step lands far below 1e-10 m where the arithmetic allows; the
	// contract asks for 1e-7 only, so after many steps 1e-8 is taken.
	headTolerance = 1e-10
	headAccepted  = 1e-8
	fewSteps      = 25
	flowTolerance = 1e-10
	// leastFlow keeps the balance test meaningful when nothing flows: 1e-9 m3/s is a
	// millilitre a quarter of an hour.
	leastFlow  = 1e-2
	mostSteps  = 200
	mostSwitch = 60
	leastSlope = 1e-6 // m/(m3/s): stands in where a curve is flat or rises
)

// Solve finds heads and flows. warm, an earlier state of the same system, may be nil.
func (v *Solver) Solve(p *Parameters, c *Conditions, warm *State) (*State, error) {
	s := v.sys
	v.p, v.c = p, c
	st := &State{Head: make([]float64, len(s.points)), Flow: make([]float64, len(s.links)), Closed: make([]bool, len(s.links))}
	v.st = st
	for i, l := range s.links {
		v.blocked[i] = false
		v.shut[i] = l.Machine != nil && c.Stopped[i]
		if l.Pipe != nil {
			v.shut[i] = c.Shut[i]
			for k := range l.Pipe.Fittings {
				v.shut[i] = v.shut[i] || c.FittingShut[s.first[i]+k]
			}
		}
		if warm != nil {
			st.Flow[i] = warm.Flow[i]
			v.blocked[i] = warm.Closed[i] && !v.shut[i] && v.canBlock(i)
		} else {
			st.Flow[i] = v.startFlow(i)
		}
	}
	seen := map[string]bool{}
	for switches := 0; ; switches++ {
		if err := v.feed(); err != nil {
			// A one-way link closed too eagerly may have cut a draw-off off.
			if switches < mostSwitch && v.reopenAll() {
				continue
			}
			return nil, err
		}
		if err := v.newton(); err != nil {
			return nil, err
		}
		changed, key := v.review()
		if !changed {
			break
		}
		if seen[key] || switches > mostSwitch {
			// Back where it was: keep what is closed unless it must open.
			if !v.settle() {
				return nil, &Unsolvable{Cause: "check valves and machines open and close in turn; no steady state was found"}
			}
			if err := v.feed(); err != nil {
				return nil, err
			}
			if err := v.newton(); err != nil {
				return nil, err
			}
			break
		}
		seen[key] = true
	}
	v.finish()
	return st, nil
}

func (v *Solver) startFlow(i int) float64 {
	l := v.sys.links[i]
	if l.Pipe != nil {
		return 0.3 * l.Pipe.Area() // 0.3 m/s
	}
	return 0.01
}

func (v *Solver) canBlock(i int) bool {
	l := v.sys.links[i]
	return l.oneWay() || v.sys.points[l.To].Kind == Outlet || v.sys.points[l.From].Kind == Outlet
}

func (v *Solver) open(i int) bool { return !v.shut[i] && !v.blocked[i] }

func (v *Solver) reopenAll() bool {
	any := false
	for i := range v.blocked {
		if v.blocked[i] {
			v.blocked[i], any = false, true
		}
	}
	return any
}

// feed marks the points that a fixed head or an outlet reaches through open links. A
// part that nothing reaches and from which something is drawn has no solution.
func (v *Solver) feed() error {
	s := v.sys
	var queue []int
	for i, p := range s.points {
		v.live[i] = p.Kind != Junction
		if v.live[i] {
			queue = append(queue, i)
		}
	}
	for len(queue) > 0 {
		p := queue[0]
		queue = queue[1:]
		for _, l := range s.at[p] {
			if !v.open(l) {
				continue
			}
			o := s.links[l].From + s.links[l].To - p
			if !v.live[o] {
				v.live[o] = true
				queue = append(queue, o)
			}
		}
	}
	var cut []string
	for i, p := range s.points {
		if !v.live[i] && math.Abs(v.c.DrawOff[i]) > 0 {
			cut = append(cut, p.Name)
		}
	}
	if len(cut) > 0 {
		return &Unsolvable{Cause: fmt.Sprintf("water is drawn at %s, but no reservoir feeds that part of the system: something is shut or stopped on the way, or a link is missing", list(cut)), Points: cut}
	}
	return nil
}

func list(names []string) string {
	if len(names) > 6 {
		return fmt.Sprintf("%s and %d more points", join(names[:6]), len(names)-6)
	}
	return join(names)
}

func join(names []string) string {
	out := ""
	for i, n := range names {
		if i > 0 {
			out += ", "
		}
		out += n
	}
	return out
}

// head is the total head of a point that the flow of a link sees: an outlet's is its
// elevation, the velocity head being part of the link's loss.
func (v *Solver) head(p int) float64 {
	switch v.sys.points[p].Kind {
	case Fixed:
		return v.c.Head[p]
	case Outlet:
		return v.sys.points[p].Elevation
	}
	return v.st.Head[p]
}

// law is the head that link i needs to pass flow q, H_from - H_to, with its slope.
func (v *Solver) law(i int, q float64) (h, dq float64) {
	l := v.sys.links[i]
	if l.Machine != nil {
		speed := 1.0
		if v.c.Speed[i] > 0 && l.Machine.RatedSpeed > 0 {
			speed = v.c.Speed[i] / l.Machine.RatedSpeed
		}
		g, d, _ := l.Machine.Curve.At(q, speed)
		f := v.p.HeadFactor[i]
		if l.Machine.Turbine {
			return f * g, f * d
		}
		return -f * g, -f * d
	}
	loss := l.Pipe.Loss(q, v.p.LnRough[i], v.c.Viscosity, v.c.Gravity)
	h, dq = loss.H, loss.DQ
	for k, f := range l.Pipe.Fittings {
		mh, md := friction.Minor(q, v.kOf(i, k, q), f.Bore, v.c.Gravity)
		h, dq = h+mh, dq+md
	}
	eh, ed, _ := v.outletHead(i, q)
	return h + eh, dq + ed
}

// kOf is the coefficient that flow q meets at fitting k of link i.
func (v *Solver) kOf(i, k int, q float64) float64 {
	f := v.sys.links[i].Pipe.Fittings[k]
	if q < 0 && !math.IsNaN(f.ReverseK) {
		return f.ReverseK
	}
	return math.Exp(v.p.LnK[v.sys.first[i]+k])
}

// outletHead is the velocity head that a pipe carries out of a free outlet, signed as
// a loss, with its derivatives by flow and by the pipe's parameter.
func (v *Solver) outletHead(i int, q float64) (h, dq, dp float64) {
	l := v.sys.links[i]
	if l.Pipe == nil {
		return 0, 0, 0
	}
	out := v.sys.points[l.To].Kind == Outlet && q > 0
	back := v.sys.points[l.From].Kind == Outlet && q < 0
	if !out && !back {
		return 0, 0, 0
	}
	if n := len(l.Pipe.Fittings); n > 0 && out && l.Pipe.Fittings[n-1].JetBore > 0 {
		h, dq = friction.Minor(q, 1, l.Pipe.Fittings[n-1].JetBore, v.c.Gravity)
		return h, dq, 0
	}
	e := l.Pipe.VelocityHead(q, v.p.LnRough[i], v.c.Viscosity, v.c.Gravity)
	if back {
		return -e.V, -e.DQ, -e.DParam
	}
	return e.V, e.DQ, e.DParam
}

// newton solves the open system for the present pattern of closed links.
func (v *Solver) newton() error {
	s, st := v.sys, v.st
	for i := range s.links {
		if !v.open(i) || !v.live[s.links[i].From] {
			st.Flow[i] = 0
		}
	}
	for step := 1; step <= mostSteps; step++ {
		if err := v.linearise(); err != nil {
			return err
		}
		for i := range s.points {
			if r := s.row[i]; r >= 0 {
				st.Head[i] = v.dh[r] // the Schur step gives the heads themselves
			}
		}
		// dQ = (H_from - H_to - loss)/slope. Full steps converge quadratically near
		// the solution; where one circles, a shorter one descends the content.
		scale, worst := stepLength(step), 0.0
		for i, l := range s.links {
			if !v.flows(i) {
				continue
			}
			drop := v.head(l.From) - v.head(l.To)
			st.Flow[i] += scale * (drop - v.loss[i]) / v.slope[i]
			h, _ := v.law(i, st.Flow[i])
			worst = math.Max(worst, math.Abs(drop-h))
		}
		st.Iterations++
		st.HeadError = worst
		st.FlowError = v.imbalance()
		enough := headTolerance
		if step > fewSteps {
			enough = headAccepted
		}
		if worst < enough && st.FlowError < flowTolerance*math.Max(leastFlow, v.largest()) {
			return nil
		}
	}
	return v.notConverged()
}

// stepLength shortens the step when the full one has not settled: a loss of power two
// halves the error of an overshoot each time, so a dozen full steps suffice from any
// sensible start.
func stepLength(step int) float64 {
	switch {
	case step <= 15:
		return 1
	case step <= 60:
		return 0.6
	}
	return 0.3
}

// flows reports whether a link is part of the open system.
func (v *Solver) flows(i int) bool { return v.open(i) && v.live[v.sys.links[i].From] }

// linearise forms and solves A D^-1 A' H = rhs for the heads after a full step.
func (v *Solver) linearise() error {
	s, st := v.sys, v.st
	clear(v.values)
	clear(v.rhs)
	for i := range s.points {
		r := s.row[i]
		switch {
		case r < 0:
		case v.live[i]:
			v.rhs[r] = -v.c.DrawOff[i]
		default:
			v.values[s.diag[r]] = 1 // a part that nothing feeds stands apart
		}
	}
	for i, l := range s.links {
		if !v.flows(i) {
			continue
		}
		h, d := v.law(i, st.Flow[i])
		d = math.Max(d, leastSlope)
		v.loss[i], v.slope[i] = h, d
		g := 1 / d
		// Flow after the step: Q + g (H_from - H_to - loss).
		q := st.Flow[i] - g*h
		a, b := s.row[l.From], s.row[l.To]
		if a >= 0 {
			v.values[s.diag[a]] += g
			v.rhs[a] -= q
			if b < 0 {
				v.rhs[a] += g * v.head(l.To)
			}
		}
		if b >= 0 {
			v.values[s.diag[b]] += g
			v.rhs[b] += q
			if a < 0 {
				v.rhs[b] += g * v.head(l.From)
			}
		}
		if a >= 0 && b >= 0 {
			v.values[s.between[i]] = -g
		}
	}
	if s.rows == 0 {
		return nil
	}
	if err := v.factor.Factorize(v.values); err != nil {
		return &Unsolvable{Cause: "the heads are not determined: " + err.Error()}
	}
	v.factor.SolveRefined(v.rhs, v.dh)
	return nil
}

func (v *Solver) largest() float64 {
	most := 0.0
	for _, q := range v.st.Flow {
		most = math.Max(most, math.Abs(q))
	}
	return most
}

// imbalance is the worst balance of a junction, m3/s.
func (v *Solver) imbalance() float64 {
	s := v.sys
	for i := range v.ext {
		v.ext[i] = -v.c.DrawOff[i]
	}
	for i, l := range s.links {
		v.ext[l.From] -= v.st.Flow[i]
		v.ext[l.To] += v.st.Flow[i]
	}
	worst := 0.0
	for i := range s.points {
		if s.row[i] >= 0 && v.live[i] {
			worst = math.Max(worst, math.Abs(v.ext[i]))
		}
	}
	return worst
}

func (v *Solver) notConverged() error {
	s := v.sys
	worst, at := 0.0, 0
	for i, l := range s.links {
		if v.flows(i) {
			h, _ := v.law(i, v.st.Flow[i])
			if e := math.Abs(v.head(l.From) - v.head(l.To) - h); e > worst {
				worst, at = e, i
			}
		}
	}
	name := s.links[at].Name
	what := "pipe"
	if s.links[at].Machine != nil {
		what = "machine"
	}
	return &Unsolvable{Cause: fmt.Sprintf("no steady state was found; the energy of %s %s stays open by %.2g m (its curve or coefficients may have no solution with these heads)", what, name, worst), Links: []string{name}}
}
