package hydraulic

import "math"

// Where nothing flows through any one-way link around a part, and nothing is drawn in
// it, the balances leave its head open: between what fills it and what it could flow
// into, any head stands. idle settles these heads by what a crew would find, whichever
// way the solution was reached:
//
//   - a part that something could fill has the head of what fills it;
//   - a part that can only flow out has the head at which its outflow ceased, and so
//     stands full up to its outlet;
//   - a part that check valves shut in between a lower and a higher head may have
//     trapped anything between: its head is not known. A running pump or turbine
//     traps nothing.
type idle struct {
	v     *Solver
	part  []int     // per point
	rel   []float64 // per point: its head above that of its part
	links []int     // one-way links with no flow at the edge of an open part

	// Per part. The head of a held part is 0, its points having theirs; an open part
	// starts with none, NaN, and a trapped one keeps none.
	head          []float64
	held, trapped []bool
	// A machine drives water round in it: spins where that is still to be solved, turns
	// where it is solved but for the level.
	spins, turns  []bool
	low, high     []float64 // bounds by links; infinite: none
	byLow, byHigh []int     // links that set them, -1 none
}

// settleIdle gives open parts their heads and closes the links that do not give them.
// Where a part would flow through instead, as what fills it stands higher than what it
// flows into, it opens the links on that way and returns one of them, else -1.
func (v *Solver) settleIdle() (opened int, err error) {
	d := v.findIdle()
	if len(d.links) == 0 {
		return -1, nil
	}
	if !d.raise() {
		// A pump lifts round a ring of open parts: it runs, and no head holds without.
		for _, i := range d.links {
			d.start(i)
		}
		return d.links[0], nil
	}
	d.lower(func(k int) bool { return d.open(k) })
	if opened = d.openThrough(); opened >= 0 {
		return opened, nil
	}
	d.fill()
	d.lower(func(k int) bool { return d.open(k) && !d.trapped[k] })
	for k := range d.head {
		if d.open(k) && !d.trapped[k] && d.byHigh[k] >= 0 {
			d.head[k] = d.high[k]
		} else {
			d.byHigh[k] = -1
		}
	}
	copy(v.mark, v.live)
	before := append([]bool(nil), v.blocked...)
	for _, i := range d.links {
		a, b := d.ends(i)
		v.blocked[i] = d.byLow[b] != i && d.byHigh[a] != i
	}
	if err := v.feed(); err != nil {
		return -1, err
	}
	for p, k := range d.part {
		if (d.held[k] || d.turns[k]) && v.mark[p] && !v.live[p] {
			// It hangs on nothing but the links at its edge; they stay as they are.
			copy(v.blocked, before)
			return -1, v.feed()
		}
	}
	for i := range v.sys.links {
		if a, b := d.ends(i); a != b || (!d.held[a] && !d.turns[a]) {
			v.flow[i] = 0
		}
	}
	for p, k := range d.part {
		if !d.held[k] && !d.open(k) {
			v.head[p] = d.head[k] + d.rel[p]
		}
	}
	return -1, v.newton()
}

// findIdle parts the system along one-way links that pass nothing.
func (v *Solver) findIdle() *idle {
	s := v.sys
	d := &idle{v: v, part: make([]int, len(s.points)), rel: make([]float64, len(s.points))}
	least := v.leastBackflow()
	flows := func(i int) bool { return v.in[i] && math.Abs(v.flow[i]) > least }
	clear(v.mark)
	for p := range s.points {
		if v.mark[p] {
			continue
		}
		v.mark[p] = true
		v.queue = append(v.queue[:0], p)
		v.spread(v.mark, func(i, _ int) bool { return !v.shut[i] && (s.ways[i] == free || flows(i)) })
		head := math.NaN()
		for _, o := range v.queue {
			d.part[o] = len(d.head)
			if s.points[o].Kind != Junction || v.draw[o] != 0 {
				head = 0
			}
		}
		d.head, d.held = append(d.head, head), append(d.held, head == 0)
		d.trapped, d.spins, d.turns = append(d.trapped, false), append(d.spins, false), append(d.turns, false)
		d.low, d.high = append(d.low, math.Inf(-1)), append(d.high, math.Inf(1))
		d.byLow, d.byHigh = append(d.byLow, -1), append(d.byHigh, -1)
	}
	for i := range s.links {
		if a, b := d.ends(i); a == b && !v.shut[i] && s.links[i].Machine != nil && !v.blocked[i] && d.open(a) {
			d.turns[a], d.spins[a] = v.live[s.links[i].From], !v.live[s.links[i].From]
		}
	}
	for p, k := range d.part {
		if d.held[k] || d.turns[k] {
			d.rel[p] = v.head[p]
		}
	}
	for i, w := range s.ways {
		a, b := d.ends(i)
		if w != free && !v.shut[i] && !flows(i) && a != b && (d.open(a) || d.open(b)) {
			d.links = append(d.links, i)
		}
	}
	return d
}

