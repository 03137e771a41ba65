package fault

import (
	"math"
	"sort"

	"tapround/calibrate"
	"tapround/survey"
)

// excess is the head that a cause costs in each round, m: fitted minus expected
// loss of the item at the fitted flow, in the flow's direction; for a gauge or a
// level what it falsifies the head by.
func (d *Diagnosis) excess(a *Accepted) []survey.AtRound {
	var out []survey.AtRound
	for r, round := range d.Model.Rounds {
		v := math.NaN()
		switch a.Kind {
		case survey.FouledPipe, survey.PartClosedValve, survey.BlockedFitting:
			v = d.Final.ItemExcess(r, a.Unknown.Kind, a.Item)
		case survey.LevelWrong:
			v = d.Final.Theta(a.place)
		case survey.GaugeOff:
			if g := d.Model.GaugeNamed(a.Item); g.Kind != survey.FlowMeter && a.Unknown.Quantity == "offset" {
				v = d.Final.Theta(a.place) / (round.Density * d.Final.Conditions(r).Gravity)
			}
		}
		if !math.IsNaN(v) {
			out = append(out, survey.AtRound{Round: round.Name, Value: v})
		}
	}
	return out
}

// open turns a finding into an open cause between the taps around it.
func (d *Diagnosis) open(a *Accepted, f *survey.Finding) {
	f.CannotBeToldFrom = append([]string{a.Name()}, f.CannotBeToldFrom...)
	f.Kind = survey.CauseOpen
	from, to := d.around(a)
	f.Item = from + ".." + to
	// The item's own quantity has no meaning for a class: what is determined is
	// the head it costs.
	f.Expected, f.Unit = survey.Maybe{}, "m"
	most := f.LargestExcess()
	f.Estimate, f.Low, f.High = most, survey.Maybe{}, survey.Maybe{}
	if most.OK {
		// Relative uncertainty of the excess head from the statistic: z = size/SD.
		sd := math.Abs(most.V) / math.Sqrt(math.Max(1, a.T))
		f.Low, f.High = survey.Some(most.V-1.96*sd), survey.Some(most.V+1.96*sd)
	}
}

// lossView is the loss view of the final fit, made once.
func (d *Diagnosis) lossView() []calibrate.Loss {
	if d.losses == nil {
		d.losses = d.Final.Losses()
	}
	return d.losses
}

// around names the taps next to the members of a class, or the ends of the pipe
// where no tap stands beyond.
func (d *Diagnosis) around(a *Accepted) (from, to string) {
	pipe := d.pipeOf(a.Cause)
	best, hits := calibrate.Loss{}, 0
	for _, l := range d.lossView() {
		n := 0
		for _, it := range l.Items {
			if it == a.Item {
				n += 10
			}
			for _, r := range a.Class {
				if it == r.Item {
					n++
				}
			}
		}
		if n > hits {
			best, hits = l, n
		}
	}
	if hits >= 10 {
		return best.FromTap, best.ToTap
	}
	for _, p := range d.Model.Survey.Pipes {
		if p.Name == pipe {
			return p.From, p.To
		}
	}
	return a.Item, a.Item
}

func (d *Diagnosis) pipeOf(c Cause) string {
	for _, f := range d.Model.Survey.Fittings {
		if f.Name == c.Item && c.Unknown.Kind == "fitting" {
			return f.Pipe
		}
	}
	return c.Item
}

// sources are the rows that carry the cause: the readings whose whitened signature
// is largest.
func (d *Diagnosis) sources(a *Accepted) []survey.Source {
	type weight struct {
		i int
		w float64
	}
	var ws []weight
	for i := range d.Model.Obs {
		ws = append(ws, weight{i, math.Abs(d.Final.J.At(i, a.place))})
	}
	sort.SliceStable(ws, func(i, j int) bool { return ws[i].w > ws[j].w })
	var out []survey.Source
	for _, w := range ws {
		if len(out) >= 6 || w.w < 0.2*ws[0].w {
			break
		}
		out = append(out, d.Model.Obs[w.i].Head.Sources()...)
	}
	return out
}
