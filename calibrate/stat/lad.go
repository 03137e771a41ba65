package stat

import (
	"fmt"

	"gonum.org/v1/gonum/mat"
	"gonum.org/v1/gonum/optimize/convex/lp"
)

// LeastAbsolute fits y = x b by the least sum of absolute residuals over sd, a start
// that several gross errors at once cannot pull away, as a linear programme solved by
// the simplex method: minimise the sum of p + q with x b + p - q = y. The second
// result is that sum.
func LeastAbsolute(x *mat.Dense, y, sd []float64) ([]float64, float64, error) {
	m, n := x.Dims()
	same(m, len(y))
	same(m, len(sd))
	// Columns: b split into its positive and negative part, then p, then q.
	a := mat.NewDense(m, 2*n+2*m, nil)
	cost, right, basis := make([]float64, 2*n+2*m), make([]float64, m), make([]int, m)
	for i := range m {
		sign := 1.0
		if y[i] < 0 {
			sign = -1 // the simplex method starts from a basis with right sides not negative
		}
		for k := range n {
			a.Set(i, k, sign*x.At(i, k)/sd[i])
			a.Set(i, n+k, -sign*x.At(i, k)/sd[i])
		}
		a.Set(i, 2*n+i, sign)
		a.Set(i, 2*n+m+i, -sign)
		cost[2*n+i], cost[2*n+m+i] = 1, 1
		right[i] = sign * y[i] / sd[i]
		basis[i] = 2*n + i
		if sign < 0 {
			basis[i] += m
		}
	}
	sum, v, err := lp.Simplex(cost, a, right, 1e-10, basis)
	if err != nil {
		return nil, 0, fmt.Errorf("stat: least absolute residuals: %w", err)
	}
	b := make([]float64, n)
	for k := range b {
		b[k] = v[k] - v[n+k]
	}
	return b, sum, nil
}
