package igbt

import (
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
)

func TestVerdicts(t *testing.T) {
	b := Book(types.Builtin())
	const off, on = " rge=OL vbr=OL vf=OL", " vce-on@ic=0.4A,vge=12V=0.95"
	given := map[screening.Verdict]int{}
	for _, tt := range []struct {
		name, words string
		want        screening.Verdict
		says        string
	}{
		{"a known type by meter and lamp", "IRG4BC20U" + off + on, screening.Accept, "blocking untested above 2 V (rated 600 V)"},
		{"an unknown one, 600 V", "600V" + off + on, screening.Accept, "rated 600 V"},
		{"a co-packed diode drops (IRG4BC10UD)", "IRG4BC10UD rge=OL vbr=OL vf=0.42" + on, screening.Accept, ""},
		{"a co-packed diode that is open", "IRG4BC10UD rge=OL vbr=OL vf=OL" + on, screening.Reject, "forward voltage"},
		{"claimed without a diode, and one conducts", "no-diode rge=OL vbr=OL vf=0.42" + on, screening.Undecided, "say diode=co-packed"},
		{"not switched on", "IRG4BC20U" + off, screening.Undecided, "LIGHT a lamp through it"},
		{"on at 5 V says nothing", "IRG4BC20U vce-on@ic=0.4A,vge=5V=3.5" + off, screening.Undecided, "at least 8 V is needed"},
		{"it drops 9 V when on", "IRG4BC20U vce-on@ic=0.4A,vge=12V=9.0" + off, screening.Reject, "suspect a static discharge"},
		{"a gate of 22 Ω", "IRG4BC20U rge=22 vbr=OL vf=OL", screening.Reject, "suspect a static discharge"},
		{"a charged gate looks like a short", "IRG4BC20U rge=OL vbr=0.45 vf=OL", screening.Undecided, "a charged gate holds a sound part on"},
		{"shorted with the gate tied", "IRG4BC20U rge=OL vbr@vge=0V=0.01", screening.Reject, "at least 1.9 V"},
		{"it breaks down at 210 V of 600 (published)", "IRG4BC20U rge=OL vf=OL vbr@vge=0V=210V" + on, screening.Reject, "at least 600 V"},
		{"100 nA at the gate are allowed (published)", "IRG4BC20U iges@20V=40nA" + off + on, screening.Accept, ""},
		{"threshold of 9 V", "IRG4BC20U vge-th@ic=0.5mA=9.2" + off + on, screening.Reject, "threshold"},
		{"in circuit", "IRG4BC20U seen=in-circuit" + off + on, screening.Undecided, "in circuit"},
		{"cracked", "IRG4BC20U seen=cracked" + off + on, screening.Barred, ""},
	} {
		j := booktest.Judge(t, b, tt.words, screening.DefaultPolicy())
		given[j.Verdict]++
		said := booktest.Texts(j)
		if j.Verdict != tt.want || !strings.Contains(said, tt.says) {
			t.Errorf("%s: %s, want %s saying %q\n%s", tt.name, j.Verdict, tt.want, tt.says, said)
		}
	}
	booktest.EveryVerdict(t, given, screening.Treat, screening.Regrade)
}

func TestEveryLimitHasARecipe(t *testing.T) {
	b := Book(types.Builtin())
	for _, words := range []string{"IRG4BC20U", "IRG4BC10UD", "no-diode 1200V", ""} {
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

func TestContradictionsAreRefused(t *testing.T) {
	b := Book(types.Builtin())
	for words, want := range map[string]string{
		"type=IRG4BC10UD no-diode": `"none" is claimed, but IRG4BC10UD is co-packed`,
		"type=IRG4BC20U 1200V":     "rated 600 V",
	} {
		_, err := screening.Judge(b, booktest.Part(t, b, words), screening.DefaultPolicy())
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", words, err, want)
		}
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(types.Builtin()), "IRG4BC20U rge=OL vbr=OL vf=OL vce-on@ic=0.4A,vge=12V=0.95")
}
