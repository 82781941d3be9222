package quantity

import (
	"math"
	"strings"
	"unicode/utf8"
)

const (
	maxText     = 64   // bytes; no value that a person types is longer
	maxDigits   = 1e16 // a number beyond it has more digits than any meter, and than a float64 holds
	maxExponent = 30   // of a typed e-6
)

// Parse reads a text as a value in a known unit. The unit's symbol may be left out: "2200u" is 2200 µF as a capacitance. A text may bound
// the value ("<0.1uA", "..0.1uA", ">400V", "400V..") or say that the meter was over-range ("OL"). The error is an [*Error].
func Parse(text string, unit Unit) (Value, error) {
	s, m, err := read(text, unit)
	if err != nil {
		return Value{}, err
	}
	if s.over {
		return Value{Unit: unit, Sense: s.sense, Over: true}, nil
	}
	return s.value(m, unit), nil
}

func read(text string, unit Unit) (scanned, matched, error) {
	if unit >= units {
		return scanned{}, matched{}, &Error{Text: text, Unit: unit, Problem: "is wanted in a unit that is not known"}
	}
	s, fault := scan(text)
	if fault != "" {
		return s, matched{}, &Error{Text: text, Unit: unit, Problem: fault, Meanings: s.commaMeanings()}
	}
	if s.over {
		return s, matched{}, nil
	}
	m := match(s.letter, s.suffix, unit)
	if !m.ok {
		return s, m, s.refusal(text, unit)
	}
	return s, m, nil
}

// usualFirst lists the units that a text may name by itself, the most usual at the bench first.
var usualFirst = [...]Unit{Farad, Ohm, Volt, Ampere, Hertz, Second, Celsius, Watt, Henry, Ratio, Metre, Coulomb}

// ParseAny reads a text whose own letters say what it is: "2200uF", "35V", "4k7" (a resistance by trade), "2n2" (a capacitance). It returns
// every meaning, the most usual first: "24C" is a temperature, or else a charge. A bare number has none.
func ParseAny(text string) ([]Value, error) {
	s, fault := scan(text)
	switch {
	case fault != "":
		return nil, &Error{Text: text, Problem: fault, Meanings: s.commaMeanings()}
	case s.over:
		return nil, &Error{Text: text, Problem: "shows over-range but not of what"}
	case s.tooManyFigures():
		return nil, &Error{Text: text, Problem: "has more than three figures, so it is no letter-and-digit value such as 4k7"}
	}
	var found []Value
	for _, unit := range usualFirst {
		if unit == Metre && s.letter == "" && s.suffix == "m" {
			continue // m is milli
		}
		m := match(s.letter, s.suffix, unit)
		if m.ok && (m.spelt || unit == letterUnit(s.letter, s.suffix)) {
			found = append(found, s.value(m, unit))
		}
	}
	if len(found) == 0 {
		return nil, s.refusalAny(text)
	}
	return found, nil
}

// ParseRange reads "L..H", "L.." or "..H" in a known unit; an open bound is ±Inf. A single value gives both bounds. "1..2M" is refused: it
// could begin at 1 or at 1M. The error is an [*Error].
func ParseRange(text string, unit Unit) (low, high float64, err error) {
	refuse := func(problem string, meanings ...string) (float64, float64, error) {
		return 0, 0, &Error{Text: text, Unit: unit, Problem: problem, Meanings: meanings}
	}
	left, right, isRange := strings.Cut(text, "..")
	left, right = strings.TrimSpace(left), strings.TrimSpace(right)
	if !isRange {
		v, _, _, err := parseExact(text, unit)
		return v, v, err
	}
	if left == "" && right == "" {
		return refuse("is a range without bounds; write L..H, L.. or ..H")
	}
	if strings.HasPrefix(right, ".") {
		return refuse(threeDots)
	}
	low, high = math.Inf(-1), math.Inf(1)
	var s scanned
	var of, to matched
	if left != "" {
		if low, s, of, err = parseExact(left, unit); err != nil {
			return 0, 0, err
		}
	}
	if right != "" {
		if high, _, to, err = parseExact(right, unit); err != nil {
			return 0, 0, err
		}
	}
	if left != "" && right != "" && s.bare() && low != 0 && of.scale() != to.scale() {
		shared := s.value(to, unit).Number
		return refuse("is ambiguous", Short(low, unit)+" to "+Short(high, unit), Short(shared, unit)+" to "+Short(high, unit))
	}
	if low > high {
		return refuse("is a range whose lower end lies above its upper end")
	}
	return low, high, nil
}

