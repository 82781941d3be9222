package thermistor

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// An error of resistance as one of temperature. AVX: 5 % at 4.4 %/K is 1.14 K. Vishay: 5 % and 0.89 % (B) at 5.08 %/K is 1.17 K, the two multiplied.
func TestErrorsOfResistanceAsErrorsOfTemperature(t *testing.T) {
	for _, tt := range []struct {
		name         string
		share, slope float64
		kelvins      float64
	}{
		{"AVX, 5 % at 25 °C", 0.05, 0.044, 1.14},
		{"Vishay, 10 kΩ at 0 °C", 1.05*1.0089 - 1, 0.0508, 1.17},
	} {
		if got := Kelvins(tt.share, tt.slope); math.Abs(got-tt.kelvins) > 0.005 {
			t.Errorf("%s: %.4f K, want %.2f K", tt.name, got, tt.kelvins)
		}
	}
}

// The same Vishay row: 10 kΩ at 25 °C reads 32.56 kΩ at 0 °C (published). The B that fits the row gives the row; the usual B25/85 of 3977 K (from
// memory) is 4.1 % off there, which the conversion allows for. A B tolerance of 0.75 % (from memory) is the row's 0.89 %.
func TestTheFormulaAgainstAPrintedTable(t *testing.T) {
	fitted := math.Log(3.256) / inverse(0)
	if math.Abs(Ratio(fitted, 0)-3.256) > 1e-12 || math.Abs(fitted-3846) > 1 {
		t.Errorf("B %v gives %v", fitted, Ratio(fitted, 0))
	}
	if off := Ratio(3977, 0)/3.256 - 1; math.Abs(off-0.041) > 0.001 || off > curve*25 {
		t.Errorf("B25/85 is off by %.4f; %.4f is allowed", off, curve*25)
	}
	if share := 0.0075 * math.Log(3.256); math.Abs(share-0.0089) > 5e-5 {
		t.Errorf("B tolerance makes %.5f", share)
	}
	if math.Abs(Ratio(3977, 25)-1) > 1e-12 {
		t.Errorf("at 25 °C the ratio is %v", Ratio(3977, 25))
	}
	if s := Slope(3977, 25); math.Abs(s-0.0447) > 5e-5 {
		t.Errorf("slope %v", s)
	}
}

var verdictCases = []struct {
	name, words string
	verdict     screening.Verdict
	as, says    string
}{
	{"sound at 24 °C", "10k B3977 resistance=10.5k temperature=24C", screening.Accept, "", "what is asked of a new part"},
	{"sound, without a B", "10k resistance=10.5k temperature=24C", screening.Accept, "", "what is asked of a new part"},
	{"the temperature beside the reading", "10k B3977 resistance@24C=10.5k", screening.Accept, "", "what is asked of a new part"},
	{"5 % is more than the thermometer shows", "10k 5% B3977±1% resistance=10.8k temperature=23.0C", screening.Accept, "±20 % proven", "state it to ±0.5 K"},
	{"a PTC below its switching temperature", "18R ptc resistance=20 temperature=22C", screening.Accept, "", "that it switches is not shown"},
	{"24 % high for 5 %", "10k 5% B3977 resistance=12.4k temperature=25C", screening.Regrade, "as measured, 12.4 kΩ ±20 % at 25 °C", "comes to 12.4 kΩ"},
	{"nothing printed", "resistance=4.9k temperature=24C", screening.Regrade, "as measured, 4.7 kΩ ±15 % at 25 °C, its B value not known", "nothing is claimed"},
	{"temperature not stated", "10k B3977 resistance=10.1k", screening.Undecided, "", "STATE the temperature of the reading"},
	{"not measured", "10k", screening.Undecided, "", "MEASURE resistance at 25 °C"},
	{"hot", "10k 5% B3977 resistance=10k temperature=70C", screening.Undecided, "", "measure between 0 and 50 °C"},
	{"warm PTC", "18R ptc resistance=20 temperature=40C", screening.Undecided, "", "measure between 15 and 35 °C"},
	{"27 % high: the thermometer decides", "10k B3977 resistance=12.7k temperature=25C", screening.Undecided, "", "state it to ±0.5 K"},
	{"in the mains", "5R resistance=5.1 temperature=24C seen=mains", screening.Barred, "", "no reading shows"},
	{"twice its value", "10k 5% B3977 resistance=20k temperature=25C", screening.Reject, "", "comes to 20.0 kΩ"},
	{"open", "10k resistance=OL temperature=25C", screening.Reject, "", "reads open"},
	{"shorted", "10k resistance=0.3 temperature=25C", screening.Reject, "", "7.5 kΩ to 12.5 kΩ"},
	{"scorched", "10k resistance=10k temperature=25C seen=scorched", screening.Reject, "", "far too hot"},
}

