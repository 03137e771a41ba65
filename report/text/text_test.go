package text

import (
	"bytes"
	"errors"
	"flag"
	"io"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"

	"tapround/report"
	"tapround/report/internal/sample"
	"tapround/survey"
)

var update = flag.Bool("update", false, "rewrite the files of testdata")

// printings are all that the package prints, of the sample.
var printings = map[string]func(io.Writer, *report.Result, Options) error{
	"summary":    func(w io.Writer, r *report.Result, o Options) error { return Summary(w, r, o) },
	"understood": func(w io.Writer, r *report.Result, o Options) error { return Understood(w, r.Inputs, o) },
	"problems":   func(w io.Writer, r *report.Result, o Options) error { return Problems(w, r.Problems, o) },
	"alerts":     func(w io.Writer, r *report.Result, o Options) error { return Alerts(w, r.Alerts, o) },
	"heads":      func(w io.Writer, r *report.Result, o Options) error { return Heads(w, r.Heads, o) },
}

func printed(t *testing.T, name string, r *report.Result, o Options) string {
	t.Helper()
	var b bytes.Buffer
	if err := printings[name](&b, r, o); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

func TestGolden(t *testing.T) {
	for name := range printings {
		got := printed(t, name, sample.Harrowgill(), Options{Written: "surveys/harrowgill/results"})
		file := filepath.Join("testdata", name+".txt")
		if *update {
			if err := os.WriteFile(file, []byte(got), 0o644); err != nil {
				t.Fatal(err)
			}
			continue
		}
		want, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		if d := cmp.Diff(string(want), got); d != "" {
			t.Errorf("%s (-want +got):\n%s", name, d)
		}
	}
}

var colourCode = regexp.MustCompile(`\x1b\[[0-9;]*m`)

// Colour adds nothing: without its codes the text is the same, and without leave
// there are none.
func TestColourSaysNothing(t *testing.T) {
	for name := range printings {
		plain := printed(t, name, sample.Harrowgill(), Options{})
		if strings.Contains(plain, "\x1b") {
			t.Errorf("%s is coloured without leave", name)
		}
		coloured := printed(t, name, sample.Harrowgill(), Options{Colour: true})
		stripped := colourCode.ReplaceAllString(coloured, "")
		// A coloured cell keeps the blanks that end a line.
		if trimmed := regexp.MustCompile(` +\n`).ReplaceAllString(stripped, "\n"); trimmed != plain {
			t.Errorf("%s differs with colour:\n%s", name, cmp.Diff(plain, trimmed))
		}
		if !strings.Contains(coloured, "\x1b[") {
			t.Errorf("%s has no colour", name)
		}
	}
}

func TestWidth(t *testing.T) {
	for name := range printings {
		for _, width := range []int{0, 80, 92, 100} {
			o := Options{Width: width}
			for _, l := range strings.Split(printed(t, name, sample.Harrowgill(), o), "\n") {
				// Tables of numbers take what they need, which is 92 here; prose keeps to
				// the width.
				if n := columns(l); n > max(o.width(), 92) || (name != "heads" && name != "summary" && n > o.width()) {
					t.Errorf("%s at %d: %d columns: %s", name, o.width(), n, l)
				}
			}
		}
	}
}

func TestEveryFindingIsTold(t *testing.T) {
	r := sample.Harrowgill()
	got := printed(t, "summary", r, Options{})
	flat := strings.Join(strings.Fields(got), " ")
	for _, f := range r.Findings {
		if !strings.Contains(flat, f.ID+" "+f.Statement) {
			t.Errorf("%s is not told", f.ID)
		}
		if f.Grade != survey.Hint && !strings.Contains(flat, "do "+f.Advice) {
			t.Errorf("the advice of %s is not told", f.ID)
		}
		if !strings.Contains(flat, f.Settle) {
			t.Errorf("the reading that would settle %s is not told", f.ID)
		}
	}
	for _, c := range r.Cautions {
		if !strings.Contains(flat, c) {
			t.Errorf("the caution %q is not printed", c)
		}
	}
	for _, word := range []string{"node", "residual", "calibrat", "parameter", "covariance"} {
		if strings.Contains(strings.ToLower(got), word) {
			t.Errorf("the word %q is on the screen", word)
		}
	}
	// Findings stand before losses, losses before data.
	a, b, c := strings.Index(got, "\nFindings"), strings.Index(got, "\nStretches"), strings.Index(got, "\nData")
	if a < 0 || b < a || c < b {
		t.Errorf("the order is %d %d %d", a, b, c)
	}
}

func TestNothingFound(t *testing.T) {
	r := sample.Harrowgill()
	r.Findings, r.Losses, r.Problems, r.Alerts = nil, r.Losses[2:3], nil, nil
	got := printed(t, "summary", r, Options{})
	for _, want := range []string{"Nothing was found that sound works", "No stretch between neighbouring taps loses more"} {
		if !strings.Contains(got, want) {
			t.Errorf("%q is not said:\n%s", want, got)
		}
	}
	if s := printed(t, "problems", r, Options{}); !strings.Contains(s, "Every row of every file was used.") {
		t.Error(s)
	}
	if s := printed(t, "alerts", r, Options{}); !strings.Contains(s, "agree with one another") {
		t.Error(s)
	}
	if s := printed(t, "heads", &report.Result{}, Options{}); !strings.Contains(s, "no readings") {
		t.Error(s)
	}
}

func TestFitThatDidNotSettle(t *testing.T) {
	r := sample.Harrowgill()
	r.Fit.Converged, r.Fit.Status = false, "iteration limit"
	got := printed(t, "summary", r, Options{})
	if !strings.Contains(got, "Do not use these numbers") || !strings.Contains(got, "iteration limit") || strings.Contains(got, "agree within") {
		t.Errorf("not said:\n%s", got)
	}
}

// Names come from tables: they must not steer the terminal.
func TestHostileNames(t *testing.T) {
	bad := "x\x1b]0;title\x07\x1b[2J\r\ny\u202ez\x00"
	r := sample.Harrowgill()
	r.Survey.Title = bad
	for i := range r.Findings {
		r.Findings[i].Statement, r.Findings[i].Item, r.Findings[i].Advice = bad, bad, bad
	}
	for i := range r.Heads {
		r.Heads[i].Tap, r.Heads[i].Remark, r.Heads[i].Time, r.Heads[i].Reading = bad, bad, bad, bad
	}
	for i := range r.Problems {
		r.Problems[i].File, r.Problems[i].Text, r.Problems[i].Reason = bad, bad, bad
	}
	for i := range r.Alerts {
		r.Alerts[i].Statement = bad
	}
	for i := range r.Inputs {
		r.Inputs[i].File, r.Inputs[i].Understood = bad, bad
	}
	for i := range r.Losses {
		r.Losses[i].FromTap, r.Losses[i].Items = bad, []string{bad}
	}
	for name := range printings {
		got := printed(t, name, r, Options{Written: bad})
		for _, c := range []string{"\x1b", "\x07", "\r", "\x00", "\u202e"} {
			if strings.Contains(got, c) {
				t.Errorf("%s lets %q through", name, c)
			}
		}
	}
}

// full fails once, as a disc does that has room again a moment later.
type full struct{ left int }

func (f *full) Write(p []byte) (int, error) {
	left := f.left
	f.left -= len(p)
	if left >= 0 && f.left < 0 {
		return 0, errors.New("disc full")
	}
	return len(p), nil
}

func TestWriteErrorIsReturned(t *testing.T) {
	for name, print := range printings {
		if err := print(&full{left: 40}, sample.Harrowgill(), Options{}); err == nil || err.Error() != "disc full" {
			t.Errorf("%s: %v", name, err)
		}
	}
}

func TestColumns(t *testing.T) {
	for s, want := range map[string]int{"": 0, "N6": 2, "Höhe": 4, "H\u0308": 1, "水圧": 4, "Ελλάδα": 6, "\x1b[1mab\x1b[0m": 2, "±–": 2} {
		if got := columns(s); got != want {
			t.Errorf("%q takes %d columns, want %d", s, got, want)
		}
	}
}

func TestWrap(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := rapid.StringMatching(`([a-zé水]{1,30} ?)*`).Draw(t, "s")
		n := rapid.IntRange(8, 60).Draw(t, "n")
		lines := wrap(s, n)
		for _, l := range lines {
			if columns(l) > n {
				t.Fatalf("%q takes more than %d columns", l, n)
			}
		}
		// Nothing is lost: letters in their order.
		if a, b := strings.Join(strings.Fields(s), ""), strings.ReplaceAll(strings.Join(lines, ""), " ", ""); a != b {
			t.Fatalf("%q became %q", s, lines)
		}
	})
}
