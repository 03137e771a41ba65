package check

import (
	"math"
	"testing"

	"tapround/survey"
)

const (
	unbalanced = "flow does not balance"
	aboveRestR = "flowing head above the no-flow head"
	tooSmallR  = "loss too small for the gauges"
)

func drawOff(round, point string, flow float64) survey.Condition {
	return survey.Condition{Round: round, Item: point, Kind: survey.DrawOff, Value: survey.Some(flow), Source: survey.Source{File: "conditions.csv", Line: 9}}
}

func TestBalance(t *testing.T) {
	// 5 L/s go missing between the meters.
	s := site()
	reading(s, "B", "Q1").Value = 0.045
	a := only(t, s, unbalanced, "Q1 Q2")
	says(t, a.Statement, "In round B water goes in between the meters at Q1 and Q2", "5.0 ± 0.4 L/s.")
	says(t, a.Evidence, "in by meter 45 L/s, out by meter 40 L/s, drawn off 0 L/s")
	if !a.Stay {
		t.Error("12 standard uncertainties and nobody stays")
	}
	s.Conditions = append(s.Conditions, drawOff("B", "N2", 0.005))
	quiet(t, "drawn off at N2", s)

	// The same in two rounds is told once, by the plainer of them.
	s = site()
	s.Rounds = append(s.Rounds, survey.Round{Name: "C"})
	s.Conditions = append(s.Conditions, drawOff("C", "N3", 0.04))
	reading(s, "B", "Q1").Value = 0.045
	meter(s, "C", "Q1", "F1", 0.047)
	meter(s, "C", "Q2", "F2", 0.040)
	a = only(t, s, unbalanced, "Q1 Q2")
	says(t, a.Statement, "In rounds B, C water goes in", "7.0 ± 0.4 L/s (round C)")
	says(t, a.Evidence, "round B: ", "round C: ")
	reading(s, "C", "Q1").Value = 0.035 // the other way is another matter
	if found := first(look(s), unbalanced); len(found) != 2 {
		t.Errorf("got\n%s", text(found))
	}

	// 0.8 L/s: two meters of 0.29 L/s each.
	s = site()
	reading(s, "B", "Q1").Value = 0.0408
	quiet(t, "within 2 standard uncertainties", s)

	// Beyond the last meter the draw-off stands, 40 ± 2 L/s.
	s = site()
	reading(s, "B", "Q1").Value, reading(s, "B", "Q2").Value = 0.050, 0.050
	a = only(t, s, unbalanced, "Q2")
	says(t, a.Statement, "water goes in beyond the meter at Q2", "10.0 ± 2.0 L/s")
	reading(s, "B", "Q1").Value, reading(s, "B", "Q2").Value = 0.030, 0.030
	a = only(t, s, unbalanced, "Q2")
	says(t, a.Statement, "more water comes out beyond the meter at Q2 than goes in", "10.0 ± 2.0 L/s")

	// One meter carried from place to place: its offset cancels, its steps do not.
	s = site()
	s.Gauges[6].Accuracy = survey.Some(0.05) // 2.9 L/s
	for _, r := range []string{"A", "B"} {
		reading(s, r, "Q2").Gauge = "F1"
	}
	reading(s, "B", "Q1").Value = 0.041
	only(t, s, unbalanced, "Q1 Q2")
}