func TestVerdicts(t *testing.T) {
	seen := map[screening.Verdict]int{}
	for _, tt := range verdictCases {
		booktest.Case(t, Book(), seen, tt.name, tt.words, tt.verdict, tt.as, tt.says)
	}
	booktest.EveryVerdict(t, seen, screening.Treat)
}

// At the bench nobody is asked for ohms that say nothing: the temperature comes first, and typed with the ohms it is not asked for again.
func TestAWalkAsksForTheTemperatureFirst(t *testing.T) {
	for words, want := range map[string]screening.Characteristic{
		"10k B3977": screening.Temperature.Name, "18R ptc": screening.Temperature.Name, "": screening.Temperature.Name,
		"10k B3977 temperature=24C": screening.Resistance.Name, "10k B3977 resistance@24C=10.5k": "",
	} {
		w := screening.NewWalk(Book(), screening.DefaultPolicy(), booktest.Part(t, Book(), words))
		w.SeeAll(nil)
		if q := w.Next(); q.Field.Name != want {
			t.Errorf("%q: asks for %q, want %q", words, q.Field.Name, want)
		}
	}
}

// A good thermometer proves what the assumed one does not.
func TestAGoodThermometerProvesMore(t *testing.T) {
	policy := screening.DefaultPolicy()
	policy.Meters = map[string]screening.Meter{"": {Name: "bench", ByUnit: map[quantity.Unit]screening.Accuracy{
		quantity.Ohm: {Relative: 0.005}, quantity.Celsius: {Absolute: 0.5},
	}}}
	j := booktest.Judge(t, Book(), "10k 5% B3977±1% resistance=10.9k temperature=23.0C", policy)
	if j.Verdict != screening.Accept || j.RegradedAs != nil {
		t.Errorf("%s as %q\n%s", j.Verdict, booktest.As(j), booktest.Texts(j))
	}
}

func TestClaimsThatCannotBe(t *testing.T) {
	for words, want := range map[string]string{
		"rated:resistance=0":               "no thermistor",
		"10k b-value=3977K":                "type it without a letter",
		"10k B12":                          "no B of an NTC",
		"18R ptc B3977":                    "a PTC has none",
		"10k rated:tolerance=-150%..-100%": "no tolerance of a thermistor",
	} {
		booktest.Refuses(t, Book(), words, want)
	}
}

func TestPrintedBValues(t *testing.T) {
	for word, want := range map[string][2]float64{
		"B3977": {3977, 3977}, "B3977±1%": {3937.23, 4016.77}, "b3950+-2%": {3871, 4029}, "B3950K": {3950, 3950},
	} {
		if low, high, ok := bRange(word); !ok || math.Abs(low-want[0]) > 1e-6 || math.Abs(high-want[1]) > 1e-6 {
			t.Errorf("%s is %v to %v, %v; want %v", word, low, high, ok, want)
		}
	}
	for _, word := range []string{"B", "3977", "BC547", "B-3", "Binf", "B3977±x"} {
		if _, _, ok := bRange(word); ok {
			t.Errorf("%s is read as a B value", word)
		}
	}
}

func TestEveryLimitHasARecipe(t *testing.T) {
	for _, words := range []string{"", "10k", "10k B3977", "18R ptc", "rated:resistance=9k..11k"} {
		c, _, err := complete(booktest.Part(t, Book(), words).Claim)
		if err != nil {
			t.Fatal(err)
		}
		all, err := limits(c)
		if err != nil || len(all) != 2 {
			t.Fatalf("%s: %d limits, %v", words, len(all), err)
		}
		for i, lines := range []int{3, 2} {
			if found := recipes(screening.Part{Claim: c}, all[i]); len(found) != 1 || len(found[0].Lines) < lines {
				t.Errorf("%q, %s: %v", words, all[i].On, found)
			}
		}
	}
}

