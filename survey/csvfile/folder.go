package csvfile

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"path"
	"slices"
	"sort"
	"strings"
	"time"

	"tapround/survey"
)

// largest is the size up to which a file is read as a table. A hundred thousand
// readings take a tenth of it.
const largest = 64 << 20

// folder is a survey folder while it is read.
type folder struct {
	fsys     fs.FS
	survey   *survey.Survey
	zone     *time.Location
	problems survey.Problems
	seen     map[string]seenReading
	absolute map[string]bool // gauges that read above vacuum
}

// ReadFolder reads every table of a survey folder. It never stops at the first fault:
// all problems of all files come back in one run, Fatal first, then what was set
// aside, then notices, each in the order of files and lines. What the tables say of
// each other is checked by Survey.Validate.
func ReadFolder(fsys fs.FS) (*survey.Survey, survey.Problems) {
	f := &folder{fsys: fsys, survey: &survey.Survey{Info: defaults()}, zone: time.UTC,
		seen: map[string]seenReading{}, absolute: map[string]bool{}}
	found, others := f.list(".")
	specs := tables()
	for _, sp := range specs {
		files := f.filesOf(sp, found)
		if len(files) == 0 {
			f.absent(sp, others)
		}
		rows := 0
		for _, name := range files {
			rows += f.file(sp, name)
		}
		if rows == 0 && len(files) > 0 && sp.required && !sp.mayBeEmpty && !f.refused(files) {
			f.tell(files[0], survey.Fatal, "the table has no rows: "+sp.missing, "write its rows")
		}
	}
	f.strangers(specs, found)
	sort.SliceStable(f.problems, func(i, j int) bool { return f.problems[i].Severity > f.problems[j].Severity })
	return f.survey, f.problems
}

// refused reports whether an error was told of one of the files.
func (f *folder) refused(files []string) bool {
	return slices.ContainsFunc(f.problems, func(p survey.Problem) bool {
		return p.Severity == survey.Fatal && slices.Contains(files, p.File)
	})
}

func (f *folder) tell(file string, sev survey.Severity, reason, remedy string) {
	f.problems = append(f.problems, survey.Problem{Source: survey.Source{File: file}, Severity: sev, Reason: reason, Remedy: remedy})
}

// list gives the CSV files of a folder by their plain names, as written, and the names
// of all other files there. Hidden files are nobody's tables.
func (f *folder) list(dir string) (csv map[string][]string, others []string) {
	csv = map[string][]string{}
	entries, err := fs.ReadDir(f.fsys, dir)
	if err != nil && !(dir != "." && errors.Is(err, fs.ErrNotExist)) {
		f.tell(dir, survey.Fatal, "the folder cannot be read: "+err.Error(), "look at its name and permissions")
	}
	for _, e := range entries {
		name := e.Name()
		switch {
		case e.IsDir() || strings.HasPrefix(name, ".") || strings.HasPrefix(name, "~"):
		case strings.EqualFold(path.Ext(name), ".csv"):
			plain := plainFile(name)
			csv[plain] = append(csv[plain], name)
		default:
			others = append(others, name)
		}
	}
	return csv, others
}

// plainFile brings spellings of a table's name together: Gauge Checks.CSV is
// gauge_checks.csv.
func plainFile(name string) string { return fold(strings.TrimSuffix(strings.ToLower(name), ".csv")) }

// filesOf lists the files that hold a table, in the order of their names.
func (f *folder) filesOf(sp spec, found map[string][]string) []string {
	files := found[plainFile(sp.file)]
	if len(files) > 1 {
		f.tell(files[1], survey.Fatal, fmt.Sprintf("is the same table as %s by its name", files[0]), "keep one of them")
	}
	if sp.file != readingsFile {
		return files
	}
	files = append([]string(nil), files...)
	for _, dir := range f.readingsFolders() {
		inside, others := f.list(dir)
		var more []string
		for _, names := range inside {
			for _, n := range names {
				more = append(more, path.Join(dir, n))
			}
		}
		sort.Strings(more)
		files = append(files, more...)
		for _, o := range others {
			f.tell(path.Join(dir, o), survey.Notice, "is not a CSV file, and was not read", "save its sheet as CSV if it holds readings")
		}
	}
	return files
}

