package quantity_test

import (
	"errors"
	"math"
	"strings"
	"testing"
	"unicode"

	"pgregory.net/rapid"

	"goodbin/screening/quantity"
)

const (
	rkm    = "IEC 60062 letter-and-digit values, as quoted (published)"
	gost   = "GOST IEC 60062-2014 clause 4.2 (published)"
	bench  = "bench practice (common practice)"
	oldUse = "old print (from memory)"
)

func near(got, want float64) bool { return math.Abs(got-want) <= 1e-12*math.Abs(want) }

func TestParse(t *testing.T) {
	cases := []struct {
		text   string
		unit   quantity.Unit
		want   float64
		step   float64
		source string
	}{
		{"R47", quantity.Ohm, 0.47, 0.01, rkm},
		{"4R7", quantity.Ohm, 4.7, 0.1, rkm},
		{"470R", quantity.Ohm, 470, 1, rkm},
		{"4K7", quantity.Ohm, 4700, 100, rkm},
		{"47K3", quantity.Ohm, 47300, 100, rkm},
		{"4M7", quantity.Ohm, 4.7e6, 1e5, rkm},
		{"8K2", quantity.Ohm, 8200, 100, rkm},
		{"15M0", quantity.Ohm, 15e6, 1e5, rkm},
		{"R10", quantity.Ohm, 0.1, 0.01, gost},
		{"R332", quantity.Ohm, 0.332, 0.001, gost},
		{"33R2", quantity.Ohm, 33.2, 0.1, gost},
		{"3K32", quantity.Ohm, 3320, 10, gost},
		{"1G0", quantity.Ohm, 1e9, 1e8, gost},
		{"4n7", quantity.Farad, 4.7e-9, 0.1e-9, rkm},
		{"p33", quantity.Farad, 0.33e-12, 0.01e-12, rkm},
		{"3p3", quantity.Farad, 3.3e-12, 0.1e-12, rkm},
		{"n33", quantity.Farad, 330e-12, 10e-12, rkm},
		{"u47", quantity.Farad, 470e-9, 10e-9, rkm},
		{"4u7", quantity.Farad, 4.7e-6, 0.1e-6, rkm},
		{"4m7", quantity.Farad, 4.7e-3, 0.1e-3, rkm},
		{"2200u", quantity.Farad, 2200e-6, 1e-6, bench},
		{"2,2m", quantity.Farad, 2.2e-3, 0.1e-3, bench},
		{"4k7", quantity.Ohm, 4700, 100, bench},
		{"0R1", quantity.Ohm, 0.1, 0.1, bench},
		{"4k7 ohm", quantity.Ohm, 4700, 100, bench},
		{"4.7 kΩ", quantity.Ohm, 4700, 100, bench},
		{"4.7 k\u2126", quantity.Ohm, 4700, 100, bench},
		{"2n2F", quantity.Farad, 2.2e-9, 0.1e-9, bench},
		{".003 MFD", quantity.Farad, 0.003e-6, 0.001e-6, oldUse},
		{"8 mfd", quantity.Farad, 8e-6, 1e-6, oldUse},
		{"80 mmf", quantity.Farad, 80e-12, 1e-12, oldUse},
		{"80 uuF", quantity.Farad, 80e-12, 1e-12, oldUse},
		{"6V3", quantity.Volt, 6.3, 0.1, bench},
		{"35V", quantity.Volt, 35, 1, bench},
		{"2 mV", quantity.Volt, 2e-3, 1e-3, bench},
		{"10 µF", quantity.Farad, 10e-6, 1e-6, bench},
		{"10 μF", quantity.Farad, 10e-6, 1e-6, bench},
		{"10uf", quantity.Farad, 10e-6, 1e-6, bench},
		{"2mF", quantity.Farad, 2e-3, 1e-3, bench},
		{"1e-6", quantity.Farad, 1e-6, 1e-6, bench},
		{"1.5E-3", quantity.Ampere, 1.5e-3, 0.1e-3, bench},
		{"45uA", quantity.Ampere, 45e-6, 1e-6, bench},
		{"0.00", quantity.Ampere, 0, 0.01, bench},
		{"-0.2u", quantity.Ampere, -0.2e-6, 0.1e-6, bench},
		{"2min", quantity.Second, 120, 60, bench},
		{"2m", quantity.Second, 2e-3, 1e-3, "m is milli, never minutes"},
		{"30s", quantity.Second, 30, 1, bench},
		{"24C", quantity.Celsius, 24, 1, bench},
		{"-5 °C", quantity.Celsius, -5, 1, bench},
		{"100 kHz", quantity.Hertz, 100e3, 1e3, bench},
		{"5%", quantity.Ratio, 0.05, 0.01, bench},
		{"180", quantity.One, 180, 1, bench},
		{"12k", quantity.One, 12e3, 1e3, bench},
	}
	for _, c := range cases {
		t.Run(c.text+" as "+c.unit.Noun(), func(t *testing.T) {
			v, err := quantity.Parse(c.text, c.unit)
			if err != nil {
				t.Fatal(err)
			}
			if !near(v.Number, c.want) || !near(v.Step, c.step) || v.Unit != c.unit {
				t.Errorf("%g with step %g; want %g, %g (%s)", v.Number, v.Step, c.want, c.step, c.source)
			}
		})
	}
}

