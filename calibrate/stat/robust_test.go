package stat_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"
	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/lsq"
	"tapround/calibrate/stat"
)

type robustFit struct {
	Coef        []float64
	Scale       float64
	SE          []float64
	Weights     map[string]float64 `json:"weights_below_1"`
	At          []int              `json:"weights_below_1_at"`
	Sigma       float64
	W21         float64 `json:"weight_obs21"`
	W4          float64 `json:"weight_obs4"`
	SumAbs      float64 `json:"sum_abs"`
	ResidualSE  float64 `json:"residual_se"`
	Description string  `json:"note"`
}

type stackLoss struct {
	Tuning struct {
		Rows []struct {
			Loss       string
			C          float64
			Efficiency float64
		}
		MAD float64 `json:"mad_factor"`
	}
	Stack struct {
		Data          [][]float64
		OLS           robustFit
		Hat           []float64
		Std21         float64   `json:"standardised_residual_obs21"`
		Huber         robustFit `json:"huber_mad_converged"`
		HuberExact    robustFit `json:"huber_exact_factor"`
		BisquareExact robustFit `json:"bisquare_exact_factor"`
		Known         robustFit `json:"huber_known_sigma"`
		Bisquare      robustFit
		LAD           robustFit
	} `json:"stackloss"`
}

func readStack(t *testing.T) (stackLoss, *mat.Dense, []float64) {
	t.Helper()
	var s stackLoss
	readChecks(t, "robust.json", &s)
	m := len(s.Stack.Data)
	if m != 21 {
		t.Fatalf("%d rows, want 21", m)
	}
	x, y := mat.NewDense(m, 4, nil), make([]float64, m)
	for i, r := range s.Stack.Data {
		x.SetRow(i, []float64{1, r[0], r[1], r[2]})
		y[i] = r[3]
	}
	return s, x, y
}

func ones(n int, v float64) []float64 {
	out := make([]float64, n)
	for i := range out {
		out[i] = v
	}
	return out
}

// TestStackLoss compares robust fits of Brownlee's stack-loss data with R.
func TestStackLoss(t *testing.T) {
	s, x, y := readStack(t)
	d := s.Stack
	sd := ones(21, 1)
	huber, bisquare := stat.Huber(stat.HuberTuning), stat.Bisquare(stat.BisquareTuning)
	const rFactor = 1 / 0.6745 // R's rounded constant
	fit := func(what string, want robustFit, loss stat.Loss, set stat.RobustSettings) *stat.RobustFit {
		t.Helper()
		f, err := stat.Robust(x, y, sd, loss, set)
		if err != nil || !f.Converged {
			t.Fatalf("%s: %v, %+v", what, err, f)
		}
		for k, b := range f.X {
			near(t, what, b, want.Coef[k], 1e-6*math.Max(1, math.Abs(want.Coef[k])))
		}
		if want.Scale > 0 {
			near(t, what+" scale", f.Scale, want.Scale, 1e-6)
		}
		return f
	}
	f := fit("Huber", d.Huber, huber, stat.RobustSettings{Factor: rFactor})
	se, err := f.SD()
	if err != nil {
		t.Fatal(err)
	}
	each(t, "Huber standard error", se, d.Huber.SE, 1e-6)
	for name, w := range d.Huber.Weights {
		near(t, "weight "+name, f.Weights[int(numbers(t, name)[0])-1], w, 1e-6)
	}
	exact := fit("Huber, exact factor", d.HuberExact, huber, stat.RobustSettings{Factor: stat.MADFactor})
	f = fit("bisquare", d.Bisquare, bisquare, stat.RobustSettings{Factor: rFactor, Start: f.X})
	near(t, "bisquare weight 21", f.Weights[20], d.Bisquare.W21, 1e-6)
	near(t, "bisquare weight 4", f.Weights[3], d.Bisquare.W4, 1e-6)
	fit("bisquare, exact factor", d.BisquareExact, bisquare, stat.RobustSettings{Factor: stat.MADFactor, Start: exact.X})

	sd = ones(21, d.Known.Sigma)
	f = fit("Huber, known deviation", d.Known, huber, stat.RobustSettings{})
	var below []int
	for i, w := range f.Weights {
		if w < 1 {
			below = append(below, i+1)
		}
	}
	if len(below) != len(d.Known.At) {
		t.Fatalf("weights below one at %v, want %v", below, d.Known.At)
	}
	for i := range below {
		if below[i] != d.Known.At[i] {
			t.Errorf("weights below one at %v, want %v", below, d.Known.At)
		}
	}
}

