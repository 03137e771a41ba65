package hydraulic

import "tapround/calibrate/friction"

// perSquare is the loss of a fitting at 1 m3/s.
func perSquare(k, bore, gravity float64) float64 {
	h, _ := friction.Minor(1, k, bore, gravity)
	return h
}

// law is the head H_from - H_to that link i needs to pass flow q, an outlet's velocity
// head included, with its derivative by q.
//
// While the barrier is up, a link that runs against its way follows a stiff straight
// line instead: what it passes backwards is small and tells how hard it is pressed shut.
func (v *Solver) law(i int, q float64) (h, dq float64) {
	if v.barrier && v.sys.ways[i].against(q) {
		h, _ = v.bare(i, 0)
		stiff := v.stiffness / v.sys.size[i]
		return h + stiff*q, stiff
	}
	return v.bare(i, q)
}

// barrierHeads are the stiffnesses to try in turn: the first lets any head of real works
// press back less than a hundredth of a link's flow; the others serve coefficients out of
// all measure.
var barrierHeads = [...]float64{1e4, 1e8, 1e12}

// bare is law without the barrier.
func (v *Solver) bare(i int, q float64) (h, dq float64) {
	l := &v.sys.links[i]
	if l.Machine != nil {
		gain, slope, _ := l.Machine.Curve.At(q, v.ratio[i])
		f := v.factor[i]
		if !l.Machine.Turbine {
			f = -f
		}
		return f * gain, f * slope
	}
	loss := l.Pipe.Loss(q, v.lnRough[i], v.viscosity, v.gravity)
	h, dq = loss.H, loss.DQ
	if q >= 0 {
		h += v.forth[i] * q * q
		dq += 2 * v.forth[i] * q
	} else {
		h -= v.back[i] * q * q
		dq -= 2 * v.back[i] * q
	}
	if e, sign := v.spout(i, q); sign != 0 {
		h += sign * e.V
		dq += sign * e.DQ
	}
	return h, dq
}

// spout is the velocity head with which link i leaves the system at a free outlet, and
// the sign with which it counts as a loss; sign 0: it does not.
func (v *Solver) spout(i int, q float64) (e friction.Value, sign float64) {
	l := &v.sys.links[i]
	switch {
	case l.Pipe == nil:
		// A machine that discharges freely: its velocity is part of its curve.
		return e, 0
	case q > 0 && v.sys.points[l.To].Kind == Outlet:
		return v.endVelocityHead(i, q), 1
	case q < 0 && v.sys.points[l.From].Kind == Outlet:
		return l.Pipe.VelocityHead(q, v.lnRough[i], v.viscosity, v.gravity), -1
	}
	return e, 0
}

// endVelocityHead is that of the jet where a nozzle ends the pipe (alpha 1), else that
// of the pipe.
func (v *Solver) endVelocityHead(i int, q float64) friction.Value {
	if j := v.jet[i]; j > 0 {
		return friction.Value{V: j * q * q, DQ: 2 * j * q}
	}
	return v.sys.links[i].Pipe.VelocityHead(q, v.lnRough[i], v.viscosity, v.gravity)
}
