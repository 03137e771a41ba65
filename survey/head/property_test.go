package head_test

import (
	"cmp"
	"fmt"
	"math"
	"slices"
	"testing"

	"pgregory.net/rapid"

	"tapround/survey"
	"tapround/survey/correct"
	"tapround/survey/head"
	"tapround/survey/unit"
)

// every is a survey with a reading of every kind, on water- and air-filled lines, with
// repeats, an absolute gauge and a gauge that has a gain error.
func every() *survey.Survey {
	gauge := func(name string, kind survey.GaugeKind, high float64, line survey.LineFilling) survey.Gauge {
		return survey.Gauge{Name: name, Kind: kind, High: high, Accuracy: survey.Some(0.005), Resolution: survey.Some(high / 1000), Line: line, GainSD: 0.01}
	}
	s := &survey.Survey{
		Info:   survey.Info{Latitude: 52, SiteLevel: 90, WaterTemperature: 12},
		Rounds: []survey.Round{{Name: "A"}, {Name: "B", WaterTemperature: survey.Some(16), Barometer: survey.Some(99_500)}},
		Taps: []survey.Tap{{Name: "T1", Elevation: 61, ElevationSD: 0.05}, {Name: "T2", Elevation: 57, ElevationSD: 0.03},
			{Name: "T3", Elevation: 66, ElevationSD: 0.1}},
		Gauges: []survey.Gauge{gauge("G1", survey.PressureGauge, 1e6, survey.WaterLine), gauge("G2", survey.PressureGauge, 6e5, survey.AirLine),
			gauge("G3", survey.AbsoluteGauge, 1e6, survey.WaterLine), gauge("D1", survey.DifferenceGauge, 5e4, survey.WaterLine),
			gauge("D2", survey.DifferenceGauge, 5e4, survey.AirLine), gauge("F1", survey.FlowMeter, 0.05, survey.WaterLine),
			gauge("L1", survey.LevelGauge, 100, survey.WaterLine)},
	}
	s.Gauges[0].Checks = []survey.BenchCheck{{Applied: 0, Indicated: 2000}, {Applied: 1e6, Indicated: 9.99e5}}
	s.Readings = []survey.Reading{
		{Round: "A", Tap: "T1", Kind: survey.Static, Gauge: "G1", Value: 4.1e5, GaugeHeight: 1.1},
		{Round: "A", Tap: "T1", Kind: survey.Static, Gauge: "G1", Value: 4.13e5, GaugeHeight: 1.1},
		{Round: "A", Tap: "T2", Kind: survey.Static, Gauge: "G2", Value: 4.4e5, GaugeHeight: 0.7},
		{Round: "A", Tap: "T3", Kind: survey.TotalHead, Gauge: "G3", Value: 4.6e5, GaugeHeight: -0.4, Depth: survey.Some(0.06)},
		{Round: "B", Tap: "T3", Kind: survey.TotalHead, Gauge: "G3", Value: 4.7e5},
		{Round: "B", Tap: "T1", Kind: survey.Velocity, Gauge: "D1", Value: 900, Depth: survey.Some(0.03)},
		{Round: "B", Tap: "T1", OtherTap: "T2", Kind: survey.Difference, Gauge: "D1", Value: 21e3},
		{Round: "B", Tap: "T1", OtherTap: "T2", Kind: survey.Difference, Gauge: "D2", Value: -19e3},
		{Round: "B", Tap: "T2", Kind: survey.FlowRate, Gauge: "F1", Value: 0.031},
		{Round: "B", Tap: "T3", Kind: survey.WaterLevel, Gauge: "L1", Value: 71.3},
	}
	for i := range s.Readings {
		s.Readings[i].Source = survey.Source{File: "readings.csv", Line: i + 2}
	}
	return s
}

