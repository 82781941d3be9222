package quantity_test

import (
	"strings"
	"testing"
	"unicode"

	"github.com/google/go-cmp/cmp"

	"goodbin/screening/quantity"
)

func TestParseAnyTakesTheUnitFromTheText(t *testing.T) {
	for _, c := range []struct{ text, meanings string }{
		{"2200uF", "2200 µF"},
		{"35V", "35 V"},
		{"6V3", "6.3 V"},
		{"4k7", "4.7 kΩ"},
		{"47K", "47 kΩ"},
		{"47M", "47 MΩ"},
		{"4M7", "4.7 MΩ"},
		{"R47", "0.47 Ω"},
		{"2n2", "2.2 nF"},
		{"4T7", "4700 GΩ"},
		{"4m7", "4700 µF"}, // among the letters of IEC 60062 m is for farads only; milliohms have L
		{"2200u", "2200 µF"},
		{"0,047uF", "47 nF"},
		{".003 MFD", "3 nF"},
		{"5%", "5 %"},
		{"120Hz", "120 Hz"},
		{"45uA", "45 µA"},
		{"2min", "2 min"},
		{"12mm", "12 mm"},
		{"<0.1uA", "< 0.1 µA"},
		{"24C", "24 °C, 24 C"},
		{"24°C", "24 °C"},
	} {
		t.Run(c.text, func(t *testing.T) {
			vs, err := quantity.ParseAny(c.text)
			if err != nil {
				t.Fatal(err)
			}
			var printed []string
			for _, v := range vs {
				printed = append(printed, v.String())
			}
			if diff := cmp.Diff(c.meanings, strings.Join(printed, ", ")); diff != "" {
				t.Error(diff)
			}
		})
	}
}

func TestParseAnyRefusesWhatSaysNothing(t *testing.T) {
	for _, c := range []struct{ text, says string }{
		{"100", "does not say what it is"},
		{"4T7F", `"F" is not understood`},
		{"5m", "does not say what it is"},
		{"4 MF", "microfarad in old print"},
		{"1,000", "is ambiguous"},
		{"2n3904", "no letter-and-digit value"},
		{"1n4148", "no letter-and-digit value"},
		{"1N4148", `"N4148" is not understood`},
		{"30R1F", `"F" is not understood`},
		{"BC547B", "no number"},
		{"npn", "no number"},
		{"OL", "over-range but not of what"},
		{"", "is empty"},
	} {
		if vs, err := quantity.ParseAny(c.text); err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%q: %v, %v; want an error that says %q", c.text, vs, err, c.says)
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
		{"+/-5 %", -0.05, 0.05, false},
		{"0,5%", -0.005, 0.005, false},
		{"+80-20%", -0.2, 0.8, false},
		{"-20/+80%", -0.2, 0.8, false},
		{"−20/+80%", -0.2, 0.8, false},
		{"+80/-20%", -0.2, 0.8, false},
		{"+80%/-20%", -0.2, 0.8, false},
		{"-10/+50 %", -0.1, 0.5, false},
		{"-10+100%", -0.1, 1, false},
		{"-0+100%", 0, 1, false},
		{"20", 0, 0, true},
		{"%", 0, 0, true},
		{"5%%", 0, 0, true},
		{"+20%", 0, 0, true},
		{"+20+30%", 0, 0, true},
		{"+80..-20%", 0, 0, true},
		{"<5%", 0, 0, true},
		{"0%", 0, 0, true},
		{"150%", 0, 0, true},
		{"+50-100%", 0, 0, true},
		{"+0-0%", 0, 0, true},
	} {
		low, high, err := quantity.ParseTolerance(c.text)
		if (err != nil) != c.bad || !c.bad && (!near(low, c.low) || !near(high, c.high)) {
			t.Errorf("%q gives %g, %g, %v", c.text, low, high, err)
		}
	}
}

func TestQuoteLetsNothingThrough(t *testing.T) {
	for _, c := range []struct{ text, want string }{
		{"a\x1b[31mb\r\nc\u202e", `"a[31mbc"`},
		{"45\u00a0uA\u2028", `"45 uA"`},
		{"\xff\xfe1", `"1"`},
		{strings.Repeat("x", 40), `"` + strings.Repeat("x", 40) + `"`},
		{strings.Repeat("x", 100), `"` + strings.Repeat("x", 40) + `…"`},
	} {
		if got := quantity.Quote(c.text); got != c.want {
			t.Errorf("%q is shown as %q; want %q", c.text, got, c.want)
		}
	}
}

func TestUnitsSayWhatTheyAre(t *testing.T) {
	for u := quantity.Farad; u <= quantity.Coulomb; u++ {
		v, err := quantity.Parse(u.Example(), u)
		if err != nil || v.Number <= 0 {
			t.Errorf("the example %q of %s reads %v, %v", u.Example(), u.Noun(), v, err)
		}
		if strings.ContainsFunc(u.ASCII(), func(r rune) bool { return r > unicode.MaxASCII }) || u.Symbol() == "" || u.Noun() == "" {
			t.Errorf("unit %d: %q %q %q", u, u.Symbol(), u.ASCII(), u.Noun())
		}
	}
	if quantity.One.Symbol() != "" || quantity.One.Noun() != "a plain number" {
		t.Errorf("One is %q, %q", quantity.One.Symbol(), quantity.One.Noun())
	}
}
