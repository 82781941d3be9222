package film

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

var verdictCases = []struct {
	name, words string
	verdict     screening.Verdict
	says, as    string
}{
	{"a pocket meter's one reading", "100nF 250V K pet capacitance=98nF", screening.Accept, "new part", ""},
	{"nothing printed but the value", "100nF capacitance=98nF", screening.Accept, "no rated voltage", ""},
	{"drifted by what makers allow", "100nF K pet capacitance=88.5nF", screening.Accept, "heals itself", ""},
	{"MKT is polyester", "1uF 63V K MKT capacitance=0.99uF tan-delta@1kHz=0.006", screening.Accept, "new part", ""},
	{"loss twice the new part's", "1uF 63V K pet capacitance=0.99uF tan-delta@1kHz=0.016", screening.Accept, "", ""},
	{"ESR answers for loss", "1uF 250V K pet capacitance=0.985uF esr@100kHz=0.03", screening.Accept, "", ""},
	{"1 % is more than a pocket meter proves", "10nF 1% ps capacitance=10.3nF", screening.Accept, "not provable with this meter", "±5 % proven"},
	{"polystyrene 9 % off its 1 %", "10nF 1% ps capacitance=10.9nF", screening.Regrade, "", "±10 %: it reads 10.9 nF, +9.0 %"},
	{"nothing read", "100nF 250V K pet", screening.Undecided, "MEASURE capacitance at 1 kHz", ""},
	{"loss without its frequency is not compared", "1uF K pet capacitance=1.00uF tan-delta=0.2", screening.Accept, "", ""},
	{"lost a fifth", "100nF K pet capacitance=80.1nF", screening.Reject, "heals itself", ""},
	{"open", "100nF K capacitance=3.00pF", screening.Reject, "open, as film fails", ""},
	{"open, and no tolerance printed", "100nF capacitance=3.00pF", screening.Reject, "open, as film fails", ""},
	{"reads high", "100nF K capacitance=140nF", screening.Reject, "does not gain capacitance", ""},
	{"leaks", "1uF 250V K pet capacitance=0.985uF leakage@100V=40.0uA", screening.Reject, "insulation resistance reads 2.50 MΩ", ""},
	{"leaks already on an ohms range", "1uF 250V K pet capacitance=0.985uF insulation-resistance=1.2M", screening.Reject, "at most 1.20 MΩ", ""},
	{"lossy polystyrene, whose own figure is from memory", "10nF ps K capacitance=10.1nF tan-delta@10kHz=0.08", screening.Reject, "at most 0.03", ""},
	{
		"leaky low-voltage polyester, whose own figure is from memory", "1uF 63V K pet capacitance=1.00uF insulation-resistance@10V=3.0M", screening.Reject,
		"at least 33 MΩ", "",
	},
	{"melted", "10nF ps K capacitance=10.1nF seen=melted", screening.Reject, "shifted for good", ""},
	{"cracked", "100nF 250V K pet capacitance=98nF seen=cracked", screening.Barred, "", ""},
	{"X2 called film", "100nF 275VAC X2 capacitance=98nF", screening.Barred, "mains-capacitor", ""},
}

func TestVerdicts(t *testing.T) {
	seen := map[screening.Verdict]int{}
	for _, tt := range verdictCases {
		t.Run(tt.name, func(t *testing.T) {
			j := booktest.Judge(t, Book(), tt.words, screening.DefaultPolicy())
			seen[j.Verdict]++
			if j.Verdict != tt.verdict || !strings.Contains(booktest.Texts(j), tt.says) || booktest.NotSoAs(j, tt.as) {
				t.Errorf("%s: %s as %q, want %s as %q, saying %q\n%s", tt.words, j.Verdict, booktest.As(j), tt.verdict, tt.as, tt.says, booktest.Texts(j))
			}
		})
	}
	booktest.EveryVerdict(t, seen, screening.Treat)
}

func limitsOf(t *testing.T, words string) []screening.Limit {
	t.Helper()
	j := booktest.Judge(t, Book(), words, screening.DefaultPolicy())
	all, err := limits(j.Claim)
	if err != nil {
		t.Fatal(err)
	}
	return all
}