func TestConversions(t *testing.T) {
	s := every()
	hs := headsOf(t, s)
	w := func(h survey.Head) float64 { return h.Density * h.Gravity }
	bench := func(v float64) float64 { // error 2000 Pa at 2000 shown, -1000 Pa at 999 000
		return v - (2000 - 3000*(v-2000)/997_000)
	}
	mean := (bench(4.1e5) + bench(4.13e5)) / 2
	std := 101325 * math.Pow(1-0.0065*90/288.15, 5.25588) // ISO 2533; the geopotential is 1 mm off at 90 m
	for i, want := range []struct {
		quantity survey.Quantity
		value    float64
	}{
		{survey.PiezometricHead, 61 + mean/w(hs[0]) + 1.1},
		{survey.PiezometricHead, 57 + 4.4e5/w(hs[1])}, // air in the line: the gauge's height is nothing
		{survey.LocalTotalHead, 66 + (4.6e5-std)/w(hs[2]) - 0.4},
		{survey.LocalTotalHead, 66 + (4.7e5-99_500)/w(hs[3])},
		{survey.LocalVelocity, 900 / w(hs[4])},
		{survey.HeadDifference, 21e3 / w(hs[5])},
		{survey.HeadDifference, -19e3/w(hs[6]) + 61 - 57},
		{survey.VolumeFlow, 0.031},
		{survey.FreeWaterSurface, 71.3},
	} {
		h := hs[i]
		if h.Quantity != want.quantity {
			t.Errorf("%s %s is a %s, want %s", h.Tap, h.Kind, h.Quantity, want.quantity)
		}
		near(t, fmt.Sprintf("%s %s", h.Tap, h.Kind), h.Value, want.value, 1e-5)
	}
	if d1, d2 := hs[0].Density, hs[3].Density; !(d1 > d2+0.5) {
		t.Errorf("12 C and 16 C have densities %v and %v", d1, d2)
	}
	near(t, "barometer of round A", hs[2].BarometerSD*w(hs[2]), 800, 1e-9)
	for _, i := range []int{0, 1, 3, 4, 5, 6, 7, 8} {
		if hs[i].BarometerSD != 0 {
			t.Errorf("%s %s shares a barometer", hs[i].Tap, hs[i].Kind)
		}
	}
	near(t, "pressure at T1", hs[0].Pressure.V, mean+1.1*w(hs[0]), 1e-6)
	if hs[5].Pressure.OK || hs[7].Pressure.OK {
		t.Error("a difference and a flow have no pressure at the tap")
	}
}

// The sensitivities are what a shown error does to Value: each gauge is made to show
// more, each tap is recorded higher, and Value must move as the fields say.
func TestSensitivities(t *testing.T) {
	base := headsOf(t, every())
	for g := range every().Gauges {
		s := every()
		s.Gauges[g].Checks = nil // so that what is shown comes through one to one
		straight := headsOf(t, s)
		const part = 1e-3
		off := part * s.Gauges[g].High
		for i := range s.Readings {
			if s.Readings[i].Gauge == s.Gauges[g].Name {
				s.Readings[i].Value += off
			}
		}
		for i, h := range headsOf(t, s) {
			want := 0.0
			if h.Gauge == s.Gauges[g].Name {
				want = straight[i].PerGauge * off
			}
			near(t, fmt.Sprintf("%s %s by gauge %s", h.Tap, h.Kind, s.Gauges[g].Name), h.Value-straight[i].Value, want, 1e-10)
		}
	}
	for k := range every().Taps {
		s := every()
		s.Taps[k].Elevation += 0.5
		for i, h := range headsOf(t, s) {
			want := 0.0
			if h.Tap == s.Taps[k].Name {
				want = 0.5 * base[i].PerTap
			} else if h.OtherTap == s.Taps[k].Name {
				want = 0.5 * base[i].PerOther
			}
			near(t, fmt.Sprintf("%s %s by level of %s", h.Tap, h.Kind, s.Taps[k].Name), h.Value-base[i].Value, want, 1e-10)
		}
	}
	air := base[6]
	if air.PerTap != 1 || air.PerOther != -1 || air.TapSD != 0.05 || air.OtherTapSD != 0.03 {
		t.Errorf("difference with air-filled lines: %+v", air)
	}
	if water := base[5]; water.PerTap != 0 || water.PerOther != 0 {
		t.Errorf("levels do not cancel in a difference with water-filled lines: %+v", water)
	}
}

// A gain error of 1 % is one of what the gauge shows: of a flow, a velocity head and a
// difference it is a fraction of Value; of a head above the datum it must not be.
func TestGain(t *testing.T) {
	for _, h := range headsOf(t, every()) {
		w := h.Density * h.Gravity
		shown := h.Rows[0].Value
		got := math.Sqrt(math.Pow(h.PerGauge*h.GaugeSD, 2) + math.Pow(h.GainSD*h.Value, 2))
		var class, per float64
		for _, g := range every().Gauges {
			if g.Name == h.Gauge {
				class = 0.005 * g.High / math.Sqrt(3)
				per = 1 / w
				if g.Kind == survey.FlowMeter || g.Kind == survey.LevelGauge {
					per = 1
				}
			}
		}
		switch h.Gauge {
		case "G1":
			class, shown = class/4, 4.10732e5 // bench-checked; mean as corrected
		case "G3":
			shown -= 101325 // about: the part above atmosphere, as corrected
		}
		want := per * math.Hypot(class, 0.01*shown)
		near(t, fmt.Sprintf("%s %s shared part", h.Tap, h.Kind), got, want, 0.005*want)
		if proportional := h.Quantity == survey.VolumeFlow || h.Quantity == survey.LocalVelocity || (h.Quantity == survey.HeadDifference && h.PerTap == 0); proportional != (h.GainSD > 0) {
			t.Errorf("%s %s has gain %v", h.Tap, h.Kind, h.GainSD)
		}
	}
}

