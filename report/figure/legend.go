package figure

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"tapround/report"
	"tapround/survey/unit"
)

// entry is one line of the legend: a sample as it is drawn, and its words.
type entry struct {
	text   string
	sample func(c *draw.Canvas, at vg.Rectangle)
	width  vg.Length
}

// Lines closer than this on paper are one line to the eye.
const apart vg.Length = 1.6

// choose decides which lines can be told apart at the scale found, and what the
// legend says of those that cannot.
func (s *sheet) choose() {
	var fitted, expected bound // of the total head over the piezometric
	seesTotal, seesExpected := false, false
	for _, p := range s.panels {
		if !p.heads {
			continue
		}
		perMetre := float64(p.height) / (p.y.max - p.y.min)
		if d, ok := gap(p.profile.Total, p.profile.Piezometric); ok {
			fitted = fitted.with(d)
			p.noTotal = d*perMetre < float64(apart)
			seesTotal = seesTotal || !p.noTotal
		} else {
			seesTotal = seesTotal || len(p.profile.Total) > 0
		}
		if d, ok := gap(p.profile.ExpectedTotal, p.profile.ExpectedPiezo); ok {
			expected = expected.with(d)
			p.noExpectedTotal = d*perMetre < float64(apart)
			seesExpected = seesExpected || !p.noExpectedTotal
		} else {
			seesExpected = seesExpected || len(p.profile.ExpectedTotal) > 0
		}
	}
	s.entries = s.entries[:0]
	any := func(of func(report.Profile) bool) bool {
		return slices.ContainsFunc(s.panels, func(p *panel) bool { return p.heads && of(p.profile) })
	}
	line := func(style draw.LineStyle, text string) {
		s.entries = append(s.entries, entry{text: text, sample: lineSample(style)})
	}
	if any(func(p report.Profile) bool { return len(p.Piezometric) > 0 }) {
		line(piezoFitted, "piezometric line, as fitted")
	}
	if seesTotal {
		line(totalFitted, "total head line, as fitted")
	}
	if any(func(p report.Profile) bool { return len(p.ExpectedPiezo) > 0 }) {
		line(piezoExpected, "piezometric line, sound works")
	}
	if seesExpected {
		line(totalExpected, "total head line, sound works")
	}
	if any(func(p report.Profile) bool { return reads(p, false) }) {
		s.entries = append(s.entries, entry{text: "measured piezometric head, 95 % bar", sample: dotSample(false)})
	}
	if any(func(p report.Profile) bool { return reads(p, true) }) {
		s.entries = append(s.entries, entry{text: "measured total head, 95 % bar", sample: dotSample(true)})
	}
	if slices.ContainsFunc(s.panels, func(p *panel) bool { return p.pipe && len(p.profile.Ground) > 1 }) {
		s.entries = append(s.entries, entry{text: "level of the pipe", sample: soilSample})
	}
	for _, vacuum := range []bool{false, true} {
		if slices.ContainsFunc(s.spans, func(v span) bool { return v.vacuum == vacuum }) {
			text := "stretch under suspicion"
			if vacuum {
				text = "line under the pipe: below atmosphere"
			}
			s.entries = append(s.entries, entry{text: text, sample: hatchSample(vacuum)})
		}
	}
	s.remark(fitted, expected, seesTotal, seesExpected)
}

