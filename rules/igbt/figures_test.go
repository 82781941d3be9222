package igbt

import (
	"math"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
)

// The figures once more. semiconductors.md 3.3: ±100 nA of gate leakage, VCE(on) of 2.1 to 2.5 V, thresholds of 3 to 6 V; no diode unless one
// is packed with it (from memory). The bounds around them are the house's.
func TestTheTableHoldsItsFigures(t *testing.T) {
	booktest.Figures(t, limitsCSV, `
gate-open 1.9e6 - - common-practice
gate-readable 10e6 - - common-practice
gate-leak - 1e-6 vge=9V house
no-diode 1.9 - - house
with-diode 0.25 0.90 - house
either 0.25 - - house
on 0.4 3.0 ic=0.4A,vge=12V house
threshold 2 8 ic=0.5mA house
off-leak - 10e-6 - common-practice
`, "name", "low", "high", "at", "status")
}

// Below 20 mA a drop says only that at more current it is no less: it proves nothing and refutes a high one.
func TestASmallCurrentProvesNothing(t *testing.T) {
	for words, want := range map[string]screening.Outcome{
		"vce-on@ic=25mA,vge=12V=0.9": screening.Pass, "vce-on@ic=15mA,vge=12V=0.9": screening.Missing, "vce-on@ic=15mA,vge=12V=4.0": screening.Fail,
	} {
		j := booktest.Judge(t, Book(types.Builtin()), "IRG4BC20U "+words, screening.DefaultPolicy())
		for _, f := range j.Findings {
			if f.Limit.On == VCEOn.Name && f.Limit.Evidence != screening.ByRating && f.Outcome != want {
				t.Errorf("%s: %v, want %v (%s)", words, f.Outcome, want, f.Why)
			}
		}
	}
}

// 12 V and a 5 W lamp: 0.417 A, and at most a quarter of 5 W in a part that is half on; the threshold of any type (12 − 5) V/0.5 mA = 14 kΩ,
// of the IRG4BC10UD (3 to 6 V at 0.25 mA) (12 − 4.5) V/0.25 mA = 30 kΩ.
func TestTheRecipesAreComputed(t *testing.T) {
	b := Book(types.Builtin())
	for words, want := range map[string]float64{"IRG4BC20U": 14e3, "IRG4BC10UD": 30e3} {
		j := booktest.Judge(t, b, words, screening.DefaultPolicy())
		for _, f := range j.Findings {
			switch {
			case f.Limit.Evidence == screening.ByRating:
			case f.Limit.On == VCEOn.Name:
				v := b.Recipes(j.Part, f.Limit)[0].Values
				if math.Abs(v["collector-current"]-5.0/12) > 1e-9 || v["part-power"] != 1.25 || v["supply"] > 20 {
					t.Errorf("%s: %v", words, v)
				}
			case f.Limit.On == VGETh.Name:
				if v := b.Recipes(j.Part, f.Limit)[0].Values; math.Abs(v["series-resistance"]-want) > 1e-6 || math.Abs(v["resistor-power"]-144/want) > 1e-9 {
					t.Errorf("%s: %v", words, v)
				}
			}
		}
	}
}
