package regulator

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
)

func judge(t *testing.T, words string, policy screening.Policy) screening.Judgement {
	t.Helper()
	return booktest.Judge(t, Book(types.Builtin()), words, policy)
}

func TestVerdictsOfRegulators(t *testing.T) {
	given := map[screening.Verdict]int{}
	for _, tt := range []struct {
		name, words string
		want        screening.Verdict
		says        string
	}{
		{"7805 at 10 V and 100 mA", "7805 vout@10V,100mA=5.03", screening.Accept, "load above 100 mA (rated 1 A)"},
		{"the maker's letters before it", "LM7805 vout@10V,100mA=5.03", screening.Accept, "in-ground-out"},
		{"without a stated load that is said", "7805 vout@10V=5.03", screening.Accept, "no load was stated"},
		{"4.77 V is inside its band over line, load and temperature", "7805 vout@10V,1A=4.770 ", screening.Undecided, "REPEAT"},
		{"8.9 V of 5", "7805 vout@12V,100mA=8.9", screening.Reject, "endangers what it feeds"},
		{"the input stands at the output", "7805 vout@10V,100mA=9.7", screening.Reject, "shorted inside"},
		{"nothing comes out", "7805 vout@10V,100mA=0.02", screening.Reject, "gives nothing"},
		{"low without a stated input says nothing", "7805 vout@100mA=3.91", screening.Undecided, "STATE the input voltage"},
		{"low from too low an input says nothing", "7805 vout@6V,100mA=4.21", screening.Undecided, "needs 7.5 V or more"},
		{"right from too low an input proves nothing either", "7805 vout@6V,100mA=5.02", screening.Undecided, "needs 7.5 V or more"},
		{"not measured yet", "7805", screening.Undecided, "MEASURE output voltage"},
		{"a 7912 typed with its sign", "7912 vout@17V,100mA=-12.05", screening.Accept, "ground-in-out, tab in"},
		{"a 7912 typed without it", "7912 vout@17V,100mA=12.05", screening.Accept, ""},
		{"a 7912 whose input was typed with its sign", "7912 vout@vin=-17V,100mA=-12.05", screening.Accept, ""},
		{"a 7912 that gives 9 V", "7912 vout@17V,100mA=-9.02", screening.Reject, "below its band"},
		{"LM317 with its adjust leg at ground", "LM317 vref@7V,10mA=1.251", screening.Accept, "adjust-out-in"},
		{"LM317 without a load reads high and is no worse for it", "LM317 vref@7V=1.9", screening.Undecided, "state the current"},
		{"LM317 below its least load", "LM317 vref@7V,2mA=1.9", screening.Undecided, "regulates from 10 mA up"},
		{"LM317 at 1.9 V under load", "LM317 vref@7V,10mA=1.90", screening.Reject, ""},
		{"TL431 at 10 mA", "TL431 vref@10mA=2.493", screening.Accept, "noise and drift"},
		{"a reference that two counts of a 20 V range leave open", "TL431 vref@10mA=2.45", screening.Accept, "2.37 V to 2.62 V proven (±5 %); 2.44 V to 2.55 V not"},
		{"a regulator is not held wider than its sheet", "7812 vout@17V,100mA=12.55", screening.Undecided, "REPEAT"},
		{"TL431 at 2.1 V, far off", "TL431 vref@10mA=2.100", screening.Reject, ""},
		{"TL431 at 2.38 V, outside a band that was only remembered", "TL431 vref@10mA=2.380", screening.Undecided, "CONFIRM the figure"},
		{"TL431 at 2.2 V with its current not stated", "TL431 vref=2.21", screening.Undecided, "state the current"},
		{"unknown, its voltage printed", "type=XR12 12V vout@17V,100mA=12.1", screening.Accept, "is not in the table"},
		{"unknown altogether", "vout@17V,100mA=12.1", screening.Undecided, "SAY its type number"},
		{"across the mains or cracked", "7805 vout@10V,100mA=5.03 seen=cracked", screening.Barred, ""},
		{"burnt", "7805 vout@10V,100mA=5.03 seen=burnt", screening.Reject, ""},
		{"draws too much itself", "7805 vout@10V,100mA=5.03 iq@10V=31mA", screening.Reject, "quiescent"},
		{"draws a little more than its sheet allows", "7805 vout@10V,100mA=5.03 iq@10V=9.4mA", screening.Accept, ""},
		{"drops out too early", "7805 vout@10V,100mA=5.03 dropout@100mA=3.4", screening.Reject, "dropout"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			j := judge(t, tt.words, screening.DefaultPolicy())
			given[j.Verdict]++
			if said := booktest.Texts(j); j.Verdict != tt.want || !strings.Contains(said, tt.says) {
				t.Errorf("%s, want %s saying %q\n%s", j.Verdict, tt.want, tt.says, said)
			}
		})
	}
	booktest.EveryVerdict(t, given, screening.Regrade, screening.Treat)
}

