package catalogue

import (
	"math"
	"sort"

	"tapround/survey"
)

// fixed holds the loss coefficients that take no bore, on the velocity head in
// the fitting's bore: fully open, clean, in straight approach. Each Low and High
// are the least and the greatest of the tables named.
var fixed = map[survey.FittingKind]Entry{
	survey.EntranceSharp: {Value: 0.5, Low: 0.42, High: 0.58,
		Source: "0.5 in Sanks B-6, Crane A-29 and Handbook 6-4; ± 15 % about it is common practice"},
	survey.EntranceRounded: {Value: 0.05, Low: 0.04, High: 0.25,
		Source: "Sanks B-6 (bell mouth 0.05, rounded 0.25), Handbook 6-4 (bell-mouthed 0.04, slightly rounded 0.23), Crane A-29 (r/d 0.15: 0.04, from memory)",
		Note:   "taken as a full bell mouth (radius at least 0.15 of the bore): a slightly rounded lip has 0.25"},
	survey.EntranceProjecting: {Value: 0.8, Low: 0.78, High: 1,
		Source: "Sanks B-6 (0.8), Crane A-29 (0.78, from memory), Handbook 6-4 (0.8 to 1.0), Borda's mouthpiece (1.0)"},
	survey.Exit: {Value: 1, Low: 1, High: 1,
		Source: "Sanks B-6, Crane A-29, Handbook 6-4 (all 1.0)"},
	survey.Bend: {Value: 0.25, Low: 0.13, High: 0.3,
		Source: "90 degrees: Sanks B-6 (flanged 0.25, long radius 0.18), Munson 8.2 (flanged 0.3, long radius 0.2), Handbook 6-4 (0.14 to 0.30), Weisbach (radius one bore 0.294 to five bores 0.131), Crane A-29 (radius 2 to 4 bores, 12 to 14 f_T, 0.14 to 0.27)",
		Note:   "taken as a flanged 90 degree bend: 45 degrees has about 0.2"},
	survey.Elbow: {Value: 0.6, Low: 0.21, High: 1.5,
		Source: "90 degrees: Sanks B-6 (flanged 0.25, mitre 0.8), Handbook 6-4 (flanged 0.21 to 0.30, screwed 0.6 to 0.9), Munson 8.2 (threaded 1.5, flanged 0.3), Weisbach (mitre 0.985), Crane A-29 (30 f_T, 0.4 at 300 mm)",
		Note:   "published elbows run from 0.21 flanged to 1.5 threaded: the middle is taken, so write the maker's figure if it matters"},
	survey.TeeRun: {Value: 0.3, Low: 0.2, High: 0.9,
		Source: "Sanks B-6 (0.3), Munson 8.2 (flanged 0.2, threaded 0.9), Crane A-29 (20 f_T, 0.26 at 300 mm)"},
	survey.TeeBranch: {Value: 1, Low: 0.72, High: 2,
		Source: "Munson 8.2 (flanged 1.0, threaded 2.0), Sanks B-6 (0.75), Crane A-29 (60 f_T, 0.72 to 1.1)"},
	survey.GateValve: {Value: 0.17, Low: 0.096, High: 0.3,
		Source: "fully open: Perry 6-4 (0.17), Munson 8.2 (0.15), Sanks B-7 (double disc 0.1 to 0.2, resilient seat 0.3), Crane A-27 (8 f_T, 0.096 to 0.15)",
		Note:   "Weisbach's 0 for an open gate leaves out the body's own loss"},
	survey.ButterflyValve: {Value: 0.4, Low: 0.16, High: 0.86,
		Source: "fully open: Sanks B-7 (25 to 150 lb class, 0.16 to 0.35), Crane A-28 (45 f_T, 0.63 to 0.86 to 200 mm; 35 f_T, 0.46 at 300 mm, from memory)"},
	survey.BallValve: {Value: 0.05, Low: 0.036, High: 0.08,
		Source: "fully open, full bore: Munson 8.2 (0.05), Sanks B-7 (0.04), Crane A-28 (3 f_T, 0.036 to 0.08)"},
	survey.GlobeValve: {Value: 6, Low: 4, High: 10,
		Source: "fully open: Perry 6-4 (bevel seat 6.0, plug disc 9), Sanks B-7 (4.0 to 6.0), Munson 8.2 and Handbook 6-4 (10), Crane A-27 (340 f_T, 4.4 at 300 mm)"},
	survey.PlugValve: {Value: 0.5, Low: 0.21, High: 1,
		Source: "fully open: Sanks B-7 (eccentric, full bore 0.5; lubricated 0.5 to 1.0), Crane A-28 (18 f_T, 0.22 to 0.34)"},
	survey.CheckValve: {Value: 2, Low: 0.25, High: 2.6,
		Source: "held fully open by the flow: Munson 8.2 (swing 2), Sanks B-7 (swing 0.6 to 2.2, slanting disc 0.25 to 2.0, double door 1.2 to 2.5, globe 2.6), Crane A-27 (100 f_T, 1.3 at 300 mm)",
		Note:   "taken as a swing check: it loses more at low flow, where the flap hangs; the Hydraulic Institute gives +200 and -80 %"},
	survey.Strainer: {Value: 2, Low: 1, High: 4,
		Source: "clean basket: no printed figure at hand, common practice; the Hydraulic Institute gives ± 50 % about a maker's figure",
		Note:   "write the maker's figure"},
	survey.MeterFitting: {Value: 2, Low: 0.5, High: 7,
		Source: "mechanical meter: common practice; Perry 6-4 prints 6 for a turbine wheel and 7 for a disc (from memory)",
		Note:   "a full-bore electromagnetic or ultrasonic meter loses nothing: write 0; else the maker's figure"},
}

