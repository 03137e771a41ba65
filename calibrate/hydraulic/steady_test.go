package hydraulic

import (
	"fmt"
	"math"
	"strings"
	"testing"
)

// tight is the head, m, that a solution leaves open on a few links, with rounding.
const tight = 1e-10

// TestLaminar: one pipe in laminar flow is the law of Hagen and Poiseuille,
// H = 128 nu L Q/(pi g D^4).
func TestLaminar(t *testing.T) {
	b := newBuild(t)
	b.reservoir("R", 10)
	b.junction("A")
	b.pipe("P", "R", "A", 50, 0.02, 1e-5)
	b.draw["A"] = 1e-5 // Re some 500
	b.solve()
	want := 128 * b.nu * 50 * 1e-5 / (math.Pi * b.g * math.Pow(0.02, 4))
	near(t, "loss", 10-b.headAt("A"), want, tight)
	near(t, "half way", b.on("P", 25, Total), 10-want/2, tight)
	// Laminar alpha is 2: V^2/g.
	v := 1e-5 / (math.Pi / 4 * 0.02 * 0.02)
	near(t, "velocity head", b.on("P", 25, VelocityHead), v*v/b.g, tight)
	near(t, "at the centreline", b.on("P", 25, LocalVelocityHead), 2*v*v/b.g, tight)
}

// TestTorricelli: a wide pipe that ends in a nozzle discharges sqrt(2gH/(1+K)) in the
// bore of the jet, K on the jet.
func TestTorricelli(t *testing.T) {
	b := newBuild(t)
	b.reservoir("R", 30)
	b.point("O", Outlet, 12)
	b.pipe("P", "R", "O", 0.001, 1, 1e-6, Fitting{Name: "N", At: 0.001, Bore: 0.05, JetBore: 0.05})
	b.k["N"] = 0.06
	st := b.solve()
	area := math.Pi / 4 * 0.05 * 0.05
	near(t, "flow", b.flowIn("P"), area*math.Sqrt(2*9.81*18/1.06), 1e-9)
	v2 := math.Pow(b.flowIn("P")/area, 2) / (2 * 9.81)
	near(t, "head of the jet", st.Head[1], 12+v2, tight)
	near(t, "level of the jet", b.on("P", 0.0011, Piezometric), 12, 0)
	near(t, "total in the jet", b.on("P", 0.0011, Total), 12+v2, tight)
}

// TestParallel: two equal pipes side by side share the flow, and a third with a
// coefficient of a million takes next to nothing.
func TestParallel(t *testing.T) {
	b := newBuild(t)
	b.reservoir("R", 50)
	b.junction("A")
	b.plain("P1", "R", "A")
	b.plain("P2", "A", "R")
	b.plain("P3", "R", "A", Fitting{Name: "V", At: 50})
	b.k["V"] = 1e6
	b.draw["A"] = 0.08
	b.solve()
	near(t, "opposite equal flows", b.flowIn("P1"), -b.flowIn("P2"), 1e-12)
	near(t, "balance", b.flowIn("P1")-b.flowIn("P2")+b.flowIn("P3"), 0.08, 1e-12)
	loss := 50 - b.headAt("A")
	near(t, "throttled", b.flowIn("P3"), math.Pi/4*0.04*math.Sqrt(2*9.81*loss/1e6), 1e-8)
}

// TestRest: in a no-flow round every tap of a looped system shows one head exactly,
// and the gradient says that the level moves all of it and nothing else does.
func TestRest(t *testing.T) {
	for _, oneWay := range []bool{false, true} {
		b := newBuild(t)
		b.reservoir("R1", 61.3)
		b.reservoir("R2", 61.3)
		b.junction("A", "B", "C", "D")
		b.plain("P1", "R1", "A")
		b.plain("P2", "A", "B", Fitting{Name: "X", At: 40, OneWay: oneWay})
		b.plain("P3", "B", "C")
		b.plain("P4", "C", "A")
		b.plain("P5", "C", "D")
		b.plain("P6", "R2", "C")
		b.plain("P8", "R1", "R2")
		b.k["X"] = 2
		if oneWay {
			b.point("O", Outlet, 80)
			b.plain("P7", "D", "O")
		}
		checkRest(t, b, b.solve(), oneWay)
	}
}

