package head

import (
	"math"

	"tapround/survey"
)

// jet gives the flow of a free jet, m3/s, and its derivative by the pitot's pressure:
// p = rho/2 (Q/(C A))^2, so Q = C A sqrt(2 p/rho) and dQ/dp = Q/(2 p). p is the mean of
// the repeats. The uncertainty of the coefficient is not in it: it belongs to the
// outlet and not to the reading.
func (c *converter) jet(r survey.Corrected, g survey.Gauge, mean float64) (q, slope, p float64) {
	t := c.taps[r.Tap]
	p = c.atTap(r, g, mean)
	q = t.OutletCoefficient.V * math.Pi / 4 * t.OutletBore.V * t.OutletBore.V * math.Sqrt(2*p/c.density(r.Round))
	return q, q / (2 * p), p
}

// jetProblem: a jet needs the outlet's bore and coefficient, and a pressure.
func (c *converter) jetProblem(s *survey.Survey, r survey.Corrected) (survey.Problem, bool) {
	if r.Kind != survey.Jet {
		return survey.Problem{}, false
	}
	t := c.taps[r.Tap]
	var p survey.Problem
	switch {
	case !t.OutletBore.OK || !t.OutletCoefficient.OK:
		p = survey.Problem{Column: "tap", Text: r.Tap, Reason: "the flow of a jet needs the bore and the coefficient of its outlet",
			Remedy: "fill outlet_bore and outlet_coefficient of the tap in taps.csv"}
	case c.atTap(r, c.gauge(r), r.Pressure) <= 0:
		p = survey.Problem{Column: "reading", Text: r.Written, Reason: "a jet has a pressure above zero",
			Remedy: "read it again with the pitot in the middle of the jet"}
	default:
		return survey.Problem{}, false
	}
	for i, x := range s.Readings {
		if x.Source == r.Source && x.Kind == survey.Jet && x.Tap == r.Tap {
			return s.PutAside(i, p), true
		}
	}
	p.Source, p.Severity = r.Source, survey.SetAside
	return p, true
}
