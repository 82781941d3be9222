package screening_test

import (
	"math"
	"strings"
	"testing"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

var test = screening.Source{Document: "test rulebook", Status: screening.House}

// quickLimit is one limit on the toy's quick value.
func quickLimit(low, high float64) screening.Limit {
	return screening.Limit{On: "quick", Unit: quantity.Volt, Criterion: "quick", Low: low, High: high, InUse: true, Source: test}
}

// withLimits is the toy with these limits and nothing else that could decide.
func withLimits(limits ...screening.Limit) *screening.Rulebook {
	b := toy()
	b.Lesser = nil
	b.Limits = func(screening.Claim) ([]screening.Limit, error) { return limits, nil }
	return b
}

func judged(t *testing.T, b *screening.Rulebook, policy screening.Policy, readings ...screening.Reading) screening.Judgement {
	t.Helper()
	j, err := screening.Judge(b, screening.Part{Kind: "toy", Readings: readings}, policy)
	if err != nil {
		t.Fatal(err)
	}
	return j
}

// A meter that keeps its specification of ±a reads a part that stands on its bound no further off than a. That is 1.73 standard uncertainties,
// more than the 1.645 of a probability of 0.95, and still it fails nothing.
func TestAMeterInsideItsSpecificationFailsNoPartOnItsBound(t *testing.T) {
	const a = 0.02
	policy := relative(a / math.Sqrt(3))
	for bound, reading := range map[float64]float64{0.8: 0.8 / (1 - 0.999*a), 0.5: 0.5 / (1 + 0.999*a)} {
		j := judged(t, withLimits(quickLimit(0.5, 0.8)), policy, exactly("quick", quantity.Volt, reading))
		if j.Verdict != screening.Undecided {
			t.Errorf("a part of %v that reads %.4f: %s", bound, reading, j.Verdict)
		}
	}
	for _, reading := range []float64{0.8 / (1 - 1.01*a), 0.5 / (1 + 1.01*a)} {
		if j := judged(t, withLimits(quickLimit(0.5, 0.8)), policy, exactly("quick", quantity.Volt, reading)); j.Verdict != screening.Reject {
			t.Errorf("%.4f, further off than the meter can be: %s", reading, j.Verdict)
		}
	}
}

// A converted value carries its uncertainty, the rule's own included; the meter's specification says nothing of it.
func TestTheSpecificationDoesNotGuardAConvertedValue(t *testing.T) {
	l := quickLimit(0.5, 0.8)
	l.At = screening.At(screening.Frequency, 120)
	b := withLimits(l)
	b.Convert = func(_ screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
		r.Value, r.U, r.At = r.Value/10, r.U/10, l.At
		return screening.Conversion{OK: true, Reading: r, Rule: "a tenth"}
	}
	r := exactly("quick", quantity.Volt, 8.5) // 0.85 ± 0.017: 2.9 standard uncertainties beyond 0.8
	r.At = screening.At(screening.Frequency, 1000)
	if j := judged(t, b, relative(0.02), r); j.Verdict != screening.Reject {
		t.Errorf("0.85 V of 0.8 V, converted: %s", j.Verdict)
	}
}

func TestARatingAnswersOnlyWithItsWholeBand(t *testing.T) {
	l := screening.Limit{On: "value", Unit: quantity.Ohm, Criterion: "value", Low: 90, High: 110, InUse: true, Evidence: screening.ByRating, Source: test}
	for _, tt := range []struct {
		low, high float64
		want      screening.Verdict
	}{
		{95, 105, screening.Accept}, {90, 110, screening.Accept}, {80, 105, screening.Undecided}, {95, 120, screening.Undecided},
	} {
		claim := screening.Claim{}.WithRating(screening.RangeRating(screening.Definition{Name: "value", Unit: quantity.Ohm}, tt.low, tt.high))
		j, err := screening.Judge(withLimits(l), screening.Part{Claim: claim}, screening.DefaultPolicy())
		if err != nil || j.Verdict != tt.want {
			t.Errorf("%v to %v: %s, %v; want %s", tt.low, tt.high, j.Verdict, err, tt.want)
		}
	}
}

func TestOfTwoReadingsThatFitTheLaterCounts(t *testing.T) {
	l := quickLimit(0.5, 0.8)
	l.At = screening.At(screening.Frequency, 120)
	b := withLimits(l)
	for i := range b.Bench {
		b.Bench[i].Fit = screening.Fit{screening.Frequency: screening.Any}
	}
	first, second := exactly("quick", quantity.Volt, 0.9), exactly("quick", quantity.Volt, 0.7)
	first.At, second.At = screening.At(screening.Frequency, 100), screening.At(screening.Frequency, 120)
	if j := judged(t, b, relative(0.001), first, second); j.Verdict != screening.Accept {
		t.Errorf("0.9 V, then 0.7 V: %s", j.Verdict)
	}
	if j := judged(t, b, relative(0.001), second, first); j.Verdict != screening.Reject {
		t.Errorf("0.7 V, then 0.9 V: %s", j.Verdict)
	}
}

// Outside a soft limit a repeat is asked for that could fail the part. To fail needs 0.95, distance 1.645·u, and the bound beyond the meter's
// specification, distance a = 1.73·u: the latter decides what is asked for.
func TestTheAccuracyAskedForOutsideASoftLimit(t *testing.T) {
	l := quickLimit(0.5, 0.8)
	l.Grade, l.Soft = screening.Serviceable, true
	j := judged(t, withLimits(l), relative(0.02), exactly("quick", quantity.Volt, 0.81))
	want := 0.01 / 0.81
	if j.Verdict != screening.Undecided || math.Abs(j.Findings[0].Wants.Accuracy-want) > 1e-6 {
		t.Errorf("%s, needs ±%v; want ±%v", j.Verdict, j.Findings[0].Wants.Accuracy, want)
	}
	// Softness belongs to the grade serviceable: as a new part it must be sure.
	l.Grade = screening.WithinSpec
	if j := judged(t, withLimits(l), relative(0.02), exactly("quick", quantity.Volt, 0.79)); j.Verdict != screening.Undecided {
		t.Errorf("0.79 V ± 2 %% within spec: %s", j.Verdict)
	}
}

// A need that a rule across readings raises counts, on whichever alternative of a criterion it stands.
func TestARaisedNeedCounts(t *testing.T) {
	wanted, alternative := quickLimit(0.5, 0.8), quickLimit(0.5, 0.9)
	wanted.Need, alternative.Need = screening.Wanted, screening.Wanted
	settled := screening.Limit{On: "value", Unit: quantity.Ohm, Criterion: "value", Low: 90, High: 110, InUse: true, Source: test}
	for raised, want := range map[bool]screening.Verdict{false: screening.Accept, true: screening.Undecided} {
		b := withLimits(settled, wanted, alternative)
		b.Adjust = func(_ screening.Part, f []screening.Finding) ([]screening.Finding, []screening.Reason) {
			if raised {
				f[2].Need = screening.Required
			}
			return f, nil
		}
		if j := judged(t, b, relative(0.001), exactly("value", quantity.Ohm, 100)); j.Verdict != want {
			t.Errorf("raised %v: %s, want %s", raised, j.Verdict, want)
		}
	}
}

// A treatment must answer every failure of a criterion; one failing alternative that it cannot undo rejects.
func TestATreatmentMustAnswerEveryFailure(t *testing.T) {
	curable, hopeless := quickLimit(-inf, 0.8), quickLimit(-inf, 0.9)
	curable.TreatHigh = screening.Dry
	if j := judged(t, withLimits(curable), relative(0.001), exactly("quick", quantity.Volt, 1)); j.Verdict != screening.Treat {
		t.Errorf("curable: %s", j.Verdict)
	}
	for _, limits := range [][]screening.Limit{{curable, hopeless}, {hopeless, curable}} {
		if j := judged(t, withLimits(limits...), relative(0.001), exactly("quick", quantity.Volt, 1)); j.Verdict != screening.Reject {
			t.Errorf("one failure of two is beyond treatment: %s", j.Verdict)
		}
	}
}

// A reading that is only too near its bound is answered by a wider tolerance, and by no other lesser claim, whichever is listed first.
func TestOnlyAToleranceAnswersACloseReading(t *testing.T) {
	b := toy()
	lesser := b.Lesser
	b.Lesser = func(p screening.Part, f []screening.Finding) []screening.Lesser {
		all := lesser(p, f)
		return []screening.Lesser{all[1], all[0]} // as measured, then ±20 %
	}
	j, err := screening.Judge(b, toyPart(111, 1e-4, 0.7), relative(0.02))
	if err != nil || j.Verdict != screening.Accept || j.RegradedAs == nil || j.RegradedAs.Text != "±20 %" {
		t.Errorf("%s as %+v, %v", j.Verdict, j.RegradedAs, err)
	}
}

// Of two alternatives the one that was read and is too near is repeated, rather than the other taken.
func TestTheAlternativeThatWasReadIsRepeated(t *testing.T) {
	slow := screening.Limit{On: "slow", Unit: quantity.Ampere, Criterion: "quick", Low: -inf, High: 1e-3, InUse: true, Source: test}
	for _, limits := range [][]screening.Limit{{slow, quickLimit(0.5, 0.8)}, {quickLimit(0.5, 0.8), slow}} {
		j := judged(t, withLimits(limits...), relative(0.02), exactly("quick", quantity.Volt, 0.79))
		if len(j.Next) != 1 || !strings.HasPrefix(j.Next[0].Text, "REPEAT quick value") {
			t.Errorf("next: %+v", j.Next)
		}
	}
}

func TestEverySlipOfAPowerOfTenIsNoticed(t *testing.T) {
	slips := map[int]bool{1: true, 2: true, 3: true, 6: true, 9: true, 12: true, 4: false, 5: false, 7: false}
	for k, slip := range slips {
		for _, exponent := range []int{k, -k} {
			r := exactly("value", quantity.Ohm, 100*math.Pow10(exponent))
			a, alarm := screening.PowerOfTen(toy(), toyPart(100, 1e-4, 0.7), r)
			if alarm != slip || alarm && (a.Exponent != -exponent || math.Abs(a.Suggested-100) > 1e-9) {
				t.Errorf("%g Ω of 100 Ω: alarm %v %+v, want %v", r.Value, alarm, a, slip)
			}
		}
	}
}
