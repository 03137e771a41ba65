package check

import (
	"math"
	"slices"

	"tapround/survey"
)

// pieces is the pipe system cut up at some places on its pipes: points and lengths of
// pipe that hang together have one piece.
type pieces struct {
	parent []int
	points map[string]int
	first  map[string]int       // by pipe: its length next to the From end
	cuts   map[string][]float64 // by pipe, ascending
}

// atFromEnd is the cut of a shut pipe, which is closed at its From end: its whole
// length hangs on the To end.
var atFromEnd = math.Inf(-1)

func cutUp(s *survey.Survey, cuts map[string][]float64) *pieces {
	p := &pieces{points: map[string]int{}, first: map[string]int{}, cuts: cuts}
	add := func() int { p.parent = append(p.parent, len(p.parent)); return len(p.parent) - 1 }
	for _, x := range s.Points {
		p.points[x.Name] = add()
	}
	for _, x := range s.Pipes {
		slices.Sort(cuts[x.Name])
		p.first[x.Name] = add()
		last := p.first[x.Name]
		for range cuts[x.Name] {
			last = add()
		}
		p.join(p.first[x.Name], p.points[x.From])
		p.join(last, p.points[x.To])
	}
	return p
}

func (p *pieces) root(i int) int {
	for p.parent[i] != i {
		p.parent[i] = p.parent[p.parent[i]] // keeps long lines of pipes short
		i = p.parent[i]
	}
	return i
}

func (p *pieces) join(i, j int) { p.parent[p.root(i)] = p.root(j) }

// at gives the piece of a point.
func (p *pieces) at(point string) int { return p.root(p.points[point]) }

// along gives the piece of a pipe at a chainage. What is cut at the chainage itself lies
// beyond it.
func (p *pieces) along(pipe string, x float64) int {
	i := p.first[pipe]
	for _, c := range p.cuts[pipe] {
		if c < x {
			i++
		}
	}
	return p.root(i)
}

// of gives the piece a tap is in.
func (p *pieces) of(t survey.Tap) int {
	if t.Pipe != "" {
		return p.along(t.Pipe, t.At)
	}
	return p.at(t.Point)
}

// shutCuts lists where shut pipes and fittings close the system.
func shutCuts(s *survey.Survey, f survey.RoundConditions) map[string][]float64 {
	cuts := map[string][]float64{}
	for _, p := range s.Pipes {
		if f.Shut[p.Name] {
			cuts[p.Name] = append(cuts[p.Name], atFromEnd)
		}
	}
	for _, x := range s.Fittings {
		if f.Shut[x.Name] {
			cuts[x.Pipe] = append(cuts[x.Pipe], x.At)
		}
	}
	return cuts
}

// still says where nothing flows in a round.
type still struct {
	pieces *pieces
	// reservoir that stands open to the piece, by piece; pieces that are not at rest,
	// or behind a check valve, are not in it.
	reservoir map[int]string
}

// stillness finds the pieces at rest: with check valves taken as open, a part of the
// system with one reservoir, no outlet, no running machine and no draw-off. A check
// valve may hold any head behind it, so only what is open to the reservoir both ways
// must show its level.
func (v *view) stillness(f survey.RoundConditions) still {
	flow := cutUp(v.s, shutCuts(v.s, f))
	moving := map[int]bool{}
	reservoirs := map[int][]string{}
	for _, p := range v.s.Points {
		i := flow.at(p.Name)
		switch {
		case p.Kind == survey.Reservoir:
			reservoirs[i] = append(reservoirs[i], p.Name)
			continue
		case p.Kind == survey.Outlet:
			moving[i] = true
		}
		for _, d := range f.DrawOffs[p.Name] {
			if !d.Value.OK || d.Value.V != 0 || d.SD.Or(0) != 0 {
				moving[i] = true
			}
		}
	}
	for _, m := range v.s.Machines {
		if !f.Stopped[m.Name] {
			moving[flow.at(m.From)], moving[flow.at(m.To)] = true, true
		}
	}
	cuts := shutCuts(v.s, f)
	for _, x := range v.s.Fittings {
		if x.Kind == survey.CheckValve {
			cuts[x.Pipe] = append(cuts[x.Pipe], x.At)
		}
	}
	out := still{pieces: cutUp(v.s, cuts), reservoir: map[int]string{}}
	for i, names := range reservoirs {
		if len(names) == 1 && !moving[i] {
			out.reservoir[out.pieces.at(names[0])] = names[0]
		}
	}
	return out
}

// open gives the reservoir whose level a tap must show in this round, since nothing
// flows between them; ok is false where that is not certain.
func (x still) open(t survey.Tap) (reservoir string, ok bool) {
	reservoir, ok = x.reservoir[x.pieces.of(t)]
	return reservoir, ok
}

// along reports whether a pipe is at rest at a chainage.
func (x still) along(pipe string, at float64) bool {
	_, ok := x.reservoir[x.pieces.along(pipe, at)]
	return ok
}
