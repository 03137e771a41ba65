package hydraulic

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"tapround/calibrate/friction"
)

// kinds of random works the solver must carry: usual mains, curves that bend, wild
// coefficients, large networks, plain pipes, gentle check valves everywhere.
var kinds = map[string]traits{
	"mains":  ordinary,
	"bends":  {points: 14, extra: 6, machines: 0.15, oneWay: 0.08, closed: 0.04, stillShare: 0.1, bends: true},
	"wild":   {points: 14, extra: 6, machines: 0.1, oneWay: 0.08, closed: 0.04, stillShare: 0.1, wildK: true},
	"large":  {points: 120, extra: 80, machines: 0.02, oneWay: 0.02, closed: 0.01, stillShare: 0.05},
	"pipes":  {points: 20, extra: 15, stillShare: 0.2},
	"valves": {points: 14, extra: 10, machines: 0.1, oneWay: 0.4, stillShare: 0.1},
}

// TestRandomWorks solves 3,600 seeded works, each from two starts. Each is either
// solved, and then every condition of the steady state is checked from the friction
// laws alone, or refused, and then no set of flows exists that respects the one-way
// links and the balances.
func TestRandomWorks(t *testing.T) {
	for name, tr := range kinds {
		t.Run(name, func(t *testing.T) {
			solved, refused, steps, most := 0, 0, 0, 0
			for seed := uint64(0); seed < 600; seed++ {
				w := randomWorks(rand.New(rand.NewPCG(seed, 7)), tr)
				st, err := w.sys.NewSolver().Solve(&w.p, &w.c, nil)
				if err != nil {
					var u *Unsolvable
					if !errors.As(err, &u) || len(u.Points) == 0 {
						t.Errorf("seed %d: error without points: %v", seed, err)
					}
					if w.canFlow() {
						t.Errorf("seed %d: refused, yet flows exist: %v", seed, err)
					}
					refused++
					continue
				}
				if !w.canFlow() {
					t.Errorf("seed %d: solved, yet no flows can balance", seed)
				}
				solved, steps, most = solved+1, steps+st.Iterations, max(most, st.Iterations)
				w.verify(t, seed, st)
				w.fromAnywhere(t, seed, st, !tr.bends)
			}
			t.Logf("%d solved, %d refused; factorisations: %.1f in the mean, %d at most", solved, refused, float64(steps)/float64(solved), most)
			if solved < 100 {
				t.Errorf("only %d of 600 works were solvable: the test says little", solved)
			}
		})
	}
}

// fromAnywhere solves again from a random earlier state: flows from a billionth of a
// link's size to a thousand times it, in either direction, links closed at random. The
// answer is the same, unless works curves that bend allow several.
func (w *works) fromAnywhere(t *testing.T, seed uint64, want *State, unique bool) *State {
	t.Helper()
	r := rand.New(rand.NewPCG(seed, 13))
	start := &State{Head: make([]float64, len(w.points)), Flow: make([]float64, len(w.links)), Closed: make([]bool, len(w.links))}
	for i := range start.Flow {
		start.Flow[i] = w.sys.size[i] * logUniform(r, 1e-9, 1e3) * float64(1-2*r.IntN(2))
		start.Closed[i] = r.IntN(3) == 0
	}
	for i := range start.Head {
		start.Head[i] = 1e4 * (r.Float64() - 0.5)
	}
	st, err := w.sys.NewSolver().Solve(&w.p, &w.c, start)
	if err != nil {
		t.Errorf("seed %d: from another start: %v", seed, err)
		return nil
	}
	w.verify(t, seed, st)
	for i := range st.Head {
		// Both states may leave 1e-7 m open on every link of the way.
		if off := math.Abs(st.Head[i] - want.Head[i]); unique && (off > 1e-6*(1+math.Abs(want.Head[i])) || math.IsNaN(st.Head[i]) != math.IsNaN(want.Head[i])) {
			t.Errorf("seed %d: point %s has %g m, from another start %g m", seed, w.points[i].Name, want.Head[i], st.Head[i])
		}
	}
	return st
}

// lossOf is H_from - H_to of link i at flow q, straight from the laws.
func (w *works) lossOf(i int, q float64) float64 {
	l := w.links[i]
	if l.Machine != nil {
		ratio := 1.0
		if w.c.Speed[i] != 0 {
			ratio = w.c.Speed[i] / l.Machine.RatedSpeed
		}
		h, _, _ := l.Machine.Curve.At(q, ratio)
		if !l.Machine.Turbine {
			h = -h
		}
		return w.p.HeadFactor[i] * h
	}
	h := l.Pipe.Loss(q, w.p.LnRough[i], w.c.Viscosity, w.c.Gravity).H
	s := w.sys
	for k, f := range l.Pipe.Fittings {
		coefficient := math.Exp(w.p.LnK[s.FittingIndex(i, k)])
		if q < 0 && !math.IsNaN(f.ReverseK) {
			coefficient = f.ReverseK
		}
		m, _ := friction.Minor(q, coefficient, f.Bore, w.c.Gravity)
		h += m
	}
	return h
}

