package friction

import (
	"errors"
	"fmt"
	"math"
)

// Curve is a works curve: a shape-preserving cubic through its points [FC], with
// the slopes of [FB] (three-point ends, clipped to keep the shape).
type Curve struct{ x, y, d []float64 }

// NewCurve makes a curve through at least two points of rising flow.
func NewCurve(flow, head []float64) (Curve, error) {
	n := len(flow)
	if n != len(head) {
		return Curve{}, errors.New("flow and head differ in number")
	}
	if n < 2 {
		return Curve{}, fmt.Errorf("a works curve needs at least two points, got %d", n)
	}
	h, s := make([]float64, n-1), make([]float64, n-1)
	for i := range h {
		h[i] = flow[i+1] - flow[i]
		if !(h[i] > 0) {
			return Curve{}, fmt.Errorf("flows must rise from point to point; point %d does not", i+2)
		}
		s[i] = (head[i+1] - head[i]) / h[i]
	}
	c := Curve{x: append([]float64(nil), flow...), y: append([]float64(nil), head...), d: make([]float64, n)}
	if n == 2 {
		c.d[0], c.d[1] = s[0], s[0]
		return c, nil
	}
	for i := 1; i < n-1; i++ {
		if s[i-1]*s[i] > 0 {
			w1, w2 := 2*h[i]+h[i-1], h[i]+2*h[i-1]
			c.d[i] = (w1 + w2) / (w1/s[i-1] + w2/s[i])
		}
	}
	c.d[0] = endSlope(h[0], h[1], s[0], s[1])
	c.d[n-1] = endSlope(h[n-2], h[n-3], s[n-2], s[n-3])
	return c, nil
}

func endSlope(h0, h1, s0, s1 float64) float64 {
	d := ((2*h0+h1)*s0 - h0*s1) / (h0 + h1)
	if d*s0 <= 0 {
		return 0
	}
	if s0*s1 <= 0 && math.Abs(d) > 3*math.Abs(s0) {
		return 3 * s0
	}
	return d
}

// At is the head at flow q and the ratio of the speed to the rated one, by the
// affinity laws H = s^2 h(q/s), with the derivative by flow. Beyond the ends the
// last slope goes on; beyond then says so.
func (c Curve) At(q, speed float64) (h, dq float64, beyond bool) {
	if speed == 0 {
		return 0, 0, false
	}
	v, d, out := c.rated(q / speed)
	return speed * speed * v, speed * d, out
}

func (c Curve) rated(x float64) (y, d float64, beyond bool) {
	n := len(c.x)
	switch {
	case x < c.x[0]:
		return c.y[0] + c.d[0]*(x-c.x[0]), c.d[0], true
	case x > c.x[n-1]:
		return c.y[n-1] + c.d[n-1]*(x-c.x[n-1]), c.d[n-1], true
	}
	i := 0
	for i < n-2 && x > c.x[i+1] {
		i++
	}
	h := c.x[i+1] - c.x[i]
	t := (x - c.x[i]) / h
	h00, h10, h01, h11 := hermite(t)
	d00, d10, d01, d11 := hermiteSlope(t)
	return h00*c.y[i] + h10*h*c.d[i] + h01*c.y[i+1] + h11*h*c.d[i+1],
		(d00*c.y[i]+d01*c.y[i+1])/h + d10*c.d[i] + d11*c.d[i+1], false
}
