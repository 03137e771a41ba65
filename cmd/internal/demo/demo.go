// Package demo holds the built-in survey: Harrowgill, an invented upland town. Its
// tables are the ones in harrowgill/; its readings were made by the generator in
// gen/ from the scenario's true state, which is recorded there with the seed.
package demo

import (
	"embed"
	"io/fs"
)

//go:generate go run ./gen

//go:embed harrowgill
var files embed.FS

// Harrowgill is the survey folder, read-only.
func Harrowgill() fs.FS {
	sub, err := fs.Sub(files, "harrowgill")
	if err != nil {
		panic(err) // the folder is embedded at build time
	}
	return sub
}
