package say

import (
	"fmt"
	"math"
	"strings"

	"tapround/survey"
	"tapround/survey/unit"
)

// Size is the estimate with its 95 % interval, rounded to the nearer end's
// distance. Empty: no estimate.
func Size(f survey.Finding) string {
	if !f.Estimate.OK {
		return ""
	}
	s := Quantity(Interval(f.Estimate, f.Low, f.High), f.Unit)
	if f.Estimate.V > 0 && (f.Kind == survey.GaugeOff || f.Kind == survey.LevelWrong) {
		return "+" + s // an error has a sign
	}
	return s
}

// Quantity puts a unit beside a printed number: "9.1 mm (6.9 to 12.1)", "K 45",
// "C 64", "0.99 times".
func Quantity(number, u string) string {
	switch u {
	case "":
		return number
	case "K", "C":
		return u + " " + number
	case "factor":
		u = "times"
	}
	u = Clean(u)
	// The unit stands after the value and before the interval in brackets.
	if v, rest, ok := strings.Cut(number, " ("); ok {
		return v + " " + u + " (" + rest
	}
	return number + " " + u
}

// Interval is "9.1 (95 %: 6.9 to 12.1)", all three rounded alike; without an
// interval the value alone with three figures.
func Interval(v, low, high survey.Maybe) string {
	if !v.OK {
		return "not determined"
	}
	if !low.OK || !high.OK {
		return unit.Significant(v.V, 3)
	}
	sd := Spread(v, low, high)
	return fmt.Sprintf("%s (95 %%: %s to %s)", Rounded(v.V, sd), Rounded(low.V, sd), Rounded(high.V, sd))
}

// Spread is what an interval is rounded by: the nearer end's distance over 1.96.
func Spread(v, low, high survey.Maybe) float64 {
	return math.Min(math.Abs(v.V-low.V), math.Abs(high.V-v.V)) / 1.96
}

// Rounded is v alone, rounded as its uncertainty asks.
func Rounded(v, sd float64) string {
	s, _, _ := strings.Cut(unit.WithUncertainty(v, sd), " ±")
	return s
}

// By prints m rounded as the uncertainty u asks, without it.
func By(m, u survey.Maybe) string {
	if !m.OK {
		return "–"
	}
	if !u.OK {
		return unit.Significant(m.V, 3)
	}
	return Rounded(m.V, u.V)
}

// With prints m ± u.
func With(m, u survey.Maybe) string {
	if !m.OK {
		return "–"
	}
	return unit.WithUncertainty(m.V, u.Or(math.NaN()))
}

// Stated prints a number as a table states it: no figures it does not need, four at
// most.
func Stated(v float64) string {
	s := unit.Significant(v, 4)
	if strings.Contains(s, ".") {
		s = strings.TrimRight(strings.TrimRight(s, "0"), ".")
	}
	return s
}

// Maybe is a stated number with the figures asked for, or a dash.
func Maybe(m survey.Maybe, digits int) string {
	if !m.OK {
		return "–"
	}
	return unit.Significant(m.V, digits)
}

// Decimals is a stated number with a fixed number of decimals, for columns, or a
// dash.
func Decimals(m survey.Maybe, n int) string {
	if !m.OK {
		return "–"
	}
	s := fmt.Sprintf("%.*f", n, m.V)
	if strings.Trim(s, "-0.") == "" {
		s = strings.TrimPrefix(s, "-")
	}
	return s
}

// Probability never says certain.
func Probability(m survey.Maybe) string {
	switch {
	case !m.OK:
		return "–"
	case m.V > 0.99:
		return "over 99 %"
	case m.V < 0.01:
		return "under 1 %"
	}
	return fmt.Sprintf("%.0f %%", 100*m.V)
}

// Chance is a small probability in per cent.
func Chance(p float64) string {
	switch {
	case p < 0.0001:
		return "less than 0.01 %"
	case p < 0.1:
		return unit.Significant(100*p, 1) + " %"
	}
	return fmt.Sprintf("%.0f %%", 100*p)
}

// Share is a fraction in per cent, as the share told by the survey.
func Share(m survey.Maybe) string {
	if !m.OK {
		return "–"
	}
	return fmt.Sprintf("%.0f %%", 100*m.V)
}
