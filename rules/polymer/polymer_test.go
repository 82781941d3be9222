package polymer

import (
	"math"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
)

func TestEmbeddedTablesLoad(t *testing.T) {
	if tables() == nil {
		t.Error("no tables")
	}
}

// Check cases of the collected figures: the rule is published, the number computed from it.
func TestPublishedValues(t *testing.T) {
	for _, tc := range []struct {
		name, words string
		on          screening.Characteristic
		set         screening.LimitSet
		grade       screening.Grade
		want        float64
		status      screening.Status
	}{
		{"aluminium 100 µF 6.3 V by 0.2·CV: 126 µA (check case 32, PSA)", "100uF 6V3 al", "leakage", "no-floor", screening.WithinSpec, 126e-6, screening.Published},
		{"the laxest series: 0.2·CV or 500 µA (PSC)", "100uF 6V3 al", "leakage", screening.GeneralSet, screening.WithinSpec, 500e-6, screening.Published},
		{"and above that 0.2·CV", "1000uF 6V3 al", "leakage", screening.GeneralSet, screening.WithinSpec, 1.26e-3, screening.Published},
		{"the tightest above 4 V: 0.04·CV (ESRD)", "100uF 6V3 al", "leakage", "low-leakage", screening.WithinSpec, 25.2e-6, screening.Published},
		{"up to 4 V: 0.06·CV (ESRD)", "220uF 2V5 al", "leakage", "low-leakage", screening.WithinSpec, 33e-6, screening.Published},
		{"its floor of 3 µA (ESRD)", "4.7uF 10V al", "leakage", "low-leakage", screening.WithinSpec, 3e-6, screening.Published},
		{"tantalum 100 µF 6.3 V by 0.1·CV: 63 µA (check case 33, F31)", "100uF 6V3 ta", "leakage", screening.GeneralSet, screening.WithinSpec, 63e-6, screening.Published},
		{"unknown technology: the laxest", "1000uF 6V3", "leakage", screening.GeneralSet, screening.WithinSpec, 1.26e-3, screening.Published},
		{"tan δ 0.10 (PSC)", "100uF 6V3 al", "tan-delta", screening.GeneralSet, screening.WithinSpec, 0.10, screening.Published},
		{"tan δ 0.08 (PSA)", "100uF 6V3 al", "tan-delta", "radial", screening.WithinSpec, 0.08, screening.Published},
		{"150 % of it after life (PSA)", "100uF 6V3 al", "tan-delta", screening.GeneralSet, screening.Serviceable, 0.15, screening.Published},
		{"of tantalum it is remembered", "100uF 6V3 ta", "tan-delta", screening.GeneralSet, screening.WithinSpec, 0.10, screening.FromMemory},
		{"capacitance ±20 % and 20 % more after life (PSA)", "100uF 6V3 al", "capacitance", screening.GeneralSet, screening.Serviceable, 144e-6, screening.Published},
	} {
		t.Run(tc.name, func(t *testing.T) {
			j := booktest.Judge(t, Book(), tc.words, screening.DefaultPolicy())
			all, err := limits(j.Claim)
			if err != nil {
				t.Fatal(err)
			}
			for _, l := range all {
				if l.On == tc.on && l.Set == tc.set && l.Grade == tc.grade && l.Criterion != "short" {
					if math.Abs(l.High/tc.want-1) > 1e-9 || l.Source.Status != tc.status {
						t.Errorf("%v (%s), want %v (%s)", l.High, l.Source, tc.want, tc.status)
					}
					return
				}
			}
			t.Error("no such limit")
		})
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
		{"a pocket meter is enough", "470uF 6V3 can capacitance=455uF resistance=OL", screening.Accept, screening.WithinSpec, "whether its ESR is low enough"},
		{"read with all there is", "470uF 6V3 al capacitance=455uF leakage@6.3V,2min=40uA esr@120Hz=0.03", screening.Accept, screening.WithinSpec, ""},
		{"its own data sheet's ESR", "470uF 6V3 al rated:esr@100kHz=..12m capacitance=455uF resistance=OL esr@100kHz=11m", screening.Accept, 0, ""},
		{"worn, but inside 150 %", "470uF 6V3 al capacitance=455uF resistance=OL tan-delta=0.12", screening.Accept, screening.Serviceable, ""},
		{"losses beyond 150 % of the laxest", "470uF 6V3 al capacitance=455uF resistance=OL tan-delta=0.21", screening.Reject, 0, "dissipation factor"},
		{"ESR far above its data sheet's", "470uF 6V3 al rated:esr@100kHz=..12m capacitance=455uF resistance=OL esr@100kHz=60m", screening.Reject, 0, ""},
		{"leakier than the laxest series", "470uF 6V3 al capacitance=455uF leakage@6.3V,2min=900uA", screening.Reject, 0, "leakage current"},
		{"leakier than tantalum, not than the laxest of unknown technology", "470uF 6V3 capacitance=455uF leakage@6.3V,2min=400uA", screening.Accept, 0, ""},
		{"3 Ω is a short", "470uF 6V3 al capacitance=455uF resistance=3", screening.Reject, 0, "swap the probes"},
		{"low capacitance", "470uF 6V3 al capacitance=200uF resistance=OL", screening.Reject, 0, "capacitance reads 200"},
		{"capacitance alone shows no short", "470uF 6V3 al capacitance=455uF", screening.Undecided, 0, "MEASURE resistance"},
		{"cracked", "470uF 6V3 capacitance=455uF resistance=OL seen=cracked", screening.Barred, 0, ""},
		{"bulged", "470uF 6V3 capacitance=455uF resistance=OL seen=bulged", screening.Reject, 0, "overheated"},
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

// A sound part at the edge of a limit, read with a meter off by all it may be, is never rejected.
func TestAPoorMeterNeverRejectsASoundPart(t *testing.T) {
	for _, words := range []string{
		"470uF 6V3 al capacitance=696uF resistance=OL", "470uF 6V3 al capacitance=293uF resistance=OL",
		"470uF 6V3 al capacitance=470uF resistance=OL tan-delta=0.159", "470uF 6V3 al capacitance=470uF resistance=OL leakage@6.3V,2min=604uA",
	} {
		if j := booktest.Judge(t, Book(), words, screening.DefaultPolicy()); j.Verdict == screening.Reject {
			t.Errorf("%s: %s\n%s", words, j.Verdict, booktest.Texts(j))
		}
	}
}

func TestClaimsThatContradictThemselves(t *testing.T) {
	for words, want := range map[string]string{
		"470uF 6V3 ta can": "a polymer can is aluminium", "470uF 6V3 rated:esr=..12m": "holds at one frequency", "470uF": "none is claimed",
	} {
		_, err := screening.Judge(Book(), booktest.Part(t, Book(), words), screening.DefaultPolicy())
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", words, err, want)
		}
	}
}

func TestAdviceHasTheNumbers(t *testing.T) {
	part := booktest.JudgePart(t, Book(), booktest.Part(t, Book(), "1000uF 6V3 al"), screening.DefaultPolicy()).Part
	all := cautions(part, screening.AtMeasure)
	// 3 % of 6.3 V over 1.26 mA is 150 Ω: 100 Ω. A short heats it with 6.3²/100 = 0.397 W.
	if len(all) != 1 || all[0].Values["series-resistance"] != 100 || math.Abs(all[0].Values["resistor-power"]-0.3969) > 1e-9 ||
		!strings.Contains(all[0].Text, "100 Ω, 1 W or more") {
		t.Errorf("%+v", all)
	}
	j := booktest.Judge(t, Book(), "1000uF 6V3 al rated:esr@100kHz=..8m", screening.DefaultPolicy())
	for _, f := range j.Findings {
		if len(Book().Recipes(j.Part, f.Limit)) == 0 {
			t.Errorf("no recipe for %s", f.Limit.On)
		}
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(), "470uF 6V3 al capacitance=455uF resistance=OL leakage@6.3V,2min=40uA esr@120Hz=0.03")
}
