package report

import (
	"fmt"
	"math"
	"time"

	"tapround/calibrate"
	"tapround/calibrate/fault"
	"tapround/survey"
	"tapround/survey/unit"
)

// Input is all that one run has made, to be put into a Result.
type Input struct {
	Tool      Tool
	Survey    *survey.Survey
	Corrected []survey.Corrected
	Heads     []survey.Head
	Diagnosis *fault.Diagnosis // nil where only the data were looked at
	Problems  survey.Problems
	Alerts    []survey.Alert
	Settings  []Setting
	// Routes to draw; nil: the main ones.
	Routes []calibrate.Way
}

// New puts the work of the earlier stages into one document. It copies and orders;
// every number was computed before.
func New(in Input) *Result {
	r := &Result{Tool: in.Tool, Survey: factsOf(in), Inputs: in.Survey.Inputs, Settings: in.Settings,
		Problems: in.Problems, Alerts: in.Alerts}
	d := in.Diagnosis
	if d == nil {
		r.Heads = headRows(in, nil)
		return r
	}
	r.Findings = d.Findings() // numbers them, which costs need
	r.Alerts = append(append([]survey.Alert(nil), in.Alerts...), d.Misreadings()...)
	r.Fit = fitFacts(d)
	r.Heads = headRows(in, d.Final)
	r.Flows = flowRows(d.Final)
	r.GradeLines = gradeRows(d.Final)
	r.Parameters = parameterRows(d.Final)
	r.Residuals = differenceRows(d.Final)
	r.Losses = lossRows(d.Final)
	r.Costs = costs(d)
	for _, s := range d.Smallest() {
		row := VisibleRow{Item: s.Item, Kind: s.Kind, Seen: s.Seen, Unit: s.Unit, Words: s.Words}
		if s.Seen {
			row.Value = known(s.Value)
		}
		r.Visible = append(r.Visible, row)
	}
	for _, t := range d.Ties() {
		r.Ties = append(r.Ties, fmt.Sprintf("%s and %s: the readings fix their sum better than either (correlation %.2f)", t.A, t.B, t.Rho))
	}
	routes := in.Routes
	if routes == nil {
		routes = d.Model.MainRoutes(3)
	}
	r.Profiles = profiles(d.Final, r.Findings, routes)
	r.Cautions = cautions(r.Findings)
	r.Summary = summary(r)
	return r
}

func factsOf(in Input) SurveyFacts {
	s := in.Survey
	f := SurveyFacts{Title: s.Info.Title, Site: s.Info.Site, Datum: s.Info.Datum, FrictionLaw: s.Info.FrictionLaw.String(),
		Points: len(s.Points), Pipes: len(s.Pipes), Taps: len(s.Taps), Gauges: len(s.Gauges), Readings: len(s.Readings)}
	for _, r := range s.Rounds {
		f.Rounds = append(f.Rounds, r.Name)
	}
	for _, p := range s.Pipes {
		f.PipeLength += p.Length
	}
	for _, h := range in.Heads {
		f.Used += len(h.Rows)
	}
	return f
}

func fitFacts(d *fault.Diagnosis) FitFacts {
	f := FitFacts{Status: d.Final.Status, Converged: d.Final.Converged, Iterations: d.Final.Iterations,
		Unknowns: len(d.Final.Unknowns), Readings: len(d.Model.Obs), Rank: d.Final.Rank, Condition: d.Final.Condition,
		ChiSquare: d.Final.Phi, DoF: d.Final.DoF(), SoundChi: d.Sound.Phi, Caveats: d.Caveats}
	if p, ok := d.Final.GlobalP(); ok {
		f.P = survey.Some(p)
	}
	if p, ok := d.Sound.GlobalP(); ok {
		f.SoundP = survey.Some(p)
	}
	for _, r := range d.Model.Rounds {
		for _, c := range r.Caveats {
			f.Caveats = append(f.Caveats, "round "+r.Name+": "+c)
		}
	}
	return f
}

func flowRows(f *calibrate.Fit) []FlowRow {
	m := f.Model
	var out []FlowRow
	for r, round := range m.Rounds {
		for _, name := range m.LinkNames() {
			l := m.LinkIndex(name)
			q := f.Flow(r, l)
			row := FlowRow{Round: round.Name, Pipe: name, Flow: known(q.Value)}
			if !math.IsNaN(q.SD) {
				row.Low, row.High = known(q.Low()), known(q.High())
			}
			if v, ok := f.Velocity(r, l); ok {
				row.Velocity = survey.Some(v)
			}
			if v, ok := m.MeasuredFlow(r, l); ok {
				row.Measured = survey.Some(v)
			}
			out = append(out, row)
		}
	}
	return out
}

func gradeRows(f *calibrate.Fit) []GradeRow {
	m := f.Model
	var out []GradeRow
	for r, round := range m.Rounds {
		for _, p := range m.Survey.Pipes {
			for _, v := range f.PipeLine(r, m.LinkIndex(p.Name)) {
				out = append(out, GradeRow{Round: round.Name, Pipe: p.Name, At: v.At, Piezometric: known(v.Piezometric),
					Total: known(v.Total), ExpectedTotal: known(v.ExpectedTotal)})
			}
		}
	}
	return out
}

