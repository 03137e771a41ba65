// Package check says what a crew should do something about while it is still at the
// tap. It looks at the tables and the heads alone; nothing is fitted, and no roughness
// or loss coefficient is used.
//
// With nothing flowing, every tap of a system that one reservoir feeds shows one head.
// Such a no-flow round is the best check of gauges and levels there is, so most of what
// follows leans on it. A round, or a part of the system in a round, counts as one only
// where the conditions leave no doubt: one reservoir, no outlet, no machine running and
// no draw-off stated as anything but 0.
//
//	closure     a no-flow round in which a tap, a gauge or the reservoir's level stands
//	            apart from the others (after "readings look exchanged" and "unit looks
//	            wrong" have been tried as explanations)
//	units       a reading far off all others that another unit would bring among them
//	range       readings low on a gauge's scale, near its end, or beyond it
//	repeats     repeats of one reading that lie apart
//	above rest  a flowing head above the no-flow head of the same tap
//	rising      head that rises along the flow in one pipe
//	balance     flow into a metered zone that neither leaves it nor is drawn off
//	too small   a stretch whose loss the gauges cannot see in any round
//	not full    a piezometric line below the pipe, or near the vapour limit
//	clock       a time outside its round
//
// Differences of heads carry their full covariance: an offset of a gauge cancels where
// both were read with it, a wrong level cancels between rounds of one tap.
//
// The limits are customary ones and stand in one table, limits.go. Two standard
// uncertainties are passed by chance once in twenty comparisons where the parts are
// normal, less where a class error dominates; an alert asks for a second look and is no
// verdict.
package check

import (
	"cmp"
	"slices"

	"tapround/survey"
)

// Heads looks at the heads of a survey as they come from survey/head. Alerts that must
// be seen to before the crew leaves come first; otherwise they keep the order of the
// checks above and, within each, of the tables.
func Heads(s *survey.Survey, heads []survey.Head) []survey.Alert {
	v := newView(s, heads, customary)
	var out []survey.Alert
	for _, look := range []func(*view) []survey.Alert{
		closure, strayUnits, workingRange, repeats, aboveRest, rising, balance, tooSmall, notFull, clock,
	} {
		out = append(out, look(v)...)
	}
	slices.SortStableFunc(out, func(a, b survey.Alert) int { return cmp.Compare(rank(a), rank(b)) })
	return out
}

func rank(a survey.Alert) int {
	if a.Stay {
		return 0
	}
	return 1
}
