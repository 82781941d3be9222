package quantity_test

import (
	"math"
	"strconv"
	"testing"

	"github.com/dustin/go-humanize"
	"pgregory.net/rapid"

	"goodbin/screening/quantity"
)

// siPrefixes are those that both read alike.
var siPrefixes = []string{"p", "n", "µ", "μ", "m", "", "k", "M", "G"}

// taken are the units whose symbol github.com/dustin/go-humanize takes for a unit, with the prefixes that this package reads there: farads
// have no kilo and above, hertz nothing below milli.
var taken = []struct {
	unit     quantity.Unit
	symbol   string
	prefixes []string
}{
	{quantity.Farad, "F", siPrefixes[:6]},
	{quantity.Ohm, "Ω", siPrefixes},
	{quantity.Volt, "V", siPrefixes},
	{quantity.Ampere, "A", siPrefixes},
	{quantity.Hertz, "Hz", siPrefixes[4:]},
	{quantity.Watt, "W", siPrefixes},
	{quantity.Henry, "H", siPrefixes},
}

// A number, a prefix and a unit mean what the reference (github.com/dustin/go-humanize v1.1.0, ParseSI) makes of them.
func TestPlainPrefixesReadAsTheReferenceDoes(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		u := rapid.SampledFrom(taken).Draw(t, "unit")
		text := rapid.StringMatching(`[1-9][0-9]{0,3}(\.[0-9]{1,3})?|0\.0?[1-9][0-9]?`).Draw(t, "number") +
			rapid.SampledFrom([]string{" ", ""}).Draw(t, "space") + rapid.SampledFrom(u.prefixes).Draw(t, "prefix") + u.symbol
		theirs, unit, err := humanize.ParseSI(text)
		if err != nil || unit != u.symbol {
			t.Fatalf("the reference reads %q as %g %q, %v", text, theirs, unit, err)
		}
		ours, err := quantity.Parse(text, u.unit)
		if err != nil || math.Abs(ours.Number-theirs) > 1e-12*theirs {
			t.Fatalf("%q is %g %s (%v), the reference has %g", text, ours.Number, u.symbol, err, theirs)
		}
	})
}

// What this package prints, the reference reads back.
func TestTheReferenceReadsWhatShortPrints(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		u := rapid.SampledFrom(taken).Draw(t, "unit")
		x := rapid.Float64Range(1, 10).Draw(t, "mantissa") * math.Pow10(rapid.IntRange(-9, 6).Draw(t, "exponent"))
		text := quantity.Short(x, u.unit)
		theirs, unit, err := humanize.ParseSI(text)
		if err != nil || unit != u.symbol || math.Abs(theirs-x) > 1e-11*x {
			t.Fatalf("%g prints %q; the reference reads %g %q, %v", x, text, theirs, unit, err)
		}
	})
}

// Where the reference is none: it has no ASCII u for micro, and takes it for part of the unit.
func TestTheReferenceHasNoASCIIMicro(t *testing.T) {
	theirs, unit, err := humanize.ParseSI("10 uF")
	if err != nil || theirs != 10 || unit != "uF" {
		t.Errorf("the reference reads 10 uF now as %g %q, %v: compare it", theirs, unit, err)
	}
	ours, err := quantity.Parse("10 uF", quantity.Farad)
	if err != nil || strconv.FormatFloat(ours.Number, 'g', -1, 64) != "1e-05" {
		t.Errorf("10 uF is %g F, %v", ours.Number, err)
	}
}
