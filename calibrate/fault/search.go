package fault

import (
	"fmt"
	"math"
	"sort"
	"strings"

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

// trial is one refit with a set of causes.
type trial struct {
	fit *calibrate.Fit
	// evidence is ln p(readings | causes) up to a constant that all trials share:
	// -Phi/2 - ln det/2, plus ln 2 for each one-sided cause, whose prior lives on
	// one side only [Kass, Laplace approximation].
	evidence float64
	causes   []Cause
	prior    float64 // ln of the causes' prior odds
	free     float64 // Phi without the causes' own prior rows
}

func (t *trial) score() float64 { return t.evidence + t.prior }

// try refits with the causes given, started from U of an earlier fit with the
// last cause at theta. Nil where the works cannot be solved or the last cause comes
// out on the wrong side.
func (d *Diagnosis) try(causes []Cause, start []float64, theta float64) *trial {
	u := append([]float64(nil), start...)
	unknowns := make([]calibrate.Unknown, len(causes))
	t := &trial{causes: append([]Cause(nil), causes...)}
	for i, c := range causes {
		unknowns[i] = c.Unknown
		t.prior += math.Log(c.Prior / (1 - c.Prior))
	}
	if len(causes) > 0 && len(u) == len(d.Model.Unknowns)+len(causes)-1 {
		u = append(u, theta/unknowns[len(causes)-1].SD)
	}
	f, err := d.Model.Refit(unknowns, calibrate.Options{Start: u})
	if err != nil || !f.Converged {
		return nil
	}
	t.fit = f
	t.evidence = -f.Phi/2 - f.LnDet()/2
	t.free = f.Phi
	base := len(d.Model.Unknowns)
	for i, c := range causes {
		t.free -= f.U[base+i] * f.U[base+i]
		if c.Unknown.Sign != 0 {
			t.evidence += math.Ln2
			if f.U[base+i]*float64(c.Unknown.Sign) <= 0 {
				return nil
			}
		}
	}
	if d.known == nil {
		d.known = map[string]*trial{}
	}
	d.known[key(causes)] = t
	return t
}

// key names a set of causes whatever their order.
func key(causes []Cause) string {
	names := make([]string, len(causes))
	for i, c := range causes {
		names[i] = fmt.Sprintf("%s %s %d", c.Name(), c.Variant, c.reading)
	}
	sort.Strings(names)
	return strings.Join(names, "|")
}

// best finds the cause that, added to those chosen, has the greatest posterior
// odds, among those whose likelihood ratio passes the limit. ok is false where
// none does.
func (d *Diagnosis) best(chosen []Cause, at *trial) (Cause, *trial, bool, error) {
	list, err := d.ranked(chosen, at, d.Limit*d.Limit*0.6)
	if err != nil {
		return Cause{}, nil, false, err
	}
	var top Cause
	var topTrial *trial
	for _, r := range list {
		if r.trial == nil || at.free-r.trial.free < d.Limit*d.Limit {
			continue
		}
		if topTrial == nil || r.trial.score() > topTrial.score() {
			top, topTrial = r.cause, r.trial
		}
	}
	// The odds must favour the cause over nothing more being wrong.
	if topTrial == nil || topTrial.score() < at.score() {
		return Cause{}, nil, false, nil
	}
	return top, topTrial, true, nil
}

type ranked struct {
	cause Cause
	index int
	scan  float64 // drop of Phi by the scan
	trial *trial
}

// mostRefits bounds how many causes are refitted exactly in one step: the scan
// follows each cause's own curvature, so that the best stand well inside it.
const mostRefits = 16

// ranked scans every cause that is not yet chosen and refits the best of those whose
// scanned drop of Phi passes least.
func (d *Diagnosis) ranked(chosen []Cause, at *trial, least float64) ([]ranked, error) {
	s, err := screen(at.fit, d.Causes)
	if err != nil {
		return nil, err
	}
	// Linearised at the estimate, Phi with a cause at zero is the scan's own
	// reference, so that drops are compared like with like.
	zero, err := at.fit.Profiled(nil, nil)
	if err != nil {
		return nil, err
	}
	var list []ranked
	thetas := map[int]float64{}
	for i, c := range d.Causes {
		if s.info[i] == 0 || has(chosen, c) {
			continue
		}
		if s.passes(i, c.Unknown.Sign) == 0 {
			continue
		}
		drop, theta := s.z[i]*s.z[i], s.size[i]
		if c.Unknown.Log {
			drop = 0
			for _, g := range guess(d.Model, at.fit, c, math.Abs(s.size[i])) {
				if phi, err := at.fit.Profiled([]calibrate.Unknown{c.Unknown}, []float64{g}); err == nil && zero-phi > drop {
					drop, theta = zero-phi, g
				}
			}
			drop = math.Max(drop, 0.5*s.z[i]*s.z[i])
		}
		if drop >= least {
			list = append(list, ranked{cause: c, index: i, scan: drop})
			thetas[i] = theta
		}
	}
	sort.SliceStable(list, func(a, b int) bool { return list[a].scan > list[b].scan })
	if len(list) > mostRefits {
		list = list[:mostRefits]
	}
	for i := range list {
		next := append(append([]Cause(nil), chosen...), list[i].cause)
		list[i].trial = d.try(next, at.fit.U, thetas[list[i].index])
	}
	return list, nil
}

func has(list []Cause, c Cause) bool {
	for _, x := range list {
		if x.Kind == c.Kind && x.Item == c.Item && (x.reading == c.reading) {
			return true
		}
	}
	return false
}

func (d *Diagnosis) start() *trial {
	if t := d.known[""]; t != nil {
		return t
	}
	return d.try(nil, d.Sound.U, 0)
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

// fitOf refits a set of causes: it is taken from the trials already made, or started from
// one with one cause more, or built up from the sound estimate cause by cause.
func (d *Diagnosis) fitOf(causes []Cause) *trial {
	if t := d.known[key(causes)]; t != nil {
		return d.ordered(t, causes)
	}
	if t := d.fromLarger(causes); t != nil {
		return t
	}
	t := d.start()
	for i := range causes {
		if t == nil {
			return nil
		}
		s, err := screen(t.fit, causes[i:i+1])
		if err != nil {
			return nil
		}
		theta := s.size[0]
		if causes[i].Unknown.Log {
			best := math.Inf(1)
			for _, g := range guess(d.Model, t.fit, causes[i], math.Abs(s.size[0])) {
				if phi, err := t.fit.Profiled([]calibrate.Unknown{causes[i].Unknown}, []float64{g}); err == nil && phi < best {
					best, theta = phi, g
				}
			}
		}
		t = d.try(causes[:i+1], t.fit.U, theta)
	}
	return t
}

// ordered gives a known trial with its causes in the order asked for, since the place of
// a cause in the fit follows it.
func (d *Diagnosis) ordered(t *trial, causes []Cause) *trial {
	for i := range causes {
		if !same(t.causes[i], causes[i]) {
			return d.try(causes, d.reorder(t, causes), 0)
		}
	}
	return t
}

// reorder lays the estimate of a trial out for another list of causes, all of them in it.
func (d *Diagnosis) reorder(t *trial, causes []Cause) []float64 {
	base := len(d.Model.Unknowns)
	u := append([]float64(nil), t.fit.U[:base]...)
	for _, c := range causes {
		for i, x := range t.causes {
			if same(c, x) {
				u = append(u, t.fit.U[base+i])
			}
		}
	}
	return u
}

// fromLarger starts from a known trial that has all of these causes and one more.
func (d *Diagnosis) fromLarger(causes []Cause) *trial {
	if len(causes) == 0 {
		return nil
	}
	for _, k := range d.keys() {
		t := d.known[k]
		if len(t.causes) != len(causes)+1 {
			continue
		}
		all := true
		for _, c := range causes {
			all = all && holds(t.causes, c)
		}
		if all {
			return d.try(causes, d.reorder(t, causes), 0)
		}
	}
	return nil
}

// keys in order, so that every run takes the same way.
func (d *Diagnosis) keys() []string {
	out := make([]string, 0, len(d.known))
	for k := range d.known {
		out = append(out, k)
	}
	sort.Strings(out)
	return out
}

func holds(list []Cause, c Cause) bool {
	for _, x := range list {
		if same(x, c) {
			return true
		}
	}
	return false
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
