package sparse

import (
	"fmt"
	"math"
)

// Solve finds x in A x = b, both of N values in the caller's order; they may be the same
// slice. It panics on another length and after a failed Factorize.
func (f *Factor) Solve(b, x []float64) {
	f.mustFit(b, x)
	f.gather(b, f.w)
	f.solve(f.w)
	f.scatter(f.w, x)
}

// SolveRefined is Solve with one step of iterative refinement in working precision
// against the values last factorised, which makes the answer as good as small changes of
// the single entries of A and b would (R. D. Skeel, Math. Comp. 35 (1980) 817-832). It
// returns the largest entry of b - A x over the largest of b; 0 where b is zero.
func (f *Factor) SolveRefined(b, x []float64) float64 {
	f.mustFit(b, x)
	f.gather(b, f.r)
	scale := largest(f.r)
	copy(f.x, f.r)
	f.solve(f.x)

	f.subtract(f.x, f.r)
	copy(f.w, f.r)
	f.solve(f.w)
	for k, dx := range f.w {
		f.x[k] += dx
	}
	// What is left after the step, from b itself: the old r - A dx would hide the
	// rounding of x.
	f.gather(b, f.r)
	f.subtract(f.x, f.r)
	f.scatter(f.x, x)
	if scale == 0 {
		return 0
	}
	return largest(f.r) / scale
}

// gather takes b into the order of the pivots, scatter back.
func (f *Factor) gather(b, w []float64) {
	for k, i := range f.plan.order {
		w[k] = b[i]
	}
}

func (f *Factor) scatter(w, x []float64) {
	for k, i := range f.plan.order {
		x[i] = w[k]
	}
}

// solve replaces w, in the order of the pivots, by the solution of L D L' x = w.
func (f *Factor) solve(w []float64) {
	p := f.plan
	for k, wk := range w {
		first, end := p.lPtr[k], p.lPtr[k+1]
		l := f.l[first:end]
		for q, i := range p.lRow[first:end] {
			w[i] -= l[q] * wk
		}
	}
	for k := len(w) - 1; k >= 0; k-- {
		first, end := p.lPtr[k], p.lPtr[k+1]
		l := f.l[first:end]
		s := w[k] / f.d[k]
		for q, i := range p.lRow[first:end] {
			s -= l[q] * w[i]
		}
		w[k] = s
	}
}

// subtract takes A x off r, both in the order of the pivots.
func (f *Factor) subtract(x, r []float64) {
	p := f.plan
	for k, xk := range x {
		first, end := p.upPtr[k], p.upPtr[k+1]
		v := f.values[first:end]
		s := f.values[k] * xk
		for q, i := range p.upRow[first-p.n : end-p.n] {
			s += v[q] * x[i]
			r[i] -= v[q] * xk
		}
		r[k] -= s
	}
}

func largest(a []float64) float64 {
	most := 0.0
	for _, v := range a {
		most = math.Max(most, math.Abs(v))
	}
	return most
}

func (f *Factor) mustFit(b, x []float64) {
	f.mustBeDone()
	if n := f.plan.n; len(b) != n || len(x) != n {
		panic(fmt.Sprintf("sparse: vectors of %d and %d values for %d rows", len(b), len(x), n))
	}
}
