package bridge

import (
	"math"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
)

// The figures once more. semiconductors.md 2.1: silicon 0.45 to 0.6 V at 1 mA (from memory); 2 mV/K (published) makes 75 K of 0.15 V.
func TestTheTableHoldsItsFigures(t *testing.T) {
	booktest.Figures(t, forwardCSV, `
expected 0.45 0.60 0.0005 0.002 from-memory
sound 0.30 0.85 0.0002 0.020 house
apart 0 0.05 0.0002 0.020 house
far-apart 0 0.15 0.0002 0.020 house
leakage 0 10e-6 0 0 common-practice
`, "of", "low", "high", "from", "to", "status")
}

// 10 µA for each of two legs: 20 µA across the AC leads.
func TestTwoLegsMayLeakTwice(t *testing.T) {
	for words, want := range map[string]screening.Verdict{"20uA": screening.Accept, "20.1uA": screening.Reject, "12uA": screening.Accept} {
		j := booktest.Judge(t, Book(types.Builtin()), "GBPC25"+four+" ir/ac1-ac2@30V="+words+" temperature=25C vbr/ac2-ac1=OL", booktest.Exactly())
		if j.Verdict != want {
			t.Errorf("%s: %s, want %s\n%s", words, j.Verdict, want, booktest.Texts(j))
		}
	}
}

// Every reverse test is limited to 1 mA into a short: 30 V through 30 kΩ, 30 mW; 800 V through 800 kΩ, 0.8 W, with the danger said. Forward
// through (9 − 0.6)/1 mA = 8.4 kΩ.
func TestTheRecipesAreComputed(t *testing.T) {
	j := judge(t, "KBP208")
	for _, f := range j.Findings {
		for _, r := range recipes(j.Part, f.Limit) {
			v := r.Values
			switch i, given := v["test-current"]; {
			case !given:
			case f.Limit.On == screening.VF.Name:
				if math.Abs(v["series-resistance"]-(9-min(f.Limit.High, 1.7))/i) > 1e-6 || math.Abs(v["resistor-power"]-i*i*v["series-resistance"]) > 1e-9 {
					t.Errorf("%s %s: %v", f.Limit.On, f.Limit.Section, v)
				}
			case i != 1e-3 || v["series-resistance"] != v["supply"]/1e-3 || math.Abs(v["resistor-power"]-v["supply"]*1e-3) > 1e-12:
				t.Errorf("%s %s: %v", f.Limit.On, f.Limit.Section, v)
			}
		}
	}
	all := cautions(j.Part, screening.AtMeasure)
	if len(all) != 2 || all[0].Values["series-resistance"] != 30e3 || math.Abs(all[0].Values["resistor-power"]-0.03) > 1e-12 ||
		all[1].Level != screening.Danger || all[1].Values["series-resistance"] != 800e3 || math.Abs(all[1].Values["resistor-power"]-0.8) > 1e-12 {
		t.Errorf("%+v", all)
	}
}
