package stat

import (
	"math"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/mat"
)

// References
//
//	[Brun]     R. Brun, P. Reichert, H. R. Kunsch, Water Resour. Res. 37 (2001) 1015-1030
//	[Lindley]  D. V. Lindley, Ann. Math. Stat. 27 (1956) 986-1005
//	[Atkinson] A. C. Atkinson, V. V. Fedorov, Biometrika 62 (1975) 57-70
//	[BoxHill]  G. E. P. Box, W. J. Hill, Technometrics 9 (1967) 57-71

// Collinearity is the index gamma = 1/sqrt(lambda_min) of the columns of j scaled to
// unit length [Brun]: 1 for orthogonal columns, above 10 to 15 poorly told apart, +Inf
// for dependent ones.
func Collinearity(j *mat.Dense) float64 {
	m, n := j.Dims()
	if n > m {
		return math.Inf(1)
	}
	s := mat.DenseCopyOf(j)
	for k := range n {
		norm := mat.Norm(j.ColView(k), 2)
		if norm == 0 {
			return math.Inf(1)
		}
		for i := range m {
			s.Set(i, k, j.At(i, k)/norm)
		}
	}
	var svd mat.SVD
	if !svd.Factorize(s, mat.SVDNone) {
		return math.NaN()
	}
	least := svd.Values(nil)[n-1]
	if least <= float64(m)*0x1p-52 {
		return math.Inf(1)
	}
	return 1 / least
}

// A NextReading is a candidate: its sensitivity g to each unknown and the variance of
// its own error.
type NextReading struct {
	G        []float64
	Variance float64
}

// spread is the variance that the unknowns, with covariance c, put into the reading.
func (r NextReading) spread(c *mat.SymDense) float64 {
	g := mat.NewVecDense(len(r.G), r.G)
	return mat.Inner(g, c, g)
}

// Information is the expected gain of information on the unknowns, in natural units:
// 1/2 ln(1 + g'Cg/variance) [Lindley].
func (r NextReading) Information(c *mat.SymDense) float64 {
	return math.Log1p(r.spread(c)/r.Variance) / 2
}

// Gain is the drop of the variance of the quantity u = q'theta that the reading will
// bring, (q'Cg)^2/(variance + g'Cg), known before it is taken.
func (r NextReading) Gain(c *mat.SymDense, q []float64) float64 {
	b := mat.Inner(mat.NewVecDense(len(q), q), c, mat.NewVecDense(len(r.G), r.G))
	return b * b / (r.Variance + r.spread(c))
}

// After is the covariance of the unknowns with the reading taken:
// C - C g g'C/(variance + g'Cg).
func (r NextReading) After(c *mat.SymDense) *mat.SymDense {
	n := len(r.G)
	var cg mat.VecDense
	cg.MulVec(c, mat.NewVecDense(n, r.G))
	out := mat.NewSymDense(n, nil)
	out.SymRankOne(c, -1/(r.Variance+r.spread(c)), &cg)
	return out
}

// Outlook is what one explanation predicts for a reading not yet taken: its
// probability, and the mean and variance of the reading under it, the remaining
// uncertainty of the unknowns included.
type Outlook struct {
	Probability, Mean, Variance float64
}

// Separation of two outlooks is (difference of means)^2/(sum of variances), the
// expected evidence between them [Atkinson, with noise as in BoxHill].
func Separation(a, b Outlook) float64 {
	d := a.Mean - b.Mean
	return d * d / (a.Variance + b.Variance)
}

// EntropyDrop is the expected drop of the entropy of the explanations' probabilities
// when the reading is taken, H(P) - E_y H(P|y), in natural units: 0 when all predict
// the same, H(P) when the reading is sure to settle the matter. The probabilities sum
// to one. The integral runs over each normal law with 40 Gauss-Hermite nodes.
func EntropyDrop(of []Outlook) float64 {
	drop := 0.0
	nodes, weights := make([]float64, 40), make([]float64, 40)
	quad.Hermite{}.FixedLocations(nodes, weights, math.Inf(-1), math.Inf(1))
	for _, o := range of {
		if o.Probability <= 0 {
			continue
		}
		for i, x := range nodes {
			y := o.Mean + x*math.Sqrt(2*o.Variance)
			// ln of the law of y under o over the mixture: the sum over o is the mutual
			// information of reading and explanation.
			own, mix := logNormal(y, o), math.Inf(-1)
			for _, k := range of {
				if k.Probability > 0 {
					mix = logSum(mix, math.Log(k.Probability)+logNormal(y, k))
				}
			}
			drop += o.Probability * weights[i] / math.Sqrt(math.Pi) * (own - mix)
		}
	}
	return math.Max(0, drop)
}

func logNormal(y float64, o Outlook) float64 {
	d := y - o.Mean
	return -d*d/(2*o.Variance) - math.Log(2*math.Pi*o.Variance)/2
}

// logSum is ln(e^a + e^b) without overflow.
func logSum(a, b float64) float64 {
	if a < b {
		a, b = b, a
	}
	if math.IsInf(a, -1) {
		return a
	}
	return a + math.Log1p(math.Exp(b-a))
}
