package cli

import (
	"fmt"
	"path/filepath"

	"github.com/spf13/cobra"

	"tapround/report"
	"tapround/report/page"
	"tapround/report/table"
	"tapround/report/text"
	"tapround/survey"
)

type reconcileOptions struct {
	out    string
	strict bool
	quiet  bool
	json   bool
}

func newReconcile(e *env) *cobra.Command {
	var o reconcileOptions
	c := &cobra.Command{
		Use:   "reconcile FOLDER",
		Short: "fit the survey and say what is wrong",
		Long: `reconcile reads a survey folder, turns its readings into heads, fits the steady-flow
model to all rounds together, and says what the readings prove, what they only
suggest, and what they cannot tell. The result tables, report.html and result.json
go into results/ inside the folder, or into the folder named by --out. The survey's
own files are not touched.`,
		Example: "  tapround reconcile surveys/2026-03-harrowgill\n  tapround reconcile surveys/2026-03-harrowgill --out /tmp/harrowgill --strict",
		Args:    cobra.ExactArgs(1),
		RunE:    func(_ *cobra.Command, args []string) error { return runReconcile(e, args[0], o) },
	}
	c.Flags().StringVar(&o.out, "out", "", "folder for the results (default FOLDER/results)")
	c.Flags().BoolVar(&o.strict, "strict", false, "end with code 3 if anything was set aside or any finding is proven or likely")
	c.Flags().BoolVar(&o.quiet, "quiet", false, "print nothing but errors")
	c.Flags().BoolVar(&o.json, "json", false, "print result.json instead of the summary")
	return c
}

func runReconcile(e *env, folder string, o reconcileOptions) error {
	fsys, err := openFolder(folder)
	if err != nil {
		return err
	}
	d := readSurvey(fsys)
	if d.problems.Fatal() {
		return refuse(e, d.problems)
	}
	result, _, err := reconcile(d, nil)
	if err != nil {
		return err
	}
	if o.out == "" {
		o.out = filepath.Join(folder, "results")
	}
	if err := writeResult(o.out, result); err != nil {
		return err
	}
	if err := show(e, result, o); err != nil {
		return err
	}
	if !result.Fit.Converged {
		return &failure{code: exitCannot, err: fmt.Errorf("the fit did not settle: %s", result.Fit.Status), hint: "the loss table and the heads stand; look at the largest differences in residuals.csv first"}
	}
	if o.strict && strictly(result) {
		return &failure{code: exitStrict, silent: true}
	}
	return nil
}

func show(e *env, r *report.Result, o reconcileOptions) error {
	switch {
	case o.quiet:
		return nil
	case o.json:
		return table.JSON(e.out, r)
	}
	return text.Summary(e.out, r, text.Options{Colour: e.colour, Written: o.out})
}

// writeResult writes every result file, each whole or not at all.
func writeResult(dir string, r *report.Result) error {
	files, err := table.Files(r)
	if err != nil {
		return err
	}
	html, err := page.HTML(r)
	if err != nil {
		return err
	}
	files["report.html"] = html
	return writeFiles(dir, files)
}

// strictly: what --strict is strict about.
func strictly(r *report.Result) bool {
	for _, f := range r.Findings {
		if f.Grade == survey.Proven || f.Grade == survey.Likely {
			return true
		}
	}
	for _, p := range r.Problems {
		if p.Severity == survey.SetAside {
			return true
		}
	}
	return false
}

// refuse prints every problem and ends with the code for bad input.
func refuse(e *env, ps survey.Problems) error {
	if err := text.Problems(e.err, ps, text.Options{Colour: e.colour}); err != nil {
		return err
	}
	n := len(ps.Of(survey.Fatal))
	word := "errors"
	if n == 1 {
		word = "error"
	}
	return &failure{code: exitInput, err: fmt.Errorf("%d %s in the survey's tables; nothing was computed", n, word), hint: "mend the places named above and run it again"}
}
