package hydraulic

import (
	"math"
	"testing"
)

// TestClosures: which end's head a place on a pipe without flow has.
func TestClosures(t *testing.T) {
	for _, c := range []struct {
		name string
		shut []string
		at   float64
		want float64
	}{
		{name: "pipe shut, at its From end", shut: []string{"P"}, at: 0, want: 20},
		{name: "pipe shut, half way", shut: []string{"P"}, at: 50, want: 20},
		{name: "valve shut, before it", shut: []string{"V1"}, at: 30, want: 40},
		{name: "valve shut, behind it", shut: []string{"V1"}, at: 30.01, want: 20},
		{name: "two valves, before both", shut: []string{"V1", "V2"}, at: 10, want: 40},
		{name: "two valves, between", shut: []string{"V1", "V2"}, at: 50, want: math.NaN()},
		{name: "two valves, behind both", shut: []string{"V1", "V2"}, at: 90, want: 20},
		{name: "pipe and valve, before the valve", shut: []string{"P", "V1"}, at: 10, want: math.NaN()},
		{name: "pipe and valve, behind it", shut: []string{"P", "V1"}, at: 40, want: 20},
	} {
		b := newBuild(t)
		b.reservoir("A", 40)
		b.reservoir("B", 20)
		b.plain("P", "A", "B", Fitting{Name: "V1", At: 30}, Fitting{Name: "V2", At: 70})
		for _, s := range c.shut {
			b.shut[s] = true
		}
		st := b.solve()
		for _, v := range []View{Piezometric, Total, LocalTotal} {
			near(t, c.name, b.on("P", c.at, v), c.want, 0)
		}
		for _, v := range []View{VelocityHead, LocalVelocityHead, Flow} {
			near(t, c.name, b.on("P", c.at, v), 0, 0)
		}
		if !st.Closed[0] {
			t.Errorf("%s: not closed", c.name)
		}
		g := b.sys.NewGradient()
		err := b.v.Gradient(Probe{Point: -1, Link: 0, At: c.at}, g)
		if math.IsNaN(c.want) {
			if err == nil {
				t.Errorf("%s: a gradient of an unknown head", c.name)
			}
			continue
		}
		if err != nil {
			t.Fatal(err)
		}
		side := 0
		if c.want == 20 {
			side = 1
		}
		near(t, c.name+": by its own level", g.FixedHead[side], 1, 0)
		near(t, c.name+": by the other level", g.FixedHead[1-side], 0, 0)
		near(t, c.name+": by roughness", g.LnRough[0], 0, 0)
	}
}

// TestOutlet: total head at the pipe's end is elevation and velocity head; the
// piezometric line ends at the elevation; an outlet that stands too high closes with
// a caveat, and the pipe below it has the head of its fed end.
func TestOutlet(t *testing.T) {
	for _, reversed := range []bool{false, true} {
		b := newBuild(t)
		b.reservoir("R", 30)
		b.point("O", Outlet, 10)
		from, to, at := "R", "O", 100.0
		if reversed {
			from, to, at = "O", "R", 0
		}
		b.plain("P", from, to, Fitting{Name: "V", At: 50})
		b.k["V"] = 4
		st := b.solve()
		e := b.on("P", at, VelocityHead)
		near(t, "at the end", b.on("P", at, Piezometric), 10, tight)
		near(t, "total there", b.on("P", at, Total), 10+e, tight)
		near(t, "total of the outlet", st.Head[b.index["O"]], 10+e, tight)
		near(t, "tap at the outlet", b.v.Read(Probe{Point: 1, Link: 0, View: Piezometric}), 10, 0)
		near(t, "pitot at the outlet", b.v.Read(Probe{Point: 1, Link: -1, View: VelocityHead}), e, 0)
		near(t, "tap at the reservoir", b.v.Read(Probe{Point: 0, Link: 0, View: Piezometric}), 30, 0)
		near(t, "still water there", b.v.Read(Probe{Point: 0, Link: 0, View: LocalVelocityHead, Depth: math.NaN()}), 0, 0)

		b.points[1].Elevation = 31
		st = b.solve()
		near(t, "below the outlet", b.on("P", 60, Piezometric), 30, 0)
		if !st.Closed[0] || len(st.Caveats) != 1 {
			t.Errorf("closed %v, caveats %q", st.Closed[0], st.Caveats)
		}
	}
}

// TestTwoPipesAtAnOutlet: each ends at its own total head; the point tells that of the
// wider.
func TestTwoPipesAtAnOutlet(t *testing.T) {
	b := newBuild(t)
	b.reservoir("R", 30)
	b.point("O", Outlet, 10)
	b.pipe("narrow", "R", "O", 100, 0.1, 1e-4)
	b.pipe("wide", "R", "O", 100, 0.3, 1e-4)
	st := b.solve()
	near(t, "at the outlet", st.Head[1], 10+b.on("wide", 100, VelocityHead), tight)
	near(t, "end of the narrow pipe", b.v.Read(Probe{Point: 1, Link: 0, View: Total}), 10+b.on("narrow", 100, VelocityHead), tight)
}

