package lsq_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"
	"pgregory.net/rapid"

	"tapround/calibrate/lsq"
)

// TestProduct is the textbook case of an undetermined pair: y = a b x tells the
// product alone.
func TestProduct(t *testing.T) {
	x, y := []float64{1, 2, 3}, []float64{2.1, 3.9, 6.2}
	p := lsq.Problem{M: 3, N: 2,
		Residuals: func(u, r []float64) error {
			for i := range r {
				r[i] = u[0]*u[1]*x[i] - y[i]
			}
			return nil
		},
		Jacobian: func(u []float64, j *mat.Dense) error {
			for i := range x {
				j.Set(i, 0, u[1]*x[i])
				j.Set(i, 1, u[0]*x[i])
			}
			return nil
		},
	}
	res, err := lsq.Solve(p, []float64{1, 0.5}, lsq.Settings{})
	if err != nil {
		t.Fatal(err)
	}
	if res.Status != lsq.RankDeficient || res.Status.OK() || res.Rank != 1 || !math.IsInf(res.Condition, 1) {
		t.Fatalf("%v, rank %d, condition %g", res.Status, res.Rank, res.Condition)
	}
	// (sum x y)/(sum x^2) = 28.5/14.
	if d := math.Abs(res.X[0]*res.X[1] - 28.5/14); d > 1e-9 {
		t.Errorf("the product is %.12f", res.X[0]*res.X[1])
	}
	if _, err := res.Covariance(); err == nil || !strings.Contains(err.Error(), "1 of 2") {
		t.Errorf("covariance of an undetermined pair: %v", err)
	}
	if res.Leverage() != nil {
		t.Error("leverages without full rank")
	}
	lower, upper, err := lsq.Profile(p, res, 0, 3.841, lsq.Settings{})
	if err != nil || !math.IsInf(upper, 1) {
		t.Errorf("the profile of a factor is not open: %g to %g, %v", lower, upper, err)
	}
}

// TestProductAnywhere: an undetermined direction must not spoil the step in the
// others, wherever the start.
func TestProductAnywhere(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a, b := rapid.Float64Range(0.2, 5).Draw(t, "a"), rapid.Float64Range(0.2, 5).Draw(t, "b")
		want := rapid.Float64Range(0.5, 4).Draw(t, "product")
		// The third unknown keeps the pair from being the last columns.
		p := lsq.Problem{M: 4, N: 3,
			Residuals: func(u, r []float64) error {
				for i := range r {
					s := float64(i)
					r[i] = u[0]*u[1]*s + u[2]*s*s - want*s - 0.3*s*s + 0.01*math.Cos(5*s)
				}
				return nil
			},
			Jacobian: func(u []float64, j *mat.Dense) error {
				for i := range 4 {
					s := float64(i)
					j.SetRow(i, []float64{u[1] * s, u[0] * s, s * s})
				}
				return nil
			},
		}
		res, err := lsq.Solve(p, []float64{a, b, 0}, lsq.Settings{})
		if err != nil || res.Status != lsq.RankDeficient || res.Rank != 2 {
			t.Fatalf("%v, %v, rank %d", err, res.Status, res.Rank)
		}
		flat := mat.NewDense(4, 2, []float64{0, 0, 1, 1, 2, 4, 3, 9})
		y := make([]float64, 4)
		for i := range y {
			s := float64(i)
			y[i] = want*s + 0.3*s*s - 0.01*math.Cos(5*s)
		}
		lin, err := lsq.Linear(flat, y, nil)
		if err != nil {
			t.Fatal(err)
		}
		// Gauss-Newton converges quadratically in the product; two dozen steps cover the
		// way from the start.
		if d := math.Abs(res.X[0]*res.X[1] - lin.X[0]); d > 1e-9 || res.Iterations > 24 {
			t.Fatalf("the product is off by %g after %d steps", d, res.Iterations)
		}
	})
}

// TestRank makes columns dependent on purpose and looks whether they are found, and
// the condition of the rest against gonum's singular values.
func TestRank(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 2))
		n := rapid.IntRange(2, 10).Draw(t, "unknowns")
		m := n + rapid.IntRange(1, 15).Draw(t, "extra rows")
		a := mat.NewDense(m, n, normals(r, m*n))
		if rapid.Bool().Draw(t, "dependent") {
			// The last column is a combination of others, of another size.
			for i := range m {
				a.Set(i, n-1, 1e4*(a.At(i, 0)-0.5*a.At(i, n/2)))
			}
			if n == 2 {
				return
			}
			res, err := lsq.Linear(a, normals(r, m), nil)
			if err != nil || res.Status != lsq.RankDeficient || res.Rank != n-1 || len(res.Undetermined) != 1 {
				t.Fatalf("%v, %v, rank %d of %d, undetermined %v", err, res.Status, res.Rank, n, res.Undetermined)
			}
			if !slices.Contains([]int{0, n / 2, n - 1}, res.Undetermined[0]) {
				t.Fatalf("column %d is named, the dependent ones are 0, %d, %d", res.Undetermined[0], n/2, n-1)
			}
			if res.X[res.Undetermined[0]] != 0 || res.Offset > 1e-10 {
				t.Fatalf("the basic solution %v has offset %g", res.X, res.Offset)
			}
			return
		}
		res, err := lsq.Linear(a, normals(r, m), nil)
		if err != nil || !res.Status.OK() {
			t.Fatal(err, res.Status)
		}
		var s mat.Dense
		s.CloneFrom(a)
		for k := range n {
			c := mat.Norm(a.ColView(k), 2)
			for i := range m {
				s.Set(i, k, a.At(i, k)/c)
			}
		}
		want := mat.Cond(&s, 2)
		// Power iteration stops at a gain of 1e-6 a step and may lie low where the smallest
		// singular values are close to each other.
		if res.Condition > want*(1+1e-9) || res.Condition < 0.97*want {
			t.Fatalf("condition %g, singular values give %g", res.Condition, want)
		}
	})
}

