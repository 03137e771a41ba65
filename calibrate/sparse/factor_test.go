package sparse

import (
	"errors"
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"sync"
	"testing"

	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"
)

// unit is the unit of rounding of a float64.
const unit = 0x1p-53

// TestAgainstDense holds order, factors, solutions and determinant of random matrices
// against the dense ones, the last two by gonum's Cholesky.
func TestAgainstDense(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		m := random(t)
		p, err := NewPlan(m.n, m.rows, m.cols)
		if err != nil {
			t.Fatal(err)
		}
		sorted := slices.Sorted(slices.Values(p.order))
		for i, s := range sorted {
			if int(s) != i {
				t.Fatalf("the order is no permutation: %v", p.order)
			}
		}
		f := p.NewFactor()
		if err := f.Factorize(m.values); err != nil {
			t.Fatal(err)
		}
		a := m.dense()
		checkProduct(t, f, a)

		var ch mat.Cholesky
		if !ch.Factorize(a) {
			t.Fatal("the dense factorisation failed")
		}
		b, x := normals(m.n, 4), make([]float64, m.n)
		var want mat.VecDense
		if err := ch.SolveVecTo(&want, mat.NewVecDense(m.n, slices.Clone(b))); err != nil {
			t.Fatal(err)
		}
		// Both answers err by the condition times some units of rounding: n covers the
		// sums.
		tol := 10 * float64(m.n) * unit * ch.Cond() * mat.Norm(&want, math.Inf(1))
		f.Solve(b, x)
		for i := range x {
			if math.Abs(x[i]-want.AtVec(i)) > tol {
				t.Fatalf("x[%d] = %.15g, dense %.15g", i, x[i], want.AtVec(i))
			}
		}
		// One unit for each term of a row's residual.
		most := float64(m.n) * unit * (mat.Norm(a, math.Inf(1))*largest(x)/largest(b) + 1)
		if left := f.SolveRefined(b, b); !(left <= most) {
			t.Fatalf("relative residual %g above %g", left, most)
		}
		if !slices.EqualFunc(b, x, func(r, x float64) bool { return math.Abs(r-x) <= tol }) {
			t.Fatalf("refined %v, plain %v", b, x)
		}
		if got, want := f.LogDet(), ch.LogDet(); math.Abs(got-want) > tol+1e-12*math.Abs(want) {
			t.Fatalf("log det %.15g, dense %.15g", got, want)
		}
	})
}

// checkProduct holds L D L' against P A P' entry by entry, to the backward error of the
// factorisation: gamma_(n+1) sqrt(a_ii a_jj) (N. J. Higham, Accuracy and Stability of
// Numerical Algorithms, 2nd ed., SIAM 2002, theorem 10.3 and the lines after it).
func checkProduct(t *rapid.T, f *Factor, a *mat.SymDense) {
	p, n := f.plan, f.plan.n
	l := mat.NewDense(n, n, nil)
	for k := range n {
		l.Set(k, k, 1)
		for q, i := range p.column(int32(k)) {
			l.Set(int(i), k, f.l[p.lPtr[k]+q])
		}
	}
	var ld, product mat.Dense
	ld.Mul(l, mat.NewDiagDense(n, f.d))
	product.Mul(&ld, l.T())
	for i := range n {
		for j := range n {
			r, c := int(p.order[i]), int(p.order[j])
			// As much again for the product here.
			tol := 2 * float64(n+2) * unit * math.Sqrt(a.At(r, r)*a.At(c, c))
			if math.Abs(product.At(i, j)-a.At(r, c)) > tol {
				t.Fatalf("(L D L')[%d, %d] = %.17g, A[%d, %d] = %.17g", i, j, product.At(i, j), r, c, a.At(r, c))
			}
		}
	}
}

