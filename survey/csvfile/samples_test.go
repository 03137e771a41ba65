package csvfile

import (
	"encoding/csv"
	"fmt"
	"math"
	"os"
	"strconv"
	"testing"

	"tapround/survey"
)

// facts lists every number of a survey by place and column, as survey.csv and the
// tables name it. Numbers that a table leaves out and a default fills are listed too.
func facts(s *survey.Survey) map[string]float64 {
	out := map[string]float64{}
	put := func(at survey.Source, column string, v float64) { out[fmt.Sprintf("%s %s", at, column)] = v }
	maybe := func(at survey.Source, column string, m survey.Maybe) {
		if m.OK {
			put(at, column, m.V)
		}
	}
	for _, x := range s.Points {
		put(x.Source, "elevation", x.Elevation)
		maybe(x.Source, "x", x.X)
		maybe(x.Source, "y", x.Y)
	}
	for _, x := range s.Pipes {
		put(x.Source, "length", x.Length)
		put(x.Source, "bore", x.Bore)
		maybe(x.Source, "laid", x.Laid)
		maybe(x.Source, "roughness", x.Roughness)
		maybe(x.Source, "c_value", x.C)
		maybe(x.Source, "spread", x.Spread)
	}
	for _, x := range s.Levels {
		put(x.Source, "at", x.At)
		put(x.Source, "elevation", x.Elevation)
	}
	for _, x := range s.Fittings {
		put(x.Source, "at", x.At)
		maybe(x.Source, "bore", x.Bore)
		maybe(x.Source, "loss_coefficient", x.K)
		maybe(x.Source, "spread", x.Spread)
	}
	for _, x := range s.Machines {
		maybe(x.Source, "speed", x.Speed)
		for _, d := range x.Duty {
			put(d.Source, "flow", d.Flow)
			put(d.Source, "head", d.Head)
			maybe(d.Source, "efficiency", d.Efficiency)
		}
	}
	for _, x := range s.Taps {
		put(x.Source, "at", x.At)
		put(x.Source, "elevation", x.Elevation)
		put(x.Source, "elevation_sd", x.ElevationSD)
		maybe(x.Source, "outlet_bore", x.OutletBore)
		maybe(x.Source, "outlet_coefficient", x.OutletCoefficient)
	}
	for _, x := range s.Gauges {
		put(x.Source, "low", x.Low)
		put(x.Source, "high", x.High)
		maybe(x.Source, "accuracy", x.Accuracy)
		maybe(x.Source, "resolution", x.Resolution)
		put(x.Source, "gain_sd", x.GainSD)
		for _, b := range x.Checks {
			put(b.Source, "applied", b.Applied)
			put(b.Source, "indicated", b.Indicated)
		}
	}
	for _, x := range s.Rounds {
		maybe(x.Source, "water_temperature", x.WaterTemperature)
		maybe(x.Source, "barometer", x.Barometer)
		put(x.Source, "start", float64(x.Start.Unix()))
		put(x.Source, "end", float64(x.End.Unix()))
	}
	for _, x := range s.Conditions {
		maybe(x.Source, "value", x.Value)
		maybe(x.Source, "sd", x.SD)
	}
	for _, x := range s.Readings {
		put(x.Source, "reading", x.Value)
		put(x.Source, "half range", x.HalfRange)
		put(x.Source, "gauge_height", x.GaugeHeight)
		maybe(x.Source, "depth", x.Depth)
		put(x.Source, "time", float64(x.Time.Unix()))
	}
	for _, x := range s.Requirements {
		maybe(x.Source, "at_flow", x.AtFlow)
		put(x.Source, "limit", x.Limit)
	}
	for _, x := range s.Channels {
		put(x.Source, "clock_offset", x.ClockOffset)
	}
	return out
}

// rounding is what two ways to round one product may differ by: the factor's own
// rounding and that of the product, each half a unit in the last place.
const rounding = 4e-16

