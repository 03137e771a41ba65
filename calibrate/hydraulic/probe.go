package hydraulic

import (
	"errors"
	"math"

	"tapround/calibrate/friction"
)

// View is what a probe reads.
type View int

const (
	Piezometric       View = iota // total head less alpha V^2/2g
	Total                         // total head of the section
	VelocityHead                  // alpha V^2/2g
	LocalVelocityHead             // u^2/2g at Depth
	LocalTotal                    // piezometric head and local velocity head
	Flow                          // m3/s, positive From to To
)

// Probe is a place where something is read: at a point (Link then says which pipe
// it reads on, -1 none), or on a link at a chainage. Depth is the distance of a
// pitot opening from the near wall; NaN: the centreline.
type Probe struct {
	Point int // >= 0: at a point
	Link  int
	At    float64
	View  View
	Depth float64
}

// Gradient is the derivative of a reading by everything: ln k or ln C and head
// factor by link, ln K by flat fitting, draw-off and fixed head by point.
type Gradient struct{ LnRough, LnK, HeadFactor, DrawOff, FixedHead []float64 }

// NewGradient makes room for one.
func (s *System) NewGradient() *Gradient {
	n, m := len(s.points), len(s.links)
	return &Gradient{make([]float64, m), make([]float64, s.flat), make([]float64, m), make([]float64, n), make([]float64, n)}
}

// Zero clears it; AddScaled adds f times another.
func (g *Gradient) Zero() {
	for _, s := range g.all() {
		clear(s)
	}
}

// AddScaled adds f times o.
func (g *Gradient) AddScaled(f float64, o *Gradient) {
	from := o.all()
	for i, s := range g.all() {
		for j, x := range from[i] {
			s[j] += f * x
		}
	}
}

func (g *Gradient) all() [5][]float64 {
	return [5][]float64{g.LnRough, g.LnK, g.HeadFactor, g.DrawOff, g.FixedHead}
}

// local is a reading as a function of the head at one point and the flow and
// parameters of one link.
type local struct {
	v          float64
	point      int // whose total head it moves with one to one; -1 none
	link       int // -1 none
	dq, dParam float64
	minor      float64 // sign of the fittings in it: -1 for heads down the pipe
	upTo       float64
}

// Read gives what a probe reads at the last solved state; NaN where nothing feeds it.
func (v *Solver) Read(p Probe) float64 { return v.local(p).v }

func (v *Solver) local(p Probe) local {
	s := v.sys
	out := local{point: -1, link: p.Link, v: nan}
	q := 0.0
	if p.Link >= 0 {
		q = v.st.Flow[p.Link]
	}
	if p.View == Flow {
		if p.Link < 0 {
			return out
		}
		out.v, out.dq = q, 1
		if !v.live[s.links[p.Link].From] && !v.live[s.links[p.Link].To] {
			out.v = nan
		}
		return out
	}
	var vel friction.Value
	pipe := p.Link >= 0 && s.links[p.Link].Pipe != nil
	free := p.Point >= 0 && s.points[p.Point].Kind != Junction
	if pipe {
		fp := s.links[p.Link].Pipe.Pipe
		lr := v.p.LnRough[p.Link]
		switch p.View {
		case LocalVelocityHead, LocalTotal:
			local := fp.LocalVelocityHead(q, lr, v.c.Viscosity, v.c.Gravity, p.Depth)
			mean := fp.VelocityHead(q, lr, v.c.Viscosity, v.c.Gravity)
			vel = local
			if p.View == LocalTotal {
				vel = friction.Value{V: local.V - mean.V, DQ: local.DQ - mean.DQ, DParam: local.DParam - mean.DParam}
			}
		default:
			vel = fp.VelocityHead(q, lr, v.c.Viscosity, v.c.Gravity)
		}
	}
	switch p.View {
	case VelocityHead, LocalVelocityHead:
		if free && p.View == VelocityHead {
			out.v = 0
			return out
		}
		out.v, out.dq, out.dParam = vel.V, vel.DQ, vel.DParam
		return out
	}
	// Heads.
	if free && p.View != Total {
		// In still water, or in the free jet, the piezometric head is the surface.
		out.link = -1
		if s.points[p.Point].Kind == Outlet {
			out.v = s.points[p.Point].Elevation
			return out
		}
		out.v, out.point = v.c.Head[p.Point], p.Point
		return out
	}
	h := v.totalAt(p)
	out.v, out.point, out.dq, out.dParam, out.minor, out.upTo = h.v, h.point, h.dq, h.dParam, h.minor, h.upTo
	sign := 0.0
	switch p.View {
	case Piezometric:
		sign = -1
	case LocalTotal:
		sign = 1
	}
	out.v += sign * vel.V
	out.dq += sign * vel.DQ
	out.dParam += sign * vel.DParam
	return out
}