func TestSenses(t *testing.T) {
	for _, c := range []struct {
		text string
		unit quantity.Unit
		want quantity.Value
	}{
		{"<0.1uA", quantity.Ampere, quantity.Value{Number: 0.1e-6, Unit: quantity.Ampere, Sense: quantity.AtMost, Step: 0.1e-6}},
		{"..0.1uA", quantity.Ampere, quantity.Value{Number: 0.1e-6, Unit: quantity.Ampere, Sense: quantity.AtMost, Step: 0.1e-6}},
		{">400V", quantity.Volt, quantity.Value{Number: 400, Unit: quantity.Volt, Sense: quantity.AtLeast, Step: 1}},
		{"400V..", quantity.Volt, quantity.Value{Number: 400, Unit: quantity.Volt, Sense: quantity.AtLeast, Step: 1}},
		{"≥ 400", quantity.Volt, quantity.Value{Number: 400, Unit: quantity.Volt, Sense: quantity.AtLeast, Step: 1}},
		{"OL", quantity.Ohm, quantity.Value{Unit: quantity.Ohm, Over: true}},
		{"o.l", quantity.Ohm, quantity.Value{Unit: quantity.Ohm, Over: true}},
		{"0L", quantity.Volt, quantity.Value{Unit: quantity.Volt, Over: true}},
	} {
		t.Run(c.text, func(t *testing.T) {
			v, err := quantity.Parse(c.text, c.unit)
			if err != nil || v.Sense != c.want.Sense || v.Over != c.want.Over || !near(v.Number, c.want.Number) {
				t.Errorf("%+v, %v; want %+v", v, err, c.want)
			}
		})
	}
}

func TestRefusalsSayWhatWouldBeRight(t *testing.T) {
	for _, c := range []struct {
		text string
		unit quantity.Unit
		says string
	}{
		{"1,000", quantity.Farad, `"1,000" is ambiguous: 1.000, or 1000`},
		{"47K", quantity.Farad, "tolerance letter K"},
		{"47M", quantity.Farad, "tolerance letter ±20 %"},
		{"4M7", quantity.Farad, "is not a capacitance"},
		{"4 MF", quantity.Farad, "microfarad in old print"},
		{"45 uV", quantity.Ampere, `"45 uV" is a voltage; want a current such as 45uA`},
		{"35V", quantity.Farad, "is a voltage; want a capacitance such as 2200uF"},
		{"1.2.3", quantity.Ohm, "more than one decimal sign"},
		{"1.2k3", quantity.Ohm, "a decimal sign and a letter"},
		{"", quantity.Ohm, "is empty"},
		{"NaN", quantity.Ohm, "no number"},
		{"Inf", quantity.Ohm, "no number"},
		{"abc", quantity.Ohm, "no number"},
		{"12x", quantity.Ohm, `"x" is not understood`},
		{"1\x1b[2J", quantity.Ohm, "control character"},
		{strings.Repeat("1", 80), quantity.Ohm, "too long"},
		{"\xff\xfe", quantity.Ohm, "not readable"},
	} {
		t.Run(c.text, func(t *testing.T) {
			_, err := quantity.Parse(c.text, c.unit)
			var e *quantity.Error
			if !errors.As(err, &e) || !strings.Contains(err.Error(), c.says) {
				t.Errorf("error %v; want one that says %q", err, c.says)
			}
		})
	}
}

