package entry

import (
	"errors"
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

func bookOf(t testing.TB, kind screening.Kind) *screening.Rulebook {
	t.Helper()
	b, ok := testBooks().Find(kind)
	if !ok {
		t.Fatalf("no test kind %s", kind)
	}
	return b
}

var at = screening.At

var readingTests = []struct {
	name, kind, word string
	want             screening.Reading
}{
	{"a value with prefix and unit", "can", "capacitance=2010uF", screening.Reading{Of: "capacitance", Value: 2010e-6, Step: 1e-6}},
	{"the prefix alone implies the field's unit", "can", "esr@120Hz=61m", screening.Reading{Of: "esr", Value: 0.061, Step: 1e-3, At: at(screening.Frequency, 120)}},
	{
		"conditions follow their units", "can", "leakage@35V,2min=45uA",
		screening.Reading{Of: "leakage", Value: 45e-6, Step: 1e-6, At: at(screening.Voltage, 35).With(screening.After, 120)},
	},
	{
		"named conditions hold an equals sign, and the last one separates", "transistor", "hfe@ic=10mA,vce=1V=180",
		screening.Reading{Of: "hfe", Value: 180, Step: 1, At: at(screening.IC, 0.01).With(screening.VCE, 1)},
	},
	{
		"what bare volts and amperes mean is the characteristic's", "transistor", "hfe@10mA,1V=180",
		screening.Reading{Of: "hfe", Value: 180, Step: 1, At: at(screening.IC, 0.01).With(screening.VCE, 1)},
	},
	{
		"named conditions serve where bare ones are refused", "transistor", "vce-sat@ic=10mA,ib=1mA=0.2V",
		screening.Reading{Of: "vce-sat", Value: 0.2, Step: 0.1, At: at(screening.IC, 0.01).With(screening.IB, 0.001)},
	},
	{"..x is at most", "can", "leakage=..0.1uA", screening.Reading{Of: "leakage", Value: 1e-7, Step: 1e-7, Sense: quantity.AtMost}},
	{"x.. is at least", "can", "capacitance=2200uF..", screening.Reading{Of: "capacitance", Value: 2200e-6, Step: 1e-6, Sense: quantity.AtLeast}},
	{"<x is at most", "can", "leakage=<0.1uA", screening.Reading{Of: "leakage", Value: 1e-7, Step: 1e-7, Sense: quantity.AtMost}},
	{"OL proves what the definition says", "transistor", "blocking=OL", screening.Reading{Of: "blocking", Value: 2e6, Sense: quantity.AtLeast, Over: true}},
	{"a decimal comma", "can", "esr=0,061", screening.Reading{Of: "esr", Value: 0.061, Step: 1e-3}},
	{"°C needs no degree sign", "can", "temperature=24C", screening.Reading{Of: "temperature", Value: 24, Step: 1}},
	{"temperature is known to every kind", "transistor", "temperature=24", screening.Reading{Of: "temperature", Value: 24, Step: 1}},
	{"a section", "can", "capacitance/2=8.2uF", screening.Reading{Of: "capacitance", Section: "2", Value: 8.2e-6, Step: 1e-7}},
	{"zero is a value, and DC a condition", "can", "esr@0Hz=0.00", screening.Reading{Of: "esr", Step: 0.01, At: at(screening.Frequency, 0)}},
	{"a negative reading within two digits is zero", "can", "leakage=-0.01uA", screening.Reading{Of: "leakage", Step: 1e-8}},
	{
		"repeats", "transistor", "hfe=180, 182, 181",
		screening.Reading{Of: "hfe", Value: 181, Step: 1, Repeats: []float64{180, 182, 181}},
	},
	{"repeats without spaces", "transistor", "hfe=180,182,181", screening.Reading{Of: "hfe", Value: 181, Step: 1, Repeats: []float64{180, 182, 181}}},
	{"repeats share the last one's unit", "can", "capacitance=47, 48 uF", screening.Reading{Of: "capacitance", Value: 47.5e-6, Step: 1e-6, Repeats: []float64{47e-6, 48e-6}}},
	{"repeats with decimal commas are separated by ;", "can", "esr=0,5;0,7", screening.Reading{Of: "esr", Value: 0.6, Step: 0.1, Repeats: []float64{0.5, 0.7}}},
}

func TestReadings(t *testing.T) {
	for _, tt := range readingTests {
		t.Run(tt.name, func(t *testing.T) {
			book := bookOf(t, screening.Kind(tt.kind))
			parsed, err := Words(book, []string{tt.word})
			if err != nil {
				t.Fatal(err)
			}
			want := tt.want
			f, _ := book.BenchField(want.Of)
			want.Unit, want.Typed = f.Unit, tt.word[strings.LastIndexByte(tt.word, '=')+1:]
			if want.Of == screening.Temperature.Name {
				want.Unit = quantity.Celsius
			}
			diff := cmp.Diff([]screening.Reading{want}, parsed.Readings, cmpopts.EquateApprox(1e-12, 1e-18),
				cmp.Comparer(func(a, b screening.Condition) bool { return a == b }))
			if diff != "" {
				t.Errorf("-want +got\n%s", diff)
			}
			if len(parsed.Echo) != 1 {
				t.Errorf("echo = %q, want one line", parsed.Echo)
			}
		})
	}
}

func TestClaims(t *testing.T) {
	tests := []struct{ name, kind, words, want string }{
		{"values are claimed by unit", "can", "2200uF 35V M", "2200 µF 35 V ±20 %"},
		{"percent", "can", "5%", "±5 %"},
		{"asymmetric percent", "can", "+80-20%", "-20/+80 %"},
		{"a typographic minus", "can", "−10/+50%", "-10/+50 %"},
		{"old print", "can", ".05MFD 600V", "50 nF 600 V"},
		{"capacitance and voltage as on a can", "can", "100/25", "100 µF 25 V"},
		{"with units", "can", "100uF/25V", "100 µF 25 V"},
		{"sections", "can", "8+8/450", "8+8 µF 450 V"},
		{"sections with voltages of their own", "can", "50/350+25/25", "50+25 µF 350+25 V"},
		{"sections that are alike", "can", "2x50/300", "50+50 µF 300 V"},
		{"a year is a date where the kind has one", "can", "100/25 1974", "100 µF 25 V 1974"},
		{"a decade", "can", "197x", "197x"},
		{"a word of a trait", "can", "AXIAL", "axial"},
		{"a word that stands for another text", "can", "case=snap", "snap-in"},
		{"a known type number comes before every value", "transistor", "1n4148", "1N4148"},
		{"even where it reads as a value too", "transistor", "4N7", "4N7"},
		{"an unknown type number by name", "transistor", "type=GT308", "GT308"},
		{"a group letter", "transistor", "B npn", "npn B"},
		{"rated always works", "transistor", "rated:vceo=40V", "40 V"},
		{"a rated range", "transistor", "rated:hfe@ic=2mA,vce=5V=110..220", "hfe 110 .. 220"},
		{"a rated minimum", "transistor", "rated:hfe=100..", "hfe ≥ 100"},
		{"a rated maximum", "transistor", "rated:vceo=..40V", "≤ 40 V"},
		{"a name that is only claimed needs no rated", "can", "voltage=35V", "35 V"},
		{"a rated tolerance", "can", "rated:tolerance=+80-20%", "-20/+80 %"},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			parsed, err := Words(bookOf(t, screening.Kind(tt.kind)), strings.Fields(tt.words))
			if err != nil {
				t.Fatal(err)
			}
			got := strings.Join(strings.FieldsFunc(parsed.Claim.String(), func(r rune) bool { return r == ' ' }), " ")
			if got != tt.want && sorted(got) != sorted(tt.want) {
				t.Errorf("%s claims %q, want %q", tt.words, got, tt.want)
			}
		})
	}
}

