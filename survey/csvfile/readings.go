package csvfile

import (
	"fmt"
	"strings"

	"tapround/survey"
	"tapround/survey/unit"
)

type readingRow struct {
	Round       string `csv:"round"`
	Time        string `csv:"time"`
	Tap         string `csv:"tap"`
	OtherTap    string `csv:"other_tap"`
	Kind        string `csv:"kind"`
	Gauge       string `csv:"gauge"`
	Reading     string `csv:"reading"`
	Unit        string `csv:"unit"`
	GaugeHeight string `csv:"gauge_height"`
	Depth       string `csv:"depth"`
	Remark      string `csv:"remark"`
}

var readingKinds = []survey.ReadingKind{survey.Static, survey.TotalHead, survey.Velocity, survey.Difference, survey.FlowRate, survey.WaterLevel, survey.Jet}

var readingWords = map[string]survey.ReadingKind{
	"pressure": survey.Static, "differential": survey.Difference, "waterlevel": survey.WaterLevel,
}

// crewMark begins the remark of a reading that the crew does not want used.
const crewMark = "!"

func readReadings(sh *sheet) {
	for r, x := range rowsOf[readingRow](sh) {
		reading := survey.Reading{OtherTap: x.OtherTap, Tap: x.Tap, Round: x.Round, Gauge: x.Gauge, Written: x.Reading, Unit: x.Unit,
			Remark: x.Remark, Source: r.at}
		crew := strings.HasPrefix(x.Remark, crewMark) && !r.garbled
		if crew {
			r.tell(survey.SetAside, "remark", x.Remark, "set aside by the crew's remark", "take the "+crewMark+" away to have it used")
			r.muted = true // nothing else about it needs mending
		}
		r.name("round", x.Round)
		r.name("tap", x.Tap)
		reading.Time = r.when("time", x.Time)
		reading.Kind = r.readingKind(x.Kind)
		var u unit.Unit
		if reading.Kind != "" {
			u = r.readingUnit(x.Unit, reading.Kind, x.Gauge)
		}
		reading.Value, reading.HalfRange = r.reading(x.Reading, u)
		reading.GaugeHeight = r.stated("gauge_height", x.GaugeHeight).V
		reading.Depth = r.stated("depth", x.Depth)
		r.copyOf(reading, x)
		if reading.SetAside = r.bad; crew {
			reading.SetAside = x.Remark
		}
		sh.survey.Readings = append(sh.survey.Readings, reading)
	}
}

func (r *row) readingKind(cell string) survey.ReadingKind {
	return choice(r, "kind", cell, readingKinds, readingWords)
}

// readingUnit reads the unit of a reading by what was read. Whether a pressure is
// absolute is said by its gauge.
func (r *row) readingUnit(cell string, k survey.ReadingKind, gauge string) unit.Unit {
	switch k {
	case survey.FlowRate:
		return r.unit(cell, unit.Flow, false)
	case survey.WaterLevel:
		return r.unit(cell, unit.Length, false)
	}
	return r.unit(cell, unit.Pressure, r.absolute[gauge])
}

// sentinels are what instruments write for no reading.
var sentinels = map[string]bool{"9999": true, "-9999": true, "99999": true, "-99999": true, "9999.9": true, "-9999.9": true}

// reading reads the value, or the middle of a range and half its width.
func (r *row) reading(cell string, u unit.Unit) (value, half float64) {
	if cell == "" {
		if !r.headed("reading").broken {
			r.fail("reading", "", "no reading is written", "read it again, or take the row away")
		}
		return in(unit.Unit{}, 0), 0
	}
	if sentinels[cell] {
		r.fail("reading", cell, "is what instruments write for no reading", "if it was read off the gauge, write it with one more decimal: "+cell+".0")
		return in(unit.Unit{}, 0), 0
	}
	ends := []string{cell}
	if _, ok := parseShape(cell); !ok {
		ends = rangeEnds(cell)
	}
	if len(ends) == 1 {
		return in(u, r.number("reading", cell)), 0
	}
	low, high := r.number("reading", ends[0]), r.number("reading", ends[1])
	if high < low {
		r.fail("reading", cell, "is a range whose second end is the smaller", "write the smaller end first")
		return in(unit.Unit{}, 0), 0
	}
	if r.bad == "" {
		r.tell(survey.Notice, "reading", cell, fmt.Sprintf("is a range; %g was used, with half a range of %.3g in its uncertainty", (low+high)/2, (high-low)/2), "")
	}
	return in(u, (low+high)/2), u.ToSIDifference((high - low) / 2)
}

// seenReading is where a row of readings stands.
type seenReading struct {
	file string
	line int
}

// copyOf sets a row aside that another file has too, at the same stated time. Two equal
// rows of one file, or without a time, are repeats of one reading: they count, and the
// former are told.
func (r *row) copyOf(x survey.Reading, as readingRow) {
	if x.Time.IsZero() || r.bad != "" {
		return
	}
	key := fmt.Sprint(x.Time.UnixNano(), "\x00", x.Round, "\x00", x.Tap, "\x00", x.OtherTap, "\x00", x.Kind, "\x00", x.Gauge, "\x00",
		x.Value, x.HalfRange, "\x00", x.Unit, "\x00", x.GaugeHeight, x.Depth, "\x00", x.Remark)
	first, twice := r.seen[key]
	switch {
	case !twice:
		r.seen[key] = seenReading{r.at.File, r.at.Line}
	case first.file != r.at.File:
		r.fail("", "", fmt.Sprintf("is the same row as %s, at the same time", survey.Source{File: first.file, Line: first.line}),
			"take one of them away; if both were read, write their own times")
	default:
		r.tell(survey.Notice, "time", as.Time, fmt.Sprintf("the whole row stands in line %d already; both were used as repeats", first.line),
			"take one away if it is a copy")
	}
}