// LossCoefficient is the coefficient K of a sound, clean and fully open fitting,
// h = K V^2/2g. V is in the fitting's bore; at a change of bore (enlargement,
// contraction, nozzle) in the smaller of bore and otherBore, m, which may come
// in either order and are not looked at for the other kinds. It reports false
// for the kind other, for one it does not know, and for a change of bore without
// two different bores.
//
//	enlargement  (1 - beta^2)^2, sudden          Borda-Carnot, White eq. 6.80
//	contraction  0.5 (1 - beta^2), sudden        Crane
//	nozzle       0.05, smooth, on the jet
//
// with beta the smaller bore over the larger. Of the rules for a contraction
// Crane's is the highest: 0.42 (1 - beta^2) (White eq. 6.81) lies 16 % below and
// Weisbach's coefficients lie up to 0.09 below in K (area ratios from 0.1).
func LossCoefficient(kind survey.FittingKind, bore, otherBore float64) (Entry, bool) {
	if !kind.ChangesBore() {
		e, ok := fixed[kind]
		return e.withSpread(), ok
	}
	beta := math.Min(bore, otherBore) / math.Max(bore, otherBore)
	if !(bore > 0 && otherBore > 0 && beta < 1) {
		return Entry{}, false
	}
	area := beta * beta
	var e Entry
	switch kind {
	case survey.Enlargement:
		k := (1 - area) * (1 - area)
		e = Entry{Value: k, Low: 0.9 * k, High: 1.1 * k, Source: "Borda-Carnot (1 - beta^2)^2, on the smaller bore; Handbook 6-4 agrees within 5 %",
			Note: "taken as sudden: a taper of 10 degrees in all loses a fifth of it (Gibson, in HI)"}
	case survey.Contraction:
		e = Entry{Value: 0.5 * (1 - area), Low: math.Min(weisbachContraction(area), 0.42*(1-area)), High: 0.5 * (1 - area),
			Source: "0.5 (1 - beta^2), on the smaller bore (Crane); White eq. 6.81 and Weisbach lie up to 0.09 lower",
			Note:   "taken as sudden: a taper loses less"}
	case survey.Nozzle:
		e = Entry{Value: 0.05, Low: 0.02, High: 0.07, Source: "smooth nozzle, velocity coefficient 0.97 to 0.99, K = 1/C^2 - 1 on the jet (common practice, from memory)"}
	}
	return e.withSpread(), true
}

// contractionOfJet is Weisbach's coefficient of contraction by the ratio of the
// areas, small over large.
var contractionOfJet = []struct{ area, cc float64 }{
	{0, 0.617}, {0.1, 0.624}, {0.2, 0.632}, {0.3, 0.643}, {0.4, 0.659}, {0.5, 0.681}, {0.6, 0.712},
	{0.7, 0.755}, {0.8, 0.813}, {0.9, 0.892}, {1, 1},
}

// weisbachContraction is K = (1/cc - 1)^2 with cc interpolated in the area ratio.
func weisbachContraction(area float64) float64 {
	t := contractionOfJet
	i := min(max(1, sort.Search(len(t), func(i int) bool { return t[i].area >= area })), len(t)-1)
	a, b := t[i-1], t[i]
	cc := a.cc + (b.cc-a.cc)*(area-a.area)/(b.area-a.area)
	return (1/cc - 1) * (1/cc - 1)
}
