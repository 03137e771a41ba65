package survey

import "time"

// Survey is one folder of tables, read and converted. Slices keep the order of
// the tables, which decides ties and the order of every result.
type Survey struct {
	Info         Info
	Points       []Point
	Pipes        []Pipe
	Levels       []Level
	Fittings     []Fitting
	Machines     []Machine
	Taps         []Tap
	Gauges       []Gauge
	Rounds       []Round
	Conditions   []Condition
	Readings     []Reading
	Requirements []Requirement
	Channels     []Channel
	Inputs       []Input
}

// Input is one file that was read, with the digest of its bytes, for the audit
// trail. Rows = Used + the number of its rows found in Problems as SetAside or
// Fatal; the reader keeps this true.
type Input struct {
	File   string `json:"file"`
	SHA256 string `json:"sha256"`
	Rows   int    `json:"rows"`
	Used   int    `json:"used"`
	// Understood says how the file was read: encoding, delimiter, decimal mark,
	// line of the heading.
	Understood string `json:"understood"`
}

// FrictionLaw names the friction law the survey asks for.
type FrictionLaw int

const (
	DarcyWeisbach FrictionLaw = iota // Colebrook-White roughness
	HazenWilliams                    // coefficient C
)

// String gives the word used in survey.csv.
func (l FrictionLaw) String() string {
	if l == HazenWilliams {
		return "hazen-williams"
	}
	return "darcy-weisbach"
}

// Info is survey.csv.
type Info struct {
	Title, Site, Datum string
	TimeZone           *time.Location
	SiteLevel          float64 // m above sea level, for barometer and gravity
	Latitude           float64 // degrees
	WaterTemperature   float64 // C, where a round states none
	FrictionLaw        FrictionLaw
	AsNewYear          Maybe // reference year of the expected roughnesses
	FalseAlarmRate     float64
	Cost               Cost
}

// Cost is what turns excess head into money. Price 0 with OK false: no cost is printed.
type Cost struct {
	EnergyPrice    Maybe  // currency a kWh
	Currency       string // as written
	PumpEfficiency Maybe  // 0 to 1
	HoursPerYear   Maybe  // h
	FlowExceeded   Maybe  // m3/s, flow the excess is charged at; empty: flow of the round
}

// PointKind says what a point is.
type PointKind string

const (
	Junction  PointKind = "junction"
	Reservoir PointKind = "reservoir" // its water level comes from conditions.csv
	Outlet    PointKind = "outlet"    // free discharge: piezometric head = elevation
)

// Point is a place where pipes meet or end.
type Point struct {
	Name      string
	Kind      PointKind
	Elevation float64 // m above datum
	X, Y      Maybe   // m, for plans
	Note      string
	Source    Source
}

// Pipe is one length of uniform bore. Roughness or C is the expected value for a
// sound pipe of that age.
type Pipe struct {
	Name      string
	From, To  string
	Length    float64 // m
	Bore      float64 // m
	Material  string
	Laid      Maybe // year
	Roughness Maybe // m, absolute; expected
	C         Maybe // Hazen-Williams; expected
	Group     string
	Spread    Maybe // factor at one standard deviation for a sound pipe
	// FromTable says where the expected value came from when the survey left
	// it out; empty: stated.
	FromTable string
	Note      string
	Source    Source
}

// Level is the pipe's own level at a chainage, for the long section.
type Level struct {
	Pipe      string
	At        float64 // m from the From end
	Elevation float64 // m above datum
	Source    Source
}

// FittingKind is one of the kinds of fittings.csv.
type FittingKind string

const (
	EntranceSharp      FittingKind = "entrance-sharp"
	EntranceRounded    FittingKind = "entrance-rounded"
	EntranceProjecting FittingKind = "entrance-projecting"
	Exit               FittingKind = "exit"
	Bend               FittingKind = "bend"
	Elbow              FittingKind = "elbow"
	TeeRun             FittingKind = "tee-run"
	TeeBranch          FittingKind = "tee-branch"
	Enlargement        FittingKind = "enlargement"
	Contraction        FittingKind = "contraction"
	Nozzle             FittingKind = "nozzle"
	GateValve          FittingKind = "gate-valve"
	ButterflyValve     FittingKind = "butterfly-valve"
	BallValve          FittingKind = "ball-valve"
	GlobeValve         FittingKind = "globe-valve"
	PlugValve          FittingKind = "plug-valve"
	CheckValve         FittingKind = "check-valve"
	Strainer           FittingKind = "strainer"
	MeterFitting       FittingKind = "meter"
	OtherFitting       FittingKind = "other"
)

// FittingKinds lists every kind, in the order of the contract.
var FittingKinds = []FittingKind{
	EntranceSharp, EntranceRounded, EntranceProjecting, Exit, Bend, Elbow, TeeRun, TeeBranch,
	Enlargement, Contraction, Nozzle, GateValve, ButterflyValve, BallValve, GlobeValve,
	PlugValve, CheckValve, Strainer, MeterFitting, OtherFitting,
}

// CanBePartClosed reports whether a fitting of this kind can be suspected of
// standing part closed. A check valve cannot: it has no handle.
func (k FittingKind) CanBePartClosed() bool {
	switch k {
	case GateValve, ButterflyValve, BallValve, GlobeValve, PlugValve:
		return true
	}
	return false
}

// CanBeBlocked reports whether a fitting of this kind can be suspected of
// being clogged or hung.
func (k FittingKind) CanBeBlocked() bool { return k == Strainer || k == CheckValve }

// ChangesBore reports whether Bore is the bore on the fitting's other side.
func (k FittingKind) ChangesBore() bool {
	return k == Enlargement || k == Contraction || k == Nozzle
}

