package paper

import (
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/family"
	"goodbin/rules/internal/booktest"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var verdictCases = []struct {
	name, words string
	verdict     screening.Verdict
	says        string
}{
	{"insulates at its working voltage", "0.1uF 400V M waxed capacitance=103nF leakage@400V=0.50uA", screening.Accept, "leakage when warm"},
	{"read on an insulation tester", "0.1uF 400V M moulded dated=1965 capacitance=103nF insulation-resistance@500V=>2G", screening.Accept, ""},
	{"80 GΩ as new, by self-discharge", "0.1uF 400V M waxed capacitance=103nF time-constant@400V=8000s", screening.Accept, ""},
	{"oil of 1985", "4uF 600V 10% oil dated=1985 capacitance=4.05uF leakage@600V=2.00uA", screening.Accept, ""},
	{"a block of three", "3x0.1/600 M capacitance/1=0.1uF capacitance/2=0.1uF capacitance/3=0.1uF leakage/1@600V=0.50uA leakage/2@600V=0.50uA " +
		"leakage/3@600V=200uA", screening.Reject, "leakage current of section 3"},
	{"capacitance alone does not pass it", "0.1uF 400V M waxed capacitance=103nF", screening.Undecided, "MEASURE leakage current at 400 V"},
	{"OL on an ohms range does not pass it", "0.1uF 400V M waxed capacitance=103nF insulation-resistance=OL", screening.Undecided, "it can show the part bad, not good"},
	{"10 MΩ and more on a multimeter does not pass it", "0.1uF 400V M waxed capacitance=103nF insulation-resistance=>40M", screening.Undecided, "measure at 400 V"},
	{"at a tenth of its voltage it does not pass", "0.1uF 400V M waxed capacitance=103nF leakage@40V=10nA", screening.Undecided, "measure at 400 V"},
	{"40 MΩ: too much for coupling, which no sheet says", "0.1uF 400V M waxed capacitance=103nF leakage@400V=10.0uA", screening.Undecided, "as a bypass it may serve"},
	{"leaks plainly at voltage", "0.1uF 400V M waxed capacitance=103nF leakage@400V=100uA", screening.Reject, "at most 40 µA"},
	{"leaks already on an ohms range", "0.1uF 400V M waxed capacitance=103nF insulation-resistance=2.0M", screening.Reject, "at most 2.00 MΩ"},
	{"wet: loses 9 %", "0.1uF 400V M waxed capacitance=103nF leakage@400V=0.50uA tan-delta@1kHz=0.09", screening.Reject, "at most 0.05"},
	{"reads half as much again", "0.1uF 400V M waxed capacitance=150nF leakage@400V=0.50uA", screening.Reject, "damp and leakage raise paper"},
	{"wax has run", "0.1uF 400V M waxed capacitance=103nF leakage@400V=0.50uA seen=wax-run", screening.Reject, "its seal is gone"},
	{"cracked metallised paper", "0.1uF 400V M mp capacitance=103nF leakage@400V=0.50uA seen=cracked", screening.Barred, "cracked"},
	{"X2 called paper", "0.1uF 400V M mp X2 capacitance=103nF leakage@400V=0.50uA", screening.Barred, "mains-capacitor"},
}

func TestVerdicts(t *testing.T) {
	seen := map[screening.Verdict]int{}
	for _, tt := range verdictCases {
		t.Run(tt.name, func(t *testing.T) {
			j := booktest.Judge(t, Book(), tt.words, screening.DefaultPolicy())
			seen[j.Verdict]++
			if j.Verdict != tt.verdict || !strings.Contains(booktest.Texts(j), tt.says) {
				t.Errorf("%s: %s, want %s, saying %q\n%s", tt.words, j.Verdict, tt.verdict, tt.says, booktest.Texts(j))
			}
		})
	}
	booktest.EveryVerdict(t, seen, screening.Treat, screening.Regrade)
}

// The table of families bars oil of unknown date, and of before July 1979 (40 CFR 761.2: published), unless it is marked.
func TestOilOfUnknownDateIsBarred(t *testing.T) {
	book := Book()
	family.Attach(book, family.Builtin())
	for words, barred := range map[string]bool{
		"oil": true, "oil dated=1965": true, "oil dated=1979": true, "paper-in-oil": true, "oil dated=197x": true,
		"oil dated=1985": false, "oil no-pcb": false, "waxed": false, "mp dated=1970": false,
	} {
		j := booktest.Judge(t, book, "4uF 600V 10% "+words+" capacitance=4.05uF leakage@600V=2.00uA", screening.DefaultPolicy())
		if got := j.Verdict == screening.Barred; got != barred || !got && j.Verdict != screening.Accept {
			t.Errorf("%s: %s\n%s", words, j.Verdict, booktest.Texts(j))
		}
	}
}

// Below its working voltage paper is never accepted, whatever it reads there.
func TestOnlyWorkingVoltagePasses(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		part := booktest.Part(t, Book(), "0.1uF 400V M waxed capacitance=100nF")
		volts := rapid.Float64Range(0.5, 379).Draw(r, "volts")
		d, x := screening.Leakage, rapid.Float64Range(0, 1e-3).Draw(r, "amperes")
		if rapid.Bool().Draw(r, "as ohms") {
			d, x = screening.InsulationResistance, rapid.Float64Range(0, 1e13).Draw(r, "ohms")
		}
		part.Readings = append(part.Readings, screening.Reading{
			Of: d.Name, Unit: d.Unit, Value: x, At: screening.At(screening.Voltage, volts), Sense: rapid.SampledFrom([]quantity.Sense{
				quantity.Exactly, quantity.AtLeast, quantity.AtMost,
			}).Draw(r, "sense"),
		})
		if j := booktest.JudgePart(t, Book(), part, screening.DefaultPolicy()); j.Verdict == screening.Accept {
			r.Fatalf("%s\n%s", j.Verdict, booktest.Texts(j))
		}
	})
}

