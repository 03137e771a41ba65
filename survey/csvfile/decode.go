package csvfile

import (
	"bytes"
	"errors"
	"fmt"
	"strings"
	"unicode/utf8"

	"golang.org/x/text/encoding/charmap"
	"golang.org/x/text/encoding/unicode"
	"golang.org/x/text/unicode/norm"
)

// decoded is a file as text: UTF-8, composed letters, every line ended by one line
// feed.
type decoded struct {
	text     string
	encoding string
	// odd is the first line, with its text, that needed a decision on the
	// encoding; 0: none did.
	odd     int
	oddLine string
	reason  string // of the decision
	remedy  string
}

// errRefused is why a file is no text table.
type errRefused struct{ reason, remedy string }

func (e *errRefused) Error() string { return e.reason }

var (
	asUTF8 = "save it again as CSV in UTF-8"
	// signatures of files that are often given the wrong name.
	signatures = []struct{ head, reason string }{
		{"PK\x03\x04", "is a workbook or an archive, not CSV text"},
		{"\xd0\xcf\x11\xe0", "is an old office workbook, not CSV text"},
		{"%PDF", "is a PDF, not CSV text"},
		{"\x89PNG", "is a picture, not CSV text"},
		{"\xff\xd8\xff", "is a picture, not CSV text"},
		{"SQLite format 3", "is a database, not CSV text"},
		{"\x1f\x8b", "is a compressed file, not CSV text"},
	}
)

// decode makes text of a file's bytes. A byte-order mark decides; without one, NUL
// bytes in every other place mean UTF-16; then the whole file is either valid UTF-8
// or, with a notice, Windows-1252. The error is always an *errRefused.
func decode(b []byte) (decoded, error) {
	for _, s := range signatures {
		if bytes.HasPrefix(b, []byte(s.head)) {
			return decoded{}, &errRefused{s.reason, "save each sheet as CSV in UTF-8"}
		}
	}
	d := decoded{}
	var err error
	switch {
	case bytes.HasPrefix(b, []byte("\xff\xfe\x00\x00")), bytes.HasPrefix(b, []byte("\x00\x00\xfe\xff")):
		return d, &errRefused{"is UTF-32 text, which is not read", asUTF8}
	case bytes.HasPrefix(b, []byte("\xef\xbb\xbf")):
		d.encoding = "UTF-8 with a byte-order mark"
		b = b[3:]
		if !utf8.Valid(b) {
			line, text := lineOf(b, firstInvalid(b))
			return d, &errRefused{fmt.Sprintf("begins with the mark of UTF-8, but line %d is not UTF-8 (%q)", line, text), asUTF8}
		}
		d.text = string(b)
	case bytes.HasPrefix(b, []byte("\xff\xfe")):
		d.encoding = "UTF-16, little-endian"
		d.text, err = utf16(b[2:], unicode.LittleEndian)
	case bytes.HasPrefix(b, []byte("\xfe\xff")):
		d.encoding = "UTF-16, big-endian"
		d.text, err = utf16(b[2:], unicode.BigEndian)
	case bytes.IndexByte(b, 0) >= 0:
		d.encoding, d.text, err = unmarked16(b)
	case utf8.Valid(b):
		d.encoding = "UTF-8"
		d.text = string(b)
	default:
		d.encoding = "Windows-1252"
		d.text, err = windows(b)
		var raw []byte
		d.odd, raw = lineOf(b, firstInvalid(b))
		line, _ := windows(raw)
		d.oddLine = line
		d.reason = "the file is not UTF-8; it was read as Windows-1252, and this is the first line where that matters"
		d.remedy = "look at the accents and degree signs; if they are wrong, " + asUTF8
	}
	if err != nil {
		return d, err
	}
	if strings.IndexByte(d.text, 0) >= 0 {
		return d, &errRefused{"holds NUL bytes, so it is not text", asUTF8}
	}
	d.text = tidy(d.text)
	if d.odd == 0 {
		if i := strings.IndexRune(d.text, utf8.RuneError); i >= 0 {
			var raw []byte
			d.odd, raw = lineOf([]byte(d.text), i)
			d.oddLine = string(raw)
			d.reason = "a letter was lost before the file came here, and stands as \ufffd"
			d.remedy = "write the letter again; a name with \ufffd in it matches nothing"
		}
	}
	return d, nil
}

