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
			feed, ok := r.feed(t)
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

// feeds says, of each piece of the system in a round, the highest stated level of the
// reservoirs that can feed it. Pieces with a running pump, an inflow, a flow or a level
// to be estimated are not in it.
type feeds struct {
	pieces *pieces
	level  map[int]survey.Condition
}

func (v *view) feedsOf(f survey.RoundConditions) feeds {
	p := cutUp(v.s, shutCuts(v.s, f))
	for _, m := range v.s.Machines {
		if !f.Stopped[m.Name] {
			p.join(p.points[m.From], p.points[m.To])
		}
	}
	out := feeds{p, map[int]survey.Condition{}}
	unsure := map[int]bool{}
	for _, m := range v.s.Machines {
		if m.Kind == survey.Pump && !f.Stopped[m.Name] {
			unsure[p.at(m.From)] = true
		}
	}
	for _, x := range v.s.Points {
		i := p.at(x.Name)
		for _, d := range f.DrawOffs[x.Name] {
			if !d.Value.OK || d.Value.V < 0 {
				unsure[i] = true
			}
		}
		if x.Kind != survey.Reservoir {
			continue
		}
		l := f.Levels[x.Name]
		if !l.Value.OK {
			unsure[i] = true
		}
		if highest, ok := out.level[i]; !ok || l.Value.V > highest.Value.V {
			out.level[i] = l
		}
	}
	for i := range unsure {
		delete(out.level, i)
	}
	return out
}

// feed gives the level that a tap's head cannot exceed in a round; ok is false where the
// tap is at rest, or where that is not certain.
func (r round) feed(t survey.Tap) (survey.Condition, bool) {
	if _, still := r.still.open(t); still {
		return survey.Condition{}, false
	}
	l, ok := r.feeds.level[r.feeds.pieces.of(t)]
	return l, ok
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
