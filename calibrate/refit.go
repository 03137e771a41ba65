package calibrate

import (
	"math"

	"gonum.org/v1/gonum/mat"
)

// Refit estimates the same as Fit, in data space: one reading-by-reading system in
// each iteration instead of a factorisation by unknowns. It serves the many
// trial fits of the diagnosis; the fit that is reported comes from Fit, and a test
// holds the two together.
//
// A Gauss-Newton step from u with differences r and derivatives J goes to
//
//	u+ = P J' (I + J P J')^-1 (J u - r)
//
// (Tarantola 2005, eq. 3.39 to 3.41), shortened until Phi falls.
func (m *Model) Refit(causes []Unknown, o Options) (*Fit, error) {
	f, err := m.prepare(causes, o)
	if err != nil {
		return nil, err
	}
	const limit = 40
	if err := f.evaluate(f.U, f.R); err != nil {
		return nil, err
	}
	f.Phi = f.phi(f.U, f.R)
	trial, r := make([]float64, len(f.U)), make([]float64, len(f.R))
	for f.Iterations = 1; f.Iterations <= limit; f.Iterations++ {
		if err := f.derive(f.U, f.J); err != nil {
			return nil, err
		}
		step, err := f.dataStep()
		if err != nil {
			return nil, err
		}
		before, moved := f.Phi, false
		for scale := 1.0; scale > 1e-4; scale /= 3 {
			for c := range trial {
				trial[c] = clamp(f.U[c]+scale*step[c], f.lower[c], f.upper[c])
			}
			if f.evaluate(trial, r) != nil {
				continue // this far the works cannot be solved: step less
			}
			if phi := f.phi(trial, r); phi < f.Phi {
				f.Phi, moved = phi, true
				copy(f.U, trial)
				copy(f.R, r)
				break
			}
		}
		// A drop of a thousandth in Phi is far below what any decision rests on
		// (limits stand between 4 and 15).
		if !moved || before-f.Phi < 1e-3 {
			f.Converged = true
			break
		}
	}
	f.Status = "settled"
	if !f.Converged {
		f.Status = "iteration limit"
	}
	return f, f.settle()
}

// phi is the sum of squares of differences and prior rows.
func (f *Fit) phi(u, r []float64) float64 {
	s := 0.0
	for _, x := range r {
		s += x * x
	}
	for c, x := range u {
		s += x * x / f.spread[c]
	}
	return s
}

// dataStep is u+ - u. An unknown on a bound that the step would push through it
// stays where it is.
func (f *Fit) dataStep() ([]float64, error) {
	n, k := f.J.Dims()
	clear(f.AtBound)
	step := make([]float64, k)
	for pass := 0; pass < 3; pass++ {
		ch, err := f.dataCovariance(f.J)
		if err != nil {
			return nil, err
		}
		rhs := mat.NewVecDense(n, nil)
		for i := 0; i < n; i++ {
			s := -f.R[i]
			for c, v := range f.J.RawRowView(i) {
				if !f.AtBound[c] {
					s += v * f.U[c]
				}
			}
			rhs.SetVec(i, s)
		}
		var y mat.VecDense
		if err := ch.SolveVecTo(&y, rhs); err != nil {
			return nil, err
		}
		clear(step)
		for i := 0; i < n; i++ {
			yi := y.AtVec(i)
			for c, v := range f.J.RawRowView(i) {
				step[c] += v * yi
			}
		}
		again := false
		for c := range step {
			if f.AtBound[c] {
				step[c] = 0
				continue
			}
			step[c] = step[c]*f.spread[c] - f.U[c]
			if (f.U[c] <= f.lower[c] && step[c] < 0) || (f.U[c] >= f.upper[c] && step[c] > 0) {
				f.AtBound[c], again = true, true
			}
		}
		if !again {
			break
		}
	}
	return step, nil
}

// Profiled is the least Phi, as far as the readings are linear in everything but
// the causes, when the causes are moved to the values theta with all other
// unknowns free:
//
//	Phi(theta) = (r(theta) - J u)' (I + J P J')^-1 (r(theta) - J u)
//
// with r evaluated by the steady model itself. It screens strongly curved causes
// (ln K over decades) without refitting.
func (f *Fit) Profiled(causes []Unknown, theta []float64) (float64, error) {
	unknowns := append(append([]Unknown(nil), f.Unknowns...), causes...)
	u := append(append([]float64(nil), f.U...), theta...)
	for i, c := range causes {
		u[len(f.U)+i] /= c.SD
	}
	w := f.trialSpace()
	w.set(unknowns, u)
	if err := w.solve(); err != nil {
		return math.Inf(1), err
	}
	n := len(f.R)
	r := make([]float64, n)
	if err := w.differences(f.weight, r); err != nil {
		return math.Inf(1), err
	}
	v := mat.NewVecDense(n, r)
	for i := 0; i < n; i++ {
		for c, x := range f.J.RawRowView(i) {
			if !f.AtBound[c] {
				r[i] -= x * f.U[c]
			}
		}
	}
	var y mat.VecDense
	if err := f.data.SolveVecTo(&y, v); err != nil {
		return math.Inf(1), err
	}
	return mat.Dot(v, &y), nil
}

// trialSpace is a second workspace, so that the first stays at the estimate.
func (f *Fit) trialSpace() *Workspace {
	if f.trial == nil {
		f.trial = f.Model.NewWorkspace()
		copy(f.trial.states, f.work.states)
	}
	return f.trial
}

// Columns holds the whitened derivatives of the readings by causes that are not
// in the fit, per unit of theta, at the estimate: one adjoint solve a reading.
func (f *Fit) Columns(causes []Unknown) (*mat.Dense, error) {
	n := len(f.R)
	out := mat.NewDense(n, len(causes), nil)
	if len(causes) == 0 {
		return out, nil
	}
	if err := f.work.derivatives(f.weight, causes, out); err != nil {
		return nil, err
	}
	for i := 0; i < n; i++ {
		row := out.RawRowView(i)
		for c := range row {
			row[c] /= causes[c].SD
		}
	}
	return out, nil
}

// Whiten solves V y = b for the data-space covariance V = I + J P J', in place.
func (f *Fit) Whiten(b *mat.VecDense) *mat.VecDense {
	var y mat.VecDense
	if err := f.data.SolveVecTo(&y, b); err != nil {
		panic("calibrate: " + err.Error()) // V is at least the unit matrix
	}
	return &y
}

// Innovation is r - J u: minus what the readings say against the prior means,
// linearised at the estimate.
func (f *Fit) Innovation() *mat.VecDense {
	v := mat.NewVecDense(len(f.R), append([]float64(nil), f.R...))
	for i := range f.R {
		s := 0.0
		for c, x := range f.J.RawRowView(i) {
			if !f.AtBound[c] {
				s += x * f.U[c]
			}
		}
		v.SetVec(i, v.AtVec(i)-s)
	}
	return v
}

// Differences are the whitened differences of all readings, predicted minus measured, at
// U of sound works and the causes given.
func (m *Model) Differences(causes []Unknown, u []float64) ([]float64, error) {
	f, err := m.prepare(causes, Options{Start: u})
	if err != nil {
		return nil, err
	}
	r := make([]float64, len(m.Obs))
	return r, f.evaluate(f.U, r)
}
