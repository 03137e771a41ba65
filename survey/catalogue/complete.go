package catalogue

import (
	"fmt"
	"math"
	"strconv"

	"tapround/survey"
	"tapround/survey/unit"
)

// Complete fills in what the survey leaves to the built-in tables: Roughness or C
// of a pipe, by the friction law in force, and K of a fitting. FromTable of what
// is filled is set to the source, and a Notice tells the user the value, where it
// comes from and how far published values spread. What the survey states is never
// touched, and the spread is not filled: it has its own default.
//
// The age of a pipe is counted from the year it was laid to the survey's
// as_new_year, else to the year of the last round or reading.
//
// Where no value can be given the Problem is Fatal and says what to write: a
// material that is not in the table, the fitting kind other, a change of bore
// without its other bore, and a pipe that states only the coefficient of the
// other friction law. That last is not converted behind the user's back, but
// the remedy names the value that would do.
func Complete(s *survey.Survey) survey.Problems {
	problems := lawProblems(s)
	year := referenceYear(s)
	if !problems.Fatal() {
		for i := range s.Pipes {
			problems = append(problems, completePipe(&s.Pipes[i], s.Info.FrictionLaw, year)...)
		}
	}
	pipes := map[string]*survey.Pipe{}
	for i := range s.Pipes {
		pipes[s.Pipes[i].Name] = &s.Pipes[i]
	}
	for i := range s.Fittings {
		problems = append(problems, completeFitting(&s.Fittings[i], pipes[s.Fittings[i].Pipe])...)
	}
	return problems
}

// lawProblems answers the commonest slip with one line instead of one a pipe: a
// table of coefficients of one law under the other.
func lawProblems(s *survey.Survey) survey.Problems {
	var rough, c int
	for _, p := range s.Pipes {
		if p.Roughness.OK {
			rough++
		}
		if p.C.OK {
			c++
		}
	}
	has, wants, other, column := rough, "roughness", survey.HazenWilliams, "c_value"
	if s.Info.FrictionLaw == survey.HazenWilliams {
		has, wants, other, column = c, "c_value", survey.DarcyWeisbach, "roughness"
	}
	stated := rough + c - has
	if has > 0 || stated < 2 || stated < len(s.Pipes) {
		return nil
	}
	return survey.Problems{{
		Source: survey.Source{File: s.Pipes[0].Source.File}, Severity: survey.Fatal, Column: column,
		Reason: fmt.Sprintf("every pipe states a %s and none a %s, but friction_law is %s", column, wants, s.Info.FrictionLaw),
		Remedy: fmt.Sprintf("write friction_law, %s in survey.csv, or fill the column %s", other, wants),
	}}
}

// referenceYear is the year the expected values are for; NaN where nothing
// dates the survey.
func referenceYear(s *survey.Survey) float64 {
	if s.Info.AsNewYear.OK {
		return s.Info.AsNewYear.V
	}
	latest := 0
	for _, r := range s.Rounds {
		if !r.Start.IsZero() {
			latest = max(latest, r.Start.Year())
		}
	}
	for _, r := range s.Readings {
		if !r.Time.IsZero() {
			latest = max(latest, r.Time.Year())
		}
	}
	if latest == 0 {
		return math.NaN()
	}
	return float64(latest)
}

func completePipe(p *survey.Pipe, law survey.FrictionLaw, year float64) survey.Problems {
	wanted, other := &p.Roughness, p.C
	column, otherColumn := "roughness", "c_value"
	if law == survey.HazenWilliams {
		wanted, other = &p.C, p.Roughness
		column, otherColumn = "c_value", "roughness"
	}
	if wanted.OK {
		return nil
	}
	problem := survey.Problem{Source: p.Source, Severity: survey.Fatal, Column: column}
	if other.OK {
		problem.Reason = fmt.Sprintf("pipe %s states a %s, but friction_law is %s", p.Name, otherColumn, law)
		problem.Remedy = fmt.Sprintf("write its %s%s, or change friction_law in survey.csv", column, equivalent(p, law))
		return survey.Problems{problem}
	}
	if p.Material == "" {
		problem.Column = "material"
		problem.Reason = fmt.Sprintf("pipe %s states neither a %s nor a material", p.Name, column)
		problem.Remedy = "write one of them; materials in the built-in table: " + materialNames()
		return survey.Problems{problem}
	}
	age := math.NaN()
	if p.Laid.OK {
		age = year - p.Laid.V
	}
	e, ok := Roughness(p.Material, age)
	value := fmt.Sprintf("%s mm (range %s to %s)", unit.Significant(1e3*e.Value, 2), unit.Significant(1e3*e.Low, 2), unit.Significant(1e3*e.High, 2))
	if law == survey.HazenWilliams {
		e, ok = HazenWilliams(p.Material, age, p.Bore)
		value = fmt.Sprintf("%s (range %s to %s)", unit.Significant(e.Value, 3), unit.Significant(e.Low, 2), unit.Significant(e.High, 3))
	}
	if !ok {
		problem.Column, problem.Text = "material", p.Material
		problem.Reason = fmt.Sprintf("pipe %s states no %s, and the built-in table has no such material, or the words name two", p.Name, column)
		if law == survey.HazenWilliams && !(p.Bore > 0) {
			problem.Reason = fmt.Sprintf("pipe %s states no %s, and has no bore to find one for", p.Name, column)
		}
		problem.Remedy = fmt.Sprintf("write its %s, or one of: %s", column, materialNames())
		return survey.Problems{problem}
	}
	*wanted = survey.Some(e.Value)
	if law == survey.HazenWilliams {
		// The printed coefficient is a whole number; so is this.
		*wanted = survey.Some(math.Round(e.Value))
	}
	p.FromTable = "built-in table, " + p.Material + withAge(age) + ": " + e.Source
	return survey.Problems{{
		Source: p.Source, Severity: survey.Notice, Column: column,
		Reason: fmt.Sprintf("pipe %s states none: %s taken for %s%s%s", p.Name, value, p.Material, withAge(age), because(e.Note)),
		Remedy: "write the expected value in " + column + " where it is known better",
	}}
}

