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

// sharpen makes undamped Gauss-Newton steps where the sum of squares can no longer judge
// them: a step counts as long as the offset falls by a tenth, and the sum does not rise
// by more than it was to fall or than is negligible. It returns the offset reached.
func (it *iteration) sharpen(offset float64, rounds int) float64 {
	l := &it.local
	x, r := make([]float64, it.N), make([]float64, it.M)
	for range rounds {
		promise, _ := l.step(math.Inf(1), 0)
		if promise <= 0 {
			return offset
		}
		copy(x, l.x)
		copy(r, it.r)
		l.trial(it.xt)
		if gain, ok := it.gain(promise); !ok || gain*promise < -promise-it.set.Negligible || !it.move() {
			it.restore(x, r)
			return offset
		}
		settled, now := it.settled()
		if now > 0.9*offset {
			it.restore(x, r)
			return offset
		}
		offset = now
		if settled {
			return offset
		}
	}
	return offset
}

// restore goes back to x with residuals r.
func (it *iteration) restore(x, r []float64) {
	copy(it.local.x, x)
	copy(it.r, r)
	it.sum = squares(it.r)
	// x has been evaluated before, so that a failure now would be the caller's doing; J
	// then stays what it is and the gradient in the result shows it.
	_ = it.jacobian(x)
	it.linearise()
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
