package say

import (
	"fmt"
	"sort"
	"strings"
	"unicode"

	"tapround/survey"
)

// Clean makes a text one printable line: a name from a table may hold an escape
// sequence for the terminal, a line end, or what XML and so SVG forbid.
func Clean(s string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r == '\n' || r == '\r' || r == '\t':
			return ' '
		case unicode.IsControl(r) || r == unicode.ReplacementChar || r == 0xFFFE || r == 0xFFFF || isTurn(r):
			return -1
		}
		return r
	}, strings.ToValidUTF8(s, "?"))
}

// isTurn: marks that turn the direction of writing can make a line read as another.
func isTurn(r rune) bool { return (r >= 0x202a && r <= 0x202e) || (r >= 0x2066 && r <= 0x2069) }

// Plural puts a number before its word.
func Plural(n int, one, many string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, many)
}

// Places shortens a list of sources: "taps.csv lines 3-5, 9; pipes.csv line 2".
func Places(sources []survey.Source) string {
	lines := map[string][]int{}
	var files []string
	for _, s := range sources {
		if _, seen := lines[s.File]; !seen {
			files = append(files, s.File)
		}
		lines[s.File] = append(lines[s.File], s.Line)
	}
	var out []string
	for _, f := range files {
		out = append(out, Place(f, lines[f]))
	}
	return strings.Join(out, "; ")
}

// Place is a file with its lines; line 0 is the whole file.
func Place(file string, lines []int) string {
	s := Clean(file)
	switch {
	case len(lines) == 1 && lines[0] > 0:
		s += fmt.Sprintf(" line %d", lines[0])
	case len(lines) > 1:
		s += " lines " + Lines(lines)
	}
	return s
}

// Lines shortens a list of line numbers: "3-5, 9".
func Lines(ns []int) string {
	sort.Ints(ns)
	var out []string
	for i := 0; i < len(ns); {
		j := i
		for j+1 < len(ns) && ns[j+1] <= ns[j]+1 {
			j++
		}
		if ns[j] > ns[i] {
			out = append(out, fmt.Sprintf("%d-%d", ns[i], ns[j]))
		} else {
			out = append(out, fmt.Sprint(ns[i]))
		}
		i = j + 1
	}
	return strings.Join(out, ", ")
}
