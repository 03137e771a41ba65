package say

import (
	"testing"

	"tapround/report"
	"tapround/survey"
)

func some(v float64) survey.Maybe { return survey.Some(v) }

func TestSize(t *testing.T) {
	for _, c := range []struct {
		kind         survey.FindingKind
		v, low, high float64
		unit, want   string
	}{
		{survey.FouledPipe, 9.12, 6.9, 12.1, "mm", "9.1 mm (95 %: 6.9 to 12.1)"},
		{survey.FouledPipe, 64.3, 58.2, 71, "C", "C 64 (95 %: 58 to 71)"},
		{survey.PartClosedValve, 45.2, 31, 66, "K", "K 45 (95 %: 31 to 66)"},
		{survey.GaugeOff, 0.1213, 0.108, 0.134, "bar", "+0.121 bar (95 %: 0.108 to 0.134)"},
		{survey.LevelWrong, -2.38, -2.54, -2.22, "m", "-2.38 m (95 %: -2.54 to -2.22)"},
		{survey.UnrecordedFlow, 4.02, 3.5, 4.5, "L/s", "4.02 L/s (95 %: 3.50 to 4.50)"},
		{survey.MachineOffCurve, 0.894, 0.86, 0.93, "factor", "0.894 times (95 %: 0.860 to 0.930)"},
	} {
		f := survey.Finding{Kind: c.kind, Estimate: some(c.v), Low: some(c.low), High: some(c.high), Unit: c.unit}
		if got := Size(f); got != c.want {
			t.Errorf("%s: %q, want %q", c.kind, got, c.want)
		}
	}
	if got := Size(survey.Finding{Unit: "mm"}); got != "" {
		t.Errorf("no estimate gives %q", got)
	}
	if got := Size(survey.Finding{Estimate: some(1.234), Unit: "mm"}); got != "1.23 mm" {
		t.Errorf("no interval gives %q", got)
	}
}

func TestWhere(t *testing.T) {
	for _, c := range []struct {
		kind survey.FindingKind
		item string
		want string
	}{
		{survey.FouledPipe, "P2", "pipe P2"}, {survey.CauseOpen, "N6..N7", "between N6 and N7"}, {survey.CauseOpen, "N6", "N6"},
		{survey.LevelWrong, "N10", "level of N10"}, {survey.BelowAtmosphere, "P3", "P3"},
	} {
		if got := Where(survey.Finding{Kind: c.kind, Item: c.item}); got != c.want {
			t.Errorf("%s %s is %q, want %q", c.kind, c.item, got, c.want)
		}
	}
}

func TestProbabilityIsNeverCertain(t *testing.T) {
	for v, want := range map[float64]string{1: "over 99 %", 0.9904: "over 99 %", 0.74: "74 %", 0.0099: "under 1 %", 0: "under 1 %"} {
		if got := Probability(some(v)); got != want {
			t.Errorf("%v is %q, want %q", v, got, want)
		}
	}
	if got := Probability(survey.Maybe{}); got != "–" {
		t.Errorf("not known is %q", got)
	}
	for v, want := range map[float64]string{0.54: "54 %", 0.052: "5 %", 0.0004: "0.04 %", 0.00001: "less than 0.01 %"} {
		if got := Chance(v); got != want {
			t.Errorf("chance %v is %q, want %q", v, got, want)
		}
	}
}

func TestStepsCheapestFirst(t *testing.T) {
	fs := []survey.Finding{
		{ID: "F1", Kind: survey.FouledPipe, Advice: "dig"},
		{ID: "F2", Kind: survey.CauseOpen, Advice: "decide", Settle: "read"},
		{ID: "F3", Kind: survey.GaugeOff, Advice: "bench"},
		{ID: "F4", Kind: survey.PartClosedValve, Advice: "turn"},
		{ID: "F5", Kind: survey.NotCovered},
	}
	got := ""
	for _, s := range Steps(fs) {
		got += s.Finding + " " + s.Text + "; "
	}
	if want := "F2 read; F3 bench; F4 turn; F1 dig; "; got != want {
		t.Errorf("%q, want %q", got, want)
	}
	if fs[0].ID != "F1" {
		t.Error("the caller's findings were moved")
	}
}

