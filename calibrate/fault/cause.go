// Package fault says what is wrong: it tests the readings against sound works, and
// where they do not fit, compares the causes that could explain it.
//
// The order is that of an expert: test first, then explain. A cause is accepted
// when its likelihood ratio passes the limit that the largest of all the ratios
// keeps under sound works with the stated false-alarm rate; the best cause is
// allowed, the rest is tested again; accepted causes are re-examined backward and
// by exchange; and every accepted cause is set against all others that could stand
// in its place. Where the readings cannot tell them apart the answer is the class,
// not its first member.
//
// # References
//
//	[Willsky-Jones] A. S. Willsky, H. L. Jones, IEEE Trans. AC 21 (1976) 108
//	[Self-Liang]    S. G. Self, K.-Y. Liang, J. Am. Stat. Assoc. 82 (1987) 605
//	[Westfall]      P. H. Westfall, S. S. Young, Resampling-Based Multiple Testing (1993)
//	[Kass]          R. E. Kass, A. E. Raftery, J. Am. Stat. Assoc. 90 (1995) 773
//	[BH]            Y. Benjamini, Y. Hochberg, J. R. Stat. Soc. B 57 (1995) 289
package fault

import (
	"tapround/calibrate"
	"tapround/survey"
)

// Cause is one thing that could be wrong, as an unknown the fit may be given.
type Cause struct {
	Kind    survey.FindingKind
	Item    string
	Variant string // rounds it acts in, where that differs between causes of one item
	Unknown calibrate.Unknown
	Prior   float64 // probability before any reading
	reading int     // observation it blames alone, -1: none
}

// Name is "kind:item", as findings.csv lists it.
func (c Cause) Name() string { return string(c.Kind) + ":" + c.Item }

// misread marks a cause that blames one reading alone. It is not a finding kind:
// such a reading is named for re-reading and left out.
const misread survey.FindingKind = "reading"

// Odds are the probabilities of a fault before any reading, per item. Five per
// cent is the upper end of what the design asks for; they matter only between
// causes that the readings hardly tell apart, and the report prints them.
type Odds struct {
	Pipe, Valve, Fitting, Gauge, Tap, Reservoir, Draw, Machine, Reading float64
}

// DefaultOdds is judgement: what surveys of old mains turn up most often first.
func DefaultOdds() Odds {
	return Odds{Pipe: 0.05, Valve: 0.05, Fitting: 0.05, Gauge: 0.03, Tap: 0.03, Reservoir: 0.02, Draw: 0.02, Machine: 0.05, Reading: 0.003}
}

// Settings of a diagnosis.
type Settings struct {
	Spreads calibrate.Spreads
	Odds    Odds
	// FalseAlarm is the chance, over all tests together, that sound works give any
	// finding.
	FalseAlarm float64
	// Draws and Seed of the simulation that finds the limit.
	Draws int
	Seed  uint64
	// MostCauses stops the search.
	MostCauses int
}

// DefaultSettings for a survey.
func DefaultSettings(s *survey.Survey) Settings {
	rate := s.Info.FalseAlarmRate
	if rate <= 0 || rate >= 1 {
		rate = 0.05
	}
	return Settings{Spreads: calibrate.DefaultSpreads(), Odds: DefaultOdds(), FalseAlarm: rate, Draws: 20000, Seed: 1, MostCauses: 8}
}

