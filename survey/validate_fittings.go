package survey

import (
	"fmt"
	"math"
	"strings"
)

// atEnd is how near to a pipe's end, m, a change of bore must stand to be at it.
const atEnd = 1e-6

func (v *validation) fittings() {
	for i := range v.Fittings {
		f := &v.Fittings[i]
		v.spread(f.Source, f.Spread)
		if k := f.K; k.OK {
			switch {
			case k.V < 0:
				v.fatal(f.Source, "loss_coefficient", figures(k.V), "is below nought, and no fitting gives head", "correct the number")
			case k.V > largeKnown:
				v.notice(f.Source, "loss_coefficient", figures(k.V), "is very large for a sound, fully open fitting", "write what it has when open; a valve closed on purpose goes into conditions.csv")
			}
		}
		if f.Bore.OK {
			v.positive(f.Source, "bore", f.Bore.V, millimetres(f.Bore.V))
		}
		p := v.pipe[f.Pipe]
		switch {
		case p == nil:
			v.unknown(f.Source, "pipe", f.Pipe, "pipes.csv", v.pipeNames())
			continue
		case beyond(f.At, p):
			v.fatal(f.Source, "at", metres(f.At), fmt.Sprintf("lies outside pipe %s, which is %s long", p.Name, metres(p.Length)), "correct the distance, or the pipe's length")
			continue
		}
		switch {
		case math.IsNaN(f.At) || math.IsNaN(p.Length):
			continue // where it stands could not be read
		case f.Kind.ChangesBore():
			v.changeOfBore(f, p)
		case f.Bore.OK && p.Bore > 0 && f.Bore.V > 0 && math.Abs(math.Log(f.Bore.V/p.Bore)) > math.Log(3):
			v.notice(f.Source, "bore", millimetres(f.Bore.V), fmt.Sprintf("is far from the bore of its pipe, %s", millimetres(p.Bore)), "look at the number and its unit: the coefficient is on the velocity head in this bore")
		}
		v.atReservoirEnd(f, p)
	}
	v.reservoirEnds()
}

// changeOfBore looks at enlargements, contractions and nozzles. One without a stated
// coefficient is the catalogue's to judge: it needs the same bores for its formula.
func (v *validation) changeOfBore(f *Fitting, p *Pipe) {
	toEnd, fromEnd := f.At >= p.Length-atEnd, f.At <= atEnd
	if f.K.OK && !v.bores(f, p, fromEnd) {
		return
	}
	outlet := toEnd && v.point[p.To] != nil && v.point[p.To].Kind == Outlet
	switch {
	case f.Kind == Nozzle && !outlet:
		v.notice(f.Source, "at", metres(f.At), fmt.Sprintf("nozzle %s is not at the to end of a pipe that ends at an outlet, so it is reckoned as a contraction and makes no jet", f.Name),
			fmt.Sprintf("put it at %s of a pipe that leads to a point of kind outlet", metres(p.Length)))
	case !toEnd && !fromEnd:
		v.notice(f.Source, "at", metres(f.At), fmt.Sprintf("%s %s stands within pipe %s, which has one bore from end to end", f.Kind, f.Name, p.Name), "divide the pipe there, so that each part has its own bore")
	case toEnd && !outlet:
		v.boreBeyond(f, p, p.To)
	case fromEnd:
		v.boreBeyond(f, p, p.From)
	}
}

// bores compares the two bores of a change whose coefficient is stated. At the from
// end the other bore may be the upstream one, so either order is taken there.
func (v *validation) bores(f *Fitting, p *Pipe, fromEnd bool) bool {
	fault := func(text, reason, remedy string) bool {
		v.fatal(f.Source, "bore", text, reason, remedy)
		return false
	}
	widens := f.Bore.V > p.Bore
	switch {
	case !f.Bore.OK:
		return fault("", fmt.Sprintf("%s %s does not state the bore on its other side", f.Kind, f.Name), "write it: the coefficient is on the velocity head in the smaller of the two")
	case math.IsNaN(f.Bore.V) || math.IsNaN(p.Bore):
		return false
	case f.Bore.V == p.Bore:
		return fault(millimetres(f.Bore.V), fmt.Sprintf("%s %s has the bore of its own pipe on both sides", f.Kind, f.Name), "write the bore on its other side")
	case !fromEnd && widens != (f.Kind == Enlargement):
		return fault(millimetres(f.Bore.V), fmt.Sprintf("%s %s leads from %s to %s, which is the other way", f.Kind, f.Name, millimetres(p.Bore), millimetres(f.Bore.V)), "correct the kind or the bore; bore is the one downstream")
	}
	return true
}

// boreBeyond looks for a pipe of the other bore at the point where the change stands.
func (v *validation) boreBeyond(f *Fitting, p *Pipe, point string) {
	if !f.Bore.OK {
		return
	}
	meets := false
	for i := range v.Pipes {
		q := &v.Pipes[i]
		if q.Name == p.Name || q.From != point && q.To != point {
			continue
		}
		if math.Abs(q.Bore-f.Bore.V) <= 0.02*f.Bore.V {
			return
		}
		meets = true
	}
	if meets {
		v.notice(f.Source, "bore", millimetres(f.Bore.V), fmt.Sprintf("no other pipe at %s has this bore", point), "correct the bore here, or in pipes.csv")
	}
}

// atReservoirEnd tells of an entrance or an exit that is at no reservoir.
func (v *validation) atReservoirEnd(f *Fitting, p *Pipe) {
	if !entranceOrExit(f.Kind) {
		return
	}
	end := p.From
	if f.At > p.Length/2 {
		end = p.To
	}
	if at := v.point[end]; at != nil && at.Kind == Junction {
		v.notice(f.Source, "kind", string(f.Kind), fmt.Sprintf("stands at the end of pipe %s where point %s is no reservoir", p.Name, end), "correct the place, or the kind of the point")
	}
}

func entranceOrExit(k FittingKind) bool {
	return k == Exit || strings.HasPrefix(string(k), "entrance")
}

// reservoirEnds tells of pipe ends at a reservoir without an entrance or exit: their
// loss counts only where a fitting states it. One whose place could not be read may be
// at either end.
func (v *validation) reservoirEnds() {
	has := map[string][2]bool{}
	for i := range v.Fittings {
		f := &v.Fittings[i]
		if p := v.pipe[f.Pipe]; p != nil && entranceOrExit(f.Kind) {
			h := has[p.Name]
			h[0] = h[0] || !(f.At > p.Length/2)
			h[1] = h[1] || !(f.At <= p.Length/2)
			has[p.Name] = h
		}
	}
	for i := range v.Pipes {
		p := &v.Pipes[i]
		for side, name := range []string{p.From, p.To} {
			if at := v.point[name]; at != nil && at.Kind == Reservoir && !has[p.Name][side] {
				v.notice(p.Source, []string{"from", "to"}[side], name, fmt.Sprintf("pipe %s ends at reservoir %s without an entrance or exit fitting, so no loss is reckoned there", p.Name, name),
					"add the fitting to fittings.csv if there is a loss")
			}
		}
	}
}
