package text

import (
	"strings"
	"unicode"
	"unicode/utf8"

	"golang.org/x/text/width"
)

// columns is how many columns of the terminal a text takes: East Asian wide letters
// take two, marks that stand on others and colour sequences take none.
func columns(s string) int {
	n := 0
	for i := 0; i < len(s); {
		if s[i] == '\x1b' {
			end := strings.IndexByte(s[i:], 'm')
			if end < 0 {
				return n
			}
			i += end + 1
			continue
		}
		r, size := utf8.DecodeRuneInString(s[i:])
		n += runeColumns(r)
		i += size
	}
	return n
}

func runeColumns(r rune) int {
	switch {
	case unicode.In(r, unicode.Mn, unicode.Me, unicode.Cf):
		return 0
	case width.LookupRune(r).Kind() == width.EastAsianWide, width.LookupRune(r).Kind() == width.EastAsianFullwidth:
		return 2
	}
	return 1
}

// wrap breaks a text into lines of at most n columns, between words; a word that is
// wider by itself is cut.
func wrap(s string, n int) []string {
	n = max(n, 8)
	var lines []string
	line, used := "", 0
	for _, word := range strings.Fields(s) {
		w := columns(word)
		if used > 0 && used+1+w > n {
			lines = append(lines, line)
			line, used = "", 0
		}
		for w > n {
			head, rest := cut(word, n)
			lines = append(lines, head)
			word, w = rest, columns(rest)
		}
		if used > 0 {
			line, used = line+" ", used+1
		}
		line, used = line+word, used+w
	}
	if used > 0 || len(lines) == 0 {
		lines = append(lines, line)
	}
	return lines
}

// cut takes as many letters off the front of a word as n columns hold.
func cut(word string, n int) (head, rest string) {
	used := 0
	for i, r := range word {
		used += runeColumns(r)
		if used > n {
			return word[:i], word[i:]
		}
	}
	return word, ""
}
