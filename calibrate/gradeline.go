package calibrate

import (
	"math"
	"sort"

	"tapround/calibrate/hydraulic"
)

// Vertex is one place of the grade lines along a way, m. A step at a fitting is
// two vertices at one X. NaN where nothing is known: no water fed, no level.
type Vertex struct {
	X                   float64 // along the way
	Link                int
	At                  float64 // along the link, from its From end
	Total, Piezometric  float64 // as fitted
	ExpectedTotal       float64 // sound works at the fitted flows, from the head at the way's start
	ExpectedPiezometric float64
	Ground              float64 // the pipe's own level
}

// Along gives the grade lines along a way in a round.
func (f *Fit) Along(w Way, round int) []Vertex { return f.alongWith(w, round, false) }

func (f *Fit) alongWith(w Way, round int, taps bool) []Vertex {
	m := f.Model
	var out []Vertex
	x := 0.0
	fitted := lineReader{m, f.work.solvers[round], f.State(round)}
	sound := f.soundWorks(round)
	for _, leg := range w.Legs {
		length := m.lengthOf(leg.Link)
		for _, s := range m.stops(leg, taps) {
			out = append(out, Vertex{X: x + math.Abs(s.at-clamp(leg.X1, 0, length)), Link: leg.Link, At: s.at,
				Total: fitted.head(leg, s, hydraulic.Total), Piezometric: fitted.head(leg, s, hydraulic.Piezometric),
				ExpectedTotal: sound.head(leg, s, hydraulic.Total), ExpectedPiezometric: sound.head(leg, s, hydraulic.Piezometric),
				Ground: m.groundAt(leg.Link, s.at)})
		}
		x += length
	}
	return out
}

// soundWorks is the round with every item at its expected value and the fitted levels
// and draw-offs: what the works would show if nothing on them were wrong. Where that has
// no solution the lines stay empty.
func (f *Fit) soundWorks(round int) lineReader {
	if f.sound == nil {
		f.sound = make([]lineReader, len(f.Model.Rounds))
	}
	if f.sound[round].solver == nil {
		v := f.Model.System.NewSolver()
		c := f.Conditions(round)
		st, err := v.Solve(&f.Model.base, &c, nil)
		if err != nil {
			st = nil
		}
		f.sound[round] = lineReader{f.Model, v, st}
	}
	return f.sound[round]
}

// lineReader reads heads along pipes from one solved state; nil: there is none.
type lineReader struct {
	m      *Model
	solver *hydraulic.Solver
	state  *hydraulic.State
}

// stop is one chainage of a link where the lines bend or step. probe is where the
// steady model is asked: at the fitting for the side before it, just beyond for
// the side after it, beyond the pipe for its ends.
type stop struct{ at, probe float64 }

func (m *Model) stops(leg Leg, taps bool) []stop {
	length := m.lengthOf(leg.Link)
	out := []stop{{0, math.Inf(-1)}}
	if link := m.System.Link(leg.Link); link.Pipe != nil {
		for _, f := range link.Pipe.Fittings {
			out = append(out, stop{f.At, f.At}, stop{f.At, math.Nextafter(f.At, math.Inf(1))})
		}
		for _, l := range m.Survey.Levels {
			if m.links[l.Pipe] == leg.Link && l.At > 0 && l.At < length {
				out = append(out, stop{l.At, l.At})
			}
		}
	}
	if taps {
		for _, t := range m.Survey.Taps {
			if t.Pipe != "" && m.links[t.Pipe] == leg.Link {
				out = append(out, stop{t.At, t.At})
			}
		}
	}
	out = append(out, stop{length, math.Inf(1)})
	sort.SliceStable(out, func(i, j int) bool { return out[i].probe < out[j].probe })
	if leg.X1 > leg.X2 {
		for i, j := 0, len(out)-1; i < j; i, j = i+1, j-1 {
			out[i], out[j] = out[j], out[i]
		}
	}
	return out
}

// head reads a head at a stop; at the ends of a link the total head is that of the point.
func (r lineReader) head(leg Leg, s stop, v hydraulic.View) float64 {
	if r.state == nil {
		return math.NaN()
	}
	from, to := r.m.endsOf(leg.Link)
	pipe := r.m.System.Link(leg.Link).Pipe != nil
	switch {
	case math.IsInf(s.probe, -1) && (!pipe || v == hydraulic.Total):
		return r.state.Head[from]
	case math.IsInf(s.probe, 1) && (!pipe || v == hydraulic.Total):
		return r.state.Head[to]
	case !pipe:
		return math.NaN()
	}
	at := clamp(s.probe, 0, math.Nextafter(r.m.lengthOf(leg.Link), math.Inf(1)))
	return r.solver.Read(hydraulic.Probe{Point: -1, Link: leg.Link, At: at, View: v, Depth: math.NaN()})
}

// groundAt is the pipe's level at a chainage: by levels.csv and the levels of its
// ends, linear between them. A machine has its points' levels.
func (m *Model) groundAt(link int, at float64) float64 {
	from, to := m.endsOf(link)
	x := []float64{0}
	z := []float64{m.Survey.Points[from].Elevation}
	for _, l := range m.Survey.Levels {
		if m.links[l.Pipe] == link && l.At > x[len(x)-1] && l.At < m.lengthOf(link) {
			x, z = append(x, l.At), append(z, l.Elevation)
		}
	}
	x, z = append(x, m.lengthOf(link)), append(z, m.Survey.Points[to].Elevation)
	for i := 1; i < len(x); i++ {
		if at <= x[i] {
			if x[i] == x[i-1] {
				return z[i]
			}
			return z[i-1] + (z[i]-z[i-1])*(at-x[i-1])/(x[i]-x[i-1])
		}
	}
	return z[len(z)-1]
}
