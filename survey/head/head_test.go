package head_test

import (
	"encoding/csv"
	"encoding/json"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"tapround/survey"
	"tapround/survey/correct"
	"tapround/survey/head"
	"tapround/survey/unit"
	"tapround/survey/water"
)

func read(t *testing.T, file string) []map[string]string {
	t.Helper()
	f, err := os.Open(file)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	r := csv.NewReader(f)
	r.Comment = '#'
	rows, err := r.ReadAll()
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

func checks(t *testing.T, file string) []map[string]string {
	t.Helper()
	return read(t, "../../testdata/checks/head/"+file)
}

func number(t *testing.T, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s = %.10g, want %.10g within %g", what, got, want, tol)
	}
}

// root finds x in lo..hi where the rising or falling f takes a value.
func root(f func(float64) float64, lo, hi, value float64) float64 {
	rising := f(hi) > f(lo)
	for range 200 {
		mid := (lo + hi) / 2
		if (f(mid) < value) == rising {
			lo = mid
		} else {
			hi = mid
		}
	}
	return (lo + hi) / 2
}

// latitudeOf and temperatureOf give a site and a water with a wanted gravity (at sea
// level) and density, since the published examples state those.
func latitudeOf(gravity float64) float64 {
	return root(func(x float64) float64 { return water.Gravity(x, 0) }, 0, 90, gravity)
}

func temperatureOf(density float64) float64 { return root(water.Density, 4, 60, density) }

// failer is a test, or one case of a property.
type failer interface {
	Helper()
	Fatalf(format string, args ...any)
}

// headsOf takes a survey through both steps and wants no problem.
func headsOf(t failer, s *survey.Survey) []survey.Head {
	t.Helper()
	cs, problems := correct.Readings(s)
	hs, more := head.FromCorrected(s, cs)
	if len(problems)+len(more) != 0 {
		t.Fatalf("problems %v %v", problems, more)
	}
	return hs
}

// one is a survey of two taps with a static reading at the first.
func one(pressure, elevation, height float64) *survey.Survey {
	return &survey.Survey{
		Info:   survey.Info{Latitude: 45, WaterTemperature: 10},
		Rounds: []survey.Round{{Name: "A"}},
		Taps: []survey.Tap{{Name: "T1", Pipe: "P1", Elevation: elevation, ElevationSD: 0.05},
			{Name: "T2", Pipe: "P1", Elevation: elevation - 3, ElevationSD: 0.02}},
		Gauges: []survey.Gauge{{Name: "G1", Kind: survey.PressureGauge, High: 1e6, Unit: "bar", Accuracy: survey.Some(0.01),
			Resolution: survey.Some(2000), Line: survey.WaterLine}},
		Readings: []survey.Reading{{Round: "A", Tap: "T1", Kind: survey.Static, Gauge: "G1", Value: pressure, Unit: "bar",
			GaugeHeight: height, Source: survey.Source{File: "readings.csv", Line: 2}}},
	}
}

func TestGaugeReadingToHead(t *testing.T) {
	rows := checks(t, "gauge_to_head.csv")
	if len(rows) != 1 {
		t.Fatalf("%d rows", len(rows))
	}
	// 250 kPa, gauge 1.20 m above the tap at 100.00 m, water of 998.2 kg/m3, 9.80665 m/s2.
	s := one(250e3, 100, 1.20)
	s.Info.Latitude, s.Rounds[0].WaterTemperature = latitudeOf(9.80665), survey.Some(temperatureOf(998.2))
	near(t, rows[0]["item"], headsOf(t, s)[0].Value, number(t, rows[0]["value"]), 0.5e-6) // printed digits
	s.Gauges[0].Line = survey.AirLine
	near(t, "the same with an air-filled line", headsOf(t, s)[0].Value, number(t, rows[0]["value"])-1.20, 0.5e-6)
}

