package figure

import (
	"math"

	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// paint draws the sheet from the top down.
func (s *sheet) paint(c draw.Canvas) {
	c.FillPolygon(paper, []vg.Point{{}, {X: s.width}, {X: s.width, Y: s.height}, {Y: s.height}})
	y := s.height - 15
	title := boldText(titleSize, ink)
	round := fit(title, s.round, s.width/3)
	c.FillText(title, vg.Point{X: edge, Y: y}, fit(title, s.title, s.width-3*edge-title.Width(round)))
	c.FillText(aligned(title, draw.XRight, draw.YBottom), vg.Point{X: s.width - edge, Y: y}, round)
	y = s.height - 20
	s.paintSpans(c, y)
	y -= vg.Length(s.stripRows) * stripRow
	s.paintNames(c, y)
	y -= s.nameHeight
	for i, p := range s.panels {
		y -= p.captionHeight()
		if p.caption != "" {
			c.FillText(boldText(textSize, ink), vg.Point{X: s.left, Y: y + 2}, p.caption)
		}
		s.paintPanel(c, p, y, i == len(s.panels)-1)
		y -= p.height + panelGap
	}
	s.paintLegend(c, y-axisHeight)
}

// area is the data area of a panel whose top is at y.
func (s *sheet) area(p *panel, y vg.Length) vg.Rectangle {
	return vg.Rectangle{Min: vg.Point{X: s.left, Y: y - p.height}, Max: vg.Point{X: s.right, Y: y}}
}

// paintPanel gives the library the rectangle whose data area comes to lie exactly
// where the names stand: its axes take what they need outside of that.
func (s *sheet) paintPanel(c draw.Canvas, p *panel, y vg.Length, last bool) {
	g := s.plot(p, last)
	want := s.area(p, y)
	trial := draw.Canvas{Canvas: c.Canvas, Rectangle: want}
	got := g.DataCanvas(trial)
	outer := want
	outer.Min.X -= got.Min.X - want.Min.X
	outer.Min.Y -= got.Min.Y - want.Min.Y
	outer.Max.X += want.Max.X - got.Max.X
	outer.Max.Y += want.Max.Y - got.Max.Y
	g.Draw(draw.Canvas{Canvas: c.Canvas, Rectangle: outer})
}

// paintSpans draws the brackets with their words over the panels.
func (s *sheet) paintSpans(c draw.Canvas, top vg.Length) {
	for i, v := range s.spans {
		lo, hi := s.spanEnds(v)
		y := top - vg.Length(s.stripRows-s.strips[i].row)*stripRow
		line, st := bracketLine, boldText(smallSize, rust)
		if v.vacuum {
			line, st = vacuumBracket, boldText(smallSize, slate)
		}
		c.StrokeLines(line, []vg.Point{{X: lo, Y: y}, {X: lo, Y: y + 2.5}, {X: hi, Y: y + 2.5}, {X: hi, Y: y}})
		half := st.Width(v.label) / 2
		mid := min(max((lo+hi)/2, edge+half), s.width-edge-half)
		c.FillText(aligned(st, draw.XCenter, draw.YBottom), vg.Point{X: mid, Y: y + 4}, v.label)
	}
}

func (n name) style() text.Style {
	switch {
	case n.device:
		return italicText(smallSize, pencil)
	case n.quiet:
		return plainText(smallSize, pencil)
	}
	return plainText(smallSize, ink)
}

func (s *sheet) paintNames(c draw.Canvas, top vg.Length) {
	bottom := top - s.nameHeight
	for _, l := range s.poles {
		st := name{device: l.device, quiet: l.quiet}.style()
		if s.rotated {
			c.StrokeLines(poleStyle(l), []vg.Point{{X: l.x, Y: bottom}, {X: l.x, Y: bottom + 2}, {X: l.at, Y: bottom + 9}})
			st = aligned(st, draw.XLeft, draw.YCenter)
			st.Rotation = math.Pi / 2
			c.FillText(st, vg.Point{X: l.at, Y: bottom + 10}, l.text)
			continue
		}
		y := bottom + 3 + vg.Length(l.row)*nameRow
		c.StrokeLine2(poleStyle(l), l.x, bottom, l.x, y+nameRow-3)
		c.FillText(st, vg.Point{X: l.x + 2, Y: y}, l.text)
	}
}

func (s *sheet) paintLegend(c draw.Canvas, top vg.Length) {
	st := aligned(plainText(smallSize, ink), draw.XLeft, draw.YCenter)
	widest := vg.Length(0)
	for _, e := range s.entries {
		widest = max(widest, e.width)
	}
	y := top
	for _, row := range s.legendRows {
		for i, e := range row {
			x := edge + vg.Length(i)*(widest+12)
			mid := y - legendRow/2
			e.sample(&c, vg.Rectangle{Min: vg.Point{X: x, Y: mid - 4}, Max: vg.Point{X: x + sampleWidth, Y: mid + 4}})
			c.FillText(st, vg.Point{X: x + sampleWidth + 5, Y: mid}, e.text)
		}
		y -= legendRow
	}
	for _, n := range s.noteLines {
		c.FillText(aligned(italicText(smallSize, pencil), draw.XLeft, draw.YCenter), vg.Point{X: edge, Y: y - noteRow/2}, n)
		y -= noteRow
	}
}
