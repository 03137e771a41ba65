package figure

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/plot/vg"

	"tapround/report"
)

// sheet is one picture with all it is made of. layout fixes where everything goes;
// paint only draws.
type sheet struct {
	title, round string
	description  string
	x            scale
	xLabel       string
	spans        []span
	names        []name
	panels       []*panel
	entries      []entry
	notes        []string

	width, height vg.Length
	left, right   vg.Length // of the data area
	rotated       bool      // names stand upright because flags would not fit
	nameRows      int
	nameHeight    vg.Length
	poles         []label
	strips        []strip
	stripRows     int
	legendRows    [][]entry
	noteLines     []string
}

func (s sheet) heading() string {
	if s.round == "" {
		return s.title
	}
	return s.title + ", " + s.round
}

// span is a stretch that is hatched and named over the panels.
type span struct {
	from, to float64
	label    string
	vacuum   bool // below atmosphere; else suspect
}

// name is a tap, point, fitting or machine at its chainage.
type name struct {
	text   string
	x      float64
	device bool
	quiet  bool // a point without a tap
}

// Above this share of the whole range the heads are drawn in one panel with the
// pipe; below it they would be a flat line, and get a panel and scale of their own.
const splitBelow = 0.4

func profileSheet(p report.Profile) sheet {
	p = finite(p)
	s := sheet{title: "Grade lines, " + clean(p.Title), round: "round " + clean(p.Round)}
	s.along(p)
	heads, pipe := headRange(p), groundRange(p)
	whole := heads.and(pipe)
	switch {
	case !pipe.ok || !heads.ok || heads.size() > splitBelow*whole.size() || heads.lo < pipe.hi:
		s.panels = []*panel{{profile: p, heads: true, pipe: true, bound: whole, height: 250, yLabel: "level and head above datum, m"}}
	default:
		s.panels = []*panel{
			{profile: p, heads: true, bound: heads, height: 200, yLabel: "head above datum, m"},
			{profile: p, pipe: true, bound: pipe, height: 80, yLabel: "pipe level, m"},
		}
		s.notes = append(s.notes, "Two scales: the heads above are stretched; the pipe below has its own scale.")
	}
	s.describe([]report.Profile{p})
	return s
}

// roundsSheet shares one head scale between the rounds. The pipe, the same in all
// of them, stands once below on its own scale, unless the line dips under it
// somewhere: that can only be seen where both are drawn together.
func roundsSheet(ps []report.Profile) sheet {
	var s sheet
	if len(ps) == 0 {
		s.title = "Grade lines: no rounds"
		return s
	}
	clear := make([]report.Profile, len(ps))
	var heads, pipe bound
	together := false
	for i, p := range ps {
		clear[i] = finite(p)
		heads, pipe = heads.and(headRange(clear[i])), pipe.and(groundRange(clear[i]))
		together = together || len(p.BelowAir) > 0
	}
	s.title = "Grade lines, " + clean(ps[0].Title)
	s.round = fmt.Sprintf("%d rounds on one scale", len(ps))
	s.along(clear[0])
	for _, p := range clear {
		n := &panel{profile: p, heads: true, bound: heads, height: 110, caption: "round " + clean(p.Round)}
		if together || !heads.ok {
			n.pipe, n.bound = true, heads.and(pipe)
		}
		s.panels = append(s.panels, n)
	}
	s.panels[(len(s.panels)-1)/2].yLabel = "head above datum, m"
	if !together && heads.ok && pipe.ok {
		s.panels = append(s.panels, &panel{profile: clear[0], pipe: true, bound: pipe, height: 70, yLabel: "pipe level, m"})
	}
	s.describe(clear)
	return s
}

// along takes what all panels share from one profile: the route, its names, and
// the stretches that are spoken of.
func (s *sheet) along(p report.Profile) {
	reach := bound{}
	for _, r := range p.Route {
		reach = reach.with(r.X)
	}
	for _, l := range append(append([][]report.XY{p.Ground}, p.Piezometric...), p.Total...) {
		for _, v := range l {
			reach = reach.with(v.X)
		}
	}
	if !reach.ok || reach.size() == 0 {
		reach = bound{lo: reach.lo, hi: reach.lo + 1, ok: true}
	}
	s.x.min, s.x.max = reach.lo, reach.hi
	for _, v := range p.Suspect {
		s.spans = append(s.spans, span{from: v.From, to: v.To, label: clean(v.Label)})
	}
	for _, v := range p.BelowAir {
		s.spans = append(s.spans, span{from: v.From, to: v.To, label: clean(v.Label), vacuum: true})
	}
	for _, t := range p.Taps {
		s.addName(name{text: clean(t.Name), x: t.X})
	}
	for _, r := range p.Route {
		s.addName(name{text: clean(r.Name), x: r.X, quiet: true})
	}
	for _, d := range p.Devices {
		s.addName(name{text: clean(d.Name), x: d.X, device: true})
	}
}

// xTicks marks the route from its beginning to its end, which need not be ticks.
func (s *sheet) xTicks() {
	lo, hi := s.x.min, s.x.max
	s.x = newScale(lo, hi, max(2, int(s.width/80)))
	s.x.min, s.x.max = lo, hi
	s.xLabel = "distance along the route, m"
	if hi-lo >= 20000 {
		s.x.per, s.xLabel = 1000, "distance along the route, km"
	}
}

// addName keeps one of the names that say the same of one place, as a tap at a
// point of its own name does.
func (s *sheet) addName(n name) {
	for _, o := range s.names {
		if o.text == n.text && o.device == n.device && math.Abs(o.x-n.x) < 1e-6*(1+math.Abs(n.x)) {
			return
		}
	}
	s.names = append(s.names, n)
}

