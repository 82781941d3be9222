package tantalum

import (
	"math"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
)

func TestEmbeddedTablesLoad(t *testing.T) {
	if shared().Tables == nil || named("tolerance").Value != 0.2 {
		t.Error("no tables")
	}
}

func limitOf(t *testing.T, words string, on screening.Characteristic, grade screening.Grade, criterion screening.Criterion) screening.Limit {
	t.Helper()
	j := booktest.Judge(t, Book(), words, screening.DefaultPolicy())
	all, err := Book().Limits(j.Claim)
	if err != nil {
		t.Fatal(err)
	}
	for _, l := range all {
		if l.On == on && l.Grade == grade && l.Criterion == criterion && l.InUse {
			return l
		}
	}
	t.Fatalf("%s has no %s limit", words, on)
	return screening.Limit{}
}

// Check cases of the collected figures: the rule is published, the number computed from it.
func TestPublishedValues(t *testing.T) {
	for _, tc := range []struct {
		name, words string
		on          screening.Characteristic
		grade       screening.Grade
		want        float64
		source      string
	}{
		{"10 µF 16 V leaks 1.6 µA", "10uF 16V", "leakage", screening.WithinSpec, 1.6e-6, "F93, 0.01·CV (check case 29)"},
		{"1 µF 35 V takes the floor of 0.5 µA", "1uF 35V", "leakage", screening.WithinSpec, 0.5e-6, "F93, or 0.5 µA"},
		{"125 % of it by the end of life", "10uF 16V", "leakage", screening.Serviceable, 2.0e-6, "199D, F93"},
		{"10 µF with tan δ 6 % at 120 Hz is 7.96 Ω", "10uF 16V", "esr", screening.WithinSpec, 7.9577, "computed (check case 63)"},
		{"1 µF: 4 %", "1uF 35V", "tan-delta", screening.WithinSpec, 0.04, "F93"},
		{"68 µF: 6 %", "68uF 16V", "tan-delta", screening.WithinSpec, 0.06, "F93"},
		{"100 µF: 8 %", "100uF 10V", "tan-delta", screening.WithinSpec, 0.08, "F93"},
		{"tan δ stays within its limit to the end of life", "10uF 16V", "tan-delta", screening.Serviceable, 0.06, "199D, F93"},
		{"the top of ±20 % and 10 % more", "10uF 16V M", "capacitance", screening.Serviceable, 13.2e-6, "199D, F93"},
	} {
		t.Run(tc.name, func(t *testing.T) {
			criterion := map[screening.Characteristic]screening.Criterion{"esr": "loss", "tan-delta": "loss"}[tc.on]
			if criterion == "" {
				criterion = screening.Criterion(tc.on)
			}
			l := limitOf(t, tc.words, tc.on, tc.grade, criterion)
			if math.Abs(l.High/tc.want-1) > 1e-4 || l.Source.Status != screening.Published {
				t.Errorf("%v (%s), want %v by %s", l.High, l.Source, tc.want, tc.source)
			}
		})
	}
	// Check case 31: 22 µF 25 V at 85 °C.
	if got := HotLimit(22e-6, 25); math.Abs(got-55e-6) > 1e-12 {
		t.Errorf("22 µF 25 V at 85 °C: %v A, want 55 µA (0.1·CV, F93)", got)
	}
	if l := limitOf(t, "22uF 25V", "leakage", screening.WithinSpec, "leakage"); !strings.Contains(l.Note, "at 85 °C up to 55.0 µA") {
		t.Errorf("the leakage limit does not say what it is when hot: %q", l.Note)
	}
	// 0.01·CV is R·C = 100 s, the figure of a comparison of dielectrics for tantalum (100 MΩ·µF).
	if l := limitOf(t, "47uF 20V", "leakage", screening.WithinSpec, "leakage"); math.Abs(20/l.High*47e-6-100) > 1e-9 {
		t.Errorf("R·C = %v s, want 100 s", 20/l.High*47e-6)
	}
}

