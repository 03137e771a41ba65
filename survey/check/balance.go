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
func balance(v *view) []survey.Alert {
	var out []survey.Alert
	for _, r := range v.rounds {
		out = append(out, v.balanceOf(r)...)
	}
	return out
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

func (v *view) balanceOf(r round) []survey.Alert {
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
	var out []survey.Alert
	for _, z := range order {
		if !z.open && len(z.meters) > 0 {
			out = append(out, v.imbalance(r, z)...)
		}
	}
	return out
}

// imbalance gives an alert where more is left over than meters and draw-offs may be off.
func (v *view) imbalance(r round, z *zone) []survey.Alert {
	in, out, variance := 0.0, 0.0, z.drawn.u*z.drawn.u
	var names []string
	var sources []survey.Source
	show := unit.LitrePerSecond
	for i, m := range z.meters {
		if m.sign > 0 {
			in += m.Value
		} else {
			out += m.Value
		}
		for j, o := range z.meters {
			variance += m.sign * o.sign * covariance(m.Head, o.Head, i == j)
		}
		names = append(names, m.Tap)
		sources = append(sources, m.Sources()...)
		if u, err := unit.Parse(v.gauge(m.Head).Unit, unit.Flow); err == nil {
			show = u
		}
	}
	left, u := in-out-z.drawn.q, math.Sqrt(math.Max(variance, 0))
	if math.Abs(left) <= v.limits.apart.value*u {
		return nil
	}
	where := "between the meters at " + strings.Join(names, " and ")
	if len(names) == 1 {
		where = "beyond the meter at " + names[0]
	}
	size := show.Format(math.Abs(left), u)
	a := survey.Alert{Rule: "flow does not balance", Subject: strings.Join(names, " "), Limit: v.limits.apart.String(),
		Statement: fmt.Sprintf("In round %s %s go in %s and are not accounted for.", r.Name, size, where),
		Evidence: fmt.Sprintf("in by meter %s, out by meter %s, drawn off %s; left over %s (± one standard uncertainty), %.1f times its standard uncertainty",
			figure(show, in), figure(show, out), figure(show, z.drawn.q), size, math.Abs(left)/u),
		Action: "Look for a draw-off that nobody wrote down; read the meters again and check their units and zeros.",
		Stay:   math.Abs(left) > v.limits.stay.value*u, Sources: append(sources, z.sources...)}
	if left < 0 {
		a.Statement = fmt.Sprintf("In round %s %s more come out %s than go in.", r.Name, size, where)
		a.Action = "Look for a feed that nobody wrote down; read the meters again and check their units, zeros and directions."
	}
	return []survey.Alert{a}
}

func figure(u unit.Unit, si float64) string {
	return unit.Significant(u.FromSI(si), 4) + " " + u.Name
}