func (f *folder) readingsFolders() []string {
	var out []string
	entries, _ := fs.ReadDir(f.fsys, ".") // a fault was told by list
	for _, e := range entries {
		if e.IsDir() && strings.EqualFold(e.Name(), "readings") {
			out = append(out, e.Name())
		}
	}
	return out
}

// absent tells a missing table: a required one is an error, and a survey.csv leaves
// its defaults in force.
func (f *folder) absent(sp spec, others []string) {
	stem := strings.TrimSuffix(sp.file, ".csv")
	remedy := "write it; its headings are " + sp.headings()
	for _, o := range others {
		if strings.EqualFold(strings.TrimSuffix(o, path.Ext(o)), stem) {
			remedy = fmt.Sprintf("save %s as %s", o, sp.file)
		}
	}
	switch {
	case sp.required:
		f.tell(sp.file, survey.Fatal, "the table is missing: "+sp.missing, remedy)
	case sp.file == "survey.csv":
		f.tell(sp.file, survey.Notice, "the table is missing: times are read as UTC, water is at 10 C, the site at latitude 45 and sea level, friction by Darcy and Weisbach",
			"write it; its headings are "+sp.headings())
	}
}

// strangers tells of tables at the top of the folder that no name is known for: a
// misspelt one would be left out without a word.
func (f *folder) strangers(specs []spec, found map[string][]string) {
	known := map[string]bool{}
	var names []string
	for _, sp := range specs {
		known[plainFile(sp.file)] = true
		names = append(names, sp.file)
	}
	var odd []string
	for plain, files := range found {
		if !known[plain] {
			odd = append(odd, files...)
		}
	}
	sort.Strings(odd)
	for _, name := range odd {
		remedy := "the tables are " + strings.Join(names, ", ")
		if strings.HasPrefix(plainFile(name), "reading") {
			remedy = "put further readings into the folder readings"
		} else if n := survey.Nearest(name, names); n != "" {
			remedy = fmt.Sprintf("did you mean %s? Then rename it", n)
		}
		f.tell(name, survey.Notice, "is not the name of a table, and was not read", remedy)
	}
}

// file reads one file as a table, records it among the inputs, and gives the number of
// its rows.
func (f *folder) file(sp spec, name string) int {
	in := survey.Input{File: name}
	defer func() { f.survey.Inputs = append(f.survey.Inputs, in) }()
	bytes, sum, err := f.bytes(name)
	in.SHA256 = sum
	var d decoded
	if err == nil {
		d, err = decode(bytes)
	}
	if err != nil {
		why := refusal(err)
		in.Understood = "not read"
		f.tell(name, survey.Fatal, why.reason, why.remedy)
		return 0
	}
	in.Understood = d.encoding
	sh := &sheet{folder: f, spec: sp, file: name, names: map[string]int{}, notices: map[string]*tally{}, orphans: map[string]bool{}}
	if d.odd > 0 {
		sh.problem(d.odd, survey.Notice, "", d.oddLine, d.reason, d.remedy)
	}
	sh.take(d.text, &in)
	sh.finish()
	in.Used = sh.used()
	f.problems = append(f.problems, sh.problems...)
	return in.Rows
}

// bytes reads a file and its digest. A file that is too large to be a table has no
// digest: it was not read to its end.
func (f *folder) bytes(name string) (b []byte, sum string, err error) {
	file, err := f.fsys.Open(name)
	if err != nil {
		return nil, "", err
	}
	defer file.Close()
	b, err = io.ReadAll(io.LimitReader(file, largest+1))
	if err != nil {
		return nil, "", err
	}
	if len(b) > largest {
		return nil, "", &errRefused{fmt.Sprintf("is larger than %d MB, which is no table of a survey", largest>>20),
			"put logger exports into the folder logs and name them in loggers.csv"}
	}
	digest := sha256.Sum256(b)
	return b, hex.EncodeToString(digest[:]), nil
}
