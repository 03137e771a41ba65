// Package examples runs published worked examples, written as survey folders, through the
// code that users run, and holds the answers to the published ones.
package examples

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"tapround/calibrate"
	"tapround/survey"
	"tapround/survey/catalogue"
	"tapround/survey/correct"
	"tapround/survey/csvfile"
	"tapround/survey/head"
	"tapround/survey/unit"
	"tapround/survey/water"
)

const root = "../../../testdata/examples"

// answer is one row of answers.csv.
type answer struct {
	folder, quantity, measure, place, unit, source, provenance string
	value, tolerance                                           float64
}

func answers(t *testing.T) []answer {
	t.Helper()
	f, err := os.Open(filepath.Join(root, "answers.csv"))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []answer
	for _, r := range rows[1:] {
		v, err1 := strconv.ParseFloat(r[4], 64)
		tol, err2 := strconv.ParseFloat(r[6], 64)
		if err1 != nil || err2 != nil {
			t.Fatalf("answers.csv: %v", r)
		}
		out = append(out, answer{folder: r[0], quantity: r[1], measure: r[2], place: r[3], value: v, unit: r[5], tolerance: tol, source: r[7], provenance: r[8]})
	}
	return out
}

// works solves a folder at its expected values, by the way users go.
func works(t *testing.T, folder string) (*calibrate.Model, *calibrate.Expected) {
	t.Helper()
	s, problems := csvfile.ReadFolder(os.DirFS(filepath.Join(root, folder)))
	problems = append(problems, catalogue.Complete(s)...)
	problems = append(problems, s.Validate()...)
	cs, more := correct.Readings(s)
	problems = append(problems, more...)
	hs, more := head.FromCorrected(s, cs)
	for _, p := range append(problems, more...) {
		if p.Severity != survey.Notice {
			t.Fatalf("%s: %v", folder, p)
		}
	}
	m, err := calibrate.New(s, hs, calibrate.DefaultPriors())
	if err != nil {
		t.Fatalf("%s: %v", folder, err)
	}
	e, err := m.Expected()
	if err != nil {
		t.Fatalf("%s: %v", folder, err)
	}
	return m, e
}

// measured reads one quantity, in the unit of the answer.
func measured(t *testing.T, m *calibrate.Model, e *calibrate.Expected, a answer) float64 {
	t.Helper()
	place := func(name string) int {
		i := m.TapIndex(name)
		if i < 0 {
			t.Fatalf("%s: no tap %s", a.folder, name)
		}
		return i
	}
	in := func(d unit.Dimension, si float64) float64 {
		u, err := unit.Parse(a.unit, d)
		if err != nil {
			t.Fatalf("%s: %v", a.folder, err)
		}
		return u.FromSI(si)
	}
	level := func(name string) float64 { return m.Survey.Taps[place(name)].Elevation }
	switch a.measure {
	case "flow":
		return in(unit.Flow, e.Flow(0, place(a.place)))
	case "piezometric":
		return in(unit.Length, e.Piezometric(0, place(a.place)))
	case "total":
		return in(unit.Length, e.Total(0, place(a.place)))
	case "pressure_head":
		return in(unit.Length, e.Piezometric(0, place(a.place))-level(a.place))
	case "pressure_head_total": // where the source leaves velocity heads out
		return in(unit.Length, e.Total(0, place(a.place))-level(a.place))
	case "pressure":
		rho := water.Density(m.Survey.Info.WaterTemperature)
		g := water.Gravity(m.Survey.Info.Latitude, m.Survey.Info.SiteLevel)
		return in(unit.Pressure, rho*g*(e.Piezometric(0, place(a.place))-level(a.place)))
	case "loss":
		from, to, _ := strings.Cut(a.place, ">")
		return in(unit.Length, e.Total(0, place(from))-e.Total(0, place(to)))
	}
	t.Fatalf("%s: answers.csv asks for %q, which is no measure", a.folder, a.measure)
	return 0
}

func TestPublishedExamples(t *testing.T) {
	checked := map[string]int{}
	for _, a := range answers(t) {
		t.Run(a.folder+"/"+a.quantity, func(t *testing.T) {
			m, e := works(t, a.folder)
			got := measured(t, m, e, a)
			if !(math.Abs(got-a.value) <= a.tolerance*math.Abs(a.value)) {
				t.Errorf("%s at %s: %.5g %s, published %.5g (within %.2g %%)\n%s (%s)", a.quantity, a.place, got, a.unit, a.value, 100*a.tolerance, a.source, a.provenance)
			}
			checked[a.folder]++
		})
	}
	folders, err := filepath.Glob(filepath.Join(root, "*", "pipes.csv"))
	if err != nil || len(folders) < 15 {
		t.Fatalf("%d folders, %v", len(folders), err)
	}
	for _, f := range folders {
		if name := filepath.Base(filepath.Dir(f)); checked[name] == 0 {
			t.Errorf("%s has no answer in answers.csv", name)
		}
	}
}

// TestAnswersSayWhere: every published figure names its source and how it is known.
func TestAnswersSayWhere(t *testing.T) {
	for _, a := range answers(t) {
		if a.source == "" || (a.provenance != "read" && a.provenance != "memory" && a.provenance != "computed") {
			t.Errorf("%s, %s: source %q, provenance %q", a.folder, a.quantity, a.source, a.provenance)
		}
	}
}
