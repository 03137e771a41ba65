package page

import (
	"fmt"
	"math"
	"sort"

	"tapround/report"
	"tapround/report/internal/say"
	"tapround/survey"
	"tapround/survey/unit"
)

const mostHeads = 400

func (v *view) data(r *report.Result) {
	v.Used = fmt.Sprintf("%d of %s used; %s set aside; %s.", r.Survey.Used, say.Plural(r.Survey.Readings, "reading", "readings"),
		say.Plural(len(r.Problems.Of(survey.SetAside)), "row", "rows"), say.Plural(len(r.Problems.Of(survey.Notice)), "notice", "notices"))
	v.Problems = table{Caption: "Rows that could not be used, and rows read with a doubt", Head: heads("Where", "As written", "What is wrong", "What to do", "Effect")}
	for _, s := range []survey.Severity{survey.Fatal, survey.SetAside, survey.Notice} {
		for _, p := range r.Problems.Of(s) {
			where := p.Source.String()
			if p.Column != "" {
				where += ", " + p.Column
			}
			v.Problems.add(text(where), text(orDash(p.Text)), text(p.Reason), text(orDash(p.Remedy)), text(effect(s)))
		}
	}
	for _, stay := range []bool{true, false} {
		for _, a := range r.Alerts {
			if a.Stay != stay {
				continue
			}
			v.Alerts = append(v.Alerts, alert{say.Clean(a.Statement), say.Clean(a.Action), say.Clean(a.Evidence), say.Clean(a.Limit), say.Places(a.Sources), a.Stay})
		}
	}
	v.SetAside = table{Caption: "Readings set aside", Head: heads("Round", "Tap", "Kind", "Gauge", "#Reading", "Remark", "Line")}
	v.Heads = table{Caption: "Readings and their heads, metres above datum, ± one standard uncertainty",
		Head: heads("Round", "Tap", "Time", "Kind", "Gauge", "#Reading", "#Pressure head, m", "#Piezometric head, m", "#Total head, m")}
	for i, h := range r.Heads {
		if !h.Used {
			v.SetAside.add(text(h.Round), text(tapOf(h)), text(h.Kind), text(h.Gauge), number(say.Clean(h.Reading+" "+h.Unit)), text(orDash(h.Remark)), text(h.Source.String()))
		}
		if i < mostHeads {
			v.Heads.add(text(h.Round), text(tapOf(h)), cell{Text: orDash(clock(say.Clean(h.Time))), Whole: true}, text(h.Kind), text(h.Gauge), number(say.Clean(h.Reading+" "+h.Unit)),
				number(say.Decimals(h.PressureHead, 2)), number(say.With(h.Piezometric, h.U)), number(say.Decimals(h.Total, 2)))
		}
	}
	if n := len(r.Heads) - mostHeads; n > 0 {
		v.HeadsNote = fmt.Sprintf("The other %d readings are in heads.csv.", n)
	}
	v.Differing = differing(r.Residuals)
}

func effect(s survey.Severity) string {
	switch s {
	case survey.Fatal:
		return "nothing computed"
	case survey.SetAside:
		return "row set aside"
	}
	return "used"
}

func tapOf(h report.HeadRow) string {
	s := h.Tap
	if h.OtherTap != "" {
		s += " to " + h.OtherTap
	}
	if h.Depth.OK {
		s += fmt.Sprintf(", %.0f mm deep", 1000*h.Depth.V)
	}
	return s
}

// clock cuts an RFC 3339 time to its date and time of day.
func clock(s string) string {
	if len(s) >= 16 && s[10] == 'T' {
		return s[:10] + " " + s[11:16]
	}
	return s
}

const mostDiffering = 10

// differing lists the readings that stand farthest from the fitted works, by their
// own uncertainty.
func differing(rows []report.ResidualRow) table {
	t := table{Caption: "Readings that stand farthest from the fitted works", Head: heads("Round", "Tap", "Kind", "Gauge", "#Measured", "#Fitted", "#Difference", "#Times what is usual")}
	order := append([]report.ResidualRow(nil), rows...)
	sort.SliceStable(order, func(i, j int) bool { return math.Abs(order[i].Normalised.Or(0)) > math.Abs(order[j].Normalised.Or(0)) })
	for _, d := range order[:min(mostDiffering, len(order))] {
		if !d.Normalised.OK {
			break
		}
		tap := d.Tap
		if d.OtherTap != "" {
			tap += " to " + d.OtherTap
		}
		t.add(text(d.Round), text(tap), text(d.Kind), text(d.Gauge), number(say.Rounded(d.Measured, d.U)+" "+say.Clean(d.Unit)), number(say.Rounded(d.Fitted, d.U)+" "+say.Clean(d.Unit)),
			number(unit.WithUncertainty(d.Residual, d.U)+" "+say.Clean(d.Unit)), number(say.Decimals(d.Normalised, 1)))
	}
	return t
}

func (v *view) method(r *report.Result) {
	f := r.Fit
	v.Law = say.Clean(r.Survey.FrictionLaw)
	v.Caveats = cleaned(f.Caveats)
	switch {
	case !v.HasFit:
	case !f.Converged:
		v.Agreement = "The fit did not settle (" + say.Clean(f.Status) + "): take no number of it as an answer."
	default:
		v.Agreement = say.Agreement(f)
	}
	v.Settings = table{Caption: "Settings that the answers depend on", Head: heads("Setting", "Value", "Where it comes from")}
	for _, s := range r.Settings {
		v.Settings.add(text(s.Name), text(s.Value), text(s.Source))
	}
	if v.HasFit {
		v.Settings.add(text("fit"), text(fmt.Sprintf("%s after %s; %d unknowns, rank %d, %d readings", say.Clean(f.Status), say.Plural(f.Iterations, "step", "steps"), f.Unknowns, f.Rank, f.Readings)),
			text("this run"))
		v.Settings.add(text("sum of squares"), text(fmt.Sprintf("%s with the causes named, %s with everything sound; %d degrees of freedom",
			unit.Significant(f.ChiSquare, 4), unit.Significant(f.SoundChi, 4), f.DoF)), text("this run"))
	}
	v.Inputs = table{Caption: "Files that were read", Head: heads("File", "#Rows", "#Used", "Read as", "SHA-256")}
	for _, in := range r.Inputs {
		v.Inputs.add(text(in.File), number(fmt.Sprint(in.Rows)), number(fmt.Sprint(in.Used)), text(in.Understood), text(in.SHA256))
	}
}
