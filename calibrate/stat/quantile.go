package stat

import (
	"math"

	"gonum.org/v1/gonum/stat/distuv"
)

// References
//
//	[DLMF] NIST Digital Library of Mathematical Functions, section 8.17

// NormalCDF is the standard normal distribution at x.
func NormalCDF(x float64) float64 { return distuv.UnitNormal.CDF(x) }

// NormalQuantile is the p point of the standard normal.
func NormalQuantile(p float64) float64 { return distuv.UnitNormal.Quantile(p) }

// ChiSquareSurvival is the chance that chi-square with dof degrees of freedom exceeds x.
func ChiSquareSurvival(x, dof float64) float64 { return distuv.ChiSquared{K: dof}.Survival(x) }

// ChiSquareQuantile is the p point of chi-square with dof degrees of freedom.
func ChiSquareQuantile(p, dof float64) float64 { return distuv.ChiSquared{K: dof}.Quantile(p) }

// BoundaryQuantile is the 1-alpha point of a likelihood ratio for one parameter tested
// on its bound, half a point mass at zero and half chi-square(1) (S. G. Self, K.-Y.
// Liang, J. Am. Stat. Assoc. 82 (1987) 605): 2.706 at 5 %.
func BoundaryQuantile(alpha float64) float64 { return ChiSquareQuantile(1-2*alpha, 1) }

// TSurvival is the chance that Student's t with dof degrees of freedom exceeds x. The
// library's incomplete beta function keeps eight digits in the tails; ours twelve.
func TSurvival(x, dof float64) float64 {
	if x < 0 {
		return 1 - TSurvival(-x, dof)
	}
	return 0.5 * incompleteBeta(dof/2, 0.5, dof/(dof+x*x))
}

// TQuantile is the p point of Student's t with dof degrees of freedom.
func TQuantile(p, dof float64) float64 {
	if p < 0.5 {
		return -TQuantile(1-p, dof)
	}
	d := distuv.StudentsT{Mu: 0, Sigma: 1, Nu: dof}
	return polish(d.Quantile(p), 1-p, d.Prob, func(x float64) float64 { return TSurvival(x, dof) })
}

// FSurvival is the chance that F with d1 and d2 degrees of freedom exceeds x.
func FSurvival(x, d1, d2 float64) float64 {
	return incompleteBeta(d2/2, d1/2, d2/(d2+d1*x))
}

// FQuantile is the p point of F with d1 and d2 degrees of freedom.
func FQuantile(p, d1, d2 float64) float64 {
	d := distuv.F{D1: d1, D2: d2}
	return polish(d.Quantile(p), 1-p, d.Prob, func(x float64) float64 { return FSurvival(x, d1, d2) })
}

// polish sharpens a quantile by Newton steps on the survival function, taken on its
// logarithm because that is nearly straight in the tails.
func polish(x, tail float64, density, survival func(float64) float64) float64 {
	for range 3 {
		s := survival(x)
		x += s * math.Log(s/tail) / density(x)
	}
	return x
}

// incompleteBeta is the regularised incomplete beta function I_x(a, b) by its
// continued fraction [DLMF, 8.17.22].
func incompleteBeta(a, b, x float64) float64 {
	switch {
	case x <= 0:
		return 0
	case x >= 1:
		return 1
	case x > (a+1)/(a+b+2):
		return 1 - incompleteBeta(b, a, 1-x) // where the fraction converges fast
	}
	lab, _ := math.Lgamma(a + b)
	la, _ := math.Lgamma(a)
	lb, _ := math.Lgamma(b)
	front := math.Exp(lab-la-lb+a*math.Log(x)+b*math.Log1p(-x)) / a
	// Lentz's evaluation: value = front / (1 + c1/(1 + c2/(1 + ...))).
	const tiny = 1e-300
	f, c, d := 1.0, 1.0, 0.0
	for m := 0; m < 1000; m++ {
		var t float64
		k := float64(m / 2)
		switch {
		case m == 0:
			t = 1
		case m%2 == 0:
			t = k * (b - k) * x / ((a + 2*k - 1) * (a + 2*k))
		default:
			t = -(a + k) * (a + b + k) * x / ((a + 2*k) * (a + 2*k + 1))
		}
		if d = 1 + t*d; d == 0 {
			d = tiny
		}
		d = 1 / d
		if c = 1 + t/c; c == 0 {
			c = tiny
		}
		f *= c * d
		if math.Abs(c*d-1) < 1e-15 {
			break
		}
	}
	return front * (f - 1)
}
