package calibrate

import (
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"tapround/survey"
)

// noisy adds each reading's own scatter, so that a fit has something to do.
func noisy(t *testing.T, s *survey.Survey, seed uint64) {
	t.Helper()
	exactly(t, s)
	rng := rand.New(rand.NewPCG(seed, 9))
	steps := map[string]float64{}
	for _, g := range s.Gauges {
		steps[g.Name] = g.Resolution.V
	}
	for i := range s.Readings {
		s.Readings[i].Value += 0.4 * steps[s.Readings[i].Gauge] * rng.NormFloat64()
	}
}

func fitOf(t *testing.T, s *survey.Survey, causes ...Unknown) *Fit {
	t.Helper()
	m := modelOf(t, s)
	f, err := m.Sound()
	if err == nil && len(causes) > 0 {
		f, err = m.Fit(causes, Options{})
	}
	if err != nil {
		t.Fatal(err)
	}
	if !f.Converged {
		t.Fatalf("status %s", f.Status)
	}
	return f
}

// TestExactReadings: gauges without error on works that are as expected leave nothing
// to explain, and the draw-off that was left open comes back.
func TestExactReadings(t *testing.T) {
	s := works()
	exactly(t, s)
	f := fitOf(t, s)
	// Phi is zero but for the open draw-off's own prior row, (6 L/s / 40 L/s)^2 or so.
	for k, x := range f.Unknowns {
		if x.Open {
			if got := 1e3 * f.Theta(k); math.Abs(got-6) > 0.01 {
				t.Errorf("open draw-off %.4f L/s, drawn 6", got)
			}
			continue
		}
		if math.Abs(f.U[k]) > 0.02 {
			t.Errorf("%s %s %s moved by %.3f prior SD on exact readings", x.Kind, x.Item, x.Quantity, f.U[k])
		}
	}
}

// TestTruthComesBack: with gauges all but perfect and priors wide, roughness and
// coefficients that differ from the expected ones are found.
func TestTruthComesBack(t *testing.T) {
	s := works()
	for i := range s.Gauges {
		s.Gauges[i].Accuracy, s.Gauges[i].Resolution, s.Gauges[i].GainSD = survey.Some(1e-6), survey.Some(1e-5*s.Gauges[i].High), 0
	}
	for i := range s.Taps {
		s.Taps[i].ElevationSD = 1e-4
	}
	truth := works()
	truth.Gauges, truth.Taps = s.Gauges, s.Taps
	truth.Pipes = append([]survey.Pipe(nil), truth.Pipes...)
	truth.Pipes[2].Roughness.V *= 1.8 // P3, between taps T3 and T4 and beyond
	exactly(t, truth)
	s.Readings = truth.Readings
	for i := range s.Pipes {
		s.Pipes[i].Spread = survey.Some(20)
	}
	m := modelOf(t, s)
	for k := range m.Unknowns {
		if m.Unknowns[k].Kind == "fitting" {
			m.Unknowns[k].SD = 1e-4 // known coefficients: roughness alone is sought
		}
	}
	f, err := m.Fit(nil, Options{})
	if err != nil {
		t.Fatal(err)
	}
	k := m.UnknownOf("pipe", "P3", "roughness")
	got, lo, hi := f.Value(k)
	if math.Abs(math.Log(got/truth.Pipes[2].Roughness.V)) > 0.05 || lo > truth.Pipes[2].Roughness.V || hi < truth.Pipes[2].Roughness.V {
		t.Errorf("P3: roughness %.4g (%.4g to %.4g) m, truth %.4g", got, lo, hi, truth.Pipes[2].Roughness.V)
	}
	if f.Told(k) < 0.95 {
		t.Errorf("told by the survey %.2f", f.Told(k))
	}
}

// TestTwoForms: the estimate by QR of the stacked Jacobian and the one in data space
// are the same estimate, with the same covariance (matrix inversion lemma).
func TestTwoForms(t *testing.T) {
	s := works()
	noisy(t, s, 3)
	m := modelOf(t, s)
	cause := m.Throttled(1, DefaultSpreads())
	a, err := m.Fit([]Unknown{cause}, Options{})
	if err != nil {
		t.Fatal(err)
	}
	b, err := m.Refit([]Unknown{cause}, Options{})
	if err != nil {
		t.Fatal(err)
	}
	if math.Abs(a.Phi-b.Phi) > 2e-3 {
		t.Errorf("Phi %.6f by QR, %.6f in data space", a.Phi, b.Phi)
	}
	for k := range a.U {
		sa, sb := math.Sqrt(a.Cov().At(k, k)), math.Sqrt(b.Cov().At(k, k))
		// Both stop where Phi changes by less than a thousandth: a thirtieth of an SD.
		if math.Abs(a.U[k]-b.U[k]) > 0.05*sa+1e-3 {
			t.Errorf("%s %s: u %.5f by QR, %.5f in data space (SD %.3f)", a.Unknowns[k].Kind, a.Unknowns[k].Item, a.U[k], b.U[k], sa)
		}
		if math.Abs(sa-sb) > 0.02*sa+1e-4 {
			t.Errorf("%s %s: SD %.5f by QR, %.5f in data space", a.Unknowns[k].Kind, a.Unknowns[k].Item, sa, sb)
		}
	}
}

