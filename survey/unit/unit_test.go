package unit

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// checks reads one table of published values as maps from heading to cell.
func checks(t *testing.T, file string) []map[string]string {
	t.Helper()
	f, err := os.Open("../../testdata/checks/units/" + file)
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

func mustParse(t *testing.T, name string, d Dimension) Unit {
	t.Helper()
	u, err := Parse(name, d)
	if err != nil {
		t.Fatal(err)
	}
	return u
}

// lastDigit is half a unit of the last figure printed, with a little for the
// decimal fraction's own rounding.
func lastDigit(printed string) float64 {
	mantissa, exponent, _ := strings.Cut(printed, "e")
	e, _ := strconv.Atoi(exponent)
	if i := strings.IndexByte(mantissa, '.'); i >= 0 {
		e -= len(mantissa) - i - 1
	}
	return 0.5001 * math.Pow10(e)
}

// Factors worked out from definitions elsewhere, to their 16 printed digits, and
// those NIST SP 811 prints, to the digits it prints.
func TestFactors(t *testing.T) {
	type as struct {
		name string
		d    Dimension
	}
	written := map[string]as{
		"P-PSI": {"psi", Pressure}, "P-BAR": {"bar", Pressure}, "P-KPA": {"kPa", Pressure}, "P-MPA": {"MPa", Pressure},
		"P-KGFCM2": {"kgf/cm2", Pressure}, "P-ATM": {"atm", Pressure}, "P-MBAR": {"mbar", Pressure},
		"P-MMHG": {"mmHg", Pressure}, "P-TORR": {"Torr", Pressure}, "P-INHG": {"inHg", Pressure},
		"P-MH2O": {"m", Pressure}, "P-CMH2O": {"cm", Pressure}, "P-INH2O": {"in", Pressure}, "P-FTH2O": {"ft", Pressure},
		"NIST-P-psi": {"psi", Pressure}, "NIST-P-mmhg": {"mmHg", Pressure}, "NIST-P-inhg": {"inHg", Pressure},
		"NIST-P-inh2o": {"inH2O", Pressure}, "NIST-P-fth2o": {"ftH2O", Pressure}, "NIST-P-mmh2o": {"mmH2O", Pressure},
		"Q-M3H": {"m3/h", Flow}, "Q-LS": {"L/s", Flow}, "Q-LMIN": {"L/min", Flow}, "Q-USGPM": {"US gpm", Flow},
		"Q-IGPM": {"imp gpm", Flow}, "Q-USMGD": {"MGD", Flow}, "Q-IMGD": {"imp MGD", Flow}, "Q-CFS": {"cfs", Flow},
		"Q-CFM": {"cfm", Flow}, "Q-MLD": {"Ml/d", Flow}, "Q-ACFTD": {"acre-ft/d", Flow},
		"NIST-Q-gpm": {"gpm", Flow}, "NIST-Q-gpd": {"gpd", Flow},
		"L-FT": {"ft", Length}, "L-IN": {"in", Length}, "L-USFT": {"US survey ft", Length},
	}
	// Ratios of two units.
	ratio := map[string][2]Unit{
		"PSI2FT-CONV": {PoundPerSquareInch, FootOfWater}, "BAR2M-CONV": {Bar, MetreOfWater}, "M2PSI-CONV": {MetreOfWater, PoundPerSquareInch},
		"Q-GPM2M3H": {GallonPerMinute, CubicMetrePerHour}, "Q-LS2GPM": {LitrePerSecond, GallonPerMinute},
		"Q-CFS2GPM": {CubicFootPerSecond, GallonPerMinute}, "Q-MGD2GPM": {MillionGallonPerDay, GallonPerMinute},
		"Q-IG2US": {ImperialGallonPerMinute, GallonPerMinute},
	}
	// Columns at a stated temperature, volumes and areas, rounded trade figures:
	// not units of this package.
	notOurs := map[string]bool{
		"NIST-P-inhg32": true, "NIST-P-inhg60": true, "NIST-P-inh2o39": true, "NIST-P-inh2o60": true, "NIST-P-fth2o39": true,
		"NIST-P-cmh2o4": true, "NIST-P-kgfm2": true, "P-MH2O-4C": true, "P-FTH2O-4C": true, "PSI2FT-4C": true,
		"P-MH2O-60F": true, "P-FTH2O-60F": true, "PSI2FT-60F": true, "P-MH2O-20C": true, "P-FTH2O-20C": true, "PSI2FT-20C": true,
		"PSI2FT-624": true, "PSI2FT-TRADE": true, "FT2PSI-TRADE": true, "NIST-Q-gal": true, "NIST-Q-igal": true, "NIST-Q-acft": true,
		"V-GPM-IN2": true, "T-F": true,
	}
	for _, c := range checks(t, "unit_factors.csv") {
		id := c["id"]
		if notOurs[id] {
			continue
		}
		want := number(t, c["factor_or_value"])
		var got, tol float64
		if w, ok := written[id]; ok {
			got, tol = mustParse(t, w.name, w.d).ToSI(1), 1e-15*want
			if strings.HasPrefix(id, "NIST") {
				tol = lastDigit(c["factor_or_value"])
			}
		} else if r, ok := ratio[id]; ok {
			got, tol = r[0].Factor/r[1].Factor, lastDigit(c["factor_or_value"])
		} else {
			t.Errorf("row %s is not checked", id)
			continue
		}
		if !(math.Abs(got-want) <= tol) {
			t.Errorf("%s: %.17g, want %.17g within %g", id, got, want, tol)
		}
	}
}

func TestGaugeConversions(t *testing.T) {
	got := map[string]float64{
		"1 psi": PoundPerSquareInch.ToSI(1),
		"1 psi as head of water, 1000 kg/m3, g_n": MetreOfWater.FromSI(PoundPerSquareInch.ToSI(1)),
		"1 bar as head of water, 1000 kg/m3, g_n": MetreOfWater.FromSI(Bar.ToSI(1)),
		"1 kgf/cm2": KilogramForcePerCm2.ToSI(1),
		"1 mm mercury conventional (13595.1 kg/m3, g_n)": MillimetreOfMercury.ToSI(1),
		"1 in mercury conventional":                      InchOfMercury.ToSI(1),
		"1 US gallon per minute":                         GallonPerMinute.ToSI(1),
		"1 ft3/s":                                        CubicFootPerSecond.ToSI(1),
		"1 ft3/s in US gal/min":                          GallonPerMinute.FromSI(CubicFootPerSecond.ToSI(1)),
		"1 US MGD":                                       MillionGallonPerDay.ToSI(1),
		"1 US MGD in ft3/s":                              CubicFootPerSecond.FromSI(MillionGallonPerDay.ToSI(1)),
		"1 imperial gallon":                              ImperialGallonPerMinute.ToSI(60),
		"standard atmosphere":                            Atmosphere.ToSI(1),
		"1 ft":                                           Foot.ToSI(1),
		"1 hp (550 ft lbf/s)":                            Horsepower.ToSI(1),
	}
	seen := 0
	for _, c := range checks(t, "gauge_conversions.csv") {
		v, ok := got[c["item"]]
		if !ok {
			continue // 62.4 lbf/ft3 rows and the worked head, which need a density
		}
		seen++
		if want := number(t, c["value"]); !(math.Abs(v-want) <= lastDigit(c["value"])) {
			t.Errorf("%s = %.12g, want %s", c["item"], v, c["value"])
		}
	}
	if seen != len(got) {
		t.Errorf("%d of %d rows found", seen, len(got))
	}
}

func TestTemperature(t *testing.T) {
	// Fixed points by definition: ice, boiling (conventional), -40, absolute zero.
	for _, c := range []struct {
		u    Unit
		v, c float64
	}{{Fahrenheit, 32, 0}, {Fahrenheit, 212, 100}, {Fahrenheit, -40, -40}, {Fahrenheit, 50, 10}, {Kelvin, 273.15, 0}, {Kelvin, 0, -273.15}, {Celsius, 12.5, 12.5}} {
		if got := c.u.ToSI(c.v); math.Abs(got-c.c) > 1e-13 {
			t.Errorf("%v %s is %v C, want %v", c.v, c.u, got, c.c)
		}
	}
	if got := Fahrenheit.ToSIDifference(9); math.Abs(got-5) > 1e-15 {
		t.Errorf("a step of 9 F is %v C, want 5", got)
	}
	if got := Fahrenheit.FromSIDifference(5); math.Abs(got-9) > 1e-14 {
		t.Errorf("a step of 5 C is %v F, want 9", got)
	}
}

func TestRotation(t *testing.T) {
	// One turn is 2 pi: 60 rpm is 1 rev/s.
	if got := RPM.ToSI(60); math.Abs(got-2*math.Pi) > 1e-15*got {
		t.Errorf("60 rpm = %v rad/s", got)
	}
	if got := RPM.FromSI(RevolutionPerSecond.ToSI(50)); math.Abs(got-3000) > 1e-12*got {
		t.Errorf("50 Hz = %v rpm", got)
	}
}

// What is converted in and out again must read back as it was written: a value
// of up to 12 figures survives.
func TestRoundTrip(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		u := table[rapid.IntRange(0, len(table)-1).Draw(t, "unit")].unit
		v := rapid.Float64Range(-1e6, 1e6).Draw(t, "value")
		back := u.FromSI(u.ToSI(v))
		// An offset of 273 costs digits of a value near the other scale's zero.
		if tol := 1e-15*math.Abs(u.Offset)*4 + 4e-16*math.Abs(v); math.Abs(back-v) > tol {
			t.Fatalf("%v %s came back as %v", v, u, back)
		}
		a, b := u.ToSI(v+1), u.ToSI(v)
		if d := u.ToSIDifference(1); math.Abs(a-b-d) > 1e-9*math.Abs(b)+1e-12*math.Abs(a) {
			t.Fatalf("%s: a step of one is %v, but values one apart differ by %v", u, d, a-b)
		}
	})
}

