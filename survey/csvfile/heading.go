package csvfile

import (
	"fmt"
	"strings"

	"tapround/survey"
	"tapround/survey/unit"
)

// headed is one column of a table as a file has it.
type headed struct {
	at      int    // place in the row; -1: the file has no such column
	written string // heading as written; the plain name where there is none
	unit    unit.Unit
	// broken: the heading's fault was told; its cells are not looked at.
	broken bool
}

// probeLines is how far down a heading is looked for.
const probeLines = 200

// findHeading picks the delimiter and the line of the heading by its words: the row,
// under any delimiter, that matches most of the table's columns, the first of
// several. Two must match.
func findHeading(text string, sp spec) (delim byte, heading record, ok bool) {
	head := firstLines(text, probeLines)
	best := 1
	for _, d := range []byte{',', ';', '\t'} {
		records, _, err := split(head, d)
		if err != nil {
			continue
		}
		for _, rec := range records {
			if n := sp.matches(rec.cells); n > best {
				best, delim, heading = n, d, rec
			}
		}
	}
	return delim, heading, best > 1
}

// matches counts the different columns that a row of cells names.
func (sp spec) matches(cells []string) int {
	seen := make([]bool, len(sp.columns))
	n := 0
	for _, c := range cells {
		name, _, _ := cutUnit(c)
		if i, ok := sp.find(c, name); ok && !seen[i] {
			seen[i] = true
			n++
		}
	}
	return n
}

// find gives the column that a heading names. What stands in round brackets may be a
// remark, so the whole heading is tried without it as well.
func (sp spec) find(cell, name string) (int, bool) {
	if i, ok := sp.words[fold(name)]; ok {
		return i, true
	}
	i, ok := sp.words[fold(cell)]
	return i, ok
}

// cutUnit splits "length [m]" into name and unit; round brackets are taken for square
// ones, and may have others within: (bar(g)). bracket is 0 where the heading has none.
func cutUnit(heading string) (name, unit string, bracket byte) {
	for _, b := range []string{"[]", "()"} {
		open := strings.IndexByte(heading, b[0])
		if open > 0 && strings.HasSuffix(heading, b[1:]) {
			return strings.TrimSpace(heading[:open]), strings.TrimSpace(heading[open+1 : len(heading)-1]), b[0]
		}
	}
	return heading, "", 0
}

// readHeading finds the place and unit of each column of the table. Every fault is a
// problem at the heading's line.
func (sh *sheet) readHeading(heading record) {
	sp := sh.spec
	sh.cols = make([]headed, len(sp.columns))
	for i, c := range sp.columns {
		sh.cols[i] = headed{at: -1, written: c.name}
	}
	var unknown []string
	for at, cell := range heading.cells {
		if cell == "" {
			sh.unnamed(heading.line, at)
			continue
		}
		name, u, bracket := cutUnit(cell)
		i, ok := sp.find(cell, name)
		if !ok {
			unknown = append(unknown, cell)
			continue
		}
		h := &sh.cols[i]
		if h.at >= 0 {
			sh.problem(heading.line, survey.Fatal, cell, "",
				fmt.Sprintf("a second heading for %s, beside %q", sp.columns[i].name, h.written),
				"take one of the two columns away, or give it another heading")
			h.broken = true
			continue
		}
		h.at, h.written = at, oneLine(cell)
		sh.headingUnit(heading.line, sp.columns[i], h, u, bracket)
	}
	sh.missingColumns(heading.line, unknown)
	for _, u := range unknown {
		sh.unknownColumn(heading.line, u)
	}
}

