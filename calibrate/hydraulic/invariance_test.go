package hydraulic

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// sameHeads compares two states of the same works, point by point and link by link
// through maps of their numbers. Both may leave 1e-12 m and a little rounding open on
// every link; a thousand times that is still far below anything read.
func sameHeads(t *testing.T, label string, want, got *State, point, link func(i int) int, shift, sign float64) {
	t.Helper()
	for i := range want.Head {
		h := got.Head[point(i)] - shift
		if math.IsNaN(h) != math.IsNaN(want.Head[i]) || math.Abs(h-want.Head[i]) > 1e-8*(1+math.Abs(want.Head[i])) {
			t.Errorf("%s: point %d has %.12g, was %.12g", label, i, h, want.Head[i])
		}
	}
	for i := range want.Flow {
		if q := sign * got.Flow[link(i)]; math.Abs(q-want.Flow[i]) > 1e-7 {
			t.Errorf("%s: link %d has %.12g, was %.12g", label, i, q, want.Flow[i])
		}
	}
}

func same(i int) int { return i }

// solved makes random works until they have a solution.
func solved(r *rand.Rand, tr traits) (*works, *State) {
	for {
		w := randomWorks(r, tr)
		if st, err := w.sys.NewSolver().Solve(&w.p, &w.c, nil); err == nil {
			return w, st
		}
	}
}

// again solves works after their points, links or conditions were changed.
func (w *works) again(t *testing.T) *State {
	t.Helper()
	s, err := NewSystem(w.points, w.links)
	if err != nil {
		t.Fatal(err)
	}
	w.sys = s
	st, err := s.NewSolver().Solve(&w.p, &w.c, nil)
	if err != nil {
		t.Fatal(err)
	}
	return st
}

// TestDatum: another datum moves all heads alike and no flow.
func TestDatum(t *testing.T) {
	for seed := uint64(0); seed < 60; seed++ {
		w, st := solved(rand.New(rand.NewPCG(seed, 21)), ordinary)
		for i := range w.points {
			w.points[i].Elevation += 700
			w.c.Head[i] += 700
		}
		sameHeads(t, "datum", st, w.again(t), same, same, 700, 1)
	}
}

// TestDirection: a pipe written down the other way round, fittings and all, has the
// same heads and the opposite flow.
func TestDirection(t *testing.T) {
	for seed := uint64(0); seed < 60; seed++ {
		w, _ := solved(rand.New(rand.NewPCG(seed, 22)), traits{points: 12, extra: 8, stillShare: 0.1})
		p := w.sys.NewParameters()
		copy(p.LnRough, w.p.LnRough)
		for i := range w.links {
			l := &w.links[i]
			n := len(l.Pipe.Fittings)
			if n > 0 && l.Pipe.Fittings[n-1].JetBore > 0 {
				l.Pipe.Fittings[n-1].JetBore = 0 // a jet must stand at the To end
				w.p.LnK[w.sys.FittingIndex(i, n-1)] = math.Log(3)
			}
			for k := range l.Pipe.Fittings {
				l.Pipe.Fittings[k].ReverseK = math.NaN()
			}
		}
		st := w.again(t)
		for i := range w.links {
			l := &w.links[i]
			l.From, l.To = l.To, l.From
			n := len(l.Pipe.Fittings)
			mirrored := make([]Fitting, n)
			for k, f := range l.Pipe.Fittings {
				f.At = l.Pipe.Length - f.At
				mirrored[n-1-k] = f
				p.LnK[w.sys.FittingIndex(i, n-1-k)] = w.p.LnK[w.sys.FittingIndex(i, k)]
			}
			l.Pipe = &Pipe{Pipe: l.Pipe.Pipe, Fittings: mirrored}
		}
		w.p = p
		sameHeads(t, "direction", st, w.again(t), same, same, 0, -1)
	}
}

