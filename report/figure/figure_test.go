package figure

import (
	"bytes"
	"encoding/xml"
	"image/png"
	"io"
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"tapround/report"
	"tapround/report/internal/sample"
)

func render(t *testing.T, p Picture, format string) []byte {
	t.Helper()
	var b bytes.Buffer
	if err := p.Render(&b, format); err != nil {
		t.Fatalf("%s: %v", format, err)
	}
	return b.Bytes()
}

// roundOf gives the profile of the town route in a round of the sample.
func roundOf(t *testing.T, round string) report.Profile {
	t.Helper()
	for _, p := range sample.Harrowgill().Profiles {
		if p.Round == round && p.Title == "R1 to N16" {
			return p
		}
	}
	t.Fatalf("the sample has no round %s", round)
	return report.Profile{}
}

func TestSameBytes(t *testing.T) {
	for _, f := range Formats {
		a := render(t, Profile(roundOf(t, "E"), Options{}), f)
		b := render(t, Profile(roundOf(t, "E"), Options{}), f)
		if !bytes.Equal(a, b) {
			t.Errorf("%s differs between two runs", f)
		}
		if c := render(t, Profile(roundOf(t, "D"), Options{}), f); bytes.Equal(a, c) {
			t.Errorf("%s of another round is the same", f)
		}
	}
}

func TestUnknownFormat(t *testing.T) {
	err := Profile(roundOf(t, "E"), Options{}).Render(io.Discard, "gif")
	if err == nil || !strings.Contains(err.Error(), "svg, png and pdf") {
		t.Errorf("got %v", err)
	}
}

// svgText is one text element: where it stands (origin at the top left) and its words.
type svgText struct {
	x, y float64
	s    string
}

// drawing is what an SVG shows, read back by a parser that shares nothing with the writer.
type drawing struct {
	texts []svgText
	paths []svgPath
	dots  []svgText // the pointers
}

type svgPath struct {
	pts          [][2]float64
	stroke, fill string
	width        float64
	dashed       bool
}

var vertex = regexp.MustCompile(`[ML](-?[0-9.e+-]+),(-?[0-9.e+-]+)`)

// parse reads an SVG. The library's upright text stands inside the flipped group with
// a flip of its own; other transforms would make it rotated and it is left out.
func parse(t *testing.T, svg string) drawing {
	t.Helper()
	var d drawing
	dec := xml.NewDecoder(strings.NewReader(svg))
	var h float64
	var open *svgText
	circle, title := false, false
	for {
		tok, err := dec.Token()
		if err == io.EOF {
			return d
		}
		if err != nil {
			t.Fatalf("not well formed: %v", err)
		}
		switch e := tok.(type) {
		case xml.StartElement:
			a := map[string]string{}
			for _, x := range e.Attr {
				a[x.Name.Local] = x.Value
			}
			num := func(k string) float64 { v, _ := strconv.ParseFloat(a[k], 64); return v }
			switch e.Name.Local {
			case "svg":
				h, _ = strconv.ParseFloat(strings.Fields(a["viewBox"])[3], 64)
			case "text":
				if a["transform"] == "scale(1, -1)" {
					open = &svgText{x: num("x"), y: h + num("y")}
				}
			case "path":
				p := svgPath{stroke: a["stroke"], fill: a["fill"], width: num("stroke-width"), dashed: a["stroke-dasharray"] != ""}
				for _, m := range vertex.FindAllStringSubmatch(a["d"], -1) {
					x, _ := strconv.ParseFloat(m[1], 64)
					y, _ := strconv.ParseFloat(m[2], 64)
					p.pts = append(p.pts, [2]float64{x, h - y})
				}
				d.paths = append(d.paths, p)
			case "circle":
				circle = true
				d.dots = append(d.dots, svgText{x: num("cx"), y: num("cy")})
			case "title":
				title = circle
			}
			if a["style"] != "" {
				t.Errorf("%s has a style attribute", e.Name.Local)
			}
		case xml.CharData:
			if open != nil {
				open.s += string(e)
			}
			if title {
				d.dots[len(d.dots)-1].s += string(e)
			}
		case xml.EndElement:
			switch e.Name.Local {
			case "text":
				if open != nil {
					d.texts = append(d.texts, *open)
				}
				open = nil
			case "circle":
				circle = false
			case "title":
				title = false
			}
		}
	}
}

