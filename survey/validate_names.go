package survey

import (
	"fmt"
	"strings"
	"unicode/utf8"
)

// Nearest gives the known name that takes the fewest single-letter edits to reach
// from what was written, letter case, spaces, hyphens and underscores left out of the
// count. It is empty where the nearest is further off than a third of the letters
// written, or one for short names: a worse guess sends the reader the wrong way.
// Of several as near the first is given.
func Nearest(written string, known []string) string {
	w := []rune(plainName(written))
	best, name := 1+max(1, len(w)/3), ""
	if len(w) == 0 {
		return ""
	}
	for _, k := range known {
		p := plainName(k)
		if d := utf8.RuneCountInString(p) - len(w); d >= best || -d >= best {
			continue
		}
		// A name that shares no letter with what was written is no hint.
		if n := edits(w, []rune(p)); n < best && n < len(w) {
			best, name = n, k
		}
	}
	return name
}

func plainName(s string) string {
	return strings.NewReplacer(" ", "", "_", "", "-", "", "\u00a0", "").Replace(strings.ToLower(s))
}

// edits counts the insertions, deletions and replacements that turn a into b.
func edits(a, b []rune) int {
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range a {
		diagonal := row[0]
		row[0] = i + 1
		for j := range b {
			cost := diagonal
			if a[i] != b[j] {
				cost++
			}
			diagonal = row[j+1]
			row[j+1] = min(cost, row[j]+1, row[j+1]+1)
		}
	}
	return row[len(b)]
}

// didYouMean is the remedy for a name that leads nowhere: the nearest known one, or
// the table that should have it.
func didYouMean(written string, known []string, table string) string {
	if n := Nearest(written, known); n != "" {
		return fmt.Sprintf("did you mean %s? If not, add %s to %s", n, written, table)
	}
	return fmt.Sprintf("add %s to %s, or correct the name", written, table)
}
