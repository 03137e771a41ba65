package check

import (
	"slices"
	"testing"

	"tapround/survey"
)

const (
	nearVapour  = "pressure near the vapour pressure"
	belowVapour = "pressure below the vapour pressure"
)

// high puts a tap of the site at a level, with its readings and a gauge that shows
// less than the atmosphere.
func high(s *survey.Survey, name, gauge string, z float64) {
	d := z - tap(s, name).Elevation
	tap(s, name).Elevation = z
	for _, r := range []string{"A", "B"} {
		shift(s, r, name, -d)
	}
	for i := range s.Gauges {
		if s.Gauges[i].Name == gauge {
			s.Gauges[i].Low, s.Gauges[i].High, s.Gauges[i].Accuracy = -1e5, 2e5, survey.Some(0.003)
		}
	}
}

func TestNotFull(t *testing.T) {
	s := site()
	tap(s, "T4").ElevationSD = 0.8 // cancels: both pressures are the tap's own
	high(s, "T4", "G4", 92.5)      // 1.5 m above the piezometric head of 91 m in round B
	a := one(t, s, belowPipe, "T4")
	says(t, a.Statement, "stands below tap T4 in round B")
	says(t, a.Evidence, "by 1.50 ± 0.06 m")
	says(t, a.Action, "Do not use these readings for roughness", "Local codes and licensed practice decide")
	if !a.Stay {
		t.Error("nobody stays")
	}

	s = site()
	high(s, "T4", "G4", 91.05) // 0.05 m, less than its uncertainty
	a = only(t, s, belowPipe, "T4")
	says(t, a.Statement, "seems to stand below")
	if a.Stay {
		t.Error("a doubt holds the crew")
	}
	s = site()
	high(s, "T4", "G4", 90.9)
	quiet(t, "just above the tap", s)

	// At a point that is open to the air nothing else can be.
	s = site()
	s.Points[3].Kind = survey.Outlet
	high(s, "T6", "G6", 85.3)
	if found := first(look(s), belowPipe); len(found) != 0 {
		t.Errorf("at an outlet: %s", text(found))
	}
}

func TestNotFullOnTheLongSection(t *testing.T) {
	s := site()
	s.Levels = []survey.Level{{Pipe: "P2", At: 250, Elevation: 90}}
	quiet(t, "below the line", s) // the line stands at 92.5 m there
	s.Levels[0].Elevation = 93
	s.Levels[0].Source = survey.Source{File: "levels.csv", Line: 2}
	a := only(t, s, belowPipe, "P2")
	says(t, a.Statement, "below pipe P2 at 250 m in round B")
	says(t, a.Evidence, "by 0.50 ±")
	if a.Sources[len(a.Sources)-1].File != "levels.csv" {
		t.Errorf("sources %v", a.Sources)
	}
	// Nearer to T4 (91 m) than to T3 (94 m); both with one gauge, whose error stays in full.
	s = site()
	s.Gauges[3].Accuracy = survey.Some(0.01)
	for _, r := range []string{"A", "B"} {
		reading(s, r, "T3").Gauge = "G4"
	}
	s.Levels = []survey.Level{{Pipe: "P2", At: 340, Elevation: 93.6}}
	says(t, one(t, s, belowPipe, "P2").Evidence, "by 2.0 ± 0.6 m")

	// Beyond the last reading of the pipe nothing is said: T5 and T6 stand either side.
	s = site()
	s.Levels = []survey.Level{{Pipe: "P3", At: 250, Elevation: 89}}
	only(t, s, belowPipe, "P3")
	for i := range s.Readings {
		if s.Readings[i].Tap == "T6" {
			s.Readings[i].SetAside = "not in this test"
		}
	}
	quiet(t, "one side only", s)

	// The pipe itself lies above its tap.
	s = site()
	s.Levels = []survey.Level{{Pipe: "P2", At: 390, Elevation: 89}, {Pipe: "P2", At: 400, Elevation: 91.8}, {Pipe: "P2", At: 410, Elevation: 89}}
	a = look(s)[0]
	says(t, a.Statement, "below pipe P2 at T4 in round B")
	says(t, a.Evidence, "by 0.80 ±")
}

// 10 C water boils at 1.23 kPa (IAPWS), the standard atmosphere at 40 m is 100.85 kPa: 9.6
// m below the pipe is at 6.7 kPa, 11 m at less than nothing.
func TestVapourLimit(t *testing.T) {
	for z, rule := range map[float64]string{91 + 7.9: belowPipe, 91 + 9.6: nearVapour, 91 + 11: belowVapour} {
		s := site()
		high(s, "T4", "G4", z)
		reading(s, "A", "T4").SetAside = "not in this test"
		found := slices.DeleteFunc(look(s), func(a survey.Alert) bool { return a.Rule == lowOnScale || a.Rule == beyondScale })
		if len(found) != 1 || found[0].Rule != rule || found[0].Subject != "T4" {
			t.Fatalf("T4 at %v m: want %s, got\n%s", z, rule, text(found))
		}
		a := found[0]
		if rule != belowPipe {
			says(t, a.Evidence, "absolute pressure ", "vapour pressure 1.23 kPa")
		}
		if !a.Stay {
			t.Errorf("%s: nobody stays", rule)
		}
	}
	// A low barometer brings the same reading nearer.
	s := site()
	s.Rounds[1].Barometer = survey.Some(85e3)
	high(s, "T4", "G4", 91+7.9)
	reading(s, "A", "T4").SetAside = "not in this test"
	if found := first(look(s), nearVapour); len(found) != 1 {
		t.Errorf("with a low barometer: %s", text(look(s)))
	}
}
