package csvfile

import "strings"

// longestCell is how many lines a quoted cell may run over. A note is never that
// long; a quotation mark that somebody forgot to close is.
const longestCell = 20

// mendQuotes rewrites the quotation marks of a table as the CSV rules want them and
// leaves every line in its place. Crews write a lone " for "the same as above" and 6"
// for inches; taken by the rules, the first swallows rows up to the next mark without
// any error. Quoted cells that are well-formed, also those with line breaks inside,
// are left alone. The lines come back where a mark opens a cell that is not closed
// properly; it then stands for itself.
func mendQuotes(s string, delim byte) (string, []int) {
	if strings.IndexByte(s, '"') < 0 {
		return s, nil
	}
	m := mender{s: s, delim: delim, line: 1}
	m.out.Grow(len(s) + len(s)/16)
	for m.at < len(s) {
		end := lineEnd(s, m.at)
		if s[m.at] == '#' || strings.IndexByte(s[m.at:end], '"') < 0 {
			m.copyTo(min(end+1, len(s)))
			m.line++
			continue
		}
		m.row()
	}
	return m.out.String(), m.loose
}

type mender struct {
	s     string
	delim byte
	at    int
	line  int
	out   strings.Builder
	loose []int
}

func (m *mender) copyTo(end int) {
	m.out.WriteString(m.s[m.at:end])
	m.at = end
}

// row mends one row, which may run over several lines.
func (m *mender) row() {
	for {
		m.cell()
		if m.at >= len(m.s) {
			return
		}
		c := m.s[m.at]
		m.copyTo(m.at + 1)
		if c == '\n' {
			m.line++
			return
		}
	}
}

// cell mends one cell and stops at the delimiter or line end behind it.
func (m *mender) cell() {
	s := m.s
	open := m.skipSpaces(m.at)
	if open < len(s) && s[open] == '"' {
		if end := m.skipSpaces(open + 1); m.endsCell(end) && !m.closedInText(end) {
			m.out.WriteString(`""""`) // a lone mark
			m.at = end
			return
		}
		if end, ok := m.closing(open); ok {
			m.out.WriteString(s[open:end])
			m.line += strings.Count(s[open:end], "\n")
			m.at = m.skipSpaces(end)
			return
		}
		m.loose = append(m.loose, m.line)
	}
	end := m.at
	for !m.endsCell(end) {
		end++
	}
	cell := s[m.at:end]
	if strings.IndexByte(cell, '"') >= 0 {
		cell = `"` + strings.ReplaceAll(cell, `"`, `""`) + `"`
	}
	m.out.WriteString(cell)
	m.at = end
}

// closedInText tells a quoted cell that begins with the delimiter, as in ", steady",
// from two lone marks with cells between them: the next mark of the line ends a cell
// that has text before it.
func (m *mender) closedInText(at int) bool {
	line := m.s[at:lineEnd(m.s, at)]
	next := strings.IndexByte(line, '"')
	if next < 0 || !m.endsCell(m.skipSpaces(at+next+1)) {
		return false
	}
	before := strings.TrimRight(line[:next], " ")
	return before != "" && before[len(before)-1] != m.delim
}

// closing gives the place behind the mark that closes the one at open, and whether
// the cell is well-formed: the mark is followed by a delimiter or a line end, and not
// too many lines on.
func (m *mender) closing(open int) (int, bool) {
	lines := 0
	for i := open + 1; i < len(m.s); i++ {
		switch m.s[i] {
		case '\n':
			if lines++; lines > longestCell {
				return 0, false
			}
		case '"':
			if i+1 < len(m.s) && m.s[i+1] == '"' {
				i++
				continue
			}
			return i + 1, m.endsCell(m.skipSpaces(i + 1))
		}
	}
	return 0, false
}

func (m *mender) endsCell(i int) bool {
	return i >= len(m.s) || m.s[i] == m.delim || m.s[i] == '\n'
}

func (m *mender) skipSpaces(i int) int {
	for i < len(m.s) && (m.s[i] == ' ' || m.s[i] == '\t' && m.delim != '\t') {
		i++
	}
	return i
}

// lineEnd gives the place of the line feed at or behind i, or the end of s.
func lineEnd(s string, i int) int {
	if n := strings.IndexByte(s[i:], '\n'); n >= 0 {
		return i + n
	}
	return len(s)
}