// passives.md section 4 (published unless said): tan δ at 1, 10 and 100 kHz, insulation as ohms to 0.33 µF and seconds above.
func TestPublishedFigures(t *testing.T) {
	for _, tt := range []struct {
		name, words string
		on          screening.Definition
		at          screening.Variable
		x           float64
		set         screening.LimitSet
		grade       screening.Grade
		want        float64
		status      screening.Status
	}{
		{"polyester 0.8 % at 1 kHz by the table of dielectrics", "1uF pet", screening.TanDelta, screening.Frequency, 1e3, "typical", screening.WithinSpec, 0.008, screening.Published},
		{"polyester 1.0 % at 1 kHz by the laxest sheet", "1uF pet", screening.TanDelta, screening.Frequency, 1e3, "general", screening.WithinSpec, 0.010, screening.Published},
		{"polyester 1.5 % at 10 kHz", "1uF pet", screening.TanDelta, screening.Frequency, 10e3, "general", screening.WithinSpec, 0.015, screening.Published},
		{"polyester 3.0 % at 100 kHz", "0.1uF pet", screening.TanDelta, screening.Frequency, 100e3, "general", screening.WithinSpec, 0.030, screening.Published},
		{"polypropylene 0.25 % at 100 kHz", "0.1uF pp", screening.TanDelta, screening.Frequency, 100e3, "typical", screening.WithinSpec, 0.0025, screening.Published},
		{"polypropylene 0.30 % at 1 kHz by the laxest sheet", "1uF pp", screening.TanDelta, screening.Frequency, 1e3, "general", screening.WithinSpec, 0.003, screening.Published},
		{"PPS 0.25 % at 10 kHz", "1uF pps", screening.TanDelta, screening.Frequency, 10e3, "general", screening.WithinSpec, 0.0025, screening.Published},
		{"PEN as polyester", "1uF pen", screening.TanDelta, screening.Frequency, 10e3, "general", screening.WithinSpec, 0.015, screening.Published},
		{"polystyrene is from memory", "1nF ps", screening.TanDelta, screening.Frequency, 1e3, "general", screening.WithinSpec, 0.0005, screening.FromMemory},
		{"polycarbonate is from memory", "1nF pc", screening.TanDelta, screening.Frequency, 100e3, "general", screening.WithinSpec, 0.010, screening.FromMemory},
		// Row 40.
		{"polypropylene 1 µF: 30 000 s", "1uF pp 400V", screening.InsulationResistance, screening.Voltage, 100, "general", screening.WithinSpec, 30e9, screening.Published},
		{"polypropylene 0.1 µF: 100 GΩ", "0.1uF pp 400V", screening.InsulationResistance, screening.Voltage, 100, "general", screening.WithinSpec, 100e9, screening.Published},
		{"and half of it after damp heat", "0.1uF pp 400V", screening.InsulationResistance, screening.Voltage, 100, "general", screening.Serviceable, 50e9, screening.Published},
		{"polyester to 100 V is from memory", "0.1uF pet 63V", screening.InsulationResistance, screening.Voltage, 10, "general", screening.WithinSpec, 3.75e9, screening.FromMemory},
	} {
		found := false
		for _, l := range limitsOf(t, tt.words) {
			x, _ := l.At.Get(tt.at)
			if l.On != tt.on.Name || x != tt.x || l.Set != tt.set || l.Grade != tt.grade || l.Criterion == criterionFloor {
				continue
			}
			found = true
			bound := l.High
			if math.IsInf(bound, 1) {
				bound = l.Low
			}
			if math.Abs(bound/tt.want-1) > 1e-9 || l.Source.Status != tt.status {
				t.Errorf("%s: %v, %v", tt.name, bound, l.Source)
			}
		}
		if !found {
			t.Errorf("%s: no such limit", tt.name)
		}
	}
}

// Nobody gets a mains part accepted by calling it film, whatever is read.
func TestAMainsPartIsNeverAccepted(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		words := "100nF " + rapid.SampledFrom([]string{"X1", "X2", "x2", "Y1", "Y2", "X1/Y2", "275VAC", "250V~", "~305V~", "440VAC"}).Draw(r, "mark")
		if rapid.Bool().Draw(r, "dielectric") {
			words += " pp"
		}
		part := booktest.Part(t, Book(), words+" K 630V")
		for range rapid.IntRange(0, 4).Draw(r, "readings") {
			d := rapid.SampledFrom([]screening.Definition{screening.Capacitance, screening.TanDelta, screening.InsulationResistance, screening.Leakage}).Draw(r, "of")
			part.Readings = append(part.Readings, screening.Reading{
				Of: d.Name, Unit: d.Unit, Value: math.Pow(10, rapid.Float64Range(-12, 12).Draw(r, "decade")),
				At: screening.At(screening.Frequency, 1e3).With(screening.Voltage, 100).With(screening.After, 60),
			})
		}
		if j := booktest.JudgePart(t, Book(), part, screening.DefaultPolicy()); j.Verdict != screening.Barred {
			r.Fatalf("%s: %s", words, j.Verdict)
		}
	})
}

