// Command gen writes the readings of the built-in survey from its true state. The
// tables beside the readings are what the crew believes; the truth differs from
// them by the scatter of sound items and by five faults. Run it in
// cmd/internal/demo:
//
//	go run ./gen
package main

import (
	"fmt"
	"io/fs"
	"log"
	"math"
	"math/rand/v2"
	"os"
	"strings"
	"time"

	"tapround/calibrate"
	"tapround/survey"
	"tapround/survey/catalogue"
	"tapround/survey/csvfile"
	"tapround/survey/unit"
	"tapround/survey/water"
)

// seed of everything random in the survey.
const seed = 20260315

// The five faults.
const (
	scaledPipe, scaledBore, scaledRoughness = "P2", 0.328, 0.009
	throttledValve, throttledK              = "SV-031", 45.0
	badGauge, badOffset                     = "G07", 12000.0 // Pa, reads high
	wrongTap, wrongBy                       = "N10", -2.4    // m, recorded minus true
	bypassPoint, bypassFlow                 = "N8", 0.004    // m3/s, every round
)

// visits says which gauge was on which tap: rounds A to C, then D and E, when
// two gauges changed places.
var visits = []struct{ tap, early, late string }{
	{"N1", "G01", "G01"}, {"N2", "G01", "G02"}, {"N3", "G02", "G02"}, {"N10", "G02", "G01"},
	{"N13", "G04", "G04"}, {"N4", "G05", "G05"}, {"N5", "G05", "G08"}, {"N18", "G08", "G08"},
	{"N6", "G07", "G05"}, {"N7", "G04", "G05"}, {"N8", "G08", "G07"}, {"N9", "G05", "G04"},
}

func main() {
	folder := os.DirFS("harrowgill")
	s, problems := csvfile.ReadFolder(withoutReadings{folder})
	problems = append(problems, catalogue.Complete(s)...)
	for _, p := range problems {
		if p.Severity == survey.Fatal && !strings.Contains(p.File, "readings") {
			log.Fatal(p)
		}
	}
	rng := rand.New(rand.NewPCG(seed, 1))
	truth(s, rng)
	m, err := calibrate.New(s, nil, calibrate.DefaultPriors())
	if err != nil {
		log.Fatal(err)
	}
	true_, err := m.Expected()
	if err != nil {
		log.Fatal(err)
	}
	offsets := map[string]float64{}
	for _, g := range s.Gauges {
		limit := g.Accuracy.V * g.Span()
		offsets[g.Name] = limit * (2*rng.Float64() - 1) // rectangular within its class
	}
	offsets[badGauge] = badOffset
	// Crew 1 writes bar, with decimal commas; crew 2 psi.
	crew1 := "# Crew 1, Scarth Bank to Market Street\nround;time;tap;other_tap;kind;gauge;reading;unit;gauge_height [m];depth [mm];remark\n"
	crew2 := "round,time,tap,other_tap,kind,gauge,reading,unit,gauge_height [m],depth [mm],remark\n"
	for r, round := range s.Rounds {
		t := round.Start.Add(8 * time.Minute)
		rho := water.Density(round.WaterTemperature.V)
		g := water.Gravity(s.Info.Latitude, s.Info.SiteLevel)
		for _, v := range visits {
			gauge := v.early
			if r >= 3 {
				gauge = v.late
			}
			tap := m.TapIndex(v.tap)
			// The crew's table has the level as recorded; the water knows the true one.
			h := true_.Piezometric(r, tap) - s.Taps[tap].Elevation
			height := 0.6
			line := reading(s, m, gauge, rho*g*(h-height)+offsets[gauge], rng, r, v.tap)
			t = t.Add(time.Duration(4+rng.IntN(4)) * time.Minute)
			remark := remarkOf(rng)
			if strings.HasSuffix(line, "psi") {
				crew2 += fmt.Sprintf("%s,%s,%s,,static,%s,%s,%.1f,,%s\n", round.Name, t.Format("2006-01-02 15:04"), v.tap, gauge, strings.Replace(line, " ", ",", 1), height, remark)
			} else {
				crew1 += fmt.Sprintf("%s;%s;%s;;static;%s;%s;%s;;%s\n", round.Name, t.Format("2006-01-02 15:04"), v.tap, gauge,
					strings.Replace(strings.ReplaceAll(line, ".", ","), " ", ";", 1), "0,6", remark)
			}
		}
		for _, meter := range []struct{ tap, gauge string }{{"QM", "FM1"}, {"QB", "FM2"}} {
			q := true_.Flow(r, m.TapIndex(meter.tap))
			line := reading(s, m, meter.gauge, q+offsets[meter.gauge], rng, r, meter.tap)
			t = t.Add(3 * time.Minute)
			crew2 += fmt.Sprintf("%s,%s,%s,,flow,%s,%s,,,\n", round.Name, t.Format("2006-01-02 15:04"), meter.tap, meter.gauge, strings.Replace(line, " ", ",", 1))
		}
	}
	crew2 += "E,2026-03-15 16:52,N9,,static,G04,31.0,psi,0.6,,! cap leaking\n"
	write("harrowgill/readings/crew-1.csv", crew1)
	write("harrowgill/readings/crew-2.csv", crew2)
	fmt.Printf("booster in round C: %.1f L/s\n", 1e3*true_.FlowOf(2, "BP1"))
}

