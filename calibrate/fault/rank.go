package fault

import (
	"math"
	"sort"

	"tapround/calibrate"
)

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
