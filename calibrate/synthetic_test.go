package calibrate

import (
	"encoding/json"
	"fmt"
	"math"
	"os"
	"testing"

	"tapround/calibrate/hydraulic"
	"tapround/survey"
)

// syntheticSurvey is testdata/checks/statistics/synthetic_survey.json: a survey of two
// pipes and a valve computed by an independent program (SciPy), with estimate,
// standard deviations, w of readings and prior rows, and nine hypotheses.
type syntheticSurvey struct {
	GaugeAtTap [][]int            `json:"gauge_at_tap"`
	PriorMean  map[string]float64 `json:"prior_mean"`
	PriorSD    map[string]float64 `json:"prior_sd"`
	Readings   []float64          `json:"readings_with_noise"`
	Results    struct {
		Map        map[string]float64 `json:"base_map"`
		SD         map[string]float64 `json:"base_sd"`
		Phi        float64            `json:"base_objective_sum_of_squares"`
		Redundancy []float64          `json:"base_redundancy"`
		W          []float64          `json:"base_w"`
		PriorW     map[string]float64 `json:"base_prior_row_w"`
		Hypotheses map[string]struct {
			Evidence    float64 `json:"log_evidence"`
			Phi         float64 `json:"sum_of_squares"`
			Parameter   string
			Estimate    float64
			SD          float64
			Probability float64 `json:"posterior_probability"`
		}
	}
}

// model builds it from our own nouns. Two things differ, and set the tolerances
// below: its meters read ln Q with a scatter of 0.01, ours Q with a scatter of 1 % of
// the reading (a second-order difference: 1.8 SD of 1 % is 2e-4 in ln Q, 0.02 SD), and
// it states no velocity heads, so total heads are probed.
func (c syntheticSurvey) model(t *testing.T) *Model {
	t.Helper()
	some := survey.Some
	s := &survey.Survey{Info: survey.Info{Latitude: 45, WaterTemperature: 20}}
	s.Points = []survey.Point{{Name: "1", Kind: survey.Reservoir}, {Name: "3", Kind: survey.Junction}, {Name: "4", Kind: survey.Junction}}
	k := math.Exp(c.PriorMean["ln_eps_a"])
	s.Pipes = []survey.Pipe{
		{Name: "a", From: "1", To: "3", Length: 200, Bore: 0.1, Roughness: some(k), Spread: some(math.Exp(c.PriorSD["ln_eps_a"]))},
		{Name: "b", From: "3", To: "4", Length: 200, Bore: 0.1, Roughness: some(k), Spread: some(math.Exp(c.PriorSD["ln_eps_b"]))},
	}
	s.Fittings = []survey.Fitting{{Name: "v", Pipe: "a", At: 200, Kind: survey.GateValve, K: some(math.Exp(c.PriorMean["ln_K"])), Spread: some(math.Exp(c.PriorSD["ln_K"]))}}
	for i := 1; i <= 4; i++ {
		s.Taps = append(s.Taps, survey.Tap{Name: fmt.Sprintf("T%d", i), Point: "1"})
		s.Gauges = append(s.Gauges, survey.Gauge{Name: fmt.Sprintf("G%d", i), Kind: survey.PressureGauge, High: 1})
	}
	s.Taps = append(s.Taps, survey.Tap{Name: "Q", Pipe: "a", At: 100})
	s.Gauges = append(s.Gauges, survey.Gauge{Name: "M", Kind: survey.FlowMeter, High: 1})
	for r := 0; r < 4; r++ {
		name := fmt.Sprint(r)
		s.Rounds = append(s.Rounds, survey.Round{Name: name})
		s.Conditions = append(s.Conditions, survey.Condition{Round: name, Item: "1", Kind: survey.LevelIs, Value: some(30), SD: some(c.PriorSD[fmt.Sprintf("Hs%d", r)])})
		if r > 0 {
			s.Conditions = append(s.Conditions, survey.Condition{Round: name, Item: "4", Kind: survey.DrawOff})
		}
	}
	var heads []survey.Head
	for r := 0; r < 4; r++ {
		for tap := 0; tap < 4; tap++ {
			g := fmt.Sprintf("G%d", c.GaugeAtTap[r][tap])
			heads = append(heads, survey.Head{Round: fmt.Sprint(r), Tap: fmt.Sprintf("T%d", tap+1), Gauge: g, Kind: survey.Static, Quantity: survey.PiezometricHead,
				Value: c.Readings[4*r+tap], Own: 0.03, PerGauge: 1, GaugeSD: c.PriorSD["offset_G1"], PerTap: 1, TapSD: c.PriorSD["elev_T1"]})
		}
	}
	for r := 1; r < 4; r++ {
		q := math.Exp(c.Readings[15+r])
		heads = append(heads, survey.Head{Round: fmt.Sprint(r), Tap: "Q", Gauge: "M", Kind: survey.FlowRate, Quantity: survey.VolumeFlow, Value: q, Own: 0.01 * q, PerGauge: 1e-12, GainSD: c.PriorSD["meter_gain"]})
	}
	m, err := New(s, heads, DefaultPriors())
	if err != nil {
		t.Fatal(err)
	}
	for i := range m.Rounds {
		m.Rounds[i].Conditions.Viscosity, m.Rounds[i].Conditions.Gravity = 1.004e-6, 9.80665
	}
	at := []hydraulic.Probe{{Point: -1, Link: 0, At: 0}, {Point: -1, Link: 0, At: 200}, {Point: 1, Link: 0}, {Point: 2, Link: 1}}
	for i := range m.Obs[:16] {
		p := at[i%4]
		p.View, p.Depth = hydraulic.Total, math.NaN()
		m.Obs[i].parts = []part{{probe: p, weight: 1}}
	}
	return m
}

