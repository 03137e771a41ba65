package fault

import (
	"fmt"
	"math"
	"strings"

	"tapround/calibrate"
	"tapround/survey"
	"tapround/survey/unit"
)

// Findings turns the diagnosis into findings, the best supported first, numbered
// F1, F2, ...
func (d *Diagnosis) Findings() []survey.Finding {
	var out []survey.Finding
	for i := range d.Accepted {
		a := &d.Accepted[i]
		if a.Kind == misread {
			continue // named among the readings, see Misreadings
		}
		out = append(out, d.finding(a))
		a.id = fmt.Sprintf("F%d", len(out)) // as numbered below: accepted causes come first
	}
	out = append(out, d.unitFindings()...)
	out = append(out, d.hints()...)
	out = append(out, d.belowAtmosphere()...)
	out = append(out, d.notCovered()...)
	for i := range out {
		out[i].ID = fmt.Sprintf("F%d", i+1)
	}
	return out
}

// lossKind reports whether a kind is a loss of head somewhere on the works.
func lossKind(k survey.FindingKind) bool {
	return k == survey.FouledPipe || k == survey.PartClosedValve || k == survey.BlockedFitting
}

func (d *Diagnosis) finding(a *Accepted) survey.Finding {
	f := survey.Finding{Kind: a.Kind, Item: a.Item, Statistic: a.T, Limit: d.Limit * d.Limit, Probability: survey.Some(a.Probability)}
	d.size(a, &f)
	f.Excess = d.excess(a)
	for _, r := range d.Model.Rounds {
		f.Rounds = append(f.Rounds, r.Name)
	}
	for _, r := range a.Class {
		f.CannotBeToldFrom = append(f.CannotBeToldFrom, r.Name())
	}
	f.Grade = d.grade(a)
	if len(a.Class) > 0 {
		f.Probability = survey.Some(a.whole())
	}
	d.evidence(a, &f)
	doubts := d.doubts(a)
	f.Evidence = append(f.Evidence, doubts...)
	if lossKind(a.Kind) && (len(a.Class) > 0 || len(doubts) > 0) {
		d.open(a, &f)
	}
	d.words(a, &f)
	f.Sources = d.sources(a)
	return f
}

// doubts are the conditions under which a cause must not be named alone, however well it
// fits, with the reason in plain words. (That rivals fit as well is what a class is for.)
func (d *Diagnosis) doubts(a *Accepted) []string {
	var out []string
	if told := d.Final.Told(a.place); told < 0.2 {
		out = append(out, "cannot tell: the readings hardly speak of it, the answer is what was expected before them")
	}
	if a.None > 0.2 {
		out = append(out, fmt.Sprintf("cannot tell: none of the causes looked for may be the one (probability %.0f %%)", 100*a.None))
	}
	if p, ok := d.Final.GlobalP(); ok && p < 0.01 {
		out = append(out, fmt.Sprintf("cannot tell: with all causes named the readings still contradict the works (p = %s)", unit.Significant(p, 1)))
	}
	if a.leaning >= 0 && a.Least < d.Limit*d.Limit/2 {
		h := d.Model.Obs[a.leaning].Head
		out = append(out, fmt.Sprintf("cannot tell: it leans on one reading; without that at %s in round %s the drop is %.1f", h.Tap, h.Round, a.Least))
	}
	if !a.SpreadHolds {
		out = append(out, "cannot tell: with faults taken to be ten times as large by nature it would not outweigh chance")
	}
	if math.Abs(a.Robust) >= 2 {
		out = append(out, fmt.Sprintf("cannot tell: a fit that trusts stray readings less moves it by %.1f standard uncertainties", a.Robust))
	}
	return out
}

// grade: proven asks for all of: beyond the family-wise limit (it was accepted),
// alone, more than nine in ten, a final fit that the readings do not contradict, told
// by the readings rather than the prior, and a verdict that neither a tenfold spread, nor
// leaving any one reading out, nor a robust fit turns round. An open cause is proven as a loss when nothing but its members can
// explain it.
func (d *Diagnosis) grade(a *Accepted) survey.Grade {
	whole := a.whole()
	switch {
	case math.IsNaN(a.Probability):
		return survey.Hint
	case whole > 0.9 && d.Final.Converged && len(d.doubts(a)) == 0 && (len(a.Class) > 0 || d.mixUp(a) < 0.1):
		return survey.Proven
	case whole > 0.5:
		return survey.Likely
	}
	return survey.Hint
}

// whole is the probability that the cause or one of its class is there.
func (a *Accepted) whole() float64 {
	p := a.Probability
	for _, r := range a.Class {
		p += r.Probability
	}
	return math.Min(1, p)
}

// mixUp is the greatest chance that a rival of the same signature won by luck.
func (d *Diagnosis) mixUp(a *Accepted) float64 {
	worst := 0.0
	for _, r := range a.Others {
		if r.LnOdds < 6 {
			worst = math.Max(worst, math.Exp(-r.LnOdds)/(1+math.Exp(-r.LnOdds)))
		}
	}
	return worst
}

