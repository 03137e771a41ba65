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
//	[SJ]    P. K. Swamee, A. K. Jain, J. Hydraul. Div. ASCE 102 (1976) 657: starting value
//	[HW]    G. S. Williams, A. Hazen, Hydraulic Tables (1905): V = 0.8492 C R^0.63 S^0.54 in SI
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

// Colebrook is the Colebrook-White factor [CW] at Reynolds number re > 0 and
// relative roughness rel = k/D >= 0, to machine precision: Newton on x = 1/sqrt f,
// which the near-linear equation takes in three steps from [SJ].
//
// With A = k/(3.7 D), B = 2.51 x/Re and c = 2/ln 10,
//
//	d ln f/d ln k = 2cA/((A+B)x + cB),  d ln f/d ln Re = -2cB/((A+B)x + cB)
func Colebrook(re, rel float64) Factor {
	const c = 2 / math.Ln10
	a, b := rel/3.7, 2.51/re
	x := -2 * math.Log10(a+5.74/math.Pow(re, 0.9))
	if !(x > 0.5) {
		x = 0.5 // beyond any pipe: a wall rougher than the bore
	}
	for i := 0; i < 8; i++ {
		arg := a + b*x
		g := x + c*math.Log(arg)
		step := g / (1 + c*b/arg)
		x -= step
		if math.Abs(step) < 1e-15*x {
			break
		}
	}
	bx := b * x
	den := (a+bx)*x + c*bx
	return Factor{F: 1 / (x * x), DLnRe: -2 * c * bx / den, DLnK: 2 * c * a / den}
}

// DarcyFactor is the friction factor at any Reynolds number: 64/Re below 2,000,
// Colebrook-White above 4,000, and between them the cubic Hermite curve of ln f
// over ln Re that has the values and slopes of both, so that f and its
// derivatives are continuous. The slope of the curve never falls below -1, so the
// loss rises with the flow throughout.
func DarcyFactor(re, rel float64) Factor {
	if re <= ReLaminar {
		return Factor{F: 64 / re, DLnRe: -1}
	}
	if re >= ReTurbulent {
		return Colebrook(re, rel)
	}
	top := Colebrook(ReTurbulent, rel)
	span := math.Log(ReTurbulent / ReLaminar)
	t := math.Log(re/ReLaminar) / span
	h00, h10, h01, h11 := hermite(t)
	d00, d10, d01, d11 := hermiteSlope(t)
	y0, y1 := math.Log(64/ReLaminar), math.Log(top.F)
	lnF := h00*y0 - h10*span + h01*y1 + h11*span*top.DLnRe
	slope := (d00*y0+d01*y1)/span - d10 + d11*top.DLnRe
	// ln k moves the value and the slope at the turbulent end.
	return Factor{F: math.Exp(lnF), DLnRe: slope, DLnK: h01*top.DLnK + h11*span*top.cross(rel)}
}

// cross is d(d ln f/d ln Re)/d ln k of Colebrook-White at the joint, by the chain
// rule on s = -2cB/((A+B)x + cB).
func (f Factor) cross(rel float64) float64 {
	const c = 2 / math.Ln10
	x := 1 / math.Sqrt(f.F)
	a, b := rel/3.7, 2.51*x/ReTurbulent
	dx := -x * f.DLnK / 2 // d x / d ln k
	da, db := a, b*dx/x
	den := (a+b)*x + c*b
	dden := (da+db)*x + (a+b)*dx + c*db
	return -2 * c * (db*den - b*dden) / (den * den)
}

func hermite(t float64) (h00, h10, h01, h11 float64) {
	t2, t3 := t*t, t*t*t
	return 2*t3 - 3*t2 + 1, t3 - 2*t2 + t, -2*t3 + 3*t2, t3 - t2
}

func hermiteSlope(t float64) (h00, h10, h01, h11 float64) {
	t2 := t * t
	return 6*t2 - 6*t, 3*t2 - 4*t + 1, -6*t2 + 6*t, 3*t2 - 2*t
}
