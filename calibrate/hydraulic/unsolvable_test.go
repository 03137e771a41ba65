package hydraulic

import (
	"errors"
	"math"
	"slices"
	"strings"
	"testing"

	"tapround/calibrate/friction"
)

// TestUnsolvable: the message names the cause in plain words, with the names of the
// survey.
func TestUnsolvable(t *testing.T) {
	// R - P1 - A - P2 - B, with a check valve X on P2 and an outlet O at B.
	start := func() *build {
		b := newBuild(t)
		b.reservoir("R", 30)
		b.junction("A", "B")
		b.plain("P1", "R", "A", Fitting{Name: "V", At: 20})
		b.plain("P2", "A", "B", Fitting{Name: "X", At: 20, OneWay: true})
		b.k["V"], b.k["X"] = 1, 2
		b.draw["B"] = 0.01
		return b
	}
	for _, c := range []struct {
		name   string
		change func(b *build)
		says   []string
		points []string
		links  []string
	}{
		{"shut pipe", func(b *build) { b.shut["P2"] = true }, []string{"water is drawn at B", "pipe P2 is shut"}, []string{"B"}, []string{"P2"}},
		{"shut valve", func(b *build) { b.shut["V"] = true }, []string{"water is drawn at B", "pipe P1 is shut"}, []string{"B"}, []string{"P1"}},
		{"against a check valve", func(b *build) { b.draw["B"], b.draw["A"] = -0.01, 0 }, []string{"water is put in at B", "pipe P2 has a check valve"}, []string{"B"}, []string{"P2"}},
		{"no link", func(b *build) { b.junction("C"); b.draw["C"] = 0.001 }, []string{"water is drawn at C", "no link joins it"}, []string{"C"}, nil},
		{"outlet gives nothing back", func(b *build) { b.shut["P1"] = true; b.point("O", Outlet, 5); b.plain("P3", "B", "O") },
			[]string{"water is drawn at B", "pipe P1 is shut", "pipe P3 ends at an outlet"}, []string{"B"}, []string{"P1", "P3"}},
		{"level not known", func(b *build) { b.head["R"] = math.NaN() }, []string{"reservoir R", "level is not known"}, []string{"R"}, nil},
		{"roughness", func(b *build) { b.rough["P1"] = math.NaN() }, []string{"pipe P1", "roughness is not a number"}, nil, []string{"P1"}},
		{"coefficient", func(b *build) { b.k["V"] = math.Inf(1) }, []string{"fitting V on pipe P1", "loss coefficient"}, nil, []string{"P1"}},
		{"draw-off", func(b *build) { b.draw["A"] = math.NaN() }, []string{"point A", "draw-off is not a number"}, []string{"A"}, nil},
	} {
		b := start()
		c.change(b)
		_, err := b.try()
		var u *Unsolvable
		if !errors.As(err, &u) {
			t.Errorf("%s: error %v", c.name, err)
			continue
		}
		for _, s := range c.says {
			if !strings.Contains(u.Error(), s) {
				t.Errorf("%s: %q does not say %q", c.name, u, s)
			}
		}
		if !slices.Equal(u.Points, c.points) || !slices.Equal(u.Links, c.links) {
			t.Errorf("%s: points %v, links %v", c.name, u.Points, u.Links)
		}
	}
}

// TestNoDuty: a pump whose curve rises for ever never meets the pipes; it is named.
func TestNoDuty(t *testing.T) {
	b := newBuild(t)
	b.reservoir("S", 0)
	b.reservoir("T", 5)
	b.junction("A")
	b.machine("M", "S", "A", false, []float64{0, 0.01}, []float64{20, 60})
	b.pipe("P", "A", "T", 1e-3, 2, 1e-6)
	_, err := b.try()
	var u *Unsolvable
	if !errors.As(err, &u) || !strings.Contains(u.Cause, "pump M") {
		t.Errorf("error %v", err)
	}
}

// TestTopology: what cannot be a system is refused with every fault named.
func TestTopology(t *testing.T) {
	curve, err := friction.NewCurve([]float64{0, 1}, []float64{2, 1})
	if err != nil {
		t.Fatal(err)
	}
	pipe := func(length, bore float64, f ...Fitting) *Pipe {
		return &Pipe{Pipe: friction.Pipe{Length: length, Bore: bore}, Fittings: f}
	}
	points := []Point{{Name: "A"}, {Name: "B"}, {Name: "O", Kind: Outlet}}
	_, err = NewSystem(points, []Link{
		{Name: "both", From: 0, To: 1, Pipe: pipe(1, 1), Machine: &Machine{Curve: curve}},
		{Name: "none", From: 0, To: 1},
		{Name: "far", From: 0, To: 7, Pipe: pipe(1, 1)},
		{Name: "ring", From: 1, To: 1, Pipe: pipe(1, 1)},
		{Name: "short", From: 0, To: 1, Pipe: pipe(0, 1)},
		{Name: "thin", From: 0, To: 1, Pipe: pipe(1, math.NaN())},
		{Name: "dry", From: 2, To: 1, Machine: &Machine{Curve: curve}},
		{Name: "blind", From: 0, To: 1, Machine: &Machine{}},
		{Name: "past", From: 0, To: 1, Pipe: pipe(10, 1, Fitting{Name: "F1", At: 11, Bore: 1})},
		{Name: "order", From: 0, To: 1, Pipe: pipe(10, 1, Fitting{Name: "F2", At: 8, Bore: 1}, Fitting{Name: "F3", At: 5, Bore: 1})},
		{Name: "jet", From: 0, To: 1, Pipe: pipe(10, 1, Fitting{Name: "F4", At: 10, Bore: 1, JetBore: 0.5})},
	})
	if err == nil {
		t.Fatal("accepted")
	}
	for _, s := range []string{"link both", "link none", "link far", "link ring", "pipe short", "pipe thin", "machine dry", "machine blind", "fitting F1", "fitting F3", "nozzle F4"} {
		if !strings.Contains(err.Error(), s) {
			t.Errorf("%q is not named in\n%v", s, err)
		}
	}
	defer func() {
		if recover() == nil {
			t.Error("parameters of another system were accepted")
		}
	}()
	s, err := NewSystem(points[:2], []Link{{Name: "P", From: 0, To: 1, Pipe: pipe(1, 1)}})
	if err != nil {
		t.Fatal(err)
	}
	_, _ = s.NewSolver().Solve(&Parameters{}, &Conditions{Viscosity: 1e-6, Gravity: 9.81}, nil)
}
