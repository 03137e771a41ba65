package csvfile

import (
	"errors"
	"fmt"
	"regexp"
	"strconv"
	"strings"
	"time"

	// The zones travel with the program: a site laptop may have none.
	_ "time/tzdata"

	"tapround/survey"
)

// instant is a date with a time of day: RFC 3339, or the same with a space, without
// seconds or without an offset.
var instant = regexp.MustCompile(`^(\d{4})-(\d\d)-(\d\d)(?:[Tt]| +)(\d\d):(\d\d)(?::(\d\d)([.,]\d{1,9})?)?\s*([Zz]|[+-]\d\d:?\d\d)?$`)

// when reads a time; the zero time where the cell is empty or cannot be read.
func (r *row) when(column, cell string) time.Time {
	if cell == "" || r.garbled || r.headed(column).broken {
		return time.Time{}
	}
	m := instant.FindStringSubmatch(cell)
	if m == nil {
		reason, remedy := whyNoTime(cell)
		r.fail(column, cell, reason, remedy)
		return time.Time{}
	}
	var n [6]int
	for i := range n {
		if m[i+1] != "" {
			n[i], _ = strconv.Atoi(m[i+1]) // two or four digits
		}
	}
	// A time of day or date that does not exist (24:00, 31 June) would be shifted.
	wall := time.Date(n[0], time.Month(n[1]), n[2], n[3], n[4], n[5], 0, time.UTC)
	if wall.Format("2006-01-02 15:04:05") != fmt.Sprintf("%04d-%02d-%02d %02d:%02d:%02d", n[0], n[1], n[2], n[3], n[4], n[5]) {
		r.fail(column, cell, "is no date and time of day that exists", "write it as "+timeExample+", hours from 00 to 23")
		return time.Time{}
	}
	if m[7] != "" {
		f, _ := strconv.ParseFloat("0."+m[7][1:], 64)
		wall = wall.Add(time.Duration(f*1e9 + 0.5))
	}
	if m[8] != "" {
		return wall.Add(-offsetOf(m[8])).In(r.zone)
	}
	t, doubt := local(wall, r.zone)
	if doubt != "" {
		r.tell(survey.Notice, column, cell, doubt, "write the time with its offset from UTC, as "+t.Format("2006-01-02T15:04-07:00"))
	}
	return t
}

const timeExample = "2026-03-15 14:05"

func offsetOf(s string) time.Duration {
	if strings.EqualFold(s, "z") {
		return 0
	}
	digits := strings.ReplaceAll(s[1:], ":", "")
	h, _ := strconv.Atoi(digits[:2])
	m, _ := strconv.Atoi(digits[2:])
	d := time.Duration(h)*time.Hour + time.Duration(m)*time.Minute
	if s[0] == '-' {
		return -d
	}
	return d
}

// local puts a wall clock's time into a zone. Where the clocks were put back the hour
// occurs twice, and the first is taken; where they were put forward the time does not
// exist, and it is read by the offset that held before. Both are told.
func local(wall time.Time, zone *time.Location) (time.Time, string) {
	before, after := offsetAt(wall.Add(-26*time.Hour), zone), offsetAt(wall.Add(26*time.Hour), zone)
	first, second := wall.Add(-before).In(zone), wall.Add(-after).In(zone)
	if before == after {
		return first, ""
	}
	ok1, ok2 := sameClock(first, wall), sameClock(second, wall)
	switch {
	case ok1 && ok2:
		return first, fmt.Sprintf("occurs twice in %s, for the clocks were put back; the first was taken", zone)
	case ok1:
		return first, ""
	case ok2:
		return second, ""
	}
	return first, fmt.Sprintf("does not exist in %s, for the clocks were put forward; it was read as %s", zone, first.Format("15:04 -07:00"))
}

func offsetAt(t time.Time, zone *time.Location) time.Duration {
	_, s := t.In(zone).Zone()
	return time.Duration(s) * time.Second
}

func sameClock(t, wall time.Time) bool {
	return t.Format(time.DateTime) == wall.Format(time.DateTime)
}

var (
	dateOnly = regexp.MustCompile(`^\d{4}-\d\d-\d\d$`)
	dotClock = regexp.MustCompile(`^\d{1,2}[.:]\d\d([.:]\d\d)?(\s*[aApP]\.?[mM]\.?)?$`)
	serial   = regexp.MustCompile(`^\d{5}([.,]\d+)?$`)
)

func whyNoTime(s string) (reason, remedy string) {
	remedy = "write it as " + timeExample
	switch {
	case isDitto(s):
		return "is a ditto mark, and this column holds times", "write the time again"
	case dateOnly.MatchString(s):
		return "is a date without a time of day", remedy
	case dotClock.MatchString(s):
		return "is a time of day without a date", remedy
	case serial.MatchString(s):
		return "looks like a spreadsheet's day number", "format the column as a date with time of day, as " + timeExample + ", before saving it as CSV"
	case asDate.MatchString(s) || isMonth(strings.ToLower(s)):
		return "is in another order than year-month-day, and day and month may be changed over", remedy
	}
	return "is not a date with a time of day", remedy
}

// loadZone finds a zone by its IANA name. "Local" would make the result depend on the
// machine.
func loadZone(name string) (*time.Location, error) {
	if name == "" || strings.EqualFold(name, "local") {
		return nil, errors.New("is not the name of a time zone")
	}
	if strings.EqualFold(name, "utc") || strings.EqualFold(name, "z") || strings.EqualFold(name, "gmt") {
		return time.UTC, nil
	}
	z, err := time.LoadLocation(name)
	if err != nil {
		return nil, errors.New("is not a known time zone")
	}
	return z, nil
}

const zoneRemedy = "write an IANA name such as Europe/London or Australia/Perth, or UTC; Etc/GMT-1 is one hour ahead of UTC all year"