func lossRows(f *calibrate.Fit) []LossRow {
	var out []LossRow
	for _, l := range f.Losses() {
		out = append(out, LossRow{Round: l.Round, FromTap: l.FromTap, ToTap: l.ToTap,
			Measured: known(l.Measured.Value), Low: known(l.Measured.Low()), High: known(l.Measured.High()),
			Expected: known(l.Expected.Value), Excess: known(l.Excess.Value), Fitted: known(l.Fitted.Value),
			ExcessU: known(l.Excess.SD), Probability: known(l.Probability), Items: l.Items})
	}
	return out
}

func differenceRows(f *calibrate.Fit) []ResidualRow {
	var out []ResidualRow
	for i, o := range f.Model.Obs {
		h := o.Head
		scale, u := 1.0, "m"
		if h.Quantity == survey.VolumeFlow {
			scale, u = 1e3, "L/s"
		}
		fitted := f.Fitted(i)
		row := ResidualRow{Round: h.Round, Tap: h.Tap, OtherTap: h.OtherTap, Kind: string(h.Kind), Gauge: h.Gauge,
			Measured: scale * h.Value, Fitted: scale * fitted, Unit: u, Residual: scale * (h.Value - fitted), U: scale * h.Own,
			Redundancy: known(f.Redundancy(i))}
		if w, ok := f.Normalised(i); ok {
			row.Normalised = survey.Some(w)
		}
		out = append(out, row)
	}
	return out
}

// parameterRows lists every unknown of sound works with what a cause adds to it.
func parameterRows(f *calibrate.Fit) []ParameterRow {
	m := f.Model
	var out []ParameterRow
	for k := range m.Unknowns {
		x := m.Unknowns[k]
		v, lo, hi := f.Whole(k)
		row := ParameterRow{Item: x.Item, Kind: x.Kind, Quantity: x.Quantity, Round: x.Round, ToldBySurvey: survey.Some(f.Told(k))}
		scale := 1.0
		switch {
		case x.Kind == "group":
			row.Unit = "factor"
		case x.Quantity == "roughness":
			scale, row.Unit = 1e3, "mm"
		case x.Quantity == "c_value":
			row.Unit = "C"
		case x.Quantity == "loss_coefficient":
			row.Unit = "K"
		case x.Quantity == "head_factor":
			row.Unit = "factor"
		case x.Quantity == "flow":
			scale, row.Unit = 1e3, "L/s"
		case x.Quantity == "level" || x.Quantity == "level_error":
			row.Unit = "m"
		case x.Quantity == "barometer":
			row.Unit = "m"
		case x.Quantity == "gain" || x.Quantity == "profile_factor":
			scale, row.Unit = 100, "%"
		case x.Quantity == "offset":
			g := m.GaugeNamed(x.Item)
			u := calibrate.GaugeUnit(g)
			scale, row.Unit = u.FromSIDifference(1), g.Unit
		}
		row.Fitted, row.Low, row.High = known(scale*v), known(scale*lo), known(scale*hi)
		if f.OpenBelow(k) {
			row.Low = survey.Maybe{} // a bound from above only
		}
		if x.Open {
			row.Expected = survey.Maybe{}
		} else {
			row.Expected = survey.Some(scale * x.Expected)
		}
		if x.Expected != 0 && !x.Open {
			row.Ratio = known(v / x.Expected)
		}
		out = append(out, row)
	}
	return out
}

func known(v float64) survey.Maybe {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return survey.Maybe{}
	}
	return survey.Some(v)
}

func stamp(t time.Time) string {
	if t.IsZero() {
		return ""
	}
	return t.Format(time.RFC3339)
}

// costs are what the findings of lost head cost, by their IDs.
func costs(d *fault.Diagnosis) []Cost {
	var out []Cost
	for i := range d.Accepted {
		a := &d.Accepted[i]
		c, ok := d.CostOf(a)
		if !ok {
			continue
		}
		out = append(out, Cost{Finding: c.Finding, Power: known(c.Power), Energy: known(c.Energy), Money: known(c.Money),
			Currency: d.Model.Survey.Info.Cost.Currency, Basis: c.Basis})
	}
	return out
}

func cautions(fs []survey.Finding) []string {
	var out []string
	seen := map[string]bool{}
	for _, f := range fs {
		for _, c := range f.Cautions {
			if !seen[c] {
				seen[c] = true
				out = append(out, c)
			}
		}
	}
	return out
}

// summary is the page's first words: what was found, or that nothing was; what
// could not be seen; whether the fit can be trusted.
func summary(r *Result) []string {
	var out []string
	found, unseen := 0, 0
	for _, f := range r.Findings {
		switch {
		case f.Kind == survey.NotCovered:
			unseen++
		case f.Grade == survey.Hint:
		default:
			found++
			out = append(out, f.Statement)
		}
	}
	if found == 0 {
		out = append(out, "Nothing was found that sound works, sound gauges and recorded levels would not explain.")
	}
	if unseen > 0 {
		out = append(out, fmt.Sprintf("%d items could not be seen by these readings: for them, no fault found does not mean sound.", unseen))
	}
	if !r.Fit.Converged {
		out = append(out, "The fit did not settle ("+r.Fit.Status+"): take no number of it as an answer.")
	} else if r.Fit.P.OK && r.Fit.P.V < 0.01 {
		out = append(out, fmt.Sprintf("The causes named do not explain everything: with them the readings still differ from the works more than their uncertainties allow (p = %s).", unit.Significant(r.Fit.P.V, 1)))
	}
	return out
}