// TestNumbering: points and links listed in another order have the same heads and
// flows.
func TestNumbering(t *testing.T) {
	for seed := uint64(0); seed < 60; seed++ {
		r := rand.New(rand.NewPCG(seed, 23))
		w, st := solved(r, ordinary)
		points, links := r.Perm(len(w.points)), r.Perm(len(w.links))
		u := &works{points: make([]Point, len(points)), links: make([]Link, len(links))}
		for i, l := range w.links {
			l.From, l.To = points[l.From], points[l.To]
			u.links[links[i]] = l
		}
		for i, p := range w.points {
			u.points[points[i]] = p
		}
		s, err := NewSystem(u.points, u.links)
		if err != nil {
			t.Fatal(err)
		}
		u.p = s.NewParameters()
		u.c = Conditions{Head: make([]float64, len(points)), DrawOff: make([]float64, len(points)), Shut: make([]bool, len(links)),
			FittingShut: make([]bool, s.NumFittings()), Stopped: make([]bool, len(links)), Speed: make([]float64, len(links)),
			Viscosity: w.c.Viscosity, Gravity: w.c.Gravity}
		for i := range w.points {
			u.c.Head[points[i]], u.c.DrawOff[points[i]] = w.c.Head[i], w.c.DrawOff[i]
		}
		for i, l := range w.links {
			k := links[i]
			u.p.LnRough[k], u.p.HeadFactor[k] = w.p.LnRough[i], w.p.HeadFactor[i]
			u.c.Shut[k], u.c.Stopped[k], u.c.Speed[k] = w.c.Shut[i], w.c.Stopped[i], w.c.Speed[i]
			if l.Pipe == nil {
				continue
			}
			for f := range l.Pipe.Fittings {
				u.p.LnK[s.FittingIndex(k, f)] = w.p.LnK[w.sys.FittingIndex(i, f)]
				u.c.FittingShut[s.FittingIndex(k, f)] = w.c.FittingShut[w.sys.FittingIndex(i, f)]
			}
		}
		got := u.again(t)
		if outlets := w.widestTie(); outlets {
			continue // the total head told at an outlet is that of the first of two equal pipes
		}
		sameHeads(t, "numbering", st, got, func(i int) int { return points[i] }, func(i int) int { return links[i] }, 0, 1)
	}
}

// widestTie reports two pipes of one bore at an outlet.
func (w *works) widestTie() bool {
	for i, a := range w.links {
		for _, b := range w.links[:i] {
			if a.Pipe != nil && b.Pipe != nil && a.Pipe.Bore == b.Pipe.Bore && (w.points[a.To].Kind == Outlet || w.points[a.From].Kind == Outlet) {
				return true
			}
		}
	}
	return false
}

// TestSplit: a junction put into the middle of every pipe changes nothing.
func TestSplit(t *testing.T) {
	for seed := uint64(0); seed < 40; seed++ {
		w, st := solved(rand.New(rand.NewPCG(seed, 24)), traits{points: 10, extra: 5, stillShare: 0.1})
		u := &works{points: append([]Point(nil), w.points...), c: w.c}
		u.c.Shut, u.c.FittingShut, u.c.Stopped, u.c.Speed = nil, nil, nil, nil
		u.c.Head, u.c.DrawOff = append([]float64(nil), w.c.Head...), append([]float64(nil), w.c.DrawOff...)
		var rough, k []float64
		for i, l := range w.links {
			mid := len(u.points)
			u.points = append(u.points, Point{Name: "middle of " + l.Name})
			u.c.Head, u.c.DrawOff = append(u.c.Head, 0), append(u.c.DrawOff, 0)
			half := l.Pipe.Pipe
			half.Length /= 2
			first, second := &Pipe{Pipe: half}, &Pipe{Pipe: half}
			var late []float64
			for n, f := range l.Pipe.Fittings {
				lnK := w.p.LnK[w.sys.FittingIndex(i, n)]
				if f.At < half.Length {
					first.Fittings, k = append(first.Fittings, f), append(k, lnK)
				} else {
					f.At -= half.Length
					second.Fittings, late = append(second.Fittings, f), append(late, lnK)
				}
			}
			k = append(k, late...)
			u.links = append(u.links, Link{Name: l.Name + " a", From: l.From, To: mid, Pipe: first}, Link{Name: l.Name + " b", From: mid, To: l.To, Pipe: second})
			rough = append(rough, w.p.LnRough[i], w.p.LnRough[i])
		}
		s, err := NewSystem(u.points, u.links)
		if err != nil {
			t.Fatal(err)
		}
		u.p = s.NewParameters()
		copy(u.p.LnRough, rough)
		copy(u.p.LnK, k)
		got := u.again(t)
		sameHeads(t, "split", st, got, same, func(i int) int { return 2 * i }, 0, 1)
		v := w.sys.NewSolver()
		if _, err := v.Solve(&w.p, &w.c, nil); err != nil {
			t.Fatal(err)
		}
		for i, l := range w.links {
			// The fitting at the very middle, if any, lies beyond it on both.
			middle := v.Read(Probe{Point: -1, Link: i, At: l.Pipe.Length / 2, View: Total, Depth: math.NaN()})
			if h := got.Head[len(w.points)+i]; math.Abs(h-middle) > 1e-8*(1+math.Abs(h)) {
				t.Errorf("split: pipe %s has %.12g at its middle, reads %.12g", l.Name, h, middle)
			}
		}
	}
}

// TestShared: one system serves several goroutines at once, each with its solver.
func TestShared(t *testing.T) {
	w := grid(200)
	want, err := w.sys.NewSolver().Solve(&w.p, &w.c, nil)
	if err != nil {
		t.Fatal(err)
	}
	states := make(chan *State)
	for range 4 {
		go func() {
			st, _ := w.sys.NewSolver().Solve(&w.p, &w.c, nil)
			states <- st
		}()
	}
	for range 4 {
		st := <-states
		if st == nil || !slices.Equal(st.Head, want.Head) || !slices.Equal(st.Flow, want.Flow) {
			t.Error("another goroutine found another state")
		}
	}
}
