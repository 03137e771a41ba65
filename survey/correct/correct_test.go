package correct_test

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"tapround/survey"
	"tapround/survey/correct"
)

const bar = 1e5

// rounding is what a few operations in double precision may cost, relative.
const rounding = 1e-14

// checks reads a table of testdata/checks as maps from heading to cell.
func checks(t *testing.T, file string) []map[string]string {
	t.Helper()
	f, err := os.Open("../../testdata/checks/head/" + file)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatalf("%s: %v", file, err)
	}
	var out []map[string]string
	for _, row := range rows[1:] {
		m := map[string]string{}
		for i, h := range rows[0] {
			m[h] = row[i]
		}
		out = append(out, m)
	}
	return out
}

func number(t *testing.T, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// small is a survey of one pipe with one gauge and one reading, to be altered.
func small() *survey.Survey {
	return &survey.Survey{
		Info:   survey.Info{Latitude: 45, WaterTemperature: 10},
		Pipes:  []survey.Pipe{{Name: "P1", From: "R1", To: "N1"}},
		Taps:   []survey.Tap{{Name: "T1", Pipe: "P1", Elevation: 50, ElevationSD: 0.05}, {Name: "T2", Pipe: "P1", Elevation: 48, ElevationSD: 0.05}},
		Rounds: []survey.Round{{Name: "A"}, {Name: "B"}},
		Gauges: []survey.Gauge{{Name: "G1", Kind: survey.PressureGauge, High: 10 * bar, Unit: "bar",
			Accuracy: survey.Some(0.01), Resolution: survey.Some(0.02 * bar), Line: survey.WaterLine}},
		Readings: []survey.Reading{{Round: "A", Tap: "T1", Kind: survey.Static, Gauge: "G1", Value: 4.2 * bar, Written: "4.2", Unit: "bar",
			Source: survey.Source{File: "readings.csv", Line: 2}}},
		Inputs: []survey.Input{{File: "readings.csv", Rows: 1, Used: 1}},
	}
}

// only corrects a survey that must give one reading and no problem.
func only(t *testing.T, s *survey.Survey) survey.Corrected {
	t.Helper()
	cs, problems := correct.Readings(s)
	if len(cs) != 1 || len(problems) != 0 {
		t.Fatalf("got %d readings and problems %v", len(cs), problems)
	}
	return cs[0]
}

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.10g, want %.10g within %g", what, got, want, tol)
	}
}

func TestClassesOfEN837(t *testing.T) {
	seen := 0
	for _, c := range checks(t, "gauge_classes.csv") {
		s := small()
		s.Gauges[0].Low, s.Gauges[0].High = -1*bar, 5*bar
		s.Gauges[0].Accuracy = survey.Some(number(t, c["limit"]) / 100)
		// The class limit is of the whole span, 6 bar, and counts as a rectangle.
		want := number(t, c["limit"]) / 100 * 6 * bar / math.Sqrt(3)
		near(t, c["id"], only(t, s).Shared, want, rounding*want)
		seen++
	}
	if seen != 7 {
		t.Errorf("%d classes, want the 7 of EN 837-1", seen)
	}
}

// Permissible deviations that a maker's test instructions work out.
func TestPermissibleDeviation(t *testing.T) {
	for id, g := range map[string]survey.Gauge{
		"WIKA-EX1": {Low: 0, High: 10 * bar, Accuracy: survey.Some(0.016)},
		"WIKA-EX2": {Low: -1 * bar, High: 5 * bar, Accuracy: survey.Some(0.010)},
	} {
		found := false
		for _, c := range checks(t, "gauge_facts.csv") {
			if c["id"] != id {
				continue
			}
			found = true
			s := small()
			g.Name, g.Kind, g.Unit = "G1", survey.PressureGauge, "bar"
			s.Gauges[0] = g
			near(t, id, only(t, s).Shared*math.Sqrt(3), number(t, c["value"])*bar, 1e-9*bar)
		}
		if !found {
			t.Errorf("no row %s", id)
		}
	}
}

