package lsq_test

import "math"

// model is one of the formulas of the NIST nonlinear sets: its value at b and x, with
// the exact derivatives by b put into g.
type model func(b, x, g []float64) float64

// nistModels are keyed by the name of the data set. The formulas are those printed in
// the NIST files and carried in nist_nonlinear.json.
var nistModels = map[string]model{
	"Chwirut1": chwirut, "Chwirut2": chwirut,
	"DanWood": func(b, x, g []float64) float64 {
		p := math.Pow(x[0], b[1])
		g[0], g[1] = p, b[0]*p*math.Log(x[0])
		return b[0] * p
	},
	"Gauss1": gauss, "Gauss2": gauss, "Gauss3": gauss,
	"Lanczos1": lanczos, "Lanczos2": lanczos, "Lanczos3": lanczos,
	"Misra1a": saturation, "BoxBOD": saturation,
	"Misra1b": func(b, x, g []float64) float64 {
		u := 1 + b[1]*x[0]/2
		g[0], g[1] = 1-1/(u*u), b[0]*x[0]/(u*u*u)
		return b[0] * g[0]
	},
	"Misra1c": func(b, x, g []float64) float64 {
		u := 1 + 2*b[1]*x[0]
		g[0], g[1] = 1-1/math.Sqrt(u), b[0]*x[0]*math.Pow(u, -1.5)
		return b[0] * g[0]
	},
	"Misra1d": func(b, x, g []float64) float64 {
		u := 1 + b[1]*x[0]
		g[0], g[1] = b[1]*x[0]/u, b[0]*x[0]/(u*u)
		return b[0] * g[0]
	},
	"ENSO":  enso,
	"Hahn1": rational(3, 3), "Thurber": rational(3, 3), "Kirby2": rational(2, 2),
	"MGH17": func(b, x, g []float64) float64 {
		e, f := math.Exp(-x[0]*b[3]), math.Exp(-x[0]*b[4])
		g[0], g[1], g[2], g[3], g[4] = 1, e, f, -b[1]*x[0]*e, -b[2]*x[0]*f
		return b[0] + b[1]*e + b[2]*f
	},
	"Nelson": func(b, x, g []float64) float64 {
		e := math.Exp(-b[2] * x[1])
		g[0], g[1], g[2] = 1, -x[0]*e, b[1]*x[0]*x[1]*e
		return b[0] - b[1]*x[0]*e
	},
	"Roszman1": func(b, x, g []float64) float64 {
		d := x[0] - b[3]
		q := 1 / (d*d + b[2]*b[2]) / math.Pi
		g[0], g[1], g[2], g[3] = 1, -x[0], -d*q, -b[2]*q
		return b[0] - b[1]*x[0] - math.Atan(b[2]/d)/math.Pi
	},
	"Bennett5": func(b, x, g []float64) float64 {
		u := b[1] + x[0]
		p := math.Pow(u, -1/b[2])
		g[0], g[1], g[2] = p, -b[0]*p/(b[2]*u), b[0]*p*math.Log(u)/(b[2]*b[2])
		return b[0] * p
	},
	"Eckerle4": func(b, x, g []float64) float64 {
		z := (x[0] - b[2]) / b[1]
		e := math.Exp(-z*z/2) / b[1]
		g[0], g[1], g[2] = e, b[0]*e*(z*z-1)/b[1], b[0]*e*z/b[1]
		return b[0] * e
	},
	"MGH09": func(b, x, g []float64) float64 {
		n, d := x[0]*x[0]+x[0]*b[1], x[0]*x[0]+x[0]*b[2]+b[3]
		g[0], g[1], g[2], g[3] = n/d, b[0]*x[0]/d, -b[0]*n*x[0]/(d*d), -b[0]*n/(d*d)
		return b[0] * n / d
	},
	"MGH10": func(b, x, g []float64) float64 {
		u := x[0] + b[2]
		e := math.Exp(b[1] / u)
		g[0], g[1], g[2] = e, b[0]*e/u, -b[0]*e*b[1]/(u*u)
		return b[0] * e
	},
	"Rat42": func(b, x, g []float64) float64 {
		e := math.Exp(b[1] - b[2]*x[0])
		q := 1 / (1 + e)
		g[0], g[1], g[2] = q, -b[0]*e*q*q, b[0]*x[0]*e*q*q
		return b[0] * q
	},
	"Rat43": func(b, x, g []float64) float64 {
		e := math.Exp(b[1] - b[2]*x[0])
		p := math.Pow(1+e, -1/b[3])
		s := e / (1 + e) / b[3]
		g[0], g[1], g[2], g[3] = p, -b[0]*p*s, b[0]*p*s*x[0], b[0]*p*math.Log1p(e)/(b[3]*b[3])
		return b[0] * p
	},
}

func chwirut(b, x, g []float64) float64 {
	d := b[1] + b[2]*x[0]
	f := math.Exp(-b[0]*x[0]) / d
	g[0], g[1], g[2] = -x[0]*f, -f/d, -f*x[0]/d
	return f
}

func saturation(b, x, g []float64) float64 {
	e := math.Exp(-b[1] * x[0])
	g[0], g[1] = 1-e, b[0]*x[0]*e
	return b[0] * (1 - e)
}

func lanczos(b, x, g []float64) float64 {
	f := 0.0
	for k := 0; k < 6; k += 2 {
		e := math.Exp(-b[k+1] * x[0])
		g[k], g[k+1] = e, -b[k]*x[0]*e
		f += b[k] * e
	}
	return f
}

func gauss(b, x, g []float64) float64 {
	e := math.Exp(-b[1] * x[0])
	g[0], g[1] = e, -b[0]*x[0]*e
	f := b[0] * e
	for k := 2; k < 8; k += 3 {
		z := (x[0] - b[k+1]) / b[k+2]
		e := math.Exp(-z * z)
		g[k], g[k+1], g[k+2] = e, 2*b[k]*e*z/b[k+2], 2*b[k]*e*z*z/b[k+2]
		f += b[k] * e
	}
	return f
}

func enso(b, x, g []float64) float64 {
	a := 2 * math.Pi * x[0] / 12
	g[0], g[1], g[2] = 1, math.Cos(a), math.Sin(a)
	f := b[0] + b[1]*g[1] + b[2]*g[2]
	for k := 3; k < 9; k += 3 {
		a := 2 * math.Pi * x[0] / b[k]
		s, c := math.Sincos(a)
		g[k], g[k+1], g[k+2] = (b[k+1]*s-b[k+2]*c)*a/b[k], c, s
		f += b[k+1]*c + b[k+2]*s
	}
	return f
}

// rational is a polynomial of degree n over 1 plus a polynomial of degree d without
// its constant.
func rational(n, d int) model {
	return func(b, x, g []float64) float64 {
		num, den, p := 0.0, 1.0, 1.0
		for k := 0; k <= max(n, d); k++ {
			if k <= n {
				num += b[k] * p
			}
			if k >= 1 && k <= d {
				den += b[n+k] * p
			}
			p *= x[0]
		}
		p = 1
		for k := 0; k <= max(n, d); k++ {
			if k <= n {
				g[k] = p / den
			}
			if k >= 1 && k <= d {
				g[n+k] = -num / den * p / den
			}
			p *= x[0]
		}
		return num / den
	}
}
