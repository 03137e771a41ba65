package friction_test

import (
	"fmt"
	"math"
	"testing"

	"tapround/calibrate/friction"
)

// The 0.849 of the table is 0.8492 rounded; with that taken out the grid must come out to its last
// figure, and the rounding itself is worth 0.04 % of the loss.
func TestHazenWilliamsGrid(t *testing.T) {
	rounding := math.Pow(0.8492/0.849, 1/0.54)
	exact, common := 0, 0
	for _, r := range table(t, "checks/friction/hazen_williams.csv", 95) {
		if r["case"] != "grid" {
			continue
		}
		p := friction.Pipe{Law: friction.HazenWilliams, Length: r.num(t, "L"), Bore: r.num(t, "D")}
		h := p.Loss(r.num(t, "Q"), math.Log(r.num(t, "C")), water, g).H
		at := fmt.Sprintf("Q %s, D %s, C %s: %s", r["Q"], r["D"], r["C"], r["formula"])
		switch r["formula"] {
		case "V = 0.849 C R^0.63 S^0.54":
			exact++
			within(t, at, h*rounding, r.num(t, "value"), 1e-8) // nine figures
		case "10.667 L Q^1.852 / (C^1.852 D^4.871)":
			common++
			// Constant and exponents rounded: 0.14 % at worst over the grid.
			within(t, at, h, r.num(t, "value"), 1.5e-3)
		default:
			t.Errorf("formula %q", r["formula"])
		}
	}
	if exact < 40 || common < 40 {
		t.Errorf("%d and %d rows compared", exact, common)
	}
}

// Constants printed in other units and arrangements, and worked examples.
func TestHazenWilliamsPublished(t *testing.T) {
	const ft3, gallon, psi = foot * foot * foot, 231 * inch * inch * inch, 6894.757
	loss := func(q, d, c, l float64) float64 {
		return friction.Pipe{Law: friction.HazenWilliams, Length: l, Bore: d}.Loss(q, math.Log(c), water, g).H
	}
	// flowAt turns the loss round: Q at a gradient, from h ~ Q^(1/0.54).
	flowAt := func(s, d, c float64) float64 {
		q := math.Pi / 4 * d * d // 1 m/s
		return q * math.Pow(s/loss(q, d, c, 1), 0.54)
	}
	rows := map[string]row{}
	for _, r := range table(t, "checks/friction/cfactor_head_loss.csv", 32) {
		rows[r["id"]] = r
	}
	value := func(id string) float64 {
		r, ok := rows[id]
		if !ok {
			t.Fatalf("no row %s", id)
		}
		return r.num(t, "value")
	}
	const day = 86400
	// A unit of bore, gradient, C and roughness of each form.
	within(t, "SI form, constant", loss(1, 1, 1, 1), value("HW-SI"), 5e-5) // 10.67
	within(t, "Q in m3/s", flowAt(1, 1, 1), value("HW-DAVIS"), 2e-3)       // 0.278
	within(t, "ft and ft3/s", loss(ft3, foot, 1, foot)/foot, 4.727, 2e-4)  // HW-US: 4.727 to 4.73
	within(t, "v in ft/s, d in in", flowAt(1, inch, 1)/(math.Pi/4*inch*inch)/foot, value("HW-FAIR-V"), 1e-3)
	within(t, "Q in gpd, d in in", flowAt(1, inch, 1)/gallon*day, value("HW-FAIR-Q"), 2e-3)
	within(t, "V at hydraulic radius 1 m", flowAt(1, 4, 1)/(math.Pi*4), 0.8492, 1e-14) // HW-VEL
	// Charts and tables read by the books, to two or three figures.
	within(t, "12 in, 1 MGD, per 1,000 ft", loss(1e6*gallon/day, 12*inch, 100, 1000), value("HW-EX536-US"), 0.03)
	within(t, "0.3048 m, 0.0438 m3/s, per km; printed 2.17, its own formula gives 2.127", loss(0.0438, 0.3048, 100, 1000), value("HW-EX536-SI"), 0.04)
	within(t, "12 in, 0.1 MGD, per mille", loss(1e5*gallon/day, 12*inch, 100, 1000), value("HW-EX54-A"), 0.06)
	within(t, "12 in, 1 MGD, per mille", loss(1e6*gallon/day, 12*inch, 100, 1000), value("HW-EX54-B"), 0.03)
	for _, r := range table(t, "checks/friction/hazen_williams.csv", 95) {
		switch r["case"] {
		case "US coefficient (ft, ft3/s) from 1.318":
			within(t, r["case"], loss(ft3, foot, 1, foot)/foot, r.num(t, "value"), 5e-5) // 1.318 is 0.8492 to 2e-5
		case "gpm, inch, ft form":
			// 0.2 % of rounded exponents between gpm/in and SI.
			within(t, r["case"], loss(gallon/60, inch, 1, foot)/foot, r.num(t, "value"), 3e-3)
		case "fire protection form":
			within(t, r["case"], loss(gallon/60, inch, 1, foot)*998.2*g/psi, r.num(t, "value"), 5e-3)
		}
	}
	// Loss between two gauges at the head of TG-1-h, C wanted: h ~ C^(-1/0.54). 0.05 % of
	// C is the rounded constant and exponents of the table.
	h := loss(0.02, 0.1524, 1, 304.8)
	within(t, "C from a measured loss", math.Pow(h/value("TG-1-h"), 0.54), value("TG-1-C"), 1e-3)
}

