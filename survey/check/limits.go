package check

import "fmt"

// limit is one number a check compares with, in the unit it is printed in.
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
	exchanged   limit // standard uncertainties by which an exchange explains more than one bad reading
	nearOne     limit // a unit ratio nearer to one looks like a gauge's or a level's error
	amongOthers limit // standard uncertainties outside all others
	lowScale    limit // per cent of the span
	highScale   limit // per cent of the span
	pinned      limit // per cent of the span below its low end, where no accuracy is stated
	repeats     limit // smallest steps
	visible     limit // loss over its standard uncertainty
	aboveLevel  limit // m of piezometric head above the pipe
	vapour      limit // kPa of absolute pressure above the vapour pressure
}

var customary = limits{
	apart:       limit{2, "%g standard uncertainties", "customary"},
	stay:        limit{3, "%g standard uncertainties", "customary"},
	exchanged:   limit{2, "exchanged, both agree with the rest, and that explains more than any one bad reading would, by %g standard uncertainties", "customary"},
	nearOne:     limit{1.5, "a ratio of %g", "customary"},
	amongOthers: limit{3, "%g standard uncertainties outside the others, further than they lie apart", "customary"},
	lowScale:    limit{25, "readings above %g %% of the span", "customary"},
	highScale:   limit{90, "readings below %g %% of the span", "customary; EN 837-2 has 75 % of full scale under steady pressure, from memory"},
	pinned:      limit{1.6, "%g %% of the span below its low end", "customary"},
	repeats:     limit{2, "%g smallest steps of the gauge", "customary"},
	visible:     limit{3, "a loss of %g standard uncertainties in some round", "customary"},
	aboveLevel:  limit{0, "piezometric head %g m or more above the pipe", "below it the water is under less than atmospheric pressure"},
	vapour:      limit{20, "%g kPa of absolute pressure above the vapour pressure", "customary"},
}
