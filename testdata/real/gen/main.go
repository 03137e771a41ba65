// Command gen writes the surveys of testdata/real from the published measurements
// beside it: one folder for each pipe, one round for each measured point, with the
// flow as a meter reading and the loss as a differential gauge reading between two
// taps. Run it from the repository's root:
//
//	go run ./testdata/real/gen
//
// Nothing is added to the measurements: no noise, no rounding beyond four figures.
// The gauges are chosen for their range; their class (0.5), their smallest step (a
// hundredth of the scale for flow, a fiftieth for pressure) and the meter's gain (1 %)
// are stated so that a point's own uncertainty is of the order of the scatter that the
// papers' points show, 2 % of the friction factor (judgement). The head tank is set so
// high that the pressure stays above atmosphere at any flow.
package main

import (
	"encoding/csv"
	"fmt"
	"log"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"

	"tapround/survey/water"
)

// point is one measurement: section mean velocity, Reynolds number and measured
// friction factor of a pipe of bore d.
type point struct {
	d, v, re, f float64
	aside       string
}

type pipe struct {
	folder, title, material string
	roughness               float64 // m, expected
	spread                  float64
	points                  []point
}

func main() {
	var pipes []pipe
	pipes = append(pipes, nikuradse("testdata/real/nikuradse_1933.csv")...)
	pipes = append(pipes, stantonPannell("testdata/real/stanton_pannell_1914.csv")...)
	for _, p := range pipes {
		if err := p.write(filepath.Join("testdata/real", p.folder)); err != nil {
			log.Fatal(err)
		}
	}
}

func nikuradse(file string) []pipe {
	var out []pipe
	at := map[string]int{}
	for _, r := range table(file) {
		key := r["r_over_k_nominal"] + "/" + r["D_m"]
		if _, ok := at[key]; !ok {
			at[key] = len(out)
			out = append(out, pipe{
				folder:   fmt.Sprintf("nikuradse-%s-%.0fmm", strings.ReplaceAll(r["r_over_k_nominal"], ".", "p"), 1e3*num(r["D_m"])),
				title:    fmt.Sprintf("Nikuradse 1933, sand of %s mm in a pipe of %s mm", short(1e3*num(r["k_m"])), short(1e3*num(r["D_m"]))),
				material: "sand grains", roughness: num(r["k_m"]), spread: 2})
		}
		p := &out[at[key]]
		pt := point{d: num(r["D_m"]), v: num(r["V_m_per_s"]), re: num(r["Re"]), f: num(r["f_darcy"])}
		if num(r["k_plus"]) <= 70 {
			pt.aside = "! not fully rough: k u*/nu = " + r["k_plus"]
		}
		p.points = append(p.points, pt)
	}
	var rough []pipe
	for _, p := range out {
		n := 0
		for _, x := range p.points {
			if x.aside == "" {
				n++
			}
		}
		if n >= 5 {
			rough = append(rough, p)
		}
	}
	return rough
}

func stantonPannell(file string) []pipe {
	var out []pipe
	at := map[string]int{}
	for _, r := range table(file) {
		if r["fluid"] != "Water" {
			continue
		}
		key := r["pipe"]
		if _, ok := at[key]; !ok {
			at[key] = len(out)
			out = append(out, pipe{folder: "stanton-pannell-" + key,
				title:    fmt.Sprintf("Stanton and Pannell 1914, smooth brass pipe %s of %s mm, water", key, short(1e3*num(r["D_m"]))),
				material: "drawn brass", roughness: 1.5e-6, spread: 2})
		}
		pt := point{d: num(r["D_m"]), v: num(r["V_m_per_s"]), re: num(r["Re"]), f: num(r["f_darcy_measured"])}
		if pt.re < 5000 {
			pt.aside = "! below Re 5000"
		}
		out[at[key]].points = append(out[at[key]].points, pt)
	}
	return out
}

// taps stand this many bores apart, and as far from either end.
const bores = 50

