package csvfile

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"tapround/survey"
	"tapround/survey/unit"
)

// row is one data row while its cells are read.
type row struct {
	*sheet
	at survey.Source
	// bad is the first reason that keeps the row out of use.
	bad string
	// muted: nothing more is said about the row.
	muted bool
	// garbled: cells may stand in the wrong columns, so no number of it is believed.
	garbled bool
}

// tell makes a problem of a cell.
func (r *row) tell(sev survey.Severity, column, cell, reason, remedy string) {
	if r.muted || r.orphans[column] && r.at.Line == r.body[0].line {
		return
	}
	if sev != survey.Notice && r.bad == "" {
		r.bad = reason
	}
	r.problem(r.at.Line, sev, r.heading(column), cell, reason, remedy)
}

// fail tells what keeps the row out of use, with the table's own severity.
func (r *row) fail(column, cell, reason, remedy string) {
	r.tell(r.spec.rowFault, column, cell, reason, remedy)
}

func (sh *sheet) headed(column string) headed {
	return sh.cols[sh.spec.words[column]]
}

// heading is the column's heading as the file has it.
func (sh *sheet) heading(column string) string {
	if i, ok := sh.spec.words[column]; ok {
		return sh.cols[i].written
	}
	return column
}

// checkWidth compares a row with the heading. It must have as many cells, or as many as
// the heading has words where the heading's line is filled up with empty ones. Empty
// cells too many are no matter of form: a decimal comma between commas pushes the rest
// of its row one cell on, and out of the table falls an empty note.
func (r *row) checkWidth(cells []string) {
	n := len(cells)
	if n == r.width || n == r.padded && (record{cells: cells[r.width:]}).blank() {
		return
	}
	remedy := "fill up or take away cells until the row fits the heading; an empty cell needs its delimiter too"
	if n > r.width && r.marks.delim == ',' {
		remedy = "put text that has a comma into quotation marks; where numbers have decimal commas, save the table with semicolons"
	}
	r.fail("", strings.Join(cells, string(r.marks.delim)), fmt.Sprintf("has %d cells under %d headings", n, r.width), remedy)
	r.muted, r.garbled = true, true
}

// name reads the cell of a name that every row must have.
func (r *row) name(column, cell string) string {
	if cell == "" && !r.headed(column).broken {
		r.tell(survey.Fatal, column, "", "is empty, and every row needs it", "write it in every row, also where it is the same as above")
	}
	return cell
}

// own reads the name that the row is about, which no other row of the table may have.
func (r *row) own(column, cell string) string {
	r.name(column, cell)
	if cell == "" {
		return cell
	}
	if line, twice := r.names[cell]; twice {
		r.tell(survey.Fatal, column, cell, fmt.Sprintf("stands in line %d already", line), "give each its own name, or take one of the rows away")
		return cell
	}
	r.names[cell] = r.at.Line
	return cell
}

// number reads a cell that is not empty; NaN where it cannot be read, which was told.
func (r *row) number(column, cell string) float64 {
	if r.garbled || r.headed(column).broken {
		return math.NaN()
	}
	v, grouped, bad := r.marks.number(cell)
	if bad != nil {
		if bad.unclear {
			r.tell(survey.Fatal, column, cell, bad.reason, bad.remedy)
		} else {
			if bad.none && column == "reading" {
				bad.remedy = "read it again; if that is not possible nothing needs mending"
			}
			r.fail(column, cell, bad.reason, bad.remedy)
		}
		return math.NaN()
	}
	if grouped {
		r.note(r.at.Line, r.heading(column), cell, "has marks between its thousands; they were taken out", "write numbers without them")
	}
	return v
}

// in converts a number written in u; NaN where the unit was refused.
func in(u unit.Unit, v float64) float64 {
	if u.Factor == 0 {
		return math.NaN()
	}
	return u.ToSI(v)
}

// stated reads a number by the unit of its heading, or without one; an empty cell is
// not stated. What cannot be read counts as stated, so that nothing is put in its
// place.
func (r *row) stated(column, cell string) survey.Maybe {
	if cell == "" {
		return survey.Maybe{}
	}
	v := r.number(column, cell)
	if h := r.headed(column); h.unit.Factor != 0 {
		v = h.unit.ToSI(v)
	}
	return survey.Some(v)
}

// needed reads a number that must be stated.
func (r *row) needed(column, cell string) float64 {
	if cell == "" {
		r.absent(column)
		return math.NaN()
	}
	return r.stated(column, cell).V
}

// statedIn reads a number written in the row's own unit.
func (r *row) statedIn(column, cell string, u unit.Unit) survey.Maybe {
	if cell == "" {
		return survey.Maybe{}
	}
	return survey.Some(in(u, r.number(column, cell)))
}

// neededIn reads a number in the row's own unit that must be stated.
func (r *row) neededIn(column, cell string, u unit.Unit) float64 {
	if cell == "" {
		r.absent(column)
		return math.NaN()
	}
	return r.statedIn(column, cell, u).V
}

func (r *row) absent(column string) {
	if !r.headed(column).broken {
		r.fail(column, "", "is empty, and a number is needed here", "write the number")
	}
}

// unit reads the row's own unit. A unit that is missing or unknown is an error also
// where a bad number only sets the row aside: it is a slip of the table and not of the
// instrument, and easily mended.
func (r *row) unit(cell string, d unit.Dimension, absolute bool) unit.Unit {
	if r.garbled || r.headed("unit").broken {
		return unit.Unit{}
	}
	parse := func() (unit.Unit, error) { return unit.Parse(cell, d) }
	if absolute {
		parse = func() (unit.Unit, error) { return unit.ParseAbsolute(cell) }
	}
	u, err := parse()
	if err != nil {
		r.tell(survey.Fatal, "unit", cell, unitReason(err), unitRemedy(err))
	}
	return u
}

// choice reads one of the words that a column may hold, by any spelling that fold
// brings together, or by a synonym. Anything else is an error.
func choice[T ~string](r *row, column, cell string, words []T, also map[string]T) T {
	if r.headed(column).broken {
		return ""
	}
	for _, w := range words {
		if string(w) == cell {
			return w
		}
	}
	f := fold(cell)
	list := make([]string, len(words))
	for i, w := range words {
		if list[i] = string(w); fold(list[i]) == f {
			return w
		}
	}
	if w, ok := also[f]; ok {
		return w
	}
	if cell == "" {
		r.tell(survey.Fatal, column, "", "is empty, and every row needs it", "write one of "+strings.Join(list, ", "))
		return ""
	}
	remedy := "write one of " + strings.Join(list, ", ")
	if n := survey.Nearest(cell, list); n != "" {
		remedy = fmt.Sprintf("did you mean %s? The words are %s", n, strings.Join(list, ", "))
	}
	r.tell(survey.Fatal, column, cell, "is not a known "+column, remedy)
	return ""
}

// known reports a name that an earlier table should have, where numbers of this row
// cannot be converted without it. Other names are left to Survey.Validate.
func (r *row) known(column, cell, table string, names []string) bool {
	if cell == "" || slices.Contains(names, cell) {
		return cell != ""
	}
	remedy := "add it to " + table + ", or correct the name"
	if n := survey.Nearest(cell, names); n != "" {
		remedy = fmt.Sprintf("did you mean %s? If not, add %s to %s", n, cell, table)
	}
	r.tell(survey.Fatal, column, cell, table+" does not have it", remedy)
	return false
}