func TestAMainsPartIsNeverAccepted(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		mark := rapid.SampledFrom([]string{"X1", "X2", "Y2", "250VAC", "275V~", "X2 250VAC"}).Draw(r, "mark")
		volts := rapid.Float64Range(1, 1000).Draw(r, "volts")
		part := booktest.Part(t, Book(), "0.1uF 400V M mp "+mark+" capacitance=100nF")
		part.Readings = append(part.Readings, screening.Reading{
			Of: screening.Leakage.Name, Unit: quantity.Ampere, Value: rapid.Float64Range(0, 1e-6).Draw(r, "amperes"), At: screening.At(screening.Voltage, volts),
		})
		if j := booktest.JudgePart(t, Book(), part, screening.DefaultPolicy()); j.Verdict != screening.Barred {
			r.Fatalf("%s: %s", mark, j.Verdict)
		}
	})
}

func TestVoltageIsAskedFor(t *testing.T) {
	part := booktest.Part(t, Book(), "0.1uF waxed capacitance=103nF")
	if _, err := screening.Judge(Book(), part, screening.DefaultPolicy()); err == nil || !strings.Contains(err.Error(), "working voltage") {
		t.Errorf("without a voltage: %v", err)
	}
}

func TestTheTableIsChecked(t *testing.T) {
	for name, text := range map[string]string{
		"a figure missing":   strings.Replace(figuresCSV, "worn-tan", "other-tan", 1),
		"a figure of zero":   strings.Replace(figuresCSV, "worn-tan,0.05", "worn-tan,0", 1),
		"a status not known": strings.Replace(figuresCSV, ",from memory", ",sure", 1),
	} {
		if _, err := readFigures(text); err == nil {
			t.Errorf("%s is read", name)
		}
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(), "0.1uF 400V M waxed capacitance=103nF leakage@400V=0.50uA")
}

// What bars a can needs no voltage that nobody can read any more; that it may be charged is said all the same.
func TestOilWithoutAVoltageIsBarred(t *testing.T) {
	book := Book()
	family.Attach(book, family.Builtin())
	j := booktest.Judge(t, book, "4uF oil", screening.DefaultPolicy())
	if text := booktest.Texts(j); j.Verdict != screening.Barred || !strings.Contains(text, "HAZARDOUS") {
		t.Errorf("%s\n%s", j.Verdict, text)
	}
	if len(j.Cautions) != 1 || !j.Cautions[0].Gate || !strings.Contains(j.Cautions[0].Text, "taken as 600 V") {
		t.Errorf("cautions: %v", j.Cautions)
	}
}
