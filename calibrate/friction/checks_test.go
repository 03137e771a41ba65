package friction_test

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"testing"
)

// row is one line of a table of testdata/checks, by heading.
type row map[string]string

func (r row) num(t *testing.T, name string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(r[name], 64)
	if err != nil {
		t.Fatalf("column %q: %q is not a number (row %v)", name, r[name], r)
	}
	return v
}

// table reads a table of at least least rows; a path is from testdata.
func table(t *testing.T, path string, least int) []row {
	t.Helper()
	f, err := os.Open("../../testdata/" + path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	lines, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var rows []row
	for _, l := range lines[1:] {
		r := row{}
		for i, name := range lines[0] {
			r[name] = l[i]
		}
		rows = append(rows, r)
	}
	if len(rows) < least {
		t.Fatalf("%s has %d rows, at least %d are expected", path, len(rows), least)
	}
	return rows
}

// within fails unless got is within a fraction rel of want.
func within(t *testing.T, what string, got, want, rel float64) {
	t.Helper()
	if !(math.Abs(got-want) <= rel*math.Abs(want)) {
		t.Errorf("%s: got %.12g, want %.12g within %g of it (off by %.3g)", what, got, want, rel, got/want-1)
	}
}

// worst keeps the largest deviation, with the mean and standard deviation of all.
type worst struct {
	n              int
	sum, sum2, top float64
	at             string
}

func (w *worst) add(dev float64, at string) {
	w.n++
	w.sum += dev
	w.sum2 += dev * dev
	if !(math.Abs(dev) <= math.Abs(w.top)) { // NaN counts
		w.top, w.at = dev, at
	}
}

func (w *worst) mean() float64 { return w.sum / float64(w.n) }

// hold fails unless at least least deviations were seen, each within single and their
// mean within mean.
func (w *worst) hold(t *testing.T, what string, least int, single, mean float64) {
	t.Helper()
	if w.n < least {
		t.Fatalf("%s: only %d points were compared, at least %d are expected", what, w.n, least)
	}
	sd := math.Sqrt(math.Max(0, w.sum2/float64(w.n)-w.mean()*w.mean()))
	t.Logf("%s: %d points, mean %+.2f %%, sd %.2f %%, worst %+.2f %% (%s)", what, w.n, 100*w.mean(), 100*sd, 100*w.top, w.at)
	if !(math.Abs(w.top) <= single) {
		t.Errorf("%s: worst deviation %+.2f %% at %s is over %g %%", what, 100*w.top, w.at, 100*single)
	}
	if !(math.Abs(w.mean()) <= mean) {
		t.Errorf("%s: mean deviation %+.2f %% is over %g %%", what, 100*w.mean(), 100*mean)
	}
}

// slope is df/dx by the five-point difference: its own error is h^4 f””'/30 and a
// rounding of some 1e-16 f/h.
func slope(f func(x float64) float64, x, h float64) float64 {
	return (f(x-2*h) - 8*f(x-h) + 8*f(x+h) - f(x+2*h)) / (12 * h)
}

// bisect finds where a rising f crosses zero.
func bisect(t *testing.T, f func(x float64) float64, lo, hi float64) float64 {
	t.Helper()
	if !(f(lo) < 0 && f(hi) > 0) {
		t.Fatalf("no crossing between %g and %g: %g, %g", lo, hi, f(lo), f(hi))
	}
	for range 200 {
		mid := (lo + hi) / 2
		if f(mid) < 0 {
			lo = mid
		} else {
			hi = mid
		}
	}
	return (lo + hi) / 2
}