// Ratios of the mistakes the trade knows, worked out apart from this code.
func TestMistakes(t *testing.T) {
	pairs := map[string][2]string{ // meant, wrote
		"UNIT-PSI-AS-BAR": {"psi", "bar"}, "UNIT-BAR-AS-PSI": {"bar", "psi"}, "UNIT-PSI-AS-KPA": {"psi", "kPa"},
		"UNIT-KPA-AS-PSI": {"kPa", "psi"}, "UNIT-BAR-AS-KGF": {"bar", "kgf/cm2"}, "UNIT-KGF-AS-BAR": {"kgf/cm2", "bar"},
		"UNIT-M-AS-BAR": {"m", "bar"}, "UNIT-FT-AS-M": {"ft", "m"}, "UNIT-FT-AS-PSI": {"ft", "psi"}, "UNIT-ATM-AS-BAR": {"atm", "bar"},
		"UNIT-GPM-AS-M3H": {"gpm", "m3/h"}, "UNIT-LS-AS-M3H": {"L/s", "m3/h"}, "UNIT-IGPM-AS-USGPM": {"imp gpm", "gpm"},
	}
	all := append(append(Mistakes(Pressure), Mistakes(Flow)...), Mistakes(Length)...)
	seen := 0
	for _, c := range checks(t, "mistakes.csv") {
		p, ok := pairs[c["id"]]
		if !ok {
			continue
		}
		want := number(t, c["value"])
		found := false
		for _, m := range all {
			if m.Meant.Name == p[0] && m.Wrote.Name == p[1] {
				found = true
				// psi meant, bar written: the table's "entered over true".
				got := m.Wrote.ToSI(1) / m.Meant.ToSI(1)
				if m.Ratio != got {
					t.Errorf("%s: ratio %v is not that of the factors %v", c["id"], m.Ratio, got)
				}
				if math.Abs(got-want) > lastDigit(c["value"]) {
					t.Errorf("%s: ratio %v, want %v", c["id"], got, want)
				}
			}
		}
		if !found {
			t.Errorf("%s: no such pair", c["id"])
		}
		seen++
	}
	if seen != len(pairs) {
		t.Errorf("%d of %d pairs checked", seen, len(pairs))
	}
	if len(Mistakes(Temperature)) != 0 {
		t.Error("temperatures have mistakes with a single ratio")
	}
}