// Published (Fairchild 78xx data sheet): a 7805 gives 4.80 to 5.20 V at 25 °C, 4.75 to 5.25 V over line, load and temperature.
func TestPublishedBandsOfThe7805(t *testing.T) {
	for _, tt := range []struct {
		v     float64
		want  screening.Verdict
		grade screening.Grade
	}{
		{4.80, screening.Accept, screening.WithinSpec},
		{5.20, screening.Accept, screening.WithinSpec},
		{4.79, screening.Accept, screening.Serviceable},
		{5.21, screening.Accept, screening.Serviceable},
		{4.75, screening.Accept, screening.Serviceable},
		{5.25, screening.Accept, screening.Serviceable},
		{4.74, screening.Reject, screening.AnyGrade},
		{5.26, screening.Reject, screening.AnyGrade},
	} {
		j := judge(t, fmt.Sprintf("7805 vout@10V,100mA=%.2f", tt.v), booktest.Exactly())
		if j.Verdict != tt.want || j.Grade != tt.grade {
			t.Errorf("%.2f V: %s %s, want %s %s", tt.v, j.Verdict, j.Grade, tt.want, tt.grade)
		}
		for i := range j.Findings {
			if l := j.Findings[i].Limit; l.Criterion == voltageCriterion && l.Source.Status != screening.Published {
				t.Errorf("%v to %v: %s", l.Low, l.High, l.Source)
			}
		}
	}
}

// The load takes U²/R, the part (Uin − Uout)·I: a 7805 from 10 V into 50 Ω gives 100 mA, 0.5 W each.
func TestTheTestSetUpIsComputed(t *testing.T) {
	for _, tt := range []struct {
		words                    string
		supply, load, watts, own float64
	}{
		{"7805", 10, 50, 0.5, 0.5},
		{"7812", 17, 120, 1.2, 0.5},
		{"78L05", 10, 100, 0.25, 0.25},
		{"LM317", 7, 125, 0.0125, 0.0575},
	} {
		j := judge(t, tt.words, screening.DefaultPolicy())
		v := recipes(j.Part, j.Findings[0].Limit)[0].Values
		for name, want := range map[string]float64{"supply": tt.supply, "load-resistance": tt.load, "resistor-power": tt.watts, "part-power": tt.own} {
			if math.Abs(v[name]-want) > 1e-9 {
				t.Errorf("%s: %s %v, want %v", tt.words, name, v[name], want)
			}
		}
	}
	// (9 − 2.495)/10 mA = 650.5 Ω.
	j := judge(t, "TL431", screening.DefaultPolicy())
	if v := recipes(j.Part, j.Findings[0].Limit)[0].Values; math.Abs(v["series-resistance"]-650.5) > 1e-9 {
		t.Errorf("TL431: %v", v)
	}
}

// Legs differ between types in the same case: every one of the table is shown with its own, before power.
func TestEveryTypeShowsItsLegs(t *testing.T) {
	for _, name := range types.Builtin().Names(Kind) {
		j := judge(t, "type="+name, screening.DefaultPolicy())
		legs := j.Claim.Trait(screening.TraitPinout)
		c := cautions(j.Part, screening.AtMeasure)
		if legs == "" || len(c) == 0 || !strings.Contains(c[0].Text, legs) || !strings.Contains(booktest.Texts(j), legs) {
			t.Errorf("%s: legs %q", name, legs)
		}
	}
	if a, b := judge(t, "7805", screening.DefaultPolicy()), judge(t, "7905", screening.DefaultPolicy()); a.Claim.Trait("pinout") == b.Claim.Trait("pinout") {
		t.Error("7805 and 7905 have the same legs")
	}
}

func TestAPoorMeterRejectsNoSoundRegulator(t *testing.T) {
	policy := screening.DefaultPolicy()
	policy.Meters = map[string]screening.Meter{"": {By: map[screening.Characteristic]screening.Accuracy{VOut.Name: {Relative: 0.1}, VRef.Name: {Relative: 0.1}}}}
	for _, words := range []string{"7805 vout@10V,100mA=5.45", "7912 vout@17V,100mA=-11.0", "TL431 vref@10mA=2.3", "LM317 vref@7V,10mA=1.36"} {
		if j := judge(t, words, policy); j.Verdict == screening.Reject {
			t.Errorf("%s: %s", words, j.Verdict)
		}
	}
}

func TestClaimsThatContradictTheTableAreRefused(t *testing.T) {
	b := Book(types.Builtin())
	for words, want := range map[string]string{
		"7805 12V": "7805 gives", "7905 positive": "7905 is negative", "LM317 5V": "set by resistors", "7805 adjustable": "7805 is fixed",
	} {
		_, err := screening.Judge(b, booktest.Part(t, b, words), screening.DefaultPolicy())
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", words, err, want)
		}
	}
}

func TestTablesAreChecked(t *testing.T) {
	if _, err := readFigures("of,value,source,clause,status\nwider,1.25,x,,house\n"); err == nil || !strings.Contains(err.Error(), "no row headroom") {
		t.Errorf("%v", err)
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(types.Builtin()), "7805 vout@10V,100mA=5.03")
}
