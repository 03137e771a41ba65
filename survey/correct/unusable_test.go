package correct_test

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"tapround/survey"
	"tapround/survey/correct"
)

func TestUnusableReadings(t *testing.T) {
	for _, c := range []struct {
		what, column, reason string
		alter                func(*survey.Survey)
	}{
		{"unknown gauge", "gauge", "not in gauges.csv", func(s *survey.Survey) { s.Readings[0].Gauge = "G9" }},
		{"unknown tap", "tap", "not in taps.csv", func(s *survey.Survey) { s.Readings[0].Tap = "T9" }},
		{"unknown other tap", "other_tap", "not in taps.csv", func(s *survey.Survey) {
			s.Readings[0].Kind, s.Readings[0].OtherTap, s.Gauges[0].Kind = survey.Difference, "T9", survey.DifferenceGauge
		}},
		{"unknown round", "round", "not in rounds.csv", func(s *survey.Survey) { s.Readings[0].Round = "Z" }},
		{"a flow by a pressure gauge", "gauge", "cannot take a flow reading", func(s *survey.Survey) { s.Readings[0].Kind = survey.FlowRate }},
		{"a level by a flow meter", "gauge", "cannot take a level reading", func(s *survey.Survey) {
			s.Readings[0].Kind, s.Gauges[0].Kind = survey.WaterLevel, survey.FlowMeter
		}},
		{"a difference by an absolute gauge", "gauge", "cannot take a difference", func(s *survey.Survey) {
			s.Readings[0].Kind, s.Readings[0].OtherTap, s.Gauges[0].Kind = survey.Difference, "T2", survey.AbsoluteGauge
		}},
		{"shut pipe", "tap", "pipe P1 is shut in round A", func(s *survey.Survey) {
			s.Conditions = []survey.Condition{{Round: "A", Item: "P1", Kind: survey.ShutOff}}
		}},
		{"shut in all rounds", "tap", "pipe P1 is shut in round A", func(s *survey.Survey) {
			s.Conditions = []survey.Condition{{Round: "*", Item: "P1", Kind: survey.ShutOff}, {Round: "B", Item: "P1", Kind: survey.OpenAgain}}
		}},
		{"the other tap's pipe is shut", "other_tap", "pipe P2 is shut", func(s *survey.Survey) {
			s.Pipes = append(s.Pipes, survey.Pipe{Name: "P2"})
			s.Taps[1].Pipe = "P2"
			s.Readings[0].Kind, s.Readings[0].OtherTap, s.Gauges[0].Kind = survey.Difference, "T2", survey.DifferenceGauge
			s.Conditions = []survey.Condition{{Round: "A", Item: "P2", Kind: survey.ShutOff}}
		}},
	} {
		s := small()
		c.alter(s)
		cs, problems := correct.Readings(s)
		if len(cs) != 0 || len(problems) != 1 {
			t.Errorf("%s: %d readings, problems %v", c.what, len(cs), problems)
			continue
		}
		p := problems[0]
		if p.Severity != survey.SetAside || p.Column != c.column || !strings.Contains(p.Reason, c.reason) || p.Remedy == "" || p.Source != s.Readings[0].Source {
			t.Errorf("%s: problem %+v", c.what, p)
		}
		if s.Readings[0].SetAside != p.Reason || s.Inputs[0].Used != 0 {
			t.Errorf("%s: reading marked %q, %d rows used", c.what, s.Readings[0].SetAside, s.Inputs[0].Used)
		}
	}
}

func TestUsableAllTheSame(t *testing.T) {
	for what, alter := range map[string]func(*survey.Survey){
		"open in this round": func(s *survey.Survey) {
			s.Conditions = []survey.Condition{{Round: "A", Item: "P1", Kind: survey.OpenAgain}, {Round: "*", Item: "P1", Kind: survey.ShutOff}}
		},
		"shut in another round": func(s *survey.Survey) {
			s.Conditions = []survey.Condition{{Round: "B", Item: "P1", Kind: survey.ShutOff}}
		},
		"a shut fitting on it": func(s *survey.Survey) {
			s.Conditions = []survey.Condition{{Round: "A", Item: "V1", Kind: survey.ShutOff}}
		},
		"the tap is at a point":  func(s *survey.Survey) { s.Taps[0] = survey.Tap{Name: "T1", Point: "N1"} },
		"difference gauge, open": func(s *survey.Survey) { s.Gauges[0].Kind = survey.DifferenceGauge },
	} {
		s := small()
		alter(s)
		if cs, problems := correct.Readings(s); len(cs) != 1 || len(problems) != 0 {
			t.Errorf("%s: %d readings, problems %v", what, len(cs), problems)
		}
	}
}

