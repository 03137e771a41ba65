package fault

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"tapround/calibrate"
	"tapround/survey"
	"tapround/survey/water"
)

// Twins look alike to some readings and are parted by others (common practice; each case
// names what parts it). Alike, the answer must be the class or nothing; parted, the cause.

// main3 is a main of three pipes from a reservoir, a valve in the middle one, gauges that
// never move, and four rounds: nothing drawn, then three flows at its end.
func main3() *survey.Survey {
	some := survey.Some
	s := &survey.Survey{Info: survey.Info{Latitude: 45, WaterTemperature: 10, FalseAlarmRate: 0.05}}
	s.Points = []survey.Point{{Name: "R", Kind: survey.Reservoir, Elevation: 58}, {Name: "A", Kind: survey.Junction}, {Name: "B", Kind: survey.Junction}, {Name: "C", Kind: survey.Junction}}
	for i, e := range [][2]string{{"R", "A"}, {"A", "B"}, {"B", "C"}} {
		s.Pipes = append(s.Pipes, survey.Pipe{Name: fmt.Sprintf("P%d", i+1), From: e[0], To: e[1], Length: 400, Bore: 0.2, Roughness: some(1e-4), Material: "steel"})
	}
	s.Fittings = []survey.Fitting{{Name: "V", Pipe: "P2", At: 200, Kind: survey.GateValve, K: some(0.2)}}
	s.Conditions = []survey.Condition{{Round: "*", Item: "R", Kind: survey.LevelIs, Value: some(60)}}
	for i, q := range []float64{0, 0.015, 0.03, 0.05} {
		name := fmt.Sprint(i)
		s.Rounds = append(s.Rounds, survey.Round{Name: name})
		if q > 0 {
			s.Conditions = append(s.Conditions, survey.Condition{Round: name, Item: "C", Kind: survey.DrawOff, Value: some(q), SD: some(0.01 * q)})
		}
	}
	s.Gauges = []survey.Gauge{{Name: "M", Kind: survey.FlowMeter, High: 0.06, Unit: "L/s", Accuracy: some(0.003), Resolution: some(1e-5)}}
	s.Taps = []survey.Tap{{Name: "Q", Pipe: "P1", At: 10, ElevationSD: 0.02}}
	return s
}

func (tw *twin) tap(name, pipe string, at float64, point string) {
	tw.s.Taps = append(tw.s.Taps, survey.Tap{Name: name, Pipe: pipe, At: at, Point: point, ElevationSD: 0.02})
	tw.s.Gauges = append(tw.s.Gauges, survey.Gauge{Name: "G" + name, Kind: survey.PressureGauge, High: 6e5, Unit: "kPa", Accuracy: survey.Some(0.0025), Resolution: survey.Some(1000.0), Line: survey.WaterLine})
}

// twin is one case: the survey as recorded, what is wrong, and which gauge is on which tap.
type twin struct {
	s      *survey.Survey
	spoil  func(truth *survey.Survey)
	offset map[string]float64 // Pa or m3/s by gauge
	gain   map[string]float64
	// moved gives the gauge of a tap in a round; empty: its own.
	moved func(round, tap string) string
	skip  map[string]bool // rounds in which nothing was read
}

