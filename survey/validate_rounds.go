package survey

import (
	"fmt"
	"slices"
	"strings"
	"time"
)

// Bounds of a barometer, Pa: the lowest at 6,000 m in a storm, the highest in a mine
// 1,000 m below the sea (common practice).
const (
	lowBarometer  = 40e3
	highBarometer = 120e3
	longRound     = 24 * time.Hour
)

func (v *validation) rounds() {
	for i := range v.Rounds {
		r := &v.Rounds[i]
		switch d := r.End.Sub(r.Start); {
		case r.Start.IsZero() || r.End.IsZero():
		case d < 0:
			v.fatal(r.Source, "end", r.End.Format(clock), "the round ends before it starts", "correct the times; a time without an offset is in the survey's time_zone")
		case d > longRound:
			v.notice(r.Source, "end", r.End.Format(clock), fmt.Sprintf("the round lasts %s hours; the flow must have been held steady all that time", figures(d.Hours())), "look at the dates, or divide the round")
		}
		if t := r.WaterTemperature; t.OK && (t.V < 0 || t.V > 100) {
			v.fatal(r.Source, "water_temperature", figures(t.V)+" C", "is no temperature of liquid water in a pipe", "correct the number or the unit in the heading")
		}
		if b := r.Barometer; b.OK && (b.V < lowBarometer || b.V > highBarometer) {
			v.fatal(r.Source, "barometer", figures(1e-3*b.V)+" kPa", "is no pressure of the atmosphere", "correct the number or the unit in the heading; it is absolute, about 101 kPa at the sea")
		}
	}
	v.levelsOfReservoirs()
}

const clock = "2006-01-02 15:04"

// levelsOfReservoirs looks for reservoirs whose level no row states in some round.
func (v *validation) levelsOfReservoirs() {
	missing := map[string][]string{}
	for i := range v.Rounds {
		r := &v.Rounds[i]
		f := v.InForce(r.Name)
		for k := range v.Points {
			if p := &v.Points[k]; p.Kind == Reservoir {
				if _, ok := f.Levels[p.Name]; !ok {
					missing[p.Name] = append(missing[p.Name], r.Name)
				}
			}
		}
	}
	for k := range v.Points {
		p := &v.Points[k]
		if rounds := missing[p.Name]; len(rounds) > 0 {
			word := "round"
			if len(rounds) > 1 {
				word = "rounds"
			}
			v.fatal(p.Source, "point", p.Name, fmt.Sprintf("reservoir %s has no level in %s %s", p.Name, word, some(rounds)),
				"add rows with condition level to conditions.csv; leave the value empty to have it estimated")
		}
	}
}

// kindsNamed lists what an item of conditions.csv may be.
func (v *validation) kindsNamed(item string) (kinds []string, at []Source) {
	add := func(kind string, s Source) { kinds, at = append(kinds, kind), append(at, s) }
	if p := v.point[item]; p != nil {
		add("point", p.Source)
	}
	if p := v.pipe[item]; p != nil {
		add("pipe", p.Source)
	}
	if f := v.fitting[item]; f != nil {
		add("fitting", f.Source)
	}
	if m := v.machine[item]; m != nil {
		add("machine", m.Source)
	}
	return kinds, at
}

// holdsFor says what each condition may be stated of.
var holdsFor = map[ConditionKind][]string{
	LevelIs: {"point"}, DrawOff: {"point"}, SpeedIs: {"machine"}, Stopped: {"machine"},
	ShutOff: {"pipe", "fitting"}, OpenAgain: {"pipe", "fitting", "machine"},
}

func (v *validation) conditions() {
	type key struct {
		round, item string
		kind        ConditionKind
	}
	first := map[key]*Condition{}
	for i := range v.Conditions {
		c := &v.Conditions[i]
		if c.Round != EveryRound && v.round[c.Round] == nil {
			v.unknown(c.Source, "round", c.Round, "rounds.csv", v.roundNames())
		}
		if v.conditionItem(c) {
			v.conditionValue(c)
		}
		k := key{c.Round, c.Item, c.Kind}
		other := first[k]
		if other == nil {
			first[k] = c
		}
		v.twice(c, other)
		for _, contrary := range contraries[c.Kind] {
			if o := first[key{c.Round, c.Item, contrary}]; o != nil && c.Kind != "" {
				v.fatal(c.Source, "condition", string(c.Kind), fmt.Sprintf("%s is %s in the same round by line %d", c.Item, contrary, o.Source.Line), "take one of the rows away")
			}
		}
	}
}

