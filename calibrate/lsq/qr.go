package lsq

import (
	"math"

	"gonum.org/v1/gonum/blas/blas64"
)

// factor is a Householder QR factorisation, held by columns in one slice so that the
// reflections run over contiguous memory. Each column's reflection ends at the last
// row where it or any column before it has an entry: stacked prior rows, which are
// mostly zero, then cost next to nothing.
type factor struct {
	m, n int
	a    []float64 // column k is a[k*m:(k+1)*m]; below the diagonal the reflectors
	diag []float64 // diagonal of R
	last []int     // one past the last row that the reflector of a column reaches
}

// resize makes the factor m by n, with its memory re-used, and its entries zero.
func (f *factor) resize(m, n int) {
	f.m, f.n = m, n
	f.a = zeroed(f.a, m*n)
	f.diag = zeroed(f.diag, n)
	if cap(f.last) < n {
		f.last = make([]int, n)
	}
	f.last = f.last[:n]
}

func zeroed(s []float64, n int) []float64 {
	if cap(s) < n {
		return make([]float64, n)
	}
	s = s[:n]
	clear(s)
	return s
}

func (f *factor) column(k int) []float64 { return f.a[k*f.m : (k+1)*f.m] }

// decompose overwrites the columns by R above and the reflectors on and below the
// diagonal [Golub, algorithm 5.2.1]. It needs m >= n.
func (f *factor) decompose() {
	reach := 0
	for k := 0; k < f.n; k++ {
		c := f.column(k)
		end := f.m
		for end > reach && c[end-1] == 0 {
			end--
		}
		reach = max(end, k+1)
		f.last[k] = reach
		if reach == k+1 {
			// Already triangular here: a reflector of zero stands for none.
			f.diag[k], c[k] = c[k], 0
			continue
		}
		f.diag[k] = reflector(c[k:reach])
		if f.diag[k] == 0 {
			continue
		}
		for j := k + 1; j < f.n; j++ {
			reflect(c[k:reach], f.column(j)[k:reach])
		}
	}
}

// reflector turns x into the vector v of the reflection I - v v'/v_0 that maps x onto
// (d, 0, ..., 0) and returns d; zero when there is nothing to reflect.
func reflector(x []float64) (d float64) {
	norm := blas64.Nrm2(vector(x))
	if norm == 0 {
		return 0
	}
	if x[0] < 0 {
		norm = -norm
	}
	blas64.Scal(1/norm, vector(x))
	x[0]++
	return -norm
}

// reflect applies the reflection of v to y.
func reflect(v, y []float64) {
	if s := blas64.Dot(vector(v), vector(y)); s != 0 {
		blas64.Axpy(-s/v[0], vector(v), vector(y))
	}
}

func vector(x []float64) blas64.Vector { return blas64.Vector{N: len(x), Inc: 1, Data: x} }

// transform overwrites y (length m) by Q'y.
func (f *factor) transform(y []float64) {
	for k := 0; k < f.n; k++ {
		if f.diag[k] != 0 {
			reflect(f.column(k)[k:f.last[k]], y[k:f.last[k]])
		}
	}
}

// restore overwrites y (length m) by Q y.
func (f *factor) restore(y []float64) {
	for k := f.n - 1; k >= 0; k-- {
		if f.diag[k] != 0 {
			reflect(f.column(k)[k:f.last[k]], y[k:f.last[k]])
		}
	}
}

// back overwrites the first n entries of y by R^-1 y. R must not be singular.
func (f *factor) back(y []float64) {
	for k := f.n - 1; k >= 0; k-- {
		y[k] /= f.diag[k]
		blas64.Axpy(-y[k], vector(f.column(k)[:k]), vector(y[:k]))
	}
}

// forward overwrites the first n entries of y by R^-T y.
func (f *factor) forward(y []float64) {
	for k := 0; k < f.n; k++ {
		y[k] = (y[k] - blas64.Dot(vector(f.column(k)[:k]), vector(y[:k]))) / f.diag[k]
	}
}

// times puts R p into out.
func (f *factor) times(p, out []float64) {
	clear(out[:f.n])
	for k := 0; k < f.n; k++ {
		blas64.Axpy(p[k], vector(f.column(k)[:k]), vector(out[:k]))
		out[k] += f.diag[k] * p[k]
	}
}

// singular says whether a diagonal entry of R, relative to the given size of its
// column, is no more than the rounding of rows-long sums.
func (f *factor) singular(scale []float64, rows int) bool {
	for k, d := range f.diag {
		if math.Abs(d) <= rounding(rows)*scale[k] {
			return true
		}
	}
	return false
}

// rounding is the share of a column's length that reflections of so many rows may leave
// where nothing should be left. The bound of [Golub, section 5.2.1] is proportional to
// the rows; ten of it covers its constant.
func rounding(rows int) float64 { return 10 * float64(rows) * epsilon }

// epsilon is the spacing of the double-precision numbers at one.
const epsilon = 0x1p-52
