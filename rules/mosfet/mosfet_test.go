package mosfet

import (
	"math"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
)

func judge(t testing.TB, words string, policy screening.Policy) screening.Judgement {
	t.Helper()
	return booktest.Judge(t, Book(types.Builtin()), words, policy)
}

func TestVerdicts(t *testing.T) {
	const off = " rgs=OL vsd=0.55 vbr=OL"
	given := map[screening.Verdict]int{}
	for _, tt := range []struct {
		name, words string
		want        screening.Verdict
		says        string
	}{
		{"2N7000 by meter and battery", "2N7000 rds-on@vgs=9V=2.1" + off, screening.Accept, "blocking untested above 2 V (rated 60 V)"},
		{"an unknown one", "n-channel rds-on@vgs=9V=0.4" + off, screening.Accept, "no rating known"},
		{"a p-channel one with signs", "IRF9540 rds-on@vgs=-9V=0.4" + off, screening.Accept, ""},
		{"not switched on", "2N7000" + off, screening.Undecided, "PUT a 9 V battery from gate to source"},
		{"the gate voltage not said", "2N7000 rds-on=2.1" + off, screening.Undecided, "STATE the gate-source voltage"},
		{"3 V at the gate proves nothing", "2N7000 rds-on@vgs=3V=2.1" + off, screening.Undecided, "at least 4 V is needed"},
		{"its channel not said", "rds-on@vgs=9V=2.1" + off, screening.Undecided, "SAY whether it is n-channel"},
		{"a gate that an ohmmeter sees", "2N7000 rgs=3.2M vsd=0.55 vbr=OL", screening.Reject, "suspect a static discharge"},
		{"a gate of 1.2 kΩ", "2N7000 rgs=1.2k", screening.Reject, "suspect a static discharge"},
		{"a meter that shows 60 MΩ of damp", "2N7000 rgs=60M vsd=0.55 vbr=OL rds-on@vgs=9V=2.1", screening.Accept, ""},
		{"a charged gate looks like a short", "IRF540N rgs=OL vsd=0.01 vbr=0.01", screening.Undecided, "a charged gate holds a sound part on"},
		{"shorted with the gate tied", "IRF540N rgs=OL vsd@vgs=0V=0.01 vbr@vgs=0V=0.01", screening.Reject, "depletion"},
		{"probes turned", "IRF540N rgs=OL vsd=OL vbr=0.5", screening.Undecided, "wrong way round"},
		{"it does not turn on", "2N7000 rds-on@vgs=9V=OL" + off, screening.Reject, "at most 50 Ω"},
		{"it breaks down at 38 V of 60", "2N7000 rds-on@vgs=9V=2.1 vbr@vgs=0V=38V rgs=OL vsd=0.55", screening.Reject, "at least 60 V"},
		{"1 µA at 48 V is allowed (published)", "2N7000 rgs=OL vsd=0.55 rds-on@vgs=9V=2.1 idss@48V=0.5uA temperature=25C", screening.Accept, "above 48 V"},
		{"an ohmmeter's leads do not fail 44 mΩ", "IRF540N rds-on@vgs=10V=0.6" + off, screening.Accept, ""},
		{"an ampere proves 44 mΩ", "IRF540N vds-on@id=1A,vgs=10V=38mV" + off, screening.Accept, ""},
		{"an ampere refutes 44 mΩ", "IRF540N vds-on@id=1A,vgs=10V=95mV" + off, screening.Reject, "suspect a static discharge"},
		{"a recalled figure does not reject", "IRLZ44N vds-on@id=1A,vgs=10V=95mV" + off, screening.Accept, ""},
		{"threshold inside 0.8 to 3 V", "2N7000 rds-on@vgs=9V=2.1 vgs-th@id=0.9mA=2.1" + off, screening.Accept, ""},
		{"threshold far outside", "2N7000 rds-on@vgs=9V=2.1 vgs-th@id=1mA=4.1" + off, screening.Reject, "threshold"},
		{"gate leakage of 2 µA", "2N7000 rds-on@vgs=9V=2.1 igss@15V=2.0uA" + off, screening.Reject, "suspect a static discharge"},
		{"10 nA at 15 V (published), 4 nA read", "2N7000 rds-on@vgs=9V=2.1 igss@15V=4.0nA" + off, screening.Accept, ""},
		{"in circuit", "2N7000 rds-on@vgs=9V=2.1 seen=in-circuit" + off, screening.Undecided, "in circuit"},
		{"across the mains", "2N7000 rds-on@vgs=9V=2.1 seen=mains" + off, screening.Barred, ""},
	} {
		j := judge(t, tt.words, screening.DefaultPolicy())
		given[j.Verdict]++
		said := booktest.Texts(j)
		if j.Verdict != tt.want || !strings.Contains(said, tt.says) {
			t.Errorf("%s: %s, want %s saying %q\n%s", tt.name, j.Verdict, tt.want, tt.says, said)
		}
	}
	booktest.EveryVerdict(t, given, screening.Treat, screening.Regrade)
}