func (d *idle) open(k int) bool { return math.IsNaN(d.head[k]) }

// ends are the parts a link could flow from and to.
func (d *idle) ends(i int) (from, to int) {
	p, q := d.points(i)
	return d.part[p], d.part[q]
}

func (d *idle) points(i int) (from, to int) {
	l := &d.v.sys.links[i]
	if d.v.sys.ways[i] == backwardOnly {
		return l.To, l.From
	}
	return l.From, l.To
}

// rise is by how much the head behind link i, without flow, stands above that before.
func (d *idle) rise(i int) float64 {
	h, _ := d.v.bare(i, 0)
	return -h // a backward link is a pipe and has none
}

// raise carries heads of held parts forwards along the links: the least heads of open
// parts. It reports false where they rise for ever.
func (d *idle) raise() bool {
	for again, round := true, 0; again; round++ {
		if round > len(d.head) {
			return false
		}
		again = false
		for _, i := range d.links {
			p, q := d.points(i)
			a, b := d.part[p], d.part[q]
			from := d.head[a]
			if d.open(a) {
				from = d.low[a]
			}
			if h := from + d.rel[p] + d.rise(i) - d.rel[q]; d.open(b) && h > d.low[b] {
				d.low[b], d.byLow[b], again = h, i, true
			}
		}
	}
	return true
}

// lower carries heads backwards: the most heads of the parts that sink admits.
func (d *idle) lower(sink func(k int) bool) {
	for k := range d.high {
		d.high[k], d.byHigh[k] = math.Inf(1), -1
	}
	for again, round := true, 0; again && round <= len(d.head); round++ {
		again = false
		for _, i := range d.links {
			p, q := d.points(i)
			a, b := d.part[p], d.part[q]
			to := d.head[b]
			if d.open(b) {
				to = d.high[b]
			}
			if h := to + d.rel[q] - d.rise(i) - d.rel[p]; sink(a) && h < d.high[a] {
				d.high[a], d.byHigh[a], again = h, i, true
			}
		}
	}
}

// openThrough opens the links on the way through parts that something would flow
// through, and to parts that spin, whose heads must be solved to tell. It returns one of
// the links, -1 where there is none.
func (d *idle) openThrough() int {
	opened := -1
	for k := range d.head {
		reached := d.byLow[k] >= 0 || d.byHigh[k] >= 0
		if !d.open(k) || !reached || (d.low[k] <= d.high[k]+pressed && !d.spins[k]) {
			continue
		}
		opened = max(d.byLow[k], d.byHigh[k])
		for part, n := k, 0; d.byLow[part] >= 0 && n <= len(d.head); n++ {
			i := d.byLow[part]
			d.start(i)
			part, _ = d.ends(i)
		}
		for part, n := k, 0; d.byHigh[part] >= 0 && n <= len(d.head); n++ {
			i := d.byHigh[part]
			d.start(i)
			_, part = d.ends(i)
		}
	}
	return opened
}

func (d *idle) start(i int) {
	v := d.v
	v.blocked[i], v.in[i] = false, true
	v.flow[i] = v.guess(i) / 10
}

// fill decides the parts that something could fill: filled, or trapped. What a trapped
// part fills is cut off with it.
func (d *idle) fill() {
	for k := range d.head {
		d.trapped[k] = d.spins[k] || (d.open(k) && d.byLow[k] >= 0 && d.traps(k))
	}
	for k := range d.head {
		switch {
		case d.trapped[k]:
			d.byLow[k] = -1
		case d.open(k) && d.byLow[k] >= 0:
			d.head[k] = d.low[k]
		}
	}
}

// traps reports a part between check valves: filled through one, kept by another below
// a higher head. A level that stands below an outlet is not kept.
func (d *idle) traps(k int) bool {
	s := d.v.sys
	return s.links[d.byLow[k]].Machine == nil && !d.turns[k] && d.byHigh[k] >= 0 && !d.intoOutlet(d.byHigh[k]) && d.low[k] < d.high[k]-pressed
}

// intoOutlet reports that the chain of links which sets a most head ends at an outlet.
func (d *idle) intoOutlet(i int) bool {
	for n := 0; i >= 0 && n <= len(d.head); n++ {
		_, q := d.points(i)
		if d.v.sys.points[q].Kind == Outlet {
			return true
		}
		i = d.byHigh[d.part[q]]
	}
	return false
}