// layout fixes the sizes: first the width of the axis labels, then the rows of
// names, then the height.
func (s *sheet) layout() {
	s.xTicks()
	s.measureAxes()
	s.right = s.width - 16
	s.placeNames()
	s.placeSpans()
	s.choose()
	s.fillLegend()
	s.noteLines = nil
	for _, n := range s.notes {
		s.noteLines = append(s.noteLines, wrap(italicText(smallSize, pencil), n, s.width-2*edge)...)
	}
	h := vg.Length(20) // title
	h += vg.Length(s.stripRows)*stripRow + s.nameHeight
	for _, p := range s.panels {
		h += p.captionHeight() + p.height + panelGap
	}
	h += axisHeight + vg.Length(len(s.legendRows))*legendRow + vg.Length(len(s.noteLines))*noteRow + 6
	s.height = h
}

const (
	stripRow   vg.Length = 13
	nameRow    vg.Length = 10.5
	legendRow  vg.Length = 13
	noteRow    vg.Length = 11
	panelGap   vg.Length = 12
	axisHeight vg.Length = 30
	edge       vg.Length = 6
)

// measureAxes finds the width that the widest level label needs.
func (s *sheet) measureAxes() {
	st := plainText(textSize, ink)
	widest := vg.Length(0)
	for _, p := range s.panels {
		p.y = newScale(p.bound.lo, p.bound.hi, max(2, int(p.height/34)))
		// Air over the highest and under the lowest line.
		if margin := 0.04 * (p.y.max - p.y.min); p.y.max-p.bound.hi < margin || p.bound.lo-p.y.min < margin {
			p.y = newScale(p.bound.lo-margin, p.bound.hi+margin, max(2, int(p.height/34)))
		}
		for _, t := range p.y.Ticks(p.y.min, p.y.max) {
			widest = max(widest, st.Width(t.Label))
		}
	}
	s.left = edge + 13 + widest + 8
}

// xAt is where a chainage stands.
func (s *sheet) xAt(x float64) vg.Length {
	return s.left + vg.Length((x-s.x.min)/(s.x.max-s.x.min))*(s.right-s.left)
}

const (
	mostFlagRows           = 5
	longestName  vg.Length = 90
)

func (s *sheet) placeNames() {
	s.poles = s.poles[:0]
	overflow := vg.Length(0)
	for _, n := range s.names {
		st := n.style()
		n.text = fit(st, n.text, longestName)
		s.poles = append(s.poles, label{text: n.text, x: s.xAt(n.x), width: st.Width(n.text) + 2, device: n.device, quiet: n.quiet})
	}
	for _, p := range s.poles {
		overflow = max(overflow, p.x+p.width+3-(s.width-edge))
	}
	if overflow > 0 && overflow < 70 {
		// The last flags fly into the margin: make it wide enough, and place again.
		s.right -= overflow
		for i := range s.poles {
			s.poles[i].x = s.xAt(s.names[i].x)
		}
	}
	s.nameRows = flags(s.poles, 3)
	s.rotated = s.nameRows > mostFlagRows || overflow >= 70
	s.nameHeight = vg.Length(s.nameRows)*nameRow + 4
	if len(s.poles) == 0 {
		s.nameHeight = 2
	}
	if s.rotated {
		s.placeUpright()
	}
}

const uprightGap vg.Length = 9.5

// placeUpright turns the names upright where flags would need too many rows. Where
// even so there are too many, points without a tap go first, then fittings, then
// every so many of the rest; how many is said.
func (s *sheet) placeUpright() {
	room := int((s.right-s.left)/uprightGap) + 1
	all := len(s.poles)
	for _, drop := range []func(label) bool{func(l label) bool { return l.quiet }, func(l label) bool { return l.device }} {
		if len(s.poles) > room {
			s.poles = slices.DeleteFunc(s.poles, drop)
		}
	}
	if n := len(s.poles); n > room {
		kept := make([]label, room)
		for i := range kept {
			kept[i] = s.poles[i*(n-1)/max(1, room-1)]
		}
		s.poles = kept
	}
	if n := all - len(s.poles); n > 0 {
		s.notes = append(s.notes, fmt.Sprintf("%d names do not fit along this route and are left out.", n))
	}
	xs := make([]vg.Length, len(s.poles))
	longest := vg.Length(0)
	for i, p := range s.poles {
		xs[i] = p.x
		longest = max(longest, p.width)
	}
	for i, at := range spread(xs, uprightGap, s.left, s.right) {
		s.poles[i].at = at
	}
	s.nameHeight = longest + 12
}

func (s *sheet) placeSpans() {
	st := boldText(smallSize, rust)
	s.strips = s.strips[:0]
	for i, v := range s.spans {
		v.label = fit(st, v.label, 220)
		s.spans[i].label = v.label
		lo, hi := s.spanEnds(v)
		mid, half := (lo+hi)/2, st.Width(v.label)/2+4
		lo, hi = min(lo, mid-half), max(hi, mid+half)
		s.strips = append(s.strips, strip{lo: lo, hi: hi})
	}
	s.stripRows = pack(s.strips, 4)
}

// spanEnds are the ends of the hatching: a stretch of no length, as a fitting is,
// is hatched wide enough to be seen.
func (s *sheet) spanEnds(v span) (lo, hi vg.Length) {
	lo, hi = s.xAt(math.Max(v.from, s.x.min)), s.xAt(math.Min(v.to, s.x.max))
	if hi-lo < 7 {
		mid := (lo + hi) / 2
		lo, hi = mid-3.5, mid+3.5
	}
	return max(lo, s.left), min(hi, s.right)
}
