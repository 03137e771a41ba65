package hydraulic

import (
	"tapround/calibrate/friction"
	"tapround/calibrate/sparse"
)

// PointKind says what a point is.
type PointKind int

const (
	Junction PointKind = iota // links meet; water may be drawn off
	Fixed                     // reservoir: its head is given
	Outlet                    // free discharge at its elevation
)

// Point is a place where links meet or end. Elevation (m) is used at outlets only.
type Point struct {
	Name      string
	Kind      PointKind
	Elevation float64
}

// Link joins two points: a pipe or a machine, exactly one of them set. Its flow
// counts positive from From to To.
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

// Fitting is a local loss K V|V|/2g on a pipe. It lies between the From end and
// chainage x when At < x.
type Fitting struct {
	Name string
	At   float64 // m from the From end
	Bore float64 // m; K is on the velocity head in it
	// OneWay marks a check valve: nothing flows from To to From.
	OneWay bool
	// ReverseK is K, on the same bore, for flow from To to From; it is a constant then,
	// not a parameter. NaN: the same parameter as forwards.
	ReverseK float64
	// JetBore is the bore of the jet, m, of a nozzle that ends a pipe at an outlet; 0:
	// no nozzle.
	JetBore float64
}

// Machine is a pump or a turbine with its works curve at the rated speed. A running
// machine passes nothing backwards.
type Machine struct {
	Turbine    bool
	Curve      friction.Curve // head gained by a pump, taken by a turbine, m
	RatedSpeed float64        // rad/s; 0: not known
}

// System is a topology with its symbolic analysis: read-only once made, shared by
// rounds and goroutines.
type System struct {
	points []Point
	links  []Link
	first  []int   // flat index of each link's first fitting
	flat   int     // number of fittings
	at     [][]int // links at each point
	row    []int   // matrix row of each junction, -1 elsewhere
	rows   int
	plan   *sparse.Plan
	entry  []int // matrix entry between the ends of each link, -1 where an end has no row
	values int   // number of matrix entries; entry r is the diagonal of row r
	ways   []way
	size   []float64 // a flow of each link's size, m3/s
	bends  []bool    // machine whose loss falls with flow somewhere on its curve
	spouts []int     // pipe that tells the total head of each outlet, -1 elsewhere
	oneWay bool      // some link is not free
}

// way is the direction in which a link may flow.
type way int8

const (
	free way = iota
	forwardOnly
	backwardOnly
	neither
)

// against reports whether q runs in a direction that is barred.
func (w way) against(q float64) bool {
	switch w {
	case forwardOnly:
		return q < 0
	case backwardOnly:
		return q > 0
	case neither:
		return q != 0
	}
	return false
}

// NewSystem analyses a topology. The error names the link, fitting or point that
// makes no sense and why; all of them at once.
func NewSystem(points []Point, links []Link) (*System, error) {
	if err := validate(points, links); err != nil {
		return nil, err
	}
	n, m := len(points), len(links)
	s := &System{points: points, links: links, first: make([]int, m), at: make([][]int, n), row: make([]int, n),
		entry: make([]int, m), ways: make([]way, m), size: make([]float64, m), bends: make([]bool, m), spouts: make([]int, n)}
	var r, c []int
	for i, p := range points {
		s.row[i], s.spouts[i] = -1, -1
		if p.Kind == Junction {
			s.row[i] = s.rows
			r, c = append(r, s.rows), append(c, s.rows)
			s.rows++
		}
	}
	for i, l := range links {
		s.first[i] = s.flat
		if l.Pipe != nil {
			s.flat += len(l.Pipe.Fittings)
		}
		s.at[l.From], s.at[l.To] = append(s.at[l.From], i), append(s.at[l.To], i)
		s.entry[i] = -1
		if a, b := s.row[l.From], s.row[l.To]; a >= 0 && b >= 0 {
			s.entry[i] = len(r)
			r, c = append(r, a), append(c, b)
		}
		s.ways[i] = wayOf(l, points)
		s.oneWay = s.oneWay || s.ways[i] != free
		s.size[i], s.bends[i] = sizeOf(l)
		s.noteSpout(l.From, i)
		s.noteSpout(l.To, i)
	}
	s.values = len(r)
	plan, err := sparse.NewPlan(s.rows, r, c)
	if err != nil {
		return nil, err
	}
	s.plan = plan
	return s, nil
}

// noteSpout keeps the widest pipe at an outlet, the first listed on a tie.
func (s *System) noteSpout(p, link int) {
	l := s.links[link]
	if s.points[p].Kind != Outlet || l.Pipe == nil {
		return
	}
	if o := s.spouts[p]; o < 0 || s.links[o].Pipe.Bore < l.Pipe.Bore {
		s.spouts[p] = link
	}
}

// wayOf is the direction that check valves, machines and outlets leave to a link.
func wayOf(l Link, points []Point) way {
	forward := l.oneWay() || points[l.To].Kind == Outlet
	switch backward := points[l.From].Kind == Outlet; {
	case forward && backward:
		return neither
	case forward:
		return forwardOnly
	case backward:
		return backwardOnly
	}
	return free
}

// oneWay reports a machine or a pipe with a check valve.
func (l *Link) oneWay() bool {
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

// Link is one link by its index.
func (s *System) Link(i int) Link { return s.links[i] }

// NumLinks counts the links.
func (s *System) NumLinks() int { return len(s.links) }

// NumFittings counts the fittings of all pipes.
func (s *System) NumFittings() int { return s.flat }

// FittingIndex is the flat index of a link's fitting i: fittings count in the order
// of their links, and along each link.
func (s *System) FittingIndex(link, i int) int { return s.first[link] + i }

// nozzle is the fitting that ends link i as a jet into an outlet, or -1.
func (s *System) nozzle(i int) int {
	l := s.links[i]
	if l.Pipe == nil || s.points[l.To].Kind != Outlet {
		return -1
	}
	k := len(l.Pipe.Fittings) - 1
	if k < 0 || l.Pipe.Fittings[k].JetBore == 0 {
		return -1
	}
	return k
}