// Every unit in the table against the whole number that defines it (yard and
// pound agreement 1959; NIST SP 811 App. B.8; from memory where the tables of
// TestFactors do not print it).
func TestDefinitions(t *testing.T) {
	const gallon, imperial = 3.785411784e-3, 4.54609e-3
	want := map[Unit]float64{
		One: 1, Year: 1, Ratio: 1, Percent: 0.01,
		Bar: 1e5, Kilopascal: 1e3, Megapascal: 1e6, Pascal: 1, Millibar: 100, Atmosphere: 101325, Torr: 101325. / 760,
		PoundPerSquareInch: 6894.757293168361, PoundPerSquareFoot: 6894.757293168361 / 144, KilogramForcePerCm2: 98066.5,
		MetreOfWater: 9806.65, CentimetreOfWater: 98.0665, MillimetreOfWater: 9.80665, FootOfWater: 2989.06692, InchOfWater: 249.08891,
		InchOfMercury: 3386.388640341, MillimetreOfMercury: 133.322387415,
		Metre: 1, Millimetre: 1e-3, Centimetre: 1e-2, Kilometre: 1e3, Inch: 0.0254, Foot: 0.3048, Yard: 0.9144, Mile: 1609.344, SurveyFoot: 1200. / 3937,
		LitrePerSecond: 1e-3, LitrePerMinute: 1e-3 / 60, LitrePerHour: 1e-3 / 3600, CubicMetrePerSecond: 1, CubicMetrePerMinute: 1. / 60,
		CubicMetrePerHour: 1. / 3600, CubicMetrePerDay: 1. / 86400, MegalitrePerDay: 1000. / 86400,
		GallonPerMinute: gallon / 60, GallonPerDay: gallon / 86400, MillionGallonPerDay: 1e6 * gallon / 86400,
		ImperialGallonPerMinute: imperial / 60, ImperialMillionGallon: 1e6 * imperial / 86400,
		CubicFootPerSecond: 0.028316846592, CubicFootPerMinute: 0.028316846592 / 60, AcreFootPerDay: 43560 * 0.028316846592 / 86400,
		MetrePerSecond: 1, FootPerSecond: 0.3048, Celsius: 1, Kelvin: 1, Fahrenheit: 5. / 9,
		RPM: math.Pi / 30, RevolutionPerSecond: 2 * math.Pi, RadianPerSecond: 1, Degree: 1, Radian: 57.29577951308232,
		Second: 1, Minute: 60, Hour: 3600, Day: 86400, Watt: 1, Kilowatt: 1e3, Megawatt: 1e6,
		Horsepower: 745.6998715822702, MetricHorsepower: 735.49875,
	}
	for _, e := range table {
		w, ok := want[e.unit]
		if !ok {
			t.Errorf("%s (%s) has no definition here", e.unit, e.unit.Dimension)
		} else if math.Abs(e.unit.Factor-w) > 4e-16*w { // the two roundings
			t.Errorf("%s (%s): factor %.17g, want %.17g", e.unit, e.unit.Dimension, e.unit.Factor, w)
		}
	}
}
