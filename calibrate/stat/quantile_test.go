package stat_test

import (
	"encoding/json"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"tapround/calibrate/stat"
)

func readChecks(t testing.TB, name string, into any) {
	t.Helper()
	b, err := os.ReadFile("../../testdata/checks/statistics/" + name)
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(b, into); err != nil {
		t.Fatalf("%s: %v", name, err)
	}
}

// example finds one entry of a file of worked examples.
func example(t testing.TB, file, id string, into any) {
	t.Helper()
	var all struct{ Examples []json.RawMessage }
	readChecks(t, file, &all)
	for _, raw := range all.Examples {
		var head struct{ ID string }
		if err := json.Unmarshal(raw, &head); err != nil {
			t.Fatal(err)
		}
		if head.ID == id {
			if err := json.Unmarshal(raw, into); err != nil {
				t.Fatal(err)
			}
			return
		}
	}
	t.Fatalf("%s has no example %s", file, id)
}

// tester is what testing.T and rapid.T share.
type tester interface {
	Helper()
	Errorf(format string, args ...any)
}

func near(t tester, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s is %.12g, want %.12g within %.1g", what, got, want, tol)
	}
}

func numbers(t testing.TB, s string) []float64 {
	t.Helper()
	var out []float64
	for _, f := range strings.Split(s, ",") {
		v, err := strconv.ParseFloat(f, 64)
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, v)
	}
	return out
}

// TestQuantiles compares with tables made by SciPy, to the 1e-10 that they carry.
func TestQuantiles(t *testing.T) {
	type table struct {
		P    []float64
		Rows map[string][]float64
	}
	var q struct {
		Normal     map[string]float64
		T, Chi2, F table
		Boundary   struct{ Alpha, Value []float64 } `json:"one_sided_boundary_chi2"`
	}
	readChecks(t, "quantiles.json", &q)
	const tol = 1e-10 // relative
	seen := 0
	check := func(what string, got, want float64) {
		t.Helper()
		seen++
		near(t, what, got, want, tol*math.Abs(want))
	}
	for p, want := range q.Normal {
		f := numbers(t, p)[0]
		check("normal "+p, stat.NormalQuantile(f), want)
		check("normal at "+p, stat.NormalCDF(want), f)
	}
	for name, x := range map[string]struct {
		table
		quantile func(p float64, d []float64) float64
		survival func(x float64, d []float64) float64
	}{
		"t":    {q.T, func(p float64, d []float64) float64 { return stat.TQuantile(p, d[0]) }, func(x float64, d []float64) float64 { return stat.TSurvival(x, d[0]) }},
		"chi2": {q.Chi2, func(p float64, d []float64) float64 { return stat.ChiSquareQuantile(p, d[0]) }, func(x float64, d []float64) float64 { return stat.ChiSquareSurvival(x, d[0]) }},
		"f":    {q.F, func(p float64, d []float64) float64 { return stat.FQuantile(p, d[0], d[1]) }, func(x float64, d []float64) float64 { return stat.FSurvival(x, d[0], d[1]) }},
	} {
		for dof, row := range x.Rows {
			d := numbers(t, dof)
			for i, want := range row {
				p := x.P[i]
				check(name+" "+dof, x.quantile(p, d), want)
				check(name+" tail "+dof, x.survival(want, d), 1-p)
				if name == "t" {
					check("t lower", stat.TQuantile(1-p, d[0]), -want)
				}
			}
		}
	}
	for i, a := range q.Boundary.Alpha {
		check("on the bound", stat.BoundaryQuantile(a), q.Boundary.Value[i])
	}
	if seen < 1000 {
		t.Errorf("only %d values were compared", seen)
	}
}
