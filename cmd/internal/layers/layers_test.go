// Package layers holds the rules of the house as a test: who may import whom, and
// which packages must not know of files, clocks or screens.
package layers

import (
	"go/parser"
	"go/token"
	"io/fs"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

const module = "tapround/"

// above lists, for each top package, those of ours it must not import: the line
// runs survey <- calibrate <- report <- cmd.
var above = map[string][]string{
	"survey":    {"calibrate", "report", "cmd"},
	"calibrate": {"report", "cmd"},
	"report":    {"cmd"},
}

// forbidden imports by package prefix. A survey is read through fs.FS and the
// estimate is a function of numbers: neither opens files, prints, or reads a clock
// (times are data there, so "time" itself is allowed in survey only).
var forbidden = map[string][]string{
	"survey":    {"os", "os/", "net", "net/", "log", "log/", "github.com/spf13/", "gonum.org/v1/plot"},
	"calibrate": {"os", "os/", "net", "net/", "time", "log", "log/", "io/fs", "github.com/spf13/", "gonum.org/v1/plot", "tapround/survey/csvfile"},
	"report":    {"os", "os/", "net", "net/", "log", "log/", "github.com/spf13/"},
}

// only lists libraries that one place alone may use.
var only = map[string]string{
	"github.com/gocarina/gocsv": "survey/csvfile",
	"gonum.org/v1/plot":         "report/figure",
}

// verbsOf: a parent of nouns imports none of its verbs; calibrate drives its own.
var verbsOf = map[string][]string{"survey": {"survey/"}, "report": {"report/"}}

// clean is what the parents may import of their own children.
var clean = map[string]bool{"tapround/survey/unit": true}

func TestLayers(t *testing.T) {
	seen := 0
	walkImports(t, func(file, pkg string, imports []string) {
		seen++
		top := strings.SplitN(pkg, "/", 2)[0]
		for _, imp := range imports {
			for _, bad := range above[top] {
				if imp == module+bad || strings.HasPrefix(imp, module+bad+"/") {
					t.Errorf("%s imports %s: the line runs survey, calibrate, report, cmd", file, imp)
				}
			}
			for _, bad := range forbidden[top] {
				if imp == bad || (strings.HasSuffix(bad, "/") && strings.HasPrefix(imp, bad)) || strings.HasPrefix(imp, bad+"/") {
					if strings.HasPrefix(pkg, only[bad]) && only[bad] != "" {
						continue
					}
					t.Errorf("%s imports %s, which %s must not know", file, imp, top)
				}
			}
			for lib, home := range only {
				if (imp == lib || strings.HasPrefix(imp, lib+"/")) && !strings.HasPrefix(pkg, home) {
					t.Errorf("%s imports %s, which belongs to %s alone", file, imp, home)
				}
			}
			for _, verb := range verbsOf[pkg] {
				if strings.HasPrefix(imp, module+verb) && !clean[imp] {
					t.Errorf("%s: the nouns of %s import a verb, %s", file, pkg, imp)
				}
			}
		}
	})
	// A walk that finds too little checks nothing.
	if seen < 60 {
		t.Fatalf("only %d files were read; the walk is broken", seen)
	}
}

// walkImports reads the imports of every Go file but tests. It reads the files in this
// process, so that the test cache notices a change.
func walkImports(t *testing.T, do func(file, pkg string, imports []string)) {
	t.Helper()
	root, err := filepath.Abs("../../..")
	if err != nil {
		t.Fatal(err)
	}
	err = filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		name := d.Name()
		if d.IsDir() {
			if name == "testdata" || (strings.HasPrefix(name, ".") && path != root) {
				return fs.SkipDir
			}
			return nil
		}
		if !strings.HasSuffix(name, ".go") || strings.HasSuffix(name, "_test.go") {
			return nil
		}
		src, err := os.ReadFile(path)
		if err != nil {
			return err
		}
		f, err := parser.ParseFile(token.NewFileSet(), path, src, parser.ImportsOnly)
		if err != nil {
			return err
		}
		var imports []string
		for _, i := range f.Imports {
			imports = append(imports, strings.Trim(i.Path.Value, `"`))
		}
		rel, err := filepath.Rel(root, path)
		if err != nil {
			return err
		}
		do(filepath.ToSlash(rel), filepath.ToSlash(filepath.Dir(rel)), imports)
		return nil
	})
	if err != nil {
		t.Fatal(err)
	}
}

// TestTopLevel: the top of the repository holds what was agreed and nothing else.
func TestTopLevel(t *testing.T) {
	agreed := map[string]bool{"cmd": true, "survey": true, "calibrate": true, "report": true, "testdata": true,
		"go.mod": true, "go.sum": true, "README.md": true, "DEVELOPERS.md": true, "LICENSE": true}
	entries, err := os.ReadDir("../../..")
	if err != nil {
		t.Fatal(err)
	}
	found := 0
	for _, e := range entries {
		if strings.HasPrefix(e.Name(), ".") {
			continue
		}
		found++
		// A demo folder written by the README's command is not part of the tree.
		if !agreed[e.Name()] && e.Name() != "demo" {
			t.Errorf("%s stands at the top level", e.Name())
		}
	}
	if found < len(agreed) {
		t.Errorf("found %d of %d agreed entries", found, len(agreed))
	}
}
