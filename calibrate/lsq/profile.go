package lsq

import (
	"fmt"
	"math"
)

// Profile finds the two values of unknown k at which the sum of squares, least over all
// the other unknowns, stands rise above its minimum at res: with whitened residuals and
// a rise of 3.841 the ends of a 95 % profile-likelihood interval [Venzon]. An end is
// infinite where the sum never rises so far (the residuals set no limit on that side),
// and the bound where the unknown reaches its bound first.
//
// The error is for a fit along the way that does not converge, or one that lies below
// res, which then was not the minimum.
func Profile(p Problem, res *Result, k int, rise float64, s Settings) (lower, upper float64, err error) {
	pr := &profile{Problem: p, res: res, k: k, rise: math.Sqrt(rise), set: s}
	pr.unit = pr.scale()
	if lower, err = pr.end(-1); err != nil {
		return 0, 0, err
	}
	upper, err = pr.end(1)
	return lower, upper, err
}

type profile struct {
	Problem
	res  *Result
	k    int
	rise float64
	set  Settings
	unit float64 // standard deviation of the unknown, or what stands for it
	last []float64
}

// scale is the standard deviation of unknown k, or with the others fixed where there
// is none.
func (p *profile) scale() float64 {
	if sd, err := p.res.SD(); err == nil && sd[p.k] > 0 {
		return sd[p.k]
	}
	m, _ := p.res.J.Dims()
	norm := 0.0
	for i := range m {
		norm = math.Hypot(norm, p.res.J.At(i, p.k))
	}
	if norm == 0 {
		return 1
	}
	return 1 / norm
}

// far is how many standard deviations from the estimate the search goes on. A profile
// that has not risen by then is flat for every practical purpose.
const far = 4096

// end walks out from the estimate until the profile has risen, then closes in. The
// root of the rise is nearly linear in the unknown, so that false position serves.
func (p *profile) end(side float64) (float64, error) {
	at := p.res.X[p.k]
	limit := p.limit(side)
	p.last = append(p.last[:0], p.res.X...)
	a, fa := at, -p.rise
	var b, fb float64
	for d := p.rise; ; d *= 2 {
		b = at + side*d*p.unit
		if side*(b-limit) >= 0 {
			b = limit
		}
		z, err := p.root(b)
		if err != nil {
			return 0, err
		}
		if fb = z - p.rise; fb >= 0 {
			break
		}
		if b == limit {
			return limit, nil
		}
		if d > far {
			return math.Inf(int(side)), nil
		}
		a, fa = b, fb
	}
	return p.close(a, fa, b, fb)
}

// close finds the zero between a and b by false position with the Illinois rule, to
// 1e-7 of a standard deviation.
func (p *profile) close(a, fa, b, fb float64) (float64, error) {
	for range 100 {
		c := (a*fb - b*fa) / (fb - fa)
		if math.IsInf(fb, 0) || math.IsNaN(c) {
			c = a + (b-a)/2
		}
		if math.Abs(b-a) < 1e-7*p.unit {
			return c, nil
		}
		z, err := p.root(c)
		if err != nil {
			return 0, err
		}
		f := z - p.rise
		if math.Abs(f) < 1e-8*p.rise {
			return c, nil
		}
		if (f < 0) == (fa < 0) {
			a, fa = c, f
			fb /= 2
		} else {
			b, fb = a, fa
			a, fa = c, f
		}
	}
	return a, nil
}

// root is the square root of the rise at v; +Inf where v cannot be evaluated.
func (p *profile) root(v float64) (float64, error) {
	q := p.Problem
	q.Lower, q.Upper = bound(p.Lower, p.N, -1), bound(p.Upper, p.N, 1)
	q.Lower[p.k], q.Upper[p.k] = v, v
	res, err := Solve(q, p.last, p.set)
	if err != nil {
		return math.Inf(1), nil
	}
	if res.Status == Stalled || res.Status == IterationLimit {
		return 0, fmt.Errorf("lsq: profile of unknown %d at %g: %v", p.k, v, res.Status)
	}
	drop := p.res.SumSquares - res.SumSquares
	// The minimum is known to the negligible decrease, and to its rounding.
	if drop > p.set.withDefaults().Negligible+1e-9*p.res.SumSquares {
		return 0, fmt.Errorf("lsq: at %g the profile of unknown %d lies %g below the minimum; fit again from there", v, p.k, drop)
	}
	copy(p.last, res.X)
	return math.Sqrt(math.Max(0, -drop)), nil
}

func (p *profile) limit(side float64) float64 {
	b := p.Lower
	if side > 0 {
		b = p.Upper
	}
	if b == nil {
		return math.Inf(int(side))
	}
	return b[p.k]
}
