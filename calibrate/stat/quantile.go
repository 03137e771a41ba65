package stat

import "gonum.org/v1/gonum/stat/distuv"

// NormalQuantile is the p point of the standard normal.
func NormalQuantile(p float64) float64 { return distuv.UnitNormal.Quantile(p) }
