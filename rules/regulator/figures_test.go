package regulator

import (
	"math"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

// The figures once more. semiconductors.md 10: 4.80 to 5.20 V and 4.75 to 5.25 V, dropout 2 V at 1 A. What is made of them is the house's.
func TestTheTableHoldsItsFigures(t *testing.T) {
	booktest.Figures(t, figuresCSV, `
wider 1.25 house
wider-7805 1.25 published
nominal 0.04 house
quiescent 1.5 house
dropout 2.5 house
headroom 2.5 house
gross 0.1 house
`, "of", "value", "status")
}

// ±4 % of a printed voltage, and a quarter more of that where it is serviceable; 8 mA, and half as much again.
func TestBoundsAreComputedFromWhatIsClaimed(t *testing.T) {
	for words, want := range map[string]map[screening.Grade][2]float64{
		"type=XR12 12V": {screening.WithinSpec: {11.52, 12.48}, screening.Serviceable: {11.4, 12.6}},
		"LM317":         {screening.WithinSpec: {1.2, 1.3}, screening.Serviceable: {1.1875, 1.3125}},
	} {
		for _, f := range judge(t, words, screening.DefaultPolicy()).Findings {
			if w, l := want[f.Limit.Grade], f.Limit; l.Criterion == voltageCriterion && (math.Abs(l.Low-w[0]) > 1e-9 || math.Abs(l.High-w[1]) > 1e-9) {
				t.Errorf("%s: %v to %v, want %v", words, l.Low, l.High, w)
			}
		}
	}
	for words, want := range map[string]screening.Verdict{"iq@10V=12.0mA": screening.Accept, "iq@10V=12.1mA": screening.Reject} {
		if j := judge(t, "7805 vout@10V,100mA=5.03 "+words, booktest.Exactly()); j.Verdict != want {
			t.Errorf("%s: %s", words, j.Verdict)
		}
	}
}

// Headroom is 2.5 V above the output (house: 2 V of dropout and half a volt of ripple): at 7.4 V in a 7805 proves nothing, at 7.5 V it does.
func TestHeadroom(t *testing.T) {
	for words, want := range map[string]screening.Verdict{
		"7805 vout@7.5V,100mA=5.02": screening.Accept, "7805 vout@7.4V,100mA=5.02": screening.Undecided,
		"7812 vout@14.5V,100mA=12.05": screening.Accept, "7812 vout@14.4V,100mA=12.05": screening.Undecided,
		"LM317 vref@3.75V,10mA=1.25": screening.Accept, "LM317 vref@3.7V,10mA=1.25": screening.Undecided,
	} {
		if j := judge(t, words, screening.DefaultPolicy()); j.Verdict != want {
			t.Errorf("%s: %s\n%s", words, j.Verdict, booktest.Texts(j))
		}
	}
}

// Legs are recalled even where the row is published.
func TestLegsAreSaidToBeRecalled(t *testing.T) {
	if said := booktest.Texts(judge(t, "7805", screening.DefaultPolicy())); !strings.Contains(said, "tab ground (from memory)") {
		t.Error(said)
	}
}
