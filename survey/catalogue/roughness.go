package catalogue

import (
	"fmt"
	"math"

	"tapround/survey/unit"
	"tapround/survey/water"
)

// wall is one line of the roughness table, in millimetres.
type wall struct {
	base, lining, finish string
	k, low, high         float64 // of the new pipe where it rusts
	rusts                bool    // bare iron or steel: k grows with age
	// unknownAge is the age taken where neither a year nor a word says it.
	unknownAge float64
	source     string
	note       string
}

const (
	ironSource   = "White Table 6.1 (cast iron, new, 0.26 ± 50 %), HI (0.26), HR (uncoated cast iron, 0.15 to 0.6)"
	dippedSource = "HI (asphalt dipped, 0.122), White Table 6.1 (asphalted, 0.12 ± 50 %, from memory), HR (coated cast iron, 0.06 to 0.3)"
	steelSource  = "White Table 6.1 (commercial steel, new, 0.046 ± 30 %), HI (0.0457), HR (uncoated steel, 0.015 to 0.06)"
	smoothMetal  = "HI (drawn tubing, brass, copper, lead, aluminium, 0.0015), White Table 6.1 (brass, drawn, 0.002 ± 50 %)"
	liningSource = "HR (spun bitumen or concrete lined metal, 0.03; spun precast concrete 0.06 to 0.3); 0.1 for a main with its joints is common practice"
	epoxySource  = "HR (epoxy lining: steel 0.03 to 0.15, cast iron 0.015 to 0.03; polyurethane 0.015 to 0.06)"
	oldIron      = "unlined iron of unknown age is taken as 50 years old: write the year it was laid"
)

