package calibrate

import (
	"math"
	"testing"

	"tapround/survey"
	"tapround/survey/correct"
	"tapround/survey/head"
)

// works is a small system with every device and every kind of reading: reservoir,
// entrance, pipe, valve, pump, ring, change of bore, pitot, hydrant jet, nozzle with a
// free outlet, a second reservoir behind a turbine. Readings are filled in by exactly.
func works() *survey.Survey {
	m := survey.Some
	src := func(n int) survey.Source { return survey.Source{File: "conditions.csv", Line: n} }
	s := &survey.Survey{Info: survey.Info{Title: "every device", Latitude: 50, SiteLevel: 100, WaterTemperature: 12, FalseAlarmRate: 0.05}}
	s.Points = []survey.Point{
		{Name: "R1", Kind: survey.Reservoir, Elevation: 50}, {Name: "A", Kind: survey.Junction, Elevation: 20},
		{Name: "B", Kind: survey.Junction, Elevation: 20}, {Name: "C", Kind: survey.Junction, Elevation: 18},
		{Name: "D", Kind: survey.Junction, Elevation: 16}, {Name: "E", Kind: survey.Junction, Elevation: 15},
		{Name: "F", Kind: survey.Junction, Elevation: 14}, {Name: "O", Kind: survey.Outlet, Elevation: 25},
		{Name: "G", Kind: survey.Junction, Elevation: 12}, {Name: "R2", Kind: survey.Reservoir, Elevation: 30},
	}
	pipe := func(name, from, to string, length, bore, k float64) survey.Pipe {
		return survey.Pipe{Name: name, From: from, To: to, Length: length, Bore: bore, Roughness: m(k), C: m(120), Material: "steel", Group: "old"}
	}
	s.Pipes = []survey.Pipe{
		pipe("P1", "R1", "A", 200, 0.25, 1e-4), pipe("P2", "B", "C", 400, 0.20, 2e-4), pipe("P3", "C", "D", 300, 0.15, 5e-4),
		pipe("P4", "C", "E", 350, 0.15, 3e-4), pipe("P5", "D", "E", 250, 0.10, 1e-3), pipe("P6", "E", "F", 150, 0.15, 1e-4),
		pipe("P7", "F", "O", 80, 0.10, 1e-4), pipe("P8", "F", "G", 120, 0.125, 1e-4),
	}
	s.Fittings = []survey.Fitting{
		{Name: "E1", Pipe: "P1", At: 0, Kind: survey.EntranceSharp, K: m(0.5)}, {Name: "V1", Pipe: "P2", At: 150, Kind: survey.GateValve, K: m(0.2)},
		{Name: "C1", Pipe: "P2", At: 400, Kind: survey.Contraction, Bore: m(0.15), K: m(0.22)}, {Name: "S1", Pipe: "P4", At: 100, Kind: survey.Strainer, K: m(2)},
		{Name: "Z1", Pipe: "P7", At: 80, Kind: survey.Nozzle, Bore: m(0.05), K: m(0.05)}, {Name: "X1", Pipe: "P6", At: 60, Kind: survey.CheckValve, K: m(2)},
		{Name: "L1", Pipe: "P5", At: 50, Kind: survey.Elbow, K: m(0.7), FromTable: "table"}, {Name: "L2", Pipe: "P3", At: 50, Kind: survey.Elbow, K: m(0.7), FromTable: "table"},
	}
	s.Machines = []survey.Machine{
		{Name: "M1", From: "A", To: "B", Kind: survey.Pump, Speed: m(150), Duty: []survey.DutyPoint{{Flow: 0, Head: 30}, {Flow: 0.03, Head: 27}, {Flow: 0.06, Head: 20}, {Flow: 0.09, Head: 8}}},
		{Name: "T1", From: "G", To: "R2", Kind: survey.Turbine, Speed: m(100), Duty: []survey.DutyPoint{{Flow: 0, Head: 0}, {Flow: 0.01, Head: 4}, {Flow: 0.03, Head: 12}}},
	}
	tap := func(name, pipe string, at float64, point string, z float64) survey.Tap {
		return survey.Tap{Name: name, Pipe: pipe, At: at, Point: point, Elevation: z, ElevationSD: 0.05}
	}
	s.Taps = []survey.Tap{
		tap("T1", "P1", 100, "", 30), tap("T2", "P2", 200, "", 19), tap("T3", "", 0, "C", 18), tap("T4", "P3", 120, "", 17), tap("T5", "P4", 200, "", 16),
		tap("T6", "", 0, "E", 15), tap("T7", "P6", 100, "", 14), tap("Q1", "P1", 50, "", 35), tap("H1", "", 0, "D", 16), tap("T8", "P7", 40, "", 20), tap("T9", "", 0, "R1", 50),
	}
	s.Taps[8].OutletBore, s.Taps[8].OutletCoefficient = m(0.05), m(0.9)
	s.Gauges = []survey.Gauge{
		{Name: "G1", Kind: survey.PressureGauge, High: 1e6, Unit: "kPa", Accuracy: m(0.005), Resolution: m(500), Line: survey.WaterLine},
		{Name: "G2", Kind: survey.AbsoluteGauge, High: 1e6, Unit: "kPa", Accuracy: m(0.005), Resolution: m(500), Line: survey.AirLine},
		{Name: "D1", Kind: survey.DifferenceGauge, High: 2e5, Unit: "kPa", Accuracy: m(0.005), Resolution: m(100), Line: survey.AirLine},
		{Name: "D2", Kind: survey.DifferenceGauge, High: 1e4, Unit: "kPa", Accuracy: m(0.005), Resolution: m(10), Line: survey.WaterLine},
		{Name: "F1", Kind: survey.FlowMeter, High: 0.1, Unit: "L/s", Accuracy: m(0.005), Resolution: m(1e-4), GainSD: 0.01},
		{Name: "W1", Kind: survey.LevelGauge, High: 60, Unit: "m", Accuracy: m(0.001), Resolution: m(0.01)},
	}
	s.Rounds = []survey.Round{{Name: "A", WaterTemperature: m(9)}, {Name: "B", Barometer: m(1e5)}, {Name: "N"}}
	s.Conditions = []survey.Condition{
		{Round: "*", Item: "R1", Kind: survey.LevelIs, Value: m(52), SD: m(0.02), Source: src(2)},
		{Round: "*", Item: "R2", Kind: survey.LevelIs, Value: m(33), Source: src(3)},
		{Round: "A", Item: "E", Kind: survey.DrawOff, Value: m(0.012), Source: src(4)},
		{Round: "B", Item: "E", Kind: survey.DrawOff, Value: m(0.004), Source: src(5)},
		{Round: "B", Item: "D", Kind: survey.DrawOff, Source: src(6)},
		{Round: "B", Item: "D", Kind: survey.DrawOff, Value: m(0.002), Source: src(7)},
		{Round: "B", Item: "M1", Kind: survey.SpeedIs, Value: m(140), Source: src(8)},
		{Round: "N", Item: "M1", Kind: survey.Stopped, Source: src(9)},
	}
	return s
}

