package check

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"strings"

	"tapround/survey"
	"tapround/survey/unit"
	"tapround/survey/water"
)

// strayUnits looks at readings taken while water flows. What lies outside all other
// readings of its part of the system, by more than those span and by more than its own
// uncertainty explains, and comes to lie with them in another unit, is named. Parts are
// divided at machines, for the head steps there. A loss can put a head below the others
// and a pump above them; unless it stands above every reservoir that feeds it, only the
// unit on the gauge's own face is tried.
func strayUnits(v *view) []survey.Alert {
	var out []survey.Alert
	for _, r := range v.rounds {
		cuts := cutUp(v.s, shutCuts(v.s, r.force))
		for i, h := range r.heads {
			if !isHead(h) || !h.Pressure.OK {
				continue
			}
			if _, still := r.still.open(v.taps[h.Tap]); still {
				continue // the closure has looked at it
			}
			low, high, n := v.others(r, cuts, i)
			away := math.Max(low-h.Value, h.Value-high)
			if n < 3 || away <= high-low || away <= v.limits.amongOthers.value*h.U() {
				continue
			}
			feed, fed := r.feed(v.taps[h.Tap])
			impossible := fed && h.Value-feed.Value.V > v.limits.amongOthers.value*h.U()
			// The last tap of a line rightly lies somewhat outside the others.
			margin := high - low + v.limits.apart.value*h.U()
			fits := v.fitting(r, h, func(value float64) float64 {
				if value < low-margin || value > high+margin || impossible && value > feed.Value.V+v.limits.apart.value*h.U() {
					return math.Inf(1)
				}
				return math.Max(0, math.Max(low-value, value-high))
			})
			if len(fits) > 0 && (fits[0].face || impossible && v.convincing(fits[0])) {
				out = append(out, v.unitAlert(r, h, fits, fmt.Sprintf("the %d others of the round lie between %.2f m and %.2f m", n, low, high), v.limits.amongOthers.String()))
			}
		}
	}
	return out
}

// others gives the range and the number of the other heads, and of the reservoirs'
// levels, in the part of the system that head i of the round is in.
func (v *view) others(r round, cuts *pieces, i int) (low, high float64, n int) {
	part := cuts.of(v.taps[r.heads[i].Tap])
	low, high = math.Inf(1), math.Inf(-1)
	take := func(x float64) { low, high, n = math.Min(low, x), math.Max(high, x), n+1 }
	for j, h := range r.heads {
		if j != i && isHead(h) && cuts.of(v.taps[h.Tap]) == part {
			take(h.Value)
		}
	}
	for _, p := range v.s.Points {
		if l, ok := r.force.Levels[p.Name]; ok && l.Value.OK && cuts.at(p.Name) == part {
			take(l.Value.V)
		}
	}
	return low, high, n
}

// otherUnit is what a reading would be had its number been read in another unit, or
// against another zero.
type otherUnit struct {
	words string
	face  bool    // the unit on the gauge's own face, which is not the one written
	value float64 // head, m
	ratio float64 // pressure as converted over the one meant; 0 for another zero
	off   float64 // how far from what was to be met
}

// convincing units are the one on the gauge's face, another zero, and those whose ratio
// is no gauge's or level's error.
func (v *view) convincing(x otherUnit) bool {
	return x.face || x.ratio == 0 || x.ratio >= v.limits.nearOne.value || x.ratio <= 1/v.limits.nearOne.value
}

// fitting lists the other units that off finds fitting: convincing ones first, the one on
// the gauge's face before all, then the nearest. off is infinite for what does not fit.
func (v *view) fitting(r round, h survey.Head, off func(value float64) float64) []otherUnit {
	var out []otherUnit
	for _, x := range v.otherUnits(r, h) {
		if x.off = off(x.value); !math.IsInf(x.off, 1) {
			out = append(out, x)
		}
	}
	rank := func(x otherUnit) int {
		switch {
		case x.face:
			return 0
		case v.convincing(x):
			return 1
		}
		return 2
	}
	slices.SortStableFunc(out, func(a, b otherUnit) int {
		return cmp.Or(cmp.Compare(rank(a), rank(b)), cmp.Compare(a.off, b.off))
	})
	return out
}

