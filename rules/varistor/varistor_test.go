package varistor

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Varistor application notes: a 470 V part at 235 V DC is good below 10 µA and worn from 10 µA on.
func TestWornByLeakageAtHalfItsVoltage(t *testing.T) {
	for amperes, want := range map[string]screening.Verdict{
		"2uA": screening.Accept, "9.9uA": screening.Accept, "10uA": screening.Reject, "25uA": screening.Reject,
	} {
		j := booktest.Judge(t, Book(), "rated:vv=470V K resistance=OL vv@1mA=470V leakage@235V="+amperes, booktest.Exactly())
		if j.Verdict != want {
			t.Errorf("%s: %s, want %s\n%s", amperes, j.Verdict, want, booktest.Texts(j))
		}
	}
}

// A print of 471K is 470 V ±10 %: 423 V to 517 V.
func TestBandsIncludeTheirEdges(t *testing.T) {
	for volts, want := range map[string]screening.Grade{
		"423V": screening.WithinSpec, "517V": screening.WithinSpec, "422V": screening.Serviceable, "518V": screening.Serviceable,
		"381V": screening.Serviceable, "380V": screening.AnyGrade, "568V": screening.Serviceable, "569V": screening.AnyGrade,
	} {
		j := booktest.Judge(t, Book(), "rated:vv=470V K resistance=OL vv@1mA="+volts+" leakage@235V=1uA", booktest.Exactly())
		if j.Grade != want {
			t.Errorf("%s: %s at grade %q, want %q", volts, j.Verdict, j.Grade, want)
		}
	}
}

var verdictCases = []struct {
	name, words string
	verdict     screening.Verdict
	says        string
}{
	{"sound", "rated:vv=470V 10% resistance=OL vv@1mA=468V leakage@235V=2uA", screening.Accept, "its usual place is across the mains"},
	{"the ohmmeter is spared by a good leakage", "rated:vv=470V 10% vv@1mA=468V leakage@235V=2uA", screening.Accept, "energy and clamping voltage"},
	{"at half the current", "rated:vv=470V K vv@0.5mA=460V leakage@235V=2uA", screening.Accept, ""},
	{"low voltage", "rated:vv=18V vv@1mA=18.4V leakage@9V=1uA", screening.Accept, "every required reading"},
	{"16 % low: inside its band and its change", "rated:vv=470V K vv@1mA=395V leakage@235V=2uA", screening.Accept, "every required reading"},
	{"an ohmmeter alone", "rated:vv=470V resistance=OL", screening.Undecided, "MEASURE varistor voltage at 1 mA"},
	{"at 10 µA", "rated:vv=470V vv@10uA=440V leakage@235V=2uA", screening.Undecided, "measure between 100 µA and 3 mA"},
	{"current not stated", "rated:vv=470V vv=440V leakage@235V=2uA", screening.Undecided, "STATE the current of the reading"},
	{"named by its AC voltage", "ac-voltage=275V resistance=OL vv@1mA=300V leakage@220V=1uA", screening.Undecided, "CONFIRM the figure"},
	{"nothing claimed", "resistance=OL", screening.Undecided, ""},
	{"the mains", "rated:vv=470V resistance=OL vv@1mA=468V leakage@235V=2uA seen=mains", screening.Barred, "no reading shows"},
	{"shorted", "rated:vv=470V resistance=300", screening.Reject, "shorted, as a varistor mostly ends"},
	{"fallen by a quarter", "rated:vv=470V 10% vv@1mA=360V leakage@235V=2uA", screening.Reject, "worn by surges"},
	{"too high", "rated:vv=470V 10% vv@1mA=620V leakage@235V=2uA", screening.Reject, "read the print again"},
	{"its AC voltage as printed", "275VAC resistance=OL vv@1mA=440V leakage@220V=2uA", screening.Accept, "1.6 times the AC voltage"},
	{"its AC voltage as printed on the disc", "275V~ resistance=300", screening.Reject, ""},
	{"leaks", "rated:vv=470V 10% resistance=OL leakage@235V=30uA", screening.Reject, "until it burns"},
	{"burnt", "rated:vv=470V 10% vv@1mA=468V leakage@235V=2uA seen=burnt", screening.Reject, "more than it stands"},
}