// P = I²·R: 1 mA through 2 kΩ is 2 mW, which warms a bead of 2 mW per kelvin by 1 K (ranges and dissipation from memory).
func TestSelfHeating(t *testing.T) {
	for r, want := range map[float64]float64{100: 0.1e-3, 2e3: 2e-3, 10e3: 0.1e-3, 100e3: 10e-6, 1e6: 1e-6} {
		if watts, warms := selfHeating(r); math.Abs(watts/want-1) > 1e-9 || math.Abs(warms-want/2e-3) > 1e-9 {
			t.Errorf("%v Ω: %v W, %v K; want %v W", r, watts, warms, want)
		}
	}
	c := cautions(booktest.Part(t, Book(), "2k"), screening.AtMeasure)
	if len(c) != 1 || !strings.Contains(c[0].Text, "2.0 mW") {
		t.Errorf("%+v", c)
	}
	if c := cautions(booktest.Part(t, Book(), "5R"), screening.AtVerdict); len(c) != 1 || c[0].Code != "mains-position" {
		t.Errorf("an inrush limiter: %+v", c)
	}
}

// Meter and thermometer, however poor, never reject a part that is exactly what it claims, as long as both keep their specification.
func TestAPerfectPartIsNeverRejected(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		nominal := rapid.SampledFrom([]float64{10, 1e3, 10e3, 100e3}).Draw(t, "value")
		b := rapid.Float64Range(3000, 4400).Draw(t, "B")
		ohm, kelvins := rapid.Float64Range(0.001, 0.2).Draw(t, "ohmmeter"), rapid.Float64Range(0.1, 5).Draw(t, "thermometer")
		celsius := rapid.Float64Range(5, 45).Draw(t, "temperature")
		policy := screening.DefaultPolicy()
		policy.Meters = map[string]screening.Meter{"": {Name: "poor", ByUnit: map[quantity.Unit]screening.Accuracy{
			quantity.Ohm: {Relative: ohm}, quantity.Celsius: {Absolute: kelvins},
		}}}
		shown := celsius + kelvins*rapid.Float64Range(-0.9, 0.9).Draw(t, "off by")
		if shown < coldest || shown > warmest {
			return
		}
		claim := screening.Claim{}.WithRating(screening.NominalRating(screening.Resistance, nominal)).WithRating(screening.RangeRating(screening.Tolerance, -0.05, 0.05))
		if rapid.Bool().Draw(t, "B known") {
			claim = claim.WithRating(screening.NominalRating(B, b))
		}
		part := screening.Part{Claim: claim, Readings: []screening.Reading{
			{Of: screening.Temperature.Name, Unit: quantity.Celsius, Value: shown},
			{Of: screening.Resistance.Name, Unit: quantity.Ohm, Value: nominal * Ratio(b, celsius) / (1 - 0.9*ohm*rapid.Float64Range(-1, 1).Draw(t, "meter"))},
		}}
		j, err := screening.Judge(Book(), part, policy)
		if err != nil || j.Verdict == screening.Reject || j.Verdict == screening.Regrade {
			t.Fatalf("%v Ω, B %.0f, at %.1f °C shown as %.1f: %v, %v\n%s", nominal, b, celsius, shown, j.Verdict, err, booktest.Texts(j))
		}
	})
}

func TestCompleteIsIdempotent(t *testing.T) {
	for _, words := range []string{"", "10k", "10k B3977", "18R ptc 25%"} {
		once, _, err := complete(booktest.Part(t, Book(), words).Claim)
		twice, _, err2 := complete(once)
		if err != nil || err2 != nil || once.String() != twice.String() || len(once.Ratings) != len(twice.Ratings) {
			t.Errorf("%s: %v then %v; %v, %v", words, once, twice, err, err2)
		}
	}
}

func TestTableIsChecked(t *testing.T) {
	if _, err := readFigures(figuresCSV); err != nil {
		t.Error(err)
	}
	if _, err := readFigures("name,low,high,source,status\nx,1,0,y,house\n"); err == nil {
		t.Error("bounds upside down are read")
	}
	for _, name := range []string{"ntc-tolerance", "ptc-tolerance", "b-tolerance", "slope", "b-range", "kept"} {
		if _, ok := figures()[name]; !ok {
			t.Errorf("no figure %s", name)
		}
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(), "10k 5% B3977 resistance=10.8k temperature=23C")
}