// run makes the readings of the true works, rounded to the gauges' steps, and diagnoses.
func (tw *twin) run(t *testing.T) *Diagnosis {
	t.Helper()
	truth := clone(tw.s)
	if tw.spoil != nil {
		tw.spoil(truth)
	}
	m, err := calibrate.New(truth, nil, calibrate.DefaultPriors())
	if err != nil {
		t.Fatal(err)
	}
	e, err := m.Expected()
	if err != nil {
		t.Fatal(err)
	}
	w := water.Gravity(45, 0) * water.Density(10)
	gauges := map[string]survey.Gauge{}
	for _, g := range tw.s.Gauges {
		gauges[g.Name] = g
	}
	tw.s.Readings = nil
	for r, round := range tw.s.Rounds {
		if tw.skip[round.Name] {
			continue
		}
		for i, tap := range tw.s.Taps {
			x := survey.Reading{Round: round.Name, Tap: tap.Name, Kind: survey.Static, Gauge: "G" + tap.Name, Source: survey.Source{File: "readings.csv", Line: 100*r + i + 2}}
			v := w * (e.Piezometric(r, i) - truth.Taps[i].Elevation)
			if strings.HasPrefix(tap.Name, "Q") {
				x.Kind, x.Gauge, v = survey.FlowRate, "M"+tap.Name[1:], e.Flow(r, i)
			}
			if tw.moved != nil {
				if g := tw.moved(round.Name, tap.Name); g != "" {
					x.Gauge = g
				}
			}
			step := gauges[x.Gauge].Resolution.V
			x.Value = math.Round((v*(1+tw.gain[x.Gauge])+tw.offset[x.Gauge])/step) * step
			tw.s.Readings = append(tw.s.Readings, x)
		}
	}
	d, err := diagnose(tw.s)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// verdict lists what was found: "kind:item" alone, or the class in brackets.
func verdict(d *Diagnosis) string {
	var out []string
	for _, a := range d.Accepted {
		if len(a.Class) == 0 {
			out = append(out, a.Name())
			continue
		}
		names := []string{a.Name()}
		for _, r := range a.Class {
			names = append(names, r.Name())
		}
		out = append(out, "["+strings.Join(names, " ")+"]")
	}
	return strings.Join(out, " ")
}

func TestTwins(t *testing.T) {
	rough := func(pipe string, factor float64) func(*survey.Survey) {
		return func(s *survey.Survey) {
			for i := range s.Pipes {
				if s.Pipes[i].Name == pipe {
					s.Pipes[i].Roughness.V *= factor
				}
			}
		}
	}
	throttled := func(fitting string, k float64) func(*survey.Survey) {
		return func(s *survey.Survey) {
			for i := range s.Fittings {
				if s.Fittings[i].Name == fitting {
					s.Fittings[i].K.V = k
				}
			}
		}
	}
	ends := func() *twin {
		tw := &twin{s: main3()}
		tw.tap("A", "", 0, "A")
		tw.tap("B", "", 0, "B")
		tw.tap("C", "", 0, "C")
		return tw
	}
	cases := []struct {
		name  string
		alike func() *twin
		class []string // all must stand in one class; none: nothing may be named
		part  func() *twin
		cause string
	}{
		{"rough wall or throttled valve: a tap either side of the valve",
			func() *twin { tw := ends(); tw.spoil = throttled("V", 25); return tw },
			[]string{"part-closed-valve:V", "fouled-pipe:P2"},
			func() *twin {
				tw := ends()
				tw.tap("V1", "P2", 195, "")
				tw.tap("V2", "P2", 205, "")
				tw.spoil = throttled("V", 25)
				return tw
			}, "part-closed-valve:V"},
		{"throttled valve or rough wall: the other way round",
			func() *twin { tw := ends(); tw.spoil = rough("P2", 30); return tw },
			[]string{"part-closed-valve:V", "fouled-pipe:P2"},
			func() *twin {
				tw := ends()
				tw.tap("V1", "P2", 195, "")
				tw.tap("V2", "P2", 205, "")
				tw.spoil = rough("P2", 30)
				return tw
			}, "fouled-pipe:P2"},
		{"two pipes in series: a tap at the joint",
			func() *twin {
				tw := &twin{s: main3()}
				tw.s.Fittings = nil
				tw.tap("A", "", 0, "A")
				tw.tap("C", "", 0, "C")
				tw.spoil = rough("P3", 30)
				return tw
			}, []string{"fouled-pipe:P2", "fouled-pipe:P3"},
			func() *twin { tw := ends(); tw.s.Fittings = nil; tw.spoil = rough("P3", 30); return tw }, "fouled-pipe:P3"},
		{"gauge off or level wrong: the gauge moved to another tap",
			func() *twin { tw := ends(); tw.offset = map[string]float64{"GB": 8000}; return tw },
			[]string{"gauge-off:GB", "level-wrong:B"},
			func() *twin {
				tw := ends()
				tw.offset = map[string]float64{"GB": 8000}
				tw.moved = swapped
				return tw
			}, "gauge-off:GB"},
		{"level wrong or gauge off: the other way round",
			func() *twin { tw := ends(); tw.spoil = sunk("B", 0.8); return tw },
			[]string{"gauge-off:GB", "level-wrong:B"},
			func() *twin { tw := ends(); tw.spoil = sunk("B", 0.8); tw.moved = swapped; return tw }, "level-wrong:B"},
		{"two pipes in parallel: a meter in one leg",
			func() *twin { tw := ring(); tw.spoil = rough("P2", 40); return tw },
			[]string{"fouled-pipe:P2", "fouled-pipe:P4"},
			func() *twin {
				tw := ring()
				tw.s.Taps = append(tw.s.Taps, survey.Tap{Name: "Q2", Pipe: "P2", At: 10, ElevationSD: 0.02})
				tw.s.Gauges = append(tw.s.Gauges, survey.Gauge{Name: "M2", Kind: survey.FlowMeter, High: 0.06, Unit: "L/s", Accuracy: survey.Some(0.003), Resolution: survey.Some(1e-5)})
				tw.spoil = rough("P2", 40)
				return tw
			}, "fouled-pipe:P2"},
		{"hung check valve or scaled column: a tap between",
			func() *twin { tw := column(); tw.spoil = throttled("K", 40); return tw },
			[]string{"blocked-fitting:K", "fouled-pipe:P2"},
			func() *twin {
				tw := column()
				tw.tap("K2", "P2", 20, "")
				tw.spoil = throttled("K", 40)
				return tw
			}, "blocked-fitting:K"},
		{"true loss or gauge off, one flow: a second, very different flow",
			func() *twin {
				tw := &twin{s: main3()}
				tw.s.Fittings = nil
				tw.tap("C", "", 0, "C")
				tw.spoil = rough("P3", 60)
				tw.skip = map[string]bool{"0": true, "1": true, "2": true}
				return tw
			}, nil, // two readings leave nothing to test: no cause may be named
			func() *twin {
				tw := ends()
				tw.s.Fittings = nil
				tw.spoil = rough("P3", 60)
				return tw
			}, "fouled-pipe:P3"},
		{"tank level wrong or first pipe fouled: a round at rest",
			func() *twin {
				tw := ends()
				tw.s.Fittings = nil
				tw.spoil = tank(-1.5)
				tw.skip = map[string]bool{"0": true, "1": true, "2": true}
				return tw
			}, []string{"level-wrong:R", "fouled-pipe:P1"},
			func() *twin { tw := ends(); tw.s.Fittings = nil; tw.spoil = tank(-1.5); return tw }, "level-wrong:R"},
	}
	for _, c := range cases {
		t.Run(c.name, func(t *testing.T) {
			alike := verdict(c.alike().run(t))
			if len(c.class) == 0 && alike != "" {
				t.Errorf("alike: %q, want nothing", alike)
			}
			for _, n := range c.class {
				if !strings.HasPrefix(alike, "[") || !strings.Contains(alike, n) {
					t.Errorf("alike: %q, want one class with %v", alike, c.class)
					break
				}
			}
			if parted := verdict(c.part().run(t)); parted != c.cause {
				t.Errorf("parted: %q, want %q", parted, c.cause)
			}
		})
	}
}

// swapped carries the gauge of tap B to tap A and back, in the last two rounds.
func swapped(round, tap string) string {
	if round < "2" {
		return ""
	}
	return map[string]string{"A": "GB", "B": "GA"}[tap]
}

// sunk records a tap's level too low by d.
func sunk(tap string, d float64) func(*survey.Survey) {
	return func(s *survey.Survey) {
		for i := range s.Taps {
			if s.Taps[i].Name == tap {
				s.Taps[i].Elevation += d
			}
		}
	}
}

// tank puts the true level of the reservoir off the recorded one.
func tank(by float64) func(*survey.Survey) {
	return func(s *survey.Survey) {
		for i := range s.Conditions {
			if s.Conditions[i].Kind == survey.LevelIs {
				s.Conditions[i].Value.V += by
			}
		}
	}
}

// ring has a second pipe from A to B beside P2.
func ring() *twin {
	tw := &twin{s: main3()}
	tw.s.Fittings = nil
	tw.s.Pipes = append(tw.s.Pipes, survey.Pipe{Name: "P4", From: "A", To: "B", Length: 400, Bore: 0.2, Roughness: survey.Some(1e-4), Material: "steel"})
	tw.tap("A", "", 0, "A")
	tw.tap("B", "", 0, "B")
	tw.tap("C", "", 0, "C")
	return tw
}

// column has a check valve at the foot of P2 instead of the gate valve.
func column() *twin {
	tw := &twin{s: main3()}
	tw.s.Fittings = []survey.Fitting{{Name: "K", Pipe: "P2", At: 10, Kind: survey.CheckValve, K: survey.Some(2.0)}}
	tw.tap("A", "", 0, "A")
	tw.tap("B", "", 0, "B")
	tw.tap("C", "", 0, "C")
	return tw
}

// TestLostBore: a bore that is narrower than recorded shows as an equivalent roughness of
// that pipe, and as nothing else; no pressure reading parts the two.
func TestLostBore(t *testing.T) {
	tw := &twin{s: main3()}
	tw.s.Fittings = nil
	for _, p := range []string{"A", "B", "C"} {
		tw.tap(p, "", 0, p)
	}
	tw.spoil = func(s *survey.Survey) { s.Pipes[1].Bore *= 0.8 }
	if got := verdict(tw.run(t)); got != "fouled-pipe:P2" {
		t.Errorf("got %q", got)
	}
}

// TestUnrecordedFlow: a flow that nobody wrote down is told from a scaled main by the meter
// and the night round; a meter that reads too much alone is not called a fouled pipe.
func TestUnrecordedFlow(t *testing.T) {
	tw := &twin{s: main3()}
	tw.s.Fittings = nil
	for _, p := range []string{"A", "B", "C"} {
		tw.tap(p, "", 0, p)
	}
	tw.spoil = func(s *survey.Survey) {
		for _, r := range s.Rounds {
			s.Conditions = append(s.Conditions, survey.Condition{Round: r.Name, Item: "B", Kind: survey.DrawOff, Value: survey.Some(0.005)})
		}
	}
	d := tw.run(t)
	if got := verdict(d); !strings.Contains(got, "unrecorded-flow:B") || strings.Contains(got, "fouled") {
		t.Errorf("got %q", got)
	}
	tw.spoil, tw.gain = nil, map[string]float64{"M": 0.12}
	if got := verdict(tw.run(t)); got != "gauge-off:M" {
		t.Errorf("a meter 12 %% high: got %q", got)
	}
}

// TestSlips: a reading in another unit and two readings exchanged are named with the
// correction that fits, and left out.
func TestSlips(t *testing.T) {
	tw := &twin{s: main3()}
	tw.tap("A", "", 0, "A")
	tw.tap("B", "", 0, "B")
	tw.tap("C", "", 0, "C")
	for i := range tw.s.Taps { // levels that differ, so that an exchange shows
		tw.s.Taps[i].Elevation = float64(5 * i)
	}
	d := tw.run(t)
	if len(d.Slips) != 0 || len(d.Accepted) != 0 {
		t.Fatalf("a sound survey: %d slips, %q", len(d.Slips), verdict(d))
	}
	// psi written as kPa, as if the crew had read the other scale.
	for i := range tw.s.Readings {
		r := &tw.s.Readings[i]
		if r.Round == "2" && r.Tap == "B" {
			r.Value /= 6.894757
			r.Unit = "kPa"
		}
	}
	d, err := diagnose(tw.s)
	if err != nil {
		t.Fatal(err)
	}
	found := false
	for _, f := range d.Findings() {
		if f.Kind == survey.UnitSuspect && f.Item == "B" && f.Unit == "psi" {
			found = true
		}
	}
	if !found || len(d.Accepted) != 0 {
		t.Errorf("psi for kPa: found %v, accepted %q", found, verdict(d))
	}
	tw.run(t)
	var a, b *survey.Reading
	for i := range tw.s.Readings {
		r := &tw.s.Readings[i]
		if r.Round == "1" && r.Tap == "A" {
			a = r
		}
		if r.Round == "1" && r.Tap == "C" {
			b = r
		}
	}
	a.Value, b.Value = b.Value, a.Value
	if d, err = diagnose(tw.s); err != nil {
		t.Fatal(err)
	}
	if len(d.Slips) != 1 || d.Slips[0].Unit != nil || len(d.Accepted) != 0 {
		t.Errorf("exchanged: %d slips, accepted %q", len(d.Slips), verdict(d))
	}
}

// TestFouledGroup: pipes of one history that are all alike rough are one finding, not three.
func TestFouledGroup(t *testing.T) {
	tw := &twin{s: main3()}
	tw.s.Fittings = nil
	for i := range tw.s.Pipes {
		tw.s.Pipes[i].Group = "1931"
	}
	for _, p := range []string{"A", "B", "C"} {
		tw.tap(p, "", 0, p)
	}
	tw.spoil = func(s *survey.Survey) {
		for i := range s.Pipes {
			s.Pipes[i].Roughness.V *= 12
		}
	}
	d := tw.run(t)
	if got := verdict(d); got != "fouled-pipe:1931" {
		t.Errorf("got %q", got)
	}
	for _, f := range d.Findings() {
		if f.Item == "1931" && (f.Estimate.V < 6 || f.Estimate.V > 24 || !strings.Contains(f.Statement, "All pipes")) {
			t.Errorf("factor %.1f, truth 12: %s", f.Estimate.V, f.Statement)
		}
	}
}

// TestWornPump: a pump below its curve is told from a scaled main where a gauge stands at
// its delivery.
func TestWornPump(t *testing.T) {
	tw := &twin{s: main3()}
	tw.s.Fittings = nil
	tw.s.Points = append(tw.s.Points, survey.Point{Name: "S", Kind: survey.Junction})
	tw.s.Pipes[0].To = "S"
	tw.s.Machines = []survey.Machine{{Name: "PU", From: "S", To: "A", Kind: survey.Pump, Duty: []survey.DutyPoint{{Flow: 0, Head: 30}, {Flow: 0.03, Head: 26}, {Flow: 0.06, Head: 16}}}}
	for _, p := range []string{"S", "A", "B", "C"} {
		tw.tap(p, "", 0, p)
	}
	for i := range tw.s.Gauges {
		if tw.s.Gauges[i].Kind == survey.PressureGauge {
			tw.s.Gauges[i].High = 1e6
		}
	}
	tw.spoil = func(s *survey.Survey) {
		// A worn impeller: 12 % less head at every flow.
		s.Machines = append([]survey.Machine(nil), s.Machines...)
		duty := append([]survey.DutyPoint(nil), s.Machines[0].Duty...)
		for i := range duty {
			duty[i].Head *= 0.88
		}
		s.Machines[0].Duty = duty
	}
	if got := verdict(tw.run(t)); got != "machine-off-curve:PU" {
		t.Errorf("got %q", got)
	}
}

// TestNextReading: what would part a class is what parts the twins: another gauge at the
// tap, or a tap either side of the valve.
func TestNextReading(t *testing.T) {
	tw := &twin{s: main3(), offset: map[string]float64{"GB": 8000}}
	for _, p := range []string{"A", "B", "C"} {
		tw.tap(p, "", 0, p)
	}
	next := tw.run(t).NextReadings()
	if len(next) == 0 || !strings.Contains(next[0].Where, "GB") && next[0].Where != "tap B with another gauge" || next[0].Settles < 0.9 {
		t.Errorf("gauge or level: %+v", next)
	}
	tw = &twin{s: main3()}
	for _, p := range []string{"A", "B", "C"} {
		tw.tap(p, "", 0, p)
	}
	tw.spoil = func(s *survey.Survey) { s.Fittings[0].K.V = 25 }
	next = tw.run(t).NextReadings()
	if len(next) == 0 || next[0].Where != "either side of V, with one gauge" || next[0].Settles < 0.9 || next[0].Scale < 1 {
		t.Errorf("valve or wall: %+v", next)
	}
	// 25 velocity heads of the stated flow in a bore of 200 mm: the size the crew is told.
	v := next[0].Flow / (math.Pi / 4 * 0.2 * 0.2)
	if d := math.Abs(next[0].Difference) / (25 * v * v / 2 / 9.81); d < 0.8 || d > 1.2 {
		t.Errorf("the difference at the valve is %.2f of what K = 25 makes", d)
	}
}

// TestHazenWilliams: the same diagnosis under the other friction law: a low C is found, in C.
func TestHazenWilliams(t *testing.T) {
	tw := &twin{s: main3()}
	tw.s.Info.FrictionLaw = survey.HazenWilliams
	tw.s.Fittings = nil
	for i := range tw.s.Pipes {
		tw.s.Pipes[i].C = survey.Some(130)
	}
	for _, p := range []string{"A", "B", "C"} {
		tw.tap(p, "", 0, p)
	}
	tw.spoil = func(s *survey.Survey) { s.Pipes[1].C.V = 75 }
	d := tw.run(t)
	if got := verdict(d); got != "fouled-pipe:P2" {
		t.Fatalf("got %q", got)
	}
	for _, f := range d.Findings() {
		if f.Item == "P2" && f.Kind == survey.FouledPipe && (f.Unit != "C" || math.Abs(f.Estimate.V-75) > 6 || !(f.Low.V < 75 && 75 < f.High.V)) {
			t.Errorf("C %.1f (%.1f to %.1f) %s, truth 75", f.Estimate.V, f.Low.V, f.High.V, f.Unit)
		}
	}
}
