package csvfile

import (
	"encoding/csv"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

func TestSplit(t *testing.T) {
	for _, c := range []struct {
		name, text string
		delim      byte
		want       []record
		loose      []int
	}{
		{"plain", "a,b\n1,2\n", ',', []record{{1, []string{"a", "b"}}, {2, []string{"1", "2"}}}, nil},
		{"no last line end", "a;b\n1;2", ';', []record{{1, []string{"a", "b"}}, {2, []string{"1", "2"}}}, nil},
		{"blank and comment lines keep their numbers", "# by crew 2\n\na,b\n , \n  # later, too\n\"# with, a comma\",\n1,2\n", ',',
			[]record{{3, []string{"a", "b"}}, {5, []string{"# later", "too"}}, {7, []string{"1", "2"}}}, nil},
		{"quoted line break", "a,b\n\"one\ntwo\",2\n3,4\n", ',', []record{{1, []string{"a", "b"}}, {2, []string{"one\ntwo", "2"}}, {4, []string{"3", "4"}}}, nil},
		{"comment mark within a cell", "a,\"x\n#y\",b\n1,2,3\n", ',', []record{{1, []string{"a", "x\n#y", "b"}}, {3, []string{"1", "2", "3"}}}, nil},
		// As on a field sheet: rows that "the same as above" would swallow.
		{"lone marks", "7;bar;\"           ;jumping\n8;psi;\"           ;borrowed\n9;\"\n\";x\n", ';',
			[]record{{1, []string{"7", "bar", `"`, "jumping"}}, {2, []string{"8", "psi", `"`, "borrowed"}}, {3, []string{"9", `"`}}, {4, []string{`"`, "x"}}}, nil},
		{"quoted cell that begins with the delimiter", "a,\", steady\",b\n", ',', []record{{1, []string{"a", ", steady", "b"}}}, nil},
		{"lone marks in one row", "7;\";\";x\n", ';', []record{{1, []string{"7", `"`, `"`, "x"}}}, nil},
		{"empty quoted cell", "a,\"\",b\n", ',', []record{{1, []string{"a", "", "b"}}}, nil},
		{"doubled mark", "a,\"6\"\" main\",b\n", ',', []record{{1, []string{"a", `6" main`, "b"}}}, nil},
		{"inches", "a,6\" main,b\n", ',', []record{{1, []string{"a", `6" main`, "b"}}}, nil},
		{"space around a quoted cell", "a, \"x, y\" ,b\n", ',', []record{{1, []string{"a", "x, y", "b"}}}, nil},
		{"tab", "a\t\"x\ty\"\tb\n", '\t', []record{{1, []string{"a", "x\ty", "b"}}}, nil},
		{"mark not closed", "a,\"x,b\n1,2,3\n", ',', []record{{1, []string{"a", `"x`, "b"}}, {2, []string{"1", "2", "3"}}}, []int{1}},
		{"mark closed by another cell's", "a,\"x,b\n1,\"y\",3\n", ',', []record{{1, []string{"a", `"x`, "b"}}, {2, []string{"1", "y", "3"}}}, []int{1}},
		{"text behind a quoted word", "a,\"N7\" Mill St,b\n", ',', []record{{1, []string{"a", `"N7" Mill St`, "b"}}}, []int{1}},
		{"mark closed far down", "a,\"x\n" + strings.Repeat("1,2\n", 30) + "3,y\"\n", ',', nil, []int{1}},
		{"spaces nobody sees", "a\u00a0,\u200bb\ufeff\n", ',', []record{{1, []string{"a", "b"}}}, nil},
	} {
		t.Run(c.name, func(t *testing.T) {
			got, loose, err := split(c.text, c.delim)
			if err != nil {
				t.Fatal(err)
			}
			if c.want == nil {
				if len(got) != strings.Count(c.text, "\n") {
					t.Errorf("%d rows", len(got))
				}
			} else if d := cmp.Diff(c.want, got, cmp.AllowUnexported(record{})); d != "" {
				t.Errorf("-want +got\n%s", d)
			}
			if !slices.Equal(loose, c.loose) {
				t.Errorf("marks that stand for themselves in lines %v, want %v", loose, c.loose)
			}
		})
	}
}

// What encoding/csv writes is read back as it was, but for space around cells. Cells
// that begin with a delimiter or a line break are left out: behind an opening mark
// these look like a ditto mark.
func TestSplitReadsCSV(t *testing.T) {
	cell := rapid.StringOfN(rapid.SampledFrom([]rune("ab1,;\" \n#.é")), 0, 6, -1)
	rapid.Check(t, func(t *rapid.T) {
		rows := rapid.SliceOfN(rapid.SliceOfN(cell, 1, 4), 1, 5).Draw(t, "rows")
		var b strings.Builder
		w := csv.NewWriter(&b)
		w.Comma = rapid.SampledFrom([]rune{',', ';', '\t'}).Draw(t, "delimiter")
		var want []record
		line := 1
		for _, row := range rows {
			if strings.HasPrefix(row[0], "#") {
				row[0] = "x" // encoding/csv writes a comment mark bare
			}
			for i, c := range row {
				if c = strings.TrimLeft(c, " "); c != "" && (rune(c[0]) == w.Comma || c[0] == '\n') {
					row[i] = "x" + row[i]
				}
			}
			row = append(row, "end") // no row is blank
			if err := w.Write(row); err != nil {
				t.Fatal(err)
			}
			rec := record{line: line}
			for _, c := range row {
				rec.cells = append(rec.cells, trim(c))
				line += strings.Count(c, "\n")
			}
			line++
			want = append(want, rec)
		}
		w.Flush()
		got, loose, err := split(b.String(), byte(w.Comma))
		if err != nil || len(loose) > 0 {
			t.Fatalf("%v, %v", err, loose)
		}
		if d := cmp.Diff(want, got, cmp.AllowUnexported(record{})); d != "" {
			t.Fatalf("%q: -want +got\n%s", b.String(), d)
		}
	})
}

// Of any text the rows begin in rising lines and nothing is left that encoding/csv
// would refuse or run together.
func FuzzSplit(f *testing.F) {
	for _, s := range []string{"a,b\n\"", "\"\n\"\n\"", "a;\"x\ny\";\"\n", "\"\"\"", ",\",\n,\"\",\"", "#\"\n\"#", "\" \"\n", "\"\t\"\t\"\n\"\""} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		s = tidy(strings.ToValidUTF8(s, "?"))
		for _, delim := range []byte{',', ';', '\t'} {
			records, _, err := split(s, delim)
			if err != nil {
				t.Fatalf("%q: %v", s, err)
			}
			last := 0
			for _, r := range records {
				if r.line <= last || r.line > 1+strings.Count(s, "\n") {
					t.Fatalf("%q: row in line %d after %d", s, r.line, last)
				}
				last = r.line
				for _, c := range r.cells {
					if strings.Count(c, "\n") > longestCell {
						t.Fatalf("%q: a cell of %d lines", s, strings.Count(c, "\n"))
					}
				}
			}
		}
	})
}
