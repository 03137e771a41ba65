package survey

import (
	"fmt"
	"math"
)

// vacuum is the lowest pressure there is, Pa above atmosphere: less by some kPa in a
// deep mine, which is allowed for.
const vacuum = -115e3

// farLevel is how far a tap's level may lie from those of its pipe, m, before it is
// pointed out: feet taken for metres differ by more on most ground.
const farLevel = 50.0

func (v *validation) taps() {
	for i := range v.Taps {
		t := &v.Taps[i]
		switch {
		case t.Pipe != "" && t.Point != "":
			v.fatal(t.Source, "point", t.Point, "the tap states a pipe and a point", "leave one of them empty")
		case t.Pipe == "" && t.Point == "":
			v.fatal(t.Source, "pipe", "", "the tap states neither a pipe nor a point", "write the pipe and its place on it, or the point it is at")
		case t.Pipe != "":
			v.tapOnPipe(t)
		case v.point[t.Point] == nil:
			v.unknown(t.Source, "point", t.Point, "points.csv", v.pointNames())
		default:
			v.tapLevel(t, v.point[t.Point].Elevation, v.point[t.Point].Elevation)
		}
		v.tapNumbers(t)
	}
}

func (v *validation) tapOnPipe(t *Tap) {
	p := v.pipe[t.Pipe]
	if p == nil {
		v.unknown(t.Source, "pipe", t.Pipe, "pipes.csv", v.pipeNames())
		return
	}
	if beyond(t.At, p) {
		v.fatal(t.Source, "at", metres(t.At), fmt.Sprintf("lies outside pipe %s, which is %s long", p.Name, metres(p.Length)), "correct the distance, or the pipe's length")
	}
	if a, b := v.point[p.From], v.point[p.To]; a != nil && b != nil {
		v.tapLevel(t, math.Min(a.Elevation, b.Elevation), math.Max(a.Elevation, b.Elevation))
	}
}

func (v *validation) tapLevel(t *Tap, low, high float64) {
	if t.Elevation < low-farLevel || t.Elevation > high+farLevel {
		v.notice(t.Source, "elevation", metres(t.Elevation), fmt.Sprintf("is far from the level of its place, %s", between(low, high)), "look for feet and metres, and for two datums")
	}
}

func between(low, high float64) string {
	if low == high {
		return metres(low)
	}
	return metres(low) + " to " + metres(high)
}

func (v *validation) tapNumbers(t *Tap) {
	switch {
	case t.ElevationSD < 0:
		v.fatal(t.Source, "elevation_sd", metres(t.ElevationSD), "is below nought", "correct the sign")
	case t.ElevationSD > 10:
		v.notice(t.Source, "elevation_sd", metres(t.ElevationSD), "is a very unsure level; the tap's readings then say next to nothing", "look at the number and its unit")
	}
	if b := t.OutletBore; b.OK {
		v.positive(t.Source, "outlet_bore", b.V, millimetres(b.V))
		if b.V > 1 {
			v.notice(t.Source, "outlet_bore", millimetres(b.V), "is an unusual outlet", "look at the number and its unit")
		}
	}
	if c := t.OutletCoefficient; c.OK {
		v.positive(t.Source, "outlet_coefficient", c.V, figures(c.V))
		if c.V > 1 {
			v.notice(t.Source, "outlet_coefficient", figures(c.V), "is above 1, more than the opening could pass without loss", "look at the number; smooth outlets have about 0.9")
		}
	}
}

func (v *validation) gauges() {
	for i := range v.Gauges {
		g := &v.Gauges[i]
		if g.Low >= g.High {
			v.fatal(g.Source, "high", "", fmt.Sprintf("gauge %s has its high end at or below its low end", g.Name), "write the two ends of the scale")
		}
		switch {
		case g.Kind == AbsoluteGauge && g.Low < 0:
			v.fatal(g.Source, "low", figures(1e-3*g.Low)+" kPa", "an absolute pressure is never below nought", "write 0, or the kind pressure if the gauge reads above atmosphere")
		case g.Kind == PressureGauge && g.Low < vacuum:
			v.fatal(g.Source, "low", figures(1e-3*g.Low)+" kPa", "is below a vacuum", "correct the number or its unit")
		}
		v.accuracy(g)
		v.benchChecks(g)
	}
}

func (v *validation) accuracy(g *Gauge) {
	if a := g.Accuracy; a.OK {
		text := figures(100*a.V) + " %"
		switch {
		case a.V <= 0 || a.V > 1:
			v.fatal(g.Source, "accuracy", text, "no gauge has such an accuracy", "write the largest permissible error as per cent of span, such as 1.0 for class 1")
		case a.V > 0.2:
			v.notice(g.Source, "accuracy", text, "is a very poor accuracy", "look at the number: it is per cent of span")
		}
	}
	if r := g.Resolution; r.OK {
		switch {
		case r.V <= 0:
			v.fatal(g.Source, "resolution", "", "must be above nought", "write the smallest step that can be read")
		case g.Span() > 0 && r.V > g.Span()/10:
			v.notice(g.Source, "resolution", "", fmt.Sprintf("is more than a tenth of the span of gauge %s", g.Name), "look at the number: it is the smallest step that can be read, in the gauge's unit")
		}
	}
	switch {
	case g.GainSD < 0:
		v.fatal(g.Source, "gain_sd", figures(100*g.GainSD)+" %", "is below nought", "correct the sign")
	case g.GainSD > 0.2:
		v.notice(g.Source, "gain_sd", figures(100*g.GainSD)+" %", "is a very unsure meter", "look at the number")
	}
}

// benchChecks points out a bench check that is further off than a gauge would be kept
// in use with: mostly two columns changed over, or another unit.
func (v *validation) benchChecks(g *Gauge) {
	for _, b := range g.Checks {
		if span := g.Span(); span > 0 && math.Abs(b.Indicated-b.Applied) > 0.1*span {
			v.notice(b.Source, "indicated", "", fmt.Sprintf("gauge %s was %s %% of its span off at this point", g.Name, figures(math.Round(100*math.Abs(b.Indicated-b.Applied)/span))), "look at the unit, and whether applied and indicated are changed over")
		}
	}
}