// Candidates lists every cause that is looked for, in the order of the tables.
// Each counts as a test.
func Candidates(m *calibrate.Model, s Settings) []Cause {
	var out []Cause
	add := func(k survey.FindingKind, item, variant string, u calibrate.Unknown, p float64) {
		out = append(out, Cause{Kind: k, Item: item, Variant: variant, Unknown: u, Prior: p, reading: -1})
	}
	sv := m.Survey
	for i, p := range sv.Pipes {
		add(survey.FouledPipe, p.Name, "", m.Fouled(i, s.Spreads), s.Odds.Pipe)
	}
	for _, g := range groups(sv) {
		add(survey.FouledPipe, g, "group", m.FouledGroup(g, s.Spreads), s.Odds.Pipe)
	}
	for i, f := range sv.Fittings {
		switch {
		case f.Kind.CanBePartClosed():
			add(survey.PartClosedValve, f.Name, "", m.Throttled(i, s.Spreads), s.Odds.Valve)
		case f.Kind.CanBeBlocked():
			add(survey.BlockedFitting, f.Name, "", m.Throttled(i, s.Spreads), s.Odds.Fitting)
		}
	}
	for i, x := range sv.Machines {
		add(survey.MachineOffCurve, x.Name, "", m.OffCurve(i, s.Spreads), s.Odds.Machine)
	}
	used, taps := usedInstruments(m)
	for i, g := range sv.Gauges {
		if used[g.Name] {
			add(survey.GaugeOff, g.Name, "", m.OffsetOf(i, s.Spreads), s.Odds.Gauge)
			if g.Kind == survey.FlowMeter {
				add(survey.GaugeOff, g.Name, "gain", m.GainOf(i, s.Spreads), s.Odds.Gauge)
			}
		}
	}
	for i, t := range sv.Taps {
		if taps[t.Name] {
			add(survey.LevelWrong, t.Name, "", m.LevelOf(i, s.Spreads), s.Odds.Tap)
		}
	}
	every, flowing := roundSets(m)
	for i, p := range sv.Points {
		switch p.Kind {
		case survey.Reservoir:
			add(survey.LevelWrong, p.Name, "", m.ReservoirOf(i, s.Spreads), s.Odds.Reservoir)
		case survey.Junction:
			add(survey.UnrecordedFlow, p.Name, "every round", m.Unrecorded(i, every, s.Spreads), s.Odds.Draw)
			if len(flowing) > 0 && len(flowing) < len(every) {
				add(survey.UnrecordedFlow, p.Name, "flowing rounds", m.Unrecorded(i, flowing, s.Spreads), s.Odds.Draw/2)
			}
		}
	}
	for i, o := range m.Obs {
		// A slip of the pen or a jammed pointer: a tenth of the gauge's span.
		sd := 0.1 * spanOf(m, o)
		if sd > 0 {
			out = append(out, Cause{Kind: misread, Item: o.Head.Tap, Variant: o.Head.Round, Unknown: m.Misread(i, sd), Prior: s.Odds.Reading, reading: i})
		}
	}
	return out
}

// groups lists the pipe groups of at least two pipes, in the order of the table.
func groups(s *survey.Survey) []string {
	count := map[string]int{}
	var order []string
	for _, p := range s.Pipes {
		if p.Group == "" {
			continue
		}
		if count[p.Group]++; count[p.Group] == 2 {
			order = append(order, p.Group)
		}
	}
	return order
}

func usedInstruments(m *calibrate.Model) (gauges, taps map[string]bool) {
	gauges, taps = map[string]bool{}, map[string]bool{}
	for _, o := range m.Obs {
		if o.Head.PerGauge != 0 {
			gauges[o.Head.Gauge] = true
		}
		if o.Head.PerTap != 0 {
			taps[o.Head.Tap] = true
		}
		if o.Head.PerOther != 0 {
			taps[o.Head.OtherTap] = true
		}
	}
	return gauges, taps
}

func roundSets(m *calibrate.Model) (every, flowing []int) {
	for i, r := range m.Rounds {
		every = append(every, i)
		if r.Flowing {
			flowing = append(flowing, i)
		}
	}
	return every, flowing
}

// spanOf is the span of the gauge of an observation, in the unit of its head.
func spanOf(m *calibrate.Model, o calibrate.Observation) float64 {
	for _, g := range m.Survey.Gauges {
		if g.Name == o.Head.Gauge {
			return g.Span() * o.Head.PerGauge
		}
	}
	return 0
}
