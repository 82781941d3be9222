package entry

import (
	"math"
	"testing"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

func questionFor(t testing.TB, kind, name string, low, high float64, at screening.Condition) screening.Question {
	t.Helper()
	f, ok := bookOf(t, screening.Kind(kind)).BenchField(screening.Characteristic(name))
	if !ok {
		t.Fatalf("%s has no %s", kind, name)
	}
	return screening.Question{
		Ask: screening.AskReading, Field: f, At: at,
		Limit: &screening.Limit{On: f.Name, Unit: f.Unit, Low: low, High: high, At: at},
	}
}

func TestAnswers(t *testing.T) {
	inf := math.Inf(1)
	leakageAt := screening.At(screening.Voltage, 35).With(screening.After, 120)
	capacitance := questionFor(t, "can", "capacitance", 1540e-6, 2640e-6, screening.At(screening.Frequency, 120))
	esr := questionFor(t, "can", "esr", -inf, 0.1, screening.At(screening.Frequency, 120))
	leakage := questionFor(t, "can", "leakage", -inf, 770e-6, leakageAt)
	hfe := questionFor(t, "transistor", "hfe", 100, 300, screening.Condition{})
	tests := []struct {
		name  string
		q     screening.Question
		text  string
		value float64
		sense quantity.Sense
		at    screening.Condition
		n     int // repeats
	}{
		{"a bare number counts in the prompt's unit", capacitance, "2010", 2010e-6, quantity.Exactly, capacitance.At, 0},
		{"a prefix overrides it", capacitance, "2.01m", 2010e-6, quantity.Exactly, capacitance.At, 0},
		{"a letter-and-digit value has its own", capacitance, "2m2", 2200e-6, quantity.Exactly, capacitance.At, 0},
		{"a unit after a space", capacitance, "2010 uF", 2010e-6, quantity.Exactly, capacitance.At, 0},
		{"ohms that follow no nominal count in ohms", esr, "0.061", 0.061, quantity.Exactly, esr.At, 0},
		{"amperes count in the limit's prefix", leakage, "45", 45e-6, quantity.Exactly, leakageAt, 0},
		{"a typed condition overrides the question's, the rest stands", leakage, "40uA@30V", 40e-6, quantity.Exactly, leakageAt.With(screening.Voltage, 30), 0},
		{"at most", leakage, "<0.1", 1e-7, quantity.AtMost, leakageAt, 0},
		{"at most with a space", leakage, "< 0.1 uA", 1e-7, quantity.AtMost, leakageAt, 0},
		{"a negative reading within two digits is zero", leakage, "-0.1", 0, quantity.Exactly, leakageAt, 0},
		{"values separated by spaces are repeats", hfe, "180 182 181", 181, quantity.Exactly, screening.Condition{}, 3},
		{"repeats with a unit on the last", capacitance, "2010 2012 uF", 2011e-6, quantity.Exactly, capacitance.At, 2},
		{"repeats with commas", hfe, "180, 182, 181", 181, quantity.Exactly, screening.Condition{}, 3},
		{"a decimal comma", esr, "0,5", 0.5, quantity.Exactly, esr.At, 0},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			r, err := Answer(tt.q, tt.text)
			if err != nil {
				t.Fatal(err)
			}
			if math.Abs(r.Value-tt.value) > 1e-9*math.Abs(tt.value) || r.Sense != tt.sense || r.At != tt.at || len(r.Repeats) != tt.n {
				t.Errorf("%s reads %g, %v, at %v, %d repeats; want %g, %v, at %v, %d",
					tt.text, r.Value, r.Sense, r.At, len(r.Repeats), tt.value, tt.sense, tt.at, tt.n)
			}
			if r.Typed != tt.text {
				t.Errorf("typed %q is kept as %q", tt.text, r.Typed)
			}
		})
	}
	for _, text := range []string{"", " ", "abc", "45uV", "leakage=45uA", "1e30F", "-5", "45@", "45@x", "OL", "1 2 x"} {
		if r, err := Answer(leakage, text); err == nil {
			t.Errorf("%q reads %g; want an error", text, r.Value)
		}
	}
}

func TestReadingGivenByNameTakesTheConditionThatIsAsked(t *testing.T) {
	esr := questionFor(t, "can", "esr", math.Inf(-1), 0.1, screening.At(screening.Frequency, 120))
	qs := []screening.Question{questionFor(t, "can", "capacitance", 1, 2, screening.Condition{}), esr}
	bare := screening.Reading{Of: "esr", Value: 3}
	if got := Asked(bare, qs).At; got != esr.At {
		t.Errorf("taken at %s", got)
	}
	stated := screening.Reading{Of: "esr", At: screening.At(screening.Frequency, 100e3)}
	if got := Asked(stated, qs).At; got != stated.At {
		t.Errorf("a condition that was typed was changed to %s", got)
	}
	if got := Asked(screening.Reading{Of: "leakage"}, qs).At; !got.IsZero() {
		t.Errorf("what is not asked was taken at %s", got)
	}
}

