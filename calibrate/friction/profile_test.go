package friction_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/integrate/quad"

	"tapround/calibrate/friction"
)

// turbulentAt is a pipe with a flow at Re 1e7 and the roughness that gives friction
// factor f.
func turbulentAt(t *testing.T, f float64) (p friction.Pipe, q, lnK float64) {
	t.Helper()
	p = friction.Pipe{Length: 100, Bore: 0.4}
	q = 1e7 * water / p.Bore * p.Area()
	lnK = math.Log(p.Bore) + bisect(t, func(x float64) float64 { return friction.DarcyFactor(1e7, math.Exp(x)).F - f }, -30, -0.1)
	return p, q, lnK
}

var centre = math.NaN()

// mean integrates a power of u/V over the section: 2 u^n (1 - y) dy, y from 0 to 1.
func mean(p friction.Pipe, q, ln, n float64) float64 {
	return quad.Fixed(func(y float64) float64 {
		// y = z^4 puts points at the wall, where the logarithm is steep.
		z := y
		y = z * z * z * z
		u := p.ProfileRatio(q, ln, water, g, y*p.Bore/2).V
		return 2 * math.Pow(u, n) * (1 - y) * 4 * z * z * z
	}, 0, 1, 400, quad.Legendre{}, 0)
}

// The moments of the profile, integrated: the mean is V, the mean cube is alpha and the
// mean square Boussinesq's beta. The strip of 0.1 to 0.3 % of the radius in which the
// profile is held moves them by 3e-4 at f 0.03 and 1.2e-3 at f 0.06.
func TestProfileMoments(t *testing.T) {
	const strip = 1.3e-3
	for _, r := range table(t, "checks/friction/profile_checks.csv", 22) {
		var f float64
		if _, err := fmt.Sscanf(r["profile"], "log law kappa 0.40, f=%f", &f); err != nil {
			continue
		}
		p, q, lnK := turbulentAt(t, f)
		want := r.num(t, "value")
		switch {
		case strings.HasPrefix(r["id"], "ALPHA-LOG"):
			// 2.93 and 1.55 are rounded: 4e-5 at f 0.06; the table has five decimals.
			if a := p.Alpha(q, lnK, water, g).V; math.Abs(a-want) > 8e-5 {
				t.Errorf("%s: alpha %.6f, want %g", r["id"], a, want)
			}
			if m := mean(p, q, lnK, 3); math.Abs(m-want) > strip {
				t.Errorf("%s: mean cube of the profile %.6f, want %g", r["id"], m, want)
			}
			if m := mean(p, q, lnK, 1); math.Abs(m-1) > strip {
				t.Errorf("%s: mean of the profile %.6f, want 1", r["id"], m)
			}
		case strings.HasPrefix(r["id"], "BETA-LOG"):
			if m := mean(p, q, lnK, 2); math.Abs(m-want) > strip {
				t.Errorf("%s: mean square of the profile %.6f, want %g", r["id"], m, want)
			}
		case strings.HasPrefix(r["id"], "VMAX-LOG"):
			// Five decimals.
			if v := 1 / p.ProfileRatio(q, lnK, water, g, centre).V; math.Abs(v-want) > 1e-5 {
				t.Errorf("%s: mean over centre %.6f, want %g", r["id"], v, want)
			}
		default:
			t.Errorf("%s is not compared", r["id"])
		}
	}
	// Laminar: parabola, exactly.
	p := friction.Pipe{Length: 1, Bore: 0.4}
	q := 1000 * water / p.Bore * p.Area()
	for n, want := range map[float64]float64{1: 1, 2: 4. / 3, 3: 2} {
		if m := mean(p, q, -9, n); math.Abs(m-want) > 1e-5 { // the held strip again
			t.Errorf("laminar: mean of the profile to the power %g is %g, want %g", n, m, want)
		}
	}
}

