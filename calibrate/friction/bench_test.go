package friction_test

import (
	"math"
	"testing"

	"tapround/calibrate/friction"
)

var sink float64

func BenchmarkColebrook(b *testing.B) {
	b.ReportAllocs()
	for i := range b.N {
		sink += friction.Colebrook(1e4+float64(i%1000)*1e3, 1e-4*float64(i%97)).F
	}
}

func BenchmarkLoss(b *testing.B) {
	for _, c := range []struct {
		name    string
		pipe    friction.Pipe
		ln      float64
		q, step float64
	}{
		{"turbulent", friction.Pipe{Length: 200, Bore: 0.3}, math.Log(2e-4), 0.01, 1e-4},
		{"join", friction.Pipe{Length: 200, Bore: 0.3}, math.Log(2e-4), 5e-4, 4e-7},
		{"laminar", friction.Pipe{Length: 200, Bore: 0.3}, math.Log(2e-4), 0, 4e-7},
		{"hazen-williams", friction.Pipe{Law: friction.HazenWilliams, Length: 200, Bore: 0.3}, math.Log(120), 0.01, 1e-4},
	} {
		b.Run(c.name, func(b *testing.B) {
			b.ReportAllocs()
			for i := range b.N {
				sink += c.pipe.Loss(c.q+c.step*float64(i%1000), c.ln, 1e-6, 9.81).H
			}
		})
	}
}

func BenchmarkVelocityHead(b *testing.B) {
	p := friction.Pipe{Length: 200, Bore: 0.3}
	b.ReportAllocs()
	for i := range b.N {
		sink += p.VelocityHead(0.01+1e-4*float64(i%1000), math.Log(2e-4), 1e-6, 9.81).V
	}
}
