package sample

import (
	"fmt"
	"math"

	"tapround/report"
	"tapround/survey"
)

const g = 9.81

// leg is one pipe of the route with the flow in each round, L/s.
type leg struct {
	pipe, from, to    string
	length, bore      float64
	expected, fitted  float64 // roughness, m
	fitting           string
	at                float64
	kExpected, kFound float64
	flow              [5]float64
	measured          bool
}

var route = []leg{
	{pipe: "P1", from: "R1", to: "N1", length: 620, bore: 0.4, expected: 0.3e-3, fitted: 0.31e-3, fitting: "E1", at: 0, kExpected: 0.05, kFound: 0.05, flow: [5]float64{11.7, 62.1, 66.9, 68.4, 80.3}, measured: true},
	{pipe: "P2", from: "N1", to: "N2", length: 1450, bore: 0.35, expected: 1.5e-3, fitted: 9.1e-3, flow: [5]float64{11.7, 62.1, 66.9, 68.4, 80.3}},
	{pipe: "P3", from: "N2", to: "N3", length: 1820, bore: 0.35, expected: 0.3e-3, fitted: 0.27e-3, fitting: "SV-004", at: 1800, kExpected: 0.12, kFound: 0.12, flow: [5]float64{11.7, 62.1, 46.9, 68.4, 80.3}},
	{pipe: "P4", from: "N3", to: "N4", length: 740, bore: 0.25, expected: 1.5e-3, fitted: 1.38e-3, flow: [5]float64{7.1, 37.3, 28.1, 41.9, 49.4}},
	{pipe: "P6", from: "N4", to: "N6", length: 560, bore: 0.2, expected: 1.5e-3, fitted: 1.61e-3, flow: [5]float64{4.6, 23.1, 18.4, 31.5, 39.8}},
	{pipe: "P9", from: "N6", to: "N7", length: 820, bore: 0.2, expected: 1.5e-3, fitted: 1.52e-3, fitting: "SV-031", at: 410, kExpected: 0.15, kFound: 45.2, flow: [5]float64{2.6, 12.1, 8.9, 19.0, 26.6}},
	{pipe: "P12", from: "N7", to: "N9", length: 1150, bore: 0.2, expected: 0.05e-3, fitted: 0.048e-3, fitting: "SV-036", at: 600, kExpected: 0.15, kFound: 0.15, flow: [5]float64{0.9, 3.1, 2.2, 11.5, 16.9}},
	{pipe: "P18", from: "N9", to: "N16", length: 450, bore: 0.15, expected: 0.3e-3, fitted: 0.3e-3, flow: [5]float64{0.14, 1.1, 0.8, 25.7, 30.6}},
}

var level = map[string]float64{"R1": 241, "N1": 237.8, "N2": 220.4, "N3": 185.2, "N4": 177.5, "N6": 170.2, "N7": 164.5, "N9": 159.6, "N16": 158.5,
	"N10": 195.5, "N11": 195.5, "R2": 258.5}

// vertex is one place of the lines.
type vertex struct {
	x, at              float64
	pipe               string
	total, piezo       float64
	expTotal, expPiezo float64
	ground             float64
}

type way struct {
	round int
	vs    []vertex
}

func (l leg) velocityHead(round int) float64 {
	v := l.flow[round] / 1e3 / (math.Pi / 4 * l.bore * l.bore)
	return 1.05 * v * v / (2 * g)
}

// loss along part of a leg, by an explicit friction formula; good enough to draw.
func (l leg) loss(round int, k, length float64) float64 {
	v := l.flow[round] / 1e3 / (math.Pi / 4 * l.bore * l.bore)
	re := v * l.bore / 1.35e-6
	f := 0.25 / math.Pow(math.Log10(k/l.bore/3.7+5.74/math.Pow(re, 0.9)), 2)
	return f * length / l.bore * v * v / (2 * g)
}

