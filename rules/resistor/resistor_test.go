package resistor

import (
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/internal/series"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

// judge judges a part from the words that a person types.
func judge(t testing.TB, words string, policy screening.Policy) screening.Judgement {
	t.Helper()
	return booktest.Judge(t, Book(), words, policy)
}

var verdictCases = []struct {
	name, words string
	verdict     screening.Verdict
	says        string
	as          string // of RegradedAs; "" where there must be none
}{
	{"a good 5 % film part", "4k7 5% metal-film resistance=4.68k", screening.Accept, "new part", ""},
	{"10 Ω at 1 % is more than two wires can prove", "10R 1% metal-film resistance=10.05", screening.Accept, "not provable with this meter (needs ±", "±5 % proven; ±1 %"},
	{"close to 5 %: kept at 10 %", "4k7 5% resistance=4.91k", screening.Accept, "", "±10 % proven; ±5 % not provable"},
	{"outside 10 % by less than the meter can tell", "220k 10% cc resistance=243k", screening.Accept, "", "reads outside ±10 %; accepted at ±20 %"},
	// The meter may be off by 2.444 kΩ there, which is 1.73 standard uncertainties; the reading lies 1.69 of them above 242 kΩ.
	{"outside by less than the meter may be off: nothing to dry", "220k 10% cc resistance=244.38k", screening.Accept, "", "accepted at ±20 %"},
	{"film 9 % high has drifted: never closer than ±5 %", "4k7 5% carbon-film resistance=5.14k", screening.Regrade, "", "as measured, 5.14 kΩ ±5 %"},
	{"even where the meter proves more", "10k 1% metal-film resistance=10.9k", screening.Regrade, "", "as measured, 10.9 kΩ ±5 %"},
	{"film 7 % high is kept as measured", "4k7 5% metal-film resistance=5.03k", screening.Regrade, "fails", "as measured, 5.03 kΩ ±5 %"},
	{"unknown technology 7 % high: told of drying", "4k7 5% resistance=5.03k", screening.Regrade, "if it is carbon composition, dry it", "as measured, 5.03 kΩ"},
	{"low composition is kept at a wider tolerance", "4k7 5% cc resistance=4.3k", screening.Regrade, "out of circuit", "±10 %: it reads 4.3 kΩ, −8.5 %"},
	{"low composition beyond 20 % as measured", "1k 5% cc resistance=760", screening.Regrade, "", "as measured, 760 Ω ±10 %"},
	{"composition 12 % high is dried first", "4k7 5% cc resistance=5.26k", screening.Treat, "drying out in use may drop it", "±20 %"},
	{"dried before and still high: a failure", "4k7 5% cc resistance=5.26k treated=1", screening.Regrade, "MIL-R-39008C 6.9", "±20 %"},
	{"composition 60 % high is beyond drying", "4k7 5% cc resistance=7.5k", screening.Reject, "too high to be moisture alone", ""},
	{"composition open", "4k7 5% cc resistance=OL", screening.Reject, "reads open", ""},
	{"film open", "4k7 5% metal-film resistance=OL", screening.Reject, "reads open", ""},
	{"film 30 % off", "4k7 5% metal-film resistance=6.1k", screening.Reject, "fails", ""},
	{"a short", "4k7 5% resistance=0.3", screening.Reject, "fails", ""},
	{"no reading", "4k7 5%", screening.Undecided, "MEASURE resistance", ""},
	{"OL says nothing of 4.7 MΩ", "4M7 5% resistance=OL", screening.Undecided, "only bounds", ""},
	{"film with no tolerance printed: 5 % is from memory and cannot fail it", "4k7 metal-film resistance=5.1k", screening.Accept, "from memory", "±10 % proven; ±5 % is only taken for granted"},
	{"film with no tolerance, 40 % off: confirm", "4k7 metal-film resistance=6.6k", screening.Undecided, "CONFIRM the figure", ""},
	{"no tolerance and no technology: 20 %, as no band means", "4k7 resistance=5.4k", screening.Accept, "no tolerance band is ±20 %", ""},
	{"carbon composition without a band, 25 % low", "4k7 cc resistance=3.5k", screening.Regrade, "", "as measured, 3.5"},
	{"across the mains", "4k7 5% resistance=4.7k seen=mains", screening.Barred, "across the mains", ""},
	{"cracked", "4k7 5% resistance=4.7k seen=cracked", screening.Barred, "cracked", ""},
	{"charred", "4k7 5% resistance=4.7k seen=burnt", screening.Reject, "overheated", ""},
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
			// A part that is thrown away has nothing left to test.
			told := len(j.Untested) == 1 && strings.Contains(j.Untested[0], "rated power")
			if thrown := tt.verdict == screening.Reject || tt.verdict == screening.Barred; told == thrown || thrown && len(j.Untested) > 0 {
				t.Errorf("%s: untested %q", tt.words, j.Untested)
			}
			drying := slices.ContainsFunc(j.Cautions, func(c screening.Caution) bool { return c.Code == "drying" })
			if drying != (tt.verdict == screening.Treat) {
				t.Errorf("%s: %s, told how to dry it: %v", tt.words, j.Verdict, drying)
			}
		})
	}
	booktest.EveryVerdict(t, seen)
}

