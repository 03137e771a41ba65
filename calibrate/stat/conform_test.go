package stat_test

import (
	"math"
	"testing"

	"tapround/calibrate/stat"
)

// TestEndGauge is the calibration of an end gauge, JCGM 100:2008, annex H.1: combined
// uncertainty, effective degrees of freedom and expanded uncertainty.
func TestEndGauge(t *testing.T) {
	var h struct {
		Inputs              map[string][]*float64
		Published, Computed map[string]any
	}
	example(t, "gum.json", "H1", &h)
	in := func(name string, i int) float64 {
		v := h.Inputs[name]
		if v == nil {
			t.Fatalf("no input %s", name)
		}
		if v[i] == nil {
			return math.Inf(1)
		}
		return *v[i]
	}
	// l = lS + d - lS (dalpha theta + alphaS dtheta), in nanometres.
	lS, theta, alpha := in("lS_mm", 0), in("theta_C", 0), in("alphaS_perC", 0)
	u := []float64{1e6 * in("lS_mm", 1), 1e6 * in("d_mm", 1), 1e6 * lS * theta * in("dalpha_perC", 1), 1e6 * lS * alpha * in("dtheta_C", 1)}
	dof := []float64{in("lS_mm", 2), in("d_mm", 2), in("dalpha_perC", 2), in("dtheta_C", 2)}
	sum := 0.0
	for _, v := range u {
		sum += v * v
	}
	nu := stat.EffectiveDof(u, dof)
	// The Guide truncates the degrees of freedom before it looks up t.
	expanded := stat.TQuantile(0.995, math.Floor(nu)) * math.Sqrt(sum)
	near(t, "u", math.Sqrt(sum), h.Computed["u_nm"].(float64), 1e-7)
	near(t, "degrees of freedom", nu, h.Computed["nu_eff"].(float64), 1e-6)
	near(t, "U99", expanded, h.Computed["U99_nm"].(float64), 1e-6)
	near(t, "published u", math.Sqrt(sum), h.Published["u_nm"].(float64), 0.5)
	near(t, "published degrees of freedom", math.Floor(nu), h.Published["nu_eff"].(float64), 0)
	near(t, "published t", stat.TQuantile(0.995, 16), h.Published["t99"].(float64), 5e-3)
	near(t, "published U99", expanded, h.Published["U99_nm"].(float64), 0.5)
}

// TestProduct is the product of three quantities of JCGM 100:2008, G.4.1.
func TestProduct(t *testing.T) {
	var g struct {
		U                   []float64 `json:"relative_u_percent"`
		N                   []float64
		Published, Computed map[string]float64
	}
	example(t, "gum.json", "G4", &g)
	for i := range g.N {
		g.N[i]--
	}
	nu := stat.EffectiveDof(g.U, g.N)
	near(t, "degrees of freedom", nu, g.Computed["nu_eff"], 1e-7)
	near(t, "published degrees of freedom", nu, g.Published["nu_eff"], 0.05)
	if v := stat.EffectiveDof([]float64{1, 2}, []float64{math.Inf(1), math.Inf(1)}); !math.IsInf(v, 1) {
		t.Errorf("known uncertainties have %g degrees of freedom", v)
	}
}

// TestConformance holds to the examples of JCGM 106:2012.
func TestConformance(t *testing.T) {
	type item struct{ Y, U, Upper, Published, Computed float64 }
	var c struct {
		Table        map[string]float64
		Zener, Sound item
	}
	example(t, "gum.json", "106", &c)
	for _, i := range []item{c.Zener, c.Sound} {
		p := stat.ConformanceProbability(i.Y, i.U, math.Inf(-1), i.Upper)
		near(t, "probability", p, i.Computed, 1e-9)
		near(t, "published probability", p, i.Published, 1e-3)
		// At the edge of the guard band the probability is what was asked for.
		near(t, "guard band", stat.ConformanceProbability(i.Upper-stat.GuardBand(i.U, p), i.U, math.Inf(-1), i.Upper), p, 1e-12)
	}
	if len(c.Table) == 0 {
		t.Fatal("no table")
	}
	for p, z := range c.Table {
		// The printed table rounds down the last figure of 1.6449.
		near(t, "guard factor "+p, stat.GuardBand(1, numbers(t, p)[0]), z, 6e-3)
	}
	near(t, "between limits", stat.ConformanceProbability(0, 1, -1.9599639845401, 1.9599639845401), 0.95, 1e-10)
}
