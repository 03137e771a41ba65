package figure

import (
	"fmt"
	"strings"

	"tapround/report"
	"tapround/survey/unit"
)

// describe says in words what the picture shows, for those who cannot see it and
// for programs that read pages aloud.
func (s *sheet) describe(ps []report.Profile) {
	var b strings.Builder
	for _, p := range ps {
		fmt.Fprintf(&b, "Round %s, %s.", clean(p.Round), clean(p.Title))
		if f, ok := endsOf(p.Piezometric); ok {
			fmt.Fprintf(&b, " The fitted piezometric line runs from %s m to %s m above datum", unit.Significant(f[0], 4), unit.Significant(f[1], 4))
			if e, ok := endsOf(p.ExpectedPiezo); ok {
				fmt.Fprintf(&b, "; for sound works it would end at %s m", unit.Significant(e[1], 4))
			}
			b.WriteString(".")
		}
		if n := len(p.Measured); n > 0 {
			fmt.Fprintf(&b, " Measured heads stand at %s.", places(p))
		}
		for _, v := range p.Suspect {
			fmt.Fprintf(&b, " Under suspicion from %.0f m to %.0f m: %s.", v.From, v.To, clean(v.Label))
		}
		for _, v := range p.BelowAir {
			fmt.Fprintf(&b, " The line lies under the pipe from %.0f m to %.0f m.", v.From, v.To)
		}
		b.WriteString(" ")
	}
	s.description = strings.TrimSpace(b.String())
}

func endsOf(lines [][]report.XY) ([2]float64, bool) {
	if len(lines) == 0 {
		return [2]float64{}, false
	}
	last := lines[len(lines)-1]
	return [2]float64{lines[0][0].Y, last[len(last)-1].Y}, true
}

func places(p report.Profile) string {
	var names []string
	for _, m := range p.Measured {
		if t := clean(m.Tap); len(names) == 0 || names[len(names)-1] != t {
			names = append(names, t)
		}
	}
	return strings.Join(names, ", ")
}