func TestHeadExamples(t *testing.T) {
	in := map[string]struct{ bar, gauge, celsius, g float64 }{
		"HEAD-1": {4.2, 103.25, 10, 9.81}, "HEAD-2": {0.85, 57.4, 20, 9.80665}, "HEAD-3": {-0.3, 12.0, 15, 9.7803254},
	}
	seen := 0
	for _, c := range checks(t, "gauge_uncertainty.csv") {
		x, ok := in[c["id"]]
		if !ok {
			continue
		}
		seen++
		s := one(x.bar*1e5, x.gauge-2.5, 2.5)
		s.Info.Latitude, s.Info.WaterTemperature = latitudeOf(x.g), x.celsius
		s.Gauges[0].Low = -1e5
		near(t, c["id"], headsOf(t, s)[0].Value, number(t, c["value"]), number(t, c["tolerance"]))
	}
	if seen != len(in) {
		t.Errorf("%d of %d rows", seen, len(in))
	}
}

// 60 m of warm water, taken for water of 4 C.
func TestColumnTemperature(t *testing.T) {
	for _, c := range checks(t, "gauge_uncertainty.csv") {
		if c["id"] != "TEMP-COL" {
			continue
		}
		warm := one(0, 0, 0)
		warm.Info.WaterTemperature = 25
		p := 60 * water.Density(25) * water.Gravity(45, 0)
		warm.Readings[0].Value = p
		cold := one(p, 0, 0)
		cold.Rounds[0].WaterTemperature = survey.Some(4) // a round's own temperature rules
		cold.Info.WaterTemperature = 25
		near(t, c["id"], headsOf(t, cold)[0].Value-headsOf(t, warm)[0].Value, number(t, c["value"]), number(t, c["tolerance"]))
		return
	}
	t.Error("no row TEMP-COL")
}

// The budgets of a gauge head. They have a term for the air's temperature, which this
// program does not know, and none for the reader, which it adds: both are taken out.
func TestHeadBudgets(t *testing.T) {
	budgets := map[string]map[string]float64{}
	levels := map[string]float64{"A": 0.02, "B": 0.005, "C": 0.1, "D": 0.01}
	gauges := map[string]survey.Gauge{
		"A": {High: 10e5, Accuracy: survey.Some(0.010), Resolution: survey.Some(0.2e5 * 0.2)},
		"B": {High: 10e5, Accuracy: survey.Some(0.0025), Resolution: survey.Some(0.05e5 * 0.5)},
		"C": {High: 16e5, Accuracy: survey.Some(0.016), Resolution: survey.Some(0.5e5 * 0.5)},
		"D": {High: 6e5, Accuracy: survey.Some(0.006), Resolution: survey.Some(0.1e5 * 0.2)},
	}
	for _, c := range checks(t, "gauge_uncertainty.csv") {
		if name, ok := strings.CutPrefix(c["id"], "GB-"); ok {
			b, quantity, _ := strings.Cut(name, "-")
			if budgets[b] == nil {
				budgets[b] = map[string]float64{}
			}
			budgets[b][quantity] = number(t, c["value"])
		}
	}
	if len(budgets) != len(gauges) {
		t.Fatalf("%d budgets, want %d", len(budgets), len(gauges))
	}
	for name, b := range budgets {
		s := one(5e5, 0, 0)
		s.Info.Latitude = latitudeOf(9.81)
		g := gauges[name]
		g.Name, g.Kind = "G1", survey.PressureGauge
		s.Gauges[0] = g
		s.Taps[0].ElevationSD = levels[name]
		h := headsOf(t, s)[0]
		w := h.Density * h.Gravity
		_, reader := correct.OwnSD(g)
		near(t, "GB-"+name+" rho", h.Density, 999.702, 0.002) // 0.1 MPa here, 0.101325 MPa there
		got := math.Sqrt(h.U()*h.U() - math.Pow(reader/w, 2) + math.Pow(b["utemp"]*1e5/w, 2))
		near(t, "GB-"+name, got, b["uh"], 1e-4) // the table's tolerance
		near(t, "GB-"+name+" class alone", h.PerGauge*h.GaugeSD, b["uclass"]*1e5/(999.702*9.81), 1e-4)
		if h.TapSD != levels[name] || h.PerTap != 1 {
			t.Errorf("GB-%s: level part %v times %v", name, h.PerTap, h.TapSD)
		}
	}
}

