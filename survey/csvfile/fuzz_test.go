package csvfile

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"tapround/survey"
)

// Whatever stands in the tables: no panic, rows conserved (read looks), every reading in
// use a finite number, and nothing but finite numbers where no error was told.
func FuzzReadFolder(f *testing.F) {
	files := good()
	f.Add(files["readings.csv"], files["pipes.csv"])
	for _, g := range append(brokenTables, brokenFolders...) {
		for _, c := range g.cases {
			for _, x := range c.changes {
				switch {
				case x.file == "readings.csv" && x.old != "":
					f.Add(strings.Replace(files[x.file], x.old, x.now, 1), files["pipes.csv"])
				case x.file == "pipes.csv" && x.old != "":
					f.Add(files["readings.csv"], strings.Replace(files[x.file], x.old, x.now, 1))
				case x.now != "":
					f.Add(x.now, files["pipes.csv"])
				}
			}
		}
	}
	f.Add(strings.ReplaceAll(strings.ReplaceAll(files["readings.csv"], ",", ";"), ".", ","), "pipe\tfrom\tto\tlength [m]\tbore [mm]\r\n\"\t\"\t\"\t\"\t\"\r\n")
	f.Fuzz(func(t *testing.T, readings, pipes string) {
		files["readings.csv"], files["pipes.csv"] = readings, pipes
		s, ps := read(t, files)
		for _, r := range s.Readings {
			if !ps.Fatal() && r.SetAside == "" && (math.IsNaN(r.Value) || math.IsInf(r.Value, 0)) {
				t.Fatalf("%s is in use with %v", r.Source, r.Value)
			}
		}
		if !ps.Fatal() {
			aside := map[string]bool{}
			for _, r := range s.Readings {
				aside[r.Source.String()] = r.SetAside != ""
			}
			for place, v := range facts(s) {
				at, _, _ := strings.Cut(place, " ")
				if (math.IsNaN(v) || math.IsInf(v, 0)) && !aside[at] {
					t.Fatalf("%s is %v and no error was told", place, v)
				}
			}
		}
		for _, p := range append(ps, s.Validate()...) {
			if p.Reason == "" || p.Severity == survey.Fatal && p.Remedy == "" {
				t.Fatalf("a problem without words: %+v", p)
			}
		}
	})
}

// manyReadings is a file of n readings as a logger campaign might leave it.
func manyReadings(n int) string {
	var b strings.Builder
	b.WriteString("round,time,tap,other_tap,kind,gauge,reading,unit,gauge_height [m],depth [mm],remark\n")
	for i := range n {
		fmt.Fprintf(&b, "%d,2026-03-15 %02d:%02d:%02d,T1,,static,G1,%d.%02d,bar,0.4,,steady\n", 1+i%2, i/3600%24, i/60%60, i%60, i%9, i%100)
	}
	return b.String()
}

func BenchmarkReadFolder100000(b *testing.B) {
	files := with(map[string]string{"readings.csv": manyReadings(100_000)})
	fsys := folderOf(files)
	b.SetBytes(int64(len(files["readings.csv"])))
	for b.Loop() {
		if s, _ := ReadFolder(fsys); len(s.Readings) != 100_002 {
			b.Fatal(len(s.Readings))
		}
	}
}
