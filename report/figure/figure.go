// Package figure draws a result's pictures from their descriptions, as SVG, PNG
// or PDF. It is the only package that knows the plotting library, and it computes
// nothing: it chooses scales, places labels and draws what report.Profile says.
//
// A picture must be readable in black and white, on paper, by somebody who has
// never seen one: lines differ by weight and dash and not by colour alone, a
// suspect stretch is hatched and named, and what is too small to see at the scale
// is said in words.
package figure

import (
	"fmt"
	"io"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgimg"

	"tapround/report"
)

// Options of a picture. The zero value is a good picture.
type Options struct {
	// Width in points; 0: 640, which prints at four fifths on A4 and Letter. The
	// height follows from what there is to show.
	Width float64
	// DPI of a PNG; 0: 192.
	DPI int
	// ID makes the names inside an SVG unique where several stand on one page.
	ID string
}

// Picture is a drawing that is laid out and can be rendered in any format.
type Picture struct {
	sheet sheet
	o     Options
}

// Formats lists what Render knows.
var Formats = []string{"svg", "png", "pdf"}

// Profile is the picture of one route in one round.
func Profile(p report.Profile, o Options) Picture { return newPicture(profileSheet(p), o) }

// Rounds is one picture of the same route in several rounds, one under the other
// on the same scales. The names along the route are those of the first.
func Rounds(ps []report.Profile, o Options) Picture { return newPicture(roundsSheet(ps), o) }

func newPicture(s sheet, o Options) Picture {
	if o.Width == 0 {
		o.Width = 640
	}
	if o.DPI == 0 {
		o.DPI = 192
	}
	if o.ID == "" {
		o.ID = "picture"
	}
	s.width = vg.Length(o.Width)
	s.layout()
	return Picture{sheet: s, o: o}
}

// Title is the picture's heading; Description says in words what it shows.
func (p Picture) Title() string       { return p.sheet.heading() }
func (p Picture) Description() string { return p.sheet.description }

// Size is the picture's width and height in points.
func (p Picture) Size() (width, height float64) {
	return p.sheet.width.Points(), p.sheet.height.Points()
}

// Render writes the picture as "svg", "png" or "pdf". The same description gives
// the same bytes.
func (p Picture) Render(w io.Writer, format string) error {
	switch format {
	case "svg":
		_, err := io.WriteString(w, p.svg(true))
		return err
	case "png":
		c := vgimg.NewWith(vgimg.UseWH(p.sheet.width, p.sheet.height), vgimg.UseDPI(p.o.DPI), vgimg.UseBackgroundColor(paper))
		p.sheet.paint(draw.New(c))
		_, err := vgimg.PngCanvas{Canvas: c}.WriteTo(w)
		return err
	case "pdf":
		c := newPDF(p.sheet.width, p.sheet.height, p.Title())
		p.sheet.paint(draw.New(c))
		_, err := c.WriteTo(w)
		return err
	}
	return fmt.Errorf("no picture format %q; there are svg, png and pdf", format)
}

// Inline is the SVG for standing inside an HTML page: no prolog, no fixed size, and
// no style attributes, so that a strict content policy lets it pass.
func (p Picture) Inline() string { return p.svg(false) }
