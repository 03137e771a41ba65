// Package correct applies what is known about a gauge to its readings: bench check,
// barometer, and the two parts of its uncertainty. The reading as written stays inside.
//
// References: JCGM 100:2008, 4.3.7 (a limit a becomes a standard uncertainty a/sqrt 3)
// and F.2.2.1 (a resolution d gives d/sqrt 12).
package correct

import (
	"fmt"
	"math"

	"tapround/survey"
	"tapround/survey/water"
)

const (
	// readerShare is the scatter of reading a moving pointer or a flickering digit, in
	// smallest steps (common practice).
	readerShare = 0.3
	// benchShare is what a bench check leaves of the class error.
	benchShare = 0.25
	// noClass is the class assumed for a gauge that states none, per cent of span: the
	// ordinary site gauge (common practice).
	noClass = 0.016
	// weatherSD is the standard uncertainty of the atmosphere at a site where a round
	// states no barometer, Pa: day-to-day weather (common practice).
	weatherSD = 800.0
)

// OwnSD is the standard uncertainty that one reading has of its own, in SI of the
// gauge: the step's rectangle and the reader's scatter.
func OwnSD(g survey.Gauge) (step, reader float64) {
	d := g.Resolution.V
	if !g.Resolution.OK {
		d = 0.2 * class(g) * g.Span()
	}
	return d / math.Sqrt(12), readerShare * d
}

func class(g survey.Gauge) float64 { return g.Accuracy.Or(noClass) }

// Readings corrects every reading that is in use, in their order.
func Readings(s *survey.Survey) ([]survey.Corrected, survey.Problems) {
	gauges := map[string]survey.Gauge{}
	for _, g := range s.Gauges {
		gauges[g.Name] = g
	}
	rounds := map[string]survey.Round{}
	for _, r := range s.Rounds {
		rounds[r.Name] = r
	}
	shut := shutPipes(s)
	taps := map[string]survey.Tap{}
	for _, t := range s.Taps {
		taps[t.Name] = t
	}
	var out []survey.Corrected
	var problems survey.Problems
	for i := range s.Readings {
		r := &s.Readings[i]
		if r.SetAside != "" {
			continue
		}
		if p := taps[r.Tap].Pipe; p != "" && shut[r.Round][p] {
			r.SetAside = fmt.Sprintf("pipe %s is shut in round %s", p, r.Round)
			problems = append(problems, survey.Problem{Source: r.Source, Severity: survey.SetAside, Column: "tap", Text: r.Tap,
				Reason: r.SetAside, Remedy: "nothing flows there; correct conditions.csv if it was open"})
			continue
		}
		g, ok := gauges[r.Gauge]
		if !ok {
			r.SetAside = "no gauge named"
			problems = append(problems, survey.Problem{Source: r.Source, Severity: survey.SetAside, Column: "gauge", Text: r.Gauge,
				Reason: "the reading names no gauge, so nothing is known of its error", Remedy: "write the gauge's number, or add the gauge to gauges.csv"})
			continue
		}
		out = append(out, one(s, *r, g, rounds[r.Round]))
	}
	return out, problems
}

func shutPipes(s *survey.Survey) map[string]map[string]bool {
	out := map[string]map[string]bool{}
	for _, r := range s.Rounds {
		out[r.Name] = s.InForce(r.Name).Shut
	}
	return out
}

func one(s *survey.Survey, r survey.Reading, g survey.Gauge, round survey.Round) survey.Corrected {
	c := survey.Corrected{Reading: r, Pressure: r.Value, Gain: g.GainSD}
	step, reader := OwnSD(g)
	c.Own = math.Hypot(step, reader)
	if r.HalfRange > 0 {
		c.Own = math.Hypot(c.Own, r.HalfRange/math.Sqrt(3))
	}
	limit := class(g) * g.Span()
	if !g.Accuracy.OK {
		c.Caveats = append(c.Caveats, survey.Caveat(fmt.Sprintf("gauge %s states no accuracy: taken as class 1.6", g.Name)))
	}
	if !g.Resolution.OK {
		c.Caveats = append(c.Caveats, survey.Caveat(fmt.Sprintf("gauge %s states no resolution: taken as a fifth of its class error", g.Name)))
	}
	if len(g.Checks) > 0 {
		e := benchError(g.Checks, r.Value)
		c.Pressure -= e
		c.Applied = append(c.Applied, survey.Correction{What: "bench check", Amount: -e})
		limit *= benchShare
	}
	c.Shared = limit / math.Sqrt(3)
	if g.Kind == survey.AbsoluteGauge {
		b := round.Barometer
		what := "barometer of the round"
		if !b.OK {
			b = survey.Some(water.StandardAtmosphere(s.Info.SiteLevel))
			what = "standard atmosphere at the site's level"
			c.BarometerSD = weatherSD
			c.Caveats = append(c.Caveats, "no barometer stated: the standard atmosphere was used")
		}
		c.Pressure -= b.V
		c.Applied = append(c.Applied, survey.Correction{What: what, Amount: -b.V})
	}
	if r.Value > g.High || r.Value < g.Low {
		c.Caveats = append(c.Caveats, survey.Caveat(fmt.Sprintf("beyond the scale of gauge %s", g.Name)))
	}
	return c
}

// benchError is indicated minus applied at an indication: linear between the points,
// the end points' error beyond them.
func benchError(checks []survey.BenchCheck, v float64) float64 {
	cs := append([]survey.BenchCheck(nil), checks...)
	for i := 1; i < len(cs); i++ {
		for j := i; j > 0 && cs[j].Indicated < cs[j-1].Indicated; j-- {
			cs[j], cs[j-1] = cs[j-1], cs[j]
		}
	}
	e := func(i int) float64 { return cs[i].Indicated - cs[i].Applied }
	last := len(cs) - 1
	switch {
	case v <= cs[0].Indicated:
		return e(0)
	case v >= cs[last].Indicated:
		return e(last)
	}
	for i := 1; i <= last; i++ {
		if v <= cs[i].Indicated {
			span := cs[i].Indicated - cs[i-1].Indicated
			if span == 0 {
				return (e(i) + e(i-1)) / 2
			}
			t := (v - cs[i-1].Indicated) / span
			return (1-t)*e(i-1) + t*e(i)
		}
	}
	return e(last)
}
