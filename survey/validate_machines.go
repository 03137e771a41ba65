package survey

import (
	"fmt"
	"strings"
)

func (v *validation) machines() {
	for i := range v.Machines {
		m := &v.Machines[i]
		v.ends(m.Source, m.From, m.To, string(m.Kind))
		if m.Speed.OK {
			v.positive(m.Source, "speed", m.Speed.V, "")
		}
		switch n := len(m.Duty); {
		case n == 0:
			v.fatal(m.Source, "machine", m.Name, "has no works curve", "add its points of flow and head to duty.csv, two at least")
		case n == 1:
			v.fatal(m.Duty[0].Source, "machine", m.Name, "has one point of its works curve only", "add another point at least")
		}
		rising := false
		for k := range m.Duty {
			v.duty(m, k)
			rising = rising || k > 0 && m.Duty[k].Head > m.Duty[k-1].Head
		}
		if m.Kind == Pump && rising {
			v.notice(m.Duty[0].Source, "head", "", fmt.Sprintf("the works curve of pump %s rises with flow over a part: two flows have one head there", m.Name), "look at the heads; near shut-off it may be so")
		}
	}
}

// duty looks at point k of a works curve.
func (v *validation) duty(m *Machine, k int) {
	d := m.Duty[k]
	switch {
	case d.Flow < 0:
		v.fatal(d.Source, "flow", figures(1e3*d.Flow)+" L/s", "a works curve has no flow below nought", "correct the sign")
	case k > 0 && d.Flow <= m.Duty[k-1].Flow:
		v.fatal(d.Source, "flow", figures(1e3*d.Flow)+" L/s", fmt.Sprintf("does not rise from the point before, %s L/s", figures(1e3*m.Duty[k-1].Flow)), "put the points in the order of their flows, each flow once")
	}
	if d.Head < 0 {
		v.fatal(d.Source, "head", metres(d.Head), "is below nought: a pump gives head and a turbine takes it, both counted positive", "correct the sign")
	}
	if e := d.Efficiency; e.OK && (e.V < 0 || e.V > 1) {
		v.fatal(d.Source, "efficiency", figures(100*e.V)+" %", "must be from 0 to 100 %", "correct the number or the unit in the heading")
	}
}

// parts divides the system where nothing joins it, all valves open, and looks for
// parts that nothing feeds. Where a pipe or machine leads to no known point, which was
// told, there is no saying what hangs together.
func (v *validation) parts() {
	if v.dangling {
		return
	}
	root := map[string]string{}
	var find func(string) string
	find = func(p string) string {
		if root[p] != p {
			root[p] = find(root[p])
		}
		return root[p]
	}
	for i := range v.Points {
		root[v.Points[i].Name] = v.Points[i].Name
	}
	join := func(a, b string) {
		if v.point[a] != nil && v.point[b] != nil {
			root[find(b)] = find(a)
		}
	}
	for i := range v.Pipes {
		join(v.Pipes[i].From, v.Pipes[i].To)
	}
	for i := range v.Machines {
		join(v.Machines[i].From, v.Machines[i].To)
	}
	members := map[string][]*Point{}
	var order []string
	for i := range v.Points {
		p := &v.Points[i]
		if p.Name == "" {
			continue
		}
		r := find(p.Name)
		if members[r] == nil {
			order = append(order, r)
		}
		members[r] = append(members[r], p)
	}
	var described []string
	for _, r := range order {
		if fixed := v.fixed(members[r]); fixed != "" {
			described = append(described, fixed)
		}
	}
	if len(described) > 1 {
		v.notice(Source{File: members[order[0]][0].Source.File}, "", "",
			fmt.Sprintf("the system falls into %d parts that nothing joins: %s", len(described), strings.Join(described, "; ")),
			"add the pipe between them to pipes.csv if there is one")
	}
}

// fixed describes a part by its reservoirs and outlets. A part without any has no
// level to count from; it is told, and the description is empty.
func (v *validation) fixed(part []*Point) string {
	var ends, all []string
	for _, p := range part {
		all = append(all, p.Name)
		if p.Kind == Reservoir || p.Kind == Outlet || p.Kind == "" { // an unread kind was told
			ends = append(ends, p.Name)
		}
	}
	switch {
	case len(ends) > 0 && len(all) > len(ends):
		return fmt.Sprintf("the one with %s (%d points)", some(ends), len(all))
	case len(ends) > 0:
		return "the one with " + some(ends)
	case len(all) == 1:
		v.fatal(part[0].Source, "point", all[0], "no pipe and no machine leads to it", "join it to the system in pipes.csv, or take it away")
	default:
		v.fatal(part[0].Source, "point", all[0], fmt.Sprintf("the part of the system with %s has neither a reservoir nor an outlet, so its heads have no level to count from", some(all)),
			"join it to the rest in pipes.csv, or make one of its points a reservoir")
	}
	return ""
}
