package quantity

import (
	"math"
	"strings"
	"unicode/utf8"
)

const maxText = 64 // bytes; no value that a person types is longer

// Parse reads a text as a value in a known unit. The unit's symbol may be left out: "2200u" is 2200 µF as a capacitance. The error is an
// [*Error].
func Parse(text string, unit Unit) (Value, error) {
	s, fault := scan(text)
	if fault != "" {
		return Value{}, &Error{Text: text, Unit: unit, Problem: fault, Meanings: s.meanings()}
	}
	if s.over {
		return Value{Unit: unit, Sense: s.sense, Over: true}, nil
	}
	m := match(s.suffix, unit, s.code)
	if m.ok {
		return s.value(m, unit), nil
	}
	return Value{}, s.refusal(text, unit, m)
}

// ParseAny reads a text whose own letters say what it is: "2200uF", "35V", "4k7" (a resistance by trade), "2n2" (a capacitance). It returns
// every meaning, the most usual first. A bare number has none.
func ParseAny(text string) ([]Value, error) {
	s, fault := scan(text)
	if fault != "" {
		return nil, &Error{Text: text, Problem: fault, Meanings: s.meanings()}
	}
	if s.over {
		return nil, &Error{Text: text, Problem: "shows over-range but not of what"}
	}
	var found []Value
	for _, unit := range [...]Unit{Farad, Ohm, Volt, Ampere, Hertz, Second, Celsius, Watt, Henry, Ratio, Coulomb} {
		m := match(s.suffix, unit, s.code)
		if m.ambiguous != "" && m.spelt {
			return nil, s.refusal(text, unit, m)
		}
		if m.ok && (m.spelt || unit == letterUnit(s.suffix)) {
			found = append(found, s.value(m, unit))
		}
	}
	if len(found) == 0 {
		return nil, &Error{Text: text, Problem: "does not say what it is: add a unit, as in 2200uF, 35V or 4k7"}
	}
	return found, nil
}

// letterUnit is what a value means by trade when only a prefix letter is typed.
func letterUnit(suffix string) Unit {
	switch suffix {
	case "k", "K", "M", "G", "R", "L":
		return Ohm
	case "p", "n", "u", "µ", "μ":
		return Farad
	}
	return One
}

// ParseRange reads "L..H", "L.." or "..H" in a known unit; an open bound is ±Inf. A single value gives both bounds.
func ParseRange(text string, unit Unit) (low, high float64, err error) {
	left, right, isRange := strings.Cut(text, "..")
	low, high = math.Inf(-1), math.Inf(1)
	if !isRange {
		v, err := parseExact(text, unit)
		return v, v, err
	}
	if strings.TrimSpace(left) == "" && strings.TrimSpace(right) == "" {
		return 0, 0, &Error{Text: text, Unit: unit, Problem: "is a range without bounds; write L..H, L.. or ..H"}
	}
	if strings.TrimSpace(left) != "" {
		if low, err = parseExact(left, unit); err != nil {
			return 0, 0, err
		}
	}
	if strings.TrimSpace(right) != "" {
		if high, err = parseExact(right, unit); err != nil {
			return 0, 0, err
		}
	}
	if low > high {
		return 0, 0, &Error{Text: text, Unit: unit, Problem: "is a range whose lower end lies above its upper end"}
	}
	return low, high, nil
}

func parseExact(text string, unit Unit) (float64, error) {
	v, err := Parse(text, unit)
	if err != nil {
		return 0, err
	}
	if v.Over || v.Sense != Exactly {
		return 0, &Error{Text: text, Unit: unit, Problem: "is not one number"}
	}
	return v.Number, nil
}

// scanned is a text taken apart: sign, digits and decimal exponent, what follows, and how it bounds.
type scanned struct {
	sense    Sense
	over     bool
	negative bool
	digits   uint64
	places   int    // digits after the decimal sign
	exponent int    // of a typed e-6
	suffix   string // letters after the number; of a letter-and-digit value its letter and what follows the last digit
	code     bool   // the decimal sign was a letter: 4k7
	grouped  string // set where a comma is followed by three digits: the text of the number
}

// meanings lists both readings of a number with an ambiguous comma.
func (s *scanned) meanings() []string {
	if s.grouped == "" {
		return nil
	}
	return []string{strings.Replace(s.grouped, ",", ".", 1), strings.Replace(s.grouped, ",", "", 1)}
}

// value puts number and scale together. Dividing by a power of ten, instead of multiplying by a negative one, keeps typed decimals exact.
func (s *scanned) value(m matched, unit Unit) Value {
	scale := func(x float64, e int) float64 {
		if e < 0 {
			return x / math.Pow10(-e)
		}
		return x * math.Pow10(e)
	}
	e := m.exponent + s.exponent - s.places
	x := scale(float64(s.digits), e) * m.factor
	if s.negative {
		x = -x
	}
	return Value{Number: x, Unit: unit, Sense: s.sense, Step: scale(1, e) * m.factor}
}

