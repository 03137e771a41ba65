package cli

import (
	"bytes"
	"fmt"
	"path/filepath"
	"strings"

	"tapround/report"
	"tapround/report/figure"
)

type drawOptions struct {
	out, format, round string
	route              []string
	quiet              bool
}

func runDraw(e *env, folder string, o drawOptions) error {
	switch o.format {
	case "svg", "png", "pdf":
	default:
		return &failure{code: exitUsage, err: fmt.Errorf("--format %q is not one of svg, png, pdf", o.format)}
	}
	fsys, err := openFolder(folder)
	if err != nil {
		return err
	}
	d := readSurvey(fsys)
	if d.problems.Fatal() {
		return refuse(e, d.problems)
	}
	result, _, err := reconcile(d, o.route)
	if err != nil {
		return err
	}
	files, err := pictures(result, o)
	if err != nil {
		return err
	}
	if o.out == "" {
		o.out = filepath.Join(folder, "results")
	}
	if err := writeFiles(o.out, files); err != nil {
		return err
	}
	if !o.quiet {
		for _, name := range sortedNames(files) {
			fmt.Fprintln(e.out, filepath.Join(o.out, name))
		}
	}
	return nil
}

// pictures renders one picture for each route and round.
func pictures(r *report.Result, o drawOptions) (map[string][]byte, error) {
	files := map[string][]byte{}
	for _, p := range r.Profiles {
		if o.round != "" && p.Round != o.round {
			continue
		}
		var b bytes.Buffer
		if err := figure.Profile(p, figure.Options{}).Render(&b, o.format); err != nil {
			return nil, err
		}
		name := fmt.Sprintf("profile-%s-round-%s.%s", plainName(p.Title), plainName(p.Round), o.format)
		files[name] = b.Bytes()
	}
	if len(files) == 0 {
		return nil, &failure{code: exitUsage, err: fmt.Errorf("--round %q is not a round of this survey", o.round),
			hint: "its rounds are " + strings.Join(r.Survey.Rounds, ", ")}
	}
	return files, nil
}

// plainName makes a file name that any system takes.
func plainName(s string) string {
	return strings.Map(func(r rune) rune {
		switch {
		case r >= 'a' && r <= 'z', r >= 'A' && r <= 'Z', r >= '0' && r <= '9', r == '-', r == '_':
			return r
		}
		return '-'
	}, s)
}
