package catalogue

import (
	"math"
	"slices"
	"strings"
	"unicode"
)

// material is what the words in the column of that name come to.
type material struct {
	base   string
	lining string // of a metal: "unlined", "lined" or what with; empty: not said
	finish string // riveted, precast; empty: not said
	age    float64
	aged   bool // the words say new or old
}

// Years that the words stand for. Old is the middle of the "40 to 50 years" of
// HR's normal column.
const (
	newYears = 0
	oldYears = 50
)

// words brings the trade's names together. A word that is not here is passed
// over: "DN200 class K9" says nothing about the wall.
var words = map[string][]string{
	"ci": {"cast", "iron"}, "gci": {"cast", "iron"}, "di": {"ductile", "iron"}, "sgi": {"ductile", "iron"}, "spheroidal": {"ductile"},
	"galvanized": {"galvanised"}, "galv": {"galvanised"}, "gi": {"galvanised"}, "gs": {"galvanised"}, "zinc": {"galvanised"},
	"ms": {"steel"}, "cs": {"steel"}, "ss": {"stainless"}, "inox": {"stainless"},
	"ac": {"asbestos", "cement"}, "acp": {"asbestos", "cement"}, "fibrecement": {"asbestos", "cement"}, "fibrocement": {"asbestos", "cement"},
	"upvc": {"pvc"}, "pvcu": {"pvc"}, "mpvc": {"pvc"}, "opvc": {"pvc"}, "pvco": {"pvc"}, "cpvc": {"pvc"}, "vinyl": {"pvc"},
	"hdpe": {"pe"}, "mdpe": {"pe"}, "ldpe": {"pe"}, "pehd": {"pe"}, "pe80": {"pe"}, "pe100": {"pe"}, "polyethylene": {"pe"}, "polythene": {"pe"}, "polyethene": {"pe"},
	"pp": {"plastic"}, "abs": {"plastic"}, "polypropylene": {"plastic"}, "polybutylene": {"plastic"},
	"frp": {"grp"}, "gre": {"grp"}, "rtrp": {"grp"}, "fibreglass": {"grp"}, "fiberglass": {"grp"}, "glassfibre": {"grp"},
	"aluminum": {"aluminium"}, "timber": {"wood"}, "stave": {"wood"}, "wooden": {"wood"}, "hose": {"rubber"},
	"rcp": {"concrete"}, "rc": {"concrete"}, "pccp": {"prestressed"}, "psc": {"prestressed"},
	"mortar": {"cement"}, "cml": {"cement", "lined"}, "cmld": {"cement", "lined"}, "cementlined": {"cement", "lined"}, "dicl": {"ductile", "iron", "cement", "lined"},
	"cicl": {"cast", "iron", "cement", "lined"}, "mscl": {"steel", "cement", "lined"},
	"lining": {"lined"}, "coated": {"lined"}, "coating": {"lined"}, "internally": {},
	"uncoated": {"unlined"}, "bare": {"unlined"}, "black": {"unlined"},
	"bituminous": {"bitumen"}, "asphalt": {"bitumen"}, "asphalted": {"bitumen"}, "tar": {"bitumen"}, "enamel": {"bitumen"},
	"fbe": {"epoxy"}, "pu": {"polyurethane"}, "aged": {"old"}, "rusty": {"old"}, "rusted": {"old"}, "corroded": {"old"},
	"grey": {"cast"}, "gray": {"cast"}, "spun": {"precast"},
}

// phrases that are one name, taken together before the words are looked at.
var phrases = strings.NewReplacer(
	"glass reinforced plastic", "grp", "glass fibre", "grp", "glass fiber", "grp", "glass-reinforced plastic", "grp",
	"lead joint", "joint", "rubber joint", "joint", "rubber ring", "joint", "rubber seal", "joint",
	"steel form", "form", "wooden form", "form", "wood form", "form",
	"fibre cement", "fibrecement", "fiber cement", "fibrecement", "fibre-cement", "fibrecement",
	"pvc-u", "pvc", "u-pvc", "pvc", "pvc-o", "pvc", "pe-hd", "pe", "pe 100", "pe", "pe 80", "pe", "d.i.", "di", "c.i.", "ci", "a.c.", "ac",
)

