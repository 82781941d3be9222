package oxide

import (
	"math"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

func TestRoundDown(t *testing.T) {
	for x, want := range map[float64]float64{300e3: 200e3, 100e3: 100e3, 99e3: 50e3, 151: 100, 200: 200, 7: 5, 1: 1} {
		if got := roundDown(x); math.Abs(got/want-1) > 1e-12 {
			t.Errorf("%v rounds down to %v, want %v", x, got, want)
		}
	}
}

const (
	leakageCSV = "technology,set,over_volts,to_volts,after_s,factor,floor_ua,source,clause,status,note\n,general,,,60,0.01,0.5,s,c,published,\n"
	lossCSV    = "technology,set,over_uf,to_uf,tan_delta,source,clause,status,note\n,general,,1.5,0.04,s,c,published,\n,general,1.5,,0.06,s,c,published,\n"
	figuresCSV = "name,value,source,clause,status\nfall,0.1,s,c,published\nrise,0.1,s,c,published\nloss,1,s,c,published\nleakage,1.25,s,c,published\n" +
		"short,10,s,c,house\nshort-ohms,1e6,s,c,house\ncapacitance,0.5,s,c,house\nleakage-drop,0.03,s,c,house\n"
)

func TestTablesNameWhatIsWrong(t *testing.T) {
	for _, tc := range []struct{ name, leakage, loss, figures, want string }{
		{"all is well", leakageCSV, lossCSV, figuresCSV, ""},
		{"a figure is missing", leakageCSV, lossCSV, strings.Replace(figuresCSV, "short-ohms", "x", 1), "short-ohms is missing"},
		{"a figure stands twice", leakageCSV, lossCSV, figuresCSV + "fall,0.1,s,c,published\n", `"fall" stands twice`},
		{"a loss above 1", leakageCSV, strings.Replace(lossCSV, "0.06", "6", 1), figuresCSV, "a tan δ lies between 0 and 1"},
		{"no status", strings.Replace(leakageCSV, "published", "", 1), lossCSV, figuresCSV, "status"},
		{"neither factor nor floor", strings.Replace(leakageCSV, "0.01,0.5", ",", 1), lossCSV, figuresCSV, "neither factor nor floor"},
	} {
		t.Run(tc.name, func(t *testing.T) {
			_, err := Read(tc.leakage, tc.loss, tc.figures, "any")
			if tc.want == "" && err != nil || tc.want != "" && (err == nil || !strings.Contains(err.Error(), tc.want)) {
				t.Errorf("%v, want %q", err, tc.want)
			}
		})
	}
}

// 1.5 µF typed and 1.5 of a table are the same step of a ladder, whichever way the two floats round.
func TestALadderIncludesItsUpperEnd(t *testing.T) {
	tables, err := Read(leakageCSV, lossCSV, figuresCSV, "any")
	if err != nil {
		t.Fatal(err)
	}
	for farad, want := range map[float64]float64{1.5e-6: 0.04, 1.51e-6: 0.06, 1e-6: 0.04} {
		if got := tables.laxestLoss("any", capacitor.Unit{Farad: farad, Volts: 16}); got != want {
			t.Errorf("%v F: %v, want %v", farad, got, want)
		}
	}
}

// A reading at a lower voltage, later or colder never passes a leakage limit; one at a higher voltage, sooner or warmer never fails it.
func TestLeakageBoundsSettleOneSideOnly(t *testing.T) {
	limit := screening.Limit{
		On: screening.Leakage.Name, Low: math.Inf(-1), High: 1e-6,
		At: screening.At(screening.Voltage, 16).With(screening.After, 300).With(screening.PartTemperature, RoomTemperature),
	}
	rapid.Check(t, func(t *rapid.T) {
		volts := rapid.SampledFrom([]float64{5, 15, 16, 17, 30}).Draw(t, "volts")
		after := rapid.SampledFrom([]float64{60, 300, 900}).Draw(t, "after")
		celsius := rapid.SampledFrom([]float64{5, 20, 40}).Draw(t, "celsius")
		r := screening.Reading{
			Of: screening.Leakage.Name, Unit: quantity.Ampere, Value: rapid.Float64Range(0, 3e-6).Draw(t, "amperes"),
			At: screening.At(screening.Voltage, volts).With(screening.After, after).With(screening.PartTemperature, celsius),
		}
		c := convertLeakage(r, limit)
		more, less := volts > 16 || after < 300 || celsius > 25, volts < 16 || after > 300 || celsius < 15
		switch {
		case !c.OK:
		case more && less:
			t.Fatalf("%s settles something", r.At)
		case less && c.Reading.Sense != quantity.AtLeast, more && c.Reading.Sense != quantity.AtMost:
			t.Fatalf("%s is taken as %s", r.At, c.Reading.Sense)
		case less && r.Value <= limit.High, more && r.Value > limit.High:
			t.Fatalf("%s, %v A settles the wrong side", r.At, r.Value)
		}
	})
}

func TestESRAboveItsFrequencyOnlyRefutes(t *testing.T) {
	limit := screening.Limit{On: screening.ESR.Name, Low: math.Inf(-1), High: 8, At: screening.At(screening.Frequency, LossFrequency)}
	at := func(ohms, hertz float64) screening.Reading {
		return screening.Reading{Of: screening.ESR.Name, Unit: quantity.Ohm, Value: ohms, At: screening.At(screening.Frequency, hertz)}
	}
	if c := convertESR(at(2, 100e3), limit); c.OK {
		t.Error("2 Ω at 100 kHz passes at 120 Hz")
	}
	if c := convertESR(at(12, 100e3), limit); !c.OK || c.Reading.Sense != quantity.AtLeast {
		t.Error("12 Ω at 100 kHz is at least that at 120 Hz")
	}
	if c := convertESR(at(12, 50), limit); c.OK {
		t.Error("below the limit's frequency nothing is known")
	}
	if c := convertESR(screening.Reading{Of: screening.ESR.Name, Value: 1}, limit); c.OK || !strings.Contains(c.Why, "esr@100kHz") {
		t.Errorf("without a frequency: %q", c.Why)
	}
}

func oxideRules(t *testing.T) *Rules {
	t.Helper()
	tables, err := Read(leakageCSV, lossCSV, figuresCSV, "any")
	if err != nil {
		t.Fatal(err)
	}
	return &Rules{
		Span: capacitor.Span{Kind: "a part", Least: 1e-9, Most: 1}, Tables: tables, Technology: func(screening.Claim) string { return "any" },
		LossNeed: func(screening.Claim) screening.Need { return screening.Wanted },
	}
}

// Ten times the leakage limit is a short (the program's rule), on an ohms range and at rated voltage: 10 µF 16 V may leak 1.6 µA, so 16 µA is
// one, or 1 MΩ.
func TestTenTimesTheLeakageIsAShort(t *testing.T) {
	rules := oxideRules(t)
	u := capacitor.Unit{Farad: 10e-6, Volts: 16, Low: -0.2, High: 0.2}
	all := rules.short(nil, "any", u)
	if len(all) != 2 || all[0].On != screening.Resistance.Name || math.Abs(all[0].Low/1e6-1) > 1e-9 || all[1].On != screening.Leakage.Name ||
		math.Abs(all[1].High/16e-6-1) > 1e-9 || all[1].Criterion != CriterionShort || all[1].Need != screening.Required {
		t.Errorf("%+v", all)
	}
	// 1000 µF 6.3 V: 63 µA, ten times that at 6.3 V is 10 kΩ.
	if big := rules.short(nil, "any", capacitor.Unit{Farad: 1e-3, Volts: 6.3}); math.Abs(big[0].Low/10e3-1) > 1e-9 {
		t.Errorf("1000 µF: %v Ω", big[0].Low)
	}
}

// Twice what a dead short puts into it, rounded up to what is sold.
func TestTheResistorIsSoldForTwiceItsWatts(t *testing.T) {
	for watts, want := range map[float64]string{0.1: "0.25 W", 0.2: "0.5 W", 0.4: "1 W", 1.4: "3 W", 4: "10 W", 6: "15 W"} {
		if got := (Charging{Ohms: 1e3, Watts: watts}).Resistor(); !strings.Contains(got, ", "+want+" or more") {
			t.Errorf("%v W: %s, want %s", watts, got, want)
		}
	}
}

// Surely beyond: with probability 0.95 (1.645 standard uncertainties, one-sided) and by more than the meter may be off.
func TestSurelyBeyond(t *testing.T) {
	for _, tc := range []struct {
		x, u, spec   float64
		above, below bool
	}{
		{12, 1, 0, true, false},
		{11.5, 1, 0, false, false},
		{11.5, 0, 1.6, false, false},
		{11.7, 0, 1.6, true, false},
		{8, 1, 0, false, true},
		{8.5, 1, 0, false, false},
	} {
		r := &screening.Reading{Value: tc.x, U: tc.u, Spec: tc.spec}
		if surelyAbove(r, 10) != tc.above || surelyBelow(r, 10) != tc.below {
			t.Errorf("%+v: above %v, below %v", tc, surelyAbove(r, 10), surelyBelow(r, 10))
		}
	}
}
