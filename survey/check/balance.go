package check

import (
	"fmt"
	"math"
	"strings"

	"tapround/survey"
	"tapround/survey/unit"
)

// balance compares what meters let into a part of the system with what they let out of
// it and what is stated as drawn off there. The parts are what is left when the system
// is cut at its meters; one with a reservoir or an outlet in it, or with a draw-off to
// be estimated, has no balance. Two meters in a row on one pipe bound a part of their own.
// What is left over in several rounds between the same meters, with one sign, is told once.
func balance(v *view) []survey.Alert {
	var order []string
	found := map[string][]leftOver{}
	for _, r := range v.rounds {
		for _, x := range v.balanceOf(r) {
			key := fmt.Sprint(x.meters, x.q > 0)
			if found[key] == nil {
				order = append(order, key)
			}
			found[key] = append(found[key], x)
		}
	}
	var out []survey.Alert
	for _, key := range order {
		out = append(out, v.imbalance(found[key]))
	}
	return out
}

// leftOver is the flow into a zone that is not accounted for in a round.
type leftOver struct {
	flow
	round          string
	meters         []string
	in, out, drawn float64
	unit           unit.Unit
	sources        []survey.Source
}

// zone is a part of the system between meters.
type zone struct {
	open    bool
	meters  []signed
	drawn   flow
	sources []survey.Source
}

// signed is a meter's head with +1 where its flow goes into the zone, -1 out of it.
type signed struct {
	survey.Head
	sign float64
}

func (v *view) balanceOf(r round) []leftOver {
	cuts := shutCuts(v.s, r.force)
	type meter struct {
		survey.Head
		pipe string
		at   float64
	}
	var meters []meter
	for _, h := range r.heads {
		if h.Quantity != survey.VolumeFlow {
			continue
		}
		// Where nothing flows a meter must show nothing: the closure sees to that.
		if pipe, at, ok := v.place(h.Tap); ok && !r.force.Shut[pipe] && !r.still.along(pipe, at) {
			meters = append(meters, meter{h, pipe, at})
			cuts[pipe] = append(cuts[pipe], at)
		}
	}
	p := cutUp(v.s, cuts)
	for _, m := range v.s.Machines {
		if !r.force.Stopped[m.Name] {
			p.join(p.points[m.From], p.points[m.To])
		}
	}
	zones := map[int]*zone{}
	var order []*zone
	get := func(i int) *zone {
		if zones[i] == nil {
			zones[i] = &zone{}
			order = append(order, zones[i])
		}
		return zones[i]
	}
	for _, m := range meters {
		// A cut belongs to what lies before it; just beyond begins the next length.
		before, after := get(p.along(m.pipe, m.at)), get(p.along(m.pipe, math.Nextafter(m.at, math.Inf(1))))
		if before == after {
			continue // a ring joins both sides: what goes in comes out
		}
		before.meters = append(before.meters, signed{m.Head, -1})
		after.meters = append(after.meters, signed{m.Head, 1})
	}
	for _, x := range v.s.Points {
		z, bounded := zones[p.at(x.Name)]
		if !bounded {
			continue
		}
		drawn, ok := drawnAt(r.force, x.Name)
		z.open = z.open || !ok || x.Kind != survey.Junction
		z.drawn = flow{z.drawn.q + drawn.q, math.Hypot(z.drawn.u, drawn.u)}
		for _, d := range r.force.DrawOffs[x.Name] {
			z.sources = append(z.sources, d.Source)
		}
	}
	var out []leftOver
	for _, z := range order {
		if z.open || len(z.meters) == 0 {
			continue
		}
		if x := v.leftOver(r, z); math.Abs(x.q) > v.limits.apart.value*x.u {
			out = append(out, x)
		}
	}
	return out
}

// leftOver adds up a zone.
func (v *view) leftOver(r round, z *zone) leftOver {
	x := leftOver{round: r.Name, drawn: z.drawn.q, unit: unit.LitrePerSecond}
	variance := z.drawn.u * z.drawn.u
	for i, m := range z.meters {
		if m.sign > 0 {
			x.in += m.Value
		} else {
			x.out += m.Value
		}
		for j, o := range z.meters {
			variance += m.sign * o.sign * covariance(m.Head, o.Head, i == j)
		}
		x.meters = append(x.meters, m.Tap)
		x.sources = append(x.sources, m.Sources()...)
		if u, err := unit.Parse(v.gauge(m.Head).Unit, unit.Flow); err == nil {
			x.unit = u
		}
	}
	x.sources = append(x.sources, z.sources...)
	x.flow = flow{x.in - x.out - x.drawn, math.Sqrt(math.Max(variance, 0))}
	return x
}

// imbalance words what is left over between the same meters in one round or several.
func (v *view) imbalance(xs []leftOver) survey.Alert {
	worst := xs[0]
	a := survey.Alert{Rule: "flow does not balance", Subject: strings.Join(worst.meters, " "), Limit: v.limits.apart.String()}
	var rounds, evidence []string
	for _, x := range xs {
		if math.Abs(x.q)/x.u > math.Abs(worst.q)/worst.u {
			worst = x
		}
		rounds = append(rounds, x.round)
		evidence = append(evidence, fmt.Sprintf("round %s: in by meter %s, out by meter %s, drawn off %s, left over %s, %.1f times its standard uncertainty",
			x.round, x.figure(x.in), x.figure(x.out), x.figure(x.drawn), x.unit.Format(x.q, x.u), math.Abs(x.q)/x.u))
		a.Sources = append(a.Sources, x.sources...)
	}
	a.Evidence = strings.Join(evidence, "; ")
	a.Stay = math.Abs(worst.q) > v.limits.stay.value*worst.u
	where := "between the meters at " + strings.Join(worst.meters, " and ")
	if len(worst.meters) == 1 {
		where = "beyond the meter at " + worst.meters[0]
	}
	size := worst.unit.Format(math.Abs(worst.q), worst.u)
	if len(xs) > 1 {
		size += " (round " + worst.round + ")"
	}
	a.Statement = fmt.Sprintf("In %s water goes in %s that is not accounted for: %s.", roundsNamed(rounds), where, size)
	a.Action = "Look for a draw-off that nobody wrote down; read the meters again and check their units and zeros."
	if worst.q < 0 {
		a.Statement = fmt.Sprintf("In %s more water comes out %s than goes in: %s.", roundsNamed(rounds), where, size)
		a.Action = "Look for a feed that nobody wrote down; read the meters again and check their units, zeros and directions."
	}
	return a
}

func (x leftOver) figure(si float64) string {
	return fmt.Sprintf("%.4g %s", x.unit.FromSI(si), x.unit.Name)
}
