package survey_test

import (
	"testing"

	"github.com/google/go-cmp/cmp"

	"tapround/survey"
)

func row(line int, round, item string, kind survey.ConditionKind, v ...float64) survey.Condition {
	c := survey.Condition{Round: round, Item: item, Kind: kind, Source: survey.Source{File: "conditions.csv", Line: line}}
	if len(v) > 0 {
		c.Value = survey.Some(v[0])
	}
	if len(v) > 1 {
		c.SD = survey.Some(v[1])
	}
	return c
}

func TestInForce(t *testing.T) {
	s := &survey.Survey{Conditions: []survey.Condition{
		row(2, "B", "R1", survey.LevelIs, 92.9), // stands before the row it overrides
		row(3, "*", "R1", survey.LevelIs, 92.7, 0.02),
		row(4, "*", "N7", survey.DrawOff, 0.004),
		row(5, "*", "N7", survey.DrawOff, -0.001),
		row(6, "B", "N7", survey.DrawOff, 0.010, 0.0002),
		row(7, "B", "N7", survey.DrawOff, 0.002),
		row(8, "B", "N8", survey.DrawOff),
		row(9, "*", "M1", survey.SpeedIs, 62.8),
		row(10, "A", "M1", survey.Stopped),
		row(11, "*", "M2", survey.Stopped),
		row(12, "B", "M2", survey.SpeedIs, 60),
		row(13, "*", "V3", survey.ShutOff),
		row(14, "B", "V3", survey.OpenAgain),
		row(15, "B", "P4", survey.ShutOff),
		row(16, "*", "P4", survey.OpenAgain),
		row(17, "*", "R2", survey.LevelIs),
	}}
	sd := func(c survey.Condition, v float64) survey.Condition { c.SD = survey.Some(v); return c }
	c := s.Conditions
	for round, want := range map[string]survey.RoundConditions{
		"A": {
			Levels:   map[string]survey.Condition{"R1": c[1], "R2": c[15]},
			DrawOffs: map[string][]survey.Condition{"N7": {sd(c[2], 0.0002), sd(c[3], 0.00005)}},
			Speeds:   map[string]survey.Condition{},
			Stopped:  map[string]bool{"M1": true, "M2": true},
			Shut:     map[string]bool{"V3": true},
		},
		"B": {
			Levels:   map[string]survey.Condition{"R1": sd(c[0], 0), "R2": c[15]},
			DrawOffs: map[string][]survey.Condition{"N7": {c[4], sd(c[5], 0.0001)}, "N8": {c[6]}},
			Speeds:   map[string]survey.Condition{"M1": sd(c[7], 0), "M2": sd(c[10], 0)},
			Stopped:  map[string]bool{},
			Shut:     map[string]bool{"P4": true},
		},
	} {
		if d := cmp.Diff(want, s.InForce(round)); d != "" {
			t.Errorf("round %s (-want +got):\n%s", round, d)
		}
	}
	if c[0].SD.OK {
		t.Error("the survey's own rows were changed")
	}
}
