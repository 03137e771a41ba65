package stat_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"

	"tapround/calibrate/stat"
)

func count(b []bool) int {
	n := 0
	for _, v := range b {
		if v {
			n++
		}
	}
	return n
}

// TestMultiple is the example of Benjamini and Hochberg's paper: 15 p values of a
// thrombolysis trial.
func TestMultiple(t *testing.T) {
	var bh struct {
		P        []float64 `json:"p_values"`
		Q        float64
		Rejected map[string]int
		BH       []float64 `json:"adjusted_bh"`
		BY       []float64 `json:"adjusted_by"`
		Holm     []float64 `json:"adjusted_holm"`
		Hochberg []float64 `json:"adjusted_hochberg"`
	}
	example(t, "multiple_testing.json", "bh1995", &bh)
	adjusted := map[string][]float64{
		"bonferroni": stat.AdjustBonferroni(bh.P), "holm": stat.AdjustHolm(bh.P), "hochberg": stat.AdjustHochberg(bh.P),
		"benjamini_hochberg": stat.AdjustBH(bh.P), "benjamini_yekutieli": stat.AdjustBY(bh.P), "unadjusted": bh.P,
	}
	if len(bh.Rejected) != len(adjusted) {
		t.Fatalf("%d procedures, want %d", len(bh.Rejected), len(adjusted))
	}
	for name, want := range bh.Rejected {
		if got := count(stat.Rejected(adjusted[name], bh.Q)); got != want {
			t.Errorf("%s rejects %d, want %d", name, got, want)
		}
	}
	if got := count(stat.BenjaminiHochberg(bh.P, bh.Q)); got != bh.Rejected["benjamini_hochberg"] {
		t.Errorf("BenjaminiHochberg rejects %d", got)
	}
	for name, want := range map[string][]float64{"benjamini_hochberg": bh.BH, "benjamini_yekutieli": bh.BY, "holm": bh.Holm, "hochberg": bh.Hochberg} {
		each(t, name, adjusted[name], want, 1e-9)
	}
}

// TestAdjustments: decisions do not depend on the order, ties share theirs, all are
// rejected when the largest p value is small and none when all stand above the line.
func TestAdjustments(t *testing.T) {
	all := map[string]func([]float64) []float64{"BH": stat.AdjustBH, "BY": stat.AdjustBY, "Bonferroni": stat.AdjustBonferroni, "Holm": stat.AdjustHolm, "Hochberg": stat.AdjustHochberg}
	rapid.Check(t, func(t *rapid.T) {
		p := rapid.SliceOfN(rapid.SampledFrom([]float64{0, 1e-4, 0.004, 0.01, 0.02, 0.05, 0.3, 0.3001, 0.8, 1}), 1, 12).Draw(t, "p")
		r := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 6))
		for name, adjust := range all {
			a := adjust(p)
			order := r.Perm(len(p))
			q := make([]float64, len(p))
			for i, k := range order {
				q[i] = p[k]
			}
			for i, v := range adjust(q) {
				if v != a[order[i]] {
					t.Fatalf("%s depends on the order: %v", name, p)
				}
			}
			for i := range p {
				if a[i] < p[i]-1e-15 || a[i] > 1 {
					t.Fatalf("%s makes %g of %g", name, a[i], p[i])
				}
				for j := range p {
					if p[i] == p[j] && a[i] != a[j] && name != "Holm" {
						t.Fatalf("%s treats ties apart", name)
					}
				}
			}
		}
	})
	if got := count(stat.BenjaminiHochberg([]float64{0.05, 0.049, 0.0495}, 0.05)); got != 3 {
		t.Errorf("all p values are at most q: %d rejected, want all", got)
	}
	if got := count(stat.BenjaminiHochberg([]float64{0.02, 0.04, 0.06}, 0.05)); got != 0 {
		t.Errorf("all p values stand above q i/m: %d rejected", got)
	}
}

func identity(n int) *mat.SymDense {
	s := mat.NewSymDense(n, nil)
	for i := range n {
		s.SetSym(i, i, 1)
	}
	return s
}

func sidesOf(n, s int) []int { return slices.Repeat([]int{s}, n) }

// TestFamilyLimitIndependent compares with Sidak's closed form as tabulated; the limits
// for 6 and 4 tests are those used with the by-pass example.
func TestFamilyLimitIndependent(t *testing.T) {
	var q struct {
		Sidak struct {
			Alpha []float64
			Rows  map[string][]float64
		} `json:"sidak_normal_two_sided"`
	}
	readChecks(t, "quantiles.json", &q)
	if len(q.Sidak.Rows) == 0 {
		t.Fatal("no table")
	}
	for n, row := range q.Sidak.Rows {
		m := int(numbers(t, n)[0])
		for i, want := range row {
			near(t, "Sidak "+n, stat.FamilyLimit(identity(m), sidesOf(m, 2), q.Sidak.Alpha[i], 0, 1), want, 1e-9)
		}
	}
}

