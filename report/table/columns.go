package table

import (
	"tapround/report"
	"tapround/survey"
)

// Factors from SI to the units of the headings.
const (
	toKilopascal     = 1e-3
	toMillimetre     = 1e3
	toLitrePerSecond = 1e3
	asIs             = 1
)

var heads = []column[report.HeadRow]{
	{"round", func(r report.HeadRow) string { return text(r.Round) }},
	{"tap", func(r report.HeadRow) string { return text(r.Tap) }},
	{"other_tap", func(r report.HeadRow) string { return text(r.OtherTap) }},
	{"depth [mm]", func(r report.HeadRow) string { return maybe(r.Depth, toMillimetre) }},
	{"time", func(r report.HeadRow) string { return text(r.Time) }},
	{"kind", func(r report.HeadRow) string { return text(r.Kind) }},
	{"gauge", func(r report.HeadRow) string { return text(r.Gauge) }},
	{"reading", func(r report.HeadRow) string { return written(r.Reading) }},
	{"unit", func(r report.HeadRow) string { return text(r.Unit) }},
	{"pressure [kPa]", func(r report.HeadRow) string { return maybe(r.Pressure, toKilopascal) }},
	{"elevation [m]", func(r report.HeadRow) string { return maybe(r.Elevation, asIs) }},
	{"pressure_head [m]", func(r report.HeadRow) string { return maybe(r.PressureHead, asIs) }},
	{"velocity_head [m]", func(r report.HeadRow) string { return maybe(r.VelocityHead, asIs) }},
	{"piezometric_head [m]", func(r report.HeadRow) string { return maybe(r.Piezometric, asIs) }},
	{"total_head [m]", func(r report.HeadRow) string { return maybe(r.Total, asIs) }},
	{"u [m]", func(r report.HeadRow) string { return maybe(r.U, asIs) }},
	{"used", func(r report.HeadRow) string { return yes(r.Used) }},
	{"remark", func(r report.HeadRow) string { return text(r.Remark) }},
}

var flows = []column[report.FlowRow]{
	{"round", func(r report.FlowRow) string { return text(r.Round) }},
	{"pipe", func(r report.FlowRow) string { return text(r.Pipe) }},
	{"flow [L/s]", func(r report.FlowRow) string { return maybe(r.Flow, toLitrePerSecond) }},
	{"velocity [m/s]", func(r report.FlowRow) string { return maybe(r.Velocity, asIs) }},
	{"low95 [L/s]", func(r report.FlowRow) string { return maybe(r.Low, toLitrePerSecond) }},
	{"high95 [L/s]", func(r report.FlowRow) string { return maybe(r.High, toLitrePerSecond) }},
	{"measured [L/s]", func(r report.FlowRow) string { return maybe(r.Measured, toLitrePerSecond) }},
}

var gradeLines = []column[report.GradeRow]{
	{"round", func(r report.GradeRow) string { return text(r.Round) }},
	{"pipe", func(r report.GradeRow) string { return text(r.Pipe) }},
	{"at [m]", func(r report.GradeRow) string { return number(r.At) }},
	{"piezometric_head [m]", func(r report.GradeRow) string { return maybe(r.Piezometric, asIs) }},
	{"total_head [m]", func(r report.GradeRow) string { return maybe(r.Total, asIs) }},
	{"expected_total_head [m]", func(r report.GradeRow) string { return maybe(r.ExpectedTotal, asIs) }},
}

var parameters = []column[report.ParameterRow]{
	{"item", func(r report.ParameterRow) string { return text(r.Item) }},
	{"kind", func(r report.ParameterRow) string { return text(r.Kind) }},
	{"quantity", func(r report.ParameterRow) string { return text(r.Quantity) }},
	{"unit", func(r report.ParameterRow) string { return text(r.Unit) }},
	{"expected", func(r report.ParameterRow) string { return maybe(r.Expected, asIs) }},
	{"fitted", func(r report.ParameterRow) string { return maybe(r.Fitted, asIs) }},
	{"low95", func(r report.ParameterRow) string { return maybe(r.Low, asIs) }},
	{"high95", func(r report.ParameterRow) string { return maybe(r.High, asIs) }},
	{"ratio", func(r report.ParameterRow) string { return maybe(r.Ratio, asIs) }},
	{"told_by_survey", func(r report.ParameterRow) string { return maybe(r.ToldBySurvey, asIs) }},
	{"round", func(r report.ParameterRow) string { return text(r.Round) }},
}

var residuals = []column[report.ResidualRow]{
	{"round", func(r report.ResidualRow) string { return text(r.Round) }},
	{"tap", func(r report.ResidualRow) string { return text(r.Tap) }},
	{"kind", func(r report.ResidualRow) string { return text(r.Kind) }},
	{"gauge", func(r report.ResidualRow) string { return text(r.Gauge) }},
	{"measured", func(r report.ResidualRow) string { return number(r.Measured) }},
	{"fitted", func(r report.ResidualRow) string { return number(r.Fitted) }},
	{"unit", func(r report.ResidualRow) string { return text(r.Unit) }},
	{"residual", func(r report.ResidualRow) string { return number(r.Residual) }},
	{"u", func(r report.ResidualRow) string { return number(r.U) }},
	{"normalised", func(r report.ResidualRow) string { return maybe(r.Normalised, asIs) }},
	{"redundancy", func(r report.ResidualRow) string { return maybe(r.Redundancy, asIs) }},
}

var losses = []column[report.LossRow]{
	{"round", func(r report.LossRow) string { return text(r.Round) }},
	{"from_tap", func(r report.LossRow) string { return text(r.FromTap) }},
	{"to_tap", func(r report.LossRow) string { return text(r.ToTap) }},
	{"measured [m]", func(r report.LossRow) string { return maybe(r.Measured, asIs) }},
	{"low95 [m]", func(r report.LossRow) string { return maybe(r.Low, asIs) }},
	{"high95 [m]", func(r report.LossRow) string { return maybe(r.High, asIs) }},
	{"expected [m]", func(r report.LossRow) string { return maybe(r.Expected, asIs) }},
	{"excess [m]", func(r report.LossRow) string { return maybe(r.Excess, asIs) }},
	{"fitted [m]", func(r report.LossRow) string { return maybe(r.Fitted, asIs) }},
	{"items", func(r report.LossRow) string { return list(r.Items) }},
}

// The excess head of a finding is that of the round in which it costs most; each
// round's own stands in result.json.
var findings = []column[survey.Finding]{
	{"finding", func(f survey.Finding) string { return text(f.ID) }},
	{"item", func(f survey.Finding) string { return text(f.Item) }},
	{"kind", func(f survey.Finding) string { return text(string(f.Kind)) }},
	{"grade", func(f survey.Finding) string { return text(string(f.Grade)) }},
	{"probability", func(f survey.Finding) string { return maybe(f.Probability, asIs) }},
	{"estimate", func(f survey.Finding) string { return maybe(f.Estimate, asIs) }},
	{"low95", func(f survey.Finding) string { return maybe(f.Low, asIs) }},
	{"high95", func(f survey.Finding) string { return maybe(f.High, asIs) }},
	{"unit", func(f survey.Finding) string { return text(f.Unit) }},
	{"excess_head [m]", func(f survey.Finding) string { return maybe(f.LargestExcess(), asIs) }},
	{"rounds", func(f survey.Finding) string { return list(f.Rounds) }},
	{"cannot_be_told_from", func(f survey.Finding) string { return list(f.CannotBeToldFrom) }},
	{"advice", func(f survey.Finding) string { return text(f.Advice) }},
}
