package friction_test

import (
	"fmt"
	"math"
	"testing"

	"pgregory.net/rapid"

	"tapround/calibrate/friction"
)

const (
	water = 1.004e-6 // m2/s, kinematic viscosity at 20 C
	g     = 9.80665
	foot  = 0.3048
	inch  = foot / 12
)

// pipes and the parameters they are tried with.
var tried = []struct {
	pipe    friction.Pipe
	lnParam float64
	name    string
}{
	{friction.Pipe{Length: 430, Bore: 0.15}, math.Log(1.5e-6), "smooth"},
	{friction.Pipe{Length: 430, Bore: 0.15}, math.Log(1.5e-3), "rough"},
	{friction.Pipe{Length: 25, Bore: 0.6}, math.Log(0.03), "very rough"},
	{friction.Pipe{Length: 25, Bore: 0.6}, math.Log(9), "beyond the law"},
	{friction.Pipe{Law: friction.HazenWilliams, Length: 430, Bore: 0.15}, math.Log(110), "C 110"},
	{friction.Pipe{Law: friction.HazenWilliams, Length: 90, Bore: 3}, math.Log(60), "C 60, 3 m"},
}

// flows in every region, forward and reversed, none on a joint.
func flows(p friction.Pipe) []float64 {
	var out []float64
	for _, re := range []float64{3, 200, 1500, 1950, 2050, 2500, 3000, 3900, 4100, 2e4, 4e5, 8e6} {
		q := re * water / p.Bore * p.Area()
		out = append(out, q, -q)
	}
	return out
}

// derivatives compares a law's derivatives with differences. The step of 2e-4 of the
// value leaves some 1e-12 of rounding and, where the join is as steep as under a wall
// rougher than the bore, 1e-9 of curvature.
func derivatives(t *testing.T, at string, f func(q, lnParam float64) (v, dq, dParam float64), q, lnParam float64) {
	t.Helper()
	v, dq, dp := f(q, lnParam)
	// By ln|q|, so that the scale of a derivative is that of the value.
	byQ := slope(func(x float64) float64 { v, _, _ := f(math.Copysign(math.Exp(x), q), lnParam); return v }, math.Log(math.Abs(q)), 2e-4)
	if !(math.Abs(byQ-dq*q) <= 1e-8*math.Abs(v)) {
		t.Errorf("%s, by flow: %.12g, by differences %.12g (value %g)", at, dq, byQ/q, v)
	}
	byP := slope(func(x float64) float64 { v, _, _ := f(q, x); return v }, lnParam, 2e-4)
	if !(math.Abs(byP-dp) <= 1e-8*math.Abs(v)) {
		t.Errorf("%s, by parameter: %.12g, by differences %.12g (value %g)", at, dp, byP, v)
	}
}

func TestLossDerivatives(t *testing.T) {
	for _, c := range tried {
		for _, q := range flows(c.pipe) {
			derivatives(t, fmt.Sprintf("%s, Re %.0f", c.name, c.pipe.Reynolds(q, water)), func(q, ln float64) (float64, float64, float64) {
				l := c.pipe.Loss(q, ln, water, g)
				return l.H, l.DQ, l.DParam
			}, q, c.lnParam)
		}
	}
	for _, q := range []float64{0.02, -0.02} {
		h, dq := friction.Minor(q, 3.5, 0.1, g)
		// K V|V|/2g by hand.
		v := q / (math.Pi / 4 * 0.01)
		within(t, "fitting", h, 3.5*v*math.Abs(v)/(2*g), 1e-14)
		within(t, "fitting's slope", dq, 2*h/q, 1e-14)
	}
}

// At rest the loss is linear with the slope of Hagen and Poiseuille's law, 32 nu L V/(g
// D^2), never flat.
func TestLossAtRest(t *testing.T) {
	for _, c := range tried {
		l := c.pipe.Loss(0, c.lnParam, water, g)
		if l.H != 0 || !(l.DQ > 0) || l.DParam != 0 {
			t.Errorf("%s at rest: %+v", c.name, l)
		}
		tiny := c.pipe.Loss(1e-12, c.lnParam, water, g)
		within(t, c.name+", slope near rest", tiny.H/1e-12, l.DQ, 1e-9)
		if c.pipe.Law == friction.DarcyWeisbach {
			within(t, c.name+", slope at rest", l.DQ, 32*water*c.pipe.Length/(g*c.pipe.Bore*c.pipe.Bore*c.pipe.Area()), 1e-14)
		}
	}
}

