package friction

import "math"

// Pipe is what friction needs of a pipe: law, length and bore, m.
type Pipe struct {
	Law          Law
	Length, Bore float64
}

// Loss is a loss of head, m, with its derivatives by flow and by the law's
// parameter (ln k or ln C).
type Loss struct{ H, DQ, DParam float64 }

// Area of the bore, m2.
func (p Pipe) Area() float64 { return math.Pi / 4 * p.Bore * p.Bore }

// Reynolds number at flow q.
func (p Pipe) Reynolds(q, viscosity float64) float64 {
	return math.Abs(q) / p.Area() * p.Bore / viscosity
}

// Loss is the friction loss over the pipe's length at flow q (either sign);
// viscosity is kinematic, m2/s. At zero flow the slope is the laminar one, never 0.
func (p Pipe) Loss(q, lnParam, viscosity, gravity float64) Loss {
	if p.Law == HazenWilliams {
		return p.hazenWilliams(q, lnParam)
	}
	re := p.Reynolds(q, viscosity)
	laminar := 32 * viscosity * p.Length / (gravity * p.Bore * p.Bore * p.Area())
	if re <= ReLaminar {
		return Loss{H: laminar * q, DQ: laminar}
	}
	f := DarcyFactor(re, math.Exp(lnParam)/p.Bore)
	v := q / p.Area()
	h := f.F * p.Length / p.Bore * v * math.Abs(v) / (2 * gravity)
	return Loss{H: h, DQ: h / q * (2 + f.DLnRe), DParam: h * f.DLnK}
}

// hwConstant is the constant of h = 10.669506 L Q^n/(C^n D^m), SI, with n = 1/0.54 =
// 1.85185 and m = 2.63/0.54 = 4.87037: what V = 0.8492 C R^0.63 S^0.54 [HW] comes to.
// Other published pairs of constant and exponents differ by up to 2 % of the loss.
var hwConstant = math.Pow(0.8492*math.Pi/4*math.Pow(0.25, 0.63), -1/0.54)

// hwSlow is the velocity, m/s, below which the Hazen-Williams loss is continued to the
// origin by an odd cubic with a C1 joint: the law's own slope at rest is zero, which no
// network can be solved with. The cubic's slope at rest is 0.57 of the law's chord at
// the joint, where the loss is below 1e-6 m/m (0.05 m bore, C 60).
const hwSlow = 1e-3

func (p Pipe) hazenWilliams(q, lnC float64) Loss {
	const n = 1 / 0.54
	r := hwConstant * p.Length * math.Exp(-n*lnC) / math.Pow(p.Bore, 2.63/0.54)
	slow := hwSlow * p.Area()
	a := math.Abs(q)
	if a >= slow {
		h := r * math.Pow(a, n)
		return Loss{H: math.Copysign(h, q), DQ: n * h / a, DParam: -n * math.Copysign(h, q)}
	}
	// a (alpha + beta a^2), with the value and slope of the law at the joint.
	h0 := r * math.Pow(slow, n)
	beta := (n - 1) * h0 / (2 * slow * slow * slow)
	alpha := h0/slow - beta*slow*slow
	h := alpha*a + beta*a*a*a
	return Loss{H: math.Copysign(h, q), DQ: alpha + 3*beta*a*a, DParam: -n * math.Copysign(h, q)}
}

// Minor is the loss K V|V|/2g of a fitting, V from the bore its coefficient is on,
// with its derivative by flow (zero at rest).
func Minor(q, k, bore, gravity float64) (h, dq float64) {
	area := math.Pi / 4 * bore * bore
	c := k / (2 * gravity * area * area)
	return c * q * math.Abs(q), 2 * c * math.Abs(q)
}

// EnlargementK is the loss coefficient of a sudden enlargement [BC], (1 - beta^2)^2 on
// the velocity head in the smaller bore; beta, 0 to 1, is the smaller bore over the
// larger.
func EnlargementK(beta float64) float64 { return (1 - beta*beta) * (1 - beta*beta) }

// ContractionK is the loss coefficient of a sudden contraction, 0.5 (1 - beta^2) on the
// velocity head in the smaller bore [Cr]; beta, 0 to 1, is the smaller bore over the
// larger. Other handbook rules give up to 0.09 less.
func ContractionK(beta float64) float64 { return 0.5 * (1 - beta*beta) }
