package fault

import (
	"fmt"
	"math"
	"sort"

	"tapround/calibrate"
	"tapround/calibrate/hydraulic"
	"tapround/calibrate/stat"
	"tapround/survey"
	"tapround/survey/unit"
)

// Next is one reading that could be taken, and what it would tell about a finding whose
// cause is open.
type Next struct {
	Finding string // item of the finding, as findings.csv has it
	Where   string // in words
	Round   string // whose draw-offs it is to be taken with
	Scale   float64
	Flow    float64 // m3/s in the suspected pipe
	// Difference is what separates the likeliest cause from Against there, in m (or
	// m3/s); Against is the rival that the reading parts best from it.
	Likeliest, Against string
	Difference         float64
	OfFlow             bool // it is a flow, not a head
	// Gain is the expected drop of entropy over the causes, in nats (Lindley 1956).
	Gain float64
	// Settles is the chance that the reading puts the true one of the two first.
	Settles float64
}

// Assumptions about a reading that has not been taken: a test gauge of class 0.25 on
// 10 bar carried to a place levelled to 5 cm (common practice). A pair read with one
// gauge either side of a fitting shares gauge and, nearly, level.
const (
	newGaugeSD = 0.0025 * 1e6 / 9810 / 1.732 // m
	newOwnSD   = 0.05                        // m
	newLevelSD = 0.05                        // m
	pairSD     = 0.04                        // m
)

// place is a candidate.
type place struct {
	words   string
	probes  []hydraulic.Probe
	weights []float64
	noise   float64
	link    int
	flow    bool // m3/s instead of m
	// tap and gauge, where a recorded level and a gauge of the survey come into it.
	tap, gauge string
}

// NextReadings ranks, for every accepted cause that has rivals, the readings that would
// part them: every tap, either side of each suspected fitting, every point, the middle of
// suspected pipes; at the draw-offs of the busiest round, half as much again, and none.
func (d *Diagnosis) NextReadings() []Next {
	var out []Next
	for i := range d.Accepted {
		a := &d.Accepted[i]
		if len(a.Class) == 0 {
			continue
		}
		out = append(out, d.nextFor(a)...)
	}
	return out
}

// nextPerFinding bounds the list that is printed for one finding.
const nextPerFinding = 5

func (d *Diagnosis) nextFor(a *Accepted) []Next {
	fits, probability, names := d.liveFits(a)
	if len(fits) < 2 {
		return nil
	}
	busiest, item := d.busiestRound(), d.itemOf(a)
	var out []Next
	for _, scale := range []float64{1, 1.5, 0} {
		var worlds []*calibrate.WhatIf
		for _, f := range fits {
			w, err := f.WhatIf(busiest, scale)
			if err != nil {
				worlds = nil
				break
			}
			worlds = append(worlds, w)
		}
		if worlds == nil {
			continue
		}
		for _, p := range d.places(a) {
			n, ok := judge(worlds, probability, names, p)
			if !ok {
				continue
			}
			n.Finding, n.Round, n.Scale = item, d.Model.Rounds[busiest].Name, scale
			if p.link >= 0 {
				n.Flow = math.Abs(worlds[0].Flow(p.link))
			}
			out = append(out, n)
		}
	}
	sort.SliceStable(out, func(i, j int) bool { return out[i].Gain > out[j].Gain+1e-9 })
	// One line a place: its best flow.
	seen := map[string]bool{}
	var best []Next
	for _, n := range out {
		if !seen[n.Where] && n.Gain > 0.01 {
			seen[n.Where] = true
			best = append(best, n)
		}
		if len(best) == nextPerFinding {
			break
		}
	}
	return best
}

func (d *Diagnosis) itemOf(a *Accepted) string {
	if lossKind(a.Kind) {
		from, to := d.around(a)
		return from + ".." + to
	}
	return a.Item
}

// liveFits refits each live cause in the place of the accepted one.
func (d *Diagnosis) liveFits(a *Accepted) (fits []*calibrate.Fit, p []float64, names []string) {
	var rest []Cause
	for i := range d.Accepted {
		if &d.Accepted[i] != a {
			rest = append(rest, d.Accepted[i].Cause)
		}
	}
	sum := 0.0
	for _, c := range append([]Rival{{Cause: a.Cause, Probability: a.Probability}}, a.Class...) {
		t := d.fitOf(append(append([]Cause(nil), rest...), c.Cause))
		if t == nil {
			continue
		}
		fits, p, names = append(fits, t.fit), append(p, c.Probability), append(names, plain(c.Cause))
		sum += c.Probability
	}
	for i := range p {
		p[i] /= sum
	}
	return fits, p, names
}

func (d *Diagnosis) busiestRound() int {
	best, most := 0, -1.0
	for r := range d.Model.Rounds {
		sum := 0.0
		for l := range d.Model.LinkNames() {
			sum += math.Abs(d.Final.FlowOf(r, l))
		}
		if sum > most {
			best, most = r, sum
		}
	}
	return best
}

