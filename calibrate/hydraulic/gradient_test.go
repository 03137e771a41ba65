package hydraulic

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

// knob is one number that a reading may depend on, with its place in a gradient.
type knob struct {
	name string
	at   *float64
	step float64
	of   func(g *Gradient) float64
}

// knobs are all parameters, head factors, draw-offs and fixed heads of some works.
func (w *works) knobs() []knob {
	var out []knob
	add := func(name string, list []float64, i int, step float64, of func(g *Gradient) []float64) {
		out = append(out, knob{name, &list[i], step, func(g *Gradient) float64 { return of(g)[i] }})
	}
	for i, l := range w.links {
		if l.Machine != nil {
			add("factor "+l.Name, w.p.HeadFactor, i, 1e-4, func(g *Gradient) []float64 { return g.HeadFactor })
			continue
		}
		add("roughness "+l.Name, w.p.LnRough, i, 1e-4, func(g *Gradient) []float64 { return g.LnRough })
		for k, f := range l.Pipe.Fittings {
			add("K "+f.Name, w.p.LnK, w.sys.FittingIndex(i, k), 1e-4, func(g *Gradient) []float64 { return g.LnK })
		}
	}
	for i, p := range w.points {
		switch p.Kind {
		case Junction:
			add("draw-off "+p.Name, w.c.DrawOff, i, 1e-7, func(g *Gradient) []float64 { return g.DrawOff })
		case Fixed:
			add("level "+p.Name, w.c.Head, i, 1e-4, func(g *Gradient) []float64 { return g.FixedHead })
		}
	}
	return out
}

// probes are readings of every view, at points and along links.
func (w *works) probes(r *rand.Rand) []Probe {
	var out []Probe
	for view := Piezometric; view <= Flow; view++ {
		for i, l := range w.links {
			depth, length := math.NaN(), 1.0
			if l.Pipe != nil {
				length = l.Pipe.Length
				if r.IntN(2) == 0 {
					depth = l.Pipe.Bore * (0.1 + 0.8*r.Float64())
				}
			}
			out = append(out, Probe{Point: -1, Link: i, At: length * r.Float64(), View: view, Depth: depth},
				Probe{Point: l.From, Link: i, View: view, Depth: depth}, Probe{Point: l.To, Link: i, View: view, Depth: depth})
		}
	}
	return out
}

// compare holds the gradients of all probes against central differences. It returns
// how many comparisons it made, how many of them were sharp, to 1e-4 of what the probe's
// largest derivative moves it by, and how many blurred: a wide stub at rest is straight
// over less flow than differences can resolve, and both steps tell so by disagreeing.
func (w *works) compare(t *testing.T, label string, probes []Probe) (made, sharp, blurred int) {
	t.Helper()
	v := w.sys.NewSolver()
	base, err := v.Solve(&w.p, &w.c, nil)
	if err != nil {
		return 0, 0, 0
	}
	// A state may leave 1e-12 m open, which a link of little loss turns into flow.
	slack, gentlest := make([]float64, len(probes)), math.Inf(1)
	for i, in := range v.in {
		if in {
			gentlest = math.Min(gentlest, v.slope[i])
		}
	}
	knobs := w.knobs()
	gradients, values := make([][]float64, len(probes)), make([]float64, len(probes))
	g := w.sys.NewGradient()
	for i, p := range probes {
		values[i] = v.Read(p)
		slack[i] = 2e-12 + 1e-14*math.Abs(values[i])
		if p.View == Flow {
			slack[i] = math.Max(slack[i], 1e-12/gentlest)
		}
		if math.IsNaN(values[i]) {
			if v.Gradient(p, g) == nil {
				t.Errorf("%s: probe %+v reads nothing and has a gradient", label, p)
			}
			continue
		}
		if err := v.Gradient(p, g); err != nil {
			t.Errorf("%s: probe %+v: %v", label, p, err)
			continue
		}
		for _, k := range knobs {
			gradients[i] = append(gradients[i], k.of(g))
		}
	}
	for n, k := range knobs {
		// Where water stands, the laws are straight only over the smallest flows: then a
		// step 10,000 times smaller decides.
		coarse := w.differences(v, k, k.step, probes, base)
		var fine *pair
		for i, p := range probes {
			if gradients[i] == nil || coarse == nil {
				continue // no reading; or a draw-off that nothing feeds, a link that turns
			}
			exact := gradients[i][n]
			off, tolerance := coarse.off(exact, slack[i], i)
			if off > tolerance && w.stands(base) {
				if fine == nil {
					fine = w.differences(v, k, k.step/1e4, probes, base)
				}
				off, tolerance = fine.off(exact, slack[i], i)
				if off > tolerance && (coarse.bent(i) || fine.bent(i)) {
					blurred++
					continue
				}
			}
			if off > tolerance {
				t.Errorf("%s: view %d of %+v by %s: %.10g is off the differences by %.3g, tolerance %.3g", label, p.View, p, k.name, exact, off, tolerance)
			}
			scale := 0.0
			for m, x := range gradients[i] {
				scale = math.Max(scale, math.Abs(x)*knobs[m].step)
			}
			made++
			if tolerance*k.step < 1e-4*scale {
				sharp++
			}
		}
	}
	return made, sharp, blurred
}