// headingUnit settles the unit of a column from what its heading has in brackets.
func (sh *sheet) headingUnit(line int, c column, h *headed, written string, bracket byte) {
	fault := func(reason, remedy string) {
		sh.problem(line, survey.Fatal, h.written, "", reason, remedy)
		h.broken = true
	}
	switch {
	case c.kind == measured && written == "":
		remedy := "write it in the heading, as " + c.heading()
		if u, below := sh.unitBelow(c, h.at); below {
			remedy = fmt.Sprintf("the unit stands in the row below the heading; write it in the heading, as %s [%s], and take that row away", c.name, u)
		}
		fault("has no unit, and a unit is never guessed", remedy)
	case c.kind == measured:
		u, err := parseUnit(written, c)
		if err != nil {
			fault(fmt.Sprintf("unit %q %s", written, unitReason(err)), unitRemedy(err))
			return
		}
		h.unit = u
	case bracket != '[' || written == "":
		// Words in round brackets beside a heading without a unit are a remark.
	case c.kind == byRow:
		fault(fmt.Sprintf("has the unit %q in the heading, but each row states its own", written),
			"write the unit into the column unit of every row, and take it out of the heading")
	case c.kind == plain:
		if _, err := unit.Parse(written, unit.Count); err != nil {
			fault(fmt.Sprintf("has the unit %q, but it is a plain number", written), "take the unit out of the heading")
		}
	case c.kind == moment:
		fault(fmt.Sprintf("has %q in brackets, but a time has no unit", written), "state the zone as time_zone in survey.csv, or write each time with its offset")
	default:
		fault(fmt.Sprintf("has the unit %q, but it holds words", written), "take the unit out of the heading")
	}
}

// parseUnit reads a heading's unit. A barometer's is absolute by its nature.
func parseUnit(written string, c column) (unit.Unit, error) {
	if c.name == "barometer" {
		return unit.ParseAbsolute(written)
	}
	return unit.Parse(written, c.dim)
}

// unitBelow looks for a row of units under the heading.
func (sh *sheet) unitBelow(c column, at int) (string, bool) {
	if len(sh.body) == 0 || at >= len(sh.body[0].cells) {
		return "", false
	}
	u := strings.Trim(sh.body[0].cells[at], "[]() ")
	_, err := parseUnit(u, c)
	return u, u != "" && err == nil
}

func (sh *sheet) missingColumns(line int, unknown []string) {
	for i, c := range sh.spec.columns {
		if !c.required || sh.cols[i].at >= 0 {
			continue
		}
		remedy := "add it; the headings of " + sh.spec.file + " are " + sh.spec.headings()
		for _, u := range unknown {
			name, _, _ := cutUnit(u)
			if survey.Nearest(name, []string{c.name}) != "" {
				remedy = fmt.Sprintf("did you mean it by %q? Write %s", oneLine(u), c.heading())
			}
		}
		sh.problem(line, survey.Fatal, c.name, "", "the column is missing", remedy)
		sh.cols[i].broken = true
	}
}

func (sh *sheet) unknownColumn(line int, cell string) {
	names := make([]string, len(sh.spec.columns))
	for i, c := range sh.spec.columns {
		names[i] = c.name
	}
	name, _, _ := cutUnit(cell)
	remedy := "the headings of " + sh.spec.file + " are " + sh.spec.headings()
	if n := survey.Nearest(name, names); n != "" {
		remedy = fmt.Sprintf("the nearest known heading is %s", sh.spec.columns[sh.spec.words[fold(n)]].heading())
	}
	sh.problem(line, survey.Notice, oneLine(cell), "", "the heading is not known; the column was not read", remedy)
}

// unnamed tells of a column without a heading that holds something.
func (sh *sheet) unnamed(line, at int) {
	for _, rec := range sh.body {
		if at < sh.width && at < len(rec.cells) && rec.cells[at] != "" {
			sh.problem(line, survey.Notice, "", rec.cells[at], fmt.Sprintf("column %d holds values but has no heading; it was not read", at+1), "give it a heading, or take it away")
			return
		}
	}
}

// oneLine puts a heading that was broken over lines on one.
func oneLine(s string) string { return strings.Join(strings.Fields(s), " ") }

func unitReason(err error) string {
	if e, ok := err.(*unit.NameError); ok {
		return e.Reason
	}
	return err.Error()
}

func unitRemedy(err error) string {
	if e, ok := err.(*unit.NameError); ok {
		return e.Remedy()
	}
	return "write a unit"
}
