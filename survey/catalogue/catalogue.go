// Package catalogue holds what a sound pipe or fitting is expected to be when
// the survey does not say: absolute roughness by material and age, the
// Hazen-Williams coefficient that goes with it, loss coefficients by kind, and
// how far open published tables say a valve with a given coefficient stands.
//
// Every value carries its printed source, and the range over the tables that
// were compared. The ranges are wide and are part of the data: published
// coefficients of one fitting differ by 30 to 50 % as a rule, and by a factor of
// six for an elbow. A value from here stands for "sound, nothing known"; what
// the survey states always comes first.
//
// # Spread
//
// Entry.Spread reads the published range as the 95 % interval of a log-normal:
// exp(ln(High/Low) / (2*1.96)), and never below 1.05, the narrowest range the
// Hydraulic Institute prints for any fitting (±10 %).
//
// References, cited by these keys in the sources:
//
//	White     White, Fluid Mechanics, Table 6.1 and eq. 6.80, 6.81.
//	HI        Hydraulic Institute, Engineering Data Book, section III.
//	HR        HR Wallingford roughness values (good, normal, poor), as
//	          reprinted in a design manual.
//	Sanks     Sanks (ed.), Pumping Station Design, Tables B-6 and B-7.
//	Munson    Munson, Young and Okiishi, Fundamentals of Fluid Mechanics,
//	          Table 8.2.
//	Perry     Perry, Chemical Engineers' Handbook, Table 6-4.
//	Crane     Crane, Technical Paper 410, A-26 to A-29.
//	Handbook  Water supply handbook, Table 6-4 (loss coefficients).
//	Weisbach  Weisbach 1855, as reported by Unwin, Hydraulics, Encyclopaedia
//	          Britannica 11th ed. 1911.
//	Lamont    Lamont 1981, J. AWWA 73(5):274 (from memory).
//	Colebrook-White 1937, J. Inst. Civ. Eng. 7:99 (from memory).
package catalogue

import "math"

// Entry is one expected value of a sound item, in SI.
type Entry struct {
	Value  float64
	Spread float64 // factor at one standard deviation for a sound item
	Low    float64 // least and
	High   float64 // greatest published value for such an item
	Source string
	Note   string // what the value takes for granted, if anything
}

// withSpread fills Spread from the published range.
func (e Entry) withSpread() Entry {
	const narrowest = 1.05
	e.Spread = narrowest
	if e.Low > 0 {
		e.Spread = math.Max(narrowest, math.Exp(math.Log(e.High/e.Low)/(2*1.96)))
	}
	return e
}
