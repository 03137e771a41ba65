package check

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"

	"tapround/survey"
)

const doesNotClose = "no-flow round does not close"

func TestClosureNamesTheTap(t *testing.T) {
	s := site()
	shift(s, "A", "T3", 0.9)
	a := only(t, s, doesNotClose, "T3")
	says(t, a.Statement, "round A", "T3 (gauge G3)", "above the rest", "0.90 ±")
	says(t, a.Evidence, "T3 shows 100.90 m", "the rest shows 100.00 m (6 readings)")
	says(t, a.Action, "another gauge")
	if !a.Stay || a.Sources[0] != reading(s, "A", "T3").Source {
		t.Errorf("%+v", a)
	}

	// Class error 0.1 % of 10 bar over sqrt 3 (0.059 m), level 0.03 m, own 0.021 m: 0.07 m.
	for d, want := range map[float64]int{0.12: 0, -0.12: 0, 0.16: 1, -0.16: 1} {
		s := site()
		shift(s, "A", "T3", d)
		if n := len(look(s)); n != want {
			t.Errorf("%v m off: %d alerts, want %d", d, n, want)
		}
	}
}

func TestClosureTellsGaugeFromLevel(t *testing.T) {
	// G2 takes over at T3 and T5: off at all three it is the gauge.
	s := site()
	for _, name := range []string{"T2", "T3", "T5"} {
		reading(s, "A", name).Gauge = "G2"
		shift(s, "A", name, -0.8)
	}
	a := only(t, s, doesNotClose, "G2")
	says(t, a.Statement, "gauge G2, at 3 taps,", "below the rest")
	says(t, a.Action, "Gauge G2 is off")

	// Off at one of them it is that tap's level.
	s = site()
	for _, name := range []string{"T2", "T3", "T5"} {
		reading(s, "A", name).Gauge = "G2"
	}
	shift(s, "A", "T3", -0.8)
	a = only(t, s, doesNotClose, "T3")
	says(t, a.Evidence, "gauge G2 agrees with the rest at T2")
	says(t, a.Action, "level the tap again")
}

func TestClosureTellsTheLevel(t *testing.T) {
	s := site()
	s.Conditions[0].Value.V = 100.31 // on an older datum
	a := only(t, s, doesNotClose, "R1")
	says(t, a.Statement, "the stated level of R1", "above the rest")
	says(t, a.Action, "water level of R1")
	if a.Sources[0].File != "conditions.csv" {
		t.Errorf("sources %v", a.Sources)
	}
	// A level of ±0.3 m that is 0.31 m off is not apart.
	s.Conditions[0].SD = survey.Some(0.3)
	quiet(t, "rough level", s)
	// Without a stated level the taps still see each other.
	s = site()
	s.Conditions[0].Value = survey.Maybe{}
	quiet(t, "no level", s)
	shift(s, "A", "T6", 0.9)
	only(t, s, doesNotClose, "T6")
}

func TestClosureOfTwo(t *testing.T) {
	s := site()
	s.Readings = s.Readings[:1] // T1 in round A, and the level
	s.Readings[0].Value += weight(s)
	a := only(t, s, doesNotClose, "T1, R1")
	says(t, a.Statement, "do not say which")
	says(t, a.Evidence, "1.00 ±")
}

func TestClosureFindsSeveral(t *testing.T) {
	s := site()
	shift(s, "A", "T2", 3)
	shift(s, "A", "T5", 1.1)
	as := look(s)
	if len(as) != 2 || as[0].Subject != "T2" || as[1].Subject != "T5" {
		t.Errorf("got\n%s", text(as))
	}
}

