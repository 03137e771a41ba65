package sparse

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"
)

// TestConditionAgainstDense: the estimate is a lower bound, and of the right order (Higham
// 1988 reports within a factor of three nearly always), of the condition of the scaled
// matrix by gonum's dense inverse.
func TestConditionAgainstDense(t *testing.T) {
	total, close := 0, 0
	rapid.Check(t, func(t *rapid.T) {
		m := random(t)
		p, err := NewPlan(m.n, m.rows, m.cols)
		if err != nil {
			t.Fatal(err)
		}
		f := p.NewFactor()
		if err := f.Factorize(m.values); err != nil {
			t.Fatal(err)
		}
		a := m.dense()
		h := mat.NewSymDense(m.n, nil)
		for i := range m.n {
			for j := range i + 1 {
				h.SetSym(i, j, a.At(i, j)/math.Sqrt(a.At(i, i)*a.At(j, j)))
			}
		}
		var ch mat.Cholesky
		if !ch.Factorize(h) {
			t.Fatal("the dense factorisation failed")
		}
		var inv mat.SymDense
		if err := ch.InverseTo(&inv); err != nil {
			t.Fatal(err)
		}
		want, got := mat.Norm(h, 1)*mat.Norm(&inv, 1), f.Condition()
		// Both are wrong by their own condition times rounding.
		if got > want*(1+float64(m.n)*unit*want*10) || got < want/10 {
			t.Fatalf("condition %g, dense %g", got, want)
		}
		total++
		if got > want/3 {
			close++
		}
	})
	if close < total*9/10 {
		t.Errorf("%d of %d within a factor of three", close, total)
	}
}

// TestConditionFollowsUnits: the units of the unknowns do not move it.
func TestConditionFollowsUnits(t *testing.T) {
	m := grid(12, 4)
	before := m.factor(t).Condition()
	for e := range m.values {
		m.values[e] = math.Ldexp(m.values[e], m.rows[e]%40+m.cols[e]%40)
	}
	// Roots of the scales are not exact when odd; two units for each of the solves.
	if after := m.factor(t).Condition(); math.Abs(after-before) > 1e-12*before {
		t.Errorf("condition %g, with other units %g", before, after)
	}
}
