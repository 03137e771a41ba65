package csvfile

import (
	"math"
	"reflect"
	"slices"
	"strings"
	"testing"
	"time"

	"tapround/survey"
)

// rowTypes are the structs that gocsv fills, by table.
var rowTypes = map[string]any{
	"survey.csv": infoRow{}, "points.csv": pointRow{}, "pipes.csv": pipeRow{}, "levels.csv": levelRow{}, "fittings.csv": fittingRow{},
	"machines.csv": machineRow{}, "duty.csv": dutyRow{}, "taps.csv": tapRow{}, "gauges.csv": gaugeRow{}, "gauge_checks.csv": checkRow{},
	"rounds.csv": roundRow{}, "conditions.csv": conditionRow{}, "readings.csv": readingRow{}, "requirements.csv": requirementRow{}, "loggers.csv": loggerRow{},
}

// gocsv leaves a field without a column at its zero and drops a column without a field,
// both in silence: the row types must have exactly the columns of their tables, and
// strings only, since its numbers turn an empty cell into 0.
func TestRowTypesFitTheTables(t *testing.T) {
	specs := tables()
	if len(specs) != len(rowTypes) {
		t.Fatalf("%d tables, %d row types", len(specs), len(rowTypes))
	}
	for _, sp := range specs {
		typ := reflect.TypeOf(rowTypes[sp.file])
		if typ == nil {
			t.Errorf("%s has no row type", sp.file)
			continue
		}
		var tags, names []string
		for i := range typ.NumField() {
			f := typ.Field(i)
			tags = append(tags, f.Tag.Get("csv"))
			if f.Type.Kind() != reflect.String {
				t.Errorf("%s: %s is a %s", sp.file, f.Name, f.Type)
			}
		}
		for _, c := range sp.columns {
			names = append(names, c.name)
		}
		if !slices.Equal(tags, names) {
			t.Errorf("%s: columns %v, fields %v", sp.file, names, tags)
		}
	}
}

// No spelling of a heading may mean two columns of a table.
func TestSpellingsAreOneColumns(t *testing.T) {
	for _, sp := range tables() {
		of := map[string]string{}
		for _, c := range sp.columns {
			for _, w := range append(strings.Fields(c.also), fold(c.name)) {
				if other, taken := of[w]; taken {
					t.Errorf("%s: %q is both %s and %s", sp.file, w, other, c.name)
				}
				if w != fold(w) {
					t.Errorf("%s: %q is not as fold leaves it", sp.file, w)
				}
				of[w] = c.name
			}
		}
	}
}

// The headings of the file format, word for word.
func TestHeadingsOfTheFormat(t *testing.T) {
	want := map[string]string{
		"survey.csv":       "item, value, unit",
		"points.csv":       "point, kind, elevation [m], x [m], y [m], note",
		"pipes.csv":        "pipe, from, to, length [m], bore [mm], material, laid, roughness [mm], c_value, group, note, spread",
		"levels.csv":       "pipe, at [m], elevation [m]",
		"fittings.csv":     "fitting, pipe, at [m], kind, bore [mm], loss_coefficient, note, spread",
		"machines.csv":     "machine, from, to, kind, speed [rpm], note",
		"duty.csv":         "machine, flow [L/s], head [m], efficiency [%]",
		"taps.csv":         "tap, pipe, at [m], point, elevation [m], elevation_sd [m], outlet_bore [mm], outlet_coefficient, note",
		"gauges.csv":       "gauge, kind, low, high, unit, accuracy [%], resolution, line, checked, note, gain_sd [%]",
		"gauge_checks.csv": "gauge, applied, indicated, unit, checked",
		"rounds.csv":       "round, start, end, water_temperature [C], barometer [kPa], note",
		"conditions.csv":   "round, item, condition, value, unit, sd",
		"readings.csv":     "round, time, tap, other_tap, kind, gauge, reading, unit, gauge_height [m], depth [mm], remark",
		"requirements.csv": "requirement, kind, item, to, at_flow [L/s], limit, unit, grade, note",
		"loggers.csv":      "channel, file, tap, kind, gauge, unit, clock_offset [s], time_zone, note",
	}
	for _, sp := range tables() {
		if got := sp.headings(); got != want[sp.file] {
			t.Errorf("%s: %s\nwant %s", sp.file, got, want[sp.file])
		}
	}
}