func (p pipe) write(dir string) error {
	if err := os.MkdirAll(dir, 0o755); err != nil {
		return err
	}
	d := p.points[0].d
	length := bores * d
	var rounds, readings, gauges strings.Builder
	rounds.WriteString("round,start,end,water_temperature [C],barometer [kPa],note\n")
	readings.WriteString("round,time,tap,other_tap,kind,gauge,reading,unit,gauge_height [m],depth [mm],remark\n")
	gauges.WriteString("gauge,kind,low,high,unit,accuracy [%],resolution,line,checked,note,gain_sd [%]\n")
	used := map[string]bool{}
	for i, x := range p.points {
		name := fmt.Sprintf("M%02d", i+1)
		t := temperature(x.v * x.d / x.re)
		fmt.Fprintf(&rounds, "%s,,,%.2f,,Re %.0f\n", name, t, x.re)
		q := x.v * math.Pi / 4 * x.d * x.d * 1e3 // L/s
		dp := x.f * bores * water.Density(t) * x.v * x.v / 2 / 1e3
		meter, gauge := ranged("FM", q), ranged("DG", dp)
		for _, g := range []struct {
			name, kind, unit, gain string
			v, steps               float64
		}{{meter, "flow", "L/s", "1", q, 100}, {gauge, "difference", "kPa", "", dp, 50}} {
			if !used[g.name] {
				used[g.name] = true
				hi := top(g.v)
				fmt.Fprintf(&gauges, "%s,%s,0,%s,%s,0.5,%s,water,,,%s\n", g.name, g.kind, short(hi), g.unit, short(hi/g.steps), g.gain)
			}
		}
		fmt.Fprintf(&readings, "%s,,Q,,flow,%s,%s,L/s,,,%s\n", name, meter, short(q), x.aside)
		fmt.Fprintf(&readings, "%s,,A,B,difference,%s,%s,kPa,,,%s\n", name, gauge, short(dp), x.aside)
	}
	files := map[string]string{
		"survey.csv": fmt.Sprintf("item,value,unit\ntitle,\"%s\",\nsite,laboratory,\ndatum,pipe axis,\nlatitude,51.5,deg\nwater_temperature,15,C\nfriction_law,darcy-weisbach,\n", p.title),
		"points.csv": "point,kind,elevation [m],x [m],y [m],note\nR,reservoir,0,,,head tank\nE,junction,0,,,end of the pipe\n",
		"pipes.csv": fmt.Sprintf("pipe,from,to,length [m],bore [mm],material,laid,roughness [mm],c_value,group,note,spread\nP,R,E,%s,%s,%s,,%s,,,,%s\n",
			short(3*length), short(1e3*d), p.material, short(1e3*p.roughness), short(p.spread)),
		"fittings.csv": "fitting,pipe,at [m],kind,bore [mm],loss_coefficient,note\nE1,P,0,entrance-rounded,,0.05,\n",
		"taps.csv": fmt.Sprintf("tap,pipe,at [m],point,elevation [m],elevation_sd [m],note\nA,P,%s,,0,0.001,upstream tap\nB,P,%s,,0,0.001,downstream tap\nQ,P,%s,,0,0.001,flow\n",
			short(length), short(2*length), short(0.5*length)),
		"conditions.csv": "round,item,condition,value,unit,sd\n*,R,level,2000,m,\n" + draws(len(p.points)),
		"gauges.csv":     gauges.String(), "rounds.csv": rounds.String(), "readings.csv": readings.String(),
	}
	for name, text := range files {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o644); err != nil {
			return err
		}
	}
	return nil
}

func draws(n int) string {
	var b strings.Builder
	for i := 0; i < n; i++ {
		fmt.Fprintf(&b, "M%02d,E,draw-off,,L/s,\n", i+1)
	}
	return b.String()
}

// temperature of water with the given kinematic viscosity, which falls with it.
func temperature(nu float64) float64 {
	lo, hi := 0.5, 60.0
	for i := 0; i < 60; i++ {
		if mid := (lo + hi) / 2; water.KinematicViscosity(mid) > nu {
			lo = mid
		} else {
			hi = mid
		}
	}
	return (lo + hi) / 2
}

// top is the end of the scale of a gauge for a value: 1, 2 or 5 times a power of ten.
func top(v float64) float64 {
	e := math.Pow(10, math.Floor(math.Log10(v)))
	for _, f := range []float64{1, 2, 5, 10} {
		if v <= 0.95*f*e {
			return f * e
		}
	}
	return 20 * e
}

func ranged(prefix string, v float64) string { return prefix + "-" + short(top(v)) }

func short(v float64) string { return strconv.FormatFloat(round4(v), 'f', -1, 64) }

// round4 keeps four significant figures.
func round4(v float64) float64 {
	if v == 0 {
		return 0
	}
	e := math.Pow(10, 3-math.Floor(math.Log10(math.Abs(v))))
	return math.Round(v*e) / e
}

func num(s string) float64 {
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		log.Fatal(err)
	}
	return v
}

func table(file string) []map[string]string {
	f, err := os.Open(file)
	if err != nil {
		log.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		log.Fatal(err)
	}
	var out []map[string]string
	for _, r := range rows[1:] {
		m := map[string]string{}
		for i, h := range rows[0] {
			m[h] = r[i]
		}
		out = append(out, m)
	}
	return out
}
