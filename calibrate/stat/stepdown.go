package stat

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"
)

// StepDownMinP adjusts the p values of the jointly Gaussian statistics w for the
// chance of any false alarm, by the free step-down procedure on the least p value
// [Westfall, algorithm 2.8]: the worst statistic is compared with the largest of all,
// the next with the largest of the rest, and so on, under their joint law when nothing
// is wrong. Arguments and precision are those of FamilyLimit; a side of 1 judges
// positive w only. The smallest value it can give is 1/(draws+1).
func StepDownMinP(w []float64, corr *mat.SymDense, sides []int, draws int, seed uint64) []float64 {
	n := len(w)
	if corr.SymmetricDim() != n || len(sides) != n {
		panic(fmt.Sprintf("stat: %d statistics, %d sides, correlation of %d", n, len(sides), corr.SymmetricDim()))
	}
	p := make([]float64, n)
	for i := range p {
		p[i] = tail(w[i], sides[i])
	}
	order := byValue(p)
	count := make([]int, n)
	simulate(corr, sides, draws, seed, func(draw []float64) {
		least := 1.0
		for i := n - 1; i >= 0; i-- {
			k := order[i]
			least = min(least, tail(draw[k], sides[k]))
			if least <= p[k] {
				count[k]++
			}
		}
	})
	out := make([]float64, n)
	highest := 0.0
	for _, k := range order {
		// Counting the observed case too keeps the test valid at any number of draws.
		highest = max(highest, float64(count[k]+1)/float64(draws+1))
		out[k] = highest
	}
	return out
}

// tail is the p value of w; of |w| with two sides.
func tail(w float64, sides int) float64 {
	if sides == 2 {
		return math.Erfc(math.Abs(w) / math.Sqrt2)
	}
	return 0.5 * math.Erfc(w/math.Sqrt2)
}
