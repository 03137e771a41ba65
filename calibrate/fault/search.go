package fault

import (
	"math"

	"tapround/calibrate"
)

// Accepted is a cause that the search took in, with all that was set against it.
type Accepted struct {
	Cause
	// T is the drop of Phi that it brings, all other accepted causes kept.
	T float64
	// Probability that this is the cause, over the rivals, "nothing more is wrong"
	// and "none of these".
	Probability float64
	// Class holds the rivals that the readings cannot tell from it, most probable
	// first; empty: it stands alone.
	Class []Rival
	// Others are rivals that fit worse, for the report.
	Others []Rival
	// None is the probability of "none of these".
	None float64
	// Robust is how far a robust fit moves the cause, in its standard uncertainties.
	Robust float64
	// Least is the least T that it keeps when any one reading is left out.
	Least   float64
	leaning int // that reading, -1 none
	// SpreadHolds: it outweighs "nothing more is wrong" with ten times the spread too.
	SpreadHolds bool
	place       int    // of its unknown in the final fit
	id          string // of its finding, once Findings has numbered them
}

// Rival is another cause in the place of an accepted one.
type Rival struct {
	Cause
	T           float64
	Probability float64
	// LnOdds is ln of the accepted cause's posterior odds against it.
	LnOdds float64
	Rho    float64
	Theta  float64
}

// Diagnosis is the outcome of the search.
type Diagnosis struct {
	Model *calibrate.Model
	// Sound is the fit with everything sound; Final the one with the accepted causes.
	Sound, Final *calibrate.Fit
	Accepted     []Accepted
	// Slips of the pen, found before the fit and left out of it.
	Slips []Slip
	// Limit is what |z| of any cause had to pass; Tests how many causes were tested.
	Limit float64
	Tests int
	// Screened holds every cause's z at the sound fit, for the list of hints.
	Causes  []Cause
	Z       []float64
	Caveats []string

	set Settings
	// known keeps trials by the names of their causes: the search comes back to the same
	// sets many times.
	known  map[string]*trial
	losses []calibrate.Loss
}

// Diagnose searches for what is wrong. It moves the model's open priors and leaves
// slips of the pen out of it, so a model belongs to one diagnosis.
func Diagnose(m *calibrate.Model, set Settings) (*Diagnosis, error) {
	found, err := slips(m)
	if err != nil {
		return nil, err
	}
	for _, s := range found {
		for _, i := range s.Obs {
			m.Leave(i)
		}
	}
	sound, err := m.Sound()
	if err != nil {
		return nil, err
	}
	d := &Diagnosis{Slips: found, Model: m, Sound: sound, Final: sound, Causes: Candidates(m, set), set: set}
	if !sound.Converged {
		d.Caveats = append(d.Caveats, "the fit of sound works did not settle ("+sound.Status+"); no cause is named on it")
		return d, nil
	}
	s, err := screen(sound, d.Causes)
	if err != nil {
		return nil, err
	}
	d.Z = s.z
	for _, i := range s.info {
		if i > 0 {
			d.Tests++
		}
	}
	d.Limit = s.limits(d.Causes, set)
	chosen, err := d.forward()
	if err != nil {
		return nil, err
	}
	if chosen, err = d.exchange(chosen); err != nil {
		return nil, err
	}
	if chosen, err = d.backward(chosen); err != nil {
		return nil, err
	}
	return d, d.conclude(chosen)
}

// forward adds the best cause until none passes.
func (d *Diagnosis) forward() ([]Cause, error) {
	var chosen []Cause
	at := d.start()
	for at != nil && len(chosen) < d.set.MostCauses && at.fit.DoF() > 2 {
		c, t, ok, err := d.best(chosen, at)
		if err != nil {
			return nil, err
		}
		if !ok {
			if chosen, at, ok, err = d.pair(chosen, at); err != nil || !ok {
				return chosen, err
			}
			continue
		}
		chosen, at = append(chosen, c), t
	}
	return chosen, nil
}

// pair looks for two causes that only together explain what is left, among the six that
// come nearest alone, where the readings still contradict the works (global test below 1
// per cent). Each of the two must be worth its place once the other is there.
func (d *Diagnosis) pair(chosen []Cause, at *trial) ([]Cause, *trial, bool, error) {
	if p, ok := at.fit.GlobalP(); !ok || p > 0.01 || len(chosen)+2 > d.set.MostCauses {
		return chosen, at, false, nil
	}
	list, err := d.ranked(chosen, at, 2)
	if err != nil {
		return nil, nil, false, err
	}
	limit := d.Limit * d.Limit
	var best *trial
	for i := 0; i < len(list) && i < 6; i++ {
		one := list[i].trial
		if one == nil {
			continue
		}
		more, err := d.ranked(one.causes, one, limit)
		if err != nil {
			return nil, nil, false, err
		}
		for _, r := range more {
			if r.trial == nil || one.free-r.trial.free < limit || at.free-r.trial.free < 2*limit {
				continue
			}
			if r.trial.score() > at.score() && (best == nil || r.trial.score() > best.score()) {
				best = r.trial
			}
		}
	}
	if best == nil {
		return chosen, at, false, nil
	}
	return best.causes, best, true, nil
}

// exchange tries, for each chosen cause, every other in its place, and keeps what
// raises the posterior; until nothing changes.
func (d *Diagnosis) exchange(chosen []Cause) ([]Cause, error) {
	if len(chosen) < 2 {
		return chosen, nil
	}
	at := d.fitOf(chosen)
	for pass := 0; pass < 3 && at != nil; pass++ {
		changed := false
		for i := range chosen {
			rest := without(chosen, i)
			base := d.fitOf(rest)
			if base == nil {
				continue
			}
			c, t, ok, err := d.best(rest, base)
			if err != nil {
				return nil, err
			}
			if ok && t.score() > at.score()+0.5 && !same(c, chosen[i]) {
				chosen, at, changed = append(rest, c), t, true
				break
			}
		}
		if !changed {
			break
		}
	}
	return chosen, nil
}

// backward drops causes that the others have made needless.
func (d *Diagnosis) backward(chosen []Cause) ([]Cause, error) {
	for len(chosen) > 0 {
		full := d.fitOf(chosen)
		if full == nil {
			return chosen, nil
		}
		worst, at := math.Inf(1), -1
		for i := range chosen {
			if t := d.fitOf(without(chosen, i)); t != nil && t.free-full.free < worst {
				worst, at = t.free-full.free, i
			}
		}
		if at < 0 || worst >= d.Limit*d.Limit {
			return chosen, nil
		}
		chosen = without(chosen, at)
	}
	return chosen, nil
}

func without(list []Cause, i int) []Cause {
	out := append([]Cause(nil), list[:i]...)
	return append(out, list[i+1:]...)
}

func same(a, b Cause) bool {
	return a.Kind == b.Kind && a.Item == b.Item && a.Variant == b.Variant && a.reading == b.reading
}
