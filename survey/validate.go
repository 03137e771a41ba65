package survey

import (
	"fmt"
	"slices"
	"strconv"
	"strings"
)

// Validate says what the tables get wrong about each other and about the world: names
// that lead nowhere, places beyond a pipe's end, instruments that cannot measure what
// was read, parts of the system that nothing feeds, and numbers that no works has.
// Fatal is what makes the survey impossible to compute or cannot physically be; what
// is only unlikely is a Notice. All of it comes back at once, Fatal first, with the
// place in the tables and what to do.
//
// It changes nothing, looks only at readings that are in use, and passes over numbers
// that the reader could not read (NaN), since those were told already. What a table
// leaves to the built-in catalogue is not its business. Bounds are customary unless
// their comment names a source.
func (s *Survey) Validate() Problems {
	v := newValidation(s)
	v.names()
	v.points()
	v.pipes()
	v.levels()
	v.fittings()
	v.machines()
	v.parts()
	v.taps()
	v.gauges()
	v.rounds()
	v.conditions()
	v.readings()
	v.requirements()
	v.channels()
	slices.SortStableFunc(v.problems, func(a, b Problem) int { return int(b.Severity) - int(a.Severity) })
	return v.problems
}

// validation is a survey with its names looked up. Of a name that occurs twice the
// first is meant; that it occurs twice was told by the reader.
type validation struct {
	*Survey
	point    map[string]*Point
	pipe     map[string]*Pipe
	fitting  map[string]*Fitting
	machine  map[string]*Machine
	tap      map[string]*Tap
	gauge    map[string]*Gauge
	round    map[string]*Round
	problems Problems
	dangling bool              // a pipe or machine does not join two known points
	remedies map[string]string // by table and name: one slip may fill a whole file
}

func newValidation(s *Survey) *validation {
	return &validation{
		Survey:   s,
		remedies: map[string]string{},
		point:    byName(s.Points, func(x *Point) string { return x.Name }),
		pipe:     byName(s.Pipes, func(x *Pipe) string { return x.Name }),
		fitting:  byName(s.Fittings, func(x *Fitting) string { return x.Name }),
		machine:  byName(s.Machines, func(x *Machine) string { return x.Name }),
		tap:      byName(s.Taps, func(x *Tap) string { return x.Name }),
		gauge:    byName(s.Gauges, func(x *Gauge) string { return x.Name }),
		round:    byName(s.Rounds, func(x *Round) string { return x.Name }),
	}
}

func byName[T any](list []T, name func(*T) string) map[string]*T {
	m := make(map[string]*T, len(list))
	for i := range list {
		if n := name(&list[i]); n != "" && m[n] == nil {
			m[n] = &list[i]
		}
	}
	return m
}

// namesOf lists names in the order of their table.
func namesOf[T any](list []T, name func(*T) string) []string {
	out := make([]string, len(list))
	for i := range list {
		out[i] = name(&list[i])
	}
	return out
}

func (v *validation) pointNames() []string {
	return namesOf(v.Points, func(x *Point) string { return x.Name })
}
func (v *validation) pipeNames() []string {
	return namesOf(v.Pipes, func(x *Pipe) string { return x.Name })
}
func (v *validation) fittingNames() []string {
	return namesOf(v.Fittings, func(x *Fitting) string { return x.Name })
}
func (v *validation) machineNames() []string {
	return namesOf(v.Machines, func(x *Machine) string { return x.Name })
}
func (v *validation) tapNames() []string {
	return namesOf(v.Taps, func(x *Tap) string { return x.Name })
}
func (v *validation) gaugeNames() []string {
	return namesOf(v.Gauges, func(x *Gauge) string { return x.Name })
}
func (v *validation) roundNames() []string {
	return namesOf(v.Rounds, func(x *Round) string { return x.Name })
}

func (v *validation) fatal(at Source, column, text, reason, remedy string) {
	v.problems = append(v.problems, Problem{Source: at, Severity: Fatal, Column: column, Text: text, Reason: reason, Remedy: remedy})
}

func (v *validation) notice(at Source, column, text, reason, remedy string) {
	v.problems = append(v.problems, Problem{Source: at, Severity: Notice, Column: column, Text: text, Reason: reason, Remedy: remedy})
}

// unknown tells of a name that its table does not have. An empty name was told by the
// reader where it is needed.
func (v *validation) unknown(at Source, column, name, table string, known []string) {
	if name == "" {
		return
	}
	key := table + "\x00" + name
	if v.remedies[key] == "" {
		v.remedies[key] = didYouMean(name, known, table)
	}
	v.fatal(at, column, name, table+" does not have it", v.remedies[key])
}

// positive tells of a length or the like that is not above nought.
func (v *validation) positive(at Source, column string, value float64, text string) {
	if value <= 0 {
		v.fatal(at, column, text, "must be above nought", "correct the number")
	}
}

// metres and millimetres print a length of the tables.
func metres(x float64) string      { return figures(x) + " m" }
func millimetres(x float64) string { return figures(1e3*x) + " mm" }

// figures prints up to six figures: what a table states, without the dust of
// conversion.
func figures(x float64) string {
	f, err := strconv.ParseFloat(strconv.FormatFloat(x, 'g', 6, 64), 64)
	if err != nil {
		return fmt.Sprint(x)
	}
	return strconv.FormatFloat(f, 'f', -1, 64)
}

// some lists names, the first ten of many.
func some(names []string) string {
	const most = 10
	if len(names) > most {
		return fmt.Sprintf("%s and %d more", strings.Join(names[:most], ", "), len(names)-most)
	}
	return strings.Join(names, ", ")
}