// Whatever leaves a doubt that nothing flows takes the closure away.
func TestClosureNeedsRest(t *testing.T) {
	condition := func(round, item string, kind survey.ConditionKind, v survey.Maybe) func(*survey.Survey) {
		return func(s *survey.Survey) {
			s.Conditions = append(s.Conditions, survey.Condition{Round: round, Item: item, Kind: kind, Value: v})
		}
	}
	for what, c := range map[string]struct {
		alter func(*survey.Survey)
		rest  bool
	}{
		"as it is":              {func(*survey.Survey) {}, true},
		"a draw-off":            {condition("A", "N2", survey.DrawOff, survey.Some(0.001)), false},
		"a draw-off of all":     {condition("*", "N2", survey.DrawOff, survey.Some(0.001)), false},
		"an unknown draw-off":   {condition("A", "N2", survey.DrawOff, survey.Maybe{}), false},
		"a draw-off of nothing": {condition("A", "N2", survey.DrawOff, survey.Some(0)), true},
		"a draw-off elsewhen":   {condition("B", "N2", survey.DrawOff, survey.Some(0.001)), true},
		"another reservoir":     {func(s *survey.Survey) { s.Points[3].Kind = survey.Reservoir }, false},
		"an outlet":             {func(s *survey.Survey) { s.Points[3].Kind = survey.Outlet }, false},
		"a machine":             {func(s *survey.Survey) { s.Machines = []survey.Machine{{Name: "M1", From: "N3", To: "N1"}} }, false},
		"a machine feeding in": {func(s *survey.Survey) {
			s.Points = append(s.Points, survey.Point{Name: "N9", Kind: survey.Junction})
			s.Machines = []survey.Machine{{Name: "M1", From: "N9", To: "N1"}}
		}, false},
		"a machine drawing": {func(s *survey.Survey) {
			s.Points = append(s.Points, survey.Point{Name: "N9", Kind: survey.Junction})
			s.Machines = []survey.Machine{{Name: "M1", From: "N1", To: "N9"}}
		}, false},
		"a stopped machine": {func(s *survey.Survey) {
			s.Machines = []survey.Machine{{Name: "M1", From: "N3", To: "N1"}}
			condition("A", "M1", survey.Stopped, survey.Maybe{})(s)
		}, true},
		"drawn behind a shut end": {func(s *survey.Survey) {
			condition("A", "N3", survey.DrawOff, survey.Some(0.01))(s)
			condition("A", "P3", survey.ShutOff, survey.Maybe{})(s)
		}, true},
	} {
		s := site()
		for i := range s.Readings { // leave the meter on the pipe that is shut out of it
			if s.Readings[i].Tap == "Q2" {
				s.Readings[i].SetAside = "not in this test"
			}
		}
		shift(s, "A", "T3", 0.9)
		c.alter(s)
		n := 0
		for _, a := range look(s) {
			if a.Rule == doesNotClose && a.Subject == "T3" {
				n++
			}
		}
		if (n == 1) != c.rest {
			t.Errorf("%s: %d alerts, at rest should be %v", what, n, c.rest)
		}
	}
}

// Behind a shut fitting, and on either side of a check valve, heads may differ.
func TestClosureStopsAtFittings(t *testing.T) {
	for _, f := range []survey.FittingKind{survey.GateValve, survey.CheckValve} {
		s := site()
		s.Fittings = []survey.Fitting{{Name: "V1", Pipe: "P2", At: 250, Kind: f}}
		if f == survey.GateValve {
			s.Conditions = append(s.Conditions, survey.Condition{Round: "A", Item: "V1", Kind: survey.ShutOff})
		}
		for _, name := range []string{"T4", "T5", "T6"} {
			shift(s, "A", name, -20)
			shift(s, "B", name, 0)
		}
		quiet(t, string(f), s)
		shift(s, "A", "T3", 0.9) // on the reservoir's side of it
		only(t, s, doesNotClose, "T3")
	}
	// Water that is drawn off behind a check valve comes through it.
	s := site()
	s.Fittings = []survey.Fitting{{Name: "V1", Pipe: "P2", At: 250, Kind: survey.CheckValve}}
	s.Conditions = append(s.Conditions, survey.Condition{Round: "A", Item: "N3", Kind: survey.DrawOff, Value: survey.Some(0.01)})
	shift(s, "A", "T3", -0.9)
	for _, a := range look(s) {
		if a.Rule == doesNotClose {
			t.Errorf("round with flow: %s", text([]survey.Alert{a}))
		}
	}
}

