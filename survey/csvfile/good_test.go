package csvfile

import (
	"fmt"
	"maps"
	"strconv"
	"strings"
	"testing"
	"testing/fstest"

	"tapround/survey"
)

// good is a small survey that has every table and no fault; every figure is made up.
func good() map[string]string {
	return map[string]string{
		"survey.csv": `item,value,unit
title,"Mill Lane, spring round",
time_zone,Europe/London,
site_level,120,m
latitude,54,deg
water_temperature,9,C
friction_law,darcy-weisbach,
energy_price,0.24,GBP/kWh
pump_efficiency,70,%
hours_per_year,8000,h
`,
		"points.csv": `point,kind,elevation [m],x [m],y [m],note
R,reservoir,150,0,0,
A,junction,120,500,0,
B,junction,118,505,0,
C,junction,110,1300,0,
Z,outlet,100,1700,0,
`,
		"pipes.csv": `pipe,from,to,length [m],bore [mm],material,laid,roughness [mm],c_value,group,note,spread
P1,R,A,500,200,cast iron,1950,1.5,,old,,
P2,B,C,800,150,PVC,1990,0.02,,,,1.4
P3,C,Z,400,100,,,0.1,,,,
`,
		"levels.csv": `pipe,at [m],elevation [m]
P1,100,140
P1,300,130
`,
		"fittings.csv": `fitting,pipe,at [m],kind,bore [mm],loss_coefficient,note,spread
E1,P1,0,entrance-sharp,,0.5,,
V1,P1,450,gate-valve,,0.15,,1.2
N1,P3,400,nozzle,50,0.05,,
`,
		"machines.csv": `machine,from,to,kind,speed [rpm],note
M1,A,B,pump,1480,
`,
		"duty.csv": `machine,flow [L/s],head [m],efficiency [%]
M1,0,40,
M1,10,38,60
M1,20,30,72
`,
		"taps.csv": `tap,pipe,at [m],point,elevation [m],elevation_sd [m],outlet_bore [mm],outlet_coefficient,note
T1,P1,250,,135,,,,
T2,,,C,110.5,0.02,,,
Q1,P2,100,,117,,,,
J1,,,B,118.4,,63.5,0.9,hydrant
`,
		"gauges.csv": `gauge,kind,low,high,unit,accuracy [%],resolution,line,checked,note,gain_sd [%]
G1,pressure,0,10,bar,0.25,0.01,water,2026-01-10,,
G2,absolute-pressure,0,1000,kPa,0.5,1,air,,,
D1,difference,0,50,kPa,0.5,0.1,,,,
F1,flow,0,40,L/s,0.5,0.1,,,,1
`,
		"gauge_checks.csv": `gauge,applied,indicated,unit,checked
G1,0,0.02,bar,2026-01-10
G1,10,10.05,bar,2026-01-10
`,
		"rounds.csv": `round,start,end,water_temperature [C],barometer [kPa],note
1,2026-03-15 02:40,2026-03-15 04:10,7.6,,night
2,2026-03-15 10:00,2026-03-15 12:00,,100.2,
`,
		"conditions.csv": `round,item,condition,value,unit,sd
*,R,level,152.3,m,0.01
1,M1,stopped,,,
2,M1,speed,1450,rpm,
2,C,draw-off,4.5,L/s,0.1
2,B,draw-off,,L/s,
`,
		"readings.csv": `round,time,tap,other_tap,kind,gauge,reading,unit,gauge_height [m],depth [mm],remark
1,2026-03-15 02:50,T1,,static,G1,1.62,bar,0.4,,
1,2026-03-15 02:55,T2,,static,G2,510,kPa abs,,,
2,2026-03-15 10:20,T1,,static,G1,1.40,bar,0.4,,steady
2,2026-03-15 10:30,Q1,,flow,F1,21.5,L/s,,,
2,2026-03-15 10:40,T1,T2,difference,D1,33.1,kPa,,,
2,2026-03-15 10:50,T1,,velocity,D1,0.9,kPa,,100,
`,
		"readings/crew-2.csv": `round,time,tap,other_tap,kind,gauge,reading,unit,gauge_height [m],depth [mm],remark
2,2026-03-15 11:00,J1,,jet,G1,1.1,bar,,,
2,2026-03-15 11:05,T2,,static,G1,4.2,bar,0.3,,
`,
		"requirements.csv": `requirement,kind,item,to,at_flow [L/s],limit,unit,grade,note
A1,loss-at-most,T1,T2,20,12,m,,
A2,pressure-at-least,T2,,,3.5,bar,,
A3,roughness-at-most,P2,,,0.1,mm,,
`,
		"loggers.csv": `channel,file,tap,kind,gauge,unit,clock_offset [s],time_zone,note
ch1,east.csv,T1,static,G1,bar,-90,UTC,
`,
	}
}

