package catalogue

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"
)

var unknown = math.NaN()

// Every printed roughness must be one the table's range allows for, and every
// value in the table must lie within what is printed for it.
func TestRoughnessAgainstTables(t *testing.T) {
	type as struct {
		words string
		age   float64
	}
	ours := map[string][]as{
		"commercial steel or wrought iron":         {{"steel", 0}, {"wrought iron", 0}},
		"drawn tubing, glass, brass, plastic":      {{"brass", 0}, {"PVC", 0}, {"PE", 0}, {"plastic", 0}},
		"galvanized iron":                          {{"galvanised iron", 0}},
		"cast iron, uncoated":                      {{"cast iron", 0}, {"ductile iron, unlined", 0}},
		"cast iron, asphalt dipped":                {{"cast iron, asphalted", 0}},
		"concrete":                                 {{"concrete", 0}},
		"riveted steel":                            {{"steel, riveted", 0}},
		"wood stave":                               {{"wood stave", 0}},
		"brass or copper tubing":                   {{"copper", 0}, {"brass", 0}},
		"aluminium, lead":                          {{"lead", 0}, {"aluminium", 0}},
		"fiberglass":                               {{"GRP", 0}},
		"stainless steel":                          {{"stainless steel", 0}},
		"rubber, smoothed":                         {{"rubber hose", 0}},
		"carbon steel, cement-lined":               {{"carbon steel, cement-lined", 0}},
		"water mains with tuberculation":           {{"old cast iron", unknown}},
		"steel, commercial new":                    {{"steel", 0}},
		"steel, stainless new":                     {{"stainless steel", 0}},
		"steel, riveted":                           {{"riveted steel", 0}},
		"steel, rusted":                            {{"rusted steel", unknown}},
		"iron, cast new":                           {{"new cast iron", unknown}, {"ductile iron, unlined, new", unknown}},
		"iron, wrought new":                        {{"wrought iron", 0}},
		"iron, galvanized new":                     {{"galvanized iron", unknown}},
		"brass, drawn new":                         {{"brass", unknown}},
		"plastic, drawn tubing":                    {{"plastic", unknown}, {"PVC", unknown}, {"PE", unknown}},
		"concrete, smoothed":                       {{"concrete", unknown}},
		"concrete, rough":                          {{"concrete", unknown}},
		"wood, stave":                              {{"wood stave", unknown}},
		"iron, asphalted cast":                     {{"cast iron, asphalted", 0}},
		"spun bitumen or concrete lined metal":     {{"ductile iron, bitumen lined", 0}, {"steel, bitumen lined", 0}, {"ductile iron, cement lined", 0}, {"cast iron, cement lined", 0}, {"steel, cement lined", 0}, {"steel, lined", 0}},
		"cast iron, epoxy lining":                  {{"cast iron, epoxy lining", 0}},
		"ductile iron, polyethylene lining":        {{"ductile iron, polyethylene lining", 0}, {"steel, polyethylene lined", 0}, {"cast iron, polyethylene lined", 0}},
		"ductile iron, polyurethane lining":        {{"ductile iron, polyurethane lining", 0}},
		"wrought iron":                             {{"wrought iron", 0}},
		"rusty wrought iron":                       {{"rusty wrought iron", unknown}},
		"uncoated steel":                           {{"uncoated steel", 0}},
		"rusty steel":                              {{"rusty steel", unknown}},
		"steel, epoxy lining":                      {{"steel, epoxy lining", 0}, {"steel, lined", 0}, {"steel, bitumen lined", 0}},
		"galvanised iron, coated cast iron":        {{"galvanised iron", 0}, {"ductile iron, bitumen lined", 0}, {"cast iron, bitumen coated", 0}},
		"uncoated cast iron":                       {{"uncoated cast iron", 0}},
		"tate relined pipes":                       {{"cast iron, relined", 0}, {"ductile iron, relined", 0}, {"steel, relined", 0}},
		"old tuberculated mains, slight attack":    {{"cast iron", 20}, {"cast iron", 45}, {"cast iron", 90}},
		"wood stave, planed plank":                 {{"wood stave", unknown}},
		"prestressed concrete":                     {{"prestressed concrete", unknown}},
		"precast concrete, O-ring joints":          {{"precast concrete, O-ring joints", unknown}, {"concrete", unknown}},
		"spun precast concrete, O-ring joints":     {{"spun concrete", unknown}, {"ductile iron, cement lined", 0}, {"cast iron, lined", 0}},
		"monolithic concrete, steel forms":         {{"concrete", unknown}},
		"monolithic concrete, rough forms":         {{"concrete", unknown}},
		"uPVC, twin-walled, coupling":              {{"uPVC", unknown}},
		"uPVC, cemented joints":                    {{"uPVC, cemented joints", unknown}},
		"uPVC, spigot and socket, O-ring at 6-9 m": {{"uPVC, spigot and socket, O-ring", unknown}, {"GRP", unknown}, {"PE", unknown}, {"plastic", unknown}},
	}
	// Not in the table: a smooth limit, duct, pipe nobody lays, and mains that are
	// no longer sound.
	notOurs := map[string]bool{
		"glass": true, "steel, sheet metal": true, "pitch fibre": true, "old tuberculated mains, moderate attack": true,
		"old tuberculated mains, appreciable attack": true, "old tuberculated mains, severe attack": true,
	}
	printed := union{}
	values := map[string]Entry{}
	for _, c := range checks(t, "roughness.csv") {
		name := c["material"]
		if notOurs[name] {
			continue
		}
		if len(ours[name]) == 0 {
			t.Errorf("row %q is not checked", name)
		}
		low, high := rangeOf(t, c["k_mm_low_or_good"], c["k_mm_mid_or_normal"], c["k_mm_high_or_poor"])
		for _, a := range ours[name] {
			e, ok := Roughness(a.words, a.age)
			if !ok {
				t.Errorf("%q is not in the table", a.words)
				continue
			}
			if !(e.Low <= e.Value && e.Value <= e.High) {
				t.Errorf("%s: value %v outside its own range %v to %v", a.words, e.Value, e.Low, e.High)
			}
			if high/1e3 < e.Low*(1-1e-9) || low/1e3 > e.High*(1+1e-9) {
				t.Errorf("%s (%v): range %v to %v m leaves out the printed %v to %v mm of %q", a.words, a.age, e.Low, e.High, low, high, name)
			}
			key := fmt.Sprintf("%.3g mm: %s", 1e3*e.Value, e.Source)
			values[key] = e
			if !strings.HasSuffix(e.Source, rustSource) { // grown values are TestOldIron's
				printed.add(key, low, high)
			}
		}
	}
	for key, e := range values {
		r, ok := printed[key]
		if !ok {
			continue
		}
		if k := 1e3 * e.Value; k < r[0]*(1-1e-9) || k > r[1]*(1+1e-9) {
			t.Errorf("%s: %v mm lies outside all that is printed for it, %v to %v", key, k, r[0], r[1])
		}
	}
	for _, w := range walls {
		found := false
		for _, e := range values {
			found = found || strings.HasPrefix(e.Source, w.source)
		}
		if !found && w.base != "asbestos cement" { // its own test below
			t.Errorf("line %s %s %s is held to no printed table", w.base, w.lining, w.finish)
		}
	}
}

