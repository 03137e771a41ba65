package csvfile

import (
	"encoding/csv"
	"math"
	"sort"
	"strconv"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
	"pgregory.net/rapid"

	"tapround/survey"
)

func mapFiles(files map[string]string, f func(name, text string) string) map[string]string {
	out := map[string]string{}
	for name, text := range files {
		out[name] = f(name, text)
	}
	return out
}

// rewrite changes the cells of a comma-separated table and writes it with another
// delimiter.
func rewrite(t testing.TB, text string, delim rune, cell func(row, col int, heading, s string) string) string {
	t.Helper()
	rows, err := csv.NewReader(strings.NewReader(text)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var b strings.Builder
	w := csv.NewWriter(&b)
	w.Comma = delim
	for i, row := range rows {
		out := make([]string, len(row))
		for k, c := range row {
			out[k] = cell(i, k, rows[0][k], c)
		}
		if err := w.Write(out); err != nil {
			t.Fatal(err)
		}
	}
	w.Flush()
	return b.String()
}

func same(_, _ int, _, s string) string { return s }

// decimalComma turns the point of a plain number into a comma.
func decimalComma(row, _ int, _, s string) string {
	if _, err := strconv.ParseFloat(s, 64); err == nil && row > 0 {
		return strings.Replace(s, ".", ",", 1)
	}
	return s
}

// ways to write one folder: each must read as the first.
func TestSameInEveryDialect(t *testing.T) {
	encode := func(e interface{ Bytes([]byte) ([]byte, error) }) func(string, string) string {
		return func(_, text string) string {
			b, err := e.Bytes([]byte(text))
			if err != nil {
				t.Fatal(err)
			}
			return string(b)
		}
	}
	u16 := func(order unicode.Endianness, mark unicode.BOMPolicy) func(string, string) string {
		return encode(unicode.UTF16(order, mark).NewEncoder())
	}
	delimited := func(delim rune, cell func(int, int, string, string) string) func(string, string) string {
		return func(_, text string) string { return rewrite(t, text, delim, cell) }
	}
	ends := func(with string) func(string, string) string {
		return func(_, text string) string { return strings.ReplaceAll(text, "\n", with) }
	}
	for _, way := range []struct {
		name string
		f    func(name, text string) string
	}{
		{"UTF-8 with a mark", func(_, s string) string { return "\ufeff" + s }},
		{"UTF-16 little-endian with a mark", u16(unicode.LittleEndian, unicode.UseBOM)},
		{"UTF-16 big-endian with a mark", u16(unicode.BigEndian, unicode.UseBOM)},
		{"UTF-16 little-endian", u16(unicode.LittleEndian, unicode.IgnoreBOM)},
		{"UTF-16 big-endian", u16(unicode.BigEndian, unicode.IgnoreBOM)},
		{"Windows-1252", encode(charmap.Windows1252.NewEncoder())},
		{"CRLF", ends("\r\n")},
		{"CR", ends("\r")},
		{"semicolons", delimited(';', same)},
		{"tabs", delimited('\t', same)},
		{"semicolons and decimal commas", delimited(';', decimalComma)},
		{"tabs and decimal commas", delimited('\t', decimalComma)},
		{"capitals and spaces in headings", delimited(',', func(row, _ int, _, s string) string {
			if row == 0 {
				name, u, _ := cutUnit(s)
				s = " " + strings.ToUpper(strings.ReplaceAll(name, "_", "- "))
				if u != "" {
					s += " [ " + u + " ]"
				}
			}
			return s
		})},
		{"padded by a spreadsheet", func(_, s string) string {
			return strings.ReplaceAll(s, "\n", ",,\n") + ",,,,,\n,,,,\n"
		}},
	} {
		t.Run(way.name, func(t *testing.T) {
			for name, files := range map[string]map[string]string{"good": good(), "s1": folderText("testdata/samples/s1")} {
				// A letter beyond ASCII, for the encodings to get wrong.
				files["points.csv"] = strings.Replace(files["points.csv"], ",0,0,", ",0,0,Büro 3 – Süd", 1)
				want, _ := read(t, files)
				got, ps := read(t, mapFiles(files, way.f))
				for _, p := range ps {
					if p.Severity == survey.Fatal || p.Severity == survey.SetAside && !strings.EqualFold(p.Column, "remark") {
						t.Errorf("%s: %s", name, p)
					}
				}
				if d := cmp.Diff(facts(want), facts(got)); d != "" {
					t.Errorf("%s: -want +got\n%s", name, d)
				}
				opts := cmp.Options{cmpopts.IgnoreFields(survey.Survey{}, "Inputs"), cmpopts.IgnoreFields(survey.Reading{}, "Written"), cmp.Comparer(sameZone)}
				if d := cmp.Diff(want, got, opts); d != "" {
					t.Errorf("%s: -want +got\n%s", name, d)
				}
			}
		})
	}
}

// Every length in feet, every flow in US gallons a minute and so on: the survey in SI
// stays what it was, but for the rounding of the number as printed.
func TestSameInOtherUnits(t *testing.T) {
	// Factors and names by definition: foot 0.3048 m, inch 25.4 mm, US gallon 231 cubic
	// inches, psi 0.45359237 x 9.80665 / 0.0254^2 Pa, 9/5 and 32 of Fahrenheit.
	gpm := 231 * math.Pow(0.0254, 3) / 60
	psi := 0.45359237 * 9.80665 / (0.0254 * 0.0254)
	other := map[string]struct {
		name string
		of   func(float64) float64
	}{
		"m":   {"ft", func(v float64) float64 { return v / 0.3048 }},
		"mm":  {"in", func(v float64) float64 { return v / 25.4 }},
		"L/s": {"gpm", func(v float64) float64 { return v / 1000 / gpm }},
		"%":   {"1", func(v float64) float64 { return v / 100 }},
		"C":   {"F", func(v float64) float64 { return v*1.8 + 32 }},
		"kPa": {"psi", func(v float64) float64 { return v * 1000 / psi }},
		"bar": {"kPa", func(v float64) float64 { return v * 100 }},
		"rpm": {"Hz", func(v float64) float64 { return v / 60 }},
		"s":   {"min", func(v float64) float64 { return v / 60 }},
	}
	number := func(s string, of func(float64) float64) string {
		v, err := strconv.ParseFloat(s, 64)
		if err != nil {
			return s
		}
		return strconv.FormatFloat(of(v), 'g', -1, 64)
	}
	files := good()
	delete(files, "survey.csv") // its numbers are tested apart
	changed := mapFiles(files, func(name, text string) string {
		rows, err := csv.NewReader(strings.NewReader(text)).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		unitAt := -1
		for i, h := range rows[0] {
			if h == "unit" {
				unitAt = i
			}
		}
		return rewrite(t, text, ',', func(row, col int, heading, s string) string {
			_, u, _ := cutUnit(heading)
			o, ok := other[u]
			switch {
			case row == 0 && ok:
				return strings.Replace(s, "["+u+"]", "["+o.name+"]", 1)
			case row == 0:
				return s
			case ok:
				return number(s, o.of)
			}
			if unitAt < 0 {
				return s
			}
			// A pressure in m would be a column of water; the good survey has none.
			r, ok := other[strings.TrimSuffix(rows[row][unitAt], " abs")]
			switch {
			case !ok:
				return s
			case col == unitAt:
				return r.name
			case heading == "low" || heading == "high" || heading == "resolution" || heading == "applied" || heading == "indicated" ||
				heading == "value" || heading == "sd" || heading == "reading" || heading == "limit":
				return number(s, r.of)
			}
			return s
		})
	})
	a, _ := read(t, files)
	b, ps := read(t, changed)
	for _, p := range ps {
		if p.Severity != survey.Notice {
			t.Error(p)
		}
	}
	want, got := facts(a), facts(b)
	if len(want) != len(got) || len(want) < 120 {
		t.Fatalf("%d numbers became %d", len(want), len(got))
	}
	for place, v := range want {
		// Three roundings: of the changed number, of the factor and of the product; 32
		// degrees are ten times the smallest temperature.
		if math.Abs(got[place]-v) > 1e-15*math.Abs(v)+1e-14 {
			t.Errorf("%s: %.17g became %.17g", place, v, got[place])
		}
	}
}

// Rows in another order give the same survey in that order.
func TestRowOrder(t *testing.T) {
	files := good()
	want, _ := read(t, files)
	ignore := cmp.Options{cmpopts.IgnoreFields(survey.Survey{}, "Inputs"), cmpopts.IgnoreTypes(survey.Source{}), cmp.Comparer(sameZone)}
	sorted(want)
	rapid.Check(t, func(rt *rapid.T) {
		mixed := mapFiles(files, func(name, text string) string {
			if name == "duty.csv" {
				return text // a works curve's points have an order
			}
			rows := strings.SplitAfter(strings.TrimSuffix(text, "\n"), "\n")
			rows[len(rows)-1] += "\n"
			order := rapid.Permutation(rows[1:]).Draw(rt, name)
			return rows[0] + strings.Join(order, "")
		})
		got, ps := read(rt, mixed)
		if len(ps) != 0 {
			rt.Fatalf("problems: %s", lines(ps))
		}
		sorted(got)
		if d := cmp.Diff(want, got, ignore); d != "" {
			rt.Fatalf("-want +got\n%s", d)
		}
	})
}

// sorted puts every list of a survey into an order of its own.
func sorted(s *survey.Survey) {
	sort.Slice(s.Points, func(i, j int) bool { return s.Points[i].Name < s.Points[j].Name })
	sort.Slice(s.Pipes, func(i, j int) bool { return s.Pipes[i].Name < s.Pipes[j].Name })
	sort.Slice(s.Levels, func(i, j int) bool { return s.Levels[i].At < s.Levels[j].At })
	sort.Slice(s.Fittings, func(i, j int) bool { return s.Fittings[i].Name < s.Fittings[j].Name })
	sort.Slice(s.Taps, func(i, j int) bool { return s.Taps[i].Name < s.Taps[j].Name })
	sort.Slice(s.Gauges, func(i, j int) bool { return s.Gauges[i].Name < s.Gauges[j].Name })
	for _, g := range s.Gauges {
		sort.Slice(g.Checks, func(i, j int) bool { return g.Checks[i].Applied < g.Checks[j].Applied })
	}
	sort.Slice(s.Rounds, func(i, j int) bool { return s.Rounds[i].Name < s.Rounds[j].Name })
	sort.Slice(s.Conditions, func(i, j int) bool {
		a, b := s.Conditions[i], s.Conditions[j]
		return a.Round+a.Item+string(a.Kind) < b.Round+b.Item+string(b.Kind)
	})
	sort.Slice(s.Readings, func(i, j int) bool { return s.Readings[i].Time.Before(s.Readings[j].Time) })
	sort.Slice(s.Requirements, func(i, j int) bool { return s.Requirements[i].Name < s.Requirements[j].Name })
}
