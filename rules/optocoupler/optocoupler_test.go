package optocoupler

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// led and dark are the readings of a sound one but for its ratio.
const led, dark = " vf=1.08 vbr=OL", " iceo@10V=..0.1uA"

func judge(t *testing.T, words string, policy screening.Policy) screening.Judgement {
	t.Helper()
	return booktest.Judge(t, Book(types.Builtin()), words, policy)
}

func TestVerdictsOfOptocouplers(t *testing.T) {
	given := map[screening.Verdict]int{}
	for _, tt := range []struct {
		name, words string
		want        screening.Verdict
		says        string
	}{
		{"4N35 with 140 %", "4N35" + led + dark + " ctr@10mA,10V=140%", screening.Accept, "insulation between the two sides: no bench reading proves it"},
		{"the collector current instead of the ratio: 14 mA at 10 mA", "4N35" + led + dark + " ic@10mA,10V=14mA", screening.Accept, "what is asked of a new part"},
		{"aged to 80 % it is serviceable", "4N35" + led + dark + " ctr@10mA,10V=80%", screening.Accept, "its LED has aged"},
		{"aged to 45 % it serves as measured", "4N35" + led + dark + " ctr@10mA,10V=45%", screening.Regrade, "ratio at least 36 % at 10 mA, VCE 10 V"},
		{"aged to 3 % it is dead", "4N35" + led + dark + " ctr@10mA,10V=3%", screening.Reject, "no light passes"},
		{"4N28 keeps its 10 %", "4N28" + led + dark + " ctr@10mA,10V=22%", screening.Accept, ""},
		{"at another LED current it says nothing", "4N35" + led + dark + " ctr@1mA,10V=140%", screening.Undecided, "10 mA"},
		{"a third group may be another one: accepted as that", "PC817B" + led + dark + " ctr@5mA,5V=82%", screening.Accept, "as PC817A, ratio 82"},
		{"dead, though all its figures are recalled", "PC817B" + led + dark + " ctr@5mA,5V=2%", screening.Reject, "no light passes"},
		{"unmarked, as measured", strings.TrimSpace(led) + dark + " ctr@5mA,5V=92%", screening.Regrade, "ratio at least 74 %"},
		{"unmarked, current not stated", strings.TrimSpace(led) + dark + " ctr=92%", screening.Undecided, "STATE"},
		{"no ratio yet", "4N35" + led + dark, screening.Undecided, "MEASURE current transfer ratio"},
		{"across a mains barrier", "4N35" + led + dark + " ctr@10mA,10V=140% seen=barrier", screening.Barred, "safety barrier"},
		{"across the mains", "4N35 seen=mains", screening.Barred, ""},
		{"burnt", "4N35 seen=burnt", screening.Reject, ""},
		{"conducts in the dark", "4N35" + led + " iceo@10V=0.5mA", screening.Reject, "conducts in the dark"},
		{"0.4 µA in the dark is more than its sheet, and no fault", "4N35" + led + " iceo@10V=0.4uA temperature=25C ctr@10mA,10V=140%", screening.Accept, ""},
		{"LED open", "4N35 vf=OL vbr=OL", screening.Reject, "reads open"},
		{"probes turned on the LED", "4N35 vf=OL vbr=1.08", screening.Undecided, "type each reading as the other"},
		{"LED shorted", "4N35 vf=0.002", screening.Reject, "shorted"},
		{"the transistor's junction is no LED", "4N35 vf=0.62", screening.Reject, "wrong legs"},
		{"two channels, one of them dead", "PC827 vf/1=1.09 vf/2=1.11 vbr/1=OL vbr/2=OL iceo/1@10V=..0.1uA iceo/2@10V=..0.1uA ctr/1@5mA,5V=150% ctr/2@5mA,5V=1%", screening.Reject, "section 2"},
		{"two channels, both sound", "PC827 vf/1=1.09 vf/2=1.11 vbr/1=OL vbr/2=OL iceo/1@10V=..0.1uA iceo/2@10V=..0.1uA ctr/1@5mA,5V=150% ctr/2@5mA,5V=140%", screening.Accept, ""},
		{"the LED breaks down below its claimed reverse voltage", "4N35 rated:vrrm=6V vf=1.08 vbr=4.0V", screening.Reject, ""},
	} {
		t.Run(tt.name, func(t *testing.T) {
			j := judge(t, tt.words, screening.DefaultPolicy())
			given[j.Verdict]++
			if said := booktest.Texts(j); j.Verdict != tt.want || !strings.Contains(said, tt.says) {
				t.Errorf("%s, want %s saying %q\n%s", j.Verdict, tt.want, tt.says, said)
			}
		})
	}
	booktest.EveryVerdict(t, given, screening.Treat)
}

