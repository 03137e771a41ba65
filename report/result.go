// Package report holds the result of one reconciliation as plain data: every
// result table, the findings, the pictures as descriptions, and the audit
// trail. It computes nothing. The sinks are its subpackages: report/table
// (CSV), report/text (terminal), report/figure (SVG, PNG, PDF) and report/page
// (one HTML page). A stored Result can be drawn again by any of them.
//
// Numbers are SI throughout; sinks convert at the exit. A Maybe that is not
// stated becomes an empty cell, never a zero.
package report

import "tapround/survey"

// Result is everything one run has to say.
type Result struct {
	Tool     Tool             `json:"tool"`
	Survey   SurveyFacts      `json:"survey"`
	Inputs   []survey.Input   `json:"inputs"`
	Settings []Setting        `json:"settings"`
	Problems survey.Problems  `json:"problems"`
	Alerts   []survey.Alert   `json:"alerts"`
	Summary  []string         `json:"summary"` // plain sentences, most important first
	Findings []survey.Finding `json:"findings"`
	Fit      FitFacts         `json:"fit"`

	Heads      []HeadRow      `json:"heads"`
	Flows      []FlowRow      `json:"flows"`
	GradeLines []GradeRow     `json:"grade_lines"`
	Parameters []ParameterRow `json:"parameters"`
	Residuals  []ResidualRow  `json:"residuals"`
	Losses     []LossRow      `json:"losses"`
	Costs      []Cost         `json:"costs"` // none where the survey states no price
	// Visible is the smallest fault of each item that this survey would have found four
	// times in five; Ties the pairs of which the readings fix the sum only.
	Visible  []VisibleRow `json:"visible"`
	Ties     []string     `json:"ties"`
	Profiles []Profile    `json:"profiles"`
	Cautions []string     `json:"cautions"`
}

// Tool names the program and its version.
type Tool struct {
	Name    string `json:"name"`
	Version string `json:"version"`
}

// SurveyFacts is what the head of a report says of the survey.
type SurveyFacts struct {
	Title       string   `json:"title"`
	Site        string   `json:"site"`
	Datum       string   `json:"datum"`
	FrictionLaw string   `json:"friction_law"`
	Rounds      []string `json:"rounds"`
	Points      int      `json:"points"`
	Pipes       int      `json:"pipes"`
	PipeLength  float64  `json:"pipe_length"` // m
	Taps        int      `json:"taps"`
	Gauges      int      `json:"gauges"`
	Readings    int      `json:"readings"`
	Used        int      `json:"used"`
}

// Setting is one default or choice that the answer depends on, with its value
// as printed and where it comes from.
type Setting struct {
	Name   string `json:"name"`
	Value  string `json:"value"`
	Source string `json:"source"`
}

// FitFacts says how the fit went.
type FitFacts struct {
	Status     string       `json:"status"`
	Converged  bool         `json:"converged"`
	Iterations int          `json:"iterations"`
	Unknowns   int          `json:"unknowns"`
	Readings   int          `json:"readings"`
	Rank       int          `json:"rank"`
	Condition  float64      `json:"condition"`
	ChiSquare  float64      `json:"chi_square"` // of the model with the accepted causes
	DoF        int          `json:"degrees_of_freedom"`
	P          survey.Maybe `json:"p"`
	SoundChi   float64      `json:"chi_square_sound"` // with everything sound
	SoundP     survey.Maybe `json:"p_sound"`
	Caveats    []string     `json:"caveats"`
}

// HeadRow is one line of readings, in their order (heads.csv).
type HeadRow struct {
	Round, Tap, OtherTap string
	Depth                survey.Maybe // m
	Time                 string       // RFC 3339, or empty
	Kind, Gauge          string
	Reading, Unit        string       // as written
	Pressure             survey.Maybe // Pa
	Elevation            survey.Maybe // m
	PressureHead         survey.Maybe // m
	VelocityHead         survey.Maybe // m
	Piezometric          survey.Maybe // m
	Total                survey.Maybe // m
	U                    survey.Maybe // m
	Used                 bool
	Remark               string
	Source               survey.Source
}

// FlowRow is the flow of one pipe or machine in one round (flows.csv), m3/s and m/s.
type FlowRow struct {
	Round, Pipe         string
	Flow, Velocity      survey.Maybe
	Low, High, Measured survey.Maybe
}

