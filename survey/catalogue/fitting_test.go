package catalogue

import (
	"math"
	"strings"
	"testing"

	"tapround/survey"
)

func TestEveryKind(t *testing.T) {
	for _, kind := range survey.FittingKinds {
		e, ok := LossCoefficient(kind, 0.2, 0.15)
		if ok != (kind != survey.OtherFitting) {
			t.Errorf("%s: ok is %v", kind, ok)
			continue
		}
		if !ok {
			continue
		}
		// The fit works on ln K: it must be above zero.
		if !(e.Value > 0 && e.Low > 0 && e.Low <= e.Value && e.Value <= e.High && e.Spread >= 1.05 && e.Source != "") {
			t.Errorf("%s: %+v", kind, e)
		}
		swapped, _ := LossCoefficient(kind, 0.15, 0.2)
		if e != swapped {
			t.Errorf("%s depends on the order of the bores", kind)
		}
		if _, ok := LossCoefficient(kind, math.NaN(), math.NaN()); ok == kind.ChangesBore() {
			t.Errorf("%s without bores: ok is %v", kind, ok)
		}
		if _, ok := LossCoefficient(kind, 0.2, 0.2); ok == kind.ChangesBore() {
			t.Errorf("%s between equal bores: ok is %v", kind, ok)
		}
	}
	if _, ok := LossCoefficient("manhole", 0.2, 0.2); ok {
		t.Error("a kind that is not one has a coefficient")
	}
}

// kindOfRow says which kind a printed fitting stands for: full right angle,
// fully open, full bore, as a crew would name it.
var kindOfRow = map[string]survey.FittingKind{
	"entrance, bell mouth": survey.EntranceRounded, "entrance, rounded": survey.EntranceRounded, "entrance, sharp-edged": survey.EntranceSharp,
	"entrance, projecting": survey.EntranceProjecting, "exit, any": survey.Exit, "mitre bend 90 deg": survey.Elbow,
	"90 deg elbow, standard flanged": survey.Elbow, "90 deg elbow, long radius flanged": survey.Bend,
	"tee, line flow": survey.TeeRun, "tee, branch flow": survey.TeeBranch,
	"ball": survey.BallValve, "butterfly 25 lb class": survey.ButterflyValve, "butterfly 75 lb class": survey.ButterflyValve, "butterfly 150 lb class": survey.ButterflyValve,
	"check, ball": survey.CheckValve, "check, centre-guided globe": survey.CheckValve, "check, double door 8 in or smaller": survey.CheckValve,
	"check, double door 10-16 in": survey.CheckValve, "check, slanting disc": survey.CheckValve, "check, swing": survey.CheckValve,
	"gate, double disc": survey.GateValve, "gate, resilient seat": survey.GateValve, "knife gate, metal seat": survey.GateValve, "knife gate, resilient seat": survey.GateValve,
	"globe": survey.GlobeValve, "plug, lubricated": survey.PlugValve, "plug, eccentric, 80 % rectangular": survey.PlugValve, "plug, eccentric, full bore": survey.PlugValve,
	"elbow 90 regular flanged": survey.Elbow, "elbow 90 regular threaded": survey.Elbow, "elbow 90 long radius flanged": survey.Bend,
	"elbow 90 long radius threaded": survey.Elbow, "tee line flanged": survey.TeeRun, "tee line threaded": survey.TeeRun,
	"tee branch flanged": survey.TeeBranch, "tee branch threaded": survey.TeeBranch, "globe open": survey.GlobeValve, "gate open": survey.GateValve,
	"swing check forward": survey.CheckValve, "ball open": survey.BallValve,
	"entrance, pipe projects into tank": survey.EntranceProjecting, "entrance, end flush": survey.EntranceSharp,
	"entrance, slightly rounded": survey.EntranceRounded, "entrance, bell-mouthed": survey.EntranceRounded, "outlet into still water or atmosphere": survey.Exit,
	"gate wide open": survey.GateValve, "globe wide open": survey.GlobeValve, "elbow 90 short radius screwed": survey.Elbow,
	"elbow 90 medium radius screwed": survey.Elbow, "elbow 90 long radius screwed": survey.Elbow,
	"entrance inward projecting": survey.EntranceProjecting, "entrance flush sharp r/d 0": survey.EntranceSharp,
	"entrance r/d 0.06": survey.EntranceRounded, "entrance r/d 0.10": survey.EntranceRounded, "entrance r/d 0.15 and more": survey.EntranceRounded, "entrance r/d 0.04": survey.EntranceRounded,
	"exit, projecting, sharp or rounded": survey.Exit, "re-entrant (Borda) mouthpiece, theory with c_c = 0.5": survey.EntranceProjecting,
	"deflection 90 deg, formula 0.9457 s^2 + 2.047 s^4, s = sin(angle/2)": survey.Elbow,
	"d/2 over bend radius 0.1, formula 0.131 + 1.847 x^3.5":               survey.Bend, "d/2 over bend radius 0.2, formula 0.131 + 1.847 x^3.5": survey.Bend,
	"d/2 over bend radius 0.3, formula 0.131 + 1.847 x^3.5": survey.Bend, "d/2 over bend radius 0.4, formula 0.131 + 1.847 x^3.5": survey.Bend,
	"d/2 over bend radius 0.5, formula 0.131 + 1.847 x^3.5": survey.Bend,
	// Crane's multiples of f_T.
	"gate valve, full bore": survey.GateValve, "globe valve, straight": survey.GlobeValve, "ball valve, full bore": survey.BallValve,
	"butterfly valve 2 to 8 in": survey.ButterflyValve, "butterfly valve 10 to 14 in": survey.ButterflyValve, "butterfly valve 16 to 24 in": survey.ButterflyValve,
	"plug valve straightway": survey.PlugValve, "90 deg standard elbow": survey.Elbow, "90 deg long radius elbow": survey.Bend,
	"standard tee, through run": survey.TeeRun, "standard tee, through branch": survey.TeeBranch, "bend r/d 1.5": survey.Bend, "bend r/d 2": survey.Bend,
	"bend r/d 3": survey.Bend, "bend r/d 4": survey.Bend, "swing check valve (conventional)": survey.CheckValve, "swing check valve (straight seat)": survey.CheckValve,
	"mitre 90 deg": survey.Elbow,
}

