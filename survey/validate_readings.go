package survey

import (
	"fmt"
	"math"

	"tapround/survey/unit"
)

// shownBy lists the gauges that can show a reading of a kind.
var shownBy = map[ReadingKind][]GaugeKind{
	Static: {PressureGauge, AbsoluteGauge}, TotalHead: {PressureGauge, AbsoluteGauge}, Jet: {PressureGauge, AbsoluteGauge},
	Velocity: {DifferenceGauge}, Difference: {DifferenceGauge}, FlowRate: {FlowMeter}, WaterLevel: {LevelGauge},
}

func (v *validation) readings() {
	used := map[string]int{}
	late := map[span]*outside{}
	var order []span
	total := 0
	for i := range v.Readings {
		r := &v.Readings[i]
		if r.SetAside != "" {
			continue
		}
		total++
		used[r.Round]++
		if v.round[r.Round] == nil {
			v.unknown(r.Source, "round", r.Round, "rounds.csv", v.roundNames())
		} else if o := v.outOfRound(r); o != nil {
			k := span{r.Source.File, r.Round}
			if late[k] == nil {
				late[k], order = o, append(order, k)
			}
			late[k].count++
		}
		v.readingPlace(r)
		v.readingGauge(r)
	}
	for _, k := range order {
		v.tellOutside(late[k])
	}
	v.unreadRounds(used)
	if total == 0 && len(v.Readings) > 0 {
		v.fatal(Source{File: v.Readings[0].Source.File}, "", "", "no reading can be used", "mend what was set aside")
	}
}

// unreadRounds points out rounds that no reading in use belongs to.
func (v *validation) unreadRounds(used map[string]int) {
	var unread []string
	var first Source
	for i := range v.Rounds {
		if r := &v.Rounds[i]; used[r.Name] == 0 {
			if unread == nil {
				first = r.Source
			}
			unread = append(unread, r.Name)
		}
	}
	if len(unread) > 0 && len(v.Readings) > 0 {
		v.notice(first, "round", unread[0], "rounds without a reading in use: "+some(unread), "look at the rounds of the readings, and at what was set aside")
	}
}

// readingPlace looks at the taps of a reading, its depth and its gauge's height.
func (v *validation) readingPlace(r *Reading) {
	t := v.tap[r.Tap]
	if t == nil {
		v.unknown(r.Source, "tap", r.Tap, "taps.csv", v.tapNames())
	}
	v.otherTap(r)
	if r.Depth.OK {
		v.depth(r, t)
	}
	if math.Abs(r.GaugeHeight) > farLevel {
		v.notice(r.Source, "gauge_height", metres(r.GaugeHeight), "is a very long gauge line", "look at the number and its unit: it is the height above the tap and not above the datum")
	}
	switch {
	case t == nil:
	case r.Kind == WaterLevel && t.Pipe != "":
		v.notice(r.Source, "tap", r.Tap, "a water level read at a tap that is on a pipe", "put the tap at the point that has the water surface")
	case r.Kind == FlowRate && t.Point != "" && v.pipesAt(t.Point) > 1:
		v.notice(r.Source, "tap", r.Tap, fmt.Sprintf("a flow read at point %s, where several pipes meet: it counts for the widest one", t.Point), "put the tap on the pipe whose flow was read")
	}
}

func (v *validation) otherTap(r *Reading) {
	switch {
	case r.Kind == Difference && r.OtherTap == "":
		v.fatal(r.Source, "other_tap", "", "a difference needs the tap it was taken from", "write the tap on the low side of the gauge")
	case r.Kind == Difference && r.OtherTap == r.Tap:
		v.fatal(r.Source, "other_tap", r.OtherTap, "is the same tap on both sides of the gauge", "write the tap on the low side of the gauge")
	case r.Kind == Difference && v.tap[r.OtherTap] == nil:
		v.unknown(r.Source, "other_tap", r.OtherTap, "taps.csv", v.tapNames())
	case r.Kind != Difference && r.OtherTap != "" && r.Kind != "":
		v.notice(r.Source, "other_tap", r.OtherTap, fmt.Sprintf("a reading of kind %s has one tap; this was not used", r.Kind), "leave it empty, or write the kind difference")
	}
}

// depth looks at where a pitot opening stood.
func (v *validation) depth(r *Reading, t *Tap) {
	if r.Kind != TotalHead && r.Kind != Velocity {
		v.notice(r.Source, "depth", millimetres(r.Depth.V), fmt.Sprintf("a reading of kind %s has no depth; this was not used", r.Kind), "leave it empty, or write the kind total or velocity")
		return
	}
	if r.Depth.V <= 0 {
		v.fatal(r.Source, "depth", millimetres(r.Depth.V), "an opening at the wall meets no flow", "write its distance from the near wall, or leave it empty for the centreline")
		return
	}
	if p := v.pipeRead(t); p != nil && r.Depth.V >= p.Bore {
		v.fatal(r.Source, "depth", millimetres(r.Depth.V), fmt.Sprintf("is not within the bore of pipe %s, %s", p.Name, millimetres(p.Bore)), "write its distance from the near wall; look at the unit in the heading")
	}
}

