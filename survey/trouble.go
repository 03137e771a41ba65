package survey

import (
	"fmt"
	"strconv"
	"strings"
)

// Source is the place a number came from. Line counts from 1 and is the line of
// the file as an editor shows it; 0 means the whole file.
type Source struct {
	File string `json:"file"`
	Line int    `json:"line,omitempty"`
}

// String gives "taps.csv:12", or the file alone where there is no line.
func (s Source) String() string {
	if s.Line == 0 {
		return s.File
	}
	return fmt.Sprintf("%s:%d", s.File, s.Line)
}

// Severity says what a Problem does to the run.
type Severity int

const (
	// Notice: read all the same, but the reader should know how.
	Notice Severity = iota
	// SetAside: this row is not used; the rest goes on.
	SetAside
	// Fatal: nothing may be computed from this folder until it is mended.
	Fatal
)

// String gives the word printed before a problem.
func (s Severity) String() string {
	switch s {
	case Notice:
		return "notice"
	case SetAside:
		return "set aside"
	default:
		return "error"
	}
}

// MarshalText lets a severity stand as its word in JSON.
func (s Severity) MarshalText() ([]byte, error) { return []byte(s.String()), nil }

// UnmarshalText reads the word back, so that a stored result can be drawn again.
func (s *Severity) UnmarshalText(text []byte) error {
	for _, v := range []Severity{Notice, SetAside, Fatal} {
		if v.String() == string(text) {
			*s = v
			return nil
		}
	}
	return fmt.Errorf("%q is no severity", text)
}

// Problem is a cell, a row or a table that is not as it should be. Text is the
// value exactly as written; Reason says what is wrong; Remedy what to do.
type Problem struct {
	Source
	Severity Severity `json:"severity"`
	Column   string   `json:"column,omitempty"`
	Text     string   `json:"text,omitempty"`
	Reason   string   `json:"reason"`
	Remedy   string   `json:"remedy,omitempty"`
}

// String gives one line: place, column, value, reason; remedy after a semicolon.
func (p Problem) String() string {
	var b strings.Builder
	b.WriteString(p.Source.String())
	if p.Column != "" {
		fmt.Fprintf(&b, ", %s", p.Column)
	}
	if p.Text != "" {
		fmt.Fprintf(&b, " %q", p.Text)
	}
	fmt.Fprintf(&b, ": %s", p.Reason)
	if p.Remedy != "" {
		fmt.Fprintf(&b, "; %s", p.Remedy)
	}
	return b.String()
}

// Problems is a list of them, with the questions that are asked of such a list.
type Problems []Problem

// Fatal reports whether any of them forbids computing.
func (ps Problems) Fatal() bool {
	for _, p := range ps {
		if p.Severity == Fatal {
			return true
		}
	}
	return false
}

// Of returns those of one severity, in their order.
func (ps Problems) Of(s Severity) Problems {
	var out Problems
	for _, p := range ps {
		if p.Severity == s {
			out = append(out, p)
		}
	}
	return out
}

// Caveat is a warning that belongs to a number and travels with it.
type Caveat string

// Maybe is a number that a table may leave out. The zero Maybe is "not stated",
// which is never the same as a stated zero.
type Maybe struct {
	V  float64
	OK bool
}

// Some is a stated number.
func Some(v float64) Maybe { return Maybe{V: v, OK: true} }

// Or gives the stated number, or def.
func (m Maybe) Or(def float64) float64 {
	if m.OK {
		return m.V
	}
	return def
}

// MarshalJSON writes null for a number that is not stated, and every digit of one that is.
func (m Maybe) MarshalJSON() ([]byte, error) {
	if !m.OK {
		return []byte("null"), nil
	}
	return strconv.AppendFloat(nil, m.V, 'g', -1, 64), nil
}

// UnmarshalJSON reads a number or null back.
func (m *Maybe) UnmarshalJSON(data []byte) error {
	if string(data) == "null" {
		*m = Maybe{}
		return nil
	}
	v, err := strconv.ParseFloat(string(data), 64)
	if err != nil {
		return err
	}
	*m = Some(v)
	return nil
}