func TestNothingFlows(t *testing.T) {
	s := site()
	reading(s, "A", "Q1").Value = 0.002 // class 0.5 % of 100 L/s over sqrt 3: 0.29 L/s
	a := only(t, s, doesNotClose, "Q1")
	says(t, a.Evidence, "2.00 ± 0.29 L/s")
	reading(s, "A", "Q1").Value = 0.0005
	quiet(t, "within the meter's offset", s)

	s = site()
	s.Gauges = append(s.Gauges, survey.Gauge{Name: "D1", Kind: survey.DifferenceGauge, High: 50e3, Unit: "kPa", Accuracy: survey.Some(0.0025), Resolution: survey.Some(10)})
	s.Readings = append(s.Readings, survey.Reading{Round: "A", Tap: "T3", OtherTap: "T4", Kind: survey.Difference, Gauge: "D1", Value: 900, Written: "0.90", Unit: "kPa"})
	says(t, only(t, s, doesNotClose, "T3").Statement, "difference")
	s.Readings[len(s.Readings)-1].Value = 100
	quiet(t, "a difference of 0.01 m", s)
	// Behind a shut valve the other tap may stand at any head.
	s.Readings[len(s.Readings)-1].Value = 900
	s.Fittings = []survey.Fitting{{Name: "V1", Pipe: "P2", At: 250, Kind: survey.GateValve}}
	s.Conditions = append(s.Conditions, survey.Condition{Round: "A", Item: "V1", Kind: survey.ShutOff})
	quiet(t, "a difference over a shut valve", s)
}

// The size of a suspect and its standard uncertainty, against the plain estimate: with
// one more unknown, the shift of the suspect's members, in a least-squares problem.
func TestMeanAgainstLeastSquares(t *testing.T) {
	s := site()
	reading(s, "A", "T2").Gauge, reading(s, "A", "T5").Gauge = "G1", "G1"
	for i, name := range []string{"T1", "T2", "T3", "T4", "T5", "T6"} {
		shift(s, "A", name, 0.3*math.Sin(float64(i+1)))
	}
	ws := newView(s, headsOf(s), customary).atRestIn("A")
	m, ok := meanOf(ws)
	if !ok || len(ws) != 7 {
		t.Fatalf("%d witnesses", len(ws))
	}
	for _, x := range m.suspects() {
		n := len(ws)
		v := mat.NewSymDense(n, nil)
		design, y := mat.NewDense(n, 2, nil), mat.NewVecDense(n, nil)
		for i := range ws {
			y.SetVec(i, ws[i].value())
			design.Set(i, 0, 1)
			for j := i; j < n; j++ {
				v.SetSym(i, j, cov(ws[i], ws[j], i == j))
			}
		}
		for _, i := range x.members {
			design.Set(i, 1, 1)
		}
		var chol, normal mat.Cholesky
		chol.Factorize(v)
		var vd, vy, b mat.Dense
		_ = chol.SolveTo(&vd, design)
		_ = chol.SolveTo(&vy, y)
		var nn mat.Dense
		nn.Mul(design.T(), &vd)
		normal.Factorize(mat.NewSymDense(2, []float64{nn.At(0, 0), nn.At(0, 1), nn.At(1, 0), nn.At(1, 1)}))
		b.Mul(design.T(), &vy)
		var theta mat.Dense
		_ = normal.SolveTo(&theta, &b)
		var c mat.SymDense
		_ = normal.InverseTo(&c)
		const same = 1e-7 // heads of 100 m through a normal matrix of condition 1e4 or so
		if math.Abs(x.size-theta.At(1, 0)) > same || math.Abs(x.rest-theta.At(0, 0)) > same || math.Abs(x.sd-math.Sqrt(c.At(1, 1))) > same {
			t.Errorf("%s: size %v ± %v rest %v, least squares %v ± %v rest %v", x.name(), x.size, x.sd, x.rest, theta.At(1, 0), math.Sqrt(c.At(1, 1)), theta.At(0, 0))
		}
	}
}