func sorted(s string) string {
	fields := strings.Fields(s)
	for i := range fields {
		for j := i + 1; j < len(fields); j++ {
			if fields[j] < fields[i] {
				fields[i], fields[j] = fields[j], fields[i]
			}
		}
	}
	return strings.Join(fields, " ")
}

func TestSectionsAreNamed(t *testing.T) {
	parsed, err := Words(bookOf(t, "can"), []string{"16+8/450"})
	if err != nil {
		t.Fatal(err)
	}
	for _, want := range []struct {
		section string
		farad   float64
	}{{"1", 16e-6}, {"2", 8e-6}} {
		c, ok := parsed.Claim.Nominal("capacitance", want.section)
		v, okV := parsed.Claim.Nominal("voltage", want.section)
		if !ok || !okV || math.Abs(c-want.farad) > 1e-12 || v != 450 {
			t.Errorf("section %s claims %g F, %g V; want %g F, 450 V", want.section, c, v, want.farad)
		}
	}
}

func TestRefusals(t *testing.T) {
	tests := []struct{ name, kind, word, want string }{
		{"an unknown reading, with the nearest", "can", "leakge=45uA", "leakge: a can has no such reading or claim | did you mean leakage?"},
		{"a wrong unit", "can", "leakage=45uV", `leakage: "45uV" is a voltage; leakage is a current such as 45uA`},
		{"a thousand or a decimal", "can", "capacitance=1,000uF", `capacitance: "1,000uF" is ambiguous: 1.000; or 1000`},
		{"millions or repeats", "transistor", "hfe=1,000,000", `hfe: "1,000,000" is ambiguous: the commas may separate thousands, decimals or repeats | write repeats as "180, 182, 181", and a decimal as 1.5`},
		{
			"one decimal or two repeats", "transistor", "hfe=2010,2015",
			`hfe: "2010,2015" could be: one value with a decimal comma: write 2010.2015; or two readings: write "2010, 2015"`,
		},
		{"m is never minutes", "can", "leakage@35V,2m=45uA", `leakage: condition "2m" could mean: 2 milli of something: write 2mA or 2mV; or 2 minutes: write 2min`},
		{"a condition without a unit", "can", "esr@120=61m", `esr: condition "120" has no unit | for a frequency write 120Hz`},
		{"a decimal comma in a condition", "can", "leakage@2,5V=1uA", `leakage: condition "2" has no unit | write it such as 35V, 120Hz, 2min; conditions have no decimal comma`},
		{"a condition stated twice", "can", "leakage@35V,30V=1uA", `leakage: the condition "@35V,30V" states the voltage twice`},
		{
			"bare conditions where there is more than one voltage", "transistor", "vce-sat@10mA=0.2V",
			`vce-sat: condition "10mA": there is more than one voltage and current here; name it | write it as ic=10mA or ib=1mA, vce=5V, vgs=10V`,
		},
		{"an unknown condition", "transistor", "hfe@vec=1V=180", `hfe: "vec" is no condition | did you mean vce?`},
		{"a condition without a value after it", "transistor", "hfe@ic=10mA", `hfe: the value is missing | the last "=" separates the value: hfe@ic=CONDITION=VALUE`},
		{"a bare word that two traits take", "transistor", "C", `"C" could be claimed as: gain group C: write group=C; or bin C: write bin=C`},
		{"a bare value that two ratings take", "transistor", "40V", `"40V" could be claimed as: collector voltage 40 V: write rated:vceo=40V; or collector-base voltage 40 V: write rated:vcbo=40V`},
		{"a letter with two meanings", "can", "A", `"A" could mean: agreed; or ±0.05 % | write the one that is meant`},
		{"a number and K on a capacitor", "can", "47K", `"47K" could mean: 47 pF K; or 47 nF | write the one that is meant`},
		{"claimed twice", "can", "35V 50V", "voltage: is claimed twice: 35 V, then 50 V"},
		{"a trait claimed twice", "transistor", "npn pnp", `polarity: is claimed twice: "npn", then "pnp"`},
		{"a trait with listed words takes only these", "transistor", "polarity=nnp", `polarity: "nnp" is none of its words | did you mean npn or pnp?`},
		{"a range is no reading", "can", "leakage=1uA..2uA", `leakage: "1uA..2uA" is a range; a reading is one value, ..x (at most) or x.. (at least) | what the part claims is written rated:leakage=1uA..2uA`},
		{"OL where it proves nothing", "can", "capacitance=OL", `capacitance: "OL" proves nothing here | write what the meter's range proves, such as >2010uF`},
		{"NaN", "can", "capacitance=NaN", `capacitance: "NaN" has no number in it`},
		{"infinity", "can", "capacitance=Inf", `capacitance: "Inf" has no number in it`},
		{"something nobody looks for", "can", "seen=craked", `seen: nothing to look for on a can is called "craked" | did you mean cracked?`},
		{"a section of what belongs to the whole part", "can", "temperature/2=24C", "temperature: belongs to the whole part; it has no section"},
		{"an empty value", "can", "capacitance=", "capacitance: the value is missing"},
		{"a trait is no rating", "transistor", "rated:type=2N3904", "type: is claimed in words | write type=TEXT"},
		{"a unit that nothing claims", "can", "5A", `"5A" is a current, which a can does not claim | it claims capacitance (2200uF), voltage (35V), tolerance (M), dated (1974); a reading has its name before it: NAME=VALUE`},
		{"a terminal escape is shown, not sent", "can", "case=\x1b[31mred", `case: "\x1b[31mred" holds a control character`},
		{"too many sections", "can", "13x8/450", `"13x8/450": "13x8" is not a capacitance such as 2200uF; "x8" is not understood`},
		{"a zero capacitance", "can", "0/25", `"0/25": "0" is not above zero`},
	}
	for _, tt := range tests {
		t.Run(tt.name, func(t *testing.T) {
			_, err := Words(bookOf(t, screening.Kind(tt.kind)), strings.Fields(tt.word))
			if strings.Contains(tt.word, ", ") {
				_, err = Words(bookOf(t, screening.Kind(tt.kind)), []string{tt.word})
			}
			e, ok := err.(*Error)
			if !ok {
				t.Fatalf("error %v of type %T, want *Error", err, err)
			}
			got := e.Error()
			if e.Hint != "" {
				got += " | " + e.Hint
			}
			if got != tt.want {
				t.Errorf("%s\n got: %s\nwant: %s", tt.word, got, tt.want)
			}
		})
	}
}

