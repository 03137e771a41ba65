package check

import (
	"cmp"
	"math"
	"slices"

	"tapround/survey"
	"tapround/survey/correct"
)

// view is the survey looked up by name, round by round.
type view struct {
	s      *survey.Survey
	limits limits
	gauges correct.Gauges
	taps   map[string]survey.Tap
	points map[string]survey.Point
	pipes  map[string]survey.Pipe
	widest map[string]string // by point: the pipe that a tap there reads on
	rounds []round
}

// round is one round with its conditions and its heads.
type round struct {
	survey.Round
	force survey.RoundConditions
	heads []survey.Head
	still still
	feeds feeds
}

func newView(s *survey.Survey, heads []survey.Head, l limits) *view {
	v := &view{s: s, limits: l, gauges: correct.GaugesOf(s), taps: map[string]survey.Tap{}, points: map[string]survey.Point{},
		pipes: map[string]survey.Pipe{}, widest: map[string]string{}}
	order := map[string]int{}
	for i, t := range s.Taps {
		v.taps[t.Name], order[t.Name] = t, i
	}
	for _, p := range s.Points {
		v.points[p.Name] = p
	}
	for _, p := range s.Pipes {
		v.pipes[p.Name] = p
		for _, end := range []string{p.From, p.To} {
			if w, ok := v.widest[end]; !ok || v.pipes[w].Bore < p.Bore {
				v.widest[end] = p.Name
			}
		}
	}
	for _, r := range s.Rounds {
		x := round{Round: r, force: s.InForce(r.Name)}
		for _, h := range heads {
			if h.Round == r.Name {
				x.heads = append(x.heads, h)
			}
		}
		// In the order of the taps, so that the order of the lines decides nothing.
		slices.SortStableFunc(x.heads, func(a, b survey.Head) int { return cmp.Compare(order[a.Tap], order[b.Tap]) })
		x.still, x.feeds = v.stillness(x.force), v.feedsOf(x.force)
		v.rounds = append(v.rounds, x)
	}
	return v
}

// place gives the pipe that a tap reads on and its chainage there: its own pipe, or at a
// point the widest pipe joined (the first listed on a tie). ok is false at a point
// without a pipe.
func (v *view) place(tap string) (pipe string, at float64, ok bool) {
	t := v.taps[tap]
	if t.Pipe != "" {
		return t.Pipe, t.At, true
	}
	pipe, ok = v.widest[t.Point]
	if p := v.pipes[pipe]; ok && p.To == t.Point {
		at = p.Length
	}
	return pipe, at, ok
}

// gauge gives the gauge a head was read with.
func (v *view) gauge(h survey.Head) survey.Gauge {
	g, _, _ := v.gauges.For(h.Rows[0])
	return g
}

// covariance of two heads: their shared gauge, taps and barometer; with itself (same)
// the variance, of which a head's own part is a term.
func covariance(a, b survey.Head, same bool) float64 {
	c := 0.0
	if same {
		c = a.Own * b.Own
	}
	if a.Gauge == b.Gauge && a.Gauge != "" {
		c += a.PerGauge*a.GaugeSD*b.PerGauge*b.GaugeSD + a.GainSD*a.Value*b.GainSD*b.Value
	}
	for _, x := range levelsOf(a) {
		for _, y := range levelsOf(b) {
			if x.tap == y.tap {
				c += x.effect * y.effect
			}
		}
	}
	if a.Round == b.Round {
		c += a.BarometerSD * b.BarometerSD
	}
	return c
}

// level is the effect of one standard uncertainty of a tap's level on a head.
type level struct {
	tap    string
	effect float64
}

func levelsOf(h survey.Head) []level {
	return []level{{h.Tap, h.PerTap * h.TapSD}, {h.OtherTap, h.PerOther * h.OtherTapSD}}
}

// differ gives a minus b with its standard uncertainty.
func differ(a, b survey.Head) (d, u float64) {
	variance := covariance(a, a, true) + covariance(b, b, true) - 2*covariance(a, b, false)
	return a.Value - b.Value, math.Sqrt(math.Max(variance, 0))
}

// isHead reports whether a head stands above the datum: what a no-flow round makes equal.
func isHead(h survey.Head) bool {
	switch h.Quantity {
	case survey.PiezometricHead, survey.LocalTotalHead, survey.FreeWaterSurface:
		return true
	}
	return false
}

func rss(xs ...float64) float64 {
	s := 0.0
	for _, x := range xs {
		s += x * x
	}
	return math.Sqrt(s)
}