// Tolerance bands with an exact meter: the claim's own figures.
func TestBandsIncludeTheirEdges(t *testing.T) {
	for _, tt := range []struct {
		words string
		pass  bool
	}{
		{"4k7 5% resistance=4.465k", true},
		{"4k7 5% resistance=4.464k", false},
		{"4k7 5% resistance=4.935k", true},
		{"4k7 5% resistance=4.936k", false},
		{"100R J resistance=105", true},
		{"100R G resistance=102.1", false},
		{"100R K resistance=110", true},
		{"100R M resistance=80", true},
		{"100R M resistance=79.9", false},
		{"rated:resistance=90..110 resistance=111", false},
		{"rated:resistance=90..110 resistance=110", true},
	} {
		j := judge(t, tt.words, booktest.Exactly())
		want := screening.Pass
		if !tt.pass {
			want = screening.Fail
		}
		if got := j.Findings[0].Outcome; got != want {
			t.Errorf("%s: %s, want %s", tt.words, got, want)
		}
	}
}

// Letter-and-digit values of IEC 60062 and GOST IEC 60062-2014 (published); k10, M10 and K15 are European and Soviet print (Grieder, shemu.ru).
func TestPrintedValues(t *testing.T) {
	for text, want := range map[string]float64{
		"R47": 0.47, "4R7": 4.7, "470R": 470, "4K7": 4700, "47K3": 47300, "4M7": 4.7e6, "15M0": 15e6, "k10": 100, "M10": 100e3, "K15": 150,
	} {
		v, err := quantity.Parse(text, quantity.Ohm)
		if err != nil || math.Abs(v.Number/want-1) > 1e-12 {
			t.Errorf("%s is %v (%v), want %v Ω", text, v.Number, err, want)
		}
	}
}

func TestClaimsThatCannotBe(t *testing.T) {
	for claim, want := range map[string]string{
		"rated:resistance=0":               "no tolerance band",
		"4k7 rated:tolerance=-150%..-100%": "no tolerance of a resistor",
	} {
		p, err := entry.Words(Book(), strings.Fields(claim))
		if err != nil {
			continue // refused even earlier
		}
		if _, err := screening.Judge(Book(), screening.Part{Claim: p.Claim}, screening.DefaultPolicy()); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%s: %v, want %q", claim, err, want)
		}
	}
	odd := screening.Claim{}.WithRating(screening.NominalRating(screening.Resistance, 100)).WithTrait(screening.TraitTechnology, "wood")
	if _, _, err := complete(odd); err == nil || !strings.Contains(err.Error(), `"wood" is not known; one of carbon-composition`) {
		t.Errorf("wood: %v", err)
	}
}

