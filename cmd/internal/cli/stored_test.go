package cli

import (
	"bytes"
	"encoding/json"
	"testing"

	"tapround/cmd/internal/demo"
	"tapround/report"
	"tapround/report/page"
	"tapround/report/table"
)

// TestStoredResult: result.json holds all that the other files are made of, so a stored
// result can be drawn again.
func TestStoredResult(t *testing.T) {
	r, _, err := reconcile(readSurvey(demo.Harrowgill()), nil)
	if err != nil {
		t.Fatal(err)
	}
	files, err := table.Files(r)
	if err != nil {
		t.Fatal(err)
	}
	var again report.Result
	if err := json.Unmarshal(files["result.json"], &again); err != nil {
		t.Fatal(err)
	}
	redone, err := table.Files(&again)
	if err != nil {
		t.Fatal(err)
	}
	for name := range files {
		if !bytes.Equal(files[name], redone[name]) {
			t.Errorf("%s drawn from the stored result differs", name)
		}
	}
	a, err := page.HTML(r)
	if err != nil {
		t.Fatal(err)
	}
	b, err := page.HTML(&again)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(a, b) {
		t.Error("the page drawn from the stored result differs")
	}
}
