package say

import (
	"sort"
	"strings"

	"tapround/report"
	"tapround/survey"
)

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

// Cautions gives them in their order, but what defers to local codes last, where it
// holds for all of them.
func Cautions(cs []string) []string {
	var out, last []string
	for _, c := range cs {
		if strings.HasPrefix(c, "Local codes") {
			last = append(last, Clean(c))
		} else {
			out = append(out, Clean(c))
		}
	}
	return append(out, last...)
}
