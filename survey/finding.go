package survey

import "math"

// FindingKind is one of the kinds of findings.csv.
type FindingKind string

const (
	FouledPipe      FindingKind = "fouled-pipe"
	PartClosedValve FindingKind = "part-closed-valve"
	BlockedFitting  FindingKind = "blocked-fitting"
	GaugeOff        FindingKind = "gauge-off"
	LevelWrong      FindingKind = "level-wrong"
	UnrecordedFlow  FindingKind = "unrecorded-flow"
	MachineOffCurve FindingKind = "machine-off-curve"
	UnitSuspect     FindingKind = "unit-suspect"
	BelowAtmosphere FindingKind = "below-atmosphere"
	CauseOpen       FindingKind = "cause-open"
	NotCovered      FindingKind = "not-covered"
)

// Grade says how sure a finding is.
type Grade string

const (
	Proven Grade = "proven"
	Likely Grade = "likely"
	Hint   Grade = "hint"
)

// AtRound is a quantity in one round, SI.
type AtRound struct {
	Round string  `json:"round"`
	Value float64 `json:"value"`
}

// Finding is a conclusion. Estimate, Low and High are in Unit, the item's own
// quantity as findings.csv states it (mm, K, the gauge's unit, m, L/s, factor).
type Finding struct {
	ID          string      `json:"finding"`
	Item        string      `json:"item"`
	Kind        FindingKind `json:"kind"`
	Grade       Grade       `json:"grade"`
	Probability Maybe       `json:"probability"`
	Estimate    Maybe       `json:"estimate"`
	Low         Maybe       `json:"low95"`
	High        Maybe       `json:"high95"`
	Unit        string      `json:"unit"`
	// Expected is the sound item's value in Unit, where there is one.
	Expected Maybe `json:"expected"`
	// Excess is the head it costs in each round, m.
	Excess []AtRound `json:"excess_head"`
	Rounds []string  `json:"rounds"`
	// CannotBeToldFrom lists "kind:item".
	CannotBeToldFrom []string `json:"cannot_be_told_from"`

	Statement string   `json:"statement"` // one plain sentence
	Evidence  []string `json:"evidence"`  // what speaks for it, with numbers
	Rivals    []string `json:"rivals"`    // what else could explain it, and why it is less likely or as likely
	Advice    string   `json:"advice"`    // what to do
	Settle    string   `json:"settle"`    // which reading would settle it
	Cautions  []string `json:"cautions"`  // safety, where the advice means work on site
	Sources   []Source `json:"sources"`
	// Statistic is the drop of the sum of squares when the cause is allowed, Limit
	// what it had to pass.
	Statistic float64 `json:"statistic"`
	Limit     float64 `json:"limit"`
}

// LargestExcess is the largest head it costs in any round, m.
func (f Finding) LargestExcess() Maybe {
	var m Maybe
	for _, e := range f.Excess {
		if !m.OK || math.Abs(e.Value) > math.Abs(m.V) {
			m = Some(e.Value)
		}
	}
	return m
}

func rss(xs ...float64) float64 {
	s := 0.0
	for _, x := range xs {
		s += x * x
	}
	return math.Sqrt(s)
}

// Alert is what the crew should do something about while it is still at the
// tap: said from the tables alone, before any model.
type Alert struct {
	Rule      string   `json:"rule"`    // short name of the check, such as "no-flow round does not close"
	Subject   string   `json:"subject"` // tap, gauge, round or pipe it is about
	Statement string   `json:"statement"`
	Evidence  string   `json:"evidence"` // the numbers, with units
	Limit     string   `json:"limit"`    // the limit used and where it comes from
	Action    string   `json:"action"`
	Stay      bool     `json:"stay"` // do not leave before it is done
	Sources   []Source `json:"sources"`
}
