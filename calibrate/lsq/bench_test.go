package lsq_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"testing"

	"gonum.org/v1/gonum/mat"

	"tapround/calibrate/lsq"
)

// BenchmarkFit is a fit of the size of a usual survey: readings in unknowns with a
// prior row each, mildly nonlinear.
func BenchmarkFit(b *testing.B) {
	for _, size := range [][2]int{{200, 150}, {1500, 1500}} {
		n, k := size[0], size[1]
		b.Run(fmt.Sprintf("%dx%d", n, k), func(b *testing.B) {
			r := rand.New(rand.NewPCG(1, 1))
			a, y := mat.NewDense(n, k, normals(r, n*k)), normals(r, n)
			p := lsq.Problem{M: n + k, N: k,
				Residuals: func(x, r []float64) error {
					for i := range n {
						s := 0.0
						for c, v := range a.RawRowView(i) {
							s += v * (math.Exp(0.1*x[c]) - 1) * 10
						}
						r[i] = s - 10*y[i]
					}
					copy(r[n:], x)
					return nil
				},
				Jacobian: func(x []float64, j *mat.Dense) error {
					for i := range n {
						row := j.RawRowView(i)
						for c, v := range a.RawRowView(i) {
							row[c] = v * math.Exp(0.1*x[c])
						}
					}
					for c := range k {
						j.Set(n+c, c, 1)
					}
					return nil
				},
			}
			b.ReportAllocs()
			for b.Loop() {
				res, err := lsq.Solve(p, make([]float64, k), lsq.Settings{})
				if err != nil || !res.Status.OK() {
					b.Fatal(err, res.Status)
				}
				b.ReportMetric(float64(res.Iterations), "steps")
			}
		})
	}
}
