package fault

import (
	"fmt"
	"math"
	"math/rand/v2"

	"tapround/calibrate"
	"tapround/survey"
	"tapround/survey/correct"
	"tapround/survey/head"
	"tapround/survey/water"
)

// synth is a random survey with its truth: a system of one of several shapes, sound
// items scattered as the priors say, one fault or none, read as a crew would read it.
type synth struct {
	recorded *survey.Survey // what the crew believes, with its readings
	fault    *truthFault    // nil: sound
	truth    *survey.Survey
	offset   map[string]float64 // true offsets of the gauges, SI
}

// truthFault is what was made wrong. ratio is the largest falsification of a head, in
// standard uncertainties of a reading's own and shared errors together.
type truthFault struct {
	kind  survey.FindingKind
	item  string
	size  float64 // in the unit of findings.csv
	ratio float64
}

var shapes = []string{"line", "branch", "ring", "town"}

// newSynth draws a survey. kind empty: sound. Nil where the draw has no steady state.
func newSynth(rng *rand.Rand, shape string, kind survey.FindingKind) *synth {
	s := layout(rng, shape)
	truth := clone(s)
	scatter(rng, truth)
	var f *truthFault
	if kind != "" {
		if f = spoil(rng, truth, kind); f == nil {
			return nil
		}
	}
	m, err := calibrate.New(truth, nil, calibrate.DefaultPriors())
	if err != nil {
		return nil
	}
	e, err := m.Expected()
	if err != nil {
		return nil
	}
	offset := offsets(rng, s, f)
	if !read(rng, s, truth, e, offset) {
		return nil
	}
	if f != nil && f.kind == survey.LevelWrong {
		for i := range s.Taps {
			if s.Taps[i].Name == f.item {
				f.size = s.Taps[i].Elevation - truth.Taps[i].Elevation
			}
		}
	}
	if f != nil {
		sound := clone(truth)
		unspoil(sound, s, f)
		f.ratio = ratioOf(s, truth, sound, f)
	}
	return &synth{recorded: s, fault: f, truth: truth, offset: offset}
}

// layout draws the works as recorded.
func layout(rng *rand.Rand, shape string) *survey.Survey {
	some := survey.Some
	s := &survey.Survey{Info: survey.Info{Latitude: 45, SiteLevel: 200, WaterTemperature: 10, FalseAlarmRate: 0.05}}
	s.Points = append(s.Points, survey.Point{Name: "R1", Kind: survey.Reservoir, Elevation: 80})
	type edge struct{ a, b int }
	var edges []edge
	switch shape {
	case "line":
		for i := 0; i < 10; i++ {
			edges = append(edges, edge{i, i + 1})
		}
	case "branch":
		for i := 1; i <= 10; i++ {
			edges = append(edges, edge{max(0, i-1-rng.IntN(min(3, i))), i})
		}
	case "ring":
		for i := 0; i < 8; i++ {
			edges = append(edges, edge{i, i + 1})
		}
		edges = append(edges, edge{8, 2}, edge{5, 9}, edge{9, 10})
	case "town":
		for i := 0; i < 9; i++ {
			edges = append(edges, edge{i, i + 1})
		}
		edges = append(edges, edge{1, 5}, edge{3, 8}, edge{6, 9})
	}
	n := 0
	for _, e := range edges {
		n = max(n, max(e.a, e.b))
	}
	for i := 1; i <= n; i++ {
		s.Points = append(s.Points, survey.Point{Name: fmt.Sprintf("N%d", i), Kind: survey.Junction, Elevation: 20 + 10*rng.Float64()})
	}
	bores := []float64{0.3, 0.25, 0.2, 0.15}
	valves := []survey.FittingKind{survey.GateValve, survey.ButterflyValve, survey.PlugValve, survey.Strainer, survey.Elbow, survey.CheckValve}
	for i, e := range edges {
		d := bores[min(3, i*4/len(edges))]
		p := survey.Pipe{Name: fmt.Sprintf("P%d", i+1), From: s.Points[e.a].Name, To: s.Points[e.b].Name, Length: 150 + 450*rng.Float64(), Bore: d,
			Roughness: some(1e-4 * math.Exp(2*rng.Float64())), Material: "steel"}
		s.Pipes = append(s.Pipes, p)
		if i == 0 {
			s.Fittings = append(s.Fittings, survey.Fitting{Name: "E1", Pipe: p.Name, At: 0, Kind: survey.EntranceSharp, K: some(0.5)})
		}
		if rng.Float64() < 0.6 {
			k := valves[rng.IntN(len(valves))]
			if k == survey.CheckValve && shape != "line" {
				k = survey.GateValve
			}
			kv := map[survey.FittingKind]float64{survey.GateValve: 0.15, survey.ButterflyValve: 0.4, survey.PlugValve: 0.4, survey.Strainer: 2.5, survey.Elbow: 0.7, survey.CheckValve: 2}[k]
			s.Fittings = append(s.Fittings, survey.Fitting{Name: fmt.Sprintf("V%d", i+1), Pipe: p.Name, At: p.Length * (0.1 + 0.8*rng.Float64()), Kind: k, K: some(kv)})
		}
	}
	s.Taps = append(s.Taps, survey.Tap{Name: "Q1", Pipe: "P1", At: 10, Elevation: 60, ElevationSD: 0.05})
	for i, p := range rng.Perm(n)[:min(n, 8)] {
		s.Taps = append(s.Taps, survey.Tap{Name: fmt.Sprintf("T%d", i+1), Point: fmt.Sprintf("N%d", p+1), Elevation: math.Round(1e2*(20+10*rng.Float64())) / 1e2, ElevationSD: []float64{0.02, 0.05, 0.1}[rng.IntN(3)]})
	}
	for i := 0; i < 5; i++ {
		s.Gauges = append(s.Gauges, survey.Gauge{Name: fmt.Sprintf("G%d", i+1), Kind: survey.PressureGauge, High: 1e6, Unit: "kPa",
			Accuracy: some([]float64{0.001, 0.0025, 0.005}[rng.IntN(3)]), Resolution: some([]float64{200, 500, 1000}[rng.IntN(3)]), Line: survey.WaterLine})
	}
	s.Gauges = append(s.Gauges, survey.Gauge{Name: "FM", Kind: survey.FlowMeter, High: 0.1, Unit: "L/s", Accuracy: some(0.005), Resolution: some(1e-4)})
	rounds := 4
	s.Conditions = append(s.Conditions, survey.Condition{Round: "*", Item: "R1", Kind: survey.LevelIs, Value: some(83), SD: some(0.02), Source: survey.Source{File: "conditions.csv", Line: 2}})
	for r := 0; r < rounds; r++ {
		name := string(rune('A' + r))
		s.Rounds = append(s.Rounds, survey.Round{Name: name})
		if r == 0 && rng.Float64() < 0.6 {
			continue // nothing is drawn
		}
		total := 0.02 + 0.03*rng.Float64()
		for k := 0; k < 3; k++ {
			s.Conditions = append(s.Conditions, survey.Condition{Round: name, Item: fmt.Sprintf("N%d", 1+rng.IntN(n)), Kind: survey.DrawOff, Value: some(total / 3),
				Source: survey.Source{File: "conditions.csv", Line: 10*r + k + 3}})
		}
		s.Conditions = append(s.Conditions, survey.Condition{Round: name, Item: fmt.Sprintf("N%d", n), Kind: survey.DrawOff, Value: some(total / 4),
			Source: survey.Source{File: "conditions.csv", Line: 10*r + 9}})
	}
	return s
}

