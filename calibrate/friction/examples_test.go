package friction_test

import (
	"math"
	"testing"

	"tapround/calibrate/friction"
)

// example is one worked example: what is given and what the book answers, SI.
type example struct {
	t            *testing.T
	in, out, tol map[string]float64
	source       string
	asked        map[string]bool
}

func (e example) answer(name string, got float64) {
	e.t.Helper()
	want, ok := e.out[name]
	if !ok {
		e.t.Fatalf("%s has no answer %q", e.source, name)
	}
	// The tolerance is on the exact value: the book's is the one that was rounded.
	if !(math.Abs(want-got) <= e.tol[name]*math.Abs(got)) {
		e.t.Errorf("%s, %s: got %.6g, published %g, allowed %g of it", e.source, name, got, want, e.tol[name])
	}
	e.asked[name] = true
}

// Worked examples of the textbooks. The tolerance column has a reason each: a tenth of a
// per cent where the book iterated, 2 to 3 % where it read a chart.
func TestWorkedExamples(t *testing.T) {
	units := map[string]float64{"-": 1, "m": 1, "ft": foot, "m/s": 1, "ft/s": foot, "m2/s": 1, "ft2/s": foot * foot,
		"m3/s": 1, "ft3/s": foot * foot * foot, "mile": 5280 * foot, "Pa": 1, "kg/m3": 1, "Pa s": 1, "deg": 1,
		// Weights stay in the book's own units: they meet heads in feet only.
		"lbf/ft3": 1, "lbf/ft2": 1, "lbf s/ft2": 1, "hp": 1}
	examples := map[string]example{}
	for _, r := range table(t, "checks/friction/darcy_examples.csv", 81) {
		e, ok := examples[r["example"]]
		if !ok {
			e = example{t, map[string]float64{}, map[string]float64{}, map[string]float64{}, r["source"], map[string]bool{}}
			examples[r["example"]] = e
		}
		u, ok := units[r["unit"]]
		if !ok {
			t.Fatalf("unit %q", r["unit"])
		}
		v := u * r.num(t, "value_published")
		if r["kind"] == "input" {
			e.in[r["quantity"]] = v
			continue
		}
		e.out[r["quantity"]], e.tol[r["quantity"]] = v, r.num(t, "suggested_rel_tolerance")
	}
	const gSI, gUS = 9.81, 32.2 * foot // as the books take it
	factor := func(p friction.Pipe, q, k, nu float64) float64 {
		return friction.DarcyFactor(p.Reynolds(q, nu), k/p.Bore).F
	}
	solve := map[string]func(e example){
		"W6.6": func(e example) { // 6 in asphalted cast iron, loss wanted
			p := friction.Pipe{Length: e.in["L"], Bore: e.in["D"]}
			q := e.in["V"] * p.Area()
			h := p.Loss(q, math.Log(e.in["k"]), e.in["nu"], gUS).H
			e.answer("f", factor(p, q, e.in["k"], e.in["nu"]))
			e.answer("head loss", h)
			e.answer("pressure drop", e.in["gamma"]*h/foot)
		},
		"W6.9": func(e example) { // oil, flow wanted
			p := friction.Pipe{Length: e.in["L"], Bore: e.in["D"]}
			k := e.in["k_over_D"] * p.Bore
			q := flowFor(t, p, e.in["head_loss"], math.Log(k), e.in["nu"], gSI)
			e.answer("Q", q)
			e.answer("V", q/p.Area())
			e.answer("Re", p.Reynolds(q, e.in["nu"]))
			e.answer("f", factor(p, q, k, e.in["nu"]))
		},
		"W6.4": func(e example) { // laminar oil in a pipe that climbs, flow wanted
			p := friction.Pipe{Length: e.in["L"], Bore: e.in["D"]}
			weight := e.in["rho"] * gSI
			nu := e.in["mu"] / e.in["rho"]
			rise := p.Length * math.Sin(e.in["angle_up"]*math.Pi/180)
			h1, h2 := e.in["p1"]/weight, e.in["p2"]/weight+rise
			q := flowFor(t, p, h1-h2, math.Log(1e-4), nu, gSI)
			e.answer("HGL1", h1)
			e.answer("HGL2", h2)
			e.answer("head loss", h1-h2)
			e.answer("Q", q)
			e.answer("Re", p.Reynolds(q, nu))
		},
		"EFM10": func(e example) { // 200 mm asphalted cast iron, loss wanted
			p := friction.Pipe{Length: e.in["L"], Bore: e.in["D"]}
			e.answer("V", e.in["Q"]/p.Area())
			e.answer("f", factor(p, e.in["Q"], e.in["k"], e.in["nu"]))
			e.answer("head loss", p.Loss(e.in["Q"], math.Log(e.in["k"]), e.in["nu"], gSI).H)
		},
		"C8-4": func(e example) { // smooth air duct, bore wanted
			p := boreFor(t, e.in["L"], e.in["head_loss"], e.in["Q"], 0, e.in["nu"], gSI)
			e.answer("D", p.Bore)
			e.answer("V", e.in["Q"]/p.Area())
			e.answer("f", factor(p, e.in["Q"], 0, e.in["nu"]))
		},
		"M8.10": func(e example) { // crude oil line of 799 miles
			p := friction.Pipe{Length: e.in["L"], Bore: e.in["D"]}
			nu := e.in["mu"] / (e.in["gamma"] / 32.2) * foot * foot
			q := e.in["Q"]
			h := p.Loss(q, math.Log(e.in["k"]), nu, gUS).H
			e.answer("V", q/p.Area())
			e.answer("f", factor(p, q, e.in["k"], nu))
			e.answer("head loss", h)
			e.answer("power", e.in["gamma"]*q/(foot*foot*foot)*h/foot/550)
		},
		"S1": func(e example) { // oil, 200 mm cast iron, loss wanted
			p := friction.Pipe{Length: e.in["L"], Bore: e.in["D"]}
			e.answer("Re", p.Reynolds(e.in["Q"], e.in["nu"]))
			e.answer("f", factor(p, e.in["Q"], e.in["k"], e.in["nu"]))
			e.answer("head loss", p.Loss(e.in["Q"], math.Log(e.in["k"]), e.in["nu"], gSI).H)
		},
		"S3": func(e example) { // wrought iron, bore wanted
			p := boreFor(t, e.in["L"], e.in["head_loss"], e.in["Q"], e.in["k"], e.in["nu"], gUS)
			e.answer("D", p.Bore)
			e.answer("f", factor(p, e.in["Q"], e.in["k"], e.in["nu"]))
		},
		"F8.5": func(e example) { // smooth pipe from a reservoir, level wanted; alpha 1
			p := friction.Pipe{Length: e.in["L"], Bore: e.in["D"]}
			nu := e.in["mu"] / e.in["rho"]
			entrance, _ := friction.Minor(e.in["Q"], e.in["K_entrance"], p.Bore, gSI)
			head, _ := friction.Minor(e.in["Q"], 1, p.Bore, gSI)
			e.answer("f", factor(p, e.in["Q"], e.in["k"], nu))
			e.answer("reservoir depth over outlet", head+entrance+p.Loss(e.in["Q"], math.Inf(-1), nu, gSI).H)
		},
	}
	if len(examples) != len(solve) {
		t.Errorf("%d examples in the table, %d are worked", len(examples), len(solve))
	}
	for name, e := range examples {
		work, ok := solve[name]
		if !ok {
			t.Errorf("example %s is not worked", name)
			continue
		}
		work(e)
		for quantity := range e.out {
			if !e.asked[quantity] {
				t.Errorf("%s: %s is not compared", name, quantity)
			}
		}
	}
}

func flowFor(t *testing.T, p friction.Pipe, head, lnParam, nu, gravity float64) float64 {
	return bisect(t, func(q float64) float64 { return p.Loss(q, lnParam, nu, gravity).H - head }, 0, 100*p.Area())
}

func boreFor(t *testing.T, length, head, q, k, nu, gravity float64) friction.Pipe {
	d := bisect(t, func(d float64) float64 {
		return head - friction.Pipe{Length: length, Bore: d}.Loss(q, math.Log(k), nu, gravity).H
	}, 0.01, 10)
	return friction.Pipe{Length: length, Bore: d}
}
