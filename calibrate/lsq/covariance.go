package lsq

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"
)

// Covariance of X is (J'J)^-1, formed as R^-1 R^-T from the scaled QR factor. It holds
// for whitened residuals; where only their ratios are known multiply by
// SumSquares/(M - Rank). Unknowns at a bound are fixed: their rows and columns are
// zero. It fails when the free columns are not independent, and names them.
func (r *Result) Covariance() (*mat.SymDense, error) {
	n := len(r.free)
	if r.Rank < n {
		return nil, fmt.Errorf("lsq: no covariance: the residuals determine %d of %d unknowns; fix or give a prior to %v", r.Rank, n, r.Undetermined)
	}
	_, all := r.J.Dims()
	cov := mat.NewSymDense(all, nil)
	if n == 0 {
		return cov, nil
	}
	var inverse mat.TriDense
	// The inverse of a triangle whose rank was established is finite; mat.Condition only
	// repeats what Result.Condition says.
	if err := inverse.InverseTri(r.factor.triangle()); err != nil {
		if _, ok := err.(mat.Condition); !ok {
			return nil, fmt.Errorf("lsq: no covariance: %w", err)
		}
	}
	var free mat.SymDense
	free.SymOuterK(1, &inverse)
	for a, i := range r.free {
		for b := a; b < n; b++ {
			cov.SetSym(i, r.free[b], free.At(a, b)/r.scale[a]/r.scale[b])
		}
	}
	return cov, nil
}

// SD holds the standard deviations, the roots of the diagonal of Covariance.
func (r *Result) SD() ([]float64, error) {
	cov, err := r.Covariance()
	if err != nil {
		return nil, err
	}
	sd := make([]float64, cov.SymmetricDim())
	for i := range sd {
		sd[i] = math.Sqrt(cov.At(i, i))
	}
	return sd, nil
}

// Leverage is the diagonal of the hat matrix J (J'J)^-1 J', one entry a row, over the
// unknowns not at a bound: the squared lengths of the rows of Q. One less it is the
// redundancy of the row; the sum of the leverages is the number of free unknowns. It
// needs full rank and returns nil without it.
func (r *Result) Leverage() []float64 {
	n := len(r.free)
	if r.Rank < n {
		return nil
	}
	m, _ := r.J.Dims()
	h := make([]float64, m)
	e := make([]float64, r.factor.m)
	for k := 0; k < n; k++ {
		clear(e)
		e[k] = 1
		r.factor.restore(e)
		for i := range h {
			h[i] += e[i] * e[i]
		}
	}
	return h
}
