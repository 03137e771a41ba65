package unit

import (
	"fmt"
	"strings"
)

// NameError says why a unit's name could not be used.
type NameError struct {
	Written   string    // exactly as it stood
	Dimension Dimension // what was asked for
	Reason    string    // what is wrong with it
	Nearest   string    // closest known name of the dimension; empty: none is close
	Accepted  []string  // names of the dimension, most usual first
}

// Error gives one line: what was written, what is wrong, what is accepted.
func (e *NameError) Error() string {
	return fmt.Sprintf("unit %q: %s; %s", e.Written, e.Reason, e.Remedy())
}

// Remedy says what to write instead.
func (e *NameError) Remedy() string {
	names := e.Accepted
	// One is the unit with no name; it is listed by the sign that stands for it.
	if e.Dimension == Count {
		names = append([]string{"-"}, names...)
	}
	s := "units of " + e.Dimension.String() + " are " + strings.Join(names, ", ")
	if e.Nearest != "" {
		return fmt.Sprintf("did you mean %s? %s", e.Nearest, s)
	}
	return s
}

// Parse finds the unit of dimension d that is written as name. It takes the
// trade spellings of each unit in any letter case, with or without spaces, dots
// and brackets, and superscripts as ^3, 3 or the raised digit.
//
// A pressure that is marked as absolute (psia, bar abs) is refused: whether a
// gauge reads above atmosphere or above vacuum is said by its kind, and use
// ParseAbsolute for those. The error is always a *NameError.
func Parse(name string, d Dimension) (Unit, error) {
	f := fold(name)
	if d == Pressure {
		if _, absolute := cutAbsolute(f); absolute {
			return Unit{}, refuse(name, d, "is an absolute pressure, but the gauge's kind says it reads above atmosphere")
		}
	}
	return parse(name, f, d)
}

// ParseAbsolute finds the unit of a pressure that is known to be absolute, such
// as a barometer's or that of a gauge of kind absolute-pressure. The unit is the
// same as Parse gives; only the spelling may say so (psia, bar abs), and one
// that says the opposite (psig, barg) is refused.
func ParseAbsolute(name string) (Unit, error) {
	f := fold(name)
	if g, ok := gaugeMarked[f]; ok {
		return Unit{}, refuse(name, Pressure, "is a pressure above atmosphere, but this one must be absolute; write "+g+" if it is")
	}
	f, _ = cutAbsolute(f)
	return parse(name, f, Pressure)
}

func parse(name, folded string, d Dimension) (Unit, error) {
	// A thousand million times apart, and told apart by one letter's case.
	if t := strings.TrimSpace(name); t == "mPa" || t == "mW" {
		return Unit{}, refuse(name, d, "means milli- here; write "+"M"+t[1:]+" for mega-")
	}
	if folded == "" && d == Count {
		return One, nil
	}
	if folded == "" {
		return Unit{}, refuse(name, d, "no unit is written, and a unit is never guessed")
	}
	if u, ok := spellings[d][folded]; ok {
		return u, nil
	}
	for other := range Dimension(numDimensions) {
		if u, ok := spellings[other][folded]; ok {
			return Unit{}, refuse(name, d, fmt.Sprintf("is a unit of %s (%s), not of %s", other, u.Name, d))
		}
	}
	return Unit{}, refuse(name, d, "is not a known unit of "+d.String())
}

func refuse(name string, d Dimension, reason string) error {
	return &NameError{Written: name, Dimension: d, Reason: reason, Nearest: nearest(fold(name), d), Accepted: d.accepted()}
}

// spellings finds a unit by dimension and folded spelling.
var spellings = func() (out [numDimensions]map[string]Unit) {
	for _, e := range table {
		d := e.unit.Dimension
		if out[d] == nil {
			out[d] = map[string]Unit{}
		}
		for _, s := range append([]string{fold(e.unit.Name)}, e.also...) {
			out[d][s] = e.unit
		}
	}
	return out
}()

var folder = strings.NewReplacer(
	"²", "2", "₂", "2", "³", "3", "⁻¹", "-1", "ℓ", "l", "℃", "degc", "℉", "degf", "^", "", "**", "",
	"°", "deg", "º", "deg", "·", "", "*", "", "−", "-", "″", `"`, "′", "'",
	" per ", "/", "\u00a0", "", " ", "", "\t", "", "_", "", ".", "", ",", "",
	"(", "", ")", "", "[", "", "]", "",
)

// fold brings the spellings of one name together: case, spaces, dots, brackets
// and the ways to write a power.
func fold(name string) string { return folder.Replace(strings.ToLower(strings.TrimSpace(name))) }

// gaugeMarked maps spellings that say "above atmosphere" to the bare unit.
var gaugeMarked = map[string]string{
	"barg": "bar", "bargauge": "bar", "mbarg": "mbar", "psig": "psi", "psigauge": "psi", "kpag": "kPa",
	"kpagauge": "kPa", "mpag": "MPa", "pag": "Pa", "kgf/cm2g": "kgf/cm2", "kg/cm2g": "kgf/cm2",
}

// cutAbsolute takes the mark of an absolute pressure off a folded spelling.
func cutAbsolute(f string) (string, bool) {
	for _, mark := range []string{"absolute", "abs", "a"} {
		if s, ok := strings.CutSuffix(f, mark); ok {
			// "kpa" and "pa" end in a themselves: what is left must be a unit.
			if u, known := spellings[Pressure][s]; known && u != MetreOfWater {
				return s, true
			}
		}
	}
	return f, false
}

// nearest gives the printed name of the unit of d with the spelling that takes
// the fewest single-letter edits to reach, where that is at most a third of its
// letters (and one at least).
func nearest(folded string, d Dimension) string {
	if folded == "" {
		return ""
	}
	best, bestName := 1+max(1, len(folded)/3), ""
	for _, e := range table {
		if e.unit.Dimension != d || e.unit.Name == "" {
			continue
		}
		for _, s := range append([]string{fold(e.unit.Name)}, e.also...) {
			if n := edits(folded, s); n < best && n < len(folded) {
				best, bestName = n, e.unit.Name
			}
		}
	}
	return bestName
}

// edits counts the insertions, deletions and replacements that turn a into b.
func edits(a, b string) int {
	row := make([]int, len(b)+1)
	for j := range row {
		row[j] = j
	}
	for i := range len(a) {
		diagonal := row[0]
		row[0] = i + 1
		for j := range len(b) {
			cost := diagonal
			if a[i] != b[j] {
				cost++
			}
			diagonal = row[j+1]
			row[j+1] = min(cost, row[j]+1, row[j+1]+1)
		}
	}
	return row[len(b)]
}
