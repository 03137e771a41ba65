package hydraulic

import (
	"math"

	"tapround/calibrate/friction"
)

// View is what a probe reads.
type View int

const (
	Piezometric       View = iota // total head less alpha V^2/2g: what a wall tap sees
	Total                         // total head of the section
	VelocityHead                  // alpha V^2/2g of the section
	LocalVelocityHead             // u^2/2g at Depth
	LocalTotal                    // piezometric head and u^2/2g: what a pitot opening sees
	Flow                          // m3/s, positive From to To
)

// Probe is a place where something is read: at a point, or along a link.
//
// At a reservoir a probe reads the level, without velocity. At an outlet it reads the
// elevation, and the velocity of the jet or of the pipe's end. On a machine it reads
// its From side at At 0 and its To side beyond.
type Probe struct {
	Point int     // >= 0: at this point
	Link  int     // the link it is on, or, at a point, the one it reads velocity and flow on; -1 none, at an outlet its widest pipe
	At    float64 // m from the From end; a fitting there lies beyond the probe
	View  View
	Depth float64 // m, of a pitot opening from the near wall; NaN: the centreline
}

// reading is a probed value and what it depends on directly: one to one on the head at
// a point, and on flow and parameters of a link.
type reading struct {
	value      float64
	point      int // -1 none
	link       int // -1 none
	dq, dParam float64
	// Fittings from first to last-1 of the link enter with sign times their loss.
	first, last int
	sign        float64
}

// Read gives what a probe reads at the last solved state: heads in m, flows in m3/s.
// It is NaN for a head where nothing feeds the place or where two closures trap it,
// and for everything where no state was solved.
func (v *Solver) Read(p Probe) float64 { return v.reading(p).value }

func (v *Solver) reading(p Probe) reading {
	r := reading{value: math.NaN(), point: -1, link: -1}
	if v.state == nil || p.Point >= len(v.sys.points) || p.Link >= len(v.sys.links) || (p.Point < 0 && p.Link < 0) {
		return r
	}
	if p.Point >= 0 && p.Link < 0 {
		p.Link = v.sys.spouts[p.Point]
	}
	switch p.View {
	case Flow:
		if p.Link >= 0 {
			r.value, r.link, r.dq = v.flow[p.Link], p.Link, 1
		}
	case VelocityHead, LocalVelocityHead:
		e := v.velocity(p, p.View == LocalVelocityHead)
		r.value, r.link, r.dq, r.dParam = e.V, p.Link, e.DQ, e.DParam
	case Total:
		r = v.total(p)
	case Piezometric:
		r = v.lessVelocity(v.total(p), p)
	case LocalTotal:
		r = v.lessVelocity(v.total(p), p)
		r.add(v.velocity(p, true), 1)
	}
	return r
}

func (r *reading) add(e friction.Value, sign float64) {
	r.value += sign * e.V
	r.dq += sign * e.DQ
	r.dParam += sign * e.DParam
}

// lessVelocity turns total into piezometric head. In the open, at an outlet or in a
// jet, that is the elevation itself.
func (v *Solver) lessVelocity(r reading, p Probe) reading {
	if o := v.open(p); o >= 0 {
		return reading{value: v.head[o], point: -1, link: p.Link}
	}
	r.add(v.velocity(p, false), -1)
	return r
}

// open is the outlet at which a probe stands in the free, or -1.
func (v *Solver) open(p Probe) int {
	if p.Point >= 0 {
		if v.sys.points[p.Point].Kind == Outlet {
			return p.Point
		}
		return -1
	}
	if v.jetAt(p) {
		return v.sys.links[p.Link].To
	}
	return -1
}

// jetAt reports a probe in the jet beyond a nozzle.
func (v *Solver) jetAt(p Probe) bool {
	k := v.sys.nozzle(p.Link)
	return k >= 0 && v.in[p.Link] && p.At > v.sys.links[p.Link].Pipe.Fittings[k].At
}

