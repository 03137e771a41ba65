package hydraulic

import (
	"fmt"
	"math"
	"strings"
)

// Parameters of the works, shared by all rounds.
type Parameters struct {
	LnRough    []float64 // per link: ln k, k in m, or ln C; unused for machines
	LnK        []float64 // per flat fitting: ln K
	HeadFactor []float64 // per link: what a machine's head is of its curve's; 1 sound
}

// NewParameters makes room for them, with every head factor 1.
func (s *System) NewParameters() Parameters {
	p := Parameters{make([]float64, len(s.links)), make([]float64, s.flat), make([]float64, len(s.links))}
	for i := range p.HeadFactor {
		p.HeadFactor[i] = 1
	}
	return p
}

// Conditions of a round. A nil list means none; any other length than that of what
// it is about panics.
type Conditions struct {
	Head               []float64 // per point: head of the fixed ones, m
	DrawOff            []float64 // per point: flow out at a junction, m3/s; negative: inflow
	Shut               []bool    // per link: pipe closed at its From end
	FittingShut        []bool    // per flat fitting: closed; it divides its pipe there
	Stopped            []bool    // per link: machine that passes nothing either way
	Speed              []float64 // per link: machine's speed, rad/s; 0: rated
	Viscosity, Gravity float64   // kinematic, m2/s; m/s2
}

// State is a solved round.
type State struct {
	// Head is the total head at each point, m: NaN where nothing feeds the point and
	// nothing is drawn. A part without feed that is joined to an outlet stands full up to
	// it. An outlet has the head of its widest pipe's end.
	Head []float64
	Flow []float64 // per link, m3/s
	// Closed marks links that pass nothing: shut, stopped, or one-way with the head
	// against them.
	Closed     []bool
	Iterations int // factorisations that were needed
	// HeadError and FlowError are the worst energy, m, and the worst balance, m3/s,
	// that the state leaves open.
	HeadError, FlowError float64
	Caveats              []string
}

// Unsolvable says in plain words why a round has no solution and which points and
// links it is about.
type Unsolvable struct {
	Cause         string
	Points, Links []string
}

func (u *Unsolvable) Error() string { return u.Cause }

// take copies what a solution depends on, so that later changes by the caller do not
// reach Read and Gradient, and refuses what is not a number.
func (v *Solver) take(p *Parameters, c *Conditions) error {
	s := v.sys
	n, m := len(s.points), len(s.links)
	mustMatch(len(p.LnRough) == m && len(p.HeadFactor) == m && len(p.LnK) == s.flat, "parameters")
	mustMatch(len(c.Head) == n || c.Head == nil, "heads")
	mustMatch(len(c.DrawOff) == n || c.DrawOff == nil, "draw-offs")
	mustMatch((len(c.Shut) == m || c.Shut == nil) && (len(c.Stopped) == m || c.Stopped == nil) && (len(c.Speed) == m || c.Speed == nil), "links")
	mustMatch(len(c.FittingShut) == s.flat || c.FittingShut == nil, "fittings")
	v.viscosity, v.gravity = c.Viscosity, c.Gravity
	if !(c.Viscosity > 0 && c.Gravity > 0) || !finite(c.Viscosity) || !finite(c.Gravity) {
		return &Unsolvable{Cause: fmt.Sprintf("viscosity %g m2/s and gravity %g m/s2 must both be positive", c.Viscosity, c.Gravity)}
	}
	for i, pt := range s.points {
		v.draw[i] = 0
		switch pt.Kind {
		case Fixed:
			if c.Head == nil || !finite(c.Head[i]) {
				return &Unsolvable{Cause: fmt.Sprintf("reservoir %s: its level is not known", pt.Name), Points: []string{pt.Name}}
			}
			v.head[i] = c.Head[i]
		case Outlet:
			v.head[i] = pt.Elevation
		case Junction:
			if c.DrawOff != nil {
				v.draw[i] = c.DrawOff[i]
			}
			if !finite(v.draw[i]) {
				return &Unsolvable{Cause: fmt.Sprintf("point %s: its draw-off is not a number", pt.Name), Points: []string{pt.Name}}
			}
		}
	}
	for i := range s.links {
		if err := v.takeLink(i, p, c); err != nil {
			return err
		}
	}
	return nil
}

func (v *Solver) takeLink(i int, p *Parameters, c *Conditions) error {
	s := v.sys
	l := &s.links[i]
	if l.Machine != nil {
		v.shut[i] = c.Stopped != nil && c.Stopped[i]
		v.factor[i], v.ratio[i] = p.HeadFactor[i], 1
		if !(v.factor[i] > 0) || !finite(v.factor[i]) {
			return &Unsolvable{Cause: fmt.Sprintf("%s: its head factor %g is not a positive number", s.title(i), v.factor[i]), Links: []string{l.Name}}
		}
		if c.Speed != nil && c.Speed[i] != 0 && l.Machine.RatedSpeed > 0 {
			v.ratio[i] = c.Speed[i] / l.Machine.RatedSpeed
		}
		if !(v.ratio[i] > 0) || !finite(v.ratio[i]) {
			return &Unsolvable{Cause: fmt.Sprintf("%s: its speed is not a positive number; say that it is stopped if it is", s.title(i)), Links: []string{l.Name}}
		}
		return nil
	}
	v.shut[i] = (c.Shut != nil && c.Shut[i]) || s.ways[i] == neither
	v.lnRough[i] = p.LnRough[i]
	// A smooth wall is ln 0, minus infinity.
	if math.IsNaN(v.lnRough[i]) || math.IsInf(v.lnRough[i], 1) {
		return &Unsolvable{Cause: fmt.Sprintf("pipe %s: its roughness is not a number", l.Name), Links: []string{l.Name}}
	}
	v.forth[i], v.back[i] = 0, 0
	for k, f := range l.Pipe.Fittings {
		flat := s.first[i] + k
		v.fittingShut[flat] = c.FittingShut != nil && c.FittingShut[flat]
		v.shut[i] = v.shut[i] || v.fittingShut[flat]
		kForth := math.Exp(p.LnK[flat])
		if !finite(kForth) {
			return &Unsolvable{Cause: fmt.Sprintf("fitting %s on pipe %s: its loss coefficient is not a number", f.Name, l.Name), Links: []string{l.Name}}
		}
		v.unit[flat] = perSquare(kForth, f.Bore, v.gravity)
		v.forth[i] += v.unit[flat]
		if math.IsNaN(f.ReverseK) {
			v.back[i] += v.unit[flat]
		} else {
			v.back[i] += perSquare(f.ReverseK, f.Bore, v.gravity)
		}
	}
	v.jet[i] = 0
	if k := s.nozzle(i); k >= 0 {
		v.jet[i] = perSquare(1, l.Pipe.Fittings[k].JetBore, v.gravity)
	}
	v.pipeShut[i] = c.Shut != nil && c.Shut[i]
	return nil
}

func mustMatch(ok bool, what string) {
	if !ok {
		panic("hydraulic: number of " + what + " does not match the system")
	}
}

// title is how a message calls a link.
func (s *System) title(i int) string {
	l := &s.links[i]
	switch {
	case l.Machine == nil:
		return "pipe " + l.Name
	case l.Machine.Turbine:
		return "turbine " + l.Name
	}
	return "pump " + l.Name
}

// some lists names, the first few where there are many.
func some(names []string) string {
	const few = 6
	if len(names) > few+1 {
		return fmt.Sprintf("%s and %d more", strings.Join(names[:few], ", "), len(names)-few)
	}
	return strings.Join(names, ", ")
}
