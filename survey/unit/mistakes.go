package unit

// Mistake is a value that was written down in one unit while the instrument
// showed another: the gauge's face says psi, the sheet says bar.
type Mistake struct {
	Wrote Unit // the unit in the table
	Meant Unit // the unit the number was read in
	// Ratio is the value as converted over the true one: Wrote.Factor over
	// Meant.Factor. Psi written as bar reads 14.5 times too high.
	Ratio float64
}

// confusable lists, for each dimension, the units that stand on gauge faces,
// meters and drawings in one region or another, and so get mixed up.
var confusable = map[Dimension][]Unit{
	Pressure: {Bar, Kilopascal, PoundPerSquareInch, MetreOfWater, FootOfWater, KilogramForcePerCm2, Megapascal, Millibar, Atmosphere},
	Flow: {LitrePerSecond, CubicMetrePerHour, LitrePerMinute, GallonPerMinute, ImperialGallonPerMinute, MegalitrePerDay,
		MillionGallonPerDay, ImperialMillionGallon, CubicFootPerSecond},
	Length: {Metre, Foot, Millimetre, Inch},
}

// Mistakes lists every pair of units of a dimension that are likely to be mixed
// up, for a diagnosis to try ("looks like psi, not bar"). Some ratios are so
// near 1 (bar and kgf/cm2, 2 %) that a gauge error explains them as well, and
// some pairs share nearly one ratio (m for kPa and bar for m, 4 % apart): a
// ratio that fits names candidates and not a culprit. It is empty for
// dimensions without such pairs.
func Mistakes(d Dimension) []Mistake {
	var out []Mistake
	units := confusable[d]
	for _, wrote := range units {
		for _, meant := range units {
			if wrote != meant {
				out = append(out, Mistake{Wrote: wrote, Meant: meant, Ratio: wrote.Factor / meant.Factor})
			}
		}
	}
	return out
}