// Fitting sits on a pipe at a distance from its From end. It lies between that end
// and chainage x when At < x.
type Fitting struct {
	Name string
	Pipe string
	At   float64 // m from the From end
	Kind FittingKind
	// Bore, m: bore whose velocity head the coefficient is on (empty: the
	// pipe's). For enlargement, contraction and nozzle it is the other bore, and
	// the coefficient is on the velocity head in the smaller of the two.
	Bore      Maybe
	K         Maybe  // expected loss coefficient, sound and fully open
	Spread    Maybe  // factor at one standard deviation for a sound fitting
	FromTable string // where K came from when the survey left it out
	Note      string
	Source    Source
}

// MachineKind is pump or turbine.
type MachineKind string

const (
	Pump    MachineKind = "pump"
	Turbine MachineKind = "turbine"
)

// Machine runs from its suction (inlet) point to its delivery (outlet) point.
type Machine struct {
	Name     string
	From, To string
	Kind     MachineKind
	Speed    Maybe // rated, rad/s
	Duty     []DutyPoint
	Note     string
	Source   Source
}

// DutyPoint is one point of the works curve at the rated speed: head gained by
// a pump, taken by a turbine.
type DutyPoint struct {
	Flow       float64 // m3/s
	Head       float64 // m
	Efficiency Maybe   // 0 to 1
	Source     Source
}

// Tap is a place where readings are taken: on a pipe at a distance, or at a point.
type Tap struct {
	Name              string
	Pipe              string // empty: at Point
	At                float64
	Point             string
	Elevation         float64 // m above datum, the tap's own
	ElevationSD       float64 // m
	OutletBore        Maybe   // m, for a jet
	OutletCoefficient Maybe
	Note              string
	Source            Source
}

// GaugeKind is what a gauge measures.
type GaugeKind string

const (
	PressureGauge   GaugeKind = "pressure"
	AbsoluteGauge   GaugeKind = "absolute-pressure"
	DifferenceGauge GaugeKind = "difference"
	FlowMeter       GaugeKind = "flow"
	LevelGauge      GaugeKind = "level"
)

// LineFilling is what fills the line between tap and gauge.
type LineFilling string

const (
	WaterLine LineFilling = "water"
	AirLine   LineFilling = "air"
)

// Gauge is one instrument. Low, High and Resolution are SI of its kind (Pa,
// m3/s or m); Unit is the unit its face shows.
type Gauge struct {
	Name       string
	Kind       GaugeKind
	Low, High  float64
	Unit       string
	Accuracy   Maybe   // maximum permissible error, fraction of span
	Resolution Maybe   // smallest readable step
	GainSD     float64 // standard uncertainty of a gain error (meters), fraction
	Line       LineFilling
	Checked    string // date of the last bench check, as written
	Checks     []BenchCheck
	Note       string
	Source     Source
}

// Span is High - Low.
func (g Gauge) Span() float64 { return g.High - g.Low }

// BenchCheck is one point of a bench check, SI.
type BenchCheck struct {
	Applied, Indicated float64
	Checked            string
	Source             Source
}

// Round is one set of readings taken while the flow was held steady.
type Round struct {
	Name             string
	Start, End       time.Time // zero: not stated
	WaterTemperature Maybe     // C
	Barometer        Maybe     // Pa
	Note             string
	Source           Source
}

// ConditionKind is what is known to hold during a round.
type ConditionKind string

const (
	LevelIs   ConditionKind = "level"    // reservoir water level, m
	DrawOff   ConditionKind = "draw-off" // flow out at a point, m3/s
	SpeedIs   ConditionKind = "speed"    // machine, rad/s
	Stopped   ConditionKind = "stopped"  // machine
	ShutOff   ConditionKind = "shut"     // pipe or fitting
	OpenAgain ConditionKind = "open"     // undoes shut
)

// EveryRound in a condition's Round means all rounds, with one error shared.
const EveryRound = "*"

// Condition is one row of conditions.csv. An unstated Value of a draw-off or a
// level means it is to be estimated.
type Condition struct {
	Round  string
	Item   string
	Kind   ConditionKind
	Value  Maybe
	SD     Maybe // same unit as Value
	Source Source
}

// ReadingKind is what was read.
type ReadingKind string

const (
	Static     ReadingKind = "static"
	TotalHead  ReadingKind = "total"
	Velocity   ReadingKind = "velocity"
	Difference ReadingKind = "difference"
	FlowRate   ReadingKind = "flow"
	WaterLevel ReadingKind = "level"
	Jet        ReadingKind = "jet"
)

// Reading is one line of a readings file. Value is SI of its kind: Pa for
// static, total, velocity, difference and jet, m3/s for flow, m for level.
type Reading struct {
	Round       string
	Time        time.Time // zero: not stated
	Tap         string
	OtherTap    string
	Kind        ReadingKind
	Gauge       string
	Value       float64
	HalfRange   float64 // of a reading written as a range; SI; 0: none
	Written     string  // the number as written
	Unit        string  // the unit as written
	GaugeHeight float64 // m above the tap
	Depth       Maybe   // m from the near wall; not stated: centreline
	Remark      string
	SetAside    string // why it is not used; empty: used
	Source      Source
}

// Requirement is one row of requirements.csv, for acceptance.
type Requirement struct {
	Name, Kind, Item, To string
	AtFlow               Maybe // m3/s
	Limit                float64
	Unit                 string // as written; Limit is SI of it
	Grade                string
	Note                 string
	Source               Source
}

// Channel is one row of loggers.csv.
type Channel struct {
	Name, File, Tap string
	Kind            ReadingKind
	Gauge, Unit     string
	ClockOffset     float64 // s, added to the logger's times
	TimeZone        *time.Location
	Note            string
	Source          Source
}
