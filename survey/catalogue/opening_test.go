package catalogue

import (
	"math"
	"strings"
	"testing"

	"tapround/survey"

	"pgregory.net/rapid"
)

// Every printed line of a valve must be within the range its own K gives, and
// be a point of one of the curves.
func TestValveOpeningsAgainstTables(t *testing.T) {
	notOurs := []string{"sluice in rectangular pipe", "diaphragm valve"} // no kinds of ours
	seen := 0
rows:
	for _, c := range checks(t, "valve_opening.csv") {
		name := c["valve"]
		for _, n := range notOurs {
			if name == n {
				continue rows
			}
		}
		var kind survey.FittingKind
		switch {
		case strings.HasPrefix(name, "gate"):
			kind = survey.GateValve
		case strings.HasPrefix(name, "butterfly"):
			kind = survey.ButterflyValve
		case strings.HasPrefix(name, "plug"):
			kind = survey.PlugValve
		case strings.HasPrefix(name, "ball"):
			kind = survey.BallValve
		case strings.HasPrefix(name, "globe"):
			kind = survey.GlobeValve
		default:
			t.Fatalf("row %q is not checked", name)
		}
		if strings.HasPrefix(c["K_on_pipe_velocity_head"], "closed") {
			continue
		}
		k, open := number(t, c["K_on_pipe_velocity_head"]), number(t, c["opening_numeric"])
		percent := 100 * open
		if strings.HasPrefix(c["opening_measure"], "turn angle") {
			percent = 100 * (90 - open) / 90 // a quarter turn from open to shut
		}
		onCurve := false
		for _, cv := range curves {
			for _, p := range cv.points {
				onCurve = onCurve || cv.kind == kind && math.Abs(p.percent-percent) < 0.01 && p.k == k
			}
		}
		if !onCurve {
			t.Errorf("%s %s open, K %v: on no curve", name, c["opening_as_printed"], k)
		}
		seen++
		if k == 0 {
			continue
		}
		low, high, sources, ok := ValveOpenings(kind, k)
		if !ok || low > percent+0.01 || high < percent-0.01 || len(sources) == 0 {
			t.Errorf("%s, K %v: %.1f to %.1f %% (%v), printed at %.1f", name, k, low, high, ok, percent)
		}
	}
	if seen < 50 {
		t.Errorf("only %d rows checked", seen)
	}
}

// Gate valves half open are printed with K from 1.15 to 5.6, quarter open from
// 5.5 to 24: one K must not be turned into one opening.
func TestGateValveScatter(t *testing.T) {
	for _, c := range []struct{ percent, k float64 }{
		{50, 1.15}, {50, 2.06}, {50, 2.1}, {50, 4}, {50, 4.5}, {50, 5.5}, {50, 5.6}, {25, 5.5}, {25, 17}, {25, 20}, {25, 24}, {75, 0.26}, {75, 1.2}, {100, 0.3},
	} {
		low, high, sources, ok := ValveOpenings(survey.GateValve, c.k)
		if !ok || low > c.percent || high < c.percent {
			t.Errorf("K %v: %.0f to %.0f %%, but a table prints it at %v %%", c.k, low, high, c.percent)
		}
		if high-low < 15 {
			t.Errorf("K %v is pinned to %.0f to %.0f %%", c.k, low, high)
		}
		if len(sources) != 6 {
			t.Errorf("%d tables", len(sources))
		}
	}
}

// Beyond every table only this is known: not further open than its last line.
func TestNearlyShut(t *testing.T) {
	low, high, _, ok := ValveOpenings(survey.GateValve, 5000)
	if !ok || low != 0 || high != 12.5 {
		t.Errorf("K 5000: %v to %v, want 0 to 12.5 %%", low, high)
	}
}

func TestValveOpeningsShape(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		kind := rapid.SampledFrom(survey.FittingKinds).Draw(t, "kind")
		k := math.Exp(rapid.Float64Range(-6, 10).Draw(t, "ln K"))
		low, high, sources, ok := ValveOpenings(kind, k)
		if ok != kind.CanBePartClosed() {
			t.Fatalf("%s: ok is %v", kind, ok)
		}
		if !ok {
			return
		}
		if !(0 <= low && low <= high && high <= 100) || len(sources) == 0 {
			t.Fatalf("%s, K %v: %v to %v", kind, k, low, high)
		}
		if k <= fixed[kind].High && high != 100 {
			t.Fatalf("%s: K %v, which an open one may have, is %v to %v", kind, k, low, high)
		}
		if k > fixed[kind].High && high-low < 3 {
			t.Fatalf("%s, K %v is pinned to %v to %v", kind, k, low, high)
		}
		// The further shut, the larger K.
		low2, high2, _, _ := ValveOpenings(kind, 1.2*k)
		if low2 > low+1e-9 || high2 > high+1e-9 {
			t.Fatalf("%s: K %v is %v to %v, K %v is %v to %v", kind, k, low, high, 1.2*k, low2, high2)
		}
	})
	for _, k := range []float64{0, -1, math.NaN(), math.Inf(1)} {
		if _, _, _, ok := ValveOpenings(survey.GateValve, k); ok {
			t.Errorf("K %v has an opening", k)
		}
	}
}
