package calibrate

import (
	"math"

	"tapround/calibrate/hydraulic"
	"tapround/calibrate/stat"
	"tapround/survey"
)

// Loss is the total head lost on one stretch between neighbouring taps in one
// round, m. It needs no cause: it stands where the cause is open.
type Loss struct {
	Round, FromTap, ToTap string
	// Measured is what the gauges say, with the uncertainty of gauges and levels
	// in it; velocity heads are those of the fitted flow. Gauge and level errors that
	// were accepted as causes are taken off, smaller fitted ones are not.
	Measured Estimate
	// Expected is what sound works lose at the fitted flows; its SD is the scatter
	// of sound items and the uncertainty of the flow.
	Expected Estimate
	Fitted   Estimate
	Excess   Estimate // Measured - Expected
	// Probability that the stretch loses more than sound works would.
	Probability float64
	Items       []string
	Way         Way
}

// Losses is the loss view: every stretch between neighbouring taps, each round,
// oriented so that the fitted flow runs from FromTap to ToTap.
func (f *Fit) Losses() []Loss {
	var out []Loss
	for r := range f.Model.Rounds {
		closed := f.closedIn(r)
		heads := f.measuredTotals(r)
		for _, s := range f.Model.Stretches(f.Model.tapsRead(r), closed) {
			a, okA := heads[s.From]
			b, okB := heads[s.To]
			if okA && okB {
				out = append(out, f.lossOn(r, s, a, b))
			}
		}
	}
	return out
}

func (f *Fit) closedIn(round int) func(int) bool {
	st, c := f.State(round), f.Conditions(round)
	return func(l int) bool {
		if st.Closed[l] {
			return true
		}
		link := f.Model.System.Link(l)
		if link.Pipe == nil {
			return c.Stopped[l]
		}
		for i := range link.Pipe.Fittings {
			if c.FittingShut[f.Model.System.FittingIndex(l, i)] {
				return true
			}
		}
		return c.Shut[l]
	}
}

// tapHead is the measured total head at a tap in a round.
type tapHead struct {
	value    float64
	own      float64 // SD of its own, m
	gauge    int
	perGauge float64 // m of head for one SD of the gauge's offset
	tapSD    float64
	baro     float64
}

// measuredTotals gives the measured total head at each tap read in a round. Where
// several gauges were read at one tap, the most certain one speaks.
func (f *Fit) measuredTotals(round int) map[int]tapHead {
	out := map[int]tapHead{}
	best := map[int]float64{}
	for _, o := range f.Model.Obs {
		h := o.Head
		if o.Round != round || h.Quantity != survey.PiezometricHead {
			continue
		}
		u := h.U()
		if b, ok := best[o.tap]; ok && b <= u {
			continue
		}
		p := o.parts[0].probe
		p.View = hydraulic.VelocityHead
		velocity := f.work.solvers[round].Read(p)
		if math.IsNaN(velocity) {
			velocity = 0
		}
		best[o.tap] = u
		out[o.tap] = tapHead{value: h.Value + velocity - f.blamed(o), own: h.Own, gauge: o.gauge,
			perGauge: h.PerGauge * h.GaugeSD, tapSD: h.PerTap * h.TapSD, baro: h.BarometerSD}
	}
	return out
}

// blamed is what accepted causes of gauge or level falsify a head by, m.
func (f *Fit) blamed(o Observation) float64 {
	sum := 0.0
	for c := len(f.Model.Unknowns); c < len(f.Unknowns); c++ {
		for _, t := range f.Unknowns[c].Targets {
			switch {
			case t.class == onOffset && t.index == o.gauge:
				sum += o.Head.PerGauge * t.Weight * f.Theta(c)
			case t.class == onTapLevel && t.index == o.tap:
				sum += o.Head.PerTap * t.Weight * f.Theta(c)
			}
		}
	}
	return sum
}

func (f *Fit) lossOn(r int, s Stretch, a, b tapHead) Loss {
	m := f.Model
	if f.flowAlong(r, s.Way) < 0 {
		s, a, b = s.reversed(), b, a
	}
	l := Loss{Round: m.Rounds[r].Name, FromTap: m.Survey.Taps[s.From].Name, ToTap: m.Survey.Taps[s.To].Name,
		Items: m.ItemsOn(s.Way), Way: s.Way}
	l.Measured.Value = a.value - b.value
	variance := sq(a.own) + sq(b.own) + sq(a.tapSD) + sq(b.tapSD)
	if a.gauge >= 0 && a.gauge == b.gauge {
		variance += sq(a.perGauge - b.perGauge) // one gauge carried along: its offset cancels
	} else {
		variance += sq(a.perGauge) + sq(b.perGauge)
	}
	if (a.baro > 0) != (b.baro > 0) {
		variance += sq(a.baro) + sq(b.baro)
	}
	l.Measured.SD = math.Sqrt(variance)
	l.Expected = f.expectedLoss(r, s.Way)
	l.Fitted = f.Drop(r, m.ProbeOf(l.FromTap, hydraulic.Total), m.ProbeOf(l.ToTap, hydraulic.Total))
	l.Excess = Estimate{Value: l.Measured.Value - l.Expected.Value, SD: math.Hypot(l.Measured.SD, l.Expected.SD)}
	l.Probability = stat.NormalCDF(l.Excess.Value / l.Excess.SD)
	return l
}

// expectedLoss is what sound works lose along a way at the fitted flows. The
// uncertainties of flows along one way are taken as wholly correlated, which is
// true of a line and safe elsewhere.
func (f *Fit) expectedLoss(r int, w Way) Estimate {
	var e Estimate
	sound, flow := 0.0, 0.0
	c := f.Conditions(r)
	for _, l := range w.Legs {
		q := f.Flow(r, l.Link)
		h, dq, v := f.Model.LossOf(l, q.Value, conditionsOf{c.Viscosity, c.Gravity, c.Speed[l.Link]})
		e.Value += h
		sound += v
		if !math.IsNaN(q.SD) {
			flow += math.Abs(dq) * q.SD
		}
	}
	e.SD = math.Sqrt(sound + flow*flow)
	return e
}

// flowAlong is the mean fitted flow along a way, positive with it.
func (f *Fit) flowAlong(r int, w Way) float64 {
	sum := 0.0
	for _, l := range w.Legs {
		q := f.FlowOf(r, l.Link)
		if l.X1 > l.X2 {
			q = -q
		}
		sum += q
	}
	return sum
}

func (s Stretch) reversed() Stretch {
	out := Stretch{From: s.To, To: s.From, Way: Way{Length: s.Way.Length}}
	for i := len(s.Way.Legs) - 1; i >= 0; i-- {
		l := s.Way.Legs[i]
		out.Way.Legs = append(out.Way.Legs, Leg{l.Link, l.X2, l.X1})
	}
	for i := len(s.Way.Points) - 1; i >= 0; i-- {
		out.Way.Points = append(out.Way.Points, s.Way.Points[i])
	}
	return out
}
