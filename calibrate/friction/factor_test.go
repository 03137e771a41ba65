package friction_test

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"testing"

	"tapround/calibrate/friction"
)

// The roots were found with 50 digits by Newton and by the Lambert W form, which agree.
func TestColebrookGrid(t *testing.T) {
	for _, r := range table(t, "checks/friction/colebrook_grid.csv", 273) {
		re, rel := r.num(t, "Re"), r.num(t, "k_over_D")
		// 1e-14 is some 50 roundings; the table itself carries 17 digits.
		within(t, fmt.Sprintf("f at Re %g, k/D %g", re, rel), friction.Colebrook(re, rel).F, r.num(t, "f_colebrook"), 1e-14)
	}
}

// Colebrook-White holds at the root whatever the start was: from Re 2,000 to 1e12, also
// where no pipe is.
func TestColebrookSolvesItsEquation(t *testing.T) {
	for l := 3.3; l <= 12; l += 0.05 {
		for _, rel := range []float64{0, 1e-9, 1e-7, 1e-6, 1e-5, 1e-4, 1e-3, 1e-2, 0.05, 0.2, 0.5, 1} {
			re := math.Pow(10, l)
			x := 1 / math.Sqrt(friction.Colebrook(re, rel).F)
			// x is of the order of 10, and its rounding 1e-15.
			if g := x + 2*math.Log10(rel/3.7+2.51*x/re); !(math.Abs(g) < 1e-14) {
				t.Errorf("Re %g, k/D %g: the two sides differ by %g", re, rel, g)
			}
		}
	}
}

func TestLaminarFactor(t *testing.T) {
	for _, r := range table(t, "checks/friction/laminar.csv", 9) {
		re := r.num(t, "Re")
		if re > friction.ReLaminar {
			continue // in the join here
		}
		for _, rel := range []float64{0, 0.01} {
			f := friction.DarcyFactor(re, rel)
			within(t, fmt.Sprintf("f at Re %g", re), f.F, r.num(t, "f"), 2e-14) // table: 15 digits
			if f.DLnRe != -1 || f.DLnK != 0 {
				t.Errorf("Re %g: slopes %g and %g, want -1 and 0", re, f.DLnRe, f.DLnK)
			}
		}
	}
}

// Published single values; charts are read to some 3 %, iterated values to the last
// figure, as the tolerance column says.
func TestPublishedFactors(t *testing.T) {
	for _, r := range table(t, "checks/friction/spot_values.csv", 26) {
		f := friction.DarcyFactor(r.num(t, "Re"), r.num(t, "k_over_D")).F
		within(t, r["case"]+" ("+r["source"]+")", f, r.num(t, "f_published"), r.num(t, "suggested_rel_tolerance"))
	}
}

// Friction factors in complete turbulence of Crane Technical Paper 410, made with k =
// 0.00015 ft and rounded, mostly upwards, to three decimals: up to 5 % over the law, and
// 1.1 % under it.
func TestRoughLimit(t *testing.T) {
	seen := 0
	for _, r := range table(t, "checks/catalogue/crane_multiples.csv", 62) {
		if r["kind"] != "f_T" {
			continue
		}
		var inch float64
		if _, err := fmt.Sscanf(r["note"], "computed with k = 0.00015 ft and Schedule 40 inside diameter (ASME B36.10) of %f in", &inch); err != nil {
			t.Fatal(err, r["note"])
		}
		seen++
		f := friction.Colebrook(1e10, 0.00015*12/inch).F
		within(t, "rough limit, "+r["item"], f, r.num(t, "f_T_computed"), 5e-4) // printed to 4 figures
		if d := r.num(t, "value")/f - 1; d < -0.012 || d > 0.05 {
			t.Errorf("%s: published %s is %+.1f %% of the law's %.5f", r["item"], r["value"], 100*d, f)
		}
	}
	if seen < 15 {
		t.Errorf("only %d sizes seen", seen)
	}
}

func TestColebrookDerivativeTable(t *testing.T) {
	raw, err := os.ReadFile("../../testdata/checks/friction/colebrook_derivatives.json")
	if err != nil {
		t.Fatal(err)
	}
	var doc struct {
		Colebrook struct {
			Rows []struct {
				Re     float64
				Rel    float64 `json:"rel_roughness"`
				F      float64 `json:"f"`
				ByK    float64 `json:"dlnf_dlneps"`
				ByLnRe float64 `json:"dlnf_dlnRe"`
			}
		}
	}
	if err := json.Unmarshal(raw, &doc); err != nil {
		t.Fatal(err)
	}
	if len(doc.Colebrook.Rows) < 9 {
		t.Fatalf("%d rows", len(doc.Colebrook.Rows))
	}
	for _, r := range doc.Colebrook.Rows {
		f := friction.Colebrook(r.Re, r.Rel)
		at := fmt.Sprintf(" at Re %g, k/D %g", r.Re, r.Rel)
		// The table has 12 or 13 figures, the smallest of them 8.
		within(t, "f"+at, f.F, r.F, 1e-10)
		within(t, "d ln f/d ln k"+at, f.DLnK, r.ByK, 1e-10)
		within(t, "d ln f/d ln Re"+at, f.DLnRe, r.ByLnRe, 1e-10)
	}
}