func newWay(round int) way {
	w := way{round: round}
	x, h, e := 0.0, 246.0, 246.0
	for _, l := range route {
		vh := l.velocityHead(round)
		v := l.flow[round] / 1e3 / (math.Pi / 4 * l.bore * l.bore)
		put := func(at float64) {
			z := level[l.from] + (level[l.to]-level[l.from])*at/l.length
			w.vs = append(w.vs, vertex{x: x + at, at: at, pipe: l.pipe, total: h, piezo: h - vh, expTotal: e, expPiezo: e - vh, ground: z})
		}
		run := func(d float64) {
			h -= l.loss(round, l.fitted, d)
			e -= l.loss(round, l.expected, d)
		}
		put(0)
		if l.fitting != "" {
			run(l.at)
			if l.at > 0 {
				put(l.at)
			}
			h -= l.kFound * v * v / (2 * g)
			e -= l.kExpected * v * v / (2 * g)
			put(l.at)
		}
		run(l.length - l.at*b2f(l.fitting != ""))
		put(l.length)
		x += l.length
	}
	return w
}

func b2f(b bool) float64 {
	if b {
		return 1
	}
	return 0
}

func (w way) at(pipe string, end bool) vertex {
	var out vertex
	found := false
	for _, v := range w.vs {
		if v.pipe == pipe && (!found || end) {
			out, found = v, true
		}
	}
	return out
}

func (w way) profile(round string) report.Profile {
	p := report.Profile{Title: "R1 to N16", Round: round}
	var piezo, total, expTotal, expPiezo []report.XY
	for _, v := range w.vs {
		p.Ground = append(p.Ground, report.XY{X: v.x, Y: v.ground})
		piezo = append(piezo, report.XY{X: v.x, Y: v.piezo})
		total = append(total, report.XY{X: v.x, Y: v.total})
		expTotal = append(expTotal, report.XY{X: v.x, Y: v.expTotal})
		expPiezo = append(expPiezo, report.XY{X: v.x, Y: v.expPiezo})
	}
	p.Piezometric, p.Total, p.ExpectedTotal, p.ExpectedPiezo = [][]report.XY{piezo}, [][]report.XY{total}, [][]report.XY{expTotal}, [][]report.XY{expPiezo}
	x := 0.0
	p.Route = append(p.Route, report.Place{Name: "R1", Kind: "reservoir"})
	for i, l := range route {
		if l.fitting != "" {
			kind := "gate-valve"
			if l.fitting == "E1" {
				kind = "entrance-rounded"
			}
			p.Devices = append(p.Devices, report.Place{Name: l.fitting, Kind: kind, X: x + l.at})
		}
		if l.measured {
			p.Taps = append(p.Taps, report.Place{Name: "QM", Kind: "tap", X: x + 580})
		}
		x += l.length
		p.Route = append(p.Route, report.Place{Name: l.to, Kind: "junction", X: x})
		if l.to == "N16" {
			continue
		}
		v := w.at(l.pipe, true)
		p.Taps = append(p.Taps, report.Place{Name: l.to, Kind: "tap", X: x})
		// Up to 0.1 m off the line, as readings are; N6 carries gauge G07.
		y := v.piezo + 0.09*math.Sin(float64(7*i+3*w.round))
		gauge, note := fmt.Sprintf("G%02d", 1+i), ""
		if l.to == "N6" && w.round < 3 {
			y, gauge, note = y+1.23, "G07", "F3"
		}
		p.Measured = append(p.Measured, report.ProfileReading{Tap: l.to, Gauge: gauge, X: x, Y: y, Bar: 0.25, Text: fmt.Sprintf("%.2f bar", (y-v.ground-0.7)/10.2), Note: note})
	}
	v := w.at("P1", true)
	p.Measured = append(p.Measured, report.ProfileReading{Tap: "QM", Gauge: "G09", X: 580, Y: v.total + 0.05, Bar: 0.3, Total: true, Text: "0.79 bar"})
	p.Suspect = []report.Span{{From: 620, To: 2070, Label: "F1 fouled pipe"}, {From: 5190, To: 6010, Label: "F2 cause open"}}
	return p
}

func (w way) gradeRows(round string) []report.GradeRow {
	var out []report.GradeRow
	for _, v := range w.vs {
		out = append(out, report.GradeRow{Round: round, Pipe: v.pipe, At: v.at, Piezometric: survey.Some(v.piezo), Total: survey.Some(v.total), ExpectedTotal: survey.Some(v.expTotal)})
	}
	return out
}

