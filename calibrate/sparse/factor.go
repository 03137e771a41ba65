package sparse

import (
	"fmt"
	"math"
)

// References
//
//	[D]    T. A. Davis, Direct Methods for Sparse Linear Systems, SIAM 2006, 4.7.
//	[D849] T. A. Davis, Algorithm 849: A concise sparse Cholesky factorization package,
//	       ACM TOMS 31 (2005) 587-591.

// Factor holds the values of one matrix on a Plan and its factors; it belongs to one
// goroutine at a time. Factorize and the solves allocate nothing.
type Factor struct {
	plan   *Plan
	values []float64 // laid out as in Plan
	l, d   []float64
	fill   []int     // end of what is known of each column of L
	y      []float64 // zero between calls
	reach  []float64 // see row
	done   bool      // l and d are those of values

	w, x, r []float64 // room for the solves
	z, zd   []float64 // entries of the inverse on the pattern of L, its diagonal
	inverse bool      // z and zd are those of l and d
}

// NewFactor makes room for the values and the factors.
func (p *Plan) NewFactor() *Factor {
	n := p.n
	return &Factor{plan: p,
		values: make([]float64, n+len(p.upRow)), l: make([]float64, len(p.lRow)),
		d: make([]float64, n), fill: make([]int, n), y: make([]float64, n), reach: make([]float64, n),
		w: make([]float64, n), x: make([]float64, n), r: make([]float64, n),
	}
}

// NotPositive names the row of the caller's matrix whose pivot showed that the matrix is
// not positive definite to working precision. In a network of which a part hangs on
// nothing it is a row of that part.
type NotPositive struct {
	Row   int
	Pivot float64
}

func (e *NotPositive) Error() string {
	return fmt.Sprintf("sparse: pivot %g at row %d is not positive beyond rounding", e.Pivot, e.Row)
}

// leastPivot is the share of its rounding scale (see scaleOf) that a pivot must exceed: 90
// units of rounding, which leaves a solution two digits. In singular matrices the pivot
// that should be zero came to within 1 unit of it in networks of 100 to 100,000 points
// (conductances log-normal, sigma 1 to 6) and to within 21 in full ones of 1,000 rows.
const leastPivot = 1e-14

// Factorize finds L and D for values[e] at the places given to NewPlan; it keeps a copy.
// The error is a *NotPositive: a pivot was negative, NaN, infinite or no larger than
// rounding makes it in a singular matrix. A is not scaled first: the elimination commutes
// with a scaling by powers of two to the last bit, so it would change nothing, and the
// test of the pivots does not depend on the units of the unknowns either.
func (f *Factor) Factorize(values []float64) error {
	p := f.plan
	if len(values) != len(p.place) {
		panic(fmt.Sprintf("sparse: %d values for %d entries", len(values), len(p.place)))
	}
	f.done, f.inverse = false, false
	clear(f.values)
	for e, q := range p.place {
		f.values[q] += values[e]
	}
	copy(f.fill, p.lPtr)
	for k := range f.d {
		if !f.row(k) {
			return &NotPositive{Row: int(p.order[k]), Pivot: f.d[k]}
		}
	}
	f.done = true
	return nil
}

// row finds row k of L and its pivot from the rows above [D, 4.7; D849]: L y = the upper
// part of column k, then l = y / D. It reports whether the pivot is positive.
func (f *Factor) row(k int) bool {
	p := f.plan
	y, d, fill := f.y, f.d, f.fill
	above := p.upper(int32(k))
	for q, v := range f.values[p.upPtr[k]:p.upPtr[k+1]] {
		y[above[q]] = v
	}
	pivot := f.values[k]
	reach := math.Sqrt(pivot)
	for _, i := range p.lCol[p.rPtr[k]:p.rPtr[k+1]] {
		yi := y[i]
		y[i] = 0
		first, end := p.lPtr[i], fill[i]
		rows := p.lRow[first:end]
		l := f.l[first:end][:len(rows)]
		for q, r := range rows {
			y[r] -= l[q] * yi
		}
		lk := yi / d[i]
		pivot -= lk * yi
		reach += math.Abs(lk) * f.reach[i]
		f.l[end] = lk
		fill[i] = end + 1
	}
	// The square of reach is at least scaleOf(k), by the triangle inequality on the rows
	// of L^-1, so the dear test is seldom asked.
	d[k], f.reach[k] = pivot, reach
	return pivot > leastPivot*reach*reach || pivot > 0 && pivot > leastPivot*f.scaleOf(k)
}

// scaleOf is the size against which rounding moves pivot k. The vector v that ends in v_k
// = 1 and solves L' v = e_k has v' A v = d_k, so that
//
//	d_k / sum of a_ii v_i^2
//
// bounds the least eigenvalue of A scaled to a unit diagonal from above, and a relative
// error of u in the entries of A moves d_k by about u times that sum. A comparison with
// the pivot's own a_kk would miss this: a network without a fixed head has v = 1
// throughout, and its last pivot is as uncertain as its strongest pipe.
func (f *Factor) scaleOf(k int) float64 {
	p, v := f.plan, f.x
	v[k] = 1
	s := f.values[k]
	for i := k - 1; i >= 0; i-- {
		first, end := p.lPtr[i], f.fill[i]
		l := f.l[first:end]
		vi := 0.0
		for q, r := range p.lRow[first:end] {
			vi -= l[q] * v[r]
		}
		v[i] = vi
		s += f.values[i] * vi * vi
	}
	return s
}

// LogDet is the natural logarithm of det A, the sum of those of the pivots.
func (f *Factor) LogDet() float64 {
	f.mustBeDone()
	s := 0.0
	for _, d := range f.d {
		s += math.Log(d)
	}
	return s
}

func (f *Factor) mustBeDone() {
	if !f.done {
		panic("sparse: the last Factorize failed, or there was none")
	}
}
