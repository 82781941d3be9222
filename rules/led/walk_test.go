package led

import (
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
)

// A bench takes a reading at the current that its question names: what a diode test reaches is asked at a tester's current, what it does not
// reach through a resistor.
func TestTheFirstReadingIsAskedWhereItCanBeTaken(t *testing.T) {
	b := Book(types.Builtin())
	for words, want := range map[string]float64{
		"": testerCurrent, "red": testerCurrent, "infrared": testerCurrent, "yellow-green": testerCurrent, "blue": publishedCurrent,
		"white": publishedCurrent, "true-green": publishedCurrent, "uv": publishedCurrent, "blue rated:if-av=10mA": 10e-3,
	} {
		w := screening.NewWalk(b, screening.DefaultPolicy(), booktest.Part(t, b, words))
		for _, q := range w.Questions() {
			if q.Ask != screening.AskReading {
				continue
			}
			if i, _ := q.At.Get(screening.Current); q.Field.Name != screening.VF.Name || i != want {
				t.Errorf("%q: first asks %s at %v A, want %v", words, q.Field.Name, i, want)
			}
			break
		}
	}
}

// Who lit an unmarked one has seen its colour: it is asked for then, and not before.
func TestTheColourIsAskedForOnceItWasLit(t *testing.T) {
	b := Book(types.Builtin())
	for words, want := range map[string]bool{"": false, "vf=1.72 vbr=OL": true, "red vf=1.72 vbr=OL": false, "vf=0.62": false} {
		asked := false
		for _, q := range screening.NewWalk(b, screening.DefaultPolicy(), booktest.Part(t, b, words)).Questions() {
			asked = asked || q.Ask == screening.AskClaim && q.Field.Name == TraitColour
		}
		if asked != want {
			t.Errorf("%q: colour asked %v", words, asked)
		}
	}
}
