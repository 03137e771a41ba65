package survey

// Correction is one thing that was done to a reading, in SI of the reading.
type Correction struct {
	What   string
	Amount float64
}

// Corrected is a reading with all that is known of its gauge applied. The
// reading as written stays inside it, untouched.
type Corrected struct {
	Reading
	// Corrected value, SI of the kind; a static or total pressure is gauge
	// pressure (above atmosphere) at the gauge's own centre.
	Pressure float64
	Own      float64 // standard uncertainty of its own: resolution, scatter; SI
	Shared   float64 // standard uncertainty shared by all readings of the gauge; SI
	Gain     float64 // standard uncertainty of the gauge's gain; fraction
	// BarometerSD, Pa, of an absolute gauge in a round that states no
	// barometer: shared by every such reading of the round. 0: none.
	BarometerSD float64
	Applied     []Correction
	Caveats     []Caveat
}

// Quantity is what a Head's Value is.
type Quantity string

const (
	PiezometricHead  Quantity = "piezometric head"  // m above datum
	LocalTotalHead   Quantity = "local total head"  // m above datum, at the pitot opening
	LocalVelocity    Quantity = "velocity head"     // m, at the pitot opening
	HeadDifference   Quantity = "difference"        // m, tap minus other tap, of piezometric heads
	VolumeFlow       Quantity = "flow"              // m3/s
	FreeWaterSurface Quantity = "water level"       // m above datum
	OutletFlow       Quantity = "flow from the jet" // m3/s
)

// Head is what one reading, or the mean of its repeats, says. Value is what was
// read, in metres (or m3/s for a flow); the model must match
//
//	Value = model + PerGauge*offset + PerTap*level error [+ ...] + own error
//
// with offset and level error as the parameters of results mean them: offset is
// shown minus true (SI of the gauge), level error is recorded minus true (m).
type Head struct {
	Round, Tap, OtherTap string
	Gauge                string
	Kind                 ReadingKind
	Quantity             Quantity
	Depth                Maybe // m from the near wall, pitot readings
	Value                float64
	Own                  float64 // standard uncertainty of its own, unit of Value

	PerGauge    float64 // d Value / d gauge offset: 1/(rho g) for pressures, 1 for flows and levels
	GaugeSD     float64 // SD of the offset, SI of the gauge
	GainSD      float64 // SD of the gauge's gain, fraction of Value
	PerTap      float64 // d Value / d level error of Tap: 1 for heads, 0 where levels cancel
	TapSD       float64 // m
	PerOther    float64 // the same for OtherTap: -1 with air lines, else 0
	OtherTapSD  float64 // m
	BarometerSD float64 // unit of Value; shared by the round's absolute gauges

	// What heads.csv shows. Pressure is gauge pressure at the tap, Pa.
	Pressure  Maybe
	Elevation float64 // m, of the tap

	Density, Gravity float64 // used for the conversion

	Rows    []Reading // the lines it came from: one, or several repeats
	Caveats []Caveat
}

// U is the standard uncertainty of Value with all its shared parts.
func (h Head) U() float64 {
	return rss(h.Own, h.PerGauge*h.GaugeSD, h.GainSD*h.Value, h.PerTap*h.TapSD, h.PerOther*h.OtherTapSD, h.BarometerSD)
}

// Sources lists where the head came from.
func (h Head) Sources() []Source {
	out := make([]Source, len(h.Rows))
	for i, r := range h.Rows {
		out[i] = r.Source
	}
	return out
}