// HR's old mains under slight attack: 0.6 mm at (up to) 20 years, 1.5 at 40 to
// 50, 3.0 at 80 to 100. The growth law is independent of them.
func TestOldIron(t *testing.T) {
	for _, c := range []struct{ age, k float64 }{{20, 0.6e-3}, {45, 1.5e-3}, {90, 3e-3}} {
		e, ok := Roughness("cast iron", c.age)
		if !ok || math.Abs(e.Value/c.k-1) > 0.28 {
			t.Errorf("cast iron after %v years: %v m, HR prints %v", c.age, e.Value, c.k)
		}
	}
	young, _ := Roughness("cast iron", 0)
	for _, words := range []string{"cast iron, cement lined", "PVC", "galvanised iron", "concrete"} {
		a, _ := Roughness(words, 0)
		b, _ := Roughness(words, 80)
		if a.Value != b.Value {
			t.Errorf("%s changes with age", words)
		}
	}
	fromWords, _ := Roughness("old cast iron", unknown)
	byYears, _ := Roughness("old cast iron", 20)
	untold, _ := Roughness("cast iron", unknown)
	if !(young.Value < byYears.Value && byYears.Value < fromWords.Value) {
		t.Errorf("a year does not come before the word old: %v %v %v", young.Value, byYears.Value, fromWords.Value)
	}
	if untold.Value != fromWords.Value || untold.Note == "" || fromWords.Note != "" {
		t.Errorf("iron of unknown age: %+v, want that of old iron and a note", untold)
	}
	if early, _ := Roughness("cast iron", -3); early.Value != young.Value {
		t.Errorf("laid after the survey: %v, want that of new iron", early.Value)
	}
}

