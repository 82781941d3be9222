package meters_test

import (
	"math"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"
	"github.com/google/go-cmp/cmp/cmpopts"
	"pgregory.net/rapid"

	"goodbin/screening"
	"goodbin/screening/meters"
	"goodbin/screening/quantity"
)

// known are the characteristics of the tests.
func known(name screening.Characteristic) (screening.Definition, bool) {
	for _, d := range []screening.Definition{screening.Capacitance, screening.ESR, screening.Resistance, screening.Leakage, {Name: "hfe", Unit: quantity.One, AtAmperes: screening.IC, AtVolts: screening.VCE}} {
		if d.Name == name {
			return d, true
		}
	}
	return screening.Definition{}, false
}

var sameMeter = cmp.Options{cmpopts.EquateApprox(1e-11, 0), cmp.Comparer(func(a, b screening.Condition) bool { return a == b })}

func TestADescriptionReads(t *testing.T) {
	const text = "volts 0..40V 0.5%+2; capacitance@1kHz,1V 200pF..20uF ±(2 % + 5) step=10nF 99%; ohms 400.. 0.8%+2counts+20mohm digit-apart spread=0.1ohm; " +
		"hfe@2mA 10%; numbers 0.002abs; celsius 3C; esr@100kHz 50ppm+1; leads=0.2ohm±0.05; stray=2pF; found=2026-03-01;"
	m, err := meters.Parse(known, "shed", text)
	if err != nil {
		t.Fatal(err)
	}
	kHz := screening.At(screening.Frequency, 1000)
	want := screening.Meter{
		Name: "shed",
		Ranges: []screening.Range{
			{Unit: quantity.Volt, High: 40, Accuracy: screening.Accuracy{Relative: 0.005, Counts: 2}},
			{Of: "capacitance", Unit: quantity.Farad, Low: 200e-12, High: 20e-6, At: kHz.With(screening.Voltage, 1), Accuracy: screening.Accuracy{Relative: 0.02, Counts: 5, Resolution: 10e-9, Confidence: screening.Normal99}},
			{Unit: quantity.Ohm, Low: 400, Accuracy: screening.Accuracy{Relative: 0.008, Counts: 2, Absolute: 0.02, DigitApart: true, Spread: 0.1}},
			{Of: "hfe", Unit: quantity.One, At: screening.At(screening.IC, 2e-3), Accuracy: screening.Accuracy{Relative: 0.1}},
			{Unit: quantity.One, Accuracy: screening.Accuracy{Absolute: 0.002}},
			{Unit: quantity.Celsius, Accuracy: screening.Accuracy{Absolute: 3}},
			{Of: "esr", Unit: quantity.Ohm, At: screening.At(screening.Frequency, 100e3), Accuracy: screening.Accuracy{Relative: 50e-6, Counts: 1}},
		},
		Leads: screening.Leads{SeriesR: 0.2, SeriesRU: 0.05, StrayC: 2e-12, StrayCU: 1e-12 / math.Sqrt(3), Found: "2026-03-01"},
	}
	if diff := cmp.Diff(want, m, sameMeter); diff != "" {
		t.Error(diff)
	}
}

