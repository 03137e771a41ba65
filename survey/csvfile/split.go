package csvfile

import (
	"encoding/csv"
	"errors"
	"io"
	"strings"
	"unicode"
	"unicode/utf8"
)

// record is one row of cells with the line it begins on.
type record struct {
	line  int
	cells []string
}

// blank reports whether a record has nothing in it.
func (r record) blank() bool {
	for _, c := range r.cells {
		if c != "" {
			return false
		}
	}
	return true
}

// comment reports whether a record is a remark to the reader: a cell that begins with
// # and nothing beside it. (Spreadsheets put such lines into quotation marks and fill
// them up with delimiters.)
func (r record) comment() bool {
	return strings.HasPrefix(r.cells[0], "#") && record{cells: r.cells[1:]}.blank()
}

// split cuts a table into records: no blank ones, no comments, cells without space
// around them. loose are the lines where a quotation mark stands for itself; they
// were taken literally.
func split(text string, delim byte) (records []record, loose []int, err error) {
	mended, loose := mendQuotes(text, delim)
	r := csv.NewReader(strings.NewReader(mended))
	r.Comma = rune(delim)
	r.Comment = '#'
	r.FieldsPerRecord = -1
	for {
		cells, err := r.Read()
		if errors.Is(err, io.EOF) {
			return records, loose, nil
		}
		if err != nil {
			return records, loose, err // mendQuotes leaves nothing to find fault with
		}
		line, _ := r.FieldPos(0)
		for i, c := range cells {
			cells[i] = trim(c)
		}
		rec := record{line: line, cells: cells}
		if !rec.blank() && !rec.comment() {
			records = append(records, rec)
		}
	}
}

// trim takes away space around a cell, also the kinds that cannot be seen: no-break
// spaces, zero-width spaces and byte-order marks in the middle of a file.
func trim(s string) string {
	s = strings.TrimSpace(s)
	if s == "" || s[0] < utf8.RuneSelf && s[len(s)-1] < utf8.RuneSelf {
		return s
	}
	return strings.TrimFunc(s, func(r rune) bool { return unicode.IsSpace(r) || r == '\u200b' || r == '\ufeff' })
}

// firstLines is the beginning of a text, up to n lines.
func firstLines(text string, n int) string {
	at := 0
	for range n {
		at = min(lineEnd(text, at)+1, len(text))
	}
	return text[:at]
}
