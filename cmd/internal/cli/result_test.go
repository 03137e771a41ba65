package cli

import (
	"math"
	"testing"

	"tapround/cmd/internal/demo"
	"tapround/survey"
)

// TestResultAgreesWithItself: the tables of one result tell one story: totals are sums,
// differences are differences, every line of readings has its row, and nothing that was
// not stated has become a zero.
func TestResultAgreesWithItself(t *testing.T) {
	data := readSurvey(demo.Harrowgill())
	r, d, err := reconcile(data, nil)
	if err != nil {
		t.Fatal(err)
	}
	if len(r.Heads) != len(data.survey.Readings) {
		t.Errorf("%d rows of heads for %d lines of readings", len(r.Heads), len(data.survey.Readings))
	}
	used := 0
	for i, h := range r.Heads {
		if h.Source != data.survey.Readings[i].Source {
			t.Fatalf("row %d of heads is not line %d of the readings", i, i)
		}
		if h.Used {
			used++
		}
		if h.Total.OK && math.Abs(h.Total.V-h.Piezometric.V-h.VelocityHead.V) > 1e-9 {
			t.Errorf("%s %s: total head is not piezometric and velocity head together", h.Round, h.Tap)
		}
		if h.Kind == "flow" && (h.Piezometric.OK || h.PressureHead.OK) {
			t.Errorf("%s %s: a flow has no head", h.Round, h.Tap)
		}
	}
	if used != r.Survey.Used || used != len(r.Heads)-1 { // one line is set aside
		t.Errorf("%d lines used, %d counted, %d lines", used, r.Survey.Used, len(r.Heads))
	}
	for _, p := range r.Parameters {
		if p.Kind == "pipe" && p.Item == "P3" && (math.Abs(p.Expected.V-0.3) > 1e-12 || p.Unit != "mm") {
			t.Errorf("P3 is recorded with 0.3 mm, not %v %s", p.Expected, p.Unit)
		}
		if p.Low.OK && p.High.OK && !(p.Low.V <= p.Fitted.V && p.Fitted.V <= p.High.V) {
			t.Errorf("%s %s: %g is not within %g to %g", p.Kind, p.Item, p.Fitted.V, p.Low.V, p.High.V)
		}
		if p.ToldBySurvey.V < 0 || p.ToldBySurvey.V > 1 {
			t.Errorf("%s %s: told %g", p.Kind, p.Item, p.ToldBySurvey.V)
		}
		// What no reading depends on keeps its expected value and says so.
		if p.Item == "P22" && p.Kind == "pipe" && (p.ToldBySurvey.V > 1e-6 || math.Abs(p.Ratio.V-1) > 1e-6) {
			t.Errorf("P22: ratio %g, told %g, though no reading depends on it", p.Ratio.V, p.ToldBySurvey.V)
		}
	}
	for _, x := range r.Residuals {
		if math.Abs(x.Residual-(x.Measured-x.Fitted)) > 1e-9 {
			t.Errorf("%s %s: difference is not measured less fitted", x.Round, x.Tap)
		}
	}
	// Water that flows into a point flows out of it, or is drawn there.
	balance := map[string]float64{}
	ends := map[string][2]string{}
	for _, p := range data.survey.Pipes {
		ends[p.Name] = [2]string{p.From, p.To}
	}
	for _, m := range data.survey.Machines {
		ends[m.Name] = [2]string{m.From, m.To}
	}
	for _, f := range r.Flows {
		balance[f.Round+ends[f.Pipe][0]] -= f.Flow.V
		balance[f.Round+ends[f.Pipe][1]] += f.Flow.V
		if f.Pipe == "P1" && !f.Measured.OK {
			t.Errorf("the inlet meter's flow is missing in round %s", f.Round)
		}
	}
	for _, p := range data.survey.Points {
		for _, round := range r.Survey.Rounds {
			q := balance[round+p.Name]
			if p.Kind != survey.Junction {
				continue
			}
			stated := false
			for _, c := range d.Model.Survey.InForce(round).DrawOffs[p.Name] {
				stated = stated || c.Value.V != 0
			}
			leak := p.Name == "N8" || p.Name == "N15"
			if !stated && !leak && math.Abs(q) > 1e-9 {
				t.Errorf("round %s: %.3g m3/s vanish at %s", round, q, p.Name)
			}
			if stated && q <= 0 {
				t.Errorf("round %s: something is drawn at %s but the balance says %.3g", round, p.Name, q)
			}
		}
	}
	// Heads along a pipe fall with its flow.
	flow := map[string]float64{}
	for _, f := range r.Flows {
		flow[f.Round+f.Pipe] = f.Flow.V
	}
	for i := 1; i < len(r.GradeLines); i++ {
		a, b := r.GradeLines[i-1], r.GradeLines[i]
		if a.Pipe != b.Pipe || a.Round != b.Round || !a.Total.OK || !b.Total.OK {
			continue
		}
		if a.At > b.At {
			t.Errorf("%s %s: chainages run back", a.Round, a.Pipe)
		}
		if q := flow[a.Round+a.Pipe]; (q > 1e-6 && b.Total.V > a.Total.V+1e-9) || (q < -1e-6 && b.Total.V < a.Total.V-1e-9) {
			t.Errorf("round %s, pipe %s: total head rises with the flow from %g to %g m", a.Round, a.Pipe, a.At, b.At)
		}
	}
}
