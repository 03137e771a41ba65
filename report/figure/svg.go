package figure

import (
	"bytes"
	"fmt"
	"html"
	"regexp"
	"strings"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgsvg"

	"tapround/survey/unit"
)

// svg draws with the library's SVG canvas and then puts the result into our own
// frame: a title and a description, no style attributes (a strict content policy
// forbids them inside a page), a list of fonts to fall back on (Liberation Sans is
// drawn to the widths of Arial), and a pointer text on every reading.
func (p Picture) svg(alone bool) string {
	c := vgsvg.NewWith(vgsvg.UseWH(p.sheet.width, p.sheet.height))
	p.sheet.paint(draw.New(c))
	var b bytes.Buffer
	if _, err := c.WriteTo(&b); err != nil {
		panic(err) // a buffer takes everything
	}
	body := b.String()
	body = body[strings.Index(body, "<svg"):]
	body = body[strings.Index(body, ">")+1:]
	body = body[:strings.LastIndex(body, "</svg>")]
	w, h := p.Size()
	var out strings.Builder
	if alone {
		fmt.Fprintf(&out, "<?xml version=\"1.0\" encoding=\"UTF-8\"?>\n<svg xmlns=\"http://www.w3.org/2000/svg\" width=\"%.5gpt\" height=\"%.5gpt\"", w, h)
	} else {
		out.WriteString("<svg")
	}
	fmt.Fprintf(&out, " viewBox=\"0 0 %.5g %.5g\" role=\"img\" aria-labelledby=\"%s-t %s-d\">\n", w, h, p.o.ID, p.o.ID)
	fmt.Fprintf(&out, "<title id=\"%s-t\">%s</title>\n<desc id=\"%s-d\">%s</desc>", p.o.ID, html.EscapeString(p.Title()), p.o.ID, html.EscapeString(p.Description()))
	out.WriteString(attributes(body))
	p.pointers(&out)
	out.WriteString("</svg>\n")
	return out.String()
}

var styleAttribute = regexp.MustCompile(`\s+style="([^"]*)"`)

// attributes turns style="a:b;c:d" into a="b" c="d": every property the library
// writes is also a presentation attribute. Text is escaped, so no quoted style can
// stand in it.
func attributes(s string) string {
	return styleAttribute.ReplaceAllStringFunc(s, func(m string) string {
		var b strings.Builder
		for _, d := range strings.Split(styleAttribute.FindStringSubmatch(m)[1], ";") {
			k, v, ok := strings.Cut(d, ":")
			if !ok || (k == "font-variant" && v == "none") || (k == "font-style" && v == "normal") || (k == "font-weight" && v == "normal") {
				continue
			}
			if k == "font-family" {
				v = "'Liberation Sans', Arimo, Arial, Helvetica, sans-serif"
			}
			fmt.Fprintf(&b, " %s=\"%s\"", k, v)
		}
		return b.String()
	})
}

// pointers lays an unseen disc with a title over each reading: what was read, by
// which gauge, and the head it gives.
func (p Picture) pointers(out *strings.Builder) {
	s := p.sheet
	y := s.height - 20 - vg.Length(s.stripRows)*stripRow - s.nameHeight
	for _, n := range s.panels {
		y -= n.captionHeight()
		if n.heads {
			a := s.area(n, y)
			for _, m := range n.profile.Measured {
				at := a.Min.Y + vg.Length((m.Y-n.y.min)/(n.y.max-n.y.min))*n.height
				what := "piezometric head"
				if m.Total {
					what = "total head"
				}
				text := clean(fmt.Sprintf("%s, gauge %s: read %s; %s %s m (95 %% bar)", m.Tap, m.Gauge, m.Text, what, unit.WithUncertainty(m.Y, m.Bar)))
				fmt.Fprintf(out, "<circle cx=\"%.5g\" cy=\"%.5g\" r=\"6\" fill-opacity=\"0\"><title>%s</title></circle>\n",
					s.xAt(m.X).Points(), (s.height - at).Points(), html.EscapeString(text))
			}
		}
		y -= n.height + panelGap
	}
}
