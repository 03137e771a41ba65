package catalogue

import (
	"math"

	"tapround/survey"
)

// opening is one line of a published table: K on the pipe's velocity head at an
// opening in per cent of the travel, 100 fully open. Quarter-turn valves count
// their angle, 90 degrees being 100 %.
type opening struct{ percent, k float64 }

// curve is one published table of one kind of valve, from open to shut.
type curve struct {
	kind   survey.FittingKind
	points []opening
	source string
}

// turned is the opening at an angle from fully open, degrees.
func turned(degrees float64) float64 { return 100 * (1 - degrees/90) }

// The last two gate tables print half and quarter open only; their figures were
// gathered as two lists and are paired in the order of those.
var curves = []curve{
	{survey.GateValve, []opening{{100, 0}, {87.5, 0.07}, {75, 0.26}, {62.5, 0.81}, {50, 2.06}, {37.5, 5.52}, {25, 17}, {12.5, 97.8}},
		"Weisbach 1855 (round pipe), in Unwin 1911"},
	{survey.GateValve, []opening{{100, 0.17}, {75, 0.9}, {50, 4.5}, {25, 24}}, "Perry, Chemical Engineers' Handbook, Table 6-4"},
	{survey.GateValve, []opening{{100, 0.15}, {75, 0.26}, {50, 2.1}, {25, 17}}, "Munson, Young and Okiishi, Table 8.2"},
	{survey.GateValve, []opening{{100, 0.19}, {75, 1.2}, {50, 5.6}, {25, 24}}, "water supply handbook, Table 6-4"},
	{survey.GateValve, []opening{{50, 4}, {25, 20}}, "gate valve figures on hydrauliclearning.com"},
	{survey.GateValve, []opening{{50, 1.15}, {25, 5.5}}, "gate valve figures on industrialmonitordirect.com"},

	{survey.ButterflyValve, []opening{{100, 0}, {turned(5), 0.24}, {turned(10), 0.52}, {turned(15), 0.9}, {turned(20), 1.54}, {turned(25), 2.51},
		{turned(30), 3.91}, {turned(35), 6.22}, {turned(40), 10.8}, {turned(45), 18.7}, {turned(50), 32.6}, {turned(55), 58.8},
		{turned(60), 118}, {turned(65), 256}, {turned(70), 751}},
		"Weisbach 1855, in Unwin 1911 (from memory), and Perry Table 6-4"},

	{survey.PlugValve, []opening{{100, 0}, {turned(5), 0.05}, {turned(10), 0.29}, {turned(15), 0.75}, {turned(20), 1.56}, {turned(25), 3.1}, {turned(30), 5.47},
		{turned(35), 9.68}, {turned(40), 17.3}, {turned(45), 31.2}, {turned(50), 52.6}, {turned(55), 106}, {turned(60), 206}, {turned(65), 486}},
		"Weisbach 1855 (cock in round pipe, shut at 82 degrees), in Unwin 1911 (above 30 degrees from memory), and Perry Table 6-4"},

	{survey.BallValve, []opening{{100, 0.05}, {100 * 2.0 / 3, 5.5}, {100 * 1.0 / 3, 210}}, "Munson, Young and Okiishi, Table 8.2"},

	{survey.GlobeValve, []opening{{100, 6}, {50, 9.5}}, "Perry Table 6-4, bevel seat"},
	{survey.GlobeValve, []opening{{100, 6}, {50, 8.5}}, "Perry Table 6-4, composition seat"},
	{survey.GlobeValve, []opening{{100, 9}, {75, 13}, {50, 36}, {25, 112}}, "Perry Table 6-4, plug disc"},
}

// valveScatter is the factor by which a real valve's K departs from its table:
// tables of one kind differ by 20 to 50 % where they ought to agree.
const valveScatter = 1.5

// ValveOpenings gives the range of openings, per cent of travel with 100 fully
// open, that published tables allow for a valve of this kind whose coefficient
// is k: the widest over all tables, and over k within a factor of 1.5 either way,
// interpolated in ln K. Beyond the ends of a table its last slope goes on, down
// to shut; but high is not taken below the last line of the table that goes
// furthest. A k that some open valve has (LossCoefficient's range) reaches to
// 100.
//
// Tables differ by a factor of four and more at half open, so that the range is
// never one figure but for a k below that of any open valve (100 to 100). The
// turns of the spindle tell how far open a valve is, not this. sources names the
// tables. It reports false for a k that is not positive and finite, and for a
// kind without a table.
func ValveOpenings(kind survey.FittingKind, k float64) (low, high float64, sources []string, ok bool) {
	if !(k > 0) || math.IsInf(k, 1) {
		return 0, 0, nil, false
	}
	low, high = 100, 0
	var furthest opening
	for _, c := range curves {
		if c.kind == kind {
			low = math.Min(low, c.at(k*valveScatter))
			high = math.Max(high, c.at(k/valveScatter))
			if last := c.points[len(c.points)-1]; last.k > furthest.k {
				furthest = last
			}
			sources = append(sources, c.source)
		}
	}
	if len(sources) == 0 {
		return 0, 0, nil, false
	}
	if k/valveScatter > furthest.k {
		high = math.Max(high, furthest.percent)
	}
	if k <= fixed[kind].High {
		high = 100
	}
	return low, high, sources, true
}

// at is the opening at a coefficient k, 0 to 100.
func (c curve) at(k float64) float64 {
	p := c.points
	// The segment that holds k; the first or the last one where none does.
	i := 1
	for i < len(p)-1 && k > p[i].k {
		i++
	}
	a, b := p[i-1], p[i]
	var share float64 // of the way from a to b
	if a.k == 0 {
		share = k / b.k // no logarithm of an open valve's nought
	} else {
		share = math.Log(k/a.k) / math.Log(b.k/a.k)
	}
	return math.Max(0, math.Min(100, a.percent+share*(b.percent-a.percent)))
}