// equivalent says which coefficient of the law in force goes with the stated one.
func equivalent(p *survey.Pipe, law survey.FrictionLaw) string {
	if !(p.Bore > 0) {
		return ""
	}
	if law == survey.HazenWilliams {
		return fmt.Sprintf(" (%s mm is C %s in this bore at 0.9 m/s)", unit.Significant(1e3*p.Roughness.V, 2), unit.Significant(coefficientC(p.Roughness.V, p.Bore), 3))
	}
	k, ok := roughnessOfC(p.C.V, p.Bore)
	if !ok {
		return ""
	}
	return fmt.Sprintf(" (C %s is about %s mm in this bore at 0.9 m/s)", unit.Significant(p.C.V, 3), unit.Significant(1e3*k, 2))
}

// roughnessOfC is the roughness whose coefficientC is c; false where the pipe
// would have to be smoother than smooth, or rougher than a tenth of its bore.
func roughnessOfC(c, bore float64) (float64, bool) {
	low, high := 0.0, 0.1*bore
	if !(coefficientC(low, bore) >= c && c >= coefficientC(high, bore)) {
		return 0, false
	}
	for range 60 { // C falls with k: halve the interval down to rounding
		if mid := (low + high) / 2; coefficientC(mid, bore) > c {
			low = mid
		} else {
			high = mid
		}
	}
	return high, true
}

func completeFitting(f *survey.Fitting, p *survey.Pipe) survey.Problems {
	if f.K.OK {
		return nil
	}
	problem := survey.Problem{Source: f.Source, Severity: survey.Fatal, Column: "loss_coefficient",
		Remedy: "write its loss_coefficient, from the maker or a handbook"}
	bore, otherBore := math.NaN(), math.NaN()
	if p != nil {
		bore, otherBore = p.Bore, f.Bore.Or(math.NaN())
	}
	if f.Kind.ChangesBore() {
		if reason := boreTrouble(f, p); reason != "" {
			problem.Column, problem.Reason = "bore", reason
			if f.Bore.OK {
				problem.Text = unit.Significant(1e3*f.Bore.V, 4) + " mm"
			}
			problem.Remedy = "write the bore on its other side, or its loss_coefficient"
			return survey.Problems{problem}
		}
	}
	e, ok := LossCoefficient(f.Kind, bore, otherBore)
	if !ok {
		problem.Reason = fmt.Sprintf("fitting %s states none, and the built-in table has none for kind %s", f.Name, f.Kind)
		return survey.Problems{problem}
	}
	f.K = survey.Some(e.Value)
	f.FromTable = "built-in table, " + string(f.Kind) + ": " + e.Source
	return survey.Problems{{
		Source: f.Source, Severity: survey.Notice, Column: "loss_coefficient",
		Reason: fmt.Sprintf("fitting %s states none: K %s taken for %s (range %s to %s)%s", f.Name,
			unit.Significant(e.Value, 2), f.Kind, unit.Significant(e.Low, 2), unit.Significant(e.High, 2), because(e.Note)),
		Remedy: "write the loss_coefficient where it is known better",
	}}
}

// boreTrouble says why the rule for a change of bore cannot be used; empty where
// it can. At the pipe's from end the other bore may be the upstream one, so that
// either order is taken there.
func boreTrouble(f *survey.Fitting, p *survey.Pipe) string {
	switch {
	case p == nil:
		return fmt.Sprintf("fitting %s is on pipe %q, which pipes.csv does not have", f.Name, f.Pipe)
	case !f.Bore.OK:
		return fmt.Sprintf("%s %s states neither the other bore nor a loss coefficient", f.Kind, f.Name)
	case !(f.Bore.V > 0 && p.Bore > 0):
		return fmt.Sprintf("%s %s needs two bores above zero", f.Kind, f.Name)
	case f.Bore.V == p.Bore:
		return fmt.Sprintf("%s %s has the bore of its own pipe on both sides", f.Kind, f.Name)
	}
	widens := f.Bore.V > p.Bore
	if f.At > 0 && widens != (f.Kind == survey.Enlargement) {
		return fmt.Sprintf("%s %s leads from %s to %s mm, which is the other way", f.Kind, f.Name,
			strconv.FormatFloat(1e3*p.Bore, 'g', 6, 64), strconv.FormatFloat(1e3*f.Bore.V, 'g', 6, 64))
	}
	return ""
}

func withAge(age float64) string {
	if math.IsNaN(age) {
		return ""
	}
	return fmt.Sprintf(", %.0f years old", math.Max(0, age))
}

func because(note string) string {
	if note == "" {
		return ""
	}
	return "; " + note
}
