package sparse

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"
)

// TestInverseAgainstDense holds every entry that is known against gonum's inverse.
func TestInverseAgainstDense(t *testing.T) {
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
		var ch mat.Cholesky
		if !ch.Factorize(m.dense()) {
			t.Fatal("the dense factorisation failed")
		}
		var want mat.SymDense
		if err := ch.InverseTo(&want); err != nil {
			t.Fatal(err)
		}
		tol := 10 * float64(m.n) * unit * ch.Cond() * mat.Norm(&want, 1)
		diagonal := make([]float64, m.n)
		f.InverseDiagonal(diagonal)
		for i, z := range diagonal {
			if math.Abs(z-want.At(i, i)) > tol {
				t.Fatalf("entry (%d, %d) %.15g, dense %.15g", i, i, z, want.At(i, i))
			}
		}
		known := 0
		for i := range m.n {
			for j := range m.n {
				z, ok := f.InverseEntry(i, j)
				if !ok {
					continue
				}
				known++
				if math.Abs(z-want.At(i, j)) > tol {
					t.Fatalf("entry (%d, %d) %.15g, dense %.15g", i, j, z, want.At(i, j))
				}
			}
		}
		if known != m.n+2*p.FillIn() {
			t.Fatalf("%d entries known, want %d", known, m.n+2*p.FillIn())
		}
		for e := range m.rows {
			if _, ok := f.InverseEntry(m.rows[e], m.cols[e]); !ok {
				t.Fatalf("entry (%d, %d) was given and is not known", m.rows[e], m.cols[e])
			}
		}
	})
}

// TestSecondDifferences holds inverse, determinant and condition of the second difference
// matrix of n rows against their closed forms, for i <= j counted from 1,
//
//	inverse (i, j) = i (n+1-j) / (n+1), det = n+1,
//	1-norm of A 4, of the inverse (n+1)^2/8 for odd n
//
// (standard results, e.g. G. H. Golub and C. F. Van Loan, Matrix Computations; from
// memory).
func TestSecondDifferences(t *testing.T) {
	for _, n := range []int{3, 51, 1001, 20001} {
		f := path(n).factor(t)
		size := float64(n + 1)
		tol := 10 * size * size / 2 * unit // the condition times a few roundings
		z := make([]float64, n)
		f.InverseDiagonal(z)
		for i := range z {
			want := float64(i+1) * (size - float64(i+1)) / size
			if math.Abs(z[i]-want) > tol*want {
				t.Fatalf("n = %d: entry (%d, %d) %.15g, want %.15g", n, i, i, z[i], want)
			}
			if i == 0 {
				continue
			}
			beside, ok := f.InverseEntry(i, i-1)
			if want := float64(i) * (size - float64(i+1)) / size; !ok || math.Abs(beside-want) > tol*want {
				t.Fatalf("n = %d: entry (%d, %d) %.15g, want %.15g", n, i, i-1, beside, want)
			}
		}
		if got, want := f.LogDet(), math.Log(size); math.Abs(got-want) > tol {
			t.Errorf("n = %d: log det %.15g, want %.15g", n, got, want)
		}
		if got, want := f.Condition(), size*size/2; math.Abs(got-want) > tol*want {
			t.Errorf("n = %d: condition %.15g, want %.15g", n, got, want)
		}
	}
}

// TestSpanningTrees: with one point fixed the determinant of a network of unit conductances
// counts its spanning trees (Kirchhoff's matrix-tree theorem): n^(n-2) for a complete graph
// (Cayley), and for square grids the figures of OEIS A007341 (from memory).
func TestSpanningTrees(t *testing.T) {
	check := func(name string, m *matrix, points int, want float64) {
		t.Helper()
		// Fixed: its row and column are struck out, which leaves its links on the diagonal.
		last := points - 1
		struck := &matrix{n: last}
		for e := range m.rows {
			if i, j := m.rows[e], m.cols[e]; i != last && j != last {
				struck.add(i, j, m.values[e])
			}
		}
		if got := math.Exp(struck.factor(t).LogDet()); math.Abs(got-want) > 1e-12*want {
			t.Errorf("%s: %.15g spanning trees, want %.15g", name, got, want)
		}
	}
	for side, want := range map[int]float64{2: 4, 3: 192, 4: 100352, 5: 557568000} {
		rng := rand.New(rand.NewPCG(1, 11))
		check("grid", network(side, 1, 0, rng.Perm(side*side), rng), side*side, want)
	}
	for n := 2; n <= 12; n++ {
		m := &matrix{n: n}
		for i := range n {
			for j := range i {
				m.link(i, j, 1)
			}
		}
		check("complete", m, n, math.Pow(float64(n), float64(n-2)))
	}
}

// TestInverseFollowsValues: the inverse is that of the values last factorised.
func TestInverseFollowsValues(t *testing.T) {
	m := grid(6, 2)
	f := m.factor(t)
	before, after := make([]float64, m.n), make([]float64, m.n)
	f.InverseDiagonal(before)
	for e := range m.values {
		m.values[e] *= 4
	}
	if err := f.Factorize(m.values); err != nil {
		t.Fatal(err)
	}
	f.InverseDiagonal(after)
	for i := range after {
		if after[i] != before[i]/4 { // a power of two is exact
			t.Fatalf("entry %d: %g, want %g", i, after[i], before[i]/4)
		}
	}
}