// Pump heads from two gauges: the difference of two piezometric heads, and the
// velocity heads by themselves, which need the flow.
func TestPumpHeads(t *testing.T) {
	velocityHead := func(flow, bore, g float64) float64 {
		v := flow / (math.Pi / 4 * bore * bore)
		return v * v / (2 * g)
	}
	// difference is the delivery gauge's piezometric head less the suction gauge's.
	difference := func(p2, z2, p1, z1, celsius, g float64) float64 {
		s := one(p2, z2, 0)
		s.Gauges[0].Low = -1e5
		s.Info.WaterTemperature, s.Info.Latitude = celsius, latitudeOf(g)
		r := s.Readings[0]
		r.Tap, r.Value, r.GaugeHeight = "T2", p1, z1-s.Taps[1].Elevation // the gauge stands at z1
		s.Readings = append(s.Readings, r)
		hs := headsOf(t, s)
		return hs[0].Value - hs[1].Value
	}
	psi, ft := unit.PoundPerSquareInch.Factor, unit.Foot.Factor
	// The American examples take 2.31 ft for a psi; g 32.174 ft/s2.
	trade := temperatureOf(psi / (2.31 * ft * 9.80665))
	gpm70 := unit.GallonPerMinute.ToSI(70)
	got := map[string]float64{
		"SI-H":         difference(5.20e5, 1.10, 0.35e5, 0.60, 10, 9.81) + velocityHead(0.030, 0.125, 9.81) - velocityHead(0.030, 0.150, 9.81),
		"SI-H-VAC":     difference(5.20e5, 1.10, -0.42e5, 0.60, 10, 9.81) + velocityHead(0.030, 0.125, 9.81) - velocityHead(0.030, 0.150, 9.81),
		"NELIK-QUICK":  difference(80*psi, 0, 0, 0, trade, 9.80665) / ft,
		"NELIK-GAUGES": difference(80*psi, 0, 5*psi, 0, trade, 9.80665) / ft,
		"NELIK-H": (difference(80*psi, 6*ft, 5*psi, 1*ft, trade, 9.80665) +
			velocityHead(gpm70, 1*unit.Inch.Factor, 9.80665) - velocityHead(gpm70, 1.5*unit.Inch.Factor, 9.80665)) / ft,
		"MIL-2": difference(35*psi, 0, 0, 0, trade, 9.80665) / ft,
		"MIL-3": difference(35*psi, 60*ft, 0, 0, trade, 9.80665)/ft + 0.9, // with MIL-1, the friction it states
	}
	seen := 0
	for _, c := range checks(t, "pump_head.csv") {
		if v, ok := got[c["id"]]; ok {
			seen++
			// A value printed to a tenth and a tolerance of half a tenth meet at the edge.
			near(t, c["id"], v, number(t, c["value"]), number(t, c["tolerance"])+1e-9)
		}
	}
	if seen != len(got) {
		t.Errorf("%d of %d rows", seen, len(got))
	}
}

