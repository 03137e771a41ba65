// Package lsq solves weighted nonlinear least squares: minimise the sum of squares
// of a vector of residuals r(x) within bounds on x, and say how well the answer is
// determined. It knows nothing of what the numbers mean.
//
// Every residual is expected whitened, that is divided by its standard deviation
// (and correlated ones by the factor of their covariance), so that a sum of squares
// is a chi-square. A prior on an unknown is one more row, (x - mean)/sd, stacked
// under the others by the caller.
//
// The method is the trust-region form of Levenberg and Marquardt's: within a radius
// in column-scaled unknowns each step minimises |r + J p|^2, by Householder QR of J
// and of [R; sqrt(lambda) D], never by normal equations, which square the condition
// number. No answer is trusted because the iteration ended: Result.Status must be
// looked at.
//
// # References
//
//	[More]      J. J. More, The Levenberg-Marquardt algorithm, in G. A. Watson (ed.),
//	            Numerical Analysis, Dundee 1977, Springer (1978) 105-116
//	[Golub]     G. H. Golub, C. F. Van Loan, Matrix Computations, 4th ed. (2013)
//	[Bates]     D. M. Bates, D. G. Watts, Technometrics 23 (1981) 179-183
//	[Kanzow]    C. Kanzow, N. Yamashita, M. Fukushima, J. Comput. Appl. Math. 172
//	            (2004) 375-397
//	[Venzon]    D. J. Venzon, S. H. Moolgavkar, Appl. Stat. 37 (1988) 87-94
package lsq

import (
	"gonum.org/v1/gonum/mat"
)

// Problem is a set of M residuals in N unknowns. M may be smaller than N; the
// answer is then not determined and the status says so.
type Problem struct {
	M, N int
	// Residuals fills r (length M) at x. An error says that this x cannot be
	// evaluated; the step that led there is shortened. So does a residual that is
	// not finite.
	Residuals func(x, r []float64) error
	// Jacobian fills j (M by N), which is zero on entry, with dr_i/dx_k at x.
	Jacobian func(x []float64, j *mat.Dense) error
	// Lower and Upper bound the unknowns; nil or an infinite entry: no bound.
	Lower, Upper []float64
}

// Settings of Solve. A field left zero has the default given with it.
type Settings struct {
	// MaxIterations counts trial steps; default 1000.
	MaxIterations int
	// StepTolerance: the Gauss-Newton step, in scaled unknowns, relative to their
	// size; default 1e-8.
	StepTolerance float64
	// GradientTolerance: the part of the residual vector that a Gauss-Newton step
	// could still take away, relative to its length (the relative offset of
	// [Bates]); default 1e-8.
	GradientTolerance float64
	// Radius is the first bound on a step, in scaled unknowns D p, where D holds the
	// column norms of J. Default: the larger of |D start| and |r(start)|.
	Radius float64
	// Negligible is a decrease of the sum of squares that does not matter. Where
	// rounding in the residuals keeps the tolerances from being met, the iteration
	// still counts as converged when the decrease in sight is below it. Default
	// 1e-6: no unknown is then off by more than a thousandth of its standard deviation.
	Negligible float64
}

// withDefaults fills in the documented defaults, field by field.
func (s Settings) withDefaults() Settings {
	if s.MaxIterations == 0 {
		s.MaxIterations = 1000
	}
	for _, d := range []struct {
		v *float64
		d float64
	}{{&s.StepTolerance, 1e-8}, {&s.GradientTolerance, 1e-8}, {&s.Negligible, 1e-6}} {
		if *d.v == 0 {
			*d.v = d.d
		}
	}
	return s
}

// Status says how an iteration ended.
type Status int

const (
	// Converged: both tolerances are met and every unknown is determined.
	Converged Status = iota
	// RankDeficient: the sum of squares is least, but the residuals do not determine
	// every unknown; Result.Undetermined lists a set that could be left out.
	RankDeficient
	// Stalled: no step lowers the sum of squares, yet the tolerances are not met.
	// Mostly the Jacobian does not belong to the residuals, or these are not smooth.
	Stalled
	// IterationLimit: MaxIterations steps were not enough.
	IterationLimit
)

// String gives the status in words.
func (s Status) String() string {
	switch s {
	case Converged:
		return "converged"
	case RankDeficient:
		return "converged, but not every unknown is determined"
	case Stalled:
		return "stalled before it converged"
	case IterationLimit:
		return "stopped at the iteration limit"
	}
	return "unknown status"
}

// OK says whether intervals may be drawn from the result: it converged and every
// unknown is determined.
func (s Status) OK() bool { return s == Converged }

// Result is the end of an iteration.
type Result struct {
	X, R []float64
	// J is the Jacobian at X.
	J          *mat.Dense
	SumSquares float64
	Status     Status
	// Iterations counts trial steps, Evaluations calls of Residuals.
	Iterations, Evaluations int
	// AtBound marks the unknowns that a bound holds; they count as fixed in Rank,
	// Condition, Covariance and Leverage.
	AtBound []bool
	// Rank of J over the unknowns not at a bound.
	Rank int
	// Undetermined lists unknowns outside a well-conditioned set of Rank columns.
	Undetermined []int
	// Condition is the ratio of the largest to the smallest singular value of J with
	// its columns scaled to unit length; +Inf when rank deficient.
	Condition float64
	// Gradient is |J'r|/(|J| |r|) over the unknowns not at a bound, in the Frobenius
	// norm of J.
	Gradient float64
	// Offset is the relative offset of [Bates]: the length of the projection of r on
	// the columns of J over the length of r.
	Offset float64

	free   []int
	scale  []float64 // column norms of J over free
	factor *factor   // QR of the scaled free columns
}
