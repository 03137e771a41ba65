package stat

// References
//
//	[JCGM100] JCGM 100:2008, Guide to the expression of uncertainty in measurement
//	[JCGM106] JCGM 106:2012, The role of measurement uncertainty in conformity assessment

// ConformanceProbability is the chance that a quantity estimated as y with standard
// uncertainty u lies within its limits [JCGM106, 7.3 and 7.4]; an infinite limit is
// none.
func ConformanceProbability(y, u, lower, upper float64) float64 {
	return NormalCDF((upper-y)/u) - NormalCDF((lower-y)/u)
}

// GuardBand is how far inside a single limit an estimate must lie for the quantity to
// conform with probability p: z_p u [JCGM106, 8.3].
func GuardBand(u, p float64) float64 { return NormalQuantile(p) * u }

// EffectiveDof combines standard uncertainties u with degrees of freedom dof (infinite:
// known) into those of their root sum of squares: u_c^4/sum(u_i^4/dof_i)
// (Welch-Satterthwaite) [JCGM100, G.4].
func EffectiveDof(u, dof []float64) float64 {
	same(len(u), len(dof))
	total, sum := 0.0, 0.0
	for i, v := range u {
		total += v * v
		sum += v * v * v * v / dof[i]
	}
	return total * total / sum
}
