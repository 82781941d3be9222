package quantity_test

import (
	"math"
	"testing"

	"goodbin/screening/quantity"
)

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
		{0.9, quantity.Farad, 2, "900000 µF"},
		{1, quantity.Farad, 2, "1.0 F"},
		{61e-3, quantity.Ohm, 2, "61 mΩ"},
		{4700, quantity.Ohm, 3, "4.70 kΩ"},
		{4700, quantity.Ohm, 0, "4.7 kΩ"},
		{999.9996, quantity.Ohm, 4, "1.000 kΩ"},
		{999.4, quantity.Ohm, 3, "999 Ω"},
		{1e12, quantity.Ohm, 2, "1000 GΩ"},
		{0.25, quantity.Watt, 0, "0.25 W"}, // as the trade prints small resistors
		{0.0625, quantity.Watt, 2, "0.062 W"},
		{5e-3, quantity.Watt, 0, "5 mW"},
		{120, quantity.Second, 0, "2 min"},
		{120, quantity.Second, 3, "2 min"},
		{60, quantity.Second, 2, "1 min"},
		{90, quantity.Second, 0, "90 s"},
		{0.5, quantity.Second, 0, "500 ms"},
		{24, quantity.Celsius, 0, "24 °C"},
		{-5.25, quantity.Celsius, 2, "-5.2 °C"},
		{0.2, quantity.Ratio, 0, "20 %"},
		{0.07, quantity.Ratio, 0, "7 %"},
		{0.0133, quantity.Ratio, 2, "1.3 %"},
		{180, quantity.One, 3, "180"},
		{12345, quantity.One, 2, "12000"},
		{0.0123, quantity.One, 3, "0.0123"},
		{120, quantity.Hertz, 0, "120 Hz"},
		{100e3, quantity.Hertz, 0, "100 kHz"},
		{12e-3, quantity.Metre, 0, "12 mm"},
		{45e-6, quantity.Coulomb, 2, "45 µC"},
		{0, quantity.Ampere, 3, "0 A"},
		{math.Copysign(0, -1), quantity.Volt, 0, "0 V"},
		{math.NaN(), quantity.Volt, 3, "–"},
		{math.Inf(1), quantity.Volt, 3, "∞"},
		{math.Inf(-1), quantity.Volt, 3, "-∞"},
		{-0.002, quantity.Volt, 1, "-2 mV"},
		{0.3e-12, quantity.Farad, 0, "0.3 pF"},
		{0.33e-12, quantity.Farad, 3, "0.330 pF"},
		{1e-30, quantity.Farad, 2, "1.0e-18 pF"},
		{1e300, quantity.One, 2, "1.0e300"},
		{0.1 + 0.2, quantity.Volt, 0, "300 mV"},
		{1. / 3, quantity.Volt, 40, "333.333333333333 mV"},
		{5, quantity.Unit(200), 2, "5.0"},
	} {
		if got := quantity.Format(c.x, c.unit, c.digits); got != c.want {
			t.Errorf("Format(%g, %q, %d) = %q; want %q", c.x, c.unit.Symbol(), c.digits, got, c.want)
		}
	}
}