// remark says in words what the scale hides.
func (s *sheet) remark(fitted, expected bound, seesTotal, seesExpected bool) {
	hidden := fitted.and(expected)
	if hidden.ok && !seesTotal && !seesExpected {
		s.notes = append(s.notes, fmt.Sprintf("Total head lies at most %s m above the piezometric line: not visible at this scale, so one line stands for both.", unit.Significant(hidden.hi, 2)))
	}
	if slices.ContainsFunc(s.panels, func(p *panel) bool {
		return p.heads && slices.ContainsFunc(p.profile.Measured, func(m report.ProfileReading) bool { return m.Note != "" })
	}) {
		s.notes = append(s.notes, "A mark such as F3 beside a reading names the finding that explains it.")
	}
	bars, dots := 0, 0
	for _, p := range s.panels {
		if !p.heads {
			continue
		}
		perMetre := float64(p.height) / (p.y.max - p.y.min)
		for _, m := range p.profile.Measured {
			dots++
			if m.Bar*perMetre > float64(bigDot) {
				bars++
			}
		}
	}
	switch {
	case dots > 0 && bars == 0:
		s.notes = append(s.notes, "The 95 % bars are shorter than the dots and hidden by them.")
	case bars < dots:
		s.notes = append(s.notes, "Where no bar shows, it is shorter than the dot.")
	}
}

func reads(p report.Profile, total bool) bool {
	return slices.ContainsFunc(p.Measured, func(m report.ProfileReading) bool { return m.Total == total })
}

// gap is the greatest distance between two sets of lines that have the same
// vertices; not ok where they have not.
func gap(a, b [][]report.XY) (float64, bool) {
	if len(a) != len(b) || len(a) == 0 {
		return 0, false
	}
	d := 0.0
	for i := range a {
		if len(a[i]) != len(b[i]) {
			return 0, false
		}
		for j := range a[i] {
			if a[i][j].X != b[i][j].X {
				return 0, false
			}
			d = math.Max(d, math.Abs(a[i][j].Y-b[i][j].Y))
		}
	}
	return d, true
}

const sampleWidth vg.Length = 24

// fillLegend breaks the entries into rows of equal columns.
func (s *sheet) fillLegend() {
	s.legendRows = nil
	if len(s.entries) == 0 {
		return
	}
	st := plainText(smallSize, ink)
	widest := vg.Length(0)
	for i := range s.entries {
		s.entries[i].width = sampleWidth + 5 + st.Width(s.entries[i].text)
		widest = max(widest, s.entries[i].width)
	}
	columns := max(1, int((s.width-2*edge+12)/(widest+12)))
	rows := (len(s.entries) + columns - 1) / columns
	// Fill down the columns, so that fitted and expected stand together.
	for r := range rows {
		var row []entry
		for i := r; i < len(s.entries); i += rows {
			row = append(row, s.entries[i])
		}
		s.legendRows = append(s.legendRows, row)
	}
}

func lineSample(style draw.LineStyle) func(*draw.Canvas, vg.Rectangle) {
	return func(c *draw.Canvas, r vg.Rectangle) {
		y := (r.Min.Y + r.Max.Y) / 2
		c.StrokeLine2(style, r.Min.X, y, r.Max.X, y)
	}
}

func dotSample(total bool) func(*draw.Canvas, vg.Rectangle) {
	return func(c *draw.Canvas, r vg.Rectangle) {
		drawReading(c, vg.Point{X: (r.Min.X + r.Max.X) / 2, Y: (r.Min.Y + r.Max.Y) / 2}, 4.6, total)
	}
}

func soilSample(c *draw.Canvas, r vg.Rectangle) {
	y := (r.Min.Y+r.Max.Y)/2 + 1.5
	c.FillPolygon(earthFill, []vg.Point{{X: r.Min.X, Y: r.Min.Y}, {X: r.Max.X, Y: r.Min.Y}, {X: r.Max.X, Y: y}, {X: r.Min.X, Y: y}})
	c.StrokeLine2(pipeLine, r.Min.X, y, r.Max.X, y)
}

func hatchSample(vacuum bool) func(*draw.Canvas, vg.Rectangle) {
	return func(c *draw.Canvas, r vg.Rectangle) {
		style := suspectLine
		if vacuum {
			style = vacuumLine
		}
		hatch(c, style, r, !vacuum)
		c.StrokeLines(style, []vg.Point{r.Min, {X: r.Max.X, Y: r.Min.Y}, r.Max, {X: r.Min.X, Y: r.Max.Y}, r.Min})
	}
}
