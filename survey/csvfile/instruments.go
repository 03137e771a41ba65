package csvfile

import (
	"strings"

	"tapround/survey"
	"tapround/survey/unit"
)

type tapRow struct {
	Tap               string `csv:"tap"`
	Pipe              string `csv:"pipe"`
	At                string `csv:"at"`
	Point             string `csv:"point"`
	Elevation         string `csv:"elevation"`
	ElevationSD       string `csv:"elevation_sd"`
	OutletBore        string `csv:"outlet_bore"`
	OutletCoefficient string `csv:"outlet_coefficient"`
	Note              string `csv:"note"`
}

// levelSD is the standard uncertainty of a tap's level that states none, m.
const levelSD = 0.05

func readTaps(sh *sheet) {
	for r, x := range rowsOf[tapRow](sh) {
		t := survey.Tap{
			Name:              r.own("tap", x.Tap),
			Pipe:              x.Pipe,
			Point:             x.Point,
			Elevation:         r.needed("elevation", x.Elevation),
			ElevationSD:       r.stated("elevation_sd", x.ElevationSD).Or(levelSD),
			OutletBore:        r.stated("outlet_bore", x.OutletBore),
			OutletCoefficient: r.stated("outlet_coefficient", x.OutletCoefficient),
			Note:              x.Note,
			Source:            r.at,
		}
		switch {
		case x.Pipe != "" && x.At == "":
			r.fail("at", "", "the tap is on a pipe but does not say where", "write its distance from the pipe's from end")
		case x.Point != "" && x.At != "":
			r.tell(survey.Notice, "at", x.At, "the tap is at a point, so this was not used", "leave it empty, or write the pipe instead of the point")
		}
		if x.At != "" {
			t.At = r.stated("at", x.At).V
		}
		sh.survey.Taps = append(sh.survey.Taps, t)
	}
}

type gaugeRow struct {
	Gauge      string `csv:"gauge"`
	Kind       string `csv:"kind"`
	Low        string `csv:"low"`
	High       string `csv:"high"`
	Unit       string `csv:"unit"`
	Accuracy   string `csv:"accuracy"`
	Resolution string `csv:"resolution"`
	Line       string `csv:"line"`
	Checked    string `csv:"checked"`
	Note       string `csv:"note"`
	GainSD     string `csv:"gain_sd"`
}

var gaugeKinds = []survey.GaugeKind{survey.PressureGauge, survey.AbsoluteGauge, survey.DifferenceGauge, survey.FlowMeter, survey.LevelGauge}

var gaugeWords = map[string]survey.GaugeKind{
	"absolute": survey.AbsoluteGauge, "differential": survey.DifferenceGauge, "differentialpressure": survey.DifferenceGauge,
	"dp": survey.DifferenceGauge, "flowmeter": survey.FlowMeter, "meter": survey.FlowMeter,
}

// dimensionOf is what a gauge of a kind shows.
func dimensionOf(k survey.GaugeKind) unit.Dimension {
	switch k {
	case survey.FlowMeter:
		return unit.Flow
	case survey.LevelGauge:
		return unit.Length
	}
	return unit.Pressure
}

func readGauges(sh *sheet) {
	for r, x := range rowsOf[gaugeRow](sh) {
		g := survey.Gauge{
			Name:     r.own("gauge", x.Gauge),
			Kind:     choice(r, "kind", x.Kind, gaugeKinds, gaugeWords),
			Unit:     x.Unit,
			Accuracy: r.stated("accuracy", x.Accuracy),
			GainSD:   r.stated("gain_sd", x.GainSD).V,
			Line:     survey.WaterLine,
			Checked:  x.Checked,
			Note:     x.Note,
			Source:   r.at,
		}
		if x.Line != "" {
			g.Line = choice(r, "line", x.Line, []survey.LineFilling{survey.WaterLine, survey.AirLine}, nil)
		}
		var u unit.Unit
		if g.Kind != "" {
			u = r.unit(x.Unit, dimensionOf(g.Kind), g.Kind == survey.AbsoluteGauge)
		}
		if g.Kind == survey.AbsoluteGauge && u.Factor != 0 {
			// The mark "abs" has done its work; what converts back is the bare unit.
			g.Unit = u.Name
		}
		g.Low, g.High = r.neededIn("low", x.Low, u), r.neededIn("high", x.High, u)
		g.Resolution = r.statedIn("resolution", x.Resolution, u)
		sh.absolute[g.Name] = g.Kind == survey.AbsoluteGauge
		sh.survey.Gauges = append(sh.survey.Gauges, g)
	}
}

type checkRow struct {
	Gauge     string `csv:"gauge"`
	Applied   string `csv:"applied"`
	Indicated string `csv:"indicated"`
	Unit      string `csv:"unit"`
	Checked   string `csv:"checked"`
}

func readChecks(sh *sheet) {
	gauges := map[string]*survey.Gauge{}
	var names []string
	for i := range sh.survey.Gauges {
		g := &sh.survey.Gauges[i]
		gauges[g.Name] = g
		names = append(names, g.Name)
	}
	for r, x := range rowsOf[checkRow](sh) {
		var u unit.Unit
		g := gauges[x.Gauge]
		if r.known("gauge", r.name("gauge", x.Gauge), "gauges.csv", names) && g.Kind != "" {
			u = r.unit(x.Unit, dimensionOf(g.Kind), g.Kind == survey.AbsoluteGauge)
		}
		b := survey.BenchCheck{
			Applied:   r.neededIn("applied", x.Applied, u),
			Indicated: r.neededIn("indicated", x.Indicated, u),
			Checked:   strings.TrimSpace(x.Checked),
			Source:    r.at,
		}
		if g != nil {
			g.Checks = append(g.Checks, b)
		}
	}
}