// pipeRead is the pipe that a tap reads on: its own, or the widest at its point, the
// first listed on a tie.
func (v *validation) pipeRead(t *Tap) *Pipe {
	if t == nil {
		return nil
	}
	if t.Pipe != "" {
		return v.pipe[t.Pipe]
	}
	var widest *Pipe
	for i := range v.Pipes {
		p := &v.Pipes[i]
		if (p.From == t.Point || p.To == t.Point) && (widest == nil || p.Bore > widest.Bore) {
			widest = p
		}
	}
	return widest
}

func (v *validation) pipesAt(point string) int {
	n := 0
	for i := range v.Pipes {
		if v.Pipes[i].From == point || v.Pipes[i].To == point {
			n++
		}
	}
	return n
}

// readingGauge looks at whether the gauge could show what was read.
func (v *validation) readingGauge(r *Reading) {
	if r.Kind == Velocity && r.Value < 0 {
		v.notice(r.Source, "reading", r.Written, "a velocity head below nought: the opening did not face the flow", "look whether the two lines of the gauge were changed over")
	}
	g := v.gauge[r.Gauge]
	if g == nil {
		v.unknown(r.Source, "gauge", r.Gauge, "gauges.csv", v.gaugeNames())
		if pressure(r.Kind) && r.Value < vacuum {
			v.fatal(r.Source, "reading", r.Written, "is below a vacuum", "correct the number or its unit")
		}
		return
	}
	fits := g.Kind == "" || r.Kind == ""
	for _, k := range shownBy[r.Kind] {
		fits = fits || g.Kind == k
	}
	switch {
	case !fits:
		v.fatal(r.Source, "gauge", r.Gauge, fmt.Sprintf("gauge %s is of kind %s and cannot show a reading of kind %s", g.Name, g.Kind, r.Kind), "correct the gauge's number or the kind of the reading")
	case g.Kind == AbsoluteGauge && r.Value < 0:
		v.fatal(r.Source, "reading", r.Written, "an absolute pressure is never below nought", "correct the number, or the kind of the gauge if it reads above atmosphere")
	case pressure(r.Kind) && g.Kind == PressureGauge && r.Value < vacuum:
		v.fatal(r.Source, "reading", r.Written, "is below a vacuum", "correct the number or its unit")
	case g.Low >= g.High: // told of the gauge
	case r.Value < g.Low-slack(g) || r.Value > g.High+slack(g):
		v.notice(r.Source, "reading", r.Written, fmt.Sprintf("is off the scale of gauge %s, %s", g.Name, scale(g)), "look at the number, its unit and the gauge's number")
	}
}

// slack is what a pointer may stand beyond the ends of the scale: a meter at rest
// shows a little to either side of nought.
func slack(g *Gauge) float64 { return math.Max(g.Resolution.V, g.Accuracy.V*g.Span()) }

func pressure(k ReadingKind) bool { return k == Static || k == TotalHead || k == Jet }

// scale prints the ends of a gauge's scale in its own unit.
func scale(g *Gauge) string {
	d := unit.Pressure
	switch g.Kind {
	case FlowMeter:
		d = unit.Flow
	case LevelGauge:
		d = unit.Length
	}
	u, err := unit.Parse(g.Unit, d)
	if err != nil {
		return "" // a unit that cannot be read was told
	}
	return fmt.Sprintf("%s to %s %s", figures(u.FromSI(g.Low)), figures(u.FromSI(g.High)), u.Name)
}

// span is the readings of one round in one file.
type span struct{ file, round string }

// outside is the first reading taken outside its round, and how many more were.
type outside struct {
	first *Reading
	round *Round
	count int
}

func (v *validation) outOfRound(r *Reading) *outside {
	round := v.round[r.Round]
	if !round.End.IsZero() && round.End.Before(round.Start) {
		return nil // told of the round
	}
	if r.Time.IsZero() || !(!round.Start.IsZero() && r.Time.Before(round.Start) || !round.End.IsZero() && r.Time.After(round.End)) {
		return nil
	}
	return &outside{first: r, round: round}
}

func (v *validation) tellOutside(o *outside) {
	reason := "was taken outside"
	if o.count > 1 {
		reason = fmt.Sprintf("and %d more in this file were taken outside", o.count-1)
	}
	limits := ""
	switch start, end := o.round.Start, o.round.End; {
	case end.IsZero():
		limits = "from " + start.Format(clock)
	case start.IsZero():
		limits = "up to " + end.Format(clock)
	default:
		limits = start.Format(clock) + " to " + end.Format(clock)
	}
	v.notice(o.first.Source, "time", o.first.Time.Format(clock), fmt.Sprintf("%s round %s, %s", reason, o.round.Name, limits), "look at the time, the round and the time zone")
}
