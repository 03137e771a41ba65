package hydraulic

import (
	"fmt"
	"math"

	"tapround/calibrate/friction"
)

// review closes one-way links that run backwards and opens those that would run
// forwards. key names the new pattern.
func (v *Solver) review() (changed bool, key string) {
	b := make([]byte, 0, len(v.blocked))
	for i := range v.sys.links {
		if v.canBlock(i) && !v.shut[i] {
			if !v.blocked[i] && v.wrongWay(i) {
				v.blocked[i], changed = true, true
			} else if v.blocked[i] && v.wouldRun(i) {
				v.blocked[i], changed = false, true
				v.st.Flow[i] = v.startFlow(i) / 10
				if v.sys.points[v.sys.links[i].From].Kind == Outlet {
					v.st.Flow[i] = -v.st.Flow[i]
				}
			}
		}
		if v.blocked[i] {
			b = append(b, '1')
		} else {
			b = append(b, '0')
		}
	}
	return changed, string(b)
}

// wrongWay: a one-way link with flow against it, or an outlet that would draw in air.
func (v *Solver) wrongWay(i int) bool {
	q := v.st.Flow[i]
	l := v.sys.links[i]
	tiny := 1e-9 + 1e-9*v.largest()
	if l.oneWay() && q < -tiny {
		return true
	}
	if v.sys.points[l.To].Kind == Outlet && q < -tiny {
		return true
	}
	return v.sys.points[l.From].Kind == Outlet && q > tiny
}

// wouldRun: the heads at the ends of a closed one-way link ask it to open.
func (v *Solver) wouldRun(i int) bool {
	l := v.sys.links[i]
	if !v.live[l.From] || !v.live[l.To] {
		return false
	}
	h0, _ := v.law(i, 0)
	drop := v.head(l.From) - v.head(l.To) - h0
	if v.sys.points[l.From].Kind == Outlet {
		drop = -drop
	}
	return drop > 1e-7
}

// settle ends a pattern that repeats itself: everything closed in it stays closed
// unless the heads ask for it and nothing runs backwards then. It reports false where
// even that contradicts itself.
func (v *Solver) settle() bool {
	for try := 0; try < len(v.blocked); try++ {
		worst, at := 1e-7, -1
		for i := range v.sys.links {
			if v.canBlock(i) && !v.shut[i] && !v.blocked[i] && v.wrongWay(i) {
				if q := math.Abs(v.st.Flow[i]); q > worst {
					worst, at = q, i
				}
			}
		}
		if at < 0 {
			return true
		}
		v.blocked[at] = true
		if v.feed() != nil || v.newton() != nil {
			return false
		}
	}
	return false
}

// finish fills what the caller sees.
func (v *Solver) finish() {
	s, st := v.sys, v.st
	for i := range s.links {
		st.Closed[i] = !v.open(i)
		if st.Closed[i] || !v.live[s.links[i].From] {
			st.Flow[i] = 0
		}
	}
	for i, p := range s.points {
		switch p.Kind {
		case Fixed:
			st.Head[i] = v.c.Head[i]
		case Outlet:
			st.Head[i] = p.Elevation + v.outflowHead(i)
		default:
			if !v.live[i] {
				st.Head[i] = nan
			}
		}
	}
	v.tabulate()
	for i, l := range s.links {
		if l.Machine != nil && !st.Closed[i] {
			speed := 1.0
			if v.c.Speed[i] > 0 && l.Machine.RatedSpeed > 0 {
				speed = v.c.Speed[i] / l.Machine.RatedSpeed
			}
			if _, _, beyond := l.Machine.Curve.At(st.Flow[i], speed); beyond {
				st.Caveats = append(st.Caveats, fmt.Sprintf("machine %s runs beyond the ends of its works curve, which was continued in a straight line", l.Name))
			}
		}
		if v.blocked[i] && (s.points[l.To].Kind == Outlet || s.points[l.From].Kind == Outlet) && !l.oneWay() {
			st.Caveats = append(st.Caveats, fmt.Sprintf("pipe %s would draw air in at its outlet: it was taken as passing nothing", l.Name))
		}
	}
}

// tabulate fills what gradients at the solution need.
func (v *Solver) tabulate() {
	s := v.sys
	for i, l := range s.links {
		if !v.flows(i) {
			continue
		}
		q := v.st.Flow[i]
		h, d := v.law(i, q)
		v.atSlope[i] = math.Max(d, leastSlope)
		if l.Machine != nil {
			v.atParam[i] = h / v.p.HeadFactor[i]
			continue
		}
		_, _, dp := v.outletHead(i, q)
		v.atParam[i] = l.Pipe.Loss(q, v.p.LnRough[i], v.c.Viscosity, v.c.Gravity).DParam + dp
		for k, f := range l.Pipe.Fittings {
			flat := s.first[i] + k
			v.atMinor[flat] = 0
			if q >= 0 || math.IsNaN(f.ReverseK) {
				v.atMinor[flat], _ = friction.Minor(q, v.kOf(i, k, q), f.Bore, v.c.Gravity)
			}
		}
	}
}

// outflowHead is the velocity head of the first pipe that discharges at an outlet.
func (v *Solver) outflowHead(p int) float64 {
	for _, l := range v.sys.at[p] {
		if h, _, _ := v.outletHead(l, v.st.Flow[l]); h != 0 {
			return math.Abs(h)
		}
	}
	return 0
}