func TestRepeats(t *testing.T) {
	of := func(values ...float64) survey.Head {
		s := one(0, 0, 0) // step 2000 Pa
		r := s.Readings[0]
		s.Readings = nil
		for i, v := range values {
			r.Value, r.Source.Line = v, i+2
			s.Readings = append(s.Readings, r)
		}
		h := headsOf(t, s)[0]
		h.Own *= h.Density * h.Gravity // back to Pa
		return h
	}
	step := 2000 / math.Sqrt(12)
	near(t, "one reading", of(3e5).Own, math.Hypot(step, 600), 1e-6)
	near(t, "four that agree", of(3e5, 3e5, 3e5, 3e5).Own, math.Hypot(step, 300), 1e-6)
	// Scatter of 298, 300, 302 kPa: 2 kPa.
	near(t, "three that scatter", of(298e3, 300e3, 302e3).Own, math.Hypot(step, 2000/math.Sqrt(3)), 1e-6)
	near(t, "two a step apart", of(300e3, 302e3).Own, math.Hypot(step, 1000), 1e-6) // s = 2000/sqrt 2
	if h := of(300e3, 300e3); len(h.Rows) != 2 || h.Sources()[1].Line != 3 {
		t.Errorf("rows %v", h.Sources())
	}

	for what, alter := range map[string]func(*survey.Reading){
		"another gauge height": func(r *survey.Reading) { r.GaugeHeight = 1 },
		"a depth":              func(r *survey.Reading) { r.Depth = survey.Some(0.05) },
		"another kind":         func(r *survey.Reading) { r.Kind = survey.TotalHead },
		"another tap":          func(r *survey.Reading) { r.Tap = "T2" },
	} {
		s := one(3e5, 10, 0)
		s.Readings = append(s.Readings, s.Readings[0])
		alter(&s.Readings[1])
		if n := len(headsOf(t, s)); n != 2 {
			t.Errorf("%s: %d heads, want 2", what, n)
		}
	}

	s := one(3e5, 10, 0)
	s.Readings[0].HalfRange = 5000
	s.Readings = append(s.Readings, s.Readings[0])
	h := headsOf(t, s)[0]
	near(t, "two written as ranges", h.Own*h.Density*h.Gravity, math.Sqrt(step*step+600*600/2.+5000*5000/3./2), 1e-6)
}

func TestReadingsWithoutAGauge(t *testing.T) {
	s := one(3e5, 10, 0)
	g := s.Gauges[0]
	g.Name = "G2"
	s.Gauges = append(s.Gauges, g)
	named := headsOf(t, s)[0]
	s.Readings[0].Gauge = ""
	h := headsOf(t, s)[0]
	if h.Gauge != "" || h.PerGauge != 0 || h.GaugeSD != 0 || h.Value != named.Value {
		t.Errorf("without a gauge: %+v", h)
	}
	near(t, "U", h.U(), named.U(), 1e-12)
	// Repeats do not average out a class error.
	s.Readings = append(s.Readings, s.Readings[0], s.Readings[0], s.Readings[0])
	if got := headsOf(t, s)[0].Own; got < named.PerGauge*named.GaugeSD {
		t.Errorf("own %v is below the class error %v", got, named.PerGauge*named.GaugeSD)
	}
	if n := len(headsOf(t, s)[0].Caveats); n != 1 {
		t.Errorf("%d caveats: one for each repeat", n)
	}
}

func TestUndefinedDensityOrGravity(t *testing.T) {
	for what, alter := range map[string]func(*survey.Survey){
		"round":    func(s *survey.Survey) { s.Rounds[0].WaterTemperature = survey.Some(283.15) },
		"survey":   func(s *survey.Survey) { s.Info.WaterTemperature = -40 },
		"latitude": func(s *survey.Survey) { s.Info.Latitude = 536 },
	} {
		s := one(3e5, 10, 0)
		alter(s)
		cs, _ := correct.Readings(s)
		hs, problems := head.FromCorrected(s, cs)
		if len(hs) != 0 || len(problems) != 1 || !problems.Fatal() {
			t.Errorf("%s: heads %v, problems %v", what, hs, problems)
		}
	}
}

