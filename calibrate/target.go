package calibrate

// class says which quantity of the model a target moves.
type class int

const (
	onRoughness class = iota // ln k or ln C of a link
	onLoss                   // ln K of a fitting (flat index)
	onMachine                // head factor of a link
	onDrawOff                // draw-off of a point that the tables know of, m3/s
	onLeak                   // flow out of a point that nobody wrote down, m3/s
	onLevel                  // fixed head of a point, m
	onOffset                 // offset of a gauge, SI of the gauge
	onGain                   // gain of a gauge, fraction
	onTapLevel               // level error of a tap, m
	onBarometer              // barometer error of a round, in the unit of Value
	onProfile                // profile factor of a pitot tap, or outlet coefficient of a jet, fraction
	onReading                // error of one reading alone, unit of its Value
)

// everyRound as a target's round: all of them.
const everyRound = -1

// Target is one quantity of the model that an unknown moves, by Weight per unit
// of the unknown. Index counts within the class; round is everyRound or one
// round's index.
type Target struct {
	class  class
	index  int
	round  int
	Weight float64
}

// Unknown is one number the fit may move. Its value theta is measured from Mean
// in the working scale: for a logarithmic unknown theta is ln(fitted/Expected),
// for the others it is in SI.
type Unknown struct {
	Kind     string // as parameters.csv: pipe, group, fitting, machine, gauge, tap, draw-off, ...
	Item     string
	Quantity string // roughness, c_value, loss_coefficient, head_factor, offset, level_error, flow, ...
	Round    string // where it differs by round; else empty
	Log      bool
	Expected float64 // SI; the value at theta = 0
	SD       float64 // prior standard deviation of theta
	Open     bool    // nothing was stated: SD only keeps the problem determined
	// Sign forbids one direction: +1 theta >= 0, -1 theta <= 0, 0 both. Sound
	// items have 0; a fault that physics makes one-sided has a sign.
	Sign    int
	Targets []Target
	// Center is the prior mean of theta: 0, but for an open unknown the estimate of
	// an earlier fit.
	Center float64
	// Start is where the fit starts from, in theta.
	Start float64
}

// Same reports whether two unknowns move the model in the same way.
func (a Unknown) Same(b Unknown) bool {
	if len(a.Targets) != len(b.Targets) {
		return false
	}
	for i := range a.Targets {
		if a.Targets[i] != b.Targets[i] {
			return false
		}
	}
	return true
}
