// Package examples runs published worked examples, written as survey folders, through the
// code that users run, and holds the answers to the published ones.
package examples

import (
	"math"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"tapround/calibrate"
	"tapround/calibrate/fault"
	"tapround/survey"
	"tapround/survey/catalogue"
	"tapround/survey/correct"
	"tapround/survey/csvfile"
	"tapround/survey/head"
	"tapround/survey/unit"
	"tapround/survey/water"
)

const root = "../../../testdata/examples"

// folders lists the survey folders, sorted.
func folders(t *testing.T) []string {
	t.Helper()
	found, err := filepath.Glob(filepath.Join(root, "*", "survey.csv"))
	if err != nil {
		t.Fatal(err)
	}
	var out []string
	for _, f := range found {
		out = append(out, filepath.Base(filepath.Dir(f)))
	}
	return out
}

// modelOf reads a folder the way users' folders are read. The examples are clean data:
// anything worse than a notice is a fault of the folder or of the reader.
func modelOf(t *testing.T, folder string) *calibrate.Model {
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
	return m
}

// works is a folder solved at its expected values.
type works struct {
	*calibrate.Model
	*calibrate.Expected
	rhoG float64 // N/m3
	g    float64
}

func solve(t *testing.T, folder string) works {
	t.Helper()
	m := modelOf(t, folder)
	e, err := m.Expected()
	if err != nil {
		t.Fatalf("%s: %v", folder, err)
	}
	g := water.Gravity(m.Survey.Info.Latitude, m.Survey.Info.SiteLevel)
	return works{m, e, water.Density(m.Survey.Info.WaterTemperature) * g, g}
}

// measured gives one quantity in the unit of the claim. A place is a tap; two taps with
// ">" between are the stretch from one to the other, with "+" their sum; "@" goes before
// the fitting whose bore is meant.
func measured(t *testing.T, w works, c claim) float64 {
	t.Helper()
	round := slices.IndexFunc(w.Survey.Rounds, func(r survey.Round) bool { return r.Name == c.round })
	if round < 0 {
		t.Fatalf("%s has no round %q", c.folder, c.round)
	}
	tap := func(name string) int {
		i := w.TapIndex(name)
		if i < 0 {
			t.Fatalf("%s has no tap %q", c.folder, name)
		}
		return i
	}
	in := func(d unit.Dimension, si float64) float64 {
		u, err := unit.Parse(c.unit, d)
		if err != nil {
			t.Fatalf("%s, %s: %v", c.folder, c.quantity, err)
		}
		return u.FromSI(si)
	}
	flow := func(name string) float64 { return w.Flow(round, tap(name)) }
	total := func(name string) float64 { return w.Total(round, tap(name)) }
	piezometric := func(name string) float64 { return w.Piezometric(round, tap(name)) }
	level := func(name string) float64 { return w.Survey.Taps[tap(name)].Elevation }
	from, to, _ := strings.Cut(c.place, ">")
	switch c.measure {
	case "flow":
		sum := 0.0
		for name := range strings.SplitSeq(c.place, "+") {
			sum += flow(name)
		}
		return in(unit.Flow, sum)
	case "velocity":
		name, fitting, _ := strings.Cut(c.place, "@")
		bore := boreAt(t, w, name, fitting)
		return in(unit.Velocity, flow(name)/(math.Pi/4*bore*bore))
	case "piezometric":
		return in(unit.Length, piezometric(c.place))
	case "total":
		return in(unit.Length, total(c.place))
	case "pressure_head":
		return in(unit.Length, piezometric(c.place)-level(c.place))
	case "pressure_head_total": // where the source leaves velocity heads out
		return in(unit.Length, total(c.place)-level(c.place))
	case "summit": // how high the line may stand there with 2.5 m absolute under 10.3 m
		return in(unit.Length, piezometric(c.place)+10.3-2.5)
	case "pressure":
		return in(unit.Pressure, w.rhoG*(piezometric(c.place)-level(c.place)))
	case "pressure_loss":
		return in(unit.Pressure, w.rhoG*(piezometric(from)-piezometric(to)))
	case "loss":
		return in(unit.Length, total(from)-total(to))
	case "power":
		return in(unit.Power, w.rhoG*flow(from)*(total(from)-total(to)))
	case "power_left": // of the head over the tap's own level
		return in(unit.Power, w.rhoG*flow(c.place)*(total(c.place)-level(c.place)))
	case "friction_factor": // h = f L/D V2/2g, between two taps of one pipe
		bore := boreAt(t, w, from, "")
		v := flow(from) / (math.Pi / 4 * bore * bore)
		length := w.Survey.Taps[tap(to)].At - w.Survey.Taps[tap(from)].At
		return (total(from) - total(to)) * bore / length * 2 * w.g / (v * v)
	}
	t.Fatalf("%s, %s: %q is no measure", c.folder, c.quantity, c.measure)
	return 0
}

