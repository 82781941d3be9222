package potentiometer

import (
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

func completed(t *testing.T, words string) screening.Claim {
	t.Helper()
	c, _, err := complete(booktest.Part(t, Book(), words).Claim)
	if err != nil {
		t.Fatalf("%s: %v", words, err)
	}
	return c
}

func highest(t *testing.T, words string, on screening.Characteristic, grade screening.Grade) screening.Limit {
	t.Helper()
	all, err := limits(completed(t, words))
	if err != nil {
		t.Fatal(err)
	}
	i := slices.IndexFunc(all, func(l screening.Limit) bool { return l.On == on && l.Grade == grade })
	if i < 0 {
		t.Fatalf("%s: no limit on %s at %s", words, on, grade)
	}
	return all[i]
}

func TestEndsAndWiper(t *testing.T) {
	for _, tt := range []struct {
		name, words string
		on          screening.Characteristic
		ohms        float64
		status      screening.Status
	}{
		{"MIL-PRF-39035: 10 kΩ ends within 200 Ω", "10k cermet", "end-ccw", 200, screening.Published},
		{"MIL-PRF-39035: 50 Ω ends within 2 Ω", "rated:resistance=50ohm cermet", "end-cw", 2, screening.Published},
		{"MIL-R-39002/1: wirewound 10 kΩ ends within 3 %", "10k wirewound", "end-ccw", 300, screening.Published},
		{"MIL-R-39002/1: wirewound 20 Ω ends within 1 Ω", "20R wirewound", "end-ccw", 1, screening.Published},
		{"carbon has no figure of its own", "10k carbon", "end-ccw", 300, screening.Derived},
		{"MIL-PRF-39035, C: 10 kΩ varies by 3 %", "10k cermet", "crv", 300, screening.Published},
		{"MIL-PRF-39035, C: 100 Ω varies by 20 Ω", "100R cermet", "crv", 20, screening.Published},
		{"a trimmer of 10 kΩ varies by 1 %", "10k cermet trimmer", "crv", 100, screening.FromMemory},
		{"a trimmer of 100 Ω varies by 3 Ω", "100R cermet trimmer", "crv", 3, screening.FromMemory},
	} {
		l := highest(t, tt.words, tt.on, screening.WithinSpec)
		if math.Abs(l.High/tt.ohms-1) > 1e-12 || l.Source.Status != tt.status {
			t.Errorf("%s: %v (%s), want %v (%s)", tt.name, l.High, l.Source, tt.ohms, tt.status)
		}
	}
}

var verdictCases = []struct {
	name, words string
	verdict     screening.Verdict
	as, says    string
}{
	{"sound, by an ohmmeter", "10k linear resistance=9.8k crv=20 midpoint=4.8k", screening.Accept, "", "what is asked of a new part"},
	{"no taper claimed: it is told", "10k resistance=9.8k crv=20 midpoint=1.5k", screening.Accept, "", "its taper reads log: 15 %"},
	{"28 % high: inside its band and its life", "10k resistance=12.7k crv=20", screening.Accept, "", "every required reading"},
	{"a trimmer that moves more than a new one", "10k cermet trimmer resistance=10k crv=250", screening.Accept, "", "every required reading"},
	{"39 % high", "10k resistance=13.9k crv=10", screening.Regrade, "as measured, 13.9 kΩ", "fails"},
	{"log by its print, linear by its middle", "10k log resistance=9.8k crv=20 midpoint=4.8k", screening.Regrade, "linear taper, as it reads: 49 %", "fails"},
	{"log, measured from the other end", "10k log resistance=10k crv=0 midpoint=8.6k", screening.Regrade, "from the other end", "fails"},
	{"like no named taper", "10k linear resistance=10k crv=0 midpoint=3k", screening.Regrade, "a taper of its own", "like none of"},
	{"value and taper both off", "10k log resistance=13.9k crv=0 midpoint=7k", screening.Regrade, "as measured, 13.9 kΩ; linear", "fails"},
	{
		"one section of two is off", "10k dual resistance/1=10k resistance/2=14k crv/1=0 crv/2=1", screening.Regrade,
		"as measured, 14 kΩ, section 2", "section 2 reads 14.0 kΩ",
	},
	{
		"sections measured that nobody claimed", "10k resistance/1=10k resistance/2=14k crv/1=0 crv/2=1", screening.Regrade,
		"as measured, 14 kΩ, section 2", "section 2 reads 14.0 kΩ",
	},
	{"a switch that never closes", "50k switched resistance=48k crv=10 switch-closed=OL switch-open=OL treated=1", screening.Regrade, "without its switch", "low voltages only"},
	{"wiper not turned", "10k resistance=9.8k", screening.Undecided, "", "MEASURE contact resistance variation"},
	{"a section not measured", "10k dual resistance/1=10k crv/1=0", screening.Undecided, "", "MEASURE resistance of section 2"},
	{"the wiper opens: dirt first", "10k resistance=9.8k crv=OL", screening.Undecided, "", "it read open, and dirt does that too"},
	{"an end that does not come down: dirt first", "10k resistance=9.8k crv=0 end-ccw=900", screening.Undecided, "", "clean it"},
	{"midpoint without the whole", "10k linear crv=0 midpoint=4.8k", screening.Undecided, "", "MEASURE resistance"},
	{"the mains", "500k log switched resistance=480k seen=mains", screening.Barred, "", "no reading shows"},
	{"still jumps after cleaning", "10k resistance=9.8k crv=900 treated=1", screening.Reject, "", "reads 900 Ω; at most 500 Ω"},
	{"an end that does not come down after cleaning", "10k resistance=9.8k crv=0 end-ccw=900 treated=1", screening.Reject, "", "reads 900 Ω; at most 500 Ω"},
	{"open track", "10k resistance=OL crv=OL", screening.Reject, "", "the track reads open"},
	{"reads three times its value", "10k resistance=31k crv=0", screening.Reject, "", "7 kΩ to 13 kΩ"},
	{"a burnt track", "10k resistance=10k crv=0 seen=burnt", screening.Reject, "", "overheated"},
}

func TestVerdicts(t *testing.T) {
	seen := map[screening.Verdict]int{}
	for _, tt := range verdictCases {
		booktest.Case(t, Book(), seen, tt.name, tt.words, tt.verdict, tt.as, tt.says)
	}
	booktest.EveryVerdict(t, seen, screening.Treat)
}

// The taper guide: linear near 50 %, log 10, 15 or 20 % in the middle; MIL-PRF-94: points within ±20 % of the curve.
func TestTaperBandsIncludeTheirEdges(t *testing.T) {
	for share, want := range map[float64]string{
		0.50: "linear", 0.40: "linear", 0.60: "linear", 0.10: "log", 0.15: "log", 0.20: "log", 0.08: "log", 0.24: "log",
		0.85: "reverse-log", 0.80: "reverse-log", 0.90: "reverse-log", 0.30: otherTaper, 0.70: otherTaper, 0.05: otherTaper,
	} {
		if got := nearestTaper(share); got != want {
			t.Errorf("%v: %s, want %s", share, got, want)
		}
	}
}

// Letters mean different tapers in different countries (taper guide, published): each is refused with all it may mean.
func TestTaperLettersAreRefusedWithTheirMeanings(t *testing.T) {
	for word, want := range map[string][]string{
		"A": {"log (US and Asian", "type linear"}, "B": {"linear (US and Asian", "type log"}, "F": {"reverse log", "±1 %"},
		"B10K": {"type 10k linear", "type 10k log"}, "500KA": {"type 500k log", "type 500k linear"}, "C1M": {"type 1M reverse-log"},
		"A500": {"type 500R log"}, "taper=B": {"could mean linear (US", "leave the taper out"}, "taper=wobbly": {"not known; one of linear"},
	} {
		p, err := entry.Words(Book(), []string{"100k", word})
		if err == nil {
			_, err = screening.Judge(Book(), screening.Part{Claim: p.Claim}, screening.DefaultPolicy())
		}
		for _, w := range want {
			if err == nil || !strings.Contains(err.Error(), w) {
				t.Errorf("%s: %v; want %q", word, err, w)
			}
		}
	}
	for _, meaning := range printedMeanings("B10K") {
		_, typed, _ := strings.Cut(meaning, ": type ")
		if _, err := entry.Words(Book(), strings.Fields(typed)); err != nil {
			t.Errorf("what is to be typed for B10K, %q: %v", typed, err)
		}
	}
}

func TestClaimsThatCannotBe(t *testing.T) {
	for words, want := range map[string]string{
		"rated:resistance=0":                                 "ohms above zero",
		"10k rated:tolerance=-150%..-100%":                   "no tolerance of a potentiometer",
		"3-gang rated:resistance/1=1k rated:resistance/2=1k": "3 are claimed, and values for 2",
	} {
		booktest.Refuses(t, Book(), words, want)
	}
}

func TestEveryLimitHasARecipe(t *testing.T) {
	for _, words := range []string{"10k", "10k linear switched dual", "rated:resistance=1k..2k trimmer", "rated:resistance/1=10k rated:resistance/2=47k"} {
		c := completed(t, words)
		all, err := limits(c)
		if err != nil || len(all) == 0 {
			t.Fatalf("%s: %d limits, %v", words, len(all), err)
		}
		for _, l := range all {
			if found := Book().Recipes(screening.Part{Claim: c}, l); len(found) != 1 || len(found[0].Lines) < 3 {
				t.Errorf("%s: %s has the recipe %v", words, l.On, found)
			}
		}
	}
}

// I = √(P/R): half a watt over 10 kΩ is 7.07 mA through the wiper (MIL-R-39002: power falls with the part of the track in use).
func TestPowerOfPartOfTheTrack(t *testing.T) {
	c := Book().Cautions(screening.Part{Claim: completed(t, "10k 0.5W")}, screening.AtVerdict)
	if len(c) != 1 || math.Abs(c[0].Values["wiper-current"]-math.Sqrt(0.5/10e3)) > 1e-12 || !strings.Contains(c[0].Text, "7.1 mA") {
		t.Errorf("%+v", c)
	}
	dirty := booktest.Judge(t, Book(), "10k resistance=9.8k crv=OL", screening.DefaultPolicy())
	if len(dirty.Cautions) != 1 || dirty.Cautions[0].Code != "cleaning" {
		t.Errorf("a dirty one is cleaned with %+v", dirty.Cautions)
	}
}

// A meter, however poor, never rejects a part that is exactly what it claims, as long as it keeps its specification.
func TestAPerfectPartIsNeverRejected(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		nominal := rapid.SampledFrom([]float64{100, 470, 1e3, 10e3, 47e3, 1e6}).Draw(t, "value")
		accuracy := rapid.Float64Range(0.001, 0.5).Draw(t, "accuracy")
		policy := screening.DefaultPolicy()
		policy.Meters = map[string]screening.Meter{"": {Name: "poor", ByUnit: map[quantity.Unit]screening.Accuracy{quantity.Ohm: {Relative: accuracy}}}}
		read := func(on screening.Definition, truth float64) screening.Reading {
			return screening.Reading{Of: on.Name, Unit: quantity.Ohm, Value: truth / (1 - accuracy*rapid.Float64Range(-1, 1).Draw(t, string(on.Name)))}
		}
		part := screening.Part{
			Treated: 1,
			Claim: screening.Claim{}.WithRating(screening.NominalRating(screening.Resistance, nominal)).
				WithRating(screening.RangeRating(screening.Tolerance, -0.05, 0.05)).WithTrait(screening.TraitTechnology, "cermet"),
			Readings: []screening.Reading{read(screening.Resistance, nominal), read(CRV, 0.01*nominal), read(EndCCW, 1), read(EndCW, 0.02*nominal)},
		}
		j, err := screening.Judge(Book(), part, policy)
		if err != nil || j.Verdict == screening.Reject {
			t.Fatalf("%v Ω with ±%.3g: %v, %v\n%s", nominal, accuracy, j.Verdict, err, booktest.Texts(j))
		}
	})
}

