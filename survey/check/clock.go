package check

import (
	"fmt"
	"strings"
	"time"

	"tapround/survey"
)

// clock says which readings bear a time outside their round, once for each round and
// each way of explaining it.
func clock(v *view) []survey.Alert {
	var out []survey.Alert
	for _, r := range v.rounds {
		var order []string
		found := map[string]*strays{}
		for _, h := range r.heads {
			for _, x := range h.Rows {
				why, outside := r.outside(x.Time)
				if !outside {
					continue
				}
				if found[why] == nil {
					found[why] = &strays{}
					order = append(order, why)
				}
				found[why].add(h.Tap, x)
			}
		}
		for _, why := range order {
			s := found[why]
			out = append(out, survey.Alert{Rule: "time outside its round", Subject: r.Name,
				Statement: fmt.Sprintf("%s outside round %s%s.", s.lie(), r.Name, why),
				Evidence:  s.times(), Limit: r.span(), Action: "Correct the time, or the round the line belongs to; check that date, half of the day and time zone were meant so.",
				Sources: s.sources})
		}
	}
	return out
}

// outside reports whether a stated time lies outside a round, and words what would
// explain it. A round without start or end is open on that side.
func (r round) outside(t time.Time) (why string, yes bool) {
	if t.IsZero() || r.holds(t) {
		return "", false
	}
	for _, x := range []struct {
		shift time.Duration
		words string
	}{
		{12 * time.Hour, ", by half a day: morning written for afternoon, or the other way"},
		{24 * time.Hour, ", by a day: the date"},
		{time.Hour, ", by an hour: summer time or the time zone"},
	} {
		if r.holds(t.Add(x.shift)) || r.holds(t.Add(-x.shift)) {
			return x.words, true
		}
	}
	return "", true
}

func (r round) holds(t time.Time) bool {
	return (r.Start.IsZero() || !t.Before(r.Start)) && (r.End.IsZero() || !t.After(r.End))
}

const stamp = "2006-01-02 15:04"

func (r round) span() string {
	from, to := "open", "open"
	if !r.Start.IsZero() {
		from = r.Start.Format(stamp)
	}
	if !r.End.IsZero() {
		to = r.End.Format(stamp)
	}
	return fmt.Sprintf("round %s from %s to %s (rounds.csv)", r.Name, from, to)
}

// strays are readings with the same kind of wrong time.
type strays struct {
	n       int
	shown   []string
	sources []survey.Source
}

func (s *strays) add(tap string, x survey.Reading) {
	const most = 5
	if s.n++; s.n <= most {
		s.shown = append(s.shown, tap+" at "+x.Time.Format(stamp))
	} else if s.n == most+1 {
		s.shown = append(s.shown, "and more")
	}
	s.sources = append(s.sources, x.Source)
}

func (s *strays) lie() string {
	if s.n == 1 {
		return "The time of 1 reading lies"
	}
	return fmt.Sprintf("The times of %d readings lie", s.n)
}

func (s *strays) times() string { return strings.Join(s.shown, ", ") }
