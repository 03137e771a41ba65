package calibrate

import (
	"math"

	"tapround/survey"
	"tapround/survey/unit"
)

// Spreads are how large a fault of each kind may be: the standard deviation, in
// the working scale, of a fault that is there. They enter the evidence of a cause,
// never the estimate of sound items.
type Spreads struct {
	LnRoughness   float64 // of a fouled pipe
	LnC           float64
	PartClosedK   float64 // K that a part-closed valve is of the order of
	LnKLeast      float64 // least spread of ln K of a valve or strainer
	GaugeOffset   float64 // fraction of span
	TapLevel      float64 // m
	PointLevel    float64 // m, of a reservoir's recorded level
	Unrecorded    float64 // fraction of the busiest round's flow
	MachineFactor float64
	MeterGain     float64
}

// DefaultSpreads are those of the design where it gives one (ln k 2, ln K at least
// 1.5, offset 2 % of span, flow 10 % of what the reach carries). K of a part-closed
// valve runs over decades whatever it is when open: published gate valve tables
// give 5 to 24 a quarter open, so the spread reaches from the open K to about 20.
func DefaultSpreads() Spreads {
	return Spreads{LnRoughness: 2, LnC: 0.4, PartClosedK: 20, LnKLeast: 1.5, GaugeOffset: 0.02,
		TapLevel: 1, PointLevel: 1, Unrecorded: 0.1, MachineFactor: 0.15, MeterGain: 0.05}
}

// Fouled is the cause "pipe i is rougher, or narrower, than a sound one": one
// class, reported as an equivalent roughness at the recorded bore.
func (m *Model) Fouled(pipe int, s Spreads) Unknown {
	p := m.Survey.Pipes[pipe]
	u := Unknown{Kind: "pipe", Item: p.Name, Quantity: "roughness", Log: true, Expected: 1, SD: s.LnRoughness, Sign: 1,
		Targets: []Target{{class: onRoughness, index: pipe, round: everyRound, Weight: 1}}}
	if m.Survey.Info.FrictionLaw == survey.HazenWilliams {
		u.Quantity, u.SD, u.Sign = "c_value", s.LnC, -1
	}
	return u
}

// FouledGroup is the same common factor on all pipes of a group.
func (m *Model) FouledGroup(group string, s Spreads) Unknown {
	var u Unknown
	for i, p := range m.Survey.Pipes {
		if p.Group == group {
			one := m.Fouled(i, s)
			u.Quantity, u.SD, u.Sign = one.Quantity, one.SD, one.Sign
			u.Targets = append(u.Targets, one.Targets...)
		}
	}
	u.Kind, u.Item, u.Log, u.Expected = "group", group, true, 1
	return u
}

// Throttled is the cause "fitting i loses more than it should": a part-closed
// valve, a clogged strainer, a hung check valve.
func (m *Model) Throttled(fitting int, s Spreads) Unknown {
	f := m.Survey.Fittings[fitting]
	k := math.Max(f.K.V, minK)
	return Unknown{Kind: "fitting", Item: f.Name, Quantity: "loss_coefficient", Log: true, Expected: 1,
		SD: math.Max(s.LnKLeast, math.Log(s.PartClosedK/k)), Sign: 1,
		Targets: []Target{{class: onLoss, index: m.fits[f.Name], round: everyRound, Weight: 1}}}
}

// OffsetOf is the cause "gauge i is off by a constant".
func (m *Model) OffsetOf(gauge int, s Spreads) Unknown {
	g := m.Survey.Gauges[gauge]
	return Unknown{Kind: "gauge", Item: g.Name, Quantity: "offset", SD: s.GaugeOffset * g.Span(),
		Targets: []Target{{class: onOffset, index: gauge, round: everyRound, Weight: 1}}}
}

// GainOf is the cause "meter i reads a constant share too much or too little".
func (m *Model) GainOf(gauge int, s Spreads) Unknown {
	return Unknown{Kind: "gauge", Item: m.Survey.Gauges[gauge].Name, Quantity: "gain", SD: s.MeterGain,
		Targets: []Target{{class: onGain, index: gauge, round: everyRound, Weight: 1}}}
}

// LevelOf is the cause "the recorded level of tap i is wrong".
func (m *Model) LevelOf(tap int, s Spreads) Unknown {
	return Unknown{Kind: "tap", Item: m.Survey.Taps[tap].Name, Quantity: "level_error", SD: s.TapLevel,
		Targets: []Target{{class: onTapLevel, index: tap, round: everyRound, Weight: 1}}}
}

