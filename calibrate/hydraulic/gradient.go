package hydraulic

import (
	"errors"
	"math"
)

// Gradient is the derivative of a reading by everything it depends on: by link ln k or
// ln C and head factor, by flat fitting ln K, by point draw-off (m per m3/s for a head)
// and fixed head. DrawOff is filled at every junction that is fed: any may have a
// flow that nobody recorded.
type Gradient struct{ LnRough, LnK, HeadFactor, DrawOff, FixedHead []float64 }

// NewGradient makes room for one.
func (s *System) NewGradient() *Gradient {
	n, m := len(s.points), len(s.links)
	return &Gradient{make([]float64, m), make([]float64, s.flat), make([]float64, m), make([]float64, n), make([]float64, n)}
}

// Zero clears it.
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

// Gradient overwrites g with the exact derivatives of what a probe reads at the last
// solved state.
//
// With the linearised balances D dQ - A' dH = -dloss and A dQ = -d(draw-off), which
// are symmetric, and x, y the solution of the same system for the reading's own
// dependence,
//
//	D x - A' y = d reading/dQ,   A x = -d reading/dH,
//
// the reading changes by -x . dloss + y . d(draw-off) + its direct part [G].
//
// It returns an error where the reading is not a number, or where it does not depend
// smoothly on anything because a machine sits at the very end of its duty.
func (v *Solver) Gradient(p Probe, g *Gradient) error {
	r := v.reading(p)
	if math.IsNaN(r.value) {
		return errors.New("nothing feeds the place that is read, so there is no head and no sensitivity")
	}
	g.Zero()
	if !v.tabulated {
		if err := v.tabulate(); err != nil {
			return err
		}
	}
	v.direct(r, g)
	clear(v.s)
	clear(v.b)
	if r.link >= 0 {
		v.s[r.link] = r.dq
	}
	if r.point >= 0 {
		switch v.sys.points[r.point].Kind {
		case Junction:
			v.b[v.sys.row[r.point]] = -1
		case Fixed:
			g.FixedHead[r.point]++
		}
	} else if r.dq == 0 {
		return nil
	}
	if !v.solve(false) {
		return errors.New("the flow does not depend smoothly on anything: a machine runs at the fold of its duty")
	}
	for i := range v.sys.points {
		if row := v.sys.row[i]; row >= 0 && v.live[i] {
			g.DrawOff[i] = v.y[row]
		}
	}
	for i := range v.sys.links {
		if v.in[i] {
			v.pass(i, v.x[i], g)
		}
	}
	return nil
}

// direct adds what the reading takes from its own link's parameters.
func (v *Solver) direct(r reading, g *Gradient) {
	if r.link < 0 || v.sys.links[r.link].Pipe == nil {
		return
	}
	g.LnRough[r.link] += r.dParam
	for k := r.first; k < r.last; k++ {
		flat := v.sys.first[r.link] + k
		g.LnK[flat] += r.sign * v.byMinor[flat]
	}
}

// pass hands what flow x of the adjoint means for link i to its parameters and to the
// fixed heads at its ends.
func (v *Solver) pass(i int, x float64, g *Gradient) {
	l := &v.sys.links[i]
	if l.Machine != nil {
		g.HeadFactor[i] -= x * v.byParam[i]
	} else {
		g.LnRough[i] -= x * v.byParam[i]
		first := v.sys.first[i]
		for flat := first; flat < first+len(l.Pipe.Fittings); flat++ {
			g.LnK[flat] -= x * v.byMinor[flat]
		}
	}
	if v.sys.points[l.From].Kind == Fixed {
		g.FixedHead[l.From] += x
	}
	if v.sys.points[l.To].Kind == Fixed {
		g.FixedHead[l.To] -= x
	}
}

// tabulate factorises at the state and fills the derivatives of the losses by their
// own parameters, which all readings share.
func (v *Solver) tabulate() error {
	v.evaluate(v.flow, v.loss, v.slope)
	if err := v.factorise(); err != nil {
		return err
	}
	clear(v.byParam)
	clear(v.byMinor)
	for i := range v.sys.links {
		if !v.in[i] {
			continue
		}
		l, q := &v.sys.links[i], v.flow[i]
		if l.Machine != nil {
			h, _ := v.bare(i, q)
			v.byParam[i] = h / v.factor[i]
			continue
		}
		v.byParam[i] = l.Pipe.Loss(q, v.lnRough[i], v.viscosity, v.gravity).DParam
		if e, sign := v.spout(i, q); sign != 0 {
			v.byParam[i] += sign * e.DParam
		}
		for k, f := range l.Pipe.Fittings {
			if q >= 0 || math.IsNaN(f.ReverseK) {
				v.byMinor[v.sys.first[i]+k], _ = v.fittingLoss(i, k, q)
			}
		}
	}
	v.tabulated = true
	return nil
}
