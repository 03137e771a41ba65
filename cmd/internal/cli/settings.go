package cli

import (
	"fmt"

	"tapround/calibrate"
	"tapround/calibrate/fault"
	"tapround/report"
	"tapround/survey"
	"tapround/survey/water"
)

// settings lists every default and choice that the answer depends on, for the
// report's audit trail.
func settings(s *survey.Survey, m *calibrate.Model, d *fault.Diagnosis) []report.Setting {
	p := m.Priors
	set := fault.DefaultSettings(s)
	out := []report.Setting{
		{Name: "friction law", Value: s.Info.FrictionLaw.String(), Source: "survey.csv"},
		{Name: "gravity", Value: fmt.Sprintf("%.5f m/s2", water.Gravity(s.Info.Latitude, s.Info.SiteLevel)), Source: "latitude and level of the site, WGS 84 normal gravity"},
		{Name: "false-alarm rate, all tests together", Value: fmt.Sprintf("%g", set.FalseAlarm), Source: "survey.csv or default"},
		{Name: "limit of a single test", Value: fmt.Sprintf("%.2f standard deviations", d.Limit), Source: fmt.Sprintf("%d draws of the joint law, seed %d", set.Draws, set.Seed)},
		{Name: "spread of a sound roughness", Value: fmt.Sprintf("ln k +/- %.2f", p.LnRoughness), Source: "default where pipes.csv states no spread"},
		{Name: "spread of a sound C", Value: fmt.Sprintf("ln C +/- %.3f", p.LnC), Source: "default where pipes.csv states no spread"},
		{Name: "spread of a sound loss coefficient", Value: fmt.Sprintf("ln K +/- %.2f", p.LnK), Source: "default where fittings.csv states no spread"},
		{Name: "spread of a machine's head", Value: fmt.Sprintf("%.1f %%", 100*p.HeadFactor), Source: "default"},
		{Name: "velocity profile at a pitot", Value: fmt.Sprintf("%.0f %%", 100*p.ProfileFactor), Source: "measured centre ratios up to 6 % off the logarithmic law"},
		{Name: "friction law's own error", Value: fmt.Sprintf("%.0f %% of f, in reported roughness only", 100*p.FrictionLaw), Source: "default, judgement"},
		{Name: "bore's own error", Value: fmt.Sprintf("%.0f %%, in reported roughness only", 100*p.LnBore), Source: "default, judgement"},
		{Name: "odds before any reading", Value: fmt.Sprintf("pipe %g, valve %g, gauge %g, level %g, unrecorded flow %g", set.Odds.Pipe, set.Odds.Valve, set.Odds.Gauge, set.Odds.Tap, set.Odds.Draw), Source: "default, judgement"},
	}
	if s.Info.FrictionLaw == survey.HazenWilliams {
		out = append(out, report.Setting{Name: "Hazen-Williams constant", Value: "V = 0.8492 C R^0.63 S^0.54 (SI)", Source: "published constants differ by up to 2 % of the loss"})
	}
	return out
}
