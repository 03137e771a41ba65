package csvfile

import (
	"strings"
)

// marks is what a whole file shows of how its numbers are written.
type marks struct {
	delim byte
	// point and comma: a cell was seen that can only be read with that decimal mark.
	point, comma bool
	// open is the first cell like 1.500, which would be for thousands if anything in
	// the file said so.
	open string
}

// name says it for Input.Understood.
func (m marks) name() string {
	switch {
	case m.point && m.comma:
		return "decimal points and decimal commas"
	case m.comma:
		return "decimal comma"
	}
	return "decimal point"
}

// see takes the evidence of one cell. Where the delimiter is the comma, a decimal
// comma is no possibility, and a cell that has one is told when it is read.
func (m *marks) see(cell string) {
	p := !m.point && strings.IndexByte(cell, '.') >= 0
	c := !m.comma && m.delim != ',' && strings.IndexByte(cell, ',') >= 0
	if !p && !c {
		return
	}
	parts := []string{cell}
	if _, ok := parseShape(cell); !ok {
		parts = rangeEnds(cell)
	}
	for _, part := range parts {
		n, _ := parseShape(part)
		switch {
		case n.decimal == '.':
			m.point = true
		case n.decimal == ',':
			m.comma = m.delim != ','
		case n.open == '.' && m.open == "":
			m.open = part
		}
	}
}

// shape is a number taken apart by its characters alone.
type shape struct {
	plain string // sign, digits, decimal point, exponent: what ParseFloat takes
	// decimal is the mark that can only be decimal; 0: there is none, or open.
	decimal byte
	// open is the one mark that may be decimal or for thousands, as in 1,234. plain
	// takes it as decimal.
	open byte
	// group is the mark that was taken out from between thousands; 0: none was.
	group rune
}

// parseShape takes a number apart. Not everything that looks like a number is one; ok
// tells. Marks between groups of three digits are for thousands where that is the
// only way to read them: several equal ones, or some before a different last mark, or
// spaces and apostrophes, which are never decimal.
func parseShape(s string) (shape, bool) {
	sign := ""
	rest, minus := strings.CutPrefix(s, "-")
	if !minus {
		rest, minus = strings.CutPrefix(s, "\u2212")
	}
	if minus {
		sign = "-"
	} else {
		rest = strings.TrimPrefix(rest, "+")
	}
	mantissa, exponent := rest, ""
	if i := strings.IndexAny(rest, "eE"); i >= 0 {
		mantissa, exponent = rest[:i], rest[i:]
		if !isExponent(exponent[1:]) {
			return shape{}, false
		}
	}
	whole, fraction, n := cutDecimal(mantissa)
	digits, group, ok := ungroup(whole)
	if !ok || !allDigits(fraction) || digits == "" && fraction == "" {
		return shape{}, false
	}
	n.group = group
	if n.open != 0 && exponent != "" {
		n.decimal, n.open = n.open, 0
	}
	n.plain = sign + digits
	if fraction != "" {
		n.plain += "." + fraction
	}
	n.plain += exponent
	return n, true
}

// cutDecimal splits a mantissa at its decimal mark. A single mark before exactly three
// digits, behind one to three that do not begin with 0, is open.
func cutDecimal(s string) (whole, fraction string, n shape) {
	last := strings.LastIndexAny(s, ".,")
	if last < 0 {
		return s, "", n
	}
	mark := s[last]
	if strings.IndexByte(s, mark) < last {
		return s, "", n // several equal ones: for thousands, if anything
	}
	whole, fraction = s[:last], s[last+1:]
	if len(fraction) == 3 && allDigits(whole) && len(whole) >= 1 && len(whole) <= 3 && whole[0] != '0' {
		n.open = mark
	} else {
		n.decimal = mark
	}
	return whole, fraction, n
}

// ungroup takes thousands marks out of a whole number: one kind of mark only, one to
// three digits first, then three in each group.
func ungroup(s string) (digits string, mark rune, ok bool) {
	if allDigits(s) {
		return s, 0, true
	}
	for _, mark := range ",. '\u00a0\u202f\u2009\u2019" {
		groups := strings.Split(s, string(mark))
		if len(groups) < 2 || len(groups[0]) < 1 || len(groups[0]) > 3 || groups[0][0] == '0' {
			continue
		}
		fits := allDigits(groups[0])
		for _, g := range groups[1:] {
			fits = fits && len(g) == 3 && allDigits(g)
		}
		if fits {
			return strings.Join(groups, ""), mark, true
		}
	}
	return "", 0, false
}

func allDigits(s string) bool {
	for i := range len(s) {
		if s[i] < '0' || s[i] > '9' {
			return false
		}
	}
	return true
}

func isExponent(s string) bool {
	if s != "" && (s[0] == '-' || s[0] == '+') {
		s = s[1:]
	}
	return s != "" && allDigits(s)
}
