package report

import (
	"math"

	"tapround/calibrate"
	"tapround/survey"
	"tapround/survey/head"
)

// headRows gives one row for each line of readings, in their order. Velocity heads
// come from the fitted flow, so without a fit they, and the heads that need them, stay
// empty. A pitot's local head is turned into the section's by the fitted profile.
func headRows(in Input, f *calibrate.Fit) []HeadRow {
	lines := head.OfLine(in.Survey, in.Corrected)
	u := map[survey.Source]float64{}
	for _, h := range in.Heads {
		for _, r := range h.Rows {
			if h.Quantity != survey.VolumeFlow && h.Quantity != survey.OutletFlow {
				u[r.Source] = h.U()
			}
		}
	}
	used := map[survey.Source]bool{}
	if f == nil {
		for _, h := range in.Heads {
			for _, r := range h.Rows {
				used[r.Source] = true
			}
		}
	} else {
		for i, o := range f.Model.Obs {
			for _, r := range o.Head.Rows {
				used[r.Source] = !f.Model.Left(i)
			}
		}
	}
	var out []HeadRow
	for _, r := range in.Survey.Readings {
		l := lines[r.Source]
		row := HeadRow{Round: r.Round, Tap: r.Tap, OtherTap: r.OtherTap, Depth: r.Depth, Time: stamp(r.Time), Kind: string(r.Kind), Gauge: r.Gauge,
			Reading: r.Written, Unit: r.Unit, Pressure: l.Pressure, Elevation: l.Elevation, PressureHead: l.PressureHead,
			Piezometric: l.Piezometric, Used: used[r.Source], Remark: r.Remark, Source: r.Source}
		if v, ok := u[r.Source]; ok {
			row.U = survey.Some(v)
		}
		if !row.Used && r.SetAside != "" && r.SetAside != r.Remark {
			row.Remark = joinWords(r.Remark, r.SetAside)
		}
		if f != nil && row.Used {
			fillVelocity(&row, r, l, f)
		}
		out = append(out, row)
	}
	return out
}

func fillVelocity(row *HeadRow, r survey.Reading, l head.Line, f *calibrate.Fit) {
	round := f.Model.RoundIndex(r.Round)
	mean, _ := f.HeadsAt(round, r.Tap)
	if math.IsNaN(mean) {
		return
	}
	switch r.Kind {
	case survey.Static:
		row.VelocityHead = survey.Some(mean)
		row.Total = survey.Some(l.Piezometric.V + mean)
	case survey.TotalHead:
		local := f.LocalVelocityAt(round, r.Tap, r.Depth)
		row.VelocityHead = survey.Some(mean)
		row.Piezometric = known(l.Total.V - local)
		row.Total = known(l.Total.V - local + mean)
	case survey.Velocity:
		if local := f.LocalVelocityAt(round, r.Tap, r.Depth); local > 0 {
			row.VelocityHead = known(l.Velocity.V * mean / local)
		}
	}
}

func joinWords(a, b string) string {
	if a == "" {
		return b
	}
	return a + "; " + b
}
