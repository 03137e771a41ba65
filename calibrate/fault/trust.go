package fault

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate"
	"tapround/calibrate/stat"
	"tapround/survey"
)

// LeftOut is how well the rest of the survey predicts a round or a tap that was left out
// of it.
type LeftOut struct {
	What, Name string // round or tap
	Readings   int
	ChiSquare  float64
	P          float64
}

// LeaveOut predicts every round and every tap from the others. With v the whitened
// innovations and K = V^-1, the error of the prediction of a set s and its covariance are
//
//	e_s = (K_ss)^-1 (K v)_s,  cov e_s = (K_ss)^-1
//
// so that (K v)_s' (K_ss)^-1 (K v)_s is a chi-square of as many degrees of freedom as s
// has readings: leaving out without fitting again, exact where the model is linear. A
// fit that is good and predictions that are not mean errors that compensate each other.
func (d *Diagnosis) LeaveOut() []LeftOut {
	m, f := d.Model, d.Final
	if !f.Converged {
		return nil
	}
	kv := f.Whiten(f.Innovation())
	var out []LeftOut
	try := func(what, name string, in func(i int) bool) {
		var set []int
		for i := range m.Obs {
			if in(i) && !m.Left(i) && !d.blamed(i) {
				set = append(set, i)
			}
		}
		if len(set) == 0 || len(set) == len(m.Obs) {
			return
		}
		kss := mat.NewSymDense(len(set), nil)
		b := mat.NewVecDense(len(set), nil)
		for a, i := range set {
			e := mat.NewVecDense(len(m.Obs), nil)
			e.SetVec(i, 1)
			col := f.Whiten(e)
			for c := a; c < len(set); c++ {
				kss.SetSym(a, c, col.AtVec(set[c]))
			}
			b.SetVec(a, kv.AtVec(i))
		}
		var ch mat.Cholesky
		var x mat.VecDense
		if !ch.Factorize(kss) || ch.SolveVecTo(&x, b) != nil {
			return
		}
		chi := mat.Dot(b, &x)
		out = append(out, LeftOut{What: what, Name: name, Readings: len(set), ChiSquare: chi, P: stat.ChiSquareSurvival(chi, float64(len(set)))})
	}
	open := m.OpenRounds()
	for r, round := range m.Rounds {
		if open[r] {
			continue // what nobody stated cannot be predicted
		}
		try("round", round.Name, func(i int) bool { return m.Obs[i].Round == r })
	}
	for _, t := range m.Survey.Taps {
		try("tap", t.Name, func(i int) bool { return m.Obs[i].Head.Tap == t.Name })
	}
	return out
}

// blamed: a reading that an accepted cause blames alone.
func (d *Diagnosis) blamed(i int) bool {
	for _, a := range d.Accepted {
		if a.Kind == misread && a.reading == i {
			return true
		}
	}
	return false
}

// predictionCaveats warns where the fit is good and a prediction is not. The limit is
// that of the false-alarm rate shared among all that were tried (Bonferroni).
func (d *Diagnosis) predictionCaveats() []string {
	tried := d.LeaveOut()
	var out []string
	for _, l := range tried {
		if l.P < d.set.FalseAlarm/float64(len(tried)) {
			out = append(out, fmt.Sprintf("%s %s is predicted badly by the rest (chi-square %.0f on %d readings): errors may be compensating each other; trust the fit less than its closeness suggests", l.What, l.Name, l.ChiSquare, l.Readings))
		}
	}
	return out
}

// Huber's and the bisquare function at 95 % efficiency on normal errors.
var (
	huber    = stat.Huber(stat.HuberTuning)
	bisquare = stat.Bisquare(stat.BisquareTuning)
)