// A part with a reservoir, an outlet or an unknown draw-off has no balance.
func TestBalanceNeedsAClosedPart(t *testing.T) {
	for what, alter := range map[string]func(*survey.Survey){
		"as it is":          func(*survey.Survey) {},
		"another reservoir": func(s *survey.Survey) { s.Points[2].Kind = survey.Reservoir },
		"an outlet":         func(s *survey.Survey) { s.Points[2].Kind = survey.Outlet },
		"an unknown draw-off": func(s *survey.Survey) {
			s.Conditions = append(s.Conditions, survey.Condition{Round: "B", Item: "N2", Kind: survey.DrawOff})
		},
		"a pump between": func(s *survey.Survey) {
			s.Points = append(s.Points, survey.Point{Name: "R2", Kind: survey.Reservoir})
			s.Machines = []survey.Machine{{Name: "M1", From: "R2", To: "N2", Kind: survey.Pump}}
		},
		"a way round the meter": func(s *survey.Survey) {
			s.Pipes = append(s.Pipes, survey.Pipe{Name: "P9", From: "R1", To: "N2", Length: 900, Bore: 0.1})
		},
	} {
		s := site()
		reading(s, "B", "Q1").Value = 0.045
		alter(s)
		if found := first(look(s), unbalanced); (len(found) == 1) != (what == "as it is") {
			t.Errorf("%s: %s", what, text(found))
		}
	}
	// A stopped pump closes.
	s := site()
	reading(s, "B", "Q1").Value = 0.045
	s.Points = append(s.Points, survey.Point{Name: "R2", Kind: survey.Reservoir})
	s.Machines = []survey.Machine{{Name: "M1", From: "R2", To: "N2", Kind: survey.Pump}}
	s.Conditions = append(s.Conditions, survey.Condition{Round: "*", Item: "M1", Kind: survey.Stopped})
	if found := first(look(s), unbalanced); len(found) != 1 {
		t.Errorf("stopped pump: %s", text(look(s)))
	}
	// A shut pipe bounds the part by no flow.
	s = site()
	s.Pipes = append(s.Pipes, survey.Pipe{Name: "P9", From: "R1", To: "N2", Length: 900, Bore: 0.1})
	s.Conditions = append(s.Conditions, survey.Condition{Round: "B", Item: "P9", Kind: survey.ShutOff})
	reading(s, "B", "Q1").Value = 0.045
	if found := first(look(s), unbalanced); len(found) != 1 {
		t.Errorf("shut pipe: %s", text(look(s)))
	}
}

func TestFlowsFollowFromMetersAndDrawOffs(t *testing.T) {
	s := site()
	s.Points = append(s.Points, survey.Point{Name: "N4", Kind: survey.Junction}, survey.Point{Name: "N5", Kind: survey.Junction})
	s.Pipes = append(s.Pipes, survey.Pipe{Name: "P4", From: "N4", To: "N2", Length: 100, Bore: 0.1}, survey.Pipe{Name: "P5", From: "N4", To: "N5", Length: 100, Bore: 0.1})
	s.Conditions[1].Value = survey.Some(0.036)
	s.Conditions = append(s.Conditions, drawOff("B", "N4", 0.006), drawOff("B", "N5", -0.002))
	for i := range s.Readings {
		if s.Readings[i].Tap == "Q2" {
			s.Readings[i].SetAside = "not in this test"
		}
	}
	v := newView(s, headsOf(s), customary)
	got := v.flows(v.rounds[1])
	for pipe, want := range map[string]float64{"P1": 0.040, "P2": 0.040, "P5": -0.002, "P4": -0.004, "P3": 0.036} {
		if f, ok := got[pipe]; !ok || math.Abs(f.q-want) > 1e-12 || !(f.u > 0) {
			t.Errorf("pipe %s carries %+v (known: %v), want %v", pipe, f, ok, want)
		}
	}
	// Of two ways to a flow the surer one: P4 by its own draw-offs, P3 by meter and P4
	// rather than by the draw-off at its end, 5 % of 36 L/s.
	if f := got["P4"]; math.Abs(f.u-math.Hypot(0.0003, 0.0001)) > 1e-9 {
		t.Errorf("u of P4 is %v", f.u)
	}
	if f := got["P3"]; math.Abs(f.u-math.Hypot(got["P2"].u, got["P4"].u)) > 1e-9 {
		t.Errorf("u of P3 is %v", f.u)
	}
	// A ring with one meter outside it is not settled.
	s.Pipes = append(s.Pipes, survey.Pipe{Name: "P6", From: "N1", To: "N3", Length: 100, Bore: 0.1})
	v = newView(s, headsOf(s), customary)
	if _, ok := v.flows(v.rounds[1])["P2"]; ok {
		t.Error("a flow in a ring is taken as known")
	}
}

