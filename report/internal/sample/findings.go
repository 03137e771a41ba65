package sample

import "tapround/survey"

const (
	cautionPressure = "The main is under pressure: nobody stands over a fitting being opened; pressure can stay trapped behind a plug or a shut valve (common practice)."
	cautionSurge    = "Move valves and hydrants slowly, count the turns, and tell the control room first: fast closing makes a surge (common practice)."
	cautionWater    = "Disturbing a fouled main can discolour the supply; what enters drinking water is disinfected (common practice)."
	cautionLocal    = "Local codes and licensed practice decide."
)

func excess(vs ...float64) []survey.AtRound {
	out := make([]survey.AtRound, len(vs))
	for i, v := range vs {
		out[i] = survey.AtRound{Round: rounds[i], Value: v}
	}
	return out
}

func findings() []survey.Finding {
	s := survey.Some
	src := func(file string, line int) survey.Source { return survey.Source{File: file, Line: line} }
	return []survey.Finding{
		{ID: "F1", Item: "P2", Kind: survey.FouledPipe, Grade: survey.Proven, Probability: s(0.997),
			Estimate: s(9.12), Low: s(6.9), High: s(12.1), Unit: "mm", Expected: s(1.5),
			Excess: excess(0.13, 3.63, 4.2, 4.4, 6.2), Rounds: rounds,
			Statement: "Pipe P2 carries less than a sound one: equivalent roughness 9.1 (95 %: 6.9 to 12) mm (C about 64 at the largest flow; like a clean bore of 293 mm), where 1.5 mm (C about 106) is expected; it costs 6.2 m of head in round E.",
			Evidence: []string{"The loss from N1 to N2 is 2.9 times what is expected, in every flowing round, and grows with the flow squared.",
				"Allowing it brings the sum of squares down by 1,412; 13.1 was needed."},
			Rivals:    []string{"A gauge at N2 reading low: would show in round A too, and three gauges were used there.", "A lost bore instead of a rough wall: explains the readings equally well; pressure cannot part the two."},
			Advice:    "Take a coupon or a calliper reading of P2 before choosing between cleaning, lining and renewal: pressure readings cannot part a rough wall from a lost bore. At the same head it passes 40 % less than it should; it loses 6.9 m/km at 80.3 L/s.",
			Cautions:  []string{cautionPressure, cautionWater, cautionLocal},
			Sources:   []survey.Source{src("readings/crew-1.csv", 3), src("readings/crew-1.csv", 9), src("readings/crew-1.csv", 15)},
			Statistic: 1412, Limit: 13.1},
		{ID: "F2", Item: "N6..N7", Kind: survey.CauseOpen, Grade: survey.Proven, Probability: s(0.999),
			Estimate: s(3.0), Low: s(2.65), High: s(3.35), Unit: "m",
			Excess: excess(0.02, 0.62, 0.34, 1.5, 3.0), Rounds: rounds,
			CannotBeToldFrom: []string{"part-closed-valve:SV-031", "fouled-pipe:P9"},
			Statement:        "Between N6 and N7 more head is lost than sound works would lose; it costs 3.0 m of head in round E, but these readings cannot say by which of: valve SV-031 part closed, or pipe P9 fouled.",
			Evidence:         []string{"4.4 m are lost from N6 to N7 in round E where 1.4 m is expected.", "The two causes differ by 0.011 m at most over these rounds; the readings are good to 0.1 m."},
			Rivals:           []string{"Valve SV-031 part closed, K about 45: probability 0.71.", "Pipe P9 fouled, roughness about 12 mm: probability 0.29."},
			Advice:           "Cheapest first: go to SV-031 and count the turns or look inside; decide nothing about P9 before that.",
			Settle:           "Read just before and just after SV-031 at 27 L/s or more (as in round E): if it is the cause, most of the excess stands across those few metres; if not, almost none of it.",
			Cautions:         []string{cautionPressure, cautionSurge, cautionLocal}, Statistic: 288, Limit: 13.1},
		{ID: "F3", Item: "G07", Kind: survey.GaugeOff, Grade: survey.Proven, Probability: s(0.999),
			Estimate: s(0.121), Low: s(0.108), High: s(0.134), Unit: "bar", Expected: s(0), Rounds: rounds,
			Statement: "Gauge G07 reads 0.121 ± 0.007 bar higher than the truth wherever it is used.",
			Evidence:  []string{"It is high by the same amount at N6 in rounds A to C and at N8 in rounds D and E."},
			Rivals:    []string{"Wrong levels of N6 and N8, both by the same amount: needs two errors where one explains everything."},
			Advice:    "Send G07 to the bench before it is used again; its readings count here only with this offset taken off.", Statistic: 344, Limit: 13.1},
		{ID: "F4", Item: "N10", Kind: survey.LevelWrong, Grade: survey.Proven, Probability: s(0.98),
			Estimate: s(-2.38), Low: s(-2.54), High: s(-2.22), Unit: "m", Expected: s(0), Rounds: rounds,
			Statement: "The recorded level of N10 is 2.38 ± 0.08 m too low; the same error shows in every round.",
			Advice:    "Level N10 again, to the tap itself and on the survey's datum, and correct the table.", Statistic: 902, Limit: 13.1},
		{ID: "F5", Item: "N8", Kind: survey.UnrecordedFlow, Grade: survey.Likely, Probability: s(0.74),
			Estimate: s(4.0), Low: s(3.5), High: s(4.5), Unit: "L/s", Expected: s(0), Rounds: rounds, Excess: nil,
			CannotBeToldFrom: []string{"unrecorded-flow:N7", "unrecorded-flow:N9"},
			Statement:        "About 4.00 ± 0.26 L/s leaves the system at or near N8 that no table records (every round). The readings cannot tell this from: a flow at N7 that nobody recorded, or a flow at N9 that nobody recorded.",
			Advice:           "Look for a passing washout, bypass, hydrant or leak near N8 at night, when nothing else draws; do not zero gauges on a round with this flow in it.",
			Settle:           "Measure the flow a second time on either side of the suspected place, and read a round with everything drawn off shut.",
			Cautions:         []string{cautionPressure, cautionSurge, cautionLocal}, Statistic: 95, Limit: 13.1},
		{ID: "F6", Item: "P6", Kind: survey.FouledPipe, Grade: survey.Hint, Probability: s(0.21),
			Estimate: s(2.4), Low: s(0.9), High: s(6.1), Unit: "mm", Expected: s(1.5), Excess: excess(0, 0.1, 0.1, 0.2, 0.4), Rounds: rounds,
			Statement: "Pipe P6 may lose more than a sound one, but the readings would show as much by chance.",
			Advice:    "Nothing yet; look at it again in the next survey.", Statistic: 4.1, Limit: 13.1},
		{ID: "F7", Item: "P16", Kind: survey.NotCovered, Grade: survey.Hint, Statement: "The readings say nothing about pipe P16: no tap lies beyond it.", Rounds: rounds,
			Advice: "Read at N14 in a flowing round."},
		{ID: "F8", Item: "P19", Kind: survey.NotCovered, Grade: survey.Hint, Statement: "The readings say nothing about pipe P19: no tap lies beyond it.", Rounds: rounds,
			Advice: "Read at N17 in a flowing round."},
		{ID: "F9", Item: "SV-036", Kind: survey.NotCovered, Grade: survey.Hint, Statement: "A valve SV-036 half shut would change no reading by more than 0.04 m: not visible at these flows.", Rounds: rounds,
			Advice: "Draw 40 L/s or more past it, or turn it."},
	}
}
