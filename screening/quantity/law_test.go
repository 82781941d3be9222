package quantity_test

import (
	"fmt"
	"math"
	"strings"
	"testing"
	"unicode"

	"pgregory.net/rapid"

	"goodbin/screening/quantity"
)

var everyUnit = []quantity.Unit{
	quantity.One, quantity.Farad, quantity.Ohm, quantity.Volt, quantity.Ampere, quantity.Hertz, quantity.Second, quantity.Celsius,
	quantity.Watt, quantity.Henry, quantity.Ratio, quantity.Metre, quantity.Coulomb,
}

func TestParseReadsBackWhatShortPrints(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		unit := rapid.SampledFrom(everyUnit).Draw(t, "unit")
		x := rapid.Float64Range(1, 10).Draw(t, "mantissa") * math.Pow10(rapid.IntRange(-20, 20).Draw(t, "exponent"))
		if rapid.Bool().Draw(t, "negative") {
			x = -x
		}
		text := quantity.Short(x, unit)
		v, err := quantity.Parse(text, unit)
		if err != nil || math.Abs(v.Number-x) > 1e-12*math.Abs(x) {
			t.Fatalf("%g prints %q, which reads %g, %v", x, text, v.Number, err)
		}
	})
}

func TestParseReadsBackWhatAValuePrints(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		unit := rapid.SampledFrom(everyUnit).Draw(t, "unit")
		prefixes := []string{""}
		for _, p := range []string{"p", "n", "u", "m", "k", "M", "G"} {
			if _, err := quantity.Parse("1"+p, unit); err == nil {
				prefixes = append(prefixes, p)
			}
		}
		text := rapid.SampledFrom([]string{"", "<", ">", "-"}).Draw(t, "mark") +
			rapid.StringMatching(`[0-9]{1,4}(\.[0-9]{1,4})?`).Draw(t, "number") + rapid.SampledFrom(prefixes).Draw(t, "prefix")
		v, err := quantity.Parse(text, unit)
		if err != nil {
			t.Fatal(err)
		}
		w, err := quantity.Parse(v.String(), unit)
		if err != nil || w.Sense != v.Sense || math.Abs(w.Number-v.Number) > 1e-12*math.Abs(v.Number) {
			t.Fatalf("%q prints %q, which reads %+v, %v; was %+v", text, v, w, err, v)
		}
		// Only where a unit lacks the prefix, or minutes stand for seconds, may the printed step differ from the typed one.
		if !near(w.Step, v.Step) && !strings.HasSuffix(v.String(), " min") && !lacksPrefix(v) {
			t.Fatalf("%q prints %q: step %g became %g", text, v, v.Step, w.Step)
		}
	})
}

// lacksPrefix reports values that have no prefix in which their last digit stands in the ones: 12k of a plain number, 2,2m of a capacitance,
// and what is finer or coarser than p and G.
func lacksPrefix(v quantity.Value) bool {
	switch v.Unit {
	case quantity.One, quantity.Celsius, quantity.Ratio, quantity.Second, quantity.Metre, quantity.Coulomb:
		return v.Step > 1e-3
	case quantity.Farad:
		return v.Step > 1e-6
	}
	return v.Step > 1e9
}

func TestFormatShowsTheDigitsAskedFor(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		unit := rapid.SampledFrom(everyUnit).Draw(t, "unit")
		x := rapid.Float64Range(1, 10).Draw(t, "mantissa") * math.Pow10(rapid.IntRange(-12, 8).Draw(t, "exponent"))
		digits := rapid.IntRange(1, 12).Draw(t, "digits")
		v, err := quantity.Parse(quantity.Format(x, unit, digits), unit)
		if err != nil || math.Abs(v.Number-x) > 0.5000001*x*math.Pow10(1-digits) {
			t.Fatalf("%g with %d digits prints %q, %v", x, digits, quantity.Format(x, unit, digits), err)
		}
	})
}

// checkError holds every error to what may reach a screen.
func checkError(t *testing.T, err error) {
	t.Helper()
	if err != nil && strings.ContainsFunc(err.Error(), func(r rune) bool { return !unicode.IsPrint(r) }) {
		t.Errorf("the error carries what a terminal would obey: %q", err)
	}
}

