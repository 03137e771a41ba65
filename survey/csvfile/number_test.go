package csvfile

import (
	"fmt"
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

// Numbers as they stand in cells, by what the rest of the file shows. NaN: refused.
func TestNumber(t *testing.T) {
	no := math.NaN()
	// The columns: a comma-separated file; one with semicolons that shows nothing, only
	// points, only commas, both.
	files := []marks{{delim: ','}, {delim: ';'}, {delim: ';', point: true}, {delim: ';', comma: true}, {delim: ';', point: true, comma: true}}
	for _, c := range []struct {
		cell string
		want [5]float64
	}{
		{"12", [5]float64{12, 12, 12, 12, 12}},
		{"-12.50", [5]float64{-12.5, -12.5, -12.5, -12.5, -12.5}},
		{"+0.5", [5]float64{.5, .5, .5, .5, .5}},
		{".5", [5]float64{.5, .5, .5, .5, .5}},
		{"5.", [5]float64{5, 5, 5, 5, 5}},
		{"1.2e-3", [5]float64{.0012, .0012, .0012, .0012, .0012}},
		{"1.234e3", [5]float64{1234, 1234, 1234, 1234, 1234}},
		{"\u22125.4", [5]float64{-5.4, -5.4, -5.4, -5.4, -5.4}}, // a minus sign, not a hyphen
		{"5,4", [5]float64{no, 5.4, 5.4, 5.4, 5.4}},
		{"0,123", [5]float64{no, .123, .123, .123, .123}}, // no thousands begin with 0
		{"12,3456", [5]float64{no, 12.3456, 12.3456, 12.3456, 12.3456}},
		{"1,234", [5]float64{no, no, no, 1.234, no}},
		{"-1,234", [5]float64{no, no, no, -1.234, no}},
		{"1.234", [5]float64{1.234, 1.234, 1.234, no, no}},
		{"0.123", [5]float64{.123, .123, .123, .123, .123}},
		{"1,234.5", [5]float64{1234.5, 1234.5, 1234.5, 1234.5, 1234.5}},
		{"1.234,5", [5]float64{no, 1234.5, 1234.5, 1234.5, 1234.5}},
		{"1,234,567", [5]float64{1234567, 1234567, 1234567, no, no}},
		{"1.234.567", [5]float64{1234567, 1234567, no, 1234567, no}},
		{"1 234", [5]float64{1234, 1234, 1234, 1234, 1234}},
		{"1\u00a0234\u00a0567", [5]float64{1234567, 1234567, 1234567, 1234567, 1234567}},
		{"1'234.5", [5]float64{1234.5, 1234.5, 1234.5, 1234.5, 1234.5}},
		{"0,123,456", [5]float64{no, no, no, no, no}},
		{",123,456", [5]float64{no, no, no, no, no}},
		{"1234,567,890", [5]float64{no, no, no, no, no}},
		{"12,34,567", [5]float64{no, no, no, no, no}},
		{"1,23.4", [5]float64{no, no, no, no, no}},
		{"1.2.3", [5]float64{no, no, no, no, no}},
		{"1 23", [5]float64{no, no, no, no, no}},
		{"NaN", [5]float64{no, no, no, no, no}},
		{"infinity", [5]float64{no, no, no, no, no}},
		{"0x1p4", [5]float64{no, no, no, no, no}},
		{"1_000", [5]float64{no, no, no, no, no}},
		{"1e999", [5]float64{no, no, no, no, no}},
		{"1e", [5]float64{no, no, no, no, no}},
		{"--5", [5]float64{no, no, no, no, no}},
		{"- 5", [5]float64{no, no, no, no, no}},
		{".", [5]float64{no, no, no, no, no}},
		{"\u0665", [5]float64{no, no, no, no, no}}, // an Arabic-Indic five
	} {
		for i, m := range files {
			got, _, bad := m.number(c.cell)
			if want := c.want[i]; math.IsNaN(want) != (bad != nil) || bad == nil && got != want {
				t.Errorf("%q in a file with %q, point %v, comma %v: %v, %+v; want %v", c.cell, m.delim, m.point, m.comma, got, bad, want)
			}
		}
	}
}

// What a whole file shows of its decimal mark.
func TestMarks(t *testing.T) {
	for _, c := range []struct {
		delim        byte
		cells        string
		point, comma bool
	}{
		{';', "12 -3 1e5", false, false},
		{';', "12.5 3", true, false},
		{';', "12,5 3", false, true},
		{';', "1,234 1.234", false, false},
		{';', "1,234.5", true, false},
		{';', "1.234,5", false, true},
		{';', "1,234,567", false, false},
		{';', "5,4-5,6", false, true},
		{';', "5.4-5.6", true, false},
		{';', "0,123 Mill.Lane 2026.03.15", false, true},
		{',', "12.5", true, false},
		{',', "12,5", false, false},
	} {
		m := marks{delim: c.delim}
		for _, cell := range strings.Fields(c.cells) {
			m.see(cell)
		}
		if m.point != c.point || m.comma != c.comma {
			t.Errorf("%q: point %v, comma %v", c.cells, m.point, m.comma)
		}
	}
}

// A number written in any of the customary ways comes back as it was, or is refused;
// it never comes back as another one.
func TestNumberNeverAnother(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		v := rapid.Float64Range(-1e7, 1e7).Draw(t, "v")
		digits := rapid.IntRange(0, 6).Draw(t, "digits")
		plain := strconv.FormatFloat(v, 'f', digits, 64)
		want, err := strconv.ParseFloat(plain, 64)
		if err != nil {
			t.Fatal(err)
		}
		decimal := rapid.SampledFrom([]string{".", ","}).Draw(t, "decimal mark")
		group := rapid.SampledFrom([]string{"", ".", ",", " ", "'", "\u00a0"}).Draw(t, "thousands mark")
		if group == decimal {
			group = ""
		}
		cell := written(plain, decimal, group)
		m := marks{delim: ';'}
		m.see(cell)
		// Other cells of the file, written in the same way.
		for range rapid.IntRange(0, 2).Draw(t, "others") {
			m.see(written("7.25", decimal, group))
		}
		got, _, bad := m.number(cell)
		if n, _ := parseShape(cell); n.open == '.' && !m.point && !m.comma {
			return // read by the decimal point, with a notice
		}
		if bad == nil && got != want {
			t.Fatalf("%s, written %q, was read as %v", plain, cell, got)
		}
		if bad != nil && !bad.unclear {
			t.Fatalf("%q was refused: %s", cell, bad.reason)
		}
	})
}

