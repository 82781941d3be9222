package mainscap

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

func TestEmbeddedTablesLoad(t *testing.T) {
	if len(tables().classes) != 7 || len(tables().asked) != 7 {
		t.Errorf("%d classes, %d technologies", len(tables().classes), len(tables().asked))
	}
}

// Component makers' safety pages on IEC 60384-14 (published): X1 4 kV, X2 2.5 kV, Y1 8 kV, Y2 5 kV up to 1 µF; above it X1, X2 and Y2 divide
// by √(C/µF), Y1 and Y4 do not.
func TestImpulse(t *testing.T) {
	for _, tc := range []struct {
		class string
		farad float64
		want  float64
	}{
		{"X1", 0.1e-6, 4000},
		{"X1", 4e-6, 2000},
		{"X2", 1e-6, 2500},
		{"X2", 2.2e-6, 2500 / math.Sqrt(2.2)},
		{"Y1", 4.7e-9, 8000},
		{"Y1", 4e-6, 8000},
		{"Y2", 4.7e-9, 5000},
		{"Y2", 4e-6, 2500},
		{"Y4", 4e-6, 2500},
	} {
		if got, ok := Impulse(tc.class, tc.farad); !ok || math.Abs(got/tc.want-1) > 1e-12 {
			t.Errorf("%s %v F: %v V, want %v", tc.class, tc.farad, got, tc.want)
		}
	}
	for _, class := range []string{"Y3", motorRun, ""} {
		if v, ok := Impulse(class, 1e-6); ok {
			t.Errorf("%q has an impulse of %v V", class, v)
		}
	}
}

// Check case 44: 34 V after 1 s from 325 V, the crest of 230 V: R·C ≤ 0.443 s, 0.94 MΩ for 0.47 µF.
func TestDischarge(t *testing.T) {
	rc := DischargeConstant(325, 34, 1)
	if math.Abs(rc-0.443) > 5e-4 || math.Abs(rc/0.47e-6-0.94e6) > 5e3 {
		t.Errorf("R·C is %v s, %v Ω for 0.47 µF", rc, rc/0.47e-6)
	}
	if !math.IsInf(DischargeConstant(30, 34, 1), 1) {
		t.Error("what is below 34 V already needs no resistor")
	}
	j := booktest.Judge(t, Book(), "470nF X2 230VAC M", screening.DefaultPolicy())
	c := caution(t, j.Cautions, "discharge-rules")
	// The part may hold 20 % more than it prints: 564 nF make it 785 kΩ.
	for name, want := range map[string]float64{
		"peak": 325.27, "resistance-34V-1s": 0.785e6, "power-34V-1s": 230 * 230 / 0.785e6, "resistance-plug-a": 1.773e6, "resistance-plug-b": 17.73e6,
		"resistance-60V-5s": 5 / math.Log(325.27/60) / 564e-9,
	} {
		if math.Abs(c.Values[name]/want-1) > 1e-3 {
			t.Errorf("%s is %v, want %v", name, c.Values[name], want)
		}
	}
	for _, words := range []string{"for up to 564 nF", "at most 780 kΩ", "a time constant of 1 s (plug) 1.7 MΩ", "to 10 V in", "licensed practice"} {
		if !strings.Contains(c.Text, words) {
			t.Errorf("does not say %q: %s", words, c.Text)
		}
	}
	if c := caution(t, booktest.Judge(t, Book(), "4.7nF Y2 250VAC", screening.DefaultPolicy()).Cautions, "discharge-rules"); strings.Contains(c.Text, "a resistor across it") {
		t.Errorf("4.7 nF is told to have a resistor: %s", c.Text)
	}
}

func caution(t *testing.T, all []screening.Caution, code string) screening.Caution {
	t.Helper()
	for _, c := range all {
		if c.Code == code {
			return c
		}
	}
	t.Fatalf("no caution %s in %v", code, all)
	return screening.Caution{}
}

