package quantity

import "strings"

// matched is what the letters after a number mean in one unit.
type matched struct {
	ok        bool
	spelt     bool    // the unit itself was written
	exponent  int     // power of ten
	factor    float64 // 60 for minutes, else 1
	ambiguous string  // "" or which ambiguity
}

// unitWords are the spellings of a unit, the prefix before them. Old print has its own words with the prefix in them.
var unitWords = [units][]string{
	Farad:   {"F", "f"},
	Ohm:     {"Ω", "\u2126", "ohms", "ohm", "Ohm", "OHM", "R"},
	Volt:    {"V", "v"},
	Ampere:  {"A", "a"},
	Hertz:   {"Hz", "hz", "HZ"},
	Second:  {"s", "sec"},
	Celsius: {"°C", "C", "degC", "°c"},
	Watt:    {"W", "w"},
	Henry:   {"H"},
	Ratio:   {"%"},
	Metre:   {"m"},
	Coulomb: {"C"},
}

// oldPrint holds the words of old print that carry their prefix, by lower case.
var oldPrint = [...]struct {
	word     string
	exponent int
}{
	{"mfd", -6}, {"mfd.", -6}, {"mmf", -12}, {"mmfd", -12}, {"uuf", -12}, {"µµf", -12}, {"μμf", -12},
}

// match finds what a suffix means in a unit. code says that the suffix's letter stood for the decimal sign.
func match(suffix string, unit Unit, code bool) matched {
	switch unit {
	case Farad:
		if m := matchFarad(suffix, code); m.ok || m.ambiguous != "" {
			return m
		}
	case Second:
		switch suffix {
		case "min":
			return matched{ok: true, spelt: true, factor: 60}
		case "h":
			return matched{ok: true, spelt: true, factor: 3600}
		}
	case Metre:
		if suffix == "m" {
			return matched{ok: true, spelt: true, factor: 1}
		}
	case Ratio:
		if suffix == "%" {
			return matched{ok: true, spelt: true, exponent: -2, factor: 1}
		}
		return matched{ok: suffix == "", exponent: -2, factor: 1}
	}
	if unit == Ohm && suffix == "L" && code {
		return matched{ok: true, exponent: -3, factor: 1}
	}
	if e, ok := prefix(suffix, unit); ok {
		return matched{ok: true, exponent: e, factor: 1}
	}
	for _, word := range unitWords[min(unit, units-1)] {
		if head, ok := strings.CutSuffix(suffix, word); ok {
			if e, ok := prefix(strings.TrimSpace(head), unit); ok {
				return matched{ok: true, spelt: true, exponent: e, factor: 1}
			}
		}
	}
	return matched{}
}

// matchFarad knows the old print and the letters that mean something else on a capacitor.
func matchFarad(suffix string, code bool) matched {
	for _, p := range oldPrint {
		if strings.EqualFold(suffix, p.word) {
			return matched{ok: true, spelt: true, exponent: p.exponent, factor: 1}
		}
	}
	switch {
	case suffix == "MF" || suffix == "mf" || suffix == "Mf":
		return matched{ambiguous: suffix, spelt: true}
	case suffix == "K" && !code, suffix == "M" && !code:
		return matched{ambiguous: suffix}
	}
	return matched{}
}

// prefix returns the power of ten of an SI prefix that the unit takes; "" is 0.
func prefix(p string, unit Unit) (int, bool) {
	switch p {
	case "":
		return 0, true
	case "p", "n", "u", "µ", "μ", "m", "k", "K", "M", "G", "T":
	default:
		return 0, false
	}
	if unit == Celsius || unit == Ratio {
		return 0, false
	}
	small := unit != Hertz || p == "m"
	switch p {
	case "p":
		return -12, small
	case "n":
		return -9, small
	case "u", "µ", "μ":
		return -6, small
	case "m":
		return -3, true
	case "k", "K":
		return 3, unit != Farad && unit != Second
	case "M":
		return 6, unit != Farad && unit != Second && unit != Metre && unit != Coulomb
	case "G":
		return 9, unit == Ohm || unit == Hertz
	}
	return 12, unit == Ohm
}

// refusal says why a suffix does not fit the unit that was wanted.
func (s *scanned) refusal(text string, unit Unit, m matched) error {
	e := &Error{Text: text, Unit: unit}
	number, _ := strings.CutSuffix(strings.TrimSpace(text), s.suffix)
	number = strings.TrimSpace(number)
	switch m.ambiguous {
	case "MF", "mf", "Mf":
		e.Problem = "is ambiguous"
		e.Meanings = []string{number + " microfarad in old print (write " + number + "uF)", number + " millifarad (write " + number + "mF)"}
		return e
	case "K":
		e.Problem = "is ambiguous on a capacitor"
		e.Meanings = []string{number + " pF with the tolerance letter K, ±10 %", number + " thousand pF in old print (write " + number + "nF)"}
		return e
	case "M":
		e.Problem = "is not a capacitance: M after a capacitor's number is the tolerance letter ±20 %; write the unit, such as " + number + "uF"
		return e
	}
	for u := Farad; u < units; u++ {
		if u == unit {
			continue
		}
		if other := match(s.suffix, u, s.code); other.ok && other.spelt {
			e.Problem = "is " + u.Noun() + "; want " + unit.Noun() + " such as " + unit.Example()
			return e
		}
	}
	e.Problem = "is not " + unit.Noun() + " such as " + unit.Example()
	if s.suffix != "" {
		e.Problem += "; " + Quote(s.suffix) + " is not understood"
	}
	return e
}