func (d drawing) text(t *testing.T, s string) svgText {
	t.Helper()
	for _, x := range d.texts {
		if x.s == s {
			return x
		}
	}
	t.Fatalf("the picture does not say %q", s)
	return svgText{}
}

func (d drawing) says(s string) bool {
	for _, x := range d.texts {
		if strings.Contains(x.s, s) {
			return true
		}
	}
	return false
}

// The scale is read off the picture as a reader would, from the figures at the axes,
// and the marks must stand where that scale puts their heads.
func TestMarksStandOnTheScale(t *testing.T) {
	p := roundOf(t, "E")
	d := parse(t, string(render(t, Profile(p, Options{}), "svg")))
	lo, hi := d.text(t, "160"), d.text(t, "240")
	left, right := d.text(t, "1000"), d.text(t, "7000")
	perMetre := (hi.y - lo.y) / (240 - 160)
	// Figures are centred on their ticks; 1000 and 7000 have equal widths, so that
	// their beginnings are as far apart as the ticks.
	perChainage := (right.x - left.x) / 6000
	if len(d.dots) != len(p.Measured) {
		t.Fatalf("%d marks for %d readings", len(d.dots), len(p.Measured))
	}
	first := d.dots[0]
	for i, m := range p.Measured {
		dx, dy := d.dots[i].x-first.x, d.dots[i].y-first.y
		wantX, wantY := (m.X-p.Measured[0].X)*perChainage, (m.Y-p.Measured[0].Y)*perMetre
		// The SVG has five figures: a hundredth of a point.
		if math.Abs(dx-wantX) > 0.05 || math.Abs(dy-wantY) > 0.05 {
			t.Errorf("%s stands at (%.2f, %.2f) from %s, by the axes it should be (%.2f, %.2f)", m.Tap, dx, dy, p.Measured[0].Tap, wantX, wantY)
		}
		if !strings.Contains(d.dots[i].s, m.Tap) || !strings.Contains(d.dots[i].s, m.Text) || !strings.Contains(d.dots[i].s, "m (95 % bar)") {
			t.Errorf("pointer of %s says %q", m.Tap, d.dots[i].s)
		}
	}
	// The fitted line passes the marks: N2's reading is within 0.1 m of it.
	line := d.line(t, "#0E4A5A", false)
	n2 := d.dots[1]
	ok := false
	for _, v := range line {
		ok = ok || (math.Abs(v[0]-n2.x) < 0.05 && math.Abs(v[1]-n2.y) < 0.15*-perMetre)
	}
	if !ok {
		t.Errorf("the fitted line does not pass N2 at (%.2f, %.2f): %v", n2.x, n2.y, line)
	}
}

// line gives the vertices of the longest stroke of a colour.
func (d drawing) line(t *testing.T, stroke string, dashed bool) [][2]float64 {
	t.Helper()
	var out [][2]float64
	for _, p := range d.paths {
		if p.stroke == stroke && p.dashed == dashed && len(p.pts) > len(out) {
			out = p.pts
		}
	}
	if out == nil {
		t.Fatalf("no line of colour %s", stroke)
	}
	return out
}

func TestStepIsVertical(t *testing.T) {
	d := parse(t, string(render(t, Profile(roundOf(t, "E"), Options{}), "svg")))
	line := d.line(t, "#0E4A5A", false)
	step := 0.0
	for i := 1; i < len(line); i++ {
		if line[i][0] == line[i-1][0] {
			step = math.Max(step, line[i][1]-line[i-1][1])
		}
	}
	// SV-031, K 45, loses 1.6 m at 26.6 L/s in 200 mm: 4 points at this scale.
	if step < 3 || step > 6 {
		t.Errorf("the greatest vertical step is %.2f points", step)
	}
}

