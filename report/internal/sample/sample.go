// Package sample is one stored Result for the tests of the sinks: Harrowgill, an
// invented town. Every figure is made up. The lines, flows and losses follow one
// simple friction formula so that they hang together, but nothing here was fitted
// and nothing here is evidence of what the fit can do.
package sample

import (
	"fmt"

	"tapround/report"
	"tapround/survey"
)

// Harrowgill gives a fresh copy: a test may change what it likes.
func Harrowgill() *report.Result {
	r := &report.Result{
		Tool: report.Tool{Name: "tapround", Version: "v0.9.0"},
		Survey: report.SurveyFacts{
			Title: "Harrowgill ring main pressure survey", Site: "Harrowgill", Datum: "Scarth Bank benchmark 7",
			FrictionLaw: "darcy-weisbach", Rounds: rounds, Points: 20, Pipes: 22, PipeLength: 17350,
			Taps: 14, Gauges: 8, Readings: 61, Used: 58,
		},
		Inputs: []survey.Input{
			{File: "survey.csv", SHA256: digest(1), Rows: 12, Used: 12, Understood: "UTF-8, commas, decimal point, heading on line 2"},
			{File: "pipes.csv", SHA256: digest(2), Rows: 22, Used: 22, Understood: "UTF-8, commas, decimal point, heading on line 1"},
			{File: "taps.csv", SHA256: digest(3), Rows: 14, Used: 14, Understood: "UTF-8 with BOM, commas, decimal point, heading on line 1"},
			{File: "readings/crew-1.csv", SHA256: digest(4), Rows: 32, Used: 31, Understood: "Windows-1252, commas, decimal point, heading on line 1"},
			{File: "readings/crew-2.csv", SHA256: digest(5), Rows: 29, Used: 27, Understood: "UTF-8, semicolons, decimal comma, heading on line 3"},
		},
		Settings: []report.Setting{
			{Name: "friction law", Value: "darcy-weisbach", Source: "survey.csv"},
			{Name: "gravity", Value: "9.81422 m/s2", Source: "latitude and level of the site"},
			{Name: "false-alarm rate, all tests together", Value: "0.05", Source: "default"},
			{Name: "limit of a single test", Value: "3.62 standard deviations", Source: "20000 draws of the joint law, seed 1"},
			{Name: "spread of a sound roughness", Value: "ln k +/- 0.41", Source: "default where pipes.csv states no spread"},
			{Name: "velocity profile at a pitot", Value: "3 %", Source: "measured centre ratios up to 6 % off the logarithmic law"},
		},
		Problems: problems(),
		Alerts:   alerts(),
		Findings: findings(),
		Costs: []report.Cost{
			{Finding: "F1", Power: survey.Some(6900), Energy: survey.Some(55200 * 3.6e6), Money: survey.Some(13250), Currency: "GBP",
				Basis: "6.2 m at 80 L/s, 8,000 h a year, pump efficiency 70 %, 0.24 GBP a kWh"},
			{Finding: "F2", Power: survey.Some(1130), Energy: survey.Some(9000 * 3.6e6), Money: survey.Some(2170), Currency: "GBP",
				Basis: "3.0 m at 27 L/s, 8,000 h a year, pump efficiency 70 %, 0.24 GBP a kWh"},
		},
		Fit: report.FitFacts{
			Status: "converged", Converged: true, Iterations: 9, Unknowns: 96, Readings: 58, Rank: 96, Condition: 4.1e3,
			ChiSquare: 49.2, DoF: 51, P: survey.Some(0.54), SoundChi: 1963, SoundP: survey.Some(0),
			Caveats: []string{"round C: duty point of BP1 lies near the end of its works curve"},
		},
		Cautions: []string{cautionPressure, cautionWater, cautionSurge, cautionLocal},
	}
	r.Summary = []string{r.Findings[0].Statement, r.Findings[1].Statement, r.Findings[2].Statement, r.Findings[3].Statement, r.Findings[4].Statement,
		"3 items could not be seen by these readings: for them, no fault found does not mean sound."}
	for i, name := range rounds {
		w := newWay(i)
		r.Profiles = append(r.Profiles, w.profile(name))
		r.GradeLines = append(r.GradeLines, w.gradeRows(name)...)
		r.Flows = append(r.Flows, w.flowRows(name)...)
		r.Losses = append(r.Losses, w.lossRows(name)...)
		r.Heads = append(r.Heads, w.headRows(name, i)...)
		r.Residuals = append(r.Residuals, w.differences(name)...)
	}
	r.Heads = append(r.Heads, odd()...)
	r.Profiles = append(r.Profiles, Booster())
	r.Parameters = parameters()
	return r
}

var rounds = []string{"A", "B", "C", "D", "E"}

func digest(n int) string {
	return fmt.Sprintf("%064x", 0x9e3779b97f4a7c15*uint64(n))
}

