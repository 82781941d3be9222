package transformer

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const small = "winding-voltage/1=230V winding-voltage/2=12V "

func TestVerdicts(t *testing.T) {
	seen := map[screening.Verdict]int{}
	for _, tt := range []struct {
		name, words string
		verdict     screening.Verdict
		says        string
	}{
		{"a good one with a pocket meter", small + "dcr/1=380 dcr/2=1.4 insulation-resistance/1-core=OL insulation-resistance/1-2=OL", screening.Accept, "not for: across the mains"},
		{"nothing claimed: whatever is measured counts", "dcr/1=380 dcr/2=1.4 insulation-resistance/1-2=OL", screening.Accept, "not for: across the mains"},
		{"with its ratio", small + "dcr/1=380 dcr/2=1.4 insulation-resistance/1-core=OL voltage-ratio/2=0.058", screening.Accept, ""},
		{"a ratio too low", small + "dcr/1=380 dcr/2=1.4 insulation-resistance/1-core=OL voltage-ratio/2=0.031", screening.Reject, "voltage ratio"},
		{"a ratio above what regulation explains is only remembered as wrong", small + "dcr/1=380 dcr/2=1.4 insulation-resistance/1-core=OL voltage-ratio/2=0.08", screening.Accept, ""},
		{"one winding open", small + "dcr/1=OL dcr/2=1.4 insulation-resistance/1-core=OL", screening.Reject, "winding resistance of section 1"},
		{"one winding not measured", small + "dcr/1=380 insulation-resistance/1-core=OL", screening.Undecided, "MEASURE winding resistance of section 2"},
		{"a winding to the core", small + "dcr/1=380 dcr/2=1.4 insulation-resistance/1-core=40k", screening.Reject, "insulation resistance of section 1-core"},
		{"the worst insulation decides", small + "dcr/1=380 dcr/2=1.4 insulation-resistance/1-core=OL insulation-resistance/1-2=200k", screening.Reject, "section 1-2"},
		{"30 MΩ at 500 V is only remembered as poor", small + "dcr/1=380 dcr/2=1.4 insulation-resistance/1-core@500V=30M", screening.Accept, ""},
		{"insulation not looked at", small + "dcr/1=380 dcr/2=1.4", screening.Undecided, "MEASURE insulation resistance"},
		{"across the mains", small + "dcr/1=380 dcr/2=1.4 insulation-resistance/1-core=OL seen=mains", screening.Barred, ""},
		{"burnt", small + "seen=burnt", screening.Reject, "overheated"},
		{"crumbling rubber", small + "seen=brittle", screening.Reject, "crumbles"},
	} {
		t.Run(tt.name, func(t *testing.T) {
			j := booktest.Judge(t, Book(), tt.words, screening.DefaultPolicy())
			seen[j.Verdict]++
			if j.Verdict != tt.verdict || !strings.Contains(booktest.Texts(j), tt.says) {
				t.Errorf("%s: %s, want %s saying %q\n%s", tt.words, j.Verdict, tt.verdict, tt.says, booktest.Texts(j))
			}
		})
	}
	booktest.EveryVerdict(t, seen, screening.Regrade, screening.Treat)
}

// 11 V unloaded against 10 V loaded is 10 % regulation (nuvotem: published): it lies inside the band.
func TestRegulationLiesInsideTheBand(t *testing.T) {
	for words, want := range map[string]screening.Outcome{
		"winding-voltage/1=100V winding-voltage/2=10V voltage-ratio/2=0.11":   screening.Pass,
		"winding-voltage/1=100V winding-voltage/2=10V voltage-ratio/2=0.0949": screening.Fail,
		"winding-voltage/1=100V winding-voltage/2=10V voltage-ratio/2=0.126":  screening.Close,
		// The winding with the highest voltage is the fed one, wherever it stands.
		"winding-voltage/a=10V winding-voltage/b=100V voltage-ratio/a=0.11": screening.Pass,
	} {
		j := booktest.Judge(t, Book(), words, booktest.Exactly())
		worst, found := screening.Pass, 0
		for _, f := range j.Findings {
			if f.Limit.Criterion == ratioCriterion {
				found++
				if f.Outcome != screening.Pass {
					worst = f.Outcome
				}
			}
		}
		if worst != want || found != 2 {
			t.Errorf("%s: %s in %d limits, want %s", words, worst, found, want)
		}
	}
}

