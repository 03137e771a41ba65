package check

import (
	"fmt"
	"math"
	"strings"

	"tapround/survey"
	"tapround/survey/correct"
	"tapround/survey/unit"
)

// workingRange says which gauges were read low on their scale, near its end or beyond
// it, once for each gauge. Only pressures are asked to be high enough: a meter at no
// flow and a gauge across no loss rightly stand at zero.
func workingRange(v *view) []survey.Alert {
	var out []survey.Alert
	for _, g := range v.s.Gauges {
		if g.Span() <= 0 {
			continue
		}
		var low, high, beyond readingsOf
		lowEnd := v.limits.pinned.value // of the span, per cent: its class error
		if g.Accuracy.OK {
			lowEnd = 100 * g.Accuracy.V
		}
		for _, r := range v.rounds {
			for _, h := range r.heads {
				if h.Gauge != g.Name {
					continue
				}
				for _, x := range h.Rows {
					part := 100 * (x.Value - g.Low) / g.Span()
					switch pressure := h.Quantity == survey.PiezometricHead || h.Quantity == survey.LocalTotalHead; {
					case part > 100 || part < -lowEnd:
						beyond.add(h, x, part)
					case part > v.limits.highScale.value:
						high.add(h, x, part)
					case pressure && part < v.limits.lowScale.value:
						low.add(h, x, part)
					}
				}
			}
		}
		if beyond.n > 0 {
			out = append(out, survey.Alert{Rule: "gauge beyond its scale", Subject: g.Name,
				Statement: fmt.Sprintf("Gauge %s was read beyond its scale %s.", g.Name, beyond.where()),
				Evidence:  beyond.parts(), Limit: "the ends of the scale, the low one less its class error (gauges.csv)",
				Action: "Read again with a gauge of fitting range, and check the zero of this one: a gauge that has been beyond its range may have shifted.",
				Stay:   true, Sources: beyond.sources})
		}
		if high.n > 0 {
			out = append(out, survey.Alert{Rule: "gauge near the end of its scale", Subject: g.Name,
				Statement: fmt.Sprintf("Gauge %s was read near the end of its scale %s.", g.Name, high.where()),
				Evidence:  high.parts(), Limit: v.limits.highScale.String(), Action: "Use a gauge of wider range there.", Sources: high.sources})
		}
		if low.n > 0 {
			out = append(out, survey.Alert{Rule: "gauge low on its scale", Subject: g.Name,
				Statement: fmt.Sprintf("Gauge %s was read low on its scale %s, where its class error weighs most.", g.Name, low.where()),
				Evidence:  low.parts(), Limit: v.limits.lowScale.String(), Action: "Use a gauge of smaller range there.", Sources: low.sources})
		}
	}
	return out
}

// readingsOf collects readings of one gauge with the part of its span they stand at, per cent.
type readingsOf struct {
	n         int
	taps      []string
	rounds    []string
	low, high float64
	sources   []survey.Source
}

func (x *readingsOf) add(h survey.Head, r survey.Reading, part float64) {
	if x.n == 0 {
		x.low, x.high = part, part
	}
	x.n++
	x.low, x.high = math.Min(x.low, part), math.Max(x.high, part)
	x.taps, x.rounds = appendNew(x.taps, h.Tap), appendNew(x.rounds, h.Round)
	x.sources = append(x.sources, r.Source)
}

func (x *readingsOf) where() string {
	return "at " + strings.Join(x.taps, ", ") + " in " + roundsNamed(x.rounds)
}

func (x *readingsOf) parts() string {
	a, b := percent(x.low), percent(x.high)
	if a == b {
		return fmt.Sprintf("%s at %s %% of the span", count(x.n, "reading"), a)
	}
	return fmt.Sprintf("%s at %s to %s %% of the span", count(x.n, "reading"), a, b)
}

func percent(part float64) string { return fmt.Sprintf("%.0f", part) }

// repeats says where repeats of one reading lie further apart than a steady flow and a
// steady hand explain.
func repeats(v *view) []survey.Alert {
	var out []survey.Alert
	for _, r := range v.rounds {
		for _, h := range r.heads {
			low, high := math.Inf(1), math.Inf(-1)
			var written []string
			for _, x := range h.Rows {
				low, high = math.Min(low, x.Value), math.Max(high, x.Value)
				written = append(written, x.Written+" "+x.Unit)
			}
			step := correct.Step(v.gauge(h))
			// Two steps apart is allowed, whatever the conversion did to the last digit.
			if len(h.Rows) < 2 || high-low <= v.limits.repeats.value*step*(1+1e-6) {
				continue
			}
			a := survey.Alert{Rule: "repeats disagree", Subject: h.Tap,
				Statement: fmt.Sprintf("Repeats at %s in round %s lie further apart than the gauge's steps allow: flow or level moved, or one was misread.", h.Tap, r.Name),
				Evidence:  strings.Join(written, ", "), Limit: v.limits.repeats.String(),
				Action: "Wait until the pointer is steady and read again; set aside what was misread with a remark that begins with an exclamation mark.",
				Stay:   true, Sources: h.Sources()}
			if step > 0 {
				a.Evidence += fmt.Sprintf("; %s steps apart", unit.Significant((high-low)/step, 2))
			}
			out = append(out, a)
		}
	}
	return out
}

func appendNew(list []string, x string) []string {
	for _, y := range list {
		if x == y {
			return list
		}
	}
	return append(list, x)
}

// roundsNamed gives "round A", "rounds A, B".
func roundsNamed(names []string) string {
	if len(names) == 1 {
		return "round " + names[0]
	}
	return "rounds " + strings.Join(names, ", ")
}
