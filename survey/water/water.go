// Package water gives what the place and the temperature of a survey decide:
// density, viscosity and vapour pressure of the water, gravity and the
// atmosphere.
//
// The water is ordinary liquid water at 0.1 MPa, free of air and salts.
//
//   - Pressure: at 1 MPa the water is denser by 0.05 % and its viscosity
//     differs by 0.11 % at most, between 0 and 60 C. Taking the density at
//     0.1 MPa for the whole column puts a head of 100 m wrong by 0.02 m, of
//     160 m by 0.06 m; the difference of two taps at like pressure hardly at all.
//   - Air: water saturated with air is lighter by less than 0.005 kg/m3
//     (Bignell 1983, by way of Tanaka et al. 2001).
//   - Salts: a drinking water with 1 g/L of dissolved solids is denser by about
//     0.08 % (common practice); sea or brine is out of range.
//
// Outside the range stated at each function the answer is NaN, never an
// extrapolation.
//
// References:
//
//	[SR6]  IAPWS SR6-08(2011), Revised Supplementary Release on Properties of
//	       Liquid Water at 0.1 MPa.
//	[IF97] IAPWS R7-97(2012), Industrial Formulation 1997, region 4.
package water

import "math"

// Celsius range of [SR6]: 253.15 to 383.15 K. Below 0 C the water is
// supercooled and above 99.6 C superheated at this pressure; the formula still
// holds there, and liquid at a few bar differs little.
const (
	lowestC  = -20
	highestC = 110
)

const kelvinAt0C = 273.15

// Valid reports whether a temperature in degrees Celsius is within the range of
// Density and of the viscosities, -20 to 110 C [SR6].
func Valid(tC float64) bool { return tC >= lowestC && tC <= highestC }

// Density is the density of liquid water at 0.1 MPa, kg/m3, at tC degrees
// Celsius (ITS-90), -20 to 110 C; NaN outside. [SR6] eq. 2 and Table 1.
func Density(tC float64) float64 {
	if !Valid(tC) {
		return math.NaN()
	}
	const (
		specificGasConstant = 461.51805 // J/(kg K)
		reducingT           = 10.0      // K
		pressure            = 0.1e6     // Pa
	)
	t := tC + kelvinAt0C
	alpha := reducingT / (593 - t)
	beta := reducingT / (t - 232)
	sum := volumeConstant
	for _, c := range volumeAlpha {
		sum += c.factor * math.Pow(alpha, c.power)
	}
	for _, c := range volumeBeta {
		sum += c.factor * math.Pow(beta, c.power)
	}
	volume := specificGasConstant * reducingT / pressure * sum // m3/kg
	return 1 / volume
}

// term is one term of a published sum: factor times a variable to a power.
type term struct{ factor, power float64 }

// [SR6] Table 1.
var (
	volumeConstant = 1.93763157e-2
	volumeAlpha    = []term{
		{6.74458446e3, 4}, {-2.22521604e5, 5}, {1.00231247e8, 7}, {-1.63552118e9, 8}, {8.32299658e9, 9},
	}
	volumeBeta = []term{
		{5.78545292e-3, 1}, {-1.53195665e-2, 2}, {3.11337859e-2, 3},
		{-4.23546241e-2, 4}, {3.38713507e-2, 5}, {-1.19946761e-2, 6},
	}
)

// DynamicViscosity is the viscosity of liquid water at 0.1 MPa, Pa s, at tC
// degrees Celsius, -20 to 110 C; NaN outside. [SR6] eq. 7 and Table 5:
// mu = 1e-6 sum a_i (T/300 K)^b_i, within 0.004 % of the full IAPWS formulation
// of 2008 between 0 and 60 C.
func DynamicViscosity(tC float64) float64 {
	if !Valid(tC) {
		return math.NaN()
	}
	reduced := (tC + kelvinAt0C) / 300
	sum := 0.0
	for _, c := range viscosity {
		sum += c.factor * math.Pow(reduced, c.power)
	}
	return 1e-6 * sum
}

// [SR6] Table 5, in uPa s.
var viscosity = []term{{280.68, -1.9}, {511.45, -7.7}, {61.131, -19.6}, {0.45903, -40}}

// KinematicViscosity is the dynamic viscosity over the density, m2/s, -20 to
// 110 C; NaN outside.
func KinematicViscosity(tC float64) float64 { return DynamicViscosity(tC) / Density(tC) }

// VapourPressure is the absolute pressure at which water at tC degrees Celsius
// boils, Pa, 0 to 373.946 C (the critical point); NaN outside. [IF97] eq. 30
// and Table 34.
func VapourPressure(tC float64) float64 {
	const criticalC = 373.946
	if !(tC >= 0 && tC <= criticalC) {
		return math.NaN()
	}
	n := &saturation
	t := tC + kelvinAt0C
	theta := t + n[8]/(t-n[9])
	a := theta*theta + n[0]*theta + n[1]
	b := n[2]*theta*theta + n[3]*theta + n[4]
	c := n[5]*theta*theta + n[6]*theta + n[7]
	root := 2 * c / (-b + math.Sqrt(b*b-4*a*c))
	return 1e6 * math.Pow(root, 4)
}

// [IF97] Table 34. From memory, held to the check values of Table 35 by the tests.
var saturation = [10]float64{
	0.11670521452767e4, -0.72421316703206e6, -0.17073846940092e2, 0.12020824702470e5, -0.32325550322333e7,
	0.14915108613530e2, -0.48232657361591e4, 0.40511340542057e6, -0.23855557567849, 0.65017534844798e3,
}
