// Package correct applies what is known about a gauge to its readings: bench check,
// barometer, and the two parts of its standard uncertainty. The reading as written
// stays inside, untouched.
//
// # What a reading is uncertain by
//
// Its own part, new in each reading: the rectangle of the smallest step d, d/sqrt 12
// [JCGM100 F.2.2.1]; reading a moving pointer or a flickering digit, 0.3 d (common
// practice); and, where the crew wrote a range, half of it over sqrt 3.
//
// The part shared by all readings of one gauge: the class error a, per cent of span,
// as a rectangle, a/sqrt 3 [JCGM100 4.3.7]; after a bench check a quarter of it. It is
// one unknown offset for the whole survey, never noise. The span of a compound gauge
// is the whole of it: 6 bar for -1 to +5 bar.
//
// The part shared by the absolute gauges of one round without a barometer: the
// weather.
//
// Not in these: the effect of the air's temperature on the gauge, which for a Bourdon
// tube may reach 0.04 % of full scale a kelvin away from 20 C [EN837 9.2, by way of a
// maker's manual], and the wider error of the outer quarters of the scale that some
// grades allow; state the larger figure as the gauge's accuracy where they matter.
//
// References:
//
//	[JCGM100] JCGM 100:2008, Guide to the expression of uncertainty in measurement.
//	[EN837]   EN 837-1:1996, Pressure gauges, Bourdon tube pressure gauges.
package correct

import (
	"fmt"
	"math"

	"tapround/survey"
	"tapround/survey/water"
)

// weatherSD is the standard uncertainty of the standard atmosphere as the real one at a
// site, Pa. Day-to-day pressure at one place scatters by some 0.3 kPa in the tropics
// and 1 kPa at middle latitudes (one standard deviation); 0.8 kPa, 0.08 m of water, is
// taken everywhere (common practice).
const weatherSD = 800.0

// Readings corrects every reading that is in use, in the order of the survey: one
// Corrected for each. Pressure is the corrected value in SI of the reading's kind: Pa
// above atmosphere for a pressure, m3/s for a flow, m for a level.
//
// A reading that cannot be used is marked in s as set aside and comes back as a
// Problem: its pipe is shut in that round, its gauge is not known or cannot measure
// such a thing, its round or tap is not in the tables. Readings already set aside are
// passed over.
func Readings(s *survey.Survey) ([]survey.Corrected, survey.Problems) {
	b := newBench(s)
	var out []survey.Corrected
	var problems survey.Problems
	for i, r := range s.Readings {
		if r.SetAside != "" {
			continue
		}
		if p, bad := b.unusable(r); bad {
			problems = append(problems, s.PutAside(i, p))
			continue
		}
		g, p, ok := b.gauges.For(r)
		if !ok {
			problems = append(problems, s.PutAside(i, p))
			continue
		}
		c, p, ok := b.correct(r, g)
		if !ok {
			problems = append(problems, s.PutAside(i, p))
			continue
		}
		out = append(out, c)
	}
	return out, problems
}

// bench is the survey looked up by name.
type bench struct {
	siteLevel float64
	gauges    Gauges
	rounds    map[string]survey.Round
	taps      map[string]survey.Tap
	shut      map[string]map[string]bool // by round, then pipe
}

func newBench(s *survey.Survey) *bench {
	b := &bench{siteLevel: s.Info.SiteLevel, gauges: GaugesOf(s), rounds: map[string]survey.Round{},
		taps: map[string]survey.Tap{}, shut: map[string]map[string]bool{}}
	for _, r := range s.Rounds {
		b.rounds[r.Name] = r
		b.shut[r.Name] = s.InForce(r.Name).Shut
	}
	for _, t := range s.Taps {
		b.taps[t.Name] = t
	}
	return b
}

