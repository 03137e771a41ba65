package sparse

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"
)

// matrix is a symmetric matrix as a caller would give it.
type matrix struct {
	n          int
	rows, cols []int
	values     []float64
}

func (m *matrix) add(i, j int, v float64) {
	m.rows, m.cols, m.values = append(m.rows, i), append(m.cols, j), append(m.values, v)
}

// link adds a conductance between two points of a network.
func (m *matrix) link(i, j int, g float64) {
	m.add(i, i, g)
	m.add(j, j, g)
	m.add(i, j, -g)
}

func (m *matrix) dense() *mat.SymDense {
	d := mat.NewSymDense(m.n, nil)
	for e := range m.rows {
		d.SetSym(m.rows[e], m.cols[e], d.At(m.rows[e], m.cols[e])+m.values[e])
	}
	return d
}

func (m *matrix) plan(t testing.TB) *Plan {
	t.Helper()
	p, err := NewPlan(m.n, m.rows, m.cols)
	if err != nil {
		t.Fatal(err)
	}
	return p
}

func (m *matrix) factor(t testing.TB) *Factor {
	t.Helper()
	f := m.plan(t).NewFactor()
	if err := f.Factorize(m.values); err != nil {
		t.Fatal(err)
	}
	return f
}

// network is a square of side by side points whose neighbours are joined by log-normal
// conductances, without a fixed head. With share = 1 every pair is joined, the worst
// planar pattern; with less, a spanning tree and that share of the other pairs, which is
// like a pipe network at 0.4. at numbers the points row by row.
func network(side int, share, sigma float64, at []int, rng *rand.Rand) *matrix {
	m := &matrix{n: side * side}
	type pair struct{ a, b int }
	var pairs []pair
	for i := range m.n {
		if i+side < m.n {
			pairs = append(pairs, pair{i, i + side})
		}
		if (i+1)%side > 0 {
			pairs = append(pairs, pair{i, i + 1})
		}
	}
	rng.Shuffle(len(pairs), func(a, b int) { pairs[a], pairs[b] = pairs[b], pairs[a] })
	tree := make([]int, m.n)
	for i := range tree {
		tree[i] = i
	}
	root := func(i int) int {
		for tree[i] != i {
			tree[i] = tree[tree[i]]
			i = tree[i]
		}
		return i
	}
	for _, p := range pairs {
		a, b := root(p.a), root(p.b)
		tree[a] = b
		if a == b && rng.Float64() >= share {
			continue
		}
		m.link(at[p.a], at[p.b], math.Exp(sigma*rng.NormFloat64()))
	}
	return m
}

// grid and pipes are networks with random numbering and one fixed head.
func grid(side int, seed uint64) *matrix  { return fixed(side, 1, seed) }
func pipes(side int, seed uint64) *matrix { return fixed(side, 0.4, seed) }

func fixed(side int, share float64, seed uint64) *matrix {
	rng := rand.New(rand.NewPCG(seed, 1))
	m := network(side, share, 1, rng.Perm(side*side), rng)
	m.add(0, 0, 1)
	return m
}

// path is a line of n points with unit conductances, both its ends joined to a fixed
// head: the matrix of second differences, 2 on the diagonal and -1 beside it.
func path(n int) *matrix {
	m := &matrix{n: n}
	for i := 1; i < n; i++ {
		m.link(i-1, i, 1)
	}
	m.add(0, 0, 1)
	m.add(n-1, n-1, 1)
	return m
}

// star joins point 0 of a network of n to all others.
func star(n int) *matrix {
	m := &matrix{n: n}
	for i := 1; i < n; i++ {
		m.link(0, i, 1+float64(i%7))
	}
	m.add(0, 0, 1)
	return m
}

// random is a positive definite matrix of up to 200 rows: B'B + D for a sparse B of
// random signs, with duplicates in both triangles, separate parts, and now and then a
// row that touches all. What is drawn most stands first, for rapid favours the low end.
func random(t *rapid.T) *matrix {
	m := &matrix{n: rapid.SampledFrom([]int{60, 200, 3, 120, 12, 2, 30, 1, 5, 7}).Draw(t, "rows")}
	density := rapid.SampledFrom([]float64{1, 0.7, 1.5, 0.3, 2.5, 0}).Draw(t, "density")
	full := rapid.SampledFrom([]bool{false, false, false, true}).Draw(t, "full row")
	rng := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 2))
	for i := range m.n {
		m.add(i, i, 0.01+rng.Float64())
	}
	for range int(density * float64(m.n)) {
		row := make([]float64, 1+rng.IntN(3))
		at := make([]int, len(row))
		for k := range row {
			row[k], at[k] = math.Exp(2*rng.NormFloat64()), rng.IntN(m.n)
			if rng.IntN(2) == 0 {
				row[k] = -row[k]
			}
		}
		m.square(at, row)
	}
	if full {
		hub := rng.IntN(m.n)
		for i := range m.n {
			if i != hub {
				m.square([]int{hub, i}, []float64{rng.NormFloat64(), 1})
			}
		}
	}
	return m
}

// square adds b b' for a sparse b.
func (m *matrix) square(at []int, b []float64) {
	for k := range b {
		for l := range k + 1 {
			v := b[k] * b[l]
			if k != l && at[k] == at[l] {
				v *= 2 // both triangles fall on the diagonal
			}
			m.add(at[k], at[l], v)
		}
	}
}

func normals(n int, seed uint64) []float64 {
	rng := rand.New(rand.NewPCG(seed, 3))
	b := make([]float64, n)
	for i := range b {
		b[i] = rng.NormFloat64()
	}
	return b
}