// truth moves the survey from what is believed to what is.
func truth(s *survey.Survey, rng *rand.Rand) {
	for i := range s.Pipes {
		p := &s.Pipes[i]
		p.Roughness = survey.Some(p.Roughness.V * math.Exp(rng.NormFloat64()*math.Log(p.Spread.Or(1.5))))
		if p.Name == scaledPipe {
			p.Bore, p.Roughness = scaledBore, survey.Some(scaledRoughness)
		}
	}
	for i := range s.Fittings {
		f := &s.Fittings[i]
		f.K = survey.Some(f.K.V * math.Exp(rng.NormFloat64()*math.Log(1.3)))
		if f.Name == throttledValve {
			f.K = survey.Some(throttledK)
		}
	}
	for i := range s.Taps {
		t := &s.Taps[i]
		t.Elevation -= t.ElevationSD * rng.NormFloat64()
		if t.Name == wrongTap {
			t.Elevation -= wrongBy
		}
	}
	for i := range s.Conditions {
		c := &s.Conditions[i]
		if c.Kind == survey.DrawOff {
			sd := c.SD.Or(0.05 * math.Abs(c.Value.V))
			c.Value = survey.Some(c.Value.V + sd*rng.NormFloat64())
		}
	}
	for _, r := range s.Rounds {
		s.Conditions = append(s.Conditions, survey.Condition{Round: r.Name, Item: bypassPoint, Kind: survey.DrawOff, Value: survey.Some(bypassFlow)})
	}
}

// reading is what the gauge's face shows: a reader's scatter of 0.3 of a step, then
// rounded to the step.
func reading(s *survey.Survey, m *calibrate.Model, gauge string, si float64, rng *rand.Rand, round int, tap string) string {
	g := m.GaugeNamed(gauge)
	d := unit.Pressure
	if g.Kind == survey.FlowMeter {
		d = unit.Flow
	}
	u, err := unit.Parse(g.Unit, d)
	if err != nil {
		log.Fatal(err)
	}
	// At rest a meter may show a little below zero; nothing else leaves its scale.
	if si < g.Low-g.Accuracy.V*g.Span() || si > g.High {
		log.Fatalf("round %d, tap %s: %g is off the scale of %s", round, tap, si, gauge)
	}
	step := u.FromSIDifference(g.Resolution.V)
	v := math.Round((u.FromSI(si)+0.3*step*rng.NormFloat64())/step) * step
	digits := int(math.Ceil(-math.Log10(step) - 1e-9))
	return fmt.Sprintf("%.*f %s", max(0, digits), v, g.Unit)
}

func remarkOf(rng *rand.Rand) string {
	return []string{"", "", "", "steady", "slight flutter"}[rng.IntN(5)]
}

func write(name, text string) {
	if err := os.WriteFile(name, []byte(text), 0o644); err != nil {
		log.Fatal(err)
	}
}

// withoutReadings hides the readings that are about to be written again.
type withoutReadings struct{ fs.FS }

func (w withoutReadings) Open(name string) (fs.File, error) {
	if strings.HasPrefix(name, "readings/") {
		return nil, fs.ErrNotExist
	}
	return w.FS.Open(name)
}
