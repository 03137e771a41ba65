// Package unit converts what a crew wrote into SI at the door, and SI into
// what a reader is used to at the exit. Nothing between the two knows a unit.
//
// Every factor is formed from the definition of its unit (inch 25.4 mm, pound
// 0.45359237 kg, standard gravity 9.80665 m/s2, US gallon 231 cubic inches,
// imperial gallon 4.54609 L) in exact arithmetic and rounded once.
//
// # Columns of water and mercury
//
// A pressure in m, ft, in, cm or mm is the conventional column of water: 1000
// kg/m3 under standard gravity, 9806.65 Pa a metre. It is a unit of pressure and
// not a height of the water in the pipe, whose density and gravity are others: at
// 20 C the two differ by 0.2 %, at 60 C by 1.8 %, and by up to 0.3 % for gravity.
// Columns of mercury are conventional as well
// (13595.1 kg/m3).
//
// # Names that mean two things
//
// A plain gpm or MGD is the US one; the imperial ones say so (imp gpm, imp MGD).
// Letter case is free (l/s, L/S) but for mPa and mW, which are units a thousand
// million times smaller than MPa and MW and are refused.
//
// References:
//
//	[SI]     BIPM, The International System of Units, 9th edition, 2019.
//	[SP811]  NIST Special Publication 811, 2008, Appendix B.8.
//	[JCGM100] JCGM 100:2008, Guide to the expression of uncertainty in
//	         measurement, 7.2.6.
package unit

import "slices"

// Dimension is the kind of quantity a unit measures.
type Dimension int

// The dimensions of the survey's quantities, each with the unit that is used
// inside (see SI).
const (
	Count         Dimension = iota // pure number or calendar year
	Pressure                       // Pa, as shown on the gauge
	Length                         // m
	Flow                           // m3/s, by volume
	Velocity                       // m/s
	Temperature                    // degrees Celsius
	Rotation                       // rad/s
	Fraction                       // 1
	Angle                          // degrees
	Duration                       // s
	Power                          // W
	numDimensions = iota
)

var dimensionNames = [numDimensions]string{
	"number", "pressure", "length", "flow", "velocity", "temperature",
	"rotational speed", "fraction", "angle", "duration", "power",
}

// String gives the plain word used in messages.
func (d Dimension) String() string {
	if d < 0 || d >= numDimensions {
		return "unknown dimension"
	}
	return dimensionNames[d]
}

// accepted lists the names of the units of this dimension, as they are printed,
// most usual first. Parse takes more spellings than these.
func (d Dimension) accepted() []string {
	var out []string
	for _, e := range table {
		if e.unit.Dimension == d && e.unit.Name != "" && !slices.Contains(out, e.unit.Name) {
			out = append(out, e.unit.Name)
		}
	}
	return out
}

// Unit is one unit of measure. A value v written in it is
//
//	SI = (v + Offset) * Factor
//
// in pascals, metres, cubic metres a second, metres a second, radians a second,
// seconds, watts or pure numbers; temperatures in degrees Celsius and angles in
// degrees, since the formulas that take them do. Only temperatures have an
// Offset. The zero Unit is no unit: its Factor is 0.
type Unit struct {
	Name      string // as printed
	Dimension Dimension
	Factor    float64
	Offset    float64
}

// ToSI converts a value written in u.
func (u Unit) ToSI(v float64) float64 { return (v + u.Offset) * u.Factor }

// FromSI converts an SI value into u, for printing.
func (u Unit) FromSI(si float64) float64 { return si/u.Factor - u.Offset }

// ToSIDifference converts a difference of two values written in u, an
// uncertainty or a resolution: the zero of the scale drops out.
func (u Unit) ToSIDifference(v float64) float64 { return v * u.Factor }

// FromSIDifference converts a difference, such as an uncertainty, into u.
func (u Unit) FromSIDifference(si float64) float64 { return si / u.Factor }

// String gives the name as printed.
func (u Unit) String() string { return u.Name }