func (v *view) otherUnits(r round, h survey.Head) []otherUnit {
	g := v.gauge(h)
	parse := func(name string) (unit.Unit, error) { return unit.Parse(name, unit.Pressure) }
	if g.Kind == survey.AbsoluteGauge {
		parse = unit.ParseAbsolute
	}
	wrote, err := parse(h.Rows[0].Unit)
	if err != nil || !h.Pressure.OK {
		return nil
	}
	face, err := parse(g.Unit)
	if err != nil {
		face = wrote
	}
	shown := 0.0
	for _, x := range h.Rows {
		shown += x.Value / float64(len(h.Rows))
	}
	w := h.Density * h.Gravity
	var out []otherUnit
	for _, x := range unit.Mistakes(unit.Pressure) {
		if x.Wrote == wrote {
			out = append(out, otherUnit{words: x.Meant.Name, face: x.Meant == face, value: h.Value + shown*(1/x.Ratio-1)/w, ratio: x.Ratio})
		}
	}
	atmosphere := r.Barometer.Or(water.StandardAtmosphere(v.s.Info.SiteLevel))
	if g.Kind == survey.AbsoluteGauge {
		return append(out, otherUnit{words: "a pressure above atmosphere, not an absolute one", value: h.Value + atmosphere/w})
	}
	return append(out, otherUnit{words: "an absolute pressure, not one above atmosphere", value: h.Value - atmosphere/w})
}

// unitAlert words the alert for the units that fit, at most three of them.
func (v *view) unitAlert(r round, h survey.Head, fits []otherUnit, evidence, limit string) survey.Alert {
	best := fits[0]
	what := best.words
	if best.ratio != 0 {
		what = fmt.Sprintf("%s, not %s", best.words, h.Rows[0].Unit)
	}
	var also []string
	for _, x := range fits[1:min(len(fits), 3)] {
		also = append(also, x.words)
	}
	evidence = fmt.Sprintf("%s %s gives %.2f m, as %s %.2f m; %s", h.Rows[0].Written, h.Rows[0].Unit, h.Value, best.words, best.value, evidence)
	if best.face {
		evidence += fmt.Sprintf("; the face of gauge %s shows %s", h.Gauge, best.words)
	}
	if len(also) > 0 {
		evidence += "; would fit too: " + strings.Join(also, ", ")
	}
	return survey.Alert{Rule: "unit looks wrong", Subject: h.Tap,
		Statement: fmt.Sprintf("The reading at %s in round %s looks like %s.", h.Tap, r.Name, what),
		Evidence:  evidence, Limit: limit,
		Action: fmt.Sprintf("Look at the face of the gauge, read %s again and write the unit that stands on it.", h.Tap),
		Stay:   true, Sources: h.Sources()}
}

// stillUnit looks whether another unit brings the reading that stands apart in a
// no-flow round to the level of the rest.
func (v *view) stillUnit(r round, m mean, worst []suspect) (survey.Alert, bool) {
	for _, x := range worst {
		if len(x.members) != 1 || x.level != "" {
			continue
		}
		h := m.ws[x.members[0]].head
		if fits := v.fitting(r, h, v.asTheRest(h, x)); len(fits) > 0 && v.convincing(fits[0]) {
			return v.unitAlert(r, h, fits, fmt.Sprintf("with nothing flowing the rest shows %.2f m (%s)", x.rest, count(x.restCount, "reading")), v.limits.apart.String()), true
		}
	}
	return survey.Alert{}, false
}

// asTheRest measures how far a head is from what its tap would show without the size of
// the suspect it is; infinite beyond the limit.
func (v *view) asTheRest(h survey.Head, x suspect) func(float64) float64 {
	return func(value float64) float64 {
		if d := math.Abs(value - (h.Value - x.size)); d <= v.limits.apart.value*x.sd {
			return d
		}
		return math.Inf(1)
	}
}
