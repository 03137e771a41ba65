package page

import (
	"bytes"
	"crypto/sha256"
	"encoding/base64"
	"encoding/xml"
	"html"
	"io"
	"reflect"
	"regexp"
	"strings"
	"testing"

	"tapround/report"
	"tapround/report/internal/sample"
	"tapround/survey"
)

func made(t *testing.T, r *report.Result) string {
	t.Helper()
	b, err := HTML(r)
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// element is one element of a page, read by a parser that knows nothing of how the
// page was made.
type element struct {
	name string
	attr map[string]string
	text string // of itself and what is in it
}

// elements reads a page as strict XML, which its HTML is as well, and fails where its
// tags do not nest.
func elements(t *testing.T, page string) []*element {
	t.Helper()
	page = strings.TrimPrefix(page, "<!DOCTYPE html>\n")
	d := xml.NewDecoder(strings.NewReader(page))
	d.Entity = xml.HTMLEntity
	var out, open []*element
	var texts strings.Builder // of the page so far; an element's is a piece of it
	begin := map[*element]int{}
	for {
		tok, err := d.Token()
		if err == io.EOF {
			break
		}
		if err != nil {
			t.Fatalf("not well formed: %v", err)
		}
		switch e := tok.(type) {
		case xml.StartElement:
			x := &element{name: e.Name.Local, attr: map[string]string{}}
			for _, a := range e.Attr {
				x.attr[a.Name.Local] = a.Value
			}
			begin[x] = texts.Len()
			out, open = append(out, x), append(open, x)
		case xml.EndElement:
			if last := open[len(open)-1]; last.name != e.Name.Local {
				t.Fatalf("</%s> ends <%s>", e.Name.Local, last.name)
			}
			last := open[len(open)-1]
			last.text = texts.String()[begin[last]:]
			open = open[:len(open)-1]
		case xml.CharData:
			texts.Write(e)
		}
	}
	if len(open) > 0 {
		t.Fatalf("<%s> has no end", open[len(open)-1].name)
	}
	return out
}

func find(es []*element, name string) []*element {
	var out []*element
	for _, e := range es {
		if e.name == name {
			out = append(out, e)
		}
	}
	return out
}

func TestSameBytes(t *testing.T) {
	a, b := made(t, sample.Harrowgill()), made(t, sample.Harrowgill())
	if a != b {
		t.Error("two pages of one result differ")
	}
}

// The page loads nothing: no address anywhere, no script, no style but the one that
// the policy names by its digest.
func TestSelfContained(t *testing.T) {
	p := made(t, sample.Harrowgill())
	for _, bad := range []string{"http:", "https:", "//", "<script", "<link", "<img", "<iframe", "<object", "@import", "url(", " style=", " src=", "javascript:", " on"} {
		if bad == " on" { // event attributes
			if regexp.MustCompile(`<[^>]* on[a-z]+=`).MatchString(p) {
				t.Error("an element has an event attribute")
			}
			continue
		}
		if strings.Contains(p, bad) {
			t.Errorf("the page contains %q", bad)
		}
	}
	_, rest, _ := strings.Cut(p, "<style>")
	style, _, _ := strings.Cut(rest, "</style>")
	sum := sha256.Sum256([]byte(style))
	es := elements(t, p)
	policy := ""
	for _, m := range find(es, "meta") {
		if m.attr["http-equiv"] == "Content-Security-Policy" {
			policy = m.attr["content"]
		}
	}
	if !strings.Contains(policy, "default-src 'none'") || !strings.Contains(policy, "'sha256-"+base64.StdEncoding.EncodeToString(sum[:])+"'") {
		t.Errorf("the policy %q does not let the page's own style pass", policy)
	}
	if len(p) > 1<<20 {
		t.Errorf("%d bytes", len(p))
	}
}

func TestAccessible(t *testing.T) {
	es := elements(t, made(t, sample.Harrowgill()))
	for _, name := range []string{"header", "nav", "main", "footer", "h1", "title"} {
		if n := len(find(es, name)); n != 1 && name != "title" {
			t.Errorf("%d <%s>", n, name)
		}
	}
	if es[0].name != "html" || es[0].attr["lang"] != "en" {
		t.Error("the page does not say its language")
	}
	ids := map[string]bool{}
	for _, e := range es {
		if id := e.attr["id"]; id != "" {
			if ids[id] {
				t.Errorf("two elements are called %q", id)
			}
			ids[id] = true
		}
	}
	for _, e := range es {
		if h := e.attr["href"]; h != "" && !ids[strings.TrimPrefix(h, "#")] {
			t.Errorf("%q leads nowhere", h)
		}
		for _, l := range strings.Fields(e.attr["aria-labelledby"]) {
			if !ids[l] {
				t.Errorf("<%s> is named by %q, which is not there", e.name, l)
			}
		}
		switch e.name {
		case "th":
			if e.attr["scope"] == "" || e.text == "" {
				t.Errorf("a table heading %q without scope or text", e.text)
			}
		case "section", "article":
			if e.attr["aria-labelledby"] == "" {
				t.Errorf("a %s without a name", e.name)
			}
		case "svg":
			if e.attr["role"] != "img" || e.attr["viewBox"] == "" || e.attr["aria-labelledby"] == "" {
				t.Error("a picture without role, size or name")
			}
		}
	}
	tables, captions := len(find(es, "table")), len(find(es, "caption"))
	if tables == 0 || tables != captions {
		t.Errorf("%d tables, %d captions", tables, captions)
	}
	// Two pictures a profile, for wide and narrow screens.
	if n := len(find(es, "svg")); n != 2*len(sample.Harrowgill().Profiles) || n != len(find(es, "desc")) {
		t.Errorf("%d pictures", n)
	}
}

func flat(s string) string { return strings.Join(strings.Fields(s), " ") }

func TestEverythingIsTold(t *testing.T) {
	r := sample.Harrowgill()
	es := elements(t, made(t, r))
	all := flat(find(es, "main")[0].text)
	says := func(what, s string) {
		t.Helper()
		if !strings.Contains(all, flat(s)) {
			t.Errorf("%s is not told: %q", what, s)
		}
	}
	for _, f := range r.Findings {
		says(f.ID, f.Statement)
		says(f.ID, f.Advice)
		says(f.ID, f.Settle)
		for _, s := range append(append(append([]string(nil), f.Evidence...), f.Rivals...), f.Cautions...) {
			says(f.ID, s)
		}
	}
	// Each finding to act on or to watch has all of it on its own card.
	cards := map[string]string{}
	for _, e := range find(es, "article") {
		cards[e.attr["id"]] = flat(e.text)
	}
	for _, f := range r.Findings[:6] {
		for _, s := range append([]string{f.Statement, f.Advice, f.Settle, string(f.Grade)}, f.Cautions...) {
			if !strings.Contains(cards[f.ID], flat(s)) {
				t.Errorf("the card of %s lacks %q", f.ID, s)
			}
		}
	}
	if h := find(es, "h1")[0].text; h != r.Survey.Title {
		t.Errorf("the page is headed %q", h)
	}
	for _, a := range r.Alerts {
		says("alert", a.Statement+" "+a.Action)
		says("alert", a.Evidence)
	}
	for _, p := range r.Problems {
		says("problem", p.Source.String())
		says("problem", p.Reason)
	}
	for _, in := range r.Inputs {
		says("input", in.File)
		says("input", in.SHA256)
	}
	for _, s := range r.Settings {
		says("setting", s.Name+s.Value)
	}
	for _, p := range r.Parameters {
		says("item", p.Item)
	}
	for _, c := range r.Cautions {
		says("caution", c)
	}
	for _, s := range []string{"9.1 mm (95 %: 6.9 to 12.1)", "13000 GBP a year", "share told by the survey", "3.65 ± 0.17", "tapround v0.9.0", "11.70 (11.54)",
		"A 0.13, B 3.6, C 4.2, D 4.4, E 6.2 m", "58 of 61 readings used", "over 99 % for the loss; its cause is open", "unrecorded flow at N7", "221.4 ± 0.6", "Local codes and licensed practice decide."} {
		says("figure", s)
	}
}

func TestOrder(t *testing.T) {
	es := elements(t, made(t, sample.Harrowgill()))
	var got []string
	for _, s := range find(es, "section") {
		got = append(got, s.attr["id"])
	}
	if want := "short findings lines losses fitted gauges flows data method audit"; strings.Join(got, " ") != want {
		t.Errorf("the order is %v, want %s", got, want)
	}
	// What to do on site never stands without its cautions before it goes on.
	short := flat(find(es, "section")[0].text)
	if a, b := strings.Index(short, "What to do next"), strings.Index(short, "Before anybody works on site"); a < 0 || b < a {
		t.Error("the steps are not followed by the cautions")
	}
}

// Words of statistics stay off the screen.
func TestWords(t *testing.T) {
	es := elements(t, made(t, sample.Harrowgill()))
	body := strings.ToLower(find(es, "body")[0].text)
	for _, w := range []string{"node", "residual", "calibrat", "parameter", "covariance", "misfit", "p ="} {
		if strings.Contains(body, w) {
			t.Errorf("the page says %q", w)
		}
	}
}

// poison puts a text into every string of a value.
func poison(v reflect.Value, s string) {
	switch v.Kind() {
	case reflect.Pointer:
		poison(v.Elem(), s)
	case reflect.Struct:
		for i := range v.NumField() {
			poison(v.Field(i), s)
		}
	case reflect.Slice:
		for i := range v.Len() {
			poison(v.Index(i), s)
		}
	case reflect.String:
		v.SetString(s)
	}
}

func TestEveryTextIsEscaped(t *testing.T) {
	for _, bad := range []string{`<script>alert(1)</script>`, `"><img src=x onerror=alert(1)>`, `'-alert(1)-'`, `</style><svg onload=alert(1)>`, "]]>\x00\x1b[2J\u202e", `{{.Style}}`} {
		r := sample.Harrowgill()
		id := 0
		poison(reflect.ValueOf(r), bad)
		// Names of findings are the tool's own and must stay apart.
		for i := range r.Findings {
			id++
			r.Findings[i].ID = "F" + string(rune('a'+i))
		}
		p := made(t, r)
		es := elements(t, p)
		for _, e := range es {
			for k, v := range e.attr {
				if strings.HasPrefix(k, "on") || (k == "href" && !strings.HasPrefix(v, "#")) {
					t.Errorf("%q made an attribute %s=%q", bad, k, v)
				}
			}
			if e.name == "script" || e.name == "img" {
				t.Errorf("%q made a <%s>", bad, e.name)
			}
		}
		for _, c := range []string{"\x00", "\x1b", "\u202e"} {
			if strings.Contains(p, c) {
				t.Errorf("%q came through", c)
			}
		}
		if n := len(find(es, "style")); n != 1 {
			t.Errorf("%d styles", n)
		}
		if bad[0] != ']' && !strings.Contains(html.UnescapeString(p), bad) {
			t.Errorf("%q is lost instead of escaped", bad)
		}
	}
}

func TestNothingFoundAndNothingAtAll(t *testing.T) {
	r := sample.Harrowgill()
	r.Findings, r.Summary, r.Cautions = nil, nil, nil
	if p := made(t, r); !strings.Contains(p, "Nothing was found that sound works") || strings.Contains(p, `id="findings"`) {
		t.Error("a page without findings does not say so")
	}
	p := made(t, &report.Result{})
	es := elements(t, p)
	if !strings.Contains(p, "no model was fitted") || len(find(es, "section")) != 4 {
		t.Error("an empty result makes a wrong page")
	}
	r = sample.Harrowgill()
	r.Fit.Converged, r.Fit.Status = false, "iteration limit"
	if p := made(t, r); !strings.Contains(p, "take no number of it as an answer") {
		t.Error("a fit that did not settle is not spoken of")
	}
}

func TestLongTablesAreCutWithAWord(t *testing.T) {
	r := &report.Result{Heads: make([]report.HeadRow, mostHeads+25)}
	p := made(t, r)
	if !strings.Contains(p, "The other 25 readings are in heads.csv.") || bytes.Count([]byte(p), []byte("<tr>")) > 2*mostHeads+100 {
		t.Error("a long table is not cut")
	}
}

func TestDrawOffsKeepTheirPlace(t *testing.T) {
	r := &report.Result{Survey: report.SurveyFacts{Rounds: []string{"A", "B"}}, Parameters: []report.ParameterRow{
		{Item: "N8", Kind: "draw-off", Quantity: "flow", Unit: "L/s", Round: "B", Expected: survey.Some(0.72), Fitted: survey.Some(4.72), Low: survey.Some(4.2), High: survey.Some(5.24)},
		{Item: "N9", Kind: "draw-off", Quantity: "flow", Unit: "L/s", Fitted: survey.Some(1.5)},
		{Item: "P1", Kind: "pipe", Quantity: "roughness", Unit: "mm", Fitted: survey.Some(1.5)}}}
	got := drawOffs(r)
	if len(got.Rows) != 2 || got.Rows[0][1].Text != "–" || got.Rows[0][2].Text != "4.72 (0.72)" || got.Rows[1][1].Text != "1.50 (unknown)" || got.Rows[1][2].Text != "1.50 (unknown)" {
		t.Errorf("%v", got.Rows)
	}
	if works, gauges, levels := fitted(r.Parameters); len(works.Rows) != 1 || len(gauges.Rows)+len(levels.Rows) != 0 {
		t.Errorf("%v", works.Rows)
	}
}

func TestFlowsKeepTheirPlace(t *testing.T) {
	r := &report.Result{Survey: report.SurveyFacts{Rounds: []string{"A", "B"}}, Flows: []report.FlowRow{
		{Round: "B", Pipe: "P1", Flow: survey.Some(-0.0123), Low: survey.Some(-0.0125), High: survey.Some(-0.0121), Measured: survey.Some(-0.0120)},
		{Round: "A", Pipe: "P2", Flow: survey.Some(0.5)}}}
	got := flows(r)
	if len(got.Rows) != 2 || got.Rows[0][0].Text != "P1" || got.Rows[0][1].Text != "–" || got.Rows[0][2].Text != "-12.30 (-12)" || got.Rows[1][1].Text != "500" {
		t.Errorf("%v", got.Rows)
	}
}