func TestOnResistanceIsComputedFromItsDrop(t *testing.T) {
	j := judge(t, "IRF540N vds-on@id=2A,vgs=10V=76mV", screening.DefaultPolicy())
	for _, f := range j.Findings {
		if f.Limit.Criterion != onResistance {
			continue
		}
		r := f.Evidence()
		if f.Outcome != screening.Pass || r == nil || math.Abs(r.Value-38e-3) > 1e-9 || r.Rule != "76.0 mV over 2 A" {
			t.Errorf("%+v", r)
		}
		// (76 mV·1 % + 2 mV)/√3/2 A and 2 % of 38 mΩ over √3.
		if want := math.Hypot((0.76e-3+2e-3)/math.Sqrt(3)/2, 38e-3*0.02/math.Sqrt(3)); math.Abs(r.U-want) > 1e-6 {
			t.Errorf("u = %g Ω, want %g", r.U, want)
		}
		return
	}
	t.Error("no finding")
}

// At another gate voltage an on-resistance only bounds, on the side that its fall with gate voltage leaves.
func TestOnResistanceAtAnotherGateVoltage(t *testing.T) {
	for words, want := range map[string]screening.Outcome{
		"2N7000 rds-on@vgs=5V=3.0":                   screening.Pass,    // at 10 V no more
		"2N7000 vds-on@id=0.1A,vgs=5V=0.7":           screening.Missing, // 7 Ω at 5 V may be 5 Ω at 10 V
		"2N7000 vds-on@id=0.1A,vgs=12V=0.7":          screening.Fail,    // 7 Ω even at 12 V
		"2N7000 vds-on@id=0.1A,vgs=12V=0.3":          screening.Missing,
		"IRF9540N vds-on@id=-1A,vgs=-10V=-0.105":     screening.Pass, // 0.117 Ω (published), 0.105 read, without signs
		"IRF9540N vds-on@id=1A,vgs=10V=0.200":        screening.Fail,
		"IRF9540N rds-on@vgs=10V=2.9":                screening.Fail, // no lead is 2.8 Ω
		"IRF9540N rds-on@vgs=10V=0.5":                screening.Missing,
		"IRF840 vds-on@id=1A,vgs=10V=1.2 seen=mains": screening.Close, // from memory
	} {
		found := false
		for _, f := range judge(t, words, screening.DefaultPolicy()).Findings {
			if f.Limit.Criterion == onResistance {
				found = true
				if f.Outcome != want {
					t.Errorf("%s: %v, want %v (%s)", words, f.Outcome, want, f.Why)
				}
			}
		}
		if !found {
			t.Errorf("%s: no finding", words)
		}
	}
}

func TestEveryLimitHasARecipe(t *testing.T) {
	b := Book(types.Builtin())
	for _, words := range []string{"2N7000", "IRF9540N", "n-channel", "p-channel 100V", "IRF840"} {
		j := booktest.Judge(t, b, words, screening.DefaultPolicy())
		for _, f := range j.Findings {
			if f.Limit.Evidence != screening.ByRating && len(b.Recipes(j.Part, f.Limit)) == 0 {
				t.Errorf("%s: no recipe for %s", words, f.Limit.On)
			}
		}
		if all := b.Cautions(j.Part, screening.AtMeasure); len(all) < 2 || all[0].Code != "static" {
			t.Errorf("%s: %+v", words, all)
		}
	}
}

// 500 V: R = 500 kΩ and 0.5 W into a short, at the step, with the danger said.
func TestAHighVoltageIsWarnedOfInNumbers(t *testing.T) {
	b := Book(types.Builtin())
	j := booktest.Judge(t, b, "IRF840", screening.DefaultPolicy())
	all := b.Cautions(j.Part, screening.AtMeasure)
	last := all[len(all)-1]
	if last.Level != screening.Danger || last.Values["series-resistance"] != 500e3 || last.Values["resistor-power"] != 0.5 {
		t.Errorf("%+v", last)
	}
}

// As good as new is what its sheet promises, and a battery and an ohmmeter do not prove that.
func TestAsGoodAsNewTakesItsSheetsOnResistance(t *testing.T) {
	const off = " rgs=OL vsd=0.55 vbr=OL"
	for words, want := range map[string]screening.Grade{
		"2N7000 rds-on@vgs=9V=2.1":                                 screening.WithinSpec, // 5 Ω at 10 V, and at 10 V it has no more
		"IRF540N rds-on@vgs=9V=0.4":                                screening.Serviceable,
		"IRF540N vds-on@id=1A,vgs=10V=38mV":                        screening.WithinSpec,
		"n-channel rds-on@vgs=9V=0.4":                              screening.Serviceable,
		"n-channel rds-on@vgs=9V=0.4 vds-on@id=1A,vgs=10V=38mV":    screening.Serviceable,
		"IRF540N rds-on@vgs=9V=0.4 vds-on@id=1A,vgs=10V=38mV 100V": screening.WithinSpec,
	} {
		if j := judge(t, words+off, screening.DefaultPolicy()); j.Verdict != screening.Accept || j.Grade != want {
			t.Errorf("%s: %s %s, want %s", words, j.Verdict, j.Grade, want)
		}
	}
}