func TestSeenAndTreated(t *testing.T) {
	book := bookOf(t, "can")
	parsed, err := Words(book, []string{"seen=cracked,leaking", "treated=2"})
	if err != nil {
		t.Fatal(err)
	}
	want := []screening.Observation{{Check: "mains-or-cracked", Fault: true}, {Check: "bulged", Fault: true}}
	if diff := cmp.Diff(want, parsed.Look); diff != "" || parsed.Treated != 2 {
		t.Errorf("treated %d, look -want +got\n%s", parsed.Treated, diff)
	}
	parsed, err = Words(book, []string{"seen=nothing"})
	if err != nil {
		t.Fatal(err)
	}
	want = []screening.Observation{{Check: "mains-or-cracked"}, {Check: "bulged"}}
	if diff := cmp.Diff(want, parsed.Look); diff != "" {
		t.Errorf("seen=nothing: look -want +got\n%s", diff)
	}
}

func TestLimitsOnWords(t *testing.T) {
	book := bookOf(t, "can")
	for name, words := range map[string][]string{
		"a long word":   {strings.Repeat("x", MaxWordBytes+1)},
		"many words":    make([]string, MaxWords+1),
		"many repeats":  {"capacitance=" + strings.Repeat("1;", MaxRepeats) + "1"},
		"many sections": {strings.Repeat("8+", MaxSections) + "8/450"},
	} {
		if _, err := Words(book, words); err == nil {
			t.Errorf("%s: no error", name)
		} else if len(err.Error()) > 200 {
			t.Errorf("%s: the error is %d bytes long", name, len(err.Error()))
		}
	}
}

