// Package text prints what an operator sees on a terminal: short, aligned, in plain
// words, with units, rounded to the uncertainty. It chooses and formats; every
// number is in the result already.
package text

import (
	"io"
	"strings"
)

// Options of a printing. The zero value is plain text 92 columns wide.
type Options struct {
	Colour bool
	// Width in columns; 0: 92. Less than 60 is taken as 60.
	Width int
	// Written is the folder the result files went into; empty: none were written.
	Written string
}

func (o Options) width() int {
	if o.Width == 0 {
		return 92
	}
	return max(o.Width, 60)
}

// printer prints lines and remembers the first failure to write.
type printer struct {
	w   io.Writer
	o   Options
	err error
}

func (p *printer) line(s string) {
	if p.err == nil {
		_, p.err = io.WriteString(p.w, strings.TrimRight(s, " ")+"\n")
	}
}

// para prints a text wrapped, with an indent; first stands in front of its first
// line, within the indent where it fits there.
func (p *printer) para(first, s string, indent int) {
	lead := strings.Repeat(" ", indent)
	for i, l := range wrap(s, p.o.width()-indent) {
		if i == 0 && first != "" {
			p.line(first + strings.Repeat(" ", max(1, indent-columns(first))) + l)
			continue
		}
		p.line(lead + l)
	}
}

func (p *printer) heading(s string) {
	p.line("")
	for _, l := range wrap(s, p.o.width()) {
		p.line(p.ink(bold, l))
	}
}

// The few colours there are; they add nothing that the words do not say.
const (
	bold   = "\x1b[1m"
	red    = "\x1b[1;31m"
	yellow = "\x1b[33m"
	faint  = "\x1b[2m"
	reset  = "\x1b[0m"
)

func (p *printer) ink(colour, s string) string {
	if !p.o.Colour || s == "" {
		return s
	}
	return colour + s + reset
}

// column of a grid: its heading, whether numbers stand in it, the most columns of
// the terminal it may take (0: any), and its colour by row.
type column struct {
	heading string
	right   bool
	most    int
	colour  func(row int) string
}

// grid prints rows in aligned columns, two blanks between them. A cell that is too
// wide goes on in the next line. A row without cells is an empty line. under, where
// it is given, holds what stands in a line of its own below a row.
func (p *printer) grid(indent int, cs []column, rows [][]string, under map[int]string) {
	cells := make([][][]string, len(rows)) // row, column, line
	widths := make([]int, len(cs))
	for i, c := range cs {
		widths[i] = columns(c.heading)
	}
	for r, row := range rows {
		cells[r] = make([][]string, len(row))
		for i, cell := range row {
			lines := []string{cell}
			if cs[i].most > 0 {
				lines = wrap(cell, cs[i].most)
			}
			cells[r][i] = lines
			for _, l := range lines {
				widths[i] = max(widths[i], columns(l))
			}
		}
	}
	lead := strings.Repeat(" ", indent)
	var head []string
	for i, c := range cs {
		head = append(head, pad(c.heading, widths[i], c.right))
	}
	if h := strings.Join(head, "  "); strings.TrimSpace(h) != "" {
		p.line(lead + p.ink(faint, strings.TrimRight(h, " ")))
	}
	for r := range rows {
		tall := 1
		for _, c := range cells[r] {
			tall = max(tall, len(c))
		}
		for n := range tall {
			var out []string
			for i, c := range cells[r] {
				s := ""
				if n < len(c) {
					s = c[n]
				}
				s = pad(s, widths[i], cs[i].right)
				if cs[i].colour != nil {
					if k := cs[i].colour(r); k != "" {
						s = p.ink(k, s)
					}
				}
				out = append(out, s)
			}
			p.line(lead + strings.Join(out, "  "))
		}
		if under[r] != "" {
			p.para("", under[r], indent+7)
		}
	}
}

func pad(s string, width int, right bool) string {
	gap := strings.Repeat(" ", max(0, width-columns(s)))
	if right {
		return gap + s
	}
	return s + gap
}