func TestWhatADescriptionCannotSay(t *testing.T) {
	for text, want := range map[string]string{
		"":                               "no accuracy is stated",
		"leads=0.2ohm":                   "no accuracy is stated",
		"speed 5%":                       "speed: is neither a characteristic nor one of volts, ohms",
		"volts":                          "volts: no accuracy is stated; an entry is such as: capacitance@1kHz 0..20uF 2%+5",
		"volts 2 ohm":                    `volts: "2ohm" is no term of an accuracy`,
		"volts 2mV":                      "",
		"volts 5%+3%":                    `states two terms of one kind`,
		"volts 500%":                     "is no accuracy",
		"volts 0%":                       "an accuracy of nothing is no meter's",
		"volts -1%":                      "is below zero",
		"volts 40V..4V 1%":               "the range 40V..4V ends no higher than it begins",
		"volts 0..4 0..5 1%":             "states its range twice",
		"volts 0..4A 1%":                 "volts: \"4A\" is a current",
		"volts 1% step=0":                "step=0: it is above zero",
		"volts 1% colour=red":            `"colour" is no setting`,
		"capacitance@1kHz,10kHz 1%":      "states the frequency twice",
		"capacitance@5 1%":               "has no unit",
		"volts 1%; leads=2pF":            "leads: \"2pF\" is a capacitance",
		"volts 1%; found=yesterday":      `"yesterday" is no date; write it such as 2026-03-01`,
		"volts 1%; leads=-0.2ohm":        "it is above zero",
		strings.Repeat("volts 1%; ", 61): "a meter has at most 60 entries",
		strings.Repeat(" ", 4001):        "longer than 4000 bytes",
		"\x1b[2Jvolts 1%":                "[2Jvolts: is neither",
	} {
		_, err := meters.Parse(known, "m", text)
		switch {
		case want == "" && err != nil:
			t.Errorf("%.60q: %v", text, err)
		case want != "" && (err == nil || !strings.Contains(err.Error(), want)):
			t.Errorf("%.60q: error %v, want one that says %q", text, err, want)
		case err != nil && strings.ContainsRune(err.Error(), 0x1b):
			t.Errorf("%.60q: an escape reaches the screen", text)
		}
	}
	for name, want := range map[string]string{"": "needs a name", strings.Repeat("x", 41): "longer than 40", "a\nb": "control character"} {
		if _, err := meters.Parse(known, name, "volts 1%"); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("name %q: %v", name, err)
		}
	}
}

func TestAFileOfMetersReads(t *testing.T) {
	const file = "meter,of,low,high,accuracy,step,confidence,digit,note\n" +
		"pocket,volts,,40V,0.5%+2,,,,dc\n" +
		"\"bench, left\",capacitance@1kHz,,,0.1%,1pF,99%,apart,\n" +
		"pocket,leads,,,0.3 ohm ± 0.1,,,,\n" +
		"pocket,found,,,2026-01-31,,,,\n"
	all, err := meters.ReadCSV(known, strings.NewReader(file))
	if err != nil {
		t.Fatal(err)
	}
	want := []screening.Meter{
		{Name: "pocket", Ranges: []screening.Range{{Unit: quantity.Volt, High: 40, Accuracy: screening.Accuracy{Relative: 0.005, Counts: 2}}}, Leads: screening.Leads{SeriesR: 0.3, SeriesRU: 0.1, Found: "2026-01-31"}},
		{Name: "bench, left", Ranges: []screening.Range{{
			Of: "capacitance", Unit: quantity.Farad, At: screening.At(screening.Frequency, 1000),
			Accuracy: screening.Accuracy{Relative: 0.001, Resolution: 1e-12, Confidence: screening.Normal99, DigitApart: true},
		}}},
	}
	if diff := cmp.Diff(want, all, sameMeter); diff != "" {
		t.Error(diff)
	}
	for file, want := range map[string]string{
		"":                                  "the file is empty",
		"meter,of\n":                        "no column is named accuracy",
		"meter,of,accuracy,colour\n":        `line 1, column 4: "colour" is no column`,
		"meter,of,of,accuracy\n":            "column 3: of stands there twice",
		"meter,of,accuracy\nm,volts,1%\n\"": "parse error",
		"meter,of,accuracy\nm,volts,1%\nm,amps,1%\n":     "line 3, amps: is neither",
		"meter,of,accuracy\n,volts,1%\n":                 "line 2, a meter needs a name",
		"meter,of,accuracy\nm,leads,1ohm\n":              "m: no accuracy is stated",
		"meter,of,accuracy,digit\nm,volts,1%,out\n":      "the digit is apart or in",
		"meter,of,accuracy,confidence\nm,volts,1%,95%\n": `"95%" is no confidence; it is 99% or rectangular`,
	} {
		if _, err := meters.ReadCSV(known, strings.NewReader(file)); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: error %v, want one that says %q", file, err, want)
		}
	}
}

// Classes are orders of magnitude from memory, and say so in the table; whoever reads with one is told that the meter is assumed.
func TestEveryClassIsAnAssumption(t *testing.T) {
	all := meters.Classes()
	if len(all) < 5 {
		t.Fatalf("%d classes", len(all))
	}
	for _, m := range all {
		if !m.Assumed || len(m.Ranges) == 0 {
			t.Errorf("%s: assumed %v, %d ranges", m.Name, m.Assumed, len(m.Ranges))
		}
	}
	pocket, bench := all[0], all[3]
	c := screening.Reading{Of: screening.Capacitance.Name, Unit: quantity.Farad, Value: 1e-6, Step: 1e-9}
	if p, b := pocket.HalfWidth(c), bench.HalfWidth(c); math.Abs(p-45e-9) > 1e-15 || math.Abs(b-1.00005e-9) > 1e-15 {
		t.Errorf("1 µF: %s ±%g, %s ±%g", pocket.Name, p, bench.Name, b)
	}
}

