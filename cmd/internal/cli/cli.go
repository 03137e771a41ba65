// Package cli is the command line: it opens files, reads the clock, prints, and
// decides the exit code. Every command is one file: flags, open, call, print.
package cli

import (
	"errors"
	"fmt"
	"io"
	"os"
	"runtime/debug"

	"github.com/spf13/cobra"
	"golang.org/x/term"
)

// Exit codes of the contract.
const (
	exitDone     = 0
	exitInput    = 1 // the input has errors, nothing was computed
	exitUsage    = 2
	exitStrict   = 3 // computed, and something the user asked to be strict about was found
	exitCannot   = 4 // could not be computed
	exitInternal = 5
)

// failure is an error that knows its exit code. A silent one has been printed.
type failure struct {
	code   int
	err    error
	hint   string
	silent bool
}

func (f *failure) Error() string {
	if f.err == nil {
		return ""
	}
	return f.err.Error()
}

func (f *failure) Unwrap() error { return f.err }

// env is what the commands are given of the world.
type env struct {
	out, err io.Writer
	colour   bool
}

// Main runs the command line and returns the exit code. A fault of our own ends
// with code 5 and says so, so that it is never taken for a fault of the survey.
func Main(args []string, stdout, stderr io.Writer) (code int) {
	e := &env{out: stdout, err: stderr, colour: colourOn(stdout)}
	defer func() {
		if r := recover(); r != nil {
			fmt.Fprintf(stderr, "error: internal fault: %v\nhint: this is a fault of the program, not of the survey; please report it with the lines below\n%s", r, debug.Stack())
			code = exitInternal
		}
	}()
	root := newRoot(e)
	root.SetArgs(args)
	root.SetOut(stdout)
	root.SetErr(stderr)
	err := root.Execute()
	if err == nil {
		return exitDone
	}
	var f *failure
	if !errors.As(err, &f) {
		// cobra's own errors are about flags and arguments.
		f = &failure{code: exitUsage, err: err, hint: "tapround --help lists the commands, tapround COMMAND --help its options"}
	}
	if !f.silent {
		fmt.Fprintf(stderr, "error: %s\n", f.Error())
		if f.hint != "" {
			fmt.Fprintf(stderr, "hint: %s\n", f.hint)
		}
	}
	return f.code
}

// colourOn: only on a terminal, and not where NO_COLOR is set (no-color.org).
func colourOn(w io.Writer) bool {
	if os.Getenv("NO_COLOR") != "" {
		return false
	}
	f, ok := w.(*os.File)
	return ok && term.IsTerminal(int(f.Fd()))
}

func newRoot(e *env) *cobra.Command {
	root := &cobra.Command{
		Use:   "tapround",
		Short: "turn gauge rounds into heads, a fitted model and findings",
		Long: `tapround reads a folder of CSV tables from a field pressure survey: what the works
are, what held in each round, and what the gauges showed. It turns the readings
into piezometric and total heads, fits each pipe's roughness and each fitting's
loss coefficient to a steady-flow model, and says which stretch loses too much,
which gauge or level is wrong, and what the readings cannot tell apart.

Its answers are for people who know the works. Local codes and licensed practice
decide what is done on site.`,
		Example:       "  tapround demo\n  tapround check surveys/2026-03-harrowgill\n  tapround reconcile surveys/2026-03-harrowgill",
		SilenceUsage:  true,
		SilenceErrors: true,
		Version:       version(),
		Args:          cobra.NoArgs,
		RunE:          func(c *cobra.Command, _ []string) error { return c.Help() },
	}
	root.SetVersionTemplate("tapround {{.Version}}\n")
	root.CompletionOptions.HiddenDefaultCmd = true
	root.AddCommand(newDemo(e), newCheck(e), newHeads(e), newReconcile(e), newNext(e), newDraw(e))
	return root
}

// version is the module's version as built; "devel" from a working tree.
func version() string {
	info, ok := debug.ReadBuildInfo()
	if !ok || info.Main.Version == "" || info.Main.Version == "(devel)" {
		return "devel"
	}
	return info.Main.Version
}
