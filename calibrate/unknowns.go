package calibrate

import (
	"math"

	"tapround/survey"
)

// buildUnknowns lists what the fit may move in sound works, in the order of the
// tables: pipes, groups, fittings, kinds, machines, draw-offs, levels, then the
// shared errors of the instruments that were used.
func (m *Model) buildUnknowns(heads []survey.Head) {
	m.pipeUnknowns()
	m.fittingUnknowns()
	for _, x := range m.Survey.Machines {
		m.add(Unknown{Kind: "machine", Item: x.Name, Quantity: "head_factor", Expected: 1, SD: m.Priors.HeadFactor,
			Targets: []Target{{class: onMachine, index: m.links[x.Name], round: everyRound, Weight: 1}}})
	}
	m.conditionUnknowns()
	m.instrumentUnknowns(heads)
}

func (m *Model) add(u Unknown) { m.Unknowns = append(m.Unknowns, u) }

func (m *Model) pipeUnknowns() {
	s := m.Survey
	sd, quantity := m.Priors.LnRoughness, "roughness"
	if s.Info.FrictionLaw == survey.HazenWilliams {
		sd, quantity = m.Priors.LnC, "c_value"
	}
	groups := map[string][]Target{}
	var order []string
	for i, p := range s.Pipes {
		own := sd
		if p.Spread.OK && p.Spread.V > 1 {
			own = math.Log(p.Spread.V)
		}
		t := Target{class: onRoughness, index: i, round: everyRound, Weight: 1}
		m.add(Unknown{Kind: "pipe", Item: p.Name, Quantity: quantity, Log: true,
			Expected: math.Exp(m.base.LnRough[i]), SD: own, Targets: []Target{t}})
		// A shared history is believed only where the expected values are of new
		// pipe: expected values of that age already hold the ageing.
		if p.Group != "" && p.Material != "" && s.Info.AsNewYear.OK {
			if groups[p.Group] == nil {
				order = append(order, p.Group)
			}
			groups[p.Group] = append(groups[p.Group], t)
		}
	}
	for _, g := range order {
		spread := m.Priors.LnGroup
		if s.Info.FrictionLaw == survey.HazenWilliams {
			// The same ageing seen through C: friction goes as C^-1.85 and as
			// k^0.25 or so, hence a factor of about 0.14.
			spread *= 0.14
		}
		m.add(Unknown{Kind: "group", Item: g, Quantity: quantity, Log: true, Expected: 1, SD: spread, Targets: groups[g]})
	}
}

func (m *Model) fittingUnknowns() {
	s := m.Survey
	kinds := map[survey.FittingKind][]Target{}
	var order []survey.FittingKind
	for _, f := range s.Fittings {
		if f.FromTable != "" {
			if kinds[f.Kind] == nil {
				order = append(order, f.Kind)
			}
			kinds[f.Kind] = append(kinds[f.Kind], Target{class: onLoss, index: m.fits[f.Name], round: everyRound, Weight: 1})
		}
	}
	for _, f := range s.Fittings {
		sd := m.Priors.LnK
		if f.Spread.OK && f.Spread.V > 1 {
			sd = math.Log(f.Spread.V)
		}
		if len(kinds[f.Kind]) > 1 && f.FromTable != "" && sd > m.Priors.LnKKind {
			// The table's bias is common to its kind; what is left is the fitting's own.
			sd = math.Sqrt(sd*sd - m.Priors.LnKKind*m.Priors.LnKKind)
		}
		flat := m.fits[f.Name]
		m.add(Unknown{Kind: "fitting", Item: f.Name, Quantity: "loss_coefficient", Log: true,
			Expected: math.Exp(m.base.LnK[flat]), SD: sd,
			Targets: []Target{{class: onLoss, index: flat, round: everyRound, Weight: 1}}})
	}
	for _, k := range order {
		if len(kinds[k]) > 1 {
			m.add(Unknown{Kind: "group", Item: string(k), Quantity: "loss_coefficient", Log: true, Expected: 1,
				SD: m.Priors.LnKKind, Targets: kinds[k]})
		}
	}
}

