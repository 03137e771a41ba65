package text

import (
	"fmt"
	"io"
	"time"

	"tapround/report"
	"tapround/report/internal/say"
	"tapround/survey"
)

// Heads prints one line for each line of readings, round by round, in their order.
// Heads are in metres above datum, ± one standard uncertainty; flows and
// differences have no head and show their reading.
func Heads(w io.Writer, rows []report.HeadRow, o Options) error {
	p := &printer{w: w, o: o}
	if len(rows) == 0 {
		p.line("There are no readings.")
		return p.err
	}
	var out [][]string
	under := map[int]string{}
	velocity := false
	for _, r := range rows {
		velocity = velocity || r.VelocityHead.OK
	}
	last := rows[0].Round
	for i, r := range rows {
		round := say.Clean(r.Round)
		if i > 0 && r.Round == last {
			round = ""
		} else if i > 0 {
			out = append(out, nil)
		}
		last = r.Round
		cells := []string{round, tap(r), clock(r.Time), say.Clean(r.Kind), say.Clean(r.Gauge), say.Clean(r.Reading + " " + r.Unit), say.Decimals(r.PressureHead, 2), head(r)}
		if velocity {
			cells = append(cells, say.Decimals(r.Total, 2))
		}
		under[len(out)] = remark(r)
		out = append(out, cells)
	}
	columns := []column{{heading: "round"}, {heading: "tap", most: 12}, {heading: "time"}, {heading: "kind"}, {heading: "gauge"}, {heading: "reading", right: true},
		{heading: "pressure m", right: true}, {heading: "piezometric m", right: true}}
	if velocity {
		columns = append(columns, column{heading: "total m", right: true})
	}
	p.grid(0, columns, out, under)
	p.line("")
	p.para("", "Heads in metres above datum, ± one standard uncertainty; pressure in metres of the water in the pipe at the tap.", 0)
	return p.err
}

func tap(r report.HeadRow) string {
	s := say.Clean(r.Tap)
	if r.OtherTap != "" {
		s += " to " + say.Clean(r.OtherTap)
	}
	if r.Depth.OK {
		s += fmt.Sprintf(" %.0f mm", 1000*r.Depth.V)
	}
	return s
}

// clock is the time of day; the date is the round's.
func clock(s string) string {
	t, err := time.Parse(time.RFC3339, s)
	if err != nil {
		return say.Clean(s)
	}
	return t.Format("15:04")
}

func head(r report.HeadRow) string {
	if !r.Piezometric.OK && r.Kind == string(survey.TotalHead) {
		return "–"
	}
	return say.With(r.Piezometric, r.U)
}

func remark(r report.HeadRow) string {
	s := say.Clean(r.Remark)
	switch {
	case !r.Used:
		return "^ set aside: " + s
	case s != "":
		return "^ " + s
	}
	return ""
}
