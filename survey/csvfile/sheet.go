package csvfile

import (
	"fmt"
	"iter"
	"maps"
	"slices"
	"sort"
	"strings"

	"github.com/gocarina/gocsv"

	"tapround/survey"
)

// sheet is one table while it is read.
type sheet struct {
	*folder
	spec   spec
	file   string
	cols   []headed // one for each of spec.columns
	body   []record
	width  int // cells of the heading up to its last word
	padded int // cells of the heading's line
	// orphans are the columns with a ditto mark in the first row: told once, and not
	// again as a word that is not known.
	orphans  map[string]bool
	marks    marks
	names    map[string]int // line of each name in the first column
	problems survey.Problems
	notices  map[string]*tally // by what was noticed, told once a file
}

// tally collects the lines of a notice that many rows share.
type tally struct {
	column, text, reason, remedy string
	lines                        []int
}

func (sh *sheet) problem(line int, sev survey.Severity, column, text, reason, remedy string) {
	sh.problems = append(sh.problems, survey.Problem{Source: survey.Source{File: sh.file, Line: line}, Severity: sev,
		Column: column, Text: text, Reason: reason, Remedy: remedy})
}

// note is a notice that is told once a file and column, with its lines.
func (sh *sheet) note(line int, column, text, reason, remedy string) {
	key := column + "\x00" + reason
	if sh.notices[key] == nil {
		sh.notices[key] = &tally{column: column, text: text, reason: reason, remedy: remedy}
	}
	sh.notices[key].lines = append(sh.notices[key].lines, line)
}

// finish turns the collected notices into problems and puts them all in the order of
// their lines.
func (sh *sheet) finish() {
	for _, key := range slices.Sorted(maps.Keys(sh.notices)) {
		n := sh.notices[key]
		reason := n.reason
		if len(n.lines) > 1 {
			reason += fmt.Sprintf("; %d rows: lines %s", len(n.lines), listed(n.lines))
		}
		sh.problem(n.lines[0], survey.Notice, n.column, n.text, reason, n.remedy)
	}
	sort.SliceStable(sh.problems, func(i, j int) bool { return sh.problems[i].Line < sh.problems[j].Line })
}

func listed(lines []int) string {
	const most = 12
	var b strings.Builder
	for i, l := range lines {
		if i == most {
			return b.String() + " and more"
		}
		if i > 0 {
			b.WriteString(", ")
		}
		fmt.Fprintf(&b, "%d", l)
	}
	return b.String()
}

// used counts the rows that no SetAside or Fatal problem names.
func (sh *sheet) used() int {
	bad := map[int]bool{}
	for _, p := range sh.problems {
		if p.Severity != survey.Notice {
			bad[p.Line] = true
		}
	}
	n := 0
	for _, rec := range sh.body {
		if !bad[rec.line] {
			n++
		}
	}
	return n
}

// weigh settles the file's decimal mark from the number columns of all rows.
func (sh *sheet) weigh() {
	for i, c := range sh.spec.columns {
		at := sh.cols[i].at
		if at < 0 || c.kind == text || c.kind == moment {
			continue
		}
		for _, rec := range sh.body {
			if at < len(rec.cells) {
				sh.marks.see(rec.cells[at])
			}
		}
	}
	if sh.marks.point && sh.marks.comma {
		sh.problem(0, survey.Notice, "", "", "numbers of this file have decimal points in some rows and decimal commas in others; each was read by its own mark",
			"use one decimal mark in a file")
	}
	if m := sh.marks; m.open != "" && m.delim != ',' && !m.point && !m.comma {
		sh.problem(0, survey.Notice, "", m.open, "was read as a decimal number; nothing in the file says whether its point is for thousands", "write numbers without thousands marks")
	}
}

// feed hands rows that were checked before to gocsv.
type feed [][]string

func (f *feed) ReadAll() ([][]string, error) { return *f, nil }

// Read is never called by gocsv's slice decoder; its interface asks for it.
func (f *feed) Read() ([]string, error) {
	if len(*f) == 0 {
		return nil, gocsv.ErrEmptyCSVFile
	}
	first := (*f)[0]
	*f = (*f)[1:]
	return first, nil
}

// inOrder puts the cells of all rows in the order of the table's columns, under a
// heading of plain names; a column the file lacks is there and empty. Ditto marks in
// columns of words become the cell above.
func (sh *sheet) inOrder() *feed {
	n := len(sh.spec.columns)
	store := make([]string, n*(len(sh.body)+1))
	out := make(feed, len(sh.body)+1)
	for i := range out {
		out[i] = store[i*n : (i+1)*n : (i+1)*n]
	}
	for c, col := range sh.spec.columns {
		out[0][c] = col.name
		h := sh.cols[c]
		if h.at < 0 {
			continue
		}
		for i, rec := range sh.body {
			if h.at >= len(rec.cells) {
				continue
			}
			cell := rec.cells[h.at]
			if col.kind == text && isDitto(cell) {
				if i == 0 {
					sh.problem(rec.line, sh.spec.rowFault, h.written, cell, noneAbove, "write the word itself")
					sh.orphans[col.name] = true
				} else {
					cell = out[i][c]
					sh.note(rec.line, h.written, rec.cells[h.at], "is a ditto mark; it was read as the cell above", "")
				}
			}
			out[i+1][c] = cell
		}
	}
	return &out
}

