package stat

import "math"

// References
//
//	[Kass] R. E. Kass, A. E. Raftery, J. Am. Stat. Assoc. 90 (1995) 773-795

// LogEvidence is the logarithm of the marginal likelihood by Laplace's approximation,
// exact for a linear problem [Kass, eq. 3]:
//
//	-phi/2 - logSD - (rows - unknowns)/2 ln(2 pi) - logDet/2
//
// with phi the least sum of squares over readings and prior rows, logSD the sum of the
// logarithms of all standard deviations, of readings and priors, rows the number of
// both, and logDet = ln det(J'J), J whitened with the prior rows in. Unknowns without
// a prior must be the same in all explanations compared. It needs an interior, roughly
// normal mode: not for an estimate on a bound.
func LogEvidence(phi, logSD, logDet float64, rows, unknowns int) float64 {
	return -phi/2 - logSD - float64(rows-unknowns)/2*math.Log(2*math.Pi) - logDet/2
}

// Posterior turns log evidences and prior probabilities into posterior probabilities
// over the list. The list should hold "sound" and "none of these".
func Posterior(logEvidence, prior []float64) []float64 {
	same(len(logEvidence), len(prior))
	out := make([]float64, len(prior))
	total := math.Inf(-1)
	for i, p := range prior {
		out[i] = logEvidence[i] + math.Log(p)
		total = logSum(total, out[i])
	}
	for i := range out {
		out[i] = math.Exp(out[i] - total)
	}
	return out
}
