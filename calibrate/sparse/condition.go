package sparse

import "math"

// References
//
//	[H88] N. J. Higham, FORTRAN codes for estimating the one-norm of a real or complex
//	      matrix, with applications to condition estimation, ACM TOMS 14 (1988) 381-396.
//	[Ha]  W. W. Hager, Condition estimates, SIAM J. Sci. Stat. Comput. 5 (1984) 311-316.
//	[D89] J. W. Demmel, On floating-point errors in Cholesky, LAPACK working note 14, 1989;
//	      N. J. Higham, Accuracy and Stability of Numerical Algorithms, 2nd ed., SIAM 2002,
//	      theorem 10.6.

// Condition estimates the condition number, in the 1-norm, of A scaled to a unit
// diagonal, H = S A S with S = diag(a_ii)^(-1/2). The accuracy of the factors follows
// this number and not that of A [D89]: units of the unknowns do not move it. Of a
// solution about 16 - log10(Condition) digits can be trusted.
//
// The norm of the inverse is a lower bound [H88], seldom below a third of the true one,
// from about eight solves.
func (f *Factor) Condition() float64 {
	f.mustBeDone()
	if f.plan.n == 0 {
		return 0
	}
	return f.scaledNorm() * f.inverseNorm()
}

// scaledNorm is the 1-norm of H.
func (f *Factor) scaledNorm() float64 {
	p, sum := f.plan, f.w
	for k := range sum {
		sum[k] = 1
	}
	for k := range sum {
		first, end := p.upPtr[k], p.upPtr[k+1]
		for q, i := range p.upRow[first-p.n : end-p.n] {
			// Two roots, for the product of two diagonals may overflow.
			h := math.Abs(f.values[first+q]) / math.Sqrt(f.values[i]) / math.Sqrt(f.values[k])
			sum[i] += h
			sum[k] += h
		}
	}
	return largest(sum)
}

// inverseNorm estimates the 1-norm of the inverse of H. Besides the start of [H88] in the
// middle, which finds what is weak as a whole, it starts at the pivot that kept the least of
// its diagonal: a few rows at odds among many sound ones are lost in the middle.
func (f *Factor) inverseNorm() float64 {
	x := f.x
	n := len(x)
	for i := range x {
		x[i] = 1 / float64(n)
	}
	norm := f.climb(x)
	weakest := 0
	for k, d := range f.d {
		if d/f.values[k] < f.d[weakest]/f.values[weakest] {
			weakest = k
		}
	}
	clear(x)
	x[weakest] = 1
	norm = max(norm, f.climb(x))
	if n == 1 {
		return norm
	}
	// A vector that defeats cancellation in special matrices [H88, eq. 4.8].
	for i := range x {
		x[i] = 1 + float64(i)/float64(n-1)
		if i%2 == 1 {
			x[i] = -x[i]
		}
	}
	f.solveScaled(x)
	return max(norm, 2*absSum(x)/float64(3*n))
}

// climb goes from x to corners of the unit ball of the 1-norm along the gradient of
// |H^-1 x| and returns the most it found [H88, algorithm 4.1; Ha]. H is symmetric, so a
// gradient is one more solve.
func (f *Factor) climb(x []float64) float64 {
	sign := f.r
	f.solveScaled(x)
	norm := absSum(x)
	signs(x, sign)
	const passes = 5 // two are enough nearly always
	for range passes {
		copy(x, sign)
		f.solveScaled(x)
		j := largestAt(x)
		clear(x)
		x[j] = 1
		f.solveScaled(x)
		next := absSum(x)
		if !(next > norm) {
			break
		}
		norm = next
		if !signs(x, sign) {
			break
		}
	}
	return norm
}

// solveScaled replaces x by the solution of H y = x.
func (f *Factor) solveScaled(x []float64) {
	for i := range x {
		x[i] *= math.Sqrt(f.values[i])
	}
	f.solve(x)
	for i := range x {
		x[i] *= math.Sqrt(f.values[i])
	}
}

// signs sets sign to the signs of x and reports whether any changed.
func signs(x, sign []float64) bool {
	changed := false
	for i, v := range x {
		if s := math.Copysign(1, v); s != sign[i] {
			sign[i], changed = s, true
		}
	}
	return changed
}

func absSum(a []float64) float64 {
	s := 0.0
	for _, v := range a {
		s += math.Abs(v)
	}
	return s
}

// largestAt is where the entry of largest magnitude stands, the first on a tie.
func largestAt(a []float64) int {
	at := 0
	for i, v := range a {
		if math.Abs(v) > math.Abs(a[at]) {
			at = i
		}
	}
	return at
}
