package stat

import (
	"slices"
)

// References
//
//	[BH]       Y. Benjamini, Y. Hochberg, J. R. Stat. Soc. B 57 (1995) 289-300
//	[BY]       Y. Benjamini, D. Yekutieli, Ann. Stat. 29 (2001) 1165-1188
//	[Holm]     S. Holm, Scand. J. Stat. 6 (1979) 65-70
//	[Hochberg] Y. Hochberg, Biometrika 75 (1988) 800-802

// BenjaminiHochberg marks the p values to reject so that the expected share of false
// alarms among the rejected is at most q: all up to the largest with p_(i) <= q i/m,
// for independent or positively dependent tests [BH].
func BenjaminiHochberg(p []float64, q float64) []bool { return Rejected(AdjustBH(p), q) }

// AdjustBH multiplies the p values so that BenjaminiHochberg at q rejects those at or
// below q. Like all adjustments here it keeps the order of the tests and does not
// depend on it.
func AdjustBH(p []float64) []float64 {
	m := float64(len(p))
	return stepUp(p, func(i int) float64 { return m / float64(i) })
}

// AdjustBY does the same under any dependence, at the cost of the factor
// 1 + 1/2 + ... + 1/m [BY].
func AdjustBY(p []float64) []float64 {
	m, sum := float64(len(p)), 0.0
	for i := range p {
		sum += 1 / float64(i+1)
	}
	return stepUp(p, func(i int) float64 { return sum * m / float64(i) })
}

// AdjustBonferroni adjusts p values for the chance of any false alarm, under any dependence.
func AdjustBonferroni(p []float64) []float64 {
	m := float64(len(p))
	return stepUp(p, func(int) float64 { return m })
}

// AdjustHolm is Bonferroni by steps from the smallest p value down: uniformly better and as
// safe [Holm].
func AdjustHolm(p []float64) []float64 {
	order := byValue(p)
	out := make([]float64, len(p))
	highest := 0.0
	for i, k := range order {
		highest = max(highest, float64(len(p)-i)*p[k])
		out[k] = min(1, highest)
	}
	return out
}

// AdjustHochberg steps up from the largest p value; it holds for independent tests
// [Hochberg].
func AdjustHochberg(p []float64) []float64 {
	m := len(p)
	return stepUp(p, func(i int) float64 { return float64(m - i + 1) })
}

// stepUp multiplies the p value of rank i, counted from 1 at the smallest, by factor(i)
// and makes the result monotone from the largest down.
func stepUp(p []float64, factor func(i int) float64) []float64 {
	order := byValue(p)
	out := make([]float64, len(p))
	lowest := 1.0
	for i := len(order); i >= 1; i-- {
		k := order[i-1]
		lowest = min(lowest, factor(i)*p[k])
		out[k] = lowest
	}
	return out
}

// byValue lists the places of p from the smallest value up.
func byValue(p []float64) []int {
	order := make([]int, len(p))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(a, b int) int {
		switch {
		case p[a] < p[b]:
			return -1
		case p[a] > p[b]:
			return 1
		}
		return 0
	})
	return order
}

// Rejected marks the adjusted p values at or below level.
func Rejected(adjusted []float64, level float64) []bool {
	out := make([]bool, len(adjusted))
	for i, p := range adjusted {
		out[i] = p <= level
	}
	return out
}