// Every printed K of a fitting of ours lies in the range the catalogue gives,
// and the catalogue's value lies in what is printed. A row that stands for no
// kind is one of: not a right angle, a shape the survey has no kind for, part
// closed, or a bend too tight or too long to be called one.
func TestFittingsAgainstTables(t *testing.T) {
	printed := union{}
	seen := map[string]bool{}
	check := func(name string, low, high float64) {
		kind, ok := kindOfRow[name]
		if !ok {
			return
		}
		seen[name] = true
		e, _ := LossCoefficient(kind, 0.3, math.NaN())
		if low < e.Low*(1-1e-9) || high > e.High*(1+1e-9) {
			t.Errorf("%q prints %v to %v, outside the range of %s, %v to %v", name, low, high, kind, e.Low, e.High)
		}
		printed.add(string(kind), low, high)
	}
	for _, c := range checks(t, "fittings.csv") {
		low, high := rangeOf(t, c["K"])
		check(c["fitting"], low, high)
	}
	// Crane: K = n f_T, f_T from 2 in to 24 in.
	rows := checks(t, "crane_multiples.csv")
	inch := map[string]float64{}
	for _, c := range rows {
		if c["kind"] == "f_T" {
			inch[c["item"]] = number(t, c["value"])
		}
	}
	small, large := inch["24 in"], inch["2 in"]
	for _, c := range rows {
		if c["kind"] == "n" {
			n := number(t, c["value"])
			low, high := n*small, n*large
			switch {
			case strings.HasSuffix(c["item"], "2 to 8 in"):
				low = n * inch["8 in"]
			case strings.HasSuffix(c["item"], "10 to 14 in"):
				low, high = n*inch["14 in"], n*inch["10 in"]
			case strings.HasSuffix(c["item"], "16 to 24 in"):
				high = n * inch["16 in"]
			case strings.HasPrefix(c["item"], "bend") || strings.HasPrefix(c["item"], "90 deg long"):
				high = n * inch["3 in"] // a 50 mm bend is a fitting of a house
			}
			check(c["item"], low, high)
		}
	}
	for name := range kindOfRow {
		if !seen[name] {
			t.Errorf("no printed row %q", name)
		}
	}
	for kind, r := range printed {
		if e := fixed[survey.FittingKind(kind)]; e.Value < r[0] || e.Value > r[1] {
			t.Errorf("%s: %v lies outside all that is printed, %v to %v", kind, e.Value, r[0], r[1])
		}
	}
	// A strainer and a meter have no printed figure here, and say so.
	for kind, e := range fixed {
		if _, ok := printed[string(kind)]; !ok && !strings.Contains(e.Source, "common practice") {
			t.Errorf("%s is held to no table and does not say so", kind)
		}
	}
}