// place finds our unknown for one of theirs.
func (c syntheticSurvey) place(m *Model, name string) int {
	switch {
	case name == "ln_eps_a":
		return m.UnknownOf("pipe", "a", "roughness")
	case name == "ln_eps_b":
		return m.UnknownOf("pipe", "b", "roughness")
	case name == "ln_K":
		return m.UnknownOf("fitting", "v", "loss_coefficient")
	case name == "meter_gain":
		return m.UnknownOf("gauge", "M", "gain")
	case name[:2] == "of":
		return m.UnknownOf("gauge", name[7:], "offset")
	case name[:2] == "el":
		return m.UnknownOf("tap", name[5:], "level_error")
	case name[:2] == "Hs":
		for k, u := range m.Unknowns {
			if u.Kind == "level" && u.Round == name[2:] {
				return k
			}
		}
	}
	return -1
}

func loadSynthetic(t *testing.T) syntheticSurvey {
	t.Helper()
	data, err := os.ReadFile("../testdata/checks/statistics/synthetic_survey.json")
	if err != nil {
		t.Fatal(err)
	}
	var c syntheticSurvey
	if err := json.Unmarshal(data, &c); err != nil {
		t.Fatal(err)
	}
	return c
}

// TestSyntheticSurvey: estimate, SDs, redundancy and w of readings and prior rows.
func TestSyntheticSurvey(t *testing.T) {
	c := loadSynthetic(t)
	m := c.model(t)
	f, err := m.Sound()
	if err != nil || !f.Converged {
		t.Fatalf("%v, %v", f, err)
	}
	want := c.Results
	if math.Abs(f.Phi-want.Phi) > 0.3 {
		t.Errorf("Phi %.4f, published %.4f", f.Phi, want.Phi)
	}
	checked := 0
	for name, v := range want.Map {
		k := c.place(m, name)
		if k < 0 {
			continue // ln Q: an unknown of ours too, but in another scale
		}
		checked++
		theirs := v - c.PriorMean[name]
		if name[:2] == "el" {
			theirs = -theirs // theirs is true minus recorded
		}
		sd := want.SD[name]
		if math.Abs(f.Theta(k)-theirs) > 0.05*sd {
			t.Errorf("%s: %.6f, published %.6f (SD %.4f)", name, f.Theta(k), theirs, sd)
		}
		if math.Abs(f.ThetaSD(k)/sd-1) > 0.015 {
			t.Errorf("%s: SD %.6f, published %.6f", name, f.ThetaSD(k), sd)
		}
		w, ok := f.PriorW(k)
		if p := want.PriorW[name]; ok && math.Abs(math.Abs(w)-math.Abs(p)) > 0.05 {
			t.Errorf("%s: w of the prior row %.4f, published %.4f", name, w, p)
		}
	}
	if checked != 16 {
		t.Errorf("%d of 16 unknowns compared", checked)
	}
	for i := range m.Obs {
		if got := f.Redundancy(i); math.Abs(got-want.Redundancy[i]) > 0.01 {
			t.Errorf("reading %d: redundancy %.4f, published %.4f", i, got, want.Redundancy[i])
		}
		// Theirs is fitted minus measured.
		if w, _ := f.Normalised(i); math.Abs(math.Abs(w)-math.Abs(want.W[i])) > 0.06 {
			t.Errorf("reading %d: w %.4f, published %.4f", i, w, want.W[i])
		}
	}
}

// TestSyntheticHypotheses: the nine hypotheses, their sums of squares, estimates and
// probabilities. The prior of a fault is the sound one widened, as theirs.
func TestSyntheticHypotheses(t *testing.T) {
	c := loadSynthetic(t)
	m := c.model(t)
	if _, err := m.Sound(); err != nil {
		t.Fatal(err)
	}
	base, err := m.Refit(nil, Options{})
	if err != nil {
		t.Fatal(err)
	}
	evidence := func(f *Fit) float64 { return -f.Phi/2 - f.LnDet()/2 }
	spread := map[string]float64{"ln_eps_a": 2, "ln_K": 1.5, "ln_eps_b": 2}
	ln := map[string]float64{"none": math.Log(0.92)}
	checked := 0
	for name, h := range c.Results.Hypotheses {
		if name == "none" {
			continue
		}
		var u Unknown
		if k := c.place(m, h.Parameter); h.Parameter != "leak" && k >= 0 {
			u = m.Unknowns[k]
			u.SD = spread[h.Parameter]
			if u.SD == 0 {
				u.SD = 2
			}
		} else {
			u = m.Unrecorded(m.PointIndex("3"), []int{1, 2, 3}, DefaultSpreads())
			u.SD, u.Sign = 0.001, 0
		}
		f, err := m.Refit([]Unknown{u}, Options{})
		if err != nil {
			t.Fatal(err)
		}
		checked++
		if math.Abs(f.Phi-h.Phi) > 0.3 {
			t.Errorf("%s: Phi %.4f, published %.4f", name, f.Phi, h.Phi)
		}
		want := h.Evidence - c.Results.Hypotheses["none"].Evidence
		if got := evidence(f) - evidence(base); math.Abs(got-want) > 0.12 {
			t.Errorf("%s: ln evidence over none %.4f, published %.4f", name, got, want)
		}
		ln[name] = evidence(f) - evidence(base) + math.Log(0.01)
	}
	if checked != 8 {
		t.Errorf("%d of 8 hypotheses compared", checked)
	}
	sum := 0.0
	for _, l := range ln {
		sum += math.Exp(l)
	}
	for name, l := range ln {
		p, want := math.Exp(l)/sum, c.Results.Hypotheses[name].Probability
		if math.Abs(math.Log(p/want)) > 0.2 {
			t.Errorf("%s: probability %.3g, published %.3g", name, p, want)
		}
	}
}
