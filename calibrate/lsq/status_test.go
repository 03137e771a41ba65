package lsq_test

import (
	"errors"
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/lsq"
)

// TestUnevaluable: where a point cannot be evaluated the step is shortened.
func TestUnevaluable(t *testing.T) {
	// ln x has its root at 1; from 9 a full Gauss-Newton step leads to 9 - 9 ln 9 < 0.
	for _, say := range []error{errors.New("negative"), nil} {
		p := lsq.Problem{M: 1, N: 1,
			Residuals: func(x, r []float64) error {
				r[0] = math.Log(x[0])
				if x[0] <= 0 {
					return say // nil: the residual itself is not a number
				}
				return nil
			},
			Jacobian: func(x []float64, j *mat.Dense) error { j.Set(0, 0, 1/x[0]); return nil },
		}
		res, err := lsq.Solve(p, []float64{9}, lsq.Settings{})
		if err != nil || !res.Status.OK() || math.Abs(res.X[0]-1) > 1e-9 {
			t.Errorf("error %v: %v, %+v", say, err, res)
		}
		if _, err := lsq.Solve(p, []float64{-1}, lsq.Settings{}); err == nil {
			t.Error("a start that cannot be evaluated is no error")
		}
	}
}

// consistent checks that residuals, Jacobian and sum of squares belong to X.
func consistent(t *testing.T, p lsq.Problem, res *lsq.Result) {
	t.Helper()
	r, j := make([]float64, p.M), mat.NewDense(p.M, p.N, nil)
	if p.Residuals(res.X, r) != nil || p.Jacobian(res.X, j) != nil {
		t.Error("the answer cannot be evaluated")
	}
	if !slices.Equal(r, res.R) || !mat.Equal(j, res.J) {
		t.Error("residuals or Jacobian are not those of the answer")
	}
	if s := mat.Dot(mat.NewVecDense(p.M, r), mat.NewVecDense(p.M, r)); math.Abs(s-res.SumSquares) > 1e-12*s {
		t.Errorf("sum of squares %g is not that of the residuals, %g", res.SumSquares, s)
	}
}

// TestNoise: residuals from an iterative solver carry its tolerance. Where that keeps
// the offset from falling, the answer still counts if what is left is negligible, and
// does not if it is not.
func TestNoise(t *testing.T) {
	for _, c := range []struct {
		grain float64
		want  lsq.Status
	}{{1e-6, lsq.Converged}, {0.3, lsq.Stalled}} {
		grain := func(v float64) float64 { return c.grain * math.Round(v/c.grain) }
		p := lsq.Problem{M: 6, N: 2,
			Residuals: func(x, r []float64) error {
				for i := range r {
					s := float64(i) / 2
					r[i] = grain(100*x[0]*math.Exp(-x[1]*s)) - 150*math.Exp(-0.8*s) + 0.3*math.Sin(9*s)
				}
				return nil
			},
			Jacobian: func(x []float64, j *mat.Dense) error {
				for i := range 6 {
					s := float64(i) / 2
					e := 100 * math.Exp(-x[1]*s)
					j.SetRow(i, []float64{e, -x[0] * s * e})
				}
				return nil
			},
		}
		res, err := lsq.Solve(p, []float64{1, 0.5}, lsq.Settings{})
		if err != nil || res.Status != c.want {
			t.Errorf("residuals in steps of %g: %v, %v, want %v (offset %g)", c.grain, err, res.Status, c.want, res.Offset)
		}
		if res.Iterations > 60 {
			t.Errorf("residuals in steps of %g: %d steps", c.grain, res.Iterations)
		}
		// The grain over the length of the residuals, 0.5, is what the offset can reach
		// where the sum of squares stops at the root of that.
		if c.want == lsq.Converged && res.Offset > 1e-5 {
			t.Errorf("residuals in steps of %g: offset %g", c.grain, res.Offset)
		}
		consistent(t, p, res)
	}
}

// TestLastStep: the answer is sharper than the tolerances ask for, by an undamped
// Gauss-Newton step at the end.
func TestLastStep(t *testing.T) {
	p := lsq.Problem{M: 3, N: 1,
		Residuals: func(x, r []float64) error {
			for i := range r {
				r[i] = math.Exp(x[0]*float64(i)) - []float64{1.1, 2, 3.8}[i]
			}
			return nil
		},
		Jacobian: func(x []float64, j *mat.Dense) error {
			for i := range 3 {
				j.Set(i, 0, float64(i)*math.Exp(x[0]*float64(i)))
			}
			return nil
		},
	}
	for _, tol := range []float64{0.3, 0.03, 1e-3} {
		res, err := lsq.Solve(p, []float64{0.2}, lsq.Settings{GradientTolerance: tol, StepTolerance: 0.1})
		if err != nil || !res.Status.OK() {
			t.Fatal(err, res.Status)
		}
		// Each step brings the offset down by a factor of several hundred here.
		if res.Offset > tol/200 {
			t.Errorf("tolerance %g: offset %g after the last step", tol, res.Offset)
		}
		consistent(t, p, res)
	}
}