func clone(s *survey.Survey) *survey.Survey {
	c := *s
	c.Pipes = append([]survey.Pipe(nil), s.Pipes...)
	c.Fittings = append([]survey.Fitting(nil), s.Fittings...)
	c.Taps = append([]survey.Tap(nil), s.Taps...)
	c.Conditions = append([]survey.Condition(nil), s.Conditions...)
	c.Gauges = append([]survey.Gauge(nil), s.Gauges...)
	return &c
}

// scatter moves everything from recorded to true by the scatter of sound items.
func scatter(rng *rand.Rand, s *survey.Survey) {
	p := calibrate.DefaultPriors()
	for i := range s.Pipes {
		s.Pipes[i].Roughness.V *= math.Exp(p.LnRoughness * rng.NormFloat64())
	}
	for i := range s.Fittings {
		s.Fittings[i].K.V *= math.Exp(p.LnK * rng.NormFloat64())
	}
	for i := range s.Taps {
		s.Taps[i].Elevation -= s.Taps[i].ElevationSD * rng.NormFloat64()
	}
	for i := range s.Conditions {
		c := &s.Conditions[i]
		sd := c.SD.Or(0)
		if c.Kind == survey.DrawOff {
			sd = 0.05 * c.Value.V
		}
		c.Value.V += sd * rng.NormFloat64()
	}
}

