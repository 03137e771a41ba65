package check

import (
	"fmt"
	"math"
	"slices"

	"tapround/survey"
)

// exchanged looks for two taps of a no-flow round whose readings, put in each other's
// place, agree with the rest. Either the whole lines are exchanged (each gauge's height
// goes with it) or the numbers alone. Both must stand within the limits of the rest
// afterwards, and the exchange must explain more than taking out the one worst suspect
// does, by more than chance would: it costs no free number, the suspect's size is one.
func (v *view) exchanged(r round, m mean, worst suspect) (survey.Alert, []witness, bool) {
	var best []witness
	var bi, bj int
	bestChi2 := math.Inf(1)
	wanted := worst.z()*worst.z() + math.Pow(v.limits.exchanged.value, 2)
	for i := range m.ws {
		for j := i + 1; j < len(m.ws); j++ {
			if !exchangeable(m.ws[i], m.ws[j]) {
				continue
			}
			for _, withLine := range []bool{true, false} {
				a, b := v.exchange(m.ws[i].head, m.ws[j].head, withLine)
				// Gauges of other accuracy change the covariance, so what is foretold
				// without that decides only what is looked at in full.
				if m.dropOf(i, j, a.Value-m.ws[i].value(), b.Value-m.ws[j].value()) < wanted/2 {
					continue
				}
				ws := slices.Clone(m.ws)
				ws[i].head, ws[j].head = a, b
				n, ok := meanOf(ws)
				if !ok || n.chi2 >= bestChi2 || !v.within(n, i) || !v.within(n, j) {
					continue
				}
				best, bestChi2, bi, bj = ws, n.chi2, i, j
			}
		}
	}
	if best == nil || m.chi2-bestChi2 < wanted {
		return survey.Alert{}, nil, false
	}
	a, b := m.ws[bi].head, m.ws[bj].head
	if b.Value > a.Value {
		a, b = b, a
	}
	return survey.Alert{
		Rule: "readings look exchanged", Subject: a.Tap + " " + b.Tap,
		Statement: fmt.Sprintf("%s and %s look exchanged in round %s: in each other's place they agree with the rest.", a.Tap, b.Tap, r.Name),
		Evidence: fmt.Sprintf("with nothing flowing the common head is %.2f m; %s shows %.2f m and %s %.2f m; exchanged %.2f m and %.2f m",
			levelWithout(best, bi, bj), m.ws[bi].head.Tap, m.ws[bi].value(), m.ws[bj].head.Tap, m.ws[bj].value(), best[bi].value(), best[bj].value()),
		Limit:   v.limits.exchanged.String(),
		Action:  fmt.Sprintf("Read %s and %s again, with the tap's name in sight, and correct the lines named here.", a.Tap, b.Tap),
		Stay:    true,
		Sources: append(m.ws[bi].head.Sources(), m.ws[bj].head.Sources()...),
	}, best, true
}

func exchangeable(a, b witness) bool {
	return a.reservoir == "" && b.reservoir == "" && a.head.Pressure.OK && b.head.Pressure.OK && a.head.Tap != b.head.Tap
}

// exchange puts the readings of two heads in each other's place. Gauge and own
// uncertainty go with the reading, the level stays with the tap.
func (v *view) exchange(a, b survey.Head, withLine bool) (survey.Head, survey.Head) {
	pa, pb := a.Pressure.V, b.Pressure.V // at the tap
	if !withLine {
		pa, pb = pa-v.line(a), pb-v.line(b)
	}
	x, y := a, b
	x.Value += (pb - pa) / (a.Density * a.Gravity)
	y.Value += (pa - pb) / (b.Density * b.Gravity)
	x.Pressure, y.Pressure = survey.Some(a.Pressure.V+pb-pa), survey.Some(b.Pressure.V+pa-pb)
	x.Gauge, x.Own, x.PerGauge, x.GaugeSD, x.BarometerSD, x.Rows = b.Gauge, b.Own, b.PerGauge, b.GaugeSD, b.BarometerSD, b.Rows
	y.Gauge, y.Own, y.PerGauge, y.GaugeSD, y.BarometerSD, y.Rows = a.Gauge, a.Own, a.PerGauge, a.GaugeSD, a.BarometerSD, a.Rows
	return x, y
}

// line is the pressure that a water-filled gauge line adds, Pa.
func (v *view) line(h survey.Head) float64 {
	if v.gauge(h).Line == survey.AirLine {
		return 0
	}
	return h.Density * h.Gravity * h.Rows[0].GaugeHeight
}

// within reports whether a witness stands within the limit of the rest.
func (v *view) within(m mean, i int) bool {
	x := suspect{members: []int{i}}
	return m.measure(&x) && x.z() <= v.limits.apart.value
}

// levelWithout is the mean of all but two witnesses, or of all where no more are there.
func levelWithout(ws []witness, i, j int) float64 {
	if rest := without(ws, []int{i, j}); len(rest) > 0 {
		ws = rest
	}
	m, _ := meanOf(ws)
	return m.level
}
