package fault

import (
	"fmt"
	"math"
	"strings"

	"tapround/calibrate/friction"
	"tapround/survey"
	"tapround/survey/catalogue"
	"tapround/survey/unit"
)

// The cautions that go with the work a finding asks for. All are common practice;
// none replaces local codes.
const (
	cautionPressure = "The main is under pressure: nobody stands over a fitting being opened; pressure can stay trapped behind a plug or a shut valve (common practice)."
	cautionSurge    = "Move valves and hydrants slowly, count the turns, and tell the control room first: fast closing makes a surge (common practice)."
	cautionWater    = "Disturbing a fouled main can discolour the supply; what enters drinking water is disinfected (common practice)."
	cautionLocal    = "Local codes and licensed practice decide."
)

// words fills statement, advice, settling reading and cautions.
func (d *Diagnosis) words(a *Accepted, f *survey.Finding) {
	ex := f.LargestExcess()
	cost := ""
	if ex.OK && (lossKind(a.Kind)) {
		cost = fmt.Sprintf("; it costs %s m of head in round %s", unit.Significant(ex.V, 2), d.roundOf(f, ex.V))
	}
	switch {
	case f.Kind == survey.CauseOpen:
		f.Statement = fmt.Sprintf("Between %s more head is lost than sound works would lose%s, but these readings cannot say by which of: %s.",
			strings.ReplaceAll(f.Item, "..", " and "), cost, d.members(a))
		if len(a.Class) == 0 {
			f.Statement = fmt.Sprintf("Between %s more head is lost than sound works would lose%s; %s would explain it, but these readings do not prove it.",
				strings.ReplaceAll(f.Item, "..", " and "), cost, plain(a.Cause))
		}
		f.Advice = d.openAdvice(a)
		f.Settle = d.settle(a)
		f.Cautions = []string{cautionPressure, cautionSurge, cautionLocal}
	case a.Kind == survey.FouledPipe && a.Unknown.Kind == "group":
		f.Statement = fmt.Sprintf("All pipes of group %s carry less than sound ones: their common factor of roughness (or C) is %s.", a.Item, between(f))
		f.Advice = fmt.Sprintf("Take a coupon from one pipe of %s: what it shows, the others are likely to have.", a.Item)
		f.Cautions = []string{cautionPressure, cautionWater, cautionLocal}
	case a.Kind == survey.FouledPipe:
		f.Statement = fmt.Sprintf("Pipe %s carries less than a sound one: %s, where %s is expected%s.", a.Item, d.roughnessWords(f), d.expectedWords(f), cost)
		f.Advice = fmt.Sprintf("Take a coupon or a calliper reading of %s before choosing between cleaning, lining and renewal: pressure readings cannot part a rough wall from a lost bore. %s",
			a.Item, d.capacityWords(a))
		f.Cautions = []string{cautionPressure, cautionWater, cautionLocal}
	case a.Kind == survey.PartClosedValve:
		f.Statement = fmt.Sprintf("Valve %s loses far more than an open one: K %s, where %s is expected%s.", a.Item, between(f), unit.Significant(f.Expected.V, 2), cost)
		f.Advice = fmt.Sprintf("Go to %s, count the turns to the open stop and compare with its record; read the gauges either side before and after. %s", a.Item, d.openingWords(a.Item, f))
		f.Cautions = []string{cautionSurge, cautionPressure, cautionWater, cautionLocal}
	case a.Kind == survey.BlockedFitting:
		f.Statement = fmt.Sprintf("Fitting %s loses far more than a clean one: K %s, where %s is expected%s.", a.Item, between(f), unit.Significant(f.Expected.V, 2), cost)
		f.Advice = fmt.Sprintf("Isolate %s, open and clean or free it, and read the gauges either side again.", a.Item)
		f.Cautions = []string{cautionPressure, cautionSurge, cautionLocal}
	case a.Kind == survey.GaugeOff:
		f.Statement = fmt.Sprintf("Gauge %s reads %s %s than the truth wherever it is used.", a.Item, d.sizeWords(f), higher(f.Estimate.V))
		f.Advice = fmt.Sprintf("Send %s to the bench before it is used again; its readings count here only with this offset taken off.", a.Item)
	case a.Kind == survey.LevelWrong:
		f.Statement = fmt.Sprintf("The recorded level of %s is %s m too %s; the same error shows in every round.", a.Item, unit.WithUncertainty(math.Abs(f.Estimate.V), half(f)), highLow(f.Estimate.V))
		f.Advice = fmt.Sprintf("Level %s again, to the tap itself and on the survey's datum, and correct the table.", a.Item)
	case a.Kind == survey.UnrecordedFlow:
		f.Statement = fmt.Sprintf("About %s L/s leaves the system at or near %s that no table records (%s).", unit.WithUncertainty(f.Estimate.V, half(f)), a.Item, a.Variant)
		f.Advice = fmt.Sprintf("Look for a passing washout, bypass, hydrant or leak near %s at night, when nothing else draws; do not zero gauges on a round with this flow in it.", a.Item)
		f.Cautions = []string{cautionPressure, cautionSurge, cautionLocal}
	case a.Kind == survey.MachineOffCurve:
		f.Statement = fmt.Sprintf("Machine %s gives %s times the head of its works curve.", a.Item, between(f))
		f.Advice = fmt.Sprintf("Check the speed, then read suction and delivery at the flanges of %s at two flows; look at wear rings and impeller before blaming the main.", a.Item)
		f.Cautions = []string{"Isolate and lock off a machine before it is opened (common practice).", cautionLocal}
	}
	if len(a.Class) > 0 && f.Kind != survey.CauseOpen {
		f.Statement += fmt.Sprintf(" The readings cannot tell this from: %s.", d.classWords(a))
		f.Settle = d.settle(a)
	}
}

