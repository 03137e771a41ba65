// Package page makes report.html: the whole story of a result on one page that needs
// nothing but itself. It opens from a disc without network, loads nothing, runs no
// script, reads on a telephone, and prints. It chooses, orders and formats; every
// number is in the result already.
package page

import (
	"bytes"
	"crypto/sha256"
	_ "embed"
	"encoding/base64"
	"fmt"
	"html/template"

	"tapround/report"
)

//go:embed page.html
var pageText string

//go:embed style.css
var styleText string

var page = template.Must(template.New("page").Parse(pageText))

// HTML gives the page. The same result gives the same bytes.
func HTML(r *report.Result) ([]byte, error) {
	v := newView(r)
	// The style is named by its digest, so that the policy can forbid any other.
	sum := sha256.Sum256([]byte(styleText))
	v.Style = template.CSS(styleText)
	v.Policy = "default-src 'none'; style-src 'sha256-" + base64.StdEncoding.EncodeToString(sum[:]) + "'; base-uri 'none'; form-action 'none'"
	var b bytes.Buffer
	if err := page.Execute(&b, v); err != nil {
		return nil, fmt.Errorf("making report.html: %w", err)
	}
	return b.Bytes(), nil
}
