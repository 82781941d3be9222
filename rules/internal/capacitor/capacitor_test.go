package capacitor

import (
	"math"
	"slices"
	"strings"
	"testing"

	"pgregory.net/rapid"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

var anySpan = Span{Kind: "a capacitor", Least: 0.1e-12, Most: 1}

var twentyPercent = Default{Low: -0.2, High: 0.2, Source: screening.Source{Document: "test", Status: screening.FromMemory}}

func claim(farad, volts float64) screening.Claim {
	c := screening.Claim{}.WithRating(screening.NominalRating(screening.Capacitance, farad))
	if volts > 0 {
		c = c.WithRating(screening.NominalRating(screening.RatedVoltage, volts))
	}
	return c
}

func tolerance(c screening.Claim, low, high float64, typed string) screening.Claim {
	r := screening.RangeRating(screening.Tolerance, low, high)
	r.Typed = typed
	return c.WithRating(r)
}

func completed(t *testing.T, c screening.Claim) Unit {
	t.Helper()
	c, _, err := Complete(c, anySpan, twentyPercent)
	if err != nil {
		t.Fatal(err)
	}
	again, notes, err := Complete(c, anySpan, twentyPercent)
	if err != nil || len(notes) > 0 || again.String() != c.String() {
		t.Fatalf("completing twice: %v, %v, %v", again, notes, err)
	}
	us, err := Units(c, anySpan)
	if err != nil {
		t.Fatal(err)
	}
	return us[0]
}

func near(a, b float64) bool { return math.Abs(a-b) <= 1e-9*math.Max(math.Abs(a), math.Abs(b)) }

func TestToleranceBands(t *testing.T) {
	for _, tt := range []struct {
		name        string
		claim       screening.Claim
		bottom, top float64
		status      screening.Status
	}{
		// passives.md 11, row 23 (rule published).
		{"104Z is 80 to 180 nF", tolerance(claim(100e-9, 0), -0.2, 0.8, "Z"), 80e-9, 180e-9, screening.Published},
		{"4.7 pF C is ±0.25 pF", tolerance(claim(4.7e-12, 0), -0.0025, 0.0025, "C"), 4.45e-12, 4.95e-12, screening.Published},
		{"5.6 pF D is ±0.5 pF", tolerance(claim(5.6e-12, 0), -0.005, 0.005, "D"), 5.1e-12, 6.1e-12, screening.Published},
		{"8.2 pF F is ±1 pF", tolerance(claim(8.2e-12, 0), -0.01, 0.01, "F"), 7.2e-12, 9.2e-12, screening.Published},
		{"3.3 pF B is ±0.1 pF", tolerance(claim(3.3e-12, 0), -0.001, 0.001, "B"), 3.2e-12, 3.4e-12, screening.Published},
		{"G below 10 pF is from memory", tolerance(claim(8e-12, 0), -0.02, 0.02, "G"), 6e-12, 10e-12, screening.FromMemory},
		{"10 pF F is ±1 %", tolerance(claim(10e-12, 0), -0.01, 0.01, "F"), 9.9e-12, 10.1e-12, screening.Published},
		{"J is percent below 10 pF too", tolerance(claim(4e-12, 0), -0.05, 0.05, "J"), 3.8e-12, 4.2e-12, screening.Published},
		{"printed ±2 pF of 22 pF", claim(22e-12, 0).WithTrait(TraitTolerancePF, "±2 pF"), 20e-12, 24e-12, screening.Published},
		{"none is the default", claim(1e-9, 0), 0.8e-9, 1.2e-9, screening.FromMemory},
	} {
		u := completed(t, tt.claim)
		if !near(u.Bottom(), tt.bottom) || !near(u.Top(), tt.top) || u.ToleranceSource.Status != tt.status {
			t.Errorf("%s: %v to %v, %v", tt.name, u.Bottom(), u.Top(), u.ToleranceSource)
		}
	}
	// passives.md 11, row 56: 100 nF 10 % beside 47 nF 5 % is 134.65 to 159.35 nF.
	a, b := completed(t, tolerance(claim(100e-9, 0), -0.1, 0.1, "K")), completed(t, tolerance(claim(47e-9, 0), -0.05, 0.05, "J"))
	if !near(a.Bottom()+b.Bottom(), 134.65e-9) || !near(a.Top()+b.Top(), 159.35e-9) {
		t.Errorf("in parallel: %v to %v", a.Bottom()+b.Bottom(), a.Top()+b.Top())
	}
	if rss := math.Hypot(a.Top()-a.Farad, b.Top()-b.Farad); math.Abs(rss-10.3e-9) > 0.05e-9 {
		t.Errorf("uncorrelated: ±%v", rss)
	}
}

func TestContradictionsAreNamed(t *testing.T) {
	for _, tt := range []struct {
		name  string
		claim screening.Claim
		says  string
	}{
		{"both tolerances", tolerance(claim(5e-12, 0), -0.1, 0.1, "K").WithTrait(TraitTolerancePF, "±0.5 pF"), "both claimed"},
		{"as wide as the part", claim(0.5e-12, 0).WithTrait(TraitTolerancePF, "±0.5 pF"), "leaves nothing"},
		{"no picofarads", claim(5e-12, 0).WithTrait(TraitTolerancePF, "much"), "no tolerance in picofarads"},
		{"a farad too many", claim(20, 0), "beyond a capacitor"},
		{"no year", claim(1e-9, 0).WithTrait(screening.TraitDated, "old"), "no year"},
		{"no enclosing band", tolerance(claim(1e-9, 0), 0.1, 0.2, ""), "does not enclose"},
	} {
		if _, _, err := Complete(tt.claim, anySpan, twentyPercent); err == nil || !strings.Contains(err.Error(), tt.says) {
			t.Errorf("%s: %v", tt.name, err)
		}
	}
}

func TestMainsMarks(t *testing.T) {
	for word, want := range map[string]string{
		"X2": "X2", "x1": "X1", "Y1": "Y1", "y4": "Y4", "X1/Y2": "X1/Y2", "X1Y2": "X1/Y2", "275VAC": "275 V AC", "250V~": "250 V AC", "~250V~": "250 V AC",
		"250vac": "250 V AC", "310V.AC": "310 V AC", "440Vac": "440 V AC", "250~": "250 V AC", "300Vrms": "300 V AC",
		"63VAC": "", "250V": "", "X7R": "", "Y5V": "", "X4": "", "Y": "", "100nF": "", "250": "", "": "",
	} {
		trait := TraitMainsClass
		got, ok := acceptMainsClass(word)
		if !ok {
			trait = TraitMainsVolts
			got, ok = acceptMainsVolts(word)
		}
		if got != want || ok != (want != "") {
			t.Errorf("%q is %q, %v", word, got, ok)
		}
		stops := Bars(screening.Claim{}.WithTrait(trait, got))
		if barred := len(stops) == 1 && stops[0].Verdict == screening.Barred && strings.Contains(stops[0].Do, "mains-capacitor"); barred != ok {
			t.Errorf("%q: %v", word, stops)
		}
	}
}

func reading(d screening.Definition, x float64, at screening.Condition) screening.Reading {
	return screening.Reading{Of: d.Name, Unit: d.Unit, Value: x, At: at, U: 0.01 * x, Spec: 0.02 * x}
}

// passives.md 11, row 62: 1 µF with a tan δ of 0.8 % at 1 kHz has an ESR of 1.27 Ω; and back.
func TestLossBothWays(t *testing.T) {
	part := screening.Part{Claim: claim(1e-6, 0), Readings: []screening.Reading{
		reading(screening.TanDelta, 0.008, screening.At(screening.Frequency, 1e3)),
		reading(screening.ESR, 1.2732395447, screening.At(screening.Frequency, 10e3)),
		reading(screening.ESR, 1, screening.Condition{}),
	}}
	derived, why := Derive(part)
	if len(derived) != 2 || math.Abs(derived[0].Value-1.273) > 5e-4 || math.Abs(derived[1].Value-0.08) > 1e-6 {
		t.Errorf("derived %+v", derived)
	}
	if len(why) != 1 || !strings.Contains(why[0].Text, "frequency") {
		t.Errorf("of an ESR without a frequency: %v", why)
	}
	rapid.Check(t, func(t *rapid.T) {
		f, c, d := rapid.Float64Range(50, 1e6).Draw(t, "f"), rapid.Float64Range(1e-12, 1e-3).Draw(t, "c"), rapid.Float64Range(1e-5, 10).Draw(t, "tan δ")
		if back := TanDeltaOf(ESROf(d, f, c), f, c); math.Abs(back/d-1) > 1e-12 {
			t.Fatalf("%v comes back as %v", d, back)
		}
	})
}

func TestInsulationFromCurrentAndFromSeconds(t *testing.T) {
	at := screening.At(screening.Voltage, 100).With(screening.After, 60)
	for _, tt := range []struct {
		name  string
		read  screening.Reading
		ohms  float64
		sense quantity.Sense
		why   string
	}{
		{"1 µA at 100 V is 100 MΩ", reading(screening.Leakage, 1e-6, at), 100e6, quantity.Exactly, ""},
		{"1000 s of 100 nF are at least 10 GΩ", reading(screening.TimeConstant, 1000, at), 10e9, quantity.AtLeast, ""},
		{"at most 10 nA is at least 10 GΩ", screening.Reading{Of: "leakage", Value: 10e-9, At: at, Sense: quantity.AtMost}, 10e9, quantity.AtLeast, ""},
		{"at least 1 mA is at most 100 kΩ", screening.Reading{Of: "leakage", Value: 1e-3, At: at, Sense: quantity.AtLeast}, 100e3, quantity.AtMost, ""},
		{"0.00 µA of a meter that may be off by 20 nA is at least 5 GΩ", screening.Reading{Of: "leakage", At: at, U: 10e-9, Spec: 20e-9}, 5e9, quantity.AtLeast, ""},
		{"a coarse reading only bounds", screening.Reading{Of: "leakage", Value: 1e-6, At: at, U: 0.6e-6, Spec: 1e-6}, 100 / 2.2e-6, quantity.AtLeast, "every digit"},
		{"no voltage", reading(screening.Leakage, 1e-6, screening.Condition{}), 0, 0, "which voltage"},
		{"exactly nothing", screening.Reading{Of: "leakage", At: at}, 0, 0, "exactly nothing"},
		{"seconds without volts", reading(screening.TimeConstant, 10, screening.Condition{}), 0, 0, "which voltage"},
	} {
		derived, why := Derive(screening.Part{Claim: claim(100e-9, 0), Readings: []screening.Reading{tt.read}})
		if tt.ohms > 0 && (len(derived) != 1 || !near(derived[0].Value, tt.ohms) || derived[0].Sense != tt.sense) || tt.ohms == 0 && len(derived) > 0 {
			t.Errorf("%s: %+v", tt.name, derived)
		}
		if said := slices.ContainsFunc(why, func(r screening.Reason) bool { return strings.Contains(r.Text, tt.why) }); said != (tt.why != "") {
			t.Errorf("%s: %v", tt.name, why)
		}
	}
}

// passives.md 11, rows 37, 39, 40 (published rules).
func TestInsulationIsOhmsOrSecondsTheLess(t *testing.T) {
	for _, tt := range []struct {
		name                string
		ohms, seconds, c, r float64
	}{
		{"X7R 0.1 µF by 1000 MΩ·µF", 100e9, 1000, 0.1e-6, 10e9},
		{"0.1 µF 16 V by 100 MΩ·µF", 10e9, 100, 0.1e-6, 1e9},
		{"polypropylene 1 µF by 30 000 s", 100e9, 30000, 1e-6, 30e9},
		{"polypropylene 0.1 µF by 100 GΩ", 100e9, 30000, 0.1e-6, 100e9},
	} {
		if got := (Insulation{Ohms: tt.ohms, Seconds: tt.seconds}).At(tt.c); !near(got, tt.r) {
			t.Errorf("%s: %v", tt.name, got)
		}
	}
	for rated, want := range map[float64]float64{0: 10, 6: 6, 10: 10, 99: 10, 100: 100, 400: 100, 500: 500, 3000: 500} {
		if got := TestVolts(rated); got != want {
			t.Errorf("a part of %v V is tested at %v V", rated, got)
		}
	}
}

func TestReadingsElsewhereBoundOneSide(t *testing.T) {
	u := Unit{Farad: 100e-9}
	ins := InsulationLimit(u, 100, Insulation{Ohms: 1e9, Seconds: math.Inf(1)}, screening.Serviceable)
	leak := LeakageLimit(u, 100, Insulation{Ohms: 1e9, Seconds: math.Inf(1)}, screening.Serviceable)
	loss := LossLimit(u, 1e3, 0.01, screening.Serviceable, "", screening.Source{})
	at := func(v, s float64) screening.Condition {
		return screening.At(screening.Voltage, v).With(screening.After, s)
	}
	for _, tt := range []struct {
		name  string
		on    screening.Definition
		limit screening.Limit
		x     float64
		at    screening.Condition
		ok    bool
		sense quantity.Sense
	}{
		{"2 MΩ at 1 V: bad", screening.InsulationResistance, ins, 2e6, at(1, 60), true, quantity.AtMost},
		{"2 GΩ at 1 V: shows nothing", screening.InsulationResistance, ins, 2e9, at(1, 60), false, 0},
		{"2 GΩ at 500 V: good", screening.InsulationResistance, ins, 2e9, at(500, 60), true, quantity.AtLeast},
		{"2 MΩ at 500 V: shows nothing", screening.InsulationResistance, ins, 2e6, at(500, 60), false, 0},
		{"2 GΩ after 10 s: good", screening.InsulationResistance, ins, 2e9, at(100, 10), true, quantity.AtLeast},
		{"500 V but after 10 min: neither", screening.InsulationResistance, ins, 2e9, at(500, 600), false, 0},
		{"1 µA at 10 V: bad", screening.Leakage, leak, 1e-6, at(10, 60), true, quantity.AtLeast},
		{"1 nA at 10 V: shows nothing", screening.Leakage, leak, 1e-9, at(10, 60), false, 0},
		{"1 nA at 200 V: good", screening.Leakage, leak, 1e-9, at(200, 60), true, quantity.AtMost},
		{"tan δ 0.0005 at 120 Hz is at most 0.0042 at 1 kHz: good", screening.TanDelta, loss, 0.0005, screening.At(screening.Frequency, 120), true, quantity.AtMost},
		{"tan δ 0.005 at 120 Hz: shows nothing", screening.TanDelta, loss, 0.005, screening.At(screening.Frequency, 120), false, 0},
		{"tan δ 0.5 at 120 Hz: shows nothing here either", screening.TanDelta, loss, 0.5, screening.At(screening.Frequency, 120), false, 0},
		{"tan δ 0.0008 at 10 kHz: good", screening.TanDelta, loss, 0.0008, screening.At(screening.Frequency, 10e3), true, quantity.AtMost},
	} {
		c := Convert(screening.Part{}, reading(tt.on, tt.x, tt.at), tt.limit)
		if c.OK != tt.ok || c.OK && (c.Reading.Sense != tt.sense || c.Rule == "" || c.Source.Status == screening.NoStatus) || !c.OK && c.Why == "" {
			t.Errorf("%s: %+v", tt.name, c)
		}
	}
}

func TestRecipesStateThisPartsNumbers(t *testing.T) {
	c, _, err := Complete(tolerance(claim(1e-6, 400), -0.1, 0.1, "K"), anySpan, twentyPercent)
	if err != nil {
		t.Fatal(err)
	}
	part, u := screening.Part{Claim: c}, completed(t, c)
	limit := InsulationLimit(u, 400, Insulation{Ohms: 1e9, Seconds: 100}, screening.Serviceable) // 100 MΩ: 4 µA at 400 V
	all := Recipes(part, limit, anySpan)
	if len(all) != 3 {
		t.Fatalf("%d recipes", len(all))
	}
	// 400 V over 1 mA is 400 kΩ, 0.4 W into a short; 5·400 kΩ·1.1 µF = 2.2 s; 400 V·10/(10 + 100) = 36.4 V.
	for name, want := range map[string]float64{"series-resistance": 400e3, "resistor-power": 0.4, "charge-time": 2.2, "volts-at-limit": 4000.0 / 110} {
		if got := all[1].Values[name]; !near(got, want) {
			t.Errorf("%s is %v, want %v", name, got, want)
		}
	}
	if got := all[0].Values["current-at-limit"]; !near(got, 4e-6) {
		t.Errorf("current at the limit %v", got)
	}
	if text := strings.Join(all[1].Lines, "\n"); !strings.Contains(text, "licensed practice") || !strings.Contains(text, "1 W or more") {
		t.Errorf("above 60 V: %s", text)
	}
	if tiny := Recipes(part, InsulationLimit(u, 10, Insulation{Ohms: 1e13, Seconds: math.Inf(1)}, screening.Serviceable), anySpan); !strings.Contains(
		strings.Join(tiny[0].Lines, "\n"), "cannot prove this limit") {
		t.Errorf("beyond the meter: %v", tiny[0].Lines)
	}
	big := Unit{Farad: 100e-6, High: 0.1}
	if text := strings.Join(insulationRecipes(big, InsulationLimit(big, 100, Insulation{Ohms: 1e9, Seconds: 1e4}, screening.Serviceable))[1].Lines, "\n"); !strings.Contains(
		text, "bridged with a wire") {
		t.Errorf("a part that takes hours to settle: %s", text)
	}
	for _, volts := range []float64{60, 61} {
		cautions := Cautions(part, screening.AtMeasure, anySpan, func(Unit) float64 { return volts })
		if warned := slices.ContainsFunc(cautions, func(c screening.Caution) bool { return c.Code == "test-under-voltage" && c.Gate }); warned != (volts > 60) {
			t.Errorf("%v V: %v", volts, cautions)
		}
	}
	if l := all[0]; l.Source.Status != screening.Published {
		t.Errorf("source %v", l.Source)
	}
}

func FuzzWords(f *testing.F) {
	for _, s := range []string{"X2", "275VAC", "±0.25pF", "+-0,5p", "~250V~", "X1/Y2"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, word string) {
		for _, accept := range []func(string) (string, bool){acceptMainsClass, acceptMainsVolts} {
			if text, ok := accept(word); ok && (len(text) > 12 || len(Bars(screening.Claim{}.WithTrait(TraitMainsClass, text))) != 1) {
				t.Errorf("%q is %q", word, text)
			}
		}
		if text, ok := acceptPicofarads(word); ok {
			x, again := picofarads(text)
			if y, _ := picofarads(word); !again || !near(x, y) {
				t.Errorf("%q is %q", word, text)
			}
		}
	})
}

