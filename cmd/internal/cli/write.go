package cli

import (
	"fmt"
	"os"
	"path/filepath"
	"sort"
)

// writeFiles writes a set of files into a folder, each whole or not at all: all of
// them are written beside their places first, and only when every one is complete
// are they renamed. A failure before that leaves the folder as it was.
func writeFiles(dir string, files map[string][]byte) error {
	if err := os.MkdirAll(dir, 0o755); err != nil {
		return cannotWrite(dir, err)
	}
	names := sortedNames(files)
	temps := map[string]string{}
	defer func() {
		for _, t := range temps {
			os.Remove(t) // those that were renamed are gone already
		}
	}()
	for _, name := range names {
		t, err := writeBeside(filepath.Join(dir, name), files[name])
		if t != "" {
			temps[name] = t
		}
		if err != nil {
			return cannotWrite(filepath.Join(dir, name), err)
		}
	}
	for _, name := range names {
		if err := os.Rename(temps[name], filepath.Join(dir, name)); err != nil {
			return cannotWrite(filepath.Join(dir, name), err)
		}
	}
	return nil
}

func sortedNames(files map[string][]byte) []string {
	names := make([]string, 0, len(files))
	for name := range files {
		names = append(names, name)
	}
	sort.Strings(names)
	return names
}

func writeBeside(path string, data []byte) (temp string, err error) {
	f, err := os.CreateTemp(filepath.Dir(path), ".writing-*")
	if err != nil {
		return "", err
	}
	temp = f.Name()
	if _, err = f.Write(data); err == nil {
		err = f.Chmod(0o644)
	}
	if err == nil {
		err = f.Sync()
	}
	if e := f.Close(); err == nil {
		err = e
	}
	return temp, err
}

func cannotWrite(path string, err error) error {
	return &failure{code: exitCannot, err: fmt.Errorf("cannot write %s: %w", path, err), hint: "name another folder with --out; nothing of this run was left there"}
}
