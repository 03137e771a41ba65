package head

import (
	"fmt"
	"math"

	"tapround/survey"
	"tapround/survey/correct"
	"tapround/survey/water"
)

// converter is the survey looked up by name, with the site's gravity.
type converter struct {
	s       *survey.Survey
	gauges  correct.Gauges
	taps    map[string]survey.Tap
	rounds  map[string]survey.Round
	gravity float64
}

func newConverter(s *survey.Survey) *converter {
	c := &converter{s: s, gauges: correct.GaugesOf(s), taps: map[string]survey.Tap{}, rounds: map[string]survey.Round{},
		gravity: water.Gravity(s.Info.Latitude, s.Info.SiteLevel)}
	for _, t := range s.Taps {
		c.taps[t.Name] = t
	}
	for _, r := range s.Rounds {
		c.rounds[r.Name] = r
	}
	return c
}

func (c *converter) density(round string) float64 {
	return water.Density(c.rounds[round].WaterTemperature.Or(c.s.Info.WaterTemperature))
}

// weight is rho g, Pa a metre of water; NaN where one of them is not defined.
func (c *converter) weight(round string) float64 { return c.density(round) * c.gravity }

// gauge gives the gauge of a corrected reading; correct has seen to it that there is one.
func (c *converter) gauge(r survey.Corrected) survey.Gauge {
	g, _, _ := c.gauges.For(r.Reading)
	return g
}

// atTap brings a pressure from the gauge's centre to the tap's level.
func (c *converter) atTap(r survey.Corrected, g survey.Gauge, p float64) float64 {
	if g.Line == survey.AirLine {
		return p
	}
	return p + c.weight(r.Round)*r.GaugeHeight
}

// problems says what keeps density or gravity from being known in the rounds of cs.
func (c *converter) problems(cs []survey.Corrected) survey.Problems {
	var out survey.Problems
	if math.IsNaN(c.gravity) {
		out = append(out, survey.Problem{Source: survey.Source{File: "survey.csv"}, Severity: survey.Fatal, Column: "latitude",
			Text: fmt.Sprint(c.s.Info.Latitude), Reason: "a latitude lies between -90 and 90 degrees", Remedy: "mend latitude in survey.csv"})
	}
	told := map[string]bool{}
	for _, r := range cs {
		if told[r.Round] || !math.IsNaN(c.density(r.Round)) {
			continue
		}
		told[r.Round] = true
		round := c.rounds[r.Round]
		p := survey.Problem{Source: round.Source, Severity: survey.Fatal, Column: "water_temperature",
			Text:   fmt.Sprint(round.WaterTemperature.Or(c.s.Info.WaterTemperature)),
			Reason: fmt.Sprintf("the density of water in round %s is not known at this temperature; it must lie between -20 and 110 C", r.Round),
			Remedy: "correct the temperature or its unit"}
		if !round.WaterTemperature.OK {
			p.Source = survey.Source{File: "survey.csv"}
		}
		out = append(out, p)
	}
	return out
}

// Line is what one line of readings says alone, for the table of heads.
type Line struct {
	Pressure     survey.Maybe // gauge pressure at the tap, of a jet at the pitot; Pa
	PressureHead survey.Maybe // m of the water in the pipe
	Piezometric  survey.Maybe // m above datum
	Total        survey.Maybe // m above datum, at the pitot opening
	Velocity     survey.Maybe // m, at the pitot opening
	Elevation    survey.Maybe // m, of the tap
}

// OfLine converts each line alone, by its place in the files, without averaging.
func OfLine(s *survey.Survey, cs []survey.Corrected) map[survey.Source]Line {
	c := newConverter(s)
	out := make(map[survey.Source]Line, len(cs))
	for _, r := range cs {
		w := c.weight(r.Round)
		z := c.taps[r.Tap].Elevation
		l := Line{Elevation: survey.Some(z)}
		switch r.Kind {
		case survey.Static, survey.TotalHead:
			p := c.atTap(r, c.gauge(r), r.Pressure)
			l.Pressure, l.PressureHead = survey.Some(p), survey.Some(p/w)
			if r.Kind == survey.Static {
				l.Piezometric = survey.Some(z + p/w)
			} else {
				l.Total = survey.Some(z + p/w)
			}
		case survey.Jet:
			l.Pressure = survey.Some(c.atTap(r, c.gauge(r), r.Pressure))
		case survey.Velocity:
			l.Velocity = survey.Some(r.Pressure / w)
		case survey.WaterLevel:
			l.Piezometric = survey.Some(r.Pressure)
		}
		out[r.Source] = l
	}
	return out
}