// contraries cannot both hold of an item in one round.
var contraries = map[ConditionKind][]ConditionKind{
	ShutOff: {OpenAgain}, OpenAgain: {ShutOff, Stopped}, Stopped: {OpenAgain, SpeedIs}, SpeedIs: {Stopped},
}

// twice tells of a second row for one thing. Draw-offs add, but two equal ones are
// more likely one row copied.
func (v *validation) twice(c, other *Condition) {
	switch {
	case other == nil || c.Kind == "" || c.Item == "":
	case c.Kind == DrawOff && c.Value == other.Value:
		v.notice(c.Source, "item", c.Item, fmt.Sprintf("the same draw-off as in line %d of the same round; both count", other.Source.Line), "take one of them away if it is a copy")
	case c.Kind != DrawOff:
		v.fatal(c.Source, "item", c.Item, fmt.Sprintf("its %s in this round is stated in line %d already", c.Kind, other.Source.Line), "take one of the rows away")
	}
}

// conditionItem looks at what a condition is stated of, and reports whether its value
// can be looked at.
func (v *validation) conditionItem(c *Condition) bool {
	if c.Item == "" || c.Kind == "" {
		return false
	}
	kinds, at := v.kindsNamed(c.Item)
	wanted := holdsFor[c.Kind]
	switch {
	case len(kinds) == 0:
		v.unknown(c.Source, "item", c.Item, tableOf(wanted), v.itemNames(wanted))
		return false
	case len(kinds) > 1:
		places := make([]string, len(at))
		for i := range at {
			places[i] = at[i].String()
		}
		v.fatal(c.Source, "item", c.Item, fmt.Sprintf("means two things: a %s (%s)", strings.Join(kinds, " and a "), strings.Join(places, ", ")), "give them different names")
		return false
	case !slices.Contains(wanted, kinds[0]):
		v.fatal(c.Source, "item", c.Item, fmt.Sprintf("is a %s, and %s is said of a %s", kinds[0], c.Kind, strings.Join(wanted, " or a ")), "correct the item or the condition")
		return false
	}
	if p := v.point[c.Item]; p != nil && p.Kind != "" {
		switch {
		case c.Kind == LevelIs && p.Kind != Reservoir:
			v.fatal(c.Source, "item", c.Item, fmt.Sprintf("is of kind %s, and only a reservoir has a water level of its own", p.Kind), "correct the item, or its kind in points.csv; a level that was measured is a reading")
			return false
		case c.Kind == DrawOff && p.Kind != Junction:
			v.fatal(c.Source, "item", c.Item, fmt.Sprintf("is of kind %s, where a draw-off changes nothing", p.Kind), "write it at a junction, or take the row away")
			return false
		}
	}
	return true
}

func (v *validation) conditionValue(c *Condition) {
	if c.SD.OK && c.SD.V < 0 {
		v.fatal(c.Source, "sd", "", "is below nought", "correct the sign")
	}
	if !c.Value.OK {
		return
	}
	switch c.Kind {
	case SpeedIs:
		if c.Value.V <= 0 {
			v.fatal(c.Source, "value", "", "a speed must be above nought", "write the condition stopped for a machine at rest")
		}
		if m := v.machine[c.Item]; m != nil && !m.Speed.OK {
			v.fatal(c.Source, "item", c.Item, "its rated speed is not stated, so its works curve cannot be brought to this speed", "write the speed of the works curve in machines.csv")
		}
	case LevelIs:
		if p := v.point[c.Item]; p != nil && c.Value.V < p.Elevation {
			v.notice(c.Source, "value", metres(c.Value.V), fmt.Sprintf("the water stands below the reservoir's own level, %s", metres(p.Elevation)), "look at the two numbers and their datum")
		}
	}
}

func tableOf(kinds []string) string {
	names := map[string]string{"point": "points.csv", "pipe": "pipes.csv", "fitting": "fittings.csv", "machine": "machines.csv"}
	out := make([]string, len(kinds))
	for i, k := range kinds {
		out[i] = names[k]
	}
	return strings.Join(out, " or ")
}

func (v *validation) itemNames(kinds []string) []string {
	var out []string
	for _, k := range kinds {
		switch k {
		case "point":
			out = append(out, v.pointNames()...)
		case "pipe":
			out = append(out, v.pipeNames()...)
		case "fitting":
			out = append(out, v.fittingNames()...)
		case "machine":
			out = append(out, v.machineNames()...)
		}
	}
	return out
}
