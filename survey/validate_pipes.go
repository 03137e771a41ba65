package survey

import (
	"fmt"
	"math"
)

// Bounds of what is built. The deepest mine and the highest mountain lie within
// farthest; the largest tunnels that carry water measure some 15 m across.
const (
	farthest   = 10e3  // m above or below a datum
	widest     = 30.0  // m, bore
	unusual    = 5.0   // m, bore
	narrow     = 1e-3  // m, bore
	longest    = 100e3 // m, one pipe between two points
	lowC       = 20.0  // Hazen-Williams, a main nearly closed by scale
	highC      = 170.0 // smoother than any pipe
	largeKnown = 1e4   // loss coefficient: a valve all but shut
)

func (v *validation) points() {
	for i := range v.Points {
		p := &v.Points[i]
		if math.Abs(p.Elevation) > farthest {
			v.fatal(p.Source, "elevation", metres(p.Elevation), "is no level on earth", "correct the number or its unit")
		}
	}
}

func (v *validation) pipes() {
	for i := range v.Pipes {
		p := &v.Pipes[i]
		v.ends(p.Source, p.From, p.To, "pipe")
		v.positive(p.Source, "length", p.Length, metres(p.Length))
		v.positive(p.Source, "bore", p.Bore, millimetres(p.Bore))
		switch {
		case p.Bore > widest:
			v.fatal(p.Source, "bore", metres(p.Bore), "no pipe has such a bore", "correct the number or the unit in the heading")
		case p.Bore > unusual || p.Bore > 0 && p.Bore < narrow:
			v.notice(p.Source, "bore", millimetres(p.Bore), "is an unusual bore", "look at the number and the unit in the heading")
		}
		if p.Length > longest {
			v.notice(p.Source, "length", metres(p.Length), "is unusually long for one pipe", "look at the number and the unit in the heading")
		}
		v.wall(p)
		v.spread(p.Source, p.Spread)
	}
}

// ends looks at the two points that a pipe or machine joins.
func (v *validation) ends(at Source, from, to, what string) {
	for _, e := range []struct{ column, name string }{{"from", from}, {"to", to}} {
		if v.point[e.name] == nil {
			v.dangling = true
			v.unknown(at, e.column, e.name, "points.csv", v.pointNames())
		}
	}
	if from != "" && from == to {
		v.dangling = true
		v.fatal(at, "to", to, fmt.Sprintf("the %s leads from a point to itself", what), "write the point at its other end")
	}
}

// wall looks at roughness, coefficient and year of a pipe.
func (v *validation) wall(p *Pipe) {
	if k := p.Roughness; k.OK {
		switch {
		case k.V <= 0:
			v.fatal(p.Source, "roughness", millimetres(k.V), "must be above nought", "write 0.0015 mm for a smooth pipe, or leave it empty for the built-in table")
		case k.V > p.Bore/2:
			v.fatal(p.Source, "roughness", millimetres(k.V), fmt.Sprintf("is more than half the bore of %s", millimetres(p.Bore)), "correct the number or the units in the headings")
		case k.V > p.Bore/10:
			v.notice(p.Source, "roughness", millimetres(k.V), fmt.Sprintf("is more than a tenth of the bore of %s, beyond what friction formulas hold for", millimetres(p.Bore)), "look at the number and the units in the headings")
		}
	}
	if c := p.C; c.OK {
		switch {
		case c.V <= 0:
			v.fatal(p.Source, "c_value", figures(c.V), "must be above nought", "correct the number, or leave it empty for the built-in table")
		case c.V < lowC || c.V > highC:
			v.notice(p.Source, "c_value", figures(c.V), "is an unusual coefficient", "look at the number; sound pipes have about 90 to 150")
		}
	}
	if y := p.Laid; y.OK && (y.V < 1600 || y.V > 2200) {
		v.notice(p.Source, "laid", figures(y.V), "is an unusual year", "write the year with four figures")
	}
}

// spread is a factor at one standard deviation: 1 would mean that nothing is unsure.
func (v *validation) spread(at Source, f Maybe) {
	switch {
	case !f.OK:
	case f.V <= 1:
		v.fatal(at, "spread", figures(f.V), "is a factor and must be above 1", "write 1.5 for an expected value that may be off by half")
	case f.V > 10:
		v.notice(at, "spread", figures(f.V), "is a very wide spread; the expected value then says next to nothing", "look at the number")
	}
}

// beyond reports a place outside a pipe. A place at the far end may differ from the
// length by the rounding of a conversion.
func beyond(at float64, p *Pipe) bool {
	return at < 0 || at > p.Length*(1+1e-9)+1e-6
}

func (v *validation) levels() {
	type place struct {
		pipe string
		at   float64
	}
	first := map[place]*Level{}
	for i := range v.Levels {
		l := &v.Levels[i]
		p := v.pipe[l.Pipe]
		switch {
		case p == nil:
			v.unknown(l.Source, "pipe", l.Pipe, "pipes.csv", v.pipeNames())
		case beyond(l.At, p):
			v.fatal(l.Source, "at", metres(l.At), fmt.Sprintf("lies outside pipe %s, which is %s long", p.Name, metres(p.Length)), "correct the distance, or the pipe's length")
		}
		if math.Abs(l.Elevation) > farthest {
			v.fatal(l.Source, "elevation", metres(l.Elevation), "is no level on earth", "correct the number or its unit")
		}
		k := place{l.Pipe, l.At}
		switch other := first[k]; {
		case other == nil:
			first[k] = l
		case other.Elevation != l.Elevation:
			v.fatal(l.Source, "elevation", metres(l.Elevation), fmt.Sprintf("the same place has %s in line %d", metres(other.Elevation), other.Source.Line), "take one of the rows away")
		}
	}
}
