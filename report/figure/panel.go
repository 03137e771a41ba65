package figure

import (
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/plotter"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"tapround/report"
)

// panel is one set of axes over the route.
type panel struct {
	profile report.Profile
	caption string
	heads   bool // draws grade lines and readings
	pipe    bool // draws the pipe's level
	bound   bound
	y       scale
	height  vg.Length
	yLabel  string

	noTotal, noExpectedTotal bool // too close to the piezometric line to be told apart
}

func (p *panel) captionHeight() vg.Length {
	if p.caption == "" {
		return 0
	}
	return 12
}

// plot builds the axes of a panel with all that is drawn inside them.
func (s *sheet) plot(p *panel, last bool) *plot.Plot {
	g := plot.New()
	g.BackgroundColor = nil
	g.X.Min, g.X.Max, g.Y.Min, g.Y.Max = s.x.min, s.x.max, p.y.min, p.y.max
	dress(&g.Y, p.y, p.yLabel)
	if !p.bound.ok {
		g.Y.Tick.Marker = plot.ConstantTicks(nil)
		g.Add(emptiness{})
	}
	if last {
		dress(&g.X, s.x, s.xLabel)
	} else {
		dress(&g.X, plot.ConstantTicks(nil), "")
		g.X.Tick.Length = 0
	}
	if p.pipe {
		g.Add(soil(p.profile.Ground))
	}
	g.Add(hatching{s})
	if !p.bound.ok {
		return g
	}
	grid := plotter.NewGrid()
	grid.Vertical.Color = nil // the poles of the names do this
	grid.Horizontal = gridLine
	g.Add(grid, poles{s})
	if p.pipe {
		g.Add(curve{[][]report.XY{p.profile.Ground}, pipeLine})
	}
	if p.heads {
		if !p.noExpectedTotal {
			g.Add(curve{p.profile.ExpectedTotal, totalExpected})
		}
		g.Add(curve{p.profile.ExpectedPiezo, piezoExpected})
		if !p.noTotal {
			g.Add(curve{p.profile.Total, totalFitted})
		}
		g.Add(curve{p.profile.Piezometric, piezoFitted}, readings{p.profile.Measured, p.profile.Piezometric})
	}
	return g
}

// curve draws runs of vertices. A step, two vertices at one chainage, comes out as
// the true vertical it is.
type curve struct {
	lines [][]report.XY
	style draw.LineStyle
}

func (l curve) Plot(c draw.Canvas, g *plot.Plot) {
	x, y := g.Transforms(&c)
	for _, run := range l.lines {
		pts := make([]vg.Point, len(run))
		for i, v := range run {
			pts[i] = vg.Point{X: x(v.X), Y: y(v.Y)}
		}
		c.StrokeLines(l.style, c.ClipLinesXY(pts)...)
	}
}

// soil fills what lies under the pipe, so that the eye knows which line it is.
type soil []report.XY

func (l soil) Plot(c draw.Canvas, g *plot.Plot) {
	if len(l) < 2 {
		return
	}
	x, y := g.Transforms(&c)
	pts := []vg.Point{{X: x(l[0].X), Y: c.Min.Y}}
	for _, v := range l {
		pts = append(pts, vg.Point{X: x(v.X), Y: y(v.Y)})
	}
	pts = append(pts, vg.Point{X: x(l[len(l)-1].X), Y: c.Min.Y})
	c.FillPolygon(earthFill, c.ClipPolygonXY(pts))
}

// hatching rules the suspect stretches upward to the right, and those below
// atmosphere downward, so that they differ without colour.
type hatching struct{ s *sheet }

func (h hatching) Plot(c draw.Canvas, _ *plot.Plot) {
	for _, v := range h.s.spans {
		lo, hi := h.s.spanEnds(v)
		style := suspectLine
		if v.vacuum {
			style = vacuumLine
		}
		hatch(&c, style, vg.Rectangle{Min: vg.Point{X: lo, Y: c.Min.Y}, Max: vg.Point{X: hi, Y: c.Max.Y}}, !v.vacuum)
		c.StrokeLine2(style, lo, c.Min.Y, lo, c.Max.Y)
		c.StrokeLine2(style, hi, c.Min.Y, hi, c.Max.Y)
	}
}

const hatchGap vg.Length = 6

