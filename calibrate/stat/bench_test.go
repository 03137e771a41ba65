package stat_test

import (
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/stat"
)

// BenchmarkFamilyLimit is the size of a large survey: 300 causes seen through 120
// readings.
func BenchmarkFamilyLimit(b *testing.B) {
	r := rand.New(rand.NewPCG(1, 1))
	c := mat.NewSymDense(300, nil)
	g := randomDense(r, 300, 120)
	for i := range 300 {
		row := g.RawRowView(i)
		norm := mat.Norm(mat.NewVecDense(120, row), 2)
		for k := range row {
			row[k] /= norm
		}
	}
	c.SymOuterK(1, g)
	for b.Loop() {
		stat.FamilyLimit(c, sidesOf(300, 2), 0.05, 20000, 1)
	}
}
