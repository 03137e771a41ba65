package check

import "fmt"

// limit is one number a check compares with, and how it is printed.
type limit struct {
	value  float64
	words  string // with %g for the value
	source string
}

func (l limit) String() string { return fmt.Sprintf(l.words, l.value) + " (" + l.source + ")" }

// limits holds every number that decides whether an alert is given.
type limits struct {
	apart       limit // standard uncertainties from the others
	stay        limit // standard uncertainties beyond which the crew should not leave
	exchanged   limit // share of the misclosure that exchanging two readings removes
	nearOne     limit // a unit ratio nearer to one looks like a gauge's or a level's error
	amongOthers limit // standard uncertainties outside all others
	lowScale    limit // part of the span
	highScale   limit // part of the span
	pinned      limit // part of the span below its low end, where no accuracy is stated
	repeats     limit // smallest steps
	visible     limit // loss over its standard uncertainty
	aboveLevel  limit // m of piezometric head above the pipe
	vapour      limit // Pa of absolute pressure above the vapour pressure
}

var customary = limits{
	apart:       limit{2, "%g standard uncertainties", "customary"},
	stay:        limit{3, "%g standard uncertainties", "customary"},
	exchanged:   limit{0.8, "exchanging them removes %g or more of what the readings disagree by", "customary"},
	nearOne:     limit{1.5, "a ratio of %g", "customary"},
	amongOthers: limit{3, "%g standard uncertainties outside the others, further than they lie apart", "customary"},
	// EN 837-2 asks for readings below 75 % of full scale under steady pressure, gauge
	// selection articles for 25 to 75 % of span; 90 % leaves room for surge.
	lowScale:   limit{0.25, "readings above %g of the span", "customary"},
	highScale:  limit{0.90, "readings below %g of the span", "customary; EN 837-2 has 0.75 under steady pressure, from memory"},
	pinned:     limit{0.016, "%g of the span below its low end", "customary"},
	repeats:    limit{2, "%g smallest steps of the gauge", "customary"},
	visible:    limit{3, "a loss of %g standard uncertainties in some round", "customary"},
	aboveLevel: limit{0, "piezometric head %g m or more above the pipe", "below it the water is under less than atmospheric pressure"},
	vapour:     limit{20e3, "%g Pa of absolute pressure above the vapour pressure", "customary"},
}
