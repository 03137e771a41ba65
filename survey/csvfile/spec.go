package csvfile

import (
	"strings"

	"tapround/survey"
	"tapround/survey/unit"
)

// kind says what stands in the cells of a column.
type kind int

const (
	text     kind = iota // words, kept as written; ditto marks are followed
	plain                // a number without a unit
	measured             // a number whose unit stands in the heading
	byRow                // a number whose unit stands in the row's own unit column
	moment               // a date with a time of day
)

// column is one heading of a table.
type column struct {
	name     string
	kind     kind
	dim      unit.Dimension // of a measured column
	required bool
	also     string // synonyms, separated by spaces, as fold leaves them
}

// spec is one kind of table.
type spec struct {
	file     string
	required bool
	// missing says what an absent required table leaves out.
	missing    string
	mayBeEmpty bool // no rows are as good as some
	columns    []column
	// rowFault is what a cell that cannot be read does to the run.
	rowFault survey.Severity
	read     func(*sheet)
	// words finds a column by its own name or by a folded heading.
	words map[string]int
}

// fold brings spellings of one heading or kind together: letter case, spaces,
// underscores, hyphens and dots do not count, and gage is gauge.
func fold(s string) string {
	s = strings.Map(func(r rune) rune {
		switch r {
		case ' ', '_', '-', '.', '\u00a0', '\n', '\t':
			return -1
		}
		return r
	}, strings.ToLower(s))
	return strings.ReplaceAll(s, "gage", "gauge")
}

// index fills words. Two columns with one spelling would be this package's own
// mistake, and a test looks for it.
func (s spec) index() spec {
	s.words = map[string]int{}
	for i, c := range s.columns {
		s.words[c.name], s.words[fold(c.name)] = i, i
		for _, w := range strings.Fields(c.also) {
			s.words[w] = i
		}
	}
	return s
}

func (s spec) headings() string {
	names := make([]string, len(s.columns))
	for i, c := range s.columns {
		names[i] = c.heading()
	}
	return strings.Join(names, ", ")
}

// exampleUnit stands in messages for a heading's unit.
var exampleUnit = map[unit.Dimension]string{
	unit.Length: "m", unit.Flow: "L/s", unit.Pressure: "kPa", unit.Temperature: "C", unit.Rotation: "rpm",
	unit.Fraction: "%", unit.Duration: "s", unit.Angle: "deg",
}

// heading is the column as the user should write it.
func (c column) heading() string {
	if c.kind != measured {
		return c.name
	}
	u := exampleUnit[c.dim]
	switch c.name {
	case "bore", "roughness", "depth", "outlet_bore":
		u = "mm"
	}
	return c.name + " [" + u + "]"
}
