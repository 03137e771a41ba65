package check

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"
	"time"

	"pgregory.net/rapid"

	"tapround/survey"
	"tapround/survey/correct"
	"tapround/survey/head"
	"tapround/survey/water"
)

// site is a main of one bore from a reservoir at 100.00 m: R1, P1, N1, P2, N2, P3, N3, each
// pipe 500 m long, taps T1 to T6 down it and meters Q1 and Q2 on its first and last
// pipe. In round A nothing flows; in round B 40 L/s are drawn at N3 and the head falls by
// 1 m in 100 m. Every reading is what a perfect gauge shows, written in bar.
func site() *survey.Survey {
	at := func(hour, minute int) time.Time { return time.Date(2026, 3, 10, hour, minute, 0, 0, time.UTC) }
	s := &survey.Survey{
		Info: survey.Info{Latitude: 52, SiteLevel: 40, WaterTemperature: 10},
		Points: []survey.Point{{Name: "R1", Kind: survey.Reservoir, Elevation: 96}, {Name: "N1", Kind: survey.Junction, Elevation: 40},
			{Name: "N2", Kind: survey.Junction, Elevation: 38}, {Name: "N3", Kind: survey.Junction, Elevation: 36}},
		Taps: []survey.Tap{{Name: "T1", Pipe: "P1", At: 250, Elevation: 44}, {Name: "T2", Point: "N1", Elevation: 40}, {Name: "T3", Pipe: "P2", At: 100, Elevation: 31},
			{Name: "T4", Pipe: "P2", At: 400, Elevation: 39}, {Name: "T5", Point: "N2", Elevation: 38}, {Name: "T6", Point: "N3", Elevation: 36},
			{Name: "Q1", Pipe: "P1", At: 50}, {Name: "Q2", Pipe: "P3", At: 100}},
		Rounds: []survey.Round{{Name: "A", Start: at(8, 0), End: at(9, 30)}, {Name: "B", Start: at(10, 0), End: at(11, 30)}},
		Conditions: []survey.Condition{{Round: "*", Item: "R1", Kind: survey.LevelIs, Value: survey.Some(100), Source: survey.Source{File: "conditions.csv", Line: 2}},
			{Round: "B", Item: "N3", Kind: survey.DrawOff, Value: survey.Some(0.040), Source: survey.Source{File: "conditions.csv", Line: 3}}},
	}
	for i, ends := range [][2]string{{"R1", "N1"}, {"N1", "N2"}, {"N2", "N3"}} {
		s.Pipes = append(s.Pipes, survey.Pipe{Name: fmt.Sprintf("P%d", i+1), From: ends[0], To: ends[1], Length: 500, Bore: 0.2})
	}
	for i := range s.Taps {
		s.Taps[i].ElevationSD = 0.03
	}
	for i := range 6 {
		s.Gauges = append(s.Gauges, survey.Gauge{Name: fmt.Sprintf("G%d", i+1), Kind: survey.PressureGauge, High: 10e5, Unit: "bar",
			Accuracy: survey.Some(0.001), Resolution: survey.Some(500), Line: survey.WaterLine})
	}
	for _, name := range []string{"F1", "F2"} {
		s.Gauges = append(s.Gauges, survey.Gauge{Name: name, Kind: survey.FlowMeter, High: 0.1, Unit: "L/s",
			Accuracy: survey.Some(0.005), Resolution: survey.Some(1e-4), Line: survey.WaterLine})
	}
	for i, h := range []float64{97.5, 95, 94, 91, 90, 85} {
		tap, gauge := fmt.Sprintf("T%d", i+1), fmt.Sprintf("G%d", i+1)
		show(s, "A", tap, gauge, 100).Time = at(8, 10+i)
		show(s, "B", tap, gauge, h).Time = at(10, 10+i)
	}
	for i, name := range []string{"F1", "F2"} {
		meter(s, "A", fmt.Sprintf("Q%d", i+1), name, 0)
		meter(s, "B", fmt.Sprintf("Q%d", i+1), name, 0.040)
	}
	return s
}

func next(s *survey.Survey) survey.Source {
	return survey.Source{File: "readings.csv", Line: len(s.Readings) + 2}
}

