package hydraulic

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

// TestOneWay: a check valve between two reservoirs passes one way and closes the other;
// each side then has its own end's head.
func TestOneWay(t *testing.T) {
	for _, level := range []float64{30, 50} {
		b := newBuild(t)
		b.reservoir("A", 40)
		b.reservoir("B", level)
		b.plain("P", "A", "B", Fitting{Name: "X", At: 30, OneWay: true})
		b.k["X"] = 2
		st := b.solve()
		if closed := level == 50; st.Closed[0] != closed || (b.flowIn("P") == 0) != closed {
			t.Errorf("level %g: closed %v, flow %g", level, st.Closed[0], b.flowIn("P"))
		}
		if level == 50 {
			near(t, "at the valve", b.on("P", 30, Total), 40, 0)
			near(t, "beyond it", b.on("P", 31, Piezometric), 50, 0)
		}
	}
}

// TestIdleParts: heads where nothing flows through the one-way links around a part.
func TestIdleParts(t *testing.T) {
	type link struct{ from, to string }
	for _, c := range []struct {
		name  string
		links []link // check valves, from A at 40 m and B at 60 m
		want  float64
	}{
		{"filled from A", []link{{"A", "J"}}, 40},
		{"filled from both", []link{{"A", "J"}, {"B", "J"}}, 60},
		{"drained to B", []link{{"J", "B"}}, 60},
		{"drained to both", []link{{"J", "A"}, {"J", "B"}}, 40},
		{"trapped between", []link{{"A", "J"}, {"J", "B"}}, math.NaN()},
		{"drained to an outlet at 25 m", []link{{"J", "O"}}, 25},
		{"below an outlet at 45 m", []link{{"A", "J"}, {"J", "Q"}}, 40},
		{"cut off", nil, math.NaN()},
	} {
		b := newBuild(t)
		b.reservoir("A", 40)
		b.reservoir("B", 60)
		b.point("O", Outlet, 25)
		b.point("Q", Outlet, 45)
		b.junction("J", "K")
		b.plain("dead end", "J", "K")
		for i, l := range c.links {
			b.plain(fmt.Sprintf("P%d", i), l.from, l.to, Fitting{Name: fmt.Sprintf("X%d", i), At: 50, OneWay: true})
		}
		b.solve()
		near(t, c.name, b.headAt("K"), c.want, 0)
		for i := range b.links {
			near(t, c.name+": flow", b.v.flow[i], 0, 0)
		}
	}
}

// TestBehindTrapped: what a trapped part fills is not known either.
func TestBehindTrapped(t *testing.T) {
	b := newBuild(t)
	b.reservoir("A", 40)
	b.reservoir("B", 60)
	b.junction("J", "K")
	for _, l := range [][2]string{{"A", "J"}, {"J", "B"}, {"J", "K"}} {
		b.plain(l[0]+l[1], l[0], l[1], Fitting{Name: l[0] + l[1], At: 50, OneWay: true})
	}
	b.solve()
	near(t, "between the valves", b.headAt("J"), math.NaN(), 0)
	near(t, "beyond it", b.headAt("K"), math.NaN(), 0)
	// A pump that runs and lifts to less than B traps nothing: its delivery has its
	// shut-off head.
	b = newBuild(t)
	b.reservoir("A", 40)
	b.reservoir("B", 60)
	b.junction("J")
	b.machine("M", "A", "J", false, []float64{0, 0.01, 0.02}, []float64{15, 14, 10})
	b.plain("JB", "J", "B", Fitting{Name: "X", At: 50, OneWay: true})
	b.solve()
	near(t, "at the pump", b.headAt("J"), 55, 0)
	near(t, "before the valve", b.on("JB", 20, Piezometric), 55, 0)
	near(t, "behind it", b.on("JB", 80, Piezometric), 60, 0)
}

// TestRings: works in which pumps drive water round behind check valves that pass
// nothing, where closing links by what presses them finds no pattern at first.
func TestRings(t *testing.T) {
	for _, seed := range []uint64{1184, 7395, 15978, 17722, 20504} {
		w := randomWorks(rand.New(rand.NewPCG(seed, 7)), kinds["valves"])
		st, err := w.sys.NewSolver().Solve(&w.p, &w.c, nil)
		if err != nil {
			t.Errorf("seed %d: %v", seed, err)
			continue
		}
		w.verify(t, seed, st)
		for k := uint64(0); k < 40; k++ {
			// In the works of seed 7395 a pump turns water between check valves that could
			// hold it at more than one level.
			got := w.fromAnywhere(t, 1000*seed+k, st, seed != 7395)
			turns := false
			for i, l := range w.links {
				turns = turns || (got != nil && l.Machine != nil && got.Flow[i] > 1e-4)
			}
			if !turns {
				t.Errorf("seed %d: no pump turns the water", seed)
			}
		}
	}
}

// TestNoRunaway: works with curves that bend and another machine past its end, which a
// second look for a duty must leave as they were.
func TestNoRunaway(t *testing.T) {
	for _, seed := range []uint64{1788, 7959, 16875, 20723} {
		w := randomWorks(rand.New(rand.NewPCG(seed, 7)), kinds["bends"])
		st, err := w.sys.NewSolver().Solve(&w.p, &w.c, nil)
		if err != nil {
			t.Errorf("seed %d: %v", seed, err)
			continue
		}
		w.verify(t, seed, st)
	}
}

// TestShortened: works at whose stiff links full steps circle for ever; shortened ones
// do not.
func TestShortened(t *testing.T) {
	for _, seed := range []uint64{6240, 12363, 13260, 13572} {
		w := randomWorks(rand.New(rand.NewPCG(seed, 7)), kinds["valves"])
		st, err := w.sys.NewSolver().Solve(&w.p, &w.c, nil)
		if err != nil {
			t.Errorf("seed %d: %v", seed, err)
			continue
		}
		w.verify(t, seed, st)
	}
}