func TestOfLine(t *testing.T) {
	s := every()
	cs, _ := correct.Readings(s)
	hs, _ := head.FromCorrected(s, cs)
	lines := head.OfLine(s, cs)
	if len(lines) != len(s.Readings) {
		t.Fatalf("%d lines of %d readings", len(lines), len(s.Readings))
	}
	first, second := lines[s.Readings[0].Source], lines[s.Readings[1].Source]
	near(t, "mean of the two repeats", (first.Piezometric.V+second.Piezometric.V)/2, hs[0].Value, 1e-10)
	near(t, "pressure head", first.PressureHead.V+first.Elevation.V, first.Piezometric.V, 1e-10)
	near(t, "pressure", first.Pressure.V, first.PressureHead.V*hs[0].Density*hs[0].Gravity, 1e-6)
	if total := lines[s.Readings[3].Source]; total.Total.V != hs[2].Value || total.Piezometric.OK {
		t.Errorf("total reading: %+v", total)
	}
	if v := lines[s.Readings[5].Source]; v.Velocity.V != hs[4].Value || v.Pressure.OK {
		t.Errorf("velocity reading: %+v", v)
	}
	if l := lines[s.Readings[9].Source]; l.Piezometric.V != 71.3 {
		t.Errorf("level reading: %+v", l)
	}
}

// A datum raised by x lowers nothing but the numbers: every head above the datum moves
// by x, every difference, velocity head and flow stays, and so does every uncertainty.
func TestDatumShift(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		shift := rapid.Float64Range(-2000, 2000).Draw(t, "shift")
		s := every()
		before := headsOf(t, s)
		for i := range s.Taps {
			s.Taps[i].Elevation += shift
		}
		for i, r := range s.Readings {
			if r.Kind == survey.WaterLevel {
				s.Readings[i].Value += shift
			}
		}
		for i, h := range headsOf(t, s) {
			want := before[i].Value
			switch h.Quantity {
			case survey.PiezometricHead, survey.LocalTotalHead, survey.FreeWaterSurface:
				want += shift
			}
			if math.Abs(h.Value-want) > 1e-9 {
				t.Fatalf("%s %s moved to %v, want %v", h.Tap, h.Kind, h.Value, want)
			}
			// A level gauge's gain error does follow its numbers: it has none of its own here.
			if h.Kind != survey.WaterLevel && math.Abs(h.U()-before[i].U()) > 1e-9 {
				t.Fatalf("%s %s: u moved from %v to %v", h.Tap, h.Kind, before[i].U(), h.U())
			}
		}
	})
}

// The unit a pressure was written in changes nothing: the same pressure comes out.
func TestUnitOfWriting(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		p := rapid.Float64Range(0, 1e6).Draw(t, "pressure")
		want := headsOf(t, one(p, 42, 0.8))[0]
		u := rapid.SampledFrom([]unit.Unit{unit.Bar, unit.PoundPerSquareInch, unit.MetreOfWater, unit.FootOfWater, unit.KilogramForcePerCm2}).Draw(t, "unit")
		s := one(u.ToSI(u.FromSI(p)), 42, 0.8)
		s.Readings[0].Unit, s.Gauges[0].Unit = u.Name, u.Name
		got := headsOf(t, s)[0]
		if math.Abs(got.Value-want.Value) > 1e-10 || got.U() != want.U() {
			t.Fatalf("%v in %s gives %v, in Pa %v", p, u.Name, got.Value, want.Value)
		}
	})
}

// The order of the lines changes the order of the heads and nothing else.
func TestOrderOfLines(t *testing.T) {
	text := func(hs []survey.Head) []string {
		var out []string
		for _, h := range hs {
			slices.SortFunc(h.Rows, func(a, b survey.Reading) int { return cmp.Compare(a.Source.Line, b.Source.Line) })
			h.Value = math.Round(h.Value*1e9) / 1e9 // a mean may round by the order of its terms
			h.Own = math.Round(h.Own*1e9) / 1e9
			h.Pressure.V = math.Round(h.Pressure.V*1e4) / 1e4
			h.GaugeSD = math.Round(h.GaugeSD*1e4) / 1e4
			out = append(out, fmt.Sprint(h))
		}
		slices.Sort(out)
		return out
	}
	want := text(headsOf(t, every()))
	rapid.Check(t, func(t *rapid.T) {
		s := every()
		s.Readings = rapid.Permutation(s.Readings).Draw(t, "order")
		if got := text(headsOf(t, s)); !slices.Equal(got, want) {
			t.Fatalf("got %v\nwant %v", got, want)
		}
	})
}
