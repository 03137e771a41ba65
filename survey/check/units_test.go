package check

import (
	"encoding/csv"
	"fmt"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"tapround/survey"
	"tapround/survey/unit"
)

const (
	wrongUnit      = "unit looks wrong"
	exchangedRule  = "readings look exchanged"
	beyondScale    = "gauge beyond its scale"
	endOfScale     = "gauge near the end of its scale"
	lowOnScale     = "gauge low on its scale"
	belowPipe      = "piezometric head below the pipe"
	risesAlongFlow = "head rises along the flow"
)

// first gives the alerts of one rule.
func first(as []survey.Alert, rule string) []survey.Alert {
	var out []survey.Alert
	for _, a := range as {
		if a.Rule == rule {
			out = append(out, a)
		}
	}
	return out
}

// pressureMistakes reads the table of mistakes: the unit meant and the one written.
func pressureMistakes(t *testing.T) map[string][2]string {
	t.Helper()
	f, err := os.Open("../../testdata/checks/units/mistakes.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	names := map[string]string{"psi": "psi", "bar": "bar", "kPa": "kPa", "kgf/cm2": "kgf/cm2", "metres of water": "m", "ft of water": "ft", "atm": "atm"}
	out := map[string][2]string{}
	for _, row := range rows[1:] {
		meant, wrote, ok := strings.Cut(row[1], " entered as ")
		if ok && names[meant] != "" && names[wrote] != "" {
			out[row[0]] = [2]string{names[meant], names[wrote]}
			// The table's ratio is that of the head as entered to the true one.
			a, errA := unit.Parse(names[meant], unit.Pressure)
			b, errB := unit.Parse(names[wrote], unit.Pressure)
			ratio, errC := strconv.ParseFloat(row[3], 64)
			if errA != nil || errB != nil || errC != nil || math.Abs(b.Factor/a.Factor-ratio) > 1e-5*math.Max(ratio, 1) { // the table's tolerance
				t.Fatalf("%s: %v %v %v", row[0], errA, errB, errC)
			}
		}
	}
	return out
}

// Every mistake of the table, made at one tap of a no-flow round, is named; those whose
// ratio is near 1 look like a gauge's error and are named as one more explanation.
func TestUnitMistakesAtRest(t *testing.T) {
	mistakes := pressureMistakes(t)
	if len(mistakes) != 9 {
		t.Fatalf("%d mistakes in the table: %v", len(mistakes), mistakes)
	}
	for id, x := range mistakes {
		meant, _ := unit.Parse(x[0], unit.Pressure)
		wrote, _ := unit.Parse(x[1], unit.Pressure)
		for _, face := range []string{x[0], x[1]} { // what stands on the gauge
			s := site()
			r := reading(s, "A", "T4")
			number := meant.FromSI(r.Value)
			r.Value, r.Unit, r.Written = wrote.ToSI(number), x[1], fmt.Sprintf("%.3f", number)
			s.Gauges[3].Unit = face
			as := look(s)
			if near := meant.Factor/wrote.Factor > 0.9 && meant.Factor/wrote.Factor < 1.1; near && face != x[0] {
				found := first(as, doesNotClose)
				if len(found) != 1 || found[0].Subject != "T4" {
					t.Fatalf("%s: got\n%s", id, text(as))
				}
				says(t, found[0].Evidence, "another unit would explain it too: ", x[0])
				continue
			}
			found := first(as, wrongUnit)
			if len(found) != 1 || found[0].Subject != "T4" || len(first(as, doesNotClose)) != 0 {
				t.Fatalf("%s, face %s: got\n%s", id, face, text(as))
			}
			says(t, found[0].Statement, "looks like "+x[0]+", not "+x[1])
			if face == x[0] {
				says(t, found[0].Evidence, "the face of gauge G4 shows "+x[0])
			}
			if !found[0].Stay {
				t.Errorf("%s: nobody stays for it", id)
			}
		}
	}
}

func TestAbsoluteForGaugePressure(t *testing.T) {
	s := site()
	s.Rounds[0].Barometer = survey.Some(100_800)
	reading(s, "A", "T4").Value += 100_800
	a := only(t, s, wrongUnit, "T4")
	says(t, a.Statement, "looks like an absolute pressure")
	// And the other way: an absolute gauge that was a plain one.
	s = site()
	s.Rounds[0].Barometer = survey.Some(100_800)
	s.Rounds[1].Barometer = survey.Some(100_800)
	s.Gauges[3].Kind = survey.AbsoluteGauge
	reading(s, "B", "T4").Value += 100_800
	if found := first(look(s), wrongUnit); len(found) != 1 {
		t.Errorf("got\n%s", text(look(s)))
	} else {
		says(t, found[0].Statement, "above atmosphere, not an absolute one")
	}
}

func TestUnitsWhileWaterFlows(t *testing.T) {
	psi := unit.PoundPerSquareInch
	wrong := func(face string) *survey.Survey {
		s := site()
		r := reading(s, "B", "T4")
		number := psi.FromSI(r.Value)
		r.Value, r.Written, s.Gauges[3].Unit = number*1e5, fmt.Sprintf("%.1f", number), face
		return s
	}
	// 74 bar in a system under a reservoir of 100 m can be nothing else.
	as := look(wrong("bar"))
	if found := first(as, wrongUnit); len(found) != 1 || found[0].Subject != "T4" {
		t.Errorf("got\n%s", text(as))
	} else {
		says(t, found[0].Statement, "looks like psi, not bar")
	}

	// A reading far below the others may be a loss: only the gauge's own face speaks.
	low := func(face string) *survey.Survey {
		s := site()
		r := reading(s, "B", "T6")
		number := unit.Bar.FromSI(r.Value)
		r.Value, r.Unit, s.Gauges[5].Unit = psi.ToSI(number), "psi", face
		return s
	}
	if found := first(look(low("psi")), wrongUnit); len(found) != 0 {
		t.Errorf("a loss at the far end is taken for a unit: %s", text(found))
	}
	if found := first(look(low("bar")), wrongUnit); len(found) != 1 || found[0].Subject != "T6" {
		t.Errorf("the unit on the face is not seen: %s", text(found))
	}

	// Under a pump's delivery a head above the reservoir is nothing strange.
	s := wrong("bar")
	s.Machines = []survey.Machine{{Name: "M1", From: "R1", To: "N1", Kind: survey.Pump}}
	if found := first(look(s), wrongUnit); len(found) != 0 {
		t.Errorf("with a pump: %s", text(found))
	}
}

func TestExchangedReadings(t *testing.T) {
	exchange := func(s *survey.Survey, whole bool) {
		a, b := reading(s, "A", "T3"), reading(s, "A", "T6")
		a.Value, b.Value = b.Value, a.Value
		a.Gauge, b.Gauge = b.Gauge, a.Gauge
		if whole {
			a.GaugeHeight, b.GaugeHeight = b.GaugeHeight, a.GaugeHeight
		}
	}
	for _, whole := range []bool{true, false} {
		s := site()
		// Gauges at different heights above their taps, read accordingly.
		for name, height := range map[string]float64{"T3": 1.2, "T6": 0.2} {
			r := reading(s, "A", name)
			r.GaugeHeight = height
			r.Value -= height * weight(s)
		}
		quiet(t, "before", s)
		exchange(s, whole)
		a := only(t, s, exchangedRule, "T6 T3")
		says(t, a.Statement, "T6 and T3 look exchanged in round A")
		says(t, a.Evidence, "the common head is 100.00 m", "exchanged 100.00 m and 100.00 m")
		if !a.Stay || len(a.Sources) != 2 {
			t.Errorf("%+v", a)
		}
	}

	// One bad gauge is not an exchange: halving its error with a neighbour's help is no
	// better than leaving it out.
	s := site()
	shift(s, "A", "T5", 2) // T6 stands 2 m lower and T2 2 m higher than T5
	only(t, s, doesNotClose, "T5")

	// Nor where the neighbour's level is so rough that it could take the error over.
	s = site()
	high := tap(s, "T6")
	for _, r := range []string{"A", "B"} {
		shift(s, r, "T6", high.Elevation-38)
	}
	high.Elevation, high.ElevationSD = 38, 0.5
	shift(s, "A", "T5", 0.8)
	only(t, s, doesNotClose, "T5")

	// Two that are off by as much, but not by what lies between them.
	s = site()
	shift(s, "A", "T3", 1)
	shift(s, "A", "T6", -1)
	if found := first(look(s), exchangedRule); len(found) != 0 {
		t.Errorf("got\n%s", text(found))
	}

	// Beside larger and smaller faults it is seen all the same.
	s = site()
	exchange(s, true)
	for name, d := range map[string]float64{"T1": 30, "T2": 3, "T4": 2} {
		shift(s, "A", name, d)
	}
	if as := look(s); len(as) != 4 || len(first(as, exchangedRule)) != 1 {
		t.Errorf("got\n%s", text(as))
	}

	// An exchange beside another fault: both are named.
	s = site()
	exchange(s, true)
	shift(s, "A", "T1", 1.5)
	as := look(s)
	if len(as) != 2 || as[0].Rule != exchangedRule || as[1].Subject != "T1" {
		t.Errorf("got\n%s", text(as))
	}
}
