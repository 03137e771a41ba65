package catalogue

import (
	"math"
	"strings"
	"testing"
	"time"

	"tapround/survey"
)

func at(file string, line int) survey.Source { return survey.Source{File: file, Line: line} }

// line is a survey of one round in 2024 with the pipes and fittings given.
func line(law survey.FrictionLaw, pipes []survey.Pipe, fittings ...survey.Fitting) *survey.Survey {
	for i := range pipes {
		pipes[i].Source = at("pipes.csv", i+2)
		pipes[i].Length = 100
	}
	for i := range fittings {
		fittings[i].Source = at("fittings.csv", i+2)
	}
	return &survey.Survey{
		Info:   survey.Info{FrictionLaw: law},
		Rounds: []survey.Round{{Name: "B", Start: time.Date(2024, 3, 1, 8, 0, 0, 0, time.UTC)}, {Name: "A", Start: time.Date(2023, 3, 1, 8, 0, 0, 0, time.UTC)}, {Name: "C"}},
		Pipes:  pipes, Fittings: fittings,
	}
}

// mustSay fails unless one problem of the severity, at the source, has all parts
// in its line.
func mustSay(t *testing.T, ps survey.Problems, severity survey.Severity, source survey.Source, parts ...string) {
	t.Helper()
	for _, p := range ps {
		all := p.Severity == severity && p.Source == source
		for _, part := range parts {
			all = all && strings.Contains(p.String(), part)
		}
		if all {
			return
		}
	}
	t.Errorf("no %s at %s with %q in:\n%v", severity, source, parts, ps)
}

func TestCompletePipes(t *testing.T) {
	s := line(survey.DarcyWeisbach, []survey.Pipe{
		{Name: "P1", Bore: 0.2, Material: "cast iron, unlined", Laid: survey.Some(1944)},
		{Name: "P2", Bore: 0.2, Material: "PVC"},
		{Name: "P3", Bore: 0.2, Material: "cast iron", Roughness: survey.Some(0.7e-3)},
		{Name: "P4", Bore: 0.2, Roughness: survey.Some(0)},
	})
	ps := Complete(s)
	if ps.Fatal() || len(ps) != 2 {
		t.Fatalf("problems: %v", ps)
	}
	// 80 years of slight attack: 0.26 + 0.025*80.
	if k := s.Pipes[0].Roughness; !k.OK || math.Abs(k.V-2.26e-3) > 1e-12 {
		t.Errorf("P1: %+v", k)
	}
	if k := s.Pipes[1].Roughness; k != survey.Some(0.03e-3) {
		t.Errorf("P2: %+v", k)
	}
	mustSay(t, ps, survey.Notice, at("pipes.csv", 2), "pipes.csv:2, roughness", "P1", "2.3 mm", "range 0.53 to 6.7", "80 years old")
	mustSay(t, ps, survey.Notice, at("pipes.csv", 3), "P2", "0.030 mm")
	if !strings.Contains(s.Pipes[0].FromTable, "White") || !strings.Contains(s.Pipes[0].FromTable, "80 years") || s.Pipes[2].FromTable != "" || s.Pipes[3].FromTable != "" {
		t.Errorf("sources: %q, %q, %q", s.Pipes[0].FromTable, s.Pipes[2].FromTable, s.Pipes[3].FromTable)
	}
	if s.Pipes[2].Roughness != survey.Some(0.7e-3) || s.Pipes[3].Roughness != survey.Some(0) || s.Pipes[0].C.OK || s.Pipes[0].Spread.OK {
		t.Error("a stated value, or one that is not needed, was touched")
	}
	if again := Complete(s); len(again) != 0 {
		t.Errorf("a second pass has something to say: %v", again)
	}
}

func TestCompleteAge(t *testing.T) {
	pipes := func() []survey.Pipe {
		return []survey.Pipe{{Name: "P1", Bore: 0.2, Material: "cast iron", Laid: survey.Some(1944)}}
	}
	// The stated reference year comes before the dates of rounds and readings;
	// without any date the age is unknown, and 50 years.
	for _, c := range []struct {
		change func(*survey.Survey)
		years  float64
	}{
		{func(s *survey.Survey) {}, 80},
		{func(s *survey.Survey) { s.Info.AsNewYear = survey.Some(1974) }, 30},
		{func(s *survey.Survey) { s.Info.AsNewYear = survey.Some(1944) }, 0},
		{func(s *survey.Survey) { s.Info.AsNewYear = survey.Some(1900) }, 0},
		{func(s *survey.Survey) {
			s.Rounds = nil
			s.Readings = []survey.Reading{{Time: time.Date(2004, 1, 1, 0, 0, 0, 0, time.UTC)}, {}}
		}, 60},
		{func(s *survey.Survey) { s.Rounds = nil }, 50},
	} {
		s := line(survey.DarcyWeisbach, pipes())
		c.change(s)
		Complete(s)
		if got := s.Pipes[0].Roughness.V; math.Abs(got-(0.26+0.025*c.years)*1e-3) > 1e-12 {
			t.Errorf("%v years: roughness %v", c.years, got)
		}
	}
}