// scan takes a text apart; fault says in words why it cannot.
func scan(text string) (s scanned, fault string) {
	t := strings.TrimSpace(text)
	switch {
	case t == "":
		return s, "is empty"
	case len(t) > maxText:
		return s, "is too long for a value"
	case !utf8.ValidString(t):
		return s, "is not readable text"
	}
	for _, r := range t {
		if r < ' ' || r == 0x7f || r >= 0x80 && r < 0xa0 {
			return s, "holds a control character"
		}
	}
	t = s.cutSense(t)
	if isOver(t) {
		s.over = true
		return s, ""
	}
	if t != "" && (t[0] == '-' || t[0] == '+') {
		s.negative, t = t[0] == '-', strings.TrimSpace(t[1:])
	} else if r, ok := strings.CutPrefix(t, "−"); ok {
		s.negative, t = true, strings.TrimSpace(r)
	}
	return s, s.number(t)
}

// cutSense takes <, >, ≤, ≥, a leading or a trailing ".." off.
func (s *scanned) cutSense(t string) string {
	for _, p := range [...]struct {
		mark  string
		sense Sense
	}{{"<=", AtMost}, {">=", AtLeast}, {"<", AtMost}, {">", AtLeast}, {"≤", AtMost}, {"≥", AtLeast}, {"..", AtMost}} {
		if rest, ok := strings.CutPrefix(t, p.mark); ok {
			s.sense = p.sense
			return strings.TrimSpace(rest)
		}
	}
	if rest, ok := strings.CutSuffix(t, ".."); ok {
		s.sense = AtLeast
		return strings.TrimSpace(rest)
	}
	return t
}

func isOver(t string) bool {
	return strings.EqualFold(t, "OL") || strings.EqualFold(t, "0L") || strings.EqualFold(t, "O.L") || strings.EqualFold(t, "0.L")
}

// number reads digits, the decimal sign or the letter in its place, an exponent and the letters after it.
func (s *scanned) number(t string) (fault string) {
	i, before, separators := 0, 0, 0
	for ; i < len(t) && (isDigit(t[i]) || t[i] == '.' || t[i] == ','); i++ {
		switch {
		case !isDigit(t[i]):
			if t[i] == ',' && i+4 <= len(t) && threeDigits(t[i+1:]) {
				s.grouped = t[:i+4]
				return "is ambiguous"
			}
			separators++
		case s.digits > 1e16:
			return "has more digits than any meter"
		default:
			s.digits = s.digits*10 + uint64(t[i]-'0')
			before++
			if separators > 0 {
				s.places++
			}
		}
	}
	if separators > 1 {
		return "has more than one decimal sign"
	}
	rest := t[i:]
	if before > 0 {
		rest = s.cutExponent(rest)
	}
	rest = strings.TrimSpace(rest)
	rest, fault = s.letterForDecimal(rest, before, separators)
	if fault != "" {
		return fault
	}
	if before == 0 && s.places == 0 {
		return "has no number in it"
	}
	s.suffix = rest
	return ""
}

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

func threeDigits(t string) bool {
	return len(t) >= 3 && isDigit(t[0]) && isDigit(t[1]) && isDigit(t[2]) && (len(t) == 3 || !isDigit(t[3]))
}

// cutExponent takes e-6 or E3 off the front.
func (s *scanned) cutExponent(t string) string {
	if t == "" || t[0] != 'e' && t[0] != 'E' {
		return t
	}
	i, negative, e := 1, false, 0
	if i < len(t) && (t[i] == '-' || t[i] == '+') {
		negative = t[i] == '-'
		i++
	}
	start := i
	for ; i < len(t) && isDigit(t[i]) && i-start < 3; i++ {
		e = e*10 + int(t[i]-'0')
	}
	if i == start || e > 30 {
		return t
	}
	if negative {
		e = -e
	}
	s.exponent = e
	return t[i:]
}

// letterForDecimal reads the digits after a letter that stands for the decimal sign: k7 of 4k7, R47, V3 of 6V3. The letter stays in the
// suffix.
func (s *scanned) letterForDecimal(t string, before, separators int) (suffix, fault string) {
	letter, size := utf8.DecodeRuneInString(t)
	if size == 0 || !strings.ContainsRune("pnuµμmkKMGTRLV", letter) || size >= len(t) || !isDigit(t[size]) {
		return t, ""
	}
	if separators > 0 || s.exponent != 0 {
		return t, "has a decimal sign and a letter in its place"
	}
	i := size
	for ; i < len(t) && isDigit(t[i]); i++ {
		if s.digits > 1e16 {
			return t, "has more digits than any meter"
		}
		s.digits = s.digits*10 + uint64(t[i]-'0')
		s.places++
	}
	s.code = true
	if before == 0 && letter == 'V' {
		return t, "begins with a unit"
	}
	switch tail := strings.TrimSpace(t[i:]); tail {
	case "":
		return t[:size], ""
	case "F", "f":
		return t[:size] + "F", ""
	case "Ω", "\u2126", "ohm", "ohms":
		if letter == 'R' || letter == 'L' {
			return t[:size], ""
		}
		return t[:size] + "Ω", ""
	case "A", "V", "H":
		return t[:size] + tail, ""
	}
	return t, "is not understood after its digits"
}
