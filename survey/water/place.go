package water

import "math"

// References:
//
//	[TR8350] NIMA TR8350.2, 3rd edition 2000, World Geodetic System 1984.
//	[ISO2533] ISO 2533:1975, Standard Atmosphere.

// StandardGravity is the conventional acceleration of free fall, m/s2 (3rd CGPM
// 1901): what the conventional water column is defined with, and not what acts
// at a site.
const StandardGravity = 9.80665

// Gravity is the normal gravity, m/s2, at a geodetic latitude in degrees (south
// negative) and a level in metres above the sea: the closed formula on the WGS 84
// ellipsoid and the second-order change with height [TR8350 eq. 4-1 and 4-3]. It
// is NaN for a latitude outside -90 to 90.
//
// Real gravity departs from it by 0.005 % as a rule and by 0.03 % in high
// mountains, since rock is not evenly dense (common practice); the level above the sea stands for
// the height above the ellipsoid, up to 100 m away (0.003 %).
func Gravity(latitudeDeg, level float64) float64 {
	const (
		equator    = 9.7803253359
		k          = 0.00193185265241
		e2         = 0.00669437999013
		axis       = 6378137.0
		flattening = 1 / 298.257223563
		m          = 0.00344978650684 // omega^2 a^2 b / GM
	)
	if !(math.Abs(latitudeDeg) <= 90) {
		return math.NaN()
	}
	s := math.Sin(latitudeDeg * math.Pi / 180)
	s2 := s * s
	onEllipsoid := equator * (1 + k*s2) / math.Sqrt(1-e2*s2)
	h := level / axis
	return onEllipsoid * (1 - 2*(1+flattening+m-2*flattening*s2)*h + 3*h*h)
}

// StandardAtmosphere is the absolute pressure of the standard atmosphere, Pa, at
// a level in metres above the sea, -2000 to 11 000 m; NaN outside [ISO2533].
// Weather moves the real one by some 3 kPa either way, 0.3 m of water, so a
// barometer is worth reading where an absolute gauge is used (common practice).
func StandardAtmosphere(level float64) float64 {
	const (
		seaLevel    = 101325.0  // Pa
		temperature = 288.15    // K
		lapse       = 0.0065    // K/m
		gasConstant = 287.05287 // J/(kg K)
		earthRadius = 6356766.0 // m
		exponent    = StandardGravity / (lapse * gasConstant)
	)
	if !(level >= -2000 && level <= 11000) {
		return math.NaN()
	}
	geopotential := earthRadius * level / (earthRadius + level)
	return seaLevel * math.Pow(1-lapse*geopotential/temperature, exponent)
}