func TestParseAny(t *testing.T) {
	for _, c := range []struct {
		text string
		unit quantity.Unit
		want float64
	}{
		{"2200uF", quantity.Farad, 2200e-6},
		{"35V", quantity.Volt, 35},
		{"6V3", quantity.Volt, 6.3},
		{"4k7", quantity.Ohm, 4700},
		{"47K", quantity.Ohm, 47e3},
		{"R47", quantity.Ohm, 0.47},
		{"2n2", quantity.Farad, 2.2e-9},
		{"2200u", quantity.Farad, 2200e-6},
		{"5%", quantity.Ratio, 0.05},
		{"120Hz", quantity.Hertz, 120},
		{"45uA", quantity.Ampere, 45e-6},
		{"2min", quantity.Second, 120},
		{".003 MFD", quantity.Farad, 0.003e-6},
	} {
		t.Run(c.text, func(t *testing.T) {
			vs, err := quantity.ParseAny(c.text)
			if err != nil || len(vs) == 0 || vs[0].Unit != c.unit || !near(vs[0].Number, c.want) {
				t.Errorf("%v, %v; want %g %s", vs, err, c.want, c.unit.Symbol())
			}
		})
	}
	for _, text := range []string{"100", "npn", "OL", "BC547B", "1N4148", "1,000", "4 MF"} {
		if vs, err := quantity.ParseAny(text); err == nil {
			t.Errorf("%q is taken for %v", text, vs)
		}
	}
}

func TestParseRange(t *testing.T) {
	inf := math.Inf(1)
	for _, c := range []struct {
		text      string
		low, high float64
		bad       bool
	}{
		{"100..300", 100, 300, false},
		{"100..", 100, inf, false},
		{"..300", -inf, 300, false},
		{"200", 200, 200, false},
		{"..", 0, 0, true},
		{"300..100", 0, 0, true},
		{"a..b", 0, 0, true},
	} {
		low, high, err := quantity.ParseRange(c.text, quantity.One)
		if (err != nil) != c.bad || !c.bad && (low != c.low || high != c.high) {
			t.Errorf("%q gives %g, %g, %v", c.text, low, high, err)
		}
	}
}

func TestParseTolerance(t *testing.T) {
	for _, c := range []struct {
		text      string
		low, high float64
		bad       bool
	}{
		{"20%", -0.2, 0.2, false},
		{"±5%", -0.05, 0.05, false},
		{"+80-20%", -0.2, 0.8, false},
		{"-20/+80%", -0.2, 0.8, false},
		{"+80/-20%", -0.2, 0.8, false},
		{"-10/+50 %", -0.1, 0.5, false},
		{"-10+100%", -0.1, 1, false},
		{"20", 0, 0, true},
		{"%", 0, 0, true},
		{"+20%", 0, 0, true},
		{"+20+30%", 0, 0, true},
		{"0%", 0, 0, true},
		{"150%", 0, 0, true},
	} {
		low, high, err := quantity.ParseTolerance(c.text)
		if (err != nil) != c.bad || !c.bad && (!near(low, c.low) || !near(high, c.high)) {
			t.Errorf("%q gives %g, %g, %v", c.text, low, high, err)
		}
	}
}

func TestFormat(t *testing.T) {
	for _, c := range []struct {
		x      float64
		unit   quantity.Unit
		digits int
		want   string
	}{
		{770e-6, quantity.Ampere, 3, "770 µA"},
		{0.0022, quantity.Farad, 2, "2200 µF"},
		{0.0022, quantity.Farad, 0, "2200 µF"},
		{61e-3, quantity.Ohm, 2, "61 mΩ"},
		{4700, quantity.Ohm, 3, "4.70 kΩ"},
		{4700, quantity.Ohm, 0, "4.7 kΩ"},
		{999.9996, quantity.Ohm, 4, "1.000 kΩ"},
		{120, quantity.Second, 0, "2 min"},
		{90, quantity.Second, 0, "90 s"},
		{24, quantity.Celsius, 0, "24 °C"},
		{0.2, quantity.Ratio, 0, "20 %"},
		{0.0133, quantity.Ratio, 2, "1.3 %"},
		{180, quantity.One, 3, "180"},
		{0.0123, quantity.One, 3, "0.0123"},
		{100e3, quantity.Hertz, 0, "100 kHz"},
		{0, quantity.Ampere, 3, "0 A"},
		{math.Copysign(0, -1), quantity.Volt, 0, "0 V"},
		{math.NaN(), quantity.Volt, 3, "–"},
		{math.Inf(1), quantity.Volt, 3, "∞"},
		{-0.002, quantity.Volt, 1, "-2 mV"},
		{0.3e-12, quantity.Farad, 0, "0.3 pF"},
	} {
		if got := quantity.Format(c.x, c.unit, c.digits); got != c.want {
			t.Errorf("Format(%g, %q, %d) = %q; want %q", c.x, c.unit.Symbol(), c.digits, got, c.want)
		}
	}
	if got := quantity.FormatASCII(4700e-6, quantity.Ohm, 2); got != "4.7 mohm" {
		t.Errorf("ASCII ohm prints %q", got)
	}
	if got := quantity.FormatASCII(45e-6, quantity.Ampere, 2); got != "45 uA" {
		t.Errorf("ASCII µA prints %q", got)
	}
}

