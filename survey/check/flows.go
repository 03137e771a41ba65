package check

import (
	"math"

	"tapround/survey"
)

// flow is a flow known from meters and stated draw-offs alone, m3/s, positive from the
// link's From point to its To point, with its standard uncertainty.
type flow struct{ q, u float64 }

// sign is the direction where it is beyond doubt, else 0.
func (f flow) sign(limit float64) float64 {
	switch {
	case f.q > limit*f.u:
		return 1
	case f.q < -limit*f.u:
		return -1
	}
	return 0
}

// flows gives the flow of every pipe and machine of a round that the data settle: a
// metered pipe, one that is shut or at rest, and, from junction to junction, the last
// unknown of those that meet there, the surest first. Uncertainties are added as if they
// were independent.
func (v *view) flows(r round) map[string]flow {
	known := v.metered(r)
	shut := map[string]bool{}
	for _, x := range v.s.Fittings {
		if r.force.Shut[x.Name] {
			shut[x.Pipe] = true
		}
	}
	type end struct {
		link string
		sign float64 // flow into the point is sign times the link's
	}
	at := map[string][]end{}
	link := func(name, from, to string, closed bool) {
		at[from] = append(at[from], end{name, -1})
		at[to] = append(at[to], end{name, 1})
		if _, ok := known[name]; closed && !ok {
			known[name] = flow{}
		}
	}
	for _, p := range v.s.Pipes {
		link(p.Name, p.From, p.To, r.force.Shut[p.Name] || shut[p.Name] || r.still.along(p.Name, p.Length/2))
	}
	for _, m := range v.s.Machines {
		link(m.Name, m.From, m.To, r.force.Stopped[m.Name])
	}
	for {
		var best end
		var bestFlow flow
		found := false
		for _, p := range v.s.Points {
			drawn, ok := drawnAt(r.force, p.Name)
			if p.Kind != survey.Junction || !ok {
				continue
			}
			var open end
			unknown := 0
			sum, variance := -drawn.q, drawn.u*drawn.u
			for _, e := range at[p.Name] {
				if f, ok := known[e.link]; ok {
					sum += e.sign * f.q
					variance += f.u * f.u
				} else {
					open = e
					unknown++
				}
			}
			if f := (flow{-sum * open.sign, math.Sqrt(variance)}); unknown == 1 && (!found || f.u < bestFlow.u) {
				best, bestFlow, found = open, f, true
			}
		}
		if !found {
			return known
		}
		known[best.link] = bestFlow
	}
}

// metered gives the flow of pipes with a meter, the weighted mean of several.
func (v *view) metered(r round) map[string]flow {
	weights := map[string]float64{}
	out := map[string]flow{}
	for _, h := range r.heads {
		if h.Quantity != survey.VolumeFlow {
			continue
		}
		pipe, _, ok := v.place(h.Tap)
		if !ok {
			continue
		}
		u := math.Max(h.U(), finestFlow)
		w := 1 / (u * u)
		f := out[pipe]
		f.q = (f.q*weights[pipe] + h.Value*w) / (weights[pipe] + w)
		weights[pipe] += w
		f.u = 1 / math.Sqrt(weights[pipe])
		out[pipe] = f
	}
	return out
}

// finestFlow keeps weights of exact meters finite, m3/s.
const finestFlow = 1e-9

// drawnAt sums the stated draw-offs of a point; ok is false where one is to be estimated.
func drawnAt(f survey.RoundConditions, point string) (sum flow, ok bool) {
	variance := 0.0
	for _, d := range f.DrawOffs[point] {
		if !d.Value.OK {
			return flow{}, false
		}
		sum.q += d.Value.V
		variance += d.SD.V * d.SD.V
	}
	sum.u = math.Sqrt(variance)
	return sum, true
}
