package check

import (
	"cmp"
	"fmt"
	"math"
	"slices"

	"tapround/survey"
	"tapround/survey/unit"
	"tapround/survey/water"
)

// notFull says where the piezometric line lies below the pipe or its tap: the water
// there is under less than atmospheric pressure, air comes out or is drawn in, and the
// line may not run full. Between taps of one pipe the line is taken as straight and held
// against the long section in levels.csv. Points open to the air are left out.
func notFull(v *view) []survey.Alert {
	var out []survey.Alert
	for _, t := range v.s.Taps {
		if k := v.points[t.Point].Kind; t.Point != "" && k != survey.Junction {
			continue
		}
		var lows []low
		for _, r := range v.rounds {
			for _, h := range r.heads {
				if h.Tap != t.Name || h.Quantity != survey.PiezometricHead {
					continue
				}
				level, where := t.Elevation, "tap "+t.Name
				u := math.Sqrt(math.Max(0, h.U()*h.U()-h.PerTap*h.PerTap*h.TapSD*h.TapSD)) // the tap's level cancels
				if z, ok := v.levelOf(t.Pipe, t.At); ok && z > level {
					level, where, u = z, fmt.Sprintf("pipe %s at %s", t.Pipe, t.Name), h.U()
				}
				lows = appendLow(lows, low{r, h.Value - level, u, where, h.Density * h.Gravity, h.Sources()}, v.limits.aboveLevel.value)
			}
		}
		if len(lows) > 0 {
			out = append(out, v.notFullAlert(t.Name, lows))
		}
	}
	for _, l := range v.s.Levels {
		var lows []low
		for _, r := range v.rounds {
			if x, ok := v.between(r, l); ok {
				lows = appendLow(lows, x, v.limits.aboveLevel.value)
			}
		}
		if len(lows) > 0 {
			out = append(out, v.notFullAlert(l.Pipe, lows))
		}
	}
	return out
}

// low is a place where the piezometric head stands margin above the pipe, in a round.
type low struct {
	round     round
	margin, u float64 // m
	where     string
	weight    float64 // rho g
	sources   []survey.Source
}

func appendLow(ls []low, x low, limit float64) []low {
	if x.margin >= limit {
		return ls
	}
	return append(ls, x)
}

// levelOf is the pipe's own level at a chainage by its long section, which its two
// points end; ok is false where levels.csv has no row of the pipe.
func (v *view) levelOf(pipe string, at float64) (z float64, ok bool) {
	p := v.pipes[pipe]
	section := []survey.Level{{At: 0, Elevation: v.points[p.From].Elevation}, {At: p.Length, Elevation: v.points[p.To].Elevation}}
	for _, l := range v.s.Levels {
		if l.Pipe == pipe {
			section = append(section, l)
			ok = true
		}
	}
	if !ok {
		return 0, false
	}
	slices.SortStableFunc(section, func(a, b survey.Level) int { return cmp.Compare(a.At, b.At) })
	for i := 1; i < len(section); i++ {
		if a, b := section[i-1], section[i]; at <= b.At && b.At > a.At {
			return a.Elevation + (b.Elevation-a.Elevation)*(at-a.At)/(b.At-a.At), true
		}
	}
	return section[len(section)-1].Elevation, true
}

// between holds one place of a pipe's long section against the straight line between
// the nearest readings either side of it.
func (v *view) between(r round, l survey.Level) (low, bool) {
	var before, after *survey.Head
	var a, b float64
	for i, h := range r.heads {
		at, on := v.onOrAtEnd(v.pipes[l.Pipe], v.taps[h.Tap])
		if !on || h.Quantity != survey.PiezometricHead {
			continue
		}
		if at < l.At && (before == nil || at > a) {
			before, a = &r.heads[i], at
		}
		if at > l.At && (after == nil || at < b) {
			after, b = &r.heads[i], at
		}
	}
	if before == nil || after == nil {
		return low{}, false
	}
	t := (l.At - a) / (b - a)
	variance := (1-t)*(1-t)*covariance(*before, *before, true) + t*t*covariance(*after, *after, true) + 2*t*(1-t)*covariance(*before, *after, false)
	return low{r, (1-t)*before.Value + t*after.Value - l.Elevation, math.Sqrt(variance),
		fmt.Sprintf("pipe %s at %g m", l.Pipe, l.At), before.Density * before.Gravity,
		append(append(before.Sources(), after.Sources()...), l.Source)}, true
}

// notFullAlert words the lows of one place over the rounds, by the deepest.
func (v *view) notFullAlert(subject string, lows []low) survey.Alert {
	worst := slices.MinFunc(lows, func(a, b low) int { return cmp.Compare(a.margin, b.margin) })
	var rounds []string
	a := survey.Alert{Rule: "piezometric head below the pipe", Subject: subject}
	for _, x := range lows {
		rounds = appendNew(rounds, x.round.Name)
		a.Sources = append(a.Sources, x.sources...)
	}
	sure := "stands"
	if -worst.margin <= v.limits.apart.value*worst.u {
		sure = "seems to stand"
	}
	a.Statement = fmt.Sprintf("The piezometric head %s below %s in %s: the line may not be full there.", sure, worst.where, roundsNamed(rounds))
	a.Evidence = fmt.Sprintf("by %s (± one standard uncertainty) in round %s", unit.Metre.Format(-worst.margin, worst.u), worst.round.Name)
	a.Limit = v.limits.aboveLevel.String()
	a.Action = "Do not use these readings for roughness. Water under less than atmospheric pressure draws in air and what lies outside a leak: reduce the draw-off, slowly. Local codes and licensed practice decide."
	a.Stay = sure == "stands"

	temperature := worst.round.WaterTemperature.Or(v.s.Info.WaterTemperature)
	atmosphere := worst.round.Barometer.Or(water.StandardAtmosphere(v.s.Info.SiteLevel))
	absolute, boils := atmosphere+worst.weight*worst.margin, water.VapourPressure(math.Max(temperature, 0))
	switch {
	case absolute < boils-v.limits.apart.value*worst.u*worst.weight:
		a.Rule, a.Stay = "pressure below the vapour pressure", true
		a.Statement = fmt.Sprintf("At %s in round %s the head means an absolute pressure below that at which water boils: no water column stands that low, so a reading, its unit or a level is wrong.", worst.where, worst.round.Name)
		a.Action = "Read it again, look whether the gauge shows absolute pressure, and check the level."
	case absolute < boils+unit.Kilopascal.ToSI(v.limits.vapour.value):
		a.Rule, a.Stay = "pressure near the vapour pressure", true
		a.Statement = fmt.Sprintf("At %s in round %s the pressure comes near that at which water boils: the column can part there, and strike when it joins.", worst.where, worst.round.Name)
		a.Limit = v.limits.vapour.String()
	default:
		return a
	}
	a.Evidence += fmt.Sprintf("; absolute pressure %s, vapour pressure %s", kilopascals(absolute), kilopascals(boils))
	return a
}

func kilopascals(p float64) string { return unit.Significant(unit.Kilopascal.FromSI(p), 3) + " kPa" }