func (d *Diagnosis) roundOf(f *survey.Finding, v float64) string {
	for _, e := range f.Excess {
		if e.Value == v {
			return e.Round
		}
	}
	return ""
}

func (d *Diagnosis) members(a *Accepted) string {
	return strings.Join(append([]string{plain(a.Cause)}, names(a.Class)...), ", or ")
}

func (d *Diagnosis) classWords(a *Accepted) string { return strings.Join(names(a.Class), ", or ") }

func names(rs []Rival) []string {
	var out []string
	for _, r := range rs {
		out = append(out, plain(r.Cause))
	}
	return out
}

// plain names a cause in the words of the trade.
func plain(c Cause) string {
	switch c.Kind {
	case survey.FouledPipe:
		if c.Unknown.Kind == "group" {
			return "the pipes of group " + c.Item + " fouled"
		}
		return "pipe " + c.Item + " fouled"
	case survey.PartClosedValve:
		return "valve " + c.Item + " part closed"
	case survey.BlockedFitting:
		return "fitting " + c.Item + " blocked"
	case survey.GaugeOff:
		return "gauge " + c.Item + " off"
	case survey.LevelWrong:
		return "level of " + c.Item + " wrong"
	case survey.UnrecordedFlow:
		return "a flow at " + c.Item + " that nobody recorded"
	case survey.MachineOffCurve:
		return "machine " + c.Item + " off its curve"
	case misread:
		return "one wrong reading at " + c.Item + " in round " + c.Variant
	}
	return c.Name()
}

// half is the standard uncertainty that the interval speaks of.
func half(f *survey.Finding) float64 { return (f.High.V - f.Low.V) / (2 * 1.96) }

func between(f *survey.Finding) string {
	v := unit.Significant(f.Estimate.V, 2)
	switch {
	case f.Low.OK && f.High.OK:
		return fmt.Sprintf("%s (95 %%: %s to %s)", v, unit.Significant(f.Low.V, 2), unit.Significant(f.High.V, 2))
	case f.Low.OK:
		return fmt.Sprintf("%s (95 %%: above %s)", v, unit.Significant(f.Low.V, 2))
	case f.High.OK:
		return fmt.Sprintf("%s (95 %%: below %s)", v, unit.Significant(f.High.V, 2))
	}
	return v
}

func (d *Diagnosis) sizeWords(f *survey.Finding) string {
	return unit.WithUncertainty(math.Abs(f.Estimate.V), half(f)) + " " + f.Unit
}

func higher(v float64) string {
	if v < 0 {
		return "lower"
	}
	return "higher"
}

func highLow(v float64) string {
	if v < 0 {
		return "low"
	}
	return "high"
}

// roughnessWords puts k and C side by side: k is quoted as a factor's worth, two
// figures at most.
func (d *Diagnosis) roughnessWords(f *survey.Finding) string {
	l := d.Model.LinkIndex(f.Item)
	if f.Unit == "C" {
		return "equivalent C " + between(f)
	}
	c := d.equivalentC(l, math.Log(f.Estimate.V/1e3))
	return fmt.Sprintf("equivalent roughness %s mm (C about %.0f at the largest flow; like a clean bore of %.0f mm)", between(f), c, 1e3*d.equivalentBore(l))
}