func TestVerdicts(t *testing.T) {
	seen := map[screening.Verdict]int{}
	for _, tt := range verdictCases {
		t.Run(tt.name, func(t *testing.T) {
			j := booktest.Judge(t, Book(), tt.words, screening.DefaultPolicy())
			seen[j.Verdict]++
			if text := booktest.Texts(j); j.Verdict != tt.verdict || !strings.Contains(text, tt.says) {
				t.Errorf("%s: %s, want %s saying %q\n%s", tt.words, j.Verdict, tt.verdict, tt.says, text)
			}
		})
	}
	booktest.EveryVerdict(t, seen, screening.Treat, screening.Regrade)
	if low := booktest.Judge(t, Book(), "rated:vv=18V", screening.DefaultPolicy()); strings.Contains(booktest.Texts(low), "mains") {
		t.Error("one of 18 V is said to be for the mains")
	}
}

// I = k·V^a: from 0.5 mA to 1 mA the voltage rises by 2^(1/50) to 2^(1/15), 1.4 to 4.7 % (exponents from memory, arithmetic computed).
func TestAVoltageIsBroughtToOneMilliampere(t *testing.T) {
	r := screening.Reading{Of: VV.Name, Unit: quantity.Volt, Value: 460, At: screening.At(screening.Current, 0.5e-3)}
	l := screening.Limit{On: VV.Name, At: screening.At(screening.Current, testCurrent)}
	c := convert(screening.Part{}, r, l)
	low, high := 460*math.Pow(2, 1.0/50), 460*math.Pow(2, 1.0/15)
	if !c.OK || math.Abs(c.Reading.Value-(low+high)/2) > 1e-9 || math.Abs(c.U-(high-low)/2/math.Sqrt(3)) > 1e-9 {
		t.Errorf("%v ± %v, want between %v and %v", c.Reading.Value, c.U, low, high)
	}
	r.At = screening.At(screening.Current, testCurrent)
	if c := convert(screening.Part{}, r, l); !c.OK || c.Reading.Value != 460 || c.U != 0 {
		t.Errorf("at 1 mA it becomes %v ± %v", c.Reading.Value, c.U)
	}
}

func TestClaimsThatCannotBe(t *testing.T) {
	for words, want := range map[string]string{
		"rated:vv=0V":                              "no voltage of a varistor",
		"rated:vv=275V ac-voltage=275V":            "has peaks of 389 V",
		"rated:vv=470V rated:tolerance=-150%..-1%": "no tolerance of a varistor",
		"471K":    "470 V at 1 mA ±10%, the code of a varistor: type rated:vv=470V 10%",
		"14D471K": "type rated:vv=470V 10%",
		"20D180M": "type rated:vv=18V 20%",
		"275V":    "highest AC voltage",
	} {
		booktest.Refuses(t, Book(), words, want)
	}
}

// Numbers by hand: 517 V at most and a fifth of it over 1 mA, rounded up to 120 kΩ; 235 V over 1 mA, rounded up to 270 kΩ.
func TestWhatTheTestNeeds(t *testing.T) {
	part := screening.Part{Claim: booktest.Judge(t, Book(), "rated:vv=470V K", screening.DefaultPolicy()).Claim}
	for _, tt := range []struct {
		on                        screening.Characteristic
		supply, ohms, drop, short float64
	}{
		{VV.Name, 637, 120e3, 120, 637 / 120e3},
		{screening.Leakage.Name, 235, 270e3, 2.7, 235 / 270e3},
	} {
		v := recipes(part, screening.Limit{On: tt.on})[0].Values
		for name, want := range map[string]float64{
			"supply": tt.supply, "series-resistance": tt.ohms, "resistor-voltage": tt.drop, "short-circuit-current": tt.short,
			"resistor-power": tt.supply * tt.supply / tt.ohms,
		} {
			if math.Abs(v[name]/want-1) > 1e-9 {
				t.Errorf("%s: %s is %v, want %v", tt.on, name, v[name], want)
			}
		}
	}
	c := cautions(part, screening.AtLook)
	if len(c) != 1 || !c[0].Gate || c[0].Level != screening.Danger || math.Abs(c[0].Values["supply"]-637) > 1e-9 {
		t.Errorf("470 V: %+v", c)
	}
	low := screening.Part{Claim: booktest.Judge(t, Book(), "rated:vv=18V", screening.DefaultPolicy()).Claim}
	if c := cautions(low, screening.AtLook); len(c) != 0 {
		t.Errorf("18 V is gated: %+v", c)
	}
	if c := cautions(low, screening.AtMeasure); len(c) != 1 || c[0].Gate || c[0].Level != screening.Notice {
		t.Errorf("18 V: %+v", c)
	}
}

