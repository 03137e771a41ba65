package friction

import "math"

// Value is a quantity at one cross-section with its derivatives by flow and by the
// pipe's parameter.
type Value struct{ V, DQ, DParam float64 }

// kappa of the logarithmic velocity law used throughout.
const kappa = 0.40

// section holds f and how it moves, and the share of the turbulent law: 0 up to Re
// 2,000, 1 from Re 4,000, a cubic ramp of ln Re between (C1).
type section struct {
	f, fQ, fP float64 // friction factor, d/dq, d/dparam
	s, sQ     float64 // share, d/dq
}

func (p Pipe) section(q, lnParam, viscosity, gravity float64) section {
	re := p.Reynolds(q, viscosity)
	if re <= ReLaminar {
		return section{}
	}
	var c section
	if p.Law == HazenWilliams {
		// f = 2 g D S / V^2.
		l := p.hazenWilliams(q, lnParam)
		k := 2 * gravity * p.Bore / p.Length * p.Area() * p.Area()
		a := math.Abs(q)
		c.f = k * math.Abs(l.H) / (a * a)
		c.fQ = c.f * (l.DQ/l.H - 2/q)
		c.fP = c.f * l.DParam / l.H
	} else {
		f := DarcyFactor(math.Max(re, ReLaminar), math.Exp(lnParam)/p.Bore)
		c.f, c.fQ, c.fP = f.F, f.F*f.DLnRe/q, f.F*f.DLnK
	}
	c.s = 1
	if re < ReTurbulent {
		span := math.Log(ReTurbulent / ReLaminar)
		t := math.Log(re/ReLaminar) / span
		c.s, c.sQ = t*t*(3-2*t), 6*t*(1-t)/span/q
	}
	return c
}

// blend joins a laminar constant to a turbulent law g(f) with slope g'(f).
func (c section) blend(laminar, g, slope float64) Value {
	return Value{V: laminar + c.s*(g-laminar), DQ: c.sQ*(g-laminar) + c.s*slope*c.fQ, DParam: c.s * slope * c.fP}
}

// Alpha is the kinetic-energy coefficient: 1 + 2.93 f - 1.55 f^1.5 in turbulent
// flow (the logarithmic law integrated over the section), 2 in laminar flow, joined
// between Re 2,000 and 4,000.
func (p Pipe) Alpha(q, lnParam, viscosity, gravity float64) Value {
	c := p.section(q, lnParam, viscosity, gravity)
	r := math.Sqrt(c.f)
	return c.blend(2, 1+2.93*c.f-1.55*c.f*r, 2.93-1.55*1.5*r)
}

// VelocityHead is alpha V^2/2g, m; even in q.
func (p Pipe) VelocityHead(q, lnParam, viscosity, gravity float64) Value {
	a := p.Alpha(q, lnParam, viscosity, gravity)
	return a.times(q, 1, p.Area(), gravity)
}

func (a Value) times(q, power, area, gravity float64) Value {
	k := 1 / (2 * gravity * area * area)
	v := math.Pow(a.V, power)
	d := power * math.Pow(a.V, power-1)
	return Value{V: v * k * q * q, DQ: k * (d*a.DQ*q*q + 2*v*q), DParam: k * d * a.DParam * q * q}
}

// ProfileRatio is u/V at distance depth from the near wall (NaN: the centreline):
// 1 + sqrt(f/8)/kappa (1.5 + ln(y/R)), y from the nearest wall, in turbulent flow;
// 2 (1 - (r/R)^2) in laminar flow. Within a thousandth of the radius of the wall
// the logarithm is held: no pitot opening is that small.
func (p Pipe) ProfileRatio(q, lnParam, viscosity, gravity, depth float64) Value {
	radius := p.Bore / 2
	y := 1.0
	if !math.IsNaN(depth) {
		y = math.Min(depth, p.Bore-depth) / radius
	}
	y = math.Min(1, math.Max(y, 1e-3))
	c := p.section(q, lnParam, viscosity, gravity)
	w := (1.5 + math.Log(y)) / kappa
	r := math.Sqrt(c.f / 8)
	slope := 0.0
	if c.f > 0 {
		slope = w * r / (2 * c.f)
	}
	v := c.blend(2*(1-(1-y)*(1-y)), 1+w*r, slope)
	if v.V < 0.05 {
		return Value{V: 0.05} // very rough wall, opening against it: the law has no meaning
	}
	return v
}

// LocalVelocityHead is u^2/2g at a pitot opening, m.
func (p Pipe) LocalVelocityHead(q, lnParam, viscosity, gravity, depth float64) Value {
	return p.ProfileRatio(q, lnParam, viscosity, gravity, depth).times(q, 2, p.Area(), gravity)
}
