package calibrate

import (
	"container/heap"
	"math"

	"tapround/calibrate/friction"
	"tapround/survey"
)

// Leg is a length of one link on a way between two places: from chainage X1 to
// X2 (X1 > X2 where the way runs against the pipe). An end at a point takes every
// fitting there with it, so such ends stand beyond the pipe (-Inf, +Inf).
type Leg struct {
	Link   int
	X1, X2 float64
}

// Way is a path through the system.
type Way struct {
	Legs   []Leg
	Points []int // points passed, in order, ends included where they are points
	Length float64
}

// Stretch is the way between two neighbouring taps: no other tap that was read in
// the round stands on it.
type Stretch struct {
	From, To int // taps
	Way      Way
}

// Stretches finds the pairs of neighbouring taps among those given (indices into
// Survey.Taps), each pair once, along the shortest way, in the order of the taps.
func (m *Model) Stretches(taps []int, closed func(link int) bool) []Stretch {
	g := m.newWalk(taps, closed)
	var out []Stretch
	done := map[[2]int]bool{}
	for _, t := range taps {
		for _, s := range g.from(t) {
			key := [2]int{min(s.From, s.To), max(s.From, s.To)}
			if !done[key] {
				done[key] = true
				out = append(out, s)
			}
		}
	}
	return out
}

// walk holds where the taps stand while neighbours are sought.
type walk struct {
	m       *Model
	closed  func(int) bool
	onPipe  map[int][]int // link -> taps on it, by chainage
	atPoint map[int]int   // point -> tap
	ends    [][]int       // point -> links
}

func (m *Model) newWalk(taps []int, closed func(int) bool) *walk {
	g := &walk{m: m, closed: closed, onPipe: map[int][]int{}, atPoint: map[int]int{}, ends: m.linksAt()}
	for _, t := range taps {
		tap := m.Survey.Taps[t]
		if tap.Point != "" {
			p := m.points[tap.Point]
			if _, taken := g.atPoint[p]; !taken {
				g.atPoint[p] = t
			}
			continue
		}
		l := m.links[tap.Pipe]
		list := append(g.onPipe[l], t)
		for i := len(list) - 1; i > 0 && m.Survey.Taps[list[i-1]].At > tap.At; i-- {
			list[i], list[i-1] = list[i-1], list[i]
		}
		g.onPipe[l] = list
	}
	return g
}

func (m *Model) linksAt() [][]int {
	ends := make([][]int, len(m.Survey.Points))
	for _, p := range m.Survey.Pipes {
		l := m.links[p.Name]
		ends[m.points[p.From]] = append(ends[m.points[p.From]], l)
		ends[m.points[p.To]] = append(ends[m.points[p.To]], l)
	}
	for _, x := range m.Survey.Machines {
		l := m.links[x.Name]
		ends[m.points[x.From]] = append(ends[m.points[x.From]], l)
		ends[m.points[x.To]] = append(ends[m.points[x.To]], l)
	}
	return ends
}

func (m *Model) endsOf(link int) (from, to int) {
	if link < len(m.Survey.Pipes) {
		p := m.Survey.Pipes[link]
		return m.points[p.From], m.points[p.To]
	}
	x := m.Survey.Machines[link-len(m.Survey.Pipes)]
	return m.points[x.From], m.points[x.To]
}

func (m *Model) lengthOf(link int) float64 {
	if link < len(m.Survey.Pipes) {
		return m.Survey.Pipes[link].Length
	}
	return 0
}

// from lists the taps next to tap t.
func (g *walk) from(t int) []Stretch {
	tap := g.m.Survey.Taps[t]
	var out []Stretch
	q := &frontier{}
	if tap.Point != "" {
		p := g.m.points[tap.Point]
		heap.Push(q, Way{Points: []int{p}})
	} else {
		l := g.m.links[tap.Pipe]
		if g.closed(l) {
			return nil
		}
		from, to := g.m.endsOf(l)
		if s, ok := g.along(l, tap.At, true, Way{}, t); ok {
			out = append(out, s)
		} else {
			heap.Push(q, Way{Legs: []Leg{{l, tap.At, math.Inf(1)}}, Points: []int{to}, Length: g.m.lengthOf(l) - tap.At})
		}
		if s, ok := g.along(l, tap.At, false, Way{}, t); ok {
			out = append(out, s)
		} else {
			heap.Push(q, Way{Legs: []Leg{{l, tap.At, math.Inf(-1)}}, Points: []int{from}, Length: tap.At})
		}
	}
	seen := map[int]bool{}
	for q.Len() > 0 {
		w := heap.Pop(q).(Way)
		p := w.Points[len(w.Points)-1]
		if seen[p] {
			continue
		}
		seen[p] = true
		if other, ok := g.atPoint[p]; ok && other != t {
			out = append(out, Stretch{From: t, To: other, Way: w})
			continue
		}
		for _, l := range g.ends[p] {
			if g.closed(l) || (len(w.Legs) > 0 && w.Legs[len(w.Legs)-1].Link == l) {
				continue
			}
			from, to := g.m.endsOf(l)
			forward := from == p
			start, far := math.Inf(-1), to
			if !forward {
				start, far = math.Inf(1), from
			}
			if s, ok := g.along(l, start, forward, w, t); ok {
				out = append(out, s)
				continue
			}
			heap.Push(q, w.extend(Leg{l, start, -start}, far, g.m.lengthOf(l)))
		}
	}
	return out
}