// TestProfile: the lines start and end at the points' heads and step at the fittings.
func TestProfile(t *testing.T) {
	b := newBuild(t)
	b.reservoir("R", 30)
	b.junction("A")
	b.point("O", Outlet, 5)
	b.plain("P", "R", "A", Fitting{Name: "E", At: 0}, Fitting{Name: "V", At: 40})
	b.pipe("Q", "A", "O", 60, 0.15, 1e-4, Fitting{Name: "N", At: 60, Bore: 0.06, JetBore: 0.06})
	b.k["E"], b.k["V"], b.k["N"] = 0.5, 3, 0.1
	b.solve()
	q := b.flowIn("P")
	head := func(bore float64) float64 { v := q / (math.Pi / 4 * bore * bore); return v * v / (2 * b.g) }
	p := b.v.Profile(b.link("P"))
	var at []float64
	for _, s := range p {
		at = append(at, s.At)
		if s.At >= 0 {
			near(t, "velocity head", s.Total-s.Piezometric, b.on("P", 10, VelocityHead), tight)
		}
	}
	if len(p) != 5 || at[0] != 0 || at[1] != 0 || at[2] != 40 || at[3] != 40 || at[4] != 100 || p[0].After || !p[1].After {
		t.Fatalf("stations: %+v", p)
	}
	near(t, "first", p[0].Total, 30, 0)
	near(t, "entrance", p[0].Total-p[1].Total, 0.5*head(0.2), tight)
	near(t, "valve", p[2].Total-p[3].Total, 3*head(0.2), tight)
	near(t, "last", p[4].Total, b.headAt("A"), tight)
	near(t, "slope", (p[1].Total-p[2].Total)/40, (p[3].Total-p[4].Total)/60, tight)
	n := b.v.Profile(b.link("Q"))
	if len(n) != 3 {
		t.Fatalf("stations: %+v", n)
	}
	near(t, "nozzle", n[1].Total-n[2].Total, 0.1*head(0.06), tight)
	near(t, "jet", n[2].Total-n[2].Piezometric, head(0.06), tight)
	near(t, "in the open", n[2].Piezometric, 5, 0)
	b.points[b.index["O"]].Elevation = 35
	b.solve()
	n = b.v.Profile(b.link("Q"))
	near(t, "no jet from an outlet above the level", n[2].Piezometric, 30, 0)
}

// TestReverseK: an enlargement that the water meets the other way round has its own
// coefficient, which is not a parameter then.
func TestReverseK(t *testing.T) {
	b := newBuild(t)
	b.reservoir("R", 30)
	b.reservoir("S", 20)
	b.plain("P", "R", "S", Fitting{Name: "E", At: 50, ReverseK: 0.3})
	b.k["E"] = 0.8
	for _, backwards := range []bool{false, true} {
		if backwards {
			b.head["R"], b.head["S"] = 20, 30
		}
		b.solve()
		v := b.flowIn("P") / (math.Pi / 4 * 0.04)
		k := 0.8
		if backwards {
			k = -0.3
		}
		near(t, "step", b.on("P", 50, Total)-b.on("P", 50.0000001, Total), k*v*v/(2*b.g), 1e-6)
		grad := b.sys.NewGradient()
		if err := b.v.Gradient(Probe{Point: -1, Link: 0, View: Flow}, grad); err != nil {
			t.Fatal(err)
		}
		if (grad.LnK[0] == 0) != backwards {
			t.Errorf("backwards %v: derivative by ln K %g", backwards, grad.LnK[0])
		}
	}
}

// TestReadKeepsItsRound: what the caller changes after Solve does not reach readings.
func TestReadKeepsItsRound(t *testing.T) {
	b := newBuild(t)
	b.reservoir("R", 30)
	b.reservoir("S", 20)
	b.plain("P", "R", "S")
	b.solve()
	p := Probe{Point: -1, Link: 0, At: 30, View: LocalTotal, Depth: 0.05}
	g, again := b.sys.NewGradient(), b.sys.NewGradient()
	before := b.v.Read(p)
	if err := b.v.Gradient(p, g); err != nil {
		t.Fatal(err)
	}
	b.p.LnRough[0], b.c.Head[0], b.c.Viscosity = 0, 99, 1
	near(t, "reading", b.v.Read(p), before, 0)
	if err := b.v.Gradient(p, again); err != nil {
		t.Fatal(err)
	}
	near(t, "derivative", again.LnRough[0], g.LnRough[0], 0)
	b.c.Viscosity = -1
	if _, err := b.v.Solve(&b.p, &b.c, nil); err == nil {
		t.Error("a negative viscosity was accepted")
	}
	near(t, "after a failed round", b.v.Read(p), math.NaN(), 0)
	if b.v.Gradient(p, g) == nil {
		t.Error("after a failed round there is a gradient")
	}
}

// TestNoAllocation: steps and gradients work in the solver's own room. What a solution
// allocates is its state, whatever the number of steps.
func TestNoAllocation(t *testing.T) {
	w := grid(500)
	v := w.sys.NewSolver()
	cold, err := v.Solve(&w.p, &w.c, nil)
	if err != nil {
		t.Fatal(err)
	}
	short := testing.AllocsPerRun(5, func() { _, _ = v.Solve(&w.p, &w.c, cold) })
	long := testing.AllocsPerRun(5, func() { _, _ = v.Solve(&w.p, &w.c, nil) })
	if cold.Iterations < 5 || long > short+2 {
		t.Errorf("%g allocations from a near start, %g in %d steps", short, long, cold.Iterations)
	}
	g := w.sys.NewGradient()
	p := Probe{Point: -1, Link: 3, At: 10, View: LocalTotal, Depth: math.NaN()}
	if n := testing.AllocsPerRun(5, func() { _ = v.Gradient(p, g) }); n != 0 {
		t.Errorf("a gradient allocates %g times", n)
	}
}
