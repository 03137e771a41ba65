package lsq_test

import (
	"encoding/json"
	"math"
	"os"
	"strconv"
	"testing"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/lsq"
)

// nistSet is one data set of the NIST Statistical Reference Datasets.
type nistSet struct {
	Name         string
	Model        string
	Response     string
	Dof          int
	FirstIndex   int `json:"first_index"`
	Start1       []float64
	Start2       []float64
	Certified    []string
	CertifiedSD  []string `json:"certified_sd"`
	CertifiedRSS string   `json:"certified_rss"`
	Data         map[string][]float64
}

func readChecks(t testing.TB, name string, into any) {
	t.Helper()
	b, err := os.ReadFile("../../testdata/checks/statistics/" + name)
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(b, into); err != nil {
		t.Fatalf("%s: %v", name, err)
	}
}

func number(t testing.TB, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// digits is the number of correct decimal digits, log10 of the relative error; of the
// absolute error where the certified value is zero.
func digits(got, want float64) float64 {
	if got == want {
		return 16
	}
	e := math.Abs(got - want)
	if want != 0 {
		e /= math.Abs(want)
	}
	return math.Min(16, -math.Log10(e))
}

// problem is the fit of the set; x holds the predictors row by row.
func (s nistSet) problem(t testing.TB) (lsq.Problem, [][]float64) {
	t.Helper()
	f := nistModels[s.Name]
	if f == nil {
		t.Fatalf("no model for %s", s.Name)
	}
	y := append([]float64(nil), s.Data["y"]...)
	x := make([][]float64, len(y))
	for i := range y {
		if s.Response == "log(y)" {
			y[i] = math.Log(y[i])
		}
		for _, c := range []string{"x", "x1", "x2"} {
			if v, ok := s.Data[c]; ok {
				x[i] = append(x[i], v[i])
			}
		}
	}
	g := make([]float64, len(s.Start1))
	return lsq.Problem{M: len(y), N: len(s.Start1),
		Residuals: func(b, r []float64) error {
			for i := range r {
				r[i] = f(b, x[i], g) - y[i]
			}
			return nil
		},
		Jacobian: func(b []float64, j *mat.Dense) error {
			for i := range y {
				f(b, x[i], j.RawRowView(i))
			}
			return nil
		},
	}, x
}

// TestNISTNonlinear holds the solver to the certified values of all 27 nonlinear sets
// of the NIST Statistical Reference Datasets, from both starting points.
func TestNISTNonlinear(t *testing.T) {
	var file struct{ Datasets []nistSet }
	readChecks(t, "nist_nonlinear.json", &file)
	if len(file.Datasets) != 27 {
		t.Fatalf("%d sets, want 27", len(file.Datasets))
	}
	for _, s := range file.Datasets {
		for n, start := range [][]float64{s.Start1, s.Start2} {
			t.Run(s.Name+"/"+strconv.Itoa(n+1), func(t *testing.T) { checkNonlinear(t, s, start) })
		}
	}
}

func checkNonlinear(t *testing.T, s nistSet, start []float64) {
	p, _ := s.problem(t)
	res, err := lsq.Solve(p, start, lsq.Settings{})
	if err != nil {
		t.Fatal(err)
	}
	if !res.Status.OK() || res.Rank != p.N {
		t.Fatalf("%v, rank %d, after %d steps at %v", res.Status, res.Rank, res.Iterations, res.X)
	}
	sd, err := res.SD()
	if err != nil {
		t.Fatal(err)
	}
	s0 := math.Sqrt(res.SumSquares / float64(s.Dof))
	// Six digits is what double precision attains in every set with exact derivatives;
	// the residuals of Lanczos1 are 1e-14 of terms near one, so that their rounding
	// alone leaves 2.7 digits in the sum of squares.
	needSD := 6.0
	if s.Name == "Lanczos1" {
		needSD = 2.5
	}
	worst, worstSD := 16.0, 16.0
	for k := range res.X {
		worst = math.Min(worst, digits(res.X[k], number(t, s.Certified[k])))
		worstSD = math.Min(worstSD, digits(sd[k]*s0, number(t, s.CertifiedSD[k])))
	}
	rss := digits(res.SumSquares, number(t, s.CertifiedRSS))
	t.Logf("digits: values %.1f, deviations %.1f, sum %.1f; %d steps, %d evaluations, condition %.1e, offset %.1e",
		worst, worstSD, rss, res.Iterations, res.Evaluations, res.Condition, res.Offset)
	if worst < 6 || worstSD < needSD || rss < math.Min(6, needSD) {
		t.Errorf("digits: values %.2f, deviations %.2f, sum of squares %.2f", worst, worstSD, rss)
	}
}

// TestNISTDerivatives checks every derivative that the sets above rely on against
// central differences at the certified values.
func TestNISTDerivatives(t *testing.T) {
	var file struct{ Datasets []nistSet }
	readChecks(t, "nist_nonlinear.json", &file)
	for _, s := range file.Datasets {
		_, x := s.problem(t)
		f := nistModels[s.Name]
		b := make([]float64, len(s.Certified))
		for k, v := range s.Certified {
			b[k] = number(t, v)
		}
		g, scratch := make([]float64, len(b)), make([]float64, len(b))
		for _, row := range x {
			f(b, row, g)
			for k := range b {
				// Two steps of Richardson's: of the truncation (1e-5)^4 is left even where the
				// function changes over a hundredth of the unknown; rounding leaves 1e-11,
				// relative to the value of the function over the unknown.
				h := 1e-5 * b[k]
				c := b[k]
				at := func(d float64) float64 {
					b[k] = c + d
					v := f(b, row, scratch)
					b[k] = c
					return v
				}
				slope := (8*(at(h/2)-at(-h/2)) - (at(h) - at(-h))) / (6 * h)
				size := math.Max(math.Abs(g[k]*c), math.Abs(at(0)))
				if d := math.Abs(slope-g[k]) * math.Abs(c); d > 1e-7*size {
					t.Errorf("%s at %v: derivative %d is %g, differences give %g", s.Name, row, k+1, g[k], slope)
				}
			}
		}
	}
}

// TestNISTLinear holds Linear to the certified coefficients and deviations of the
// linear sets.
func TestNISTLinear(t *testing.T) {
	// Digits asked for: what QR of scaled columns keeps of each set's 15, by its
	// condition, as computed for this project; deviations keep more.
	need := map[string][2]float64{
		"Norris": {11, 12}, "Pontius": {11, 12}, "NoInt1": {13, 13}, "NoInt2": {13, 13},
		"Filip": {7, 8}, "Longley": {10, 11}, "Wampler1": {9, 0}, "Wampler2": {9, 0},
		"Wampler3": {9, 11}, "Wampler4": {7, 11}, "Wampler5": {5, 11},
	}
	var file struct{ Datasets []nistSet }
	readChecks(t, "nist_linear.json", &file)
	if len(file.Datasets) != len(need) {
		t.Fatalf("%d sets, want %d", len(file.Datasets), len(need))
	}
	for _, s := range file.Datasets {
		a, y := s.design()
		res, err := lsq.Linear(a, y, nil)
		if err != nil || !res.Status.OK() {
			t.Fatalf("%s: %v, %v", s.Name, err, res.Status)
		}
		sd, err := res.SD()
		if err != nil {
			t.Fatal(err)
		}
		m, n := a.Dims()
		s0 := math.Sqrt(res.SumSquares / float64(m-n))
		worst, worstSD := 16.0, 16.0
		for k, v := range s.Certified {
			worst = math.Min(worst, digits(res.X[k], number(t, v)))
			worstSD = math.Min(worstSD, digits(sd[k]*s0, number(t, s.CertifiedSD[k])))
		}
		t.Logf("%s: digits: values %.1f, deviations %.1f, condition %.1e", s.Name, worst, worstSD, res.Condition)
		if worst < need[s.Name][0] || worstSD < need[s.Name][1] {
			t.Errorf("%s: digits: values %.2f, deviations %.2f, want %v", s.Name, worst, worstSD, need[s.Name])
		}
	}
}

// design is the matrix of the set: powers of x, or the columns x1, x2 and on.
func (s nistSet) design() (*mat.Dense, []float64) {
	y := s.Data["y"]
	n := len(s.Certified)
	a := mat.NewDense(len(y), n, nil)
	for i := range y {
		for k := range n {
			power := k + s.FirstIndex
			x := s.Data["x"]
			switch {
			case power == 0:
				a.Set(i, k, 1)
			case x == nil:
				a.Set(i, k, s.Data["x"+strconv.Itoa(power)][i])
			default:
				v := 1.0
				for range power {
					v *= x[i]
				}
				a.Set(i, k, v)
			}
		}
	}
	return a, y
}