// The C that follows from the roughness, against printed tables of C.
func TestHazenWilliamsAgainstLamont(t *testing.T) {
	worst, seen := 0.0, 0
	for _, c := range checks(t, "hazen_williams_c.csv") {
		words := ""
		switch c["material"] {
		case "uncoated cast iron, smooth and new", "cast iron, trend 1 slight attack":
			words = "uncoated cast iron"
		default:
			continue
		}
		e, ok := HazenWilliams(words, number(t, c["age_years"]), number(t, c["diameter_mm"])/1e3)
		if !ok {
			t.Fatalf("no C for %s", words)
		}
		seen++
		d := math.Abs(e.Value - number(t, c["C_low"]))
		worst = math.Max(worst, d)
		// Within 3: the table's own figures are rounded, and the last diameters
		// stand for a range of bores. Severer trends must lie lower.
		if d > 3 {
			t.Errorf("age %s, %s mm: C %.1f, Lamont has %s", c["age_years"], c["diameter_mm"], e.Value, c["C_low"])
		}
	}
	t.Logf("largest difference %.2f over %d rows", worst, seen)
	if seen != 20 {
		t.Errorf("%d rows checked, want 20", seen)
	}
}

func TestHazenWilliamsAgainstHandbook(t *testing.T) {
	// Words, age and a bore usual for the material.
	ours := map[string]struct {
		words     string
		age, bore float64
	}{
		"asbestos cement": {"asbestos cement", unknown, 0.15}, "brass": {"brass", unknown, 0.05}, "cast iron new unlined": {"new cast iron, unlined", unknown, 0.3},
		"concrete, steel forms": {"concrete, steel forms", unknown, 0.6}, "concrete, wooden forms": {"concrete, wooden forms", unknown, 0.6},
		"concrete, centrifugally spun": {"spun concrete", unknown, 0.6}, "copper": {"copper", unknown, 0.05}, "galvanized iron": {"galvanized iron", unknown, 0.05},
		"lead": {"lead", unknown, 0.05}, "plastic": {"plastic", unknown, 0.15}, "steel, coal-tar enamel lined": {"steel, coal-tar enamel lined", unknown, 0.3},
		"steel, new unlined": {"steel, new, unlined", unknown, 0.3}, "wood stave, average": {"wood stave", unknown, 0.6},
	}
	// Riveted steel: the handbook's 110 goes with the smooth end of HI's 0.9 to 9
	// mm, the table's value with White's 3. Average iron of 10 to 40 years: the
	// table's is sound iron (see below). The rest are not in the table.
	notOurs := map[string]bool{"steel, riveted": true, "brick sewer": true, "glass": true, "tin": true, "vitrified clay, good": true,
		"cast iron 10 years": true, "cast iron 20 years": true, "cast iron 30 years": true, "cast iron 40 years": true}
	seen, worst := 0, 0.0
	for _, c := range checks(t, "hazen_williams_c.csv") {
		if c["age_years"] != "" {
			continue // Lamont
		}
		name := c["material"]
		o, ok := ours[name]
		if !ok {
			if !notOurs[name] {
				t.Errorf("row %q is not checked", name)
			}
			continue
		}
		e, ok := HazenWilliams(o.words, o.age, o.bore)
		low, high := number(t, c["C_low"]), number(t, c["C_high"])
		seen++
		worst = math.Max(worst, math.Max(low-e.Value, e.Value-high))
		// What the function's comment says: the printed figures are in steps of 5
		// and 10, and the table does not tell concrete by its forms.
		tol := 8.0
		if strings.HasPrefix(o.words, "concrete") {
			tol = 11
		}
		if !ok || e.Value < low-tol || e.Value > high+tol {
			t.Errorf("%s: C %.1f, the handbook has %v to %v", name, e.Value, low, high)
		}
	}
	t.Logf("largest departure from the printed range %.1f", worst)
	if seen != len(ours) {
		t.Errorf("%d of %d rows checked", seen, len(ours))
	}
	// The handbook's iron of 10 to 40 years is of average attack by soft water: a
	// sound pipe must stand above it, and its range must reach down to it.
	for _, c := range []struct{ age, high float64 }{{20, 100}, {30, 90}, {40, 83}} {
		e, _ := HazenWilliams("cast iron", c.age, 0.15)
		if e.Value < c.high || e.Low > c.high {
			t.Errorf("cast iron, %v years: C %.0f (%.0f to %.0f) against the handbook's best of %v", c.age, e.Value, e.Low, e.High, c.high)
		}
	}
}

