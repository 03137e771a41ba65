package hydraulic

import (
	"fmt"
	"math"
	"math/rand/v2"
	"sort"

	"tapround/calibrate/friction"
)

// works is a system with its parameters and the conditions of one round.
type works struct {
	points []Point
	links  []Link
	sys    *System
	p      Parameters
	c      Conditions
}

// traits steer what random works hold.
type traits struct {
	points, extra            int     // junctions and the like; links beyond a tree
	machines, oneWay, closed float64 // shares
	bends                    bool    // works curves that gain with the flow at first
	stillShare               float64 // share of works in which nothing is drawn
	wildK                    bool    // coefficients from 0 to 1e6, bores from 10 mm to 2 m
}

var ordinary = traits{points: 14, extra: 6, machines: 0.1, oneWay: 0.08, closed: 0.04, stillShare: 0.1}

// randomWorks makes works that hang together as a whole, with every device. They need
// not have a solution: a draw-off may stand behind what is shut.
func randomWorks(r *rand.Rand, t traits) *works {
	n := 2 + r.IntN(t.points)
	w := &works{}
	law := friction.Law(r.IntN(2))
	for i := 0; i < n; i++ {
		pt := Point{Name: fmt.Sprintf("J%d", i), Kind: Junction, Elevation: 20 * r.Float64()}
		switch {
		case i == 0 || (i > 1 && r.Float64() < 0.1):
			pt.Kind, pt.Name = Fixed, fmt.Sprintf("R%d", i)
		case r.Float64() < 0.08:
			pt.Kind, pt.Name = Outlet, fmt.Sprintf("O%d", i)
		}
		w.points = append(w.points, pt)
	}
	for i := 1; i < n; i++ {
		w.join(r, t, law, r.IntN(i), i)
	}
	for k := r.IntN(t.extra + 1); k > 0 && n > 2; k-- {
		a, b := r.IntN(n), r.IntN(n)
		if a != b {
			w.join(r, t, law, a, b)
		}
	}
	w.fill(r, t)
	return w
}

func logUniform(r *rand.Rand, lo, hi float64) float64 {
	return math.Exp(math.Log(lo) + r.Float64()*math.Log(hi/lo))
}

func (w *works) join(r *rand.Rand, t traits, law friction.Law, a, b int) {
	if r.IntN(2) == 0 {
		a, b = b, a
	}
	i := len(w.links)
	l := Link{Name: fmt.Sprintf("P%d", i), From: a, To: b}
	if w.points[a].Kind != Outlet && r.Float64() < t.machines {
		l.Name = fmt.Sprintf("M%d", i)
		l.Machine = randomMachine(r, t)
		w.links = append(w.links, l)
		return
	}
	lo, hi := 0.04, 0.6
	if t.wildK {
		lo, hi = 0.01, 2
	}
	p := &Pipe{Pipe: friction.Pipe{Law: law, Length: logUniform(r, 1, 2000), Bore: logUniform(r, lo, hi)}}
	for k := r.IntN(4); k > 0; k-- {
		f := Fitting{Name: fmt.Sprintf("F%d.%d", i, k), At: p.Length * r.Float64(), Bore: p.Bore * (0.6 + 0.4*r.Float64()), ReverseK: math.NaN()}
		if r.IntN(6) == 0 {
			f.At = p.Length * float64(r.IntN(2))
		}
		if r.IntN(6) == 0 {
			f.ReverseK = 2 * r.Float64()
		}
		f.OneWay = r.Float64() < t.oneWay
		p.Fittings = append(p.Fittings, f)
	}
	sort.SliceStable(p.Fittings, func(i, j int) bool { return p.Fittings[i].At < p.Fittings[j].At })
	if w.points[b].Kind == Outlet && r.IntN(2) == 0 {
		p.Fittings = append(p.Fittings, Fitting{Name: fmt.Sprintf("N%d", i), At: p.Length, Bore: p.Bore / 2, ReverseK: math.NaN(), JetBore: p.Bore / 2})
	}
	l.Pipe = p
	w.links = append(w.links, l)
}

func randomMachine(r *rand.Rand, t traits) *Machine {
	m := &Machine{Turbine: r.IntN(3) == 0, RatedSpeed: 150}
	q, h := logUniform(r, 0.005, 0.1), 5+40*r.Float64()
	flow, head := []float64{0, q / 3, 2 * q / 3, q}, []float64{h, 0.96 * h, 0.82 * h, 0.5 * h}
	switch {
	case m.Turbine:
		head = []float64{0.02 * h, 0.12 * h, 0.45 * h, h}
	case t.bends:
		head = []float64{0.9 * h, h, 0.85 * h, 0.5 * h}
	}
	c, err := friction.NewCurve(flow, head)
	if err != nil {
		panic(err)
	}
	m.Curve = c
	return m
}

func (w *works) fill(r *rand.Rand, t traits) {
	s, err := NewSystem(w.points, w.links)
	if err != nil {
		panic(err)
	}
	n, m := len(w.points), len(w.links)
	w.sys = s
	w.p = s.NewParameters()
	w.c = Conditions{Head: make([]float64, n), DrawOff: make([]float64, n), Shut: make([]bool, m), FittingShut: make([]bool, s.NumFittings()),
		Stopped: make([]bool, m), Speed: make([]float64, m), Viscosity: 1.3e-6, Gravity: 9.81}
	if r.IntN(6) == 0 {
		w.c.Viscosity = 1e-4 // laminar and transitional flow in many pipes
	}
	for i, l := range w.links {
		if l.Machine != nil {
			w.p.HeadFactor[i] = 0.9 + 0.2*r.Float64()
			w.c.Stopped[i] = r.Float64() < t.closed
			if r.IntN(2) == 0 {
				w.c.Speed[i] = 120 + 50*r.Float64()
			}
			continue
		}
		w.c.Shut[i] = r.Float64() < t.closed
		w.p.LnRough[i] = math.Log(l.Pipe.Bore * logUniform(r, 1e-6, 0.05))
		if l.Pipe.Law == friction.HazenWilliams {
			w.p.LnRough[i] = math.Log(60 + 90*r.Float64())
		}
		for k := range l.Pipe.Fittings {
			flat := s.FittingIndex(i, k)
			w.p.LnK[flat] = math.Log(logUniform(r, 0.05, 50))
			if t.wildK {
				w.p.LnK[flat] = math.Log(logUniform(r, 1e-6, 1e6))
			}
			w.c.FittingShut[flat] = r.Float64() < t.closed/2
		}
	}
	still := r.Float64() < t.stillShare
	for i, p := range w.points {
		switch {
		case p.Kind == Fixed && still:
			w.c.Head[i] = 40
		case p.Kind == Fixed:
			w.c.Head[i] = 25 + 30*r.Float64()
		case p.Kind == Junction && !still && r.IntN(2) == 0:
			w.c.DrawOff[i] = logUniform(r, 1e-5, 0.03)
			if r.IntN(10) == 0 {
				w.c.DrawOff[i] *= -1
			}
		}
	}
}