// TestStatus: each way to end is told apart.
func TestStatus(t *testing.T) {
	exp := lsq.Problem{M: 2, N: 1,
		Residuals: func(x, r []float64) error { r[0], r[1] = math.Exp(x[0])-2, math.Exp(-x[0])-2; return nil },
		Jacobian: func(x []float64, j *mat.Dense) error {
			j.Set(0, 0, math.Exp(x[0]))
			j.Set(1, 0, -math.Exp(-x[0]))
			return nil
		},
	}
	wrong := exp
	wrong.Jacobian = func(x []float64, j *mat.Dense) error { j.Set(0, 0, -1); j.Set(1, 0, 1); return nil }
	rosenbrock := lsq.Problem{M: 2, N: 2,
		Residuals: func(x, r []float64) error { r[0], r[1] = 10*(x[1]-x[0]*x[0]), 1-x[0]; return nil },
		Jacobian: func(x []float64, j *mat.Dense) error {
			j.SetRow(0, []float64{-20 * x[0], 10})
			j.SetRow(1, []float64{-1, 0})
			return nil
		},
	}
	for _, c := range []struct {
		name  string
		p     lsq.Problem
		start []float64
		set   lsq.Settings
		want  lsq.Status
	}{
		{"derivative of the wrong sign", wrong, []float64{1}, lsq.Settings{}, lsq.Stalled},
		{"too few steps", rosenbrock, []float64{-1.2, 1}, lsq.Settings{MaxIterations: 3}, lsq.IterationLimit},
		{"residuals that vanish", rosenbrock, []float64{-1.2, 1}, lsq.Settings{}, lsq.Converged},
		{"start at the answer", rosenbrock, []float64{1, 1}, lsq.Settings{}, lsq.Converged},
	} {
		res, err := lsq.Solve(c.p, c.start, c.set)
		if err != nil || res.Status != c.want {
			t.Errorf("%s: %v, %v, want %v", c.name, err, res.Status, c.want)
		}
		consistent(t, c.p, res)
		if res.Status.OK() != (c.want == lsq.Converged) {
			t.Errorf("%s: OK is %v", c.name, res.Status.OK())
		}
	}
}

// TestCallersFaults: what the caller gets wrong is an error, not a status.
func TestCallersFaults(t *testing.T) {
	good := linear(mat.NewDense(2, 1, []float64{1, 1}), []float64{1, 2})
	for name, c := range map[string]struct {
		change func(p *lsq.Problem)
		start  []float64
	}{
		"no rows":       {func(p *lsq.Problem) { p.M = 0 }, []float64{0}},
		"no Jacobian":   {func(p *lsq.Problem) { p.Jacobian = nil }, []float64{0}},
		"short start":   {func(*lsq.Problem) {}, nil},
		"long bounds":   {func(p *lsq.Problem) { p.Upper = []float64{1, 2} }, []float64{0}},
		"bounds cross":  {func(p *lsq.Problem) { p.Lower, p.Upper = []float64{1}, []float64{0} }, []float64{0}},
		"bound unknown": {func(p *lsq.Problem) { p.Lower = []float64{math.NaN()} }, []float64{0}},
		"start unknown": {func(*lsq.Problem) {}, []float64{math.Inf(1)}},
		"no derivative": {func(p *lsq.Problem) {
			p.Jacobian = func([]float64, *mat.Dense) error { return errors.New("none") }
		}, []float64{0}},
		"derivative not finite": {func(p *lsq.Problem) {
			p.Jacobian = func(_ []float64, j *mat.Dense) error { j.Set(0, 0, math.NaN()); return nil }
		}, []float64{0}},
	} {
		p := good
		c.change(&p)
		if res, err := lsq.Solve(p, c.start, lsq.Settings{}); err == nil {
			t.Errorf("%s: no error, %v", name, res.Status)
		}
	}
	// A start outside its bounds is moved onto them.
	p := good
	p.Upper = []float64{1}
	if res, err := lsq.Solve(p, []float64{7}, lsq.Settings{}); err != nil || res.X[0] != 1 || res.Rank != 0 {
		t.Errorf("start outside: %v, %+v", err, res)
	}
	// Where no derivative can be had beyond a point, the iteration stays this side of it.
	p = good
	p.Jacobian = func(x []float64, j *mat.Dense) error {
		if x[0] > 1.2 {
			return errors.New("beyond")
		}
		j.Set(0, 0, 1)
		j.Set(1, 0, 1)
		return nil
	}
	res, err := lsq.Solve(p, []float64{0}, lsq.Settings{})
	if err != nil || res.Status != lsq.Stalled || res.X[0] > 1.2 || res.X[0] < 1.19 {
		t.Errorf("derivatives end at 1.2: %v, %v at %v", err, res.Status, res.X)
	}
	consistent(t, p, res)
}

// TestWords: every status has its own.
func TestWords(t *testing.T) {
	seen := map[string]bool{}
	for s := lsq.Converged; s <= lsq.IterationLimit; s++ {
		seen[s.String()] = true
	}
	if len(seen) != 4 || seen[lsq.Status(9).String()] {
		t.Errorf("words %v", seen)
	}
}