// robustMove is how far an accepted cause moves, in its own standard uncertainties, when
// the readings are weighted by Huber's and then by the bisquare function at their stated
// standard deviations. Prior rows keep their weight: a robust loss there would let a
// fault in by the side door.
func (d *Diagnosis) robustMove() []float64 {
	moves := make([]float64, len(d.Accepted))
	f := d.Final
	unknowns := f.Unknowns[len(d.Model.Unknowns):]
	u := f.U
	weight := make([]float64, len(d.Model.Obs))
	for pass := 0; pass < 8; pass++ {
		r, err := d.Model.Differences(unknowns, u)
		if err != nil {
			return moves
		}
		for i := range weight {
			weight[i] = huber.Weight(r[i])
			if pass >= 4 {
				weight[i] = bisquare.Weight(r[i])
			}
		}
		g, err := d.Model.Refit(unknowns, calibrate.Options{Start: u, FreeCauses: true, Weight: weight})
		if err != nil || !g.Converged {
			return moves
		}
		u = g.U
	}
	for i, a := range d.Accepted {
		x := f.Unknowns[a.place]
		if sd := f.ThetaSD(a.place); sd > 0 {
			moves[i] = (u[a.place] - f.U[a.place]) * x.SD / sd
		}
	}
	return moves
}

// weakest is the least T that a cause keeps when any one reading is left out, and which
// reading that is: T of the rest follows from V^-1 without fitting again.
func (d *Diagnosis) weakest(a *Accepted, base *calibrate.Fit) (least float64, reading int) {
	s, err := screen(base, []Cause{a.Cause})
	if err != nil || s.info[0] == 0 {
		return a.T, -1
	}
	n := len(d.Model.Obs)
	v := base.Innovation()
	kv := base.Whiten(v)
	col := mat.NewVecDense(n, nil)
	col.CopyVec(s.whitened.ColView(0)) // K a
	full := s.z[0] * s.z[0]
	least, reading = full, -1
	for i := 0; i < n; i++ {
		e := mat.NewVecDense(n, nil)
		e.SetVec(i, 1)
		kii := base.Whiten(e).AtVec(i)
		// K without reading i is K - K e e' K / K_ii on the others.
		info := s.info[0] - col.AtVec(i)*col.AtVec(i)/kii
		sc := -(mat.Dot(col, v) - col.AtVec(i)*kv.AtVec(i)/kii)
		if info > 1e-12 {
			if t := sc * sc / info; t < least {
				least, reading = t, i
			}
		} else {
			least, reading = 0, i
		}
	}
	// In the scale of the exact T.
	if full > 0 {
		least *= a.T / full
	}
	return least, reading
}

// Cost is what a finding of lost head costs while it stands.
type Cost struct {
	Finding string // its ID, once Findings has numbered them
	Item    string
	Kind    survey.FindingKind
	Power   float64 // W
	Energy  float64 // J a year
	Money   float64 // a year, in the survey's currency
	Basis   string
}

// CostOf turns the excess head of a finding into money where the survey states price,
// efficiency and hours: P = rho g Q h / eta at the flow the survey charges, else at the
// busiest round's; the excess goes with the square of the flow.
func (d *Diagnosis) CostOf(a *Accepted) (Cost, bool) {
	c := d.Model.Survey.Info.Cost
	if !lossKind(a.Kind) || !c.EnergyPrice.OK || !c.PumpEfficiency.OK || !c.HoursPerYear.OK || c.PumpEfficiency.V <= 0 {
		return Cost{}, false
	}
	link := d.Model.LinkIndex(d.pipeOf(a.Cause))
	if link < 0 {
		return Cost{}, false // a group has no one flow
	}
	round, q := d.busiest(link)
	if q == 0 {
		return Cost{}, false
	}
	h := d.Final.ItemExcess(round, a.Unknown.Kind, a.Item)
	at := fmt.Sprintf("the flow of round %s", d.Model.Rounds[round].Name)
	if c.FlowExceeded.OK {
		h *= math.Pow(c.FlowExceeded.V/q, 2)
		q = c.FlowExceeded.V
		at = "the flow that survey.csv charges"
	}
	out := Cost{Finding: a.id, Item: a.Item, Kind: a.Kind}
	out.Power = d.Model.Rounds[round].Density * d.Final.Conditions(round).Gravity * q * h / c.PumpEfficiency.V
	out.Energy = out.Power * c.HoursPerYear.V * 3600
	out.Money = out.Energy / 3.6e6 * c.EnergyPrice.V
	out.Basis = fmt.Sprintf("%.2g m at %.3g L/s (%s), %.0f h a year, efficiency %.0f %%, %g %s/kWh", h, 1e3*q, at, c.HoursPerYear.V, 100*c.PumpEfficiency.V, c.EnergyPrice.V, c.Currency)
	return out, true
}