func TestReadingWithoutAGauge(t *testing.T) {
	two := func() *survey.Survey {
		s := small()
		g := s.Gauges[0]
		g.Name, g.Unit = "G2", "Bar" // another spelling of the same unit
		g.Checks = []survey.BenchCheck{{Applied: 0, Indicated: 0.1 * bar}}
		s.Gauges = append(s.Gauges, g, survey.Gauge{Name: "FM1", Kind: survey.FlowMeter, High: 0.1, Unit: "L/s"})
		s.Readings[0].Gauge = ""
		return s
	}
	got := only(t, two())
	if got.Gauge != "" || got.Pressure != 4.2*bar || len(got.Applied) != 0 || !has(got.Caveats, "no gauge named") {
		t.Errorf("alike gauges: %+v", got)
	}
	near(t, "class error of an unchecked gauge", got.Shared, 0.01*10*bar/math.Sqrt(3), 1e-9)

	for what, alter := range map[string]func(*survey.Survey){
		"another range":    func(s *survey.Survey) { s.Gauges[1].High = 16 * bar },
		"another accuracy": func(s *survey.Survey) { s.Gauges[1].Accuracy = survey.Maybe{} },
		"an air line":      func(s *survey.Survey) { s.Gauges[1].Line = survey.AirLine },
		"no such unit":     func(s *survey.Survey) { s.Readings[0].Unit = "psi" },
		"no such kind":     func(s *survey.Survey) { s.Readings[0].Kind, s.Readings[0].Unit = survey.WaterLevel, "m" },
	} {
		s := two()
		alter(s)
		if cs, problems := correct.Readings(s); len(cs) != 0 || len(problems) != 1 || problems[0].Column != "gauge" {
			t.Errorf("%s: %d readings, problems %v", what, len(cs), problems)
		}
	}
}

// Every reading is either corrected or among the problems or was set aside before,
// in the order of the survey, and the files' counts follow.
func TestRowsAreConserved(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := small()
		s.Conditions = []survey.Condition{{Round: "B", Item: "P1", Kind: survey.ShutOff}}
		s.Readings = nil
		before := 0
		for i := range rapid.IntRange(0, 12).Draw(t, "readings") {
			r := survey.Reading{Kind: survey.Static, Unit: "bar", Value: 3 * bar, Source: survey.Source{File: "readings.csv", Line: i + 2},
				Round: rapid.SampledFrom([]string{"A", "B", "Z"}).Draw(t, "round"), Tap: rapid.SampledFrom([]string{"T1", "T2", "T9"}).Draw(t, "tap"),
				Gauge: rapid.SampledFrom([]string{"G1", "", "G9"}).Draw(t, "gauge"), SetAside: rapid.SampledFrom([]string{"", "! jumping"}).Draw(t, "aside")}
			if r.SetAside != "" {
				before++
			}
			s.Readings = append(s.Readings, r)
		}
		s.Inputs[0].Rows, s.Inputs[0].Used = len(s.Readings), len(s.Readings)-before
		cs, problems := correct.Readings(s)
		if len(cs)+len(problems)+before != len(s.Readings) || s.Inputs[0].Used != len(cs) {
			t.Fatalf("%d readings: %d corrected, %d problems, %d set aside before, %d counted as used", len(s.Readings), len(cs), len(problems), before, s.Inputs[0].Used)
		}
		lines := func(i int) int { return cs[i].Source.Line }
		for i := 1; i < len(cs); i++ {
			if lines(i) <= lines(i-1) {
				t.Fatal("order was not kept")
			}
		}
		if again, more := correct.Readings(s); len(again) != len(cs) || len(more) != 0 || !slices.EqualFunc(again, cs, func(a, b survey.Corrected) bool { return fmt.Sprint(a) == fmt.Sprint(b) }) {
			t.Fatal("a second pass gives something else")
		}
	})
}