// TestNoFixedHead: heads of a network that hangs on nothing are known but for a constant;
// rounding must not hide that, whatever the spread of the pipes, and the row named lies in
// the part at fault.
func TestNoFixedHead(t *testing.T) {
	for _, side := range []int{2, 10, 32, 100} {
		for _, sigma := range []float64{0, 1, 3, 6} {
			for seed := range uint64(6) {
				rng := rand.New(rand.NewPCG(seed, 5))
				loose := side * side
				// The sound part has the higher numbers.
				m := network(side, float64(seed%2), sigma, rng.Perm(loose), rng)
				m.n += 50
				for i := loose; i+1 < m.n; i++ {
					m.link(i, i+1, 1)
				}
				m.add(loose, loose, 1)
				err := m.plan(t).NewFactor().Factorize(m.values)
				var bad *NotPositive
				if !errors.As(err, &bad) || bad.Row >= loose {
					t.Errorf("side %d, sigma %g, seed %d: %v", side, sigma, seed, err)
				}
			}
		}
	}
}

// TestWeakFixedHead: the opposite of TestNoFixedHead. A network joined to its fixed head
// by one weak pipe is sound: what is drawn off passes that pipe, so the head where it joins
// falls by flow over conductance.
func TestWeakFixedHead(t *testing.T) {
	for _, side := range []int{2, 10, 32, 100} {
		for seed := range uint64(4) {
			const g = 1e-6
			rng := rand.New(rand.NewPCG(seed, 6))
			m := network(side, float64(seed%2), 2, rng.Perm(side*side), rng)
			m.add(0, 0, g)
			f := m.factor(t)
			b := make([]float64, m.n)
			drawn := 0.0
			for i := range b {
				b[i] = -rng.Float64()
				drawn += b[i]
			}
			x := make([]float64, m.n)
			f.SolveRefined(b, x)
			// The condition is near n/g times the spread of the pipes, 1e12 at most; the
			// refinement takes most of it back.
			if want := drawn / g; math.Abs(x[0]-want) > 1e-5*math.Abs(want) {
				t.Errorf("side %d, seed %d: head %.10g, want %.10g", side, seed, x[0], want)
			}
		}
	}
}

// TestNotPositive: values that make no positive definite matrix are named, and the same
// Factor is sound again with the next.
func TestNotPositive(t *testing.T) {
	m := grid(5, 1)
	f := m.factor(t)
	b, want, x := normals(m.n, 7), make([]float64, m.n), make([]float64, m.n)
	f.Solve(b, want)
	for _, v := range []float64{math.NaN(), math.Inf(1), math.Inf(-1), -1e3} {
		for e := range m.values {
			broken := slices.Clone(m.values)
			broken[e] = v
			var bad *NotPositive
			if err := f.Factorize(broken); !errors.As(err, &bad) {
				t.Fatalf("%g at entry %d: %v", v, e, err)
			} else if !strings.Contains(err.Error(), "at row") || bad.Row < 0 || bad.Row >= m.n || bad.Pivot > 1e-10 && !math.IsInf(bad.Pivot, 1) {
				t.Errorf("%g at entry %d: %v", v, e, err)
			}
		}
	}
	if err := f.Factorize(m.values); err != nil {
		t.Fatal(err)
	}
	if f.Solve(b, x); !slices.Equal(x, want) {
		t.Error("a failed Factorize left something behind")
	}
	// No entry at all in row 1, and a diagonal of zero.
	for _, m := range []*matrix{{n: 2, rows: []int{0}, cols: []int{0}, values: []float64{1}}, {n: 2, rows: []int{0, 1}, cols: []int{0, 1}, values: []float64{1, 0}}} {
		var bad *NotPositive
		if err := m.plan(t).NewFactor().Factorize(m.values); !errors.As(err, &bad) || bad.Row != 1 {
			t.Errorf("row 1 of %v: %v", m, err)
		}
	}
}

