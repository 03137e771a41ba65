package check

import (
	"fmt"

	"tapround/survey"
	"tapround/survey/unit"
)

// aboveRest says where a head read while water flows stands above the no-flow head of
// the same tap, allowing for the reservoirs' levels. Without a pump that cannot be: a
// head can be no higher than the highest reservoir that feeds it. Rounds with a pump, an
// inflow or an unstated level in that part of the system are left out.
func aboveRest(v *view) []survey.Alert {
	var out []survey.Alert
	for _, t := range v.s.Taps {
		for _, r := range v.rounds {
			feed, ok := v.feed(r, t)
			if !ok {
				continue
			}
			for _, h := range r.heads {
				if h.Tap != t.Name || !isHead(h) {
					continue
				}
				if a, ok := v.aboveOwnRest(r, h, feed); ok {
					out = append(out, a)
				}
			}
		}
	}
	return out
}

// feed gives the highest stated level of the reservoirs that can feed a tap in a round
// in which water flows there; ok is false where the tap is at rest or could be raised above it.
func (v *view) feed(r round, t survey.Tap) (survey.Condition, bool) {
	if _, still := r.still.open(t); still {
		return survey.Condition{}, false
	}
	p := cutUp(v.s, shutCuts(v.s, r.force))
	for _, m := range v.s.Machines {
		if !r.force.Stopped[m.Name] {
			p.join(p.points[m.From], p.points[m.To])
		}
	}
	part := p.of(t)
	for _, m := range v.s.Machines {
		if m.Kind == survey.Pump && !r.force.Stopped[m.Name] && p.at(m.From) == part {
			return survey.Condition{}, false
		}
	}
	var highest survey.Condition
	for _, x := range v.s.Points {
		if p.at(x.Name) != part {
			continue
		}
		for _, d := range r.force.DrawOffs[x.Name] {
			if !d.Value.OK || d.Value.V < 0 {
				return survey.Condition{}, false
			}
		}
		if x.Kind != survey.Reservoir {
			continue
		}
		l, ok := r.force.Levels[x.Name]
		if !ok || !l.Value.OK {
			return survey.Condition{}, false
		}
		if !highest.Value.OK || l.Value.V > highest.Value.V {
			highest = l
		}
	}
	return highest, highest.Value.OK
}

// aboveOwnRest compares a flowing head with the no-flow head of the same tap: of
// several no-flow readings the one it stands furthest above, in standard uncertainties.
func (v *view) aboveOwnRest(r round, h survey.Head, feed survey.Condition) (survey.Alert, bool) {
	var a survey.Alert
	worst := v.limits.apart.value
	for _, q := range v.rounds {
		reservoir, still := q.still.open(v.taps[h.Tap])
		level, stated := q.force.Levels[reservoir]
		if !still || !stated || !level.Value.OK {
			continue
		}
		for _, rest := range q.heads {
			if rest.Tap != h.Tap || !isHead(rest) || rest.Quantity != h.Quantity {
				continue
			}
			d, u := differ(h, rest)
			if feed.Source != level.Source {
				d -= feed.Value.V - level.Value.V
				u = rss(u, feed.SD.Or(0), level.SD.Or(0))
			}
			if d <= worst*u {
				continue
			}
			worst = d / u
			a = survey.Alert{Rule: "flowing head above the no-flow head", Subject: h.Tap,
				Statement: fmt.Sprintf("%s shows more head in round %s, with water flowing, than in round %s with none.", h.Tap, r.Name, q.Name),
				Evidence: fmt.Sprintf("%.2f m against %.2f m; more by %s once the reservoir's level is allowed for, %.1f times its standard uncertainty",
					h.Value, rest.Value, unit.Metre.Format(d, u), d/u),
				Limit: v.limits.apart.String(), Stay: d > v.limits.stay.value*u,
				Action:  fmt.Sprintf("Read %s again; check that the tap is the right one, and that no pump, regulator or second feed was acting.", h.Tap),
				Sources: append(h.Sources(), rest.Sources()...)}
		}
	}
	return a, worst > v.limits.apart.value
}
