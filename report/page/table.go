package page

import (
	"math"
	"sort"
	"strings"

	"tapround/report"
	"tapround/report/internal/say"
	"tapround/survey"
	"tapround/survey/unit"
)

// table is one table of the page. The first cell of a row heads it.
type table struct {
	Caption string
	Head    []cell
	Rows    [][]cell
}

// Short tables are not to be cut by the end of a sheet.
func (t table) Short() bool { return len(t.Rows) <= 20 }

// cell is what stands in one place of a table.
type cell struct {
	Text   string
	Number bool   // set to the right
	Whole  bool   // not to be broken into lines
	Link   string // of a finding on this page
	Label  string // its column's heading, for narrow screens
}

func text(s string) cell { return cell{Text: say.Clean(s)} }

func number(s string) cell { return cell{Text: s, Number: true} }

func link(id string) cell { return cell{Text: id, Link: id} }

// heads makes headings; one that begins with # heads numbers.
func heads(names ...string) []cell {
	var out []cell
	for _, n := range names {
		s, num := strings.CutPrefix(n, "#")
		out = append(out, cell{Text: s, Number: num})
	}
	return out
}

func (t *table) add(cells ...cell) {
	for i := range cells {
		cells[i].Label = t.Head[i].Text
	}
	t.Rows = append(t.Rows, cells)
}

// losses is every stretch in the round in which its excess is greatest.
func losses(rows []report.LossRow) (table, string) {
	t := table{Caption: "Total head lost between neighbouring taps, each stretch in the round in which it loses most beyond sound works",
		Head: heads("Stretch", "Round", "#Measured, m", "#95 % interval, m", "#Sound works, m", "#Excess, m", "Loses more", "What lies between")}
	best := map[[2]string]int{}
	var pick []report.LossRow
	for _, l := range rows {
		k := [2]string{l.FromTap, l.ToTap}
		i, seen := best[k]
		switch {
		case !seen:
			best[k] = len(pick)
			pick = append(pick, l)
		case excess(l) > excess(pick[i]):
			pick[i] = l
		}
	}
	sort.SliceStable(pick, func(i, j int) bool { return excess(pick[i]) > excess(pick[j]) })
	for _, l := range pick {
		interval := "–"
		if l.Low.OK && l.High.OK {
			interval = say.By(l.Low, l.ExcessU) + " to " + say.By(l.High, l.ExcessU)
		}
		t.add(text(l.FromTap+" to "+l.ToTap), text(l.Round), number(say.By(l.Measured, l.ExcessU)), number(interval), number(say.By(l.Expected, l.ExcessU)),
			number(say.With(l.Excess, l.ExcessU)), text(say.Probability(l.Probability)), text(strings.Join(l.Items, ", ")))
	}
	_, rest := say.Worst(rows, len(rows))
	note := ""
	if rest > 0 {
		note = say.Plural(rest, "of these stretches loses", "of these stretches lose") + " no more than sound works would, as far as these readings tell."
	}
	return t, note
}

func excess(l report.LossRow) float64 { return l.Excess.Or(math.Inf(-1)) }

// quantities are the plain names of what is fitted.
var quantities = map[string]string{
	"roughness": "equivalent roughness", "c_value": "equivalent C", "loss_coefficient": "loss coefficient", "head_factor": "head against the works curve",
	"offset": "offset (shown minus true)", "gain": "gain error", "level_error": "level (recorded minus true)", "level": "water level",
	"flow": "draw-off", "profile_factor": "velocity profile", "barometer": "barometer",
}

func quantity(p report.ParameterRow) string {
	if s, ok := quantities[p.Quantity]; ok {
		return s
	}
	return strings.ReplaceAll(say.Clean(p.Quantity), "_", " ")
}

