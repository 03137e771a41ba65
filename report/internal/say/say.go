// Package say has the words and roundings that the terminal and the page share, so
// that one finding is never told in two ways. It computes nothing: it names,
// rounds to the uncertainty, and puts units beside numbers.
//
// ± is one standard uncertainty; an interval is the 95 % one and says so.
package say

import (
	"strings"

	"tapround/report"
	"tapround/survey"
	"tapround/survey/unit"
)

// Kind is the plain name of a kind of finding.
func Kind(k survey.FindingKind) string {
	switch k {
	case survey.PartClosedValve:
		return "part-closed valve"
	case survey.MachineOffCurve:
		return "machine off its curve"
	case survey.CauseOpen:
		return "loss with its cause open"
	case survey.UnitSuspect:
		return "unit in doubt"
	case survey.NotCovered:
		return "not seen"
	}
	return strings.ReplaceAll(Clean(string(k)), "-", " ")
}

// Where names the thing a finding is about, with its noun.
func Where(f survey.Finding) string {
	item := Clean(f.Item)
	switch f.Kind {
	case survey.FouledPipe:
		return "pipe " + item
	case survey.PartClosedValve:
		return "valve " + item
	case survey.BlockedFitting:
		return "fitting " + item
	case survey.GaugeOff, survey.UnitSuspect:
		return "gauge " + item
	case survey.LevelWrong:
		return "level of " + item
	case survey.MachineOffCurve:
		return "machine " + item
	case survey.UnrecordedFlow:
		return "at " + item
	case survey.CauseOpen:
		if a, b, ok := strings.Cut(item, ".."); ok {
			return "between " + a + " and " + b
		}
	}
	return item
}

// Rival turns "kind:item" into words.
func Rival(s string) string {
	kind, item, ok := strings.Cut(s, ":")
	if !ok {
		return Clean(s)
	}
	item = Clean(item)
	switch survey.FindingKind(kind) {
	case survey.FouledPipe:
		return "pipe " + item + " fouled"
	case survey.PartClosedValve:
		return "valve " + item + " part closed"
	case survey.BlockedFitting:
		return "fitting " + item + " blocked"
	case survey.GaugeOff:
		return "gauge " + item + " off"
	case survey.LevelWrong:
		return "level of " + item + " wrong"
	case survey.UnrecordedFlow:
		return "unrecorded flow at " + item
	case survey.MachineOffCurve:
		return "machine " + item + " off its curve"
	}
	return Kind(survey.FindingKind(kind)) + " " + item
}

// Sure says how sure a finding is, in words and in number.
func Sure(f survey.Finding) string {
	s := Clean(string(f.Grade))
	if f.Probability.OK {
		s += ", probability " + Probability(f.Probability)
	}
	if f.Kind == survey.CauseOpen {
		s += " for the loss; its cause is open"
	}
	return s
}

// Agreement says in plain words how well the readings and the fitted works agree.
func Agreement(f report.FitFacts) string {
	if !f.P.OK {
		return "There are no more readings than unknowns, so nothing can be checked against anything."
	}
	// Where no cause was allowed the last fit is that of sound works.
	sound := f.SoundP.OK && f.ChiSquare == f.SoundChi
	with, still := "With the causes named", " still"
	if sound {
		with, still = "With everything sound", ""
	}
	s := with + ", the " + Plural(f.Readings, "reading", "readings") + " and the works agree within their uncertainties"
	if f.P.V < 0.01 {
		s = with + ", the " + Plural(f.Readings, "reading", "readings") + " and the works" + still + " differ by more than their uncertainties allow; something is not explained"
	}
	s += ": chance alone would make differences as large in " + Chance(f.P.V) + " of such surveys."
	if f.SoundP.OK && !sound {
		s += " With everything sound it would be " + Chance(f.SoundP.V) + "."
	}
	return s
}

// Money is a cost in words, with what it was reckoned from.
func Money(c report.Cost) string {
	var parts []string
	if c.Money.OK {
		parts = append(parts, unit.Significant(c.Money.V, 2)+" "+Clean(c.Currency)+" a year")
	}
	if c.Energy.OK {
		parts = append(parts, unit.Significant(c.Energy.V/3.6e9, 2)+" MWh a year")
	}
	s := strings.Join(parts, ", ")
	if c.Basis != "" {
		s += " (" + Clean(c.Basis) + ")"
	}
	return s
}

// LosesHead reports whether a finding is about head that is lost; the excess of the
// other kinds is what an error does to the readings, which costs nobody anything.
func LosesHead(k survey.FindingKind) bool {
	switch k {
	case survey.FouledPipe, survey.PartClosedValve, survey.BlockedFitting, survey.MachineOffCurve, survey.CauseOpen:
		return true
	}
	return false
}

// Cost is the head a finding costs where it costs most: "6.2 m in E"; empty: none.
func Cost(f survey.Finding) string {
	m := f.LargestExcess()
	if !m.OK || m.V == 0 || !LosesHead(f.Kind) {
		return ""
	}
	for _, e := range f.Excess {
		if e.Value == m.V {
			return unit.Significant(m.V, 2) + " m in " + Clean(e.Round)
		}
	}
	return ""
}
