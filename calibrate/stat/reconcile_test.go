package stat_test

import (
	"fmt"
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/stat"
)

func dense(rows [][]float64) *mat.Dense {
	a := mat.NewDense(len(rows), len(rows[0]), nil)
	for i, r := range rows {
		a.SetRow(i, r)
	}
	return a
}

func each(t *testing.T, what string, got, want []float64, tol float64) {
	t.Helper()
	if len(got) != len(want) || len(got) == 0 {
		t.Fatalf("%s: %d values, want %d", what, len(got), len(want))
	}
	for i := range got {
		near(t, fmt.Sprintf("%s %d", what, i+1), got[i], want[i], tol)
	}
}

func diagonalRoot(s *mat.SymDense, factor float64) []float64 {
	out := make([]float64, s.SymmetricDim())
	for i := range out {
		out[i] = factor * math.Sqrt(s.At(i, i))
	}
	return out
}

// TestVDI2048 is the worked example of the guideline: flows of a steam cycle, two pairs
// of meters with correlated errors.
func TestVDI2048(t *testing.T) {
	var v struct {
		Variables []string
		Measured  []float64
		Corr      [][3]any    `json:"correlations"`
		A         [][]float64 `json:"constraint_matrix"`
		Cases     []struct {
			Half           []float64 `json:"half_width_95"`
			Correction     []float64
			Reconciled     []float64
			ReconciledHalf []float64 `json:"reconciled_half_width_95"`
			Objective      float64
			Limit          float64    `json:"chi2_95_dof3"`
			W              []*float64 `json:"standardised_correction"`
			Open           []float64  `json:"constraint_residual"`
		}
		Published struct {
			Correction     []float64
			ReconciledHalf []float64 `json:"reconciled_half_width_95"`
		} `json:"published_case1"`
	}
	example(t, "reconciliation.json", "vdi2048", &v)
	const half = 1.96 // half-widths of the guideline over standard deviations
	for n, c := range v.Cases {
		s := mat.NewSymDense(len(v.Measured), nil)
		for i, h := range c.Half {
			s.SetSym(i, i, h/half*h/half)
		}
		for _, rho := range v.Corr {
			i, j := index(v.Variables, rho[0]), index(v.Variables, rho[1])
			s.SetSym(i, j, rho[2].(float64)*math.Sqrt(s.At(i, i)*s.At(j, j)))
		}
		r, err := stat.Reconcile(v.Measured, s, dense(v.A))
		if err != nil {
			t.Fatal(err)
		}
		each(t, "correction", r.Correction, c.Correction, 1e-9)
		each(t, "reconciled", r.X, c.Reconciled, 5e-9*100)
		each(t, "half-width", diagonalRoot(r.Cov, half), c.ReconciledHalf, 1e-9)
		each(t, "balance", r.Open, c.Open, 1e-12)
		near(t, "chi-square", r.ChiSquare, c.Objective, 1e-8)
		near(t, "limit", stat.ChiSquareQuantile(0.95, float64(r.Dof)), c.Limit, 1e-8)
		for i, w := range c.W {
			if w == nil {
				near(t, "w of a value in no balance", r.W[i], 0, 0)
				continue
			}
			near(t, "w", math.Abs(r.W[i]), *w, 1e-8)
		}
		if n == 0 {
			// The guideline's own figures, to 1e-9.
			each(t, "published correction", r.Correction, v.Published.Correction, 1e-9)
			each(t, "published half-width", diagonalRoot(r.Cov, half), v.Published.ReconciledHalf, 1e-9)
		}
	}
}

func index(names []string, name any) int {
	for i, n := range names {
		if n == name {
			return i
		}
	}
	panic(fmt.Sprint("no variable ", name))
}

type plant struct {
	A         [][]float64 `json:"constraint_matrix"`
	Published struct {
		Case1  []float64 `json:"case1_reconciled"`
		Global float64   `json:"case2_global"`
		Nodal  []float64 `json:"case2_nodal_z"`
	}
	Cases []struct {
		Measured     []float64
		Open         []float64 `json:"constraint_residual"`
		Global       float64   `json:"global_statistic"`
		Reconciled   []float64
		ReconciledSD []float64             `json:"reconciled_sd"`
		Nodal        []float64             `json:"nodal_z"`
		W            []float64             `json:"measurement_z"`
		GLR          map[string][2]float64 `json:"glr_T_and_magnitude"`
	}
	Sidak map[string]float64 `json:"sidak_5pct"`
}

