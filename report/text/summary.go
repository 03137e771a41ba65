package text

import (
	"fmt"
	"io"
	"path"
	"strings"

	"tapround/report"
	"tapround/report/internal/say"
	"tapround/survey"
	"tapround/survey/unit"
)

// Summary prints a reconciliation: the findings and what to do, the stretches that
// lose most, how good the data are, and where the files went.
func Summary(w io.Writer, r *report.Result, o Options) error {
	p := &printer{w: w, o: o}
	p.facts(r)
	found, hints, unseen := say.Split(r.Findings)
	p.findings(r, found)
	p.hints(hints)
	p.unseen(unseen)
	p.trust(r)
	p.losses(r.Losses)
	p.quality(r)
	p.cautions(r)
	p.files(o)
	return p.err
}

func (p *printer) facts(r *report.Result) {
	f := r.Survey
	title := say.Clean(f.Title)
	if title == "" {
		title = "Survey without a title"
	}
	p.para("", p.ink(bold, title), 0)
	p.para("", fmt.Sprintf("%s (%s); %s, %s km; %s; %d of %s used.",
		say.Plural(len(f.Rounds), "round", "rounds"), say.Clean(strings.Join(f.Rounds, " ")), say.Plural(f.Pipes, "pipe", "pipes"),
		unit.Significant(f.PipeLength/1000, 3), say.Plural(f.Taps, "tap", "taps"), f.Used, say.Plural(f.Readings, "reading", "readings")), 0)
}

func (p *printer) findings(r *report.Result, found []survey.Finding) {
	p.heading("Findings")
	if len(found) == 0 {
		p.para("", "Nothing was found that sound works, sound gauges and recorded levels would not explain.", 2)
		return
	}
	var rows [][]string
	for _, f := range found {
		rows = append(rows, []string{f.ID, string(f.Grade), say.Kind(f.Kind), say.Where(f), dash(strings.Replace(say.Size(f), "95 %: ", "", 1)), dash(say.Cost(f))})
	}
	p.grid(2, []column{{}, {heading: "how sure", colour: func(i int) string { return gradeColour(found[i].Grade) }}, {heading: "what", most: 18}, {heading: "where", most: 18}, {heading: "how large (95 %)", most: 28}, {heading: "costs most"}}, rows, nil)
	for _, f := range found {
		p.line("")
		p.finding(r, f)
	}
}

const labelled = 14

func (p *printer) finding(r *report.Result, f survey.Finding) {
	p.para(p.ink(bold, "  "+f.ID), say.Clean(f.Statement), 6)
	label := func(name, s string) {
		if s != "" {
			p.para("      "+p.ink(faint, name), say.Clean(s), labelled)
		}
	}
	if f.Advice != "" {
		label("do", f.Advice)
	}
	label("settle", f.Settle)
	label("sure", say.Sure(f))
	if len(f.CannotBeToldFrom) > 0 {
		var names []string
		for _, n := range f.CannotBeToldFrom {
			names = append(names, say.Rival(n))
		}
		label("or", strings.Join(names, "; "))
	}
	for _, c := range r.Costs {
		if c.Finding == f.ID {
			label("costs", say.Money(c))
		}
	}
}

func gradeColour(g survey.Grade) string {
	switch g {
	case survey.Proven:
		return red
	case survey.Likely:
		return yellow
	}
	return ""
}

func (p *printer) hints(hints []survey.Finding) {
	if len(hints) == 0 {
		return
	}
	p.heading("Hints: may be chance, to be looked at next time")
	for _, f := range hints {
		p.para("  "+f.ID, say.Clean(f.Statement), 6)
	}
}

func (p *printer) unseen(unseen []survey.Finding) {
	if len(unseen) == 0 {
		return
	}
	p.heading("Not seen by these readings: no fault found there does not mean sound")
	for _, f := range unseen {
		p.para("  "+f.ID, say.Clean(f.Statement), 6)
	}
}

