// Command tapround turns a field pressure survey into heads, a fitted model and
// findings. See the README, or run it with --help.
package main

import (
	"os"

	"tapround/cmd/internal/cli"
)

func main() {
	os.Exit(cli.Main(os.Args[1:], os.Stdout, os.Stderr))
}
