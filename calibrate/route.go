package calibrate

import (
	"container/heap"
	"fmt"
	"math"
	"strings"
)

// RouteThrough is the shortest way that passes the places named, in their order:
// points or taps. An error names the place that is unknown or cannot be reached.
func (m *Model) RouteThrough(places []string) (Way, error) {
	if len(places) < 2 {
		return Way{}, fmt.Errorf("a route needs at least two places, got %d", len(places))
	}
	var out Way
	at, err := m.pointNear(places[0])
	if err != nil {
		return Way{}, err
	}
	out.Points = []int{at}
	for _, name := range places[1:] {
		to, err := m.pointNear(name)
		if err != nil {
			return Way{}, err
		}
		w, ok := m.shortest(at)[to]
		if !ok {
			return Way{}, fmt.Errorf("no pipe leads from %s to %s", m.Survey.Points[at].Name, m.Survey.Points[to].Name)
		}
		out.Legs = append(out.Legs, w.Legs...)
		out.Points = append(out.Points, w.Points[1:]...)
		out.Length += w.Length
		at = to
	}
	return out, nil
}

// pointNear is a point by its name, or the point nearest a tap.
func (m *Model) pointNear(name string) (int, error) {
	if p, ok := m.points[name]; ok {
		return p, nil
	}
	if t, ok := m.taps[name]; ok {
		return m.pointOf(m.Survey.Taps[t].Name), nil
	}
	return 0, fmt.Errorf("%q is neither a point nor a tap of this survey; its points are %s", name, m.someNames())
}

func (m *Model) someNames() string {
	var names []string
	for i, p := range m.Survey.Points {
		if i == 12 {
			names = append(names, "...")
			break
		}
		names = append(names, p.Name)
	}
	return strings.Join(names, ", ")
}

// shortest gives the shortest way by length from a point to every other.
func (m *Model) shortest(from int) map[int]Way {
	ends := m.linksAt()
	out := map[int]Way{}
	q := &frontier{}
	heap.Push(q, Way{Points: []int{from}})
	for q.Len() > 0 {
		w := heap.Pop(q).(Way)
		p := w.Points[len(w.Points)-1]
		if _, done := out[p]; done {
			continue
		}
		out[p] = w
		for _, l := range ends[p] {
			a, b := m.endsOf(l)
			if a == p {
				heap.Push(q, w.extend(Leg{l, math.Inf(-1), math.Inf(1)}, b, m.lengthOf(l)))
			} else {
				heap.Push(q, w.extend(Leg{l, math.Inf(1), math.Inf(-1)}, a, m.lengthOf(l)))
			}
		}
	}
	return out
}

// MainRoutes are the ways worth a picture: from a reservoir with the water, each the one
// that passes most taps not yet on a route, at most the number given. Where no way runs with
// the water all along, any will do.
func (m *Model) MainRoutes(most int) []Way {
	if out := m.routes(most, m.withTheWater()); len(out) > 0 {
		return out
	}
	return m.routes(most, func(Way) bool { return true })
}

// withTheWater tells whether the water runs along a way, or at least not against it, in the
// busiest round at the expected values.
func (m *Model) withTheWater() func(Way) bool {
	e, err := m.Expected()
	if err != nil {
		return func(Way) bool { return true }
	}
	busiest, top := 0, -1.0
	for r, st := range e.w.states {
		sum := 0.0
		for _, q := range st.Flow {
			sum += math.Abs(q)
		}
		if sum > top {
			busiest, top = r, sum
		}
	}
	st := e.w.states[busiest]
	return func(w Way) bool {
		for _, l := range w.Legs {
			q := st.Flow[l.Link]
			if l.X1 > l.X2 {
				q = -q
			}
			if q < -1e-6 || st.Closed[l.Link] {
				return false
			}
		}
		return true
	}
}

func (m *Model) routes(most int, wanted func(Way) bool) []Way {
	onRoute := make([]bool, len(m.Survey.Taps))
	var out []Way
	var all []Way
	for i, p := range m.Survey.Points {
		if p.Kind != "reservoir" {
			continue
		}
		ways := m.shortest(i)
		for j := range m.Survey.Points {
			if w, ok := ways[j]; ok && len(w.Legs) > 0 && wanted(w) {
				all = append(all, w)
			}
		}
	}
	for len(out) < most {
		best, gain := -1, 0
		for i, w := range all {
			n := 0
			for t := range m.Survey.Taps {
				if _, ok := m.ChainageOfTap(w, t); ok && !onRoute[t] && !m.isMeter(t) {
					n++
				}
			}
			if n > gain || (n == gain && n > 0 && w.Length > all[best].Length) {
				best, gain = i, n
			}
		}
		// One new tap does not make a picture of its own, unless it is the first.
		if best < 0 || (gain < 2 && len(out) > 0) {
			break
		}
		out = append(out, all[best])
		for t := range onRoute {
			if _, ok := m.ChainageOfTap(all[best], t); ok {
				onRoute[t] = true
			}
		}
	}
	return out
}

// isMeter reports whether only flows are read at a tap.
func (m *Model) isMeter(tap int) bool {
	seen := false
	for _, o := range m.Obs {
		if o.tap == tap {
			if o.Head.Quantity != "flow" {
				return false
			}
			seen = true
		}
	}
	return seen
}

// ChainageOfTap is the distance of a tap along a way.
func (m *Model) ChainageOfTap(w Way, tap int) (float64, bool) {
	t := m.Survey.Taps[tap]
	if t.Point != "" {
		x := 0.0
		for i, p := range w.Points {
			if p == m.points[t.Point] {
				return x, true
			}
			if i < len(w.Legs) {
				x += m.lengthOf(w.Legs[i].Link)
			}
		}
		return 0, false
	}
	return m.ChainageAt(w, m.links[t.Pipe], t.At)
}

// ChainageAt is the distance along a way of a chainage on a link.
func (m *Model) ChainageAt(w Way, link int, at float64) (float64, bool) {
	x := 0.0
	for _, l := range w.Legs {
		length := m.lengthOf(l.Link)
		if l.Link == link {
			if l.X1 > l.X2 {
				return x + length - at, true
			}
			return x + at, true
		}
		x += length
	}
	return 0, false
}