func checkValue(t *testing.T, text string, v quantity.Value) {
	t.Helper()
	if v.Number-v.Number != 0 || v.Step-v.Step != 0 || v.Step < 0 || v.Over && v.Number != 0 {
		t.Errorf("%q reads %+v", text, v)
	}
	if printed := v.String(); strings.ContainsFunc(printed, func(r rune) bool { return !unicode.IsPrint(r) }) || len(printed) > 64 {
		t.Errorf("%q prints %q", text, printed)
	} else if size := math.Abs(v.Number); !v.Over && (size == 0 || size > 1e-20 && size < 1e20) && v.Step > 1e-20 && v.Step < 1e20 {
		w, err := quantity.Parse(printed, v.Unit)
		if err != nil || w.Sense != v.Sense || math.Abs(w.Number-v.Number) > max(1e-12*size, v.Step/2) {
			t.Errorf("%q prints %q, which reads %+v, %v", text, printed, w, err)
		}
	}
}

func FuzzParse(f *testing.F) {
	for _, s := range []string{
		"2200u", "4k7", "R47", "<0.1uA", "OL", "1,000", ".003 MFD", "1e-6", "\x1b[2J", "4M7", "2,2m", "−5", "<\u20284 MF", "1..5", "47K", "2n2F",
	} {
		f.Add(s, uint8(quantity.Farad))
	}
	f.Fuzz(func(t *testing.T, text string, unit uint8) {
		v, err := quantity.Parse(text, quantity.Unit(unit%15))
		checkError(t, err)
		if err == nil {
			checkValue(t, text, v)
		}
	})
}

func FuzzParseAny(f *testing.F) {
	for _, s := range []string{"2200uF", "35V", "4k7", "100", "47K", "24C", "2n3904", "4 MF", "+80-20%", "1..2M"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		vs, err := quantity.ParseAny(text)
		checkError(t, err)
		if err == nil && len(vs) == 0 {
			t.Errorf("%q has neither meaning nor error", text)
		}
		for _, v := range vs {
			checkValue(t, text, v)
		}
		low, high, err := quantity.ParseTolerance(text)
		checkError(t, err)
		if err == nil && !(-1 < low && low <= 0 && 0 <= high && low < high) {
			t.Errorf("%q is the tolerance %g, %g", text, low, high)
		}
		low, high, err = quantity.ParseRange(text, quantity.Ohm)
		checkError(t, err)
		if err == nil && !(low <= high) {
			t.Errorf("%q is the range %g, %g", text, low, high)
		}
	})
}

func TestParsingAllocatesNothing(t *testing.T) {
	for _, c := range []struct {
		text string
		unit quantity.Unit
	}{
		{"2200u", quantity.Farad},
		{"2n2F", quantity.Farad},
		{".003 MFD", quantity.Farad},
		{"4k7 ohm", quantity.Ohm},
		{"<0.1uA", quantity.Ampere},
		{"OL", quantity.Ohm},
		{"2min", quantity.Second},
		{"1.5E-3", quantity.Ampere},
	} {
		if n := testing.AllocsPerRun(100, func() { _, _ = quantity.Parse(c.text, c.unit) }); n != 0 {
			t.Errorf("%q: %v allocations", c.text, n)
		}
	}
}

// printed keeps the benchmarks' strings on the heap, where a caller has them.
var printed string

func BenchmarkParse(b *testing.B) {
	for _, c := range []struct {
		text string
		unit quantity.Unit
	}{{"2200u", quantity.Farad}, {"4k7", quantity.Ohm}, {"<0.1uA", quantity.Ampere}, {".003 MFD", quantity.Farad}} {
		b.Run(c.text, func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				_, _ = quantity.Parse(c.text, c.unit)
			}
		})
	}
}

func BenchmarkParseAny(b *testing.B) {
	b.ReportAllocs()
	for b.Loop() {
		_, _ = quantity.ParseAny("2200uF")
	}
}

func BenchmarkFormat(b *testing.B) {
	for _, digits := range []int{0, 3} {
		b.Run(fmt.Sprintf("%d digits", digits), func(b *testing.B) {
			b.ReportAllocs()
			for b.Loop() {
				printed = quantity.Format(770e-6, quantity.Ampere, digits)
			}
		})
	}
}

func BenchmarkValueString(b *testing.B) {
	v := quantity.Value{Number: 0.1e-6, Unit: quantity.Ampere, Sense: quantity.AtMost, Step: 0.1e-6}
	b.ReportAllocs()
	for b.Loop() {
		printed = v.String()
	}
}