// show adds the static reading by which a perfect gauge shows a head at a tap.
func show(s *survey.Survey, round, tap, gauge string, head float64) *survey.Reading {
	v := newView(s, nil, customary)
	p := (head - v.taps[tap].Elevation) * weight(s)
	s.Readings = append(s.Readings, survey.Reading{Round: round, Tap: tap, Kind: survey.Static, Gauge: gauge, Value: p,
		Written: fmt.Sprintf("%.4f", p/1e5), Unit: "bar", Source: next(s)})
	return &s.Readings[len(s.Readings)-1]
}

func meter(s *survey.Survey, round, tap, gauge string, flow float64) *survey.Reading {
	s.Readings = append(s.Readings, survey.Reading{Round: round, Tap: tap, Kind: survey.FlowRate, Gauge: gauge, Value: flow,
		Written: fmt.Sprintf("%.1f", 1e3*flow), Unit: "L/s", Source: next(s)})
	return &s.Readings[len(s.Readings)-1]
}

func weight(s *survey.Survey) float64 {
	return water.Density(s.Info.WaterTemperature) * water.Gravity(s.Info.Latitude, s.Info.SiteLevel)
}

// reading finds the first reading of a tap in a round.
func reading(s *survey.Survey, round, tap string) *survey.Reading {
	for i := range s.Readings {
		if s.Readings[i].Round == round && s.Readings[i].Tap == tap {
			return &s.Readings[i]
		}
	}
	panic("no reading at " + tap + " in " + round)
}

func tap(s *survey.Survey, name string) *survey.Tap {
	for i := range s.Taps {
		if s.Taps[i].Name == name {
			return &s.Taps[i]
		}
	}
	panic("no tap " + name)
}

// shift moves what a gauge showed by a head, m.
func shift(s *survey.Survey, round, tap string, d float64) {
	reading(s, round, tap).Value += d * weight(s)
}

func look(s *survey.Survey) []survey.Alert { return Heads(s, headsOf(s)) }

func headsOf(s *survey.Survey) []survey.Head {
	cs, problems := correct.Readings(s)
	hs, more := head.FromCorrected(s, cs)
	if len(problems)+len(more) > 0 {
		panic(fmt.Sprint(problems, more))
	}
	return hs
}

func text(as []survey.Alert) string {
	var out []string
	for _, a := range as {
		out = append(out, fmt.Sprintf("[%s] %s: %s | %s | %s", a.Rule, a.Subject, a.Statement, a.Evidence, a.Action))
	}
	return strings.Join(out, "\n")
}

// only wants exactly one alert, of the rule and subject.
func only(t *testing.T, s *survey.Survey, rule, subject string) survey.Alert {
	t.Helper()
	as := look(s)
	if len(as) != 1 || as[0].Rule != rule || as[0].Subject != subject {
		t.Fatalf("want [%s] %s and nothing else, got\n%s", rule, subject, text(as))
	}
	a := as[0]
	if a.Statement == "" || a.Evidence == "" || a.Limit == "" || a.Action == "" || len(a.Sources) == 0 {
		t.Fatalf("incomplete: %+v", a)
	}
	return a
}

// one wants exactly one alert of the rule, whatever else is said.
func one(t *testing.T, s *survey.Survey, rule, subject string) survey.Alert {
	t.Helper()
	as := first(look(s), rule)
	if len(as) != 1 || as[0].Subject != subject {
		t.Fatalf("want one [%s], of %s, got\n%s", rule, subject, text(look(s)))
	}
	return as[0]
}

func quiet(t *testing.T, what string, s *survey.Survey) {
	t.Helper()
	if as := look(s); len(as) > 0 {
		t.Errorf("%s: want no alert, got\n%s", what, text(as))
	}
}

// says wants parts of a text in it.
func says(t *testing.T, in string, parts ...string) {
	t.Helper()
	for _, p := range parts {
		if !strings.Contains(in, p) {
			t.Errorf("%q does not say %q", in, p)
		}
	}
}

func TestSoundSurveyIsQuiet(t *testing.T) { quiet(t, "sound", site()) }

