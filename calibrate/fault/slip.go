package fault

import (
	"fmt"
	"math"
	"strings"

	"tapround/calibrate"
	"tapround/survey"
	"tapround/survey/unit"
)

// Slips of the pen are looked for before the fit: a reading in another unit than the one
// written, or two readings exchanged, would drag every estimate. They are named with the
// correction that would fit and left out; nothing is corrected silently.
const (
	slipFar  = 6.0 // standard deviations from what was expected before a reading counts as a slip
	slipNear = 2.5 // and what is left after the correction
)

// Slip is a reading, or a pair of them, that a slip of the pen explains.
type Slip struct {
	Obs       []int
	Unit      *unit.Mistake // set for a wrong unit
	Before    []float64     // surprise before the correction, in standard deviations
	After     []float64
	Statement string
}

// slips finds them from what was expected before any reading.
func slips(m *calibrate.Model) ([]Slip, error) {
	f, err := m.Prior()
	if err != nil {
		return nil, err
	}
	var out []Slip
	taken := map[int]bool{}
	open := m.OpenRounds()
	for i, o := range m.Obs {
		if open[o.Round] {
			// A flow or level that nobody stated leaves nothing to be surprised at.
			taken[i] = true
			continue
		}
		if s, ok := wrongUnit(f, i, o.Head); ok {
			out = append(out, s)
			taken[i] = true
		}
	}
	for i := range m.Obs {
		for k := i + 1; k < len(m.Obs); k++ {
			if taken[i] || taken[k] {
				continue
			}
			if s, ok := exchanged(f, i, k); ok {
				out = append(out, s)
				taken[i], taken[k] = true, true
			}
		}
	}
	return out, nil
}

// wrongUnit tries the ratios of units that are taken for one another. Ratios near 1
// (bar and kgf/cm2) cannot be told from a gain error and are passed over.
func wrongUnit(f *calibrate.Fit, i int, h survey.Head) (Slip, bool) {
	z, sd := f.Surprise(i)
	if math.Abs(z) < slipFar || len(h.Rows) == 0 || h.PerGauge == 0 {
		return Slip{}, false
	}
	dim := unit.Pressure
	switch h.Quantity {
	case survey.VolumeFlow:
		dim = unit.Flow
	case survey.FreeWaterSurface:
		dim = unit.Length
	}
	row := h.Rows[0]
	if f.Model.GaugeNamed(h.Gauge).Kind == survey.AbsoluteGauge {
		return Slip{}, false
	}
	wrote, err := unit.Parse(row.Unit, dim)
	if err != nil {
		return Slip{}, false
	}
	best := Slip{}
	for _, x := range unit.Mistakes(dim) {
		if x.Wrote.Name != wrote.Name || (x.Ratio > 0.8 && x.Ratio < 1.25) {
			continue
		}
		after := z + (row.Value/x.Ratio-row.Value)*h.PerGauge/sd
		if math.Abs(after) < slipNear && (best.Unit == nil || math.Abs(after) < math.Abs(best.After[0])) {
			mistake := x
			best = Slip{Obs: []int{i}, Unit: &mistake, Before: []float64{z}, After: []float64{after}}
			best.Statement = fmt.Sprintf("The reading %s %s at %s in round %s looks like %s: as %s it would be where it should.",
				row.Written, row.Unit, h.Tap, h.Round, x.Meant.Name, x.Meant.Name)
		}
	}
	return best, best.Unit != nil
}

// exchanged tries whether two pressures of one round belong to each other's taps.
func exchanged(f *calibrate.Fit, i, k int) (Slip, bool) {
	a, b := f.Model.Obs[i].Head, f.Model.Obs[k].Head
	if a.Round != b.Round || a.Tap == b.Tap || a.Quantity != survey.PiezometricHead || b.Quantity != survey.PiezometricHead {
		return Slip{}, false
	}
	za, sa := f.Surprise(i)
	zb, sb := f.Surprise(k)
	if math.Abs(za) < slipFar || math.Abs(zb) < slipFar {
		return Slip{}, false
	}
	// Pressure heads change places; each tap keeps its level.
	shift := (b.Value - b.Elevation) - (a.Value - a.Elevation)
	na, nb := za+shift/sa, zb-shift/sb
	if math.Abs(na) > slipNear || math.Abs(nb) > slipNear {
		return Slip{}, false
	}
	return Slip{Obs: []int{i, k}, Before: []float64{za, zb}, After: []float64{na, nb},
		Statement: fmt.Sprintf("The readings at %s and %s in round %s look exchanged: each fits the other's tap.", a.Tap, b.Tap, a.Round)}, true
}

// unitFindings are the findings that wrong units give: of a gauge where all its
// readings have the same slip, else of the tap.
func (d *Diagnosis) unitFindings() []survey.Finding {
	var out []survey.Finding
	for _, s := range d.Slips {
		if s.Unit == nil {
			continue
		}
		h := d.Model.Obs[s.Obs[0]].Head
		item := h.Tap
		if d.allOf(h.Gauge) {
			item = h.Gauge
		}
		done := false
		for i := range out {
			if out[i].Item == item && out[i].Unit == s.Unit.Meant.Name {
				out[i].Rounds = append(out[i].Rounds, h.Round)
				out[i].Sources = append(out[i].Sources, h.Sources()...)
				done = true
			}
		}
		if done {
			continue
		}
		out = append(out, survey.Finding{Kind: survey.UnitSuspect, Item: item, Grade: survey.Likely, Unit: s.Unit.Meant.Name,
			Estimate: survey.Some(s.Unit.Ratio), Rounds: []string{h.Round}, Sources: h.Sources(), Statement: s.Statement,
			Evidence: []string{fmt.Sprintf("%.0f standard deviations from what was expected as written, %.1f as %s", s.Before[0], s.After[0], s.Unit.Meant.Name)},
			Advice:   "Look at the gauge's face and correct the unit in the readings; until then the reading does not count."})
	}
	return out
}

// allOf reports whether every reading of a gauge is a slip of unit.
func (d *Diagnosis) allOf(gauge string) bool {
	slip := map[int]bool{}
	for _, s := range d.Slips {
		if s.Unit != nil {
			slip[s.Obs[0]] = true
		}
	}
	n := 0
	for i, o := range d.Model.Obs {
		if o.Head.Gauge == gauge {
			n++
			if !slip[i] {
				return false
			}
		}
	}
	return n > 1
}

// exchangeAlerts name exchanged readings for the crew.
func (d *Diagnosis) exchangeAlerts() []survey.Alert {
	var out []survey.Alert
	for _, s := range d.Slips {
		if s.Unit != nil {
			continue
		}
		a, b := d.Model.Obs[s.Obs[0]].Head, d.Model.Obs[s.Obs[1]].Head
		out = append(out, survey.Alert{Rule: "readings exchanged", Subject: strings.Join([]string{a.Tap, b.Tap}, " "), Statement: s.Statement,
			Evidence: fmt.Sprintf("%.0f and %.0f standard deviations from what was expected as written, %.1f and %.1f exchanged", s.Before[0], s.Before[1], s.After[0], s.After[1]),
			Limit:    fmt.Sprintf("beyond %.0f as written and within %.1f exchanged (default)", slipFar, slipNear),
			Action:   "Read both again; until then neither counts.", Stay: true, Sources: append(a.Sources(), b.Sources()...)})
	}
	return out
}
