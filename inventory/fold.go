package inventory

import (
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// fold brings text into the form in which words are compared, so that what a person types finds what the program prints: "2200uf" finds
// "2200 µF". Lower case, µ and μ as u, Ω as ohm, no space between a number and what follows, a comma between digits as a point.
func fold(text string) string {
	if isFolded(text) {
		return text
	}
	var b strings.Builder
	b.Grow(len(text))
	afterDigit := false
	for i, r := range text {
		switch {
		case r == 'µ' || r == 'μ':
			r = 'u'
		case r == 'Ω' || r == '\u2126':
			b.WriteString("ohm")
			afterDigit = false
			continue
		case afterDigit && unicode.IsSpace(r):
			if next, _ := utf8.DecodeRuneInString(text[i+utf8.RuneLen(r):]); unicode.IsLetter(next) || next == '%' || next == '°' {
				continue
			}
			r = ' '
		case afterDigit && r == ',':
			if i+1 < len(text) && text[i+1] >= '0' && text[i+1] <= '9' {
				r = '.'
			}
		case unicode.IsSpace(r):
			r = ' '
		default:
			r = unicode.ToLower(r)
		}
		b.WriteRune(r)
		afterDigit = r >= '0' && r <= '9'
	}
	return b.String()
}

// isFolded reports whether plain ASCII text stays as it is; most does.
func isFolded(text string) bool {
	digit := false
	for i := range len(text) {
		c := text[i]
		if c >= utf8.RuneSelf || c >= 'A' && c <= 'Z' || c < ' ' || digit && (c == ' ' || c == ',') {
			return false
		}
		digit = c >= '0' && c <= '9'
	}
	return true
}

// idWord is what a word asks of an id.
type idWord struct {
	digits uint32 // the lot begins with these digits, or is this lot where exact; 0: the word is no id
	exact  bool   // "12-": the lot is over
	number string // "12-0": the number, as written, begins with this
}

// parseIDWord understands "12", "12-", "12-07".
func parseIDWord(word string) idWord {
	lot, number, exact := strings.Cut(word, "-")
	n := parseNumber(lot)
	if n == 0 || lot[0] == '0' || strings.Trim(number, "0123456789") != "" {
		return idWord{}
	}
	return idWord{n, exact, number}
}

func (w idWord) matches(id ID) bool {
	lot := id.Lot
	if w.digits == 0 {
		return false
	}
	if w.exact {
		if lot != w.digits {
			return false
		}
		if w.number == "" {
			return true
		}
		var buffer [12]byte
		text := buffer[:0]
		if id.Number < 10 {
			text = append(text, '0')
		}
		return strings.HasPrefix(string(strconv.AppendUint(text, uint64(id.Number), 10)), w.number)
	}
	for lot > w.digits {
		lot /= 10
	}
	return lot == w.digits
}
