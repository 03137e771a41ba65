package lsq

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/blas/blas64"
)

// rank finds the numerical rank of R, the columns left over, and the condition number.
// R should have columns of about unit length; rows is the number of rows it came from.
func (f *factor) rank(rows int) (rank int, over []int, condition float64) {
	if f.n == 0 {
		return 0, nil, 1
	}
	if !slices.Contains(f.diag, 0) {
		// Pivoting costs as much as the factorisation and is only for doubtful cases.
		if c := f.condition(); c < 1e8 {
			return f.n, nil, c
		}
	}
	return f.pivot(rounding(rows))
}

// pivot finds the rank by QR with column pivoting [Golub, algorithm 5.4.1].
func (f *factor) pivot(tol float64) (rank int, over []int, condition float64) {
	n := f.n
	t := &factor{}
	t.resize(n, n)
	perm := make([]int, n)
	for k := range perm {
		perm[k] = k
		copy(t.column(k)[:k], f.column(k)[:k])
		t.column(k)[k] = f.diag[k]
	}
	for k := 0; k < n; k++ {
		// Norms are formed afresh: downdating them loses what decides the rank.
		best, size := k, -1.0
		for j := k; j < n; j++ {
			if s := blas64.Nrm2(vector(t.column(j)[k:])); s > size {
				best, size = j, s
			}
		}
		if best != k {
			perm[k], perm[best] = perm[best], perm[k]
			blas64.Swap(vector(t.column(k)), vector(t.column(best)))
		}
		t.diag[k] = reflector(t.column(k)[k:])
		if math.Abs(t.diag[k]) <= tol*math.Abs(t.diag[0]) || t.diag[k] == 0 {
			over = append(over, perm[k:]...)
			slices.Sort(over)
			return k, over, math.Inf(1)
		}
		for j := k + 1; j < n; j++ {
			reflect(t.column(k)[k:], t.column(j)[k:])
		}
	}
	return n, nil, t.condition()
}

// condition is the ratio of the extreme singular values of a regular R by power
// iteration with R'R and its inverse. Each ends when it gains less than 1e-6, which
// puts the result within a few parts in a thousand, always on the low side.
func (f *factor) condition() float64 {
	y := make([]float64, f.n)
	z := make([]float64, f.n)
	largest := power(y, func() {
		f.times(y, z)
		for k := range y {
			y[k] = f.diag[k]*z[k] + blas64.Dot(vector(f.column(k)[:k]), vector(z[:k]))
		}
	})
	inverse := power(y, func() {
		f.forward(y)
		f.back(y)
	})
	return math.Sqrt(largest) * math.Sqrt(inverse)
}

// power returns the largest eigenvalue of the positive definite map that apply makes
// on y in place.
func power(y []float64, apply func()) float64 {
	for i := range y {
		// Any start with no special direction; entries vary so that symmetric problems do
		// not start orthogonal to the answer.
		y[i] = 1 + 0.37*math.Sin(float64(3*i+1))
	}
	value := 0.0
	for range 500 {
		blas64.Scal(1/blas64.Nrm2(vector(y)), vector(y))
		apply()
		v := blas64.Nrm2(vector(y))
		if v <= value*(1+1e-6) {
			return v
		}
		value = v
	}
	return value
}
