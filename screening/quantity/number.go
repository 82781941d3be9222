package quantity

import (
	"strings"
	"unicode/utf8"
)

const tooManyDigits = "has more digits than any meter"

// number reads digits, the decimal sign or the letter in its place, an exponent and the letters after it.
func (s *scanned) number(t string) (fault string) {
	i, signs, comma := 0, 0, -1
	for ; i < len(t) && (isDigit(t[i]) || t[i] == '.' || t[i] == ','); i++ {
		switch {
		case t[i] == ',':
			comma = i
			signs++
		case t[i] == '.':
			signs++
		case !s.push(t[i]):
			return tooManyDigits
		case signs > 0:
			s.places++
		}
	}
	figures := i - signs
	if strings.Contains(t[:i], "..") {
		return "is a range, and one value is wanted here"
	}
	if signs > 1 {
		return "has more than one decimal sign; write thousands without separators"
	}
	rest := t[i:]
	if figures > 0 {
		if rest, fault = s.cutExponent(rest); fault != "" {
			return fault
		}
	}
	s.typed = t[:len(t)-len(rest)]
	if comma >= 0 && s.places == 3 && beginsThousands(t[:comma]) {
		s.grouped, s.typed = true, t[:i]
		return "is ambiguous"
	}
	if rest, fault = s.letterForDecimal(rest, figures, signs > 0); fault != "" {
		return fault
	}
	if figures == 0 && s.decimals == "" {
		return "has no number in it"
	}
	s.suffix = strings.TrimSpace(rest)
	return ""
}

// push appends a digit; it reports false where there is no room for another.
func (s *scanned) push(c byte) bool {
	if s.digits > maxDigits {
		return false
	}
	s.digits = s.digits*10 + uint64(c-'0')
	return true
}

// beginsThousands reports whether the digits before a comma could be the first of a number with separated thousands. A lone zero begins
// none, so that 0,061 is a plain decimal.
func beginsThousands(t string) bool { return t != "" && t != "0" }

func isDigit(c byte) bool { return c >= '0' && c <= '9' }

// cutExponent takes e-6 or E3 off the front.
func (s *scanned) cutExponent(t string) (rest, fault string) {
	if t == "" || t[0] != 'e' && t[0] != 'E' {
		return t, ""
	}
	i, negative, e := 1, false, 0
	if i < len(t) && (t[i] == '-' || t[i] == '+') {
		negative = t[i] == '-'
		i++
	}
	start := i
	for ; i < len(t) && isDigit(t[i]); i++ {
		e = min(e*10+int(t[i]-'0'), maxExponent+1)
	}
	if i == start {
		return t, ""
	}
	if e > maxExponent {
		return t, "has a power of ten beyond anything on a bench"
	}
	if negative {
		e = -e
	}
	s.exponent = e
	return t[i:], ""
}

// decimalLetters may stand for the decimal sign: those of IEC 60062, K beside k, and V as in 6V3.
const decimalLetters = "pnuµμmkKMGTRLFV"

// letterForDecimal reads a letter that stands for the decimal sign and the digits after it: k7 of 4k7, R47, V3 of 6V3. It returns what
// follows, or t itself where there is no such letter.
func (s *scanned) letterForDecimal(t string, figures int, hasSign bool) (rest, fault string) {
	letter, size := utf8.DecodeRuneInString(t)
	if size == 0 || size >= len(t) || !isDigit(t[size]) || !strings.ContainsRune(decimalLetters, letter) {
		return t, ""
	}
	if hasSign || s.exponent != 0 {
		return t, "has a decimal sign and a letter in its place"
	}
	if figures == 0 && (letter == 'V' || letter == 'F') {
		return t, "begins with a unit"
	}
	i := size
	for ; i < len(t) && isDigit(t[i]); i++ {
		if !s.push(t[i]) {
			return t, tooManyDigits
		}
		s.places++
	}
	s.letter, s.decimals = t[:size], t[size:i]
	return t[i:], ""
}