// The same four pipes by both laws: the loss at the C given, and the friction factor and
// the roughness that lose as much. The table's Hazen-Williams is 10.67 with exponents
// 1.852 and 4.8704; with the difference taken out it must come to its last figure.
func TestTwoLawsOnOnePipe(t *testing.T) {
	rows := map[string]row{}
	for _, r := range table(t, "checks/friction/cfactor_head_loss.csv", 32) {
		rows[r["id"]] = r
	}
	for i := 1; i <= 4; i++ {
		id := func(s string) string { return fmt.Sprintf("CT%d-%s", i, s) }
		value := func(s string) float64 { return rows[id(s)].num(t, "value") }
		var d, l, q, temp, grav, c float64
		if _, err := fmt.Sscanf(rows[id("h")]["inputs"], "D=%f m;L=%f m;Q=%f m3/s;t=%f C;g=%f;C=%f", &d, &l, &q, &temp, &grav, &c); err != nil {
			t.Fatal(err)
		}
		hw := friction.Pipe{Law: friction.HazenWilliams, Length: l, Bore: d}
		h := hw.Loss(q, math.Log(c), water, grav).H
		within(t, id("h"), h, value("h"), 2e-3)
		same := 10.67 / 10.669505964 * math.Pow(q/c, 1.852-1/0.54) * math.Pow(d, 2.63/0.54-4.8704)
		within(t, id("h")+" with the table's exponents", h*same, value("h"), 3e-6) // 5 decimals

		dw := friction.Pipe{Length: l, Bore: d}
		nu := q / dw.Area() * d / value("Re")
		k := value("ks") / 1000
		within(t, id("f"), friction.DarcyFactor(value("Re"), k/d).F, value("f"), 1e-4) // 5 figures of k, 6 of Re
		within(t, id("ks"), dw.Loss(q, math.Log(k), nu, grav).H, value("h"), 1e-4)
	}
}

// Below 1 mm/s Hazen and Williams's loss is a cubic; it rises, and stays within what the
// law itself would lose at the joint.
func TestHazenWilliamsSlow(t *testing.T) {
	p := friction.Pipe{Law: friction.HazenWilliams, Length: 1, Bore: 0.05}
	joint := 1e-3 * p.Area()
	last := 0.0
	for i := 1; i <= 100; i++ {
		l := p.Loss(joint*float64(i)/100, math.Log(60), water, g)
		if !(l.H > last && l.DQ > 0) {
			t.Fatalf("loss %g, slope %g at %d %% of the joint", l.H, l.DQ, i)
		}
		last = l.H
	}
	if last > 1e-6 {
		t.Errorf("loss at the joint %g m/m, 1e-6 is promised", last)
	}
}
