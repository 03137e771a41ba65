package stat_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/stat"
)

// TestCollinearity is the two-column check of the index of Brun, Reichert and Kunsch.
func TestCollinearity(t *testing.T) {
	var c struct {
		Check struct {
			Columns [][]float64
			Cos     float64
			Gamma   float64
		}
		Orthogonal float64 `json:"orthogonal_gamma"`
	}
	example(t, "design_identifiability.json", "collinearity", &c)
	j := mat.DenseCopyOf(dense(c.Check.Columns).T())
	near(t, "gamma", stat.Collinearity(j), c.Check.Gamma, 1e-8)
	near(t, "gamma from the cosine", stat.Collinearity(j), 1/math.Sqrt(1-c.Check.Cos), 1e-7)
	near(t, "orthogonal", stat.Collinearity(dense([][]float64{{2, 0}, {0, 5}, {0, 0}})), c.Orthogonal, 1e-12)
	for _, dependent := range [][][]float64{{{1, 2}, {2, 4}, {3, 6}}, {{1, 0}, {1, 0}}, {{1, 2, 3}}} {
		if g := stat.Collinearity(dense(dependent)); !math.IsInf(g, 1) {
			t.Errorf("gamma of dependent columns is %g", g)
		}
	}
}

// TestNextReading: the closed forms for one new reading.
func TestNextReading(t *testing.T) {
	var e struct {
		Check struct {
			C      [][]float64
			G      []float64
			Sigma2 float64
			Gain   float64
			CPlus  [][]float64 `json:"C_plus"`
		}
	}
	example(t, "design_identifiability.json", "eig_gaussian", &e)
	c := mat.NewSymDense(2, []float64{e.Check.C[0][0], e.Check.C[0][1], e.Check.C[1][0], e.Check.C[1][1]})
	r := stat.NextReading{G: e.Check.G, Variance: e.Check.Sigma2}
	near(t, "information", r.Information(c), e.Check.Gain, 1e-10)
	after := r.After(c)
	for i, row := range e.Check.CPlus {
		for j, want := range row {
			near(t, "covariance after", after.At(i, j), want, 1e-12)
		}
	}
	for _, q := range [][]float64{{1, 0}, {0, 1}, {0.5, -2}} {
		v := mat.NewVecDense(2, q)
		near(t, "gain for a quantity", r.Gain(c, q), mat.Inner(v, c, v)-mat.Inner(v, after, v), 1e-12)
	}
	near(t, "information by determinants", r.Information(c), math.Log(mat.Det(c)/mat.Det(after))/2, 1e-12)
	// A reading that nothing moves tells nothing.
	idle := stat.NextReading{G: []float64{0, 0}, Variance: 1}
	if idle.Information(c) != 0 || !mat.Equal(idle.After(c), c) {
		t.Error("a reading without sensitivity changes the covariance")
	}
}

// TestEntropyDrop: the limits that define it, and a two-point case by plain
// integration.
func TestEntropyDrop(t *testing.T) {
	alike := []stat.Outlook{{Probability: 0.3, Mean: 2, Variance: 1}, {Probability: 0.7, Mean: 2, Variance: 1}}
	near(t, "all predict the same", stat.EntropyDrop(alike), 0, 1e-12)
	apart := []stat.Outlook{{Probability: 0.3, Mean: -50, Variance: 1}, {Probability: 0.5, Mean: 50, Variance: 4}, {Probability: 0.2, Mean: 0, Variance: 1}}
	h := -0.3*math.Log(0.3) - 0.5*math.Log(0.5) - 0.2*math.Log(0.2)
	near(t, "sure to settle", stat.EntropyDrop(apart), h, 1e-12)
	near(t, "separation", stat.Separation(apart[0], apart[1]), 2000, 1e-12)

	two := []stat.Outlook{{Probability: 0.5, Mean: -1, Variance: 1}, {Probability: 0.5, Mean: 1, Variance: 1}}
	sum, step := 0.0, 1e-3
	for y := -12.0; y <= 12; y += step {
		a, b := math.Exp(-(y+1)*(y+1)/2), math.Exp(-(y-1)*(y-1)/2)
		p := a / (a + b)
		entropy := 0.0
		for _, q := range []float64{p, 1 - p} {
			if q > 0 {
				entropy -= q * math.Log(q)
			}
		}
		sum += step * (a + b) / 2 / math.Sqrt(2*math.Pi) * entropy
	}
	// 40 nodes carry ten digits of this integral, the sum here twelve.
	near(t, "two explanations", stat.EntropyDrop(two), math.Ln2-sum, 1e-9)
}

