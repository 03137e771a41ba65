package cli

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"slices"

	"tapround/calibrate"
	"tapround/calibrate/fault"
	"tapround/report"
	"tapround/survey"
	"tapround/survey/catalogue"
	"tapround/survey/check"
	"tapround/survey/correct"
	"tapround/survey/csvfile"
	"tapround/survey/head"
)

// data is a survey as far as it goes without a model.
type data struct {
	survey    *survey.Survey
	corrected []survey.Corrected
	heads     []survey.Head
	alerts    []survey.Alert
	problems  survey.Problems
}

// readSurvey goes from the tables to heads. All problems of the folder come back;
// where one is fatal nothing else was computed.
func readSurvey(folder fs.FS) data {
	s, problems := csvfile.ReadFolder(folder)
	problems = append(problems, catalogue.Complete(s)...)
	problems = append(problems, s.Validate()...)
	slices.SortStableFunc(problems, func(a, b survey.Problem) int { return int(b.Severity) - int(a.Severity) })
	d := data{survey: s, problems: problems}
	if problems.Fatal() {
		return d
	}
	var more survey.Problems
	d.corrected, more = correct.Readings(s)
	d.problems = append(d.problems, more...)
	d.heads, more = head.FromCorrected(s, d.corrected)
	d.problems = append(d.problems, more...)
	if !d.problems.Fatal() {
		d.alerts = check.Heads(s, d.heads)
	}
	return d
}

// reconcile goes the whole way: tables, readings, corrected readings, heads, fit,
// findings, report. places name a route to draw; nil: the main ones.
func reconcile(d data, places []string) (*report.Result, *fault.Diagnosis, error) {
	model, err := calibrate.New(d.survey, d.heads, calibrate.DefaultPriors())
	if err != nil {
		return nil, nil, cannot(err)
	}
	routes, err := routesOf(model, places)
	if err != nil {
		return nil, nil, err
	}
	diagnosis, err := fault.Diagnose(model, fault.DefaultSettings(d.survey))
	if err != nil {
		return nil, nil, cannot(err)
	}
	return report.New(report.Input{
		Tool: report.Tool{Name: "tapround", Version: version()}, Survey: d.survey, Corrected: d.corrected, Heads: d.heads,
		Diagnosis: diagnosis, Problems: d.problems, Alerts: d.alerts, Settings: settings(d.survey, model, diagnosis), Routes: routes,
	}), diagnosis, nil
}

func routesOf(m *calibrate.Model, places []string) ([]calibrate.Way, error) {
	if len(places) == 0 {
		return nil, nil
	}
	w, err := m.RouteThrough(places)
	if err != nil {
		return nil, &failure{code: exitUsage, err: fmt.Errorf("--route: %w", err)}
	}
	return []calibrate.Way{w}, nil
}

// cannot marks an error of the model as "could not be computed".
func cannot(err error) error {
	return &failure{code: exitCannot, err: err, hint: "tapround check shows what was read; the message says which place or round makes it impossible"}
}

// openFolder gives the survey folder as a file system.
func openFolder(path string) (fs.FS, error) {
	info, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return nil, &failure{code: exitInput, err: fmt.Errorf("there is no folder %q", path), hint: "name the folder that holds survey.csv, points.csv, pipes.csv and the other tables"}
	case err != nil:
		return nil, &failure{code: exitInput, err: err}
	case !info.IsDir():
		return nil, &failure{code: exitInput, err: fmt.Errorf("%q is a file, not a survey folder", path), hint: "name the folder that the file lies in"}
	}
	return os.DirFS(path), nil
}
