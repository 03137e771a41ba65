package stat

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"

	"gonum.org/v1/gonum/blas"
	"gonum.org/v1/gonum/blas/blas64"
	"gonum.org/v1/gonum/mat"
)

// References
//
//	[Westfall] P. H. Westfall, S. S. Young, Resampling-Based Multiple Testing (1993)
//	[Sidak]    Z. Sidak, J. Am. Stat. Assoc. 62 (1967) 626-633

// FamilyLimit is the value that the largest of several test statistics exceeds with
// probability alpha when nothing is wrong. The statistics are jointly Gaussian with
// unit variances and correlation corr, which may be singular; sides[i] is 2 where |w_i|
// is judged and 1 where only a positive w_i counts. Independent statistics with equal
// sides have the closed form of [Sidak]; the rest is simulated with the given number of
// draws and seed, the same for the same input, with a standard error in alpha of
// sqrt(alpha (1-alpha)/draws).
func FamilyLimit(corr *mat.SymDense, sides []int, alpha float64, draws int, seed uint64) float64 {
	n := len(sides)
	if corr.SymmetricDim() != n {
		panic(fmt.Sprintf("stat: %d sides for %d statistics", n, corr.SymmetricDim()))
	}
	if n == 0 {
		return math.Inf(1)
	}
	if independent(corr, sides) {
		return SidakLimit(n, sides[0], alpha)
	}
	if draws < 1 {
		panic("stat: the family-wise limit of dependent statistics needs draws")
	}
	highest := make([]float64, 0, draws)
	simulate(corr, sides, draws, seed, func(w []float64) {
		highest = append(highest, slices.Max(w))
	})
	slices.Sort(highest)
	return highest[min(draws-1, int(math.Ceil((1-alpha)*float64(draws)))-1)]
}

// SidakLimit is the limit for n independent tests, each of one or two sides, that keeps
// the chance of any false alarm at alpha: the normal point at (1-alpha)^(1/n).
func SidakLimit(n, sides int, alpha float64) float64 {
	one := -math.Expm1(math.Log1p(-alpha) / float64(n)) // level of a single test
	return NormalQuantile(1 - one/float64(sides))
}

func independent(corr *mat.SymDense, sides []int) bool {
	for i := range sides {
		if sides[i] != sides[0] {
			return false
		}
		for j := 0; j < i; j++ {
			if corr.At(i, j) != 0 {
				return false
			}
		}
	}
	return true
}

// block is how many draws are made at once, so that the product with the root of the
// correlation is one matrix product.
const block = 512

// simulate hands over draws of the statistics, |w| where there are two sides. The slice
// is re-used.
func simulate(corr *mat.SymDense, sides []int, draws int, seed uint64, use func(w []float64)) {
	root := squareRoot(corr)
	n, k := root.Dims()
	src := rand.New(rand.NewPCG(seed, 0x9e3779b97f4a7c15))
	g := blas64.General{Rows: block, Cols: k, Stride: k, Data: make([]float64, block*k)}
	w := blas64.General{Rows: block, Cols: n, Stride: n, Data: make([]float64, block*n)}
	for done := 0; done < draws; done += block {
		for i := range g.Data {
			g.Data[i] = src.NormFloat64()
		}
		blas64.Gemm(blas.NoTrans, blas.Trans, 1, g, root.RawMatrix(), 0, w)
		for i := 0; i < min(block, draws-done); i++ {
			row := w.Data[i*n : (i+1)*n]
			for c, s := range sides {
				if s == 2 {
					row[c] = math.Abs(row[c])
				}
			}
			use(row)
		}
	}
}

// squareRoot returns L with L L' = corr, with as many columns as corr has eigenvalues
// above rounding: statistics that repeat each other make it singular.
func squareRoot(corr *mat.SymDense) *mat.Dense {
	n := corr.SymmetricDim()
	var e mat.EigenSym
	if !e.Factorize(corr, true) {
		panic("stat: the correlation has no eigenvalues; an entry is not a number")
	}
	values := e.Values(nil)
	var vectors mat.Dense
	e.VectorsTo(&vectors)
	floor := float64(n) * 0x1p-52 * math.Abs(values[n-1])
	var keep []int
	for i, v := range values {
		if v > floor {
			keep = append(keep, i)
		}
	}
	root := mat.NewDense(n, len(keep), nil)
	for c, i := range keep {
		s := math.Sqrt(values[i])
		for r := range n {
			root.Set(r, c, s*vectors.At(r, i))
		}
	}
	return root
}