// conditionUnknowns adds the draw-offs and levels that are not known exactly. A
// row for all rounds has one error, shared by the rounds in which it is in force.
func (m *Model) conditionUnknowns() {
	s := m.Survey
	shared := map[survey.Source]int{}
	place := func(row survey.Condition, u Unknown, t Target) {
		if u.SD == 0 {
			return
		}
		if row.Round == survey.EveryRound {
			if at, ok := shared[row.Source]; ok {
				m.Unknowns[at].Targets = append(m.Unknowns[at].Targets, t)
				return
			}
			shared[row.Source] = len(m.Unknowns)
			u.Round = ""
		}
		u.Targets = []Target{t}
		m.add(u)
	}
	scale := m.flowScale()
	for ri, r := range s.Rounds {
		f := s.InForce(r.Name)
		for pi, p := range s.Points {
			for _, d := range f.DrawOffs[p.Name] {
				u := Unknown{Kind: "draw-off", Item: p.Name, Quantity: "flow", Round: r.Name, Expected: d.Value.Or(0), SD: d.SD.Or(0)}
				if !d.Value.OK {
					u.SD, u.Open = openFlow*scale, true
				}
				place(d, u, Target{class: onDrawOff, index: pi, round: ri, Weight: 1})
			}
			if p.Kind != survey.Reservoir {
				continue
			}
			if l, ok := f.Levels[p.Name]; ok {
				u := Unknown{Kind: "level", Item: p.Name, Quantity: "level", Round: r.Name, Expected: l.Value.Or(p.Elevation), SD: l.SD.Or(0)}
				if !l.Value.OK {
					u.SD, u.Open = m.Priors.OpenLevel, true
				}
				place(l, u, Target{class: onLevel, index: pi, round: ri, Weight: 1})
			}
		}
	}
}

// openFlow is the prior SD of a draw-off that is to be estimated, in flows that the
// system may be expected to carry. Sound then moves the prior's centre to the
// estimate, so that it pulls nowhere; a much wider one would cost digits.
const openFlow = 3

// flowScale is the flow that a pipe of the system may be expected to carry, m3/s:
// what is drawn in the busiest round, or the widest pipe at 1 m/s.
func (m *Model) flowScale() float64 {
	most := 0.0
	for _, r := range m.Rounds {
		sum := 0.0
		for _, d := range r.Conditions.DrawOff {
			sum += math.Abs(d)
		}
		most = math.Max(most, sum)
	}
	for _, p := range m.Survey.Pipes {
		most = math.Max(most, math.Pi/4*p.Bore*p.Bore)
	}
	return most
}

// instrumentUnknowns adds the shared errors of the gauges, taps and barometers
// that the heads were read with.
func (m *Model) instrumentUnknowns(heads []survey.Head) {
	s := m.Survey
	offset, gain := make([]float64, len(s.Gauges)), make([]float64, len(s.Gauges))
	level, profile := make([]float64, len(s.Taps)), make([]float64, len(s.Taps))
	barometer := make([]float64, len(s.Rounds))
	jets := make([]bool, len(s.Taps))
	for _, h := range heads {
		if g, ok := m.gauges[h.Gauge]; ok && h.PerGauge != 0 {
			offset[g], gain[g] = math.Max(offset[g], h.GaugeSD), math.Max(gain[g], h.GainSD)
		}
		if h.PerTap != 0 {
			level[m.taps[h.Tap]] = h.TapSD
		}
		if h.PerOther != 0 {
			level[m.taps[h.OtherTap]] = h.OtherTapSD
		}
		if h.Quantity == survey.LocalVelocity || h.Quantity == survey.LocalTotalHead {
			profile[m.taps[h.Tap]] = m.Priors.ProfileFactor
		}
		if h.Quantity == survey.OutletFlow {
			profile[m.taps[h.Tap]] = m.Priors.OutletCoefficient
			jets[m.taps[h.Tap]] = true
		}
		barometer[m.rounds[h.Round]] = math.Max(barometer[m.rounds[h.Round]], h.BarometerSD)
	}
	one := func(c class, i, round int) []Target { return []Target{{class: c, index: i, round: round, Weight: 1}} }
	for i, g := range s.Gauges {
		if offset[i] > 0 {
			m.add(Unknown{Kind: "gauge", Item: g.Name, Quantity: "offset", SD: offset[i], Targets: one(onOffset, i, everyRound)})
		}
		if gain[i] > 0 {
			m.add(Unknown{Kind: "gauge", Item: g.Name, Quantity: "gain", SD: gain[i], Targets: one(onGain, i, everyRound)})
		}
	}
	for i, t := range s.Taps {
		if level[i] > 0 {
			m.add(Unknown{Kind: "tap", Item: t.Name, Quantity: "level_error", SD: level[i], Targets: one(onTapLevel, i, everyRound)})
		}
		if profile[i] > 0 {
			quantity := "profile_factor"
			if jets[i] {
				quantity = "outlet_coefficient"
			}
			m.add(Unknown{Kind: "tap", Item: t.Name, Quantity: quantity, SD: profile[i], Targets: one(onProfile, i, everyRound)})
		}
	}
	for i, r := range s.Rounds {
		if barometer[i] > 0 {
			m.add(Unknown{Kind: "round", Item: r.Name, Quantity: "barometer", Round: r.Name, SD: barometer[i], Targets: one(onBarometer, i, i)})
		}
	}
}
