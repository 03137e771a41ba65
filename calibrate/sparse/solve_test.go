package sparse

import (
	"math"
	"math/rand/v2"
	"testing"
)

// backward is the least relative change of the single entries of A and b, in units of
// rounding, that makes x exact: the largest |b - A x| / (|A| |x| + |b|) of a row (W.
// Oettli and W. Prager, Numer. Math. 6 (1964) 405-409).
func (m *matrix) backward(b, x []float64) float64 {
	r, size := make([]float64, m.n), make([]float64, m.n)
	for i := range r {
		r[i], size[i] = b[i], math.Abs(b[i])
	}
	take := func(i, j int, v float64) {
		r[i] -= v * x[j]
		size[i] += math.Abs(v * x[j])
	}
	for e, v := range m.values {
		i, j := m.rows[e], m.cols[e]
		take(i, j, v)
		if i != j {
			take(j, i, v)
		}
	}
	most := 0.0
	for i := range r {
		most = math.Max(most, math.Abs(r[i])/size[i])
	}
	return most / unit
}

// TestRefinement: one step makes the answer as good as a change of each entry by one unit
// a term of its row would (Skeel 1980); a plain solve is not that good where signs are
// mixed and x falls off over many powers of ten.
func TestRefinement(t *testing.T) {
	worst := 0.0
	for seed := range uint64(5) {
		rng := rand.New(rand.NewPCG(seed, 14))
		m := network(30, 1, 1, rng.Perm(900), rng)
		for e := range m.values {
			if m.rows[e] != m.cols[e] && rng.IntN(2) == 0 {
				m.values[e] *= -1
			}
		}
		for i := range m.n {
			m.add(i, i, 1)
		}
		f := m.factor(t)
		b, x := make([]float64, m.n), make([]float64, m.n)
		b[3] = 1
		f.Solve(b, x)
		worst = max(worst, m.backward(b, x))
		f.SolveRefined(b, x)
		const most = 6 // five entries a row, and the right side
		if w := m.backward(b, x); w > most {
			t.Errorf("seed %d: backward error %.1f units", seed, w)
		}
	}
	if worst < 10 {
		t.Errorf("plain solves err by %.1f units at most: this shows nothing of refinement", worst)
	}
}

func TestNoAllocation(t *testing.T) {
	m := pipes(30, 7)
	f := m.factor(t)
	b, x := make([]float64, m.n), make([]float64, m.n)
	f.InverseDiagonal(x) // the first takes its room
	if n := testing.AllocsPerRun(10, func() {
		if err := f.Factorize(m.values); err != nil {
			t.Fatal(err)
		}
		f.Solve(b, x)
		f.SolveRefined(b, x)
		f.Condition()
		f.InverseDiagonal(x)
	}); n != 0 {
		t.Errorf("%.0f allocations", n)
	}
}
