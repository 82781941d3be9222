package winding

import (
	"math"
	"strings"
	"testing"

	"goodbin/screening"
)

// Winding resistance within 10 to 20 % (from memory): the laxer one counts, and it cannot reject.
func TestAClaimedResistanceIsHeldLaxly(t *testing.T) {
	c := screening.Claim{}.WithRating(screening.NominalRating(screening.DCR, 12))
	l := Claimed(screening.DCR, c, "")
	if len(l) != 1 || math.Abs(l[0].Low-9.6) > 1e-9 || math.Abs(l[0].High-14.4) > 1e-9 || l[0].Source.Status.MayReject() {
		t.Errorf("%+v", l)
	}
	most := screening.Claim{}.WithRating(screening.RangeRating(screening.DCR, math.Inf(-1), 12))
	if l := Claimed(screening.DCR, most, ""); len(l) != 1 || l[0].High != 12 || !l[0].Source.Status.MayReject() {
		t.Errorf("a sheet's maximum: %+v", l)
	}
	if l := Claimed(screening.DCR, screening.Claim{}, ""); l != nil {
		t.Errorf("nothing claimed: %+v", l)
	}
	if l := Conducts(screening.DCR, "2", screening.Required); l.High != 100e3 || !l.Source.Status.MayReject() || l.Section != "2" {
		t.Errorf("%+v", l)
	}
}

// Leads of 0.1 Ω make 0.1 Ω read 0.2 Ω on two wires (probsee, four-terminal sensing: published).
func TestSmallResistancesTakeFourWires(t *testing.T) {
	for ohms, four := range map[float64]bool{0.1: true, 9.9: true, 10: false, 240: false} {
		r := Recipe(screening.DCR, screening.Claim{}.WithRating(screening.NominalRating(screening.DCR, ohms)), "")
		if got := strings.Contains(strings.Join(r.Lines, " "), "four wires"); got != four {
			t.Errorf("%v Ω: four wires %v", ohms, got)
		}
		if want := 0.1 * ohms; four && math.Abs(r.Values["expected-voltage"]-want) > 1e-12 {
			t.Errorf("%v Ω: %v V, want %v V", ohms, r.Values["expected-voltage"], want)
		}
	}
}

func TestTheTableIsChecked(t *testing.T) {
	if _, err := read(CSV); err != nil {
		t.Error(err)
	}
	if _, err := read("name,value,source,status\nopen,1,x,published\n"); err == nil {
		t.Error("a table without the tolerance is read")
	}
}