func TestValuePrintsTheDigitsThatWereTyped(t *testing.T) {
	for _, c := range []struct {
		text string
		unit quantity.Unit
		want string
	}{
		{"2.010m", quantity.Farad, "2010 µF"},
		{"770uA", quantity.Ampere, "770 µA"},
		{"180", quantity.One, "180"},
		{">400V", quantity.Volt, "> 400 V"},
		{"<0.10uA", quantity.Ampere, "< 0.10 µA"}, // 100 nA would claim a digit more
		{"0R1", quantity.Ohm, "0.1 Ω"},
		{"0.061", quantity.Ohm, "61 mΩ"},
		{"4k7", quantity.Ohm, "4.7 kΩ"},
		{"4k70", quantity.Ohm, "4.70 kΩ"},
		{"15M0", quantity.Ohm, "15.0 MΩ"},
		{"100k", quantity.Ohm, "100 kΩ"},
		{"2,2m", quantity.Farad, "2200 µF"}, // capacitances have no milli
		{"12k", quantity.One, "12000"},      // plain numbers have no prefix
		{"0.00", quantity.Ampere, "0.00 A"},
		{"0.00uA", quantity.Ampere, "0.00 µA"},
		{"0.0", quantity.Celsius, "0.0 °C"},
		{"5.0%", quantity.Ratio, "5.0 %"},
		{"0.0%", quantity.Ratio, "0.0 %"},
		{"2min", quantity.Second, "2 min"},
		{"90s", quantity.Second, "90 s"},
		{"-0", quantity.Volt, "0 V"},
		{"OL", quantity.Ohm, "OL"},
	} {
		v, err := quantity.Parse(c.text, c.unit)
		if err != nil || v.String() != c.want {
			t.Errorf("%q prints %q, %v; want %q", c.text, v, err, c.want)
		}
	}
}

func TestValuesMadeByTheProgramPrint(t *testing.T) {
	for _, c := range []struct {
		v    quantity.Value
		want string
	}{
		{quantity.Value{}, "0"},
		{quantity.Value{Number: 4700, Unit: quantity.Ohm}, "4.7 kΩ"},
		{quantity.Value{Number: 9.9996, Unit: quantity.Volt, Step: 1e-3}, "10.000 V"},
		{quantity.Value{Number: math.NaN(), Unit: quantity.Volt, Step: 1}, "–"},
		{quantity.Value{Number: math.Inf(1), Unit: quantity.Volt, Sense: quantity.AtLeast}, "> ∞"},
		{quantity.Value{Number: 5, Unit: quantity.Volt, Step: math.NaN()}, "5 V"},
	} {
		if got := c.v.String(); got != c.want {
			t.Errorf("%+v prints %q; want %q", c.v, got, c.want)
		}
	}
}

func TestPlusMinusKeepsThePrefixOfTheValue(t *testing.T) {
	for _, c := range []struct {
		text string
		unit quantity.Unit
		half float64
		want string
	}{
		{"61m", quantity.Ohm, 29.4e-3, "61 ± 29 mΩ"},
		{"0.06", quantity.Ohm, 30e-3, "0.06 ± 0.030 Ω"},
		{"2010u", quantity.Farad, 70e-6, "2010 ± 70 µF"},
		{"4.71k", quantity.Ohm, 54.8, "4.71 ± 0.055 kΩ"},
		{"180", quantity.One, 21, "180 ± 21"},
		{"24C", quantity.Celsius, 3.46, "24 ± 3.5 °C"},
		{"5%", quantity.Ratio, 0.004, "5 ± 0.40 %"},
		{"2min", quantity.Second, 1, "2 min"},
		{"<0.1uA", quantity.Ampere, 1e-8, "< 0.1 µA"},
		{"61m", quantity.Ohm, 0, "61 mΩ"},
	} {
		v, err := quantity.Parse(c.text, c.unit)
		if err != nil {
			t.Fatal(err)
		}
		if got := v.PlusMinus(c.half); got != c.want {
			t.Errorf("%s ± %g prints %q; want %q", c.text, c.half, got, c.want)
		}
	}
}

func TestBoundKeepsWhatATablePrints(t *testing.T) {
	for _, c := range []struct {
		x    float64
		unit quantity.Unit
		want string
	}{
		{4.845, quantity.Volt, "4.845 V"}, // 1N4733A, 5.1 V −5 %
		{10e-6, quantity.Ampere, "10 µA"},
		{0.05, quantity.Volt, "50 mV"},
		{0.0989422, quantity.Ohm, "98.9 mΩ"},
		{2200e-6 * 0.7, quantity.Farad, "1540 µF"},
		{math.Inf(1), quantity.Volt, "∞"},
		{math.NaN(), quantity.Volt, "–"},
	} {
		if got := quantity.Bound(c.x, c.unit); got != c.want {
			t.Errorf("%g prints %q; want %q", c.x, got, c.want)
		}
	}
}