func TestVerdicts(t *testing.T) {
	given := map[screening.Verdict]int{}
	for _, tc := range []struct {
		name, words string
		want        screening.Verdict
		grade       screening.Grade
		says        string
	}{
		{"a pocket meter is enough", "10uF 16V capacitance=9.8uF resistance=OL", screening.Accept, screening.WithinSpec, "surge current: on a low-impedance rail use it only up to 8 V"},
		{"a bead of 35 V", "4.7uF 35V bead 1978 capacitance=5.2uF resistance=OL", screening.Accept, screening.WithinSpec, "with 3.5 Ω or more in series"},
		{"read with all there is", "22uF 25V K capacitance=21.4uF leakage@25V,5min=0.6uA tan-delta=0.03", screening.Accept, screening.WithinSpec, ""},
		{"13 % high on ±10 % is worn, and may be damp", "10uF 16V K capacitance=11.6uF resistance=OL", screening.Accept, screening.Serviceable, "damp alone raises"},
		{"between 100 and 125 % of the leakage limit it is worn", "100uF 10V capacitance=98uF leakage@10V,1min=11.3uA", screening.Accept, screening.Serviceable, ""},
		{"losses that another ladder allows reject nothing", "22uF 25V capacitance=23uF resistance=OL tan-delta=0.071", screening.Accept, screening.Serviceable, "up to tan δ 0.08 others allow"},
		{"losses that none allows", "22uF 25V capacitance=23uF resistance=OL tan-delta=0.13", screening.Reject, 0, "dissipation factor reads 0.13"},
		{"120 Ω is a short", "10uF 16V capacitance=9.8uF resistance=120", screening.Reject, 0, "swap the probes once"},
		{"leaky at rated voltage", "10uF 16V capacitance=9.8uF leakage@16V,5min=40uA", screening.Reject, 0, "leakage current reads 40"},
		{"leaky below its rated voltage already", "10uF 16V capacitance=9.8uF resistance=OL leakage@10V,5min=4uA", screening.Reject, 0, ""},
		{"low leakage at a lower voltage proves nothing", "10uF 16V capacitance=9.8uF resistance=OL leakage@10V,5min=0.1uA", screening.Accept, 0, "leakage at its rated 16 V: read only at 10 V"},
		{"low capacitance", "10uF 16V K capacitance=6.5uF resistance=OL", screening.Reject, 0, "capacitance reads 6.5"},
		{"capacitance alone shows no short", "10uF 16V capacitance=9.8uF", screening.Undecided, 0, "MEASURE resistance"},
		{"polarity unknown holds", "10uF 16V capacitance=9.8uF resistance=OL seen=polarity-unknown", screening.Undecided, 0, "which end is plus"},
		{"cracked", "10uF 16V capacitance=9.8uF resistance=OL seen=cracked", screening.Barred, 0, ""},
		{"burnt", "10uF 16V capacitance=9.8uF resistance=OL seen=burnt", screening.Reject, 0, "burned once burns again"},
		{"wet: the losses are needed", "100uF 50V wet capacitance=98uF resistance=OL", screening.Undecided, 0, "MEASURE equivalent series resistance at 120 Hz"},
		{"wet and sound", "100uF 50V wet capacitance=98uF resistance=OL esr@120Hz=1.1", screening.Accept, 0, "allow none"},
		{"wet: its figures are remembered and reject nothing", "100uF 50V wet capacitance=98uF resistance=OL esr@120Hz=30", screening.Undecided, 0, "CONFIRM the figure"},
		{"wet: half its capacitance is gone whatever the figures", "100uF 50V wet capacitance=41uF resistance=OL esr@120Hz=1.1", screening.Reject, 0, "whatever its series"},
	} {
		t.Run(tc.name, func(t *testing.T) {
			j := booktest.Judge(t, Book(), tc.words, screening.DefaultPolicy())
			given[j.Verdict]++
			if j.Verdict != tc.want || tc.grade != 0 && j.Grade != tc.grade || !strings.Contains(booktest.Texts(j), tc.says) {
				t.Errorf("%s %s, want %s %s saying %q\n%s", j.Verdict, j.Grade, tc.want, tc.grade, tc.says, booktest.Texts(j))
			}
			if len(j.Reasons) == 0 || len(j.Next) == 0 {
				t.Error("no reason or no next step")
			}
		})
	}
	booktest.EveryVerdict(t, given, screening.Treat, screening.Regrade)
}

func TestWhatIsNotTestedIsSaid(t *testing.T) {
	j := booktest.Judge(t, Book(), "10uF 16V capacitance=9.8uF resistance=OL", screening.DefaultPolicy())
	var of []string
	for _, g := range j.NotTested {
		of = append(of, string(g.Of))
	}
	if got := strings.Join(of, " "); got != "esr leakage" {
		t.Errorf("not tested: %q", got)
	}
}