func TestNearest(t *testing.T) {
	names := []string{"capacitance", "esr", "leakage", "tan-delta"}
	for word, want := range map[string]string{"leakge": "leakage", "cap": "capacitance", "ers": "esr", "tandelta": "tan-delta", "zzz": ""} {
		if got := strings.Join(Nearest(word, names), ","); got != want {
			t.Errorf("nearest to %s is %q, want %q", word, got, want)
		}
	}
}

func FuzzWords(f *testing.F) {
	for _, word := range []string{
		"2200uF", "8+8/450", "capacitance=2010uF", "hfe@ic=10mA,vce=1V=180", "rated:hfe=1..2", "seen=nothing", "hfe=180,182,181", "+80-20%", "capacitance/2@120Hz=1,5u",
		"C", "type=\x1b[0m", "leakage@35V,2m=1", "=", "@=", "a/b@c=d", "1;2;", "..", "rated:",
	} {
		f.Add(word)
	}
	books := testBooks()
	f.Fuzz(func(t *testing.T, word string) {
		for _, book := range books {
			parsed, err := Words(book, []string{word})
			if err != nil {
				if _, ok := err.(*Error); !ok {
					t.Fatalf("error of type %T", err)
				}
				checkPrintable(t, err.Error())
				continue
			}
			for _, line := range parsed.Echo {
				checkPrintable(t, line)
			}
			for _, r := range parsed.Readings {
				if !finite(r.Value) || !finite(r.Step) {
					t.Fatalf("%q reads as %v", word, r.Value)
				}
			}
			for _, r := range parsed.Claim.Ratings {
				if math.IsNaN(r.Low) || math.IsNaN(r.High) || r.Low > r.High {
					t.Fatalf("%q is rated %v to %v", word, r.Low, r.High)
				}
			}
		}
	})
}

func checkPrintable(t *testing.T, text string) {
	t.Helper()
	for _, r := range text {
		if r < ' ' || r == 0x7f || r >= 0x80 && r < 0xa0 {
			t.Fatalf("%q holds a control character", text)
		}
	}
}

func TestAnUnknownTypeNumberIsToldHowToBeClaimed(t *testing.T) {
	book := bookOf(t, "transistor")
	_, err := Words(book, []string{"QX308B"})
	var e *Error
	if !errors.As(err, &e) || !strings.Contains(e.Hint, "type=QX308B") {
		t.Fatalf("%v, hint %q", err, e.Hint)
	}
	for word, want := range map[string]bool{"2SC945": true, "OC71": true, "npn": false, "A": false, "film": false} {
		if looksLikeType(word) != want {
			t.Errorf("%s looks like a type number: %v", word, !want)
		}
	}
}