func TestRisingHead(t *testing.T) {
	s := site()
	shift(s, "B", "T4", 3.5) // T3 94.0, T4 94.5, N2 90
	s.Conditions = append(s.Conditions, survey.Condition{Round: "A", Item: "R1", Kind: survey.LevelIs, Value: survey.Some(100)})
	a := only(t, s, risesAlongFlow, "T3 T4")
	says(t, a.Statement, "In round B the head rises from T3 to T4", "pipe P2")
	says(t, a.Evidence, "rise 0.50 ± 0.10 m", "flow in the pipe 40.00 ± 0.29 L/s")
	if !a.Stay {
		t.Error("5 standard uncertainties and nobody stays")
	}
	shift(s, "B", "T4", -0.4) // rise 0.1 m: within 2 standard uncertainties, and too small to see
	only(t, s, tooSmallR, "T3 T4")

	// The same heads with the flow turned round are right for T4 to T3, and every other
	// stretch is wrong. The meters say so.
	s = site()
	for _, q := range []string{"Q1", "Q2"} {
		reading(s, "B", q).Value = -0.040
	}
	s.Conditions[1].Value = survey.Some(-0.040)
	found := first(look(s), risesAlongFlow)
	// T1 to the point, the point to T3, T3 to T4, T4 to the point; N3 has a feed.
	if len(found) != 4 || found[2].Subject != "T4 T3" {
		t.Errorf("got\n%s", text(found))
	}

	// Direction unknown: no meter, an unknown draw-off.
	s = site()
	shift(s, "B", "T4", 3.5)
	for i := range s.Readings {
		if s.Readings[i].Kind == survey.FlowRate {
			s.Readings[i].SetAside = "not in this test"
		}
	}
	s.Conditions[1].Value = survey.Maybe{}
	if found := first(look(s), risesAlongFlow); len(found) != 0 {
		t.Errorf("got\n%s", text(found))
	}

	// At an enlargement the piezometric head may rise: taps on pipes of two bores are
	// not compared.
	s = site()
	s.Pipes[2].Bore = 0.3
	shift(s, "B", "T5", 1.5)
	if found := first(look(s), risesAlongFlow); len(found) != 0 {
		t.Errorf("got\n%s", text(found))
	}
	// Nor where a branch is drawn from between them.
	s = site()
	s.Conditions = append(s.Conditions, drawOff("B", "N2", 0.001))
	shift(s, "B", "T5", 1.5)
	if found := first(look(s), risesAlongFlow); len(found) != 0 {
		t.Errorf("got\n%s", text(found))
	}
	// One differential gauge sees what two gauges do not.
	s = site()
	s.Gauges = append(s.Gauges, survey.Gauge{Name: "D1", Kind: survey.DifferenceGauge, Low: -50e3, High: 50e3, Unit: "kPa", Accuracy: survey.Some(0.001), Resolution: survey.Some(10)})
	s.Readings = append(s.Readings, survey.Reading{Round: "B", Tap: "T4", OtherTap: "T3", Kind: survey.Difference, Gauge: "D1", Value: 500, Unit: "kPa", Source: next(s)})
	a = only(t, s, risesAlongFlow, "T3 T4")
	says(t, a.Evidence, "rise 0.051 ±")
}

func TestLossTooSmall(t *testing.T) {
	s := site()
	// A hundredth of the loss, and a hundredth of the flow.
	for i, h := range []float64{99.975, 99.95, 99.94, 99.91, 99.90, 99.85} {
		r := reading(s, "B", s.Taps[i].Name)
		r.Value = (h - s.Taps[i].Elevation) * weight(s)
	}
	s.Conditions[1].Value = survey.Some(0.004)
	for _, q := range []string{"Q1", "Q2"} {
		reading(s, "B", q).Value = 0.004
	}
	as := look(s)
	if len(as) != 5 || len(first(as, tooSmallR)) != 5 || as[2].Subject != "T3 T4" {
		t.Fatalf("got\n%s", text(as))
	}
	says(t, as[2].Evidence, "largest in round B: 0.03 ± 0.10 m")
	says(t, as[2].Action, "several times the flow")
	says(t, as[2].Limit, "3 standard uncertainties")

	// One round in which it can be seen is enough.
	s.Rounds = append(s.Rounds, survey.Round{Name: "C"})
	s.Conditions = append(s.Conditions, drawOff("C", "N3", 0.04))
	show(s, "C", "T3", "G3", 94)
	show(s, "C", "T4", "G4", 91)
	if found := first(look(s), tooSmallR); len(found) != 4 {
		t.Errorf("got\n%s", text(found))
	}

	// One gauge carried between the two taps: its class error cancels. 0.2 m are 3.9 times
	// what the two levels and the steps leave, and 2.0 times what two gauges leave.
	for gauge, want := range map[string]int{"G4": 1, "G3": 0} {
		s = site()
		reading(s, "B", "T4").Gauge = gauge
		shift(s, "B", "T4", 2.8)
		found := first(look(s), tooSmallR)
		if len(found) != want {
			t.Errorf("T4 read with %s: %s", gauge, text(found))
		}
		for _, a := range found {
			says(t, a.Evidence, "0.20 ± 0.10 m", "2.0 times")
			says(t, a.Action, "about 1.2 times the flow")
		}
	}
}