// spoil makes one thing wrong. Nil where the works have no such thing.
func spoil(rng *rand.Rand, s *survey.Survey, kind survey.FindingKind) *truthFault {
	f := &truthFault{kind: kind}
	switch kind {
	case survey.FouledPipe:
		p := &s.Pipes[rng.IntN(len(s.Pipes))]
		p.Roughness.V *= math.Exp(1 + 2.5*rng.Float64())
		f.item, f.size = p.Name, 1e3*p.Roughness.V
	case survey.PartClosedValve, survey.BlockedFitting:
		var at []int
		for i, x := range s.Fittings {
			if (kind == survey.PartClosedValve && x.Kind.CanBePartClosed()) || (kind == survey.BlockedFitting && x.Kind.CanBeBlocked()) {
				at = append(at, i)
			}
		}
		if len(at) == 0 {
			return nil
		}
		x := &s.Fittings[at[rng.IntN(len(at))]]
		x.K.V = 5 * math.Exp(3*rng.Float64())
		f.item, f.size = x.Name, x.K.V
	case survey.GaugeOff:
		g := &s.Gauges[rng.IntN(5)]
		f.item = g.Name
		f.size = (3 + 9*rng.Float64()) * g.Accuracy.V * g.Span() / 1e3
		if rng.IntN(2) == 0 {
			f.size = -f.size
		}
	case survey.LevelWrong:
		t := &s.Taps[1+rng.IntN(len(s.Taps)-1)]
		f.item, f.size = t.Name, 0.3+1.2*rng.Float64()
		if rng.IntN(2) == 0 {
			f.size = -f.size
		}
		t.Elevation -= f.size
	case survey.UnrecordedFlow:
		n := 1 + rng.IntN(len(s.Points)-1)
		f.item, f.size = s.Points[n].Name, 2+6*rng.Float64()
		for _, r := range s.Rounds {
			s.Conditions = append(s.Conditions, survey.Condition{Round: r.Name, Item: f.item, Kind: survey.DrawOff, Value: survey.Some(f.size / 1e3)})
		}
	}
	return f
}

// unspoil puts the faulty item back to what is recorded.
func unspoil(s, recorded *survey.Survey, f *truthFault) {
	for i := range s.Pipes {
		if f.kind == survey.FouledPipe && s.Pipes[i].Name == f.item {
			s.Pipes[i].Roughness = recorded.Pipes[i].Roughness
		}
	}
	for i := range s.Fittings {
		if s.Fittings[i].Name == f.item {
			s.Fittings[i].K = recorded.Fittings[i].K
		}
	}
	if f.kind == survey.UnrecordedFlow {
		s.Conditions = s.Conditions[:len(s.Conditions)-len(s.Rounds)]
	}
}

// offsets draws each gauge's error within its class.
func offsets(rng *rand.Rand, s *survey.Survey, f *truthFault) map[string]float64 {
	offset := map[string]float64{}
	for _, g := range s.Gauges {
		offset[g.Name] = g.Accuracy.V * g.Span() * (2*rng.Float64() - 1)
		if f != nil && f.kind == survey.GaugeOff && g.Name == f.item {
			offset[g.Name] = f.size * 1e3
		}
	}
	return offset
}

// read writes the readings that a crew would bring home; gauges are carried along and
// change places between rounds.
func read(rng *rand.Rand, s, truth *survey.Survey, e *calibrate.Expected, offset map[string]float64) bool {
	gravity := water.Gravity(s.Info.Latitude, s.Info.SiteLevel)
	w := gravity * water.Density(s.Info.WaterTemperature)
	shift := rng.IntN(5)
	for r, round := range s.Rounds {
		for t, tap := range s.Taps {
			x := survey.Reading{Round: round.Name, Tap: tap.Name, Kind: survey.Static, Source: survey.Source{File: "readings.csv", Line: 100*r + t + 2}}
			g := s.Gauges[(t/2+shift*(r/2))%5]
			v := w * (e.Piezometric(r, t) - truth.Taps[t].Elevation)
			if tap.Name == "Q1" {
				x.Kind, g = survey.FlowRate, s.Gauges[5]
				v = e.Flow(r, t)
			}
			x.Gauge = g.Name
			step := g.Resolution.V
			x.Value = math.Round((v+offset[g.Name]+0.3*step*rng.NormFloat64())/step) * step
			if math.IsNaN(v) || v > g.High || (x.Kind == survey.Static && v < 0) {
				return false
			}
			s.Readings = append(s.Readings, x)
		}
	}
	return true
}

// ratioOf is the largest excess of a head by the fault over the uncertainty of the
// heads that were read.
func ratioOf(s, truth, sound *survey.Survey, f *truthFault) float64 {
	u := 0.15
	switch f.kind {
	case survey.GaugeOff:
		return math.Abs(f.size) * 1e3 / 9810 / u
	case survey.LevelWrong:
		return math.Abs(f.size) / u
	}
	a, err1 := calibrate.New(truth, nil, calibrate.DefaultPriors())
	b, err2 := calibrate.New(sound, nil, calibrate.DefaultPriors())
	if err1 != nil || err2 != nil {
		return 0
	}
	ea, err1 := a.Expected()
	eb, err2 := b.Expected()
	if err1 != nil || err2 != nil {
		return 0
	}
	worst := 0.0
	for r := range s.Rounds {
		for t := range s.Taps {
			worst = math.Max(worst, math.Abs(ea.Piezometric(r, t)-eb.Piezometric(r, t)))
		}
	}
	return worst / u
}

// diagnose runs the product on a survey.
func diagnose(s *survey.Survey) (*Diagnosis, error) {
	cs, _ := correct.Readings(s)
	hs, _ := head.FromCorrected(s, cs)
	m, err := calibrate.New(s, hs, calibrate.DefaultPriors())
	if err != nil {
		return nil, err
	}
	return Diagnose(m, DefaultSettings(s))
}
