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

// part is one probe of an observation with its weight. A profiled part is a local
// velocity head, which the profile factor e of the tap scales by (1+e)^2.
type part struct {
	probe    hydraulic.Probe
	weight   float64
	profiled bool
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
		return []part{{at(h.Tap, hydraulic.LocalVelocityHead), 1, true}}
	case survey.LocalTotalHead:
		return []part{{at(h.Tap, hydraulic.Piezometric), 1, false}, {at(h.Tap, hydraulic.LocalVelocityHead), 1, true}}
	case survey.HeadDifference:
		return []part{{at(h.Tap, hydraulic.Piezometric), 1, false}, {at(h.OtherTap, hydraulic.Piezometric), -1, false}}
	case survey.VolumeFlow:
		return []part{{at(h.Tap, hydraulic.Flow), 1, false}}
	default: // piezometric head, free water surface
		return []part{{at(h.Tap, hydraulic.Piezometric), 1, false}}
	}
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