// readingsOf lists what the fixture's crew reads in a round, without values.
func readingsOf(round string) []survey.Reading {
	r := func(kind survey.ReadingKind, tap, other, gauge string, depth survey.Maybe) survey.Reading {
		return survey.Reading{Round: round, Tap: tap, OtherTap: other, Kind: kind, Gauge: gauge, GaugeHeight: 0.5, Depth: depth}
	}
	none := survey.Maybe{}
	out := []survey.Reading{
		r(survey.Static, "T1", "", "G1", none), r(survey.Static, "T2", "", "G1", none), r(survey.Static, "T3", "", "G2", none), r(survey.Static, "T4", "", "G1", none),
		r(survey.Static, "T5", "", "G2", none), r(survey.Static, "T6", "", "G1", none), r(survey.Static, "T7", "", "G1", none), r(survey.Static, "T8", "", "G1", none),
		r(survey.FlowRate, "Q1", "", "F1", none), r(survey.Difference, "T2", "T4", "D1", none), r(survey.Difference, "T4", "T6", "D2", none), r(survey.WaterLevel, "T9", "", "W1", none),
		r(survey.Velocity, "T2", "", "D2", survey.Some(0.05)), r(survey.TotalHead, "T5", "", "G1", none),
	}
	if round == "B" {
		out = append(out, r(survey.Jet, "H1", "", "G1", none))
	}
	return out
}

// exactly fills in what gauges without error would show when the works are as s says,
// with the draw-off left open at point D at 6 L/s.
func exactly(t *testing.T, s *survey.Survey) {
	t.Helper()
	const open = 0.006
	truth := *s
	truth.Conditions = append([]survey.Condition(nil), s.Conditions...)
	for i := range truth.Conditions {
		if !truth.Conditions[i].Value.OK && truth.Conditions[i].Kind == survey.DrawOff {
			truth.Conditions[i].Value = survey.Some(open)
		}
	}
	var all []survey.Reading
	for i, r := range s.Rounds {
		for k, x := range readingsOf(r.Name) {
			x.Source = survey.Source{File: "readings.csv", Line: 100*i + k + 2}
			if x.Kind == survey.Jet {
				x.Value = 1e5 // any pressure: the true one is set below
			}
			all = append(all, x)
		}
	}
	// Heads are linear in what the gauge shows, so two conversions give the slope.
	s.Readings = append([]survey.Reading(nil), all...)
	truth.Readings = append([]survey.Reading(nil), all...)
	m := modelOf(t, &truth)
	w := m.NewWorkspace()
	if err := w.solve(); err != nil {
		t.Fatal(err)
	}
	for i, o := range m.Obs {
		want := w.readParts(o, 0)
		for k := range s.Readings {
			if s.Readings[k].Source != o.Head.Rows[0].Source {
				continue
			}
			x := &s.Readings[k]
			if x.Kind == survey.Jet {
				q := open / (0.9 * math.Pi / 4 * 0.05 * 0.05)
				x.Value = o.Head.Density/2*q*q - o.Head.Density*o.Head.Gravity*x.GaugeHeight
			} else {
				x.Value += (want - o.Head.Value) / o.Head.PerGauge
			}
		}
		_ = i
	}
}

func headsOf(t *testing.T, s *survey.Survey) []survey.Head {
	t.Helper()
	cs, problems := correct.Readings(s)
	hs, more := head.FromCorrected(s, cs)
	for _, p := range append(problems, more...) {
		t.Fatalf("fixture: %v", p)
	}
	return hs
}

func modelOf(t *testing.T, s *survey.Survey) *Model {
	t.Helper()
	m, err := New(s, headsOf(t, s), DefaultPriors())
	if err != nil {
		t.Fatal(err)
	}
	return m
}