func written(plain, decimal, group string) string {
	sign := ""
	if plain[0] == '-' {
		sign, plain = "-", plain[1:]
	}
	whole, fraction, _ := strings.Cut(plain, ".")
	var parts []string
	for len(whole) > 3 && group != "" {
		parts = append([]string{whole[len(whole)-3:]}, parts...)
		whole = whole[:len(whole)-3]
	}
	s := sign + strings.Join(append([]string{whole}, parts...), group)
	if fraction != "" {
		s += decimal + fraction
	}
	return s
}

// Each thing that stands for no number has its own reason.
func TestWhyNoNumber(t *testing.T) {
	for reason, cells := range map[string]string{
		"says that there is no value":             "n/a|N/A|-|--|\u2014|none|nil|x",
		"says that the instrument was off":        "HI|hi|LO|OL|over|Off scale|err",
		"is a limit and not a value":              "<0.5|>10|\u22645|<,5",
		"is a doubtful or rounded value":          "~5|5.4?|ca. 5|about 5",
		"looks like a date":                       "9/10|10-Sep|Sep-10|10. Sep|2026-09-10|10.09.2026|3-M\u00e4r|12 okt 2026|1/2026",
		"looks like a time of day":                "10:42|9:05:30",
		"is a range":                              "5.4-5.6|5,4 \u2013 5,6|5 to 6|5..6|-2--1",
		"is a spreadsheet's error mark":           "#REF!|#N/A|#DIV/0!",
		"is a formula and not its result":         "=A1+2|=5",
		"is a number in computer notation":        "0x10|1_000|0b11",
		"is a station in hundreds of feet":        "12+50|12+50.5",
		"behind the number":                       "5 bar|5.4m|20 %|5,4 psi|12\u00b0C",
		"is not a number; write a plain decimal":  "bar|5 5|(5)|5*|abc",
		"is not a number; leave the cell empty":   "NaN|Inf|-inf",
		"is a ditto mark, and this column":        "\"|do.|Ditto|''|\u3003",
		"is too large a number; correct it":       "1e999",
		"may be 1.234 or 1234; write it without ": "1,234",
	} {
		for _, cell := range strings.Split(cells, "|") {
			_, _, bad := marks{delim: ','}.number(cell)
			if bad == nil {
				t.Errorf("%q is a number", cell)
			} else if text := fmt.Sprintf("%s; %s", bad.reason, bad.remedy); !strings.Contains(text, reason) {
				t.Errorf("%q: %s; want %q", cell, text, reason)
			}
		}
	}
}