func (w way) flowRows(round string) []report.FlowRow {
	var out []report.FlowRow
	for _, l := range route {
		q := l.flow[w.round] / 1e3
		f := report.FlowRow{Round: round, Pipe: l.pipe, Flow: survey.Some(q), Velocity: survey.Some(q / (math.Pi / 4 * l.bore * l.bore)),
			Low: survey.Some(q * 0.97), High: survey.Some(q * 1.03)}
		if l.measured {
			f.Measured = survey.Some(q*0.995 - 0.0001)
		}
		out = append(out, f)
	}
	return append(out, report.FlowRow{Round: round, Pipe: "BP1", Flow: survey.Some(b2f(round == "C") * 0.02)})
}

func (w way) lossRows(round string) []report.LossRow {
	var out []report.LossRow
	for _, l := range route[1 : len(route)-1] {
		a, b := w.at(l.pipe, false), w.at(l.pipe, true)
		fitted, expected := a.total-b.total, a.expTotal-b.expTotal
		m := fitted + 0.04
		items := []string{l.pipe}
		if l.fitting != "" {
			items = append(items, l.fitting)
		}
		p := survey.Some(0.31)
		if m-expected > 0.4 {
			p = survey.Some(0.9998)
		}
		out = append(out, report.LossRow{Round: round, FromTap: l.from, ToTap: l.to, Measured: survey.Some(m), Low: survey.Some(m - 0.29), High: survey.Some(m + 0.29),
			Expected: survey.Some(expected), Excess: survey.Some(m - expected), Fitted: survey.Some(fitted), ExcessU: survey.Some(0.17), Probability: p, Items: items})
	}
	return out
}

func (w way) headRows(round string, i int) []report.HeadRow {
	var out []report.HeadRow
	for n, l := range route[:len(route)-1] {
		v := w.at(l.pipe, true)
		z := v.ground + 0.7
		p := (v.piezo - z) * 9810
		row := report.HeadRow{Round: round, Tap: l.to, Time: fmt.Sprintf("2026-03-15T%02d:%02d:00Z", 3+4*i%20, 4*n+2), Kind: "static", Gauge: fmt.Sprintf("G%02d", 1+n),
			Reading: fmt.Sprintf("%.2f", p/1e5), Unit: "bar", Pressure: survey.Some(p), Elevation: survey.Some(z), PressureHead: survey.Some(v.piezo - z),
			VelocityHead: survey.Some(v.total - v.piezo), Piezometric: survey.Some(v.piezo), Total: survey.Some(v.total), U: survey.Some(0.104), Used: true,
			Source: survey.Source{File: "readings/crew-1.csv", Line: 2 + n + 7*i}}
		out = append(out, row)
	}
	return out
}

// odd are lines of the less usual kinds: a range, a decimal comma, set aside.
func odd() []report.HeadRow {
	s := survey.Some
	return []report.HeadRow{
		{Round: "D", Tap: "N7", Time: "2026-03-15T10:44:00Z", Kind: "static", Gauge: "G02", Reading: "5,4-5,6", Unit: "bar", Pressure: s(550000), Elevation: s(165.3),
			PressureHead: s(56.07), VelocityHead: s(0.012), Piezometric: s(221.37), Total: s(221.382), U: s(0.61), Used: true, Remark: "jumping", Source: survey.Source{File: "readings/crew-2.csv", Line: 9}},
		{Round: "D", Tap: "N8", Kind: "static", Gauge: "G04", Reading: "78", Unit: "psi", Remark: "!cap leaking", Elevation: s(163.1), Source: survey.Source{File: "readings/crew-2.csv", Line: 27}},
		{Round: "E", Tap: "QM", Depth: s(0.2), Time: "2026-03-15T15:58:00Z", Kind: "total", Gauge: "G09", Reading: "0,79", Unit: "bar", Pressure: s(79000), Elevation: s(238),
			PressureHead: s(8.05), VelocityHead: s(0.022), Piezometric: s(246.03), Total: s(246.05), U: s(0.15), Used: true, Source: survey.Source{File: "readings/crew-2.csv", Line: 30}},
		{Round: "E", Tap: "N1", OtherTap: "N2", Time: "2026-03-15T16:02:00Z", Kind: "difference", Gauge: "D1", Reading: "0.98", Unit: "bar", U: s(0.05), Used: true, Source: survey.Source{File: "readings/crew-2.csv", Line: 31}},
	}
}

