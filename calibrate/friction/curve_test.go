package friction_test

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"

	"tapround/calibrate/friction"
)

func numbers(t *testing.T, s string) []float64 {
	t.Helper()
	var out []float64
	for _, w := range strings.Fields(s) {
		v, err := strconv.ParseFloat(w, 64)
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, v)
	}
	return out
}

func curve(t *testing.T, flow, head []float64) friction.Curve {
	t.Helper()
	c, err := friction.NewCurve(flow, head)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// Values and slopes by SciPy's PCHIP, for falling, unstable, short and efficiency curves
// and for ends whose three-point slope must be limited; and the published example on
// Fritsch and Carlson's points, to its four decimals.
func TestCurveAgainstPCHIP(t *testing.T) {
	sets := map[string]int{}
	for _, r := range table(t, "checks/friction/works_curves.csv", 118) {
		c := curve(t, numbers(t, r["flows"]), numbers(t, r["values"]))
		x := r.num(t, "x")
		h, dq, beyond := c.At(x, 1)
		at := fmt.Sprintf("%s at %g", r["set"], x)
		tol := 1e-12 * (1 + math.Abs(h)) // fifteen figures, less a cancellation
		if r["slope"] == "" {
			tol = 0.5e-4 // four decimals
		} else if want := r.num(t, "slope"); math.Abs(dq-want) > 1e-10*(1+math.Abs(want)) {
			t.Errorf("%s: slope %.12g, want %.12g", at, dq, want)
		}
		if want := r.num(t, "y"); math.Abs(h-want) > tol {
			t.Errorf("%s: %.12g, want %.12g", at, h, want)
		}
		if beyond {
			t.Errorf("%s counts as beyond the curve", at)
		}
		sets[r["set"]]++
	}
	if len(sets) != 8 {
		t.Errorf("%d sets compared: %v", len(sets), sets)
	}
}

// Between two points the curve stays between them and does not turn.
func TestCurveKeepsItsShape(t *testing.T) {
	flow, head := []float64{0, 0.01, 0.011, 0.05, 0.052, 0.1}, []float64{40, 40, 30, 29.9, 5, 5.5}
	c := curve(t, flow, head)
	for i := 1; i < len(flow); i++ {
		last := head[i-1]
		sign := head[i] - head[i-1]
		for j := 0; j <= 100; j++ {
			h, dq, _ := c.At(flow[i-1]+(flow[i]-flow[i-1])*float64(j)/100, 1)
			if (h-last)*sign < -1e-12 || dq*sign < -1e-12 {
				t.Fatalf("between points %d and %d: %g after %g, slope %g", i, i+1, h, last, dq)
			}
			last = h
		}
	}
}

// Affinity laws: H/s^2 against Q/s is one curve, and the slope goes with s. The source is
// any text on pumps; ISO 9906 converts test points to the rated speed so.
func TestCurveAffinity(t *testing.T) {
	c := curve(t, []float64{0, 0.02, 0.05, 0.08}, []float64{40, 38, 30, 16})
	for _, s := range []float64{0.5, 0.9, 1.2} {
		for _, q := range []float64{-0.01, 0, 0.013, 0.05, 0.07, 0.2} {
			rated, slope1, out := c.At(q, 1)
			h, dq, beyond := c.At(s*q, s)
			within(t, "head", h, s*s*rated, 1e-14)
			within(t, "slope", dq, s*slope1, 1e-12)
			if beyond != out {
				t.Errorf("q %g at speed %g: beyond is %v", q, s, beyond)
			}
			by := slope(func(q float64) float64 { h, _, _ := c.At(q, s); return h }, s*q+1e-4, 1e-5)
			_, dq, _ = c.At(s*q+1e-4, s)
			within(t, fmt.Sprintf("slope at %g by differences", s*q+1e-4), dq, by, 1e-8)
		}
	}
	// At rest a machine gives no head; any flow through it is beyond its curve.
	if h, dq, beyond := c.At(0.01, 0); h != 0 || dq != 0 || !beyond {
		t.Errorf("at rest with flow: %g, %g, %v", h, dq, beyond)
	}
	if h, dq, beyond := c.At(0, 0); h != 0 || dq != 0 || beyond {
		t.Errorf("at rest: %g, %g, %v", h, dq, beyond)
	}
}

// Beyond its ends a curve goes on straight, with the slope it ended with, and says so.
func TestCurveBeyondItsEnds(t *testing.T) {
	flow, head := []float64{0.01, 0.02, 0.05, 0.08}, []float64{40, 38, 30, 16}
	c := curve(t, flow, head)
	for _, e := range []struct{ x, y, step float64 }{{0.01, 40, -1}, {0.08, 16, 1}} {
		y, d, beyond := c.At(e.x, 1)
		if y != e.y || beyond {
			t.Errorf("at the end %g: %g, beyond %v", e.x, y, beyond)
		}
		for _, by := range []float64{1e-12, 0.001, 0.5} {
			h, dq, beyond := c.At(e.x+e.step*by, 1)
			within(t, "on from the end", h, e.y+d*e.step*by, 1e-12)
			if dq != d || !beyond {
				t.Errorf("%g past the end: slope %g for %g, beyond %v", by, dq, d, beyond)
			}
		}
	}
}

func TestNewCurveRefuses(t *testing.T) {
	for name, c := range map[string]struct {
		flow, head []float64
		want       []string
	}{
		"nothing":         {nil, nil, []string{"at least two points, got 0"}},
		"one point":       {[]float64{1}, []float64{2}, []string{"at least two points, got 1"}},
		"numbers differ":  {[]float64{1, 2}, []float64{2}, []string{"2 flows and 1 heads"}},
		"falling, twice":  {[]float64{0, 1, 1, 0.5}, []float64{4, 3, 2, 1}, []string{"point 3 (1 m3/s)", "point 4 (0.5 m3/s)"}},
		"no number":       {[]float64{0, 1, 2}, []float64{4, math.NaN(), 2}, []string{"point 2 (1 m3/s, NaN m)"}},
		"flow not finite": {[]float64{0, 1, math.Inf(1)}, []float64{4, 3, 2}, []string{"point 3"}},
	} {
		_, err := friction.NewCurve(c.flow, c.head)
		if err == nil {
			t.Errorf("%s: taken", name)
			continue
		}
		for _, w := range c.want {
			if !strings.Contains(err.Error(), w) {
				t.Errorf("%s: %q does not say %q", name, err, w)
			}
		}
	}
}

// The points are the caller's: changing them afterwards changes nothing.
func TestCurveKeepsItsOwnPoints(t *testing.T) {
	flow, head := []float64{0, 0.02, 0.05}, []float64{30, 28, 20}
	c := curve(t, flow, head)
	want, _, _ := c.At(0.03, 1)
	flow[1], head[1] = 0.049, 5
	if got, _, _ := c.At(0.03, 1); got != want {
		t.Errorf("%g after the points were changed, %g before", got, want)
	}
}