// Columns that a table cannot do without, by the file format: names, places, what was
// measured. Each in turn is taken out of the good survey.
func TestRequiredColumns(t *testing.T) {
	required := map[string]string{
		"survey.csv": "item value", "points.csv": "point kind elevation", "pipes.csv": "pipe from to length bore", "levels.csv": "pipe at elevation",
		"fittings.csv": "fitting pipe at kind", "machines.csv": "machine from to kind", "duty.csv": "machine flow head", "taps.csv": "tap elevation",
		"gauges.csv": "gauge kind low high unit", "gauge_checks.csv": "gauge applied indicated unit", "rounds.csv": "round",
		"conditions.csv": "round item condition value unit", "readings.csv": "round tap kind gauge reading unit",
		"requirements.csv": "requirement kind item limit", "loggers.csv": "channel file tap kind unit",
	}
	for _, sp := range tables() {
		for i, c := range sp.columns {
			files := good()
			rows := strings.SplitAfter(files[sp.file], "\n")
			head := strings.Split(strings.TrimSuffix(rows[0], "\n"), ",")
			if sp.file == readingsFile {
				delete(files, "readings/crew-2.csv")
			}
			head[i] = "tally"
			files[sp.file] = strings.Join(head, ",") + "\n" + strings.Join(rows[1:], "")
			_, ps := read(t, files)
			want := slices.Contains(strings.Fields(required[sp.file]), c.name)
			told := slices.ContainsFunc(ps, func(p survey.Problem) bool {
				return p.Severity == survey.Fatal && p.Line == 1 && p.Column == c.name && p.Reason == "the column is missing"
			})
			if told != want {
				t.Errorf("%s without %s: told %v, want %v", sp.file, c.name, told, want)
			}
		}
	}
}

// Tables that a survey cannot do without; the others may be missing without a word.
func TestRequiredTables(t *testing.T) {
	required := "points.csv pipes.csv taps.csv gauges.csv rounds.csv conditions.csv readings.csv"
	for _, sp := range tables() {
		files := with(map[string]string{sp.file: ""})
		if sp.file == readingsFile {
			delete(files, "readings/crew-2.csv")
		}
		_, ps := read(t, files)
		told := slices.ContainsFunc(ps, func(p survey.Problem) bool {
			return p.Severity == survey.Fatal && p.File == sp.file && strings.HasPrefix(p.Reason, "the table is missing: ")
		})
		if want := slices.Contains(strings.Fields(required), sp.file); told != want {
			t.Errorf("%s missing: told %v, want %v", sp.file, told, want)
		}
	}
}

// Rows are conserved in every table, whatever stands in them: one too short, one with a
// word in every cell, and one twice over.
func TestRowsConserved(t *testing.T) {
	for _, sp := range tables() {
		files := good()
		text := files[sp.file]
		rows := strings.Split(strings.TrimSuffix(text, "\n"), "\n")
		junk := strings.Repeat("junk,", len(sp.columns)-1) + "junk"
		files[sp.file] = text + "x\n" + junk + "\n" + rows[1] + "\n"
		s, ps := read(t, files) // looks at the sums
		i := slices.IndexFunc(s.Inputs, func(in survey.Input) bool { return in.File == sp.file })
		in := s.Inputs[i]
		if in.Rows != len(rows)+2 || in.Used >= in.Rows {
			t.Errorf("%s: %d rows, %d used, of %d\n%s", sp.file, in.Rows, in.Used, len(rows)+2, lines(ps))
		}
	}
}

