package lsq_test

import (
	"encoding/json"
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/lsq"
)

// example finds one entry of a file of worked examples.
func example(t testing.TB, file, id string, into any) {
	t.Helper()
	var all struct{ Examples []json.RawMessage }
	readChecks(t, file, &all)
	for _, raw := range all.Examples {
		var head struct{ ID string }
		if err := json.Unmarshal(raw, &head); err != nil {
			t.Fatal(err)
		}
		if head.ID == id {
			if err := json.Unmarshal(raw, into); err != nil {
				t.Fatal(err)
			}
			return
		}
	}
	t.Fatalf("%s has no example %s", file, id)
}

// near compares within half a unit of the last printed digit, or what is given.
func near(t testing.TB, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s is %.10g, want %.10g within %.1g", what, got, want, tol)
	}
}

// TestThermometer is the straight-line calibration of JCGM 100:2008, annex H.3:
// correlated intercept and slope, and the uncertainty of a correction predicted
// outside the data.
func TestThermometer(t *testing.T) {
	var h3 struct {
		T, B                []float64
		T0                  float64
		PredictAt           float64 `json:"predict_at"`
		Published, Computed map[string]float64
	}
	example(t, "gum.json", "H3", &h3)
	a := mat.NewDense(len(h3.T), 2, nil)
	for i, v := range h3.T {
		a.SetRow(i, []float64{1, v - h3.T0})
	}
	res, err := lsq.Linear(a, h3.B, nil)
	if err != nil || !res.Status.OK() {
		t.Fatal(err, res.Status)
	}
	cov, err := res.Covariance()
	if err != nil {
		t.Fatal(err)
	}
	s := math.Sqrt(res.SumSquares / float64(len(h3.T)-2))
	g := mat.NewVecDense(2, []float64{1, h3.PredictAt - h3.T0})
	got := map[string]float64{
		"y1": res.X[0], "y2": res.X[1], "s": s,
		"s_y1": s * math.Sqrt(cov.At(0, 0)), "s_y2": s * math.Sqrt(cov.At(1, 1)),
		"r":   cov.At(0, 1) / math.Sqrt(cov.At(0, 0)*cov.At(1, 1)),
		"b30": mat.Dot(g, mat.NewVecDense(2, res.X)), "u_b30": s * math.Sqrt(mat.Inner(g, cov, g)),
	}
	// Half a unit of the last digit the Guide prints.
	printed := map[string]float64{"y1": 5e-5, "s_y1": 5e-5, "y2": 5e-6, "s_y2": 5e-6, "r": 5e-4, "s": 5e-5, "b30": 5e-5, "u_b30": 5e-5}
	if len(h3.Published) != len(printed) {
		t.Fatalf("%d published figures, want %d", len(h3.Published), len(printed))
	}
	for k, tol := range printed {
		near(t, k+" (published)", got[k], h3.Published[k], tol)
		// The recomputed figures carry nine decimals.
		near(t, k+" (computed)", got[k], h3.Computed[k], 1e-9)
	}
}

// TestPaiFisher reconciles five measured values that are bound, with three unmeasured
// ones, by six nonlinear equations (Pai and Fisher 1988). The equations are rows of
// large weight, as a fit would carry a relation that is all but exact.
func TestPaiFisher(t *testing.T) {
	var pf struct {
		Measured  []float64
		X         []float64 `json:"published_x"`
		U         []float64 `json:"published_u"`
		Objective float64   `json:"computed_objective"`
		CX        []float64 `json:"computed_x"`
		CU        []float64 `json:"computed_u"`
	}
	example(t, "reconciliation.json", "pai_fisher", &pf)
	// With weight w the equations stay open by about 1/w^2 of the multipliers, which
	// are below 0.1 here: 1e-9 at 1e4.
	const w = 1e4
	p := lsq.Problem{M: 11, N: 8,
		Residuals: func(v, r []float64) error {
			x, u := v[:5], v[5:]
			if u[2] < 0 {
				return errNegative
			}
			e := [6]float64{
				0.5*x[0]*x[0] - 0.7*x[1] + x[2]*u[0] + x[1]*x[1]*u[0]*u[1] + 2*x[2]*u[2]*u[2] - 255.8,
				x[0] - 2*x[1] + 3*x[0]*x[2] - 2*x[1]*u[0] - x[1]*u[1]*u[2] + 111.2,
				x[2]*u[0] - x[0] + 3*x[1] + x[0]*u[1] - x[2]*math.Sqrt(u[2]) - 33.57,
				x[3] - x[0] - x[2]*x[2] + u[1] + 3*u[2],
				x[4] - 2*x[2]*u[1]*u[2],
				2*x[0] + x[1]*x[2]*u[0] + u[1] - u[2] - 126.6,
			}
			for i := range e {
				r[i] = w * e[i]
			}
			for i := range x {
				r[6+i] = x[i] - pf.Measured[i]
			}
			return nil
		},
		Jacobian: func(v []float64, j *mat.Dense) error {
			x, u := v[:5], v[5:]
			s := math.Sqrt(u[2])
			for i, row := range [][]float64{
				{x[0], -0.7 + 2*x[1]*u[0]*u[1], u[0] + 2*u[2]*u[2], 0, 0, x[2] + x[1]*x[1]*u[1], x[1] * x[1] * u[0], 4 * x[2] * u[2]},
				{1 + 3*x[2], -2 - 2*u[0] - u[1]*u[2], 3 * x[0], 0, 0, -2 * x[1], -x[1] * u[2], -x[1] * u[1]},
				{-1 + u[1], 3, u[0] - s, 0, 0, x[2], x[0], -x[2] / (2 * s)},
				{-1, 0, -2 * x[2], 1, 0, 0, 1, 3},
				{0, 0, -2 * u[1] * u[2], 0, 1, 0, -2 * x[2] * u[2], -2 * x[2] * u[1]},
				{2, x[2] * u[0], x[1] * u[0], 0, 0, x[1] * x[2], 1, -1},
			} {
				for k, d := range row {
					j.Set(i, k, w*d)
				}
			}
			for i := range x {
				j.Set(6+i, i, 1)
			}
			return nil
		},
	}
	res, err := lsq.Solve(p, append(append([]float64(nil), pf.Measured...), 11, 0.6, 2), lsq.Settings{})
	if err != nil || !res.Status.OK() {
		t.Fatal(err, res.Status)
	}
	published, computed := append(pf.X, pf.U...), append(pf.CX, pf.CU...)
	for k, v := range res.X {
		// The printed solution closes the equations to 0.003 only; five digits agree.
		near(t, "published value", v, published[k], 5e-5*math.Max(1, published[k]))
		near(t, "computed value", v, computed[k], 1e-6*math.Max(1, computed[k]))
	}
	near(t, "objective", res.SumSquares, pf.Objective, 1e-7)
}