// boreAt is the bore of a tap's pipe, or of a fitting where one is named.
func boreAt(t *testing.T, w works, tap, fitting string) float64 {
	t.Helper()
	for _, f := range w.Survey.Fittings {
		if f.Name == fitting && f.Bore.OK {
			return f.Bore.V
		}
	}
	i := w.TapIndex(tap)
	if i >= 0 && fitting == "" {
		for _, p := range w.Survey.Pipes {
			if p.Name == w.Survey.Taps[i].Pipe {
				return p.Bore
			}
		}
	}
	t.Fatalf("no bore at %q, %q", tap, fitting)
	return 0
}

// TestPublishedAnswers: the works as the sources describe them give the answers that the
// sources print, within the tolerance that stands beside each with its reason.
func TestPublishedAnswers(t *testing.T) {
	solved := map[string]works{}
	for _, folder := range folders(t) {
		solved[folder] = solve(t, folder)
	}
	want, checked := 0, 0
	for _, table := range tables {
		want += table.rows - table.leftOut
	}
	for _, c := range claims(t) {
		if c.leftOut != "" {
			continue
		}
		w, ok := solved[c.folder]
		if !ok {
			t.Errorf("%s, %s: there is no folder %q", c.example, c.quantity, c.folder)
			continue
		}
		got := measured(t, w, c)
		checked++
		t.Run(c.example+"/"+c.quantity, func(t *testing.T) {
			t.Logf("%.6g %s, published %.6g, off by %.2g of the tolerance", got, c.unit, c.value, (got-c.value)/c.tolerance)
			if !(math.Abs(got-c.value) <= c.tolerance) {
				t.Errorf("%s, %s at %s: %.6g %s, published %.6g, allowed %.2g\n%s (%s)",
					c.folder, c.measure, c.place, got, c.unit, c.value, c.tolerance, c.source, c.provenance)
			}
		})
	}
	if checked != want {
		t.Errorf("%d answers were checked, the tables claim %d", checked, want)
	}
}

// TestReconciled: the readings in the folders are the published answers, so the whole
// search must end, use them all, and find nothing wrong with the works.
func TestReconciled(t *testing.T) {
	for _, folder := range folders(t) {
		t.Run(folder, func(t *testing.T) {
			m := modelOf(t, folder)
			if len(m.Obs) != len(m.Survey.Readings) {
				t.Errorf("%d of %d readings are used", len(m.Obs), len(m.Survey.Readings))
			}
			d, err := fault.Diagnose(m, fault.DefaultSettings(m.Survey))
			if err != nil {
				t.Fatal(err)
			}
			if !d.Final.Converged {
				t.Errorf("the fit ended with %s", d.Final.Status)
			}
			for _, a := range d.Accepted {
				t.Errorf("found %+v", a.Cause)
			}
			for i, r := range d.Final.R {
				if math.Abs(r) > 3 {
					t.Errorf("reading %d (%s) is %.2g standard uncertainties off", i+1, m.Survey.Readings[i].Tap, r)
				}
			}
		})
	}
}