// totalAt is the total head at a probe's place.
func (v *Solver) totalAt(p Probe) local {
	s := v.sys
	if p.Point >= 0 {
		return local{v: v.st.Head[p.Point], point: p.Point, link: p.Link}
	}
	l := s.links[p.Link]
	q := v.st.Flow[p.Link]
	if !v.open(p.Link) || l.Pipe == nil {
		end := l.From
		if v.beyondClosure(p.Link, p.At) {
			end = l.To
		}
		return local{v: v.pointHead(end), point: end, link: p.Link}
	}
	out := local{point: l.From, link: p.Link, minor: -1, upTo: p.At}
	loss := l.Pipe.Loss(q, v.p.LnRough[p.Link], v.c.Viscosity, v.c.Gravity)
	part := math.Min(1, math.Max(0, p.At/l.Pipe.Length))
	out.v = v.pointHead(l.From) - part*loss.H
	out.dq, out.dParam = -part*loss.DQ, -part*loss.DParam
	if s.points[l.From].Kind == Outlet {
		// The velocity head of an outlet end is in the point's head, and moves with q.
		_, dq, dp := v.outletHead(p.Link, q)
		out.dq, out.dParam = out.dq-dq, out.dParam-dp
	}
	for k, f := range l.Pipe.Fittings {
		if f.At < p.At {
			h, dq := friction.Minor(q, v.kOf(p.Link, k, q), f.Bore, v.c.Gravity)
			out.v, out.dq = out.v-h, out.dq-dq
		}
	}
	return out
}

// pointHead is the total head at a point as its own pipes' ends have it.
func (v *Solver) pointHead(p int) float64 { return v.st.Head[p] }

// beyondClosure reports whether a chainage lies on the To side of what closes a pipe:
// a shut pipe is closed at its From end, a shut fitting or a check valve where it stands.
func (v *Solver) beyondClosure(i int, at float64) bool {
	l := v.sys.links[i]
	if l.Pipe == nil {
		return at > 0
	}
	if v.c.Shut[i] {
		return true
	}
	for k, f := range l.Pipe.Fittings {
		if v.c.FittingShut[v.sys.first[i]+k] || (v.blocked[i] && f.OneWay) {
			return f.At < at
		}
	}
	// An outlet that would draw air: the pipe stands full up to it.
	return v.sys.points[l.From].Kind == Outlet
}

// Gradient fills g with the exact derivatives of what a probe reads. With the reading
// y(H, Q, theta), the balances and energies solved, and lambda from
//
//	(A D^-1 A') mu = dy/dH + A D^-1 dy/dQ
//
// the derivative by any quantity that adds e_i to link i's energy is
// -(nu_i) e_i, nu_i = D_i^-1 (mu_from - mu_to ... ) + direct part. One solve with the
// factor of the solution.
func (v *Solver) Gradient(p Probe, g *Gradient) error {
	s := v.sys
	g.Zero()
	r := v.local(p)
	if math.IsNaN(r.v) {
		return errors.New("nothing feeds the place that is read")
	}
	// dy = a.dH + b dQ_link + direct. Links: dQ_i = (dH_from - dH_to - de_i)/D_i with
	// de_i the change of the loss at constant flow.
	clear(v.rhs)
	open := r.link >= 0 && v.flows(r.link)
	b := 0.0
	if open {
		b = r.dq
	}
	if r.point >= 0 {
		if row := s.row[r.point]; row >= 0 {
			v.rhs[row]++
		}
	}
	if b != 0 {
		l := s.links[r.link]
		d := v.atSlope[r.link]
		if row := s.row[l.From]; row >= 0 {
			v.rhs[row] += b / d
		}
		if row := s.row[l.To]; row >= 0 {
			v.rhs[row] -= b / d
		}
	}
	if s.rows > 0 {
		v.factor.Solve(v.rhs, v.dh)
	}
	mu := func(p int) float64 {
		if row := s.row[p]; row >= 0 && v.live[p] {
			return v.dh[row]
		}
		return 0
	}
	for i := range s.points {
		if s.row[i] >= 0 && v.live[i] {
			g.DrawOff[i] = -mu(i)
		}
	}
	if r.point >= 0 && s.points[r.point].Kind == Fixed {
		g.FixedHead[r.point]++
	}
	for i, l := range s.links {
		if !v.flows(i) {
			continue
		}
		d := v.atSlope[i]
		// Sensitivity of y to a unit of extra loss in this link.
		w := (mu(l.From) - mu(l.To)) / d
		if i == r.link {
			w -= b / d
		}
		// Junction balances: extra loss e lowers Q by e/d, so the head pattern moves by
		// mu; that is w above, with the sign of a loss.
		v.spread(i, w, g)
		// A fixed head at an end acts as the opposite of a loss (From) or as one (To).
		if s.points[l.From].Kind == Fixed {
			g.FixedHead[l.From] -= w
		}
		if s.points[l.To].Kind == Fixed {
			g.FixedHead[l.To] += w
		}
	}
	// Direct parts: what the reading itself takes from the parameters of its link.
	if r.link >= 0 && s.links[r.link].Pipe != nil {
		g.LnRough[r.link] += r.dParam
		if r.minor != 0 {
			q := v.st.Flow[r.link]
			for k, f := range s.links[r.link].Pipe.Fittings {
				if f.At < r.upTo && !(q < 0 && !math.IsNaN(f.ReverseK)) {
					h, _ := friction.Minor(q, v.kOf(r.link, k, q), f.Bore, v.c.Gravity)
					g.LnK[s.first[r.link]+k] += r.minor * h
				}
			}
		}
	}
	return nil
}

// spread adds w times the derivative of link i's loss by its parameters.
func (v *Solver) spread(i int, w float64, g *Gradient) {
	if w == 0 {
		return
	}
	l := v.sys.links[i]
	if l.Machine != nil {
		g.HeadFactor[i] += w * v.atParam[i]
		return
	}
	g.LnRough[i] += w * v.atParam[i]
	first := v.sys.first[i]
	for k := range l.Pipe.Fittings {
		g.LnK[first+k] += w * v.atMinor[first+k]
	}
}
