package examples

import (
	"encoding/csv"
	"maps"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"testing"
)

// claim is one row of the tables of expected answers: a figure that a source prints, or
// one that was worked out from the source's own inputs, and where to find it in a folder.
type claim struct {
	example, quantity             string
	value                         float64
	unit                          string
	tolerance                     float64 // in the unit of the value
	folder, round, measure, place string
	leftOut                       string // why no folder carries it; then the rest is empty
	source, provenance            string
}

// tables are the files of expected answers with the number of answers each must have, and
// how many of them are left out, so that none falls out unnoticed.
var tables = map[string]struct{ rows, leftOut int }{
	"systems.csv":        {64, 0},
	"pipes.csv":          {29, 21},
	"two_loop.csv":       {14, 0},
	"two_reservoirs.csv": {18, 0},
}

// claims reads every table of expected answers.
func claims(t *testing.T) []claim {
	t.Helper()
	var out []claim
	files, err := filepath.Glob(filepath.Join(root, "expected", "*.csv"))
	if err != nil || len(files) != len(tables) {
		t.Fatalf("%d tables of expected answers, want %d (%v)", len(files), len(tables), err)
	}
	for _, file := range files {
		out = append(out, claimsOf(t, file)...)
	}
	return out
}

func claimsOf(t *testing.T, file string) []claim {
	t.Helper()
	f, err := os.Open(file)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	want, ok := tables[filepath.Base(file)]
	if !ok || len(rows)-1 != want.rows {
		t.Fatalf("%s has %d answers, want %d", file, len(rows)-1, want.rows)
	}
	var out []claim
	leftOut := 0
	for _, cells := range rows[1:] {
		c := claimFrom(t, row{file, rows[0], cells})
		if c.leftOut != "" {
			leftOut++
		}
		out = append(out, c)
	}
	if leftOut != want.leftOut {
		t.Errorf("%s leaves %d answers out, want %d", file, leftOut, want.leftOut)
	}
	return out
}

type row struct {
	file        string
	head, cells []string
}

func (r row) cell(t *testing.T, name string) string {
	t.Helper()
	i := slices.Index(r.head, name)
	if i < 0 {
		t.Fatalf("%s has no column %s", r.file, name)
	}
	return r.cells[i]
}

func (r row) number(t *testing.T, name string) (float64, bool) {
	t.Helper()
	text := r.cell(t, name)
	if text == "" {
		return 0, false
	}
	v, err := strconv.ParseFloat(text, 64)
	if err != nil {
		t.Fatalf("%s, %s of %s: %v", r.file, name, r.cell(t, "quantity"), err)
	}
	return v, true
}

// claimFrom turns a row into a claim. A printed figure goes before the one worked out; a
// tolerance stands either as a fraction of the figure or in its unit. A row must either
// name where its answer is found or say why it is left out.
func claimFrom(t *testing.T, r row) claim {
	t.Helper()
	c := claim{example: r.cell(t, "example"), quantity: r.cell(t, "quantity"), unit: r.cell(t, "unit"),
		folder: r.cell(t, "folder"), round: r.cell(t, "round"), measure: r.cell(t, "measure"), place: r.cell(t, "place"),
		leftOut: r.cell(t, "left_out"), source: r.cell(t, "source"), provenance: r.cell(t, "provenance")}
	name := r.file + ", " + c.example + ", " + c.quantity
	if c.source == "" || !slices.Contains([]string{"read", "memory", "computed"}, c.provenance) {
		t.Errorf("%s: source %q, provenance %q", name, c.source, c.provenance)
	}
	if (c.folder == "") == (c.leftOut == "") {
		t.Errorf("%s: folder %q, left out %q: want one of them", name, c.folder, c.leftOut)
	}
	value, printed := r.number(t, "value_published")
	if !printed {
		var ok bool
		if value, ok = r.number(t, "value_computed"); !ok || c.provenance != "computed" {
			t.Errorf("%s: provenance %s, but no figure is published", name, c.provenance)
		}
	}
	c.value = value
	relative, isRelative := r.number(t, "relative_tolerance")
	absolute, isAbsolute := r.number(t, "absolute_tolerance")
	if c.leftOut == "" && isRelative == isAbsolute {
		t.Errorf("%s: want one tolerance, relative or absolute", name)
	}
	c.tolerance = absolute
	if isRelative {
		c.tolerance = relative * max(value, -value)
	}
	return c
}

// TestEveryFolderIsClaimed: a folder whose answers nothing looks at would be no example.
func TestEveryFolderIsClaimed(t *testing.T) {
	claimed := map[string]bool{}
	for _, c := range claims(t) {
		if c.leftOut == "" {
			claimed[c.folder] = true
		}
	}
	if got, want := slices.Sorted(maps.Keys(claimed)), folders(t); !slices.Equal(got, want) {
		t.Errorf("answers are expected of %q, the folders are %q", got, want)
	}
}
