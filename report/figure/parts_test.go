package figure

import (
	"bytes"
	"compress/zlib"
	"fmt"
	"io"
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"gonum.org/v1/plot/vg"
	"pgregory.net/rapid"
)

// No name covers another, and no pole cuts a name.
func TestFlagsKeepClear(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(0, 30).Draw(t, "n")
		ls := make([]label, n)
		for i := range ls {
			ls[i] = label{text: fmt.Sprint(i), x: vg.Length(rapid.IntRange(0, 500).Draw(t, "x")), width: vg.Length(rapid.IntRange(5, 60).Draw(t, "w"))}
		}
		rows := flags(ls, 3)
		for i, a := range ls {
			if a.row < 0 || a.row >= rows {
				t.Fatalf("row %d of %d", a.row, rows)
			}
			for j, b := range ls {
				if i == j {
					continue
				}
				if a.row == b.row && a.x < b.x+b.width && b.x < a.x+a.width {
					t.Fatalf("%v covers %v", a, b)
				}
				// b's pole stands from the panel up to b's own row.
				if b.row > a.row && b.x > a.x && b.x < a.x+a.width {
					t.Fatalf("the pole of %v cuts %v", b, a)
				}
			}
		}
	})
}

func TestSpread(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		n := rapid.IntRange(0, 50).Draw(t, "n")
		xs := make([]vg.Length, n)
		at := 0
		for i := range xs {
			at += rapid.IntRange(0, 30).Draw(t, "step")
			xs[i] = vg.Length(at)
		}
		hi := vg.Length(max(at, 10*n))
		got := spread(xs, 9, 0, hi)
		for i := range got {
			if got[i] < -1e-9 || got[i] > hi+1e-9 || (i > 0 && got[i]-got[i-1] < 9-1e-9) {
				t.Fatalf("%v from %v in 0..%v", got, xs, hi)
			}
		}
	})
}

func TestPack(t *testing.T) {
	ss := []strip{{lo: 0, hi: 50}, {lo: 30, hi: 60}, {lo: 55, hi: 90}, {lo: 100, hi: 120}}
	if rows := pack(ss, 4); rows != 2 || ss[0].row != 0 || ss[1].row != 1 || ss[2].row != 0 || ss[3].row != 0 {
		t.Errorf("%d rows: %v", rows, ss)
	}
}

func TestScale(t *testing.T) {
	for _, c := range []struct {
		lo, hi float64
		n      int
		labels string
	}{
		{158.5, 246, 7, "160 180 200 220 240"},
		{244.93, 247.03, 6, "245.0 245.5 246.0 246.5 247.0"},
		{0, 7610, 8, "0 1000 2000 3000 4000 5000 6000 7000"},
		{-3, 3, 6, "-3 -2 -1 0 1 2 3"},
		{5, 5, 5, "4.6 4.8 5.0 5.2 5.4"},
		{-0.00012, 0.00031, 4, "0.0000 0.0002"},
	} {
		s := newScale(c.lo, c.hi, c.n)
		if s.min > c.lo || s.max < c.hi {
			t.Errorf("%v..%v does not cover %v..%v", s.min, s.max, c.lo, c.hi)
		}
		var got []string
		for _, k := range s.Ticks(s.min, s.max) {
			if k.Label != "" {
				got = append(got, k.Label)
			}
		}
		if strings.Join(got, " ") != c.labels {
			t.Errorf("%v..%v is marked %v, want %s", c.lo, c.hi, got, c.labels)
		}
	}
	km := scale{min: 0, max: 30000, step: 5000, minor: 5, per: 1000}
	if k := km.Ticks(0, 30000); k[5].Label != "5" {
		t.Errorf("5000 m in km is %q", k[5].Label)
	}
}

// Every labelled tick says its value.
func TestTicksSayTheirValue(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		lo := rapid.Float64Range(-1e4, 1e4).Draw(t, "lo")
		size := math.Pow(10, rapid.Float64Range(-3, 4).Draw(t, "log10 size"))
		s := newScale(lo, lo+size, rapid.IntRange(2, 10).Draw(t, "n"))
		labelled := 0
		for _, k := range s.Ticks(s.min, s.max) {
			if k.Label == "" {
				continue
			}
			labelled++
			v, err := strconv.ParseFloat(k.Label, 64)
			// Half a unit of the last decimal of a step that is 1, 2 or 5.
			if err != nil || math.Abs(v-k.Value) > 1e-6*s.step {
				t.Fatalf("tick %v says %q", k.Value, k.Label)
			}
		}
		if labelled == 0 {
			t.Fatalf("%+v has no labelled tick", s)
		}
	})
}

