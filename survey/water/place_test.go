package water_test

import (
	"math"
	"strings"
	"testing"

	"tapround/survey/water"
)

func TestGravity(t *testing.T) {
	seen := 0
	for _, c := range checks(t, "gravity.csv") {
		want := number(t, c["value"])
		if c["id"] == "G-COEF-gamma_p" { // gravity at the pole, read
			// The printed k and e2 fix the pole to some 2e-10 only.
			within(t, c["id"], water.Gravity(90, 0), want, 3e-10)
			continue
		}
		got := water.Gravity(number(t, c["lat_deg"]), number(t, c["height_m"]))
		switch {
		case strings.HasPrefix(c["id"], "G-LAT"):
			within(t, c["id"], got, want, 1e-8)
		case strings.HasPrefix(c["id"], "G-H2"):
			within(t, c["id"], got, want, 2e-6)
		case strings.HasPrefix(c["id"], "G-IEC"):
			within(t, c["id"], got, want, 3e-4) // another, rougher formula (from memory)
		default:
			t.Fatalf("row %s is not checked", c["id"])
		}
		seen++
	}
	if seen < 25 {
		t.Errorf("only %d rows checked", seen)
	}
	if water.Gravity(-45, 100) != water.Gravity(45, 100) {
		t.Error("gravity differs between north and south")
	}
	for _, lat := range []float64{90.01, -91, math.NaN()} {
		if !math.IsNaN(water.Gravity(lat, 0)) {
			t.Errorf("gravity at latitude %v is a number", lat)
		}
	}
}

func TestStandardAtmosphere(t *testing.T) {
	seen := 0
	for _, c := range checks(t, "atmosphere.csv") {
		level, want := number(t, c["altitude_m"]), number(t, c["value"])
		switch {
		case strings.HasPrefix(c["id"], "ISA-GEOM"):
			within(t, c["id"], water.StandardAtmosphere(level)/100, want, 0.01)
		case strings.HasPrefix(c["id"], "ISA-GEOP"):
			// The table by geopotential altitude: the geometric one is r H/(r-H).
			const r = 6356766
			within(t, c["id"], water.StandardAtmosphere(r*level/(r-level))/100, want, 0.01)
		case strings.HasPrefix(c["id"], "ISA-HEAD"):
			head := water.StandardAtmosphere(level) / (water.Density(10) * water.StandardGravity)
			within(t, c["id"], head, want, 0.002)
		default:
			t.Fatalf("row %s is not checked", c["id"])
		}
		seen++
	}
	if seen < 40 {
		t.Errorf("only %d rows checked", seen)
	}
	for _, level := range []float64{-2001, 11001, math.NaN()} {
		if !math.IsNaN(water.StandardAtmosphere(level)) {
			t.Errorf("atmosphere at %v m is a number", level)
		}
	}
}
