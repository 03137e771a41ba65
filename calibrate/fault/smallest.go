package fault

import (
	"fmt"
	"math"
	"sort"

	"tapround/calibrate"
	"tapround/survey"
	"tapround/survey/unit"
)

// Smallest is the smallest fault of one item that this survey finds with 80 % power.
type Smallest struct {
	Kind, Item string  // kind as parameters.csv: pipe, fitting, gauge, tap, level, draw-off, machine
	Seen       bool    // the readings see it at all
	Practical  bool    // it is of a size worth finding
	Value      float64 // in Unit: mm, C, K
	Unit       string  // or gauge unit, m, L/s, factor
	Words      string
}

// power80 is the normal quantile that 80 % power adds to a limit.
const power80 = 0.8416

// Smallest gives it for every item that is looked at, from the linear signatures at the
// sound fit: roughness, C or K that would have shown, and offset, level error, flow or head
// factor beyond which it would.
func (d *Diagnosis) Smallest() []Smallest {
	var out []Smallest
	if !d.Sound.Converged {
		return nil
	}
	s, err := screen(d.Sound, d.Causes)
	if err != nil {
		return nil
	}
	for i, c := range d.Causes {
		if c.Kind == misread || c.Unknown.Kind == "group" || c.Unknown.Quantity == "gain" || (c.Variant != "" && c.Variant != "every round") {
			continue
		}
		x := Smallest{Kind: c.Unknown.Kind, Item: c.Item}
		if s.info[i] == 0 {
			x.Words = "no reading depends on it"
			out = append(out, x)
			continue
		}
		x.Seen = true
		size := (d.Limit + power80) / math.Sqrt(s.info[i]) // of theta, linear
		switch {
		case !lossKind(c.Kind):
			d.plainSmallest(&x, c, size)
		case x.Kind == "fitting":
			k := math.Exp(d.Model.ExpectedLnK(d.Model.FlatFitting(c.Item)))
			x.Value, x.Unit = k*(1+size), "K"
			x.Practical = x.Value < 500
			x.Words = fmt.Sprintf("only a K above %s would have shown", unit.Significant(x.Value, 2))
		case c.Unknown.Quantity == "c_value":
			l := d.Model.LinkIndex(c.Item)
			x.Value, x.Unit = math.Exp(d.Model.ExpectedLnRough(l))/math.Pow(1+size*1.852, 0.54), "C"
			x.Practical = x.Value > 30
			x.Words = fmt.Sprintf("only a C below %s would have shown", unit.Significant(x.Value, 2))
		default:
			l := d.Model.LinkIndex(c.Item)
			rise := roughnessFor(d.Model, d.Sound, c, size)
			x.Value, x.Unit = 1e3*math.Exp(d.Model.ExpectedLnRough(l)+rise), "mm"
			x.Practical = x.Value/1e3 < 0.1*d.Model.Survey.Pipes[l].Bore
			x.Words = fmt.Sprintf("only an equivalent roughness above %s mm would have shown", unit.Significant(x.Value, 2))
		}
		out = append(out, x)
	}
	return out
}

// plainSmallest fills the smallest error of a gauge, level, flow or machine.
func (d *Diagnosis) plainSmallest(x *Smallest, c Cause, size float64) {
	x.Practical = true
	switch c.Kind {
	case survey.GaugeOff:
		g := d.Model.GaugeNamed(c.Item)
		x.Value, x.Unit = calibrate.GaugeUnit(g).FromSIDifference(size), g.Unit
	case survey.UnrecordedFlow:
		x.Value, x.Unit = 1e3*size, "L/s"
	case survey.MachineOffCurve:
		x.Value, x.Unit = size, "of its head"
	default:
		x.Value, x.Unit = size, "m"
	}
	x.Words = fmt.Sprintf("an error above %s %s would have shown", unit.Significant(x.Value, 2), x.Unit)
}

// Tie is a pair of items that the readings hardly tell apart: when one is fitted higher the
// other comes out lower, and what is determined is their sum.
type Tie struct {
	A, B string
	Rho  float64
}

// strongTie is the posterior correlation from which a pair is worth naming.
const strongTie = -0.7

// Ties lists the pairs of pipes, fittings, gauges and levels of which the readings fix the
// sum better than the parts, the strongest first: the weakest directions of the fit in
// words. In units of prior standard deviations such a pair has a strongly negative
// correlation after the fit.
func (d *Diagnosis) Ties() []Tie {
	f := d.Final
	if !f.Converged {
		return nil
	}
	c := f.Cov()
	var out []Tie
	for i := range d.Model.Unknowns {
		for k := i + 1; k < len(d.Model.Unknowns); k++ {
			a, b := f.Unknowns[i], f.Unknowns[k]
			if a.Item == b.Item || a.Kind == "draw-off" || b.Kind == "draw-off" || c.At(i, i) == 0 || c.At(k, k) == 0 {
				continue
			}
			if r := c.At(i, k) / math.Sqrt(c.At(i, i)*c.At(k, k)); r < strongTie {
				out = append(out, Tie{A: a.Kind + " " + a.Item, B: b.Kind + " " + b.Item, Rho: r})
			}
		}
	}
	sort.SliceStable(out, func(i, j int) bool { return out[i].Rho < out[j].Rho })
	if len(out) > 8 {
		out = out[:8]
	}
	return out
}
