package survey_test

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
	"testing/fstest"

	"github.com/google/go-cmp/cmp"

	"tapround/survey"
	"tapround/survey/csvfile"
)

// validateCase is the survey of csvfile/testdata/mill-lane with something changed, and
// all that Validate must say of it. No want: the change is sound.
type validateCase struct {
	name    string
	changes []change
	want    []string
}

// change replaces a text of a file wherever it stands; where old is empty, the whole
// file, and with an empty now takes the file away.
type change struct{ file, old, now string }

type validateGroup struct {
	name  string
	cases []validateCase
}

// millLane is a sound survey with every table.
func millLane(t *testing.T) fstest.MapFS {
	t.Helper()
	const dir = "csvfile/testdata/mill-lane"
	m := fstest.MapFS{}
	for _, pattern := range []string{"*.csv", "readings/*.csv"} {
		paths, err := filepath.Glob(filepath.Join(dir, pattern))
		if err != nil {
			t.Fatal(err)
		}
		for _, p := range paths {
			b, err := os.ReadFile(p)
			if err != nil {
				t.Fatal(err)
			}
			rel, err := filepath.Rel(dir, p)
			if err != nil {
				t.Fatal(err)
			}
			m[filepath.ToSlash(rel)] = &fstest.MapFile{Data: b}
		}
	}
	if len(m) != 16 {
		t.Fatalf("%d tables", len(m))
	}
	return m
}

func (c change) make(t *testing.T, m fstest.MapFS) {
	t.Helper()
	switch {
	case c.old == "" && c.now == "":
		delete(m, c.file)
	case c.old == "":
		m[c.file] = &fstest.MapFile{Data: []byte(c.now)}
	default:
		text := string(m[c.file].Data)
		if !strings.Contains(text, c.old) {
			t.Fatalf("%s has no %q", c.file, c.old)
		}
		m[c.file] = &fstest.MapFile{Data: []byte(strings.ReplaceAll(text, c.old, c.now))}
	}
}

func TestValidate(t *testing.T) {
	for _, g := range append(worksCases, roundCases...) {
		for _, c := range g.cases {
			t.Run(g.name+"/"+c.name, func(t *testing.T) {
				m := millLane(t)
				for _, x := range c.changes {
					x.make(t, m)
				}
				s, read := csvfile.ReadFolder(m)
				for _, p := range read {
					if p.Severity != survey.Notice && p.Column != "remark" {
						t.Fatalf("the reader says: %s", p)
					}
				}
				var got []string
				for _, p := range s.Validate() {
					got = append(got, p.Severity.String()+": "+p.String())
				}
				if d := cmp.Diff(c.want, got); d != "" {
					t.Errorf("problems (-want +got):\n%s", d)
				}
			})
		}
	}
}

// A sound survey has nothing to be told of, and looking at it changes nothing.
func TestValidateSound(t *testing.T) {
	s, problems := csvfile.ReadFolder(millLane(t))
	if problems = append(problems, s.Validate()...); len(problems) != 0 {
		t.Errorf("%v", problems)
	}
	again, _ := csvfile.ReadFolder(millLane(t))
	if d := cmp.Diff(again.Readings, s.Readings); d != "" {
		t.Errorf("Validate changed the readings: %s", d)
	}
}

// What could not be read was told once: Validate adds nothing to it.
func TestValidateAfterUnreadCells(t *testing.T) {
	for _, c := range []change{
		{"pipes.csv", "length [m]", "length"},
		{"pipes.csv", "P2,B,C,800,150", "P2,B,C,8oo,l50"},
		{"points.csv", "A,junction,120", "A,junktion,12o"},
		{"fittings.csv", "at [m]", "at"},
		{"taps.csv", "elevation [m]", "elevation"},
		{"gauges.csv", "G1,pressure,0,10,bar", "G1,pressure,0,1o,barr"},
		{"gauges.csv", "difference,0,50", "diffrence,0,50"},
		{"conditions.csv", "level,152.3", "level,high"},
		{"rounds.csv", "2026-03-15 04:10", "04:10"},
		{"readings.csv", "T1,,static,G1,1.62,bar", "T9,,static,G9,HI,bar"},
	} {
		t.Run(c.file+" "+c.now, func(t *testing.T) {
			m := millLane(t)
			c.make(t, m)
			s, read := csvfile.ReadFolder(m)
			if len(read) == 0 {
				t.Fatal("the reader says nothing")
			}
			for _, p := range s.Validate() {
				t.Errorf("%s: %s", p.Severity, p)
			}
		})
	}
}

func TestNearest(t *testing.T) {
	known := []string{"T1", "T12", "SV-031", "Mill Lane", "gauge_height", "Q1"}
	for written, want := range map[string]string{
		"t1": "T1", "T 1": "T1", "T2": "T1", "SV31": "SV-031", "SV-013": "SV-031", "mill lane": "Mill Lane", "Mil Lane": "Mill Lane",
		"gage height": "gauge_height", "Market Street": "", "": "", "Z": "", "XY": "", "SV-0311": "SV-031",
	} {
		if got := survey.Nearest(written, known); got != want {
			t.Errorf("nearest to %q is %q, want %q", written, got, want)
		}
	}
}