// fitted sorts what was fitted into the works, gauges and levels; draw-offs have a
// table of their own.
func fitted(rows []report.ParameterRow) (works, gauges, levels table) {
	works = table{Caption: "Pipes, fittings and machines", Head: heads("Item", "Quantity", "#Sound", "#Fitted (95 %)", "#Fitted / sound", "#Share told by the survey")}
	gauges = table{Caption: "Gauges", Head: heads("Gauge", "Quantity", "#Found (95 %)", "#Share told by the survey")}
	levels = table{Caption: "Levels", Head: heads("Where", "Quantity", "Round", "#Recorded", "#Found (95 %)", "#Share told by the survey")}
	for _, p := range rows {
		found := say.Quantity(strings.Replace(say.Interval(p.Fitted, p.Low, p.High), "95 %: ", "", 1), p.Unit)
		recorded := "unknown"
		if p.Expected.OK {
			recorded = say.Quantity(say.Stated(p.Expected.V), p.Unit)
		}
		told := number(say.Share(p.ToldBySurvey))
		switch {
		case isDrawOff(p):
		case p.Kind == "gauge":
			gauges.add(text(p.Item), text(quantity(p)), number(found), told)
		case p.Kind == "tap" || p.Kind == "level" || p.Quantity == "level_error" || p.Quantity == "level":
			if p.Quantity == "level_error" {
				recorded = "–"
			}
			levels.add(text(p.Item), text(quantity(p)), text(orDash(p.Round)), number(recorded), number(found), told)
		default:
			item := p.Item
			if p.Kind == "group" {
				item = "group " + item
			}
			works.add(text(item), text(quantity(p)), number(recorded), number(found), number(say.Maybe(p.Ratio, 2)), told)
		}
	}
	return works, gauges, levels
}

func isDrawOff(p report.ParameterRow) bool { return p.Quantity == "flow" }

// grid is a table of things against rounds, filled in any order.
type grid struct {
	table
	column map[string]int
	row    map[string]int
}

func newGrid(caption, what string, rounds []string) *grid {
	g := &grid{table: table{Caption: caption, Head: []cell{{Text: what}}}, column: map[string]int{}, row: map[string]int{}}
	for i, r := range rounds {
		g.Head = append(g.Head, cell{Text: say.Clean(r), Number: true})
		g.column[r] = i + 1
	}
	return g
}

// put sets the cell of a thing in a round; a thing without a round is the same in
// all of them.
func (g *grid) put(name, round, s string) {
	i, seen := g.row[name]
	if !seen {
		i = len(g.Rows)
		g.row[name] = i
		row := []cell{text(name)}
		for range g.Head[1:] {
			row = append(row, number("–"))
		}
		g.add(row...)
	}
	if c, ok := g.column[round]; ok {
		g.Rows[i][c].Text = s
	} else if round == "" {
		for c := range g.Rows[i][1:] {
			g.Rows[i][1+c].Text = s
		}
	}
}

// drawOffs is a table of points against rounds.
func drawOffs(r *report.Result) table {
	g := newGrid("Draw-offs in L/s as fitted, rounded to their uncertainty, positive out; in brackets as recorded", "Where", r.Survey.Rounds)
	for _, p := range r.Parameters {
		if !isDrawOff(p) {
			continue
		}
		s := strings.SplitN(say.Interval(p.Fitted, p.Low, p.High), " (", 2)[0]
		if p.Expected.OK {
			s += " (" + say.Stated(p.Expected.V) + ")"
		} else {
			s += " (unknown)"
		}
		g.put(p.Item, p.Round, s)
	}
	return g.table
}

// flows is a table of pipes against rounds: the fitted flow, and what a meter on the
// pipe said.
func flows(r *report.Result) table {
	g := newGrid("Flow in L/s, rounded to its uncertainty, positive from the pipe's first end to its other; in brackets what a meter on the pipe showed",
		"Pipe or machine", r.Survey.Rounds)
	for _, f := range r.Flows {
		s := strings.SplitN(say.Interval(litres(f.Flow), litres(f.Low), litres(f.High)), " (", 2)[0]
		if f.Measured.OK {
			s += " (" + say.Stated(litres(f.Measured).V) + ")"
		}
		g.put(f.Pipe, f.Round, s)
	}
	return g.table
}

func litres(m survey.Maybe) survey.Maybe {
	m.V *= 1000
	return m
}

// visible is the smallest fault of each item that the survey would have found.
func visible(rows []report.VisibleRow) table {
	t := table{Caption: "Smallest fault that would have shown", Head: heads("Item", "What", "#From", "Unit", "In words")}
	for _, r := range rows {
		from := ""
		if r.Value.OK {
			from = unit.Significant(r.Value.V, 2)
		}
		t.add(text(r.Item), text(strings.ReplaceAll(r.Kind, "-", " ")), number(from), text(r.Unit), text(r.Words))
	}
	return t
}
