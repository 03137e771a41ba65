package fault

import (
	"fmt"
	"math"
	"sort"

	"tapround/calibrate/hydraulic"
	"tapround/calibrate/stat"
	"tapround/survey"
	"tapround/survey/unit"
)

// hints lists causes that are in the false-discovery list at 10 per cent [BH] but
// that the search did not accept and no accepted cause explains: worth a look.
func (d *Diagnosis) hints() []survey.Finding {
	if len(d.Accepted) > 0 || !d.Sound.Converged {
		return nil // after a large fault the small z of the sound fit mean nothing
	}
	var index []int
	var ps []float64
	for i, c := range d.Causes {
		// What passes the limit and was not accepted has been weighed by the search.
		if d.Z[i] == 0 || c.Kind == misread || math.Abs(d.Z[i]) > d.Limit {
			continue
		}
		p := 2 * stat.NormalCDF(-math.Abs(d.Z[i]))
		if s := float64(c.Unknown.Sign); s != 0 {
			p = stat.NormalCDF(-d.Z[i] * s)
		}
		index, ps = append(index, i), append(ps, p)
	}
	listed := stat.BenjaminiHochberg(ps, 0.10)
	order := make([]int, len(ps))
	for r := range order {
		order[r] = r
	}
	sort.SliceStable(order, func(a, b int) bool { return ps[order[a]] < ps[order[b]] })
	var out []survey.Finding
	for _, r := range order {
		if !listed[r] || len(out) == 3 {
			break
		}
		c := d.Causes[index[r]]
		out = append(out, survey.Finding{Kind: c.Kind, Item: c.Item, Grade: survey.Hint,
			Statistic: d.Z[index[r]] * d.Z[index[r]], Limit: d.Limit * d.Limit,
			Statement: fmt.Sprintf("Worth a look, no more: the readings lean towards %s, within what chance can do.", plain(c)),
			Evidence:  []string{fmt.Sprintf("p = %s of a single test, %d causes tested", unit.Significant(ps[r], 1), d.Tests)},
			Advice:    "Nothing to do now; read it again next round."})
	}
	return out
}

// belowAtmosphere flags places where the fitted piezometric line runs under the
// pipe: air is drawn in, and readings there do not obey the law of a full pipe.
func (d *Diagnosis) belowAtmosphere() []survey.Finding {
	m, f := d.Model, d.Final
	type low struct {
		depth  float64
		rounds []string
		where  string
	}
	worst := map[string]*low{}
	var order []string
	note := func(pipe, where, round string, depth float64) {
		if worst[pipe] == nil {
			worst[pipe] = &low{}
			order = append(order, pipe)
		}
		w := worst[pipe]
		if len(w.rounds) == 0 || w.rounds[len(w.rounds)-1] != round {
			w.rounds = append(w.rounds, round)
		}
		if depth > w.depth {
			w.depth, w.where = depth, where
		}
	}
	for r, round := range m.Rounds {
		for _, p := range m.Places() {
			e := f.Read(r, hydraulic.Probe{Point: -1, Link: p.Link, At: p.At, View: hydraulic.Piezometric, Depth: math.NaN()})
			// Three standard uncertainties, of the fitted line and of a level to
			// a quarter of a metre: long sections are seldom better.
			if !math.IsNaN(e.SD) && p.Elevation-e.Value > 3*math.Hypot(e.SD, 0.25) {
				note(m.Survey.Pipes[p.Link].Name, fmt.Sprintf("%.0f m from its start", p.At), round.Name, p.Elevation-e.Value)
			}
		}
	}
	var out []survey.Finding
	for _, pipe := range order {
		w := worst[pipe]
		out = append(out, survey.Finding{Kind: survey.BelowAtmosphere, Item: pipe, Grade: survey.Likely, Rounds: w.rounds, Unit: "m",
			Estimate:  survey.Some(w.depth),
			Statement: fmt.Sprintf("The piezometric line runs up to %s m under pipe %s (%s): the pressure there is below atmosphere.", unit.Significant(w.depth, 2), pipe, w.where),
			Advice:    "Do not draw this much again; look for air valves and for dirty water that could be drawn in. Readings beyond this place may belong to a line that is not full.",
			Cautions:  []string{"Water outside the pipe can be drawn in through leaks and air valves while it is below atmosphere (common practice).", cautionLocal}})
	}
	return out
}

// notCovered lists the pipes, valves and strainers of which the survey says
// nothing: a fault of practical size would have been missed four times in five.
func (d *Diagnosis) notCovered() []survey.Finding {
	var out []survey.Finding
	for _, s := range d.Smallest() {
		if s.Practical || (s.Kind != "pipe" && s.Kind != "fitting") {
			continue
		}
		f := survey.Finding{Kind: survey.NotCovered, Item: s.Item, Grade: survey.Hint, Unit: s.Unit,
			Statement: fmt.Sprintf("The readings say nothing about %s %s: %s.", s.Kind, s.Item, s.Words),
			Advice:    "No fault found here is not the same as sound: read taps either side of it at a larger flow."}
		if s.Seen {
			f.Estimate = survey.Some(s.Value)
		}
		out = append(out, f)
	}
	return out
}

// Misreadings lists accepted causes that blame one reading alone, for re-reading.
func (d *Diagnosis) Misreadings() []survey.Alert {
	out := d.exchangeAlerts()
	for _, a := range d.Accepted {
		if a.Kind != misread {
			continue
		}
		h := d.Model.Obs[a.reading].Head
		out = append(out, survey.Alert{Rule: "one reading stands alone", Subject: h.Tap,
			Statement: fmt.Sprintf("The %s reading at %s in round %s is off by %s and nothing else explains it.", h.Kind, h.Tap, h.Round, sized(h, d.Final.Theta(a.place))),
			Evidence:  fmt.Sprintf("leaving it out lowers the sum of squares by %.1f; chance reaches %.1f", a.T, d.Limit*d.Limit),
			Limit:     "family-wise false-alarm rate of the survey",
			Action:    "Read it again; until then it does not count.", Sources: h.Sources()})
	}
	return out
}

func sized(h survey.Head, v float64) string {
	if h.Quantity == survey.VolumeFlow {
		return unit.Significant(1e3*v, 2) + " L/s"
	}
	return unit.Significant(v, 2) + " m"
}