// A threshold grows with its current: a sheet's figure is asked for at the sheet's current (2N7000: 0.8 to 3 V at 1 mA, IRF540N: 2 to 4 V at
// 0.25 mA, both published), and at another one it only bounds. One that reads 0.76 V at 0.25 mA may have 0.8 V at 1 mA.
func TestAThresholdHoldsAtItsCurrent(t *testing.T) {
	for words, want := range map[string]screening.Outcome{
		"2N7000 vgs-th@id=1mA=0.80":     screening.Pass,
		"2N7000 vgs-th@id=1mA=0.77":     screening.Fail,
		"2N7000 vgs-th@id=0.25mA=0.76":  screening.Missing,
		"2N7000 vgs-th@id=0.25mA=3.10":  screening.Fail, // at 1 mA no less
		"2N7000 vgs-th@id=5mA=0.76":     screening.Fail, // at 1 mA no more
		"IRF540N vgs-th@id=0.25mA=3.1":  screening.Pass,
		"IRF540N vgs-th@id=0.5mA=4.03":  screening.Missing,
		"n-channel vgs-th@id=1.2mA=2.0": screening.Pass, // of any type: from 0.2 to 1.25 mA
		"n-channel vgs-th@id=1.2mA=6.4": screening.Fail,
		"n-channel vgs-th@id=20mA=3.0":  screening.Missing,
		"2N7000 vgs-th=2.0":             screening.Missing,
		"IRF9540 vgs-th@id=0.25mA=4.5":  screening.Close, // its current is not kept: derived
	} {
		for _, f := range judge(t, words, booktest.Exactly()).Findings {
			if f.Limit.Criterion == threshold && f.Outcome != want {
				t.Errorf("%s: %v, want %v (%s)", words, f.Outcome, want, f.Why)
			}
		}
	}
}

// R = (12 V − drop)/ID, and never more than a volt across the part: 44 mΩ at 1 A is (12 − 0.044)/1 = 11.96 Ω, 12.04 W at most; 5 Ω at half of
// 0.2 A is (12 − 0.5)/0.1 = 115 Ω, 1.25 W; 22 Ω at 1/22 A = 45 mA. That any type switches is shown through 12 Ω, where half on it takes 3 W.
func TestTheAmpereTestIsComputed(t *testing.T) {
	b := Book(types.Builtin())
	for words, want := range map[string][3]float64{
		"IRF540N": {11.956, 144 / 11.956, 0.044}, "2N7000": {115, 144.0 / 115, 0.05}, "n-channel rated:rds-on@vgs=10V=..22ohm": {(12 - 0.99) / 0.045, 144 / ((12 - 0.99) / 0.045), 0.04455},
	} {
		j := judge(t, words, screening.DefaultPolicy())
		for _, f := range j.Findings {
			switch f.Limit.Criterion {
			case onResistance:
				v := b.Recipes(j.Part, f.Limit)[0].Values
				if math.Abs(v["series-resistance"]-want[0]) > 1e-6*want[0] || math.Abs(v["resistor-power"]-want[1]) > 1e-6*want[1] || math.Abs(v["part-power"]-want[2]) > 1e-9 {
					t.Errorf("%s: %v", words, v)
				}
			case turnsOn:
				v := b.Recipes(j.Part, f.Limit)[1].Values
				if p := v["part-power"]; math.Abs(p-12*v["drain-current"]/4) > 1e-9 || p > 3 {
					t.Errorf("%s: %v W in the part", words, p)
				}
			}
		}
	}
}

// R = (9 V − middle)/ID: 2N7000 at 1 mA (9 − 1.9)/1 mA = 7.1 kΩ; IRF540N at 0.25 mA (9 − 3)/0.25 mA = 24 kΩ; any at 0.5 mA (9 − 3.2)/0.5 mA.
func TestTheThresholdRecipeIsComputed(t *testing.T) {
	b := Book(types.Builtin())
	for words, want := range map[string]float64{"2N7000": 7100, "IRF540N": 24e3, "n-channel": 11600, "n-channel rated:vgs-th@id=1mA=..2V": 7000} {
		j := judge(t, words, screening.DefaultPolicy())
		for _, f := range j.Findings {
			if f.Limit.Criterion != threshold {
				continue
			}
			v := b.Recipes(j.Part, f.Limit)[0].Values
			if math.Abs(v["series-resistance"]-want) > 1e-6*want || math.Abs(v["resistor-power"]-81/want) > 1e-6 {
				t.Errorf("%s: %v", words, v)
			}
		}
	}
}

func TestContradictionsAreRefused(t *testing.T) {
	b := Book(types.Builtin())
	for words, want := range map[string]string{
		"type=2N7000 p-channel": `"p-channel" is claimed, but 2N7000 is n-channel`,
		"type=2N7000 200V":      "rated 60 V",
	} {
		_, err := screening.Judge(b, booktest.Part(t, b, words), screening.DefaultPolicy())
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", words, err, want)
		}
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(types.Builtin()), "2N7000 rgs=OL vsd=0.55 vbr=OL rds-on@vgs=9V=2.1")
}