// The budgets' two first terms: class error, and reading to a part of a division.
func TestUncertaintyBudgets(t *testing.T) {
	seen := 0
	for _, c := range checks(t, "gauge_uncertainty.csv") {
		if !strings.HasPrefix(c["id"], "GB-") {
			continue
		}
		in := inputs(c["inputs"])
		s := small()
		g := &s.Gauges[0]
		g.High = in["span"] * bar
		g.Accuracy = survey.Some(in["class"] / 100)
		g.Resolution = survey.Some(in["division"] * in["read to"] * bar)
		step, reader := correct.OwnSD(*g)
		near(t, "reader's part", reader, 0.3*g.Resolution.V, rounding*bar)
		// Printed to six places of a bar.
		switch {
		case strings.HasSuffix(c["id"], "uclass"):
			near(t, c["id"], only(t, s).Shared/bar, number(t, c["value"]), 1e-6)
			seen++
		case strings.HasSuffix(c["id"], "uread"):
			near(t, c["id"], step/bar, number(t, c["value"]), 1e-6)
			near(t, "own", only(t, s).Own, math.Hypot(step, reader), rounding*bar)
			seen++
		}
	}
	if seen != 8 {
		t.Errorf("%d rows checked, want 8", seen)
	}
}

// inputs reads "span=10 bar;class=1.0;read to 0.2 division" into numbers by name.
func inputs(s string) map[string]float64 {
	out := map[string]float64{}
	for _, part := range strings.Split(s, ";") {
		name, value, ok := strings.Cut(part, "=")
		if !ok {
			i := strings.LastIndexByte(strings.TrimSuffix(part, " division"), ' ')
			name, value = part[:i], part[i+1:]
		}
		if v, err := strconv.ParseFloat(strings.Fields(value)[0], 64); err == nil {
			out[name] = v
		}
	}
	return out
}

func TestBenchCheck(t *testing.T) {
	psi := 6894.757293168361
	point := func(applied, indicated float64) survey.BenchCheck {
		return survey.BenchCheck{Applied: applied * psi, Indicated: indicated * psi, Checked: "2026-02-20"}
	}
	// The point 250 -> 260 is the worked definition of gauge_facts.csv, ASA-EXAMPLE.
	gauge := []survey.BenchCheck{point(400, 404), point(100, 100), point(250, 260)}
	hysteresis := []survey.BenchCheck{point(100, 100), point(200, 201), point(300, 304), point(300, 306), point(200, 205), point(100, 102)}
	for _, c := range []struct {
		what          string
		checks        []survey.BenchCheck
		reading, want float64
		beyond        bool
	}{
		{"at a point", gauge, 260, 250, false},
		{"at the lowest point", gauge, 100, 100, false},
		{"between points", gauge, 180, 175, false},           // error half of 10
		{"between the upper points", gauge, 332, 325, false}, // error 10 - 6/2
		{"below the points", gauge, 40, 40, true},
		{"above the points", gauge, 450, 446, true},
		{"up and down averaged", hysteresis, 203, 200, false},
		{"up and down, between", hysteresis, 254, 250, false}, // errors 3 and 5
		{"one point only", gauge[:1], 300, 296, true},
	} {
		s := small()
		s.Gauges[0].High, s.Gauges[0].Unit, s.Gauges[0].Checks = 500*psi, "psi", c.checks
		s.Readings[0].Value = c.reading * psi
		got := only(t, s)
		near(t, c.what, got.Pressure/psi, c.want, 1e-11)
		if len(got.Applied) != 1 || got.Applied[0].What != "bench check" || math.Abs(got.Applied[0].Amount/psi-(c.want-c.reading)) > 1e-11 {
			t.Errorf("%s: applied %v", c.what, got.Applied)
		}
		near(t, c.what+": shared", got.Shared, 0.25*0.01*500*psi/math.Sqrt(3), rounding*bar)
		if beyond := has(got.Caveats, "beyond the points"); beyond != c.beyond {
			t.Errorf("%s: caveats %q", c.what, got.Caveats)
		}
		if got.Value != c.reading*psi {
			t.Errorf("%s: the reading itself was changed", c.what)
		}
	}
	s := small()
	s.Gauges[0].Checks = append(gauge[:2:2], survey.BenchCheck{Applied: 3e6, Indicated: 3e6, Checked: "2026-04-02"})
	if !has(only(t, s).Caveats, "several dates") {
		t.Error("two dates of one check are not told")
	}
}