// TestFewerRows: less rows than unknowns is no fault, only not determined.
func TestFewerRows(t *testing.T) {
	a := mat.NewDense(2, 4, []float64{1, 2, 0, 1, 0, 1, 1, -1})
	res, err := lsq.Solve(linear(a, []float64{1, 2}), make([]float64, 4), lsq.Settings{})
	if err != nil || res.Status != lsq.RankDeficient || res.Rank != 2 || res.SumSquares > 1e-20 {
		t.Fatalf("%v, %v, rank %d, sum of squares %g", err, res.Status, res.Rank, res.SumSquares)
	}
}

// TestLeverage: the leverages are the diagonal of A (A'A)^-1 A', sum to the number of
// unknowns, and do not depend on the order of rows.
func TestLeverage(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		r := rand.New(rand.NewPCG(rapid.Uint64().Draw(t, "seed"), 3))
		n := rapid.IntRange(1, 8).Draw(t, "unknowns")
		m := n + rapid.IntRange(0, 15).Draw(t, "extra rows")
		a, y := mat.NewDense(m, n, normals(r, m*n)), normals(r, m)
		// Prior rows below, as the fit stacks them.
		stacked := mat.NewDense(m+n, n, nil)
		stacked.Slice(0, m, 0, n).(*mat.Dense).Copy(a)
		for k := range n {
			stacked.Set(m+k, k, 0.5)
		}
		res, err := lsq.Linear(stacked, append(slices.Clone(y), make([]float64, n)...), nil)
		if err != nil || !res.Status.OK() {
			t.Fatal(err, res.Status)
		}
		cov, err := res.Covariance()
		if err != nil {
			t.Fatal(err)
		}
		h := res.Leverage()
		for i := range h {
			if want := mat.Inner(stacked.RowView(i), cov, stacked.RowView(i)); math.Abs(h[i]-want) > 1e-9 {
				t.Fatalf("leverage of row %d is %g, want %g", i, h[i], want)
			}
		}
		if s := floatsSum(h); math.Abs(s-float64(n)) > 1e-9 {
			t.Fatalf("leverages sum to %g, want %d", s, n)
		}
		order := r.Perm(m)
		b, z := mat.NewDense(m+n, n, nil), make([]float64, m+n)
		b.Copy(stacked)
		for i, from := range order {
			b.SetRow(i, mat.Row(nil, from, stacked))
			z[i] = y[from]
		}
		other, err := lsq.Linear(b, z, nil)
		if err != nil {
			t.Fatal(err)
		}
		for k := range n {
			if math.Abs(other.X[k]-res.X[k]) > 1e-9*(1+math.Abs(res.X[k])) {
				t.Fatalf("the order of rows changes unknown %d from %g to %g", k, res.X[k], other.X[k])
			}
		}
	})
}

// TestWeights: a weight of three is the same row three times.
func TestWeights(t *testing.T) {
	a := mat.NewDense(4, 2, []float64{1, 0, 1, 1, 1, 2, 1, 4})
	y := []float64{0.3, 1.1, 1.8, 4.4}
	got, err := lsq.Linear(a, y, []float64{1, 3, 1, 1})
	if err != nil {
		t.Fatal(err)
	}
	b := mat.NewDense(6, 2, []float64{1, 0, 1, 1, 1, 1, 1, 1, 1, 2, 1, 4})
	want, err := lsq.Linear(b, []float64{0.3, 1.1, 1.1, 1.1, 1.8, 4.4}, nil)
	if err != nil {
		t.Fatal(err)
	}
	for k := range 2 {
		near(t, "unknown", got.X[k], want.X[k], 1e-13)
	}
	near(t, "sum of squares", got.SumSquares, want.SumSquares, 1e-13)
	near(t, "leverage", got.Leverage()[1], 3*want.Leverage()[1], 1e-13)
	for _, w := range [][]float64{{1, -1, 1, 1}, {1, math.NaN(), 1, 1}} {
		if _, err := lsq.Linear(a, y, w); err == nil {
			t.Errorf("weights %v are no error", w)
		}
	}
}

// TestExact: exact observations give back the truth.
func TestExact(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		a, b := rapid.Float64Range(0.5, 3).Draw(t, "a"), rapid.Float64Range(0.2, 1.5).Draw(t, "b")
		p := lsq.Problem{M: 9, N: 2,
			Residuals: func(x, r []float64) error {
				for i := range r {
					s := float64(i) / 3
					r[i] = x[0]*math.Exp(-x[1]*s) - a*math.Exp(-b*s)
				}
				return nil
			},
			Jacobian: func(x []float64, j *mat.Dense) error {
				for i := range 9 {
					s := float64(i) / 3
					e := math.Exp(-x[1] * s)
					j.SetRow(i, []float64{e, -x[0] * s * e})
				}
				return nil
			},
		}
		res, err := lsq.Solve(p, []float64{1, 0.7}, lsq.Settings{})
		if err != nil || !res.Status.OK() || math.Abs(res.X[0]-a) > 1e-10 || math.Abs(res.X[1]-b) > 1e-10 {
			t.Fatalf("%v, %v at %v, want %g, %g", err, res.Status, res.X, a, b)
		}
	})
}
