package friction_test

import (
	"fmt"
	"math"
	"testing"

	"tapround/calibrate/friction"
)

// A change of bore, by the tables of Unwin (after Weisbach), Crane and a handbook page.
// Enlargements: Borda and Carnot exactly, the handbook's rounded figures within 5 %.
// Contractions: Crane's rule exactly; the others' own rules within 0.09 of it.
func TestChangeOfBore(t *testing.T) {
	exact, loose := 0, 0
	for _, r := range table(t, "checks/catalogue/change_of_bore.csv", 67) {
		x, want := r.num(t, "parameter_value"), r.num(t, "K_value")
		var beta float64
		switch r["parameter"] {
		case "area ratio big/small":
			beta = math.Sqrt(1 / x)
		case "area ratio small/big":
			beta = math.Sqrt(x)
		case "diameter ratio d/D":
			beta = x
		default:
			continue // conical pieces have no rule here
		}
		at := fmt.Sprintf("%s at %s %g (%s)", r["fitting"], r["parameter"], x, r["source"])
		switch r["fitting"] {
		case "sudden expansion":
			exact++
			k := friction.EnlargementK(beta)
			if r["referred_to"] == "velocity head in the BIG pipe" {
				k /= beta * beta * beta * beta
			}
			if math.Abs(k-want) > 1e-4 { // four decimals
				t.Errorf("%s: %g, want %g", at, k, want)
			}
		case "sudden enlargement":
			loose++
			within(t, at, friction.EnlargementK(beta), want, 0.05)
		case "sudden contraction":
			k := friction.ContractionK(beta)
			if r["source"] == "Crane Technical Paper 410, formula for sudden contraction K = 0.5 (1 - beta^2)" {
				exact++
				if math.Abs(k-want) > 1e-4 {
					t.Errorf("%s: %g, want %g", at, k, want)
				}
				continue
			}
			loose++
			if math.Abs(k-want) > 0.09 {
				t.Errorf("%s: %g is more than 0.09 from %g", at, k, want)
			}
		default:
			t.Errorf("unknown fitting %q", r["fitting"])
		}
	}
	if exact < 30 || loose < 15 {
		t.Errorf("%d rows compared exactly, %d loosely", exact, loose)
	}
}
