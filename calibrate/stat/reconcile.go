package stat

import (
	"fmt"
	"math"

	"gonum.org/v1/gonum/mat"
)

// References
//
//	[VDI2048] VDI 2048 part 1 (2000), Uncertainties of measurement during acceptance
//	          tests on energy-conversion and power plants, annex A

// Reconciled are measured values adjusted to close linear balances.
type Reconciled struct {
	X          []float64     // adjusted values
	Correction []float64     // adjusted minus measured
	Cov        *mat.SymDense // covariance of X
	Open       []float64     // A y, how far the balances were open
	Nodal      []float64     // Open over its standard deviation, standard normal without error
	ChiSquare  float64       // weighted sum of squared corrections
	Dof        int           // number of balances
	// W is each correction over its standard deviation, standard normal without gross
	// error; 0 for a value in no balance. Equal |w| cannot be told apart.
	W []float64
	// Detector tests the open balances for faults: a bias of value i has the signature
	// column i of A, a leak at balance j the unit vector j.
	Detector *Detector
}

// Reconcile adjusts y with covariance s to the balances a x = 0 by least squares:
// x = y - S A'(A S A')^-1 A y, cov x = S - S A'(A S A')^-1 A S [VDI2048]. It fails when
// the balances are not independent.
func Reconcile(y []float64, s *mat.SymDense, a *mat.Dense) (*Reconciled, error) {
	m, n := a.Dims()
	same(n, len(y))
	same(n, s.SymmetricDim())
	var as, v mat.Dense
	as.Mul(a, s)
	v.Mul(&as, a.T())
	sym := symmetric(&v)
	det, err := NewDetector(sym)
	if err != nil {
		return nil, fmt.Errorf("stat: the %d balances are not independent: %w", m, err)
	}
	r := &Reconciled{Dof: m, Detector: det, Open: make([]float64, m), Nodal: make([]float64, m),
		X: make([]float64, n), Correction: make([]float64, n), W: make([]float64, n), Cov: mat.NewSymDense(n, nil)}
	open := mat.NewVecDense(m, r.Open)
	open.MulVec(a, mat.NewVecDense(n, y))
	var lambda mat.VecDense
	if err := det.ch.SolveVecTo(&lambda, open); err != nil {
		return nil, fmt.Errorf("stat: the balances are all but dependent: %w", err)
	}
	var gain mat.Dense // (A S A')^-1 A S
	if err := det.ch.SolveTo(&gain, &as); err != nil {
		return nil, fmt.Errorf("stat: the balances are all but dependent: %w", err)
	}
	var removed mat.Dense // covariance of the corrections
	removed.Mul(as.T(), &gain)
	c := mat.NewVecDense(n, r.Correction)
	c.MulVec(as.T(), &lambda)
	for i := range y {
		r.Correction[i] = -r.Correction[i]
		r.X[i] = y[i] + r.Correction[i]
		if q := removed.At(i, i); q > unchecked*s.At(i, i) {
			r.W[i] = r.Correction[i] / math.Sqrt(q)
		}
		for j := i; j < n; j++ {
			r.Cov.SetSym(i, j, s.At(i, j)-(removed.At(i, j)+removed.At(j, i))/2)
		}
	}
	for j := range r.Open {
		r.Nodal[j] = r.Open[j] / math.Sqrt(sym.At(j, j))
	}
	r.ChiSquare = mat.Dot(open, &lambda)
	return r, nil
}

// symmetric takes the mean of a square matrix and its transpose, which differ by
// rounding only.
func symmetric(a *mat.Dense) *mat.SymDense {
	n, _ := a.Dims()
	s := mat.NewSymDense(n, nil)
	for i := range n {
		for j := i; j < n; j++ {
			s.SetSym(i, j, (a.At(i, j)+a.At(j, i))/2)
		}
	}
	return s
}
