package survey

import "math"

// RoundConditions is what holds in one round, with the rows for all rounds and the
// overrides resolved. Rows keep their Source, so that an error shared by all rounds
// (Round "*") can be told from one of the round's own.
type RoundConditions struct {
	Levels   map[string]Condition   // by point
	DrawOffs map[string][]Condition // by point; several add
	Speeds   map[string]Condition   // by machine
	Stopped  map[string]bool        // machines
	Shut     map[string]bool        // pipes and fittings
}

// defaultDrawOffSD is the relative standard uncertainty of a draw-off that states none.
const defaultDrawOffSD = 0.05

// InForce gives the conditions of a round. A row for the round overrides the row for
// all rounds of the same item and kind; two draw-offs at one point in one round add;
// open undoes shut and stopped. A draw-off that states no standard uncertainty gets 5 %
// of its value, everything else 0.
func (s *Survey) InForce(round string) RoundConditions {
	f := RoundConditions{Levels: map[string]Condition{}, DrawOffs: map[string][]Condition{}, Speeds: map[string]Condition{},
		Stopped: map[string]bool{}, Shut: map[string]bool{}}
	for _, pass := range []string{EveryRound, round} {
		own := map[string]bool{}
		for _, c := range s.Conditions {
			if c.Round != pass {
				continue
			}
			switch c.Kind {
			case LevelIs:
				f.Levels[c.Item] = c
			case SpeedIs:
				f.Speeds[c.Item] = c
				delete(f.Stopped, c.Item) // a speed for the round sets it running
			case Stopped:
				f.Stopped[c.Item] = true
			case ShutOff:
				f.Shut[c.Item] = true
			case OpenAgain:
				delete(f.Shut, c.Item)
				delete(f.Stopped, c.Item)
			case DrawOff:
				if !c.SD.OK && c.Value.OK {
					c.SD = Some(defaultDrawOffSD * math.Abs(c.Value.V))
				}
				if !own[c.Item] {
					own[c.Item] = true
					f.DrawOffs[c.Item] = nil
				}
				f.DrawOffs[c.Item] = append(f.DrawOffs[c.Item], c)
			}
		}
	}
	return f
}
