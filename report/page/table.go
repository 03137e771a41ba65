package page

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"tapround/report"
	"tapround/report/internal/say"
	"tapround/survey"
	"tapround/survey/unit"
)

// table is one table of the page. The first cell of a row heads it.
type table struct {
	Caption string
	Head    []cell
	Rows    [][]cell
}

// Short tables are not to be cut by the end of a sheet.
func (t table) Short() bool { return len(t.Rows) <= 20 }

// cell is what stands in one place of a table.
type cell struct {
	Text   string
	Number bool   // set to the right
	Whole  bool   // not to be broken into lines
	Link   string // of a finding on this page
	Label  string // its column's heading, for narrow screens
}

func text(s string) cell { return cell{Text: say.Clean(s)} }

func number(s string) cell { return cell{Text: s, Number: true} }

func link(id string) cell { return cell{Text: id, Link: id} }

// heads makes headings; one that begins with # heads numbers.
func heads(names ...string) []cell {
	var out []cell
	for _, n := range names {
		s, num := strings.CutPrefix(n, "#")
		out = append(out, cell{Text: s, Number: num})
	}
	return out
}

func (t *table) add(cells ...cell) {
	for i := range cells {
		cells[i].Label = t.Head[i].Text
	}
	t.Rows = append(t.Rows, cells)
}

// losses is every stretch in the round in which its excess is greatest.
func losses(rows []report.LossRow) (table, string) {
	t := table{Caption: "Total head lost between neighbouring taps, each stretch in the round in which it loses most beyond sound works",
		Head: heads("Stretch", "Round", "#Measured, m", "#95 % interval, m", "#Sound works, m", "#Excess, m", "Loses more", "What lies between")}
	best := map[[2]string]int{}
	var pick []report.LossRow
	for _, l := range rows {
		k := [2]string{l.FromTap, l.ToTap}
		i, seen := best[k]
		switch {
		case !seen:
			best[k] = len(pick)
			pick = append(pick, l)
		case excess(l) > excess(pick[i]):
			pick[i] = l
		}
	}
	sort.SliceStable(pick, func(i, j int) bool { return excess(pick[i]) > excess(pick[j]) })
	for _, l := range pick {
		interval := "–"
		if l.Low.OK && l.High.OK {
			interval = say.By(l.Low, l.ExcessU) + " to " + say.By(l.High, l.ExcessU)
		}
		t.add(text(l.FromTap+" to "+l.ToTap), text(l.Round), number(say.By(l.Measured, l.ExcessU)), number(interval), number(say.By(l.Expected, l.ExcessU)),
			number(say.With(l.Excess, l.ExcessU)), text(say.Probability(l.Probability)), text(strings.Join(l.Items, ", ")))
	}
	_, rest := say.Worst(rows, len(rows))
	note := ""
	if rest > 0 {
		note = say.Plural(rest, "of these stretches loses", "of these stretches lose") + " no more than sound works would, as far as these readings tell."
	}
	return t, note
}

func excess(l report.LossRow) float64 { return l.Excess.Or(math.Inf(-1)) }

// quantities are the plain names of what is fitted.
var quantities = map[string]string{
	"roughness": "equivalent roughness", "c_value": "equivalent C", "loss_coefficient": "loss coefficient", "head_factor": "head against the works curve",
	"offset": "offset (shown minus true)", "gain": "gain error", "level_error": "level (recorded minus true)", "level": "water level",
	"flow": "draw-off", "profile_factor": "velocity profile", "barometer": "barometer",
}

func quantity(p report.ParameterRow) string {
	if s, ok := quantities[p.Quantity]; ok {
		return s
	}
	return strings.ReplaceAll(say.Clean(p.Quantity), "_", " ")
}

// fitted sorts what was fitted into the works, gauges, levels and draw-offs.
func fitted(rows []report.ParameterRow) (works, gauges, levels, draws table) {
	works = table{Caption: "Pipes, fittings and machines", Head: heads("Item", "Quantity", "#Sound", "#Fitted (95 %)", "#Fitted / sound", "#Share told by the survey")}
	gauges = table{Caption: "Gauges", Head: heads("Gauge", "Quantity", "#Found (95 %)", "#Share told by the survey")}
	levels = table{Caption: "Levels", Head: heads("Where", "Quantity", "Round", "#Recorded", "#Found (95 %)", "#Share told by the survey")}
	draws = table{Caption: "Draw-offs", Head: heads("Where", "Round", "#Recorded", "#Found (95 %)", "#Share told by the survey")}
	for _, p := range rows {
		found := say.Quantity(strings.Replace(say.Interval(p.Fitted, p.Low, p.High), "95 %: ", "", 1), p.Unit)
		recorded := "unknown"
		if p.Expected.OK {
			recorded = say.Quantity(say.Stated(p.Expected.V), p.Unit)
		}
		told := number(say.Share(p.ToldBySurvey))
		switch {
		case p.Kind == "gauge":
			gauges.add(text(p.Item), text(quantity(p)), number(found), told)
		case p.Quantity == "flow":
			draws.add(text(p.Item), text(orDash(p.Round)), number(recorded), number(found), told)
		case p.Kind == "tap" || p.Kind == "level" || p.Quantity == "level_error" || p.Quantity == "level":
			if p.Quantity == "level_error" {
				recorded = "–"
			}
			levels.add(text(p.Item), text(quantity(p)), text(orDash(p.Round)), number(recorded), number(found), told)
		default:
			item := p.Item
			if p.Kind == "group" {
				item = "group " + item
			}
			works.add(text(item), text(quantity(p)), number(recorded), number(found), number(say.Maybe(p.Ratio, 2)), told)
		}
	}
	return works, gauges, levels, draws
}

// flows is a table of pipes against rounds: the fitted flow, and what a meter on the
// pipe said beneath.
func flows(r *report.Result) table {
	names := append([]string{"Pipe or machine"}, r.Survey.Rounds...)
	t := table{Caption: "Flow in L/s, rounded to its uncertainty, positive from the pipe's first end to its other; in brackets what a meter on the pipe showed"}
	for i, n := range names {
		t.Head = append(t.Head, cell{Text: say.Clean(n), Number: i > 0})
	}
	place := map[string]int{}
	column := map[string]int{}
	for i, n := range r.Survey.Rounds {
		column[n] = i + 1
	}
	for _, f := range r.Flows {
		c, ok := column[f.Round]
		if !ok {
			continue
		}
		i, seen := place[f.Pipe]
		if !seen {
			i = len(t.Rows)
			place[f.Pipe] = i
			row := make([]cell, len(names))
			row[0] = text(f.Pipe)
			for j := range row[1:] {
				row[1+j] = number("–")
			}
			t.add(row...)
		}
		s := "–"
		if f.Flow.OK {
			q, lo, hi := litres(f.Flow), litres(f.Low), litres(f.High)
			s = unit.Significant(q.V, 3)
			if lo.OK && hi.OK {
				s = say.Rounded(q.V, say.Spread(q, lo, hi))
			}
			if f.Measured.OK {
				s += " (" + unit.Significant(litres(f.Measured).V, 3) + ")"
			}
		}
		t.Rows[i][c].Text = s
	}
	return t
}

func litres(m survey.Maybe) survey.Maybe {
	m.V *= 1000
	return m
}

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
			var places []string
			for _, s := range a.Sources {
				places = append(places, s.String())
			}
			v.Alerts = append(v.Alerts, alert{say.Clean(a.Statement), say.Clean(a.Action), say.Clean(a.Evidence), say.Clean(a.Limit), say.Clean(strings.Join(places, ", ")), a.Stay})
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
