package figure

import (
	"image/color"

	stdfont "golang.org/x/image/font"
	"gonum.org/v1/plot"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/text"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// A sober palette that keeps its order of darkness when copied in grey.
var (
	paper     = color.NRGBA{0xff, 0xff, 0xff, 0xff}
	ink       = color.NRGBA{0x1b, 0x24, 0x2c, 0xff}
	pencil    = color.NRGBA{0x57, 0x60, 0x6a, 0xff}
	hairline  = color.NRGBA{0xe3, 0xe5, 0xe8, 0xff}
	guide     = color.NRGBA{0xb9, 0xbf, 0xc6, 0xff}
	petrol    = color.NRGBA{0x0e, 0x4a, 0x5a, 0xff} // piezometric line
	plum      = color.NRGBA{0x7b, 0x35, 0x60, 0xff} // total head line
	earthLine = color.NRGBA{0x5e, 0x51, 0x40, 0xff}
	earthFill = color.NRGBA{0xf1, 0xec, 0xe2, 0xff}
	rust      = color.NRGBA{0xa3, 0x43, 0x1c, 0xff} // suspect stretch
	slate     = color.NRGBA{0x35, 0x51, 0x86, 0xff} // below atmosphere
)

// What stands for what; one place, so that legend and drawing cannot differ.
var (
	piezoFitted   = draw.LineStyle{Color: petrol, Width: 1.7}
	totalFitted   = draw.LineStyle{Color: plum, Width: 0.8}
	piezoExpected = draw.LineStyle{Color: petrol, Width: 1.1, Dashes: []vg.Length{5, 3}}
	totalExpected = draw.LineStyle{Color: plum, Width: 0.8, Dashes: []vg.Length{1.5, 2}}
	pipeLine      = draw.LineStyle{Color: earthLine, Width: 1.2}
	barLine       = draw.LineStyle{Color: ink, Width: 0.8}
	suspectLine   = draw.LineStyle{Color: color.NRGBA{0xd3, 0xa4, 0x8f, 0xff}, Width: 0.5}
	vacuumLine    = draw.LineStyle{Color: color.NRGBA{0x9f, 0xae, 0xcf, 0xff}, Width: 0.5}
	bracketLine   = draw.LineStyle{Color: rust, Width: 0.9}
	vacuumBracket = draw.LineStyle{Color: slate, Width: 0.9}
	leaderLine    = draw.LineStyle{Color: guide, Width: 0.5}
	deviceLeader  = draw.LineStyle{Color: guide, Width: 0.5, Dashes: []vg.Length{0.7, 1.6}}
	gridLine      = draw.LineStyle{Color: hairline, Width: 0.5}
	axisLine      = draw.LineStyle{Color: pencil, Width: 0.6}
)

const (
	textSize  vg.Length = 8.5
	smallSize vg.Length = 7.8
	titleSize vg.Length = 11
	bigDot    vg.Length = 2.5
)

func write(size vg.Length, c color.Color, weight stdfont.Weight, slant stdfont.Style) text.Style {
	return text.Style{
		Color:   c,
		Font:    font.Font{Typeface: "Liberation", Variant: "Sans", Size: size, Weight: weight, Style: slant},
		XAlign:  draw.XLeft,
		YAlign:  draw.YBottom,
		Handler: text.Plain{Fonts: font.DefaultCache},
	}
}

func plainText(size vg.Length, c color.Color) text.Style {
	return write(size, c, stdfont.WeightNormal, stdfont.StyleNormal)
}

func boldText(size vg.Length, c color.Color) text.Style {
	return write(size, c, stdfont.WeightBold, stdfont.StyleNormal)
}

func italicText(size vg.Length, c color.Color) text.Style {
	return write(size, c, stdfont.WeightNormal, stdfont.StyleItalic)
}

func aligned(s text.Style, x draw.XAlignment, y draw.YAlignment) text.Style {
	s.XAlign, s.YAlign = x, y
	return s
}

// dress gives an axis our letters and lines; the library's defaults are package
// variables and are left alone.
func dress(a *plot.Axis, t plot.Ticker, label string) {
	a.LineStyle = axisLine
	a.Padding = 0
	a.Tick.LineStyle = axisLine
	a.Tick.Length = 4
	a.Tick.Marker = t
	x, y := a.Tick.Label.XAlign, a.Tick.Label.YAlign
	a.Tick.Label = aligned(plainText(textSize, ink), x, y)
	x, y = a.Label.TextStyle.XAlign, a.Label.TextStyle.YAlign
	a.Label.TextStyle = aligned(plainText(textSize, ink), x, y)
	a.Label.Text = label
	a.Label.Padding = 3
}