func TestOrderOfAlerts(t *testing.T) {
	s := site()
	reading(s, "B", "T5").Time = time.Date(2026, 3, 10, 22, 14, 0, 0, time.UTC)
	shift(s, "A", "T3", 0.18) // between 2 and 3 standard uncertainties
	shift(s, "B", "T4", 4)    // rises far above T3
	as := look(s)
	var stay []bool
	for _, a := range as {
		stay = append(stay, a.Stay)
	}
	if len(as) != 3 || !slices.Equal(stay, []bool{true, false, false}) || as[1].Rule != "no-flow round does not close" {
		t.Errorf("got\n%s", text(as))
	}
}

// The order of the lines decides nothing but the order of the alerts' sources.
func TestOrderOfLines(t *testing.T) {
	build := func() *survey.Survey {
		s := site()
		shift(s, "A", "T3", 2)
		shift(s, "A", "T6", -1)
		shift(s, "B", "T4", 4)
		reading(s, "B", "Q2").Value = 0.03
		return s
	}
	rules := func(as []survey.Alert) []string {
		var out []string
		for _, a := range as {
			out = append(out, a.Rule+a.Subject+a.Statement+a.Evidence)
		}
		slices.Sort(out)
		return out
	}
	want := rules(look(build()))
	if len(want) < 4 {
		t.Fatalf("only %d alerts: %q", len(want), want)
	}
	rapid.Check(t, func(t *rapid.T) {
		s := build()
		s.Readings = rapid.Permutation(s.Readings).Draw(t, "order")
		if got := rules(look(s)); !slices.Equal(got, want) {
			t.Fatalf("got %q\nwant %q", got, want)
		}
	})
}

// A datum raised under everything changes no alert but for the levels it prints.
func TestDatumShift(t *testing.T) {
	s := site()
	shift(s, "A", "T3", 2)
	before := look(s)
	for i := range s.Taps {
		s.Taps[i].Elevation += 500
	}
	for i := range s.Points {
		s.Points[i].Elevation += 500
	}
	s.Conditions[0].Value.V += 500
	after := look(s)
	if len(before) != len(after) || len(after) != 1 || before[0].Statement != after[0].Statement || before[0].Stay != after[0].Stay {
		t.Errorf("before\n%s\nafter\n%s", text(before), text(after))
	}
}

func TestDifferenceOfHeads(t *testing.T) {
	a := survey.Head{Round: "A", Tap: "T1", Gauge: "G1", Value: 10, Own: 0.3, PerGauge: 1e-4, GaugeSD: 5000, PerTap: 1, TapSD: 0.4, BarometerSD: 0.08}
	alter := func(f func(*survey.Head)) survey.Head { b := a; f(&b); return b }
	for _, c := range []struct {
		what string
		b    survey.Head
		want float64 // variance
	}{
		{"all shared", alter(func(h *survey.Head) {}), 2 * 0.09},
		{"another round", alter(func(h *survey.Head) { h.Round = "B" }), 2*0.09 + 2*0.0064},
		{"another tap", alter(func(h *survey.Head) { h.Tap = "T2" }), 2*0.09 + 2*0.16},
		{"another gauge", alter(func(h *survey.Head) { h.Gauge = "G2" }), 2*0.09 + 2*0.25},
		{"no gauge named", alter(func(h *survey.Head) { h.Gauge, h.PerGauge = "", 0 }), 2*0.09 + 0.25},
		{"air-line difference to it", alter(func(h *survey.Head) { h.Tap, h.OtherTap, h.PerOther, h.OtherTapSD, h.TapSD = "T3", "T1", -1, 0.4, 0.1 }), 2*0.09 + 0.01 + 4*0.16},
	} {
		d, u := differ(a, c.b)
		if d != 0 || math.Abs(u*u-c.want) > 1e-12 {
			t.Errorf("%s: variance %v, want %v", c.what, u*u, c.want)
		}
	}
	if v := covariance(a, a, true); math.Abs(v-a.U()*a.U()) > 1e-15 {
		t.Errorf("variance %v, U squared %v", v, a.U()*a.U())
	}
	f := survey.Head{Gauge: "F1", Value: 2, PerGauge: 1, GaugeSD: 0.1, GainSD: 0.05}
	g := f
	g.Value = 3
	if _, u := differ(f, g); math.Abs(u-0.05) > 1e-12 { // gain 5 % of the difference; the offset cancels
		t.Errorf("two flows of one meter: u %v", u)
	}
}
