package quantity

import "strings"

// matched is what the letters of a number mean in one unit.
type matched struct {
	ok       bool
	spelt    bool    // the unit itself was written
	exponent int     // power of ten
	factor   float64 // 60 for minutes, else 1
}

// scale is what one typed unit is worth, in SI.
func (m matched) scale() float64 { return scaled(m.factor, m.exponent) }

func means(exponent int, spelt bool) matched {
	return matched{ok: true, spelt: spelt, exponent: exponent, factor: 1}
}

// unitWords are the spellings of a unit that follow a prefix.
var unitWords = [units][]string{
	Farad:   {"F", "f"},
	Ohm:     {"Ω", "\u2126", "ohms", "ohm", "Ohms", "Ohm", "OHMS", "OHM", "R"},
	Volt:    {"V", "v"},
	Ampere:  {"A", "a"},
	Hertz:   {"Hz", "hz", "HZ"},
	Second:  {"s", "sec"},
	Celsius: {"°C", "°c", "ºC", "℃", "degC", "C"},
	Watt:    {"W", "w"},
	Henry:   {"H"},
	Ratio:   {"%"},
	Metre:   {"m"},
	Coulomb: {"C"},
}

// printWord is a word that carries its prefix in it, as old print and old hands write it in any case of letter.
type printWord struct {
	word     string
	exponent int
}

var (
	faradPrint = [...]printWord{
		{"mfd", -6},
		{"mfd.", -6},
		{"mmf", -12},
		{"mmfd", -12},
		{"uuf", -12},
		{"μμf", -12}, // EqualFold takes U+00B5 and U+03BC for the same letter
		{"uf", -6},
		{"nf", -9},
		{"pf", -12},
	}
	ohmPrint = [...]printWord{{"meg", 6}, {"megohm", 6}, {"megohms", 6}}
)

func printed(list []printWord, word string) matched {
	for i := range list {
		if strings.EqualFold(list[i].word, word) {
			return means(list[i].exponent, true)
		}
	}
	return matched{}
}

// match finds what the letters of a number mean in a unit: the letter that stands for the decimal sign, if any, and the suffix.
func match(letter, suffix string, unit Unit) matched {
	if letter != "" {
		return matchLetter(letter, suffix, unit)
	}
	if suffix == "" {
		return means(ratioExponent(unit), false)
	}
	if unit == Metre && suffix == "m" {
		return means(0, true) // Short prints metres so; with a prefix m is milli here too
	}
	if e, ok := prefix(suffix, unit); ok {
		return means(e, false)
	}
	switch unit {
	case Farad:
		if oldMicroOrMilli(suffix) {
			return matched{}
		}
		if m := printed(faradPrint[:], suffix); m.ok {
			return m
		}
	case Ohm:
		if m := printed(ohmPrint[:], suffix); m.ok {
			return m
		}
	case Second:
		switch suffix {
		case "min":
			return matched{ok: true, spelt: true, factor: 60}
		case "h":
			return matched{ok: true, spelt: true, factor: 3600}
		}
	}
	for _, word := range unitWords[unit] {
		if head, ok := strings.CutSuffix(suffix, word); ok {
			if e, ok := prefix(strings.TrimSpace(head), unit); ok {
				return means(e+ratioExponent(unit), true)
			}
		}
	}
	return matched{}
}

// ratioExponent is the power of ten in which people write a unit's numbers: a ratio is typed and printed in percent.
func ratioExponent(unit Unit) int {
	if unit == Ratio {
		return -2
	}
	return 0
}

// letterUnits are the letters that stand for a unit instead of a prefix, with their power of ten (IEC 60062: R and L for ohms, F for
// farads; V by trade).
var letterUnits = [...]struct {
	letter   string
	unit     Unit
	exponent int
}{{"R", Ohm, 0}, {"L", Ohm, -3}, {"F", Farad, 0}, {"V", Volt, 0}}

// matchLetter reads 4k7, 4k7 ohm, R47: the letter is prefix or unit, and after the digits the unit's word may follow.
func matchLetter(letter, suffix string, unit Unit) matched {
	for _, l := range letterUnits {
		if l.letter == letter {
			ok := l.unit == unit && (suffix == "" || unit == Ohm && suffix != "R" && isWord(suffix, Ohm))
			return matched{ok: ok, spelt: true, exponent: l.exponent, factor: 1}
		}
	}
	e, ok := prefix(letter, unit)
	if !ok || suffix != "" && !isWord(suffix, unit) {
		return matched{}
	}
	return means(e, suffix != "")
}

func isWord(word string, unit Unit) bool {
	for _, w := range unitWords[unit] {
		if w == word {
			return true
		}
	}
	return false
}

// letterUnit is what a value means by trade when no unit is typed: IEC 60062 has k, M, G, T for ohms only and p, n, µ, m in the place of
// the decimal sign for farads only. A prefix m after a number, and T, say nothing by themselves.
func letterUnit(letter, suffix string) Unit {
	switch letter + suffix {
	case "k", "K", "M", "G":
		return Ohm
	case "p", "n", "u", "µ", "μ":
		return Farad
	}
	switch letter {
	case "T":
		return Ohm
	case "m":
		return Farad
	}
	return One
}

// prefixRange holds the powers of ten, from lowest to highest prefix, that a unit takes when read. Farads take no kilo and no mega: K and M
// after a capacitor's number are tolerance letters. A time in kiloseconds is a slip.
var prefixRange = [units]struct{ low, high int }{
	One:     {-12, 9},
	Farad:   {-12, -3},
	Ohm:     {-12, 12},
	Volt:    {-12, 9},
	Ampere:  {-12, 9},
	Hertz:   {-3, 9},
	Second:  {-12, -3},
	Watt:    {-12, 9},
	Henry:   {-12, 9},
	Metre:   {-12, 3},
	Coulomb: {-12, 3},
}

// prefix returns the power of ten of an SI prefix that the unit takes; "" is 0.
func prefix(p string, unit Unit) (int, bool) {
	e := 0
	switch p {
	case "":
		return 0, true
	case "p":
		e = -12
	case "n":
		e = -9
	case "u", "µ", "μ":
		e = -6
	case "m":
		e = -3
	case "k", "K":
		e = 3
	case "M":
		e = 6
	case "G":
		e = 9
	case "T":
		e = 12
	default:
		return 0, false
	}
	r := prefixRange[unit]
	return e, r.low <= e && e <= r.high
}

// oldMicroOrMilli reports the spellings that are microfarads in old print and millifarads to everybody else.
func oldMicroOrMilli(suffix string) bool { return suffix == "MF" || suffix == "mf" || suffix == "Mf" }
