package csvfile

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
)

// misread is why a cell is no number, in words for the user.
type misread struct {
	reason, remedy string
	// unclear: the cell is a number in two ways, and which one is not for the
	// reader to choose.
	unclear bool
	none    bool // the cell says that there is no value
}

// number reads a cell by the decimal mark of its file. grouped tells that thousands
// marks were taken out. Only plain decimal numbers pass, with an exponent or without:
// no NaN, no Inf, no hexadecimal.
func (m marks) number(s string) (v float64, grouped bool, bad *misread) {
	if !m.comma && simple(s) {
		v, err := strconv.ParseFloat(s, 64)
		if err == nil {
			return v, false, nil
		}
	}
	n, ok := parseShape(s)
	if !ok {
		return 0, false, whyNoNumber(s)
	}
	if bad := m.unclear(s, n); bad != nil {
		return 0, false, bad
	}
	v, err := strconv.ParseFloat(n.plain, 64)
	if err != nil || math.IsInf(v, 0) {
		return 0, false, &misread{reason: "is too large a number", remedy: "correct it"}
	}
	return v, n.group != 0, nil
}

// unclear refuses what could be read in two ways.
func (m marks) unclear(s string, n shape) *misread {
	bare := strings.NewReplacer(",", "", ".", "").Replace(s)
	switch {
	case m.delim == ',' && (n.decimal == ',' || n.open == ','):
		point := strings.ReplaceAll(s, ",", ".")
		if n.open == ',' {
			return &misread{reason: fmt.Sprintf("may be %s or %s", point, bare), remedy: "write it without a comma", unclear: true}
		}
		return &misread{reason: "has a decimal comma in a comma-separated table",
			remedy: "write decimal points, or save the table with semicolons between the cells", unclear: true}
	case n.open == ',' && !(m.comma && !m.point):
		why := ""
		if m.point {
			why = ", and other numbers of this file have decimal points"
		}
		return &misread{reason: fmt.Sprintf("may be %s or %s%s", strings.ReplaceAll(s, ",", "."), bare, why),
			remedy: fmt.Sprintf("write %s or %s", strings.ReplaceAll(s, ",", "."), bare), unclear: true}
	case n.open == '.' && m.comma:
		return &misread{reason: fmt.Sprintf("may be %s or %s, for other numbers of this file have decimal commas", strings.ReplaceAll(s, ".", ","), bare),
			remedy: fmt.Sprintf("write %s or %s", strings.ReplaceAll(s, ".", ","), bare), unclear: true}
	case n.decimal == 0 && (n.group == ',' && m.comma || n.group == '.' && m.point):
		return &misread{reason: fmt.Sprintf("uses %q for thousands, which is the decimal mark of other numbers of this file", n.group),
			remedy: "write numbers without thousands marks", unclear: true}
	}
	return nil
}

// simple reports whether s is digits with at most one decimal point, signed or not.
func simple(s string) bool {
	if s != "" && (s[0] == '-' || s[0] == '+') {
		s = s[1:]
	}
	digits, points := 0, 0
	for i := range len(s) {
		switch {
		case s[i] >= '0' && s[i] <= '9':
			digits++
		case s[i] == '.':
			points++
		default:
			return false
		}
	}
	return digits > 0 && points <= 1
}

const figure = `([+\-\x{2212}]?[\d.,]*\d[\d.,]*)`

var (
	asRange   = regexp.MustCompile(`^` + figure + `\s*(?:-|\x{2013}|\x{2014}|\x{2212}|\.\.|\x{2026}|to|\bbis\b)\s*` + figure + `$`)
	asDate    = regexp.MustCompile(`^(?:\d{4}[-/.]\d{1,2}[-/.]\d{1,2}|\d{1,2}[-/.]\d{1,2}[-/.]\d{2,4})(?:[T ]\d{1,2}[:.]\d\d.*)?$|^\d{1,2}/\d{1,4}$`)
	withMonth = regexp.MustCompile(`^(?:\d{1,2}[-/. ]{0,2}(\p{L}{3,9})\.?(?:[-/. ]{1,2}\d{2,4})?|(\p{L}{3,9})[-/. ]{1,2}\d{2,4})$`)
	asClock   = regexp.MustCompile(`^\d{1,2}:\d\d(?::\d\d)?$`)
	withUnit  = regexp.MustCompile(`^` + figure + `\s*([\p{L}\x{b0}%\x{b5}].*)$`)
	asStation = regexp.MustCompile(`^\d+\+\d\d(?:\.\d+)?$`)
	asHex     = regexp.MustCompile(`^[+-]?0[xXbBoO][0-9a-fA-F.pP+-]*$`)
)

