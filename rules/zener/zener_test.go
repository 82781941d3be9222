package zener

import (
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

// judge judges a part from the words that a person types.
func judge(t testing.TB, words string, policy screening.Policy) screening.Judgement {
	t.Helper()
	return booktest.Judge(t, Book(types.Builtin()), words, policy)
}

var verdictCases = []struct {
	name, words string
	verdict     screening.Verdict
	says        string
	as          string // of RegradedAs; "" where there must be none
}{
	{"C5V1 at its test current", "BZX79-C5V1 vz@5mA=5.12", screening.Accept, "untested: power (rated 0.5 W)", ""},
	{"C5V1 at twice its test current", "BZX79-C5V1 vz@10mA=5.25", screening.Accept, "", ""},
	{"1N4733A at 49 mA", "1N4733A vz@49mA=5.09", screening.Accept, "", ""},
	{"too near its edge for the meter: kept at 10 %", "1N4733A vz@49mA=4.87", screening.Accept, "not provable with this meter", "±10 % proven"},
	{"outside its band by less than the meter can tell: no better meter would help", "BZX79-C5V1 vz@5mA=4.79", screening.Accept, "", "reads outside 4.8 V to 5.4 V; accepted at ±10 %"},
	{"its own voltage, tolerance and current", "5V6 10% izt=20mA vz@20mA=5.5", screening.Accept, "", ""},
	{"a nominal without a tolerance", "5V6 izt=20mA vz@20mA=5.5", screening.Accept, "taken as ±10 %", ""},
	{"a nominal without a tolerance, far off: confirm", "5V6 izt=20mA vz@20mA=8.2", screening.Undecided, "CONFIRM the figure", ""},

	{"unmarked", "vz@3mA=12.1", screening.Regrade, "assume the smallest", "unmarked, as measured, 12.1 V ±5 % at 3 mA; power unknown: assume the smallest for this body"},
	{"marked 5V1 and no test current known", "5V1 5% vz@8mA=5.20", screening.Regrade, "its voltage is printed is not known", "as measured, 5.2 V ±5 % at 8 mA"},
	{"taken far above the test current", "BZX79-C5V1 vz@20mA=5.60", screening.Regrade, "measure between 2.5 mA and 10 mA", "as measured, 5.6 V ±5 % at 20 mA"},
	{"taken far below it: a soft knee", "BZX79-C5V1 vz@0.5mA=4.20", screening.Regrade, "measure between 2.5 mA and 10 mA", "as measured, 4.2 V"},
	{"of a type that no table knows", "type=XZ-9 vz@5mA=9.1", screening.Regrade, "not in the table", "as measured, 9.1 V"},

	{"below its band", "BZX79-C5V1 vz@5mA=4.4", screening.Reject, "damaged or soft", ""},
	{"above its band", "BZX79-C5V1 vz@5mA=6.2", screening.Reject, "not what it says", ""},
	{"shorted", "BZX79-C5V1 vz@5mA=0.02", screening.Reject, "shorted", ""},
	{"less than its band even at four times the current", "BZX79-C5V1 vz@20mA=3.0", screening.Reject, "comes to at most 3.00 V", ""},
	{"more than its band even at a tenth of the current", "BZX79-C5V1 vz@0.5mA=6.0", screening.Reject, "comes to at least 6.00 V", ""},
	{"leaks at 2 V", "BZX79-C5V1 vz@5mA=5.12 ir@1V=50uA temperature=23C", screening.Reject, "reverse current", ""},

	{"nothing measured", "BZX79-C5V1", screening.Undecided, "MEASURE Zener voltage at 5 mA", ""},
	{"unmarked and not measured", "", screening.Undecided, "MEASURE Zener voltage", ""},
	{"the current of the reading is missing", "BZX79-C5V1 vz=5.12", screening.Undecided, "STATE the current of the reading: Zener voltage", ""},
	{"unmarked, current missing", "vz=5.12", screening.Undecided, "STATE the current of the reading: Zener voltage", ""},
	{"unmarked and shorted", "vz@5mA=0.01", screening.Undecided, "nothing is claimed", ""},
	{"a copied row may not reject", "BZX55-C18 vz@5mA=16.00", screening.Undecided, "CONFIRM the figure", ""},

	{"cracked", "BZX79-C5V1 vz@5mA=5.12 seen=cracked", screening.Barred, "cracked", ""},
}

func TestVerdicts(t *testing.T) {
	seen := map[screening.Verdict]int{}
	for _, tt := range verdictCases {
		t.Run(tt.name, func(t *testing.T) {
			j := judge(t, tt.words, screening.DefaultPolicy())
			seen[j.Verdict]++
			if j.Verdict != tt.verdict {
				t.Errorf("%s: %s, want %s\n%s", tt.words, j.Verdict, tt.verdict, booktest.Texts(j))
			}
			if !strings.Contains(booktest.Texts(j), tt.says) {
				t.Errorf("%s: nothing says %q:\n%s", tt.words, tt.says, booktest.Texts(j))
			}
			if booktest.NotSoAs(j, tt.as) {
				t.Errorf("%s: as %q, want %q", tt.words, booktest.As(j), tt.as)
			}
		})
	}
	// There is no treatment for a Zener.
	booktest.EveryVerdict(t, seen, screening.Treat)
}

// 20 mV is no junction's drop; only between 0.1 V and 1 V can it be a Zener turned round.
func TestWhatALowReadingLooksLike(t *testing.T) {
	for words, want := range map[string]string{
		"BZX79-C5V1 vz@5mA=20mV": "note: shorted\n", "BZX79-C5V1 vz@5mA=0.72": "note: turned round, or damaged", "BZX79-C5V1 vz@5mA=4.4": "note: below its band",
	} {
		said := booktest.Texts(judge(t, words, screening.DefaultPolicy()))
		if !strings.Contains(said, want) || strings.Contains(said, "silicon diode") != strings.Contains(want, "turned round") {
			t.Errorf("%s: want %q:\n%s", words, want, said)
		}
	}
}

// A formula says "printed" only of bounds that a sheet prints and no tolerance gives.
func TestFormulasSayWhereTheBandComesFrom(t *testing.T) {
	for typ, want := range map[string]string{
		"BZX79-C5V1": "BZX79-C5V1 is printed as 4.8 V to 5.4 V", "1N4748A": "1N4748A: 22 V ±5 % = 20.9 V to 23.1 V",
		"1N4733": "1N4733: 5.1 V ±10 % = 4.59 V to 5.61 V", "BZX79-C2V4": "BZX79-C2V4 is printed as 2.2 V to 2.6 V", "1N4740D": "1N4740D: 10 V ±1 % = 9.9 V to 10.1 V",
	} {
		c, _, err := builtin.complete(screening.Claim{}.WithTrait(screening.TraitType, typ))
		if l := voltageLimit(c); err != nil || l.FormulaText() != want {
			t.Errorf("%s: %q, %v; want %q", typ, l.FormulaText(), err, want)
		}
	}
}

// What was wanted and not measured stands among the gaps and not again in the rulebook's own words; nor is a reason given twice.
func TestNothingIsSaidTwice(t *testing.T) {
	j := judge(t, "BZX79-C5V1 vz@5mA=5.08", screening.DefaultPolicy())
	if slope := slices.ContainsFunc(j.NotTested, func(g screening.Gap) bool { return g.Of == ZZ.Name }); !slope || len(j.Untested) != 1 {
		t.Errorf("not tested %+v, untested %q", j.NotTested, j.Untested)
	}
	said := booktest.Texts(judge(t, "vz@5mA=8.24", screening.DefaultPolicy()))
	if strings.Count(said, "nothing is claimed") != 1 {
		t.Errorf("an unmarked one:\n%s", said)
	}
}

// Check case 45: BZX79-C5V1 reading 4.79, 4.80, 5.40 and 5.41 V at 5 mA fails, passes, passes, fails (table: published).
func TestC5V1AtItsBounds(t *testing.T) {
	for reading, want := range map[string]screening.Verdict{
		"4.79": screening.Reject, "4.80": screening.Accept, "5.40": screening.Accept, "5.41": screening.Reject,
	} {
		if j := judge(t, "BZX79-C5V1 vz@5mA="+reading, booktest.Exactly()); j.Verdict != want {
			t.Errorf("%s V: %s, want %s\n%s", reading, j.Verdict, want, booktest.Texts(j))
		}
	}
}

// Every row of the published list: both bounds pass, a millivolt outside fails; slope and leakage pass at their maximum and fail above.
func TestEveryTypeAtItsBounds(t *testing.T) {
	for _, ref := range booktest.Reference(t, "../types/testdata/zener-ref.csv", 37+37) {
		name := ref["type"]
		number := func(column string) float64 { return booktest.Number(t, ref[column], math.NaN()) }
		izt := screening.At(screening.Current, number("izt_ma")*1e-3)
		low, high := number("vz_min"), number("vz_max")
		for _, tt := range []struct {
			of    screening.Definition
			at    screening.Condition
			value float64
			want  screening.Outcome
		}{
			{VZ, izt, low, screening.Pass},
			{VZ, izt, low - 0.001, screening.Fail},
			{VZ, izt, high, screening.Pass},
			{VZ, izt, high + 0.001, screening.Fail},
			{ZZ, izt, number("zzt_max_ohm"), screening.Pass},
			{ZZ, izt, number("zzt_max_ohm") * 1.001, screening.Fail},
			{screening.IR, screening.At(screening.Voltage, number("vr_v")).With(screening.PartTemperature, 25), number("ir_max_ua") * 1e-6, screening.Pass},
			{screening.IR, screening.At(screening.Voltage, number("vr_v")).With(screening.PartTemperature, 25), number("ir_max_ua") * 1.001e-6, screening.Fail},
		} {
			if tt.of == screening.IR && math.IsNaN(number("vr_v")) {
				continue // the voltage of that leakage was not kept
			}
			j, err := screening.Judge(Book(types.Builtin()), screening.Part{
				Claim:    screening.Claim{}.WithTrait(screening.TraitType, name),
				Readings: []screening.Reading{{Of: tt.of.Name, Unit: tt.of.Unit, Value: tt.value, At: tt.at}},
			}, booktest.Exactly())
			if err != nil {
				t.Fatal(err)
			}
			i := slices.IndexFunc(j.Findings, func(f screening.Finding) bool { return f.Limit.On == tt.of.Name })
			if i < 0 || j.Findings[i].Outcome != tt.want || j.Findings[i].Limit.Source.Status != screening.Published {
				t.Errorf("%s: %s %v at %s: want %s, %+v", name, tt.of.Name, tt.value, tt.at, tt.want, j.Findings)
			}
		}
	}
}

// VZ(IZT) = VZ(I) + r·(IZT−I), 0 ≤ r ≤ rmax: of BZX79-C5V1 (60 Ω at 5 mA) at 10 mA the whole is 0.3 V, so −0.15 V ± 0.15 V rectangular,
// u = 0.0866 V; at 2.5 mA rmax·IZT·ln 2 = 0.2079 V, so +0.104 V, u = 0.0600 V (GUM, JCGM 100 4.3.7; derived from the published 60 Ω).
func TestCorrectionToTheTestCurrent(t *testing.T) {
	completed, _, err := builtin.complete(screening.Claim{}.WithTrait(screening.TraitType, "BZX79-C5V1"))
	if err != nil {
		t.Fatal(err)
	}
	for _, tt := range []struct {
		current, value, u float64
		sense             quantity.Sense
	}{
		{10e-3, 5.05, 0.0866, quantity.Exactly},
		{7.5e-3, 5.125, 0.0433, quantity.Exactly},
		{2.5e-3, 5.304, 0.0600, quantity.Exactly},
		{10.1e-3, 5.2, 0, quantity.AtMost},
		{2.4e-3, 5.2, 0, quantity.AtLeast},
	} {
		r := screening.Reading{Of: VZ.Name, Unit: quantity.Volt, Value: 5.2, At: screening.At(screening.Current, tt.current)}
		c := convert(screening.Part{Claim: completed}, r, voltageLimit(completed))
		if !c.OK || math.Abs(c.Reading.Value-tt.value) > 5e-4 || math.Abs(c.U-tt.u) > 5e-5 || c.Reading.Sense != tt.sense || c.Rule == "" {
			t.Errorf("at %v A: %v ± %v %v %q", tt.current, c.Reading.Value, c.U, c.Reading.Sense, c.Rule)
		}
		if c.Source.Status == screening.Published {
			t.Errorf("at %v A: the rule is %s", tt.current, c.Source)
		}
	}
}

// The correction's range holds whatever slope a real junction has: of a slope that falls with current as 1/I, and of a constant one.
func TestTheCorrectionContainsTheTruth(t *testing.T) {
	completed, _, _ := builtin.complete(screening.Claim{}.WithTrait(screening.TraitType, "BZX79-C5V1"))
	limit := voltageLimit(completed)
	const izt, rmax = 5e-3, 60.0
	rapid.Check(t, func(t *rapid.T) {
		r := rapid.Float64Range(0, rmax).Draw(t, "slope")
		i := rapid.Float64Range(izt/2, 2*izt).Draw(t, "current")
		atIZT := 5.1
		seen := atIZT + r*(i-izt)
		if rapid.Bool().Draw(t, "falling slope") {
			seen = atIZT + r*izt*math.Log(i/izt)
		}
		c := convert(screening.Part{Claim: completed}, screening.Reading{Of: VZ.Name, Value: seen, At: screening.At(screening.Current, i)}, limit)
		if off := math.Abs(c.Reading.Value - atIZT); off > c.U*math.Sqrt(3)+1e-9 {
			t.Fatalf("slope %v Ω at %v A: off by %v V, half-width %v V", r, i, off, c.U*math.Sqrt(3))
		}
	})
}

func TestTolerances(t *testing.T) {
	for letter, meanings := range map[string]int{"A": 2, "C": 2, "D": 2, "B": 0, "E": 0, "F": 0, "J": 0} {
		_, _, ok := toleranceLetter(letter)
		if got := toleranceMeanings(letter); len(got) != meanings || ok != (meanings == 0) {
			t.Errorf("%s: %v, %v", letter, got, ok)
		}
	}
	if _, err := entry.Words(Book(types.Builtin()), []string{"5V1", "C"}); err == nil || !strings.Contains(err.Error(), "±2 %") || !strings.Contains(err.Error(), "±5 %") {
		t.Errorf("a bare C: %v", err)
	}
	for words, want := range map[string][2]float64{
		"5V1 5% izt=5mA":               {4.845, 5.355},
		"5V1 B izt=5mA":                {4.998, 5.202},
		"BZX79-C5V1":                   {4.8, 5.4},
		"BZX79-C5V1 5V1":               {4.8, 5.4},
		"BZX79-C5V1 2%":                {4.998, 5.202},
		"1N4733":                       {4.59, 5.61},
		"1N4733A":                      {4.845, 5.355},
		"1N4733C":                      {4.998, 5.202},
		"rated:vz=4.9V..5.3V izt=5mA":  {4.9, 5.3},
		"6V2 +10-5% izt=5mA":           {5.89, 6.82},
		"BZX55-C2V4":                   {2.28, 2.56},
		"BZX79-C13":                    {12.4, 14.1},
		"BZX79-C27 rated:ptot=400mW":   {25.1, 28.9},
		"type=1N4728A case=DO-41":      {3.135, 3.465},
		"type=1N4764A dated=1985":      {95, 105},
		"rated:vz=10 10% izt=20mA":     {9, 11},
		"rated:vz=10V J rated:izt=5mA": {9.5, 10.5},
	} {
		p, err := entry.Words(Book(types.Builtin()), strings.Fields(words))
		if err != nil {
			t.Errorf("%s: %v", words, err)
			continue
		}
		completed, _, err := builtin.complete(p.Claim)
		if err != nil {
			t.Errorf("%s: %v", words, err)
			continue
		}
		l := voltageLimit(completed)
		if math.Abs(l.Low-want[0]) > 1e-9 || math.Abs(l.High-want[1]) > 1e-9 || l.Formula == nil || l.FormulaText() == "" {
			t.Errorf("%s: %v to %v, want %v; %q", words, l.Low, l.High, want, l.Note)
		}
	}
}

func TestClaimsThatContradictThemselves(t *testing.T) {
	for words, want := range map[string]string{
		"BZX79-C5V1 5V6":        "5.6 V is claimed, but BZX79-C5V1 is",
		"rated:vz=0 izt=5mA":    "above zero",
		"5V1 izt=0":             "above zero",
		"5V1 rated:ptot=0":      "above zero",
		"5V1 rated:tolerance=C": "",
	} {
		p, err := entry.Words(Book(types.Builtin()), strings.Fields(words))
		if err == nil {
			_, err = screening.Judge(Book(types.Builtin()), screening.Part{Claim: p.Claim}, screening.DefaultPolicy())
		}
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", words, err, want)
		}
	}
}

