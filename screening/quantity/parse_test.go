package quantity_test

import (
	"errors"
	"fmt"
	"math"
	"strings"
	"testing"

	"goodbin/screening/quantity"
)

const (
	rkm    = "IEC 60062 letter-and-digit values, as quoted (published)"
	gost   = "GOST IEC 60062-2014 clause 4.2 (published)"
	trade  = "resistor and capacitor print in a distributor's table (published)"
	bench  = "bench practice (common practice)"
	oldUse = "old print (from memory)"
	house  = "this program's grammar (house)"
)

func near(got, want float64) bool { return math.Abs(got-want) <= 1e-12*math.Abs(want) }

var parseCases = []struct {
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
	{"4L7", quantity.Ohm, 4.7e-3, 1e-4, rkm},
	{"k10", quantity.Ohm, 100, 10, trade},
	{"M10", quantity.Ohm, 1e5, 1e4, trade},
	{"K15", quantity.Ohm, 150, 10, trade},
	{"R10", quantity.Ohm, 0.1, 0.01, gost},
	{"R332", quantity.Ohm, 0.332, 0.001, gost},
	{"33R2", quantity.Ohm, 33.2, 0.1, gost},
	{"3K32", quantity.Ohm, 3320, 10, gost},
	{"1G0", quantity.Ohm, 1e9, 1e8, gost},
	{"1T0", quantity.Ohm, 1e12, 1e11, gost},
	{"4n7", quantity.Farad, 4.7e-9, 0.1e-9, rkm},
	{"p33", quantity.Farad, 0.33e-12, 0.01e-12, rkm},
	{"3p3", quantity.Farad, 3.3e-12, 0.1e-12, rkm},
	{"n33", quantity.Farad, 330e-12, 10e-12, rkm},
	{"u47", quantity.Farad, 470e-9, 10e-9, rkm},
	{"4u7", quantity.Farad, 4.7e-6, 0.1e-6, rkm},
	{"4µ7", quantity.Farad, 4.7e-6, 0.1e-6, rkm},
	{"4m7", quantity.Farad, 4.7e-3, 0.1e-3, rkm},
	{"4F7", quantity.Farad, 4.7, 0.1, rkm},
	{"2200u", quantity.Farad, 2200e-6, 1e-6, bench},
	{"2,2m", quantity.Farad, 2.2e-3, 0.1e-3, bench},
	{"2.01m", quantity.Farad, 2.01e-3, 1e-5, bench},
	{"2,2", quantity.Volt, 2.2, 0.1, bench},
	{"0,061", quantity.Ohm, 0.061, 0.001, "a lone zero begins no thousands"},
	{"1,0005", quantity.Ohm, 1.0005, 0.0001, "four digits after a comma are no thousands"},
	{"4k7", quantity.Ohm, 4700, 100, bench},
	{"0R1", quantity.Ohm, 0.1, 0.1, bench},
	{"4k7 ohm", quantity.Ohm, 4700, 100, bench},
	{"4.7 kΩ", quantity.Ohm, 4700, 100, bench},
	{"4.7 k\u2126", quantity.Ohm, 4700, 100, bench},
	{"4.7 Kohms", quantity.Ohm, 4700, 100, bench},
	{"10 MEG", quantity.Ohm, 10e6, 1e6, bench},
	{"2n2F", quantity.Farad, 2.2e-9, 0.1e-9, bench},
	{"2k2Hz", quantity.Hertz, 2200, 100, bench},
	{".003 MFD", quantity.Farad, 0.003e-6, 0.001e-6, oldUse},
	{"8 mfd", quantity.Farad, 8e-6, 1e-6, oldUse},
	{"80 mmf", quantity.Farad, 80e-12, 1e-12, oldUse},
	{"80 MMFD", quantity.Farad, 80e-12, 1e-12, oldUse},
	{"80 uuF", quantity.Farad, 80e-12, 1e-12, oldUse},
	{"80 µµF", quantity.Farad, 80e-12, 1e-12, oldUse},
	{"80 μμF", quantity.Farad, 80e-12, 1e-12, oldUse},
	{"100UF", quantity.Farad, 100e-6, 1e-6, oldUse},
	{"100 PF", quantity.Farad, 100e-12, 1e-12, oldUse},
	{"6V3", quantity.Volt, 6.3, 0.1, bench},
	{"35V", quantity.Volt, 35, 1, bench},
	{"2 mV", quantity.Volt, 2e-3, 1e-3, bench},
	{"5kV", quantity.Volt, 5e3, 1e3, bench},
	{"10 µF", quantity.Farad, 10e-6, 1e-6, bench},
	{"10 μF", quantity.Farad, 10e-6, 1e-6, bench},
	{"10\u00a0µF", quantity.Farad, 10e-6, 1e-6, "pasted with a no-break space"},
	{"10uf", quantity.Farad, 10e-6, 1e-6, bench},
	{"2mF", quantity.Farad, 2e-3, 1e-3, bench},
	{"1e-6", quantity.Farad, 1e-6, 1e-6, bench},
	{"1.5E-3", quantity.Ampere, 1.5e-3, 0.1e-3, bench},
	{"45uA", quantity.Ampere, 45e-6, 1e-6, bench},
	{"3 nA", quantity.Ampere, 3e-9, 1e-9, bench},
	{"10 mH", quantity.Henry, 10e-3, 1e-3, bench},
	{"0.00", quantity.Ampere, 0, 0.01, bench},
	{"-0.2u", quantity.Ampere, -0.2e-6, 0.1e-6, bench},
	{"2min", quantity.Second, 120, 60, bench},
	{"1h", quantity.Second, 3600, 3600, bench},
	{"500ms", quantity.Second, 0.5, 1e-3, bench},
	{"2m", quantity.Second, 2e-3, 1e-3, house},
	{"30s", quantity.Second, 30, 1, bench},
	{"24C", quantity.Celsius, 24, 1, bench},
	{"-5 °C", quantity.Celsius, -5, 1, bench},
	{"−5", quantity.Celsius, -5, 1, bench},
	{"45 uC", quantity.Coulomb, 45e-6, 1e-6, bench},
	{"12 mm", quantity.Metre, 12e-3, 1e-3, bench},
	{"12 m", quantity.Metre, 12, 1, house},
	{"100 kHz", quantity.Hertz, 100e3, 1e3, bench},
	{"100k", quantity.Hertz, 100e3, 1e3, bench},
	{"5%", quantity.Ratio, 0.05, 0.01, bench},
	{"5", quantity.Ratio, 0.05, 0.01, house},
	{"180", quantity.One, 180, 1, bench},
	{"12k", quantity.One, 12e3, 1e3, bench},
}

