package check

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"tapround/survey"
	"tapround/survey/unit"
)

// stretch is a length of one pipe between two neighbouring taps, at chainages along it.
type stretch struct {
	pipe     survey.Pipe
	from, to string
	a, b     float64
}

// stretches lists the lengths of each pipe between neighbours among the taps that on
// accepts for it, in the order of the pipes. Flow meters' own taps count too: only what
// was read there decides.
func (v *view) stretches(on func(survey.Pipe, survey.Tap) (at float64, ok bool)) []stretch {
	var out []stretch
	for _, p := range v.s.Pipes {
		type place struct {
			tap string
			at  float64
		}
		var places []place
		for _, t := range v.s.Taps {
			if at, ok := on(p, t); ok && v.readHead(t.Name) {
				places = append(places, place{t.Name, at})
			}
		}
		slices.SortStableFunc(places, func(x, y place) int { return cmp.Compare(x.at, y.at) })
		for i := 1; i < len(places); i++ {
			out = append(out, stretch{p, places[i-1].tap, places[i].tap, places[i-1].at, places[i].at})
		}
	}
	return out
}

// readHead reports whether a head was read at a tap in any round.
func (v *view) readHead(tap string) bool {
	for _, r := range v.rounds {
		for _, h := range r.heads {
			if h.Tap == tap && (isHead(h) || h.Quantity == survey.HeadDifference) || h.OtherTap == tap {
				return true
			}
		}
	}
	return false
}

// onOrAtEnd accepts taps on the pipe and at its two points.
func (v *view) onOrAtEnd(p survey.Pipe, t survey.Tap) (float64, bool) {
	switch {
	case t.Pipe == p.Name:
		return t.At, true
	case t.Pipe != "":
		return 0, false
	case t.Point == p.From:
		return 0, true
	}
	return p.Length, t.Point == p.To
}

// sameStream accepts taps whose piezometric head stands as far below the total head as
// that of the pipe itself: those on it, and those at junctions where it ends or goes on
// with the same bore, nothing branching off or being drawn.
func (v *view) sameStream(f survey.RoundConditions) func(survey.Pipe, survey.Tap) (float64, bool) {
	return func(p survey.Pipe, t survey.Tap) (float64, bool) {
		at, ok := v.onOrAtEnd(p, t)
		if !ok || t.Pipe != "" {
			return at, ok
		}
		point := v.points[t.Point]
		if point.Kind != survey.Junction || len(f.DrawOffs[t.Point]) > 0 {
			return 0, false
		}
		n := 0
		for _, q := range v.s.Pipes {
			if (q.From == t.Point || q.To == t.Point) && !f.Shut[q.Name] {
				n++
				ok = ok && math.Abs(q.Bore-p.Bore) <= 1e-3*p.Bore
			}
		}
		for _, m := range v.s.Machines {
			ok = ok && m.From != t.Point && m.To != t.Point
		}
		return at, ok && n <= 2
	}
}

// loss gives the head at the stretch's first tap less that at its second in a round,
// from two heads of one quantity or from one differential reading: of several pairs
// the one with the smallest standard uncertainty. ok is false where none was read.
func (x stretch) loss(r round) (d, u float64, of []survey.Head, ok bool) {
	take := func(nd, nu float64, hs ...survey.Head) {
		if !ok || nu < u {
			d, u, of, ok = nd, nu, hs, true
		}
	}
	for _, a := range r.heads {
		if a.Quantity == survey.HeadDifference {
			switch {
			case a.Tap == x.from && a.OtherTap == x.to:
				take(a.Value, a.U(), a)
			case a.Tap == x.to && a.OtherTap == x.from:
				take(-a.Value, a.U(), a)
			}
		}
		if a.Tap != x.from || !alongPipe(a) {
			continue
		}
		for _, b := range r.heads {
			if b.Tap == x.to && alongPipe(b) && (a.Quantity == survey.LocalTotalHead) == (b.Quantity == survey.LocalTotalHead) && a.Depth == b.Depth {
				nd, nu := differ(a, b)
				take(nd, nu, a, b)
			}
		}
	}
	return d, u, of, ok
}

