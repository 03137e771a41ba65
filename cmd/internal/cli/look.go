package cli

import (
	"path/filepath"

	"github.com/spf13/cobra"

	"tapround/report"
	"tapround/report/table"
	"tapround/report/text"
	"tapround/survey"
)

func newCheck(e *env) *cobra.Command {
	var strict, quiet bool
	c := &cobra.Command{
		Use:   "check FOLDER",
		Short: "look at the data alone, while the crew is still at the tap",
		Long: `check reads a survey folder and says how each file was understood, which rows could
not be used and why, and what the readings themselves show to be wrong: gauges
that disagree at no flow, readings that look exchanged or in another unit, losses
too small for the gauges. It fits nothing.`,
		Example: "  tapround check surveys/2026-03-harrowgill",
		Args:    cobra.ExactArgs(1),
		RunE: func(_ *cobra.Command, args []string) error {
			fsys, err := openFolder(args[0])
			if err != nil {
				return err
			}
			d := readSurvey(fsys)
			o := text.Options{Colour: e.colour}
			if !quiet {
				if err := text.Understood(e.out, d.survey.Inputs, o); err != nil {
					return err
				}
			}
			if d.problems.Fatal() {
				return refuse(e, d.problems)
			}
			if !quiet {
				if err := text.Problems(e.out, d.problems, o); err != nil {
					return err
				}
				if err := text.Alerts(e.out, d.alerts, o); err != nil {
					return err
				}
			}
			if strict && (len(d.alerts) > 0 || len(d.problems.Of(survey.SetAside)) > 0) {
				return &failure{code: exitStrict, silent: true}
			}
			return nil
		},
	}
	c.Flags().BoolVar(&strict, "strict", false, "end with code 3 if any row was set aside or any check spoke")
	c.Flags().BoolVar(&quiet, "quiet", false, "print nothing but errors")
	return c
}

func newHeads(e *env) *cobra.Command {
	var out string
	var quiet bool
	c := &cobra.Command{
		Use:   "heads FOLDER",
		Short: "turn the readings into heads, without a model",
		Long: `heads corrects each reading for its gauge, brings it to the tap's level and prints
pressure head, piezometric head and standard uncertainty; with --out it writes
heads.csv too. It fits nothing, so total heads stay empty: they need the flow.`,
		Example: "  tapround heads surveys/2026-03-harrowgill\n  tapround heads surveys/2026-03-harrowgill --out /tmp/heads",
		Args:    cobra.ExactArgs(1),
		RunE: func(_ *cobra.Command, args []string) error {
			fsys, err := openFolder(args[0])
			if err != nil {
				return err
			}
			d := readSurvey(fsys)
			if d.problems.Fatal() {
				return refuse(e, d.problems)
			}
			r := report.New(report.Input{Tool: report.Tool{Name: "tapround", Version: version()}, Survey: d.survey,
				Corrected: d.corrected, Heads: d.heads, Problems: d.problems, Alerts: d.alerts})
			if out != "" {
				files, err := table.Files(r)
				if err != nil {
					return err
				}
				if err := writeFiles(out, map[string][]byte{"heads.csv": files["heads.csv"]}); err != nil {
					return err
				}
			}
			if quiet {
				return nil
			}
			return text.Heads(e.out, r.Heads, text.Options{Colour: e.colour})
		},
	}
	c.Flags().StringVar(&out, "out", "", "folder to write heads.csv into")
	c.Flags().BoolVar(&quiet, "quiet", false, "print nothing but errors")
	return c
}

func newDraw(e *env) *cobra.Command {
	var o drawOptions
	c := &cobra.Command{
		Use:   "draw FOLDER",
		Short: "draw the grade lines along a route",
		Long: `draw fits the survey and draws pipe level, piezometric and total head lines, as
expected and as fitted, with the measured points and their 95 % bars, along a
route given by its points or taps (the main route where none is given), one
picture for each round.`,
		Example: "  tapround draw surveys/2026-03-harrowgill --route R1,N9 --round E --format svg --out /tmp/pictures",
		Args:    cobra.ExactArgs(1),
		RunE: func(_ *cobra.Command, args []string) error {
			return runDraw(e, args[0], o)
		},
	}
	c.Flags().StringSliceVar(&o.route, "route", nil, "points or taps the route passes, in order, separated by commas")
	c.Flags().StringVar(&o.round, "round", "", "one round only (default all)")
	c.Flags().StringVar(&o.format, "format", "svg", "svg, png or pdf")
	c.Flags().BoolVar(&o.quiet, "quiet", false, "print nothing but errors")
	c.Flags().StringVar(&o.out, "out", "", "folder for the pictures (default "+filepath.Join("FOLDER", "results")+")")
	return c
}