// Published minima (4N25-4N28 and 4N35 data sheets): CTR, and the 4N35's LED at 10 mA and dark current.
func TestPublishedMinimaHoldAtTheirEdges(t *testing.T) {
	for name, least := range map[string]float64{"4N25": 20, "4N26": 20, "4N27": 10, "4N28": 10, "4N35": 100} {
		for ctr, within := range map[float64]bool{least: true, least * 0.99: false} {
			j := judge(t, fmt.Sprintf("%s%s iceo@10V=1nA temperature=25C ctr@10mA,10V=%g%%", name, led, ctr), booktest.Exactly())
			if got := j.Grade == screening.WithinSpec; j.Verdict != screening.Accept || got != within {
				t.Errorf("%s %g %%: %s %s, want within spec %v", name, ctr, j.Verdict, j.Grade, within)
			}
		}
	}
	for words, want := range map[string]screening.Verdict{"vf@10mA=1.50": screening.Accept, "vf@10mA=1.51": screening.Reject} {
		if j := judge(t, "4N35 vbr=OL iceo@10V=1nA temperature=25C ctr@10mA,10V=120% "+words, booktest.Exactly()); j.Verdict != want {
			t.Errorf("4N35 %s: %s, want %s\n%s", words, j.Verdict, want, booktest.Texts(j))
		}
	}
}

// IC/IF: 9.2 mA at 10 mA is 92 %.
func TestTheRatioIsComputedFromTheCollectorCurrent(t *testing.T) {
	j := judge(t, "4N35 ic@10mA,10V=9.2mA", screening.DefaultPolicy())
	for _, r := range j.Part.Readings {
		if r.Of == CTR.Name {
			if math.Abs(r.Value-0.92) > 1e-9 || r.Unit != quantity.Ratio || r.U <= 0 || r.Rule == "" {
				t.Errorf("%+v", r)
			}
			return
		}
	}
	t.Error("no ratio was derived")
}

// The recipe keeps VCE above half of the supply for the least ratio: what is read fits the limit.
func TestTheRecipesResistorsFitTheLimit(t *testing.T) {
	for _, words := range []string{"4N35", "4N28", "PC817A", "4N33", "CNY17-4"} {
		j := judge(t, words, screening.DefaultPolicy())
		r, current, vce, _ := ratio(j.Claim)
		for i := range j.Findings {
			l := j.Findings[i].Limit
			if l.Criterion != ratioCriterion {
				continue
			}
			v := recipes(j.Part, l)[0].Values
			if want := (5 - 1.2) / current; math.Abs(v["series-resistance"]-want) > 1e-6 || v["resistor-power"] > 0.25 {
				t.Errorf("%s: %v Ω %v W for the LED", words, v["series-resistance"], v["resistor-power"])
			}
			if drop := v["collector-resistance"] * current * r.Low; drop < 0.05*vce || drop > 0.5*vce {
				t.Errorf("%s: %v Ω drops %v V of %v V at the least ratio", words, v["collector-resistance"], drop, vce)
			}
		}
	}
}

func TestAPoorMeterRejectsNoSoundOptocoupler(t *testing.T) {
	policy := screening.DefaultPolicy()
	policy.Meters = map[string]screening.Meter{"": {By: map[screening.Characteristic]screening.Accuracy{CTR.Name: {Relative: 0.5}, screening.VF.Name: {Relative: 0.15}}}}
	for _, words := range []string{"4N35 vf=0.95 vbr=OL" + dark + " ctr@10mA,10V=66%", "4N35 vf=1.3 vbr=OL" + dark + " ctr@10mA,10V=55%"} {
		if j := judge(t, words, policy); j.Verdict == screening.Reject {
			t.Errorf("%s: %s\n%s", words, j.Verdict, booktest.Texts(j))
		}
	}
}

func TestClaimsThatCannotBeAreRefused(t *testing.T) {
	b := Book(types.Builtin())
	_, err := screening.Judge(b, booktest.Part(t, b, "4N35 darlington"), screening.DefaultPolicy())
	if err == nil || !strings.Contains(err.Error(), "4N35 is transistor") {
		t.Errorf("%v", err)
	}
	_, _, err = complete(types.Builtin(), screening.Claim{}.WithTrait(traitChannels, "3"))
	if err == nil || !strings.Contains(err.Error(), `"3" is not known`) {
		t.Errorf("%v", err)
	}
}

func TestTablesAreChecked(t *testing.T) {
	_, err := readFigures("of,low,high,from,to,source,clause,status\nled,1.7,0.9,0,1,x,,house\n")
	if err == nil || !strings.Contains(err.Error(), "upside down") || !strings.Contains(err.Error(), "no row works") {
		t.Errorf("%v", err)
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(types.Builtin()), "4N35"+led+dark+" ctr@10mA,10V=140%")
}
