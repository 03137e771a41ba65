package table

import (
	"math"
	"regexp"
	"strconv"
	"strings"

	"tapround/survey"
)

// number prints v with ten significant figures, without exponent: read back it is
// the same to 5 parts in 10^11, which is less than the 1e-9 to which the flows
// balance, while the shortest form that gives every bit back would print the
// rounding of the unit conversion (42.300000000000004 L/s). No number is an empty
// cell: NaN would be refused when the table is read back.
func number(v float64) string {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return ""
	}
	r, err := strconv.ParseFloat(strconv.FormatFloat(v, 'e', 9, 64), 64)
	if err != nil || r == 0 {
		return "0" // r == 0 also takes the sign off a negative zero
	}
	return strconv.FormatFloat(r, 'f', -1, 64)
}

// maybe prints scale times a stated number; not stated is an empty cell.
func maybe(m survey.Maybe, scale float64) string {
	if !m.OK {
		return ""
	}
	return number(scale * m.V)
}

func yes(b bool) string {
	if b {
		return "yes"
	}
	return "no"
}

// text makes a text harmless: one line, valid UTF-8, and nothing a spreadsheet
// would take for a formula and run. Such a text gets an apostrophe in front, which
// spreadsheets take as "this is text"; a plain number with a sign stays as it is.
func text(s string) string {
	s = strings.Join(strings.FieldsFunc(strings.ToValidUTF8(s, "\uFFFD"), isBreak), " ")
	bare := strings.TrimLeft(s, " \u00a0")
	if bare == "" || !strings.ContainsRune("=+-@＝＋－＠", []rune(bare)[0]) || plainNumber.MatchString(bare) || bare == "-" {
		return s
	}
	return "'" + s
}

// isBreak is any control character: line ends, tabs, and what no table should hold.
func isBreak(r rune) bool {
	return r < 0x20 || (r >= 0x7f && r < 0xa0) || r == '\u2028' || r == '\u2029'
}

var (
	plainNumber  = regexp.MustCompile(`^[+-]?\d+([.,]\d+)?$`)
	decimalComma = regexp.MustCompile(`(\d),(\d)`)
	commas       = regexp.MustCompile(`^[^.,]*\d,\d[^.,]*(-[^.,]*\d,\d[^.,]*)?$`)
)

// written gives a reading as it was written, with a decimal point: the crew's sheet
// may have a decimal comma, but this table's delimiter is the comma, and by the
// contract such a number could not be read back.
func written(s string) string {
	if commas.MatchString(s) {
		s = decimalComma.ReplaceAllString(s, "$1.$2")
	}
	return text(s)
}

// list joins names by single spaces.
func list(names []string) string { return text(strings.Join(names, " ")) }
