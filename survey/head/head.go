// Package head turns corrected readings into heads on the survey's datum: repeats are
// averaged, pressures brought to the tap's level, and the standard uncertainty split
// into what is the reading's own, what it shares with its gauge and what it shares
// with its tap (JCGM 100:2008).
//
//	piezometric head  h = z_tap + p/(rho g), a water-filled gauge line adding rho g times
//	                  the gauge's height above the tap, an air-filled one nothing
//	local total head  the same of the impact pressure at a pitot opening
//	velocity head     dp/(rho g)
//	jet               Q = C A sqrt(2 p/rho), drawn off at the tap's point
//	difference        dp/(rho g) with water-filled lines, for the levels cancel; with
//	                  air-filled ones z_tap - z_other is added
package head

import (
	"math"

	"tapround/survey"
	"tapround/survey/correct"
	"tapround/survey/water"
)

// Line is what one line of readings says, for the table of heads.
type Line struct {
	Pressure     survey.Maybe // gauge pressure at the tap, Pa
	PressureHead survey.Maybe
	Piezometric  survey.Maybe
	Total        survey.Maybe // local, of a total reading
	Velocity     survey.Maybe // local, of a velocity reading
	Elevation    survey.Maybe
}

type converter struct {
	s      *survey.Survey
	taps   map[string]survey.Tap
	gauges map[string]survey.Gauge
	rounds map[string]survey.Round
	g      float64
}

func newConverter(s *survey.Survey) *converter {
	c := &converter{s: s, taps: map[string]survey.Tap{}, gauges: map[string]survey.Gauge{}, rounds: map[string]survey.Round{},
		g: water.Gravity(s.Info.Latitude, s.Info.SiteLevel)}
	for _, t := range s.Taps {
		c.taps[t.Name] = t
	}
	for _, g := range s.Gauges {
		c.gauges[g.Name] = g
	}
	for _, r := range s.Rounds {
		c.rounds[r.Name] = r
	}
	return c
}

func (c *converter) weight(round string) float64 {
	return c.g * c.density(round)
}

func (c *converter) density(round string) float64 {
	return water.Density(c.rounds[round].WaterTemperature.Or(c.s.Info.WaterTemperature))
}

// key groups repeats of one reading.
type key struct {
	round, tap, other, gauge string
	kind                     survey.ReadingKind
	height                   float64
	depth                    survey.Maybe
}

// FromCorrected averages repeats and converts, in the order of first lines.
func FromCorrected(s *survey.Survey, cs []survey.Corrected) ([]survey.Head, survey.Problems) {
	c := newConverter(s)
	var problems survey.Problems
	var order []key
	groups := map[key][]survey.Corrected{}
	for _, r := range cs {
		if p, bad := c.jetProblem(r); bad {
			problems = append(problems, p)
			continue
		}
		k := key{r.Round, r.Tap, r.OtherTap, r.Gauge, r.Kind, r.GaugeHeight, r.Depth}
		if groups[k] == nil {
			order = append(order, k)
		}
		groups[k] = append(groups[k], r)
	}
	var out []survey.Head
	for _, k := range order {
		out = append(out, c.head(groups[k]))
	}
	return out, problems
}