func TestCompleteHazenWilliams(t *testing.T) {
	s := line(survey.HazenWilliams, []survey.Pipe{
		{Name: "P1", Bore: 0.3, Material: "cast iron", Laid: survey.Some(1964)},
		{Name: "P2", Bore: 0.3, C: survey.Some(110)},
	})
	ps := Complete(s)
	// Lamont, 60 years, 300 mm, slight attack: 102 (from memory).
	if c := s.Pipes[0].C; ps.Fatal() || !c.OK || math.Abs(c.V-102) > 3 || c.V != math.Round(c.V) || s.Pipes[0].Roughness.OK {
		t.Errorf("C %+v; %v", c, ps)
	}
	mustSay(t, ps, survey.Notice, at("pipes.csv", 2), "c_value", "101")
}

func TestCompleteWrongLaw(t *testing.T) {
	// All pipes under the other law: one line, which names the switch.
	s := line(survey.DarcyWeisbach, []survey.Pipe{{Name: "P1", Bore: 0.3, C: survey.Some(110), Material: "PVC"}, {Name: "P2", Bore: 0.3, C: survey.Some(120)}})
	ps := Complete(s)
	if len(ps) != 1 || s.Pipes[0].Roughness.OK {
		t.Errorf("%v", ps)
	}
	mustSay(t, ps, survey.Fatal, at("pipes.csv", 0), "c_value", "friction_law is darcy-weisbach", "friction_law, hazen-williams in survey.csv")

	s = line(survey.HazenWilliams, []survey.Pipe{{Name: "P1", Bore: 0.3, Roughness: survey.Some(1e-3)}, {Name: "P2", Bore: 0.3, Roughness: survey.Some(1e-3)}})
	mustSay(t, Complete(s), survey.Fatal, at("pipes.csv", 0), "roughness", "friction_law, darcy-weisbach")

	// One pipe states both: the other is named alone.
	s = line(survey.DarcyWeisbach, []survey.Pipe{{Name: "P1", Bore: 0.3, C: survey.Some(110), Roughness: survey.Some(1e-3)}, {Name: "P2", Bore: 0.3, C: survey.Some(120)}})
	if ps = Complete(s); len(ps) != 1 {
		t.Errorf("%v", ps)
	}
	mustSay(t, ps, survey.Fatal, at("pipes.csv", 3), "P2", "states a c_value")

	// Some of them: each by name, with the figure that would do.
	s = line(survey.DarcyWeisbach, []survey.Pipe{
		{Name: "P1", Bore: 0.3, C: survey.Some(101)}, {Name: "P2", Bore: 0.3, Roughness: survey.Some(1e-3)}, {Name: "P3", Bore: 0.3, C: survey.Some(190)},
	})
	ps = Complete(s)
	mustSay(t, ps, survey.Fatal, at("pipes.csv", 2), "P1", "states a c_value", "C 101 is about 1.8 mm")
	mustSay(t, ps, survey.Fatal, at("pipes.csv", 4), "P3", "write its roughness,")
	if len(ps) != 2 || s.Pipes[0].Roughness.OK {
		t.Errorf("%v", ps)
	}
	s = line(survey.HazenWilliams, []survey.Pipe{{Name: "P1", Bore: 0.3, Roughness: survey.Some(1.76e-3)}, {Name: "P2", Bore: 0.3, C: survey.Some(100)}})
	mustSay(t, Complete(s), survey.Fatal, at("pipes.csv", 2), "1.8 mm is C 101 in this bore")
}

func TestCompleteMaterials(t *testing.T) {
	s := line(survey.DarcyWeisbach, []survey.Pipe{
		{Name: "P1", Bore: 0.2, Material: "unobtainium"}, {Name: "P2", Bore: 0.2}, {Name: "P3", Bore: 0.2, Material: "steel / PVC"}, {Name: "P4", Bore: 0.2, Material: "PE"},
	})
	ps := Complete(s)
	mustSay(t, ps, survey.Fatal, at("pipes.csv", 2), `material "unobtainium"`, "no such material", "write its roughness", "ductile iron")
	mustSay(t, ps, survey.Fatal, at("pipes.csv", 3), "neither a roughness nor a material")
	mustSay(t, ps, survey.Fatal, at("pipes.csv", 4), `"steel / PVC"`, "name two")
	mustSay(t, ps, survey.Notice, at("pipes.csv", 5), "P4") // the rest is still done
	if len(ps) != 4 || s.Pipes[0].Roughness.OK {
		t.Errorf("%v", ps)
	}
	s = line(survey.HazenWilliams, []survey.Pipe{{Name: "P1", Material: "PE"}})
	mustSay(t, Complete(s), survey.Fatal, at("pipes.csv", 2), "no bore")
}