// A crew's sheet as it comes: lines above the heading, decimal commas and points, marks
// for "the same", a range, a gap, a reading that could not be taken. Invented.
func TestCrewSheet(t *testing.T) {
	s, ps := read(t, with(map[string]string{"readings/crew-2.csv": `Mill Lane round 2;;;;;;;
crew 2, J. and M.;;;;;;;

Round;Time;Tap;Kind;Gage;Reading;Unit;Remarks
2;2026-03-15 11:00;T1;static;G1;5,71;bar;H22 open, steady
"        ;2026-03-15 11:05;T2;do.;"     ;5.4-5.6;"        ;jumping
2;2026-03-15 11:10;T2;static;;78;psi;6" ferrule; G04? borrowed
2;2026-03-15 11:15;T1;static;G1;n/a;bar;cap leaking
2;2026-03-15 11:20;T1;static;G1;5,70;bar;! wrong cock
`}))
	want := `set aside: readings/crew-2.csv:7 "2;2026-03-15 11:10;T2;static;;78;psi;6\" ferrule;G04? borrowed": has 9 cells under 8 headings; fill up or take away cells until the row fits the heading; an empty cell needs its delimiter too
set aside: readings/crew-2.csv:8, Reading "n/a": says that there is no value; read it again; if that is not possible nothing needs mending
set aside: readings/crew-2.csv:9, Remarks "! wrong cock": set aside by the crew's remark; take the ! away to have it used
notice: readings/crew-2.csv: numbers of this file have decimal points in some rows and decimal commas in others; each was read by its own mark; use one decimal mark in a file
notice: readings/crew-2.csv:1 "Mill Lane round 2": 2 lines above the heading were passed over, the last is line 2; put # before lines that are not part of the table
notice: readings/crew-2.csv:6, Reading "5.4-5.6": is a range; 5.5 was used, with half a range of 0.1 in its uncertainty
notice: readings/crew-2.csv:6, Gage "\"": is a ditto mark; it was read as the cell above
notice: readings/crew-2.csv:6, Kind "do.": is a ditto mark; it was read as the cell above
notice: readings/crew-2.csv:6, Round "\"": is a ditto mark; it was read as the cell above
notice: readings/crew-2.csv:6, Unit "\"": is a ditto mark; it was read as the cell above
`
	if got := lines(ps); got != want {
		t.Errorf("got\n%s\nwant\n%s", got, want)
	}
	r := s.Readings[len(s.Readings)-5:]
	if r[0].Value != 571000 || r[1].Value != 550000 || math.Abs(r[1].HalfRange-10000) > 1e-6 || r[1].Gauge != "G1" || r[1].Round != "2" || r[1].Kind != survey.Static ||
		r[0].Remark != "H22 open, steady" || r[4].SetAside != "! wrong cock" || r[4].Value != 570000 {
		t.Errorf("%+v", r)
	}
}

func TestCutUnit(t *testing.T) {
	for heading, want := range map[string][2]string{
		"length [m]": {"length", "m"}, "length[m]": {"length", "m"}, "length ( m )": {"length", "m"}, "reading [bar(g)]": {"reading", "bar(g)"},
		"reading (bar(g))": {"reading", "bar(g)"}, "length": {"length", ""}, "[m]": {"[m]", ""}, "depth [mm": {"depth [mm", ""}, "depth mm]": {"depth mm]", ""},
		"efficiency [%]": {"efficiency", "%"}, "length []": {"length", ""},
	} {
		if name, u, _ := cutUnit(heading); name != want[0] || u != want[1] {
			t.Errorf("%q is cut into %q and %q", heading, name, u)
		}
	}
}

