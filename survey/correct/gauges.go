package correct

import (
	"fmt"
	"math"

	"tapround/survey"
	"tapround/survey/unit"
)

const (
	// noClass is the accuracy taken for a gauge that states none, fraction of span: an
	// ordinary site gauge of class 1.6 (common practice).
	noClass = 0.016
	// noStep is the smallest step taken for a gauge that states none, in class errors:
	// a dial of class 1.0 is read to a tenth of a per cent of its span (common practice).
	noStep = 0.1
	// readerShare is the standard uncertainty of reading a moving pointer or a
	// flickering digit, in smallest steps (common practice).
	readerShare = 0.3
)

// Step is the smallest readable step of a gauge, SI of its kind: as stated, else a
// tenth of its class error.
func Step(g survey.Gauge) float64 { return g.Resolution.Or(noStep * classError(g)) }

// OwnSD gives the two parts of what one reading is uncertain by on its own, SI of the
// gauge: the step's rectangle d/sqrt 12, which repeats of one pressure share, and the
// reader's 0.3 d, which is new in each.
func OwnSD(g survey.Gauge) (step, reader float64) {
	d := Step(g)
	return d / math.Sqrt(12), readerShare * d
}

// classError is the maximum permissible error, SI.
func classError(g survey.Gauge) float64 { return g.Accuracy.Or(noClass) * g.Span() }

// Gauges finds the gauge that a reading was made with.
type Gauges struct {
	list   []survey.Gauge
	byName map[string]survey.Gauge
}

// GaugesOf makes the gauges of a survey ready to be found.
func GaugesOf(s *survey.Survey) Gauges {
	g := Gauges{list: s.Gauges, byName: make(map[string]survey.Gauge, len(s.Gauges))}
	for _, x := range s.Gauges {
		g.byName[x.Name] = x
	}
	return g
}

// For gives the gauge of a reading. A reading that names none is used only where all
// gauges of its kind and unit are alike in range, accuracy, resolution and line: it
// then counts as read with one more such gauge, unchecked and without a name, whose
// class error nothing else shares. Otherwise ok is false and the problem says what to do.
func (gs Gauges) For(r survey.Reading) (g survey.Gauge, p survey.Problem, ok bool) {
	refuse := func(reason, remedy string) (survey.Gauge, survey.Problem, bool) {
		return survey.Gauge{}, survey.Problem{Column: "gauge", Text: r.Gauge, Reason: reason, Remedy: remedy}, false
	}
	if r.Gauge != "" {
		g, known := gs.byName[r.Gauge]
		switch {
		case !known:
			return refuse("this gauge is not in gauges.csv, so nothing is known of its error", "add the gauge with its range and accuracy")
		case !measures(g.Kind, r.Kind):
			return refuse(fmt.Sprintf("a gauge of kind %s cannot take a %s reading", g.Kind, r.Kind), "correct the gauge's name, its kind in gauges.csv, or the reading's kind")
		}
		return g, survey.Problem{}, true
	}
	for _, x := range gs.list {
		if !measures(x.Kind, r.Kind) || !sameUnit(x, r.Unit) {
			continue
		}
		x.Name, x.Checked, x.Checks, x.Note, x.Source = "", "", nil, "", survey.Source{}
		switch {
		case !ok:
			g, ok = x, true
		case !alike(g, x):
			return refuse("the reading names no gauge, and the gauges of its kind and unit are not alike, so nothing is known of its error", "write the gauge's name")
		}
	}
	if !ok {
		return refuse("the reading names no gauge, and gauges.csv has none of its kind and unit, so nothing is known of its error", "write the gauge's name, or add the gauge to gauges.csv")
	}
	return g, survey.Problem{}, true
}

// measures reports whether a gauge of kind g can take a reading of kind r. A pressure
// gauge and one of two connections stand in for each other, the second with one side
// open to the air; an absolute gauge shows no difference.
func measures(g survey.GaugeKind, r survey.ReadingKind) bool {
	switch r {
	case survey.FlowRate:
		return g == survey.FlowMeter
	case survey.WaterLevel:
		return g == survey.LevelGauge
	case survey.Velocity, survey.Difference:
		return g == survey.DifferenceGauge || g == survey.PressureGauge
	}
	return g == survey.PressureGauge || g == survey.AbsoluteGauge || g == survey.DifferenceGauge
}

// alike compares all that bears on a reading, of gauges already stripped of their names.
func alike(a, b survey.Gauge) bool {
	return a.Kind == b.Kind && a.Low == b.Low && a.High == b.High && a.Accuracy == b.Accuracy &&
		a.Resolution == b.Resolution && a.GainSD == b.GainSD && (a.Line == survey.AirLine) == (b.Line == survey.AirLine)
}

// sameUnit reports whether a reading was written in the unit on the gauge's face,
// whatever the spelling.
func sameUnit(g survey.Gauge, written string) bool {
	parse := func(name string) (unit.Unit, error) { return unit.Parse(name, unit.Pressure) }
	switch g.Kind {
	case survey.AbsoluteGauge:
		parse = unit.ParseAbsolute
	case survey.FlowMeter:
		parse = func(name string) (unit.Unit, error) { return unit.Parse(name, unit.Flow) }
	case survey.LevelGauge:
		parse = func(name string) (unit.Unit, error) { return unit.Parse(name, unit.Length) }
	}
	a, errA := parse(g.Unit)
	b, errB := parse(written)
	return errA == nil && errB == nil && a == b
}