func parseExact(text string, unit Unit) (float64, scanned, matched, error) {
	s, m, err := read(text, unit)
	if err != nil {
		return 0, s, m, err
	}
	if s.over || s.sense != Exactly {
		return 0, s, m, &Error{Text: text, Unit: unit, Problem: "is a bound or over-range, and one number is wanted here"}
	}
	return s.value(m, unit).Number, s, m, nil
}

// scanned is a text taken apart: how it bounds, sign, digits and decimal exponent, and the letters. Its strings are parts of the text, so
// that taking apart allocates nothing.
type scanned struct {
	sense    Sense
	over     bool
	negative bool
	digits   uint64
	places   int    // digits after the decimal sign
	exponent int    // of a typed e-6
	typed    string // the number up to its letters, in ASCII: 4 of 4k7, 2,2 of 2,2m
	letter   string // that stands for the decimal sign: k of 4k7
	decimals string // the digits after such a letter: 7 of 4k7
	suffix   string // prefix and unit after the number
	grouped  bool   // a comma followed by three digits, which could separate thousands
}

// bare reports whether a number stands without any letter.
func (s *scanned) bare() bool { return s.letter == "" && s.suffix == "" && s.exponent == 0 }

// tooManyFigures reports a letter-and-digit value with more than the three significant figures of IEC 60062, trailing zeros aside: a word
// such as 2n3904 is a type number and no capacitance.
func (s *scanned) tooManyFigures() bool {
	d := s.digits
	for d > 0 && d%10 == 0 {
		d /= 10
	}
	return s.letter != "" && d > 999
}

// commaMeanings lists both readings of a number with an ambiguous comma.
func (s *scanned) commaMeanings() []string {
	if !s.grouped {
		return nil
	}
	return []string{strings.Replace(s.typed, ",", ".", 1), strings.Replace(s.typed, ",", "", 1)}
}

// value puts number and scale together.
func (s *scanned) value(m matched, unit Unit) Value {
	e := m.exponent + s.exponent - s.places
	x := scaled(float64(s.digits), e) * m.factor
	if s.negative && x != 0 {
		x = -x
	}
	return Value{Number: x, Unit: unit, Sense: s.sense, Step: scaled(1, e) * m.factor}
}

// scaled is x·10^e. To divide by a power of ten, instead of multiplying by a negative one, keeps typed decimals exact.
func scaled(x float64, e int) float64 {
	if e < 0 {
		return x / math.Pow10(-e)
	}
	return x * math.Pow10(e)
}

const threeDots = "has three dots; a range or bound has two, and half is written 0.5"

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
	if strings.HasPrefix(t, "...") || strings.HasSuffix(t, "...") {
		return s, threeDots
	}
	t = s.cutSense(t)
	if isOver(t) {
		if s.sense == AtMost {
			return s, "cannot be: over-range is no upper bound"
		}
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

var senseMarks = [...]struct {
	mark  string
	sense Sense
}{{"<=", AtMost}, {">=", AtLeast}, {"<", AtMost}, {">", AtLeast}, {"≤", AtMost}, {"≥", AtLeast}, {"..", AtMost}}

// cutSense takes <, >, ≤, ≥, a leading or a trailing ".." off.
func (s *scanned) cutSense(t string) string {
	for i := range senseMarks {
		if rest, ok := strings.CutPrefix(t, senseMarks[i].mark); ok {
			s.sense = senseMarks[i].sense
			return strings.TrimSpace(rest)
		}
	}
	if rest, ok := strings.CutSuffix(t, ".."); ok {
		s.sense = AtLeast
		return strings.TrimSpace(rest)
	}
	return t
}

// isOver knows what meters show above their range, and the zero that is typed for its O.
func isOver(t string) bool {
	return strings.EqualFold(t, "OL") || strings.EqualFold(t, "0L") || strings.EqualFold(t, "O.L") || strings.EqualFold(t, "0.L")
}
