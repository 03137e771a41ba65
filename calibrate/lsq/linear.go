package lsq

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/blas/blas64"
	"gonum.org/v1/gonum/mat"
)

// Linear solves the weighted linear problem: minimise sum w_i (a_i x - y_i)^2, by
// Householder QR of the columns scaled to unit length. The weights are reciprocal
// variances; nil: all one. Residuals in the result are whitened and taken as adjusted
// minus observed, sqrt(w_i) (a_i x - y_i), and J is the whitened a.
//
// Where the columns are dependent the status is RankDeficient and X is a basic
// solution: zero in the unknowns listed as undetermined.
func Linear(a *mat.Dense, y, w []float64) (*Result, error) {
	m, n := a.Dims()
	if len(y) != m || w != nil && len(w) != m {
		panic(fmt.Sprintf("lsq: %d rows, %d values and %d weights", m, len(y), len(w)))
	}
	res := &Result{X: make([]float64, n), R: make([]float64, m), J: mat.NewDense(m, n, nil), AtBound: make([]bool, n)}
	for i := range y {
		root := 1.0
		if w != nil {
			root = math.Sqrt(w[i])
		}
		row := res.J.RawRowView(i)
		for k, v := range a.RawRowView(i) {
			row[k] = root * v
		}
		// At X = 0 the residual is minus the observation.
		res.R[i] = -root * y[i]
		if s := res.R[i] + blas64.Asum(vector(row)); math.IsNaN(s) || math.IsInf(s, 0) {
			return nil, fmt.Errorf("lsq: row %d is not finite or has a negative weight", i)
		}
	}
	for k := range n {
		res.free = append(res.free, k)
	}
	res.judge()
	if res.Rank < n {
		res.Status = RankDeficient
	}
	res.determined().solveFree()
	res.applyLinear()
	return res, nil
}

// solveFree puts the least-squares solution for the free unknowns into X, from the
// factor and the residuals at X = 0.
func (r *Result) solveFree() {
	c := make([]float64, r.factor.m)
	copy(c, r.R)
	r.factor.transform(c)
	r.factor.back(c)
	for i, k := range r.free {
		r.X[k] = -c[i] / r.scale[i]
	}
}

// applyLinear brings the residuals from X = 0 to X, and the figures that follow.
func (r *Result) applyLinear() {
	m, _ := r.J.Dims()
	for i := range m {
		r.R[i] += blas64.Dot(vector(r.J.RawRowView(i)), vector(r.X))
	}
	r.SumSquares = squares(r.R)
	r.fitness()
}
