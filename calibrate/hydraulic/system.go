// Package hydraulic is the steady model of a pipe system: heads and flows of every
// round from the works' parameters and the round's conditions, and the exact
// sensitivities of whatever a tap reads.
//
// # Equations
//
// On total head H (m above datum) and flow Q (m3/s, positive From to To),
//
//	H_from - H_to = sum of friction + sum of K V|V|/2g        along a pipe
//	H_to - H_from = gain(Q, speed)                            across a pump (a turbine takes head)
//	sum of Q in - sum of Q out = draw-off                     at a junction
//
// A tap sees h = H - alpha V^2/2g with V of its pipe. Total head is common to all
// pipe ends at a junction. At a free outlet the piezometric head is the elevation, so
// the total head at the pipe's end is that plus alpha V^2/2g of the pipe, or V^2/2g
// of the jet where a nozzle ends it; nothing flows in from an outlet.
//
// # Method
//
// Newton's method on heads and flows together, with the Schur complement on heads
// [TP]: one sparse symmetric factorisation an iteration. Losses rise with flow, so
// the solution is the minimum of a convex content function [CM] and a shortened step
// always helps. One-way links (check valves, machines, outlets) are opened and closed
// around it. Sensitivities are adjoint: one solve with the same factor for each reading.
//
// # References
//
//	[TP] E. Todini, S. Pilati, in Computer Applications in Water Supply 1 (1988) 1
//	[CM] M. A. Collins et al., J. Hydraul. Div. ASCE 104 (1978): content and co-content
package hydraulic

import (
	"fmt"
	"math"

	"tapround/calibrate/friction"
	"tapround/calibrate/sparse"
)

// PointKind says what a point is.
type PointKind int

const (
	Junction PointKind = iota
	Fixed              // reservoir: its head is given
	Outlet             // free discharge at its elevation
)

// Point is a place where links meet or end.
type Point struct {
	Name      string
	Kind      PointKind
	Elevation float64
}

// Link is a pipe or a machine between two points; exactly one of them is set.
type Link struct {
	Name     string
	From, To int
	Pipe     *Pipe
	Machine  *Machine
}

// Pipe is a pipe with its fittings in order of At.
type Pipe struct {
	friction.Pipe
	Fittings []Fitting
}

// Fitting lies between the From end and chainage x when At < x.
type Fitting struct {
	Name     string
	At       float64
	Bore     float64 // whose velocity head K is on
	OneWay   bool    // check valve
	ReverseK float64 // K on Bore for flow To -> From; NaN: the same parameter as forward
	JetBore  float64 // nozzle at an outlet end: bore of the jet; 0: none
}

// Machine is a pump or a turbine with its works curve at the rated speed (rad/s).
type Machine struct {
	Turbine    bool
	Curve      friction.Curve
	RatedSpeed float64
}

// System is the topology, read-only once made and shared by rounds and goroutines.
type System struct {
	points []Point
	links  []Link
	first  []int // flat index of a link's first fitting
	flat   int
	row    []int // junction's row, -1 for fixed points and outlets
	rows   int
	plan   *sparse.Plan
	// Where a link's conductance goes: entries of its ends' diagonal and between.
	diagFrom, diagTo, between []int
	entries                   int
	diag                      []int // entry of each row's own diagonal
	at                        [][]int
}

// NewSystem makes a system. An error names the link or point that makes no sense.
func NewSystem(points []Point, links []Link) (*System, error) {
	s := &System{points: points, links: links, first: make([]int, len(links)), row: make([]int, len(points)),
		diagFrom: make([]int, len(links)), diagTo: make([]int, len(links)), between: make([]int, len(links)), at: make([][]int, len(points))}
	for i, p := range points {
		s.row[i] = -1
		if p.Kind == Junction {
			s.row[i] = s.rows
			s.rows++
		}
	}
	var r, c []int
	for i := 0; i < s.rows; i++ {
		s.diag = append(s.diag, i)
		r, c = append(r, i), append(c, i)
	}
	for i, l := range links {
		if (l.Pipe == nil) == (l.Machine == nil) {
			return nil, fmt.Errorf("link %s must be a pipe or a machine", l.Name)
		}
		if l.From < 0 || l.To < 0 || l.From >= len(points) || l.To >= len(points) || l.From == l.To {
			return nil, fmt.Errorf("link %s does not join two points", l.Name)
		}
		s.first[i] = s.flat
		if l.Pipe != nil {
			s.flat += len(l.Pipe.Fittings)
		}
		s.at[l.From], s.at[l.To] = append(s.at[l.From], i), append(s.at[l.To], i)
		a, b := s.row[l.From], s.row[l.To]
		s.between[i] = -1
		if a >= 0 && b >= 0 {
			s.between[i] = len(r)
			r, c = append(r, a), append(c, b)
		}
	}
	s.entries = len(r)
	plan, err := sparse.NewPlan(s.rows, r, c)
	if err != nil {
		return nil, err
	}
	s.plan = plan
	return s, nil
}

// Link is one link by its index.
func (s *System) Link(i int) Link { return s.links[i] }

// NumLinks, NumPoints and NumFittings count.
func (s *System) NumLinks() int { return len(s.links) }

// NumFittings counts the fittings of all pipes.
func (s *System) NumFittings() int { return s.flat }

// FittingIndex is the flat index of fitting i of a link.
func (s *System) FittingIndex(link, i int) int { return s.first[link] + i }

// Parameters of the works, shared by all rounds: ln k (m) or ln C of each link, ln K
// of each fitting by flat index, head factor of each link (1 sound).
type Parameters struct{ LnRough, LnK, HeadFactor []float64 }

// NewParameters makes room for them.
func (s *System) NewParameters() Parameters {
	p := Parameters{make([]float64, len(s.links)), make([]float64, s.flat), make([]float64, len(s.links))}
	for i := range p.HeadFactor {
		p.HeadFactor[i] = 1
	}
	return p
}

// Conditions of a round.
type Conditions struct {
	Head               []float64 // per point, used at fixed ones
	DrawOff            []float64 // per point, out positive
	Shut               []bool    // per link: pipe closed at its From end
	FittingShut        []bool    // per flat fitting
	Stopped            []bool    // per link: machine that passes nothing
	Speed              []float64 // per link, rad/s; 0: rated
	Viscosity, Gravity float64
}

// State is a solved round.
type State struct {
	Head                 []float64 // total head per point; NaN where nothing feeds it and nothing is drawn
	Flow                 []float64 // per link
	Closed               []bool    // per link: no water passes
	Iterations           int
	HeadError, FlowError float64 // worst energy, m, and worst balance, m3/s
	Caveats              []string
}

// Unsolvable says in plain words why a round has no solution, with the names of the
// points and links it is about.
type Unsolvable struct {
	Cause         string
	Points, Links []string
}

func (u *Unsolvable) Error() string { return u.Cause }

// oneWay reports whether a link passes water from From to To only: machines and pipes
// with a check valve.
func (l Link) oneWay() bool {
	if l.Machine != nil {
		return true
	}
	for _, f := range l.Pipe.Fittings {
		if f.OneWay {
			return true
		}
	}
	return false
}

var nan = math.NaN()
