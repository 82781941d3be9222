package led

import (
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

// The figures once more, semiconductors.md 2.1: at 20 mA (published), and the house's bands around them.
func TestTheTableHoldsItsFigures(t *testing.T) {
	booktest.Figures(t, coloursCSV, `
infrared 1.1 1.6 0.8 1.9 published
red 1.8 2.2 1.4 2.6 published
orange 2.0 2.1 1.5 2.6 published
amber 2.0 2.3 1.5 2.7 published
yellow-green 1.9 2.4 1.5 2.8 published
true-green 2.8 3.5 2.2 4.0 published
green 1.9 3.5 1.5 4.0 published
blue 3.0 3.6 2.3 4.2 published
white 2.8 3.6 2.3 4.2 published
uv 3.2 4.4 2.6 4.9 published
unknown 1.1 4.4 0.8 4.9 published
`, "colour", "low", "high", "sound-low", "sound-high", "status")
}

// In reverse never more than 5 V, and that through 5 kΩ: 1 mA, 5 mW.
func TestTheReverseTestIsGentle(t *testing.T) {
	for _, words := range []string{"red", "TSAL6200", "blue rated:vrrm=12V", ""} {
		j := judge(t, words, screening.DefaultPolicy())
		tried := 0
		for _, f := range j.Findings {
			if f.Limit.On != screening.VBR.Name {
				continue
			}
			for _, r := range recipes(j.Part, f.Limit) {
				tried++
				if v := r.Values; v["supply"] > 5 || v["series-resistance"] != 5000 || v["resistor-power"] != 5e-3 {
					t.Errorf("%q: %v", words, v)
				}
			}
		}
		if tried != 1 {
			t.Errorf("%q: %d recipes", words, tried)
		}
	}
}