// Every number of the two samples against its value in SI worked out apart from this
// code; see testdata/samples/README.md.
func TestSamples(t *testing.T) {
	for _, sample := range []struct {
		name     string
		aside    string // place of the reading that the crew does not want used
		readings int
	}{{"s1", "readings/crew-2.csv:36", 65}, {"s6", "readings.csv:21", 46}} {
		t.Run(sample.name, func(t *testing.T) {
			s, problems := ReadFolder(os.DirFS("testdata/samples/" + sample.name))
			if len(problems) != 1 || problems[0].Severity != survey.SetAside || problems[0].Source.String() != sample.aside {
				t.Errorf("problems: %v", problems)
			}
			if more := s.Validate(); len(more) != 0 {
				t.Errorf("Validate: %v", more)
			}
			if len(s.Readings) != sample.readings {
				t.Errorf("%d readings, want %d", len(s.Readings), sample.readings)
			}
			got := facts(s)
			want := 0
			for _, row := range table(t, "testdata/samples/"+sample.name+"_si.csv") {
				si, err := strconv.ParseFloat(row["si"], 64)
				if err != nil {
					t.Fatal(err)
				}
				place := row["file"] + ":" + row["line"] + " " + row["column"]
				if row["file"] == "survey.csv" {
					continue // below
				}
				want++
				if v, ok := got[place]; !ok || math.Abs(v-si) > rounding*math.Abs(si) {
					t.Errorf("%s, written %s: %.17g, want %.17g", place, row["written"], v, si)
				}
				delete(got, place)
			}
			if want < 250 {
				t.Errorf("only %d numbers were compared", want)
			}
			// What is left was not written: defaults, and times, which are tested apart.
			for place, v := range got {
				var file, column string
				if _, err := fmt.Sscan(place, &file, &column); err != nil {
					t.Fatal(err)
				}
				defaults := map[string]float64{"elevation_sd": 0.05, "at": 0, "gain_sd": 0, "gauge_height": 0, "half": 0}
				if d, ok := defaults[column]; column != "start" && column != "end" && column != "time" && (!ok || v != d) {
					t.Errorf("%s = %v was not written", place, v)
				}
			}
		})
	}
	s, _ := ReadFolder(os.DirFS("testdata/samples/s6"))
	if i := s.Info; i.SiteLevel != 812 || i.Latitude != -34.9 || i.WaterTemperature != 10.5 || i.Title != "line nozzle pressure survey" || i.FalseAlarmRate != 0.05 {
		t.Errorf("survey.csv of s6: %+v", i)
	}
}

// table reads a table of the tests as maps from heading to cell.
func table(t *testing.T, file string) []map[string]string {
	t.Helper()
	f, err := os.Open(file)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	var out []map[string]string
	for _, row := range rows[1:] {
		m := map[string]string{}
		for i, h := range rows[0] {
			m[h] = row[i]
		}
		out = append(out, m)
	}
	return out
}

// Bytes and rows of every file are on record for the audit trail.
func TestInputs(t *testing.T) {
	s, _ := ReadFolder(os.DirFS("testdata/samples/s6"))
	want := map[string]survey.Input{
		// Digests by sha256sum of GNU coreutils.
		"readings.csv": {SHA256: "342900a86522d6d53fd974ecea0ce2d1dfbd05e80761c9da0530a30f2f8873ef", Rows: 46, Used: 45, Understood: "UTF-8, semicolon-separated, decimal comma, heading line 2"},
		"pipes.csv":    {SHA256: "2c1ef1bd1052c7e8d94fdbdddc5595ead62e378b0a968c07ebafdbeb9cd14986", Rows: 12, Used: 12, Understood: "UTF-8 with a byte-order mark, semicolon-separated, decimal point, heading line 2"},
	}
	seen := 0
	for _, in := range s.Inputs {
		if w, ok := want[in.File]; ok {
			seen++
			if w.File = in.File; in != w {
				t.Errorf("got %+v\nwant %+v", in, w)
			}
		}
	}
	if seen != len(want) || len(s.Inputs) != 9 {
		t.Errorf("%d of %d files seen, %d on record", seen, len(want), len(s.Inputs))
	}
}
