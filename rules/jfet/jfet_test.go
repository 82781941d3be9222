package jfet

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

func cutOffFrom(vgs, id, idss float64) float64 {
	v, _ := ToCutOff(vgs, id, idss)
	return v
}

// Malvino and Bates, worked examples as their published companion prints them; MPF102 from a textbook page (published).
func TestSquareLaw(t *testing.T) {
	for _, tt := range []struct {
		name      string
		got, want float64
	}{
		{"IDSS 5 mA, gm0 5 mS: VGS(off) is 2 V (13-12)", CutOff(5e-3, 5e-3), 2},
		{"MPF102 with 2 V and 6 mA: 166.7 Ω", ChannelResistance(6e-3, 2), 166.667},
		{"a quarter of IDSS 5 mA, 1.25 mA, flows at half of VGS(off): from 2 V back to 4 V (13-3)", cutOffFrom(2, 1.25e-3, 5e-3), 4},
	} {
		if math.Abs(tt.got-tt.want) > 1e-4*math.Abs(tt.want) {
			t.Errorf("%s: got %g, want %g", tt.name, tt.got, tt.want)
		}
	}
	// What flows by the law at a gate voltage leads back to the same cut-off.
	for _, vgs := range []float64{0.5, 1, 2.5, 3.9} {
		if v, c := ToCutOff(vgs, 8e-3*math.Pow(1-vgs/4, 2), 8e-3); math.Abs(v-4) > 1e-9 || math.Abs(c-(4-vgs)) > 1e-9 {
			t.Errorf("from %g V: cut-off %g V, correction %g V", vgs, v, c)
		}
	}
}

func TestVerdicts(t *testing.T) {
	const sound = " vf=0.67 vbr=OL rds-on=310"
	given := map[screening.Verdict]int{}
	for _, tt := range []struct {
		name, words string
		want        screening.Verdict
		says        string // part of what is said
	}{
		{"an unknown one by diode test and ohms", "n-channel" + sound, screening.Accept, "IDSS (no range is known for it)"},
		{"a p-channel one", "p-channel" + sound, screening.Accept, "gate blocking untested above 2 V"},
		{"a known type, IDSS not tested", "2N3819" + sound, screening.Accept, "untested above 2 V (rated 25 V)"},
		{"without its channel", strings.TrimSpace(sound), screening.Undecided, "SAY whether it is n-channel or p-channel"},
		{"a group must show its IDSS", "BF245B" + sound, screening.Undecided, "MEASURE drain current"},
		{"a group that shows it (6 to 15 mA, Philips 1996)", "BF245B idss@9V=9.1mA" + sound, screening.Accept, ""},
		{"B that reads 4.1 mA is group A", "BF245B idss@9V=4.1mA" + sound, screening.Regrade, "BF245 group A"},
		{"A that reads 18 mA is group C", "BF245A idss@9V=18mA" + sound, screening.Regrade, "BF245 group C"},
		{"type and group as two words", "BF245 B idss@9V=9.1mA" + sound, screening.Accept, ""},
		{"2N3819 of 25 mA, 2 to 20 on its sheet", "2N3819 idss@9V=25mA" + sound, screening.Regrade, "as measured"},
		{"2N3819 of 0.1 mA has no lesser claim", "2N3819 idss@9V=0.1mA" + sound, screening.Reject, "drain current"},
		{"recalled groups do not reject", "2SK170-BL idss@9V=4.1mA" + sound, screening.Undecided, "CONFIRM the figure"},
		{"a gate that does not block", "2N3819 vf=0.67 vbr=0.67 rds-on=310", screening.Reject, "suspect a static discharge"},
		{"a gate that breaks down at 12 V of 25", "2N3819 vbr=12V vf=0.67 rds-on=310", screening.Reject, "at least 25 V"},
		{"probes turned", "2N3819 vf=OL vbr=0.67 rds-on=310", screening.Undecided, "turn the probes"},
		{"open channel", "2N3819 vf=0.67 vbr=OL rds-on=OL", screening.Reject, "find the gate again"},
		{"2 nA at 15 V are allowed (published), 1 nA read", "2N3819 vf=0.67 vbr=OL rds-on=310 igss@15V=1.0nA temperature=25C", screening.Accept, ""},
		{"half a microampere at the gate", "2N3819 vf=0.67 vbr=OL rds-on=310 igss@15V=0.5uA temperature=25C", screening.Reject, "gate leakage"},
		{"in circuit", "2N3819 seen=in-circuit" + sound, screening.Undecided, "in circuit"},
		{"cracked", "2N3819 seen=cracked" + sound, screening.Barred, ""},
	} {
		j := judge(t, tt.words, screening.DefaultPolicy())
		given[j.Verdict]++
		said := booktest.Texts(j)
		if j.Verdict != tt.want || !strings.Contains(said, tt.says) {
			t.Errorf("%s: %s, want %s saying %q\n%s", tt.name, j.Verdict, tt.want, tt.says, said)
		}
	}
	booktest.EveryVerdict(t, given, screening.Treat)
}

