package sheet

import (
	"math"
	"strings"
	"testing"

	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

func claimOf(name string) screening.Claim {
	return screening.Claim{}.WithTrait(screening.TraitType, name)
}

// What is claimed goes before the table; what is not comes from it; doing it twice changes nothing.
func TestTheTableFillsWhatIsNotClaimed(t *testing.T) {
	table := types.Builtin()
	own := screening.NominalRating(screening.VRRM, 400)
	c, notes := Complete(table, "bridge", claimOf("gbpc25").WithRating(own), "")
	if len(notes) > 0 || c.Trait(screening.TraitType) != "GBPC2510" {
		t.Errorf("%q, %v", c.Trait(screening.TraitType), notes)
	}
	if _, v, ok := Least(c, "vrrm"); !ok || v != 400 {
		t.Errorf("vrrm %v", v)
	}
	if _, i, ok := Least(c, "if-av"); !ok || i != 25 {
		t.Errorf("if-av %v", i)
	}
	if r, i, ok := At(c, "vf", screening.Current); !ok || r.High != 1.1 || i != 12.5 || r.Unit != quantity.Volt {
		t.Errorf("vf %v at %v", r, i)
	}
	again, _ := Complete(table, "bridge", c, "")
	if len(again.Ratings) != len(c.Ratings) || len(again.Traits) != len(c.Traits) {
		t.Errorf("%d ratings, then %d", len(c.Ratings), len(again.Ratings))
	}
}

func TestAnUnknownTypeIsSaid(t *testing.T) {
	c, notes := Complete(types.Builtin(), "bridge", claimOf("XB40"), "rated:vrrm=400V")
	if len(c.Ratings) > 0 || len(notes) != 1 || !strings.Contains(notes[0].Text, "rated:vrrm=400V") {
		t.Errorf("%v %v", c, notes)
	}
	if _, ok := Tabled(types.Builtin(), "bridge", c, "vrrm"); ok {
		t.Error("the table promises something of it")
	}
	if _, _, ok := Least(c, "vrrm"); ok {
		t.Error("nothing is claimed")
	}
}

// A rating counts at a condition only where it states it.
func TestARatingWithoutItsConditionIsNotAtOne(t *testing.T) {
	bare := screening.RangeRating(screening.VF, 0, 1.1)
	if r, x, ok := At(screening.Claim{}.WithRating(bare), "vf", screening.Current); ok {
		t.Errorf("%v at %v", r, x)
	}
	stated := bare
	stated.At = screening.At(screening.Current, 1)
	if _, x, ok := At(screening.Claim{Ratings: []screening.Rating{bare, stated}}, "vf", screening.Current); !ok || x != 1 {
		t.Errorf("at %v, %v", x, ok)
	}
	none := bare
	none.At = screening.At(screening.Current, 0)
	if _, x, ok := At(screening.Claim{}.WithRating(none), "vf", screening.Current); ok {
		t.Errorf("at %v: no current to measure at", x)
	}
	open := screening.RangeRating(screening.VF, 1, math.Inf(1))
	open.At = stated.At
	if _, _, ok := At(screening.Claim{}.WithRating(open), "vf", screening.Current); ok {
		t.Error("a rating without an upper bound was taken")
	}
}
