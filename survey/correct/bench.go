package correct

import (
	"slices"

	"tapround/survey"
)

// benchShare is the part of the class error that a bench check leaves (the survey
// contract; common practice: a reference four times as good as the gauge).
const benchShare = 0.25

// benchPoint is one indication of a bench check with its error, shown minus true.
type benchPoint struct{ indicated, err float64 }

// benchError is the error of a gauge, indicated minus applied, at an indication:
// linear between the points of its bench check, the error of the end points beyond
// them. inside reports whether the indication lies between points.
func benchError(checks []survey.BenchCheck, indication float64) (e float64, inside bool) {
	ps := benchPoints(checks)
	first, last := ps[0], ps[len(ps)-1]
	switch {
	case indication <= first.indicated:
		return first.err, indication == first.indicated
	case indication >= last.indicated:
		return last.err, indication == last.indicated
	}
	i, _ := slices.BinarySearchFunc(ps, indication, func(p benchPoint, v float64) int {
		if p.indicated < v {
			return -1
		}
		return 1
	})
	a, b := ps[i-1], ps[i]
	t := (indication - a.indicated) / (b.indicated - a.indicated)
	return (1-t)*a.err + t*b.err, true
}

// benchPoints orders the points of a check by indication. Points of one applied
// pressure are averaged first: a check goes up the scale and comes down again, and
// the two differ by the gauge's hysteresis, over which no line can be drawn. Points of
// one indication are averaged too.
func benchPoints(checks []survey.BenchCheck) []benchPoint {
	type mean struct {
		indicated, n float64
	}
	byApplied := map[float64]mean{}
	for _, c := range checks {
		m := byApplied[c.Applied]
		byApplied[c.Applied] = mean{m.indicated + c.Indicated, m.n + 1}
	}
	var ps []benchPoint
	for applied, m := range byApplied {
		ps = append(ps, benchPoint{m.indicated / m.n, m.indicated/m.n - applied})
	}
	slices.SortFunc(ps, func(a, b benchPoint) int {
		switch {
		case a.indicated < b.indicated:
			return -1
		case a.indicated > b.indicated:
			return 1
		case a.err < b.err: // a fixed order, for map order is none
			return -1
		}
		return 1
	})
	out := ps[:0]
	for i := 0; i < len(ps); {
		j, sum := i, 0.0
		for ; j < len(ps) && ps[j].indicated == ps[i].indicated; j++ {
			sum += ps[j].err
		}
		out = append(out, benchPoint{ps[i].indicated, sum / float64(j-i)})
		i = j
	}
	return out
}

// severalDates reports whether the points were taken on more than one day.
func severalDates(checks []survey.BenchCheck) bool {
	for _, c := range checks {
		if c.Checked != checks[0].Checked {
			return true
		}
	}
	return false
}
