package calibrate

import (
	"math"

	"tapround/calibrate/hydraulic"
	"tapround/survey"
)

// Observation is one head of the survey as the fit sees it: which probes of the
// steady model make it up, and which shared errors it carries.
type Observation struct {
	Head  survey.Head
	Round int
	parts []part
	gauge int // index, -1: none
	tap   int
	other int // -1: none
}

// part is one probe of an observation with its weight. The tap's own factor e scales
// it by (1+e)^power: 2 for a local velocity head (e of u/V), 1 for a jet (e of the
// outlet's coefficient), 0 for all else. A drawn part is no probe of the model but
// what is drawn off at a point; stated is the share of it that another row records.
type part struct {
	probe  hydraulic.Probe
	weight float64
	power  int
	drawn  bool
	point  int
	stated float64
}

// factor is (1+e)^power.
func (p part) factor(e float64) float64 {
	switch p.power {
	case 1:
		return 1 + e
	case 2:
		return (1 + e) * (1 + e)
	}
	return 1
}

// observe turns heads into observations. Heads in a part of the system that
// nothing feeds in their round, at the expected values, are kept apart.
func (m *Model) observe(heads []survey.Head) error {
	w := m.NewWorkspace()
	if err := w.solve(); err != nil {
		return err
	}
	for i := range m.Rounds {
		m.Rounds[i].Flowing = w.flowing(i)
		m.Rounds[i].Caveats = w.states[i].Caveats
	}
	for _, h := range heads {
		o := Observation{Head: h, Round: m.rounds[h.Round], gauge: -1, other: -1, tap: m.taps[h.Tap]}
		if g, ok := m.gauges[h.Gauge]; ok {
			o.gauge = g
		}
		if h.OtherTap != "" {
			o.other = m.taps[h.OtherTap]
		}
		o.parts = m.partsOf(h)
		if math.IsNaN(w.readParts(o, 0)) {
			m.Unread = append(m.Unread, Unread{Head: h, Reason: "nothing feeds this part of the system in the round"})
			continue
		}
		m.Obs = append(m.Obs, o)
	}
	return nil
}

func (m *Model) partsOf(h survey.Head) []part {
	depth := math.NaN()
	if h.Depth.OK {
		depth = h.Depth.V
	}
	at := func(tap string, v hydraulic.View) hydraulic.Probe {
		p := m.ProbeOf(tap, v)
		p.Depth = depth
		return p
	}
	switch h.Quantity {
	case survey.LocalVelocity:
		return []part{{probe: at(h.Tap, hydraulic.LocalVelocityHead), weight: 1, power: 2}}
	case survey.LocalTotalHead:
		return []part{{probe: at(h.Tap, hydraulic.Piezometric), weight: 1}, {probe: at(h.Tap, hydraulic.LocalVelocityHead), weight: 1, power: 2}}
	case survey.HeadDifference:
		return []part{{probe: at(h.Tap, hydraulic.Piezometric), weight: 1}, {probe: at(h.OtherTap, hydraulic.Piezometric), weight: -1}}
	case survey.VolumeFlow:
		return []part{{probe: at(h.Tap, hydraulic.Flow), weight: 1}}
	case survey.OutletFlow:
		return []part{m.jetPart(h)}
	default: // piezometric head, free water surface
		return []part{{probe: at(h.Tap, hydraulic.Piezometric), weight: 1}}
	}
}

// jetPart: a jet measures what its outlet draws off. Where a row leaves the
// draw-off of the point open, the jet speaks of that row, and rows with a value (the
// customers behind the hydrant) come on top.
func (m *Model) jetPart(h survey.Head) part {
	p := part{weight: 1, power: 1, drawn: true, point: m.pointOf(h.Tap)}
	open, stated := false, 0.0
	for _, d := range m.Survey.InForce(h.Round).DrawOffs[m.Survey.Points[p.point].Name] {
		open = open || !d.Value.OK
		stated += d.Value.Or(0)
	}
	if open {
		p.stated = stated
	}
	return p
}

// pointOf is the point of a tap, or the nearer end of its pipe.
func (m *Model) pointOf(tap string) int {
	t := m.Survey.Taps[m.taps[tap]]
	if t.Point != "" {
		return m.points[t.Point]
	}
	from, to := m.endsOf(m.links[t.Pipe])
	if t.At <= m.lengthOf(m.links[t.Pipe])/2 {
		return from
	}
	return to
}

// ProbeOf gives the probe of the steady model at a tap: on its pipe, or at its
// point reading on the widest pipe there.
func (m *Model) ProbeOf(tap string, v hydraulic.View) hydraulic.Probe {
	t := m.Survey.Taps[m.taps[tap]]
	if t.Point != "" {
		p := m.points[t.Point]
		return hydraulic.Probe{Point: p, Link: m.readsOn[p], View: v, Depth: math.NaN()}
	}
	return hydraulic.Probe{Point: -1, Link: m.links[t.Pipe], At: t.At, View: v, Depth: math.NaN()}
}
