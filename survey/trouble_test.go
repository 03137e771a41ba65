package survey

import (
	"encoding/json"
	"testing"
)

// TestStoredAgain: what a result is stored with comes back as it was: a number that is not
// stated stays not stated, and a stated zero stays zero.
func TestStoredAgain(t *testing.T) {
	type stored struct {
		A, B, C Maybe
		Problem Problem
	}
	want := stored{A: Some(0), C: Some(-1.25e-7), Problem: Problem{Source: Source{File: "taps.csv", Line: 3}, Severity: SetAside, Reason: "no unit"}}
	data, err := json.Marshal(want)
	if err != nil {
		t.Fatal(err)
	}
	var got stored
	if err := json.Unmarshal(data, &got); err != nil {
		t.Fatal(err)
	}
	if got != want {
		t.Errorf("stored %s, read %+v", data, got)
	}
	if err := json.Unmarshal([]byte(`{"Problem":{"severity":"dire"}}`), &got); err == nil {
		t.Error("an unknown severity went through")
	}
}