// A bench check may be listed in any order, and interpolation undoes the gauge's error
// exactly at every point and stays between the errors of its neighbours elsewhere.
func TestBenchCheckProperties(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 7).Draw(t, "points")
		var points []survey.BenchCheck
		worst := 0.0
		for i := range n {
			e := rapid.Float64Range(-0.04*bar, 0.04*bar).Draw(t, "error")
			worst = math.Max(worst, math.Abs(e))
			points = append(points, survey.BenchCheck{Applied: float64(i) * bar, Indicated: float64(i)*bar + e})
		}
		s := small()
		s.Gauges[0].Checks = rapid.Permutation(points).Draw(t, "order")
		for _, p := range points {
			s.Readings[0].Value = p.Indicated
			if got, _ := correct.Readings(s); math.Abs(got[0].Pressure-p.Applied) > 1e-9*bar {
				t.Fatalf("indicated %v corrects to %v, applied was %v", p.Indicated, got[0].Pressure, p.Applied)
			}
		}
		s.Readings[0].Value = rapid.Float64Range(-bar, 9*bar).Draw(t, "reading")
		if got, _ := correct.Readings(s); math.Abs(got[0].Pressure-s.Readings[0].Value) > worst+1e-9*bar {
			t.Fatalf("correction %v exceeds every error of the check, %v", got[0].Pressure-s.Readings[0].Value, worst)
		}
	})
}

func TestAbsoluteGauge(t *testing.T) {
	s := small()
	s.Gauges[0].Kind = survey.AbsoluteGauge
	s.Gauges[0].Checks = []survey.BenchCheck{{Applied: 4 * bar, Indicated: 4.01 * bar}}
	s.Rounds[0].Barometer = survey.Some(98_000)
	got := only(t, s)
	near(t, "with the round's barometer", got.Pressure, 4.2*bar-0.01*bar-98_000, 1e-9)
	want := []survey.Correction{{What: "bench check", Amount: 4*bar - 4.01*bar}, {What: "barometer of the round", Amount: -98_000}}
	if d := cmp.Diff(want, got.Applied); d != "" {
		t.Errorf("applied (-want +got):\n%s", d)
	}
	if got.BarometerSD != 0 || has(got.Caveats, "barometer") {
		t.Errorf("a stated barometer has SD %v, caveats %q", got.BarometerSD, got.Caveats)
	}

	// ISO 2533 by definition: 101 325 Pa at mean sea level; Table 5, 1000 m: 898.76
	// hPa (from memory).
	for level, atmosphere := range map[float64]float64{0: 101_325, 1000: 89_876} {
		s := small()
		s.Info.SiteLevel = level
		s.Gauges[0].Kind = survey.AbsoluteGauge
		got := only(t, s)
		near(t, "standard atmosphere", got.Pressure, 4.2*bar-atmosphere, 2)
		if got.BarometerSD != 800 || !has(got.Caveats, "no barometer") {
			t.Errorf("without a barometer: SD %v, caveats %q", got.BarometerSD, got.Caveats)
		}
	}

	s = small()
	s.Info.SiteLevel = 12_000
	s.Gauges[0].Kind = survey.AbsoluteGauge
	cs, problems := correct.Readings(s)
	if len(cs) != 0 || len(problems) != 1 || problems[0].Severity != survey.SetAside {
		t.Errorf("site level above the standard atmosphere: %v, %v", cs, problems)
	}
}

func TestDefaults(t *testing.T) {
	s := small()
	s.Gauges[0].Accuracy, s.Gauges[0].Resolution = survey.Maybe{}, survey.Maybe{}
	got := only(t, s)
	near(t, "class 1.6", got.Shared, 0.016*10*bar/math.Sqrt(3), 1e-9)
	d := 0.1 * 0.016 * 10 * bar
	near(t, "a tenth of the class error", got.Own, d*math.Sqrt(1./12+0.09), 1e-9)
	if !has(got.Caveats, "no accuracy") || !has(got.Caveats, "no resolution") {
		t.Errorf("caveats %q", got.Caveats)
	}

	s = small()
	s.Gauges[0].Resolution = survey.Some(0) // stated: an instrument without steps
	s.Readings[0].HalfRange = 0.1 * bar
	near(t, "a reading written as a range", only(t, s).Own, 0.1*bar/math.Sqrt(3), 1e-9)
	if c := only(t, small()).Caveats; len(c) != 0 {
		t.Errorf("a complete gauge has caveats %q", c)
	}
}

func TestBeyondTheScale(t *testing.T) {
	for v, want := range map[float64]bool{10 * bar: false, 10.01 * bar: true, 0: false, -0.09 * bar: false, -0.11 * bar: true} {
		s := small()
		s.Readings[0].Value = v
		if got := has(only(t, s).Caveats, "beyond the scale"); got != want {
			t.Errorf("%v Pa on 0 to 10 bar of class 1.0: caveat %v, want %v", v, got, want)
		}
	}
}

func has(cs []survey.Caveat, part string) bool {
	for _, c := range cs {
		if strings.Contains(string(c), part) {
			return true
		}
	}
	return false
}