// walls is the table of absolute roughness. The first line that fits base,
// lining and finish counts; an empty lining or finish fits any.
var walls = []wall{
	{base: "cast iron", lining: "cement", k: 0.1, low: 0.03, high: 0.3, source: liningSource},
	{base: "cast iron", lining: "lined", k: 0.1, low: 0.015, high: 0.3, source: liningSource, note: "lining taken as cement mortar"},
	{base: "cast iron", lining: "relined", k: 0.3, low: 0.15, high: 0.6, source: "HR (relined in place, 0.15 to 0.6)"},
	{base: "cast iron", lining: "epoxy", k: 0.03, low: 0.015, high: 0.06, source: epoxySource},
	{base: "cast iron", lining: "polyethylene", k: 0.06, low: 0.03, high: 0.15, source: "HR (polyethylene lining, 0.06 to 0.15)"},
	{base: "cast iron", lining: "bitumen", k: 0.12, low: 0.06, high: 0.3, rusts: true, unknownAge: oldYears, source: dippedSource, note: oldIron},
	{base: "cast iron", k: 0.26, low: 0.13, high: 0.6, rusts: true, unknownAge: oldYears, source: ironSource, note: oldIron},

	{base: "ductile iron", lining: "unlined", k: 0.26, low: 0.13, high: 0.6, rusts: true, unknownAge: oldYears, source: ironSource, note: oldIron},
	{base: "ductile iron", lining: "epoxy", k: 0.03, low: 0.015, high: 0.06, source: epoxySource},
	{base: "ductile iron", lining: "polyethylene", k: 0.06, low: 0.03, high: 0.15, source: "HR (ductile iron, polyethylene lining, 0.06 to 0.15)"},
	{base: "ductile iron", lining: "bitumen", k: 0.06, low: 0.03, high: 0.3, source: "HR (spun bitumen lined metal, 0.03; coated cast iron, 0.06 to 0.3)"},
	{base: "ductile iron", lining: "relined", k: 0.3, low: 0.15, high: 0.6, source: "HR (relined in place, 0.15 to 0.6)"},
	{base: "ductile iron", lining: "cement", k: 0.1, low: 0.03, high: 0.3, source: liningSource},
	{base: "ductile iron", k: 0.1, low: 0.03, high: 0.3, source: liningSource, note: "lining taken as cement mortar, as is common practice: write unlined where it is not"},

	{base: "steel", finish: "riveted", k: 3, low: 0.9, high: 9.14, source: "White Table 6.1 (riveted, 3.0 ± 70 %), HI (0.914 to 9.14)"},
	{base: "steel", lining: "cement", k: 0.1, low: 0.03, high: 1.5, source: liningSource + "; HI prints 1.5 for cement-lined carbon steel"},
	{base: "steel", lining: "epoxy", k: 0.06, low: 0.03, high: 0.15, source: epoxySource},
	{base: "steel", lining: "polyethylene", k: 0.06, low: 0.03, high: 0.15, source: "HR (polyethylene lining, 0.06 to 0.15)"},
	{base: "steel", lining: "relined", k: 0.3, low: 0.15, high: 0.6, source: "HR (relined in place, 0.15 to 0.6)"},
	{base: "steel", lining: "bitumen", k: 0.06, low: 0.03, high: 0.15, source: "HR (spun bitumen lined metal, 0.03; epoxy lined steel, 0.03 to 0.15)"},
	{base: "steel", lining: "lined", k: 0.06, low: 0.03, high: 0.3, source: "HR (steel, epoxy lining, 0.03 to 0.15; spun bitumen or concrete lined metal, 0.03)"},
	{base: "steel", k: 0.046, low: 0.015, high: 0.06, rusts: true, unknownAge: newYears, source: steelSource, note: "steel of unknown age is taken as new: write the year it was laid"},

	{base: "wrought iron", k: 0.046, low: 0.03, high: 0.15, rusts: true, unknownAge: oldYears, source: "White Table 6.1 (wrought iron, new, 0.046 ± 20 %), HI (0.0457), HR (0.03 to 0.15)", note: oldIron},
	{base: "galvanised", k: 0.15, low: 0.06, high: 0.3, source: "White Table 6.1 (galvanised iron, new, 0.15 ± 40 %), HI (0.152), HR (0.06 to 0.3)"},
	{base: "stainless", k: 0.015, low: 0.001, high: 0.046, source: "HI (stainless steel, 0.015), White Table 6.1 (0.002 ± 50 %)"},
	{base: "copper", k: 0.0015, low: 0.001, high: 0.003, source: smoothMetal},
	{base: "brass", k: 0.0015, low: 0.001, high: 0.003, source: smoothMetal},
	{base: "lead", k: 0.0015, low: 0.001, high: 0.003, source: smoothMetal},
	{base: "aluminium", k: 0.0015, low: 0.001, high: 0.003, source: smoothMetal},

	{base: "pvc", k: 0.03, low: 0.0015, high: 0.06, source: "HR (uPVC: couplings 0.003, cemented joints 0.03, ring joints 0.06), White Table 6.1 (plastic tubing, 0.0015)"},
	{base: "pe", k: 0.01, low: 0.0015, high: 0.06, source: "between White Table 6.1 and HI (plastic tubing, 0.0015) and HR (jointed uPVC, 0.06); 0.01 for welded mains is common practice"},
	{base: "plastic", k: 0.01, low: 0.0015, high: 0.06, source: "between White Table 6.1 and HI (plastic tubing, 0.0015) and HR (jointed uPVC, 0.06)"},
	{base: "grp", k: 0.03, low: 0.005, high: 0.06, source: "HI (fibreglass, 0.005); 0.03 for a jointed main is common practice"},

	{base: "prestressed", k: 0.06, low: 0.03, high: 0.15, source: "HR (prestressed concrete, 0.03 to 0.15)"},
	{base: "concrete", finish: "precast", k: 0.15, low: 0.06, high: 0.6, source: "HR (precast concrete, ring joints, 0.06 to 0.6; spun 0.06 to 0.3)"},
	{base: "concrete", k: 0.3, low: 0.04, high: 3.05, source: "HI (concrete, 0.305 to 3.05), HR (precast 0.15, cast in steel forms 0.6), White Table 6.1 (smoothed 0.04, rough 2.0)", note: "concrete runs from 0.04 to 3 mm by its making: write the roughness if it matters"},
	{base: "asbestos cement", k: 0.06, low: 0.015, high: 0.15, source: "no printed roughness at hand: equals the handbook C of 140 in a 150 mm main at 0.9 m/s"},
	{base: "wood", k: 0.5, low: 0.18, high: 1.5, source: "White Table 6.1 (wood stave, 0.5 ± 40 %), HI (0.18 to 0.91), HR (planed stave, 0.3 to 1.5)"},
	{base: "rubber", k: 0.01, low: 0.004, high: 0.016, source: "White Table 6.1 (rubber, smoothed, 0.01 ± 60 %), HI (0.01)"},
}

