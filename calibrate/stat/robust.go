package stat

import (
	"fmt"
	"math"
	"slices"

	"gonum.org/v1/gonum/mat"
	gstat "gonum.org/v1/gonum/stat"

	"tapround/calibrate/lsq"
)

// References
//
//	[Huber]  P. J. Huber, Ann. Math. Stat. 35 (1964) 73-101; Robust Statistics (1981)
//	[Beaton] A. E. Beaton, J. W. Tukey, Technometrics 16 (1974) 147-185

// Tuning constants that cost 5 % of efficiency when the errors are normal after all.
const (
	HuberTuning    = 1.345
	BisquareTuning = 4.685
)

// MADFactor makes the median of absolute residuals an estimate of the standard
// deviation of normal errors: 1/z_0.75.
const MADFactor = 1.482602218505602

// Loss says how a residual u, in standard deviations, counts: its weight, which is
// psi(u)/u, and the slope of psi.
type Loss struct {
	Weight, Slope func(u float64) float64
}

// Huber weighs 1 up to k and k/|u| beyond [Huber].
func Huber(k float64) Loss {
	return Loss{
		Weight: func(u float64) float64 { return math.Min(1, k/math.Abs(u)) },
		Slope: func(u float64) float64 {
			if math.Abs(u) > k {
				return 0
			}
			return 1
		},
	}
}

// Bisquare weighs (1 - (u/c)^2)^2 within c and 0 beyond [Beaton]. Its minimum is not
// unique: start it from a Huber fit.
func Bisquare(c float64) Loss {
	inside := func(u float64) float64 { return math.Max(0, 1-u*u/(c*c)) }
	return Loss{
		Weight: func(u float64) float64 { return inside(u) * inside(u) },
		Slope:  func(u float64) float64 { return inside(u) * (1 - 5*u*u/(c*c)) },
	}
}

// RobustSettings of Robust.
type RobustSettings struct {
	// Factor estimates the scale as Factor times the median of the absolute residuals
	// about zero, anew in each step; zero keeps it at one, the stated deviations. With
	// the few redundant readings of a survey keep it.
	Factor float64
	Start  []float64 // nil: least squares
}

// RobustFit is the end of the iteration.
type RobustFit struct {
	X         []float64
	Scale     float64
	Weights   []float64
	Steps     int
	Converged bool
	loss      Loss
	residual  []float64 // over sd
	design    *mat.Dense
}

// Robust fits y = x b with standard deviations sd by iteratively reweighted least
// squares until no coefficient's contribution moves by more than 1e-12 of the residual
// scale. A failure of the weighted problem (too few rows keep a weight) is an error.
func Robust(x *mat.Dense, y, sd []float64, loss Loss, s RobustSettings) (*RobustFit, error) {
	m, n := x.Dims()
	same(m, len(y))
	same(m, len(sd))
	f := &RobustFit{Scale: 1, Weights: make([]float64, m), loss: loss, residual: make([]float64, m), design: mat.NewDense(m, n, nil)}
	z := make([]float64, m)
	for i := range m {
		z[i] = y[i] / sd[i]
		f.Weights[i] = 1
		for k := range n {
			f.design.Set(i, k, x.At(i, k)/sd[i])
		}
	}
	f.X = slices.Clone(s.Start)
	for f.Steps = 0; f.Steps < 2000; f.Steps++ {
		before := f.X
		if f.Steps > 0 || f.X == nil {
			res, err := lsq.Linear(f.design, z, f.Weights)
			if err != nil {
				return nil, err
			}
			if !res.Status.OK() {
				return nil, fmt.Errorf("stat: robust fit: the rows that keep a weight do not determine coefficients %v", res.Undetermined)
			}
			f.X = res.X
		}
		f.judge(z, s.Factor)
		for i, r := range f.residual {
			f.Weights[i] = loss.Weight(r / f.Scale)
		}
		if before != nil && f.Steps > 0 && f.moved(before) < 1e-12 {
			f.Converged = true
			return f, nil
		}
	}
	return f, nil
}

// SD holds the standard deviations of X: those of least squares times
// K sqrt(sum psi^2/(m-n))/mean(psi'), with K = 1 + n var(psi')/(m mean(psi')^2) for
// small samples [Huber, 1981, section 7.6]. They hold for errors that are
// alike and symmetric, not for readings of high leverage.
func (f *RobustFit) SD() ([]float64, error) {
	m, n := f.design.Dims()
	res, err := lsq.Linear(f.design, make([]float64, m), nil)
	if err != nil {
		return nil, err
	}
	sd, err := res.SD()
	if err != nil {
		return nil, err
	}
	sum := 0.0
	slopes := make([]float64, m)
	for i, r := range f.residual {
		slopes[i] = f.loss.Slope(r / f.Scale)
		sum += r * f.Weights[i] * r * f.Weights[i]
	}
	mean, spread := gstat.MeanVariance(slopes, nil)
	k := 1 + float64(n)*spread/(float64(m)*mean*mean)
	for i := range sd {
		sd[i] *= k * math.Sqrt(sum/float64(m-n)) / mean
	}
	return sd, nil
}

// judge forms the residuals and, where wanted, the scale.
func (f *RobustFit) judge(z []float64, factor float64) {
	v := mat.NewVecDense(len(z), f.residual)
	v.MulVec(f.design, mat.NewVecDense(len(f.X), f.X))
	for i := range z {
		f.residual[i] -= z[i]
	}
	if factor > 0 {
		f.Scale = factor * medianAbs(f.residual)
	}
}

// moved is the largest change of a fitted value since before, over the scale.
func (f *RobustFit) moved(before []float64) float64 {
	m, n := f.design.Dims()
	worst := 0.0
	for i := range m {
		d := 0.0
		for k := range n {
			d += f.design.At(i, k) * (f.X[k] - before[k])
		}
		worst = math.Max(worst, math.Abs(d))
	}
	return worst / f.Scale
}

func medianAbs(v []float64) float64 {
	a := make([]float64, len(v))
	for i, x := range v {
		a[i] = math.Abs(x)
	}
	slices.Sort(a)
	n := len(a)
	return (a[(n-1)/2] + a[n/2]) / 2
}
