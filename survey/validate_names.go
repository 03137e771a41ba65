package survey

import (
	"fmt"
	"strings"
	"unicode/utf8"
)

// Nearest gives the known name that takes the fewest slips to reach from what was
// written: letters left out, added, mistaken or exchanged with their neighbour; letter
// case, spaces, hyphens and underscores do not count. It is empty where the nearest is
// further off than a third of the letters written, or one for short names: a worse guess
// sends the reader the wrong way. Of several as near the first is given.
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

var plain = strings.NewReplacer(" ", "", "_", "", "-", "", "\u00a0", "")

func plainName(s string) string { return plain.Replace(strings.ToLower(s)) }

// edits counts the insertions, deletions, replacements and exchanges of neighbours that
// turn a into b (optimal string alignment). An exchange is one slip of the finger: asset
// numbers are full of them.
func edits(a, b []rune) int {
	older, old, row := make([]int, len(b)+1), make([]int, len(b)+1), make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range a {
		older, old, row = old, row, older
		row[0] = i + 1
		for j := range b {
			cost := 0
			if a[i] != b[j] {
				cost = 1
			}
			row[j+1] = min(old[j]+cost, row[j]+1, old[j+1]+1)
			if i > 0 && j > 0 && a[i] == b[j-1] && a[i-1] == b[j] {
				row[j+1] = min(row[j+1], older[j-1]+1)
			}
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

type named struct {
	name string
	at   Source
}

func listNames[T any](list []T, of func(*T) named) []named {
	out := make([]named, len(list))
	for i := range list {
		out[i] = of(&list[i])
	}
	return out
}

// names tells of names that are hard to tell apart, or that mean two things.
func (v *validation) names() {
	tables := [][]named{
		listNames(v.Points, func(x *Point) named { return named{x.Name, x.Source} }),
		listNames(v.Pipes, func(x *Pipe) named { return named{x.Name, x.Source} }),
		listNames(v.Fittings, func(x *Fitting) named { return named{x.Name, x.Source} }),
		listNames(v.Machines, func(x *Machine) named { return named{x.Name, x.Source} }),
		listNames(v.Taps, func(x *Tap) named { return named{x.Name, x.Source} }),
		listNames(v.Gauges, func(x *Gauge) named { return named{x.Name, x.Source} }),
		listNames(v.Rounds, func(x *Round) named { return named{x.Name, x.Source} }),
	}
	for _, t := range tables {
		spaced, alike := false, false
		first := map[string]string{}
		for _, x := range t {
			n := x.name
			if strings.ContainsAny(n, " \t\n") && !spaced {
				spaced = true
				v.notice(x.at, "", n, "a name with a space in it: lists in the result tables are separated by spaces", "write names without spaces, such as "+strings.Join(strings.Fields(n), "-"))
			}
			p := plainName(n)
			if other, ok := first[p]; ok && other != n && !alike {
				alike = true
				v.notice(x.at, "", n, fmt.Sprintf("differs from %s in letter case, spaces or hyphens only; they are two names here", other), "write one name in one way")
			}
			if _, ok := first[p]; !ok {
				first[p] = n
			}
		}
	}
	for i := range v.Machines {
		if m := &v.Machines[i]; m.Name != "" && v.pipe[m.Name] != nil {
			v.fatal(m.Source, "machine", m.Name, fmt.Sprintf("a pipe has the same name (%s)", v.pipe[m.Name].Source), "give one of them another name: results list both in one column")
		}
	}
}
