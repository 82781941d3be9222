package polymer

import (
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

// A large part of a high voltage passes much at its leakage limit, so a resistor for that current alone would turn tens of watts into heat on
// a dead short; nobody owns that.
func TestTheLeakageTestsResistorStandsADeadShort(t *testing.T) {
	for _, words := range []string{"1000uF 63V", "1000uF 16V", "10uF 100V aluminium", "47uF 35V tantalum", "470uF 2.5V"} {
		j := booktest.Judge(t, Book(), words, screening.DefaultPolicy())
		limits, err := Book().Limits(j.Claim)
		if err != nil {
			t.Fatal(err)
		}
		told := 0
		for _, l := range limits {
			if l.On != screening.Leakage.Name {
				continue
			}
			for _, r := range Book().Recipes(j.Part, l) {
				told++
				ohms, watts := r.Values["series-resistance"], r.Values["resistor-power"]
				v, _ := j.Claim.Nominal(screening.RatedVoltage.Name, "")
				if watts > 5*1.0001 || ohms <= 0 || v*v/ohms > watts*1.0001 {
					t.Errorf("%s: %v Ω turns %v W into heat on a dead short, and says %v W", words, ohms, v*v/ohms, watts)
				}
			}
		}
		if told == 0 {
			t.Errorf("%s: no recipe for leakage", words)
		}
	}
}
