package friction_test

import (
	"fmt"
	"math"
	"testing"

	"pgregory.net/rapid"

	"tapround/calibrate/friction"
)

func TestSectionDerivatives(t *testing.T) {
	for _, c := range tried {
		radius := c.pipe.Bore / 2
		for _, q := range flows(c.pipe) {
			for name, f := range map[string]func(q, ln float64) friction.Value{
				"alpha":         func(q, ln float64) friction.Value { return c.pipe.Alpha(q, ln, water, g) },
				"velocity head": func(q, ln float64) friction.Value { return c.pipe.VelocityHead(q, ln, water, g) },
				"centre":        func(q, ln float64) friction.Value { return c.pipe.ProfileRatio(q, ln, water, g, centre) },
				"0.3 R":         func(q, ln float64) friction.Value { return c.pipe.ProfileRatio(q, ln, water, g, 0.3*radius) },
				"local head":    func(q, ln float64) friction.Value { return c.pipe.LocalVelocityHead(q, ln, water, g, 1.9*radius) },
				"centre head":   func(q, ln float64) friction.Value { return c.pipe.LocalVelocityHead(q, ln, water, g, centre) },
			} {
				derivatives(t, fmt.Sprintf("%s, %s, Re %.0f", name, c.name, c.pipe.Reynolds(q, water)), func(q, ln float64) (float64, float64, float64) {
					v := f(q, ln)
					return v.V, v.DQ, v.DParam
				}, q, c.lnParam)
			}
		}
	}
}

// Value and derivatives run through Re 2,000 and 4,000 without a step.
func TestSectionIsSmooth(t *testing.T) {
	const eps = 1e-10
	for _, c := range tried[:3] {
		for _, law := range []friction.Law{friction.DarcyWeisbach, friction.HazenWilliams} {
			p, ln := c.pipe, c.lnParam
			p.Law = law
			if law == friction.HazenWilliams {
				ln = math.Log(100)
			}
			for _, re := range []float64{friction.ReLaminar, friction.ReTurbulent, -friction.ReLaminar, -friction.ReTurbulent} {
				q := re * water / p.Bore * p.Area()
				for _, depth := range []float64{centre, 0.02 * p.Bore} {
					a, b := p.LocalVelocityHead(q*(1-eps), ln, water, g, depth), p.LocalVelocityHead(q*(1+eps), ln, water, g, depth)
					m, n := p.VelocityHead(q*(1-eps), ln, water, g), p.VelocityHead(q*(1+eps), ln, water, g)
					for _, v := range [][2]friction.Value{{a, b}, {m, n}} {
						// 2e-10 apart in ln q; logarithmic second derivatives are below 50.
						if d := v[1].V - v[0].V; math.Abs(d) > 1e-8*v[0].V {
							t.Errorf("%s, Re %g: value steps by %g", c.name, re, d)
						}
						if d := (v[1].DQ - v[0].DQ) * q; math.Abs(d) > 1e-8*v[0].V {
							t.Errorf("%s, Re %g: slope steps by %g", c.name, re, d)
						}
						if d := v[1].DParam - v[0].DParam; math.Abs(d) > 1e-8*v[0].V {
							t.Errorf("%s, Re %g: derivative by the parameter steps by %g", c.name, re, d)
						}
					}
				}
			}
		}
	}
}

// Alpha falls from 2 to the turbulent value through the join, and the velocity head
// rises with the flow all the same.
func TestAlphaJoin(t *testing.T) {
	for _, c := range tried[:3] {
		last, head := 2.0, 0.0
		for i := 0; i <= 1000; i++ {
			re := 1500 * math.Pow(4, float64(i)/1000)
			q := re * water / c.pipe.Bore * c.pipe.Area()
			a := c.pipe.Alpha(q, c.lnParam, water, g).V
			if re < friction.ReTurbulent && a > last {
				t.Fatalf("%s: alpha rises to %g at Re %g", c.name, a, re)
			}
			h := c.pipe.VelocityHead(q, c.lnParam, water, g)
			if !(h.V > head) || !(h.DQ > 0) {
				t.Fatalf("%s: the velocity head falls at Re %g", c.name, re)
			}
			last, head = a, h.V
		}
	}
}

