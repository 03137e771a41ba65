package hydraulic

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"tapround/calibrate/friction"
)

// grid makes a square street grid of about the given number of pipes, two reservoirs
// at opposite corners and a draw-off at every junction.
func grid(pipes int) *works {
	side := int(math.Round(math.Sqrt(float64(pipes)/2))) + 1
	r := rand.New(rand.NewPCG(1, 2))
	w := &works{}
	for i := 0; i < side*side; i++ {
		w.points = append(w.points, Point{Name: fmt.Sprintf("J%d", i)})
	}
	w.points[0].Kind, w.points[side*side-1].Kind = Fixed, Fixed
	join := func(a, b int) {
		f := Fitting{Name: fmt.Sprintf("V%d", len(w.links)), At: 10, Bore: 0.2, ReverseK: math.NaN()}
		w.links = append(w.links, Link{Name: fmt.Sprintf("P%d", len(w.links)), From: a, To: b,
			Pipe: &Pipe{Pipe: friction.Pipe{Length: 80 + 80*r.Float64(), Bore: 0.1 + 0.3*r.Float64()}, Fittings: []Fitting{f}}})
	}
	for i := 0; i < side; i++ {
		for j := 0; j < side; j++ {
			if j+1 < side {
				join(i*side+j, i*side+j+1)
			}
			if i+1 < side {
				join(i*side+j, (i+1)*side+j)
			}
		}
	}
	w.fill(r, traits{})
	for i := range w.points {
		if w.points[i].Kind == Junction {
			w.c.DrawOff[i] = 0.2 / float64(side*side) * (0.5 + r.Float64())
		}
	}
	for i := range w.links {
		w.p.LnRough[i] = math.Log(0.5e-3)
	}
	w.c.Viscosity = 1.3e-6
	return w
}

var sizes = []int{100, 1000, 10000}

func BenchmarkAnalyse(b *testing.B) {
	for _, n := range sizes {
		w := grid(n)
		b.Run(fmt.Sprint(len(w.links)), func(b *testing.B) {
			for b.Loop() {
				if _, err := NewSystem(w.points, w.links); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}

// BenchmarkSolve is a cold start each time.
func BenchmarkSolve(b *testing.B) {
	for _, n := range sizes {
		w := grid(n)
		v := w.sys.NewSolver()
		b.Run(fmt.Sprint(len(w.links)), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				st, err := v.Solve(&w.p, &w.c, nil)
				if err != nil {
					b.Fatal(err)
				}
				b.ReportMetric(float64(st.Iterations), "steps")
			}
		})
	}
}

// BenchmarkGradient is one reading at a solved state.
func BenchmarkGradient(b *testing.B) {
	for _, n := range sizes {
		w := grid(n)
		v := w.sys.NewSolver()
		if _, err := v.Solve(&w.p, &w.c, nil); err != nil {
			b.Fatal(err)
		}
		g := w.sys.NewGradient()
		p := Probe{Point: -1, Link: len(w.links) / 2, At: 40, Depth: math.NaN()}
		b.Run(fmt.Sprint(len(w.links)), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				if err := v.Gradient(p, g); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
