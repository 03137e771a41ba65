package table

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"math"
	"strconv"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"tapround/report"
	"tapround/report/internal/sample"
	"tapround/survey"
)

// The column lists of the file contract, "Results" and "Points settled once".
var contract = map[string]string{
	"heads.csv": "round,tap,other_tap,depth [mm],time,kind,gauge,reading,unit,pressure [kPa],elevation [m],pressure_head [m]," +
		"velocity_head [m],piezometric_head [m],total_head [m],u [m],used,remark",
	"flows.csv":       "round,pipe,flow [L/s],velocity [m/s],low95 [L/s],high95 [L/s],measured [L/s]",
	"grade_lines.csv": "round,pipe,at [m],piezometric_head [m],total_head [m],expected_total_head [m]",
	"parameters.csv":  "item,kind,quantity,unit,expected,fitted,low95,high95,ratio,told_by_survey,round",
	"residuals.csv":   "round,tap,kind,gauge,measured,fitted,unit,residual,u,normalised,redundancy",
	"losses.csv":      "round,from_tap,to_tap,measured [m],low95 [m],high95 [m],expected [m],excess [m],fitted [m],items",
	"findings.csv": "finding,item,kind,grade,probability,estimate,low95,high95,unit,excess_head [m],rounds," +
		"cannot_be_told_from,advice",
}

func files(t *testing.T, r *report.Result) map[string][]byte {
	t.Helper()
	fs, err := Files(r)
	if err != nil {
		t.Fatal(err)
	}
	return fs
}

// rowsOf reads a table back as a script would, each row by heading.
func rowsOf(t *testing.T, data []byte) []map[string]string {
	t.Helper()
	records, err := csv.NewReader(bytes.NewReader(data)).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []map[string]string
	for _, rec := range records[1:] {
		m := map[string]string{}
		for i, h := range records[0] {
			m[h] = rec[i]
		}
		out = append(out, m)
	}
	return out
}

func TestHeadings(t *testing.T) {
	for _, r := range []*report.Result{sample.Harrowgill(), {}} {
		fs := files(t, r)
		if len(fs) != len(contract)+1 {
			t.Errorf("%d files, want %d and result.json", len(fs), len(contract))
		}
		for name, want := range contract {
			first, rest, _ := strings.Cut(string(fs[name]), "\n")
			if first != want {
				t.Errorf("%s begins\n%s, want\n%s", name, first, want)
			}
			if strings.Contains(rest, "\r") || !strings.HasSuffix(string(fs[name]), "\n") {
				t.Errorf("%s does not end its lines with LF alone", name)
			}
		}
	}
}

// near: ten figures are printed.
func near(t *testing.T, where, cell string, want survey.Maybe) {
	t.Helper()
	if !want.OK {
		if cell != "" {
			t.Errorf("%s: %q for what is not known", where, cell)
		}
		return
	}
	v, err := strconv.ParseFloat(cell, 64)
	if err != nil || math.Abs(v-want.V) > 1e-9*math.Abs(want.V) {
		t.Errorf("%s: %q reads back as %v, want %v", where, cell, v, want.V)
	}
}

func times(m survey.Maybe, k float64) survey.Maybe {
	m.V *= k
	return m
}

