package calibrate

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/lsq"
)

// Fit is an estimate with all that is needed to judge it. Look at Converged
// first: nothing may be concluded from a fit that did not settle.
type Fit struct {
	Model *Model
	// Unknowns are those of sound works, then the causes that were allowed.
	Unknowns []Unknown
	Causes   int
	// U is the estimate in prior standard deviations from the prior means.
	U []float64
	// Phi is the least sum of squares, readings and prior rows.
	Phi        float64
	Status     string
	Converged  bool
	Iterations int
	Rank       int
	Condition  float64
	AtBound    []bool
	// J holds the whitened derivatives of the readings at the estimate, one row
	// for each observation; R the whitened differences, predicted minus measured.
	J *mat.Dense
	R []float64

	lower  []float64 // bounds of U; equal for one that is pinned
	upper  []float64
	spread []float64 // prior variance of each unknown in U: 1, or freeCause squared
	weight []float64 // per observation: 1, 0 where left out, or a robust weight
	data   *mat.Cholesky
	cov    *mat.SymDense
	work   *Workspace
	trial  *Workspace
	sound  []lineReader // by round: the works with nothing wrong
}

// Options of one fit.
type Options struct {
	// FreeCauses all but takes the prior rows of the causes away, so that the
	// drop of Phi is the generalised likelihood ratio of the cause.
	FreeCauses bool
	// Start is the starting point in U; nil: prior means and each unknown's Start.
	Start []float64
	// Pin holds unknowns, by their place, at a value of theta.
	Pin map[int]float64
	// Weight divides each observation's own variance; 0 leaves it out; nil: all 1.
	Weight []float64
}

// freeCause widens the prior of a cause that is left free. Thirty spreads leave
// 1/900 of its prior row, which moves Phi by less than 0.01 for any cause of
// plausible size, and keeps the problem determined.
const freeCause = 30

// negligible is a drop of Phi that no longer matters: limits stand between 4 and 15,
// and with heads solved to 1e-10 m rounding stays below it.
const negligible = 1e-5

// logReach bounds how far ln roughness and ln K may run: e^9 is a factor of 8,000,
// beyond any pipe or valve that still passes water.
const logReach = 9

// Fit estimates the unknowns of sound works together with the causes given, by
// trust-region least squares on the QR factors of the stacked Jacobian.
func (m *Model) Fit(causes []Unknown, o Options) (*Fit, error) {
	f, err := m.prepare(causes, o)
	if err != nil {
		return nil, err
	}
	n, k := len(m.Obs), len(f.U)
	p := lsq.Problem{M: n + k, N: k, Lower: f.lower, Upper: f.upper,
		Residuals: func(u, r []float64) error {
			if err := f.evaluate(u, r[:n]); err != nil {
				return err
			}
			for c := range u {
				r[n+c] = u[c] / math.Sqrt(f.spread[c])
			}
			return nil
		},
		Jacobian: func(u []float64, j *mat.Dense) error {
			j.Zero()
			for c := range u {
				j.Set(n+c, c, 1/math.Sqrt(f.spread[c]))
			}
			return f.derive(u, j)
		},
	}
	res, err := lsq.Solve(p, f.U, lsq.Settings{Negligible: negligible})
	if err != nil {
		return nil, err
	}
	if !res.Status.OK() {
		// Where the way from the prior means is long (flows that nobody stated), the
		// data-space form often comes nearer in fewer steps; go on from there.
		if g, err := m.Refit(causes, o); err == nil && g.Phi < res.SumSquares {
			if again, err := lsq.Solve(p, g.U, lsq.Settings{Negligible: negligible}); err == nil {
				res = again
			}
		}
	}
	f.U, f.Phi = res.X, res.SumSquares
	f.Status, f.Converged = res.Status.String(), res.Status.OK()
	f.Iterations, f.Rank, f.Condition, f.AtBound = res.Iterations, res.Rank, res.Condition, res.AtBound
	return f, f.settle()
}

