package hydraulic

import "math"

// Station is a place on a link where its grade lines bend or step. A fitting makes
// two, one before and one after it.
type Station struct {
	At                 float64 // m from the From end
	Total, Piezometric float64 // m
	After              bool    // just beyond what stands at At
}

// Profile gives the heads at both ends of a link and on both sides of each fitting, in
// order from the From end. The ends are those of the pipe, inside it; a machine has its
// two sides. Heads are NaN where Read has none.
func (v *Solver) Profile(link int) []Station {
	l := &v.sys.links[link]
	if l.Pipe == nil {
		return []Station{v.station(link, 0, false), v.station(link, 0, true)}
	}
	out := []Station{v.station(link, 0, false)}
	for _, f := range l.Pipe.Fittings {
		if last := out[len(out)-1]; last.At != f.At || last.After {
			out = append(out, v.station(link, f.At, false))
		}
		out = append(out, v.station(link, f.At, true))
	}
	if last := out[len(out)-1]; last.At < l.Pipe.Length {
		out = append(out, v.station(link, l.Pipe.Length, true))
	}
	return out
}

func (v *Solver) station(link int, at float64, after bool) Station {
	p := Probe{Point: -1, Link: link, At: at, Depth: math.NaN()}
	if after {
		p.At = math.Nextafter(at, math.Inf(1))
	}
	st := Station{At: at, After: after}
	p.View = Total
	st.Total = v.Read(p)
	p.View = Piezometric
	st.Piezometric = v.Read(p)
	return st
}