// Every number of the result stands in its table, in the unit of its heading.
func TestReadBack(t *testing.T) {
	r := sample.Harrowgill()
	fs := files(t, r)
	some := survey.Some

	rows := rowsOf(t, fs["heads.csv"])
	if len(rows) != len(r.Heads) {
		t.Fatalf("heads.csv has %d rows, want %d", len(rows), len(r.Heads))
	}
	for i, h := range r.Heads {
		row := rows[i]
		near(t, "pressure", row["pressure [kPa]"], times(h.Pressure, 1e-3))
		near(t, "depth", row["depth [mm]"], times(h.Depth, 1e3))
		near(t, "elevation", row["elevation [m]"], h.Elevation)
		near(t, "pressure head", row["pressure_head [m]"], h.PressureHead)
		near(t, "velocity head", row["velocity_head [m]"], h.VelocityHead)
		near(t, "piezometric", row["piezometric_head [m]"], h.Piezometric)
		near(t, "total", row["total_head [m]"], h.Total)
		near(t, "u", row["u [m]"], h.U)
		if row["round"] != h.Round || row["tap"] != h.Tap || row["other_tap"] != h.OtherTap || row["kind"] != h.Kind || row["gauge"] != h.Gauge ||
			row["unit"] != h.Unit || row["remark"] != h.Remark || row["time"] != h.Time || (row["used"] == "yes") != h.Used {
			t.Errorf("row %d is %v for %+v", i, row, h)
		}
	}
	rows = rowsOf(t, fs["flows.csv"])
	for i, f := range r.Flows {
		near(t, "flow", rows[i]["flow [L/s]"], times(f.Flow, 1e3))
		near(t, "velocity", rows[i]["velocity [m/s]"], f.Velocity)
		near(t, "low", rows[i]["low95 [L/s]"], times(f.Low, 1e3))
		near(t, "high", rows[i]["high95 [L/s]"], times(f.High, 1e3))
		near(t, "measured", rows[i]["measured [L/s]"], times(f.Measured, 1e3))
	}
	rows = rowsOf(t, fs["grade_lines.csv"])
	for i, g := range r.GradeLines {
		near(t, "at", rows[i]["at [m]"], some(g.At))
		near(t, "piezometric", rows[i]["piezometric_head [m]"], g.Piezometric)
		near(t, "total", rows[i]["total_head [m]"], g.Total)
		near(t, "expected", rows[i]["expected_total_head [m]"], g.ExpectedTotal)
	}
	rows = rowsOf(t, fs["parameters.csv"])
	for i, p := range r.Parameters {
		near(t, "expected", rows[i]["expected"], p.Expected)
		near(t, "fitted", rows[i]["fitted"], p.Fitted)
		near(t, "low", rows[i]["low95"], p.Low)
		near(t, "high", rows[i]["high95"], p.High)
		near(t, "ratio", rows[i]["ratio"], p.Ratio)
		near(t, "told", rows[i]["told_by_survey"], p.ToldBySurvey)
		if rows[i]["round"] != p.Round || rows[i]["item"] != p.Item || rows[i]["unit"] != p.Unit {
			t.Errorf("row %d is %v for %+v", i, rows[i], p)
		}
	}
	rows = rowsOf(t, fs["residuals.csv"])
	for i, d := range r.Residuals {
		near(t, "measured", rows[i]["measured"], some(d.Measured))
		near(t, "fitted", rows[i]["fitted"], some(d.Fitted))
		near(t, "difference", rows[i]["residual"], some(d.Residual))
		near(t, "u", rows[i]["u"], some(d.U))
		near(t, "normalised", rows[i]["normalised"], d.Normalised)
		near(t, "redundancy", rows[i]["redundancy"], d.Redundancy)
	}
	rows = rowsOf(t, fs["losses.csv"])
	for i, l := range r.Losses {
		near(t, "measured", rows[i]["measured [m]"], l.Measured)
		near(t, "low", rows[i]["low95 [m]"], l.Low)
		near(t, "high", rows[i]["high95 [m]"], l.High)
		near(t, "expected", rows[i]["expected [m]"], l.Expected)
		near(t, "excess", rows[i]["excess [m]"], l.Excess)
		near(t, "fitted", rows[i]["fitted [m]"], l.Fitted)
		if rows[i]["items"] != strings.Join(l.Items, " ") {
			t.Errorf("items %q", rows[i]["items"])
		}
	}
	rows = rowsOf(t, fs["findings.csv"])
	for i, f := range r.Findings {
		near(t, "probability", rows[i]["probability"], f.Probability)
		near(t, "estimate", rows[i]["estimate"], f.Estimate)
		near(t, "low", rows[i]["low95"], f.Low)
		near(t, "high", rows[i]["high95"], f.High)
		if rows[i]["cannot_be_told_from"] != strings.Join(f.CannotBeToldFrom, " ") || rows[i]["rounds"] != strings.Join(f.Rounds, " ") ||
			rows[i]["kind"] != string(f.Kind) || rows[i]["grade"] != string(f.Grade) || rows[i]["advice"] != f.Advice {
			t.Errorf("row %d is %v", i, rows[i])
		}
	}
	near(t, "excess of F1", rows[0]["excess_head [m]"], some(6.2))
	if rows[2]["excess_head [m]"] != "" {
		t.Errorf("a gauge costs %q m", rows[2]["excess_head [m]"])
	}
}

func TestSameBytes(t *testing.T) {
	a, b := files(t, sample.Harrowgill()), files(t, sample.Harrowgill())
	for name := range a {
		if !bytes.Equal(a[name], b[name]) {
			t.Errorf("%s differs between two runs", name)
		}
	}
}

