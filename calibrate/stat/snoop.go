package stat

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"
)

// References
//
//	[Baarda] W. Baarda, A testing procedure for use in geodetic networks, Netherlands
//	         Geodetic Commission (1968)
//	[Pope]   A. J. Pope, The statistics of residuals and the detection of outliers,
//	         NOAA Technical Report NOS 65 NGS 1 (1976)
//	[Mah]    R. S. H. Mah, A. C. Tamhane, AIChE J. 28 (1982) 828-830

// unchecked is the redundancy below which a reading counts as checked by nothing: its
// residual is then rounding.
const unchecked = 1e-9

// WTest is the standardised residual w_i = v_i/(sigma_i sqrt(r_i)) of each row, with
// whitened residuals v_i/sigma_i and r_i = 1 - leverage the redundancy [Baarda]. With
// known standard deviations and no gross error each w is standard normal. A row that
// nothing checks has w = 0.
func WTest(whitened, leverage []float64) []float64 {
	same(len(whitened), len(leverage))
	w := make([]float64, len(whitened))
	for i, v := range whitened {
		if r := 1 - leverage[i]; r > unchecked {
			w[i] = v / math.Sqrt(r)
		}
	}
	return w
}

// CorrelatedW is the test of greatest power for one bad reading among correlated ones:
// w_i = (P v)_i/sqrt((P Qvv P)_ii) with P the inverse of their covariance cov and Qvv
// that of the residuals v [Mah]. For uncorrelated readings it is WTest.
func CorrelatedW(v []float64, cov, qvv *mat.SymDense) ([]float64, error) {
	n := len(v)
	same(n, cov.SymmetricDim())
	same(n, qvv.SymmetricDim())
	var ch mat.Cholesky
	if !ch.Factorize(cov) {
		return nil, fmt.Errorf("stat: the covariance of the %d readings is not positive definite", n)
	}
	var pv mat.VecDense
	if err := ch.SolveVecTo(&pv, mat.NewVecDense(n, v)); err != nil {
		return nil, fmt.Errorf("stat: covariance of the readings: %w", err)
	}
	var half, pqp mat.Dense
	if err := ch.SolveTo(&half, qvv); err != nil {
		return nil, fmt.Errorf("stat: covariance of the readings: %w", err)
	}
	if err := ch.SolveTo(&pqp, half.T()); err != nil {
		return nil, fmt.Errorf("stat: covariance of the readings: %w", err)
	}
	w := make([]float64, n)
	for i := range w {
		// (P Qvv P)_ii over P_ii is the share of the reading that is checked.
		if q := pqp.At(i, i); q*cov.At(i, i) > unchecked {
			w[i] = pv.AtVec(i) / math.Sqrt(q)
		}
	}
	return w, nil
}

// Tau is w over the estimated standard deviation of unit weight s0, for readings whose
// standard deviations are known up to a common factor [Pope].
func Tau(w []float64, s0 float64) []float64 {
	tau := make([]float64, len(w))
	for i, v := range w {
		tau[i] = v / s0
	}
	return tau
}

// TauLimit is the two-sided limit of |tau| at level alpha with dof degrees of freedom:
// sqrt(dof) t/sqrt(dof - 1 + t^2), t the Student point with dof - 1 [Pope]. It is 1 for
// one degree of freedom, where tau cannot be anything else.
func TauLimit(alpha, dof float64) float64 {
	if dof <= 1 {
		return 1
	}
	t := TQuantile(1-alpha/2, dof-1)
	return math.Sqrt(dof) * t / math.Sqrt(dof-1+t*t)
}

// Noncentrality is lambda_0 = (z_(1-alpha/2) + z_power)^2: a gross error of
// sqrt(lambda_0) standard deviations of w is found by a two-sided test of level alpha
// with the given power, the far tail left out [Baarda]. 17.07 for 0.001 and 0.80.
func Noncentrality(alpha, power float64) float64 {
	d := NormalQuantile(1-alpha/2) + NormalQuantile(power)
	return d * d
}

// DetectableError is the smallest error of a reading with standard deviation sd and
// the given redundancy that the test behind lambda0 finds: sd sqrt(lambda0/r); +Inf
// where nothing checks the reading [Baarda].
func DetectableError(sd, redundancy, lambda0 float64) float64 {
	if redundancy <= unchecked {
		return math.Inf(1)
	}
	return sd * math.Sqrt(lambda0/redundancy)
}

// ExternalEffect bounds what an error just below the detectable one does to any
// function of the unknowns, in its standard deviations: sqrt(lambda0 (1-r)/r)
// [Baarda].
func ExternalEffect(redundancy, lambda0 float64) float64 {
	return DetectableError(math.Sqrt(math.Max(0, 1-redundancy)), redundancy, lambda0)
}

// same panics on lengths that do not fit, a caller's mistake.
func same(a, b int) {
	if a != b {
		panic(fmt.Sprintf("stat: lengths %d and %d do not fit", a, b))
	}
}
