package figure

import (
	"fmt"
	"image"
	"image/color"
	"io"
	"math"
	"time"

	"codeberg.org/go-fonts/liberation/liberationsansbold"
	"codeberg.org/go-fonts/liberation/liberationsansitalic"
	"codeberg.org/go-fonts/liberation/liberationsansregular"
	"codeberg.org/go-pdf/fpdf"
	stdfont "golang.org/x/image/font"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"
)

// pdfCanvas is a drawing canvas of the plotting library over a PDF page. The
// library's own one writes text in Windows-1252 only and stamps the clock into the
// file; this one writes any letter the font has, and the same bytes every time.
type pdfCanvas struct {
	doc   *fpdf.Fpdf
	w, h  vg.Length
	state pdfState
	stack []pdfState
	fonts map[string]bool
}

// pdfState is what Push saves. m takes a point of the canvas, origin at the bottom
// left, to the page, origin at the top left: x' = m0 x + m2 y + m4 and
// y' = m1 x + m3 y + m5.
type pdfState struct {
	m      [6]float64
	width  vg.Length
	dashes []vg.Length
	offset vg.Length
	color  color.Color
}

// The date in every file: the bytes shall not depend on the day.
var pdfDate = time.Date(2000, 1, 1, 0, 0, 0, 0, time.UTC)

func newPDF(w, h vg.Length, title string) *pdfCanvas {
	doc := fpdf.NewCustom(&fpdf.InitType{UnitStr: "pt", Size: fpdf.SizeType{Wd: w.Points(), Ht: h.Points()}})
	doc.SetMargins(0, 0, 0)
	doc.SetAutoPageBreak(false, 0)
	doc.SetCreationDate(pdfDate)
	doc.SetModificationDate(pdfDate)
	doc.SetCatalogSort(true)
	doc.SetTitle(title, true)
	doc.SetProducer("tapround", true)
	doc.AddPage()
	c := &pdfCanvas{doc: doc, w: w, h: h, fonts: map[string]bool{}}
	c.state = pdfState{m: [6]float64{1, 0, 0, -1, 0, h.Points()}}
	vg.Initialize(c)
	return c
}

func (c *pdfCanvas) Size() (x, y vg.Length) { return c.w, c.h }

func (c *pdfCanvas) SetLineWidth(w vg.Length) { c.state.width = w }

func (c *pdfCanvas) SetLineDash(d []vg.Length, off vg.Length) {
	c.state.dashes, c.state.offset = append([]vg.Length(nil), d...), off
}

func (c *pdfCanvas) SetColor(k color.Color) {
	if k == nil {
		k = color.Black
	}
	c.state.color = k
}

func (c *pdfCanvas) Rotate(rad float64) {
	sin, cos := math.Sincos(rad)
	m := c.state.m
	c.state.m = [6]float64{m[0]*cos + m[2]*sin, m[1]*cos + m[3]*sin, m[2]*cos - m[0]*sin, m[3]*cos - m[1]*sin, m[4], m[5]}
}

func (c *pdfCanvas) Translate(p vg.Point) { c.state.m[4], c.state.m[5] = c.page(p) }

func (c *pdfCanvas) Scale(x, y float64) {
	for i := range 2 {
		c.state.m[i] *= x
		c.state.m[2+i] *= y
	}
}

func (c *pdfCanvas) Push() { c.stack = append(c.stack, c.state) }

func (c *pdfCanvas) Pop() {
	c.state = c.stack[len(c.stack)-1]
	c.stack = c.stack[:len(c.stack)-1]
}

// page takes a point of the canvas to the page.
func (c *pdfCanvas) page(p vg.Point) (x, y float64) {
	m := c.state.m
	return m[0]*p.X.Points() + m[2]*p.Y.Points() + m[4], m[1]*p.X.Points() + m[3]*p.Y.Points() + m[5]
}

func (c *pdfCanvas) Stroke(p vg.Path) {
	if c.state.width <= 0 {
		return
	}
	r, g, b, a := rgba(c.state.color)
	c.doc.SetAlpha(a, "Normal")
	c.doc.SetDrawColor(r, g, b)
	c.doc.SetLineWidth(c.state.width.Points() * c.size())
	dashes := make([]float64, len(c.state.dashes))
	for i, d := range c.state.dashes {
		dashes[i] = d.Points() * c.size()
	}
	c.doc.SetDashPattern(dashes, c.state.offset.Points())
	c.path(p)
	c.doc.DrawPath("D")
}