// Two examples of the Guide: the root sum of squares of the parts (H.1), and mean and
// standard uncertainty of repeats (H.2).
func TestGuideExamples(t *testing.T) {
	raw, err := os.ReadFile("../../testdata/checks/head/gum.json")
	if err != nil {
		t.Fatal(err)
	}
	var guide struct {
		Examples []struct {
			ID        string `json:"id"`
			V         []float64
			Published struct {
				U             float64            `json:"u_nm"`
				Contributions map[string]float64 `json:"contributions_nm"`
			}
		}
	}
	if err := json.Unmarshal(raw, &guide); err != nil {
		t.Fatal(err)
	}
	seen := 0
	for _, e := range guide.Examples {
		switch e.ID {
		case "H1":
			seen++
			c := e.Published.Contributions
			h := survey.Head{Own: c["d"], PerGauge: 2, GaugeSD: c["lS"] / 2, PerTap: 1, TapSD: c["dtheta"], PerOther: -1, OtherTapSD: c["dalpha"]}
			near(t, "H.1", h.U(), e.Published.U, 0.5) // printed to a whole nm
		case "H2":
			seen++
			s := one(0, 0, 0)
			s.Gauges[0].Resolution = survey.Some(0) // the example states scatter alone
			r := s.Readings[0]
			s.Readings = nil
			for _, v := range e.V {
				r.Value = v * 1e5
				s.Readings = append(s.Readings, r)
			}
			h := headsOf(t, s)
			if len(h) != 1 || len(h[0].Rows) != len(e.V) {
				t.Fatalf("repeats gave %d heads", len(h))
			}
			w := h[0].Density * h[0].Gravity / 1e5
			// Table H.2 of the Guide: mean 4.9990 V, standard uncertainty 0.0032 V (from memory).
			near(t, "H.2 mean", h[0].Value*w, 4.9990, 0.00005)
			near(t, "H.2 u", h[0].Own*w, 0.0032, 0.00005)
		}
	}
	if seen != 2 {
		t.Errorf("%d of 2 examples", seen)
	}
}

// Heads and uncertainties against an independent generator's. See the file's own note.
func TestSyntheticReadings(t *testing.T) {
	rows := read(t, "testdata/synthetic_heads.csv")
	if len(rows) < 20 {
		t.Fatalf("%d rows", len(rows))
	}
	maybe := func(s string, scale float64) survey.Maybe {
		if s == "" {
			return survey.Maybe{}
		}
		return survey.Some(number(t, s) * scale)
	}
	for _, c := range rows {
		parse := func(name string) (unit.Unit, error) { return unit.Parse(name, unit.Pressure) }
		if c["kind"] == "flow" {
			parse = func(name string) (unit.Unit, error) { return unit.Parse(name, unit.Flow) }
		}
		u, err := parse(c["unit"])
		if err != nil {
			t.Fatal(err)
		}
		face, err := parse(c["gauge_unit"])
		if err != nil {
			t.Fatal(err)
		}
		s := &survey.Survey{
			Info:   survey.Info{Latitude: number(t, c["latitude [deg]"]), SiteLevel: number(t, c["site_level [m]"]), WaterTemperature: number(t, c["water_temperature [C]"])},
			Rounds: []survey.Round{{Name: c["round"], Barometer: maybe(c["barometer [kPa]"], 1e3)}},
			Taps:   []survey.Tap{{Name: c["tap"], Elevation: number(t, c["elevation [m]"]), ElevationSD: maybe(c["elevation_sd [m]"], 1).Or(0.05)}},
			Gauges: []survey.Gauge{{Name: c["gauge"], Kind: survey.GaugeKind(c["gauge_kind"]), Low: face.ToSI(number(t, c["low"])), High: face.ToSI(number(t, c["high"])),
				Unit: c["gauge_unit"], Accuracy: maybe(c["accuracy [%]"], 0.01), Resolution: maybe(c["resolution"], face.Factor), Line: survey.LineFilling(c["line"])}},
			Readings: []survey.Reading{{Round: c["round"], Tap: c["tap"], Kind: survey.ReadingKind(c["kind"]), Gauge: c["gauge"], Value: u.ToSI(number(t, c["reading"])),
				Unit: c["unit"], GaugeHeight: maybe(c["gauge_height [m]"], 1).Or(0)}},
		}
		h := headsOf(t, s)[0]
		what := strings.Join([]string{c["survey"], c["round"], c["tap"], c["kind"], c["gauge"]}, " ")
		const same = 1e-9 // both are sums of a few terms; heads are of the order of 100 m
		if c["converted_head [m]"] != "" {
			near(t, what, h.Value, number(t, c["converted_head [m]"]), same)
			near(t, what+" level part", h.PerTap*h.TapSD, number(t, c["u_level [m]"]), same)
		}
		near(t, what+" own", h.Own, number(t, c["u_own"]), same)
		near(t, what+" gauge", h.PerGauge*h.GaugeSD, number(t, c["u_gauge"]), same)
	}
}
