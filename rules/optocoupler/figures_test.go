package optocoupler

import (
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

// The figures once more. semiconductors.md 2.1: infrared 1.1 to 1.6 V; 10: the lowest CTR is 10 %. The bounds around them are the house's.
func TestTheTableHoldsItsFigures(t *testing.T) {
	booktest.Figures(t, figuresCSV, `
led 0.90 1.70 0.0002 0.030 house
dark-current 0 10e-6 0 0 common-practice
aged 0.70 1 0 0 house
works 0.07 100 0 0 house
`, "of", "low", "high", "from", "to", "status")
}

// A ratio holds at its LED current and near its VCE: with 0.5 V left the transistor is saturated, and the ratio says nothing.
func TestARatioHoldsAtItsCondition(t *testing.T) {
	for at, want := range map[string]screening.Outcome{
		"10mA,10V": screening.Pass, "10mA,5V": screening.Pass, "10mA,0.6V": screening.Missing, "5mA,10V": screening.Missing,
	} {
		for _, f := range judge(t, "4N35 ctr@"+at+"=140%", screening.DefaultPolicy()).Findings {
			if f.Limit.Criterion == ratioCriterion && f.Outcome != want {
				t.Errorf("%s: %v, want %v (%s)", at, f.Outcome, want, f.Why)
			}
		}
	}
}

// Where no reverse rating is claimed the LED's is taken as the lowest of any, 3 V, and no test goes beyond it.
func TestTheLEDIsNeverPutUnderMoreThanThreeVoltsInReverse(t *testing.T) {
	j := judge(t, "rated:ctr@5mA,5V=80%..160%", screening.DefaultPolicy())
	if v := cautions(j.Part, screening.AtMeasure)[0].Values["reverse-voltage"]; v != 3 {
		t.Errorf("%v V", v)
	}
	for _, f := range j.Findings {
		if f.Limit.Criterion == breakdownCriterion && (f.Limit.Low != 3 || f.Limit.Source.Status != screening.FromMemory || len(recipes(j.Part, f.Limit)) > 0) {
			t.Errorf("%+v", f.Limit)
		}
	}
}

// Legs are recalled even where the row is published.
func TestLegsAreSaidToBeRecalled(t *testing.T) {
	for _, words := range []string{"4N35", "PC817A"} {
		if said := booktest.Texts(judge(t, words, screening.DefaultPolicy())); !strings.Contains(said, "(from memory)") || strings.Contains(said, "(published)") {
			t.Errorf("%s:\n%s", words, said)
		}
	}
}
