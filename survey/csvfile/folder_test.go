package csvfile

import (
	"fmt"
	"io/fs"
	"slices"
	"strings"
	"testing"
	"testing/fstest"
	"time"

	"tapround/survey"
)

// What is nobody's table is left alone: hidden and lock files, pictures, results, logs.
func TestOtherFiles(t *testing.T) {
	s, ps := read(t, with(map[string]string{".levels.csv": "x", "~$pipes.csv": "x", "readings/.crew-3.csv": "x", "photo 12.jpg": "x", "results/heads.csv": "x",
		"logs/east.csv": "x", "readings/old/crew-1.csv": "x", "notes.txt": "x"}))
	if len(ps) != 0 || len(s.Inputs) != 16 {
		t.Errorf("%d files on record\n%s", len(s.Inputs), lines(ps))
	}
}

// A file beyond the limit is refused after the limit, not read to its end.
func TestTooLarge(t *testing.T) {
	endless := &endlessFile{}
	fsys := oneFile{folderOf(with(map[string]string{"levels.csv": ""})), "levels.csv", endless}
	s, ps := ReadFolder(fsys)
	want := "error: levels.csv: is larger than 64 MB, which is no table of a survey; put logger exports into the folder logs and name them in loggers.csv\n"
	if got := lines(ps); got != want {
		t.Errorf("%s", got)
	}
	if endless.read > largest+1<<20 {
		t.Errorf("%d bytes were read", endless.read)
	}
	if i := slices.IndexFunc(s.Inputs, func(in survey.Input) bool { return in.File == "levels.csv" }); i < 0 || s.Inputs[i].Understood != "not read" {
		t.Error("the file is not on record")
	}
}

// oneFile is a folder with one more file in it.
type oneFile struct {
	fstest.MapFS
	name string
	file fs.File
}

func (o oneFile) Open(name string) (fs.File, error) {
	if name == o.name {
		return o.file, nil
	}
	return o.MapFS.Open(name)
}

func (o oneFile) ReadDir(name string) ([]fs.DirEntry, error) {
	entries, err := o.MapFS.ReadDir(name)
	if name != "." {
		return entries, err
	}
	info := fs.FileInfoToDirEntry(fakeInfo{o.name})
	return append(entries, info), err
}

type fakeInfo struct{ name string }

func (f fakeInfo) Name() string     { return f.name }
func (fakeInfo) Size() int64        { return 1 << 40 }
func (fakeInfo) Mode() fs.FileMode  { return 0o644 }
func (fakeInfo) ModTime() time.Time { return time.Time{} }
func (fakeInfo) IsDir() bool        { return false }
func (fakeInfo) Sys() any           { return nil }

type endlessFile struct{ read int }

func (e *endlessFile) Read(b []byte) (int, error) {
	e.read += len(b)
	for i := range b {
		b[i] = 'x'
	}
	return len(b), nil
}
func (*endlessFile) Stat() (fs.FileInfo, error) { return fakeInfo{"levels.csv"}, nil }
func (*endlessFile) Close() error               { return nil }

// A file that cannot be opened or read to its end is an error of its own.
func TestUnreadable(t *testing.T) {
	files := folderOf(with(map[string]string{"levels.csv": ""}))
	_, ps := ReadFolder(oneFile{files, "levels.csv", failingFile{}})
	if want := "error: levels.csv: cannot be read: disk gone; look at the file and its permissions\n"; lines(ps) != want {
		t.Errorf("%s", lines(ps))
	}
	_, ps = ReadFolder(noFolder{})
	if len(ps) < 2 || !ps.Fatal() || !strings.Contains(lines(ps), "error: .: the folder cannot be read: no such folder;") {
		t.Errorf("%s", lines(ps))
	}
}

type failingFile struct{}

func (failingFile) Read([]byte) (int, error)   { return 0, fmt.Errorf("disk gone") }
func (failingFile) Stat() (fs.FileInfo, error) { return fakeInfo{"levels.csv"}, nil }
func (failingFile) Close() error               { return nil }

type noFolder struct{}

func (noFolder) Open(string) (fs.File, error) { return nil, fmt.Errorf("no such folder") }