func TestValuePrintsTheDigitsThatWereTyped(t *testing.T) {
	for _, c := range []struct {
		text string
		unit quantity.Unit
		want string
	}{
		{"2.010m", quantity.Farad, "2010 µF"},
		{"180", quantity.One, "180"},
		{">400V", quantity.Volt, "> 400 V"},
		{"<0.10uA", quantity.Ampere, "< 100 nA"},
		{"4k70", quantity.Ohm, "4.70 kΩ"},
		{"OL", quantity.Ohm, "OL"},
	} {
		v, err := quantity.Parse(c.text, c.unit)
		if err != nil || v.String() != c.want {
			t.Errorf("%q prints %q, %v; want %q", c.text, v, err, c.want)
		}
	}
}

func TestParseReadsBackWhatShortPrints(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		unit := rapid.SampledFrom([]quantity.Unit{
			quantity.One, quantity.Farad, quantity.Ohm, quantity.Volt, quantity.Ampere, quantity.Hertz, quantity.Second,
			quantity.Celsius, quantity.Watt, quantity.Henry, quantity.Ratio, quantity.Metre,
		}).Draw(t, "unit")
		x := rapid.Float64Range(1, 999.9).Draw(t, "mantissa") * math.Pow10(rapid.IntRange(-12, 5).Draw(t, "exponent"))
		if unit == quantity.Hertz {
			x = max(x, 1e-3)
		}
		if unit == quantity.One || unit == quantity.Celsius || unit == quantity.Ratio {
			x = max(x, 1e-2)
		}
		text := quantity.Short(x, unit)
		v, err := quantity.Parse(text, unit)
		if err != nil || math.Abs(v.Number-x) > 5.1e-12*x {
			t.Fatalf("%g prints %q, which reads %g, %v", x, text, v.Number, err)
		}
	})
}

func TestQuoteLetsNothingThrough(t *testing.T) {
	if got := quantity.Quote("a\x1b[31mb\r\nc\u202e"); strings.ContainsFunc(got, func(r rune) bool { return !unicode.IsPrint(r) }) {
		t.Errorf("%q", got)
	}
	if got := quantity.Quote(strings.Repeat("x", 100)); len([]rune(got)) != 43 {
		t.Errorf("cut to %d runes", len([]rune(got)))
	}
}

func checkError(t *testing.T, err error) {
	t.Helper()
	if err != nil && strings.ContainsFunc(err.Error(), func(r rune) bool { return !unicode.IsPrint(r) }) {
		t.Errorf("the error carries what a terminal would obey: %q", err)
	}
}

func FuzzParse(f *testing.F) {
	for _, s := range []string{"2200u", "4k7", "R47", "<0.1uA", "OL", "1,000", ".003 MFD", "1e-6", "\x1b[2J", "4M7", "2,2m", "−5"} {
		f.Add(s, uint8(quantity.Farad))
	}
	f.Fuzz(func(t *testing.T, text string, unit uint8) {
		v, err := quantity.Parse(text, quantity.Unit(unit%13))
		checkError(t, err)
		if err == nil && (math.IsNaN(v.Number) || math.IsInf(v.Number, 0) || v.Step < 0) {
			t.Errorf("%q reads %+v", text, v)
		}
	})
}

func FuzzParseAny(f *testing.F) {
	for _, s := range []string{"2200uF", "35V", "4k7", "100", "47K"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		vs, err := quantity.ParseAny(text)
		checkError(t, err)
		for _, v := range vs {
			if math.IsNaN(v.Number) || math.IsInf(v.Number, 0) {
				t.Errorf("%q reads %+v", text, v)
			}
		}
	})
}

func TestParsingAllocatesNothing(t *testing.T) {
	if n := testing.AllocsPerRun(100, func() { _, _ = quantity.Parse("2200u", quantity.Farad) }); n != 0 {
		t.Errorf("%v allocations", n)
	}
}

func BenchmarkParse(b *testing.B) {
	for b.Loop() {
		_, _ = quantity.Parse("2200u", quantity.Farad)
	}
}

func BenchmarkFormat(b *testing.B) {
	for b.Loop() {
		_ = quantity.Format(770e-6, quantity.Ampere, 3)
	}
}