func TestParse(t *testing.T) {
	for _, c := range parseCases {
		t.Run(c.text+" as "+c.unit.Noun(), func(t *testing.T) {
			v, err := quantity.Parse(c.text, c.unit)
			if err != nil {
				t.Fatal(err)
			}
			if !near(v.Number, c.want) || !near(v.Step, c.step) || v.Unit != c.unit || v.Sense != quantity.Exactly || v.Over {
				t.Errorf("%+v; want %g with step %g (%s)", v, c.want, c.step, c.source)
			}
		})
	}
}

func TestZeroHasNoSign(t *testing.T) {
	v, err := quantity.Parse("-0.0", quantity.Volt)
	if err != nil || math.Signbit(v.Number) {
		t.Errorf("%+v, %v", v, err)
	}
}

func TestSensesSayWhatTheyAre(t *testing.T) {
	said := fmt.Sprint(quantity.Exactly, ", ", quantity.AtLeast, ", ", quantity.AtMost, ", ", quantity.Sense(9))
	if said != "exactly, at least, at most, in no known sense" {
		t.Error(said)
	}
}

func TestSenses(t *testing.T) {
	for _, c := range []struct {
		text string
		unit quantity.Unit
		want quantity.Value
	}{
		{"<0.1uA", quantity.Ampere, quantity.Value{Number: 0.1e-6, Sense: quantity.AtMost, Step: 0.1e-6}},
		{"..0.1uA", quantity.Ampere, quantity.Value{Number: 0.1e-6, Sense: quantity.AtMost, Step: 0.1e-6}},
		{"≤ 0.1 uA", quantity.Ampere, quantity.Value{Number: 0.1e-6, Sense: quantity.AtMost, Step: 0.1e-6}},
		{"<-5", quantity.Celsius, quantity.Value{Number: -5, Sense: quantity.AtMost, Step: 1}},
		{">400V", quantity.Volt, quantity.Value{Number: 400, Sense: quantity.AtLeast, Step: 1}},
		{"400V..", quantity.Volt, quantity.Value{Number: 400, Sense: quantity.AtLeast, Step: 1}},
		{"400..", quantity.Volt, quantity.Value{Number: 400, Sense: quantity.AtLeast, Step: 1}},
		{"≥ 400", quantity.Volt, quantity.Value{Number: 400, Sense: quantity.AtLeast, Step: 1}},
		{"OL", quantity.Ohm, quantity.Value{Over: true}},
		{"ol", quantity.Ohm, quantity.Value{Over: true}},
		{"o.l", quantity.Ohm, quantity.Value{Over: true}},
		{"0L", quantity.Volt, quantity.Value{Over: true}},
	} {
		t.Run(c.text, func(t *testing.T) {
			c.want.Unit = c.unit
			v, err := quantity.Parse(c.text, c.unit)
			if err != nil || v != c.want {
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
		{"12,345 k", quantity.Ohm, `is ambiguous: 12.345, or 12345`},
		{"1,000,000", quantity.Ohm, "more than one decimal sign; write thousands without separators"},
		{"12,345.6", quantity.Ohm, "more than one decimal sign"},
		{"47K", quantity.Farad, `"47K" is ambiguous on a capacitor: 47 pF with the tolerance letter K, ±10 % (write 47pF 10%), or 47 thousand pF`},
		{"47k", quantity.Farad, "k is kilo; write 47nF"},
		{"47M", quantity.Farad, "tolerance letter ±20 %"},
		{"4M7", quantity.Farad, "M is mega, never micro; write 4u7"},
		{"4K7", quantity.Farad, "K is kilo; write 4n7"},
		{"4 MF", quantity.Farad, "4 microfarad in old print (write 4uF), or 4 millifarad (write 4mF)"},
		{"4 mf", quantity.Farad, "is ambiguous: 4 microfarad"},
		{"30R1F", quantity.Ohm, `"F" is not understood`},
		{"4R7", quantity.Farad, "is a resistance; want a capacitance"},
		{"45 uV", quantity.Ampere, `"45 uV" is a voltage; want a current such as 45uA`},
		{"35V", quantity.Farad, `"35V" is a voltage; want a capacitance such as 2200uF`},
		{"5%", quantity.One, "is a percentage; want a plain number such as 180"},
		{"5k", quantity.Second, `"k" is not understood`},
		{"4T7", quantity.Farad, `"T" is not understood`},
		{"1e", quantity.Ohm, `"e" is not understood`},
		{"4k12345678901234567890", quantity.Ohm, "more digits than any meter"},
		{"300K", quantity.Celsius, "K is kilo, never kelvin"},
		{"5", quantity.Unit(200), "a unit that is not known"},
		{"1.2.3", quantity.Ohm, "more than one decimal sign"},
		{"1.2k3", quantity.Ohm, "a decimal sign and a letter"},
		{"1..5", quantity.Ohm, "is a range, and one value is wanted"},
		{"...5", quantity.Ohm, "has three dots"},
		{"<OL", quantity.Ohm, "over-range is no upper bound"},
		{"1 .", quantity.Ohm, `"." is not understood`},
		{"4 k7", quantity.Ohm, `"k7" is not understood`},
		{"V47", quantity.Volt, "begins with a unit"},
		{"", quantity.Ohm, "is empty"},
		{" ", quantity.Ohm, "is empty"},
		{"NaN", quantity.Ohm, "no number"},
		{"Inf", quantity.Ohm, "no number"},
		{"-", quantity.Ohm, "no number"},
		{".", quantity.Ohm, "no number"},
		{"1e400", quantity.Ohm, "power of ten"},
		{"abc", quantity.Ohm, "no number"},
		{"12x", quantity.Ohm, `"x" is not understood`},
		{"1\x1b[2J", quantity.Ohm, "control character"},
		{"1\u009b2J", quantity.Ohm, "control character"},
		{"123456789012345678901", quantity.Ohm, "more digits than any meter"},
		{strings.Repeat("1", 80), quantity.Ohm, "too long"},
		{"\xff\xfe", quantity.Ohm, "not readable"},
	} {
		t.Run(c.text, func(t *testing.T) {
			v, err := quantity.Parse(c.text, c.unit)
			var e *quantity.Error
			if !errors.As(err, &e) || !strings.Contains(err.Error(), c.says) {
				t.Fatalf("%+v, %v; want an error that says %q", v, err, c.says)
			}
			if e.Text != c.text || e.Unit != c.unit || strings.Contains(e.Problem, "ambiguous") != (len(e.Meanings) == 2) {
				t.Errorf("the error carries %+v", e)
			}
		})
	}
}

func TestParseRange(t *testing.T) {
	inf := math.Inf(1)
	for _, c := range []struct {
		text      string
		unit      quantity.Unit
		low, high float64
		says      string
	}{
		{"100..300", quantity.One, 100, 300, ""},
		{"100..", quantity.One, 100, inf, ""},
		{"..300", quantity.One, -inf, 300, ""},
		{"200", quantity.One, 200, 200, ""},
		{"3.1..3.5V", quantity.Volt, 3.1, 3.5, ""},
		{"0..5mA", quantity.Ampere, 0, 5e-3, ""},
		{"1mA .. 5mA", quantity.Ampere, 1e-3, 5e-3, ""},
		{"1R..2M", quantity.Ohm, 1, 2e6, ""},
		{"-20..70", quantity.Celsius, -20, 70, ""},
		{"5..10%", quantity.Ratio, 0.05, 0.1, ""},
		{"1..2M", quantity.Ohm, 0, 0, "is ambiguous: 1 Ω to 2 MΩ, or 1 MΩ to 2 MΩ"},
		{"10..20uF", quantity.Farad, 0, 0, "or 10 µF to 20 µF"},
		{"1..5min", quantity.Second, 0, 0, "is ambiguous: 1 s to 5 min, or 1 min to 5 min"},
		{"0...5", quantity.One, 0, 0, "has three dots"},
		{"..", quantity.One, 0, 0, "without bounds"},
		{"300..100", quantity.One, 0, 0, "lower end lies above"},
		{"<5..10", quantity.One, 0, 0, "one number is wanted"},
		{"OL", quantity.Ohm, 0, 0, "one number is wanted"},
		{"1..2V", quantity.Ohm, 0, 0, "is a voltage"},
		{"a..b", quantity.One, 0, 0, "no number"},
		{"1..2..3", quantity.One, 0, 0, "is a range"},
	} {
		t.Run(c.text, func(t *testing.T) {
			low, high, err := quantity.ParseRange(c.text, c.unit)
			if c.says != "" {
				if err == nil || !strings.Contains(err.Error(), c.says) {
					t.Errorf("%g, %g, %v; want an error that says %q", low, high, err, c.says)
				}
				return
			}
			if err != nil || low != c.low || high != c.high {
				t.Errorf("%g, %g, %v; want %g, %g", low, high, err, c.low, c.high)
			}
		})
	}
}