// The share is computed; it is the midpoint that is asked for, and once.
func TestTheWalkAsksForResistancesOnly(t *testing.T) {
	w := screening.NewWalk(Book(), screening.DefaultPolicy(), booktest.Part(t, Book(), "10k linear seen=nothing"))
	var asked []string
	for _, x := range []float64{9.8e3, 4.8e3, 20} {
		q := w.Next()
		asked = append(asked, string(q.Field.Name))
		if err := w.Record(screening.Reading{Of: q.Field.Name, Unit: quantity.Ohm, Value: x, Step: x / 100}); err != nil {
			t.Fatal(err)
		}
	}
	if !slices.Equal(asked, []string{"resistance", "midpoint", "crv"}) || w.Next().Ask != screening.AskNothing {
		t.Errorf("asked for %v, then for %v", asked, w.Next().Field.Name)
	}
	if j, err := w.Judgement(); err != nil || j.Verdict != screening.Accept {
		t.Errorf("%s, %v\n%s", j.Verdict, err, booktest.Texts(j))
	}
}

func TestCompleteIsIdempotent(t *testing.T) {
	for _, words := range []string{"10k", "10k cermet linear", "10k 5% dual", "rated:resistance/1=10k rated:resistance/2=47k"} {
		once := completed(t, words)
		twice, _, err := complete(once)
		if err != nil || once.String() != twice.String() || len(once.Ratings) != len(twice.Ratings) {
			t.Errorf("%s: %v then %v, %v", words, once, twice, err)
		}
	}
}

