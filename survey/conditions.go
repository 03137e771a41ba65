package survey

import "math"

// RoundConditions is what holds in one round, with the rows for all rounds and the
// overrides resolved. Rows keep their Source, and their Round as written: an error
// shared by all rounds (Round EveryRound) can so be told from one of the round's own.
type RoundConditions struct {
	Levels   map[string]Condition   // by point; Value not stated: to be estimated
	DrawOffs map[string][]Condition // by point, in the order of the table; several add
	Speeds   map[string]Condition   // by machine, rad/s
	Stopped  map[string]bool        // machines
	Shut     map[string]bool        // pipes and fittings
}

// defaultDrawOffSD is the relative standard uncertainty of a draw-off that states none.
const defaultDrawOffSD = 0.05

// InForce gives the conditions of a round. A row for the round overrides the rows for
// all rounds of the same item and kind; two draw-offs at one point in one round add;
// open undoes shut and stopped, a speed undoes stopped and stopped a speed. Where no standard
// uncertainty is stated that of a stated draw-off is 5 % of its value and that of
// everything else stated is 0; a row without a value keeps an unstated one, for what
// is to be estimated has no uncertainty yet.
func (s *Survey) InForce(round string) RoundConditions {
	f := RoundConditions{Levels: map[string]Condition{}, DrawOffs: map[string][]Condition{}, Speeds: map[string]Condition{},
		Stopped: map[string]bool{}, Shut: map[string]bool{}}
	for _, pass := range []string{EveryRound, round} {
		own := map[string]bool{} // points whose draw-offs of an earlier pass are overridden
		for _, c := range s.Conditions {
			if c.Round != pass {
				continue
			}
			if c.Value.OK && !c.SD.OK {
				c.SD = Some(0)
				if c.Kind == DrawOff {
					c.SD = Some(defaultDrawOffSD * math.Abs(c.Value.V))
				}
			}
			switch c.Kind {
			case LevelIs:
				f.Levels[c.Item] = c
			case DrawOff:
				if !own[c.Item] {
					own[c.Item] = true
					f.DrawOffs[c.Item] = nil
				}
				f.DrawOffs[c.Item] = append(f.DrawOffs[c.Item], c)
			case SpeedIs:
				f.Speeds[c.Item] = c
				delete(f.Stopped, c.Item)
			case Stopped:
				f.Stopped[c.Item] = true
				delete(f.Speeds, c.Item)
			case ShutOff:
				f.Shut[c.Item] = true
			case OpenAgain:
				delete(f.Shut, c.Item)
				delete(f.Stopped, c.Item)
			}
		}
	}
	return f
}