const noneAbove = "is a ditto mark with no row above it"

// rowsOf decodes the rows of a sheet into T, a struct of strings with one csv tag for
// each column of the table, and yields each with the row it came from.
func rowsOf[T any](sh *sheet) iter.Seq2[*row, T] {
	return func(yield func(*row, T) bool) {
		var typed []T
		in := sh.inOrder()
		if err := gocsv.UnmarshalCSV(in, &typed); err != nil || len(typed) != len(sh.body) {
			sh.problem(0, survey.Fatal, "", "", fmt.Sprintf("the rows could not be taken in (%d of %d): %v", len(typed), len(sh.body), err), "report this table to the makers of the tool")
			return
		}
		for i, t := range typed {
			r := &row{sheet: sh, at: survey.Source{File: sh.file, Line: sh.body[i].line}}
			if i == 0 && len(sh.orphans) > 0 {
				r.bad = noneAbove
			}
			r.checkWidth(sh.body[i].cells)
			if !yield(r, t) {
				return
			}
		}
	}
}

// take reads one table's text into the survey.
func (sh *sheet) take(text string, in *survey.Input) {
	delim, heading, ok := findHeading(text, sh.spec)
	if !ok {
		sh.noHeading(text)
		in.Understood += ", no heading found"
		return
	}
	records, loose, err := split(text, delim)
	if err != nil {
		sh.problem(0, survey.Fatal, "", "", "cannot be cut into cells: "+err.Error(), asUTF8)
		return
	}
	top := slices.IndexFunc(records, func(r record) bool { return r.line == heading.line })
	if top < 0 {
		// A quoted cell that opens above the heading swallowed it beyond the lines
		// that were looked at.
		sh.problem(heading.line, survey.Fatal, "", "", "a quotation mark above the heading is not closed", "take it away")
		return
	}
	sh.preamble(records[:top])
	sh.body = sh.withoutRepeats(records[top+1:], records[top])
	sh.padded = len(records[top].cells)
	for sh.width = sh.padded; records[top].cells[sh.width-1] == ""; sh.width-- {
	}
	sh.marks = marks{delim: delim}
	sh.readHeading(records[top])
	sh.weigh()
	for _, line := range loose {
		sh.problem(line, survey.Notice, "", "", "a quotation mark opens a cell that is not closed; it was taken as part of the text", "take the mark away, or close the cell")
	}
	sh.spec.read(sh)
	in.Rows = len(sh.body)
	in.Understood += fmt.Sprintf(", %s-separated, %s, heading line %d", delimName[delim], sh.marks.name(), records[top].line)
}

var delimName = map[byte]string{',': "comma", ';': "semicolon", '\t': "tab"}

// preamble tells which lines above the heading were passed over. Spreadsheets write
// sep=; there for themselves.
func (sh *sheet) preamble(above []record) {
	above = slices.DeleteFunc(slices.Clone(above), func(r record) bool {
		return strings.HasPrefix(strings.ToLower(r.cells[0]), "sep=")
	})
	if len(above) == 0 {
		return
	}
	what := fmt.Sprintf("line %d above the heading was passed over", above[0].line)
	if n := len(above); n > 1 {
		what = fmt.Sprintf("%d lines above the heading were passed over, the last is line %d", n, above[n-1].line)
	}
	first := strings.Join(slices.DeleteFunc(slices.Clone(above[0].cells), func(c string) bool { return c == "" }), " ")
	sh.problem(above[0].line, survey.Notice, "", first, what, "put # before lines that are not part of the table")
}

// withoutRepeats drops rows that are the heading again, as where exports were joined.
func (sh *sheet) withoutRepeats(rows []record, heading record) []record {
	return slices.DeleteFunc(rows, func(r record) bool {
		if !slices.Equal(r.cells, heading.cells) {
			return false
		}
		sh.note(r.line, "", "", "is the heading once more, and was passed over", "")
		return true
	})
}

func (sh *sheet) noHeading(text string) {
	want := "the headings of " + sh.spec.file + " are " + sh.spec.headings()
	if strings.TrimSpace(text) == "" {
		sev := survey.Notice
		if sh.spec.required && sh.file == sh.spec.file {
			sev = survey.Fatal
		}
		sh.problem(0, sev, "", "", "the file is empty", want)
		return
	}
	sh.problem(0, survey.Fatal, "", "", fmt.Sprintf("no line of the first %d has two known headings", probeLines), want)
}
