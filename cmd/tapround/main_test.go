package main

import (
	"os"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"

	"tapround/cmd/internal/cli"
)

// TestMain lets the scripts call tapround as users do.
func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){
		"tapround": func() { os.Exit(cli.Main(os.Args[1:], os.Stdout, os.Stderr)) },
	})
}

// TestScripts runs the command transcripts: what each command prints, writes and ends
// with.
func TestScripts(t *testing.T) {
	testscript.Run(t, testscript.Params{Dir: "testdata/script", RequireExplicitExec: true, RequireUniqueNames: true})
}
