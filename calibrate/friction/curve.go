package friction

import (
	"errors"
	"fmt"
	"math"

	"gonum.org/v1/gonum/interp"
)

// Curve is a works curve: a shape-preserving cubic through its points [FC], with the
// slopes of [FB] and three-point slopes at the ends, limited to keep the shape.
// Between two points it neither overshoots nor turns.
type Curve struct {
	cubic       *interp.FritschButland
	first, last end
}

// end is an end point with the slope there.
type end struct{ x, y, slope float64 }

// NewCurve makes a curve through at least two points of rising flow, m3/s and m.
func NewCurve(flow, head []float64) (Curve, error) {
	n := len(flow)
	if n != len(head) {
		return Curve{}, fmt.Errorf("a works curve needs a head for every flow, got %d flows and %d heads", n, len(head))
	}
	if n < 2 {
		return Curve{}, fmt.Errorf("a works curve needs at least two points, got %d", n)
	}
	var bad []error
	for i := range flow {
		if !finite(flow[i]) || !finite(head[i]) {
			bad = append(bad, fmt.Errorf("point %d (%v m3/s, %v m) has no number", i+1, flow[i], head[i]))
		} else if i > 0 && flow[i] <= flow[i-1] {
			bad = append(bad, fmt.Errorf("flows must rise from point to point; point %d (%v m3/s) does not", i+1, flow[i]))
		}
	}
	if len(bad) > 0 {
		return Curve{}, errors.Join(bad...)
	}
	cubic := new(interp.FritschButland)
	if err := cubic.Fit(flow, head); err != nil {
		return Curve{}, err
	}
	at := func(i int) end { return end{flow[i], head[i], cubic.PredictDerivative(flow[i])} }
	return Curve{cubic: cubic, first: at(0), last: at(n - 1)}, nil
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

// At is the head at flow q and the ratio of the speed to the rated one (positive, or 0
// for a machine at rest: no head), by the affinity laws H = s^2 h(q/s), with the
// derivative by flow. Beyond the ends the end slope goes on, and beyond says so.
//
// A curve of efficiencies is read at the rated speed and the flow q/s: efficiency
// stays with the point of the curve.
func (c Curve) At(q, speed float64) (h, dq float64, beyond bool) {
	if speed == 0 {
		return 0, 0, q != 0
	}
	v, d, out := c.rated(q / speed)
	return speed * speed * v, speed * d, out
}

func (c Curve) rated(x float64) (y, slope float64, beyond bool) {
	switch {
	case x < c.first.x:
		return c.first.on(x), c.first.slope, true
	case x > c.last.x:
		return c.last.on(x), c.last.slope, true
	}
	return c.cubic.Predict(x), c.cubic.PredictDerivative(x), false
}

func (e end) on(x float64) float64 { return e.y + e.slope*(x-e.x) }
