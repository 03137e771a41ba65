package csvfile

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"
	"time"

	"tapround/survey"
	"tapround/survey/unit"
)

type infoRow struct {
	Item  string `csv:"item"`
	Value string `csv:"value"`
	Unit  string `csv:"unit"`
}

// defaults is a survey.csv that states nothing.
func defaults() survey.Info {
	return survey.Info{TimeZone: time.UTC, Latitude: 45, WaterTemperature: 10, FalseAlarmRate: 0.05}
}

// item is one row that survey.csv may have.
type item struct {
	name string
	// words: the value is text. Otherwise it is a number of dimension dim, which may
	// go without a unit where bare is set, and must lie from low to high in SI.
	words     func(*row, string)
	priced    bool // a price: its unit is a currency over an energy
	dim       unit.Dimension
	bare      bool
	low, high float64
	set       func(float64)
}

func items(i *survey.Info, f *folder) []item {
	text := func(into *string) func(*row, string) { return func(_ *row, v string) { *into = v } }
	maybe := func(into *survey.Maybe) func(float64) { return func(v float64) { *into = survey.Some(v) } }
	is := func(into *float64) func(float64) { return func(v float64) { *into = v } }
	return []item{
		{name: "title", words: text(&i.Title)},
		{name: "site", words: text(&i.Site)},
		{name: "datum", words: text(&i.Datum)},
		{name: "time_zone", words: func(r *row, v string) {
			z, err := loadZone(v)
			if err != nil {
				r.fail("value", v, err.Error(), zoneRemedy)
				return
			}
			i.TimeZone, f.zone = z, z
		}},
		// The Dead Sea's shore and the highest waterworks; the standard atmosphere
		// is published far beyond both.
		{name: "site_level", dim: unit.Length, low: -500, high: 6000, set: is(&i.SiteLevel)},
		{name: "latitude", dim: unit.Angle, low: -90, high: 90, set: is(&i.Latitude)},
		{name: "water_temperature", dim: unit.Temperature, low: 0, high: 100, set: is(&i.WaterTemperature)},
		{name: "friction_law", words: func(r *row, v string) {
			laws := map[string]survey.FrictionLaw{"darcy-weisbach": survey.DarcyWeisbach, "hazen-williams": survey.HazenWilliams}
			if w := choice(r, "value", v, []string{"darcy-weisbach", "hazen-williams"}, map[string]string{"colebrookwhite": "darcy-weisbach"}); w != "" {
				i.FrictionLaw = laws[w]
			}
		}},
		{name: "as_new_year", dim: unit.Count, bare: true, low: 1800, high: 2200, set: maybe(&i.AsNewYear)},
		{name: "false_alarm_rate", dim: unit.Fraction, bare: true, low: 1e-6, high: 0.5, set: is(&i.FalseAlarmRate)},
		{name: "energy_price", priced: true},
		{name: "currency", words: text(&i.Cost.Currency)},
		{name: "pump_efficiency", dim: unit.Fraction, bare: true, low: 0.01, high: 1, set: maybe(&i.Cost.PumpEfficiency)},
		// Hours are in the item's name; a unit may say so again.
		{name: "hours_per_year", dim: unit.Duration, bare: true, low: 0, high: 8784, set: maybe(&i.Cost.HoursPerYear)},
		{name: "flow_exceeded", dim: unit.Flow, low: 0, high: 1e3, set: maybe(&i.Cost.FlowExceeded)},
	}
}

func readInfo(sh *sheet) {
	list := items(&sh.survey.Info, sh.folder)
	names := make([]string, len(list))
	for i, it := range list {
		names[i] = it.name
	}
	for r, x := range rowsOf[infoRow](sh) {
		if r.own("item", x.Item) == "" || r.bad != "" {
			continue
		}
		at := -1
		for i, n := range names {
			if fold(n) == fold(x.Item) {
				at = i
			}
		}
		if at < 0 {
			remedy := "the items are " + strings.Join(names, ", ")
			if n := survey.Nearest(x.Item, names); n != "" {
				remedy = "did you mean " + n + "? " + remedy
			}
			r.tell(survey.Notice, "item", x.Item, "is not a known item, and was not read", remedy)
			continue
		}
		if x.Value == "" {
			continue
		}
		switch it := list[at]; {
		case it.priced:
			price(r, x, &sh.survey.Info.Cost)
		case it.words == nil:
			it.read(r, x)
		default:
			if x.Unit != "" {
				r.tell(survey.Notice, "unit", x.Unit, it.name+" has no unit; this was not read", "leave the cell empty")
			}
			it.words(r, x.Value)
		}
	}
}

// read takes in an item that is a number.
func (it item) read(r *row, x infoRow) {
	u := unit.Unit{Factor: 1}
	switch {
	case it.bare && x.Unit == "":
		if it.dim == unit.Fraction {
			u = unit.Ratio
		}
	default:
		u = r.unit(x.Unit, it.dim, false)
		if it.dim == unit.Duration {
			u.Factor /= 3600 // kept in hours
		}
	}
	v := r.neededIn("value", x.Value, u)
	if r.bad != "" {
		return
	}
	if v < it.low || v > it.high {
		r.fail("value", x.Value, fmt.Sprintf("%s must be from %s to %s", it.name, it.limit(it.low), it.limit(it.high)), "correct the number or its unit")
		return
	}
	it.set(v)
}

// limit prints a bound with the unit that the item is kept in.
func (it item) limit(v float64) string {
	s := strconv.FormatFloat(v, 'f', -1, 64)
	switch it.dim {
	case unit.Length:
		s += " m"
	case unit.Temperature:
		s += " C"
	case unit.Angle:
		s += " degrees"
	case unit.Flow:
		s += " m3/s"
	case unit.Duration:
		s += " hours"
	}
	return s
}

var energyUnit = regexp.MustCompile(`(?i)^(.*?)\s*(?:/|\bper\b)\s*([km])wh$`)

// price reads the price of energy. Its unit is a currency for a kWh or a MWh; the
// currency there serves where the item currency states none.
func price(r *row, x infoRow, c *survey.Cost) {
	p := r.number("value", x.Value)
	m := energyUnit.FindStringSubmatch(x.Unit)
	switch {
	case m == nil:
		r.fail("unit", x.Unit, "is not the unit of a price for energy", "write it as GBP/kWh or EUR/MWh")
	case p < 0:
		r.fail("value", x.Value, "is a price below nought", "correct the sign")
	}
	if r.bad != "" {
		return
	}
	if strings.EqualFold(m[2], "m") {
		p /= 1000
	}
	c.EnergyPrice = survey.Some(p)
	if c.Currency == "" {
		c.Currency = m[1]
	}
}
