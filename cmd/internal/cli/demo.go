package cli

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"

	"tapround/cmd/internal/demo"
)

func newDemo(e *env) *cobra.Command {
	var quiet bool
	c := &cobra.Command{
		Use:   "demo [FOLDER]",
		Short: "write the built-in survey into a folder and reconcile it",
		Long: `demo writes the survey of Harrowgill, an invented upland town, into a folder (demo
where none is named) and reconciles it there. The survey has five faults in it; open
results/report.html in the folder to see what the readings say of them.`,
		Example: "  tapround demo\n  tapround demo /tmp/harrowgill",
		Args:    cobra.MaximumNArgs(1),
		RunE: func(_ *cobra.Command, args []string) error {
			folder := "demo"
			if len(args) == 1 {
				folder = args[0]
			}
			if err := writeDemo(folder); err != nil {
				return err
			}
			if !quiet {
				fmt.Fprintf(e.out, "The survey of Harrowgill, an invented town, is in %s\n\n", folder)
			}
			return runReconcile(e, folder, reconcileOptions{quiet: quiet})
		},
	}
	c.Flags().BoolVar(&quiet, "quiet", false, "print nothing but errors")
	return c
}

// writeDemo writes the built-in tables. A folder with other tables in it is left alone:
// only files that are the demo's own, byte for byte or absent, are written.
func writeDemo(folder string) error {
	source := demo.Harrowgill()
	files := map[string][]byte{}
	err := fs.WalkDir(source, ".", func(path string, d fs.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		data, err := fs.ReadFile(source, path)
		files[path] = data
		return err
	})
	if err != nil {
		return err
	}
	for _, name := range sortedNames(files) {
		old, err := os.ReadFile(filepath.Join(folder, filepath.FromSlash(name)))
		if errors.Is(err, fs.ErrNotExist) {
			continue
		}
		if err != nil || string(old) != string(files[name]) {
			return &failure{code: exitCannot, err: fmt.Errorf("%s holds another %s", folder, name), hint: "name a new folder for the demo: tapround demo FOLDER"}
		}
	}
	for _, name := range sortedNames(files) {
		dir := filepath.Join(folder, filepath.Dir(filepath.FromSlash(name)))
		if err := writeFiles(dir, map[string][]byte{filepath.Base(name): files[name]}); err != nil {
			return err
		}
	}
	return nil
}