func (w way) differences(round string) []report.ResidualRow {
	var out []report.ResidualRow
	for n, l := range route[:len(route)-1] {
		v := w.at(l.pipe, true)
		d := 0.09 * math.Sin(float64(7*n+3*w.round))
		out = append(out, report.ResidualRow{Round: round, Tap: l.to, Kind: "static", Gauge: fmt.Sprintf("G%02d", 1+n), Measured: v.piezo + d, Fitted: v.piezo, Unit: "m",
			Residual: d, U: 0.104, Normalised: survey.Some(d / 0.08), Redundancy: survey.Some(0.59)})
	}
	return append(out, report.ResidualRow{Round: round, Tap: "QM", Kind: "flow", Gauge: "FM1", Measured: route[0].flow[w.round]*0.995 - 0.1, Fitted: route[0].flow[w.round], Unit: "L/s",
		Residual: -0.005*route[0].flow[w.round] - 0.1, U: 0.29, Redundancy: survey.Some(0.02)})
}

// Booster is a route through a machine that is running: the lines rise.
func Booster() report.Profile {
	p := report.Profile{Title: "R1 to R2", Round: "C"}
	xs := []float64{0, 620, 2070, 3040, 3050, 3050, 3056, 4396, 4396}
	hs := []float64{246, 245.7, 239.0, 237.0, 237.0, 263.5, 263.5, 262.02, 262.0}
	es := []float64{246, 245.7, 243.2, 241.2, 241.2, 264.6, 264.6, 262.02, 262.0}
	zs := []float64{241, 237.8, 220.4, 195.5, 195.5, 195.5, 195.5, 258.5, 258.5}
	vh := []float64{0.0, 0.03, 0.03, 0.02, 0.02, 0.02, 0.02, 0.02, 0}
	var t, z, e, ez []report.XY
	for i, x := range xs {
		p.Ground = append(p.Ground, report.XY{X: x, Y: zs[i]})
		t, z = append(t, report.XY{X: x, Y: hs[i]}), append(z, report.XY{X: x, Y: hs[i] - vh[i]})
		e, ez = append(e, report.XY{X: x, Y: es[i]}), append(ez, report.XY{X: x, Y: es[i] - vh[i]})
	}
	p.Total, p.Piezometric, p.ExpectedTotal, p.ExpectedPiezo = [][]report.XY{t}, [][]report.XY{z}, [][]report.XY{e}, [][]report.XY{ez}
	p.Route = []report.Place{{Name: "R1", Kind: "reservoir"}, {Name: "N1", Kind: "junction", X: 620}, {Name: "N2", Kind: "junction", X: 2070},
		{Name: "N10", Kind: "junction", X: 3050}, {Name: "N11", Kind: "junction", X: 3050}, {Name: "R2", Kind: "reservoir", X: 4396}}
	p.Taps = []report.Place{{Name: "QM", Kind: "tap", X: 580}, {Name: "N1", Kind: "tap", X: 620}, {Name: "N2", Kind: "tap", X: 2070}, {Name: "QB", Kind: "tap", X: 3010}, {Name: "N10", Kind: "tap", X: 3050}}
	p.Devices = []report.Place{{Name: "E1", Kind: "entrance-rounded"}, {Name: "ST-1", Kind: "strainer", X: 3040}, {Name: "BP1", Kind: "pump", X: 3050}, {Name: "CV-1", Kind: "check-valve", X: 3056}, {Name: "X1", Kind: "exit", X: 4396}}
	p.Measured = []report.ProfileReading{{Tap: "N1", Gauge: "G01", X: 620, Y: 245.72, Bar: 0.25, Text: "0.70 bar"}, {Tap: "N2", Gauge: "G02", X: 2070, Y: 239.05, Bar: 0.25, Text: "1.77 bar"},
		{Tap: "N10", Gauge: "G05", X: 3050, Y: 234.62, Bar: 0.25, Text: "4.00 bar", Note: "F4"}}
	p.Suspect = []report.Span{{From: 620, To: 2070, Label: "F1 fouled pipe"}}
	return p
}