// months by the first three letters, in the languages of the trade's spreadsheets.
const months = " jan feb mar mär mrz apr mai may jun jul aug sep oct okt nov dec dez fév avr jui aoû déc ene abr ago dic gen mag giu lug set ott "

// rangeEnds splits 5.4-5.6 into its ends; anything else comes back whole.
func rangeEnds(s string) []string {
	if m := asRange.FindStringSubmatch(s); m != nil && !asDate.MatchString(s) {
		return m[1:]
	}
	return []string{s}
}

// whyNoNumber names what stands in a cell that is not a number. Each kind has its own
// cure, and the crew can tell at once whether it is a slip of the pen or of a
// spreadsheet.
func whyNoNumber(s string) *misread {
	low := strings.ToLower(s)
	word := strings.Trim(low, " .")
	is := func(words ...string) bool {
		for _, w := range words {
			if word == w {
				return true
			}
		}
		return false
	}
	switch {
	case isDitto(s):
		return &misread{reason: "is a ditto mark, and this column holds numbers", remedy: "write the number again"}
	case strings.HasPrefix(s, "="):
		return &misread{reason: "is a formula and not its result", remedy: "paste the values into the sheet before saving it as CSV"}
	case strings.HasPrefix(s, "#"):
		return &misread{reason: "is a spreadsheet's error mark", remedy: "mend the formula, or leave the cell empty"}
	case is("n/a", "na", "n.a", "-", "--", "---", "\u2013", "\u2014", "none", "nil", "x", "nr", "no reading", "missing", "?"):
		return &misread{reason: "says that there is no value", remedy: "leave the cell empty where nothing is known", none: true}
	case is("hi", "high", "lo", "low", "ol", "o/l", "o.l", "over", "under", "overrange", "over range", "over-range", "off scale", "full scale", "err", "error", "fault", "fail"):
		return &misread{reason: "says that the instrument was off its scale or at fault", remedy: "read it again with an instrument of the right range"}
	case strings.IndexAny(low[:1], "<>") == 0 || strings.HasPrefix(s, "\u2264") || strings.HasPrefix(s, "\u2265"):
		return &misread{reason: "is a limit and not a value", remedy: "read it again with an instrument of the right range"}
	case low[0] == '~' || strings.HasPrefix(low, "\u2248") || strings.HasPrefix(low, "ca ") || strings.HasPrefix(low, "ca.") || strings.HasPrefix(low, "about ") || strings.HasSuffix(low, "?"):
		return &misread{reason: "is a doubtful or rounded value", remedy: "write the number that was read, or a range such as 5.4-5.6 in a reading"}
	case asDate.MatchString(s) || isMonth(low):
		return &misread{reason: "looks like a date: a spreadsheet may have made one of a number such as 9.10", remedy: "write the number again from the field sheet; the spreadsheet may have changed its size as well"}
	case asClock.MatchString(s):
		return &misread{reason: "looks like a time of day", remedy: "write the number again from the field sheet"}
	case asRange.MatchString(s):
		return &misread{reason: "is a range; only a reading may be one", remedy: "write one number"}
	case is("nan", "inf", "+inf", "-inf", "infinity", "-infinity", "+infinity"):
		return &misread{reason: "is not a number", remedy: "leave the cell empty where nothing is known"}
	case asHex.MatchString(s) || strings.ContainsRune(s, '_') && allDigits(strings.ReplaceAll(s, "_", "")):
		return &misread{reason: "is a number in computer notation", remedy: "write a plain decimal number"}
	case asStation.MatchString(s):
		return &misread{reason: "is a station in hundreds of feet", remedy: "write it as one number, as 1250 for 12+50"}
	}
	if m := withUnit.FindStringSubmatch(s); m != nil {
		return &misread{reason: fmt.Sprintf("has %q behind the number", m[2]), remedy: "write the number alone; the unit goes into the heading or the column unit"}
	}
	return &misread{reason: "is not a number", remedy: "write a plain decimal number"}
}

func isMonth(low string) bool {
	m := withMonth.FindStringSubmatch(low)
	if m == nil {
		return false
	}
	letters := []rune(m[1] + m[2])
	return strings.Contains(months, " "+string(letters[:3])+" ")
}

// isDitto reports the marks that stand for "the same as above".
func isDitto(s string) bool {
	switch s {
	case `"`, `''`, "\u201c", "\u201d", "\u3003", `-"-`, `""`:
		return true
	}
	return strings.EqualFold(s, "ditto") || strings.EqualFold(s, "do.") || strings.EqualFold(s, "dto.") || strings.EqualFold(s, "-do-")
}