func TestWorst(t *testing.T) {
	row := func(from, to, round string, excess, p float64) report.LossRow {
		return report.LossRow{FromTap: from, ToTap: to, Round: round, Excess: some(excess), Probability: some(p)}
	}
	worst, rest := Worst([]report.LossRow{row("a", "b", "1", 1, 0.99), row("b", "c", "1", 2, 0.99), row("a", "b", "2", 3, 0.99), row("c", "d", "2", 9, 0.5),
		row("d", "e", "1", -1, 1)}, 6)
	if len(worst) != 2 || worst[0].Round != "2" || worst[0].FromTap != "a" || worst[1].FromTap != "b" || rest != 2 {
		t.Errorf("%v, %d others", worst, rest)
	}
	if worst, _ := Worst(nil, 3); len(worst) != 0 {
		t.Error("something from nothing")
	}
}

func TestAgreement(t *testing.T) {
	if s := Agreement(report.FitFacts{Readings: 58, P: some(0.54), SoundP: some(0), ChiSquare: 40, SoundChi: 400}); s != "With the causes named, the 58 readings and the works agree within their uncertainties: chance alone would make differences as large in 54 % of such surveys. With everything sound it would be less than 0.01 %." {
		t.Error(s)
	}
	if s := Agreement(report.FitFacts{Readings: 58, P: some(0.0001)}); s != "With the causes named, the 58 readings and the works still differ by more than their uncertainties allow; something is not explained: chance alone would make differences as large in 0.01 % of such surveys." {
		t.Error(s)
	}
	if s := Agreement(report.FitFacts{Readings: 9, P: some(0.7), SoundP: some(0.7), ChiSquare: 7, SoundChi: 7}); s != "With everything sound, the 9 readings and the works agree within their uncertainties: chance alone would make differences as large in 70 % of such surveys." {
		t.Error(s)
	}
	if s := Agreement(report.FitFacts{}); s != "There are no more readings than unknowns, so nothing can be checked against anything." {
		t.Error(s)
	}
}

func TestCleanAndLines(t *testing.T) {
	if got := Clean("a\nb\x1b[1m\x07c\u202e\xff"); got != "a b[1mc?" {
		t.Errorf("%q", got)
	}
	if got := Lines([]int{9, 3, 4, 5, 12, 13}); got != "3-5, 9, 12-13" {
		t.Errorf("%q", got)
	}
	if got := Decimals(some(-0.004), 2); got != "0.00" {
		t.Errorf("%q", got)
	}
	for in, want := range map[string]string{"part-closed-valve:SV-031": "valve SV-031 part closed", "unrecorded-flow:N7": "unrecorded flow at N7", "unit-suspect:G1": "unit in doubt G1", "x": "x"} {
		if got := Rival(in); got != want {
			t.Errorf("%q is %q, want %q", in, got, want)
		}
	}
	for v, want := range map[float64]string{0.3: "0.3", 0.05: "0.05", 1.5: "1.5", 100: "100", 0.15000000000000002: "0.15", 12.3456: "12.35", 0: "0"} {
		if got := Stated(v); got != want {
			t.Errorf("%v is stated %q, want %q", v, got, want)
		}
	}
}

func TestMoney(t *testing.T) {
	c := report.Cost{Money: some(13250), Currency: "GBP", Energy: some(55200 * 3.6e6), Basis: "6.2 m at 80 L/s"}
	if got := Money(c); got != "13000 GBP a year, 55 MWh a year (6.2 m at 80 L/s)" {
		t.Errorf("%q", got)
	}
}

func TestCost(t *testing.T) {
	ex := []survey.AtRound{{Round: "A", Value: -0.1}, {Round: "E", Value: 6.24}}
	if got := Cost(survey.Finding{Kind: survey.FouledPipe, Excess: ex}); got != "6.2 m in E" {
		t.Errorf("%q", got)
	}
	// What a wrong level does to the heads costs nobody anything.
	if got := Cost(survey.Finding{Kind: survey.LevelWrong, Excess: ex}); got != "" {
		t.Errorf("%q", got)
	}
}

func TestCautions(t *testing.T) {
	got := Cautions([]string{"a", "Local codes and licensed practice decide.", "b"})
	if len(got) != 3 || got[1] != "b" || got[2] != "Local codes and licensed practice decide." {
		t.Errorf("%q", got)
	}
}

func TestPlaces(t *testing.T) {
	at := func(f string, l int) survey.Source { return survey.Source{File: f, Line: l} }
	got := Places([]survey.Source{at("a.csv", 3), at("b.csv", 2), at("a.csv", 4), at("c.csv", 0), at("a.csv", 9)})
	if got != "a.csv lines 3-4, 9; b.csv line 2; c.csv" {
		t.Errorf("%q", got)
	}
}
