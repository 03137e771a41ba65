package figure

import (
	"math"
	"strconv"

	"gonum.org/v1/plot"
)

// scale is a range of an axis that ends on its ticks or just past the data, with
// its step.
type scale struct {
	min, max float64
	step     float64 // between labelled ticks
	minor    int     // parts of a step
	per      float64 // printed value = value/per
}

// newScale covers lo..hi with about n labelled steps of 1, 2 or 5 times a power of
// ten; the ends are moved outward to a minor tick.
func newScale(lo, hi float64, n int) scale {
	if !(hi > lo) { // one level all along: show a metre around it
		lo, hi = lo-0.5, hi+0.5
	}
	step, minor := niceStep((hi - lo) / float64(max(n, 1)))
	s := scale{step: step, minor: minor, per: 1}
	small := step / float64(minor)
	s.min = math.Floor(lo/small+1e-9) * small
	s.max = math.Ceil(hi/small-1e-9) * small
	return s
}

// niceStep gives the step of the 1-2-5 series at or above x and into how many
// parts it is cut.
func niceStep(x float64) (step float64, minor int) {
	p := math.Pow(10, math.Floor(math.Log10(x)))
	switch m := x / p; {
	case m <= 1+1e-9:
		return p, 5
	case m <= 2+1e-9:
		return 2 * p, 4
	case m <= 5+1e-9:
		return 5 * p, 5
	}
	return 10 * p, 5
}

// Ticks makes a scale a ticker of the plotting library: labelled ones at each step,
// with the decimals the step needs, and unlabelled ones between.
func (s scale) Ticks(lo, hi float64) []plot.Tick {
	var out []plot.Tick
	decimals := max(0, -int(math.Floor(math.Log10(s.step/s.per)+1e-9)))
	small := s.step / float64(s.minor)
	first := int(math.Ceil(lo/small - 1e-6))
	last := int(math.Floor(hi/small + 1e-6))
	for i := first; i <= last; i++ {
		t := plot.Tick{Value: float64(i) * small}
		if i%s.minor == 0 {
			t.Label = strconv.FormatFloat(t.Value/s.per+0, 'f', decimals, 64) // +0: no "-0"
		}
		out = append(out, t)
	}
	return out
}
