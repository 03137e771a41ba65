package stat_test

import (
	"encoding/json"
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/lsq"
	"tapround/calibrate/stat"
)

type difference struct {
	from, to string
	value    float64
	sd       float64
}

func (d *difference) UnmarshalJSON(b []byte) error {
	return json.Unmarshal(b, &[]any{&d.from, &d.to, &d.value, &d.sd})
}

type network struct {
	ID        string
	Fixed     map[string]float64
	Unknown   []string
	Observed  []difference    `json:"observations_from_to_difference_sd"`
	Published json.RawMessage // fields differ from source to source
	Computed  struct {
		Height     map[string]float64
		Apriori    []float64 `json:"sd_apriori"`
		Posterior  []float64 `json:"sd_aposteriori"`
		Residual   []float64 `json:"residual_adjusted_minus_observed"`
		VPV        float64
		Dof        int
		S0         float64
		Redundancy []float64
		W          []float64 `json:"w_baarda"`
		Tau        []float64 `json:"tau_pope"`
		Detectable []float64 `json:"minimal_detectable_bias_alpha0_001_power0_80"`
		External   []float64 `json:"external_effect_of_that_bias_in_sd"`
	}
}

func (n network) adjust(t testing.TB) *lsq.Result {
	t.Helper()
	place := map[string]int{}
	for k, name := range n.Unknown {
		place[name] = k
	}
	a := mat.NewDense(len(n.Observed), len(n.Unknown), nil)
	y, w := make([]float64, len(n.Observed)), make([]float64, len(n.Observed))
	for i, o := range n.Observed {
		y[i], w[i] = o.value, 1/(o.sd*o.sd)
		for name, sign := range map[string]float64{o.to: 1, o.from: -1} {
			if k, ok := place[name]; ok {
				a.Set(i, k, sign)
			} else {
				y[i] -= sign * n.Fixed[name]
			}
		}
	}
	res, err := lsq.Linear(a, y, w)
	if err != nil || !res.Status.OK() {
		t.Fatal(n.ID, err, res.Status)
	}
	return res
}

// TestLevelling holds adjustment and snooping to six published levelling networks.
func TestLevelling(t *testing.T) {
	var file struct {
		Baarda   map[string]any `json:"baarda_constants"`
		Networks []network
	}
	readChecks(t, "levelling.json", &file)
	if len(file.Networks) != 6 {
		t.Fatalf("%d networks, want 6", len(file.Networks))
	}
	lambda0 := stat.Noncentrality(0.001, 0.80)
	near(t, "lambda0", lambda0, file.Baarda["lambda0"].(float64), 1e-8)
	near(t, "lambda0 at 5 %", stat.Noncentrality(0.05, 0.80), file.Baarda["lambda0_alpha05"].(float64), 1e-8)
	near(t, "critical w", stat.NormalQuantile(1-0.001/2), file.Baarda["critical_w"].(float64), 1e-8)
	for _, n := range file.Networks {
		t.Run(n.ID, func(t *testing.T) { checkNetwork(t, n, lambda0) })
	}
}

func checkNetwork(t *testing.T, n network, lambda0 float64) {
	res, c := n.adjust(t), n.Computed
	sd, err := res.SD()
	if err != nil {
		t.Fatal(err)
	}
	s0 := math.Sqrt(res.SumSquares / float64(c.Dof))
	near(t, "vPv", res.SumSquares, c.VPV, 1e-8*c.VPV)
	near(t, "s0", s0, c.S0, 1e-8*c.S0)
	// The file carries ten figures.
	for k, name := range n.Unknown {
		near(t, "height "+name, res.X[k], c.Height[name], 1e-7)
		near(t, "sd "+name, sd[k], c.Apriori[k], 1e-8*c.Apriori[k])
		near(t, "sd with s0 "+name, s0*sd[k], c.Posterior[k], 1e-8*c.Posterior[k])
	}
	h := res.Leverage()
	w := stat.WTest(res.R, h)
	tau := stat.Tau(w, s0)
	sum := 0.0
	for i, o := range n.Observed {
		r := 1 - h[i]
		sum += r
		near(t, "residual", res.R[i]*o.sd, c.Residual[i], 1e-11)
		near(t, "redundancy", r, c.Redundancy[i], 1e-9)
		near(t, "w", w[i], c.W[i], 1e-8)
		near(t, "tau", tau[i], c.Tau[i], 1e-8)
		near(t, "detectable", stat.DetectableError(o.sd, r, lambda0), c.Detectable[i], 1e-8*c.Detectable[i])
		near(t, "external", stat.ExternalEffect(r, lambda0), c.External[i], 1e-8*c.External[i])
	}
	near(t, "sum of redundancy", sum, float64(c.Dof), 1e-12)
	checkPublished(t, n, res, s0, sd)
}