func checkRest(t *testing.T, b *build, st *State, outlet bool) {
	t.Helper()
	for i, p := range b.points {
		if p.Kind == Junction && st.Head[i] != 61.3 {
			t.Errorf("point %s stands at %.17g", p.Name, st.Head[i])
		}
	}
	for i, q := range st.Flow {
		if q != 0 {
			t.Errorf("link %s passes %g", b.links[i].Name, q)
		}
	}
	if st.HeadError != 0 || st.FlowError != 0 || st.Iterations != 0 {
		t.Errorf("left open: %g m, %g m3/s; %d steps where none is needed", st.HeadError, st.FlowError, st.Iterations)
	}
	for _, view := range []View{Piezometric, Total, LocalTotal} {
		near(t, "tap", b.on("P2", 70, view), 61.3, 0)
	}
	if outlet != (len(st.Caveats) == 1 && strings.Contains(st.Caveats[0], "outlet O")) {
		t.Errorf("caveats: %q", st.Caveats)
	}
	g := b.sys.NewGradient()
	if err := b.v.Gradient(Probe{Point: -1, Link: b.link("P5"), At: 10, View: Piezometric, Depth: math.NaN()}, g); err != nil {
		t.Fatal(err)
	}
	near(t, "by both levels", g.FixedHead[0]+g.FixedHead[1], 1, 1e-12)
	for i := range g.LnRough {
		near(t, "by roughness", g.LnRough[i], 0, 0)
	}
	for i := range g.LnK {
		near(t, "by K", g.LnK[i], 0, 0)
	}
	if d := g.DrawOff[b.index["D"]]; !(d < 0) {
		t.Errorf("a draw-off at D must lower the head, derivative %g", d)
	}
}

// TestWeakBesideStrong: behind a long thin pipe a stub loses a billionth as much; the
// sensitivity of its head is still that of the two in series, to ten digits.
func TestWeakBesideStrong(t *testing.T) {
	b := newBuild(t)
	b.reservoir("R", 50)
	b.junction("A", "B", "C")
	b.pipe("thin", "R", "A", 800, 0.02, 1e-5)
	b.pipe("stub", "A", "B", 0.01, 1, 1e-5)
	b.pipe("stub2", "B", "C", 0.01, 1, 1e-5)
	b.draw["C"] = 3e-6 // laminar: both laws are straight
	b.solve()
	want := 0.0
	for _, l := range b.links {
		want -= l.Pipe.Loss(1e-9, math.Log(1e-5), b.nu, b.g).DQ
	}
	g := b.sys.NewGradient()
	for _, name := range []string{"C", "A"} {
		if err := b.v.Gradient(Probe{Point: b.index[name], Link: -1, View: Total}, g); err != nil {
			t.Fatal(err)
		}
		if name == "A" {
			want = -b.links[0].Pipe.Loss(1e-9, math.Log(1e-5), b.nu, b.g).DQ
		}
		near(t, "head at "+name+" by the draw-off at C", g.DrawOff[b.index["C"]]/want, 1, 1e-10)
	}
}

// TestPump: duty point, speed by the affinity laws, head factor, shut-off, and closing
// against too much head.
func TestPump(t *testing.T) {
	for _, c := range []struct {
		name                 string
		level, speed, factor float64
		flow, tolQ           float64
		closed               bool
	}{
		// The pipe loses nothing, so the head is that of a point of the curve.
		{name: "rated", level: 30, factor: 1, flow: 0.02, tolQ: 1e-9},
		{name: "slower by a fifth", level: 30 * 0.64, speed: 120, factor: 1, flow: 0.016, tolQ: 1e-9},
		{name: "worn", level: 24, factor: 0.8, flow: 0.02, tolQ: 1e-9},
		{name: "too high", level: 41, factor: 1, closed: true},
	} {
		b := newBuild(t)
		b.reservoir("S", 0)
		b.reservoir("T", c.level)
		b.junction("A")
		b.machine("M", "S", "A", false, []float64{0, 0.01, 0.02, 0.03}, []float64{40, 38, 30, 16})
		b.pipe("P", "A", "T", 1e-6, 5, 1e-6)
		b.speed["M"], b.factor["M"] = c.speed, c.factor
		st := b.solve()
		near(t, c.name, b.flowIn("M"), c.flow, c.tolQ)
		if st.Closed[0] != c.closed {
			t.Errorf("%s: closed %v", c.name, st.Closed[0])
		}
		if c.closed != (len(st.Caveats) == 1) {
			t.Errorf("%s: caveats %q", c.name, st.Caveats)
		}
	}
}