func TestNamesAndWords(t *testing.T) {
	d := parse(t, string(render(t, Profile(roundOf(t, "E"), Options{}), "svg")))
	for _, s := range []string{"R1", "QM", "N1", "N2", "N3", "N4", "N6", "N7", "N9", "N16", "E1", "SV-004", "SV-031", "SV-036", "F1 fouled pipe",
		"F2 cause open", "round E", "Grade lines, R1 to N16", "distance along the route, m", "piezometric line, as fitted", "piezometric line, sound works",
		"measured piezometric head, 95 % bar", "measured total head, 95 % bar", "level of the pipe", "stretch under suspicion"} {
		d.text(t, s)
	}
	// One name for a tap at a point of its name.
	n := 0
	for _, x := range d.texts {
		if x.s == "N4" {
			n++
		}
	}
	if n != 1 {
		t.Errorf("N4 is written %d times", n)
	}
}

func TestTotalHeadTooCloseIsSaid(t *testing.T) {
	d := parse(t, string(render(t, Profile(roundOf(t, "E"), Options{}), "svg")))
	if !d.says("Total head lies at most 0.16 m above the piezometric line") {
		t.Error("the hidden total head is not spoken of")
	}
	if d.says("total head line, as fitted") {
		t.Error("the legend shows a line that is not drawn")
	}
	d = parse(t, string(render(t, Profile(penstock(), Options{}), "svg")))
	d.text(t, "total head line, as fitted")
	d.text(t, "total head line, sound works")
	d.line(t, "#7B3560", false)
	if d.says("Total head lies at most") {
		t.Error("a visible total head is said to be hidden")
	}
}

// penstock has much velocity head, a stretch below atmosphere and a suspect valve.
func penstock() report.Profile {
	at := func(vs ...float64) []report.XY {
		var out []report.XY
		for i := 0; i < len(vs); i += 2 {
			out = append(out, report.XY{X: vs[i], Y: vs[i+1]})
		}
		return out
	}
	return report.Profile{
		Title: "forebay to turbine", Round: "4",
		Ground:        at(0, 30, 300, 24, 500, 29.2, 700, 10),
		Total:         [][]report.XY{at(0, 34, 300, 32, 300, 31, 500, 29, 700, 26)},
		Piezometric:   [][]report.XY{at(0, 31, 300, 29, 300, 28, 500, 26, 700, 21)},
		ExpectedTotal: [][]report.XY{at(0, 34, 300, 32.4, 300, 32, 500, 30.5, 700, 28)},
		ExpectedPiezo: [][]report.XY{at(0, 31, 300, 29.4, 300, 29, 500, 27.5, 700, 23)},
		Taps:          []report.Place{{Name: "forebay"}, {Name: "T1", X: 290}, {Name: "T2", X: 500}, {Name: "T3", X: 690}},
		Devices:       []report.Place{{Name: "V1", X: 300}},
		Measured: []report.ProfileReading{{Tap: "T1", X: 290, Y: 29.2, Bar: 0.6}, {Tap: "T2", X: 500, Y: 25.7, Bar: 0.6, Note: "F2"},
			{Tap: "T3", X: 690, Y: 26.4, Bar: 1.2, Total: true}},
		BelowAir: []report.Span{{From: 430, To: 520, Label: "below atmosphere"}},
		Suspect:  []report.Span{{From: 300, To: 300, Label: "F1 part closed valve"}},
	}
}

func TestBelowAtmosphereIsMarked(t *testing.T) {
	d := parse(t, string(render(t, Profile(penstock(), Options{}), "svg")))
	d.text(t, "below atmosphere")
	d.text(t, "line under the pipe: below atmosphere")
	d.text(t, "F2")
	// The two hatchings lean different ways, so that they differ without colour.
	lean := func(stroke string) (up, down int) {
		for _, p := range d.paths {
			if p.stroke == stroke && len(p.pts) == 2 && p.pts[0][0] != p.pts[1][0] && p.pts[0][1] != p.pts[1][1] {
				if (p.pts[1][0]-p.pts[0][0])*(p.pts[1][1]-p.pts[0][1]) < 0 { // y runs down
					up++
				} else {
					down++
				}
			}
		}
		return up, down
	}
	if up, down := lean("#D3A48F"); up < 10 || down != 0 {
		t.Errorf("suspect hatching: %d up, %d down", up, down)
	}
	if up, down := lean("#9FAECF"); up != 0 || down < 10 {
		t.Errorf("below-atmosphere hatching: %d up, %d down", up, down)
	}
}

