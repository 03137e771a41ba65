package page

import (
	"fmt"
	"html/template"
	"strings"
	"unicode"
	"unicode/utf8"

	"tapround/report"
	"tapround/report/figure"
	"tapround/report/internal/say"
	"tapround/survey"
	"tapround/survey/unit"
)

// view is what the template shows: every text finished, nothing left to decide.
type view struct {
	Style  template.CSS
	Policy string

	Title, Site string
	Facts       []string
	Tool        string

	Short     table // found, one row each
	Sentences []string
	Steps     []say.Step
	Unseen    []unseen

	Cards    []card
	Hints    []card
	Cautions []string

	Figures []drawn

	Losses    table
	LossNote  string
	Fitted    table
	Visible   table
	Ties      []string
	Gauges    table
	Levels    table
	Flows     table
	DrawOffs  table
	Problems  table
	Alerts    []alert
	SetAside  table
	Differing table
	Heads     table
	HeadsNote string
	Used      string

	Agreement string
	Caveats   []string
	Settings  table
	Inputs    table
	Law       string
	HasFit    bool
}

// card is one finding in full.
type card struct {
	ID, Kind, Where, Grade string
	Statement              string
	Lines                  []pair
	Evidence, Rivals       []string
	Advice, Settle         string
	Cautions               []string
	Sources                string
}

// pair is a name with its value.
type pair struct{ Name, Value string }

// alert is one of the checks that need no model.
type alert struct {
	Statement, Action, Evidence, Limit, Where string
	Stay                                      bool
}

// unseen are items that the readings say nothing of, and the advice they share.
type unseen struct {
	Items  []pair
	Advice string
}

// drawn is one picture with its words.
type drawn struct {
	Caption      string
	Wide, Narrow template.HTML // for screens and paper, and for telephones
}

func newView(r *report.Result) *view {
	s := r.Survey
	v := &view{Title: say.Clean(s.Title), Site: say.Clean(s.Site), Tool: strings.TrimSpace(say.Clean(r.Tool.Name + " " + r.Tool.Version)),
		HasFit: r.Fit.Status != "" || r.Fit.Readings > 0}
	if v.Title == "" {
		v.Title = "Pressure survey"
	}
	rounds := say.Plural(len(s.Rounds), "round", "rounds")
	if len(s.Rounds) > 0 {
		rounds += " (" + say.Clean(strings.Join(s.Rounds, ", ")) + ")"
	}
	v.Facts = []string{
		rounds,
		say.Plural(s.Pipes, "pipe", "pipes") + ", " + unit.Significant(s.PipeLength/1000, 3) + " km",
		say.Plural(s.Taps, "tap", "taps") + ", " + say.Plural(s.Gauges, "gauge", "gauges"),
		fmt.Sprintf("%d of %s used", s.Used, say.Plural(s.Readings, "reading", "readings")),
	}
	if s.Datum != "" {
		v.Facts = append(v.Facts, "levels above "+say.Clean(s.Datum))
	}
	v.findings(r)
	v.pictures(r.Profiles)
	v.Losses, v.LossNote = losses(r.Losses)
	v.Fitted, v.Gauges, v.Levels = fitted(r.Parameters)
	v.Visible = visible(r.Visible)
	for _, t := range r.Ties {
		v.Ties = append(v.Ties, say.Clean(t))
	}
	v.Flows, v.DrawOffs = flows(r), drawOffs(r)
	v.data(r)
	v.method(r)
	return v
}

func (v *view) findings(r *report.Result) {
	found, hints, blind := say.Split(r.Findings)
	v.Short = table{Caption: "What was found, the best supported first", Head: heads("", "What", "Where", "How sure", "Costs")}
	for _, f := range found {
		v.Short.add(link(f.ID), text(capital(say.Kind(f.Kind))), text(say.Where(f)), text(grade(f)), text(orDash(costs(r, f))))
		v.Cards = append(v.Cards, newCard(r, f))
	}
	for _, f := range hints {
		v.Hints = append(v.Hints, newCard(r, f))
	}
	for _, f := range blind {
		if n := len(v.Unseen); n == 0 || v.Unseen[n-1].Advice != say.Clean(f.Advice) {
			v.Unseen = append(v.Unseen, unseen{Advice: say.Clean(f.Advice)})
		}
		last := &v.Unseen[len(v.Unseen)-1]
		last.Items = append(last.Items, pair{f.ID, say.Clean(f.Statement)})
	}
	// A sentence of the summary that a finding says itself stands with the finding.
	said := map[string]bool{}
	for _, f := range r.Findings {
		said[f.Statement] = true
	}
	for _, s := range r.Summary {
		if !said[s] {
			v.Sentences = append(v.Sentences, say.Clean(s))
		}
	}
	if len(found) == 0 && len(v.Sentences) == 0 && v.HasFit {
		v.Sentences = []string{"Nothing was found that sound works, sound gauges and recorded levels would not explain."}
	}
	v.Steps = say.Steps(found)
	v.Cautions = say.Cautions(r.Cautions)
}

