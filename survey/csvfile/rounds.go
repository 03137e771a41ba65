package csvfile

import (
	"tapround/survey"
	"tapround/survey/unit"
)

type roundRow struct {
	Round            string `csv:"round"`
	Start            string `csv:"start"`
	End              string `csv:"end"`
	WaterTemperature string `csv:"water_temperature"`
	Barometer        string `csv:"barometer"`
	Note             string `csv:"note"`
}

func readRounds(sh *sheet) {
	for r, x := range rowsOf[roundRow](sh) {
		if r.own("round", x.Round) == survey.EveryRound {
			r.fail("round", x.Round, "stands for all rounds in conditions.csv and cannot name one", "give the round a name")
		}
		sh.survey.Rounds = append(sh.survey.Rounds, survey.Round{
			Name:             x.Round,
			Start:            r.when("start", x.Start),
			End:              r.when("end", x.End),
			WaterTemperature: r.stated("water_temperature", x.WaterTemperature),
			Barometer:        r.stated("barometer", x.Barometer),
			Note:             x.Note,
			Source:           r.at,
		})
	}
}

type conditionRow struct {
	Round     string `csv:"round"`
	Item      string `csv:"item"`
	Condition string `csv:"condition"`
	Value     string `csv:"value"`
	Unit      string `csv:"unit"`
	SD        string `csv:"sd"`
}

var conditionKinds = []survey.ConditionKind{survey.LevelIs, survey.DrawOff, survey.SpeedIs, survey.Stopped, survey.ShutOff, survey.OpenAgain}

var conditionWords = map[string]survey.ConditionKind{
	"draw": survey.DrawOff, "draft": survey.DrawOff, "demand": survey.DrawOff, "closed": survey.ShutOff, "waterlevel": survey.LevelIs,
}

func readConditions(sh *sheet) {
	for r, x := range rowsOf[conditionRow](sh) {
		c := survey.Condition{
			Round:  r.name("round", x.Round),
			Item:   r.name("item", x.Item),
			Kind:   choice(r, "condition", x.Condition, conditionKinds, conditionWords),
			Source: r.at,
		}
		switch c.Kind {
		case survey.LevelIs:
			r.amount(&c, x, unit.Length)
		case survey.DrawOff:
			r.amount(&c, x, unit.Flow)
		case survey.SpeedIs:
			r.amount(&c, x, unit.Rotation)
		case survey.Stopped, survey.ShutOff, survey.OpenAgain:
			if x.Value != "" || x.SD != "" {
				r.tell(survey.Notice, "value", x.Value, string(c.Kind)+" needs no value; this was not used", "leave it empty, or correct the condition")
			}
		}
		sh.survey.Conditions = append(sh.survey.Conditions, c)
	}
}

// amount reads the value of a condition and its uncertainty in the row's unit. A level
// or a draw-off without a value is to be estimated, and needs no unit then.
func (r *row) amount(c *survey.Condition, x conditionRow, d unit.Dimension) {
	if x.Value == "" {
		if c.Kind == survey.SpeedIs {
			r.absent("value")
		}
		if x.SD != "" {
			r.tell(survey.Notice, "sd", x.SD, "is the uncertainty of a value that is not stated; it was not used", "leave it empty, or write the value")
		}
		return
	}
	u := r.unit(x.Unit, d, false)
	c.Value = r.statedIn("value", x.Value, u)
	c.SD = r.statedIn("sd", x.SD, u)
}