// places lists where something could be read.
func (d *Diagnosis) places(a *Accepted) []place {
	m := d.Model
	s := m.Survey
	nan := math.NaN()
	one := []float64{1}
	var out []place
	main := m.LinkIndex(d.pipeOf(a.Cause))
	for _, t := range s.Taps {
		here := place{words: "tap " + t.Name + " with another gauge", probes: []hydraulic.Probe{m.ProbeOf(t.Name, hydraulic.Piezometric)}, weights: one,
			noise: math.Hypot(newOwnSD, newGaugeSD), link: main, tap: t.Name}
		out = append(out, here)
		// The suspected gauge carried to a tap where it has not been.
		for _, g := range suspectedGauges(a) {
			if !d.hasRead(g, t.Name) {
				here.words, here.noise, here.gauge = "tap "+t.Name+" with gauge "+g, newOwnSD, g
				out = append(out, here)
			}
		}
	}
	fresh := math.Sqrt(newOwnSD*newOwnSD + newGaugeSD*newGaugeSD + newLevelSD*newLevelSD)
	for i, p := range s.Points {
		if p.Kind == survey.Junction {
			out = append(out, place{words: "a new tap at " + p.Name, probes: []hydraulic.Probe{{Point: i, Link: -1, View: hydraulic.Total, Depth: nan}}, weights: one, noise: fresh, link: main})
		}
	}
	for _, c := range append([]Rival{{Cause: a.Cause}}, a.Class...) {
		switch c.Unknown.Kind {
		case "fitting":
			for _, f := range s.Fittings {
				if f.Name == c.Item {
					l := m.LinkIndex(f.Pipe)
					before := hydraulic.Probe{Point: -1, Link: l, At: f.At, View: hydraulic.Total, Depth: nan}
					after := before
					after.At = math.Nextafter(f.At, math.Inf(1))
					out = append(out, place{words: "either side of " + f.Name + ", with one gauge", probes: []hydraulic.Probe{before, after}, weights: []float64{1, -1}, noise: pairSD, link: l})
				}
			}
		case "pipe":
			l := m.LinkIndex(c.Item)
			out = append(out, place{words: "a new tap half way along " + c.Item, probes: []hydraulic.Probe{{Point: -1, Link: l, At: m.LinkLength(l) / 2, View: hydraulic.Piezometric, Depth: nan}}, weights: one, noise: fresh, link: l})
		}
	}
	for l, p := range s.Pipes {
		if l == main || !d.near(a, p) {
			continue
		}
		out = append(out, place{flow: true, words: "the flow in " + p.Name, probes: []hydraulic.Probe{{Point: -1, Link: l, View: hydraulic.Flow, Depth: nan}}, weights: one,
			noise: 0.02 * math.Abs(d.Final.FlowOf(d.busiestRound(), l)), link: l})
	}
	return out
}

// suspectedGauges are the pressure gauges among a cause and its rivals.
func suspectedGauges(a *Accepted) []string {
	var out []string
	for _, c := range append([]Rival{{Cause: a.Cause}}, a.Class...) {
		if c.Kind == survey.GaugeOff && c.Unknown.Quantity == "offset" {
			out = append(out, c.Item)
		}
	}
	return out
}

// hasRead reports whether a gauge was read at a tap.
func (d *Diagnosis) hasRead(gauge, tap string) bool {
	for _, o := range d.Model.Obs {
		if o.Head.Gauge == gauge && o.Head.Tap == tap {
			return true
		}
	}
	return false
}

// near: a pipe that meets the suspected place.
func (d *Diagnosis) near(a *Accepted, p survey.Pipe) bool {
	name := d.pipeOf(a.Cause)
	for _, q := range d.Model.Survey.Pipes {
		if q.Name == name {
			return p.From == q.From || p.From == q.To || p.To == q.From || p.To == q.To
		}
	}
	return p.From == a.Item || p.To == a.Item
}

// judge predicts a reading under every live cause and works out what it would tell.
func judge(worlds []*calibrate.WhatIf, p []float64, names []string, at place) (Next, bool) {
	of := make([]stat.Outlook, len(worlds))
	for k, w := range worlds {
		e := w.Read(at.probes, at.weights)
		if math.IsNaN(e.SD) {
			return Next{}, false
		}
		variance := e.SD*e.SD + at.noise*at.noise
		for _, more := range []calibrate.Estimate{w.LevelError(at.tap), w.Offset(at.gauge)} {
			e.Value += more.Value
			variance += more.SD * more.SD
		}
		of[k] = stat.Outlook{Probability: p[k], Mean: e.Value, Variance: variance}
	}
	n := Next{Where: at.words, Gain: stat.EntropyDrop(of), Likeliest: names[0], OfFlow: at.flow}
	// The likeliest is the first: classes are sorted by their odds.
	best := -1.0
	for k := 1; k < len(worlds); k++ {
		if apart := stat.Separation(of[0], of[k]); apart > best {
			best, n.Against, n.Difference = apart, names[k], of[0].Mean-of[k].Mean
		}
	}
	// Two laws d apart in units of their common SD are mixed up with a chance of
	// Phi(-d/2); the separation is d^2/2.
	n.Settles = stat.NormalCDF(math.Sqrt(2*math.Max(0, best)) / 2)
	return n, best >= 0
}

// Sentence says it as the crew would want to hear it.
func (n Next) Sentence() string {
	at := fmt.Sprintf("with the draw-offs of round %s", n.Round)
	switch {
	case n.Scale == 0:
		at = "with everything drawn off shut"
	case n.Scale > 1:
		at = fmt.Sprintf("with half as much again drawn off as in round %s", n.Round)
	}
	if n.Flow > 0 && n.Scale > 0 {
		at += fmt.Sprintf(" (about %s L/s in the suspected pipe)", unit.Significant(1e3*n.Flow, 2))
	}
	do, diff := "Read at", unit.Significant(math.Abs(n.Difference), 2)+" m"
	if n.OfFlow {
		do, diff = "Measure", unit.Significant(1e3*math.Abs(n.Difference), 2)+" L/s"
	}
	// Never a round hundred: the works may hold what no model does.
	return fmt.Sprintf("%s %s %s: %q and %q differ there by %s, and the reading parts the two with a probability of %.0f %%.",
		do, n.Where, at, n.Likeliest, n.Against, diff, math.Min(99, 100*n.Settles))
}