// size fills estimate and interval in the item's own quantity.
func (d *Diagnosis) size(a *Accepted, f *survey.Finding) {
	m, fit := d.Model, d.Final
	set := func(v, lo, hi float64, u string) {
		f.Estimate, f.Unit = survey.Some(v), u
		if lo > 0 || !lossKind(a.Kind) { // an end that the readings leave open is not stated
			f.Low = survey.Some(lo)
		}
		if !math.IsInf(hi, 0) {
			f.High = survey.Some(hi)
		}
	}
	theta, sd := fit.Theta(a.place), fit.ThetaSD(a.place)
	switch a.Kind {
	case survey.FouledPipe:
		if a.Unknown.Kind == "group" {
			set(math.Exp(theta), math.Exp(theta-1.96*sd), math.Exp(theta+1.96*sd), "factor")
			f.Expected = survey.Some(1)
			return
		}
		l := m.LinkIndex(a.Item)
		v := fit.LnRough(l)
		lo, hi := d.better(a, v, m.ExpectedLnRough(l))
		law := 1.96 * fit.LawSD(a.place)
		lo, hi = v-math.Hypot(v-lo, law), v+math.Hypot(hi-v, law)
		scale, u := 1e3, "mm"
		if m.Survey.Info.FrictionLaw == survey.HazenWilliams {
			scale, u = 1, "C"
		}
		set(scale*math.Exp(v), scale*math.Exp(lo), scale*math.Exp(hi), u)
		f.Expected = survey.Some(scale * math.Exp(m.ExpectedLnRough(l)))
	case survey.PartClosedValve, survey.BlockedFitting:
		flat := m.FlatFitting(a.Item)
		v := fit.LnKOf(flat)
		lo, hi := d.better(a, v, m.ExpectedLnK(flat))
		set(math.Exp(v), math.Exp(lo), math.Exp(hi), "K")
		f.Expected = survey.Some(math.Exp(m.ExpectedLnK(flat)))
	case survey.GaugeOff:
		g := m.GaugeNamed(a.Item)
		if a.Unknown.Quantity == "gain" {
			set(100*theta, 100*(theta-1.96*sd), 100*(theta+1.96*sd), "%")
			return
		}
		total, s := fit.ItemTheta(a.place)
		u := calibrate.GaugeUnit(g)
		set(u.FromSIDifference(total), u.FromSIDifference(total-1.96*s), u.FromSIDifference(total+1.96*s), g.Unit)
	case survey.LevelWrong:
		if a.Unknown.Kind == "level" {
			// A reservoir's theta is true minus recorded; a level error is
			// recorded minus true.
			set(-theta, -theta-1.96*sd, -theta+1.96*sd, "m")
			return
		}
		total, s := fit.ItemTheta(a.place)
		set(total, total-1.96*s, total+1.96*s, "m")
	case survey.UnrecordedFlow:
		set(1e3*theta, 1e3*(theta-1.96*sd), 1e3*(theta+1.96*sd), "L/s")
	case survey.MachineOffCurve:
		total, s := fit.ItemTheta(a.place)
		set(1+total, 1+total-1.96*s, 1+total+1.96*s, "factor")
		f.Expected = survey.Some(1)
	}
}

// busiest is the round in which a link carries most, and that flow's size.
func (d *Diagnosis) busiest(link int) (round int, flow float64) {
	for r := range d.Model.Rounds {
		if q := math.Abs(d.Final.FlowOf(r, link)); q > flow {
			flow, round = q, r
		}
	}
	return round, flow
}

func (d *Diagnosis) evidence(a *Accepted, f *survey.Finding) {
	f.Evidence = append(f.Evidence, fmt.Sprintf(
		"allowing this cause lowers the sum of squares by %.1f; chance alone reaches %.1f in one sound survey of %s (%d causes tested)",
		a.T, d.Limit*d.Limit, oneIn(d.set.FalseAlarm), d.Tests))
	if math.Abs(a.Robust) > 1 {
		f.Evidence = append(f.Evidence, fmt.Sprintf("a robust fit, which trusts stray readings less, moves it by %.1f standard uncertainties", a.Robust))
	}
	for i, r := range append(append([]Rival(nil), a.Class...), a.Others...) {
		if i >= 4 || r.LnOdds > hopeless {
			break
		}
		word := "fits less well"
		if i < len(a.Class) {
			word = "fits as well"
		}
		f.Rivals = append(f.Rivals, fmt.Sprintf("%s %s: odds %s", strings.ReplaceAll(string(r.Kind), "-", " "), r.Item, oddsWord(r.LnOdds))+" ("+word+")")
	}
	if len(f.Rivals) == 0 {
		f.Rivals = append(f.Rivals, "nothing else that was looked for comes near: the odds against the best rival are over ten thousand to one")
	}
	if a.None > 0.05 {
		f.Rivals = append(f.Rivals, fmt.Sprintf("none of the causes looked for: probability %.0f %%", 100*a.None))
	}
}

// hopeless is the ln odds beyond which a rival is not worth a line: ten thousand to one.
const hopeless = 9.2

func oneIn(rate float64) string { return fmt.Sprintf("%.0f", 1/rate) }

func oddsWord(ln float64) string {
	switch {
	case ln > 0.7:
		return fmt.Sprintf("%.0f to 1 against it", math.Exp(ln))
	case ln > -0.7:
		return "about even"
	}
	return fmt.Sprintf("%.0f to 1 for it", math.Exp(-ln))
}