func TestTheTestSupplyIsSafeAndFeedsTheRightWinding(t *testing.T) {
	part := booktest.Part(t, Book(), small)
	all, err := limits(part.Claim)
	if err != nil {
		t.Fatal(err)
	}
	seen := false
	for _, l := range all {
		for _, r := range Book().Recipes(part, l) {
			if l.On != Ratio.Name {
				continue
			}
			seen = true
			// 12 V on 230 V: 0.63 V on the other; a short behind 220 Ω takes 144/220 = 0.65 W.
			if v := r.Values; v["supply"] != 12 || math.Abs(v["expected-voltage"]-0.6261) > 1e-3 || math.Abs(v["resistor-power"]-0.6545) > 1e-3 ||
				!strings.Contains(r.Lines[0], "feed winding 1, and no other") {
				t.Errorf("%v %v", r.Values, r.Lines)
			}
		}
	}
	cautions := Book().Cautions(part, screening.AtMeasure)
	if !seen || len(cautions) != 2 || cautions[1].Values["voltage"] != 230 || cautions[1].Level != screening.Danger {
		t.Errorf("%v %+v", seen, cautions)
	}
	// Fed as told, nothing that is not itself rated higher ever shows more than 12 V, and the resistor stands a short.
	rapid.Check(t, func(t *rapid.T) {
		fed := fedVolts(rapid.Float64Range(1, 5000).Draw(t, "rated"))
		if fed > sourceVolts || fed*fed/seriesOhms > resistorRate {
			t.Fatalf("%v V", fed)
		}
	})
}

// A meter, however poor, never rejects windings that conduct and insulate, and stand in their ratio.
func TestASoundTransformerIsNeverRejected(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		accuracy := rapid.Float64Range(0.001, 0.4).Draw(t, "accuracy")
		off := func(name string) float64 { return 1 / (1 - accuracy*rapid.Float64Range(-0.999, 0.999).Draw(t, name)) }
		meter := screening.Meter{Name: "poor", ByUnit: map[quantity.Unit]screening.Accuracy{quantity.Ohm: {Relative: accuracy}, quantity.One: {Relative: accuracy}}}
		policy := screening.DefaultPolicy()
		policy.Meters = map[string]screening.Meter{"": meter}
		rating := func(section string, volts float64) screening.Rating {
			r := screening.NominalRating(WindingVoltage, volts)
			r.Section = section
			return r
		}
		ratio := rapid.Float64Range(0.01, 1).Draw(t, "ratio")
		part := screening.Part{
			Claim: screening.Claim{}.WithRating(rating("1", 100)).WithRating(rating("2", 100*ratio)),
			Readings: []screening.Reading{
				{Of: screening.DCR.Name, Section: "1", Unit: quantity.Ohm, Value: 400 * off("1")},
				{Of: screening.DCR.Name, Section: "2", Unit: quantity.Ohm, Value: 2 * off("2")},
				{Of: screening.InsulationResistance.Name, Section: "1-2", Unit: quantity.Ohm, Value: 1e6 * off("insulation")},
				{Of: Ratio.Name, Section: "2", Value: ratio * off("ratio")},
			},
		}
		if j, err := screening.Judge(Book(), part, policy); err != nil || j.Verdict == screening.Reject {
			t.Fatalf("%v, %v\n%s", j.Verdict, err, booktest.Texts(j))
		}
	})
}

func TestTheTableIsChecked(t *testing.T) {
	if _, err := read(figuresCSV); err != nil {
		t.Error(err)
	}
	if _, err := read("name,value,source,status\nbelow,0.05,x,house\n"); err == nil {
		t.Error("a table without insulation is read")
	}
	if _, _, err := complete(booktest.Part(t, Book(), "winding-voltage/1=10V..20V").Claim); err == nil {
		t.Error("a winding of 10 to 20 V is taken")
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(), small+"dcr/1=380 dcr/2=1.4 insulation-resistance/1-core=OL voltage-ratio/2=0.058")
}

// MIL-STD-202 method 302, condition B (published): 500 V, read after 2 min, or earlier where it stands still or rises above the limit.
func TestInsulationIsTestedAsMethod302Says(t *testing.T) {
	part := booktest.Part(t, Book(), small)
	all, err := limits(part.Claim)
	if err != nil {
		t.Fatal(err)
	}
	found := 0
	for _, l := range all {
		if l.Criterion != testedCriterion {
			continue
		}
		found++
		text := strings.Join(Book().Recipes(part, l)[0].Lines, "\n")
		if v, _ := l.At.Get(screening.Voltage); v != 500 || l.Need == screening.Required || l.Source.Status.MayReject() || !strings.Contains(text, "500 V DC") ||
			!strings.Contains(text, "after 2 min") || !strings.Contains(text, "rises above the limit") {
			t.Errorf("%v V, %s: %s", v, l.Source, text)
		}
	}
	if found != 1 {
		t.Errorf("%d such limits", found)
	}
}