// unusable says why a reading's round or taps keep it from being used.
func (b *bench) unusable(r survey.Reading) (survey.Problem, bool) {
	if _, ok := b.rounds[r.Round]; !ok {
		return survey.Problem{Column: "round", Text: r.Round, Reason: "this round is not in rounds.csv",
			Remedy: "add the round, or write the name of the round the reading belongs to"}, true
	}
	taps := []struct{ column, name string }{{"tap", r.Tap}}
	if r.Kind == survey.Difference {
		taps = append(taps, struct{ column, name string }{"other_tap", r.OtherTap})
	}
	for _, x := range taps {
		t, ok := b.taps[x.name]
		switch {
		case !ok:
			return survey.Problem{Column: x.column, Text: x.name, Reason: "this tap is not in taps.csv",
				Remedy: "add the tap with its level, or write the name it has there"}, true
		case t.Pipe != "" && b.shut[r.Round][t.Pipe]:
			return survey.Problem{Column: x.column, Text: x.name,
				Reason: fmt.Sprintf("pipe %s is shut in round %s, so the reading says nothing of the works in use", t.Pipe, r.Round),
				Remedy: "correct conditions.csv if the pipe was open"}, true
		}
	}
	return survey.Problem{}, false
}

// correct applies bench check and barometer and states the uncertainties.
func (b *bench) correct(r survey.Reading, g survey.Gauge) (survey.Corrected, survey.Problem, bool) {
	c := survey.Corrected{Reading: r, Pressure: r.Value, Gain: g.GainSD}
	step, reader := OwnSD(g)
	c.Own = math.Sqrt(step*step + reader*reader + r.HalfRange*r.HalfRange/3)
	limit := classError(g)
	caveat := func(format string, args ...any) {
		c.Caveats = append(c.Caveats, survey.Caveat(fmt.Sprintf(format, args...)))
	}
	if g.Name == "" {
		caveat("no gauge named: taken as one of the gauges of this kind and unit, which are all alike, without bench check")
	}
	if !g.Accuracy.OK {
		caveat("%s states no accuracy: taken as class %g", nameOf(g), 100*noClass)
	}
	if !g.Resolution.OK {
		caveat("%s states no resolution: taken as a tenth of its class error", nameOf(g))
	}
	if r.Value > g.High || r.Value < g.Low-limit {
		// Below the low end by no more than its class error a gauge at zero only
		// shows its offset.
		caveat("beyond the scale of %s", nameOf(g))
	}
	if len(g.Checks) > 0 {
		e, inside := benchError(g.Checks, r.Value)
		c.Pressure -= e
		c.Applied = append(c.Applied, survey.Correction{What: "bench check", Amount: -e})
		limit *= benchShare
		if !inside {
			caveat("beyond the points of the bench check of %s: the correction of the nearest one holds", nameOf(g))
		}
		if severalDates(g.Checks) {
			caveat("bench checks of %s of several dates are used together", nameOf(g))
		}
	}
	c.Shared = limit / math.Sqrt(3)
	if g.Kind != survey.AbsoluteGauge {
		return c, survey.Problem{}, true
	}
	barometer, what := b.rounds[r.Round].Barometer, "barometer of the round"
	if !barometer.OK {
		barometer, what = survey.Some(water.StandardAtmosphere(b.siteLevel)), "standard atmosphere at the site's level"
		c.BarometerSD = weatherSD
		caveat("round %s states no barometer: the standard atmosphere at the site's level was used", r.Round)
		if math.IsNaN(barometer.V) {
			return c, survey.Problem{Column: "gauge", Text: r.Gauge,
				Reason: fmt.Sprintf("an absolute gauge needs the barometer, and the standard atmosphere is not defined at a site level of %g m", b.siteLevel),
				Remedy: "state the barometer in rounds.csv, or mend site_level in survey.csv"}, false
		}
	}
	c.Pressure -= barometer.V
	c.Applied = append(c.Applied, survey.Correction{What: what, Amount: -barometer.V})
	return c, survey.Problem{}, true
}

func nameOf(g survey.Gauge) string {
	if g.Name == "" {
		return "the gauge"
	}
	return "gauge " + g.Name
}