// Growth of a bare iron or steel wall, k = k0 + a t [Colebrook-White]: the rate
// of water that attacks slightly [Lamont, trend 1], from next to none to
// moderate attack. HR's old mains under slight attack (0.6 mm up to 20 years,
// 1.5 at 40 to 50, 3 at 80 to 100) agree within 27 %.
const (
	growth     = 0.025 // mm a year
	growthLow  = 0.005
	growthHigh = 0.076
	rustSource = "; grown by 0.025 mm a year (slight attack: Lamont trend 1, from memory; HR old mains agree within 27 %)"
)

// Roughness is the absolute roughness, m, expected of a sound pipe of the
// material, named in any order, case and usual short form, at an age in years
// (NaN: not known). "New" and "old" in the words count where the age does not.
// Only bare iron and steel change with age here. It reports false for words that
// name no wall in the table, or two.
func Roughness(materialWords string, age float64) (Entry, bool) {
	m, ok := readMaterial(materialWords)
	if !ok {
		return Entry{}, false
	}
	for _, w := range walls {
		if w.base == m.base && (w.lining == "" || w.lining == m.lining) && (w.finish == "" || w.finish == m.finish) {
			return w.at(ageOf(m, age)), true
		}
	}
	return Entry{}, false
}

// ageOf is the age in years: the stated one, else what the words say, else NaN.
func ageOf(m material, age float64) float64 {
	if math.IsNaN(age) && m.aged {
		return m.age
	}
	return age
}

func (w wall) at(age float64) Entry {
	e := Entry{Value: w.k, Low: w.low, High: w.high, Source: w.source}
	switch {
	case !w.rusts:
		e.Note = w.note
	case math.IsNaN(age):
		e.Note = w.note
		age = w.unknownAge
	}
	if w.rusts && age > 0 { // laid after the survey: as new
		e.Value += growth * age
		e.Low += growthLow * age
		e.High += growthHigh * age
		e.Source += rustSource
	}
	const metre = 1e-3
	e.Value, e.Low, e.High = e.Value*metre, e.Low*metre, e.High*metre
	return e.withSpread()
}

// The flow at which a roughness is turned into a Hazen-Williams coefficient: the
// velocity of Lamont's table, in water at 10 C. In a fully rough pipe C falls by
// 5 % where the velocity doubles.
const (
	velocityForC    = 0.9 // m/s
	temperatureForC = 10  // C
)

// HazenWilliams is the coefficient C expected of a sound pipe of the material
// and age (years, NaN: not known) in a bore, m. It is not a table of its own but
// the C that loses what Roughness loses by Colebrook-White at 0.9 m/s and 10 C,
// so that a survey meets the same pipe under either law. Against printed tables
// of C it lies within 3 of Lamont's for iron (new, and under slight attack to 100
// years) and within 8 of the handbook's for the other materials; concrete, whose
// forms it does not tell apart, within 11.
func HazenWilliams(materialWords string, age, bore float64) (Entry, bool) {
	k, ok := Roughness(materialWords, age)
	if !ok || !(bore > 0) {
		return Entry{}, false
	}
	e := Entry{
		Value: coefficientC(k.Value, bore), Low: coefficientC(k.High, bore), High: coefficientC(k.Low, bore), Note: k.Note,
		Source: fmt.Sprintf("roughness %s mm by Colebrook-White at 0.9 m/s and 10 C; %s", unit.Significant(1e3*k.Value, 2), k.Source),
	}
	return e.withSpread(), true
}

// coefficientC is the Hazen-Williams C, V = 0.8492 C R^0.63 S^0.54 in SI, of a
// pipe of roughness k and the given bore at the reference flow.
func coefficientC(k, bore float64) float64 {
	reynolds := velocityForC * bore / water.KinematicViscosity(temperatureForC)
	x := 8.0 // 1/sqrt f of Colebrook-White; the error shrinks fivefold a step and more above Re 7000
	for range 30 {
		x = -2 * math.Log10(k/(3.7*bore)+2.51*x/reynolds)
	}
	slope := velocityForC * velocityForC / (2 * water.StandardGravity * bore * x * x)
	return velocityForC / (0.8492 * math.Pow(bore/4, 0.63) * math.Pow(slope, 0.54))
}
