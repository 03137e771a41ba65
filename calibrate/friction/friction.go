// Package friction holds the loss laws of the steady model as pure functions with
// exact derivatives: pipe friction, kinetic energy, the velocity profile at a pitot,
// fittings and works curves.
//
// SI throughout. Flow may have either sign; a loss has the sign of the flow. Every
// law returns the derivative by flow and by its own parameter, which is ln k (k the
// absolute roughness, m) for Darcy-Weisbach and ln C for Hazen-Williams.
//
// # References
//
//	[CW]    C. F. Colebrook, J. Inst. Civ. Eng. 11 (1939) 133: 1/sqrt f = -2 log10(k/(3.7 D) + 2.51/(Re sqrt f))
//	[Cl]    D. Clamond, Ind. Eng. Chem. Res. 48 (2009) 3665: fourth-order steps settle [CW] in two logarithms
//	[Ho]    A. S. Householder, The Numerical Treatment of a Single Nonlinear Equation (1970): the step
//	[HW]    G. S. Williams, A. Hazen, Hydraulic Tables (1905): V = 0.8492 C R^0.63 S^0.54 in SI
//	[PK]    L. Prandtl and T. von Karman's logarithmic velocity law, as in H. Schlichting, Boundary-Layer Theory, ch. 20
//	[BC]    J.-C. de Borda (1766) and L. Carnot's loss at a sudden enlargement, any text
//	[Cr]    Crane Co., Technical Paper 410: sudden contraction, 0.5 (1 - beta^2)
//	[FC]    F. N. Fritsch, R. E. Carlson, SIAM J. Numer. Anal. 17 (1980) 238
//	[FB]    F. N. Fritsch, J. Butland, SIAM J. Sci. Stat. Comput. 5 (1984) 300
package friction

import "math"

// Law is the friction law of a survey.
type Law int

const (
	DarcyWeisbach Law = iota
	HazenWilliams
)

// Re between which laminar and turbulent flow are joined.
const (
	ReLaminar   = 2000.0
	ReTurbulent = 4000.0
)

// Factor is a Darcy friction factor with its exact derivatives, d ln f / d ln Re
// and d ln f / d ln k.
type Factor struct{ F, DLnRe, DLnK float64 }

// roughest is the relative roughness k/D up to which [CW] is used as it stands. It
// was made for k/D up to 0.05 and has a pole at 3.7; a search that tries an absurd
// roughness must still find a loss that is finite and rises, so from here on ln f
// goes on in a straight line over ln k.
const roughest = 1.0

// Colebrook is the Colebrook-White factor [CW] at Reynolds number re (turbulent:
// from some 2,000 up) and relative roughness rel = k/D >= 0, to machine precision.
//
// With x = 1/sqrt f, A = k/(3.7 D), B = 2.51 x/Re and c = 2/ln 10,
//
//	d ln f/d ln k = 2cA/((A+B)x + cB),  d ln f/d ln Re = -2cB/((A+B)x + cB)
func Colebrook(re, rel float64) Factor {
	f, _ := turbulent(re, rel)
	return f
}

// turbulent is Colebrook together with the mixed derivative d2 ln f/(d ln Re d ln k).
func turbulent(re, rel float64) (f Factor, cross float64) {
	const c = 2 / math.Ln10
	a, b := math.Min(rel, roughest)/3.7, 2.51/re
	x := root(a, b)
	bx := b * x
	den := (a+bx)*x + c*bx
	f = Factor{F: 1 / (x * x), DLnRe: -2 * c * bx / den, DLnK: 2 * c * a / den}
	// By ln k: x moves by dx, bx with it, a by itself.
	dx := -x * f.DLnK / 2
	db := b * dx
	dden := (a+db)*x + (a+bx)*dx + c*db
	cross = -2 * c * (db*den - bx*dden) / (den * den)
	if rel > roughest {
		reach := math.Log(rel / roughest)
		f.F *= math.Exp(f.DLnK * reach)
		f.DLnRe += cross * reach
	}
	return f, cross
}

// root solves g(x) = x + c ln(a + bx) = 0 for x = 1/sqrt f. g is so nearly straight
// that steps of fourth order [Ho][Cl] from a start with x = 7 under the logarithm
// reach rounding after one or two; what a step under 1e-4 leaves is some 1e-16.
func root(a, b float64) float64 {
	const (
		c     = 2 / math.Ln10
		steps = 8 // two are enough in turbulent flow
	)
	x := math.Max(0.1, -c*math.Log(a+7*b))
	for range steps {
		arg := a + b*x
		w := b / arg
		g := x + c*math.Log(arg)
		d1, d2, d3 := 1+c*w, -c*w*w, 2*c*w*w*w
		step := g * (d1*d1 - g*d2/2) / (d1*d1*d1 - g*d1*d2 + g*g*d3/6)
		x -= step
		if math.Abs(step) < 1e-4*x {
			break
		}
	}
	return x
}

// DarcyFactor is the friction factor at any Reynolds number re > 0: 64/Re below
// 2,000, Colebrook-White above 4,000, and between them the cubic Hermite curve of
// ln f over ln Re that has the values and slopes of both, so that f and its
// derivatives are continuous. f at 4,000 is never below that at 2,000, so the curve's
// slope is least at its ends and never under -1: the loss rises with the flow.
func DarcyFactor(re, rel float64) Factor {
	if re <= ReLaminar {
		return Factor{F: 64 / re, DLnRe: -1}
	}
	if re >= ReTurbulent {
		return Colebrook(re, rel)
	}
	top, cross := turbulent(ReTurbulent, rel)
	span := math.Log(ReTurbulent / ReLaminar)
	t := math.Log(re/ReLaminar) / span
	h00, h10, h01, h11 := hermite(t)
	d00, d10, d01, d11 := hermiteSlope(t)
	y0, y1 := math.Log(64/ReLaminar), math.Log(top.F)
	lnF := h00*y0 - h10*span + h01*y1 + h11*span*top.DLnRe
	slope := (d00*y0+d01*y1)/span - d10 + d11*top.DLnRe
	// ln k moves the value and the slope at the turbulent end.
	return Factor{F: math.Exp(lnF), DLnRe: slope, DLnK: h01*top.DLnK + h11*span*cross}
}

func hermite(t float64) (h00, h10, h01, h11 float64) {
	t2, t3 := t*t, t*t*t
	return 2*t3 - 3*t2 + 1, t3 - 2*t2 + t, -2*t3 + 3*t2, t3 - t2
}

func hermiteSlope(t float64) (h00, h10, h01, h11 float64) {
	t2 := t * t
	return 6*t2 - 6*t, 3*t2 - 4*t + 1, -6*t2 + 6*t, 3*t2 - 2*t
}
