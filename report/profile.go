package report

import (
	"fmt"
	"math"
	"strings"

	"tapround/calibrate"
	"tapround/survey"
)

// profiles describes the grade-line pictures: every route in every round.
func profiles(f *calibrate.Fit, findings []survey.Finding, routes []calibrate.Way) []Profile {
	var out []Profile
	for _, w := range routes {
		for r := range f.Model.Rounds {
			out = append(out, profileOf(f, findings, w, r))
		}
	}
	return out
}

func profileOf(f *calibrate.Fit, findings []survey.Finding, w calibrate.Way, round int) Profile {
	m := f.Model
	p := Profile{Round: m.Rounds[round].Name}
	first, last := m.Survey.Points[w.Points[0]].Name, m.Survey.Points[w.Points[len(w.Points)-1]].Name
	p.Title = fmt.Sprintf("%s to %s", first, last)
	x := 0.0
	for i, pt := range w.Points {
		p.Route = append(p.Route, Place{Name: m.Survey.Points[pt].Name, Kind: string(m.Survey.Points[pt].Kind), X: x})
		if i < len(w.Legs) {
			x += m.LinkLength(w.Legs[i].Link)
		}
	}
	vs := f.Along(w, round)
	for _, v := range vs {
		p.Ground = append(p.Ground, XY{v.X, v.Ground})
	}
	p.Piezometric = lines(vs, func(v calibrate.Vertex) float64 { return v.Piezometric })
	p.Total = lines(vs, func(v calibrate.Vertex) float64 { return v.Total })
	p.ExpectedTotal = lines(vs, func(v calibrate.Vertex) float64 { return v.ExpectedTotal })
	p.ExpectedPiezo = lines(vs, func(v calibrate.Vertex) float64 { return v.ExpectedPiezometric })
	for t, tap := range m.Survey.Taps {
		if at, ok := m.ChainageOfTap(w, t); ok {
			p.Taps = append(p.Taps, Place{Name: tap.Name, Kind: "tap", X: at})
		}
	}
	for _, fit := range m.Survey.Fittings {
		if at, ok := m.ChainageAt(w, m.LinkIndex(fit.Pipe), fit.At); ok {
			p.Devices = append(p.Devices, Place{Name: fit.Name, Kind: string(fit.Kind), X: at})
		}
	}
	for _, mc := range m.Survey.Machines {
		if at, ok := m.ChainageAt(w, m.LinkIndex(mc.Name), 0); ok {
			p.Devices = append(p.Devices, Place{Name: mc.Name, Kind: string(mc.Kind), X: at})
		}
	}
	p.Measured = measured(f, findings, w, round)
	p.Suspect = suspects(m, findings, w)
	p.BelowAir = belowAir(vs)
	return p
}

// lines breaks vertices into runs where the value is known.
func lines(vs []calibrate.Vertex, of func(calibrate.Vertex) float64) [][]XY {
	var out [][]XY
	var run []XY
	for _, v := range vs {
		y := of(v)
		if math.IsNaN(y) {
			if len(run) > 1 {
				out = append(out, run)
			}
			run = nil
			continue
		}
		run = append(run, XY{v.X, y})
	}
	if len(run) > 1 {
		out = append(out, run)
	}
	return out
}

func measured(f *calibrate.Fit, findings []survey.Finding, w calibrate.Way, round int) []ProfileReading {
	m := f.Model
	var out []ProfileReading
	for _, o := range m.Obs {
		h := o.Head
		if o.Round != round || (h.Quantity != survey.PiezometricHead && h.Quantity != survey.LocalTotalHead) {
			continue
		}
		x, ok := m.ChainageOfTap(w, m.TapIndex(h.Tap))
		if !ok {
			continue
		}
		text := ""
		for i, r := range h.Rows {
			if i > 0 {
				text += ", "
			}
			text += r.Written + " " + r.Unit
		}
		out = append(out, ProfileReading{Tap: h.Tap, Gauge: h.Gauge, X: x, Y: h.Value, Bar: 1.96 * h.U(),
			Total: h.Quantity == survey.LocalTotalHead, Text: text, Note: blameOf(findings, h)})
	}
	return out
}

// blameOf is the finding that says a reading's gauge or level is wrong.
func blameOf(findings []survey.Finding, h survey.Head) string {
	for _, f := range findings {
		if f.Grade == survey.Hint {
			continue
		}
		if (f.Kind == survey.LevelWrong && f.Item == h.Tap) || (f.Kind == survey.GaugeOff && f.Item == h.Gauge) {
			return f.ID
		}
	}
	return ""
}

// suspects marks the stretches that findings of lost head speak of.
func suspects(m *calibrate.Model, findings []survey.Finding, w calibrate.Way) []Span {
	var out []Span
	for _, f := range findings {
		if f.Grade == survey.Hint {
			continue
		}
		items := []string{f.Item}
		if f.Kind == survey.CauseOpen {
			items = nil
			for _, n := range f.CannotBeToldFrom {
				_, item, _ := strings.Cut(n, ":")
				items = append(items, item)
			}
		} else if f.Kind != survey.FouledPipe && f.Kind != survey.PartClosedValve && f.Kind != survey.BlockedFitting {
			continue
		}
		lo, hi := math.Inf(1), math.Inf(-1)
		for _, item := range items {
			if a, b, ok := extent(m, w, item); ok {
				lo, hi = math.Min(lo, a), math.Max(hi, b)
			}
		}
		if lo <= hi {
			out = append(out, Span{From: lo, To: hi, Label: f.ID + " " + strings.ReplaceAll(string(f.Kind), "-", " ")})
		}
	}
	return out
}

// extent is where an item lies along a way.
func extent(m *calibrate.Model, w calibrate.Way, item string) (lo, hi float64, ok bool) {
	for _, p := range m.Survey.Pipes {
		if p.Name == item {
			a, ok1 := m.ChainageAt(w, m.LinkIndex(item), 0)
			b, ok2 := m.ChainageAt(w, m.LinkIndex(item), p.Length)
			return math.Min(a, b), math.Max(a, b), ok1 && ok2
		}
	}
	for _, f := range m.Survey.Fittings {
		if f.Name == item {
			a, ok := m.ChainageAt(w, m.LinkIndex(f.Pipe), f.At)
			return a, a, ok
		}
	}
	return 0, 0, false
}

func belowAir(vs []calibrate.Vertex) []Span {
	var out []Span
	open := false
	for _, v := range vs {
		under := !math.IsNaN(v.Piezometric) && v.Piezometric < v.Ground-0.25
		switch {
		case under && !open:
			out = append(out, Span{From: v.X, To: v.X, Label: "below atmosphere"})
			open = true
		case under:
			out[len(out)-1].To = v.X
		default:
			open = false
		}
	}
	return out
}
