package variablecap

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var verdictCases = []struct {
	name, words string
	verdict     screening.Verdict
	as, says    string
}{
	{"a sound gang", "10..365pF air insulation-resistance=OL capacitance-max=372pF capacitance-min=13pF", screening.Accept, "", "what is asked of a new part"},
	{"the highest alone is claimed", "365pF insulation-resistance=OL capacitance-max=350pF", screening.Accept, "", "what is asked of a new part"},
	{"15 % off", "365pF insulation-resistance=OL capacitance-max=420pF", screening.Accept, "", "every required reading"},
	{"bent back and measured again", "365pF insulation-resistance=OL capacitance-max=360pF treated=1", screening.Accept, "", "every required reading"},
	{
		"another part than it says", "10..365pF insulation-resistance=OL capacitance-max=489pF capacitance-min=14pF", screening.Regrade,
		"as measured, 14 pF .. 489 pF", "287 pF to 443 pF",
	},
	{"nothing claimed", "insulation-resistance=OL capacitance-max=489pF capacitance-min=14pF", screening.Regrade, "as measured, 14 pF .. 489 pF", "nothing is claimed"},
	{
		"nothing claimed, two sections", "insulation-resistance/1=OL insulation-resistance/2=OL capacitance-max/1=489pF capacitance-max/2=210pF", screening.Regrade,
		"as measured, section 1: 489 pF, section 2: 210 pF", "nothing is claimed",
	},
	{
		"one section of two is off", "10..365pF 2-gang insulation-resistance/1=OL insulation-resistance/2=OL capacitance-max/1=372pF capacitance-max/2=480pF",
		screening.Regrade, "section 2: 480 pF", "section 2 reads 480 pF",
	},
	{
		"it does not come down", "10..365pF insulation-resistance=OL capacitance-max=370pF capacitance-min=80pF", screening.Regrade,
		"as measured, 80 pF .. 370 pF", "at most 30 pF",
	},
	{"plates touch: bend them first", "365pF insulation-resistance=3 capacitance-max=360pF", screening.Undecided, "", "say treated=1"},
	{"not turned", "365pF capacitance-max=360pF", screening.Undecided, "", "MEASURE insulation resistance"},
	{"a section not measured", "365pF 2-gang insulation-resistance/1=OL capacitance-max/1=360pF", screening.Undecided, "", "MEASURE highest capacitance of section 2"},
	{"bent plates seen", "365pF insulation-resistance=OL capacitance-max=360pF seen=bent", screening.Undecided, "", "STRAIGHTEN them"},
	{"it hardly changes", "insulation-resistance=OL capacitance-max=100pF capacitance-min=90pF", screening.Undecided, "", "nothing is claimed"},
	{"the mains", "365pF insulation-resistance=OL capacitance-max=360pF seen=mains", screening.Barred, "", "no reading shows"},
	{"plates still touch", "365pF air insulation-resistance=3 capacitance-max=360pF treated=1", screening.Reject, "", "reads 3.00 Ω; at least 1 MΩ"},
	{"film worn through", "365pF film insulation-resistance=3 capacitance-max=360pF", screening.Reject, "", "worn film, which cannot be mended"},
	{"open", "365pF insulation-resistance=OL capacitance-max=4pF", screening.Reject, "", "a lead, or the contact to the rotor"},
	{"milky film", "365pF film insulation-resistance=OL capacitance-max=360pF seen=milky", screening.Reject, "", "crackles"},
}

func TestVerdicts(t *testing.T) {
	seen := map[screening.Verdict]int{}
	for _, tt := range verdictCases {
		booktest.Case(t, Book(), seen, tt.name, tt.words, tt.verdict, tt.as, tt.says)
	}
	booktest.EveryVerdict(t, seen, screening.Treat)
}

// What is kept as measured is what it reads: judged by itself it is accepted.
func TestWhatIsKeptAsMeasuredPassesAsThat(t *testing.T) {
	for _, words := range []string{
		"insulation-resistance=OL capacitance-max=489pF capacitance-min=14pF",
		"365pF 3-gang insulation-resistance/1=OL insulation-resistance/2=OL insulation-resistance/3=OL capacitance-max/1=489pF capacitance-max/2=489pF capacitance-max/3=212pF",
	} {
		j := booktest.Judge(t, Book(), words, screening.DefaultPolicy())
		if j.RegradedAs == nil {
			t.Fatalf("%s: %s", words, j.Verdict)
		}
		part := booktest.Part(t, Book(), words)
		part.Claim = j.RegradedAs.Claim
		if again := booktest.JudgePart(t, Book(), part, screening.DefaultPolicy()); again.Verdict != screening.Accept {
			t.Errorf("%s as %q: %s\n%s", words, booktest.As(j), again.Verdict, booktest.Texts(again))
		}
	}
}

func TestPrintedRanges(t *testing.T) {
	for word, want := range map[string][2]float64{
		"10..365pF": {10e-12, 365e-12}, "10-365pF": {10e-12, 365e-12}, "10pF..365pF": {10e-12, 365e-12}, "2.5..7p": {2.5e-12, 7e-12},
		"0.01..0.365nF": {10e-12, 365e-12},
	} {
		low, high, ok := printedRange(word)
		if !ok || math.Abs(low/want[0]-1) > 1e-9 || math.Abs(high/want[1]-1) > 1e-9 {
			t.Errorf("%s is %v to %v, %v; want %v", word, low, high, ok, want)
		}
	}
	for _, word := range []string{"365pF", "365..10pF", "..365pF", "10..", "2-gang", "10..365V", "a..b", "-5pF"} {
		if low, high, ok := printedRange(word); ok {
			t.Errorf("%s is read as %v to %v", word, low, high)
		}
	}
}