func TestTablesAreChecked(t *testing.T) {
	if _, err := readTables(technologiesCSV, limitsCSV, tapersCSV, lettersCSV); err != nil {
		t.Error(err)
	}
	if _, err := readTables(technologiesCSV, limitsCSV, strings.Replace(tapersCSV, "0.40,0.60", "0.60,0.40", 1), lettersCSV); err == nil {
		t.Error("a taper upside down is read")
	}
	for _, grade := range []screening.Grade{screening.WithinSpec, screening.Serviceable} {
		for _, on := range []string{"end", "crv"} {
			if _, ok := mostOf(on, screening.Claim{}, grade); !ok {
				t.Errorf("an unknown track has no %s at %s", on, grade)
			}
		}
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(), "10k linear resistance=9.8k crv=20 midpoint=4.8k end-ccw=3 end-cw=4")
}

// A switch that only carries signals: at most 1 Ω closed (the program's rule), at least 1 MΩ open (an ohmmeter's OL).
func TestSwitchContacts(t *testing.T) {
	closed, open := highest(t, "50k switched", SwitchClosed.Name, screening.AnyGrade), highest(t, "50k switched", SwitchOpen.Name, screening.AnyGrade)
	if closed.High != 1 || closed.Source.Status != screening.House || open.Low != 1e6 || open.Source.Status != screening.CommonPractice {
		t.Errorf("closed %v (%s), open %v (%s)", closed.High, closed.Source, open.Low, open.Source)
	}
	j := booktest.Judge(t, Book(), "50k switched resistance=48k crv=10 switch-closed=4 switch-open=OL treated=1", screening.DefaultPolicy())
	if j.Verdict != screening.Regrade {
		t.Errorf("4 Ω through a closed switch: %s", j.Verdict)
	}
}

// 20·log(0.6/0.5) is 1.6 dB, 20·log(0.6/0.4) 3.5 dB; 3 dB is the usual limit (from memory).
func TestTrackingOfTwoSections(t *testing.T) {
	for second, apart := range map[string]bool{"5k": false, "4k": true} {
		j := booktest.Judge(t, Book(), "10k dual resistance/1=10k resistance/2=10k crv/1=0 crv/2=0 midpoint/1=6k midpoint/2="+second, screening.DefaultPolicy())
		if got := strings.Contains(booktest.Texts(j), "where they need not match"); got != apart || !strings.Contains(booktest.Texts(j), "3 dB is the usual") {
			t.Errorf("6 and %s: said to be apart %v\n%s", second, got, booktest.Texts(j))
		}
	}
}
