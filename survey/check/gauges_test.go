package check

import (
	"testing"
	"time"

	"tapround/survey"
)

func TestWorkingRange(t *testing.T) {
	s := site()
	s.Gauges[2].High = 40e5 // T3 shows 6.8 and 6.2 bar
	s.Gauges[2].Accuracy = survey.Some(0.001 * 10 / 40)
	a := only(t, s, lowOnScale, "G3")
	says(t, a.Statement, "at T3 in rounds A, B")
	says(t, a.Evidence, "2 readings at 15 to 17 % of the span")
	says(t, a.Limit, "25 %", "customary")
	if a.Stay {
		t.Error("nobody need stay for it")
	}

	s = site()
	s.Gauges[2].High, s.Gauges[2].Accuracy = 7.2e5, survey.Some(0.001)
	a = only(t, s, endOfScale, "G3")
	says(t, a.Evidence, "1 reading at 94 % of the span")

	s = site()
	s.Gauges[2].High, s.Gauges[2].Accuracy = 6.7e5, survey.Some(0.001)
	as := look(s)
	if len(as) != 2 || as[0].Rule != beyondScale || !as[0].Stay || as[1].Rule != endOfScale {
		t.Errorf("got\n%s", text(as))
	}

	// A quarter and nine tenths themselves are within; a compound gauge counts its whole span.
	s = site()
	s.Gauges[0].Low, s.Gauges[0].High, s.Gauges[0].Accuracy = -1e5, 21e5, survey.Some(0.0005) // 5.5 bar is 29 % of the span, 26 % of 21 bar
	quiet(t, "compound gauge", s)

	// A flow meter and a differential gauge at zero are where they should be.
	s = site()
	s.Gauges = append(s.Gauges, survey.Gauge{Name: "D1", Kind: survey.DifferenceGauge, High: 50e3, Unit: "kPa", Accuracy: survey.Some(0.0025), Resolution: survey.Some(10)})
	s.Readings = append(s.Readings, survey.Reading{Round: "A", Tap: "T3", OtherTap: "T4", Kind: survey.Difference, Gauge: "D1", Value: 0, Unit: "kPa"})
	quiet(t, "differential gauge at rest", s)

	// Pinned below zero: a plain gauge cannot show it.
	s = site()
	tap(s, "T6").Elevation = 100
	reading(s, "A", "T6").Value = 0
	reading(s, "B", "T6").Value = -0.4e5
	if found := first(look(s), beyondScale); len(found) != 1 || found[0].Subject != "G6" {
		t.Errorf("below zero on 0 to 10 bar: %s", text(found))
	}
}

func TestRepeatsThatDisagree(t *testing.T) {
	again := func(steps float64) *survey.Survey {
		s := site()
		r := *reading(s, "B", "T4")
		r.Value += steps * 500
		r.Written, r.Source = "5.11", survey.Source{File: "readings.csv", Line: 99}
		s.Readings = append(s.Readings, r)
		return s
	}
	quiet(t, "two steps", again(2))
	a := only(t, again(3), "repeats disagree", "T4")
	says(t, a.Statement, "round B")
	says(t, a.Evidence, "5.1009 bar, 5.11 bar", "3.0 steps apart")
	says(t, a.Limit, "2 smallest steps")
	if !a.Stay || len(a.Sources) != 2 {
		t.Errorf("%+v", a)
	}
	// A gauge without a stated step: a tenth of its class error of 1 kPa is 100 Pa.
	s := again(0.3)
	s.Gauges[3].Resolution = survey.Maybe{}
	quiet(t, "1.5 default steps", s)
	s.Readings[len(s.Readings)-1].Value += 100
	only(t, s, "repeats disagree", "T4")
}

func TestClock(t *testing.T) {
	at := func(day, hour, minute int) time.Time { return time.Date(2026, 3, day, hour, minute, 0, 0, time.UTC) }
	const rule = "time outside its round"
	for _, c := range []struct {
		when time.Time
		why  string // empty: within
	}{
		{at(10, 8, 0), ""}, {at(10, 9, 30), ""}, {time.Time{}, ""},
		{at(10, 20, 15), "half a day"}, {at(9, 20, 15), "half a day"}, {at(11, 8, 15), "by a day"}, {at(9, 8, 15), "by a day"},
		{at(10, 7, 20), "by an hour"}, {at(10, 10, 20), "by an hour"}, {at(10, 13, 0), "outside round A."},
	} {
		s := site()
		reading(s, "A", "T4").Time = c.when
		if c.why == "" {
			quiet(t, c.when.String(), s)
			continue
		}
		a := only(t, s, rule, "A")
		says(t, a.Statement, "The time of 1 reading", c.why)
		says(t, a.Evidence, "T4 at "+c.when.Format("2006-01-02 15:04"))
		says(t, a.Limit, "from 2026-03-10 08:00 to 2026-03-10 09:30")
	}
	// Readings that are off in one way are told together; a zone is not an error.
	s := site()
	for i := range s.Readings {
		if x := &s.Readings[i].Time; !x.IsZero() {
			*x = x.In(time.FixedZone("", 2*3600))
		}
	}
	quiet(t, "the same moments in another zone", s)
	for i := range s.Readings {
		if x := &s.Readings[i].Time; !x.IsZero() && s.Readings[i].Round == "A" {
			*x = x.Add(12 * time.Hour)
		}
	}
	a := only(t, s, rule, "A")
	says(t, a.Statement, "The times of 6 readings")
	says(t, a.Evidence, "and more")
	if len(a.Sources) != 6 {
		t.Errorf("%d sources", len(a.Sources))
	}
	s = site()
	s.Rounds[0].Start, s.Rounds[0].End = time.Time{}, time.Time{}
	reading(s, "A", "T4").Time = at(12, 3, 0)
	quiet(t, "a round without times", s)
}