// checkPublished compares with what the sources print, to half of the last digit, or a
// whole one where they worked from rounded figures.
func checkPublished(t *testing.T, n network, res *lsq.Result, s0 float64, sd []float64) {
	var p struct {
		Height map[string]float64
		S0     float64
		Pope   []float64 `json:"pope_statistic"`
		W      []float64 `json:"baarda_statistic"`
		R      []float64 `json:"redundancy"`
		Apost  []float64 `json:"sd_aposteriori"`
		Apri   []float64 `json:"sd_apriori_mm"`
		Sum    float64   `json:"sum_squares"`
		Norm   float64   `json:"largest_normalised_residual"`
		At     int       `json:"at_observation"`
	}
	if err := json.Unmarshal(n.Published, &p); err != nil {
		t.Fatal(err)
	}
	compared := 0
	check := func(what string, got, want, tol float64) {
		t.Helper()
		compared++
		near(t, "published "+what, got, want, tol)
	}
	for k, name := range n.Unknown {
		if want, ok := p.Height[name]; ok {
			check("height "+name, res.X[k], want, 1e-3)
		}
		if p.Apost != nil {
			check("sd "+name, s0*sd[k], p.Apost[k], 1e-3)
		}
		if p.Apri != nil {
			check("sd in mm "+name, 1e3*sd[k], p.Apri[k], 0.06)
		}
	}
	h := res.Leverage()
	w := stat.WTest(res.R, h)
	for i := range p.W {
		check("w", math.Abs(w[i]), p.W[i], 0.06)
		check("tau", math.Abs(w[i]/s0), p.Pope[i], 0.06)
		check("redundancy", 1-h[i], p.R[i], 0.06)
	}
	if p.S0 > 0 {
		check("s0", s0, p.S0, 0.006)
	}
	if p.Sum > 0 {
		check("sum of squares", res.SumSquares, p.Sum, 6e-4)
	}
	if p.At > 0 {
		check("largest w", math.Abs(w[p.At-1]), p.Norm, 0.006)
		for i := range w {
			if math.Abs(w[i]) > math.Abs(w[p.At-1]) {
				t.Errorf("observation %d has a larger w than the published %d", i+1, p.At)
			}
		}
	}
	if compared == 0 {
		t.Error("no published figure was compared")
	}
}

// TestTau compares with tables of Pope's tau and with the modified Thompson table that
// engineers use to reject readings.
func TestTau(t *testing.T) {
	var q struct {
		Tau struct {
			Alpha []float64
			Rows  map[string][]float64
		} `json:"tau_two_sided"`
		Thompson struct{ N, Value []float64 } `json:"modified_thompson_tau"`
	}
	readChecks(t, "quantiles.json", &q)
	for dof, row := range q.Tau.Rows {
		for i, want := range row {
			near(t, "tau "+dof, stat.TauLimit(q.Tau.Alpha[i], numbers(t, dof)[0]), want, 1e-10*want)
		}
	}
	for i, n := range q.Thompson.N {
		// Printed to four decimals.
		near(t, "modified Thompson tau", stat.TauLimit(0.05, n-1)*math.Sqrt((n-1)/n), q.Thompson.Value[i], 1.01e-4)
	}
}
