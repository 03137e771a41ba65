package csvfile

import (
	"testing"
	"time"
)

// sameZone compares zones by name: a loaded zone is a new value each time.
func sameZone(a, b *time.Location) bool { return a.String() == b.String() }

// Times as written against UTC. Clock changes: in the United Kingdom by the Summer Time
// Act 1972 as amended (last Sundays of March and October, 01:00 UTC), in New York by
// the Energy Policy Act of 2005 (second Sunday of March, first of November, 02:00 local);
// Lord Howe Island moves by half an hour, Perth not at all (from memory).
func TestWhen(t *testing.T) {
	for _, c := range []struct {
		zone, written, utc string // utc empty: refused
		doubt              bool
	}{
		{"UTC", "2026-03-10 08:05", "2026-03-10T08:05:00Z", false},
		{"UTC", "2026-03-10T08:05", "2026-03-10T08:05:00Z", false},
		{"UTC", "2026-03-10  08:05:30", "2026-03-10T08:05:30Z", false},
		{"UTC", "2026-03-10T08:05:30.25", "2026-03-10T08:05:30.25Z", false},
		{"Europe/London", "2026-03-10T08:05:30+02:00", "2026-03-10T06:05:30Z", false},
		{"Europe/London", "2026-03-10T08:05:30-0330", "2026-03-10T11:35:30Z", false},
		{"Europe/London", "2026-07-10T08:05:30Z", "2026-07-10T08:05:30Z", false},
		{"Europe/London", "2026-07-10 08:05", "2026-07-10T07:05:00Z", false},
		{"Europe/London", "2026-01-10 08:05", "2026-01-10T08:05:00Z", false},
		{"Europe/London", "2026-03-29 00:59", "2026-03-29T00:59:00Z", false},
		{"Europe/London", "2026-03-29 01:00", "2026-03-29T01:00:00Z", true}, // does not exist
		{"Europe/London", "2026-03-29 01:59", "2026-03-29T01:59:00Z", true},
		{"Europe/London", "2026-03-29 02:00", "2026-03-29T01:00:00Z", false},
		{"Europe/London", "2026-10-25 00:59", "2026-10-24T23:59:00Z", false},
		{"Europe/London", "2026-10-25 01:00", "2026-10-25T00:00:00Z", true}, // twice: the first
		{"Europe/London", "2026-10-25 01:59", "2026-10-25T00:59:00Z", true},
		{"Europe/London", "2026-10-25 02:00", "2026-10-25T02:00:00Z", false},
		{"Europe/London", "2026-10-25T01:30+00:00", "2026-10-25T01:30:00Z", false},
		{"America/New_York", "2026-03-08 02:30", "2026-03-08T07:30:00Z", true},
		{"America/New_York", "2026-11-01 01:30", "2026-11-01T05:30:00Z", true},
		{"America/New_York", "2026-11-01 02:30", "2026-11-01T07:30:00Z", false},
		{"Australia/Lord_Howe", "2026-04-05 01:45", "2026-04-04T14:45:00Z", true},
		{"Australia/Perth", "2026-04-05 01:45", "2026-04-04T17:45:00Z", false},
		{"UTC", "2024-02-29 12:00", "2024-02-29T12:00:00Z", false},
		{"UTC", "2026-02-29 12:00", "", false},
		{"UTC", "2026-03-10 24:00", "", false},
		{"UTC", "2026-03-10 12:60", "", false},
		{"UTC", "2026-13-10 12:00", "", false},
		{"UTC", "2026-3-10 8:05", "", false},
		{"UTC", "10/03/2026 08:05", "", false},
		{"UTC", "08:05", "", false},
	} {
		files := edit(t, "readings.csv", "2026-03-15 02:50", c.written)
		files["survey.csv"] = "item,value,unit\ntime_zone," + c.zone + ",\n"
		s, ps := read(t, files)
		got := s.Readings[0].Time
		if c.utc == "" {
			if !got.IsZero() || len(ps) != 1 || s.Readings[0].SetAside == "" {
				t.Errorf("%q was read as %s: %s", c.written, got, lines(ps))
			}
			continue
		}
		want, err := time.Parse(time.RFC3339Nano, c.utc)
		if err != nil {
			t.Fatal(err)
		}
		if !got.Equal(want) || (len(ps) == 1) != c.doubt {
			t.Errorf("%s, %q: %s, want %s; %s", c.zone, c.written, got.UTC(), c.utc, lines(ps))
		}
		if got.Location().String() != c.zone {
			t.Errorf("%q is shown in %s", c.written, got.Location())
		}
	}
}
