package stat

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"
)

// References
//
//	[Willsky]   A. S. Willsky, H. L. Jones, IEEE Trans. AC 21 (1976) 108-112
//	[Narasimhan] S. Narasimhan, R. S. H. Mah, AIChE J. 33 (1987) 1514-1521

// Detector tests for faults of known signature in a vector z of zero mean and
// covariance V: a fault of size d adds d g to the mean [Willsky].
type Detector struct {
	ch mat.Cholesky
	n  int
}

// NewDetector fails when the covariance is not positive definite.
func NewDetector(v *mat.SymDense) (*Detector, error) {
	d := &Detector{n: v.SymmetricDim()}
	if !d.ch.Factorize(v) {
		return nil, fmt.Errorf("stat: the %d by %d covariance is not positive definite; a row repeats others or has no uncertainty", d.n, d.n)
	}
	return d, nil
}

// inner is a' V^-1 b.
func (d *Detector) inner(a, b []float64) float64 {
	same(d.n, len(a))
	same(d.n, len(b))
	var x mat.VecDense
	// Factorize succeeded, and a poor condition is the caller's to judge.
	_ = d.ch.SolveVecTo(&x, mat.NewVecDense(d.n, b))
	return mat.Dot(mat.NewVecDense(d.n, a), &x)
}

// Ratio is the likelihood ratio of the fault with signature g,
// T = (g'V^-1 z)^2/(g'V^-1 g), chi-square(1) without fault, and its size
// (g'V^-1 z)/(g'V^-1 g) with standard deviation 1/sqrt(g'V^-1 g). In a linear problem
// T is the drop of the sum of squares when the fault is allowed. A signature that does
// not reach z has T = 0 and a size of infinite standard deviation.
func (d *Detector) Ratio(z, g []float64) (t, size, sd float64) {
	gz, gg := d.inner(g, z), d.inner(g, g)
	if gg <= 0 {
		return 0, 0, math.Inf(1)
	}
	return gz * gz / gg, gz / gg, 1 / math.Sqrt(gg)
}

// Cosine of two signatures under V^-1. At 1 or -1 no z can tell the faults apart.
func (d *Detector) Cosine(g, h []float64) float64 {
	n := d.inner(g, g) * d.inner(h, h)
	if n <= 0 {
		return 0
	}
	return math.Max(-1, math.Min(1, d.inner(g, h)/math.Sqrt(n)))
}

// Global is z'V^-1 z, chi-square with as many degrees of freedom as z has entries.
func (d *Detector) Global(z []float64) float64 { return d.inner(z, z) }

// MixUp is the chance that the wrong one of two faults scores higher, when the true
// one has noncentrality t and their signatures the cosine rho:
// Phi(-sqrt(t (1-|rho|)/2)). Derived for this project: the difference of the two
// standardised statistics is normal with mean sqrt(t)(1-|rho|) and variance
// 2(1-|rho|).
func MixUp(t, rho float64) float64 {
	return NormalCDF(-math.Sqrt(t * (1 - math.Min(1, math.Abs(rho))) / 2))
}

// SeparatingT is the noncentrality that two faults of cosine rho need for a chance of
// mix-up of at most p: 2 z_p^2/(1-|rho|), 5.41/(1-|rho|) for 5 %.
func SeparatingT(p, rho float64) float64 {
	z := NormalQuantile(p)
	return 2 * z * z / (1 - math.Min(1, math.Abs(rho)))
}
