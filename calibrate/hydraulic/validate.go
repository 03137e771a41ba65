package hydraulic

import (
	"errors"
	"fmt"
	"math"

	"tapround/calibrate/friction"
)

// validate lists everything about a topology that cannot be computed with.
func validate(points []Point, links []Link) error {
	var all []error
	bad := func(format string, a ...any) { all = append(all, fmt.Errorf(format, a...)) }
	for _, p := range points {
		if p.Kind == Outlet && !finite(p.Elevation) {
			bad("outlet %s: its elevation is not a number", p.Name)
		}
	}
	for _, l := range links {
		switch {
		case (l.Pipe == nil) == (l.Machine == nil):
			bad("link %s: it must be either a pipe or a machine", l.Name)
			continue
		case l.From < 0 || l.To < 0 || l.From >= len(points) || l.To >= len(points):
			bad("link %s: an end is not among the %d points", l.Name, len(points))
			continue
		case l.From == l.To:
			bad("link %s: both ends are at point %s", l.Name, points[l.From].Name)
			continue
		}
		if l.Machine != nil {
			if points[l.From].Kind == Outlet {
				bad("machine %s: its suction is at the free outlet %s, which holds no water", l.Name, points[l.From].Name)
			}
			if l.Machine.Curve == (friction.Curve{}) {
				bad("machine %s: it has no works curve", l.Name)
			}
			continue
		}
		p := l.Pipe
		if !(p.Length > 0) || math.IsInf(p.Length, 0) {
			bad("pipe %s: its length is %g m, not a positive number", l.Name, p.Length)
		}
		if !(p.Bore > 0) || math.IsInf(p.Bore, 0) {
			bad("pipe %s: its bore is %g m, not a positive number", l.Name, p.Bore)
		}
		if p.Law != friction.DarcyWeisbach && p.Law != friction.HazenWilliams {
			bad("pipe %s: its friction law is not one of the two known", l.Name)
		}
		validateFittings(l, points[l.To], bad)
	}
	return errors.Join(all...)
}

func validateFittings(l Link, to Point, bad func(string, ...any)) {
	last := 0.0
	// A fitting at a pipe's very end is often written with the length rounded.
	const slack = 1e-3
	for k, f := range l.Pipe.Fittings {
		switch {
		case !(f.At >= 0 && f.At <= l.Pipe.Length+slack):
			bad("fitting %s: it stands at %g m on pipe %s, which is %g m long", f.Name, f.At, l.Name, l.Pipe.Length)
		case f.At < last:
			bad("fitting %s: the fittings of pipe %s are not in order of their chainage", f.Name, l.Name)
		}
		last = f.At
		if !(f.Bore > 0) || math.IsInf(f.Bore, 0) {
			bad("fitting %s: its bore is %g m, not a positive number", f.Name, f.Bore)
		}
		if f.ReverseK < 0 || math.IsInf(f.ReverseK, 0) {
			bad("fitting %s: its coefficient for reversed flow is %g", f.Name, f.ReverseK)
		}
		switch {
		case f.JetBore == 0:
		case !(f.JetBore > 0) || math.IsInf(f.JetBore, 0):
			bad("nozzle %s: the bore of its jet is %g m", f.Name, f.JetBore)
		case to.Kind != Outlet || k != len(l.Pipe.Fittings)-1:
			bad("nozzle %s: it makes a jet, so it must be the last fitting of a pipe that runs to an outlet", f.Name)
		}
	}
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

// sizeOf is a flow of a link's size: half a metre a second in a pipe, the middle of a
// machine's curve. bends reports a machine whose loss falls with the flow somewhere.
func sizeOf(l Link) (q float64, bends bool) {
	if l.Pipe != nil {
		const usual = 0.5 // m/s, a common velocity in mains
		return usual * l.Pipe.Area(), false
	}
	lo, hi := span(l.Machine.Curve)
	const steps = 64
	for k := 0; k <= steps; k++ {
		_, dq, _ := l.Machine.Curve.At(lo+(hi-lo)*float64(k)/steps, 1)
		if l.Machine.Turbine == (dq < 0) && dq != 0 {
			bends = true
		}
	}
	return (lo + hi) / 2, bends
}

// span is the range of flows that a works curve covers, to 1 %.
func span(c friction.Curve) (lo, hi float64) {
	const least, most = 1e-7, 1e4 // m3/s: a drip, and more than any machine
	for q := least; q < most; q *= 1.01 {
		if _, _, beyond := c.At(q, 1); beyond {
			continue
		}
		if hi == 0 && q > least {
			lo = q
		}
		hi = q
	}
	if hi == 0 {
		hi = least
	}
	return lo, hi
}