// TestLeastAbsolute compares with the linear-programming fit of the same data.
func TestLeastAbsolute(t *testing.T) {
	s, x, y := readStack(t)
	b, sum, err := stat.LeastAbsolute(x, y, ones(21, 1))
	if err != nil {
		t.Fatal(err)
	}
	each(t, "LAD", b, s.Stack.LAD.Coef, 1e-6)
	near(t, "LAD sum", sum, s.Stack.LAD.SumAbs, 1e-6)
	// Turning the data round turns the answer round: the starting basis follows the sign.
	for i := range y {
		y[i] = -y[i]
	}
	turned, _, err := stat.LeastAbsolute(x, y, ones(21, 2))
	if err != nil {
		t.Fatal(err)
	}
	for k := range b {
		near(t, "LAD turned", turned[k], -b[k], 1e-8)
	}
}

// TestStackLossOrdinary: least squares, leverages and the standardised residual.
func TestStackLossOrdinary(t *testing.T) {
	s, x, y := readStack(t)
	res, err := lsq.Linear(x, y, nil)
	if err != nil {
		t.Fatal(err)
	}
	sd, err := res.SD()
	if err != nil {
		t.Fatal(err)
	}
	s0 := math.Sqrt(res.SumSquares / 17)
	near(t, "s0", s0, s.Stack.OLS.ResidualSE, 1e-6)
	for k := range res.X {
		near(t, "coefficient", res.X[k], s.Stack.OLS.Coef[k], 1e-6)
		near(t, "standard error", s0*sd[k], s.Stack.OLS.SE[k], 1e-6)
	}
	h := res.Leverage()
	each(t, "leverage", h, s.Stack.Hat, 1e-10)
	tau := stat.Tau(stat.WTest(res.R, h), s0)
	// The file counts residuals observed minus fitted.
	near(t, "standardised residual 21", -tau[20], s.Stack.Std21, 1e-9)
}

// TestTuning: the constants cost 5 % of efficiency with normal errors, E(psi')^2 over
// E(psi^2), by quadrature.
func TestTuning(t *testing.T) {
	s, _, _ := readStack(t)
	near(t, "MAD factor", stat.MADFactor, s.Tuning.MAD, 1e-14)
	near(t, "MAD factor", stat.MADFactor, 1/stat.NormalQuantile(0.75), 1e-12)
	losses := map[string]struct {
		stat.Loss
		c float64
	}{"Huber": {stat.Huber(stat.HuberTuning), stat.HuberTuning}, "Tukey bisquare": {stat.Bisquare(stat.BisquareTuning), stat.BisquareTuning}}
	for _, row := range s.Tuning.Rows {
		l, ok := losses[row.Loss]
		if !ok || l.c != row.C {
			t.Fatalf("no loss %s with %g", row.Loss, row.C)
		}
		// Piecewise smooth: the kink at c splits the range, 9 leaves 1e-18 outside.
		mean := func(f func(u float64) float64) float64 {
			g := func(u float64) float64 { return f(u) * math.Exp(-u*u/2) / math.Sqrt(2*math.Pi) }
			return 2 * (quad.Fixed(g, 0, l.c, 60, nil, 0) + quad.Fixed(g, math.Nextafter(l.c, 9), 9, 60, nil, 0))
		}
		slope := mean(l.Slope)
		square := mean(func(u float64) float64 { return u * l.Weight(u) * u * l.Weight(u) })
		near(t, row.Loss+" efficiency", slope*slope/square, row.Efficiency, 1e-7)
		for _, u := range []float64{-5, -1.2, 0.3, 1.3, 2.7, 4.6} {
			const h = 1e-6
			num := ((u+h)*l.Weight(u+h) - (u-h)*l.Weight(u-h)) / (2 * h)
			near(t, row.Loss+" slope", l.Slope(u), num, 1e-8)
		}
	}
}