// Sound fits sound works. Where something is left open (a draw-off or a level that
// nobody stated), its prior is centred on a first estimate and the fit is done again, so
// that only the readings speak of it. It moves the model's own priors: call it before
// the model is shared.
func (m *Model) Sound() (*Fit, error) {
	f, err := m.Fit(nil, Options{})
	if err != nil || !f.Converged {
		return f, err
	}
	again := false
	start := append([]float64(nil), f.U...)
	for k := range m.Unknowns {
		if m.Unknowns[k].Open {
			m.Unknowns[k].Center, start[k], again = f.Theta(k), 0, true
		}
	}
	if !again {
		return f, nil
	}
	return m.Fit(nil, Options{Start: start})
}

// prepare makes the empty fit: unknowns, starting point, prior variances, weights.
func (m *Model) prepare(causes []Unknown, o Options) (*Fit, error) {
	if len(m.Obs) == 0 {
		return nil, errors.New("no reading can be used, so there is nothing to fit")
	}
	f := &Fit{Model: m, Causes: len(causes), work: m.NewWorkspace()}
	f.Unknowns = append(append(f.Unknowns, m.Unknowns...), causes...)
	k := len(f.Unknowns)
	f.U, f.spread, f.AtBound = make([]float64, k), make([]float64, k), make([]bool, k)
	f.lower, f.upper = make([]float64, k), make([]float64, k)
	f.R, f.J = make([]float64, len(m.Obs)), mat.NewDense(len(m.Obs), k, nil)
	for c, x := range f.Unknowns {
		f.spread[c] = 1
		if o.FreeCauses && c >= len(m.Unknowns) {
			f.spread[c] = freeCause * freeCause
		}
		f.U[c] = x.Start / x.SD
		if c < len(o.Start) {
			f.U[c] = o.Start[c]
		}
		f.lower[c], f.upper[c] = x.bounds()
		if theta, ok := o.Pin[c]; ok {
			u := (theta - x.Center) / x.SD
			f.lower[c], f.upper[c] = u, u
		}
		f.U[c] = clamp(f.U[c], f.lower[c], f.upper[c])
	}
	f.weight = m.weights(o.Weight)
	return f, nil
}

// Leave keeps observation i out of every later fit: it is known to be a slip of the pen.
// Its place in the list stays, with weight 0.
func (m *Model) Leave(i int) {
	if m.left == nil {
		m.left = map[int]bool{}
	}
	m.left[i] = true
}

// OpenRounds marks the rounds in which a flow or a level was not stated.
func (m *Model) OpenRounds() map[int]bool {
	out := map[int]bool{}
	for _, u := range m.Unknowns {
		if !u.Open {
			continue
		}
		for _, t := range u.Targets {
			out[t.round] = true
		}
	}
	return out
}

// Left reports whether observation i is kept out.
func (m *Model) Left(i int) bool { return m.left[i] }

// weights puts the observations that are left out into the weights of a fit.
func (m *Model) weights(w []float64) []float64 {
	if len(m.left) == 0 {
		return w
	}
	out := make([]float64, len(m.Obs))
	for i := range out {
		out[i] = 1
		if w != nil {
			out[i] = w[i]
		}
		if m.left[i] {
			out[i] = 0
		}
	}
	return out
}

// Prior is the state of knowledge before any reading: everything at its expected
// value, with V the covariance that the readings should have then.
func (m *Model) Prior() (*Fit, error) {
	f, err := m.prepare(nil, Options{})
	if err != nil {
		return nil, err
	}
	f.Status = "not fitted"
	return f, f.settle()
}

// Surprise is how far observation i stands from what was expected before it was read,
// measured minus expected over the standard deviation of that, and the latter in the
// unit of its Value.
func (f *Fit) Surprise(i int) (z, sd float64) {
	v := 1.0
	for c, x := range f.J.RawRowView(i) {
		v += x * x * f.spread[c]
	}
	return -f.R[i] / math.Sqrt(v), math.Sqrt(v) * f.Model.Obs[i].Head.Own
}

// evaluate fills r with the whitened differences of the readings at u.
func (f *Fit) evaluate(u, r []float64) error {
	f.work.set(f.Unknowns, u)
	if err := f.work.solve(); err != nil {
		return err
	}
	return f.work.differences(f.weight, r)
}

// derive fills the first rows of j with the whitened derivatives at u.
func (f *Fit) derive(u []float64, j *mat.Dense) error {
	f.work.set(f.Unknowns, u)
	if err := f.work.solve(); err != nil {
		return err
	}
	return f.work.derivatives(f.weight, f.Unknowns, j)
}

