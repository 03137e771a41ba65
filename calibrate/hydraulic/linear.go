package hydraulic

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/sparse"
)

// The linear system of a step and of an adjoint is, for the links that flow (D their
// slopes) and the junctions that are fed (A their incidence, +1 at From, -1 at To),
//
//	D x - A' y = s
//	A x        = b
//
// so that x = D^-1 (A' y + s) and (A D^-1 A') y = b - A D^-1 s [TP].

// leastSlope, m/(m3/s), is the least that stands in the matrix. At 1 m3/s it is worth
// 1e-8 m: a link that loses less is as good as none.
const leastSlope = 1e-8

// factorise prepares solve at the present slopes. Odd links, those whose slope is less
// than leastSlope or negative, get a positive stand-in in the matrix and are put right in
// solve. Where a link loses so little beside its neighbours that the matrix cannot hold
// both, it becomes odd too.
func (v *Solver) factorise() error {
	err := v.factoriseAbove(leastSlope)
	if err == nil {
		return nil
	}
	var bad *sparse.NotPositive
	if !errors.As(err, &bad) {
		return err
	}
	steepest := 0.0
	for i := range v.sys.links {
		if v.in[i] {
			steepest = math.Max(steepest, v.slope[i])
		}
	}
	for share := 1e-13; share < 1e-6; share *= 10 {
		if err = v.factoriseAbove(share * steepest); err == nil {
			return nil
		}
	}
	if !errors.As(err, &bad) {
		return err
	}
	name := v.nameOfRow(bad.Row)
	return &Unsolvable{Cause: fmt.Sprintf("the head at point %s is not determined: what feeds it loses too much, or a coefficient is out of any range", name), Points: []string{name}}
}

// factoriseAbove stands in for slopes below the least.
func (v *Solver) factoriseAbove(least float64) error {
	s := v.sys
	clear(v.entries)
	v.odd = v.odd[:0]
	for i := range s.points {
		if r := s.row[i]; r >= 0 && !v.live[i] {
			v.entries[r] = 1 // stands apart
		}
	}
	for i := range s.links {
		if !v.in[i] {
			continue
		}
		d := v.slope[i]
		if d < least {
			v.odd = append(v.odd, i)
			d = math.Max(math.Abs(d), least)
		}
		g := 1 / d
		v.conduct[i] = g
		a, b := s.row[s.links[i].From], s.row[s.links[i].To]
		if a >= 0 {
			v.entries[a] += g
		}
		if b >= 0 {
			v.entries[b] += g
		}
		if a >= 0 && b >= 0 {
			v.entries[s.entry[i]] -= g
		}
	}
	if v.matrix == nil {
		return nil
	}
	return v.matrix.Factorize(v.entries)
}

func (v *Solver) nameOfRow(row int) string {
	for i, r := range v.sys.row {
		if r == row {
			return v.sys.points[i].Name
		}
	}
	return ""
}

// solve finds x and y from v.s and v.b (both are kept) with the true slopes; smooth
// leaves the stand-ins of odd links in place, which makes the matrix positive definite.
// It reports false where the true system is singular.
func (v *Solver) solve(smooth bool) bool {
	v.base(v.s, v.b, v.x, v.y)
	if smooth || len(v.odd) == 0 {
		return true
	}
	// For odd link k let x_k = g_k (A' y + s)_k + w_k with the stand-in g_k; the true
	// slope asks for w_k = c_k (A' y + s)_k, c_k = 1/d_k - g_k. Then, Z = S^-1 U with
	// U the incidence of the odd links [W]:
	//
	//	(diag(1/c) + U'Z) w = U'y_0 + s,  y = y_0 - Z w
	//
	// 1/c = d/(1 - d g) stays finite where d is 0.
	r := len(v.odd)
	small, right := mat.NewDense(r, r, nil), mat.NewVecDense(r, nil)
	columns := v.columns(r)
	for k, i := range v.odd {
		z := columns[k]
		clear(v.rhs)
		v.addEnds(v.rhs, i, 1)
		if v.matrix != nil {
			v.matrix.Solve(v.rhs, z)
		}
		d := v.slope[i]
		for j, o := range v.odd {
			small.Set(j, k, v.across(z, o))
		}
		small.Set(k, k, small.At(k, k)+d/(1-d*v.conduct[i]))
		right.SetVec(k, v.across(v.y, i)+v.s[i])
	}
	var lu mat.LU
	lu.Factorize(small)
	w := mat.NewVecDense(r, nil)
	// A condition of 1e14 leaves no digit that means anything.
	if err := lu.SolveVecTo(w, false, right); err != nil || lu.Cond() > 1e14 {
		return false
	}
	clear(v.dy)
	for k := range v.odd {
		for row, z := range columns[k] {
			v.dy[row] -= z * w.AtVec(k)
		}
	}
	v.add(v.dy, v.x, v.y)
	for k, i := range v.odd {
		v.x[i] += w.AtVec(k)
	}
	return true
}

// columns is room for r vectors over the rows; it grows once.
func (v *Solver) columns(r int) [][]float64 {
	for len(v.spare) < r {
		v.spare = append(v.spare, make([]float64, v.sys.rows))
	}
	return v.spare[:r]
}

// base solves with the conductances of the matrix. Its refinement works on the
// balances themselves, and x grows by what each pass adds: the diagonal of the matrix
// has lost what a weak link adds beside a strong one, and the difference of two y has
// lost what flows in a strong one; small passes have not.
func (v *Solver) base(s, b, x, y []float64) {
	clear(y)
	for i := range x {
		x[i] = 0
		if v.in[i] {
			x[i] = v.conduct[i] * s[i]
		}
	}
	worst := math.Inf(1)
	const passes = 4
	for pass := 0; pass < passes; pass++ {
		copy(v.rhs, b)
		for i := range v.sys.links {
			if v.in[i] {
				v.addEnds(v.rhs, i, -x[i])
			}
		}
		left := largest(v.rhs)
		if left <= 1e-13*largest(x) || left > worst/4 || v.matrix == nil {
			return
		}
		worst = left
		v.matrix.Solve(v.rhs, v.dy)
		v.add(v.dy, x, y)
	}
}

// add moves y by dy and x by what follows from it.
func (v *Solver) add(dy, x, y []float64) {
	for r, d := range dy {
		y[r] += d
	}
	for i := range v.sys.links {
		if v.in[i] {
			x[i] += v.conduct[i] * v.across(dy, i)
		}
	}
}

// across is y_from - y_to over the junctions.
func (v *Solver) across(y []float64, i int) float64 {
	l := &v.sys.links[i]
	d := 0.0
	if r := v.sys.row[l.From]; r >= 0 {
		d += y[r]
	}
	if r := v.sys.row[l.To]; r >= 0 {
		d -= y[r]
	}
	return d
}

// addEnds adds a at the From end's row and takes it at the To end's.
func (v *Solver) addEnds(b []float64, i int, a float64) {
	l := &v.sys.links[i]
	if r := v.sys.row[l.From]; r >= 0 {
		b[r] += a
	}
	if r := v.sys.row[l.To]; r >= 0 {
		b[r] -= a
	}
}

func largest(a []float64) float64 {
	most := 0.0
	for _, x := range a {
		most = math.Max(most, math.Abs(x))
	}
	return most
}