func TestSmall(t *testing.T) {
	for _, m := range []*matrix{{}, {n: 1}, {n: 6}, path(3)} {
		for i := range m.n {
			m.add(i, i, float64(i+1))
		}
		f := m.factor(t)
		x := make([]float64, m.n)
		for i := range x {
			x[i] = 1
		}
		var want mat.VecDense
		if m.n > 0 {
			if err := want.SolveVec(m.dense(), mat.NewVecDense(m.n, slices.Clone(x))); err != nil {
				t.Fatal(err)
			}
		}
		if left := f.SolveRefined(x, x); left > 1e-15 {
			t.Errorf("n = %d: residual %g", m.n, left)
		}
		for i := range x {
			// Diagonals up to 6 and conditions near 1.
			if math.Abs(x[i]-want.AtVec(i)) > 1e-15 {
				t.Errorf("n = %d: x[%d] = %g, want %g", m.n, i, x[i], want.AtVec(i))
			}
		}
	}
	if f := (&matrix{}).factor(t); f.LogDet() != 0 || f.Condition() != 0 {
		t.Errorf("no rows: log det %g, condition %g", f.LogDet(), f.Condition())
	}
	zero := make([]float64, 4)
	if left := path(4).factor(t).SolveRefined(zero, zero); left != 0 || largest(zero) != 0 {
		t.Errorf("zero right side: %v, residual %g", zero, left)
	}
}

func TestNewPlanErrors(t *testing.T) {
	for _, c := range []struct {
		n          int
		rows, cols []int
		want       string
	}{
		{-1, nil, nil, "a matrix of -1 rows"},
		{2, []int{0, 1}, []int{0}, "2 row numbers but 1 column numbers"},
		{2, []int{0, 0, -1}, []int{1, 2, 0}, "2 entries lie outside the 2 by 2 matrix, the first of them entry 1 at (0, 2)"},
	} {
		if _, err := NewPlan(c.n, c.rows, c.cols); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("got %v, want %q", err, c.want)
		}
	}
}

// TestMisuse: shapes that do not fit, and answers asked of no factors, are the caller's
// mistakes.
func TestMisuse(t *testing.T) {
	m := path(3)
	f, unready, short := m.factor(t), m.plan(t).NewFactor(), make([]float64, 2)
	full := make([]float64, 3)
	for name, call := range map[string]func(){
		"values":     func() { _ = f.Factorize(short) },
		"b":          func() { f.Solve(short, full) },
		"x":          func() { f.SolveRefined(full, short) },
		"diagonal":   func() { f.InverseDiagonal(short) },
		"entry":      func() { f.InverseEntry(0, 3) },
		"no factors": func() { unready.Solve(full, full) },
	} {
		func() {
			defer func() {
				if s, ok := recover().(string); !ok || !strings.HasPrefix(s, "sparse: ") {
					t.Errorf("%s: panic %q", name, s)
				}
			}()
			call()
		}()
	}
}

// TestSameEveryRun: two analyses of one pattern, and two goroutines on one plan, give the
// same bits.
func TestSameEveryRun(t *testing.T) {
	m := grid(30, 3)
	p, q := m.plan(t), m.plan(t)
	if !slices.Equal(p.order, q.order) {
		t.Fatal("two orders")
	}
	answers := make([][]float64, 4)
	var wait sync.WaitGroup
	for i := range answers {
		wait.Go(func() {
			f := []*Plan{p, q}[i%2].NewFactor()
			if err := f.Factorize(m.values); err != nil {
				t.Error(err)
				return
			}
			x, z := normals(m.n, 8), make([]float64, m.n)
			left := f.SolveRefined(x, x)
			f.InverseDiagonal(z)
			answers[i] = slices.Concat(x, z, []float64{left, f.LogDet(), f.Condition()})
		})
	}
	wait.Wait()
	for i := range answers {
		if !slices.Equal(answers[i], answers[0]) {
			t.Errorf("run %d differs from run 0", i)
		}
	}
}
