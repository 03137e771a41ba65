// Package head turns corrected readings into heads on the survey's datum: repeats are
// averaged, pressures brought to the tap's level, and the standard uncertainty is
// split into what is the reading's own, what it shares with its gauge and what it
// shares with its tap [JCGM100].
//
//	piezometric head  h = z_tap + p/(rho g), p at the tap
//	local total head  the same of the impact pressure at a pitot opening
//	velocity head     dp/(rho g)
//	difference        h_tap - h_other = dp/(rho g) with water-filled lines, in which the
//	                  levels cancel; with air-filled ones z_tap - z_other is added
//	jet               Q = C A sqrt(2 p/rho) from the pitot pressure in a free jet
//	flow, water level as read
//
// A water-filled gauge line adds rho g times the gauge's height above the tap to the
// pressure, so that h = z_gauge + p_gauge/(rho g); an air-filled one adds nothing. A
// pitot opening's own height in the bore drops out with a water-filled line.
//
// rho is that of water at 0.1 MPa at the round's temperature (the survey's where the
// round states none), g that of the site's latitude and level. Water at pressure is
// denser: a head of 50 m of water is given 6 mm, one of 100 m 24 mm too high, which
// all but cancels between taps at like pressure.
//
// # Repeats
//
// Lines with the same round, taps, kind, gauge, gauge height and depth are repeats of
// one reading. Their mean counts; its own standard uncertainty is
//
//	own^2 = d^2/12 + max(s, 0.3 d)^2/n + sum of (half range)^2/3 / n^2
//
// with d the smallest step and s the scatter (standard deviation) of the n repeats.
// The step's rectangle is not divided by n, since one steady pressure is rounded alike
// each time, and the scatter never counts for less than that of reading a pointer,
// since a few repeats that agree are no proof of a steadier hand.
//
// # Signs
//
// Value = model + PerGauge offset + PerTap level error + PerOther level error of the
// other tap + own error, with offset shown minus true and level error recorded minus true.
//
// References:
//
//	[JCGM100] JCGM 100:2008, 4.2.3 (mean of repeats), 5.1.2 (root sum of squares).
package head

import (
	"math"
	"slices"

	"tapround/survey"
	"tapround/survey/correct"
)

// repeat is what lines must have in common to be repeats of one reading.
type repeat struct {
	round, tap, other, gauge string
	kind                     survey.ReadingKind
	height                   float64
	depth                    survey.Maybe
}

// FromCorrected averages repeats and converts, in the order of their first lines. A
// jet whose outlet is not described, or without pressure, is marked in s as set aside
// and comes back as a Problem. A water temperature or a latitude for which density or
// gravity is not defined is Fatal, and the heads it bears on are left out.
func FromCorrected(s *survey.Survey, cs []survey.Corrected) ([]survey.Head, survey.Problems) {
	c := newConverter(s)
	problems := c.problems(cs)
	var order []repeat
	groups := map[repeat][]survey.Corrected{}
	for _, r := range cs {
		if p, bad := c.jetProblem(s, r); bad {
			problems = append(problems, p)
			continue
		}
		if math.IsNaN(c.weight(r.Round)) {
			continue
		}
		k := repeat{r.Round, r.Tap, r.OtherTap, r.Gauge, r.Kind, r.GaugeHeight, r.Depth}
		if groups[k] == nil {
			order = append(order, k)
		}
		groups[k] = append(groups[k], r)
	}
	out := make([]survey.Head, 0, len(order))
	for _, k := range order {
		out = append(out, c.head(groups[k]))
	}
	return out, problems
}

// head converts the repeats of one reading.
func (c *converter) head(rs []survey.Corrected) survey.Head {
	r := rs[0]
	g := c.gauge(r)
	mean, own := average(rs, g)
	w := c.weight(r.Round)
	tap := c.taps[r.Tap]
	h := survey.Head{Round: r.Round, Tap: r.Tap, OtherTap: r.OtherTap, Gauge: r.Gauge, Kind: r.Kind, Depth: r.Depth,
		GaugeSD: r.Shared, GainSD: r.Gain, Elevation: tap.Elevation, Density: c.density(r.Round), Gravity: c.gravity}
	for _, x := range rs {
		h.Rows = append(h.Rows, x.Reading)
		for _, caveat := range x.Caveats {
			if !slices.Contains(h.Caveats, caveat) {
				h.Caveats = append(h.Caveats, caveat)
			}
		}
	}
	h.Value, h.Own, h.PerGauge, h.BarometerSD = mean/w, own/w, 1/w, r.BarometerSD/w
	proportional := true // Value is what the gauge showed, but for a factor
	switch r.Kind {
	case survey.Static, survey.TotalHead:
		h.Quantity = survey.PiezometricHead
		if r.Kind == survey.TotalHead {
			h.Quantity = survey.LocalTotalHead
		}
		p := c.atTap(r, g, mean)
		h.Pressure = survey.Some(p)
		h.Value = tap.Elevation + p/w
		h.PerTap, h.TapSD = 1, tap.ElevationSD
		proportional = false
	case survey.Velocity:
		h.Quantity = survey.LocalVelocity
	case survey.Difference:
		h.Quantity = survey.HeadDifference
		if g.Line == survey.AirLine {
			other := c.taps[r.OtherTap]
			h.Value += tap.Elevation - other.Elevation
			h.PerTap, h.TapSD, h.PerOther, h.OtherTapSD = 1, tap.ElevationSD, -1, other.ElevationSD
			proportional = false
		}
	case survey.FlowRate:
		h.Quantity = survey.VolumeFlow
		h.Value, h.Own, h.PerGauge = mean, own, 1
	case survey.Jet:
		q, slope, p := c.jet(r, g, mean)
		h.Quantity = survey.OutletFlow
		h.Pressure = survey.Some(p)
		h.Value, h.Own, h.PerGauge, h.BarometerSD = q, own*slope, slope, r.BarometerSD*slope
		proportional = false
	case survey.WaterLevel:
		h.Quantity = survey.FreeWaterSurface
		h.Value, h.Own, h.PerGauge = mean, own, 1
		proportional = false
	}
	if !proportional {
		// A gain error acts on what the gauge showed, and Value counts from the datum:
		// at this reading it is as good as more offset.
		h.GaugeSD, h.GainSD = math.Hypot(h.GaugeSD, h.GainSD*mean), 0
	}
	if r.Gauge == "" {
		// Nothing else was read with this gauge, so its class error is the reading's own.
		h.Own = math.Sqrt(h.Own*h.Own + math.Pow(h.PerGauge*h.GaugeSD, 2) + math.Pow(h.GainSD*h.Value, 2))
		h.PerGauge, h.GaugeSD, h.GainSD = 0, 0, 0
	}
	return h
}

// average gives the mean of repeats in SI of the gauge and its own standard
// uncertainty, as the package comment states it.
func average(rs []survey.Corrected, g survey.Gauge) (mean, own float64) {
	n := float64(len(rs))
	ranges := 0.0
	for _, r := range rs {
		mean += r.Pressure / n
		ranges += r.HalfRange * r.HalfRange / 3
	}
	scatter := 0.0
	if len(rs) > 1 {
		for _, r := range rs {
			scatter += (r.Pressure - mean) * (r.Pressure - mean) / (n - 1)
		}
	}
	step, reader := correct.OwnSD(g)
	return mean, math.Sqrt(step*step + math.Max(scatter, reader*reader)/n + ranges/(n*n))
}
