package head_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"tapround/survey"
	"tapround/survey/correct"
	"tapround/survey/head"
	"tapround/survey/unit"
)

// jet is a survey of one pitot reading in the jet of a hydrant.
func jet(pressure, bore, coefficient float64) *survey.Survey {
	s := one(pressure, 0, 0)
	s.Taps[0].OutletBore, s.Taps[0].OutletCoefficient = survey.Some(bore), survey.Some(coefficient)
	s.Readings[0].Kind = survey.Jet
	s.Inputs = []survey.Input{{File: "readings.csv", Rows: 1, Used: 1}}
	return s
}

// Discharge of hydrant outlets, US gpm = 29.84 c d^2 sqrt p (NFPA 291), for water of 60 F.
func TestHydrantJets(t *testing.T) {
	psi, in, gpm := unit.PoundPerSquareInch.Factor, unit.Inch.Factor, unit.GallonPerMinute.Factor
	seen := 0
	for _, c := range checks(t, "hydrant_jets.csv") {
		if !strings.HasPrefix(c["id"], "T-") && !strings.HasPrefix(c["id"], "EX-") {
			continue // the constant and the range to aim for
		}
		x := map[string]float64{}
		for _, part := range strings.Split(c["inputs"], ";") {
			if name, v, ok := strings.Cut(part, "="); ok {
				x[name] = number(t, strings.Fields(v)[0])
			}
		}
		seen++
		if strings.Contains(c["inputs"], "pumper 0.83") {
			x["c"] *= 0.83
		}
		s := jet(x["p"]*psi, x["d"]*in, x["c"])
		s.Info.WaterTemperature = unit.Fahrenheit.ToSI(60)
		h := headsOf(t, s)[0]
		want := number(t, c["value"])
		// Whole gallons, or the row's own allowance, and a constant of four figures
		// (29.83 or 29.84).
		allowance := math.Max(0.5, number(t, strings.Fields(c["tolerance"])[0]))
		near(t, c["id"], h.Value/gpm, want, allowance+0.0004*want)
		if h.Quantity != survey.OutletFlow || h.Pressure.V != x["p"]*psi {
			t.Errorf("%s: %+v", c["id"], h)
		}
	}
	if seen < 30 {
		t.Errorf("%d rows", seen)
	}
}

// The flow goes as the root of the pressure, so a shown error acts as half of it does.
func TestJetSensitivity(t *testing.T) {
	s := jet(2e5, 0.0635, 0.9)
	s.Gauges[0].GainSD = 0.01
	h := headsOf(t, s)[0]
	const off = 10.0 // Pa; the second derivative adds 1e-5 of the change
	shifted := headsOf(t, jet(2e5+off, 0.0635, 0.9))[0]
	near(t, "slope", shifted.Value-h.Value, h.PerGauge*off, 3e-5*h.PerGauge*off)
	near(t, "relative slope", h.PerGauge/h.Value, 0.5/2e5, 1e-12)
	near(t, "own", h.Own/h.Value, 0.5*2000*math.Sqrt(1./12+0.09)/2e5, 1e-12)
	near(t, "shared", h.GaugeSD, math.Hypot(0.01*1e6/math.Sqrt(3), 0.01*2e5), 1e-6)
	if h.PerTap != 0 || h.GainSD != 0 {
		t.Errorf("a jet has level part %v and gain %v", h.PerTap, h.GainSD)
	}
	s.Gauges[0].Kind = survey.AbsoluteGauge
	s.Readings[0].Value += 101_325
	h = headsOf(t, s)[0]
	near(t, "barometer", h.BarometerSD, 800*h.PerGauge, 1e-12)
}

func TestUnusableJets(t *testing.T) {
	for what, alter := range map[string]func(*survey.Survey){
		"no bore":        func(s *survey.Survey) { s.Taps[0].OutletBore = survey.Maybe{} },
		"no coefficient": func(s *survey.Survey) { s.Taps[0].OutletCoefficient = survey.Maybe{} },
		"no pressure":    func(s *survey.Survey) { s.Readings[0].Value = 0 },
	} {
		s := jet(2e5, 0.0635, 0.9)
		alter(s)
		cs, _ := correct.Readings(s)
		hs, problems := head.FromCorrected(s, cs)
		if len(hs) != 0 || len(problems) != 1 || problems[0].Severity != survey.SetAside || problems[0].Source.Line != 2 || problems[0].Remedy == "" {
			t.Errorf("%s: heads %v, problems %v", what, fmt.Sprint(hs), problems)
		}
		if s.Readings[0].SetAside == "" || s.Inputs[0].Used != 0 {
			t.Errorf("%s: the jet still counts as used", what)
		}
	}
}