// endHead is the total head at an end of link i, given the state.
func (w *works) endHead(i, point int, st *State) float64 {
	p := w.points[point]
	if p.Kind != Outlet {
		return st.Head[point]
	}
	l, q := w.links[i], st.Flow[i]
	if l.Pipe == nil || q == 0 {
		return p.Elevation
	}
	if n := len(l.Pipe.Fittings); q > 0 && n > 0 && l.Pipe.Fittings[n-1].JetBore > 0 {
		j, _ := friction.Minor(q, 1, l.Pipe.Fittings[n-1].JetBore, w.c.Gravity)
		return p.Elevation + j
	}
	return p.Elevation + l.Pipe.VelocityHead(q, w.p.LnRough[i], w.c.Viscosity, w.c.Gravity).V
}

// way is +1 for links that flow forwards only, -1 backwards only, 0 both ways.
func (w *works) way(i int) (way float64, both bool) {
	l := w.links[i]
	forward := l.Machine != nil || w.points[l.To].Kind == Outlet
	if l.Pipe != nil {
		for _, f := range l.Pipe.Fittings {
			forward = forward || f.OneWay
		}
	}
	switch backward := w.points[l.From].Kind == Outlet; {
	case forward && backward:
		return 0, false
	case forward:
		return 1, false
	case backward:
		return -1, false
	}
	return 0, true
}

func (w *works) shut(i int) bool {
	l := w.links[i]
	if l.Machine != nil {
		return w.c.Stopped[i]
	}
	s, shut := w.sys, w.c.Shut[i]
	for k := range l.Pipe.Fittings {
		shut = shut || w.c.FittingShut[s.FittingIndex(i, k)]
	}
	return shut
}

// verify holds a state against everything a steady state must be.
func (w *works) verify(t *testing.T, seed uint64, st *State) {
	t.Helper()
	largest, highest := 1e-3, 0.0
	for _, q := range st.Flow {
		largest = math.Max(largest, math.Abs(q))
	}
	for _, h := range st.Head {
		if math.Abs(h) > highest {
			highest = math.Abs(h)
		}
	}
	// The contract's tolerances, and the rounding of heads so large that it is more.
	tolH, tolQ := 1.01e-7+8e-16*highest, 1.01e-9*largest
	sum := make([]float64, len(w.points))
	for i, l := range w.links {
		q := st.Flow[i]
		sum[l.From] -= q
		sum[l.To] += q
		drop := w.endHead(i, l.From, st) - w.endHead(i, l.To, st)
		way, both := w.way(i)
		switch {
		case w.shut(i):
			if q != 0 || !st.Closed[i] {
				t.Errorf("seed %d: link %s is shut and passes %g", seed, l.Name, q)
			}
		case math.IsNaN(drop):
			if q != 0 {
				t.Errorf("seed %d: link %s is not fed and passes %g", seed, l.Name, q)
			}
		case st.Closed[i]:
			if q != 0 || both {
				t.Errorf("seed %d: link %s is closed (flow %g, both ways %v)", seed, l.Name, q, both)
			}
			if open := way * (drop - w.lossOf(i, 0)); open > 1e-6+tolH {
				t.Errorf("seed %d: link %s is closed and pressed open by %g m", seed, l.Name, open)
			}
		default:
			if e := math.Abs(drop - w.lossOf(i, q)); e > tolH {
				t.Errorf("seed %d: link %s misses its energy by %g m at %g m3/s", seed, l.Name, e, q)
			}
			if way*q < -tolQ {
				t.Errorf("seed %d: link %s flows backwards, %g", seed, l.Name, q)
			}
		}
	}
	for i, p := range w.points {
		if p.Kind != Junction {
			continue
		}
		if math.IsNaN(st.Head[i]) {
			if w.c.DrawOff[i] != 0 {
				t.Errorf("seed %d: point %s has a draw-off and no head", seed, p.Name)
			}
		} else if e := math.Abs(sum[i] - w.c.DrawOff[i]); e > tolQ {
			t.Errorf("seed %d: point %s misses its balance by %g of %g", seed, p.Name, e, largest)
		}
	}
	w.verifyFeed(t, seed, st)
	if left := w.left(st); math.Abs(left-st.HeadError) > 1e-10+8e-16*highest {
		t.Errorf("seed %d: leaves %g m open and says %g", seed, left, st.HeadError)
	}
}

// left is the worst energy that a state leaves open, m.
func (w *works) left(st *State) float64 {
	worst := 0.0
	for i, l := range w.links {
		if e := w.endHead(i, l.From, st) - w.endHead(i, l.To, st) - w.lossOf(i, st.Flow[i]); !st.Closed[i] && !math.IsNaN(e) {
			worst = math.Max(worst, math.Abs(e))
		}
	}
	return worst
}

// verifyFeed: a head is missing exactly where open links lead to no reservoir and no
// outlet.
func (w *works) verifyFeed(t *testing.T, seed uint64, st *State) {
	t.Helper()
	fed := make([]bool, len(w.points))
	for i, p := range w.points {
		fed[i] = p.Kind != Junction
	}
	for again := true; again; {
		again = false
		for i, l := range w.links {
			if !st.Closed[i] && fed[l.From] != fed[l.To] {
				fed[l.From], fed[l.To], again = true, true, true
			}
		}
	}
	for i, p := range w.points {
		if fed[i] == math.IsNaN(st.Head[i]) {
			t.Errorf("seed %d: point %s: fed %v, head %g", seed, p.Name, fed[i], st.Head[i])
		}
	}
}
