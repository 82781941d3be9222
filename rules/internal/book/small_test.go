package book

import (
	"math"
	"testing"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

func TestHonestDigits(t *testing.T) {
	for _, tt := range []struct {
		x, u   float64
		digits int
		want   float64
	}{
		{5031.7, 29, 4, 5030},
		{5031.7, 0, 4, 5032},
		{5031.7, 0, 3, 5030},
		{0.4721, 0.17, 4, 0.5},
		{760, 4.6, 4, 760},
		{1234567, 7200, 4, 1235000},
		{12.104, 0.08, 3, 12.1},
		{0, 1, 4, 0},
	} {
		if got := Honest(tt.x, tt.u, tt.digits); math.Abs(got-tt.want) > 1e-9 {
			t.Errorf("%v ± %v to %d digits is %v, want %v", tt.x, tt.u, tt.digits, got, tt.want)
		}
	}
}

func TestAboutPrintsNoEmptyFigure(t *testing.T) {
	for _, tt := range []struct {
		x    float64
		unit quantity.Unit
		want string
	}{
		{30e3, quantity.Ohm, "30 kΩ"}, {8150, quantity.Ohm, "8.2 kΩ"}, {0.0997, quantity.Ampere, "100 mA"}, {0.123, quantity.Watt, "0.12 W"}, {0, quantity.Watt, "0 W"},
	} {
		if got := About(tt.x, tt.unit); got != tt.want {
			t.Errorf("%v is %q, want %q", tt.x, got, tt.want)
		}
	}
}

func TestTheSourceOfARating(t *testing.T) {
	r := screening.NominalRating(screening.RatedVoltage, 35)
	if s := SourceOf(&r); s.Status != screening.Published || s.Document == "" || s.Clause != "voltage" {
		t.Errorf("a rating printed on the part: %s", s)
	}
	r.Source = screening.Source{Document: "recalled", Status: screening.FromMemory}
	if s := SourceOf(&r); s != r.Source {
		t.Errorf("a table's rating: %s", s)
	}
}

func TestWithoutLeavesTheClaimAlone(t *testing.T) {
	c := screening.Claim{}.WithRating(screening.NominalRating(screening.Capacitance, 1e-6)).WithRating(screening.NominalRating(screening.RatedVoltage, 35))
	if kept := Without(c.Ratings, screening.Capacitance.Name); len(kept) != 1 || kept[0].Of != screening.RatedVoltage.Name || len(c.Ratings) != 2 {
		t.Errorf("kept %v of %v", kept, c.Ratings)
	}
}

// A verdict is stale as soon as a table or the edition of a rule changes.
func TestTheVersionChangesWithEveryTable(t *testing.T) {
	seen := map[string]bool{}
	for _, v := range []string{Version("k", "1", "a", "b"), Version("k", "2", "a", "b"), Version("k", "1", "a", "c"), Version("k", "1", "ab", ""), Version("l", "1", "a", "b")} {
		if seen[v] {
			t.Errorf("%q stands for two states", v)
		}
		seen[v] = true
	}
}