// ReservoirOf is the cause "the recorded water level of point i is wrong by a
// constant": theta is true minus recorded, as for any level that is estimated.
func (m *Model) ReservoirOf(point int, s Spreads) Unknown {
	return Unknown{Kind: "level", Item: m.Survey.Points[point].Name, Quantity: "level", SD: s.PointLevel,
		Targets: []Target{{class: onLevel, index: point, round: everyRound, Weight: 1}}}
}

// Unrecorded is the cause "a constant flow leaves at point i that nobody wrote
// down", in the rounds given.
func (m *Model) Unrecorded(point int, rounds []int, s Spreads) Unknown {
	u := Unknown{Kind: "draw-off", Item: m.Survey.Points[point].Name, Quantity: "flow", SD: s.Unrecorded * m.flowScale(), Sign: 1}
	for _, r := range rounds {
		u.Targets = append(u.Targets, Target{class: onLeak, index: point, round: r, Weight: 1})
	}
	return u
}

// OffCurve is the cause "machine i does not stand on its works curve".
func (m *Model) OffCurve(machine int, s Spreads) Unknown {
	x := m.Survey.Machines[machine]
	return Unknown{Kind: "machine", Item: x.Name, Quantity: "head_factor", Expected: 1, SD: s.MachineFactor,
		Targets: []Target{{class: onMachine, index: m.links[x.Name], round: everyRound, Weight: 1}}}
}

// Misread is the cause "this one reading is wrong", whatever the reason: sd is its
// spread in the unit of the head.
func (m *Model) Misread(obs int, sd float64) Unknown {
	h := m.Obs[obs].Head
	return Unknown{Kind: "reading", Item: h.Tap, Round: h.Round, Quantity: "reading", SD: sd,
		Targets: []Target{{class: onReading, index: obs, round: everyRound, Weight: 1}}}
}

// PointIndex, LinkIndex and FittingIndex find an item by name; -1 where there is
// none.
func (m *Model) PointIndex(name string) int { return find(m.points, name) }

// LinkIndex finds a pipe or machine.
func (m *Model) LinkIndex(name string) int { return find(m.links, name) }

// FlatFitting finds a fitting's flat index.
func (m *Model) FlatFitting(name string) int { return find(m.fits, name) }

func find(in map[string]int, name string) int {
	if i, ok := in[name]; ok {
		return i
	}
	return -1
}

// ExpectedLnRough is ln k (or ln C) of a sound pipe.
func (m *Model) ExpectedLnRough(link int) float64 { return m.base.LnRough[link] }

// ExpectedLnK is ln K of a sound fitting by flat index.
func (m *Model) ExpectedLnK(flat int) float64 { return m.base.LnK[flat] }

// UnknownOf finds an unknown by kind, item and quantity; -1 none.
func (m *Model) UnknownOf(kind, item, quantity string) int {
	for k, u := range m.Unknowns {
		if u.Kind == kind && u.Item == item && u.Quantity == quantity {
			return k
		}
	}
	return -1
}

// GaugeNamed is a gauge of the survey; the zero Gauge where there is none.
func (m *Model) GaugeNamed(name string) survey.Gauge {
	if i := find(m.gauges, name); i >= 0 {
		return m.Survey.Gauges[i]
	}
	return survey.Gauge{Name: name}
}

// Place is a spot on a pipe whose own level is known.
type Place struct {
	Link          int
	At, Elevation float64
}

// Places lists the spots where the pipe's level is known well enough to say
// whether the piezometric line runs under it: the rows of levels.csv and the
// junctions at pipe ends. Reservoirs and outlets meet the atmosphere anyway.
func (m *Model) Places() []Place {
	var out []Place
	for _, l := range m.Survey.Levels {
		out = append(out, Place{Link: m.links[l.Pipe], At: l.At, Elevation: l.Elevation})
	}
	for _, p := range m.Survey.Pipes {
		for _, end := range []struct {
			point string
			at    float64
		}{{p.From, 0}, {p.To, p.Length}} {
			if x := m.Survey.Points[m.points[end.point]]; x.Kind == survey.Junction {
				out = append(out, Place{Link: m.links[p.Name], At: end.at, Elevation: x.Elevation})
			}
		}
	}
	return out
}

// GaugeUnit is the unit that a gauge shows, for turning its offset back.
func GaugeUnit(g survey.Gauge) unit.Unit {
	dim := unit.Pressure
	switch g.Kind {
	case survey.FlowMeter:
		dim = unit.Flow
	case survey.LevelGauge:
		dim = unit.Length
	}
	u, err := unit.Parse(g.Unit, dim)
	if err != nil {
		return unit.Unit{Name: g.Unit, Factor: 1} // the reader has refused such a gauge already
	}
	return u
}
