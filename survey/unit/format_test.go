package unit

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

func TestWithUncertainty(t *testing.T) {
	for _, c := range []struct {
		v, sd float64
		want  string
	}{
		// JCGM 100:2008, 7.2.6: an estimate of 10.057 62 ohm with 27 mohm is
		// rounded to 10.058 ohm (from memory).
		{10.05762, 0.027, "10.058 ± 0.027"},
		{1.8412, 0.12, "1.84 ± 0.12"},
		{1.8412, 0.34, "1.8 ± 0.3"},
		{1.8412, 0.0996, "1.84 ± 0.10"}, // rounds up into the next power of ten
		{1.8412, 0.2996, "1.84 ± 0.30"},
		{1.8412, 0.96, "1.8 ± 1.0"},
		{56789, 1234, "56800 ± 1200"},
		{56789, 5234, "57000 ± 5000"},
		{56789, 97, "56790 ± 100"},
		{-0.004, 0.25, "0.00 ± 0.25"}, // no minus before a nought
		{-12.34, 1.5, "-12.3 ± 1.5"},
		{0, 0.001, "0.0000 ± 0.0010"},
		{0.000012345, 0.0000003, "0.0000123 ± 0.0000003"},
		{12.3456, 0, "12.35"},
		{12.3456, -1, "12.35"},
		{12.3456, math.NaN(), "12.35"},
		{12.3456, math.Inf(1), "not determined"},
		{math.NaN(), 1, "not determined"},
		{math.Inf(-1), 1, "not determined"},
	} {
		if got := WithUncertainty(c.v, c.sd); got != c.want {
			t.Errorf("%v, %v gives %q, want %q", c.v, c.sd, got, c.want)
		}
	}
}

func TestSignificant(t *testing.T) {
	for _, c := range []struct {
		v      float64
		digits int
		want   string
	}{
		{1234.5, 3, "1230"}, {0.0012345, 3, "0.00123"}, {9.996, 3, "10.0"}, {99.96, 3, "100"}, {0.001, 1, "0.001"},
		{-2.5, 1, "-2"}, {1, 4, "1.000"}, {0, 3, "0"}, {123456, 2, "120000"}, {7, 0, "7"},
		{math.NaN(), 3, "not determined"}, {math.Inf(1), 3, "not determined"},
	} {
		if got := Significant(c.v, c.digits); got != c.want {
			t.Errorf("%v to %d figures gives %q, want %q", c.v, c.digits, got, c.want)
		}
	}
}

func TestFormat(t *testing.T) {
	for _, c := range []struct {
		u      Unit
		si, sd float64
		want   string
	}{
		{Millimetre, 1.8412e-3, 0.12e-3, "1.84 ± 0.12 mm"},
		{Bar, 412345, 3100, "4.12 ± 0.03 bar"},
		{LitrePerSecond, 0.0423, 0.0011, "42.3 ± 1.1 L/s"},
		{Fahrenheit, 10, 1, "50.0 ± 1.8 F"}, // the offset does not enter the uncertainty
		{Percent, 0.052, 0.004, "5.2 ± 0.4 %"},
		{One, 104.2, 3.7, "104 ± 4"},
		{Ratio, 0.52, 0.03, "0.52 ± 0.03"},
	} {
		if got := c.u.Format(c.si, c.sd); got != c.want {
			t.Errorf("got %q, want %q", got, c.want)
		}
	}
}

// The printed value is within half the last place of the number, the printed
// uncertainty has one or two figures, and both end at the same place.
func TestWithUncertaintyRounds(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		v := rapid.Float64Range(-1e5, 1e5).Draw(t, "v")
		sd := math.Pow(10, rapid.Float64Range(-6, 4).Draw(t, "log10 sd"))
		value, u, ok := strings.Cut(WithUncertainty(v, sd), " ± ")
		if !ok {
			t.Fatalf("no ± in %q", WithUncertainty(v, sd))
		}
		pv, pu := parseFloat(t, value), parseFloat(t, u)
		// One figure is at worst 3 -> 3 (2.95 to 3.5): a sixth of sd; the value
		// moves by half of the same place.
		if math.Abs(pu-sd) > sd/6+1e-12 || math.Abs(pv-v) > sd/6+1e-9*math.Abs(v) {
			t.Fatalf("%v ± %v prints as %s ± %s", v, sd, value, u)
		}
		if figures := len(strings.TrimRight(strings.TrimLeft(strings.ReplaceAll(u, ".", ""), "0"), "0")); figures > 2 {
			t.Fatalf("%q has %d figures", u, figures)
		}
		if decimals(value) != decimals(u) {
			t.Fatalf("%q and %q end at different places", value, u)
		}
	})
}

func parseFloat(t *rapid.T, s string) float64 {
	var v, scale, point = 0.0, 1.0, false
	digits := strings.TrimPrefix(s, "-")
	for _, r := range digits {
		switch {
		case r == '.':
			point = true
		case r >= '0' && r <= '9':
			v = 10*v + float64(r-'0')
			if point {
				scale *= 10
			}
		default:
			t.Fatalf("%q is no plain decimal number", s)
		}
	}
	if s != digits {
		v = -v
	}
	return v / scale
}

func decimals(s string) int {
	if i := strings.IndexByte(s, '.'); i >= 0 {
		return len(s) - i - 1
	}
	return 0
}