// tidy ends every line with a line feed alone and composes accented letters, so that
// a name typed on two machines is one name. A DOS end-of-file mark is cut off.
func tidy(s string) string {
	s = strings.TrimRight(s, "\x1a")
	if strings.IndexByte(s, '\r') >= 0 {
		s = strings.ReplaceAll(strings.ReplaceAll(s, "\r\n", "\n"), "\r", "\n")
	}
	if !norm.NFC.IsNormalString(s) {
		s = norm.NFC.String(s)
	}
	return s
}

func utf16(b []byte, order unicode.Endianness) (string, error) {
	if len(b)%2 == 1 {
		return "", &errRefused{"is UTF-16 text cut off in the middle of a letter", asUTF8}
	}
	out, err := unicode.UTF16(order, unicode.IgnoreBOM).NewDecoder().Bytes(b)
	if err != nil {
		return "", &errRefused{"is not the UTF-16 text it seems to be", asUTF8}
	}
	return string(out), nil
}

// unmarked16 reads UTF-16 without a mark: western text has its NUL bytes at odd places
// in little-endian order and at even places in big-endian order. Anything else with
// NUL bytes is not text.
func unmarked16(b []byte) (encoding, text string, err error) {
	var nul [2]int
	for i, c := range b {
		if c == 0 {
			nul[i%2]++
		}
	}
	pairs := len(b) / 2
	switch {
	case nul[0] == 0 && nul[1] > pairs/2:
		text, err = utf16(b, unicode.LittleEndian)
		return "UTF-16, little-endian, without a byte-order mark", text, err
	case nul[1] == 0 && nul[0] > pairs/2:
		text, err = utf16(b, unicode.BigEndian)
		return "UTF-16, big-endian, without a byte-order mark", text, err
	}
	return "", "", &errRefused{"holds NUL bytes, so it is not text", asUTF8}
}

func windows(b []byte) (string, error) {
	// Five bytes stand for nothing in Windows-1252; where they occur the file is in
	// some other code page, and every letter beyond ASCII is in doubt.
	for _, c := range b {
		switch c {
		case 0x81, 0x8d, 0x8f, 0x90, 0x9d:
			return "", &errRefused{"is text in an unknown code page: neither UTF-8 nor UTF-16 nor Windows-1252", asUTF8}
		}
	}
	out, err := charmap.Windows1252.NewDecoder().Bytes(b)
	if err != nil {
		return "", &errRefused{"is not text that can be read", asUTF8}
	}
	return string(out), nil
}

func firstInvalid(b []byte) int {
	for i := 0; i < len(b); {
		r, n := utf8.DecodeRune(b[i:])
		if r == utf8.RuneError && n <= 1 {
			return i
		}
		i += n
	}
	return len(b)
}

// lineOf gives the line, counted from 1, that holds byte i, and its bytes. A line ends
// at LF, CRLF or a lone CR, as in an editor.
func lineOf(b []byte, i int) (int, []byte) {
	n, start := 1, 0
	for k := 0; k < i && k < len(b); k++ {
		if b[k] == '\n' || b[k] == '\r' && !(k+1 < len(b) && b[k+1] == '\n') {
			n, start = n+1, k+1
		}
	}
	end := start
	for end < len(b) && b[end] != '\n' && b[end] != '\r' {
		end++
	}
	return n, b[start:end]
}

func refusal(err error) *errRefused {
	var e *errRefused
	if errors.As(err, &e) {
		return e
	}
	return &errRefused{"cannot be read: " + err.Error(), "look at the file and its permissions"}
}