// Headings as crews write them.
func TestSpellings(t *testing.T) {
	for _, c := range []struct{ file, heading, column string }{
		{"pipes.csv", "Inside Diameter [in]", "bore"}, {"pipes.csv", "DIA. (mm)", "bore"}, {"pipes.csv", "C-factor", "c_value"},
		{"pipes.csv", "Year_Laid", "laid"}, {"pipes.csv", "k-s [mm]", "roughness"}, {"pipes.csv", "Length\n[m]", "length"},
		{"fittings.csv", "Station [ft]", "at"}, {"fittings.csv", "chainage [m]", "at"}, {"taps.csv", "Elev. [ft]", "elevation"},
		{"taps.csv", "elevation SD [m]", "elevation_sd"}, {"gauges.csv", "Gage No.", "gauge"}, {"gauges.csv", "max", "high"},
		{"readings.csv", "Gage", "gauge"}, {"readings.csv", "gage height [ft]", "gauge_height"}, {"readings.csv", "Remarks (weather etc.)", "remark"},
		{"readings.csv", "OtherTap", "other_tap"}, {"rounds.csv", "Water Temp [°C]", "water_temperature"}, {"duty.csv", "Eff [%]", "efficiency"},
	} {
		for _, sp := range tables() {
			if sp.file != c.file {
				continue
			}
			name, u, _ := cutUnit(c.heading)
			i, ok := sp.find(c.heading, name)
			if !ok || sp.columns[i].name != c.column {
				t.Errorf("%s: %q is not found as %s", c.file, c.heading, c.column)
			} else if col := sp.columns[i]; col.kind == measured {
				if _, err := parseUnit(u, col); err != nil {
					t.Errorf("%q: %v", c.heading, err)
				}
			}
		}
	}
}

// What is left out gets the file format's default, and nothing else does.
func TestDefaults(t *testing.T) {
	s, _ := read(t, with(map[string]string{"survey.csv": ""}))
	i := s.Info
	if i.TimeZone != time.UTC || i.SiteLevel != 0 || i.Latitude != 45 || i.WaterTemperature != 10 || i.FrictionLaw != survey.DarcyWeisbach ||
		i.FalseAlarmRate != 0.05 || i.AsNewYear.OK || i.Cost != (survey.Cost{}) {
		t.Errorf("defaults of survey.csv: %+v", i)
	}
	s, _ = read(t, good())
	if t1 := s.Taps[0]; t1.ElevationSD != 0.05 || t1.OutletBore.OK {
		t.Errorf("tap: %+v", t1)
	}
	if p := s.Pipes[0]; p.C.OK || p.Spread.OK || !p.Roughness.OK {
		t.Errorf("pipe: %+v", p)
	}
	if g := s.Gauges[2]; g.Line != survey.WaterLine || s.Gauges[1].Line != survey.AirLine || g.GainSD != 0 {
		t.Errorf("gauge: %+v", g)
	}
	if c := s.Conditions[4]; c.Value.OK || c.SD.OK {
		t.Errorf("an empty value is to be estimated: %+v", c)
	}
	if r := s.Readings[1]; r.GaugeHeight != 0 || r.Depth.OK {
		t.Errorf("reading: %+v", r)
	}
	// A stated nought is not the same.
	s, _ = read(t, edit(t, "taps.csv", "T1,P1,250,,135,,", "T1,P1,250,,135,0,"))
	if sd := s.Taps[0].ElevationSD; sd != 0 {
		t.Errorf("elevation_sd 0 was read as %v", sd)
	}
}

