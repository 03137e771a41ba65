package cli

import (
	"encoding/csv"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"tapround/calibrate/fault"
	"tapround/survey"
)

// fitFolder runs the line that users run on a folder.
func fitFolder(t *testing.T, folder string) *fault.Diagnosis {
	t.Helper()
	d := readSurvey(os.DirFS(folder))
	for _, p := range d.problems {
		if p.Severity == survey.Fatal {
			t.Fatalf("%s: %v", folder, p)
		}
	}
	_, diagnosis, err := reconcile(d, nil)
	if err != nil {
		t.Fatalf("%s: %v", folder, err)
	}
	if !diagnosis.Final.Converged {
		t.Fatalf("%s: %s", folder, diagnosis.Final.Status)
	}
	return diagnosis
}

// TestNikuradse: the sand of Nikuradse's pipes (VDI-Forschungsheft 361, 1933; NACA TM
// 1292) comes back from his fully rough points, within 10 % of the grain and within 2 %
// of an independent fit of Colebrook-White to the same points (SciPy, in
// nikuradse_fits.csv); our priors, gauges and Newton solver stand between the two.
func TestNikuradse(t *testing.T) {
	fits := rowsOf(t, "../../../testdata/real/nikuradse_fits.csv")
	folders, err := filepath.Glob("../../../testdata/real/nikuradse-*")
	if err != nil || len(folders) < 7 {
		t.Fatalf("%d folders, %v", len(folders), err)
	}
	for _, folder := range folders {
		d := fitFolder(t, folder)
		s := d.Model.Survey
		grain := s.Pipes[0].Roughness.V
		got, lo, hi := d.Final.Whole(0)
		if r := got / grain; r < 0.9 || r > 1.1 {
			t.Errorf("%s: roughness %.4g m, grain %.4g m (ratio %.3f)", filepath.Base(folder), got, grain, r)
		}
		if !(lo < got && got < hi) {
			t.Errorf("%s: interval %.4g to %.4g does not hold %.4g", filepath.Base(folder), lo, hi, got)
		}
		want := 0.0
		for _, f := range fits {
			if math.Abs(number(f["D_m"])/s.Pipes[0].Bore-1) < 1e-3 && math.Abs(number(f["k_m"])/grain-1) < 1e-6 {
				want = number(f["lsq_colebrook_fit_k_ratio_rough_points"])
			}
		}
		if want == 0 {
			t.Errorf("%s: no independent fit to compare with", filepath.Base(folder))
		} else if math.Abs(got/grain/want-1) > 0.02 {
			t.Errorf("%s: k ratio %.4f, independent fit %.4f", filepath.Base(folder), got/grain, want)
		}
		for _, f := range d.Findings() {
			if f.Grade != survey.Hint {
				t.Errorf("%s: %s %s %s on a pipe of its expected roughness", filepath.Base(folder), f.Grade, f.Kind, f.Item)
			}
		}
	}
}

// TestSmoothPipes: Stanton and Pannell's smooth brass pipes (Phil. Trans. A 214, 1914)
// are never called fouled, and what the readings tell of their roughness is a bound from
// above only.
func TestSmoothPipes(t *testing.T) {
	folders, err := filepath.Glob("../../../testdata/real/stanton-pannell-*")
	if err != nil || len(folders) < 4 {
		t.Fatalf("%d folders, %v", len(folders), err)
	}
	bounds := 0
	for _, folder := range folders {
		d := fitFolder(t, folder)
		for _, f := range d.Findings() {
			// The points of the narrowest pipe come in two batches that differ by some per
			// cent, which is rightly said of its meters; the pipe itself is smooth.
			if f.Grade != survey.Hint && f.Kind != survey.GaugeOff {
				t.Errorf("%s: %s %s %s", filepath.Base(folder), f.Grade, f.Kind, f.Item)
			}
		}
		_, _, hi := d.Final.Whole(0)
		// k u*/nu below 5 is hydraulically smooth (Nikuradse); at these velocities that is
		// some micrometres.
		if hi > 10e-6 {
			t.Errorf("%s: roughness up to %.3g mm is not excluded", filepath.Base(folder), 1e3*hi)
		}
		if d.Final.OpenBelow(0) {
			bounds++
		}
	}
	if bounds == 0 {
		t.Errorf("no smooth pipe has a one-sided bound")
	}
}

