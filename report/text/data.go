package text

import (
	"fmt"
	"io"
	"strings"

	"tapround/report/internal/say"
	"tapround/survey"
)

// Understood prints how each file was read, so that a wrong guess is seen at once.
func Understood(w io.Writer, inputs []survey.Input, o Options) error {
	p := &printer{w: w, o: o}
	var rows [][]string
	for _, in := range inputs {
		rows = append(rows, []string{say.Clean(in.File), fmt.Sprint(in.Rows), fmt.Sprint(in.Used), say.Clean(in.Understood)})
	}
	if len(rows) == 0 {
		p.line("No file of the survey was read.")
		return p.err
	}
	file := 4
	for _, r := range rows {
		file = min(30, max(file, columns(r[0])))
	}
	p.grid(0, []column{{heading: "file", most: 30}, {heading: "rows", right: true}, {heading: "used", right: true}, {heading: "read as", most: o.width() - file - 18}}, rows, nil)
	return p.err
}

// Problems prints what could not be used and what was read with a doubt, errors
// first. The same trouble in several lines of a file is said once, with the lines.
func Problems(w io.Writer, ps survey.Problems, o Options) error {
	p := &printer{w: w, o: o}
	for _, s := range []struct {
		severity  survey.Severity
		one, many string
	}{{survey.Fatal, "error: nothing can be computed until it is mended", "errors: nothing can be computed until they are mended"},
		{survey.SetAside, "row set aside", "rows set aside"}, {survey.Notice, "notice", "notices"}} {
		of := ps.Of(s.severity)
		if len(of) == 0 {
			continue
		}
		p.heading(say.Plural(len(of), s.one, s.many))
		p.problems(of)
	}
	if len(ps) == 0 {
		p.line("")
		p.line("Every row of every file was used.")
	}
	return p.err
}

// problems prints those of one severity, alike ones together.
func (p *printer) problems(ps survey.Problems) {
	type like struct{ file, column, text, reason, remedy string }
	lines := map[like][]int{}
	var order []like
	for _, x := range ps {
		k := like{x.File, x.Column, x.Text, x.Reason, x.Remedy}
		if lines[k] == nil {
			order = append(order, k)
		}
		lines[k] = append(lines[k], x.Line)
	}
	for _, k := range order {
		mark := p.mark(ps[0].Severity)
		p.para("  "+mark, say.Clean(place(k.file, lines[k], k.column, k.text)+": "+k.reason), 4)
		if k.remedy != "" {
			p.para("     "+p.ink(faint, "do"), say.Clean(k.remedy), 8)
		}
	}
}

func (p *printer) mark(s survey.Severity) string {
	switch s {
	case survey.Fatal:
		return p.ink(red, "x")
	case survey.SetAside:
		return p.ink(yellow, "-")
	}
	return "."
}

// place is where: "taps.csv lines 3-5, elevation "12,5x"".
func place(file string, lines []int, column, text string) string {
	var b strings.Builder
	b.WriteString(say.Place(file, lines))
	if column != "" {
		b.WriteString(", " + column)
	}
	if text != "" {
		fmt.Fprintf(&b, " %q", text)
	}
	return b.String()
}

// Alerts prints what the readings themselves show to be wrong; what must be done
// before the crew leaves comes first.
func Alerts(w io.Writer, alerts []survey.Alert, o Options) error {
	p := &printer{w: w, o: o}
	if len(alerts) == 0 {
		p.line("")
		p.line("The readings agree with one another as far as can be said without a model.")
		return p.err
	}
	for _, stay := range []bool{true, false} {
		title := "Do not leave before"
		if !stay {
			title = "To be known"
		}
		first := true
		for _, a := range alerts {
			if a.Stay != stay {
				continue
			}
			if first {
				p.heading(title)
				first = false
			}
			p.alert(a)
		}
	}
	return p.err
}

func (p *printer) alert(a survey.Alert) {
	mark := p.ink(yellow, "!")
	if a.Stay {
		mark = p.ink(red, "!")
	}
	p.para("  "+mark, say.Clean(a.Statement), 4)
	label := func(name, s string) {
		if s != "" {
			p.para("    "+p.ink(faint, name), say.Clean(s), 12)
		}
	}
	label("do", a.Action)
	label("seen", a.Evidence)
	label("limit", a.Limit)
	label("in", say.Places(a.Sources))
}
