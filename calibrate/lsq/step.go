package lsq

import (
	"math"

	"gonum.org/v1/gonum/blas/blas64"
)

// subproblem is: minimise |R p + c|^2 subject to |D p| <= radius, for a regular
// triangle R (n by n). It keeps its work space between calls.
type subproblem struct {
	tri   factor    // R of the free columns
	c     []float64 // transformed residuals
	d     []float64 // scale of each free column
	p     []float64 // the last step
	top   factor    // R after damping
	low   []float64 // the damping rows, by columns
	rhs   []float64
	under []float64
	y     []float64
}

// solve finds the step and the damping lambda that keeps |D p| within a tenth of the
// radius; lambda is the value of the step before, a good first guess [More, algorithm
// 5.5]. It returns 0 when the undamped step fits.
func (s *subproblem) solve(radius, lambda float64) float64 {
	n := s.tri.n
	s.p = zeroed(s.p, n)
	if n == 0 {
		return 0
	}
	length := s.undamped()
	if length <= 1.1*radius {
		return 0
	}
	// Newton on 1/|D p| from zero gives a lower limit [More, 5.3].
	lower := (length - radius) / radius / s.slope(&s.tri, length)
	upper := s.gradient() / radius
	if upper == 0 {
		return 0
	}
	upper = math.Max(upper, 2*lower)
	lambda = math.Min(math.Max(lambda, lower), upper)
	if lambda == 0 {
		lambda = s.gradient() / length
	}
	for range 12 {
		if lambda <= 0 {
			lambda = math.Max(math.SmallestNonzeroFloat64, 1e-3*upper)
		}
		length = s.damped(lambda)
		over := length - radius
		if math.Abs(over) <= 0.1*radius {
			break
		}
		if over > 0 {
			lower = math.Max(lower, lambda)
		} else {
			upper = math.Min(upper, lambda)
		}
		lambda = math.Max(lower, lambda+over/radius/s.slope(&s.top, length))
	}
	return lambda
}

// undamped puts the Gauss-Newton step into p and returns |D p|.
func (s *subproblem) undamped() float64 {
	for i := range s.p {
		s.p[i] = -s.c[i]
	}
	s.tri.back(s.p)
	return s.length()
}

// length is |D p|.
func (s *subproblem) length() float64 {
	s.y = zeroed(s.y, len(s.p))
	for i, v := range s.p {
		s.y[i] = s.d[i] * v
	}
	return blas64.Nrm2(vector(s.y))
}

// gradient is |D^-1 R'c|.
func (s *subproblem) gradient() float64 {
	s.y = zeroed(s.y, len(s.p))
	for k := range s.y {
		g := s.tri.diag[k]*s.c[k] + blas64.Dot(vector(s.tri.column(k)[:k]), vector(s.c[:k]))
		s.y[k] = g / s.d[k]
	}
	return blas64.Nrm2(vector(s.y))
}

// slope is |T^-T D^2 p|^2/|D p|^2, the negative of the derivative of ln|D p| by lambda,
// for the triangle T that gave p.
func (s *subproblem) slope(t *factor, length float64) float64 {
	s.y = zeroed(s.y, len(s.p))
	for i, v := range s.p {
		s.y[i] = s.d[i] * s.d[i] * v / length
	}
	t.forward(s.y)
	q := blas64.Nrm2(vector(s.y))
	return q * q
}

// damped puts the minimiser of |R p + c|^2 + lambda |D p|^2 into p and returns |D p|.
// The damping rows fill in row by row as the columns are reflected, so that column k
// involves row k and the first k+1 damping rows only.
func (s *subproblem) damped(lambda float64) float64 {
	n := s.tri.n
	s.top.resize(n, n)
	s.low = zeroed(s.low, n*n)
	s.rhs = append(s.rhs[:0], s.c[:n]...)
	s.under = zeroed(s.under, n)
	root := math.Sqrt(lambda)
	for k := 0; k < n; k++ {
		copy(s.top.column(k)[:k], s.tri.column(k)[:k])
		s.top.diag[k] = s.tri.diag[k]
		s.low[k*n+k] = root * s.d[k]
	}
	for k := 0; k < n; k++ {
		v := s.low[k*n : k*n+k+1]
		head := s.top.diag[k]
		norm := math.Hypot(head, blas64.Nrm2(vector(v)))
		if norm == 0 {
			continue
		}
		if head < 0 {
			norm = -norm
		}
		blas64.Scal(1/norm, vector(v))
		head = head/norm + 1
		s.top.diag[k] = -norm
		for j := k + 1; j < n; j++ {
			t := &s.top.column(j)[k]
			w := s.low[j*n : j*n+k+1]
			f := -(head**t + blas64.Dot(vector(v), vector(w))) / head
			*t += f * head
			blas64.Axpy(f, vector(v), vector(w))
		}
		f := -(head*s.rhs[k] + blas64.Dot(vector(v), vector(s.under[:k+1]))) / head
		s.rhs[k] += f * head
		blas64.Axpy(f, vector(v), vector(s.under[:k+1]))
	}
	for i := range s.p {
		s.p[i] = -s.rhs[i]
	}
	s.top.back(s.p)
	return s.length()
}