func TestEveryLimitHasARecipe(t *testing.T) {
	for _, words := range []string{"rated:vv=470V", "rated:vv=18V M", "ac-voltage=275V", "rated:vv=423V..517V"} {
		claim := booktest.Judge(t, Book(), words, screening.DefaultPolicy()).Claim
		all, err := limits(claim)
		if err != nil || len(all) != 4 {
			t.Fatalf("%s: %d limits, %v", words, len(all), err)
		}
		for _, l := range all {
			if found := recipes(screening.Part{Claim: claim}, l); len(found) != 1 || len(found[0].Lines) < 3 {
				t.Errorf("%s, %s: %v", words, l.On, found)
			}
		}
	}
}

// Meters, however poor, never reject a part that is exactly what it claims, as long as they keep their specification.
func TestAPerfectPartIsNeverRejected(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		nominal := rapid.SampledFrom([]float64{18, 47, 220, 470, 1000}).Draw(t, "value")
		accuracy := rapid.Float64Range(0.001, 0.5).Draw(t, "accuracy")
		policy := screening.DefaultPolicy()
		policy.Meters = map[string]screening.Meter{"": {Name: "poor", ByUnit: map[quantity.Unit]screening.Accuracy{
			quantity.Volt: {Relative: accuracy}, quantity.Ampere: {Relative: accuracy},
		}}}
		off := func(name string) float64 { return 1 / (1 - accuracy*rapid.Float64Range(-1, 1).Draw(t, name)) }
		i := rapid.Float64Range(0.1e-3, 3e-3).Draw(t, "current")
		a := rapid.Float64Range(15, 50).Draw(t, "exponent")
		part := screening.Part{
			Claim: screening.Claim{}.WithRating(screening.NominalRating(VV, nominal)),
			Readings: []screening.Reading{
				{Of: VV.Name, Unit: quantity.Volt, Value: nominal * math.Pow(i/testCurrent, 1/a) * off("volts"), At: screening.At(screening.Current, i)},
				{Of: screening.Leakage.Name, Unit: quantity.Ampere, Value: 5e-6 * off("amperes"), At: screening.At(screening.Voltage, nominal/2)},
			},
		}
		j, err := screening.Judge(Book(), part, policy)
		if err != nil || j.Verdict == screening.Reject {
			t.Fatalf("%v V with ±%.3g at %v A: %v, %v\n%s", nominal, accuracy, i, j.Verdict, err, booktest.Texts(j))
		}
	})
}

func TestCompleteIsIdempotent(t *testing.T) {
	for _, words := range []string{"", "rated:vv=470V", "ac-voltage=275V", "rated:vv=423V..517V", "rated:vv=470V K ac-voltage=300V"} {
		once, _, err := complete(booktest.Part(t, Book(), words).Claim)
		twice, _, err2 := complete(once)
		if err != nil || err2 != nil || once.String() != twice.String() || len(once.Ratings) != len(twice.Ratings) {
			t.Errorf("%s: %v then %v; %v, %v", words, once, twice, err, err2)
		}
	}
}

func TestTableIsChecked(t *testing.T) {
	if _, err := readFigures("name,value,source,status\nx,1,y,hearsay\n"); err == nil {
		t.Error("a figure without a known status is read")
	}
	for _, name := range []string{"tolerance", "worn-change", "half", "worn-leakage", "ac-ratio", "shorted", "knee-least", "knee-most", "drift"} {
		if _, ok := figures()[name]; !ok {
			t.Errorf("no figure %s", name)
		}
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(), "rated:vv=470V 10% resistance=OL vv@1mA=468V leakage@235V=2uA")
}
