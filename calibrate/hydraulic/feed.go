package hydraulic

import (
	"fmt"
	"math"
	"strings"
)

// feed finds the points that open links join to a reservoir or an outlet, and so the
// links that take part. A part that is cut off from both is left out where nothing is
// drawn in it and has no solution where something is.
//
// One-way links join in both directions: where nothing presses them they stand open,
// and a part at rest behind one keeps the head at which the flow through it ceased.
func (v *Solver) feed() error {
	s := v.sys
	v.queue = v.queue[:0]
	for i, p := range s.points {
		v.live[i] = p.Kind != Junction
		if v.live[i] {
			v.queue = append(v.queue, i)
		}
	}
	v.spread(v.live, func(link, _ int) bool { return !v.shut[link] && !v.blocked[link] })
	for i := range s.links {
		l := &s.links[i]
		v.in[i] = !v.shut[i] && !v.blocked[i] && v.live[l.From] && v.live[l.To]
	}
	var cut []int
	for i := range s.points {
		if !v.live[i] && v.draw[i] != 0 {
			cut = append(cut, i)
		}
	}
	if cut == nil {
		return nil
	}
	return v.cutOff(cut)
}

// spread marks what is reached from the marked points in the queue.
func (v *Solver) spread(mark []bool, passes func(link, from int) bool) {
	for k := 0; k < len(v.queue); k++ {
		p := v.queue[k]
		for _, i := range v.sys.at[p] {
			o := v.sys.links[i].From + v.sys.links[i].To - p
			if !mark[o] && passes(i, p) {
				mark[o] = true
				v.queue = append(v.queue, o)
			}
		}
	}
}

// cutOff names draw-offs that nothing feeds and what stands closed between them and
// the rest.
func (v *Solver) cutOff(points []int) error {
	s := v.sys
	u := &Unsolvable{}
	draws := false
	for _, p := range points {
		u.Points = append(u.Points, s.points[p].Name)
		draws = draws || v.draw[p] > 0
	}
	clear(v.mark)
	v.queue = append(v.queue[:0], points...)
	for _, p := range points {
		v.mark[p] = true
	}
	v.spread(v.mark, func(link, _ int) bool { return !v.shut[link] && !v.blocked[link] })
	var why []string
	for i := range s.links {
		l := &s.links[i]
		if v.mark[l.From] == v.mark[l.To] {
			continue
		}
		u.Links = append(u.Links, l.Name)
		switch {
		case v.shut[i] && l.Machine != nil:
			why = append(why, s.title(i)+" is stopped")
		case v.shut[i]:
			why = append(why, s.title(i)+" is shut")
		case l.Machine != nil:
			why = append(why, s.title(i)+" passes nothing backwards or against more head than it has")
		case l.oneWay():
			why = append(why, s.title(i)+" has a check valve, which closes")
		default:
			why = append(why, s.title(i)+" ends at an outlet, which gives no water back")
		}
	}
	u.Cause = "water is drawn at %s, but no reservoir feeds it: "
	if !draws {
		u.Cause = "water is put in at %s, but nothing takes it or holds the head there: "
	}
	u.Cause = fmt.Sprintf(u.Cause, some(u.Points)) + strings.Join(why, "; ")
	if why == nil {
		u.Cause += "no link joins it to one"
	}
	return u
}

// rest puts parts at rest in which nothing can move: nothing drawn, no machine running,
// every fixed head around them the same and every outlet as high or higher, or no fixed
// head and an outlet that holds them. The level stands below higher outlets, which are
// closed.
func (v *Solver) rest() {
	s := v.sys
	clear(v.mark)
	for i, p := range s.points {
		if p.Kind != Junction || !v.live[i] || v.mark[i] {
			continue
		}
		v.mark[i] = true
		v.queue = append(v.queue[:0], i)
		// Reservoirs and outlets bound a part; they do not join two parts into one.
		v.spread(v.mark, func(link, from int) bool {
			l := &s.links[link]
			return v.in[link] && s.points[l.From+l.To-from].Kind == Junction
		})
		if level, ok := v.levelOf(v.queue); ok {
			v.still(v.queue, level)
		}
	}
	for i := range s.links {
		l := &s.links[i]
		if v.in[i] && l.Pipe != nil && s.points[l.From].Kind == Fixed && s.points[l.To].Kind == Fixed && v.drop(i) == 0 {
			v.flow[i] = 0
		}
	}
}

// levelOf is the one head of a part at rest; false where something moves in it.
func (v *Solver) levelOf(part []int) (float64, bool) {
	s := v.sys
	level, lowest := math.NaN(), math.Inf(1)
	for _, p := range part {
		if v.draw[p] != 0 {
			return 0, false
		}
		for _, i := range s.at[p] {
			if !v.in[i] {
				continue
			}
			if s.links[i].Machine != nil {
				return 0, false
			}
			o := s.links[i].From + s.links[i].To - p
			switch s.points[o].Kind {
			case Fixed:
				if !math.IsNaN(level) && level != v.head[o] {
					return 0, false
				}
				level = v.head[o]
			case Outlet:
				lowest = math.Min(lowest, v.head[o])
			}
		}
	}
	if math.IsNaN(level) {
		level = lowest
	}
	return level, level <= lowest && finite(level)
}

func (v *Solver) still(part []int, level float64) {
	s := v.sys
	for _, p := range part {
		v.head[p] = level
		for _, i := range s.at[p] {
			if !v.in[i] {
				continue
			}
			v.flow[i] = 0
			if o := s.links[i].From + s.links[i].To - p; s.points[o].Kind == Outlet && v.head[o] > level {
				v.blocked[i], v.in[i] = true, false
			}
		}
	}
}