// GradeRow is one place on a pipe in one round (grade_lines.csv), m.
type GradeRow struct {
	Round, Pipe        string
	At                 float64
	Piezometric, Total survey.Maybe
	ExpectedTotal      survey.Maybe
}

// ParameterRow is one unknown of the fit (parameters.csv), in Unit as printed.
type ParameterRow struct {
	Item, Kind, Quantity, Unit string
	Expected, Fitted           survey.Maybe
	Low, High                  survey.Maybe
	Ratio                      survey.Maybe
	ToldBySurvey               survey.Maybe
	Round                      string
}

// ResidualRow is one reading (or mean of repeats) against the fit
// (residuals.csv). Measured, Fitted, Residual and U are in Unit ("m" or "L/s").
type ResidualRow struct {
	Round, Tap, OtherTap, Kind, Gauge string
	Measured, Fitted                  float64
	Unit                              string
	Residual, U                       float64
	Normalised, Redundancy            survey.Maybe
}

// LossRow is one stretch between neighbouring taps in one round (losses.csv), m
// of total head.
type LossRow struct {
	Round, FromTap, ToTap    string
	Measured, Low, High      survey.Maybe
	Expected, Excess, Fitted survey.Maybe
	// ExcessU is the standard uncertainty of Excess; Probability that the stretch
	// loses more than sound works would.
	ExcessU     survey.Maybe
	Probability survey.Maybe
	Items       []string
}

// VisibleRow says how small a fault of one item would have shown.
type VisibleRow struct {
	Item, Kind string
	Seen       bool // any reading depends on it
	Value      survey.Maybe
	Unit       string
	Words      string
}

// XY is one vertex of a line: chainage along the route and level, m.
type XY struct{ X, Y float64 }

// Profile is the description of one grade-line picture: one route in one round.
// Lines are vertex lists in order of chainage; a true step is two vertices at
// one chainage; a gap is a new sub-slice.
type Profile struct {
	Title string  `json:"title"`
	Round string  `json:"round"`
	Route []Place `json:"route"` // the named points along it
	// Ground is the pipe's level; lines are broken where nothing is known.
	Ground        []XY             `json:"ground"`
	Piezometric   [][]XY           `json:"piezometric"`    // as fitted
	Total         [][]XY           `json:"total"`          // as fitted
	ExpectedTotal [][]XY           `json:"expected_total"` // sound works at the fitted flows
	ExpectedPiezo [][]XY           `json:"expected_piezometric"`
	Measured      []ProfileReading `json:"measured"`
	Taps          []Place          `json:"taps"`
	Devices       []Place          `json:"devices"` // fittings and machines
	Suspect       []Span           `json:"suspect"`
	BelowAir      []Span           `json:"below_atmosphere"` // piezometric line under the pipe
}

// Place is a named chainage.
type Place struct {
	Name string  `json:"name"`
	Kind string  `json:"kind"`
	X    float64 `json:"x"`
}

// Span is a stretch of the route with a word on it.
type Span struct {
	From  float64 `json:"from"`
	To    float64 `json:"to"`
	Label string  `json:"label"`
}

// ProfileReading is a measured head on the route with its 95 % bar.
type ProfileReading struct {
	Tap   string  `json:"tap"`
	Gauge string  `json:"gauge"`
	X     float64 `json:"x"`
	Y     float64 `json:"y"`
	Bar   float64 `json:"bar"`   // half length of the 95 % bar, m
	Total bool    `json:"total"` // of total head; else piezometric
	Text  string  `json:"text"`  // as read, for a pointer
	Note  string  `json:"note"`  // beside the mark: the finding that explains it, such as "F3"
}

// Cost is what a finding costs while it stands, where survey.csv gives the price.
type Cost struct {
	Finding  string       `json:"finding"`  // its ID
	Power    survey.Maybe `json:"power"`    // W, at the pump's shaft supply
	Energy   survey.Maybe `json:"energy"`   // J a year
	Money    survey.Maybe `json:"money"`    // Currency a year
	Currency string       `json:"currency"` // as written in survey.csv
	Basis    string       `json:"basis"`    // head, flow, hours, efficiency and price it was reckoned with
}