// Signs and their absence say the same.
func TestAGateVoltageIsAMagnitude(t *testing.T) {
	const rest = "2N5457 vf=0.67 vbr=OL rds-on=310 idss@9V=3mA "
	for _, words := range []string{"vgs-off@1uA=-2.4", "vgs-off@1uA=2.4", "vgs-off@id=1uA=2.4V"} {
		j := judge(t, rest+words, screening.DefaultPolicy())
		f := findingOf(j, cutOff)
		if j.Verdict != screening.Accept || f == nil || f.Outcome != screening.Pass {
			t.Fatalf("%s: %s, %+v", words, j.Verdict, f)
		}
		// 2.4/(1 − √(1 µA/3 mA)) = 2.4446 V
		if got := f.Evidence().Value; math.Abs(got-2.4446) > 5e-4 {
			t.Errorf("%s: cut-off %.4f V", words, got)
		}
	}
	for words, want := range map[string]screening.Verdict{
		"vgs-off@1uA=-8.5": screening.Reject, "vgs-off@1uA=6.0": screening.Accept, "vgs-off@1mA=1.1": screening.Accept,
	} {
		j := judge(t, rest+words, screening.DefaultPolicy())
		if j.Verdict != want {
			t.Errorf("%s: %s, want %s\n%s", words, j.Verdict, want, booktest.Texts(j))
		}
		if f := findingOf(j, cutOff); words == "vgs-off@1mA=1.1" && f.Outcome != screening.Missing {
			t.Errorf("%s: a third of IDSS was taken for a cut-off: %+v", words, f)
		}
	}
	j := judge(t, "n-channel rated:vgs-off@id=10nA=-8V..-0.25V vgs-off@1uA=-2.00 vf=0.6 vbr=OL rds-on=200 rated:idss@vds=15V=2mA..20mA", screening.DefaultPolicy())
	if f := findingOf(j, cutOff); f == nil || f.Limit.Low != 0.25 || f.Limit.High != 8 || f.Outcome != screening.Pass {
		t.Errorf("%+v", f)
	}
}

func findingOf(j screening.Judgement, c screening.Criterion) *screening.Finding {
	for i := range j.Findings {
		if j.Findings[i].Limit.Criterion == c {
			return &j.Findings[i]
		}
	}
	return nil
}

func TestIDSSAtAnotherVoltageOnlyBounds(t *testing.T) {
	const rest = "BF245B vf=0.67 vbr=OL rds-on=310 "
	for words, want := range map[string]screening.Verdict{
		"idss@5V=9mA":     screening.Undecided, // at 15 V it may draw more than 15 mA
		"idss@5V=17.0mA":  screening.Regrade,   // at 15 V no less: not group B; whether C is open
		"idss@15V=9mA":    screening.Accept,
		"idss=9mA":        screening.Accept, // a battery's 9 V is assumed, and said so
		"idss@15V=16.0mA": screening.Regrade,
		"idss@15V=..4mA":  screening.Regrade,
	} {
		if j := judge(t, rest+words, screening.DefaultPolicy()); j.Verdict != want {
			t.Errorf("%s: %s, want %s\n%s", words, j.Verdict, want, booktest.Texts(j))
		}
	}
}