// TestRedundancy: the redundancy of readings and prior rows adds up to the degrees of
// freedom (Baarda 1968): rows less unknowns.
func TestRedundancy(t *testing.T) {
	s := works()
	noisy(t, s, 5)
	f := fitOf(t, s)
	sum := 0.0
	for i := range f.Model.Obs {
		sum += f.Redundancy(i)
	}
	for k := range f.Unknowns {
		sum += 1 - f.Cov().At(k, k)
	}
	if want := float64(len(f.Model.Obs)); math.Abs(sum-want) > 1e-6*want {
		t.Errorf("redundancies add up to %.6f, rows less unknowns are %.0f", sum, want)
	}
}

// TestInvariance: the answer does not depend on the datum, on the order of tables, on
// names, or on which end of a pipe is called From.
func TestInvariance(t *testing.T) {
	base := works()
	noisy(t, base, 7)
	want := fitOf(t, base)
	change := map[string]func(s *survey.Survey){
		"datum 250 m higher": func(s *survey.Survey) {
			for i := range s.Points {
				s.Points[i].Elevation += 250
			}
			for i := range s.Taps {
				s.Taps[i].Elevation += 250
			}
			for i := range s.Conditions {
				if s.Conditions[i].Kind == survey.LevelIs {
					s.Conditions[i].Value.V += 250
				}
			}
			for i := range s.Readings {
				if s.Readings[i].Kind == survey.WaterLevel {
					s.Readings[i].Value += 250
				}
			}
		},
		"order of readings": func(s *survey.Survey) { reverse(s.Readings) },
		"order of tables": func(s *survey.Survey) {
			reverse(s.Taps)
			reverse(s.Gauges)
			reverse(s.Fittings[:2])
			// Pipes keep their order: it decides which one a tap at a point reads on
			// where two are equally wide.
		},
		"names": func(s *survey.Survey) {
			for i := range s.Gauges {
				s.Gauges[i].Name = strings.ToLower(s.Gauges[i].Name) + "x"
			}
			for i := range s.Readings {
				s.Readings[i].Gauge = strings.ToLower(s.Readings[i].Gauge) + "x"
			}
		},
		"direction of P5": func(s *survey.Survey) {
			for i := range s.Pipes {
				if p := &s.Pipes[i]; p.Name == "P5" {
					p.From, p.To = p.To, p.From
				}
			}
			for i := range s.Fittings {
				if s.Fittings[i].Pipe == "P5" {
					s.Fittings[i].At = 250 - s.Fittings[i].At
				}
			}
		},
	}
	for name, do := range change {
		s := works()
		s.Readings = append([]survey.Reading(nil), base.Readings...)
		do(s)
		got := fitOf(t, s)
		if math.Abs(got.Phi-want.Phi) > 1e-3 {
			t.Errorf("%s: Phi %.6f becomes %.6f", name, want.Phi, got.Phi)
		}
		for k, x := range want.Unknowns {
			item := x.Item
			if name == "names" && x.Kind == "gauge" {
				item = strings.ToLower(item) + "x"
			}
			at := -1
			for c, y := range got.Unknowns {
				if y.Kind == x.Kind && y.Item == item && y.Quantity == x.Quantity && y.Round == x.Round && y.Open == x.Open {
					at = c
					if y.SD == x.SD && y.Expected == x.Expected {
						break
					}
				}
			}
			if at < 0 {
				t.Fatalf("%s: %s %s is gone", name, x.Kind, item)
			}
			if x.Quantity != "level" && math.Abs(got.U[at]-want.U[k]) > 0.01 {
				t.Errorf("%s: %s %s %s u %.4f becomes %.4f", name, x.Kind, x.Item, x.Quantity, want.U[k], got.U[at])
			}
		}
	}
}

func reverse[T any](l []T) {
	for i, j := 0, len(l)-1; i < j; i, j = i+1, j-1 {
		l[i], l[j] = l[j], l[i]
	}
}

// TestNothingToFit: no reading is an error that says so, never an empty answer.
func TestNothingToFit(t *testing.T) {
	m, err := New(works(), nil, DefaultPriors())
	if err != nil {
		t.Fatal(err)
	}
	if _, err := m.Fit(nil, Options{}); err == nil || !strings.Contains(err.Error(), "no reading") {
		t.Errorf("got %v", err)
	}
}

// TestUnsolvable: a draw-off that no reservoir feeds is named by its point.
func TestUnsolvable(t *testing.T) {
	s := works()
	s.Conditions = append(s.Conditions, survey.Condition{Round: "A", Item: "P2", Kind: survey.ShutOff}, survey.Condition{Round: "A", Item: "T1", Kind: survey.Stopped},
		survey.Condition{Round: "A", Item: "P7", Kind: survey.ShutOff})
	_, err := New(s, nil, DefaultPriors())
	if err == nil || !strings.Contains(err.Error(), "round A") || !strings.Contains(err.Error(), " E") {
		t.Errorf("got %v", err)
	}
}
