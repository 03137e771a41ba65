package csvfile

import (
	"tapround/survey"
	"tapround/survey/unit"
)

type requirementRow struct {
	Requirement string `csv:"requirement"`
	Kind        string `csv:"kind"`
	Item        string `csv:"item"`
	To          string `csv:"to"`
	AtFlow      string `csv:"at_flow"`
	Limit       string `csv:"limit"`
	Unit        string `csv:"unit"`
	Grade       string `csv:"grade"`
	Note        string `csv:"note"`
}

var requirementKinds = []string{"loss-at-most", "pressure-at-least", "head-at-least", "roughness-at-most", "c-at-least", "k-at-most", "duty"}

// limitOf is the dimension of a requirement's limit.
func limitOf(kind string) unit.Dimension {
	switch kind {
	case "pressure-at-least":
		return unit.Pressure
	case "c-at-least", "k-at-most":
		return unit.Count
	}
	return unit.Length
}

func readRequirements(sh *sheet) {
	for r, x := range rowsOf[requirementRow](sh) {
		q := survey.Requirement{
			Name:   r.own("requirement", x.Requirement),
			Kind:   choice(r, "kind", x.Kind, requirementKinds, nil),
			Item:   r.name("item", x.Item),
			To:     x.To,
			AtFlow: r.stated("at_flow", x.AtFlow),
			Unit:   x.Unit,
			Grade:  x.Grade,
			Note:   x.Note,
			Source: r.at,
		}
		var u unit.Unit
		if q.Kind != "" {
			u = r.unit(x.Unit, limitOf(q.Kind), false)
		}
		q.Limit = r.neededIn("limit", x.Limit, u)
		sh.survey.Requirements = append(sh.survey.Requirements, q)
	}
}

type loggerRow struct {
	Channel     string `csv:"channel"`
	File        string `csv:"file"`
	Tap         string `csv:"tap"`
	Kind        string `csv:"kind"`
	Gauge       string `csv:"gauge"`
	Unit        string `csv:"unit"`
	ClockOffset string `csv:"clock_offset"`
	TimeZone    string `csv:"time_zone"`
	Note        string `csv:"note"`
}

func readLoggers(sh *sheet) {
	for r, x := range rowsOf[loggerRow](sh) {
		c := survey.Channel{
			Name:        r.name("channel", x.Channel),
			File:        r.name("file", x.File),
			Tap:         r.name("tap", x.Tap),
			Kind:        choice(r, "kind", x.Kind, readingKinds, readingWords),
			Gauge:       x.Gauge,
			Unit:        x.Unit,
			ClockOffset: r.stated("clock_offset", x.ClockOffset).V,
			TimeZone:    sh.zone,
			Note:        x.Note,
			Source:      r.at,
		}
		if c.Kind != "" {
			r.readingUnit(x.Unit, c.Kind, x.Gauge)
		}
		if x.TimeZone != "" {
			z, err := loadZone(x.TimeZone)
			if err != nil {
				r.fail("time_zone", x.TimeZone, err.Error(), zoneRemedy)
			} else {
				c.TimeZone = z
			}
		}
		// One channel's name may stand in the exports of several loggers.
		key := x.File + "\x00" + x.Channel
		if line, twice := sh.names[key]; twice {
			r.fail("channel", x.Channel, "stands in line "+listed([]int{line})+" already, for the same file", "take one of the rows away")
		}
		sh.names[key] = r.at.Line
		sh.survey.Channels = append(sh.survey.Channels, c)
	}
}