// The roughness of asbestos cement is set by this.
func TestAsbestosCement(t *testing.T) {
	e, ok := HazenWilliams("asbestos cement", unknown, 0.15)
	if !ok || math.Abs(e.Value-140) > 0.5 {
		t.Errorf("C of asbestos cement is %v, want 140", e.Value)
	}
}

func TestHazenWilliamsRange(t *testing.T) {
	e, ok := HazenWilliams("cast iron", 60, 0.3)
	if !ok || !(e.Low < e.Value && e.Value < e.High && e.Spread > 1) {
		t.Errorf("%+v", e)
	}
	for _, bore := range []float64{0, -1, math.NaN()} {
		if _, ok := HazenWilliams("cast iron", 60, bore); ok {
			t.Errorf("a C for bore %v", bore)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		bore := rapid.Float64Range(0.025, 2).Draw(t, "bore")
		k := bore * rapid.Float64Range(1e-6, 0.05).Draw(t, "k/D")
		c := coefficientC(k, bore)
		if c2 := coefficientC(1.05*k, bore); !(c2 < c) {
			t.Fatalf("C does not fall with roughness: %v then %v", c, c2)
		}
		back, ok := roughnessOfC(c, bore)
		if !ok || math.Abs(back/k-1) > 1e-6 {
			t.Fatalf("C %v of roughness %v goes back to %v, %v", c, k, back, ok)
		}
	})
	if _, ok := roughnessOfC(170, 0.1); ok {
		t.Error("a roughness for a C of 170, above any smooth pipe's")
	}
}

