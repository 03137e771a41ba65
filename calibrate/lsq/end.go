package lsq

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/blas/blas64"
	"gonum.org/v1/gonum/mat"
)

// settled says whether the point meets both tolerances, and its relative offset: what
// a Gauss-Newton step within the bounds would take away.
func (it *iteration) settled() (bool, float64) {
	l := &it.local
	if it.sum == 0 {
		return true, 0
	}
	promise, _ := l.step(math.Inf(1), 0)
	offset := math.Sqrt(promise / it.sum)
	if offset > it.set.GradientTolerance {
		return false, offset
	}
	return l.length(l.p) <= it.set.StepTolerance*(l.length(l.x)+math.Sqrt(it.sum)), offset
}

// polish makes a last undamped Gauss-Newton step, kept if the sum of squares is no
// worse: it squares the error that the tolerances left.
func (it *iteration) polish() {
	l := &it.local
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

// judge fills in what is read off the factors of J.
func (r *Result) judge() {
	r.factorise()
	r.Rank, r.Undetermined, r.Condition = r.factor.rank(r.factor.m)
	for i, c := range r.Undetermined {
		r.Undetermined[i] = r.free[c]
	}
	r.fitness()
}

// factorise decomposes the free columns of J, scaled to unit length.
func (r *Result) factorise() {
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
}

// fitness fills in the gradient and the offset of the residuals.
func (r *Result) fitness() {
	r.Gradient, r.Offset = 0, 0
	size, norm := blas64.Nrm2(vector(r.R)), blas64.Nrm2(vector(r.scale))
	if size == 0 || norm == 0 {
		return
	}
	// Reflectors of dependent columns point anywhere; the projection on the space of the
	// columns needs an independent set.
	d := r.determined()
	c := make([]float64, d.factor.m)
	copy(c, r.R)
	d.factor.transform(c)
	r.Offset = blas64.Nrm2(vector(c[:len(d.free)])) / size
	g := 0.0
	for _, k := range r.free {
		s := 0.0
		for i, v := range r.R {
			s += v * r.J.At(i, k)
		}
		g = math.Hypot(g, s)
	}
	r.Gradient = g / norm / size
}

// determined is r itself, or where its free columns are dependent the same with the
// undetermined ones left out.
func (r *Result) determined() *Result {
	if len(r.Undetermined) == 0 {
		return r
	}
	part := &Result{X: r.X, R: r.R, J: r.J}
	for _, k := range r.free {
		if !slices.Contains(r.Undetermined, k) {
			part.free = append(part.free, k)
		}
	}
	part.factorise()
	return part
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
