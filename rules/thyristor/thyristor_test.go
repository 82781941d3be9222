package thyristor

import (
	"math"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
)

// Malvino and Bates 15-4, as their published companion prints it.
func TestTheSupplyThatTriggersAndThatAtWhichItDropsOut(t *testing.T) {
	for _, tt := range []struct {
		name                      string
		amperes, ohms, drop, want float64
	}{
		{"triggers: 7 mA into the gate through 1 kΩ and 0.75 V", 7e-3, 1e3, 0.75, 7.75},
		{"drops out: 6 mA through 100 Ω and 0.7 V", 6e-3, 100, 0.7, 1.3},
	} {
		if v := Supply(tt.amperes, tt.ohms, tt.drop); math.Abs(v-tt.want) > 1e-12 {
			t.Errorf("%s is %g V, want %g V", tt.name, v, tt.want)
		}
	}
}

type row struct {
	name, words string
	want        screening.Verdict
	says        string
}

func hold(t *testing.T, b *screening.Rulebook, rows []row) {
	t.Helper()
	given := map[screening.Verdict]int{}
	for _, tt := range rows {
		j := booktest.Judge(t, b, tt.words, screening.DefaultPolicy())
		given[j.Verdict]++
		said := booktest.Texts(j)
		if j.Verdict != tt.want || !strings.Contains(said, tt.says) {
			t.Errorf("%s: %s, want %s saying %q\n%s", tt.name, j.Verdict, tt.want, tt.says, said)
		}
	}
	booktest.EveryVerdict(t, given, screening.Treat, screening.Regrade)
}

func TestThyristors(t *testing.T) {
	const off, lit = " vbo=OL vbr=OL", " igt=..13.5mA vt@0.4A=0.88"
	hold(t, Book(types.Builtin()), []row{
		{"BT151 by meter and lamp", "BT151" + off + lit, screening.Accept, "forward blocking untested above 2 V (rated 500 V)"},
		{"an unknown one", "600V" + off + lit, screening.Accept, "reverse blocking untested above 2 V (rated 600 V)"},
		{"nothing known at all", strings.TrimSpace(off + lit), screening.Accept, "no rating known"},
		{"blocking only", "BT151" + off, screening.Undecided, "TRIGGER it through a lamp"},
		{"triggered and not seen to hold", "BT151 igt=..13.5mA" + off, screening.Undecided, "LET the gate go"},
		{"at 10 mA it could not hold: says nothing", "BT151 igt=..13.5mA vt@10mA=0.8" + off, screening.Undecided, "at least 50 mA is needed"},
		{"shorted", "BT151 vbo=0.02 vbr=0.02", screening.Reject, "it conducts without its gate"},
		{"blocks one way only", "BT151 vbo=OL vbr=0.6", screening.Reject, "it conducts without its gate"},
		{"it falls off", "BT151 igt=..13.5mA vt@0.4A=OL" + off, screening.Reject, "it fell off when the gate was let go"},
		{"the lamp's supply stands across it", "BT151 igt=..13.5mA vt@0.4A=11.9" + off, screening.Reject, "it fell off when the gate was let go"},
		{"40 mA against 15 mA (published)", "BT151 igt=40.0mA vt@0.4A=0.88" + off, screening.Reject, "at most 15 mA"},
		{"1 mA against a recalled 200 µA", "C106 igt=1.00mA vt@0.4A=0.88" + off, screening.Undecided, "CONFIRM the figure"},
		{"an unknown one of 250 mA", "600V igt=250mA vt@0.4A=0.88" + off, screening.Reject, "gate trigger current"},
		{"C106 within its recalled 200 µA", "C106D igt=..180uA vt@0.4A=0.9" + off, screening.Accept, "rated 400 V"},
		{"a gate with a resistor across it, lit", "BT151 vf=0.03" + off + lit, screening.Accept, ""},
		{"a gate with a resistor across it, not tried", "BT151 vf=0.03" + off, screening.Undecided, "many gates have ohms across them"},
		{"a gate that is open on both ranges", "BT151 vf=OL rgk=OL" + off, screening.Reject, "burnt out"},
		{"a gate that is open one way", "BT151 vf=OL" + off, screening.Undecided, "turn the probes"},
		{"a shorted gate", "BT151 vf=0.01 rgk=0.1" + off, screening.Reject, "gate to cathode is shorted"},
		{"1.5 V of gate (published), 1.47 V read", "BT151 vgt=1.47" + off + lit, screening.Accept, ""},
		{"1.5 V of gate (published), 2 V read", "BT151 vgt=2.00" + off + lit, screening.Reject, "gate trigger voltage"},
		{"it breaks over at 320 V of 500 (published)", "BT151 vbo=320V vbr=OL" + lit, screening.Reject, "at least 500 V"},
		{"its grade is on it: 500 V", "BT151-500R vbo=510V vbr=520V" + lit, screening.Accept, ""},
		{"C106 of no known letter: 200 V, the least", "C106 vbo=250V vbr=260V igt=..180uA vt@0.4A=0.9", screening.Accept, ""},
		{"leaks 2 µA at 30 V", "BT151 idrm@30V=2uA ir@30V=2uA temperature=25C" + lit, screening.Accept, "above 30 V"},
		{"leaks 200 µA at 30 V", "BT151 idrm@30V=200uA ir@30V=2uA temperature=25C", screening.Reject, "it conducts without its gate"},
		{"across the mains", "BT151 seen=mains" + off + lit, screening.Barred, ""},
	})
}