// TestShutOff: a pump on a dead end stands at its shut-off head; past the end of its
// curve the state says so.
func TestShutOff(t *testing.T) {
	b := newBuild(t)
	b.reservoir("S", 3)
	b.junction("A", "B")
	b.machine("M", "S", "A", false, []float64{0, 0.01, 0.02}, []float64{40, 38, 30})
	b.plain("P", "A", "B")
	b.solve()
	near(t, "shut-off head", b.headAt("B"), 43, tight)
	near(t, "no flow", b.flowIn("M"), 0, 1e-12)
	b.draw["B"] = 0.03
	st := b.solve()
	// Three-point end slope of the cubic through the points: -1,100 m per m3/s.
	near(t, "beyond its curve", b.headAt("A"), 33-0.01*1100, tight)
	if len(st.Caveats) != 1 || !strings.Contains(st.Caveats[0], "beyond the ends of its works curve") {
		t.Errorf("caveats: %q", st.Caveats)
	}
	b.shut["M"] = true
	if _, err := b.try(); err == nil || !strings.Contains(err.Error(), "pump M is stopped") {
		t.Errorf("stopped pump that feeds a draw-off: %v", err)
	}
	b.draw["B"] = 0
	b.solve()
	near(t, "beyond the stopped pump", b.headAt("B"), math.NaN(), 0)
	near(t, "flow there", b.flowIn("P"), 0, 0)
	if err := b.v.Gradient(Probe{Point: b.index["B"], Link: -1}, b.sys.NewGradient()); err == nil {
		t.Error("a head that is not known has a gradient")
	}
}

// TestTurbine takes its head between two reservoirs, and closes where there is less.
func TestTurbine(t *testing.T) {
	for _, lower := range []float64{20, 55} {
		b := newBuild(t)
		b.reservoir("U", 60)
		b.reservoir("L", lower)
		b.junction("A")
		b.pipe("P", "U", "A", 1e-6, 5, 1e-6)
		b.machine("T", "A", "L", true, []float64{0, 0.1, 0.2}, []float64{10, 40, 100})
		st := b.solve()
		want := 0.1
		if lower == 55 {
			want = 0
		}
		near(t, fmt.Sprintf("to %g m", lower), b.flowIn("T"), want, 1e-9)
		if st.Closed[1] != (want == 0) {
			t.Errorf("to %g m: closed %v", lower, st.Closed[1])
		}
	}
}

// TestBends: a pump whose curve first rises, in front of a steep pipe, runs where the
// balance holds by itself, though its slope makes the matrix of the step indefinite.
func TestBends(t *testing.T) {
	b := newBuild(t)
	b.reservoir("S", 0)
	b.junction("A", "B")
	b.reservoir("T", 5)
	b.machine("M", "S", "A", false, []float64{0, 0.01, 0.02, 0.03}, []float64{20, 24, 22, 12})
	b.pipe("P", "A", "B", 400, 0.06, 2e-4)
	b.pipe("Q", "B", "T", 10, 0.06, 2e-4)
	st := b.solve()
	if q := b.flowIn("M"); !(q > 1e-3 && q < 0.01) {
		t.Fatalf("the duty at %g m3/s is not on the rising part, the test says nothing", q)
	}
	if st.HeadError > 1e-9 || st.FlowError > 1e-12 {
		t.Errorf("left open: %g m, %g m3/s", st.HeadError, st.FlowError)
	}
	w := &works{points: b.points, links: b.links, sys: b.sys, p: b.p, c: b.c}
	made, sharp, _ := w.compare(t, "rising curve", []Probe{
		{Point: 1, Link: 1, View: Piezometric, Depth: math.NaN()}, {Point: -1, Link: 1, At: 100, View: Total, Depth: math.NaN()}, {Point: -1, Link: 0, View: Flow}})
	if made < 20 || sharp < 15 {
		t.Errorf("%d derivatives compared, %d sharp", made, sharp)
	}
}