var errNegative = errorString("negative under the root")

type errorString string

func (e errorString) Error() string { return string(e) }

// TestProfile: one observation y = exp(theta) + e, where the interval has a closed form
// and, above a certain error, no lower end: the shape that the logarithm of a
// roughness takes towards the smooth wall.
func TestProfile(t *testing.T) {
	var file struct {
		Cases []struct {
			Sigma   float64
			Profile [2]*float64 `json:"profile95"`
			Wald    [2]float64  `json:"wald95"`
		}
	}
	example(t, "design_identifiability.json", "profile_exp", &file)
	for _, c := range file.Cases {
		p := lsq.Problem{M: 1, N: 1,
			Residuals: func(x, r []float64) error { r[0] = (math.Exp(x[0]) - 1) / c.Sigma; return nil },
			Jacobian:  func(x []float64, j *mat.Dense) error { j.Set(0, 0, math.Exp(x[0])/c.Sigma); return nil },
		}
		res, err := lsq.Solve(p, []float64{0.5}, lsq.Settings{})
		if err != nil || !res.Status.OK() {
			t.Fatal(err, res.Status)
		}
		sd, err := res.SD()
		if err != nil {
			t.Fatal(err)
		}
		// The 95 % point of chi-square with one degree of freedom.
		const rise = 3.841458820694
		near(t, "Wald end", 1.9599639845401*sd[0], c.Wald[1], 1e-9)
		lower, upper, err := lsq.Profile(p, res, 0, rise, lsq.Settings{})
		if err != nil {
			t.Fatal(err)
		}
		near(t, "upper end", upper, *c.Profile[1], 1e-6)
		if c.Profile[0] == nil {
			if !math.IsInf(lower, -1) {
				t.Errorf("sigma %g: lower end %g, want none", c.Sigma, lower)
			}
			// With a bound in the way, that is the end.
			p.Lower = []float64{-5}
			if lower, _, err = lsq.Profile(p, res, 0, rise, lsq.Settings{}); err != nil || lower != -5 {
				t.Errorf("sigma %g: lower end %g, %v, want the bound", c.Sigma, lower, err)
			}
			continue
		}
		near(t, "lower end", lower, *c.Profile[0], 1e-6)
	}
}

// TestProfileOfLinear: in a linear problem the profile interval is the Wald interval,
// whatever the other unknowns.
func TestProfileOfLinear(t *testing.T) {
	a := mat.NewDense(5, 2, []float64{1, 0, 1, 1, 1, 2, 1, 3, 1, 5})
	p := linear(a, []float64{0.1, 0.9, 2.2, 2.8, 5.1})
	res, err := lsq.Solve(p, []float64{0, 0}, lsq.Settings{})
	if err != nil {
		t.Fatal(err)
	}
	sd, err := res.SD()
	if err != nil {
		t.Fatal(err)
	}
	for k := range 2 {
		lower, upper, err := lsq.Profile(p, res, k, 4, lsq.Settings{})
		if err != nil {
			t.Fatal(err)
		}
		// Ends are found to 1e-7 of a standard deviation.
		near(t, "lower end", lower, res.X[k]-2*sd[k], 1e-6*sd[k])
		near(t, "upper end", upper, res.X[k]+2*sd[k], 1e-6*sd[k])
	}
	// A result that is not the minimum is found out.
	off := *res
	off.X = []float64{res.X[0], res.X[1] + 0.3}
	off.SumSquares += 10
	if _, _, err := lsq.Profile(p, &off, 0, 4, lsq.Settings{}); err == nil {
		t.Error("a profile below its minimum goes unnoticed")
	}
}

// TestProfileMeetsNothing: where the unknown cannot be evaluated any further the
// interval ends at the edge of what can.
func TestProfileMeetsNothing(t *testing.T) {
	p := lsq.Problem{M: 1, N: 1,
		Residuals: func(x, r []float64) error {
			if x[0] > 1.5 {
				return errNegative
			}
			r[0] = x[0]
			return nil
		},
		Jacobian: func(_ []float64, j *mat.Dense) error { j.Set(0, 0, 1); return nil },
	}
	res, err := lsq.Solve(p, []float64{1}, lsq.Settings{})
	if err != nil {
		t.Fatal(err)
	}
	lower, upper, err := lsq.Profile(p, res, 0, 4, lsq.Settings{})
	if err != nil {
		t.Fatal(err)
	}
	near(t, "lower end", lower, -2, 1e-6)
	near(t, "edge", upper, 1.5, 1e-6)
}