func TestMaterialWords(t *testing.T) {
	for _, c := range []struct {
		words, base, lining string
	}{
		{"cast iron", "cast iron", ""}, {"Iron, Cast", "cast iron", ""}, {"CI", "cast iron", ""}, {"grey iron", "cast iron", ""}, {"spun iron", "cast iron", ""},
		{"Cast iron (unlined)", "cast iron", "unlined"}, {"cast iron, lead joints", "cast iron", ""}, {"CI, relined", "cast iron", "relined"},
		{"ductile iron", "ductile iron", ""}, {"DI", "ductile iron", ""}, {"D.I.", "ductile iron", ""}, {"DICL", "ductile iron", "cement"},
		{"ductile iron, cement lined", "ductile iron", "cement"}, {"cement mortar lined ductile iron DN200 class K9", "ductile iron", "cement"},
		{"ductile cast iron", "ductile iron", ""}, {"ductile iron, concrete lined", "ductile iron", "cement"}, {"DI PE lined", "ductile iron", "polyethylene"},
		{"steel", "steel", ""}, {"MS", "steel", ""}, {"mild steel", "steel", ""}, {"Steel, lined", "steel", "lined"}, {"steel_lined", "steel", "lined"},
		{"steel, epoxy coated", "steel", "epoxy"}, {"welded steel", "steel", ""}, {"stainless steel 316", "stainless", ""},
		{"galvanised steel", "galvanised", ""}, {"galvanized iron", "galvanised", ""}, {"GI", "galvanised", ""},
		{"PVC", "pvc", ""}, {"uPVC", "pvc", ""}, {"PVC-U", "pvc", ""}, {"mPVC PN12", "pvc", ""},
		{"PE", "pe", ""}, {"HDPE", "pe", ""}, {"PE100 SDR11", "pe", ""}, {"polyethylene", "pe", ""}, {"MDPE", "pe", ""},
		{"GRP", "grp", ""}, {"glass reinforced plastic", "grp", ""}, {"fiberglass", "grp", ""},
		{"concrete", "concrete", ""}, {"reinforced concrete", "concrete", ""}, {"steel reinforced concrete", "concrete", ""},
		{"prestressed concrete cylinder", "prestressed", ""}, {"PCCP", "prestressed", ""},
		{"asbestos cement", "asbestos cement", ""}, {"AC", "asbestos cement", ""}, {"A.C.", "asbestos cement", ""}, {"fibre cement", "asbestos cement", ""},
		{"copper", "copper", ""}, {"wrought iron", "wrought iron", ""}, {"wood stave", "wood", ""}, {"lead", "lead", ""},
	} {
		m, ok := readMaterial(c.words)
		if !ok || m.base != c.base || m.lining != c.lining {
			t.Errorf("%q is %q with %q (%v), want %q with %q", c.words, m.base, m.lining, ok, c.base, c.lining)
		}
		for _, same := range []string{strings.ToUpper(c.words), "  " + c.words + " pipe"} {
			if n, ok := readMaterial(same); !ok || n.base != m.base || n.lining != m.lining {
				t.Errorf("%q is not what %q is", same, c.words)
			}
		}
		if _, ok := Roughness(c.words, unknown); !ok {
			t.Errorf("%q has no roughness", c.words)
		}
	}
	for _, words := range []string{"", "iron", "unobtainium", "cast iron / PVC", "steel and copper", "lined", "new old cast iron", "DN200", "cement"} {
		if m, ok := readMaterial(words); ok {
			t.Errorf("%q is taken for %q", words, m.base)
		}
		if e, ok := Roughness(words, unknown); ok {
			t.Errorf("%q has roughness %v", words, e.Value)
		}
	}
}

// The order of the words does not matter.
func TestMaterialOrder(t *testing.T) {
	names := []string{"ductile iron cement lined", "steel epoxy lined new", "cast iron unlined old", "precast concrete", "cast iron bitumen coated"}
	rapid.Check(t, func(t *rapid.T) {
		name := rapid.SampledFrom(names).Draw(t, "name")
		want, ok := Roughness(name, unknown)
		if !ok {
			t.Fatalf("%q unknown", name)
		}
		shuffled := strings.Join(rapid.Permutation(strings.Fields(name)).Draw(t, "order"), rapid.SampledFrom([]string{" ", ", ", "-", "/"}).Draw(t, "separator"))
		if got, ok := Roughness(shuffled, unknown); !ok || got != want {
			t.Fatalf("%q: %+v, want %+v", shuffled, got, want)
		}
	})
}

func TestMaterialNames(t *testing.T) {
	list, _, _ := strings.Cut(materialNames(), " (")
	for name := range strings.SplitSeq(list, ", ") {
		if _, ok := Roughness(name, unknown); !ok {
			t.Errorf("the reader is told to write %q, which is not known", name)
		}
	}
}
