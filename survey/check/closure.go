package check

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"tapround/survey"
	"tapround/survey/unit"
)

// closure takes each part of the system that is at rest in a round and asks whether its
// readings, and the reservoir's level where one is stated, show one head. What stands
// apart most, a tap, all taps of one gauge, or the level, is named, taken out, and the
// rest looked at again.
func closure(v *view) []survey.Alert {
	var out []survey.Alert
	for _, r := range v.rounds {
		for _, ws := range v.atRest(r) {
			out = append(out, v.close(r, ws)...)
		}
		for _, h := range r.heads {
			out = append(out, v.notNothing(r, h)...)
		}
	}
	return out
}

// notNothing looks at a flow, a velocity head or a difference read where nothing flows,
// which must be nothing.
func (v *view) notNothing(r round, h survey.Head) []survey.Alert {
	pipe, at, ok := v.place(h.Tap)
	if isHead(h) || h.Quantity == survey.OutletFlow || !ok || !r.still.along(pipe, at) {
		return nil
	}
	show := unit.Metre
	switch h.Quantity {
	case survey.HeadDifference:
		a, _ := r.still.open(v.taps[h.Tap])
		b, ok := r.still.open(v.taps[h.OtherTap])
		if !ok || a != b {
			return nil
		}
	case survey.VolumeFlow:
		show = unit.LitrePerSecond
		if u, err := unit.Parse(v.gauge(h).Unit, unit.Flow); err == nil {
			show = u
		}
	}
	z := math.Abs(h.Value) / h.U()
	if !(z > v.limits.apart.value) {
		return nil
	}
	return []survey.Alert{{Rule: "no-flow round does not close", Subject: h.Tap,
		Statement: fmt.Sprintf("With nothing flowing in round %s, the %s at %s is not nothing.", r.Name, h.Quantity, h.Tap),
		Evidence:  fmt.Sprintf("%s (± one standard uncertainty), %.1f times its standard uncertainty", show.Format(h.Value, h.U()), z),
		Limit:     v.limits.apart.String(), Stay: z > v.limits.stay.value, Sources: h.Sources(),
		Action: "Check the zero of the gauge or meter; if that is right, something is drawn off after all: find it, or state it in conditions.csv."}}
}

// atRest lists the witnesses of each part at rest that has two or more.
func (v *view) atRest(r round) [][]witness {
	var order []string
	groups := map[string][]witness{}
	for _, h := range r.heads {
		reservoir, ok := r.still.open(v.taps[h.Tap])
		if !ok || !isHead(h) {
			continue
		}
		if groups[reservoir] == nil {
			order = append(order, reservoir)
		}
		groups[reservoir] = append(groups[reservoir], witness{head: h})
	}
	var out [][]witness
	for _, name := range order {
		ws := groups[name]
		if l, ok := r.force.Levels[name]; ok && l.Value.OK {
			ws = append(ws, witness{reservoir: name, level: l})
		}
		if len(ws) > 1 {
			out = append(out, ws)
		}
	}
	return out
}

// close looks at one part at rest until what is left agrees.
func (v *view) close(r round, ws []witness) []survey.Alert {
	var out []survey.Alert
	for len(ws) > 1 {
		m, ok := meanOf(ws)
		if !ok {
			return out
		}
		worst := m.worst()
		if len(worst) == 0 || worst[0].z() <= v.limits.apart.value {
			return out
		}
		if a, changed, ok := v.exchanged(r, m, worst[0]); ok {
			out, ws = append(out, a), changed
			continue
		}
		if a, ok := v.stillUnit(r, m, worst); ok {
			out = append(out, a)
		} else {
			out = append(out, v.doesNotClose(r, m, worst))
		}
		if len(worst) > 1 {
			return out // which of them to take out is open
		}
		ws = without(ws, worst[0].members)
	}
	return out
}

func without(ws []witness, members []int) []witness {
	var out []witness
	for i, w := range ws {
		if !slices.Contains(members, i) {
			out = append(out, w)
		}
	}
	return out
}

// plain is how far, m, the size of a suspect may be from what the printed heads differ by
// without a word of explanation.
const plain = 0.01