// hatch fills a rectangle with 45 degree lines. They are placed on one grid for the
// whole sheet, so that stretches that meet are ruled alike.
func hatch(c *draw.Canvas, style draw.LineStyle, r vg.Rectangle, up bool) {
	height := r.Max.Y - r.Min.Y
	first := math.Floor(float64((r.Min.X - height) / hatchGap))
	for at := vg.Length(first) * hatchGap; at < r.Max.X; at += hatchGap {
		// From (at, bottom) to (at+height, top), cut at the sides.
		x0, y0, x1, y1 := at, r.Min.Y, at+height, r.Max.Y
		if x0 < r.Min.X {
			y0 += r.Min.X - x0
			x0 = r.Min.X
		}
		if x1 > r.Max.X {
			y1 -= x1 - r.Max.X
			x1 = r.Max.X
		}
		if x1 <= x0 {
			continue
		}
		if !up {
			y0, y1 = r.Min.Y+r.Max.Y-y0, r.Min.Y+r.Max.Y-y1
		}
		c.StrokeLine2(style, x0, y0, x1, y1)
	}
}

// poles carries the leaders of the names through the panel.
type poles struct{ s *sheet }

func (p poles) Plot(c draw.Canvas, _ *plot.Plot) {
	for _, l := range p.s.poles {
		c.StrokeLine2(poleStyle(l), l.x, c.Min.Y, l.x, c.Max.Y)
	}
}

func poleStyle(l label) draw.LineStyle {
	if l.device {
		return deviceLeader
	}
	return leaderLine
}

// readings are the measured heads with their 95 % bars: full dots for the
// piezometric head, open diamonds for the total head.
type readings struct {
	all  []report.ProfileReading
	line [][]report.XY // the fitted line, to keep notes clear of
}

func (rs readings) Plot(c draw.Canvas, g *plot.Plot) {
	x, y := g.Transforms(&c)
	for _, r := range rs.all {
		at := vg.Point{X: x(r.X), Y: y(r.Y)}
		if at.X < c.Min.X-1 || at.X > c.Max.X+1 {
			continue
		}
		drawReading(&c, at, y(r.Y+r.Bar)-at.Y, r.Total)
		if r.Note != "" {
			rs.note(&c, at, r, y)
		}
	}
}

// note sets the short mark of a finding beside a reading, on the side away from the
// fitted line.
func (rs readings) note(c *draw.Canvas, at vg.Point, r report.ProfileReading, y func(float64) vg.Length) {
	st := aligned(boldText(smallSize, rust), draw.XLeft, draw.YCenter)
	w := st.Width(r.Note)
	at.X += 5
	if at.X+w > c.Max.X {
		at.X -= 10 + w
	}
	at.Y += 6
	if rs.under(r, y) {
		at.Y -= 12
	}
	c.FillPolygon(paper, []vg.Point{{X: at.X - 1, Y: at.Y - 4.5}, {X: at.X + w + 1, Y: at.Y - 4.5}, {X: at.X + w + 1, Y: at.Y + 4.5}, {X: at.X - 1, Y: at.Y + 4.5}})
	c.FillText(st, at, r.Note)
}

// under reports whether the fitted line passes over a reading.
func (rs readings) under(r report.ProfileReading, y func(float64) vg.Length) bool {
	for _, run := range rs.line {
		for _, v := range run {
			if math.Abs(v.X-r.X) < 1e-6*(1+math.Abs(r.X)) {
				return y(v.Y) > y(r.Y)
			}
		}
	}
	return false
}

func drawReading(c *draw.Canvas, at vg.Point, bar vg.Length, total bool) {
	if bar > bigDot {
		c.StrokeLine2(barLine, at.X, at.Y-bar, at.X, at.Y+bar)
		c.StrokeLine2(barLine, at.X-2.2, at.Y-bar, at.X+2.2, at.Y-bar)
		c.StrokeLine2(barLine, at.X-2.2, at.Y+bar, at.X+2.2, at.Y+bar)
	}
	if total {
		c.FillPolygon(paper, diamond(at, bigDot+1.6))
		d := diamond(at, bigDot+1)
		c.StrokeLines(draw.LineStyle{Color: ink, Width: 1}, append(d, d[0], d[1]))
		return
	}
	c.DrawGlyphNoClip(draw.GlyphStyle{Color: paper, Radius: bigDot + 0.9, Shape: draw.CircleGlyph{}}, at)
	c.DrawGlyphNoClip(draw.GlyphStyle{Color: ink, Radius: bigDot, Shape: draw.CircleGlyph{}}, at)
}

func diamond(at vg.Point, r vg.Length) []vg.Point {
	return []vg.Point{{X: at.X, Y: at.Y + r}, {X: at.X + r, Y: at.Y}, {X: at.X, Y: at.Y - r}, {X: at.X - r, Y: at.Y}}
}

// emptiness says that a panel has nothing to show.
type emptiness struct{}

func (emptiness) Plot(c draw.Canvas, _ *plot.Plot) {
	c.FillText(aligned(italicText(textSize, pencil), draw.XCenter, draw.YCenter), c.Center(), "nothing is known of this route in this round")
}