func TestFlatHeadsGetTheirOwnScale(t *testing.T) {
	for round, split := range map[string]bool{"A": true, "E": false} {
		d := parse(t, string(render(t, Profile(roundOf(t, round), Options{}), "svg")))
		if d.says("Two scales") != split {
			t.Errorf("round %s: split is %v", round, !split)
		}
	}
}

func TestRoundsShareScales(t *testing.T) {
	ps := sample.Harrowgill().Profiles[:5]
	d := parse(t, string(render(t, Rounds(ps, Options{}), "svg")))
	for _, r := range []string{"A", "B", "C", "D", "E"} {
		d.text(t, "round "+r)
	}
	var ys []float64
	for _, x := range d.texts {
		if x.s == "240" {
			ys = append(ys, x.y)
		}
	}
	if len(ys) != 5 {
		t.Fatalf("240 m is marked on %d of 5 head panels", len(ys))
	}
	for i := 2; i < len(ys); i++ {
		if math.Abs((ys[i]-ys[i-1])-(ys[1]-ys[0])) > 0.02 {
			t.Errorf("panels are not alike: %v", ys)
		}
	}
	if s := string(render(t, Rounds(nil, Options{}), "svg")); !strings.Contains(s, "no rounds") {
		t.Error("no rounds is not said")
	}
}

func TestHostileNames(t *testing.T) {
	p := roundOf(t, "E")
	p.Title = `<script>alert("1")</script> & Ελλάδα`
	p.Round = "\x1b[31m\x00"
	p.Taps[0].Name = `"><img src=x onerror=alert(1)>`
	p.Suspect[0].Label = "F1 \ufffe</svg>"
	p.Measured[0].Text = `5' onload="x`
	for _, f := range Formats {
		render(t, Profile(p, Options{}), f)
	}
	s := Profile(p, Options{ID: "f1"}).Inline()
	parse(t, s)
	for _, bad := range []string{"<script", "<img", "\x1b", "\x00", "http:", "https:", `onload="x`} {
		if strings.Contains(s, bad) {
			t.Errorf("%q came through", bad)
		}
	}
	if !strings.Contains(s, "Ελλάδα") {
		t.Error("the title's Greek is lost")
	}
}

func TestGapsAndNothing(t *testing.T) {
	p := penstock()
	p.Piezometric[0][2].Y = math.NaN()
	p.Measured[0].Y = math.Inf(1)
	p.Measured[1].Bar = math.NaN()
	d := parse(t, string(render(t, Profile(p, Options{}), "svg")))
	if len(d.dots) != 2 {
		t.Errorf("%d marks, want the two that are numbers", len(d.dots))
	}
	n := 0
	for _, path := range d.paths {
		if path.stroke == "#0E4A5A" && !path.dashed && path.width == 1.7 {
			n++
		}
	}
	// Two runs and the legend's sample.
	if n != 3 {
		t.Errorf("the broken line has %d strokes", n)
	}
	for _, f := range Formats {
		render(t, Profile(report.Profile{Title: "x", Round: "1"}, Options{}), f)
	}
	d = parse(t, string(render(t, Profile(report.Profile{Title: "x", Round: "1"}, Options{}), "svg")))
	if !d.says("nothing is known") {
		t.Error("an empty picture does not say so")
	}
}

func TestPNG(t *testing.T) {
	p := Profile(roundOf(t, "E"), Options{DPI: 96})
	img, err := png.Decode(bytes.NewReader(render(t, p, "png")))
	if err != nil {
		t.Fatal(err)
	}
	w, h := p.Size()
	if b := img.Bounds(); math.Abs(float64(b.Dx())-w*96/72) > 1 || math.Abs(float64(b.Dy())-h*96/72) > 1 {
		t.Errorf("size is %v for %.0f x %.0f points", b, w, h)
	}
	// The mark of N4, found through the SVG, is dark in the PNG, and the corner white.
	d := parse(t, string(render(t, p, "svg")))
	r, g, b, _ := img.At(int(d.dots[3].x*96/72), int(d.dots[3].y*96/72)).RGBA()
	if r>>8 > 80 || g>>8 > 80 || b>>8 > 80 {
		t.Errorf("the mark of %s is %d,%d,%d", d.dots[3].s, r>>8, g>>8, b>>8)
	}
	if r, _, _, _ := img.At(1, 1).RGBA(); r>>8 != 255 {
		t.Error("the paper is not white")
	}
}