// What single cells become, in SI.
func TestCells(t *testing.T) {
	// Water column 9806.65 Pa a metre; US gallon 231 cubic inches; foot 0.3048 m.
	s, ps := read(t, with(map[string]string{
		"survey.csv": "item,value,unit\nTime Zone,Europe/London,\nsite level,400,ft\nwater-temperature,50,F\nenergy_price,120,EUR/MWh\npump_efficiency,0.7,\nhours_per_year,333.25,d\nflow_exceeded,100,gpm\nfalse_alarm_rate,1,%\nas_new_year,2026,\nfriction_law,Hazen Williams,\n",
		"readings.csv": `round,time,tap,other_tap,kind,gauge,reading,unit,gauge_height [ft],depth [in],remark
1,,T1,,Static,G1,16.2,m,2,,
1,,T1,,static,G1,16.1-16.4,m,2,,=SUM(A1) as text
1,,T2,,static,G2,74,psia,,,"two
lines"
2,,Q1,,flow,F1,100,gpm,,,
2,,T1,,velocity,D1,30,mm,,4,
`,
		"conditions.csv": "round,item,condition,value,unit,sd\n*,R,level,500,ft,0.1\n2,C,Draw Off,-30,L/min,3\n2,M1,speed,24,Hz,\n1,P2,SHUT,,,\n",
	}))
	if n := len(ps); n != 1 || ps[0].Severity != survey.Notice {
		t.Errorf("one notice, of the range, was to come:\n%s", lines(ps))
	}
	i := s.Info
	check := func(what string, got, want float64) {
		t.Helper()
		if math.Abs(got-want) > 1e-14*math.Abs(want) {
			t.Errorf("%s: %.17g, want %.17g", what, got, want)
		}
	}
	gpm := 231 * math.Pow(0.0254, 3) / 60
	check("site level", i.SiteLevel, 121.92)
	check("water temperature", i.WaterTemperature, 10)
	check("price of a kWh", i.Cost.EnergyPrice.V, 0.12)
	check("pump efficiency", i.Cost.PumpEfficiency.V, 0.7)
	check("hours a year", i.Cost.HoursPerYear.V, 7998)
	check("flow exceeded", i.Cost.FlowExceeded.V, 100*gpm)
	check("false alarm rate", i.FalseAlarmRate, 0.01)
	if i.Cost.Currency != "EUR" || i.FrictionLaw != survey.HazenWilliams || i.TimeZone.String() != "Europe/London" || i.AsNewYear != survey.Some(2026) {
		t.Errorf("%+v", i)
	}
	r := s.Readings
	check("static", r[0].Value, 16.2*9806.65)
	check("gauge height", r[0].GaugeHeight, 0.6096)
	check("middle of a range", r[1].Value, 16.25*9806.65)
	check("half of a range", r[1].HalfRange, 0.15*9806.65)
	check("absolute", r[2].Value, 74*6894.757293168361)
	check("flow", r[3].Value, 100*gpm)
	check("velocity", r[4].Value, 30*9.80665)
	check("depth", r[4].Depth.V, 0.1016)
	if r[1].Remark != "=SUM(A1) as text" || r[2].Remark != "two\nlines" || r[3].Source.Line != 6 || r[1].Written != "16.1-16.4" || r[2].Unit != "psia" {
		t.Errorf("%+v\n%+v\n%+v", r[1], r[2], r[3])
	}
	c := s.Conditions
	check("level", c[0].Value.V, 152.4)
	check("its uncertainty", c[0].SD.V, 0.03048)
	check("inflow", c[1].Value.V, -0.0005)
	check("speed", c[2].Value.V, 48*math.Pi)
	if c[0].Round != survey.EveryRound || c[1].Kind != survey.DrawOff || c[3].Kind != survey.ShutOff || c[3].Value.OK {
		t.Errorf("%+v", c)
	}
}

// What instruments write for no reading is no reading; one decimal more says that it was
// read.
func TestSentinels(t *testing.T) {
	for cell, aside := range map[string]bool{"9999": true, "-9999": true, "99999": true, "-99999": true, "9999.9": true, "-9999.9": true,
		"9999.0": false, "999": false, "9998": false, "-9999.00": false} {
		s, _ := read(t, edit(t, "readings.csv", "1.62,bar", cell+",Pa"))
		if got := s.Readings[0].SetAside != ""; got != aside {
			t.Errorf("%s is set aside: %v", cell, got)
		}
	}
}

// A gauge that reads above vacuum shows the bare unit, which converts back.
func TestAbsoluteGauge(t *testing.T) {
	s, ps := read(t, edit(t, "gauges.csv", "0,1000,kPa", "0,10,bar abs"))
	if g := s.Gauges[1]; len(ps) != 0 || g.Unit != "bar" || g.High != 1e6 {
		t.Errorf("%+v\n%s", g, lines(ps))
	}
}