// What Describe writes Parse reads, whatever the meter.
func TestDescribeAndParseAreInverses(t *testing.T) {
	for _, m := range meters.Classes() {
		back, err := meters.Parse(withVF, m.Name, meters.Describe(m))
		m.Assumed = false
		if diff := cmp.Diff(m, back, sameMeter); err != nil || diff != "" {
			t.Errorf("%s: %v\n%s", meters.Describe(m), err, diff)
		}
	}
	rapid.Check(t, func(t *rapid.T) {
		positive := func(name string) float64 {
			return math.Pow(10, rapid.Float64Range(-11, 6).Draw(t, name))
		}
		maybe := func(name string) float64 {
			if rapid.Bool().Draw(t, name+"?") {
				return positive(name)
			}
			return 0
		}
		m := screening.Meter{Name: "m"}
		for range rapid.IntRange(1, 4).Draw(t, "ranges") {
			g := screening.Range{Of: "capacitance", Unit: quantity.Farad, Low: maybe("low")}
			if rapid.Bool().Draw(t, "unit") {
				g = screening.Range{Unit: rapid.SampledFrom([]quantity.Unit{quantity.Volt, quantity.Ohm, quantity.Celsius, quantity.One}).Draw(t, "of"), Low: g.Low}
			}
			if rapid.Bool().Draw(t, "high") {
				g.High = g.Low + positive("width") + g.Low
			}
			if rapid.Bool().Draw(t, "signal") {
				g.At = screening.At(screening.Frequency, float64(rapid.IntRange(1, 1_000_000).Draw(t, "f"))).With(screening.Voltage, 0.25)
			}
			g.Accuracy = screening.Accuracy{
				Relative: rapid.Float64Range(1e-6, 0.5).Draw(t, "relative"), Counts: float64(rapid.IntRange(0, 30).Draw(t, "counts")), Absolute: maybe("absolute"),
				Resolution: maybe("step"), Spread: maybe("spread"), DigitApart: rapid.Bool().Draw(t, "apart"),
			}
			if rapid.Bool().Draw(t, "normal") {
				g.Confidence = screening.Normal99
			}
			m.Ranges = append(m.Ranges, g)
		}
		if rapid.Bool().Draw(t, "leads") {
			m.Leads = screening.Leads{SeriesR: positive("r"), SeriesRU: positive("ru"), StrayC: positive("c"), StrayCU: positive("cu"), Found: "2026-02-28"}
		}
		text := meters.Describe(m)
		back, err := meters.Parse(known, "m", text)
		if diff := cmp.Diff(m, back, sameMeter); err != nil || diff != "" {
			t.Fatalf("%s: %v\n%s", text, err, diff)
		}
	})
}

func withVF(name screening.Characteristic) (screening.Definition, bool) {
	for _, d := range []screening.Definition{screening.VF, screening.TanDelta} {
		if d.Name == name {
			return d, true
		}
	}
	return known(name)
}

func FuzzParse(f *testing.F) {
	f.Add("volts 0..40V 0.5%+2; leads=0.2ohm±0.05; found=2026-03-01")
	f.Add("capacitance@1kHz 2%+5 step=1n 99% digit-apart")
	f.Fuzz(func(t *testing.T, text string) {
		m, err := meters.Parse(known, "m", text)
		if err != nil {
			if strings.ContainsAny(err.Error(), "\x1b\x00\n") {
				t.Fatalf("%q: %q", text, err)
			}
			return
		}
		for _, g := range m.Ranges {
			h := (&screening.Meter{Ranges: []screening.Range{g}}).HalfWidth(screening.Reading{Of: g.Of, Unit: g.Unit, Value: g.Low, Step: 1e-3})
			if !(h >= 0) {
				t.Fatalf("%q: half-width %v", text, h)
			}
		}
		if _, err := meters.Parse(known, "m", meters.Describe(m)); err != nil && len(meters.Describe(m)) <= meters.MaxBytes {
			t.Fatalf("%q described as %q: %v", text, meters.Describe(m), err)
		}
	})
}
