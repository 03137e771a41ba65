package csvfile

import (
	"fmt"
	"maps"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
	"testing/fstest"

	"tapround/survey"
)

// good is testdata/mill-lane: a small survey that has every table and no fault.
func good() map[string]string { return folderText("testdata/mill-lane") }

// folderText reads the tables of a folder of testdata.
func folderText(dir string) map[string]string {
	out := map[string]string{}
	for _, pattern := range []string{"*.csv", "readings/*.csv"} {
		paths, err := filepath.Glob(filepath.Join(dir, pattern))
		if err != nil {
			panic(err)
		}
		for _, p := range paths {
			b, err := os.ReadFile(p)
			if err != nil {
				panic(err)
			}
			rel, err := filepath.Rel(dir, p)
			if err != nil {
				panic(err)
			}
			out[filepath.ToSlash(rel)] = string(b)
		}
	}
	if len(out) < 9 {
		panic(fmt.Sprintf("only %d tables in %s", len(out), dir))
	}
	return out
}

func folderOf(files map[string]string) fstest.MapFS {
	m := fstest.MapFS{}
	for name, text := range files {
		m[name] = &fstest.MapFile{Data: []byte(text)}
	}
	return m
}

// reporter is what a test of any kind can say.
type reporter interface {
	Helper()
	Fatalf(string, ...any)
}

// read reads a folder and checks what must hold of any: rows are conserved, the
// problems come in their order, and a reading is used or says why not.
func read(t reporter, files map[string]string) (*survey.Survey, survey.Problems) {
	t.Helper()
	s, ps := ReadFolder(folderOf(files))
	conserved(t, s, ps)
	for i := 1; i < len(ps); i++ {
		if ps[i].Severity > ps[i-1].Severity {
			t.Fatalf("%q comes after %q", ps[i], ps[i-1])
		}
	}
	return s, ps
}

// conserved: for every file, rows are rows used and rows that a SetAside or Fatal
// problem names; and a reading is in use exactly where its row is.
func conserved(t reporter, s *survey.Survey, ps survey.Problems) {
	t.Helper()
	bad := map[survey.Source]bool{}
	for _, p := range ps {
		if p.Severity != survey.Notice {
			bad[p.Source] = true
		}
	}
	used := map[string]int{}
	for _, r := range s.Readings {
		if (r.SetAside != "") != bad[r.Source] {
			t.Fatalf("%s: set aside %q, named by a problem %v", r.Source, r.SetAside, bad[r.Source])
		}
		if r.SetAside == "" {
			used[r.Source.File]++
		}
	}
	for _, in := range s.Inputs {
		heading := 0
		if _, after, ok := strings.Cut(in.Understood, "heading line "); ok {
			heading, _ = strconv.Atoi(after)
		}
		named := 0
		for place := range bad {
			if place.File == in.File && place.Line > heading {
				named++
			}
		}
		if in.Rows != in.Used+named {
			t.Fatalf("%s: %d rows, %d used, %d named by problems", in.File, in.Rows, in.Used, named)
		}
		if strings.Contains(in.File, "readings") && used[in.File] != in.Used {
			t.Fatalf("%s: %d rows used by the count, %d readings in use", in.File, in.Used, used[in.File])
		}
	}
}

// with gives the good survey with some files replaced; an empty text takes one away.
func with(files map[string]string) map[string]string {
	out := good()
	maps.Copy(out, files)
	for name, text := range out {
		if text == "" {
			delete(out, name)
		}
	}
	return out
}

// edit gives the good survey with one text in one file replaced.
func edit(t testing.TB, file, old, now string) map[string]string {
	t.Helper()
	files := good()
	if strings.Count(files[file], old) != 1 {
		t.Fatalf("%s has %q %d times", file, old, strings.Count(files[file], old))
	}
	files[file] = strings.Replace(files[file], old, now, 1)
	return files
}

func lines(ps survey.Problems) string {
	var b strings.Builder
	for _, p := range ps {
		fmt.Fprintf(&b, "%s: %s\n", p.Severity, p)
	}
	return b.String()
}

func TestGood(t *testing.T) {
	s, ps := read(t, good())
	ps = append(ps, s.Validate()...)
	if len(ps) != 0 {
		t.Errorf("problems of a survey without faults:\n%s", lines(ps))
	}
	if n := len(s.Inputs); n != 16 {
		t.Errorf("%d files on record, want 16", n)
	}
}
