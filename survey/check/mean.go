package check

import (
	"math"

	"gonum.org/v1/gonum/mat"

	"tapround/survey"
)

// witness is one thing that shows the head of a part at rest: a head, or the stated
// level of the reservoir.
type witness struct {
	head      survey.Head
	reservoir string // empty: a head
	level     survey.Condition
}

func (w witness) value() float64 {
	if w.reservoir != "" {
		return w.level.Value.V
	}
	return w.head.Value
}

// finest is the standard uncertainty below which no head is believed, m: the meniscus
// in a tube, the ripple on a reservoir (common practice). It keeps covariances regular.
const finest = 1e-3

func cov(a, b witness, same bool) float64 {
	switch {
	case a.reservoir != "" || b.reservoir != "":
		if !same {
			return 0
		}
		return math.Pow(a.level.SD.Or(0), 2) + finest*finest
	case same:
		return covariance(a.head, b.head, true) + finest*finest
	}
	return covariance(a.head, b.head, false)
}

// suspect is what may stand apart: the members of ws are all of one tap, or of one
// gauge, or are the level.
type suspect struct {
	members              []int
	tap, gauge, level    string
	size, sd             float64 // m from the mean of the rest
	rest                 float64 // mean of the rest, m
	restCount, gaugeTaps int
}

func (x suspect) z() float64 { return math.Abs(x.size) / x.sd }

// mean is the generalised least-squares mean m of witnesses y with inverse covariance P,
// and what measures how far a suspect, with a its ones, stands from the rest:
//
//	size = a'P(y - m)/q, standard uncertainty 1/sqrt q, q = a'Pa - (a'P1)^2/(1'P1)
//
// [Baarda 1968, for correlated readings Tamhane and Mah 1985, both from memory].
type mean struct {
	ws       []witness
	p        *mat.SymDense // inverse covariance
	level, w float64       // common head and 1'P1
	chi2     float64
	pull     []float64 // P(y - m)
	ones     []float64 // P1
}

// meanOf is false where the covariance cannot be inverted.
func meanOf(ws []witness) (mean, bool) {
	n := len(ws)
	c := mat.NewSymDense(n, nil)
	for i := range ws {
		for j := i; j < n; j++ {
			c.SetSym(i, j, cov(ws[i], ws[j], i == j))
		}
	}
	var chol mat.Cholesky
	m := mean{ws: ws, p: mat.NewSymDense(n, nil), pull: make([]float64, n), ones: make([]float64, n)}
	if !chol.Factorize(c) || chol.InverseTo(m.p) != nil {
		return m, false
	}
	for i := range ws {
		for j := range ws {
			m.level += m.p.At(i, j) * ws[j].value()
			m.ones[i] += m.p.At(i, j)
		}
		m.w += m.ones[i]
	}
	m.level /= m.w
	for i := range ws {
		for j := range ws {
			m.pull[i] += m.p.At(i, j) * (ws[j].value() - m.level)
		}
		m.chi2 += (ws[i].value() - m.level) * m.pull[i]
	}
	return m, true
}

// dropOf is how much less chi2 would be were witnesses i and j to show di and dj more,
// the covariance staying as it is.
func (m mean) dropOf(i, j int, di, dj float64) float64 {
	linear := di*m.pull[i] + dj*m.pull[j]
	square := di*di*m.p.At(i, i) + dj*dj*m.p.At(j, j) + 2*di*dj*m.p.At(i, j)
	shift := di*m.ones[i] + dj*m.ones[j]
	return -(2*linear + square - shift*shift/m.w)
}

// measure fills size and standard uncertainty of a suspect; false where nothing is left
// to measure it against.
func (m mean) measure(x *suspect) bool {
	if len(x.members) == len(m.ws) {
		return false
	}
	score, aPa, aP1 := 0.0, 0.0, 0.0
	for _, i := range x.members {
		score += m.pull[i]
		aP1 += m.ones[i]
		for _, j := range x.members {
			aPa += m.p.At(i, j)
		}
	}
	q := aPa - aP1*aP1/m.w
	if !(q > 0) {
		return false
	}
	x.size, x.sd = score/q, 1/math.Sqrt(q)
	// Moving the members by their size leaves the mean of the rest.
	x.rest = m.level - aP1/m.w*x.size
	x.restCount = len(m.ws) - len(x.members)
	return true
}

// suspects lists taps, gauges read at more than one tap, and the level, measured.
func (m mean) suspects() []suspect {
	var out []suspect
	add := func(x suspect, in func(witness) bool) {
		taps := map[string]bool{}
		for i, w := range m.ws {
			if in(w) {
				x.members = append(x.members, i)
				taps[w.head.Tap] = true
			}
		}
		x.gaugeTaps = len(taps)
		if x.gauge != "" && x.tap == "" && len(taps) < 2 {
			return // the tap's own entry says it
		}
		if m.measure(&x) {
			out = append(out, x)
		}
	}
	seen := map[string]bool{}
	for _, w := range m.ws {
		h := w.head
		switch {
		case w.reservoir != "":
			add(suspect{level: w.reservoir}, func(o witness) bool { return o.reservoir != "" })
			continue
		case !seen["tap "+h.Tap]:
			seen["tap "+h.Tap] = true
			add(suspect{tap: h.Tap, gauge: h.Gauge}, func(o witness) bool { return o.reservoir == "" && o.head.Tap == h.Tap })
		}
		if h.Gauge != "" && !seen["gauge "+h.Gauge] {
			seen["gauge "+h.Gauge] = true
			add(suspect{gauge: h.Gauge}, func(o witness) bool { return o.reservoir == "" && o.head.Gauge == h.Gauge })
		}
	}
	return out
}

// worst gives the suspects that stand apart most: more than one where the readings
// cannot say which of them it is.
func (m mean) worst() []suspect {
	var out []suspect
	for _, x := range m.suspects() {
		switch {
		case len(out) == 0 || x.z() > out[0].z()*(1+1e-9):
			out = []suspect{x}
		case x.z() > out[0].z()*(1-1e-9):
			out = append(out, x)
		}
	}
	return out
}