// along looks for the first tap on link l beyond chainage x in one direction.
func (g *walk) along(l int, x float64, forward bool, w Way, t int) (Stretch, bool) {
	list := g.onPipe[l]
	best := -1
	for _, o := range list {
		at := g.m.Survey.Taps[o].At
		if o == t || (forward && at < x) || (!forward && at > x) {
			continue
		}
		if at == x && o < t {
			continue // two taps at one chainage: neighbours once, in table order
		}
		if best < 0 || (forward && at < g.m.Survey.Taps[best].At) || (!forward && at > g.m.Survey.Taps[best].At) {
			best = o
		}
	}
	if best < 0 {
		return Stretch{}, false
	}
	at := g.m.Survey.Taps[best].At
	return Stretch{From: t, To: best, Way: w.extend(Leg{l, x, at}, -1, math.Abs(at-clamp(x, 0, g.m.lengthOf(l))))}, true
}

func (w Way) extend(l Leg, point int, length float64) Way {
	out := Way{Legs: append(append([]Leg(nil), w.Legs...), l), Points: w.Points, Length: w.Length + length}
	if point >= 0 {
		out.Points = append(append([]int(nil), w.Points...), point)
	}
	return out
}

func clamp(x, lo, hi float64) float64 { return math.Min(math.Max(x, lo), hi) }

// frontier is a heap of ways by length.
type frontier []Way

func (q frontier) Len() int           { return len(q) }
func (q frontier) Less(i, j int) bool { return q[i].Length < q[j].Length }
func (q frontier) Swap(i, j int)      { q[i], q[j] = q[j], q[i] }
func (q *frontier) Push(x any)        { *q = append(*q, x.(Way)) }
func (q *frontier) Pop() any {
	old := *q
	x := old[len(old)-1]
	*q = old[:len(old)-1]
	return x
}

// ItemsOn lists pipes, fittings and machines on a way, in its order.
func (m *Model) ItemsOn(w Way) []string {
	var out []string
	for _, l := range w.Legs {
		if l.Link >= len(m.Survey.Pipes) {
			out = append(out, m.Survey.Machines[l.Link-len(m.Survey.Pipes)].Name)
			continue
		}
		out = append(out, m.Survey.Pipes[l.Link].Name)
		var here []string
		for _, flat := range m.fittingsOn(l) {
			here = append(here, m.Survey.Fittings[m.fitPlace[flat].fitting].Name)
		}
		if l.X1 > l.X2 {
			for i, j := 0, len(here)-1; i < j; i, j = i+1, j-1 {
				here[i], here[j] = here[j], here[i]
			}
		}
		out = append(out, here...)
	}
	return out
}

// fittingsOn lists the flat indices of the fittings on a leg, by chainage: one
// lies between the From end and chainage x when its At < x.
func (m *Model) fittingsOn(l Leg) []int {
	lo, hi := math.Min(l.X1, l.X2), math.Max(l.X1, l.X2)
	var out []int
	for i, f := range m.System.Link(l.Link).Pipe.Fittings {
		if f.At >= lo && f.At < hi {
			out = append(out, m.System.FittingIndex(l.Link, i))
		}
	}
	return out
}

// LossOf is the total head that a leg loses, in the direction of the way, at flow
// q (positive from the link's From to its To) with sound works, with the
// derivative by q and the variance that the scatter of sound items gives it.
func (m *Model) LossOf(l Leg, q float64, c conditionsOf) (h, dq, variance float64) {
	link := m.System.Link(l.Link)
	sign := 1.0
	if l.X1 > l.X2 {
		sign = -1
	}
	if link.Machine != nil {
		s := 1.0
		if c.speed > 0 && link.Machine.RatedSpeed > 0 {
			s = c.speed / link.Machine.RatedSpeed
		}
		gain, slope, _ := link.Machine.Curve.At(q, s)
		if !link.Machine.Turbine {
			gain, slope = -gain, -slope
		}
		return sign * gain, sign * slope, sq(gain * m.Priors.HeadFactor)
	}
	p := m.Survey.Pipes[l.Link]
	part := math.Abs(clamp(l.X2, 0, p.Length)-clamp(l.X1, 0, p.Length)) / p.Length
	loss := link.Pipe.Loss(q, m.base.LnRough[l.Link], c.viscosity, c.gravity)
	h, dq = loss.H*part, loss.DQ*part
	variance = sq(loss.DParam * part * m.sdOf("pipe", p.Name))
	for _, flat := range m.fittingsOn(l) {
		fit := link.Pipe.Fittings[m.fitPlace[flat].order]
		k := math.Exp(m.base.LnK[flat])
		if q < 0 && !math.IsNaN(fit.ReverseK) {
			k = fit.ReverseK
		}
		mh, mdq := friction.Minor(q, k, fit.Bore, c.gravity)
		h, dq = h+mh, dq+mdq
		variance += sq(mh * m.sdOf("fitting", m.Survey.Fittings[m.fitPlace[flat].fitting].Name))
	}
	return sign * h, sign * dq, variance
}

type conditionsOf struct{ viscosity, gravity, speed float64 }

// sdOf is the prior SD of an item's own unknown.
func (m *Model) sdOf(kind, item string) float64 {
	for _, u := range m.Unknowns {
		if u.Kind == kind && u.Item == item {
			return u.SD
		}
	}
	return 0
}

func sq(x float64) float64 { return x * x }

// tapsRead lists the taps at which a head was read in a round, by table order.
func (m *Model) tapsRead(round int) []int {
	read := make([]bool, len(m.Survey.Taps))
	for _, o := range m.Obs {
		if o.Round == round && o.Head.Quantity == survey.PiezometricHead {
			read[o.tap] = true
		}
	}
	var out []int
	for i, ok := range read {
		if ok {
			out = append(out, i)
		}
	}
	return out
}