func TestCompleteFittings(t *testing.T) {
	pipes := []survey.Pipe{{Name: "P1", Bore: 0.2, Roughness: survey.Some(1e-3)}}
	s := line(survey.DarcyWeisbach, pipes,
		survey.Fitting{Name: "V1", Pipe: "P1", At: 10, Kind: survey.GateValve},
		survey.Fitting{Name: "V2", Pipe: "P1", At: 20, Kind: survey.GateValve, K: survey.Some(0.4)},
		survey.Fitting{Name: "C1", Pipe: "P1", At: 100, Kind: survey.Enlargement, Bore: survey.Some(0.25)},
		survey.Fitting{Name: "C2", Pipe: "P1", At: 0, Kind: survey.Enlargement, Bore: survey.Some(0.16)}, // upstream of the pipe
		survey.Fitting{Name: "C3", Pipe: "P1", At: 100, Kind: survey.Contraction, Bore: survey.Some(0.16)},
		survey.Fitting{Name: "Z1", Pipe: "P1", At: 100, Kind: survey.Nozzle, Bore: survey.Some(0.05)},
		survey.Fitting{Name: "M1", Pipe: "P1", At: 50, Kind: survey.MeterFitting, K: survey.Some(0)},
	)
	ps := Complete(s)
	if ps.Fatal() || len(ps) != 5 {
		t.Fatalf("%v", ps)
	}
	for i, want := range []float64{0.17, 0.4, (1 - 0.64) * (1 - 0.64), (1 - 0.64) * (1 - 0.64), 0.5 * (1 - 0.64), 0.05, 0} {
		f := s.Fittings[i]
		if !f.K.OK || math.Abs(f.K.V-want) > 1e-12 || f.Spread.OK {
			t.Errorf("%s: K %+v, want %v", f.Name, f.K, want)
		}
		if stated := f.Name == "V2" || f.Name == "M1"; (f.FromTable == "") != stated {
			t.Errorf("%s: from %q", f.Name, f.FromTable)
		}
	}
	mustSay(t, ps, survey.Notice, at("fittings.csv", 2), "loss_coefficient", "V1", "K 0.17", "range 0.096 to 0.30")
	mustSay(t, ps, survey.Notice, at("fittings.csv", 4), "C1", "K 0.13", "sudden")
}

func TestCompleteFittingTrouble(t *testing.T) {
	pipes := []survey.Pipe{{Name: "P1", Bore: 0.2, Roughness: survey.Some(1e-3)}}
	s := line(survey.DarcyWeisbach, pipes,
		survey.Fitting{Name: "X1", Pipe: "P1", At: 10, Kind: survey.OtherFitting},
		survey.Fitting{Name: "C1", Pipe: "P1", At: 100, Kind: survey.Enlargement},
		survey.Fitting{Name: "C2", Pipe: "P1", At: 100, Kind: survey.Enlargement, Bore: survey.Some(0.15)},
		survey.Fitting{Name: "C3", Pipe: "P1", At: 100, Kind: survey.Contraction, Bore: survey.Some(0.2)},
		survey.Fitting{Name: "C4", Pipe: "P9", At: 100, Kind: survey.Contraction, Bore: survey.Some(0.1)},
		survey.Fitting{Name: "V9", Pipe: "P9", At: 100, Kind: survey.GateValve},
	)
	ps := Complete(s)
	mustSay(t, ps, survey.Fatal, at("fittings.csv", 2), "X1", "kind other", "loss_coefficient")
	mustSay(t, ps, survey.Fatal, at("fittings.csv", 3), "C1", "neither the other bore nor")
	mustSay(t, ps, survey.Fatal, at("fittings.csv", 4), "C2", "from 200 to 150 mm", "the other way")
	mustSay(t, ps, survey.Fatal, at("fittings.csv", 5), "C3", "both sides")
	mustSay(t, ps, survey.Fatal, at("fittings.csv", 6), "C4", `"P9"`)
	mustSay(t, ps, survey.Notice, at("fittings.csv", 7), "V9")
	for _, f := range s.Fittings[:5] {
		if f.K.OK {
			t.Errorf("%s has K %v", f.Name, f.K.V)
		}
	}
}
