package catalogue

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"
)

// checks reads one table of published values as maps from heading to cell.
func checks(t *testing.T, file string) []map[string]string {
	t.Helper()
	f, err := os.Open("../../testdata/checks/catalogue/" + file)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatalf("%s: %v", file, err)
	}
	var out []map[string]string
	for _, row := range rows[1:] {
		m := map[string]string{}
		for i, h := range rows[0] {
			m[h] = strings.TrimSpace(row[i])
		}
		out = append(out, m)
	}
	return out
}

func number(t *testing.T, s string) float64 {
	t.Helper()
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Fatal(err)
	}
	return v
}

// rangeOf gives the least and the greatest of the numbers in cells; empty ones
// are passed over.
func rangeOf(t *testing.T, cells ...string) (low, high float64) {
	t.Helper()
	low, high = math.Inf(1), math.Inf(-1)
	for _, c := range cells {
		for part := range strings.SplitSeq(c, "-") {
			if part != "" {
				low, high = math.Min(low, number(t, part)), math.Max(high, number(t, part))
			}
		}
	}
	return low, high
}

// union follows the least and the greatest over many rows, by name.
type union map[string][2]float64

func (u union) add(name string, low, high float64) {
	if r, ok := u[name]; ok {
		low, high = math.Min(low, r[0]), math.Max(high, r[1])
	}
	u[name] = [2]float64{low, high}
}

func TestSpread(t *testing.T) {
	// A 95 % range of a factor of e^(2*1.96) has one standard deviation of e.
	if got := (Entry{Low: 1, High: math.Exp(2 * 1.96)}).withSpread().Spread; math.Abs(got-math.E) > 1e-12 {
		t.Errorf("spread %v, want e", got)
	}
	// The Hydraulic Institute's ±10 % (0.9 to 1.1) and ±50 % (0.5 to 1.5), whose
	// SD of ln K is 0.0512 and 0.280.
	for _, c := range []struct{ low, high, sd float64 }{{0.9, 1.1, 0.0512}, {0.5, 1.5, 0.280}} {
		if got := math.Log((Entry{Low: c.low, High: c.high}).withSpread().Spread); math.Abs(got-c.sd) > 5e-4 {
			t.Errorf("ln spread of %v to %v is %v, want %v", c.low, c.high, got, c.sd)
		}
	}
	if got := (Entry{Low: 1, High: 1}).withSpread().Spread; got != 1.05 {
		t.Errorf("spread of a single figure is %v, want 1.05", got)
	}
}