func folderOf(files map[string]string) fstest.MapFS {
	m := fstest.MapFS{}
	for name, text := range files {
		m[name] = &fstest.MapFile{Data: []byte(text)}
	}
	return m
}

// reporter is what a test of any kind can say.
type reporter interface {
	Helper()
	Fatalf(string, ...any)
}

// read reads a folder and checks what must hold of any: rows are conserved, the
// problems come in their order, and a reading is used or says why not.
func read(t reporter, files map[string]string) (*survey.Survey, survey.Problems) {
	t.Helper()
	s, ps := ReadFolder(folderOf(files))
	conserved(t, s, ps)
	for i := 1; i < len(ps); i++ {
		if ps[i].Severity > ps[i-1].Severity {
			t.Fatalf("%q comes after %q", ps[i], ps[i-1])
		}
	}
	return s, ps
}

// conserved: for every file, rows are rows used and rows that a SetAside or Fatal
// problem names; and a reading is in use exactly where its row is.
func conserved(t reporter, s *survey.Survey, ps survey.Problems) {
	t.Helper()
	bad := map[survey.Source]bool{}
	for _, p := range ps {
		if p.Severity != survey.Notice {
			bad[p.Source] = true
		}
	}
	used := map[string]int{}
	for _, r := range s.Readings {
		if (r.SetAside != "") != bad[r.Source] {
			t.Fatalf("%s: set aside %q, named by a problem %v", r.Source, r.SetAside, bad[r.Source])
		}
		if r.SetAside == "" {
			used[r.Source.File]++
		}
	}
	for _, in := range s.Inputs {
		heading := 0
		if _, after, ok := strings.Cut(in.Understood, "heading in line "); ok {
			heading, _ = strconv.Atoi(after)
		}
		named := 0
		for place := range bad {
			if place.File == in.File && place.Line > heading {
				named++
			}
		}
		if in.Rows != in.Used+named {
			t.Fatalf("%s: %d rows, %d used, %d named by problems", in.File, in.Rows, in.Used, named)
		}
		if strings.Contains(in.File, "readings") && used[in.File] != in.Used {
			t.Fatalf("%s: %d rows used by the count, %d readings in use", in.File, in.Used, used[in.File])
		}
	}
}

// with gives the good survey with some files replaced; an empty text takes one away.
func with(files map[string]string) map[string]string {
	out := good()
	maps.Copy(out, files)
	for name, text := range out {
		if text == "" {
			delete(out, name)
		}
	}
	return out
}

// edit gives the good survey with one text in one file replaced.
func edit(t testing.TB, file, old, now string) map[string]string {
	t.Helper()
	files := good()
	if strings.Count(files[file], old) != 1 {
		t.Fatalf("%s has %q %d times", file, old, strings.Count(files[file], old))
	}
	files[file] = strings.Replace(files[file], old, now, 1)
	return files
}

func lines(ps survey.Problems) string {
	var b strings.Builder
	for _, p := range ps {
		fmt.Fprintf(&b, "%s: %s\n", p.Severity, p)
	}
	return b.String()
}

func TestGood(t *testing.T) {
	s, ps := read(t, good())
	ps = append(ps, s.Validate()...)
	if len(ps) != 0 {
		t.Errorf("problems of a survey without faults:\n%s", lines(ps))
	}
	if n := len(s.Inputs); n != 16 {
		t.Errorf("%d files on record, want 16", n)
	}
}