// TestBypass is the heat exchanger with by-pass of Narasimhan and Jordache: global,
// nodal, measurement and likelihood-ratio tests of biases and leaks.
func TestBypass(t *testing.T) {
	var b plant
	example(t, "reconciliation.json", "nj_bypass", &b)
	unit := mat.NewSymDense(6, nil)
	for i := range 6 {
		unit.SetSym(i, i, 1)
	}
	for n, c := range b.Cases {
		r, err := stat.Reconcile(c.Measured, unit, dense(b.A))
		if err != nil {
			t.Fatal(err)
		}
		each(t, "balance", r.Open, c.Open, 1e-9)
		each(t, "reconciled", r.X, c.Reconciled, 1e-7)
		each(t, "sd", diagonalRoot(r.Cov, 1), c.ReconciledSD, 1e-9)
		each(t, "nodal", absolute(r.Nodal), c.Nodal, 1e-8)
		each(t, "w", absolute(r.W), c.W, 1e-8)
		near(t, "global", r.ChiSquare, c.Global, 1e-7)
		near(t, "global by the detector", r.Detector.Global(r.Open), c.Global, 1e-7)
		if len(c.GLR) != 10 {
			t.Fatalf("%d likelihood ratios, want 10", len(c.GLR))
		}
		for name, want := range c.GLR {
			T, size, sd := r.Detector.Ratio(r.Open, signature(t, dense(b.A), name))
			near(t, "T of "+name, T, want[0], 1e-7)
			near(t, "size of "+name, math.Abs(size), math.Abs(want[1]), 1e-7)
			near(t, "T and size of "+name, T, size*size/(sd*sd), 1e-9)
		}
		// A leak at a node and a bias of the stream that touches only that node are the
		// same column; a bias of a stream inside is not.
		a := dense(b.A)
		near(t, "stream 1 and node 1", math.Abs(r.Detector.Cosine(signature(t, a, "bias stream 1"), signature(t, a, "leak node 1"))), 1, 1e-12)
		if c := math.Abs(r.Detector.Cosine(signature(t, a, "bias stream 2"), signature(t, a, "leak node 2"))); c > 0.99 {
			t.Errorf("stream 2 and node 2 have cosine %g", c)
		}
		if n == 0 {
			each(t, "published reconciled", r.X, b.Published.Case1, 6e-3)
		} else {
			near(t, "published global", r.ChiSquare, b.Published.Global, 6e-4)
			each(t, "published nodal", absolute(r.Nodal), b.Published.Nodal, 6e-4)
		}
	}
	near(t, "limit of 4 nodes", stat.SidakLimit(4, 2, 0.05), b.Sidak["nodal_m4"], 1e-8)
	near(t, "limit of 6 streams", stat.SidakLimit(6, 2, 0.05), b.Sidak["measurement_m6"], 1e-8)
	l := stat.SidakLimit(10, 2, 0.05)
	near(t, "limit of 10 ratios", l*l, b.Sidak["glr_chi2_m10"], 1e-7)
}

func absolute(v []float64) []float64 {
	out := make([]float64, len(v))
	for i, x := range v {
		out[i] = math.Abs(x)
	}
	return out
}

// signature of "bias stream n" or "leak node n" in the open balances.
func signature(t testing.TB, a *mat.Dense, name string) []float64 {
	t.Helper()
	var kind, of string
	var n int
	if _, err := fmt.Sscan(name, &kind, &of, &n); err != nil {
		t.Fatal(err)
	}
	m, _ := a.Dims()
	if kind == "bias" {
		return mat.Col(nil, n-1, a)
	}
	g := make([]float64, m)
	g[n-1] = 1
	return g
}

// TestSteamSystem is the network of Serth and Heenan, 28 streams in 11 balances.
func TestSteamSystem(t *testing.T) {
	var s struct {
		A        [][]float64 `json:"constraint_matrix"`
		Measured []float64
		SD       []float64
		Computed struct {
			Open         []float64 `json:"constraint_residual"`
			Global       float64   `json:"global_statistic"`
			Dof          int
			Reconciled   []float64
			ReconciledSD []float64 `json:"reconciled_sd"`
			W            []float64 `json:"measurement_z"`
		}
		True []float64 `json:"true_values"`
	}
	example(t, "reconciliation.json", "serth_heenan", &s)
	cov := mat.NewSymDense(len(s.SD), nil)
	for i, v := range s.SD {
		cov.SetSym(i, i, v*v)
	}
	a := dense(s.A)
	r, err := stat.Reconcile(s.Measured, cov, a)
	if err != nil {
		t.Fatal(err)
	}
	if r.Dof != s.Computed.Dof {
		t.Errorf("%d degrees of freedom, want %d", r.Dof, s.Computed.Dof)
	}
	each(t, "balance", r.Open, s.Computed.Open, 1e-9)
	each(t, "reconciled", r.X, s.Computed.Reconciled, 1e-7)
	each(t, "sd", diagonalRoot(r.Cov, 1), s.Computed.ReconciledSD, 1e-9)
	each(t, "w", absolute(r.W), s.Computed.W, 1e-8)
	near(t, "global", r.ChiSquare, s.Computed.Global, 1e-7)
	var closed mat.VecDense
	closed.MulVec(a, mat.NewVecDense(len(r.X), r.X))
	if worst := mat.Norm(&closed, math.Inf(1)); worst > 1e-10 {
		t.Errorf("the reconciled values leave a balance open by %g", worst)
	}
	// The published true values lie within five standard deviations of the reconciled.
	for i, v := range s.True {
		if d := math.Abs(v-r.X[i]) / math.Sqrt(r.Cov.At(i, i)); d > 5 {
			t.Errorf("stream %d is %.1f standard deviations from its true value", i+1, d)
		}
	}
}