func (c *converter) head(rs []survey.Corrected) survey.Head {
	r := rs[0]
	mean, own := average(rs, c.gauges[r.Gauge])
	w := c.weight(r.Round)
	tap := c.taps[r.Tap]
	h := survey.Head{Round: r.Round, Tap: r.Tap, OtherTap: r.OtherTap, Gauge: r.Gauge, Kind: r.Kind, Depth: r.Depth,
		GaugeSD: r.Shared, GainSD: r.Gain, Elevation: tap.Elevation, Density: c.density(r.Round), Gravity: c.g}
	for _, x := range rs {
		h.Rows = append(h.Rows, x.Reading)
		h.Caveats = append(h.Caveats, x.Caveats...)
	}
	h.Value, h.Own, h.PerGauge = mean/w, own/w, 1/w
	switch r.Kind {
	case survey.Static, survey.TotalHead:
		p := c.atTap(r, mean)
		h.Quantity = survey.PiezometricHead
		if r.Kind == survey.TotalHead {
			h.Quantity = survey.LocalTotalHead
		}
		h.Pressure = survey.Some(p)
		h.Value = tap.Elevation + p/w
		h.PerTap, h.TapSD = 1, tap.ElevationSD
		h.BarometerSD = r.BarometerSD / w
	case survey.Velocity:
		h.Quantity = survey.LocalVelocity
	case survey.Difference:
		h.Quantity = survey.HeadDifference
		if c.gauges[r.Gauge].Line == survey.AirLine {
			other := c.taps[r.OtherTap]
			h.Value += tap.Elevation - other.Elevation
			h.PerTap, h.TapSD, h.PerOther, h.OtherTapSD = 1, tap.ElevationSD, -1, other.ElevationSD
		}
	case survey.FlowRate:
		h.Quantity = survey.VolumeFlow
		h.Value, h.Own, h.PerGauge = mean, own, 1
	case survey.Jet:
		// p = rho/2 (Q/(C A))^2, so dQ/dp = Q/(2p).
		p := c.atTap(r, mean)
		q := tap.OutletCoefficient.V * math.Pi / 4 * tap.OutletBore.V * tap.OutletBore.V * math.Sqrt(2*p/h.Density)
		h.Quantity = survey.OutletFlow
		h.Pressure = survey.Some(p)
		h.Value, h.Own, h.PerGauge = q, own*q/(2*p), q/(2*p)
	case survey.WaterLevel:
		h.Quantity = survey.FreeWaterSurface
		h.Value, h.Own, h.PerGauge = mean, own, 1
	}
	return h
}

// jetProblem: a jet needs the outlet's bore and coefficient, and a pressure.
func (c *converter) jetProblem(r survey.Corrected) (survey.Problem, bool) {
	if r.Kind != survey.Jet {
		return survey.Problem{}, false
	}
	t := c.taps[r.Tap]
	p := survey.Problem{Source: r.Source, Severity: survey.SetAside, Column: "reading", Text: r.Written}
	switch {
	case !t.OutletBore.OK || !t.OutletCoefficient.OK:
		p.Reason = "the jet's flow needs the bore and the coefficient of the outlet of tap " + t.Name
		p.Remedy = "fill outlet_bore and outlet_coefficient in taps.csv"
	case c.atTap(r, r.Pressure) <= 0:
		p.Reason = "a jet has a pressure above zero"
		p.Remedy = "read it again, with the pitot in the middle of the jet"
	default:
		return survey.Problem{}, false
	}
	return p, true
}

// atTap brings a pressure from the gauge's centre to the tap's level.
func (c *converter) atTap(r survey.Corrected, p float64) float64 {
	if c.gauges[r.Gauge].Line == survey.AirLine {
		return p
	}
	return p + c.weight(r.Round)*r.GaugeHeight
}

// average gives the mean of repeats and its own standard uncertainty: the step's
// rectangle does not average out, the scatter does; the scatter seen in a few repeats
// never counts for less than that of reading a moving pointer.
func average(rs []survey.Corrected, g survey.Gauge) (mean, own float64) {
	n := float64(len(rs))
	half := 0.0
	for _, r := range rs {
		mean += r.Pressure / n
		half = math.Max(half, r.HalfRange/math.Sqrt(3))
	}
	scatter := 0.0
	for _, r := range rs {
		scatter += (r.Pressure - mean) * (r.Pressure - mean)
	}
	if len(rs) > 1 {
		scatter = math.Sqrt(scatter / (n - 1))
	}
	step, reader := correct.OwnSD(g)
	spread := math.Max(scatter, reader) / math.Sqrt(n)
	return mean, math.Sqrt(step*step + spread*spread + half*half/n)
}

// OfLine converts one line alone, for the table of heads.
func OfLine(s *survey.Survey, cs []survey.Corrected) map[survey.Source]Line {
	c := newConverter(s)
	out := make(map[survey.Source]Line, len(cs))
	for _, r := range cs {
		w := c.weight(r.Round)
		tap := c.taps[r.Tap]
		l := Line{Elevation: survey.Some(tap.Elevation)}
		switch r.Kind {
		case survey.Static, survey.TotalHead:
			p := c.atTap(r, r.Pressure)
			l.Pressure, l.PressureHead = survey.Some(p), survey.Some(p/w)
			h := survey.Some(tap.Elevation + p/w)
			if r.Kind == survey.Static {
				l.Piezometric = h
			} else {
				l.Total = h
			}
		case survey.Velocity:
			l.Velocity = survey.Some(r.Pressure / w)
		case survey.WaterLevel:
			l.Piezometric = survey.Some(r.Pressure)
		}
		out[r.Source] = l
	}
	return out
}