func (d *Diagnosis) expectedWords(f *survey.Finding) string {
	if f.Unit == "C" {
		return "C " + unit.Significant(f.Expected.V, 3)
	}
	l := d.Model.LinkIndex(f.Item)
	return fmt.Sprintf("%s mm (C about %.0f)", unit.Significant(f.Expected.V, 2), d.equivalentC(l, math.Log(f.Expected.V/1e3)))
}

// equivalentC is the Hazen-Williams C that loses as much at the largest flow.
func (d *Diagnosis) equivalentC(link int, lnK float64) float64 {
	r, q := d.busiest(link)
	p := d.Model.System.Link(link).Pipe
	c := d.Final.Conditions(r)
	if q == 0 {
		return math.NaN()
	}
	want := p.Loss(q, lnK, c.Viscosity, c.Gravity).H
	hw := p.Pipe
	hw.Law = friction.HazenWilliams
	at100 := hw.Loss(q, math.Log(100), c.Viscosity, c.Gravity).H
	return 100 * math.Pow(at100/want, 0.54)
}

// equivalentBore is the bore of a clean pipe, of the expected roughness, that loses
// as much at the largest flow.
func (d *Diagnosis) equivalentBore(link int) float64 {
	r, q := d.busiest(link)
	p := d.Model.System.Link(link).Pipe.Pipe
	c := d.Final.Conditions(r)
	want := p.Loss(q, d.Final.LnRough(link), c.Viscosity, c.Gravity).H
	lo, hi := p.Bore/5, p.Bore*1.2
	for i := 0; i < 60; i++ {
		p.Bore = (lo + hi) / 2
		if p.Loss(q, d.Model.ExpectedLnRough(link), c.Viscosity, c.Gravity).H > want {
			lo = p.Bore
		} else {
			hi = p.Bore
		}
	}
	return (lo + hi) / 2
}

// capacityWords says what flow is lost at the same head, from the ratio of losses.
func (d *Diagnosis) capacityWords(a *Accepted) string {
	l := d.Model.LinkIndex(a.Item)
	r, q := d.busiest(l)
	c := d.Final.Conditions(r)
	p := d.Model.System.Link(l).Pipe
	fitted := p.Loss(q, d.Final.LnRough(l), c.Viscosity, c.Gravity).H
	// The flow that sound pipe would pass at the same head, by bisection.
	lo, hi := q, 10*q
	for i := 0; i < 60; i++ {
		mid := (lo + hi) / 2
		if p.Loss(mid, d.Model.ExpectedLnRough(l), c.Viscosity, c.Gravity).H < fitted {
			lo = mid
		} else {
			hi = mid
		}
	}
	length := d.Model.Survey.Pipes[l].Length
	return fmt.Sprintf("At the same head it passes %.0f %% less than it should; it loses %s m/km at %s L/s.",
		100*(1-q/lo), unit.Significant(1e3*fitted/length, 2), unit.Significant(1e3*q, 3))
}

// openingWords gives the range of openings that published tables allow: never one
// percentage.
func (d *Diagnosis) openingWords(valve string, f *survey.Finding) string {
	for _, x := range d.Model.Survey.Fittings {
		if x.Name == valve {
			lo, hi, _, ok := catalogue.ValveOpenings(x.Kind, f.Estimate.V)
			if !ok {
				return "No published table says how far open that is; believe the turns."
			}
			return fmt.Sprintf("Published tables put such a K anywhere from %.0f to %.0f %% open: believe the turns, not the figure.", lo, hi)
		}
	}
	return ""
}

func (d *Diagnosis) openAdvice(a *Accepted) string {
	var valves, pipes []string
	for _, c := range append([]Rival{{Cause: a.Cause}}, a.Class...) {
		switch c.Kind {
		case survey.PartClosedValve, survey.BlockedFitting:
			valves = append(valves, c.Item)
		case survey.FouledPipe:
			pipes = append(pipes, c.Item)
		}
	}
	if len(valves) > 0 {
		return fmt.Sprintf("Cheapest first: go to %s and count the turns or look inside; decide nothing about %s before that.",
			strings.Join(valves, " and "), orElse(strings.Join(pipes, " and "), "the rest"))
	}
	return "Decide nothing yet: take the reading below first."
}

func orElse(s, def string) string {
	if s == "" {
		return def
	}
	return s
}

// settle names the reading that parts the members of a class best.
func (d *Diagnosis) settle(a *Accepted) string {
	next := d.nextFor(a)
	if len(next) == 0 {
		return "No single reading that was tried would part them: take the causes in turn, the cheapest first."
	}
	return next[0].Sentence()
}