// doesNotClose words the alert.
func (v *view) doesNotClose(r round, m mean, worst []suspect) survey.Alert {
	x := worst[0]
	a := survey.Alert{Rule: "no-flow round does not close", Limit: v.limits.apart.String(), Stay: x.z() > v.limits.stay.value,
		Sources: m.sources(worst)}
	if len(worst) > 1 {
		var names []string
		for _, y := range worst {
			names = append(names, y.name())
		}
		a.Subject = strings.Join(names, ", ")
		a.Statement = fmt.Sprintf("With nothing flowing in round %s, %s disagree, and the readings do not say which of them is off.", r.Name, strings.Join(names, " and "))
		a.Evidence = fmt.Sprintf("they differ by %s (± one standard uncertainty)", unit.Metre.Format(math.Abs(x.size), x.sd))
		a.Action = "Read each of them again with a third gauge; if that agrees, level the taps again."
		return a
	}
	a.Subject = x.name()
	a.Statement = fmt.Sprintf("With nothing flowing in round %s, %s stands %s %s the rest.", r.Name, x.words(), unit.Metre.Format(math.Abs(x.size), x.sd), aboveOrBelow(x.size))
	a.Evidence = fmt.Sprintf("%s; the rest shows %.2f m (%s); ", m.shown(x), x.rest, count(x.restCount, "reading"))
	if x.tap != "" && math.Abs(m.ws[x.members[0]].value()-x.rest-x.size) > plain {
		a.Evidence += fmt.Sprintf("%.2f m %s once allowance is made for what gauge %s shows elsewhere, ", math.Abs(x.size), aboveOrBelow(x.size), x.gauge)
	}
	a.Evidence += fmt.Sprintf("%.1f times its standard uncertainty", x.z())
	if fits := v.nearUnits(r, m, x); fits != "" {
		a.Evidence += "; another unit would explain it too: " + fits
	}
	fine := m.fineElsewhere(v, x)
	switch {
	case x.level != "":
		a.Action = fmt.Sprintf("Read the water level of %s again and check that it is on the survey's datum.", x.level)
	case x.tap == "":
		a.Action = fmt.Sprintf("Gauge %s is off at all %d taps it was read at: check its zero in air, and read one of the taps with another gauge.", x.gauge, x.gaugeTaps)
	case fine != "":
		a.Evidence += fmt.Sprintf("; gauge %s agrees with the rest at %s", x.gauge, fine)
		a.Action = fmt.Sprintf("Bleed the line and read %s again; if it stays, level the tap again: its gauge is right elsewhere.", x.tap)
	default:
		a.Action = fmt.Sprintf("Bleed the line and read %s again with another gauge: what follows the gauge is the gauge, what stays is the tap's level or its line.", x.tap)
	}
	a.Action += " If something was drawn off after all, state it in conditions.csv."
	return a
}

// fineElsewhere names a tap at which the gauge of a suspect tap agrees with the rest,
// the suspect left out.
func (m mean) fineElsewhere(v *view, x suspect) string {
	if x.tap == "" || x.gauge == "" {
		return ""
	}
	rest, ok := meanOf(without(m.ws, x.members))
	if !ok {
		return ""
	}
	for i, w := range rest.ws {
		if w.reservoir == "" && w.head.Gauge == x.gauge && v.within(rest, i) {
			return w.head.Tap
		}
	}
	return ""
}

// nearUnits names the units that would bring the one reading of a suspect to the rest.
func (v *view) nearUnits(r round, m mean, x suspect) string {
	if len(x.members) != 1 || x.level != "" {
		return ""
	}
	var names []string
	h := m.ws[x.members[0]].head
	for _, f := range v.fitting(r, h, v.asTheRest(h, x)) {
		names = append(names, f.words)
	}
	return strings.Join(names, ", ")
}

func (x suspect) name() string {
	switch {
	case x.level != "":
		return x.level
	case x.tap == "":
		return x.gauge
	}
	return x.tap
}

func (x suspect) words() string {
	switch {
	case x.level != "":
		return "the stated level of " + x.level
	case x.tap == "":
		return fmt.Sprintf("gauge %s, at %d taps,", x.gauge, x.gaugeTaps)
	case x.gauge != "":
		return fmt.Sprintf("%s (gauge %s)", x.tap, x.gauge)
	}
	return x.tap
}

// shown lists what the members of a suspect show.
func (m mean) shown(x suspect) string {
	var out []string
	for _, i := range x.members {
		w := m.ws[i]
		if w.reservoir != "" {
			out = append(out, fmt.Sprintf("%s stated at %.2f m", w.reservoir, w.value()))
			continue
		}
		out = append(out, fmt.Sprintf("%s shows %.2f m", w.head.Tap, w.value()))
	}
	return strings.Join(out, ", ")
}

func (m mean) sources(xs []suspect) []survey.Source {
	var out []survey.Source
	for _, x := range xs {
		for _, i := range x.members {
			if w := m.ws[i]; w.reservoir != "" {
				out = append(out, w.level.Source)
			} else {
				out = append(out, w.head.Sources()...)
			}
		}
	}
	return out
}

func aboveOrBelow(d float64) string {
	if d < 0 {
		return "below"
	}
	return "above"
}

// count gives "1 reading", "5 readings".
func count(n int, what string) string {
	if n == 1 {
		return "1 " + what
	}
	return fmt.Sprintf("%d %ss", n, what)
}