func TestFit(t *testing.T) {
	st := plainText(textSize, ink)
	if s := fit(st, "N6", 100); s != "N6" {
		t.Errorf("%q was cut", s)
	}
	long := strings.Repeat("Weir Lane ", 20)
	if s := fit(st, long, 100); st.Width(s) > 100 || !strings.HasSuffix(s, "…") || !strings.HasPrefix(long, strings.TrimSuffix(s, "…")) {
		t.Errorf("%q is %v wide", s, st.Width(s))
	}
}

func TestWrap(t *testing.T) {
	st := italicText(smallSize, pencil)
	s := "Total head lies at most 0.16 m above the piezometric line: not visible at this scale, so one line stands for both."
	got := wrap(st, s, 150)
	for _, l := range got {
		if st.Width(l) > 150 {
			t.Errorf("%q is %v wide", l, st.Width(l))
		}
	}
	if len(got) < 3 || strings.Join(got, " ") != s {
		t.Errorf("%q", got)
	}
}

// The PDF canvas against the transform it should make: turn, then move, as the
// library's other canvases do.
func TestPDFTransforms(t *testing.T) {
	c := newPDF(200, 100, "t")
	c.Push()
	c.Translate(vg.Point{X: 50, Y: 20})
	c.Rotate(math.Pi / 2)
	x, y := c.page(vg.Point{X: 10, Y: 0})
	// (10, 0) turned is (0, 10), moved (50, 30); from the top 70.
	if math.Abs(x-50) > 1e-9 || math.Abs(y-70) > 1e-9 {
		t.Errorf("(%v, %v), want (50, 70)", x, y)
	}
	c.Scale(2, 3)
	if x, y = c.page(vg.Point{X: 10, Y: 1}); math.Abs(x-47) > 1e-9 || math.Abs(y-60) > 1e-9 {
		t.Errorf("(%v, %v), want (47, 60)", x, y)
	}
	c.Pop()
	if x, y = c.page(vg.Point{X: 10, Y: 0}); x != 10 || y != 100 {
		t.Errorf("after Pop (%v, %v)", x, y)
	}
}

// A circle drawn in a PDF is read back from the page's own commands: every point
// of its curves lies within 0.03 % of the radius from the circle.
func TestPDFCircle(t *testing.T) {
	c := newPDF(200, 100, "t")
	var p vg.Path
	p.Move(vg.Point{X: 90, Y: 40})
	p.Arc(vg.Point{X: 50, Y: 40}, 40, 0, 2*math.Pi)
	p.Close()
	c.Fill(p)
	page := pageOf(t, c)
	curve := regexp.MustCompile(`([\d.-]+) ([\d.-]+) ([\d.-]+) ([\d.-]+) ([\d.-]+) ([\d.-]+) c`)
	found := curve.FindAllStringSubmatch(page, -1)
	if len(found) != 4 {
		t.Fatalf("%d curves: %s", len(found), page)
	}
	from := [2]float64{90, 40}
	for _, m := range found {
		var v [6]float64
		for i := range v {
			v[i], _ = strconv.ParseFloat(m[1+i], 64)
		}
		for s := 0.0; s <= 1; s += 0.05 {
			b := func(i int, p0 float64) float64 {
				q := 1 - s
				return q*q*q*p0 + 3*q*q*s*v[i] + 3*q*s*s*v[2+i] + s*s*s*v[4+i]
			}
			// The file has five decimals.
			if r := math.Hypot(b(0, from[0])-50, b(1, from[1])-40); math.Abs(r-40) > 0.0003*40+1e-4 {
				t.Fatalf("radius %v at %v of %v", r, s, m[0])
			}
		}
		from = [2]float64{v[4], v[5]}
	}
	if math.Hypot(from[0]-90, from[1]-40) > 1e-3 {
		t.Errorf("the circle ends at %v", from)
	}
}

// pageOf unpacks the commands of the first page.
func pageOf(t *testing.T, c *pdfCanvas) string {
	t.Helper()
	var b bytes.Buffer
	if _, err := c.WriteTo(&b); err != nil {
		t.Fatal(err)
	}
	_, after, ok := bytes.Cut(b.Bytes(), []byte("stream\n"))
	if !ok {
		t.Fatal("the PDF has no stream")
	}
	z, err := zlib.NewReader(bytes.NewReader(after))
	if err != nil {
		t.Fatal(err)
	}
	page, err := io.ReadAll(z)
	if err != nil {
		t.Fatal(err)
	}
	return string(page)
}

func TestPDFText(t *testing.T) {
	p := Profile(penstock(), Options{})
	out := render(t, p, "pdf")
	if !bytes.HasPrefix(out, []byte("%PDF-1.")) || !bytes.Contains(out, []byte("/CreationDate (D:20000101")) {
		t.Error("no PDF, or one with the clock in it")
	}
	if n := len(out); n > 80<<10 {
		t.Errorf("%d bytes: whole fonts are inside", n)
	}
}