// TestDemo: the built-in survey's five faults, as far as they can be known.
func TestDemo(t *testing.T) {
	d := fitFolder(t, "../demo/harrowgill")
	found := map[string]survey.Finding{}
	for _, f := range d.Findings() {
		if f.Grade == survey.Proven || f.Grade == survey.Likely {
			found[string(f.Kind)+" "+f.Item] = f
		}
	}
	// True values: see gen/main.go.
	near := func(name string, want, within float64) {
		f, ok := found[name]
		if !ok {
			t.Errorf("%s was not found", name)
			return
		}
		if math.Abs(f.Estimate.V-want) > within {
			t.Errorf("%s: estimate %.3f %s, truth %.3f", name, f.Estimate.V, f.Unit, want)
		}
		delete(found, name)
	}
	near("level-wrong N10", -2.4, 0.12)
	near("gauge-off G07", 0.12, 0.012)
	// A bore of 328 mm with k 9 mm is, at every flow, the recorded 350 mm with 20 mm.
	near("fouled-pipe P2", 20, 5)
	for name, f := range found {
		switch f.Kind {
		case survey.UnrecordedFlow:
			if math.Abs(f.Estimate.V-4) > 0.5 || !holdsItem(f, "N8") {
				t.Errorf("%s: %.2f L/s, cannot be told from %v", name, f.Estimate.V, f.CannotBeToldFrom)
			}
		case survey.CauseOpen:
			if !holdsItem(f, "SV-031") || !holdsItem(f, "P9") {
				t.Errorf("%s: %v", name, f.CannotBeToldFrom)
			}
		default:
			t.Errorf("%s was claimed and is not so", name)
		}
		delete(found, name)
	}
	if len(d.Accepted) != 5 {
		t.Errorf("%d causes were accepted, five are there", len(d.Accepted))
	}
}

func holdsItem(f survey.Finding, item string) bool {
	if f.Item == item {
		return true
	}
	for _, n := range f.CannotBeToldFrom {
		if strings.HasSuffix(n, ":"+item) {
			return true
		}
	}
	return false
}

// TestStretchesOfDemo: the loss view has one row for each pair of neighbouring taps, runs
// with the water, and its parts add up.
func TestStretchesOfDemo(t *testing.T) {
	d := fitFolder(t, "../demo/harrowgill")
	losses := d.Final.Losses()
	if len(losses) < 50 {
		t.Fatalf("%d rows", len(losses))
	}
	seen := map[string]bool{}
	for _, l := range losses {
		key := l.Round + l.FromTap + l.ToTap
		if seen[key] || seen[l.Round+l.ToTap+l.FromTap] {
			t.Errorf("round %s: %s to %s stands twice", l.Round, l.FromTap, l.ToTap)
		}
		seen[key] = true
		if math.Abs(l.Excess.Value-(l.Measured.Value-l.Expected.Value)) > 1e-9 {
			t.Errorf("round %s, %s to %s: the excess is not measured less expected", l.Round, l.FromTap, l.ToTap)
		}
		if l.FromTap == "N1" && l.ToTap == "N2" && strings.Join(l.Items, " ") != "P2" {
			t.Errorf("between N1 and N2 lies P2, not %v", l.Items)
		}
	}
}

func rowsOf(t *testing.T, file string) []map[string]string {
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
	var out []map[string]string
	for _, r := range rows[1:] {
		m := map[string]string{}
		for i, h := range rows[0] {
			m[h] = r[i]
		}
		out = append(out, m)
	}
	return out
}

func number(s string) float64 {
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		return math.NaN()
	}
	return v
}