// How often a sound no-flow round is questioned: gauges off by as much as their class
// allows and no more (every error within it as likely), levels and own errors normal as
// stated. With 2 standard uncertainties and 7 witnesses normal theory gives 1 - 0.954^7,
// 28 %, of the rounds at least one name; a class error has no tails and gives less.
func TestFalseAlarms(t *testing.T) {
	rng := rand.New(rand.NewPCG(11, 2026))
	const trials = 600
	questioned, stay, other := 0, 0, 0
	for range trials {
		s := site()
		for i, x := range s.Taps {
			s.Taps[i].Elevation += rng.NormFloat64() * x.ElevationSD
		}
		offset := map[string]float64{}
		for _, g := range s.Gauges {
			offset[g.Name] = (2*rng.Float64() - 1) * g.Accuracy.V * g.Span()
		}
		for i := range s.Readings {
			r := &s.Readings[i]
			d := 500.0
			if r.Kind == survey.FlowRate {
				d = 1e-4
			}
			r.Value = d * math.Round((r.Value+offset[r.Gauge]+0.3*d*rng.NormFloat64())/d)
		}
		named := false
		for _, a := range look(s) {
			switch {
			case a.Rule == doesNotClose:
				named = true
				if a.Stay {
					stay++
				}
			default:
				other++
			}
		}
		if named {
			questioned++
		}
	}
	rate := func(n int) float64 { return float64(n) / trials }
	t.Logf("closure named something in %.1f %% of sound no-flow rounds, to stay for in %.2f %%; other checks spoke in %.1f %% of surveys",
		100*rate(questioned), 100*rate(stay), 100*rate(other))
	// Three standard deviations of a count of 600 on top of normal theory.
	if limit := 0.28 + 3*math.Sqrt(0.28*0.72/trials); rate(questioned) > limit {
		t.Errorf("closure questioned %.1f %% of sound rounds, at most %.1f %% expected", 100*rate(questioned), 100*limit)
	}
	if rate(stay) > 0.02 || rate(other) > 0.15 {
		t.Errorf("%d to stay for, %d others in %d", stay, other, trials)
	}
}

// atRestIn gives the witnesses of the one part at rest in a round.
func (v *view) atRestIn(name string) []witness {
	for _, r := range v.rounds {
		if r.Name == name {
			if all := v.atRest(r); len(all) == 1 {
				return all[0]
			}
		}
	}
	panic(fmt.Sprintf("round %s has no one part at rest", name))
}

// Where the gauge of a tap that stands apart is seen to be off elsewhere too, the tap
// answers only for what is left, and the alert says so.
func TestClosureAllowsForTheGauge(t *testing.T) {
	s := site()
	s.Gauges[1].Accuracy = survey.Some(0.004)
	for _, name := range []string{"T2", "T3", "T5", "T6"} {
		reading(s, "A", name).Gauge = "G2"
		shift(s, "A", name, 0.3)
	}
	shift(s, "A", "T3", 0.7)
	a := only(t, s, doesNotClose, "T3")
	says(t, a.Statement, "0.7")
	says(t, a.Evidence, "T3 shows 101.00 m", "m above once allowance is made for what gauge G2 shows elsewhere")
}

func TestDropOf(t *testing.T) {
	s := site()
	reading(s, "A", "T2").Gauge = "G1"
	shift(s, "A", "T3", 0.4)
	ws := newView(s, headsOf(s), customary).atRestIn("A")
	m, _ := meanOf(ws)
	moved := append([]witness(nil), ws...)
	moved[1].head.Value += 0.2
	moved[2].head.Value -= 0.3
	n, _ := meanOf(moved)
	if got, want := m.dropOf(1, 2, 0.2, -0.3), m.chi2-n.chi2; math.Abs(got-want) > 1e-9*m.chi2 {
		t.Errorf("drop %v, want %v", got, want)
	}
}
