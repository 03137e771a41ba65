package csvfile

import (
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
)

// broken is the good survey with something wrong, and all that must be told of it:
// severity, file, line, heading, the cell as written, what is wrong, what to do.
type broken struct {
	name    string
	changes []change
	want    []string
}

// change replaces one text of a file; where old is empty, the whole file, and with an
// empty now takes the file away.
type change struct{ file, old, now string }

type brokenGroup struct {
	name  string
	cases []broken
}

func TestBroken(t *testing.T) {
	for _, g := range append(brokenTables, brokenFolders...) {
		for _, c := range g.cases {
			t.Run(g.name+"/"+c.name, func(t *testing.T) {
				files := good()
				for _, x := range c.changes {
					switch {
					case x.old == "" && x.now == "":
						delete(files, x.file)
					case x.old == "":
						files[x.file] = x.now
					case strings.Count(files[x.file], x.old) != 1:
						t.Fatalf("%s has %q %d times", x.file, x.old, strings.Count(files[x.file], x.old))
					default:
						files[x.file] = strings.Replace(files[x.file], x.old, x.now, 1)
					}
				}
				_, ps := read(t, files)
				var got []string
				for _, p := range ps {
					got = append(got, p.Severity.String()+": "+p.String())
				}
				if d := cmp.Diff(c.want, got); d != "" {
					t.Errorf("problems (-want +got):\n%s", d)
				}
			})
		}
	}
}
