package figure

import (
	"sort"
	"strings"

	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
)

// label is a name that stands over a place of the route.
type label struct {
	text   string
	x      vg.Length // of its place
	width  vg.Length
	device bool      // fitting or machine; else tap or point
	quiet  bool      // a point without a tap
	row    int       // of a flag, from the panel upward
	at     vg.Length // of an upright name, where it stands
}

// flags places names as flags on poles: each name begins at its own pole and flies
// to the right, in the lowest row that keeps clear. Seen from the right, a name
// goes one row above every pole that it would cover, so that no pole ever cuts a
// name and no name covers another. It gives the number of rows.
func flags(ls []label, gap vg.Length) int {
	sort.SliceStable(ls, func(i, j int) bool { return ls[i].x < ls[j].x })
	rows := 0
	for i := len(ls) - 1; i >= 0; i-- {
		ls[i].row = 0
		for j := i + 1; j < len(ls) && ls[j].x < ls[i].x+ls[i].width+gap; j++ {
			ls[i].row = max(ls[i].row, ls[j].row+1)
		}
		rows = max(rows, ls[i].row+1)
	}
	return rows
}

// spread moves positions, which ascend, apart to at least gap, keeps their order,
// and keeps them inside lo..hi where they fit.
func spread(xs []vg.Length, gap, lo, hi vg.Length) []vg.Length {
	at := append([]vg.Length(nil), xs...)
	for i := range at {
		at[i] = max(at[i], lo)
		if i > 0 {
			at[i] = max(at[i], at[i-1]+gap)
		}
	}
	limit := hi
	for i := len(at) - 1; i >= 0; i-- {
		at[i] = min(at[i], limit)
		limit = at[i] - gap
	}
	return at
}

// fit cuts a text that is wider than it may be, and shows that it was cut.
func fit(st text.Style, s string, width vg.Length) string {
	if st.Width(s) <= width {
		return s
	}
	r := []rune(s)
	for len(r) > 1 && st.Width(string(r)+"…") > width {
		r = r[:len(r)-1]
	}
	return string(r) + "…"
}

// wrap breaks a text into lines of at most the width, between words.
func wrap(st text.Style, s string, width vg.Length) []string {
	var out []string
	line := ""
	for _, w := range strings.Fields(s) {
		if line != "" && st.Width(line+" "+w) > width {
			out = append(out, line)
			line = ""
		}
		if line != "" {
			line += " "
		}
		line += w
	}
	return append(out, line)
}

// strip is an interval that wants a row of its own where it meets others.
type strip struct {
	lo, hi vg.Length
	row    int
}

// pack gives each strip the lowest row in which it meets no other, in order of
// their beginnings, and the number of rows.
func pack(ss []strip, gap vg.Length) int {
	order := make([]int, len(ss))
	for i := range order {
		order[i] = i
	}
	sort.SliceStable(order, func(a, b int) bool { return ss[order[a]].lo < ss[order[b]].lo })
	var ends []vg.Length
	for _, i := range order {
		row := 0
		for row < len(ends) && ends[row]+gap > ss[i].lo {
			row++
		}
		if row == len(ends) {
			ends = append(ends, 0)
		}
		ss[i].row, ends[row] = row, ss[i].hi
	}
	return len(ends)
}