func TestCompleteIsIdempotent(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := screening.Claim{}.WithRating(screening.NominalRating(screening.Resistance, rapid.Float64Range(0.01, 1e8).Draw(t, "ohms")))
		if rapid.Bool().Draw(t, "tolerance") {
			x := rapid.SampledFrom(ladder).Draw(t, "percent")
			c = c.WithRating(screening.RangeRating(screening.Tolerance, -x, x))
		}
		names := []string{""}
		for _, tech := range load().technologies {
			names = append(names, tech.name)
		}
		c = c.WithTrait(screening.TraitTechnology, rapid.SampledFrom(names).Draw(t, "technology"))
		once, _, err := complete(c)
		twice, _, err2 := complete(once)
		if err != nil || err2 != nil || len(once.Ratings) != len(twice.Ratings) || !slices.Equal(once.Traits, twice.Traits) {
			t.Fatalf("%v, %v: %v then %v", err, err2, once, twice)
		}
		for i := range once.Ratings {
			if once.Ratings[i].String() != twice.Ratings[i].String() {
				t.Fatalf("%v then %v", once.Ratings[i], twice.Ratings[i])
			}
		}
	})
}

// A meter, however poor, never rejects a part that is exactly what it claims, as long as it keeps its specification.
func TestAPerfectPartIsNeverRejected(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		nominal := series.Value(24, rapid.IntRange(0, 23).Draw(t, "value")) * math.Pow10(rapid.IntRange(0, 6).Draw(t, "decade"))
		accuracy := rapid.Float64Range(0.001, 0.5).Draw(t, "accuracy")
		meter := screening.Meter{Name: "poor", ByUnit: map[quantity.Unit]screening.Accuracy{quantity.Ohm: {Relative: accuracy}}}
		policy := screening.DefaultPolicy()
		policy.Meters = map[string]screening.Meter{"": meter}
		off := rapid.Float64Range(-1, 1).Draw(t, "error")
		part := screening.Part{
			Claim: screening.Claim{}.WithRating(screening.NominalRating(screening.Resistance, nominal)).
				WithRating(screening.RangeRating(screening.Tolerance, -0.01, 0.01)),
			Readings: []screening.Reading{{Of: screening.Resistance.Name, Unit: quantity.Ohm, Value: nominal / (1 - accuracy*off)}},
		}
		j, err := screening.Judge(Book(), part, policy)
		if err != nil || j.Verdict == screening.Reject {
			t.Fatalf("%v Ω with ±%.3g: %v, %v\n%s", nominal, accuracy, j.Verdict, err, booktest.Texts(j))
		}
	})
}

func BenchmarkJudge(b *testing.B) {
	for verdict, words := range map[string]string{
		"accept": "4k7 5% metal-film resistance=4.68k", "regrade": "4k7 5% metal-film resistance=5.03k",
	} {
		b.Run(verdict, func(b *testing.B) { booktest.Benchmark(b, Book(), words) })
	}
}

// What a resistor is made of is asked for where it decides between drying and keeping it as measured, and only there.
func TestTechnologyIsAskedWhereItDecides(t *testing.T) {
	for _, c := range []struct {
		name, words string
		asked       bool
	}{
		{"inside its band", "4k7 5% resistance=4.7k seen=nothing", false},
		{"11 % high, technology not said", "4k7 5% resistance=5.2k seen=nothing", true},
		{"11 % high, said to be film", "4k7 5% metal-film resistance=5.2k seen=nothing", false},
		{"11 % high, said to be unknown", "4k7 5% technology=unknown resistance=5.2k seen=nothing", false},
		{"11 % low", "4k7 5% resistance=4.18k seen=nothing", false},
		{"open", "4k7 5% resistance=OL seen=nothing", false},
	} {
		t.Run(c.name, func(t *testing.T) {
			w := screening.NewWalk(Book(), screening.DefaultPolicy(), booktest.Part(t, Book(), c.words))
			q := w.Next()
			if asked := q.Ask == screening.AskClaim && string(q.Field.Name) == screening.TraitTechnology; asked != c.asked {
				t.Errorf("asked %v: %+v", asked, q.Field.Name)
			}
		})
	}
}
