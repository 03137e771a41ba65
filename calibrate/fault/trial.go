package fault

import (
	"fmt"
	"math"
	"sort"
	"strings"

	"tapround/calibrate"
)

// trial is one refit with a set of causes.
type trial struct {
	fit *calibrate.Fit
	// evidence is ln p(readings | causes) up to a constant that all trials share:
	// -Phi/2 - ln det/2, plus ln 2 for each one-sided cause, whose prior lives on
	// one side only [Kass, Laplace approximation].
	evidence float64
	causes   []Cause
	prior    float64 // ln of the causes' prior odds
	free     float64 // Phi without the causes' own prior rows
}

func (t *trial) score() float64 { return t.evidence + t.prior }

// try refits with the causes given, started from U of an earlier fit with the
// last cause at theta. Nil where the works cannot be solved or the last cause comes
// out on the wrong side.
func (d *Diagnosis) try(causes []Cause, start []float64, theta float64) *trial {
	u := append([]float64(nil), start...)
	unknowns := make([]calibrate.Unknown, len(causes))
	t := &trial{causes: append([]Cause(nil), causes...)}
	for i, c := range causes {
		unknowns[i] = c.Unknown
		t.prior += math.Log(c.Prior / (1 - c.Prior))
	}
	if len(causes) > 0 && len(u) == len(d.Model.Unknowns)+len(causes)-1 {
		u = append(u, theta/unknowns[len(causes)-1].SD)
	}
	f, err := d.Model.Refit(unknowns, calibrate.Options{Start: u})
	if err != nil || !f.Converged {
		return nil
	}
	t.fit = f
	t.evidence = -f.Phi/2 - f.LnDet()/2
	t.free = f.Phi
	base := len(d.Model.Unknowns)
	for i, c := range causes {
		t.free -= f.U[base+i] * f.U[base+i]
		if c.Unknown.Sign != 0 {
			t.evidence += math.Ln2
			if f.U[base+i]*float64(c.Unknown.Sign) <= 0 {
				return nil
			}
		}
	}
	if d.known == nil {
		d.known = map[string]*trial{}
	}
	d.known[key(causes)] = t
	return t
}

// key names a set of causes whatever their order.
func key(causes []Cause) string {
	names := make([]string, len(causes))
	for i, c := range causes {
		names[i] = fmt.Sprintf("%s %s %d", c.Name(), c.Variant, c.reading)
	}
	sort.Strings(names)
	return strings.Join(names, "|")
}

func (d *Diagnosis) start() *trial {
	if t := d.known[""]; t != nil {
		return t
	}
	return d.try(nil, d.Sound.U, 0)
}

// fitOf refits a set of causes: it is taken from the trials already made, or started from
// one with one cause more, or built up from the sound estimate cause by cause.
func (d *Diagnosis) fitOf(causes []Cause) *trial {
	if t := d.known[key(causes)]; t != nil {
		return d.ordered(t, causes)
	}
	if t := d.fromLarger(causes); t != nil {
		return t
	}
	t := d.start()
	for i := range causes {
		if t == nil {
			return nil
		}
		s, err := screen(t.fit, causes[i:i+1])
		if err != nil {
			return nil
		}
		theta := s.size[0]
		if causes[i].Unknown.Log {
			best := math.Inf(1)
			for _, g := range guess(d.Model, t.fit, causes[i], math.Abs(s.size[0])) {
				if phi, err := t.fit.Profiled([]calibrate.Unknown{causes[i].Unknown}, []float64{g}); err == nil && phi < best {
					best, theta = phi, g
				}
			}
		}
		t = d.try(causes[:i+1], t.fit.U, theta)
	}
	return t
}

// ordered gives a known trial with its causes in the order asked for, since the place of
// a cause in the fit follows it.
func (d *Diagnosis) ordered(t *trial, causes []Cause) *trial {
	for i := range causes {
		if !same(t.causes[i], causes[i]) {
			return d.try(causes, d.reorder(t, causes), 0)
		}
	}
	return t
}

// reorder lays the estimate of a trial out for another list of causes, all of them in it.
func (d *Diagnosis) reorder(t *trial, causes []Cause) []float64 {
	base := len(d.Model.Unknowns)
	u := append([]float64(nil), t.fit.U[:base]...)
	for _, c := range causes {
		for i, x := range t.causes {
			if same(c, x) {
				u = append(u, t.fit.U[base+i])
			}
		}
	}
	return u
}

// fromLarger starts from a known trial that has all of these causes and one more.
func (d *Diagnosis) fromLarger(causes []Cause) *trial {
	if len(causes) == 0 {
		return nil
	}
	for _, k := range d.keys() {
		t := d.known[k]
		if len(t.causes) != len(causes)+1 {
			continue
		}
		all := true
		for _, c := range causes {
			all = all && holds(t.causes, c)
		}
		if all {
			return d.try(causes, d.reorder(t, causes), 0)
		}
	}
	return nil
}

// keys in order, so that every run takes the same way.
func (d *Diagnosis) keys() []string {
	out := make([]string, 0, len(d.known))
	for k := range d.known {
		out = append(out, k)
	}
	sort.Strings(out)
	return out
}

func holds(list []Cause, c Cause) bool {
	for _, x := range list {
		if same(x, c) {
			return true
		}
	}
	return false
}