func TestReadingsTypedWithTooFewDigitsAreSaid(t *testing.T) {
	resistance := questionFor(t, "can", "esr", math.Inf(-1), 1e3, screening.Condition{})
	for text, want := range map[string]string{
		"1k": "to the nearest 1 kΩ: type every digit that is shown", "1.00k": "", "1002": "", "61m": "", "3m": "to the nearest 1 mΩ: type every digit that is shown",
		"9": "", "<1": "", "1 1": "", "0": "",
	} {
		r, err := Answer(resistance, text)
		if err != nil {
			t.Fatal(err)
		}
		if got := Coarse(r); got != want {
			t.Errorf("%s: %q, want %q", text, got, want)
		}
	}
}

func TestPromptUnit(t *testing.T) {
	inf := math.Inf(1)
	tests := []struct {
		name, kind, of string
		low, high      float64
		want           string
	}{
		{"microfarads for a large capacitor", "can", "capacitance", 1540e-6, 2640e-6, "µF"},
		{"nanofarads for a small one", "can", "capacitance", 40e-9, 54e-9, "nF"},
		{"microamperes", "can", "leakage", -inf, 770e-6, "µA"},
		{"plain ohms for an ESR, whatever the limit", "can", "esr", -inf, 0.1, "Ω"},
		{"no unit for a gain", "transistor", "hfe", 100, 300, ""},
		{"plain volts", "transistor", "vce-sat", -inf, 0.3, "V"},
		{"the plain unit where nothing bounds", "can", "capacitance", -inf, inf, "F"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			if got := PromptUnit(questionFor(t, tt.kind, tt.of, tt.low, tt.high, screening.Condition{})); got != tt.want {
				t.Errorf("prompt unit %q, want %q", got, tt.want)
			}
		})
	}
}

// A coil of 320 Ω whose only limit is "at most 100 kΩ" was asked for in kΩ, and the 320 that a meter shows rejected it.
func TestPromptUnitOfOhms(t *testing.T) {
	field := screening.Field{Definition: screening.Resistance, FollowsNominal: true}
	for want, span := range map[string]screening.Span{"Ω": {Low: math.Inf(-1), High: 100e3}, "kΩ": {Low: 9e3, High: 11e3}} {
		q := screening.Question{Ask: screening.AskReading, Field: field, Limit: &screening.Limit{Unit: field.Unit, Low: span.Low, High: span.High}}
		if got := PromptUnit(q); got != want {
			t.Errorf("%g to %g: %q, want %q", span.Low, span.High, got, want)
		}
	}
}

func TestAnswerClaim(t *testing.T) {
	book := bookOf(t, "can")
	f, _ := book.ClaimField("capacitance")
	claim, err := AnswerClaim(book, screening.Question{Ask: screening.AskClaim, Field: f}, "2200uF")
	if err != nil {
		t.Fatal(err)
	}
	if c, ok := claim.Nominal("capacitance", ""); !ok || c != 2200e-6 {
		t.Errorf("claims %g F, want 2200 µF", c)
	}
	if _, err := AnswerClaim(book, screening.Question{Ask: screening.AskClaim, Field: f}, "35V"); err == nil {
		t.Error("35V is taken as a capacitance")
	}
}

func FuzzAnswer(f *testing.F) {
	for _, text := range []string{"2010", "0,5", "<0.1 uA", "OL", "180 182 181", "45uA@30V", "1,2,3;4", "@", "< >", "-", "4k7@1", "1e-3", "- 5"} {
		f.Add(text)
	}
	questions := []screening.Question{
		questionFor(f, "can", "capacitance", 1e-6, 2e-6, screening.At(screening.Frequency, 120)),
		questionFor(f, "can", "leakage", 0, 1e-6, screening.Condition{}),
		questionFor(f, "transistor", "hfe", 1, 2, screening.Condition{}),
		questionFor(f, "transistor", "blocking", 1, 2, screening.Condition{}),
	}
	f.Fuzz(func(t *testing.T, text string) {
		for _, q := range questions {
			r, err := Answer(q, text)
			if err != nil {
				checkPrintable(t, err.Error())
				continue
			}
			if !finite(r.Value) || r.Step < 0 {
				t.Fatalf("%q reads %v with step %v", text, r.Value, r.Step)
			}
			if len(r.Repeats) == 1 {
				t.Fatalf("%q makes a series of one", text)
			}
		}
	})
}