func FuzzPrintedRange(f *testing.F) {
	for _, s := range []string{"10..365pF", "10-365p", "..", "-", "1..2..3pF"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		if low, high, ok := printedRange(s); ok && !(low < high && low >= 0) {
			t.Errorf("%q is %v to %v", s, low, high)
		}
	})
}

func TestClaimsThatCannotBe(t *testing.T) {
	for words, want := range map[string]string{
		"10..365uF": "no variable capacitor",
		"365nF":     "no variable capacitor",
		"3-gang rated:capacitance/1=365pF rated:capacitance/2=365pF": "3 are claimed, and values for 2",
	} {
		booktest.Refuses(t, Book(), words, want)
	}
}

// Bounds by hand: 365 pF ±10 % as made; ±20 % and 5 pF in use; a lowest of 10 pF may read 30 pF.
func TestBands(t *testing.T) {
	claim := booktest.Part(t, Book(), "10..365pF").Claim
	all, err := limits(claim)
	if err != nil || len(all) != 5 {
		t.Fatalf("%d limits, %v", len(all), err)
	}
	for i, want := range [][2]float64{{1e6, math.Inf(1)}, {328.5e-12, 401.5e-12}, {287e-12, 443e-12}, {math.Inf(-1), 15e-12}, {math.Inf(-1), 30e-12}} {
		if l := all[i]; !near(l.Low, want[0]) || !near(l.High, want[1]) {
			t.Errorf("%s: %v to %v, want %v", l.On, l.Low, l.High, want)
		}
	}
}

func near(a, b float64) bool { return a == b || math.Abs(a/b-1) < 1e-9 }

func TestEveryLimitHasARecipe(t *testing.T) {
	for _, words := range []string{"", "365pF", "10..365pF 3-gang", "rated:capacitance/1=10..365pF rated:capacitance/2=8..160pF"} {
		claim := booktest.Part(t, Book(), words).Claim
		all, err := limits(claim)
		if err != nil || len(all) == 0 {
			t.Fatalf("%s: %d limits, %v", words, len(all), err)
		}
		for _, l := range all {
			if found := recipes(screening.Part{Claim: claim}, l); len(found) != 1 || len(found[0].Lines) < 3 {
				t.Errorf("%q, %s: %v", words, l.On, found)
			}
		}
	}
}

func TestCleaningIsCautionedWherePlatesTouch(t *testing.T) {
	for words, want := range map[string]int{
		"365pF insulation-resistance=3": 1, "365pF insulation-resistance=OL": 0, "365pF film insulation-resistance=3": 0, "365pF insulation-resistance=3 treated=1": 0,
	} {
		if c := cautions(booktest.Part(t, Book(), words), screening.AtVerdict); len(c) != want || want > 0 && !strings.Contains(c[0].Text, "cadmium") {
			t.Errorf("%s: %+v", words, c)
		}
	}
}

// A meter, however poor, never rejects or renames a part that is exactly what it claims, as long as it keeps its specification.
func TestAPerfectPartIsNeverRejected(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		accuracy := rapid.Float64Range(0.001, 0.5).Draw(t, "accuracy")
		policy := screening.DefaultPolicy()
		policy.Meters = map[string]screening.Meter{"": {Name: "poor", ByUnit: map[quantity.Unit]screening.Accuracy{
			quantity.Ohm: {Relative: accuracy}, quantity.Farad: {Relative: accuracy},
		}}}
		off := func(name string) float64 { return 1 / (1 - accuracy*rapid.Float64Range(-1, 1).Draw(t, name)) }
		part := screening.Part{
			Claim: screening.Claim{}.WithRating(screening.RangeRating(screening.Capacitance, 10e-12, 365e-12)),
			Readings: []screening.Reading{
				{Of: screening.InsulationResistance.Name, Unit: quantity.Ohm, Value: 5e6 * off("ohms")},
				{Of: CapacitanceMax.Name, Unit: quantity.Farad, Value: 365e-12 * off("highest")},
				{Of: CapacitanceMin.Name, Unit: quantity.Farad, Value: 10e-12 * off("lowest")},
			},
		}
		j, err := screening.Judge(Book(), part, policy)
		if err != nil || j.Verdict == screening.Reject || j.Verdict == screening.Regrade {
			t.Fatalf("±%.3g: %v, %v\n%s", accuracy, j.Verdict, err, booktest.Texts(j))
		}
	})
}

func TestTableIsChecked(t *testing.T) {
	if _, err := readFigures("name,share,pf,source,status\nx,ten,1,y,house\n"); err == nil {
		t.Error("a figure that is no number is read")
	}
	for _, name := range []string{"max-within-spec", "max-serviceable", "min-within-spec", "min-serviceable", "insulation", "open-share"} {
		if _, ok := figures()[name]; !ok {
			t.Errorf("no figure %s", name)
		}
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(), "10..365pF air insulation-resistance=OL capacitance-max=372pF capacitance-min=13pF")
}