func TestChangeOfBore(t *testing.T) {
	furthest, seen := 0.0, 0
	for _, c := range checks(t, "change_of_bore.csv") {
		x, want := number(t, c["parameter_value"]), number(t, c["K_value"])
		const large = 0.3
		var beta float64
		onSmall := want
		switch c["parameter"] {
		case "area ratio big/small": // on the large bore: V2 = V1/x, so K1 = K2/x^2
			beta, onSmall = math.Sqrt(1/x), want/(x*x)
		case "area ratio small/big":
			beta = math.Sqrt(x)
		case "diameter ratio d/D":
			beta = x
		default: // cones
			continue
		}
		kind := survey.Enlargement
		if strings.Contains(c["fitting"], "contraction") {
			kind = survey.Contraction
		}
		if beta <= 0 || beta >= 1 {
			if _, ok := LossCoefficient(kind, beta*large, large); ok {
				t.Errorf("%s with beta %v has a coefficient", kind, beta)
			}
			continue
		}
		seen++
		e, ok := LossCoefficient(kind, beta*large, large)
		if !ok {
			t.Fatalf("%s with beta %v has none", kind, beta)
		}
		switch source := c["source"]; {
		case strings.Contains(source, "Borda-Carnot") || strings.Contains(c["note"], "Borda-Carnot"):
			if math.Abs(e.Value-onSmall) > 5e-5 { // the table's four decimals
				t.Errorf("enlargement, beta %.4f: %v, want %v", beta, e.Value, onSmall)
			}
		case kind == survey.Enlargement: // Handbook, within 5 %
			if math.Abs(e.Value/want-1) > 0.05 || want > e.High {
				t.Errorf("enlargement, beta %v: %v, the handbook has %v", beta, e.Value, want)
			}
		case strings.HasPrefix(source, "Crane"):
			if math.Abs(e.Value-want) > 5e-5 {
				t.Errorf("contraction, beta %v: %v, want %v", beta, e.Value, want)
			}
		case strings.Contains(source, "Weisbach"):
			if got := weisbachContraction(beta * beta); math.Abs(got-want) > 1e-4 || e.Low > got+1e-12 {
				t.Errorf("contraction, beta %v: %v (range from %v), Weisbach has %v", beta, got, e.Low, want)
			}
			furthest = math.Max(furthest, e.Value-want)
		default: // White's formula and the handbook: between the two, 0.01 for print
			if want < e.Low-0.01 || want > e.High+0.01 {
				t.Errorf("contraction, beta %v: %v outside %v to %v", beta, want, e.Low, e.High)
			}
			furthest = math.Max(furthest, e.Value-want)
		}
	}
	if seen < 50 {
		t.Errorf("only %d rows checked", seen)
	}
	// What the comment and the source text say of the other rules.
	if math.Abs(furthest-0.09) > 0.005 {
		t.Errorf("other rules for a contraction lie up to %v below, the comment says 0.09", furthest)
	}
}
