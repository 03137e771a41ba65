package survey

import "fmt"

func (v *validation) requirements() {
	for i := range v.Requirements {
		q := &v.Requirements[i]
		switch q.Kind {
		case "loss-at-most":
			v.place(q, "item", q.Item)
			switch q.To {
			case "":
				v.fatal(q.Source, "to", "", "a loss is from one place to another", "write the tap or point where the stretch ends")
			case q.Item:
				v.fatal(q.Source, "to", q.To, "the stretch begins and ends at one place", "write the tap or point where it ends")
			default:
				v.place(q, "to", q.To)
			}
		case "pressure-at-least", "head-at-least":
			v.place(q, "item", q.Item)
		case "roughness-at-most", "c-at-least":
			if v.pipe[q.Item] == nil {
				v.unknown(q.Source, "item", q.Item, "pipes.csv", v.pipeNames())
			}
			v.law(q)
		case "k-at-most":
			if v.fitting[q.Item] == nil {
				v.unknown(q.Source, "item", q.Item, "fittings.csv", v.fittingNames())
			}
		case "duty":
			if v.machine[q.Item] == nil {
				v.unknown(q.Source, "item", q.Item, "machines.csv", v.machineNames())
			}
			if !q.AtFlow.OK {
				v.fatal(q.Source, "at_flow", "", "a duty is a head at a flow", "write the flow of the guarantee")
			}
		}
		v.requirementNumbers(q)
	}
}

// place looks for a tap or a point. A name that both have must mean one place.
func (v *validation) place(q *Requirement, column, name string) {
	t, p := v.tap[name], v.point[name]
	switch {
	case t == nil && p == nil:
		v.unknown(q.Source, column, name, "taps.csv or points.csv", append(v.tapNames(), v.pointNames()...))
	case t != nil && p != nil && t.Point != name:
		v.fatal(q.Source, column, name, fmt.Sprintf("means two places: a tap (%s) and a point (%s)", t.Source, p.Source), "give them different names")
	}
}

// law points out a limit on a coefficient that the survey's friction law has not.
func (v *validation) law(q *Requirement) {
	if hw := v.Info.FrictionLaw == HazenWilliams; hw != (q.Kind == "c-at-least") {
		v.notice(q.Source, "kind", q.Kind, fmt.Sprintf("the survey's friction law is %s, which has no such coefficient", v.Info.FrictionLaw), "change friction_law in survey.csv, or the requirement")
	}
}

func (v *validation) requirementNumbers(q *Requirement) {
	if q.Kind != "" && q.Kind != "loss-at-most" && q.To != "" {
		v.notice(q.Source, "to", q.To, fmt.Sprintf("%s has one place; this was not used", q.Kind), "leave it empty")
	}
	if q.AtFlow.OK && q.AtFlow.V <= 0 {
		v.fatal(q.Source, "at_flow", "", "must be above nought", "correct the number")
	}
	switch q.Kind {
	case "roughness-at-most", "c-at-least", "duty":
		if q.Limit <= 0 {
			v.fatal(q.Source, "limit", "", "must be above nought", "correct the number")
		}
	case "loss-at-most", "k-at-most":
		if q.Limit < 0 {
			v.fatal(q.Source, "limit", "", "is below nought", "correct the number")
		}
	}
}

func (v *validation) channels() {
	for i := range v.Channels {
		c := &v.Channels[i]
		if v.tap[c.Tap] == nil {
			v.unknown(c.Source, "tap", c.Tap, "taps.csv", v.tapNames())
		}
		if g := v.gauge[c.Gauge]; g == nil {
			v.unknown(c.Source, "gauge", c.Gauge, "gauges.csv", v.gaugeNames())
		}
	}
}
