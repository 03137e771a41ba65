package sparse

import (
	"errors"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"
)

// laplacian is the matrix of a pipe network: conductances between points, and a fixed
// head at some of them.
type laplacian struct {
	n          int
	rows, cols []int
	values     []float64
}

func (l *laplacian) add(i, j int, v float64) {
	l.rows, l.cols, l.values = append(l.rows, i), append(l.cols, j), append(l.values, v)
}

func (l *laplacian) link(i, j int, g float64) {
	l.add(i, i, g)
	l.add(j, j, g)
	l.add(i, j, -g)
}

func (l *laplacian) dense() *mat.SymDense {
	d := mat.NewSymDense(l.n, nil)
	for e := range l.rows {
		d.SetSym(l.rows[e], l.cols[e], d.At(l.rows[e], l.cols[e])+l.values[e])
	}
	return d
}

// grid is a side by side network of points with log-normal conductances, one corner fixed.
func grid(side int, seed uint64) *laplacian {
	rng := rand.New(rand.NewPCG(seed, 1))
	l := &laplacian{n: side * side}
	at := rng.Perm(l.n)
	for i := 0; i < side; i++ {
		for j := 0; j < side; j++ {
			if i+1 < side {
				l.link(at[i*side+j], at[(i+1)*side+j], math.Exp(rng.NormFloat64()))
			}
			if j+1 < side {
				l.link(at[i*side+j], at[i*side+j+1], math.Exp(rng.NormFloat64()))
			}
		}
	}
	l.add(at[0], at[0], 1)
	return l
}

func factorOf(t testing.TB, l *laplacian) *Factor {
	t.Helper()
	p, err := NewPlan(l.n, l.rows, l.cols)
	if err != nil {
		t.Fatal(err)
	}
	f := p.NewFactor()
	if err := f.Factorize(l.values); err != nil {
		t.Fatal(err)
	}
	return f
}

// TestAgainstDense holds solutions against gonum's dense Cholesky on random patterns with
// duplicates, separate parts and single points.
func TestAgainstDense(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(1, 40).Draw(t, "n")
		l := &laplacian{n: n}
		for i := 0; i < n; i++ {
			l.add(i, i, rapid.Float64Range(0.01, 3).Draw(t, "fixed"))
		}
		for range rapid.IntRange(0, 3*n).Draw(t, "links") {
			i, j := rapid.IntRange(0, n-1).Draw(t, "i"), rapid.IntRange(0, n-1).Draw(t, "j")
			if i != j {
				l.link(i, j, rapid.Float64Range(1e-3, 1e3).Draw(t, "g"))
			}
		}
		p, err := NewPlan(n, l.rows, l.cols)
		if err != nil {
			t.Fatal(err)
		}
		seen := make([]bool, n)
		for _, i := range p.perm {
			if seen[i] {
				t.Fatalf("the order holds %d twice", i)
			}
			seen[i] = true
		}
		f := p.NewFactor()
		if err := f.Factorize(l.values); err != nil {
			t.Fatal(err)
		}
		b := make([]float64, n)
		for i := range b {
			b[i] = rapid.Float64Range(-10, 10).Draw(t, "b")
		}
		var ch mat.Cholesky
		if !ch.Factorize(l.dense()) {
			t.Fatal("the dense factorisation failed")
		}
		var want mat.VecDense
		if err := ch.SolveVecTo(&want, mat.NewVecDense(n, append([]float64(nil), b...))); err != nil {
			t.Fatal(err)
		}
		x := make([]float64, n)
		f.SolveRefined(b, x)
		for i := range x {
			// Conditions reach 1e6 here: 1e-16 times that, and ten for the sums.
			if math.Abs(x[i]-want.AtVec(i)) > 1e-9*(1+math.Abs(want.AtVec(i))) {
				t.Fatalf("x[%d] = %.15g, dense %.15g", i, x[i], want.AtVec(i))
			}
		}
	})
}

// TestNoFixedHead: a part that hangs on nothing is singular and is named by its row.
func TestNoFixedHead(t *testing.T) {
	l := &laplacian{n: 5}
	l.link(0, 1, 1)
	l.add(0, 0, 1)
	l.link(2, 3, 2)
	l.link(3, 4, 1)
	p, err := NewPlan(l.n, l.rows, l.cols)
	if err != nil {
		t.Fatal(err)
	}
	err = p.NewFactor().Factorize(l.values)
	var np *NotPositive
	if !errors.As(err, &np) || np.Row < 2 {
		t.Errorf("got %v", err)
	}
	l.values[0] = math.NaN()
	if err := p.NewFactor().Factorize(l.values); err == nil {
		t.Error("NaN went through")
	}
}

func TestSmall(t *testing.T) {
	p, err := NewPlan(0, nil, nil)
	if err != nil || p.NewFactor().Factorize(nil) != nil {
		t.Errorf("no rows: %v", err)
	}
	f := factorOf(t, &laplacian{n: 1, rows: []int{0, 0}, cols: []int{0, 0}, values: []float64{1, 3}})
	x := make([]float64, 1)
	if f.Solve([]float64{8}, x); x[0] != 2 {
		t.Errorf("duplicates are summed: 8/4 = %g", x[0])
	}
	if _, err := NewPlan(2, []int{0}, []int{2}); err == nil {
		t.Error("an entry outside the matrix went through")
	}
}

// TestSameEveryRun: two analyses of one pattern give the same bits.
func TestSameEveryRun(t *testing.T) {
	l := grid(20, 3)
	b := make([]float64, l.n)
	b[7] = 1
	x, y := make([]float64, l.n), make([]float64, l.n)
	factorOf(t, l).SolveRefined(b, x)
	factorOf(t, l).SolveRefined(b, y)
	for i := range x {
		if x[i] != y[i] {
			t.Fatalf("x[%d] is %x and %x", i, x[i], y[i])
		}
	}
}

// TestFillIn: the order keeps the factor of a 100 by 100 grid below 240,000 entries, as
// published minimum degree orderings do (George and Liu 1989 for the method; the figure is
// that of an approximate minimum degree on the same kind of grid, with room).
func TestFillIn(t *testing.T) {
	l := grid(100, 5)
	p, err := NewPlan(l.n, l.rows, l.cols)
	if err != nil {
		t.Fatal(err)
	}
	if got := p.lPtr[p.n]; got > 240000 {
		t.Errorf("%d entries in L", got)
	}
}

func TestNoAllocation(t *testing.T) {
	l := grid(30, 7)
	f := factorOf(t, l)
	b, x := make([]float64, l.n), make([]float64, l.n)
	if n := testing.AllocsPerRun(10, func() {
		_ = f.Factorize(l.values)
		f.SolveRefined(b, x)
	}); n != 0 {
		t.Errorf("%.0f allocations", n)
	}
}

func BenchmarkFactorize(b *testing.B) {
	for _, side := range []int{10, 32, 100} {
		l := grid(side, 5)
		f := factorOf(b, l)
		b.Run(map[int]string{10: "100", 32: "1024", 100: "10000"}[side], func(b *testing.B) {
			for b.Loop() {
				if err := f.Factorize(l.values); err != nil {
					b.Fatal(err)
				}
			}
		})
	}
}