var (
	reynolds = []float64{50, 900, 1990, 2010, 2200, 2600, 3000, 3500, 3990, 4010, 6e3, 3e4, 2e5, 1e6, 3e7}
	rels     = []float64{0, 1e-6, 1e-4, 1e-3, 0.01, 0.05, 0.3, 0.99, 1.01, 30, 1000}
	lnRe     = math.Log(friction.ReLaminar)
)

// Every region: laminar, join, smooth, rough, and beyond the law's own range.
func TestFactorDerivatives(t *testing.T) {
	for _, re := range reynolds {
		for _, rel := range rels {
			f := friction.DarcyFactor(re, rel)
			at := fmt.Sprintf(" at Re %g, k/D %g", re, rel)
			// Steps of 1e-3 in the logarithm leave 1e-12 of curvature and 1e-13 of
			// rounding; 2e-10 has room for the steep foot of the join.
			by := slope(func(x float64) float64 { return math.Log(friction.DarcyFactor(math.Exp(x), rel).F) }, math.Log(re), 1e-3)
			if !(math.Abs(by-f.DLnRe) < 2e-10) {
				t.Errorf("d ln f/d ln Re%s: %.12g, by differences %.12g", at, f.DLnRe, by)
			}
			if rel == 0 {
				if f.DLnK != 0 {
					t.Errorf("d ln f/d ln k%s: %g, want 0", at, f.DLnK)
				}
				continue
			}
			by = slope(func(x float64) float64 { return math.Log(friction.DarcyFactor(re, math.Exp(x)).F) }, math.Log(rel), 1e-3)
			if !(math.Abs(by-f.DLnK) < 2e-10) {
				t.Errorf("d ln f/d ln k%s: %.12g, by differences %.12g", at, f.DLnK, by)
			}
		}
	}
}

// The friction factor and both derivatives run through Re 2,000 and 4,000 without a step
// (C1), and through k/D = 1, where the law goes on in a straight line.
func TestFactorIsSmooth(t *testing.T) {
	const eps = 1e-10
	same := func(what string, a, b friction.Factor) {
		t.Helper()
		// 2e-10 apart in the argument; second derivatives reach 100 at k/D 1,000.
		const tol = 3e-8
		if math.Abs(math.Log(a.F/b.F)) > tol || math.Abs(a.DLnRe-b.DLnRe) > tol || math.Abs(a.DLnK-b.DLnK) > tol {
			t.Errorf("%s: %+v before, %+v behind", what, a, b)
		}
	}
	for _, rel := range rels {
		for _, re := range []float64{friction.ReLaminar, friction.ReTurbulent} {
			same(fmt.Sprintf("Re %g, k/D %g", re, rel), friction.DarcyFactor(re*(1-eps), rel), friction.DarcyFactor(re*(1+eps), rel))
		}
	}
	for _, re := range reynolds {
		same(fmt.Sprintf("k/D 1 at Re %g", re), friction.DarcyFactor(re, 1-eps), friction.DarcyFactor(re, 1+eps))
	}
}

// The loss f Re^2 rises with the flow through the join, and never falls as the wall gets
// rougher, for every roughness that a search may try.
func TestLossRises(t *testing.T) {
	const n = 2000
	all := append([]float64{1e-9, 1e-5, 2e-4, 2e-3, 5e-3, 0.02, 0.03, 0.1, 1e4}, rels...)
	for _, rel := range all {
		const step = (math.Ln2 + 0.4) / n
		last, before := 0.0, friction.Factor{}
		for i := range n + 1 {
			re := math.Exp(lnRe - 0.2 + step*float64(i))
			f := friction.DarcyFactor(re, rel)
			// No step anywhere: f grows by its mean slope, less what the bend at 2,000 and
			// 4,000 takes (second derivatives below 200 up to k/D 1e4, steps of 5e-4).
			if grown := math.Log(f.F / before.F); i > 0 && math.Abs(grown-(f.DLnRe+before.DLnRe)/2*step) > 5e-5 {
				t.Fatalf("k/D %g: ln f steps by %g at Re %g, its slopes are %g and %g", rel, grown, re, before.DLnRe, f.DLnRe)
			}
			before = f
			if loss := f.F * re * re; !(loss > last) {
				t.Fatalf("k/D %g: the loss falls at Re %g", rel, re)
			} else {
				last = loss
			}
			if f.DLnRe < -1-1e-12 {
				t.Fatalf("k/D %g, Re %g: slope %g is under -1", rel, re, f.DLnRe)
			}
			if f.DLnK < 0 {
				t.Fatalf("k/D %g, Re %g: f falls as the wall gets rougher (%g)", rel, re, f.DLnK)
			}
		}
	}
	for _, re := range reynolds {
		last := 0.0
		for l := -9.0; l < 5; l += 0.01 {
			f := friction.DarcyFactor(re, math.Pow(10, l)).F
			if !(f >= last) || math.IsInf(f, 0) {
				t.Fatalf("Re %g: f is %g at k/D 1e%.2f, %g just before", re, f, l, last)
			}
			last = f
		}
	}
}
