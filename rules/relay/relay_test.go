package relay

import (
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/booktest"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

func TestVerdicts(t *testing.T) {
	seen := map[screening.Verdict]int{}
	for _, tt := range []struct {
		name, words string
		verdict     screening.Verdict
		says        string
	}{
		{"coil and a contact on an ohmmeter", "12V 270R coil-resistance=268 contact-resistance/1=0.4", screening.Accept, "that it pulls in and lets go"},
		{"everything measured", "12V coil-resistance=268 contact-resistance/1@1A=28m contact-resistance/2@1A=35m open-contact/1=OL pull-in=7.9V drop-out=2.1V", screening.Accept, "new part"},
		{"a used contact is not a new one", "12V rated:contact-resistance=..50m coil-resistance=268 contact-resistance/1@1A=110m pull-in=7.9V drop-out=2.1V", screening.Accept, "every required reading passes"},
		{"an ohmmeter calls a contact bad: its current breaks no film", "12V coil-resistance=268 contact-resistance/1=14", screening.Undecided, "only a reading at 1 A may refuse it"},
		{"of signal contacts at 10 mA", "5V signal coil-resistance=178 contact-resistance/1=14", screening.Undecided, "at 10 mA"},
		{"an ohmmeter shows it open", "12V coil-resistance=268 contact-resistance/1=OL", screening.Undecided, "in which it should be closed"},
		{"bad at 1 A", "12V coil-resistance=268 contact-resistance/1@1A=3.4", screening.Reject, "closed contact of section 1"},
		{"20 mA break no film on a power contact", "12V coil-resistance=268 contact-resistance/1@20mA=14", screening.Undecided, "only a reading at 1 A may refuse it"},
		{"half the current that its sort is judged at does", "12V coil-resistance=268 contact-resistance/1@0.5A=3.4", screening.Reject, "closed contact of section 1"},
		{"bad at 10 mA, where signal contacts are judged", "5V signal coil-resistance=178 contact-resistance/1@10mA=14", screening.Reject, "closed contact of section 1"},
		{"a milliampere refuses no signal contact", "5V signal coil-resistance=178 contact-resistance/1@1mA=14", screening.Undecided, "at 10 mA"},
		{"one bad contact of two", "12V coil-resistance=268 contact-resistance/1@1A=30m contact-resistance/2@1A=3.4", screening.Reject, "section 2"},
		{"coil open", "12V coil-resistance=OL", screening.Reject, "coil resistance reads at least"},
		{"a coil 30 % off its print is only remembered as wrong", "12V 270R coil-resistance=380 contact-resistance/1=0.4", screening.Accept, ""},
		{"pulls in late", "12V coil-resistance=268 contact-resistance/1=0.4 pull-in=10.8V", screening.Reject, "pull-in voltage"},
		{"its sheet says when it must have pulled in", "12V rated:pull-in=..11V coil-resistance=268 contact-resistance/1=0.4 pull-in=10.5V", screening.Accept, ""},
		{"holds on to nothing", "12V coil-resistance=268 contact-resistance/1=0.4 drop-out=0.2V", screening.Reject, "drop-out voltage"},
		{"an AC coil is held to no DC rule", "24V ac coil-resistance=160 contact-resistance/1=0.4 pull-in=21V", screening.Accept, "AC coil"},
		{"welded", "12V coil-resistance=268 contact-resistance/1=0.4 open-contact/1=0.3", screening.Reject, "in which it should be open"},
		{"contacts not measured", "12V coil-resistance=268", screening.Undecided, "MEASURE resistance of the closed contact"},
		{"it switched the mains", "12V coil-resistance=268 contact-resistance/1=0.4 seen=mains", screening.Barred, ""},
		{"burnt", "12V coil-resistance=268 contact-resistance/1=0.4 seen=burnt", screening.Reject, "stick or open"},
		{"sticks", "12V coil-resistance=268 contact-resistance/1=0.4 seen=stuck", screening.Reject, "does not return"},
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

// Power contacts are judged at 6 V and 1 A (Design News 2013-02-11), signal contacts at 1 V and 10 mA (relay maker quoted on a question-and-answer page: second-hand). A new
// contact reads 50 to 100 mΩ (from memory): it cannot reject.
func TestContactsAreJudgedAtTheirOwnCurrent(t *testing.T) {
	for words, want := range map[string][4]float64{ // supply, resistor, watts, volts at 100 mΩ
		"12V":        {6, 6, 6, 0.1},
		"12V power":  {6, 6, 6, 0.1},
		"12V signal": {1, 100, 0.01, 0.001},
		"12V reed":   {1, 100, 0.01, 0.001},
	} {
		part := booktest.Part(t, Book(), words)
		all, err := limits(part.Claim)
		if err != nil {
			t.Fatal(err)
		}
		i := slices.IndexFunc(all, func(l screening.Limit) bool { return l.Criterion == contactCriterion })
		found := Book().Recipes(part, all[i])
		if len(found) != 2 {
			t.Fatalf("%s: %+v", words, found)
		}
		v := found[1].Values
		if got := [4]float64{v["supply"], v["series-resistance"], v["resistor-power"], v["expected-voltage"]}; got != want {
			t.Errorf("%s: %v, want %v", words, got, want)
		}
		i = slices.IndexFunc(all, func(l screening.Limit) bool { return l.Criterion == newCriterion && l.Grade == screening.WithinSpec })
		if x, _ := all[i].At.Get(screening.Current); all[i].High != 0.1 || all[i].Source.Status.MayReject() || x != want[0]/want[1] {
			t.Errorf("%s: a new contact %+v", words, all[i])
		}
	}
}

func TestWhatIsPrintedOnARelayIsItsCoil(t *testing.T) {
	for _, tt := range []struct {
		words string
		of    screening.Characteristic
		want  float64
	}{
		{"12V", CoilVoltage.Name, 12},
		{"1k2", CoilResistance.Name, 1200},
		{"270R", CoilResistance.Name, 270},
		{"270ohm", CoilResistance.Name, 270},
		{"rated:coil-voltage=24V", CoilVoltage.Name, 24},
		{"5A", ContactCurrent.Name, 5},
	} {
		c, _, err := complete(booktest.Part(t, Book(), tt.words).Claim)
		if x, ok := c.Nominal(tt.of, ""); err != nil || !ok || x != tt.want {
			t.Errorf("%s: %v %v, %v", tt.words, x, ok, err)
		}
	}
	if _, _, err := complete(booktest.Part(t, Book(), "rated:coil-voltage=..0").Claim); err == nil {
		t.Error("a coil for no voltage is taken")
	}
}

func TestOperationIsComputedForTheCoil(t *testing.T) {
	part := booktest.Part(t, Book(), "12V 270R")
	c, _, _ := complete(part.Claim)
	part.Claim = c
	found := Book().Recipes(part, screening.Limit{On: PullIn.Name})
	if len(found) != 1 || math.Abs(found[0].Values["pull-in"]-9.6) > 1e-9 || math.Abs(found[0].Values["drop-out"]-0.6) > 1e-9 {
		t.Errorf("%+v", found)
	}
	// 12 V on 270 Ω: 44 mA and 0.53 W.
	kick := Book().Cautions(part, screening.AtMeasure)
	if len(kick) != 1 || math.Abs(kick[0].Values["coil-current"]-0.0444) > 1e-4 || math.Abs(kick[0].Values["coil-power"]-0.533) > 1e-3 {
		t.Errorf("%+v", kick)
	}
	high := booktest.Part(t, Book(), "110V")
	high.Claim, _, _ = complete(high.Claim)
	if got := Book().Cautions(high, screening.AtMeasure); len(got) != 2 || got[1].Level != screening.Danger {
		t.Errorf("110 V on the coil: %+v", got)
	}
	if got := Book().Recipes(high, screening.Limit{On: PullIn.Name}); got != nil {
		t.Errorf("told to put 110 V on it: %+v", got)
	}
}

// A meter, however poor, never rejects a relay that does what it should.
func TestASoundRelayIsNeverRejected(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		accuracy := rapid.Float64Range(0.001, 0.5).Draw(t, "accuracy")
		off := func(name string) float64 { return 1 / (1 - accuracy*rapid.Float64Range(-0.999, 0.999).Draw(t, name)) }
		meter := screening.Meter{Name: "poor", ByUnit: map[quantity.Unit]screening.Accuracy{
			quantity.Ohm: {Relative: accuracy, Absolute: 0.5}, quantity.Volt: {Relative: accuracy},
		}}
		policy := screening.DefaultPolicy()
		policy.Meters = map[string]screening.Meter{"": meter}
		coil := screening.NominalRating(CoilVoltage, 12)
		reading := func(d screening.Definition, section string, x float64) screening.Reading {
			return screening.Reading{Of: d.Name, Section: section, Unit: d.Unit, Value: x * off(string(d.Name))}
		}
		part := screening.Part{
			Claim: screening.Claim{}.WithRating(coil).WithRating(screening.NominalRating(CoilResistance, 270)),
			Readings: []screening.Reading{
				reading(CoilResistance, "", 270), reading(ContactResistance, "1", 2), reading(OpenContact, "1", 1e6),
				reading(PullIn, "", 9.6), reading(DropOut, "", 0.6),
			},
		}
		if rapid.Bool().Draw(t, "at its current") {
			part.Readings[1].At = screening.At(screening.Current, 1)
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
	if _, err := read("name,value,source,status\nopen,1e6,x,house\n"); err == nil {
		t.Error("a table without the rest is read")
	}
}

func BenchmarkJudge(b *testing.B) {
	booktest.Benchmark(b, Book(), "12V 270R coil-resistance=268 contact-resistance/1@1A=28m open-contact/1=OL pull-in=7.9V drop-out=2.1V")
}

// From half the current at which its sort is judged a reading refuses a contact; below that it settles nothing.
func TestFromWhichCurrentAReadingRefusesAContact(t *testing.T) {
	for words, want := range map[string]screening.Outcome{
		"12V contact-resistance/1@0.5A=14": screening.Fail, "12V contact-resistance/1@0.4A=14": screening.Missing,
		"12V signal contact-resistance/1@5mA=14": screening.Fail, "12V signal contact-resistance/1@4mA=14": screening.Missing,
	} {
		j := booktest.Judge(t, Book(), words, screening.DefaultPolicy())
		i := slices.IndexFunc(j.Findings, func(f screening.Finding) bool { return f.Limit.Criterion == contactCriterion })
		if got := j.Findings[i].Outcome; got != want {
			t.Errorf("%s: %s, want %s", words, got, want)
		}
	}
}
