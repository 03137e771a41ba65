package unit

import (
	"math"
	"strconv"
)

// Format prints an SI value and its uncertainty in u, rounded to the
// uncertainty: "1.84 ± 0.12 mm". See WithUncertainty for what sd may be.
func (u Unit) Format(si, sd float64) string {
	s := WithUncertainty(u.FromSI(si), u.FromSIDifference(sd))
	if u.Name == "" || u.Name == "1" {
		return s
	}
	return s + " " + u.Name
}

// WithUncertainty prints v ± sd with both rounded to the same place: two
// figures of sd when its first one is 1 or 2, else one [JCGM100 7.2.6 asks for
// at most two]. sd is whatever the caller means by ±; say which beside it.
//
// Where no uncertainty is known (sd zero, negative or NaN) v is printed alone
// with four figures. An infinite sd, or a v that is no number, gives
// "not determined".
func WithUncertainty(v, sd float64) string {
	switch {
	case math.IsNaN(v) || math.IsInf(v, 0) || math.IsInf(sd, 0):
		return "not determined"
	case math.IsNaN(sd) || sd <= 0:
		return Significant(v, 4)
	}
	figures := 1
	if lead := leadingDigit(sd); lead <= 2 {
		figures = 2
	}
	place := exponent(sd) - figures + 1
	return atPlace(v, place) + " ± " + atPlace(sd, place)
}

// Significant prints v with the given number of significant figures, never in
// exponent form; trailing zeros that are figures are kept. It gives
// "not determined" for a v that is no number.
func Significant(v float64, digits int) string {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return "not determined"
	}
	if v == 0 {
		return "0"
	}
	digits = max(digits, 1)
	// Rounding may carry into the next power of ten (9.996 to 10.00): take the
	// exponent of the rounded number.
	rounded, err := strconv.ParseFloat(strconv.FormatFloat(v, 'e', digits-1, 64), 64)
	if err != nil {
		return "not determined"
	}
	return atPlace(rounded, exponent(rounded)-digits+1)
}

// exponent is the power of ten of the first figure of x, x not 0, read off the
// shortest decimal form so that 0.001 is not taken for 0.000999….
func exponent(x float64) int {
	s := strconv.FormatFloat(math.Abs(x), 'e', -1, 64)
	for i := range len(s) {
		if s[i] == 'e' {
			n, err := strconv.Atoi(s[i+1:])
			if err == nil {
				return n
			}
		}
	}
	return 0
}

func leadingDigit(x float64) int {
	return int(strconv.FormatFloat(math.Abs(x), 'e', -1, 64)[0] - '0')
}

// atPlace prints x rounded at the place 10^place.
func atPlace(x float64, place int) string {
	if place > 0 {
		p := math.Pow10(place)
		x = math.RoundToEven(x/p) * p
	}
	s := strconv.FormatFloat(x, 'f', max(0, -place), 64)
	if s[0] == '-' && isZero(s[1:]) {
		return s[1:]
	}
	return s
}

func isZero(s string) bool {
	for i := range len(s) {
		if s[i] != '0' && s[i] != '.' {
			return false
		}
	}
	return true
}
