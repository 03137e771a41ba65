package calibrate

import "math"

// Priors are the scatter of sound items: what is believed before a reading is
// taken. All are editable; the report prints those in force.
type Priors struct {
	LnRoughness   float64 // SD of ln k of a sound pipe
	LnC           float64 // SD of ln C
	LnK           float64 // SD of ln K of a sound fitting
	LnKKind       float64 // part of LnK shared by all fittings of a kind taken from the built-in table
	LnGroup       float64 // SD of a group's common ln factor where expected values are as-new
	HeadFactor    float64 // SD of a machine's head factor
	ProfileFactor float64 // SD of u/V at a pitot tap, fraction
	// OutletCoefficient is the SD of the coefficient of an outlet whose jet is
	// measured, fraction: 3 % unless checked on site.
	OutletCoefficient float64
	// FrictionLaw and LnBore are not unknowns: they widen the interval of a
	// roughness that is reported (as lost bore and rough wall are one curve).
	FrictionLaw float64 // SD of ln f
	LnBore      float64 // SD of ln D
	// OpenLevel is the SD of a level that is to be estimated, m. It only
	// keeps the problem determined.
	OpenLevel float64
}

// DefaultPriors are those of the design: factors at one standard deviation of 1.5
// for roughness, 1.07 for C and 1.3 for K; published scatter is in
// testdata/checks/statistics/priors.json. The shares of the kind and the
// profile's 3 % are judgement, the latter from measured centre ratios up to 6 %
// off the logarithmic law (Stanton and Pannell 1914, Senecal 1951).
func DefaultPriors() Priors {
	return Priors{
		LnRoughness: math.Log(1.5), LnC: math.Log(1.07), LnK: math.Log(1.3), LnKKind: 0.15,
		LnGroup: 0.5, HeadFactor: 0.015, ProfileFactor: 0.03, OutletCoefficient: 0.03,
		FrictionLaw: 0.05, LnBore: 0.01, OpenLevel: 100,
	}
}

// minK keeps ln K defined for a fitting whose expected coefficient is written as
// zero: a thousandth of a velocity head is below what any gauge can see.
const minK = 1e-3