func TestAboveRest(t *testing.T) {
	s := site()
	shift(s, "B", "T1", 2.9) // 100.4 m against 100.0 m
	a := only(t, s, aboveRestR, "T1")
	says(t, a.Statement, "T1 shows more head in round B, with water flowing, than in round A")
	says(t, a.Evidence, "100.40 m against 100.00 m", "more by 0.40 ±")
	if !a.Stay || len(a.Sources) != 2 {
		t.Errorf("%+v", a)
	}
	// The reservoir stood higher in that round: it is no wonder.
	s.Conditions = append(s.Conditions, survey.Condition{Round: "B", Item: "R1", Kind: survey.LevelIs, Value: survey.Some(100.4)})
	quiet(t, "higher level", s)
	// Same gauge and tap: 0.05 m is within 2 standard uncertainties of 0.03 m.
	s = site()
	shift(s, "B", "T1", 2.55)
	quiet(t, "within the steps", s)

	for what, alter := range map[string]func(*survey.Survey){
		"a pump": func(s *survey.Survey) {
			s.Machines = []survey.Machine{{Name: "M1", From: "R1", To: "N1", Kind: survey.Pump}}
			s.Conditions = append(s.Conditions, survey.Condition{Round: "A", Item: "M1", Kind: survey.Stopped})
		},
		"an inflow": func(s *survey.Survey) { s.Conditions = append(s.Conditions, drawOff("B", "N2", -0.001)) },
		"an unknown flow": func(s *survey.Survey) {
			s.Conditions = append(s.Conditions, survey.Condition{Round: "B", Item: "N2", Kind: survey.DrawOff})
		},
		"an unknown level": func(s *survey.Survey) {
			s.Conditions = append(s.Conditions, survey.Condition{Round: "B", Item: "R1", Kind: survey.LevelIs})
		},
		"no round at rest": func(s *survey.Survey) { s.Conditions = append(s.Conditions, drawOff("A", "N3", 0.001)) },
		"a second, higher feed": func(s *survey.Survey) {
			s.Points = append(s.Points, survey.Point{Name: "R2", Kind: survey.Reservoir})
			s.Pipes = append(s.Pipes, survey.Pipe{Name: "P9", From: "R2", To: "N3", Length: 10, Bore: 0.1})
			s.Conditions = append(s.Conditions, survey.Condition{Round: "*", Item: "R2", Kind: survey.LevelIs, Value: survey.Some(101)},
				survey.Condition{Round: "A", Item: "P9", Kind: survey.ShutOff})
		},
	} {
		s := site()
		shift(s, "B", "T1", 2.9)
		alter(s)
		if found := first(look(s), aboveRestR); len(found) != 0 {
			t.Errorf("%s: %s", what, text(found))
		}
	}
}