// Value and slope run through Re 2,000 and 4,000 and through Hazen and Williams's slow
// joint without a step.
func TestLossIsSmooth(t *testing.T) {
	const eps = 1e-10
	for _, c := range tried {
		joints := []float64{1e-3 * c.pipe.Area()}
		if c.pipe.Law == friction.DarcyWeisbach {
			joints = nil
			for _, re := range []float64{friction.ReLaminar, friction.ReTurbulent} {
				joints = append(joints, re*water/c.pipe.Bore*c.pipe.Area())
			}
		}
		for _, q := range joints {
			for _, q := range []float64{q, -q} {
				a, b := c.pipe.Loss(q*(1-eps), c.lnParam, water, g), c.pipe.Loss(q*(1+eps), c.lnParam, water, g)
				at := fmt.Sprintf("%s, Re %.0f", c.name, c.pipe.Reynolds(q, water))
				// 2e-10 apart in ln q; logarithmic second derivatives are below 50.
				within(t, at+", loss", b.H, a.H, 1e-8)
				within(t, at+", slope", b.DQ, a.DQ, 1e-8)
				if math.Abs(b.DParam-a.DParam) > 1e-8*math.Abs(a.H) {
					t.Errorf("%s, by parameter: %g before, %g behind", at, a.DParam, b.DParam)
				}
			}
		}
	}
}

// What holds for every pipe: the loss turns round with the flow, is linear in the
// length, rises with flow and roughness, and does not depend on the units.
func TestLossInvariances(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		law := friction.Law(rapid.IntRange(0, 1).Draw(t, "law"))
		p := friction.Pipe{Law: law, Length: rapid.Float64Range(1, 5000).Draw(t, "length"), Bore: rapid.Float64Range(0.01, 2).Draw(t, "bore")}
		re := math.Exp(rapid.Float64Range(-2, 17).Draw(t, "ln Re"))
		q := re * water / p.Bore * p.Area()
		ln := math.Log(p.Bore) + rapid.Float64Range(-14, 2).Draw(t, "ln k/D")
		if law == friction.HazenWilliams {
			ln = math.Log(rapid.Float64Range(5, 200).Draw(t, "C"))
		}
		close := func(what string, got, want float64) {
			// Rounding of a handful of powers and logarithms.
			if !(math.Abs(got-want) <= 1e-11*math.Abs(want)) {
				t.Fatalf("%s: %g, want %g", what, got, want)
			}
		}
		l := p.Loss(q, ln, water, g)
		back := p.Loss(-q, ln, water, g)
		close("reversed", back.H, -l.H)
		close("reversed, slope", back.DQ, l.DQ)
		close("reversed, by parameter", back.DParam, -l.DParam)
		long := p
		long.Length *= 7
		close("seven times as long", long.Loss(q, ln, water, g).H, 7*l.H)
		if !(l.H > 0 && l.DQ > 0) {
			t.Fatalf("%+v: loss or slope not positive", l)
		}
		if more := p.Loss(1.01*q, ln, water, g).H; !(more > l.H) {
			t.Fatalf("loss falls from %g to %g with the flow", l.H, more)
		}
		if law == friction.HazenWilliams {
			if !(l.DParam < 0) {
				t.Fatalf("loss does not fall with C: %+v", l)
			}
			return // its constant has units
		}
		if l.DParam < 0 {
			t.Fatalf("loss falls with the roughness: %+v", l)
		}
		// Another unit of length (a of them to the metre) and of time (b to the second).
		a, b := rapid.Float64Range(0.01, 100).Draw(t, "length unit"), rapid.Float64Range(0.01, 100).Draw(t, "time unit")
		other := friction.Pipe{Length: a * p.Length, Bore: a * p.Bore}.Loss(a*a*a/b*q, ln+math.Log(a), a*a/b*water, a/b/b*g)
		// The regions' borders are at one Re, which rounding may cross: both sides agree there.
		close("other units", other.H, a*l.H)
		close("other units, slope", other.DQ, b/a/a*l.DQ)
		if math.Abs(other.DParam-a*l.DParam) > 1e-11*a*l.H {
			t.Fatalf("other units, by parameter: %g, want %g", other.DParam, a*l.DParam)
		}
	})
}

func TestNothingIsAllocated(t *testing.T) {
	curve, err := friction.NewCurve([]float64{0, 0.02, 0.05}, []float64{30, 28, 20})
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range tried {
		if n := testing.AllocsPerRun(100, func() {
			for _, q := range [...]float64{0, 1e-5, 3e-4, 0.05} {
				sink += c.pipe.Loss(q, c.lnParam, water, g).H + c.pipe.VelocityHead(q, c.lnParam, water, g).V +
					c.pipe.LocalVelocityHead(q, c.lnParam, water, g, math.NaN()).V
				h, _, _ := curve.At(q, 0.9)
				sink += h
			}
		}); n != 0 {
			t.Errorf("%s: %v allocations", c.name, n)
		}
	}
}