func TestTriacs(t *testing.T) {
	const off, lit = " vbo=OL vbr=OL", " igt/1=..9.00mA igt/3=..9.00mA vt/1@0.4A=0.9 vt/3@0.4A=0.9"
	hold(t, TriacBook(types.Builtin()), []row{
		{"BT234 by meter and lamp", "BT234" + off + lit, screening.Accept, ""},
		{"its grade is on it", "BT234-600" + off + lit, screening.Accept, "rated 600 V"},
		{"an unknown one", "600V" + off + lit, screening.Accept, ""},
		{"one direction only", "BT234 igt/1=..9mA vt/1@0.4A=0.9" + off, screening.Undecided, "of section 3"},
		{"it falls off in one direction", "BT234 igt/1=..9mA igt/3=..9mA vt/1@0.4A=0.9 vt/3@0.4A=OL" + off, screening.Reject, "section 3"},
		{"shorted one way", "BT234 vbo=OL vbr=0.03", screening.Reject, "it conducts without its gate"},
		{"quadrant IV: 25 mA (published), 40 read", "BT234 igt/4=40.0mA" + off + lit, screening.Reject, "section 4"},
		{"holding current: 15 mA (published), 40 read", "BT234 ih=40.0mA" + off + lit, screening.Reject, "holding current"},
		{"1.5 V at 6 A (published), 1.42 read", "BT234 vt/1@6A=1.42" + off + lit, screening.Accept, ""},
		{"1.5 V at 6 A (published), 2.1 read", "BT234 vt/1@6A=2.10" + off + lit, screening.Reject, "on-state voltage"},
		{"a dimmer's triac is across the mains", "BT234 seen=mains" + off + lit, screening.Barred, ""},
	})
}

// A type's grade that the maker prints after it is its rated voltage, and a word that only looks like one is refused.
func TestVoltageGrades(t *testing.T) {
	for word, want := range map[string]string{
		"BT151-500R": "BT151 500", "BT234-600": "BT234 600", "BT151-1000": "BT151 1000", "BT151": "", "BT151-R": "", "BT151-50": "", "BT151-12345": "",
		"-500": "", "BT151-": "",
	} {
		base, grade, ok := splitGrade(word)
		if got := strings.TrimSpace(base + " " + grade); ok != (want != "") || ok && got != want {
			t.Errorf("%s: %q, %v", word, got, ok)
		}
	}
	b := Book(types.Builtin())
	first := booktest.Judge(t, b, "BT151-650", screening.DefaultPolicy()).Claim
	again, _, err := b.Complete(first)
	r, _ := again.Rating(VDRM.Name, "")
	if err != nil || r.Low != 650 || again.Trait(screening.TraitType) != "BT151-650" || len(again.Ratings) != len(first.Ratings) {
		t.Errorf("%v %v %v", again, r, err)
	}
}

// 0.9 of the limit is driven, so that latching clears it: (12 − 1) V over 13.5 mA, and (12 − 0.75) V over 0.18 mA.
func TestTheTriggerRecipeIsComputed(t *testing.T) {
	b := Book(types.Builtin())
	for words, want := range map[string]float64{"BT151": 11 / 13.5e-3, "C106": 11.25 / 0.18e-3} {
		j := booktest.Judge(t, b, words, screening.DefaultPolicy())
		for _, f := range j.Findings {
			if f.Limit.Criterion == triggers {
				r := b.Recipes(j.Part, f.Limit)
				if len(r) != 1 || math.Abs(r[0].Values["series-resistance"]-want) > 1e-6*want {
					t.Errorf("%s: %+v, want %g Ω", words, r, want)
				}
			}
		}
	}
}

func TestEveryLimitHasARecipe(t *testing.T) {
	for b, all := range map[*screening.Rulebook][]string{
		Book(types.Builtin()): {"BT151", "C106M", "600V", ""}, TriacBook(types.Builtin()): {"BT234", "BT234-800", "600V", ""},
	} {
		for _, words := range all {
			j := booktest.Judge(t, b, words, screening.DefaultPolicy())
			for _, f := range j.Findings {
				if f.Limit.Evidence != screening.ByRating && len(b.Recipes(j.Part, f.Limit)) == 0 {
					t.Errorf("%s %s: no recipe for %s", b.Kind, words, f.Limit.On)
				}
			}
			if c := b.Cautions(j.Part, screening.AtMeasure); len(c) < 3 || c[0].Code != "beryllia" || !strings.Contains(c[len(c)-1].Text, "never on the mains") {
				t.Errorf("%s %s: %+v", b.Kind, words, c)
			}
		}
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, TriacBook(types.Builtin()), "BT234 vbo=OL vbr=OL igt/1=..9mA igt/3=..9mA vt/1@0.4A=0.9 vt/3@0.4A=0.9")
}
