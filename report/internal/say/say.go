// Package say has the words and roundings that the terminal and the page share, so
// that one finding is never told in two ways. It computes nothing: it names,
// rounds to the uncertainty, and puts units beside numbers.
//
// ± is one standard uncertainty; an interval is the 95 % one and says so.
package say

import (
	"fmt"
	"math"
	"sort"
	"strings"
	"unicode"

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

// Stated prints a number as a table states it: no figures it does not need, four at
// most.
func Stated(v float64) string {
	s := unit.Significant(v, 4)
	if strings.Contains(s, ".") {
		s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	}
	return s
}

// Size is the estimate with its 95 % interval, rounded to the nearer end's
// distance. Empty: no estimate.
func Size(f survey.Finding) string {
	if !f.Estimate.OK {
		return ""
	}
	s := Quantity(Interval(f.Estimate, f.Low, f.High), f.Unit)
	if f.Estimate.V > 0 && (f.Kind == survey.GaugeOff || f.Kind == survey.LevelWrong) {
		return "+" + s // an error has a sign
	}
	return s
}

// Quantity puts a unit beside a printed number: "9.1 mm (6.9 to 12.1)", "K 45",
// "C 64", "0.99 times".
func Quantity(number, u string) string {
	switch u {
	case "":
		return number
	case "K", "C":
		return u + " " + number
	case "factor":
		u = "times"
	}
	u = Clean(u)
	// The unit stands after the value and before the interval in brackets.
	if v, rest, ok := strings.Cut(number, " ("); ok {
		return v + " " + u + " (" + rest
	}
	return number + " " + u
}

// Interval is "9.1 (95 %: 6.9 to 12.1)", all three rounded alike; without an
// interval the value alone with three figures.
func Interval(v, low, high survey.Maybe) string {
	if !v.OK {
		return "not determined"
	}
	if !low.OK || !high.OK {
		return unit.Significant(v.V, 3)
	}
	sd := Spread(v, low, high)
	return fmt.Sprintf("%s (95 %%: %s to %s)", Rounded(v.V, sd), Rounded(low.V, sd), Rounded(high.V, sd))
}

// Spread is what an interval is rounded by: the nearer end's distance over 1.96.
func Spread(v, low, high survey.Maybe) float64 {
	return math.Min(math.Abs(v.V-low.V), math.Abs(high.V-v.V)) / 1.96
}

// Rounded is v alone, rounded as its uncertainty asks.
func Rounded(v, sd float64) string {
	s, _, _ := strings.Cut(unit.WithUncertainty(v, sd), " ±")
	return s
}

// Maybe is a stated number with the figures asked for, or a dash.
func Maybe(m survey.Maybe, digits int) string {
	if !m.OK {
		return "–"
	}
	return unit.Significant(m.V, digits)
}

// Decimals is a stated number with a fixed number of decimals, for columns, or a
// dash.
func Decimals(m survey.Maybe, n int) string {
	if !m.OK {
		return "–"
	}
	s := fmt.Sprintf("%.*f", n, m.V)
	if strings.Trim(s, "-0.") == "" {
		s = strings.TrimPrefix(s, "-")
	}
	return s
}

// Probability never says certain.
func Probability(m survey.Maybe) string {
	switch {
	case !m.OK:
		return "–"
	case m.V > 0.99:
		return "over 99 %"
	case m.V < 0.01:
		return "under 1 %"
	}
	return fmt.Sprintf("%.0f %%", 100*m.V)
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

// Share is a fraction in per cent, as the share told by the survey.
func Share(m survey.Maybe) string {
	if !m.OK {
		return "–"
	}
	return fmt.Sprintf("%.0f %%", 100*m.V)
}

// Cost is the head a finding costs where it costs most: "6.2 m in E"; empty: none.
func Cost(f survey.Finding) string {
	m := f.LargestExcess()
	if !m.OK || m.V == 0 {
		return ""
	}
	for _, e := range f.Excess {
		if e.Value == m.V {
			return unit.Significant(m.V, 2) + " m in " + Clean(e.Round)
		}
	}
	return ""
}

// Split parts findings into those to act on, hints, and items that could not be
// seen, each in their order.
func Split(fs []survey.Finding) (found, hints, unseen []survey.Finding) {
	for _, f := range fs {
		switch {
		case f.Kind == survey.NotCovered:
			unseen = append(unseen, f)
		case f.Grade == survey.Hint:
			hints = append(hints, f)
		default:
			found = append(found, f)
		}
	}
	return found, hints, unseen
}

// effort orders what to do by what it customarily takes (judgement): a reading, a
// valve, a bench check, a look, a machine test, an excavation.
func effort(f survey.Finding) int {
	switch {
	case f.Settle != "":
		return 0
	case f.Kind == survey.UnitSuspect:
		return 1
	case f.Kind == survey.LevelWrong, f.Kind == survey.GaugeOff:
		return 2
	case f.Kind == survey.PartClosedValve:
		return 3
	case f.Kind == survey.UnrecordedFlow, f.Kind == survey.BelowAtmosphere:
		return 4
	case f.Kind == survey.BlockedFitting, f.Kind == survey.MachineOffCurve:
		return 5
	}
	return 6
}

// Step is one thing to do, for the finding it answers.
type Step struct {
	Finding string
	Text    string
}

// Steps lists what to do, the customarily cheapest first: a finding that a reading
// would settle asks for that reading before its advice.
func Steps(found []survey.Finding) []Step {
	order := append([]survey.Finding(nil), found...)
	sort.SliceStable(order, func(i, j int) bool { return effort(order[i]) < effort(order[j]) })
	var out []Step
	for _, f := range order {
		if f.Settle != "" {
			out = append(out, Step{f.ID, Clean(f.Settle)})
		} else if f.Advice != "" {
			out = append(out, Step{f.ID, Clean(f.Advice)})
		}
	}
	return out
}

// Agreement says in plain words how well the readings and the fitted works agree.
func Agreement(f report.FitFacts) string {
	if !f.P.OK {
		return "There are no more readings than unknowns, so nothing can be checked against anything."
	}
	s := "With the causes named, the " + Plural(f.Readings, "reading", "readings") + " and the works agree within their uncertainties"
	if f.P.V < 0.01 {
		s = "With the causes named, the " + Plural(f.Readings, "reading", "readings") + " and the works still differ by more than their uncertainties allow; something is not explained"
	}
	s += ": chance alone would make differences as large in " + Chance(f.P.V) + " of such surveys."
	if f.SoundP.OK {
		s += " With everything sound it would be " + Chance(f.SoundP.V) + "."
	}
	return s
}

// Chance is a small probability in per cent.
func Chance(p float64) string {
	switch {
	case p < 0.0001:
		return "less than 0.01 %"
	case p < 0.1:
		return unit.Significant(100*p, 1) + " %"
	}
	return fmt.Sprintf("%.0f %%", 100*p)
}

// sureLoss is how probable it must be that a stretch loses more than sound works
// before it is listed as one that does.
const sureLoss = 0.95

// Worst picks, of the stretches that surely lose more than sound works, each in the
// round with its greatest excess, the n greatest in order; rest is how many other
// stretches there are.
func Worst(rows []report.LossRow, n int) (worst []report.LossRow, rest int) {
	place := map[[2]string]int{}
	all := map[[2]string]bool{}
	for _, l := range rows {
		k := [2]string{l.FromTap, l.ToTap}
		all[k] = true
		if !l.Excess.OK || l.Excess.V <= 0 || (l.Probability.OK && l.Probability.V < sureLoss) {
			continue
		}
		i, seen := place[k]
		switch {
		case !seen:
			place[k] = len(worst)
			worst = append(worst, l)
		case l.Excess.V > worst[i].Excess.V:
			worst[i] = l
		}
	}
	rest = len(all) - len(worst)
	sort.SliceStable(worst, func(i, j int) bool { return worst[i].Excess.V > worst[j].Excess.V })
	return worst[:min(n, len(worst))], rest
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

// By prints m rounded as the uncertainty u asks, without it.
func By(m, u survey.Maybe) string {
	if !m.OK {
		return "–"
	}
	if !u.OK {
		return unit.Significant(m.V, 3)
	}
	return Rounded(m.V, u.V)
}

// With prints m ± u.
func With(m, u survey.Maybe) string {
	if !m.OK {
		return "–"
	}
	return unit.WithUncertainty(m.V, u.Or(math.NaN()))
}

// Clean makes a text one printable line: a name from a table may hold an escape
// sequence for the terminal, a line end, or what XML and so SVG forbid.
func Clean(s string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r == '\n' || r == '\r' || r == '\t':
			return ' '
		case unicode.IsControl(r) || r == unicode.ReplacementChar || r == 0xFFFE || r == 0xFFFF || isTurn(r):
			return -1
		}
		return r
	}, strings.ToValidUTF8(s, "?"))
}

// isTurn: marks that turn the direction of writing can make a line read as another.
func isTurn(r rune) bool { return (r >= 0x202a && r <= 0x202e) || (r >= 0x2066 && r <= 0x2069) }

// Plural puts a number before its word.
func Plural(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}

// Lines shortens a list of line numbers: "3-5, 9".
func Lines(ns []int) string {
	sort.Ints(ns)
	var out []string
	for i := 0; i < len(ns); {
		j := i
		for j+1 < len(ns) && ns[j+1] <= ns[j]+1 {
			j++
		}
		if ns[j] > ns[i] {
			out = append(out, fmt.Sprintf("%d-%d", ns[i], ns[j]))
		} else {
			out = append(out, fmt.Sprint(ns[i]))
		}
		i = j + 1
	}
	return strings.Join(out, ", ")
}