// alongPipe: heads that differ along one pipe by its loss alone, piezometric ones, and
// total ones where read at one depth.
func alongPipe(h survey.Head) bool {
	return h.Quantity == survey.PiezometricHead || h.Quantity == survey.LocalTotalHead
}

// rising says where the head rises along the flow in one pipe by more than the readings
// can be off. The flow's direction comes from meters and stated draw-offs.
func rising(v *view) []survey.Alert {
	var out []survey.Alert
	for _, r := range v.rounds {
		flows := v.flows(r)
		for _, x := range v.stretches(v.sameStream(r.force)) {
			f, known := flows[x.pipe.Name]
			sign := f.sign(v.limits.apart.value)
			d, u, of, ok := x.loss(r)
			if !known || sign == 0 || !ok || -sign*d <= v.limits.apart.value*u {
				continue
			}
			up, down := x.from, x.to
			if sign < 0 {
				up, down = down, up
			}
			a := survey.Alert{Rule: "head rises along the flow", Subject: up + " " + down,
				Statement: fmt.Sprintf("In round %s the head rises from %s to %s, along the flow in pipe %s, where no pump stands.", r.Name, up, down, x.pipe.Name),
				Evidence: fmt.Sprintf("rise %s (± one standard uncertainty), %.1f times its standard uncertainty; flow in the pipe %s",
					unit.Metre.Format(-sign*d, u), -sign*d/u, unit.LitrePerSecond.Format(math.Abs(f.q), f.u)),
				Limit: v.limits.apart.String(), Stay: -sign*d > v.limits.stay.value*u,
				Action: fmt.Sprintf("Read %s and %s again with one gauge; if it stays, check their levels, the direction of flow, and look for a hidden feed.", up, down)}
			for _, h := range of {
				a.Sources = append(a.Sources, h.Sources()...)
			}
			out = append(out, a)
		}
	}
	return out
}

// tooSmall says of each stretch of a pipe between neighbouring taps that its loss stays
// within what the gauges and levels may be off, in every round in which water flows. A
// change of velocity head at the points between pipes is left out of account.
func tooSmall(v *view) []survey.Alert {
	var out []survey.Alert
	for _, x := range v.stretches(v.onOrAtEnd) {
		best, bestLoss, bestU, bestRound := 0.0, 0.0, 0.0, ""
		var of []survey.Head
		for _, r := range v.rounds {
			if r.still.along(x.pipe.Name, (x.a+x.b)/2) {
				continue
			}
			d, u, hs, ok := x.loss(r)
			if !ok {
				continue
			}
			if ratio := math.Abs(d) / u; bestRound == "" || ratio > best {
				best, bestLoss, bestU, bestRound, of = ratio, d, u, r.Name, hs
			}
		}
		if bestRound == "" || best >= v.limits.visible.value {
			continue
		}
		a := survey.Alert{Rule: "loss too small for the gauges", Subject: x.from + " " + x.to,
			Statement: fmt.Sprintf("Between %s and %s on pipe %s no round shows a loss that these gauges can see.", x.from, x.to, x.pipe.Name),
			Evidence:  fmt.Sprintf("largest in round %s: %s (± one standard uncertainty), %.1f times its standard uncertainty", bestRound, unit.Metre.Format(math.Abs(bestLoss), bestU), best),
			Limit:     v.limits.visible.String(), Action: moreFlow(v.limits.visible.value, best)}
		for _, h := range of {
			a.Sources = append(a.Sources, h.Sources()...)
		}
		out = append(out, a)
	}
	return out
}

// moreFlow says how much more flow would make the loss visible, a loss growing about as
// the square of the flow.
func moreFlow(wanted, ratio float64) string {
	if ratio < 1 {
		return "Draw several times the flow, set the taps further apart, or put one differential gauge between them; else expect no answer for this stretch."
	}
	return fmt.Sprintf("Draw about %s times the flow, or put one differential gauge between the taps; else expect no answer for this stretch.", unit.Significant(math.Sqrt(wanted/ratio), 2))
}
