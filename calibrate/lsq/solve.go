package lsq

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/blas/blas64"
	"gonum.org/v1/gonum/mat"
)

// Solve minimises the sum of squares from start. The error is for faults of the
// caller's: lengths that do not fit, bounds that cross, a start that cannot be
// evaluated. How the iteration ended is in Result.Status. A start outside its bounds
// is moved onto them.
func Solve(p Problem, start []float64, s Settings) (*Result, error) {
	it, err := begin(p, start, s.withDefaults())
	if err != nil {
		return nil, err
	}
	status := it.iterate()
	return it.finish(status)
}

// iteration is the state of one Solve.
type iteration struct {
	Problem
	set   Settings
	local local
	r     []float64
	j     *mat.Dense
	xt    []float64 // trial point
	rt    []float64
	sum   float64
	steps int
	evals int
}

func begin(p Problem, start []float64, s Settings) (*iteration, error) {
	if p.M < 1 || p.N < 1 || p.Residuals == nil || p.Jacobian == nil {
		return nil, errors.New("lsq: a problem needs residuals, their Jacobian, and at least one row and one unknown")
	}
	if len(start) != p.N || p.Lower != nil && len(p.Lower) != p.N || p.Upper != nil && len(p.Upper) != p.N {
		return nil, fmt.Errorf("lsq: start (%d) and bounds (%d, %d) must have as many entries as there are unknowns (%d)",
			len(start), len(p.Lower), len(p.Upper), p.N)
	}
	it := &iteration{Problem: p, set: s, r: make([]float64, p.M), rt: make([]float64, p.M),
		xt: make([]float64, p.N), j: mat.NewDense(p.M, p.N, nil)}
	l := &it.local
	l.x, l.d = append([]float64(nil), start...), make([]float64, p.N)
	l.lower, l.upper = bound(p.Lower, p.N, -1), bound(p.Upper, p.N, 1)
	for k, v := range l.x {
		if !(l.lower[k] <= l.upper[k]) {
			return nil, fmt.Errorf("lsq: bounds of unknown %d cross: %g to %g", k, l.lower[k], l.upper[k])
		}
		if math.IsNaN(v) || math.IsInf(v, 0) {
			return nil, fmt.Errorf("lsq: start of unknown %d is %g", k, v)
		}
		l.x[k] = math.Min(math.Max(v, l.lower[k]), l.upper[k])
	}
	if err := it.residuals(l.x, it.r); err != nil {
		return nil, fmt.Errorf("lsq: the start cannot be evaluated: %w", err)
	}
	if err := it.jacobian(l.x); err != nil {
		return nil, fmt.Errorf("lsq: the start cannot be evaluated: %w", err)
	}
	it.sum = squares(it.r)
	return it, nil
}

func bound(b []float64, n int, sign int) []float64 {
	if b != nil {
		return append([]float64(nil), b...)
	}
	b = make([]float64, n)
	for i := range b {
		b[i] = math.Inf(sign)
	}
	return b
}

var errNotFinite = errors.New("a residual or derivative is not finite")

func (it *iteration) residuals(x, r []float64) error {
	it.evals++
	if err := it.Problem.Residuals(x, r); err != nil {
		return err
	}
	if s := squares(r); math.IsNaN(s) || math.IsInf(s, 0) {
		return errNotFinite
	}
	return nil
}

func (it *iteration) jacobian(x []float64) error {
	it.j.Zero()
	if err := it.Problem.Jacobian(x, it.j); err != nil {
		return err
	}
	for i := 0; i < it.M; i++ {
		for _, v := range it.j.RawRowView(i) {
			if math.IsNaN(v) || math.IsInf(v, 0) {
				return errNotFinite
			}
		}
	}
	return nil
}

func squares(r []float64) float64 {
	n := blas64.Nrm2(vector(r))
	return n * n
}

// linearise factorises the Jacobian and transforms the residuals.
func (it *iteration) linearise() {
	l := &it.local
	m := max(it.M, it.N)
	l.qr.resize(m, it.N)
	for i := 0; i < it.M; i++ {
		for k, v := range it.j.RawRowView(i) {
			l.qr.a[k*m+i] = v
		}
	}
	for k := range l.d {
		l.d[k] = math.Max(l.d[k], blas64.Nrm2(vector(l.qr.column(k))))
		if l.d[k] == 0 {
			// A column that has always been zero moves nothing; any scale will do.
			l.d[k] = 1
		}
	}
	l.qr.decompose()
	l.c = zeroed(l.c, m)
	copy(l.c, it.r)
	l.qr.transform(l.c)
	l.release()
}

// noise is the share of the sum of squares below which a decrease cannot be told from
// rounding.
const noise = 16 * epsilon

// iterate runs until a status is reached, leaving x, r and J belonging together.
func (it *iteration) iterate() Status {
	l := &it.local
	it.linearise()
	radius := it.set.Radius
	if radius <= 0 {
		radius = math.Max(l.length(l.x), math.Sqrt(it.sum))
	}
	lambda := 0.0
	for {
		settled, offset := it.settled()
		if settled {
			if offset > 1e-3*it.set.GradientTolerance {
				it.sharpen(offset, 1)
			}
			return Converged
		}
		for moved := false; !moved; {
			if it.steps++; it.steps > it.set.MaxIterations {
				return IterationLimit
			}
			var promise float64
			promise, lambda = l.step(radius, lambda)
			length := l.length(l.p)
			if length <= epsilon*l.length(l.x) || promise <= noise*it.sum {
				return it.stopped(it.sharpen(offset, 20))
			}
			l.trial(it.xt)
			gain, ok := it.gain(promise)
			radius, lambda = resize(radius, lambda, length, gain, ok)
			moved = ok && gain >= 1e-4 && it.move()
			if ok && gain >= 1e-4 && !moved {
				radius = 0.25 * math.Min(radius, length)
			}
		}
	}
}

// gain evaluates the trial point and returns the decrease of the sum of squares over
// the promised one.
func (it *iteration) gain(promise float64) (gain float64, ok bool) {
	if it.residuals(it.xt, it.rt) != nil {
		return 0, false
	}
	fall := 0.0
	for i, v := range it.r {
		fall += (v - it.rt[i]) * (v + it.rt[i])
	}
	return fall / promise, true
}

// resize updates radius and damping by the gain [More, section 4].
func resize(radius, lambda, length, gain float64, ok bool) (float64, float64) {
	switch {
	case !ok || gain < 0:
		return 0.1 * math.Min(radius, 10*length), 10 * lambda
	case gain <= 0.25:
		return 0.5 * math.Min(radius, 2*length), 2 * lambda
	case gain >= 0.75 || lambda == 0:
		return 2 * length, 0.5 * lambda
	}
	return radius, lambda
}

// move takes the trial point, if its Jacobian can be had.
func (it *iteration) move() bool {
	if it.jacobian(it.xt) != nil {
		return false
	}
	it.local.x, it.xt = it.xt, it.local.x
	it.r, it.rt = it.rt, it.r
	it.sum = squares(it.r)
	it.linearise()
	return true
}
