package electrolytic

import (
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

// The tolerance that a part without a printed one has, by age and case (design defaults: house; −10/+50 % from memory).
func TestToleranceWhereNoneIsPrinted(t *testing.T) {
	for _, c := range []struct {
		name, words string
		low, high   float64
	}{
		{"a part of unstated case and date is taken as a modern radial", "100uF 25V", -0.2, 0.2},
		{"a radial part of 1994", "100uF 25V radial 1994", -0.2, 0.2},
		{"a can", "100uF 25V can", -0.1, 0.5},
		{"a part with sections is a can", "8+8/450", -0.1, 0.5},
		{"before 1985", "100uF 25V 1974", -0.1, 0.5},
		{"what is printed counts", "100uF 25V can M", -0.2, 0.2},
	} {
		t.Run(c.name, func(t *testing.T) {
			claim, _, err := complete(booktest.Part(t, Book(), c.words).Claim)
			r, ok := claim.Rating(screening.Tolerance.Name, claim.Sections()[0])
			if err != nil || !ok || r.Low != c.low || r.High != c.high {
				t.Errorf("%v, %v; want %v to %v", r, err, c.low, c.high)
			}
		})
	}
}