func TestPlaceOfTaps(t *testing.T) {
	s := site()
	s.Pipes[2].Bore = 0.3
	s.Taps = append(s.Taps, survey.Tap{Name: "M", Point: "M1"})
	v := newView(s, nil, customary)
	for tap, want := range map[string]struct {
		pipe string
		at   float64
	}{"T3": {"P2", 100}, "T2": {"P1", 500}, "T5": {"P3", 0}, "T6": {"P3", 500}} {
		if pipe, at, ok := v.place(tap); !ok || pipe != want.pipe || at != want.at {
			t.Errorf("%s reads on %s at %v, want %+v", tap, pipe, at, want)
		}
	}
	if _, _, ok := v.place("M"); ok {
		t.Error("a point without a pipe has one")
	}
	// A meter at a point counts on the widest pipe there.
	*tap(s, "Q2") = survey.Tap{Name: "Q2", Point: "N2"}
	reading(s, "B", "Q1").Value = 0.045
	says(t, only(t, s, unbalanced, "Q1 Q2").Statement, "5.0 ± 0.4 L/s")
}

func TestStretchesStopAtJunctions(t *testing.T) {
	for what, alter := range map[string]func(*survey.Survey){
		"as it is": func(*survey.Survey) {},
		"a branch": func(s *survey.Survey) {
			s.Points = append(s.Points, survey.Point{Name: "N9", Kind: survey.Junction})
			s.Pipes = append(s.Pipes, survey.Pipe{Name: "P9", From: "N2", To: "N9", Length: 10, Bore: 0.2})
		},
		"a machine": func(s *survey.Survey) {
			s.Machines = []survey.Machine{{Name: "M1", From: "N2", To: "N1", Kind: survey.Pump}}
			s.Conditions = append(s.Conditions, survey.Condition{Round: "*", Item: "M1", Kind: survey.Stopped})
		},
	} {
		s := site()
		alter(s)
		shift(s, "B", "T5", 1.5)
		if found := first(look(s), risesAlongFlow); (len(found) == 1) != (what == "as it is") {
			t.Errorf("%s: %s", what, text(found))
		}
	}
}

// Losses are looked for only where water flows, and by the surest pair of readings.
func TestLossesOfARound(t *testing.T) {
	s := site()
	s.Readings = s.Readings[:0:0]
	for i := range 6 {
		show(s, "A", s.Taps[i].Name, s.Gauges[i].Name, 100)
	}
	quiet(t, "a survey with nothing flowing", s)

	s = site()
	shift(s, "B", "T4", 3.5)
	show(s, "B", "T4", "G3", 94.3) // the gauge that T3 was read with
	show(s, "B", "T4", "G6", 94.4)
	a := first(look(s), risesAlongFlow)
	if len(a) != 1 {
		t.Fatalf("got\n%s", text(look(s)))
	}
	says(t, a[0].Evidence, "rise 0.30 ± 0.05 m")

	// Pitots at two depths see two velocity heads.
	total := func(depth float64) *survey.Survey {
		s := site()
		for _, x := range []struct {
			tap, gauge  string
			head, depth float64
		}{{"T3", "G3", 94, 0.1}, {"T4", "G4", 94.5, depth}} {
			reading(s, "B", x.tap).SetAside = "not in this test"
			r := show(s, "B", x.tap, x.gauge, x.head)
			r.Kind, r.Depth = survey.TotalHead, survey.Some(x.depth)
		}
		return s
	}
	if found := first(look(total(0.1)), risesAlongFlow); len(found) != 1 {
		t.Errorf("one depth: %s", text(found))
	}
	if found := first(look(total(0.05)), risesAlongFlow); len(found) != 0 {
		t.Errorf("two depths: %s", text(found))
	}
}

func TestAboveRestAllowsForLevels(t *testing.T) {
	s := site()
	shift(s, "B", "T1", 2.9)
	s.Machines = []survey.Machine{{Name: "M1", From: "R1", To: "N1", Kind: survey.Turbine}} // takes head, gives none
	s.Conditions = append(s.Conditions, survey.Condition{Round: "A", Item: "M1", Kind: survey.Stopped})
	if found := first(look(s), aboveRestR); len(found) != 1 {
		t.Errorf("beside a turbine: %s", text(look(s)))
	}
	s = site()
	shift(s, "B", "T1", 2.9)
	s.Conditions = append(s.Conditions, survey.Condition{Round: "B", Item: "R1", Kind: survey.LevelIs, Value: survey.Some(100), SD: survey.Some(0.3)})
	quiet(t, "a level of ±0.3 m", s)
}
