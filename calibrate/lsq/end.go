package lsq

import (
	"math"

	"gonum.org/v1/gonum/blas/blas64"
	"gonum.org/v1/gonum/mat"
)

// settled says whether the point meets both tolerances, and its relative offset.
func (it *iteration) settled() (bool, float64) {
	l := &it.local
	if len(l.free) == 0 || it.sum == 0 {
		return true, 0
	}
	l.reduce(l.free, l.c)
	r := math.Sqrt(it.sum)
	offset := blas64.Nrm2(vector(l.sub.c[:len(l.free)])) / r
	if offset > it.set.GradientTolerance {
		return false, offset
	}
	l.step(math.Inf(1), 0)
	return l.length(l.p) <= it.set.StepTolerance*(l.length(l.x)+r), offset
}

// polish makes a last undamped Gauss-Newton step, kept if the sum of squares is no
// worse: it squares the error that the tolerances left.
func (it *iteration) polish() {
	l := &it.local
	if it.sum == 0 || len(l.free) == 0 {
		return
	}
	promise, _ := l.step(math.Inf(1), 0)
	if promise <= 0 {
		return
	}
	l.trial(it.xt)
	if gain, ok := it.gain(promise); ok && gain >= 0 {
		if !it.move() {
			it.restore()
		}
	}
}

// stopped names the end where no step can lower the sum of squares any more: it is
// convergence all the same where what is left in sight is rounding or negligible.
func (it *iteration) stopped(offset float64) Status {
	left := offset * offset * it.sum
	if offset <= 10*it.set.GradientTolerance || left <= it.set.Negligible {
		return Converged
	}
	return Stalled
}

// restore brings J back to x after a trial point took its place.
func (it *iteration) restore() {
	// x has been evaluated before, so a failure now would be the caller's doing; J then
	// stays what it is and the gradient in the result shows it.
	_ = it.jacobian(it.local.x)
}

// finish makes the result: rank, condition and what the covariance needs.
func (it *iteration) finish(status Status) (*Result, error) {
	l := &it.local
	r := &Result{X: l.x, R: it.r, J: it.j, SumSquares: it.sum, Status: status, Iterations: it.steps,
		Evaluations: it.evals, AtBound: make([]bool, it.N)}
	for k := range r.AtBound {
		r.AtBound[k] = true
	}
	r.free = append(r.free, l.free...)
	for _, k := range r.free {
		r.AtBound[k] = false
	}
	r.judge()
	if status == Converged && r.Rank < len(r.free) {
		r.Status = RankDeficient
	}
	return r, nil
}

// judge factorises the free columns of J, scaled to unit length, and fills in what is
// read off the factors.
func (r *Result) judge() {
	m, _ := r.J.Dims()
	n := len(r.free)
	rows := max(m, n)
	f := &factor{}
	f.resize(rows, n)
	r.scale = make([]float64, n)
	for i := 0; i < m; i++ {
		row := r.J.RawRowView(i)
		for c, k := range r.free {
			f.a[c*rows+i] = row[k]
		}
	}
	for i := range r.free {
		col := f.column(i)
		r.scale[i] = blas64.Nrm2(vector(col))
		if r.scale[i] > 0 {
			blas64.Scal(1/r.scale[i], vector(col))
		}
	}
	f.decompose()
	r.factor = f
	r.Rank, r.Undetermined, r.Condition = f.rank()
	for i, c := range r.Undetermined {
		r.Undetermined[i] = r.free[c]
	}
	r.fitness()
}

// fitness fills in the gradient and the offset of the residuals.
func (r *Result) fitness() {
	r.Gradient, r.Offset = 0, 0
	size, norm := blas64.Nrm2(vector(r.R)), blas64.Nrm2(vector(r.scale))
	if size == 0 || norm == 0 {
		return
	}
	c := make([]float64, r.factor.m)
	copy(c, r.R)
	r.factor.transform(c)
	n := len(r.free)
	r.Offset = blas64.Nrm2(vector(c[:n])) / size
	g := 0.0
	for k := range n {
		s := r.factor.diag[k]*c[k] + blas64.Dot(vector(r.factor.column(k)[:k]), vector(c[:k]))
		g = math.Hypot(g, s*r.scale[k])
	}
	r.Gradient = g / norm / size
}

// triangle copies R into a dense upper triangle.
func (f *factor) triangle() *mat.TriDense {
	t := mat.NewTriDense(f.n, mat.Upper, nil)
	for k := 0; k < f.n; k++ {
		for i := 0; i < k; i++ {
			t.SetTri(i, k, f.column(k)[i])
		}
		t.SetTri(k, k, f.diag[k])
	}
	return t
}