// Even in the flow, the same from both walls, independent of units and of the length; at
// rest all heads are zero.
func TestSectionInvariances(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		law := friction.Law(rapid.IntRange(0, 1).Draw(t, "law"))
		p := friction.Pipe{Law: law, Length: rapid.Float64Range(1, 5000).Draw(t, "length"), Bore: rapid.Float64Range(0.01, 2).Draw(t, "bore")}
		re := math.Exp(rapid.Float64Range(-2, 17).Draw(t, "ln Re"))
		q := re * water / p.Bore * p.Area()
		ln := math.Log(p.Bore) + rapid.Float64Range(-14, -1).Draw(t, "ln k/D")
		if law == friction.HazenWilliams {
			ln = math.Log(rapid.Float64Range(40, 200).Draw(t, "C"))
		}
		depth := p.Bore * rapid.Float64Range(0, 1).Draw(t, "depth")
		near := func(what string, got, want friction.Value) {
			for i, d := range [3]float64{got.V - want.V, (got.DQ - want.DQ) * q, got.DParam - want.DParam} {
				if !(math.Abs(d) <= 1e-11*(1+math.Abs(want.V))) {
					t.Fatalf("%s: %+v, want %+v (number %d)", what, got, want, i)
				}
			}
		}
		u := p.ProfileRatio(q, ln, water, g, depth)
		reversed := p.ProfileRatio(-q, ln, water, g, depth)
		reversed.DQ *= -1
		near("reversed", reversed, u)
		// A depth just under the centre loses figures when it is turned round.
		near("from the other wall", p.ProfileRatio(q, ln, water, g, p.Bore-depth), u)
		long := p
		long.Length *= 9
		near("longer", long.ProfileRatio(q, ln, water, g, depth), u)
		if u.V < 0 || u.V > p.ProfileRatio(q, ln, water, g, centre).V*(1+1e-15) {
			t.Fatalf("u/V %g is below zero or above the centre's", u.V)
		}
		v := q / p.Area()
		head := v * v / (2 * g)
		within := func(what string, got, want float64) {
			if !(math.Abs(got-want) <= 1e-12*want) {
				t.Fatalf("%s: %g, want %g", what, got, want)
			}
		}
		within("velocity head", p.VelocityHead(q, ln, water, g).V, p.Alpha(q, ln, water, g).V*head)
		within("local velocity head", p.LocalVelocityHead(q, ln, water, g, depth).V, u.V*u.V*head)
		for _, rest := range []friction.Value{p.VelocityHead(0, ln, water, g), p.LocalVelocityHead(0, ln, water, g, depth)} {
			if rest != (friction.Value{}) {
				t.Fatalf("at rest: %+v", rest)
			}
		}
		if law == friction.HazenWilliams {
			return
		}
		a, b := rapid.Float64Range(0.01, 100).Draw(t, "length unit"), rapid.Float64Range(0.01, 100).Draw(t, "time unit")
		other := friction.Pipe{Length: a * p.Length, Bore: a * p.Bore}.ProfileRatio(a*a*a/b*q, ln+math.Log(a), a*a/b*water, a/b/b*g, a*depth)
		other.DQ *= a * a * a / b
		near("other units", other, u)
	})
}

// Against the wall: the logarithm is held at a thousandth of the radius, and a very rough
// wall cannot turn the flow round.
func TestProfileAtTheWall(t *testing.T) {
	p, q, lnK := turbulentAt(t, 0.02)
	held := p.ProfileRatio(q, lnK, water, g, 1e-3*p.Bore/2)
	for _, depth := range []float64{0, -1, p.Bore, 2 * p.Bore, 1e-6} {
		if got := p.ProfileRatio(q, lnK, water, g, depth); got != held {
			t.Errorf("depth %g: %+v, want that of 0.001 R, %+v", depth, got, held)
		}
	}
	// 1 + sqrt(f/8)/0.4 (1.5 + ln 0.001)
	within(t, "u/V at 0.001 R", held.V, 1+math.Sqrt(0.02/8)/0.4*(1.5+math.Log(1e-3)), 1e-9)
	q, ln := 0.1, math.Log(0.1*p.Bore)
	if got := p.ProfileRatio(q, ln, water, g, 0); got != (friction.Value{V: 0.05}) {
		t.Errorf("under a wall of k/D 0.1: %+v", got)
	}
	// Laminar flow has its parabola to the wall.
	q = 100 * water / p.Bore * p.Area()
	within(t, "laminar at 0.004 R", p.ProfileRatio(q, ln, water, g, 0.002*p.Bore).V, 2*(1-0.996*0.996), 1e-12)
}

// With Hazen and Williams's law alpha is that of the factor that loses as much, 2 g D
// S/V^2.
func TestHazenWilliamsSection(t *testing.T) {
	hw := friction.Pipe{Law: friction.HazenWilliams, Length: 77, Bore: 0.25}
	for _, q := range []float64{0.004, -0.03, 0.2} {
		h := hw.Loss(q, math.Log(90), water, g).H
		v := q / hw.Area()
		f := 2 * g * hw.Bore * h / hw.Length / (v * math.Abs(v))
		p, turbulent, lnK := turbulentAt(t, f)
		within(t, "alpha", hw.Alpha(q, math.Log(90), water, g).V, p.Alpha(turbulent, lnK, water, g).V, 1e-9)
		within(t, "centre", hw.ProfileRatio(q, math.Log(90), water, g, centre).V, p.ProfileRatio(turbulent, lnK, water, g, centre).V, 1e-9)
	}
}