// Check case 40 (KEMET R41): polypropylene 1 µF at least 30 000 MΩ, 0.1 µF at least 100 000 MΩ; tan δ 0.003. PET 0.010 (R40).
func TestLimitsOfNewParts(t *testing.T) {
	for _, tc := range []struct {
		words     string
		on        screening.Characteristic
		low, high float64
	}{
		{"1uF Y2 300VAC pp", "insulation-resistance", 30e9, math.Inf(1)},
		{"0.1uF Y2 300VAC pp", "insulation-resistance", 100e9, math.Inf(1)},
		{"1uF Y2 300VAC pp", "tan-delta", math.Inf(-1), 0.003},
		{"1uF X2 275VAC pet", "tan-delta", math.Inf(-1), 0.010},
		{"4.7nF Y2 250VAC ceramic", "insulation-resistance", 10e9, math.Inf(1)},
	} {
		j := booktest.Judge(t, Book(), tc.words, screening.DefaultPolicy())
		found := false
		for _, f := range j.Findings {
			if f.Limit.On == tc.on {
				found = true
				if f.Limit.Low != tc.low || f.Limit.High != tc.high || f.Limit.Source.Status != screening.Published {
					t.Errorf("%s %s: %v to %v (%s)", tc.words, tc.on, f.Limit.Low, f.Limit.High, f.Limit.Source)
				}
			}
		}
		if !found {
			t.Errorf("%s: no limit on %s", tc.words, tc.on)
		}
	}
}

func TestEveryPartIsBarredWithAnAnswer(t *testing.T) {
	for _, tc := range []struct{ name, words, says string }{
		{"X2 that reads well", "470nF X2 275VAC pp capacitance=470nF tan-delta@1kHz=0.001 insulation-resistance@100V=>200G", "FIT a new, approved X2 part of 470 nF, for 275 V AC or more (a Y part may stand in"},
		{"Y1 is not replaced by X", "4.7nF Y1 250V~ ceramic capacitance=4.6nF", "FIT a new, approved Y1 part of 4.7 nF, for 250 V AC or more; never an X part"},
		{"both classes are named", "10nF X1/Y2 275VAC", "X1/Y2 part"},
		{"what the class claims", "2.2uF X2 275VAC", "X2 claims: line to line; type test with 1.7 kV impulses (2.5 kV/√2.2); proof in the factory 4.3 × 275 V = 1.18 kV DC"},
		{"motor-run", "30uF run 450VAC capacitance=30uF", "motor-run part of 30 µF, for 450 V AC or more"},
		{"motor-start", "88uF start 250VAC capacitance=90uF", "motor-start part of 88 µF"},
		{"unmarked", "100nF 250VAC unmarked capacitance=100nF", "no class is marked"},
		{"no class given", "100nF capacitance=100nF", "for the voltage of your network or more"},
		{"nothing given at all", "", "of the value that the equipment's diagram gives"},
		{"cracked", "470nF X2 275VAC paper seen=cracked", "can read well until the day it burns"},
		{"oily", "30uF run 450VAC seen=oily", "is to be taken for PCB"},
		{"no approval", "470nF X2 275VAC seen=unreadable", "without class and approvals"},
		{"a bleeder reads as a resistor", "30uF run 450VAC resistance=1.02M", "may be a discharge resistor inside"},
		{"worn film reads low", "470nF X2 275VAC K capacitance=300nF", "burned its plates away"},
		{"in circuit it is barred all the same", "470nF X2 275VAC seen=in-circuit", "type approval"},
	} {
		t.Run(tc.name, func(t *testing.T) {
			j := booktest.Judge(t, Book(), tc.words, screening.DefaultPolicy())
			if text := booktest.Texts(j); j.Verdict != screening.Barred || !strings.Contains(text, tc.says) || !strings.Contains(text, "FIT a new, approved") {
				t.Errorf("%s, want barred saying %q\n%s", j.Verdict, tc.says, text)
			}
		})
	}
}