// bases are the materials of the wall, in the order they are listed to a reader.
var bases = []string{
	"cast iron", "ductile iron", "steel", "galvanised", "stainless", "wrought iron", "copper", "brass", "lead", "aluminium",
	"pvc", "pe", "plastic", "grp", "concrete", "prestressed", "asbestos cement", "wood", "rubber",
}

func isMetal(base string) bool {
	return base == "cast iron" || base == "ductile iron" || base == "steel"
}

// readMaterial takes the words of a material in any order and case. It reports
// false where no wall material is named, or more than one.
func readMaterial(text string) (material, bool) {
	said := map[string]bool{}
	for _, w := range strings.FieldsFunc(phrases.Replace(strings.ToLower(text)), func(r rune) bool { return !unicode.IsLetter(r) && !unicode.IsDigit(r) }) {
		if known, ok := words[w]; ok {
			for _, k := range known {
				said[k] = true
			}
		} else {
			said[w] = true
		}
	}
	var m material
	m.base = baseOf(said)
	if m.base == "" {
		return material{}, false
	}
	if isMetal(m.base) {
		m.lining = liningOf(said)
	}
	switch {
	case said["riveted"]:
		m.finish = "riveted"
	case said["precast"] && m.base == "concrete":
		m.finish = "precast"
	}
	switch {
	case said["new"] && said["old"]:
		return material{}, false
	case said["new"]:
		m.age, m.aged = newYears, true
	case said["old"]:
		m.age, m.aged = oldYears, true
	default:
		m.age = math.NaN()
	}
	return m, true
}

// baseOf names the wall; empty where none or several are said.
func baseOf(said map[string]bool) string {
	found := map[string]bool{}
	for _, b := range bases {
		found[b] = said[b]
	}
	found["cast iron"] = said["iron"] && said["cast"] || said["iron"] && said["precast"] // spun iron
	found["ductile iron"] = said["ductile"]
	found["wrought iron"] = said["iron"] && said["wrought"]
	found["asbestos cement"] = said["asbestos"]
	drop := func(when string, what ...string) {
		if found[when] {
			for _, w := range what {
				found[w] = false
			}
		}
	}
	drop("ductile iron", "cast iron") // ductile cast iron
	drop("galvanised", "steel", "cast iron", "wrought iron")
	drop("stainless", "steel")
	drop("prestressed", "concrete", "steel") // steel cylinder in it
	if said["reinforced"] || said["cylinder"] {
		drop("concrete", "steel")
	}
	// What stands beside a metal and a lining is the lining.
	if said["lined"] {
		for _, metal := range []string{"cast iron", "ductile iron", "steel"} {
			drop(metal, "concrete", "pe", "plastic", "rubber")
		}
	}
	name := ""
	for b, yes := range found {
		if yes {
			if name != "" {
				return ""
			}
			name = b
		}
	}
	return name
}

func liningOf(said map[string]bool) string {
	switch {
	case said["unlined"]:
		return "unlined"
	case said["relined"]:
		return "relined"
	case said["epoxy"], said["polyurethane"]:
		return "epoxy"
	case said["cement"], said["lined"] && said["concrete"]:
		return "cement"
	case said["bitumen"]:
		return "bitumen"
	case said["lined"] && (said["pe"] || said["plastic"]):
		return "polyethylene"
	case said["lined"]:
		return "lined"
	}
	return ""
}

// materialNames lists what a reader may write, for messages.
func materialNames() string {
	names := slices.Clone(bases)
	for i, n := range names {
		switch n {
		case "pvc", "pe", "grp":
			names[i] = strings.ToUpper(n)
		case "galvanised":
			names[i] = "galvanised iron"
		case "stainless":
			names[i] = "stainless steel"
		case "prestressed":
			names[i] = "prestressed concrete"
		}
	}
	return strings.Join(names, ", ") + " (with lined, unlined, cement lined, epoxy lined, new, old)"
}
