package lsq

import (
	"math"
	"slices"

	"gonum.org/v1/gonum/blas/blas64"
)

// local is the problem linearised at x: |r + J p|^2 = |c + R p|^2 + const, with the
// QR factorisation of J, the bounds, and the column scales D.
type local struct {
	x, lower, upper []float64
	qr              factor
	c               []float64 // Q'r, of which the first n entries matter
	d               []float64 // largest column norms seen so far [More]
	free            []int     // unknowns that no bound holds
	sub             subproblem

	open []int
	p    []float64
	hit  []int // -1, +1: the step ends on the lower, upper bound
	res  []float64
	rp   []float64
}

// gradient of half the sum of squares by unknown k: (J'r)_k.
func (l *local) gradient(k int) float64 {
	return l.qr.diag[k]*l.c[k] + blas64.Dot(vector(l.qr.column(k)[:k]), vector(l.c[:k]))
}

// release sets free to the unknowns that are off their bounds, or on one that the sum
// of squares falls away from.
func (l *local) release() {
	l.free = l.free[:0]
	for k, v := range l.x {
		if l.lower[k] == l.upper[k] {
			continue
		}
		g := l.gradient(k)
		if v <= l.lower[k] && g >= 0 || v >= l.upper[k] && g <= 0 {
			continue
		}
		l.free = append(l.free, k)
	}
}

// reduce brings the columns of R that are in open to a triangle of their own.
func (l *local) reduce(open []int, res []float64) {
	n := l.qr.n
	s := &l.sub
	s.tri.resize(n, len(open))
	s.d = zeroed(s.d, len(open))
	for i, k := range open {
		copy(s.tri.column(i)[:k], l.qr.column(k)[:k])
		s.tri.column(i)[k] = l.qr.diag[k]
		s.d[i] = l.d[k]
	}
	s.tri.decompose()
	s.c = append(s.c[:0], res[:n]...)
	s.tri.transform(s.c)
}

// thin reduces to an independent set of the open columns, where they are dependent to
// rounding. The others keep their place in this step: what they could do, the set can
// (a basic solution, as in [More, section 3]).
func (l *local) thin() {
	l.reduce(l.open, l.res)
	t := &l.sub.tri
	if !t.singular(l.sub.d, l.qr.m) {
		return
	}
	unit := &factor{}
	unit.resize(t.m, t.n)
	for k := range t.n {
		c := unit.column(k)
		copy(c[:k], t.column(k)[:k])
		c[k] = t.diag[k]
		if norm := blas64.Nrm2(vector(c)); norm > 0 {
			blas64.Scal(1/norm, vector(c))
		}
		unit.diag[k] = c[k]
	}
	_, over, _ := unit.rank(l.qr.m)
	if len(over) == 0 {
		return
	}
	kept := l.open[:0]
	for i, k := range l.open {
		if !slices.Contains(over, i) {
			kept = append(kept, k)
		}
	}
	l.open = kept
	l.reduce(l.open, l.res)
}

// step finds p within the radius and the bounds, and returns the decrease of the sum
// of squares that the linear problem promises, with the damping used. An unknown whose
// step would leave its bound is set on it and the others are solved for again.
func (l *local) step(radius, lambda float64) (promise, damping float64) {
	n := l.qr.n
	l.p, l.rp = zeroed(l.p, n), zeroed(l.rp, n)
	l.hit = append(l.hit[:0], make([]int, n)...)
	l.open = append(l.open[:0], l.free...)
	l.res = append(l.res[:0], l.c[:n]...)
	used := 0.0
	for len(l.open) > 0 {
		l.thin()
		room := math.Sqrt(math.Max(radius*radius-used, 0.01*radius*radius))
		damping = l.sub.solve(room, lambda)
		kept := l.open[:0]
		var add float64
		for i, k := range l.open {
			side := l.side(k, l.sub.p[i])
			if side == 0 {
				l.p[k] = l.sub.p[i]
				kept = append(kept, k)
				continue
			}
			l.hit[k] = side
			l.p[k] = l.edge(k, side) - l.x[k]
			add += l.d[k] * l.p[k] * l.d[k] * l.p[k]
			blas64.Axpy(l.p[k], vector(l.qr.column(k)[:k]), vector(l.res[:k]))
			l.res[k] += l.qr.diag[k] * l.p[k]
		}
		done := len(kept) == len(l.open)
		l.open, used = kept, used+add
		if done {
			break
		}
	}
	if promise = l.promised(); promise > 0 || len(l.free) == 0 {
		return promise, damping
	}
	return l.descend(radius), damping
}

// side says which bound x_k + p would leave or reach.
func (l *local) side(k int, p float64) int {
	switch {
	case l.x[k]+p <= l.lower[k]:
		return -1
	case l.x[k]+p >= l.upper[k]:
		return 1
	}
	return 0
}

func (l *local) edge(k, side int) float64 {
	if side < 0 {
		return l.lower[k]
	}
	return l.upper[k]
}

// promised is |c|^2 - |c + R p|^2.
func (l *local) promised() float64 {
	l.qr.times(l.p, l.rp)
	s := 0.0
	for i, v := range l.rp {
		s -= v * (2*l.c[i] + v)
	}
	return s
}

// descend is the step of last resort: along the scaled gradient to its minimum, bent at
// the bounds, shortened until it promises a decrease, as it must in the end unless there
// is no gradient but rounding [Kanzow].
func (l *local) descend(radius float64) float64 {
	size := 0.0
	clear(l.p)
	for _, k := range l.free {
		l.p[k] = l.gradient(k) / (l.d[k] * l.d[k])
		size = math.Hypot(size, l.d[k]*l.p[k])
	}
	l.qr.times(l.p, l.rp)
	bend := blas64.Nrm2(vector(l.rp))
	if size == 0 || bend == 0 {
		return 0
	}
	t := math.Min(radius/size, size/bend*size/bend)
	for range 40 {
		clear(l.p)
		clear(l.hit)
		for _, k := range l.free {
			l.p[k] = -t * l.gradient(k) / (l.d[k] * l.d[k])
			if side := l.side(k, l.p[k]); side != 0 {
				l.hit[k] = side
				l.p[k] = l.edge(k, side) - l.x[k]
			}
		}
		if promise := l.promised(); promise > 0 {
			return promise
		}
		t /= 4
	}
	clear(l.p)
	clear(l.hit)
	return 0
}

// trial puts x + p into out, exactly on a bound where the step ends on one.
func (l *local) trial(out []float64) {
	for k, v := range l.x {
		if l.hit[k] != 0 {
			out[k] = l.edge(k, l.hit[k])
			continue
		}
		out[k] = v + l.p[k]
	}
}

// length is |D v|.
func (l *local) length(v []float64) float64 {
	s := 0.0
	for k, x := range v {
		s = math.Hypot(s, l.d[k]*x)
	}
	return s
}
