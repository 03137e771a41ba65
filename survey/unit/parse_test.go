package unit

import (
	"errors"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// Spellings met on gauge faces, drawings, meters and logger exports (common
// practice).
func TestParseSpellings(t *testing.T) {
	for _, c := range []struct {
		d    Dimension
		want Unit
		as   string // separated by |
	}{
		{Flow, LitrePerSecond, "L/s|l/s|lps|LPS|l/sec|litres/s|L s-1|litres per second|ℓ/s"},
		{Flow, CubicMetrePerHour, "m3/h|m³/h|m^3/h|M3/H|m3/hr|cu m/h|m³·h⁻¹|[m3/h]"},
		{Flow, MegalitrePerDay, "Ml/d|ML/d|MLD|Mld|ml/day"},
		{Flow, GallonPerMinute, "gpm|GPM|US gpm|U.S. gpm|USgpm|gpm (US)|gal/min|US gallons per minute"},
		{Flow, ImperialGallonPerMinute, "imp gpm|imp. gpm|igpm|IGPM|gpm (imp)|UK gpm|imperial gpm"},
		{Flow, MillionGallonPerDay, "MGD|mgd|US MGD"},
		{Flow, ImperialMillionGallon, "imp MGD|IMGD|MIGD"},
		{Flow, CubicFootPerSecond, "cfs|ft3/s|ft³/s|cusec|cu ft/s|cu.ft/sec"},
		{Flow, CubicMetrePerSecond, "m3/s|cumec|m³/s"},
		{Pressure, Bar, "bar|Bar|BAR|barg|bar(g)|bar g|bar gauge"},
		{Pressure, Millibar, "mbar|hPa|mBar"},
		{Pressure, Kilopascal, "kPa|KPA|kpa|kPa(g)|kN/m2"},
		{Pressure, Megapascal, "MPa|MPA|mpa|N/mm2|N/mm²"},
		{Pressure, Pascal, "Pa|N/m2"},
		{Pressure, PoundPerSquareInch, "psi|PSI|psig|PSIG|p.s.i.|lb/in2|lbf/in²|lb/sq in"},
		{Pressure, KilogramForcePerCm2, "kgf/cm2|kg/cm2|kgf/cm²|kp/cm²|kg/cm^2"},
		{Pressure, Atmosphere, "atm"},
		{Pressure, MetreOfWater, "m|mH2O|mH₂O|m H2O|mWC|mwg|m of water|metres|mWS|mCE"},
		{Pressure, FootOfWater, "ft|ftH2O|ft of water|feet"},
		{Pressure, InchOfWater, `in|inH2O|in. w.g.|inches of water`},
		{Pressure, MillimetreOfWater, "mm|mmH2O|mmWC"},
		{Pressure, CentimetreOfWater, "cm|cmH2O"},
		{Pressure, InchOfMercury, "inHg|in Hg|in. Hg|inches of mercury"},
		{Pressure, MillimetreOfMercury, "mmHg|mm Hg"},
		{Length, Metre, "m|M|metre|meters"},
		{Length, Millimetre, "mm|MM"},
		{Length, Centimetre, "cm"},
		{Length, Kilometre, "km"},
		{Length, Foot, "ft|feet|FT|ft.|'"},
		{Length, Inch, `in|inch|inches|in.|"`},
		{Length, Yard, "yd|yards"},
		{Length, Mile, "mi|miles"},
		{Velocity, MetrePerSecond, "m/s|m/sec|m s-1"},
		{Velocity, FootPerSecond, "ft/s|fps"},
		{Temperature, Celsius, "C|c|°C|deg C|degC|Celsius|℃|º C"},
		{Temperature, Fahrenheit, "F|°F|deg F"},
		{Temperature, Kelvin, "K|kelvin"},
		{Rotation, RPM, "rpm|RPM|rev/min|r/min|1/min|min-1|r.p.m."},
		{Rotation, RevolutionPerSecond, "Hz|rev/s|rps"},
		{Rotation, RadianPerSecond, "rad/s"},
		{Fraction, Percent, "%|percent|per cent|pct"},
		{Fraction, Ratio, "1|-|fraction"},
		{Angle, Degree, "deg|°|degrees"},
		{Duration, Second, "s|sec"},
		{Duration, Minute, "min"},
		{Duration, Hour, "h|hr|hours"},
		{Power, Kilowatt, "kW|KW"},
		{Power, Watt, "W"},
		{Power, Horsepower, "hp|HP|bhp"},
		{Count, One, "|-|1"},
		{Count, Year, "year|yr"},
	} {
		for _, s := range strings.Split(c.as, "|") {
			u, err := Parse(s, c.d)
			if err != nil {
				t.Errorf("%v", err)
			} else if u != c.want {
				t.Errorf("%q as %s is %q, want %q", s, c.d, u.Name, c.want.Name)
			}
		}
	}
}

// Every unit is found by the name it is printed with, and no spelling leads to
// two units.
func TestTable(t *testing.T) {
	seen := map[Dimension]map[string]string{}
	for _, e := range table {
		u := e.unit
		if got, err := Parse(u.Name, u.Dimension); err != nil || got != u {
			t.Errorf("%q (%s) reads back as %q, %v", u.Name, u.Dimension, got.Name, err)
		}
		if seen[u.Dimension] == nil {
			seen[u.Dimension] = map[string]string{}
		}
		for _, s := range append([]string{fold(u.Name)}, e.also...) {
			if s != fold(s) {
				t.Errorf("%q is listed for %q but no spelling folds to it", s, u.Name)
			}
			if other, taken := seen[u.Dimension][s]; taken {
				t.Errorf("%q means both %q and %q", s, other, u.Name)
			}
			seen[u.Dimension][s] = u.Name
		}
	}
	for d := range Dimension(numDimensions) {
		if len(d.accepted()) == 0 || d.String() == "" {
			t.Errorf("dimension %d has no name or no units", d)
		}
	}
	for g, bare := range gaugeMarked {
		a, errA := Parse(g, Pressure)
		b, errB := Parse(bare, Pressure)
		if errA != nil || errB != nil || a != b {
			t.Errorf("%q and %q are not one unit: %v %v", g, bare, errA, errB)
		}
	}
}

func TestParseRefuses(t *testing.T) {
	for _, c := range []struct {
		name string
		d    Dimension
		want []string // parts of the message
	}{
		{"", Pressure, []string{`unit ""`, "never guessed", "bar, kPa, psi"}},
		{"  ", Length, []string{"never guessed", "m, mm"}},
		{"psj", Pressure, []string{`"psj"`, "not a known unit of pressure", "did you mean psi?", "bar, kPa, psi"}},
		{"kpas", Pressure, []string{"did you mean kPa?"}},
		{"L/s", Pressure, []string{"is a unit of flow (L/s), not of pressure"}},
		{"bar", Length, []string{"is a unit of pressure (bar), not of length"}},
		{"furlong", Length, []string{"not a known unit of length", "m, mm, cm, km, in, ft"}},
		{"mPa", Pressure, []string{"milli", "write MPa"}},
		{"mW", Power, []string{"milli", "write MW"}},
		{"psia", Pressure, []string{"absolute", "kind"}},
		{"bar abs", Pressure, []string{"absolute"}},
		{"kPa(a)", Pressure, []string{"absolute"}},
		{"mbar absolute", Pressure, []string{"absolute"}},
	} {
		u, err := Parse(c.name, c.d)
		if err == nil {
			t.Errorf("%q as %s gives %q", c.name, c.d, u.Name)
			continue
		}
		if u != (Unit{}) {
			t.Errorf("%q: a unit comes with the error", c.name)
		}
		var ne *NameError
		if !errors.As(err, &ne) || ne.Written != c.name || ne.Dimension != c.d {
			t.Errorf("%q: error is %#v", c.name, err)
		}
		for _, part := range c.want {
			if !strings.Contains(err.Error(), part) {
				t.Errorf("%q: message %q lacks %q", c.name, err, part)
			}
		}
	}
	if _, err := Parse("furlong", Length); err.(*NameError).Nearest != "" {
		t.Errorf("furlong is said to be near %q", err.(*NameError).Nearest)
	}
}

func TestParseAbsolute(t *testing.T) {
	for name, want := range map[string]Unit{
		"psia": PoundPerSquareInch, "psi": PoundPerSquareInch, "bar abs": Bar, "bara": Bar, "kPa": Kilopascal,
		"kPa(a)": Kilopascal, "mbar": Millibar, "hPa": Millibar, "Pa": Pascal, "mmHg": MillimetreOfMercury, "ata": KilogramForcePerCm2,
	} {
		if u, err := ParseAbsolute(name); err != nil || u != want {
			t.Errorf("%q gives %q, %v; want %q", name, u.Name, err, want.Name)
		}
	}
	for _, name := range []string{"psig", "bar(g)", "kPag", "", "L/s", "abs"} {
		if u, err := ParseAbsolute(name); err == nil {
			t.Errorf("%q gives %q", name, u.Name)
		}
	}
}

// Whatever stands in a cell, Parse answers with a known unit or a NameError.
func TestParseAnything(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		name := rapid.String().Draw(t, "name")
		d := Dimension(rapid.IntRange(0, numDimensions-1).Draw(t, "dimension"))
		u, err := Parse(name, d)
		var ne *NameError
		switch {
		case err == nil && (u.Dimension != d || !slices.ContainsFunc(table, func(e entry) bool { return e.unit == u })):
			t.Fatalf("%q gives %+v", name, u)
		case err != nil && (!errors.As(err, &ne) || ne.Reason == "" || ne.Remedy() == ""):
			t.Fatalf("%q: %#v", name, err)
		}
	})
}
