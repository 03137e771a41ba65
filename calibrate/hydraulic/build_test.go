package hydraulic

import (
	"math"
	"testing"

	"tapround/calibrate/friction"
)

// build writes small works by name.
type build struct {
	t      *testing.T
	points []Point
	links  []Link
	index  map[string]int
	rough  map[string]float64
	k      map[string]float64
	head   map[string]float64
	draw   map[string]float64
	shut   map[string]bool
	speed  map[string]float64
	factor map[string]float64
	nu, g  float64

	sys *System
	v   *Solver
	p   Parameters
	c   Conditions
}

func newBuild(t *testing.T) *build {
	return &build{t: t, index: map[string]int{}, rough: map[string]float64{}, k: map[string]float64{}, head: map[string]float64{}, draw: map[string]float64{},
		shut: map[string]bool{}, speed: map[string]float64{}, factor: map[string]float64{}, nu: 1.3e-6, g: 9.81}
}

func (b *build) point(name string, kind PointKind, elevation float64) {
	b.index[name] = len(b.points)
	b.points = append(b.points, Point{Name: name, Kind: kind, Elevation: elevation})
}

func (b *build) reservoir(name string, level float64) {
	b.point(name, Fixed, 0)
	b.head[name] = level
}

func (b *build) junction(names ...string) {
	for _, n := range names {
		b.point(n, Junction, 0)
	}
}

// pipe adds one of roughness k; fittings are given K by name.
func (b *build) pipe(name, from, to string, length, bore, k float64, fittings ...Fitting) {
	for i := range fittings {
		if fittings[i].Bore == 0 {
			fittings[i].Bore = bore
		}
		if fittings[i].ReverseK == 0 {
			fittings[i].ReverseK = math.NaN()
		}
	}
	b.rough[name] = k
	b.links = append(b.links, Link{Name: name, From: b.index[from], To: b.index[to], Pipe: &Pipe{Pipe: friction.Pipe{Length: length, Bore: bore}, Fittings: fittings}})
}

// plain adds a pipe of 100 m and 200 mm.
func (b *build) plain(name, from, to string, fittings ...Fitting) {
	b.pipe(name, from, to, 100, 0.2, 1e-4, fittings...)
}

func (b *build) machine(name, from, to string, turbine bool, flow, head []float64) {
	c, err := friction.NewCurve(flow, head)
	if err != nil {
		b.t.Fatal(err)
	}
	b.links = append(b.links, Link{Name: name, From: b.index[from], To: b.index[to], Machine: &Machine{Turbine: turbine, Curve: c, RatedSpeed: 150}})
}

func (b *build) link(name string) int {
	for i, l := range b.links {
		if l.Name == name {
			return i
		}
	}
	b.t.Fatalf("no link %s", name)
	return -1
}

// try analyses and solves.
func (b *build) try() (*State, error) {
	b.t.Helper()
	s, err := NewSystem(b.points, b.links)
	if err != nil {
		b.t.Fatal(err)
	}
	n, m := len(b.points), len(b.links)
	b.sys, b.p = s, s.NewParameters()
	b.c = Conditions{Head: make([]float64, n), DrawOff: make([]float64, n), Shut: make([]bool, m), FittingShut: make([]bool, s.NumFittings()),
		Stopped: make([]bool, m), Speed: make([]float64, m), Viscosity: b.nu, Gravity: b.g}
	for i, p := range b.points {
		b.c.Head[i], b.c.DrawOff[i] = b.head[p.Name], b.draw[p.Name]
	}
	for i, l := range b.links {
		b.c.Speed[i] = b.speed[l.Name]
		if f, ok := b.factor[l.Name]; ok {
			b.p.HeadFactor[i] = f
		}
		if l.Machine != nil {
			b.c.Stopped[i] = b.shut[l.Name]
			continue
		}
		b.c.Shut[i] = b.shut[l.Name]
		b.p.LnRough[i] = math.Log(b.rough[l.Name])
		for k, f := range l.Pipe.Fittings {
			flat := s.FittingIndex(i, k)
			b.p.LnK[flat], b.c.FittingShut[flat] = math.Log(b.k[f.Name]), b.shut[f.Name]
			if b.k[f.Name] == 0 {
				b.p.LnK[flat] = math.Log(1e-9) // as good as none
			}
		}
	}
	b.v = s.NewSolver()
	return b.v.Solve(&b.p, &b.c, nil)
}

func (b *build) solve() *State {
	b.t.Helper()
	st, err := b.try()
	if err != nil {
		b.t.Fatal(err)
	}
	return st
}

// headAt and flowIn read the solved works.
func (b *build) headAt(name string) float64 {
	return b.v.Read(Probe{Point: b.index[name], Link: -1, View: Total, Depth: math.NaN()})
}

func (b *build) flowIn(name string) float64 {
	return b.v.Read(Probe{Point: -1, Link: b.link(name), View: Flow, Depth: math.NaN()})
}

func (b *build) on(name string, at float64, view View) float64 {
	return b.v.Read(Probe{Point: -1, Link: b.link(name), At: at, View: view, Depth: math.NaN()})
}

// near checks a value against what it must be, to an absolute tolerance.
func near(t *testing.T, what string, got, want, tolerance float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tolerance) && !(math.IsNaN(got) && math.IsNaN(want)) {
		t.Errorf("%s: %.10g, want %.10g within %g", what, got, want, tolerance)
	}
}