// pair holds central differences of all probes with a step and with a quarter of it.
type pair struct {
	step         float64
	wide, narrow []float64
}

// off is how far an exact derivative lies from the differences, and how far it may: by
// what the two steps disagree, and by rounding and what the states leave open.
func (d *pair) off(exact, slack float64, i int) (off, tolerance float64) {
	return math.Abs(exact - d.narrow[i]), 2*math.Abs(d.wide[i]-d.narrow[i]) + 1e-7*math.Abs(exact) + slack/(d.step/4)
}

// bent reports that the reading is not straight over the steps.
func (d *pair) bent(i int) bool {
	return math.Abs(d.wide[i]-d.narrow[i]) > 0.01*math.Abs(d.narrow[i])
}

func (w *works) differences(v *Solver, k knob, step float64, probes []Probe, base *State) *pair {
	d := &pair{step: step, wide: w.difference(v, k, step, probes, base), narrow: w.difference(v, k, step/4, probes, base)}
	if d.wide == nil || d.narrow == nil {
		return nil
	}
	return d
}

// stands reports an open pipe in which next to nothing flows.
func (w *works) stands(st *State) bool {
	for i, q := range st.Flow {
		if !st.Closed[i] && math.Abs(q) < 1e-9 {
			return true
		}
	}
	return false
}

// difference gives the central difference of every probe by a knob; nil where the
// works have no solution or another set of closed links on one side.
func (w *works) difference(v *Solver, k knob, step float64, probes []Probe, base *State) []float64 {
	keep := *k.at
	defer func() { *k.at = keep }()
	read := func(x float64) []float64 {
		*k.at = x
		st, err := v.Solve(&w.p, &w.c, base)
		if err != nil || fmt.Sprint(st.Closed) != fmt.Sprint(base.Closed) {
			return nil
		}
		out := make([]float64, len(probes))
		for i, p := range probes {
			out[i] = v.Read(p)
		}
		return out
	}
	up, down := read(keep+step), read(keep-step)
	if up == nil || down == nil {
		return nil
	}
	for i := range up {
		up[i] = (up[i] - down[i]) / (2 * step)
	}
	return up
}

// TestGradients compares every derivative of every view on seeded random works of all
// kinds.
func TestGradients(t *testing.T) {
	seen := map[string]int{}
	for name, tr := range kinds {
		if name == "large" || name == "wild" {
			tr.points, tr.extra = 8, 3
		}
		made, sharp, blurred := 0, 0, 0
		for seed := uint64(0); seed < 25; seed++ {
			r := rand.New(rand.NewPCG(seed, 11))
			w := randomWorks(r, tr)
			m, s, b := w.compare(t, fmt.Sprintf("%s %d", name, seed), w.probes(r))
			if m > 0 {
				w.note(seen)
			}
			made, sharp, blurred = made+m, sharp+s, blurred+b
		}
		t.Logf("%s: %d derivatives compared, %.0f %% of them sharp, %d blurred", name, made, 100*float64(sharp)/float64(made), blurred)
		if made < 10000 || sharp < made/2 || blurred > made/10000 {
			t.Errorf("%s: %d derivatives compared, %d sharp, %d blurred: too few that tell", name, made, sharp, blurred)
		}
	}
	for _, what := range []string{"laminar", "transitional", "turbulent", "Hazen-Williams", "all at rest", "reversed", "reversed through its own coefficient", "pump", "turbine",
		"outlet", "outlet at the From end", "jet", "check valve open", "check valve closed", "shut pipe", "shut fitting", "stopped machine", "loops", "tree", "not fed"} {
		if seen[what] < 2 {
			t.Errorf("%s: in %d works only", what, seen[what])
		}
	}
}