func TestNumber(t *testing.T) {
	for v, want := range map[float64]string{
		0: "0", math.Copysign(0, -1): "0", 42.300000000000004: "42.3", 1.0 / 3: "0.3333333333", -1e-12: "-0.000000000001", 123456789012: "123456789000",
		math.NaN(): "", math.Inf(1): "", 0.1 + 0.2: "0.3",
	} {
		if got := number(v); got != want {
			t.Errorf("%v is printed %q, want %q", v, got, want)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		v := rapid.Float64Range(-1e12, 1e12).Draw(t, "v")
		got, err := strconv.ParseFloat(number(v), 64)
		// Half a unit of the tenth figure.
		if err != nil || math.Abs(got-v) > 5.1e-10*math.Abs(v) || strings.ContainsAny(number(v), "eE") {
			t.Fatalf("%v reads back as %v from %q", v, got, number(v))
		}
	})
}

func TestTextIsHarmless(t *testing.T) {
	for in, want := range map[string]string{
		"steady":                       "steady",
		`=HYPERLINK("http://x","y")`:   `'=HYPERLINK("http://x","y")`,
		"+41 79 123":                   "'+41 79 123",
		"-2.5":                         "-2.5",
		"+3,4":                         "+3,4",
		"-":                            "-",
		"- cap leaking":                "'- cap leaking",
		"@SUM(A1)":                     "'@SUM(A1)",
		"\t=1+1":                       "'=1+1",
		"\r\n=1+1":                     "'=1+1",
		"  =1+1":                       "'  =1+1",
		"＝1+1":                         "'＝1+1",
		"two\nlines\tand a tab":        "two lines and a tab",
		"two\u2028lines":               "two lines",
		"bell\x07 and \x1b[31m colour": "bell  and  [31m colour",
		"bad \xff byte":                "bad \uFFFD byte",
		"Höhe, \"quoted\"":             "Höhe, \"quoted\"",
	} {
		if got := text(in); got != want {
			t.Errorf("%q becomes %q, want %q", in, got, want)
		}
	}
}

// Whatever a remark holds, the table has one line a row and reads back to what text
// made of it.
func TestAnyText(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := rapid.SampledFrom([]string{"", "=", "+", "-", "@", "\t=", " -", "\u2028@"}).Draw(t, "beginning") + rapid.String().Draw(t, "remark")
		r := &report.Result{Heads: []report.HeadRow{{Tap: s, Remark: s, Reading: s}}}
		fs, err := Files(r)
		if err != nil {
			t.Fatal(err)
		}
		if n := bytes.Count(fs["heads.csv"], []byte("\n")); n != 2 {
			t.Fatalf("%d lines for %q", n, s)
		}
		records, err := csv.NewReader(bytes.NewReader(fs["heads.csv"])).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		got := records[1][17]
		if got != text(s) {
			t.Fatalf("%q reads back as %q", s, got)
		}
		for _, cell := range []string{got, records[1][1]} {
			if c := strings.TrimLeft(cell, " \u00a0"); c != "" && c != "-" && strings.ContainsRune("=+-@", rune(c[0])) {
				if _, err := strconv.ParseFloat(strings.ReplaceAll(c, ",", "."), 64); err != nil {
					t.Fatalf("%q can be taken for a formula", cell)
				}
			}
		}
	})
}

func TestReadingKeepsItsNumber(t *testing.T) {
	for in, want := range map[string]string{
		"5,71": "5.71", "5.71": "5.71", "5,4-5,6": "5.4-5.6", "-0,25": "-0.25", "1,234.5": "1,234.5", "n/a": "n/a", "5,71 bar": "5.71 bar", "1.234,5": "1.234,5", "": "",
	} {
		if got := written(in); got != want {
			t.Errorf("%q becomes %q, want %q", in, got, want)
		}
	}
}

func TestJSON(t *testing.T) {
	r := sample.Harrowgill()
	var doc map[string]any
	if err := json.Unmarshal(files(t, r)["result.json"], &doc); err != nil {
		t.Fatal(err)
	}
	if n := len(doc["findings"].([]any)); n != len(r.Findings) {
		t.Errorf("%d findings in the document, want %d", n, len(r.Findings))
	}
	f := doc["findings"].([]any)[0].(map[string]any)
	if f["estimate"].(float64) != 9.12 || f["grade"] != "proven" {
		t.Errorf("F1 is %v", f)
	}
	// Not stated is null, never 0.
	if v := doc["findings"].([]any)[6].(map[string]any)["estimate"]; v != nil {
		t.Errorf("an estimate that is not known is %v", v)
	}
	if _, ok := doc["tool"].(map[string]any)["version"]; !ok || len(doc["inputs"].([]any)) != 5 || len(doc["settings"].([]any)) == 0 {
		t.Error("version, inputs or settings are missing")
	}
	r.Residuals[0].Measured = math.NaN()
	if _, err := Files(r); err == nil || !strings.Contains(err.Error(), "result.json") {
		t.Errorf("NaN in the document gives %v", err)
	}
}