func problems() survey.Problems {
	return survey.Problems{
		{Source: survey.Source{File: "readings/crew-2.csv", Line: 19}, Severity: survey.SetAside, Column: "reading", Text: "n/a",
			Reason: "is no number", Remedy: "read the tap again, or leave the line out"},
		{Source: survey.Source{File: "readings/crew-2.csv", Line: 27}, Severity: survey.SetAside, Column: "remark", Text: "!cap leaking",
			Reason: "the crew set this reading aside"},
		{Source: survey.Source{File: "readings/crew-1.csv", Line: 14}, Severity: survey.SetAside, Column: "gauge",
			Reason: "no gauge is named, so the reading has no accuracy", Remedy: "write the gauge's number"},
		{Source: survey.Source{File: "readings/crew-2.csv", Line: 6}, Severity: survey.Notice, Column: "unit", Text: "\"",
			Reason: "ditto mark: read as bar, like the line above"},
		{Source: survey.Source{File: "readings/crew-2.csv", Line: 7}, Severity: survey.Notice, Column: "unit", Text: "\"",
			Reason: "ditto mark: read as bar, like the line above"},
		{Source: survey.Source{File: "readings/crew-2.csv", Line: 9}, Severity: survey.Notice, Column: "reading", Text: "5,4-5,6",
			Reason: "a range: read as 5.5 with half the range as a limit of error"},
		{Source: survey.Source{File: "pipes.csv", Line: 21}, Severity: survey.Notice, Column: "roughness",
			Reason: "not stated: 0.05 mm taken from the built-in table for polyethylene"},
	}
}

func alerts() []survey.Alert {
	return []survey.Alert{
		{Rule: "no-flow round does not close", Subject: "N8", Statement: "In round A tap N8 stands 0.55 m below its neighbours, though almost nothing should flow.",
			Evidence: "0.55 m against a standard uncertainty of 0.11 m", Limit: "2 standard uncertainties (customary)",
			Action: "Look for water running to waste near N8 before any gauge is zeroed on this round.", Stay: true,
			Sources: []survey.Source{{File: "readings/crew-2.csv", Line: 11}}},
		{Rule: "bench check overdue", Subject: "G07", Statement: "Gauge G07 was last checked on 2024-11-05, more than a year before round A.",
			Evidence: "16 months", Limit: "12 months (customary)", Action: "Send it to the bench after this survey.",
			Sources: []survey.Source{{File: "gauges.csv", Line: 6}}},
	}
}

func parameters() []report.ParameterRow {
	s := survey.Some
	row := func(item, kind, quantity, unit string, exp, fit, lo, hi, told float64, round string) report.ParameterRow {
		p := report.ParameterRow{Item: item, Kind: kind, Quantity: quantity, Unit: unit, Expected: s(exp), Fitted: s(fit), Low: s(lo), High: s(hi), ToldBySurvey: s(told), Round: round}
		if exp != 0 {
			p.Ratio = s(fit / exp)
		}
		return p
	}
	return []report.ParameterRow{
		row("P1", "pipe", "roughness", "mm", 0.3, 0.31234567891, 0.14, 0.68, 0.08, ""),
		row("P2", "pipe", "roughness", "mm", 1.5, 9.12, 6.9, 12.1, 0.97, ""),
		row("P3", "pipe", "roughness", "mm", 0.3, 0.27, 0.15, 0.48, 0.55, ""),
		row("P4", "pipe", "roughness", "mm", 1.5, 1.38, 0.85, 2.2, 0.61, ""),
		row("P6", "pipe", "roughness", "mm", 1.5, 1.61, 0.96, 2.7, 0.42, ""),
		row("P9", "pipe", "roughness", "mm", 1.5, 1.52, 0.71, 3.2, 0.11, ""),
		row("P12", "pipe", "roughness", "mm", 0.05, 0.048, 0.021, 0.11, 0.06, ""),
		row("SV-031", "fitting", "loss_coefficient", "K", 0.15, 45.2, 31, 66, 0.93, ""),
		row("BP1", "machine", "head_factor", "factor", 1, 0.994, 0.962, 1.026, 0.38, ""),
		row("G01", "gauge", "offset", "bar", 0, 0.0011, -0.0062, 0.0084, 0.71, ""),
		row("G07", "gauge", "offset", "bar", 0, 0.121, 0.108, 0.134, 0.98, ""),
		row("G08", "gauge", "offset", "psi", 0, -0.14, -0.41, 0.13, 0.66, ""),
		row("N10", "tap", "level_error", "m", 0, -2.38, -2.54, -2.22, 0.95, ""),
		row("N7", "tap", "level_error", "m", 0, 0.01, -0.08, 0.10, 0.12, ""),
		row("N8", "draw-off", "flow", "L/s", 0.72, 4.72, 4.2, 5.2, 0.90, "A"),
		row("N4", "draw-off", "flow", "L/s", 4.4, 4.38, 3.9, 4.8, 0.14, "E"),
		{Item: "N14", Kind: "draw-off", Quantity: "flow", Unit: "L/s", Fitted: s(1.9), Low: s(0.8), High: s(3), ToldBySurvey: s(0.97), Round: "B"},
	}
}