// The program's rule: half of the lowest to twice the highest serviceable value, whatever a tolerance that nobody printed; a printed one
// needs no such floor.
func TestFloorOfAToleranceThatNobodyPrinted(t *testing.T) {
	at := screening.At(screening.Frequency, 1e3)
	none := completed(t, claim(100e-9, 0))
	all := Floor(ServiceableCapacitance(none, at, Allowance{Ratio: 0.03, Source: screening.Source{Document: "test", Status: screening.Published}}))
	if len(all) != 1 || !near(all[0].Low, 77e-9/2) || !near(all[0].High, 123e-9*2) || all[0].Source.Status != screening.House || all[0].Soft {
		t.Errorf("100 nF, no tolerance: %+v", all)
	}
	printed := completed(t, tolerance(claim(100e-9, 0), -0.1, 0.1, "K"))
	if all := Floor(ServiceableCapacitance(printed, at, Allowance{Ratio: 0.03, Source: screening.Source{Document: "test", Status: screening.Published}})); all != nil {
		t.Errorf("a printed tolerance: %+v", all)
	}
}

// A dead short draws 1 mA at most, and the resistor is sold for at least twice what it then takes, and rated for the voltage.
func TestTheSeriesResistorStandsADeadShort(t *testing.T) {
	if c := chargingOf(Unit{Farad: 1e-6}, 1); c.ohms != 10e3 {
		t.Errorf("at 1 V: %v Ω, want 10 kΩ", c.ohms)
	}
	for volts, want := range map[float64]string{10: "0.25 W or more", 100: "0.25 W or more (0.1 W", 500: "1 W or more (0.5 W", 1000: "2 W or more (1 W"} {
		c := chargingOf(Unit{Farad: 1e-6}, volts)
		if c.supply/c.ohms > 1e-3*(1+1e-9) || !near(c.watts, volts*volts/c.ohms) || !strings.Contains(c.resistor(), want) ||
			!strings.Contains(c.resistor(), "rated for "+quantity.Format(volts, quantity.Volt, 0)) {
			t.Errorf("%v V: %+v, %s", volts, c, c.resistor())
		}
	}
}