func TestCompleteIsIdempotent(t *testing.T) {
	for _, name := range types.Builtin().Names(Kind) {
		for _, extra := range []string{"", "tolerance", "voltage"} {
			c := screening.Claim{}.WithTrait(screening.TraitType, name)
			row, _ := types.Builtin().Lookup(Kind, name)
			vz, _ := row.Rating(VZ.Name)
			switch extra {
			case "tolerance":
				c = c.WithRating(screening.RangeRating(screening.Tolerance, -0.02, 0.02))
			case "voltage":
				c = c.WithRating(screening.NominalRating(VZ, vz.Nominal))
			}
			once, _, err := builtin.complete(c)
			twice, _, err2 := builtin.complete(once)
			a, b := voltageLimit(once), voltageLimit(twice)
			if err != nil || err2 != nil || len(once.Ratings) != len(twice.Ratings) || a.Low != b.Low || a.High != b.High || a.At != b.At {
				t.Errorf("%s %s: %v, %v; %v..%v then %v..%v", name, extra, err, err2, a.Low, a.High, b.Low, b.High)
			}
		}
	}
}

// However poor the meter, a Zener that reads inside its band at its test current is never rejected.
func TestASoundZenerIsNeverRejected(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c, _, _ := builtin.complete(screening.Claim{}.WithTrait(screening.TraitType, rapid.SampledFrom(types.Builtin().Names(Kind)).Draw(t, "type")))
		l := voltageLimit(c)
		policy := screening.DefaultPolicy()
		accuracy := screening.Accuracy{Relative: rapid.Float64Range(0, 0.5).Draw(t, "accuracy")}
		policy.Meters = map[string]screening.Meter{"": {ByUnit: map[quantity.Unit]screening.Accuracy{quantity.Volt: accuracy}}}
		j, err := screening.Judge(Book(types.Builtin()), screening.Part{Claim: c, Readings: []screening.Reading{
			{Of: VZ.Name, Unit: quantity.Volt, Value: rapid.Float64Range(l.Low, l.High).Draw(t, "vz"), At: l.At},
		}}, policy)
		if err != nil || j.Verdict == screening.Reject || j.Verdict == screening.Regrade {
			t.Fatalf("%s, %v\n%s", j.Verdict, err, booktest.Texts(j))
		}
	})
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(types.Builtin()), "BZX79-C5V1 vz@7mA=5.15")
}