// grade is a finding's grade with its probability, short.
func grade(f survey.Finding) string {
	s := capital(say.Clean(string(f.Grade)))
	if f.Probability.OK {
		s += " (" + say.Probability(f.Probability) + ")"
	}
	if f.Kind == survey.CauseOpen {
		s += "; cause open"
	}
	return s
}

// costs is what a finding costs in head, and in money where that is known.
func costs(r *report.Result, f survey.Finding) string {
	var parts []string
	if c := say.Cost(f); c != "" {
		parts = append(parts, c)
	}
	for _, c := range r.Costs {
		if c.Finding == f.ID && c.Money.OK {
			parts = append(parts, unit.Significant(c.Money.V, 2)+" "+say.Clean(c.Currency)+" a year")
		}
	}
	return strings.Join(parts, "; ")
}

func newCard(r *report.Result, f survey.Finding) card {
	c := card{ID: f.ID, Kind: capital(say.Kind(f.Kind)), Where: say.Where(f), Grade: say.Clean(string(f.Grade)), Statement: say.Clean(f.Statement),
		Evidence: sentences(f.Evidence), Rivals: sentences(f.Rivals), Advice: say.Clean(f.Advice), Settle: say.Clean(f.Settle), Cautions: say.Cautions(f.Cautions)}
	line := func(name, value string) {
		if value != "" {
			c.Lines = append(c.Lines, pair{name, value})
		}
	}
	line("How sure", capital(say.Sure(f)))
	line("How large", say.Size(f))
	if f.Expected.OK && f.Estimate.OK && f.Expected.V != 0 {
		line("Sound would be", say.Quantity(say.Stated(f.Expected.V), f.Unit))
	}
	var by []string
	for _, e := range f.Excess {
		by = append(by, say.Clean(e.Round)+" "+unit.Significant(e.Value, 2))
	}
	if len(by) > 0 {
		name := "Head it costs, by round"
		if !say.LosesHead(f.Kind) {
			name = "Changes heads, by round"
		}
		line(name, strings.Join(by, ", ")+" m")
	}
	for _, k := range r.Costs {
		if k.Finding == f.ID {
			line("What that costs", say.Money(k))
		}
	}
	var or []string
	for _, n := range f.CannotBeToldFrom {
		or = append(or, say.Rival(n))
	}
	line("Cannot be told apart from", strings.Join(or, "; "))
	if f.Kind == survey.CauseOpen {
		c.Lines[len(c.Lines)-1].Name = "Could be"
	}
	c.Sources = say.Places(f.Sources)
	return c
}

func (v *view) pictures(ps []report.Profile) {
	for i, p := range ps {
		wide := figure.Profile(p, figure.Options{ID: fmt.Sprintf("line-%d", i+1)})
		narrow := figure.Profile(p, figure.Options{ID: fmt.Sprintf("line-%d-narrow", i+1), Width: 340})
		// A picture escapes its own text; it is the only HTML that is not made by the
		// template.
		v.Figures = append(v.Figures, drawn{Caption: say.Clean(wide.Title()), Wide: template.HTML(wide.Inline()), Narrow: template.HTML(narrow.Inline())})
	}
}

func cleaned(ss []string) []string {
	var out []string
	for _, s := range ss {
		out = append(out, say.Clean(s))
	}
	return out
}

func sentences(ss []string) []string {
	var out []string
	for _, s := range ss {
		out = append(out, capital(say.Clean(s)))
	}
	return out
}

// capital begins a sentence.
func capital(s string) string {
	r, n := utf8.DecodeRuneInString(s)
	if n == 0 {
		return s
	}
	return string(unicode.ToUpper(r)) + s[n:]
}

func orDash(s string) string {
	if s == "" {
		return "–"
	}
	return s
}