// velocity is the velocity head where a probe stands: of the section, or local.
func (v *Solver) velocity(p Probe, local bool) friction.Value {
	if p.Link < 0 || v.sys.links[p.Link].Pipe == nil || !v.in[p.Link] {
		return friction.Value{}
	}
	l := &v.sys.links[p.Link]
	q := v.flow[p.Link]
	if p.Point >= 0 {
		switch v.sys.points[p.Point].Kind {
		case Fixed:
			return friction.Value{} // still water
		case Outlet:
			if p.Point == l.To && v.jet[p.Link] > 0 {
				return v.endVelocityHead(p.Link, q)
			}
		}
	} else if v.jetAt(p) {
		return v.endVelocityHead(p.Link, q)
	}
	if local {
		return l.Pipe.LocalVelocityHead(q, v.lnRough[p.Link], v.viscosity, v.gravity, p.Depth)
	}
	return l.Pipe.VelocityHead(q, v.lnRough[p.Link], v.viscosity, v.gravity)
}

// total is the total head where a probe stands.
func (v *Solver) total(p Probe) reading {
	s := v.sys
	r := reading{point: p.Point, link: p.Link}
	switch {
	case p.Point >= 0 && s.points[p.Point].Kind == Outlet:
		r.value, r.point = v.head[p.Point], -1
		r.add(v.velocity(p, false), 1)
	case p.Point >= 0:
		r.value = v.headAt(p.Point)
	case s.links[p.Link].Machine != nil:
		r.point = s.links[p.Link].From
		if p.At > 0 {
			r.point = s.links[p.Link].To
		}
		r.value = v.headAt(r.point)
	case !v.in[p.Link]:
		r.point = v.sideOf(p)
		r.value = math.NaN()
		if r.point >= 0 {
			r.value = v.headAt(r.point)
		}
	default:
		r = v.along(p)
	}
	return r
}

// headAt is the head at a point: NaN where nothing feeds it. An outlet's is its
// elevation, that of the water that stands in a closed pipe there.
func (v *Solver) headAt(p int) float64 {
	if v.sys.points[p].Kind == Junction && !v.live[p] {
		return math.NaN()
	}
	return v.head[p]
}

// along is the total head on a pipe that flows: from its From end down, or, where that
// is an outlet, from its To end up.
func (v *Solver) along(p Probe) reading {
	l := &v.sys.links[p.Link]
	q := v.flow[p.Link]
	part := math.Min(1, math.Max(0, p.At/l.Pipe.Length))
	before := 0
	for before < len(l.Pipe.Fittings) && l.Pipe.Fittings[before].At < p.At {
		before++
	}
	r := reading{point: l.From, link: p.Link, sign: -1, first: 0, last: before}
	if v.sys.points[l.From].Kind == Outlet {
		r = reading{point: l.To, link: p.Link, sign: 1, first: before, last: len(l.Pipe.Fittings)}
		part = 1 - part
	}
	loss := l.Pipe.Loss(q, v.lnRough[p.Link], v.viscosity, v.gravity)
	r.value = v.headAt(r.point)
	r.add(friction.Value{V: loss.H, DQ: loss.DQ, DParam: loss.DParam}, r.sign*part)
	for k := r.first; k < r.last; k++ {
		h, dq := v.fittingLoss(p.Link, k, q)
		r.add(friction.Value{V: h, DQ: dq}, r.sign)
	}
	return r
}

// fittingLoss is what fitting k of link i loses at flow q, with its derivative.
func (v *Solver) fittingLoss(i, k int, q float64) (h, dq float64) {
	f := &v.sys.links[i].Pipe.Fittings[k]
	c := v.unit[v.sys.first[i]+k]
	if q < 0 && !math.IsNaN(f.ReverseK) {
		c = perSquare(f.ReverseK, f.Bore, v.gravity)
	}
	return c * q * math.Abs(q), 2 * c * math.Abs(q)
}

// sideOf is the end of a pipe without flow whose head a place on it has: a pipe that is
// shut is closed at its From end, a fitting closes it where it stands, an outlet that
// would draw air at its own end. It is -1 between two closures.
func (v *Solver) sideOf(p Probe) int {
	s, i := v.sys, p.Link
	l := &s.links[i]
	before, after := 0, 0
	closed := func(beyond bool) {
		if beyond {
			before++
		} else {
			after++
		}
	}
	if v.pipeShut[i] {
		closed(true)
	}
	for k, f := range l.Pipe.Fittings {
		if v.fittingShut[s.first[i]+k] || (f.OneWay && v.blocked[i]) {
			closed(f.At < p.At)
		}
	}
	if before+after == 0 {
		switch {
		case s.points[l.From].Kind == Outlet:
			closed(true)
		case s.points[l.To].Kind == Outlet:
			closed(false)
		}
	}
	switch {
	case before == 0:
		return l.From
	case after == 0:
		return l.To
	}
	return -1
}