// trust says whether the numbers may be used.
func (p *printer) trust(r *report.Result) {
	f := r.Fit
	switch {
	case f.Status == "" && f.Readings == 0:
		return // only the data were looked at
	case !f.Converged:
		p.heading("Do not use these numbers")
		p.para("", "The fit did not settle: "+say.Clean(f.Status)+".", 2)
	default:
		p.heading("Do the works, so explained, agree with the readings?")
		p.para("", say.Agreement(f), 2)
	}
	for _, c := range f.Caveats {
		p.para("  -", say.Clean(c), 4)
	}
}

const worstStretches = 6

// losses lists the stretches that lose more than sound works would, each in the
// round in which it shows most.
func (p *printer) losses(rows []report.LossRow) {
	if len(rows) == 0 {
		return
	}
	worst, rest := say.Worst(rows, worstStretches)
	if len(worst) == 0 {
		p.heading("Stretches")
		p.para("", "No stretch between neighbouring taps loses more than sound works would, as far as these readings tell.", 2)
		return
	}
	p.heading("Stretches that lose more than sound works (m of total head; ± one standard uncertainty)")
	var out [][]string
	for _, l := range worst {
		out = append(out, []string{say.Clean(l.FromTap + " to " + l.ToTap), say.Clean(l.Round), say.By(l.Measured, l.ExcessU), say.By(l.Expected, l.ExcessU),
			say.With(l.Excess, l.ExcessU), say.Probability(l.Probability), say.Clean(strings.Join(l.Items, " "))})
	}
	p.grid(2, []column{{heading: "stretch"}, {heading: "round"}, {heading: "measured", right: true}, {heading: "expected", right: true},
		{heading: "excess", right: true}, {heading: "how sure"}, {heading: "what lies between", most: 24}}, out, nil)
	if rest > 0 {
		p.para("", say.Plural(rest, "other stretch loses", "other stretches lose")+" no more than sound works would, as far as these readings tell.", 2)
	}
}

func (p *printer) quality(r *report.Result) {
	p.heading("Data")
	aside, notices := r.Problems.Of(survey.SetAside), r.Problems.Of(survey.Notice)
	p.para("", fmt.Sprintf("%d of %s used; %s set aside; %s.", r.Survey.Used, say.Plural(r.Survey.Readings, "reading", "readings"),
		say.Plural(len(aside), "row", "rows"), say.Plural(len(notices), "notice", "notices")), 2)
	p.problems(aside)
	others := 0
	for _, a := range r.Alerts {
		if !a.Stay {
			others++
			continue
		}
		p.para("  "+p.ink(red, "!"), say.Clean(a.Statement)+" "+say.Clean(a.Action), 4)
	}
	if others > 0 {
		p.para("  "+p.ink(yellow, "!"), say.Plural(others, "further remark", "further remarks")+" on the readings: report.html has them, and so does the check command.", 4)
	}
}

func (p *printer) cautions(r *report.Result) {
	if len(r.Cautions) == 0 {
		return
	}
	p.heading("Before anybody works on site")
	for _, c := range say.Cautions(r.Cautions) {
		p.para("  -", c, 4)
	}
}

var resultFiles = []string{"heads.csv", "flows.csv", "grade_lines.csv", "parameters.csv", "residuals.csv", "losses.csv", "findings.csv", "report.html", "result.json"}

func (p *printer) files(o Options) {
	if o.Written == "" {
		return
	}
	p.line("")
	p.para("", "Written to "+say.Clean(o.Written)+": "+strings.Join(resultFiles, ", ")+".", 0)
	p.para("", "The whole story is in "+say.Clean(path.Join(strings.ReplaceAll(o.Written, "\\", "/"), "report.html"))+"; open it in a browser.", 0)
}

func dash(s string) string {
	if s == "" {
		return "–"
	}
	return s
}