// TestFamilyLimitSimulated drives the simulation where the answer is known.
func TestFamilyLimitSimulated(t *testing.T) {
	const draws, alpha = 200000, 0.05
	// The limit's standard error is that of the level, sqrt(alpha (1-alpha)/draws) =
	// 0.0005, over the slope of the level, about 0.12 here; five of them.
	const tol = 0.02
	t.Run("all but independent", func(t *testing.T) {
		c := identity(6)
		c.SetSym(0, 1, 1e-9) // takes it past the closed form
		near(t, "limit of 6", stat.FamilyLimit(c, sidesOf(6, 2), alpha, draws, 1), 2.631, tol)
	})
	t.Run("one statistic many times", func(t *testing.T) {
		c := mat.NewSymDense(5, nil)
		for i := range 5 {
			for j := range 5 {
				c.SetSym(i, j, 1)
			}
		}
		near(t, "two-sided", stat.FamilyLimit(c, sidesOf(5, 2), alpha, draws, 2), stat.NormalQuantile(0.975), tol)
		near(t, "one-sided", stat.FamilyLimit(c, sidesOf(5, 1), alpha, draws, 2), stat.NormalQuantile(0.95), tol)
	})
	t.Run("a statistic and its opposite", func(t *testing.T) {
		// The larger of w and -w is |w|.
		c := mat.NewSymDense(2, []float64{1, -1, -1, 1})
		near(t, "limit", stat.FamilyLimit(c, sidesOf(2, 1), alpha, draws, 3), stat.NormalQuantile(0.975), tol)
	})
	t.Run("one and two sides", func(t *testing.T) {
		// Independent: P(none above c) = Phi(c) (2 Phi(c) - 1) = 0.95 at c = 2.127.
		c := stat.FamilyLimit(identity(2), []int{1, 2}, alpha, draws, 4)
		near(t, "level", stat.NormalCDF(c)*(2*stat.NormalCDF(c)-1), 0.95, 0.0025)
	})
	t.Run("same seed", func(t *testing.T) {
		c := mat.NewSymDense(2, []float64{1, 0.5, 0.5, 1})
		a, b := stat.FamilyLimit(c, sidesOf(2, 2), alpha, 1000, 9), stat.FamilyLimit(c, sidesOf(2, 2), alpha, 1000, 9)
		if a != b {
			t.Errorf("the same seed gives %g and %g", a, b)
		}
		if a == stat.FamilyLimit(c, sidesOf(2, 2), alpha, 1000, 10) {
			t.Error("the seed has no effect")
		}
	})
}

// TestStepDownMinP: for independent tests the step-down p values are Sidak's by steps,
// 1 - (1 - p_(i))^(m-i+1) made monotone.
func TestStepDownMinP(t *testing.T) {
	w := []float64{0.3, 3.1, -2.4, 1.9, 2.5}
	sides := []int{2, 2, 2, 1, 1}
	p := []float64{0.7641771556, 0.0019352006, 0.0163950718, 0.0287165598, 0.0062096653} // normal tails
	const draws = 200000
	got := stat.StepDownMinP(w, identity(5), sides, draws, 1)
	order := []int{1, 4, 2, 3, 0}
	highest := 0.0
	for i, k := range order {
		highest = math.Max(highest, 1-math.Pow(1-p[k], float64(5-i)))
		// Five standard errors of a simulated probability.
		near(t, "adjusted p", got[k], highest, 5*math.Sqrt(highest*(1-highest)/draws)+1e-5)
	}
	// Tests that repeat each other cost nothing.
	c := mat.NewSymDense(3, []float64{1, 1, 1, 1, 1, 1, 1, 1, 1})
	for _, v := range stat.StepDownMinP([]float64{2.4, 2.4, 2.4}, c, sidesOf(3, 2), draws, 2) {
		near(t, "repeated test", v, p[2], 5*math.Sqrt(p[2]/draws))
	}
	// Two alike share the p value of the worse place, 1 - (1 - p)^2.
	for _, v := range stat.StepDownMinP([]float64{1.9, 1.9}, identity(2), sidesOf(2, 1), draws, 3) {
		near(t, "two alike", v, 1-math.Pow(1-p[3], 2), 5*math.Sqrt(0.057*0.943/draws))
	}
	// Nothing is more certain than the draws allow.
	if v := stat.StepDownMinP([]float64{40}, identity(1), []int{2}, 99, 1); v[0] != 0.01 {
		t.Errorf("p of 40 by 99 draws is %g", v[0])
	}
}