// No combination of claims, looks and readings makes such a part usable, or a part to treat.
func TestNothingMakesItUsable(t *testing.T) {
	book := Book()
	looks := []string{}
	for _, c := range book.Look {
		looks = append(looks, c.Name)
	}
	rapid.Check(t, func(t *rapid.T) {
		c := screening.Claim{}
		if rapid.Bool().Draw(t, "has value") {
			c = c.WithRating(screening.NominalRating(screening.Capacitance, math.Pow(10, rapid.Float64Range(-11, -3).Draw(t, "farad"))))
		}
		if rapid.Bool().Draw(t, "has volts") {
			c = c.WithRating(screening.NominalRating(screening.RatedVoltage, rapid.Float64Range(50, 1000).Draw(t, "volts")))
		}
		c = c.WithTrait(capacitor.TraitMainsClass, rapid.SampledFrom([]string{"", "X1", "X2", "X3", "Y1", "Y2", "Y3", "Y4", "X1/Y2", motorRun, motorStart, unmarked}).Draw(t, "class"))
		c = c.WithTrait(screening.TraitTechnology, rapid.SampledFrom([]string{"", "pp", "pet", "paper", "ceramic", "oil", "electrolytic"}).Draw(t, "technology"))
		c = c.WithTrait(screening.TraitDated, rapid.SampledFrom([]string{"", "1965", "2020"}).Draw(t, "dated"))
		part := screening.Part{Claim: c, Treated: rapid.IntRange(0, 3).Draw(t, "treated")}
		for _, name := range rapid.SliceOf(rapid.SampledFrom(looks)).Draw(t, "looks") {
			part.Look = append(part.Look, screening.Observation{Check: name, Fault: rapid.Bool().Draw(t, "fault")})
		}
		farad, ok := c.Nominal(screening.Capacitance.Name, "")
		if ok && rapid.Bool().Draw(t, "perfect") {
			part.Readings = append(part.Readings, screening.Reading{Of: screening.Capacitance.Name, Unit: quantity.Farad, Value: farad})
		}
		for range rapid.IntRange(0, 4).Draw(t, "readings") {
			f := rapid.SampledFrom(book.Bench).Draw(t, "of")
			part.Readings = append(part.Readings, screening.Reading{
				Of: f.Name, Unit: f.Unit, Value: rapid.Float64Range(0, 1e12).Draw(t, "value"),
				Sense: rapid.SampledFrom([]quantity.Sense{quantity.Exactly, quantity.AtLeast, quantity.AtMost}).Draw(t, "sense"),
				At:    screening.At(screening.Voltage, 100).With(screening.Frequency, 1000),
			})
		}
		j, err := screening.Judge(book, part, screening.DefaultPolicy())
		if err != nil {
			t.Fatal(err)
		}
		if j.Verdict != screening.Barred || j.Verdict.Usable() || len(j.Next) == 0 {
			t.Fatalf("%s\n%s", j.Verdict, booktest.Texts(j))
		}
	})
}

func TestCautions(t *testing.T) {
	run := booktest.Judge(t, Book(), "30uF run 450VAC", screening.DefaultPolicy()).Part
	look := cautions(run, screening.AtLook)
	// The crest of 450 V AC is 636 V; 33 µF, the top of ±10 %, hold 6.7 J there (the volts rounded up).
	charge := caution(t, look, "stored-charge")
	if charge.Level != screening.Danger || !charge.Gate || math.Abs(charge.Values["energy"]-6.69) > 0.01 || charge.Values["voltage"] != 637 {
		t.Errorf("motor-run charge: %+v", charge)
	}
	if pcb := caution(t, look, "pcb"); !strings.Contains(pcb.Text, "never open, drain, heat") {
		t.Errorf("PCB: %s", pcb.Text)
	}
	for words, warned := range map[string]bool{
		"30uF run 450VAC 1975": true, "30uF run 450VAC 1979": true, "30uF run 450VAC 1980": false, "30uF run 450VAC 2015": false, "30uF run 450VAC pp": false, "30uF run 450VAC oil": true, "30uF run 450VAC oil no-pcb": false, "470nF X2 275VAC": false,
	} {
		p := booktest.Judge(t, Book(), words, screening.DefaultPolicy()).Part
		got := false
		for _, c := range cautions(p, screening.AtLook) {
			got = got || c.Code == "pcb"
		}
		if got != warned {
			t.Errorf("%s: PCB warning %v", words, got)
		}
	}
	paper := booktest.Judge(t, Book(), "100nF X2 250VAC paper", screening.DefaultPolicy()).Part
	if c := caution(t, cautions(paper, screening.AtLook), "metallised-paper"); !strings.Contains(c.Text, "smokes when it is powered") {
		t.Errorf("paper: %s", c.Text)
	}
}

func TestClaimsAreRead(t *testing.T) {
	for words, want := range map[string]float64{"470nF 275VAC": 275, "470nF 250V~": 250, "470nF 440vac": 440, "470nF 275V": 275, "470nF": 230} {
		j := booktest.Judge(t, Book(), words, screening.DefaultPolicy())
		if got, _ := acVolts(j.Claim); got != want {
			t.Errorf("%s claims %v V", words, got)
		}
	}
	for words, want := range map[string]string{"470nF 5V": "no AC rating", "470nF 3kV": "no AC rating", "1F X2": "beyond a mains capacitor"} {
		_, err := screening.Judge(Book(), booktest.Part(t, Book(), words), screening.DefaultPolicy())
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", words, err, want)
		}
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(), "470nF X2 275VAC pp capacitance=462nF tan-delta@1kHz=0.001 insulation-resistance@100V=>200G")
}
