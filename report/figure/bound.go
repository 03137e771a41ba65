package figure

import (
	"math"
	"strings"

	"tapround/report"
	"tapround/report/internal/say"
)

// bound is the least and greatest of some numbers; not ok: of none.
type bound struct {
	lo, hi float64
	ok     bool
}

func (b bound) with(v float64) bound {
	if !b.ok {
		return bound{v, v, true}
	}
	return bound{math.Min(b.lo, v), math.Max(b.hi, v), true}
}

func (b bound) and(o bound) bound {
	if !o.ok {
		return b
	}
	return b.with(o.lo).with(o.hi)
}

func (b bound) size() float64 { return b.hi - b.lo }

func headRange(p report.Profile) bound {
	var b bound
	for _, ls := range [][][]report.XY{p.Piezometric, p.Total, p.ExpectedPiezo, p.ExpectedTotal} {
		for _, l := range ls {
			for _, v := range l {
				b = b.with(v.Y)
			}
		}
	}
	for _, m := range p.Measured {
		b = b.with(m.Y - m.Bar).with(m.Y + m.Bar)
	}
	return b
}

func groundRange(p report.Profile) bound {
	var b bound
	for _, v := range p.Ground {
		b = b.with(v.Y)
	}
	return b
}

// finite gives a copy without what cannot be drawn: a vertex that is no number
// breaks its line, a reading that is no number is left out.
func finite(p report.Profile) report.Profile {
	p.Piezometric = runs(p.Piezometric)
	p.Total = runs(p.Total)
	p.ExpectedPiezo = runs(p.ExpectedPiezo)
	p.ExpectedTotal = runs(p.ExpectedTotal)
	var ground []report.XY
	for _, v := range p.Ground {
		if isNumber(v.X) && isNumber(v.Y) {
			ground = append(ground, v)
		}
	}
	p.Ground = ground
	var ms []report.ProfileReading
	for _, m := range p.Measured {
		if isNumber(m.X) && isNumber(m.Y) {
			if !isNumber(m.Bar) {
				m.Bar = 0
			}
			m.Note = clean(m.Note)
			ms = append(ms, m)
		}
	}
	p.Measured = ms
	return p
}

func runs(lines [][]report.XY) [][]report.XY {
	var out [][]report.XY
	for _, l := range lines {
		start := 0
		for i := 0; i <= len(l); i++ {
			if i < len(l) && isNumber(l[i].X) && isNumber(l[i].Y) {
				continue
			}
			if i-start > 1 {
				out = append(out, l[start:i])
			}
			start = i + 1
		}
	}
	return out
}

func isNumber(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

// clean takes out of a name what no picture format can carry, and a hyphen that the
// font has not.
func clean(s string) string { return strings.ReplaceAll(say.Clean(s), "\u2011", "-") }