func (c *pdfCanvas) Fill(p vg.Path) {
	r, g, b, a := rgba(c.state.color)
	c.doc.SetAlpha(a, "Normal")
	c.doc.SetFillColor(r, g, b)
	c.path(p)
	c.doc.DrawPath("F")
}

// size is how much the present transform enlarges.
func (c *pdfCanvas) size() float64 {
	m := c.state.m
	return math.Sqrt(math.Abs(m[0]*m[3] - m[1]*m[2]))
}

func (c *pdfCanvas) path(p vg.Path) {
	for _, s := range p {
		switch s.Type {
		case vg.MoveComp:
			c.doc.MoveTo(c.page(s.Pos))
		case vg.LineComp:
			c.doc.LineTo(c.page(s.Pos))
		case vg.ArcComp:
			c.arc(s)
		case vg.CurveComp:
			x, y := c.page(s.Pos)
			ax, ay := c.page(s.Control[0])
			if len(s.Control) == 1 {
				c.doc.CurveTo(ax, ay, x, y)
				continue
			}
			bx, by := c.page(s.Control[1])
			c.doc.CurveBezierCubicTo(ax, ay, bx, by, x, y)
		case vg.CloseComp:
			c.doc.ClosePath()
		}
	}
}

// arc draws an arc as cubic curves of at most a quarter turn each; the control
// points stand 4/3 tan(angle/4) radii along the tangents, which keeps within
// 0.03 % of the circle.
func (c *pdfCanvas) arc(s vg.PathComp) {
	n := max(1, int(math.Ceil(math.Abs(s.Angle)/(math.Pi/2)-1e-9)))
	step := s.Angle / float64(n)
	k := 4.0 / 3 * math.Tan(step/4)
	on := func(a, tangent float64) (x, y float64) {
		sin, cos := math.Sincos(a)
		return c.page(vg.Point{X: s.Pos.X + s.Radius*vg.Length(cos-tangent*sin), Y: s.Pos.Y + s.Radius*vg.Length(sin+tangent*cos)})
	}
	c.doc.LineTo(on(s.Start, 0))
	for i := range n {
		a := s.Start + float64(i)*step
		x1, y1 := on(a, k)
		x2, y2 := on(a+step, -k)
		x, y := on(a+step, 0)
		c.doc.CurveBezierCubicTo(x1, y1, x2, y2, x, y)
	}
}

func (c *pdfCanvas) FillString(f font.Face, p vg.Point, s string) {
	if f.Font.Size == 0 || s == "" {
		return
	}
	style, bytes := "", liberationsansregular.TTF
	switch {
	case f.Font.Weight >= stdfont.WeightBold:
		style, bytes = "B", liberationsansbold.TTF
	case f.Font.Style == stdfont.StyleItalic:
		style, bytes = "I", liberationsansitalic.TTF
	}
	if !c.fonts[style] {
		c.doc.AddUTF8FontFromBytes("sans", style, bytes)
		c.fonts[style] = true
	}
	r, g, b, a := rgba(c.state.color)
	c.doc.SetAlpha(a, "Normal")
	c.doc.SetTextColor(r, g, b)
	c.doc.SetFont("sans", style, f.Font.Size.Points()*c.size())
	x, y := c.page(p)
	// The text's own direction on the page, whose y runs down.
	turn := -math.Atan2(c.state.m[1], c.state.m[0])
	if math.Abs(turn) < 1e-9 {
		c.doc.Text(x, y, s)
		return
	}
	c.doc.TransformBegin()
	c.doc.TransformRotate(turn*180/math.Pi, x, y)
	c.doc.Text(x, y, s)
	c.doc.TransformEnd()
}

// DrawImage is not used by our pictures.
func (c *pdfCanvas) DrawImage(vg.Rectangle, image.Image) {
	c.doc.SetErrorf("a picture inside a picture cannot be written to PDF")
}

// WriteTo ends the page and writes the file.
func (c *pdfCanvas) WriteTo(w io.Writer) (int64, error) {
	n := counter{w: w}
	if err := c.doc.Output(&n); err != nil {
		return n.n, fmt.Errorf("writing the PDF: %w", err)
	}
	return n.n, nil
}

type counter struct {
	w io.Writer
	n int64
}

func (c *counter) Write(p []byte) (int, error) {
	n, err := c.w.Write(p)
	c.n += int64(n)
	return n, err
}

func rgba(c color.Color) (r, g, b int, a float64) {
	k := color.NRGBAModel.Convert(c).(color.NRGBA)
	return int(k.R), int(k.G), int(k.B), float64(k.A) / 255
}
