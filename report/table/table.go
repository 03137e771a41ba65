// Package table writes a result as the CSV tables of the contract and as one JSON
// document. It chooses and formats; every number is in the result already.
//
// The tables are UTF-8 with LF line ends and comma, and follow the rules that input
// tables follow, so that the tool, a script or a spreadsheet can read them back:
// units in the headings, an empty cell for what is not known, one row a line.
package table

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"io"

	"tapround/report"
)

// column is one column of a table of T: its heading and what stands in a cell.
type column[T any] struct {
	heading string
	cell    func(T) string
}

// Files gives every table and result.json by file name. A table without rows has
// its heading all the same.
func Files(r *report.Result) (map[string][]byte, error) {
	files := map[string][]byte{}
	var failed error
	put := func(name string, data []byte, err error) {
		files[name] = data
		if err != nil && failed == nil {
			failed = fmt.Errorf("%s: %w", name, err)
		}
	}
	data, err := render(heads, r.Heads)
	put("heads.csv", data, err)
	data, err = render(flows, r.Flows)
	put("flows.csv", data, err)
	data, err = render(gradeLines, r.GradeLines)
	put("grade_lines.csv", data, err)
	data, err = render(parameters, r.Parameters)
	put("parameters.csv", data, err)
	data, err = render(residuals, r.Residuals)
	put("residuals.csv", data, err)
	data, err = render(losses, r.Losses)
	put("losses.csv", data, err)
	data, err = render(findings, r.Findings)
	put("findings.csv", data, err)
	var doc bytes.Buffer
	err = JSON(&doc, r)
	put("result.json", doc.Bytes(), err)
	if failed != nil {
		return nil, failed
	}
	return files, nil
}

// JSON writes the whole result as one document. A number that is not finite cannot
// stand in JSON and is an error.
func JSON(w io.Writer, r *report.Result) error {
	e := json.NewEncoder(w)
	e.SetIndent("", "  ")
	e.SetEscapeHTML(false)
	if err := e.Encode(r); err != nil {
		return fmt.Errorf("writing the result as JSON: %w", err)
	}
	return nil
}

func render[T any](columns []column[T], rows []T) ([]byte, error) {
	var b bytes.Buffer
	w := csv.NewWriter(&b)
	record := make([]string, len(columns))
	for i, c := range columns {
		record[i] = c.heading
	}
	if err := w.Write(record); err != nil {
		return nil, err
	}
	for _, row := range rows {
		for i, c := range columns {
			record[i] = c.cell(row)
		}
		if err := w.Write(record); err != nil {
			return nil, err
		}
	}
	w.Flush()
	return b.Bytes(), w.Error()
}
