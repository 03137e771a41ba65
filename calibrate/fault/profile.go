package fault

import (
	"math"

	"tapround/calibrate"
)

// chi95 is the 95 % point of chi-square with one degree of freedom.
const chi95 = 3.841

// interval is the 95 % interval of an accepted cause's whole theta (its item's departure
// from the expected value) by the profile of the likelihood: the values for which the
// least Phi stays within 3.841 of the best (Raue et al. 2009). ln K and ln roughness are
// strongly curved, so the linear interval misleads where the readings are few. An end that
// the readings leave open is infinite. ok is false where a refit failed.
func (d *Diagnosis) interval(a *Accepted) (low, high float64, ok bool) {
	centre, sd := d.Final.ItemTheta(a.place)
	if sd == 0 {
		return 0, 0, false
	}
	best, ok := d.profileAt(a, centre)
	if !ok {
		return 0, 0, false
	}
	end := func(side float64) (float64, bool) {
		inside, outside := centre, centre+side*1.5*1.96*sd
		// Out until the readings object, or until no value that passes water is left.
		for n := 0; ; n++ {
			if math.Abs(outside) > 8 || n > 6 {
				return math.Inf(int(side)), true
			}
			phi, ok := d.profileAt(a, outside)
			if !ok {
				return 0, false
			}
			if phi < best {
				best = phi // the linear centre was not quite the bottom
			}
			if phi-best > chi95 {
				break
			}
			inside, outside = outside, outside+(outside-centre)
		}
		for n := 0; n < 8; n++ {
			mid := (inside + outside) / 2
			phi, ok := d.profileAt(a, mid)
			if !ok {
				return 0, false
			}
			if phi-best > chi95 {
				outside = mid
			} else {
				inside = mid
			}
		}
		return (inside + outside) / 2, true
	}
	low, ok1 := end(-1)
	high, ok2 := end(1)
	return low, high, ok1 && ok2
}

// profileAt is the least Phi with the item's whole theta held at a value: the cause is
// pinned there and the item's own scatter at nought, since only their sum has a meaning.
func (d *Diagnosis) profileAt(a *Accepted, theta float64) (float64, bool) {
	f := d.Final
	pin := map[int]float64{a.place: theta}
	if own := d.Model.UnknownOf(a.Unknown.Kind, a.Item, a.Unknown.Quantity); own >= 0 {
		pin[own] = 0
	}
	g, err := d.Model.Refit(f.Unknowns[len(d.Model.Unknowns):], calibrate.Options{Start: f.U, FreeCauses: true, Pin: pin})
	if err != nil || !g.Converged {
		return 0, false
	}
	return g.Phi - g.PriorShare(a.place), true // the pinned cause's own prior row is no reading
}

// better gives the ends of the 95 % interval of an item's ln k or ln K, whose fitted value
// is ln and expected one expected: those of the profile where they lie off the linear ones
// by more than a tenth of the width, else the linear ones. A class needs none: its item's
// own quantity has no meaning.
func (d *Diagnosis) better(a *Accepted, ln, expected float64) (low, high float64) {
	_, sd := d.Final.ItemTheta(a.place)
	low, high = ln-1.96*sd, ln+1.96*sd
	if len(a.Class) > 0 {
		return low, high
	}
	lo, hi, ok := d.interval(a)
	if !ok {
		return low, high
	}
	width := high - low
	if math.Abs(lo+expected-low) > 0.1*width {
		low = lo + expected
	}
	if math.Abs(hi+expected-high) > 0.1*width {
		high = hi + expected
	}
	return low, high
}