// Published ratios, kinetic-energy coefficients and the radius of mean velocity.
func TestPublishedProfiles(t *testing.T) {
	compared := 0
	for _, r := range table(t, "checks/friction/profile_factors.csv", 22) {
		at := r["profile"] + ", " + r["quantity"]
		value := r["value_computed"]
		if value == "" {
			value = r["value_published"]
		}
		want := row{"v": value}.num(t, "v")
		head, _, _ := strings.Cut(r["quantity"], ", f = ")
		if r["profile"] == "laminar" {
			p := friction.Pipe{Length: 1, Bore: 0.02}
			q := -500 * water / p.Bore * p.Area()
			switch {
			case head == "alpha":
				within(t, at, p.Alpha(q, -9, water, g).V, want, 0)
			case strings.HasPrefix(head, "mean / centreline"):
				within(t, at, 1/p.ProfileRatio(q, -9, water, g, centre).V, want, 0)
			case strings.HasPrefix(head, "radius"):
				within(t, at, p.ProfileRatio(q, -9, water, g, p.Bore/2*(1-want)).V, 1, 2e-6) // six decimals
			default:
				t.Errorf("%s is not compared", at)
			}
			compared++
			continue
		}
		switch {
		case strings.HasPrefix(r["quantity"], "radius where u = mean"):
			p, q, lnK := turbulentAt(t, 0.025)
			within(t, at, p.ProfileRatio(q, lnK, water, g, p.Bore/2*(1-want)).V, 1, 1e-6) // six decimals
		case r["profile"] == "log law":
			var f float64
			if _, err := fmt.Sscanf(r["quantity"][len(head):], ", f = %f", &f); err != nil {
				t.Fatal(err)
			}
			p, q, lnK := turbulentAt(t, f)
			switch {
			case strings.Contains(head, "White 1/(1+1.3 sqrt f)"):
				// 1.326 here for his 1.3: 0.5 % at f 0.05.
				within(t, at, 1/p.ProfileRatio(q, lnK, water, g, centre).V, want, 0.006)
			case strings.Contains(head, "Prandtl defect 4.07"):
				// His measured defect holds a wake, 4.07 for 3.75 friction velocities.
				within(t, at, 1/p.ProfileRatio(q, lnK, water, g, centre).V, want, 0.025)
			case strings.Contains(head, "1 + 2.7 f"):
				within(t, at, p.Alpha(q, lnK, water, g).V, want, 0.01)
			default:
				t.Errorf("%s is not compared", at)
			}
		case r["profile"] == "measured":
			continue // the rows themselves are in TestCentreVelocity
		default:
			t.Errorf("%s is not compared", at)
		}
		compared++
	}
	if compared < 19 {
		t.Errorf("%d rows compared", compared)
	}
	for _, r := range table(t, "checks/friction/profile_checks.csv", 22) {
		switch r["id"] {
		case "ALPHA-LAM":
			p := friction.Pipe{Length: 1, Bore: 0.02}
			within(t, r["id"], p.Alpha(1e-9, -9, water, g).V, r.num(t, "value"), 0)
		case "PF-WHF":
			// Williams, Hubbell and Fenkell's cast-iron mains: f 0.02 or so.
			p, q, lnK := turbulentAt(t, 0.02)
			within(t, r["id"], 1/p.ProfileRatio(q, lnK, water, g, centre).V, r.num(t, "value"), 0.025)
		case "ALPHA-TURB-LOW", "PF-TRADE": // ranges met in mains: 0.012 to 0.03
			var lo, hi float64
			if _, err := fmt.Sscanf(r["value"], "%f to %f", &lo, &hi); err != nil {
				t.Fatal(err)
			}
			for _, f := range []float64{0.012, 0.02, 0.03} {
				p, q, lnK := turbulentAt(t, f)
				v := p.Alpha(q, lnK, water, g).V
				if r["id"] == "PF-TRADE" {
					v = 1 / p.ProfileRatio(q, lnK, water, g, centre).V
				}
				if v < lo-0.02 || v > hi+0.02 {
					t.Errorf("%s: %.3f at f %g, usual range %s", r["id"], v, f, r["value"])
				}
			}
		}
	}
}

// Measured mean over centre velocity in smooth pipes, Stanton and Pannell 1914 and
// Senecal 1951. The log law without a wake puts the centre too low throughout: by 4 % at
// Re 1e4 to 7e4, by 5 to 7 % just over Re 4,000. That is the law's known weakness, and
// is bounded here. Laminar flow holds to the scatter of the readings; in the transition
// nothing does, and the worst is printed.
func TestCentreVelocity(t *testing.T) {
	for _, c := range []struct {
		name, file, re, ratio string
		least                 [4]int
	}{
		{"Stanton and Pannell", "velocity_ratio_stanton_pannell_1914.csv", "Re_approx_computed", "mean_over_axial", [4]int{11, 11, 12, 30}},
		{"Senecal", "velocity_ratio_senecal_1951.csv", "Re", "mean_over_centreline_measured", [4]int{27, 34, 16, 0}},
	} {
		var laminar, join, low, turbulent worst
		for _, r := range table(t, "checks/friction/"+c.file, 60) {
			if r[c.ratio] == "" {
				continue
			}
			if r["row"] == "49" {
				continue // both velocities ten times too low: its ratio is that of Re 9,800
			}
			// Smooth: of the wall only the Reynolds number counts.
			re := r.num(t, c.re)
			p := friction.Pipe{Length: 1, Bore: 0.01}
			q := re * water / p.Bore * p.Area()
			dev := r.num(t, c.ratio)*p.ProfileRatio(q, math.Inf(-1), water, g, centre).V - 1
			at := fmt.Sprintf("Re %.0f, row %s", re, r["row"])
			switch {
			case re < 1900:
				laminar.add(dev, at)
			case re < friction.ReTurbulent:
				join.add(dev, at)
			case re < 1e4:
				low.add(dev, at)
			default:
				turbulent.add(dev, at)
			}
		}
		laminar.hold(t, c.name+", laminar", c.least[0], 0.04, 0.02)
		join.hold(t, c.name+", transition", c.least[1], 0.22, 0.08)
		low.hold(t, c.name+", Re 4,000 to 10,000", c.least[2], 0.07, 0.06)
		if c.least[3] > 0 {
			turbulent.hold(t, c.name+", over Re 10,000", c.least[3], 0.045, 0.04)
		}
	}
}