// TestMixUp: the chance to take the wrong of two faults, its inverse, and a simulation.
func TestMixUp(t *testing.T) {
	var m struct {
		Check []struct{ T, Rho, P float64 }
	}
	example(t, "design_identifiability.json", "misidentification", &m)
	for _, c := range m.Check {
		near(t, "mix-up", stat.MixUp(c.T, c.Rho), c.P, 6e-7)
		near(t, "mix-up", stat.MixUp(c.T, -c.Rho), c.P, 6e-7)
	}
	for _, rho := range []float64{0, 0.5, 0.9, 0.99} {
		near(t, "noncentrality for 5 %", stat.SeparatingT(0.05, rho)*(1-rho), 5.411087, 1e-6)
		near(t, "back", stat.MixUp(stat.SeparatingT(0.05, rho), rho), 0.05, 1e-12)
	}
	near(t, "same signature", stat.MixUp(1000, 1), 0.5, 1e-15)

	// Statistics of a true fault of size 3 and of a rival at cosine 0.5.
	const rho, size, draws = 0.5, 3.0, 200000
	r := rand.New(rand.NewPCG(3, 3))
	wrong := 0
	for range draws {
		a, b := r.NormFloat64(), r.NormFloat64()
		own := size + a
		rival := rho*own + math.Sqrt(1-rho*rho)*b
		if math.Abs(rival) > math.Abs(own) {
			wrong++
		}
	}
	// Five standard errors of the simulation, and 0.001 for rivals of the other sign,
	// which the formula leaves out.
	p := stat.MixUp(size*size, rho)
	near(t, "simulated", float64(wrong)/draws, p, 5*math.Sqrt(p*(1-p)/draws)+0.001)
}

// TestEvidence: the Bayes factor of a shift of known spread against none has a closed
// form; a wider spread turns the same observation against the shift.
func TestEvidence(t *testing.T) {
	var e struct {
		Check struct{ Y, Tau2, LnBF float64 }
	}
	example(t, "design_identifiability.json", "evidence_gaussian", &e)
	// The wider spreads are those of the note in the file.
	for _, c := range []struct{ tau2, want float64 }{{e.Check.Tau2, e.Check.LnBF}, {900, 1.093253}, {90000, -1.203838}} {
		y := e.Check.Y
		// y ~ N(theta, 1), theta ~ N(0, tau2): rows y - theta and theta/tau.
		shift := stat.LogEvidence(y*y/(1+c.tau2), math.Log(c.tau2)/2, math.Log(1+1/c.tau2), 2, 1)
		none := stat.LogEvidence(y*y, 0, 0, 1, 0)
		near(t, "ln Bayes factor", shift-none, c.want, 1e-6)
		p := stat.Posterior([]float64{none, shift, math.Inf(-1)}, []float64{0.9, 0.1, 0})
		near(t, "posterior odds", math.Log(p[1]/p[0]), c.want+math.Log(0.1/0.9), 1e-6)
		near(t, "sum of probabilities", p[0]+p[1]+p[2], 1, 1e-12)
	}
	// Evidences far below the smallest double keep their ratio.
	p := stat.Posterior([]float64{-5000, -5001}, []float64{0.5, 0.5})
	near(t, "far out", p[0]/p[1], math.E, 1e-9)
}
