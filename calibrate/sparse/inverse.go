package sparse

import (
	"fmt"
	"slices"
)

// References
//
//	[TFC] K. Takahashi, J. Fagan, M.-S. Chin, Formation of a sparse bus impedance matrix
//	      and its application to short circuit study, Proc. 8th PICA conference (1973).
//	[ET]  A. M. Erisman, W. F. Tinney, On computing certain elements of the inverse of a
//	      sparse matrix, Comm. ACM 18 (1975) 177-179.

// InverseDiagonal fills dst, of N values in the caller's order, with the diagonal of the
// inverse of A: the variances, when A is an information matrix. It costs a few
// factorisations, once after each Factorize, and room for as many numbers as L has.
func (f *Factor) InverseDiagonal(dst []float64) {
	f.mustBeDone()
	if len(dst) != f.plan.n {
		panic(fmt.Sprintf("sparse: %d values for a diagonal of %d", len(dst), f.plan.n))
	}
	f.invert()
	f.scatter(f.zd, dst)
}

// InverseEntry is entry (i, j) of the inverse of A, at no further cost after
// InverseDiagonal. It is known, and ok is true, on the diagonal and wherever L has an
// entry, which includes every off-diagonal place given to NewPlan; elsewhere solve with a
// unit vector.
func (f *Factor) InverseEntry(i, j int) (z float64, ok bool) {
	f.mustBeDone()
	p := f.plan
	if i < 0 || i >= p.n || j < 0 || j >= p.n {
		panic(fmt.Sprintf("sparse: entry (%d, %d) of the inverse of a matrix of %d rows", i, j, p.n))
	}
	a, b := p.pivot[i], p.pivot[j]
	if a == b {
		f.invert()
		return f.zd[a], true
	}
	q, ok := slices.BinarySearch(p.column(min(a, b)), max(a, b))
	if !ok {
		return 0, false
	}
	f.invert()
	return f.z[p.lPtr[min(a, b)]+q], true
}

// invert finds the inverse Z on the pattern of L + L', last column first. From
// Z = D^-1 L^-1 + (I - L') Z [TFC; ET, eq. 3], for i > j
//
//	Z_ij = - sum over k > j of Z_ik L_kj
//	Z_jj = 1/d_j - sum over k > j of L_kj Z_kj
//
// where k runs over column j of L. Any two rows of that column are joined in L as well,
// so every Z_ik it asks for is there.
func (f *Factor) invert() {
	if f.inverse {
		return
	}
	p := f.plan
	if f.z == nil {
		f.z, f.zd = make([]float64, len(f.l)), make([]float64, p.n)
	}
	lj, sum := f.y, f.w // L_kj is zero off the rows of column j, sum means nothing there
	for j := p.n - 1; j >= 0; j-- {
		first, end := p.lPtr[j], p.lPtr[j+1]
		rows, l, z := p.lRow[first:end], f.l[first:end], f.z[first:end]
		for q, k := range rows {
			lj[k], sum[k] = l[q], 0
		}
		for q, k := range rows {
			// Z_ik stands once for both triangles.
			first, end := p.lPtr[k], p.lPtr[k+1]
			zk, lk := f.z[first:end], l[q]
			s := f.zd[k] * lk
			for t, i := range p.lRow[first:end] {
				s += zk[t] * lj[i]
				sum[i] += zk[t] * lk
			}
			sum[k] += s
		}
		diagonal := 1 / f.d[j]
		for q, k := range rows {
			z[q] = -sum[k]
			diagonal -= l[q] * z[q]
			lj[k] = 0
		}
		f.zd[j] = diagonal
	}
	f.inverse = true
}