// A meter that keeps its specification, however poor, never rejects a part inside its tolerance.
func TestAPoorMeterNeverRejectsASoundPart(t *testing.T) {
	rapid.Check(t, func(r *rapid.T) {
		poor := rapid.Float64Range(0.001, 0.5).Draw(r, "meter")
		policy := screening.DefaultPolicy()
		policy.Meters = map[string]screening.Meter{"": {ByUnit: map[quantity.Unit]screening.Accuracy{
			quantity.Farad: {Relative: poor}, quantity.One: {Relative: poor},
		}}}
		part := booktest.Part(t, Book(), "100nF J 250V "+rapid.SampledFrom([]string{"", "pet", "pp", "ps"}).Draw(r, "film"))
		off := func(label string) float64 { return 1 / (1 + poor*rapid.Float64Range(-1, 1).Draw(r, label)) }
		truth := 100e-9 * rapid.Float64Range(0.95, 1.05).Draw(r, "C")
		part.Readings = []screening.Reading{
			{Of: screening.Capacitance.Name, Unit: quantity.Farad, Value: truth * off("C reads")},
			{Of: screening.TanDelta.Name, Unit: quantity.One, Value: 0.0005 * off("tan δ reads"), At: screening.At(screening.Frequency, 1e3)},
		}
		switch j := booktest.JudgePart(t, Book(), part, policy); j.Verdict {
		case screening.Accept, screening.Undecided:
		default:
			r.Fatalf("%s\n%s", j.Verdict, booktest.Texts(j))
		}
	})
}

func TestPolystyreneIsNeverHeated(t *testing.T) {
	for words, warned := range map[string]bool{"1nF ps": true, "1nF polystyrene": true, "1nF pet": false, "1nF": false} {
		cautions := Book().Cautions(screening.Part{Claim: booktest.Part(t, Book(), words).Claim}, screening.AtLook)
		if got := len(cautions) == 1 && cautions[0].Values["temperature"] == 70; got != warned {
			t.Errorf("%s: %v", words, cautions)
		}
	}
}

func TestTablesAreChecked(t *testing.T) {
	for name, texts := range map[string][3]string{
		"a tan δ of 50 %":          {dielectricsCSV, strings.Replace(lossCSV, "0.010", "0.5", 1), insulationCSV},
		"an unlisted dielectric":   {dielectricsCSV, strings.Replace(lossCSV, "general,pet", "general,wood", 1), insulationCSV},
		"worn better than new":     {dielectricsCSV, lossCSV, strings.Replace(insulationCSV, "50e9,15000", "500e9,15000", 1)},
		"no unknown dielectric":    {strings.Replace(dielectricsCSV, "unknown,,", "other,,", 1), lossCSV, insulationCSV},
		"a heat without a status":  {strings.Replace(dielectricsCSV, "70,second-hand", "70,", 1), lossCSV, insulationCSV},
		"a film without a figure":  {dielectricsCSV, strings.ReplaceAll(lossCSV, "general,pps", "general,pet"), insulationCSV},
		"a status that nobody has": {dielectricsCSV, strings.Replace(lossCSV, "published", "sure", 1), insulationCSV},
	} {
		if _, err := readTables(texts[0], texts[1], texts[2]); err == nil {
			t.Errorf("%s is read", name)
		}
	}
	if _, err := readTables(dielectricsCSV, lossCSV, insulationCSV); err != nil {
		t.Error(err)
	}
	if _, _, err := complete(screening.Claim{}.WithTrait(traitDielectric, "wood")); err == nil || !strings.Contains(err.Error(), "pet, pp, ps") {
		t.Errorf("wood: %v", err)
	}
	if u := (capacitor.Unit{Farad: 1e-6}); testVolts(u) != 10 {
		t.Errorf("without a rated voltage tested at %v V", testVolts(u))
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(), "1uF 250V K pet capacitance=0.985uF tan-delta@1kHz=0.006 leakage@100V=1.0nA")
}

// ICEL MTB prints tan δ at 10 kHz up to 1 µF, ICEL MPL at 100 kHz up to 0.1 µF (published): above that the leads and plates of a sound part
// make it, and neither that nor an ESR at such a frequency refuses it.
func TestLossAtHighFrequencyIsHeldToSmallPartsOnly(t *testing.T) {
	for words, want := range map[string]int{"0.1uF pp": 3, "0.22uF pp": 2, "1uF pet": 2, "2.2uF pet": 1, "4.7uF pc": 1, "10uF": 1} {
		seen := map[float64]bool{}
		for _, l := range limitsOf(t, words) {
			if f, ok := l.At.Get(screening.Frequency); ok && l.On == screening.TanDelta.Name {
				seen[f] = true
			}
		}
		if len(seen) != want || !seen[1e3] {
			t.Errorf("%s: limits at %v", words, seen)
		}
	}
	// 10 µF with 5 mΩ of leads and plates: tan δ is 0.031 at 100 kHz.
	if j := booktest.Judge(t, Book(), "10uF 400V K pp capacitance=10uF esr@100kHz=5m", screening.DefaultPolicy()); j.Verdict != screening.Accept {
		t.Errorf("10 µF, 5 mΩ: %s\n%s", j.Verdict, booktest.Texts(j))
	}
}
