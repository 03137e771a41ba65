package fault

import (
	"math"
	"sort"

	"tapround/calibrate"
)

// liveOdds is the ln posterior odds beyond which a rival no longer counts as a
// cause that could stand in the place of the accepted one: 20 to 1.
const liveOdds = 3.0

// conclude makes the final fit and sets each accepted cause against its rivals.
func (d *Diagnosis) conclude(chosen []Cause) error {
	if len(chosen) == 0 {
		d.Caveats = append(d.Caveats, d.predictionCaveats()...)
		return nil
	}
	start := d.fitOf(chosen)
	if start == nil {
		d.Caveats = append(d.Caveats, "the fit with the accepted causes did not settle; no cause is named on it")
		return nil
	}
	unknowns := make([]calibrate.Unknown, len(chosen))
	for i, c := range chosen {
		unknowns[i] = c.Unknown
	}
	final, err := d.Model.Fit(unknowns, calibrate.Options{Start: start.fit.U, FreeCauses: true})
	if err != nil {
		return err
	}
	d.Final = final
	if !final.Converged {
		d.Caveats = append(d.Caveats, "the last fit did not settle ("+final.Status+"); its numbers are not to be used")
	}
	for i, c := range chosen {
		a := Accepted{Cause: c, place: len(d.Model.Unknowns) + i}
		if err := d.compare(&a, without(chosen, i)); err != nil {
			return err
		}
		d.Accepted = append(d.Accepted, a)
	}
	d.Caveats = append(d.Caveats, d.predictionCaveats()...)
	for i, move := range d.robustMove() {
		d.Accepted[i].Robust = move
	}
	sort.SliceStable(d.Accepted, func(i, j int) bool { return d.Accepted[i].T > d.Accepted[j].T })
	return nil
}

// compare fills the class, the rivals and the probability of an accepted cause,
// the other accepted ones being kept.
func (d *Diagnosis) compare(a *Accepted, rest []Cause) error {
	base := d.fitOf(rest)
	if base == nil {
		a.Probability = math.NaN()
		return nil
	}
	list, err := d.ranked(rest, base, 0)
	if err != nil {
		return err
	}
	s, err := screen(base.fit, d.Causes)
	if err != nil {
		return err
	}
	own := d.indexOf(a.Cause)
	var mine *trial
	for _, r := range list {
		if same(r.cause, a.Cause) {
			mine = r.trial
		}
	}
	if mine == nil {
		if mine = d.fitOf(append(append([]Cause(nil), rest...), a.Cause)); mine == nil {
			a.Probability = math.NaN()
			return nil
		}
	}
	a.T = base.free - mine.free
	// Posterior over: nothing more, none of these, the cause, every rival.
	top := mine.score()
	for _, r := range list {
		if r.trial != nil {
			top = math.Max(top, r.trial.score())
		}
	}
	sum := math.Exp(base.score()-top) + math.Exp(d.noneOf(base)-top) + math.Exp(mine.score()-top)
	for _, r := range list {
		if r.trial != nil && !same(r.cause, a.Cause) {
			sum += math.Exp(r.trial.score() - top)
		}
	}
	a.Probability = math.Exp(mine.score()-top) / sum
	a.None = math.Exp(d.noneOf(base)-top) / sum
	for _, r := range list {
		if r.trial == nil || same(r.cause, a.Cause) {
			continue
		}
		v := Rival{Cause: r.cause, T: base.free - r.trial.free, LnOdds: mine.score() - r.trial.score(),
			Probability: math.Exp(r.trial.score()-top) / sum, Rho: s.rho(own, r.index)}
		v.Theta = r.trial.fit.Theta(len(r.trial.fit.U) - 1)
		if v.LnOdds < liveOdds && v.T > 0.5*a.T && r.cause.Item != a.Item {
			a.Class = append(a.Class, v)
		} else {
			a.Others = append(a.Others, v)
		}
	}
	a.Least, a.leaning = d.weakest(a, base.fit)
	// Ten times the spread takes ln 10 from the evidence of any cause whose size the
	// readings tell: nothing more being wrong gains by that.
	wide := math.Exp(mine.score()-math.Ln10-top) / (math.Exp(base.score()-top) + math.Exp(mine.score()-math.Ln10-top))
	a.SpreadHolds = wide > 0.5
	byOdds := func(l []Rival) { sort.SliceStable(l, func(i, j int) bool { return l[i].LnOdds < l[j].LnOdds }) }
	byOdds(a.Class)
	byOdds(a.Others)
	return nil
}

func (d *Diagnosis) indexOf(c Cause) int {
	for i, x := range d.Causes {
		if same(x, c) {
			return i
		}
	}
	return -1
}

// noneOf is the score of "none of these": every uncertainty three times as large,
// for which ln p changes by +4/9 Phi - n ln 3, with a prior probability of 1 %.
func (d *Diagnosis) noneOf(base *trial) float64 {
	n := float64(len(d.Model.Obs))
	return base.evidence + base.fit.Phi*4/9 - n*math.Log(3) + base.prior + math.Log(0.01)
}