// The published bounds of a group are inside it.
func TestGroupBounds(t *testing.T) {
	const rest = " vf=0.67 vbr=OL rds-on=310 idss@15V="
	for words, pass := range map[string]bool{
		"BF245A" + rest + "2mA": true, "BF245A" + rest + "1.99mA": false, "BF245A" + rest + "6.5mA": true, "BF245A" + rest + "6.51mA": false,
		"BF245C" + rest + "25mA": true, "BF245C" + rest + "25.1mA": false, "2SK2593-Q" + rest + "6.5mA": true, "2SK2593-Q" + rest + "6.6mA": false,
	} {
		j := judge(t, words, booktest.Exactly())
		if f := findingOf(j, current); f == nil || (f.Outcome == screening.Pass) != pass {
			t.Errorf("%s: %+v", words, f)
		}
	}
}

// As good as new is an IDSS inside its range; a diode test and ohms do not prove that, nor does IDSS make up for a channel that was not read.
func TestAsGoodAsNewTakesIDSS(t *testing.T) {
	for words, want := range map[string]screening.Grade{
		"2N3819 vf=0.67 vbr=OL rds-on=310":             screening.Serviceable,
		"2N3819 vf=0.67 vbr=OL rds-on=310 idss@9V=8mA": screening.WithinSpec,
		"n-channel vf=0.67 vbr=OL rds-on=310":          screening.Serviceable,
		"BF245B vf=0.67 vbr=OL rds-on=310 idss@9V=9mA": screening.WithinSpec,
	} {
		if j := judge(t, words, screening.DefaultPolicy()); j.Verdict != screening.Accept || j.Grade != want {
			t.Errorf("%s: %s %s, want %s", words, j.Verdict, j.Grade, want)
		}
	}
	if j := judge(t, "2N3819 vf=0.67 vbr=OL idss@9V=8mA", screening.DefaultPolicy()); j.Verdict != screening.Undecided {
		t.Errorf("without the channel: %s", j.Verdict)
	}
}

func TestContradictionsAreRefused(t *testing.T) {
	b := Book(types.Builtin())
	for words, want := range map[string]string{
		"type=BF245A group=B":   "whose marking already says group A",
		"type=BF245 group=GR":   "it has A, B, C",
		"type=J201 group=A":     "no group of J201 is known",
		"type=2N3819 p-channel": `"p-channel" is claimed, but 2N3819 is n-channel`,
		"type=2N3819 40V":       "rated 25 V",
	} {
		_, err := screening.Judge(b, booktest.Part(t, b, words), screening.DefaultPolicy())
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", words, err, want)
		}
	}
}

// To complete twice is to complete once.
func TestCompleteIsIdempotent(t *testing.T) {
	b := Book(types.Builtin())
	for _, words := range []string{"BF245 group=C", "2SK170-GR", "n-channel 30V", "2N3819 rated:idss@vds=15V=3mA..5mA"} {
		once, _, err := b.Complete(booktest.Part(t, b, words).Claim)
		if err != nil {
			t.Fatal(err)
		}
		twice, _, err := b.Complete(once)
		if err != nil || len(once.Ratings) != len(twice.Ratings) || once.String() != twice.String() {
			t.Errorf("%s: %v, then %v, %v", words, once, twice, err)
		}
	}
}

func TestEveryRequiredLimitHasARecipe(t *testing.T) {
	b := Book(types.Builtin())
	for _, words := range []string{"BF245B", "2N3819", "n-channel", "p-channel 30V"} {
		j := booktest.Judge(t, b, words, screening.DefaultPolicy())
		for _, f := range j.Findings {
			if f.Limit.Evidence != screening.ByRating && len(b.Recipes(j.Part, f.Limit)) == 0 {
				t.Errorf("%s: no recipe for %s", words, f.Limit.On)
			}
		}
	}
}

func TestStaticIsWarnedOfBeforeTheFirstReading(t *testing.T) {
	b := Book(types.Builtin())
	j := booktest.Judge(t, b, "BF245C", screening.DefaultPolicy())
	all := b.Cautions(j.Part, screening.AtMeasure)
	if len(all) == 0 || all[0].Code != "static" || all[0].Source.Status != screening.Published {
		t.Fatalf("%+v", all)
	}
	last := all[len(all)-1]
	if last.Code != "idss-heat" || math.Abs(last.Values["power"]-0.225) > 1e-9 { // 25 mA · 9 V
		t.Errorf("%+v", last)
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(types.Builtin()), "BF245B vf=0.67 vbr=OL rds-on=310 idss@9V=9.1mA vgs-off=2.4")
}