// A sound part measured with a meter 3 % off, on either side, is never rejected.
func TestAPoorMeterNeverRejectsASoundPart(t *testing.T) {
	for _, words := range []string{
		"10uF 16V K capacitance=11.3uF resistance=OL", "10uF 16V K capacitance=8.75uF resistance=OL",
		"10uF 16V K capacitance=10uF resistance=OL tan-delta=0.064", "10uF 16V K capacitance=10uF resistance=OL leakage@16V,5min=2.0uA",
	} {
		if j := booktest.Judge(t, Book(), words, screening.DefaultPolicy()); j.Verdict == screening.Reject {
			t.Errorf("%s: %s\n%s", words, j.Verdict, booktest.Texts(j))
		}
	}
}

func TestAdviceHasTheNumbers(t *testing.T) {
	part := booktest.JudgePart(t, Book(), booktest.Part(t, Book(), "10uF 16V"), screening.DefaultPolicy()).Part
	all := cautions(part, screening.AtMeasure)
	if len(all) != 1 {
		t.Fatalf("%d cautions", len(all))
	}
	c := all[0]
	// 3 % of 16 V over 1.6 µA is 300 kΩ: the most, 100 kΩ. A short draws 160 µA and heats it with 16²/100 kΩ = 2.56 mW.
	for name, want := range map[string]float64{
		"series-resistance": 100e3, "current": 160e-6, "resistor-power": 2.56e-3, "fault-power": 0.64e-3, "charge-time": 5 * 100e3 * 12e-6,
	} {
		if math.Abs(c.Values[name]/want-1) > 1e-9 {
			t.Errorf("%s is %v, want %v", name, c.Values[name], want)
		}
	}
	for _, words := range []string{"plus to plus", "stripe of a chip is plus", "ignite", "turn it up slowly", "100 kΩ"} {
		if !strings.Contains(c.Text, words) {
			t.Errorf("does not say %q: %s", words, c.Text)
		}
	}
	wet := booktest.JudgePart(t, Book(), booktest.Part(t, Book(), "100uF 125V wet can"), screening.DefaultPolicy()).Part
	if all := cautions(wet, screening.AtMeasure); len(all) != 2 || all[1].Level != screening.Danger || !all[1].Gate ||
		!strings.Contains(all[1].Text, "no reverse voltage at all") || !strings.Contains(all[1].Text, "licensed practice") {
		t.Errorf("wet, 125 V: %+v", all)
	}
	if all := cautions(part, screening.AtLook); len(all) != 0 {
		t.Errorf("10 µF at 16 V is nothing to warn of: %v", all)
	}
}

func TestClaimsThatContradictThemselves(t *testing.T) {
	for words, want := range map[string]string{
		"10uF 16V wet bead": "a bead is solid", "10F 16V": "beyond a tantalum capacitor",
		"10uF": "none is claimed", "10uF 16V dated=old": "no year", "10uF 900V": "at most 700 V",
	} {
		_, err := screening.Judge(Book(), booktest.Part(t, Book(), words), screening.DefaultPolicy())
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", words, err, want)
		}
	}
	if _, _, err := complete(screening.Claim{}.WithTrait(screening.TraitTechnology, "foil")); err == nil || !strings.Contains(err.Error(), "neither solid nor wet") {
		t.Errorf("foil: %v", err)
	}
}

func TestEveryRequiredReadingHasItsRecipe(t *testing.T) {
	for _, words := range []string{"10uF 16V", "0.1uF 35V bead", "1000uF 6.3V chip", "100uF 125V wet can", "47uF 20V 1974"} {
		j := booktest.Judge(t, Book(), words, screening.DefaultPolicy())
		for _, f := range j.Findings {
			if len(Book().Recipes(j.Part, f.Limit)) == 0 {
				t.Errorf("%s: no recipe for %s", words, f.Limit.On)
			}
		}
		u, _ := capacitor.UnitOf(j.Claim, shared().Span, "")
		if c := shared().ChargingOf(j.Claim, u); c.Ohms*shared().Tables.LeakageLimit(technology(j.Claim), u) > 0.03*u.Volts || c.Seconds > 60 {
			t.Errorf("%s: %+v", words, c)
		}
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(), "22uF 25V K capacitance=21.4uF resistance=OL leakage@25V,5min=0.6uA tan-delta=0.03")
}
