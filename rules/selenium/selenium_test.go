package selenium

import (
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Every selenium rectifier is barred, whatever it claims and reads.
func TestNoReadingLetsSeleniumPass(t *testing.T) {
	b := Book()
	for _, words := range []string{"", "type=B250C100", "rated:plates=10 vf=OL", "vf@1mA=0.5 vbr=OL ir@2V=..0.1uA", "vf=0.001", "seen=nothing vf=1.0", "seen=in-circuit", "seen=intermittent"} {
		if j := booktest.Judge(t, b, words, screening.DefaultPolicy()); j.Verdict != screening.Barred {
			t.Errorf("%q: %s", words, j.Verdict)
		}
	}
	rapid.Check(t, func(r *rapid.T) {
		p := screening.Part{Claim: screening.Claim{}.WithRating(screening.NominalRating(Plates, float64(rapid.IntRange(1, 200).Draw(r, "plates"))))}
		for _, f := range b.Bench {
			if rapid.Bool().Draw(r, string(f.Name)) {
				p.Readings = append(p.Readings, screening.Reading{Of: f.Name, Unit: f.Unit, Value: rapid.Float64Range(0, 300).Draw(r, "value")})
			}
		}
		j, err := screening.Judge(b, p, screening.DefaultPolicy())
		if err != nil || j.Verdict != screening.Barred || j.Verdict.Usable() {
			r.Fatalf("%v %v", j.Verdict, err)
		}
	})
}

// About 1 V forward, 25 to 30 V reverse for each plate (published).
func TestPlatesAreInformation(t *testing.T) {
	j := booktest.Judge(t, Book(), "rated:plates=10 vf@1mA=9.6", screening.DefaultPolicy())
	said := booktest.Texts(j)
	for _, want := range []string{"about 10 V forward, 250 V to 300 V in reverse", "toxic", "series", "local rules", "these 10 plates drop about 10 V"} {
		if !strings.Contains(said, want) {
			t.Errorf("does not say %q:\n%s", want, said)
		}
	}
	if r, ok := j.Part.Reading("vf", ""); !ok || r.Value != 9.6 || r.Unit != quantity.Volt {
		t.Errorf("the reading is not kept: %+v", r)
	}
}

func TestNoNumberOfPlatesIsRefused(t *testing.T) {
	b := Book()
	for _, words := range []string{"rated:plates=0", "rated:plates=2.5", "rated:plates=5000"} {
		if _, err := screening.Judge(b, booktest.Part(t, b, words), screening.DefaultPolicy()); err == nil {
			t.Errorf("%s was taken", words)
		}
	}
}

func BenchmarkJudge(b *testing.B) { booktest.Benchmark(b, Book(), "rated:plates=10 vf=OL") }