// settle leaves everything evaluated at the estimate and factorises the data-space
// covariance V = I + J P J'.
func (f *Fit) settle() error {
	if err := f.evaluate(f.U, f.R); err != nil {
		return err
	}
	if err := f.derive(f.U, f.J); err != nil {
		return err
	}
	for c := range f.Unknowns {
		f.AtBound[c] = f.U[c] <= f.lower[c] || f.U[c] >= f.upper[c]
	}
	f.cov = nil
	var err error
	f.data, err = f.dataCovariance(f.J)
	return err
}

// dataCovariance factorises V = I + J P J', the covariance of the whitened
// readings under the priors. It is positive definite by construction.
func (f *Fit) dataCovariance(j *mat.Dense) (*mat.Cholesky, error) {
	n, k := j.Dims()
	scaled := mat.NewDense(n, k, nil)
	for i := 0; i < n; i++ {
		src, dst := j.RawRowView(i), scaled.RawRowView(i)
		for c := range src {
			dst[c] = src[c] * math.Sqrt(f.spread[c])
			if f.AtBound[c] {
				dst[c] = 0 // an unknown on its bound is not free to move
			}
		}
	}
	v := mat.NewSymDense(n, nil)
	v.SymOuterK(1, scaled)
	for i := 0; i < n; i++ {
		v.SetSym(i, i, v.At(i, i)+1)
	}
	var ch mat.Cholesky
	if !ch.Factorize(v) {
		return nil, fmt.Errorf("the covariance of the %d readings cannot be factorised; a reading has no finite uncertainty", n)
	}
	return &ch, nil
}

// LnDet is ln det(I + J P J') = ln det(P) + ln det(P^-1 + J'J) (Sylvester), which
// the evidence of a cause needs.
func (f *Fit) LnDet() float64 { return f.data.LogDet() }

// Cov is the covariance of U, (P^-1 + J'J)^-1, factorised with unit diagonal: the
// information of an open flow may be 1e9 times that of a roughness, and its small
// variance would drown in P - P J' V^-1 J P.
func (f *Fit) Cov() *mat.SymDense {
	if f.cov != nil {
		return f.cov
	}
	_, k := f.J.Dims()
	info := mat.NewSymDense(k, nil)
	info.SymOuterK(1, f.J.T())
	scale := make([]float64, k)
	for i := range scale {
		if f.AtBound[i] {
			pin(info, i)
		} else {
			info.SetSym(i, i, info.At(i, i)+1/f.spread[i])
		}
		scale[i] = 1 / math.Sqrt(info.At(i, i))
	}
	for i := 0; i < k; i++ {
		for j := i; j < k; j++ {
			info.SetSym(i, j, info.At(i, j)*scale[i]*scale[j])
		}
	}
	var ch mat.Cholesky
	c := mat.NewSymDense(k, nil)
	if ch.Factorize(info) {
		// The error of InverseTo is a condition number; priors bound it.
		_ = ch.InverseTo(c)
	}
	for i := 0; i < k; i++ {
		for j := i; j < k; j++ {
			c.SetSym(i, j, c.At(i, j)*scale[i]*scale[j])
		}
		if f.AtBound[i] {
			c.SetSym(i, i, 0)
		}
	}
	f.cov = c
	return c
}

// pin takes an unknown that stands on its bound out of the information matrix.
func pin(info *mat.SymDense, c int) {
	for i := 0; i < info.SymmetricDim(); i++ {
		info.SetSym(i, c, 0)
	}
	info.SetSym(c, c, 1)
}

// bounds of an unknown in prior standard deviations.
func (x Unknown) bounds() (lo, hi float64) {
	lo, hi = math.Inf(-1), math.Inf(1)
	if x.Log {
		lo, hi = -logReach/x.SD, logReach/x.SD
	}
	if x.Quantity == "head_factor" {
		lo, hi = -0.95/x.SD, 3/x.SD // a machine that gives nothing at all is stopped
	}
	if x.Sign > 0 {
		lo = 0
	}
	if x.Sign < 0 {
		hi = 0
	}
	return lo, hi
}
