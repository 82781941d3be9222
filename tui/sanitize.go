package tui

import (
	"strings"
	"unicode"
	"unicode/utf8"
)

// replacement stands for a character that must not reach the terminal.
const replacement = '\uFFFD'

// asciiSpelling spells the signs that goodbin prints where a terminal has nothing but ASCII.
var asciiSpelling = map[rune]string{
	'\u00b5': "u", '\u03bc': "u", '\u03a9': "ohm", '\u2126': "ohm", '±': "+/-", '≤': "<=", '≥': ">=", '×': "x", '·': "*", '÷': "/", '−': "-", '–': "-", '—': "-",
	'δ': "delta", 'Δ': "delta", 'ϑ': "T", '°': "deg ", '…': "...", '√': "sqrt ", '²': "^2", '³': "^3", '½': "1/2", '¼': "1/4", '“': `"`, '”': `"`,
	'’': "'", '‘': "'", 'β': "beta", 'α': "alpha", 'τ': "tau", 'σ': "sigma", 'Φ': "Phi", 'π': "pi", '≈': "~", '→': "->", '←': "<-", '∞': "inf",
	'₀': "0", '₁': "1", '₂': "2", '⁻': "-", '⁶': "^6", '⁹': "^9", '\u00a0': " ", '\u202f': " ", '\u2009': " ", 'ä': "ae", 'ö': "oe", 'ü': "ue",
	'Ä': "Ae", 'Ö': "Oe", 'Ü': "Ue", 'ß': "ss", 'é': "e", 'è': "e", 'à': "a", 'ç': "c", 'ñ': "n",
}

// clean makes a text that was typed or read from a file fit for one line of the screen. Control characters, terminal escapes, invalid
// bytes and characters that hide or reorder text are replaced by a visible stand-in, line breaks and tabs by a space; with ascii set,
// everything else is spelt in ASCII. It is the only way by which such a text reaches the screen.
func clean(text string, ascii bool) string {
	if plain(text) {
		return text
	}
	var b strings.Builder
	b.Grow(len(text))
	for i, r := range text {
		switch {
		case r >= ' ' && r < 0x7f:
			b.WriteByte(byte(r))
		case r == '\n' || r == '\r' || r == '\t' || r == '\v' || r == '\f' || r == '\u2028' || r == '\u2029' || r == '\u0085':
			b.WriteByte(' ')
		case r == utf8.RuneError && !strings.HasPrefix(text[i:], "\uFFFD"), !unicode.IsGraphic(r):
			writeSpelt(&b, replacement, ascii)
		default:
			writeSpelt(&b, r, ascii)
		}
	}
	return b.String()
}

func writeSpelt(b *strings.Builder, r rune, ascii bool) {
	if !ascii {
		b.WriteRune(r)
		return
	}
	if spelt, ok := asciiSpelling[r]; ok {
		b.WriteString(spelt)
		return
	}
	b.WriteByte('?')
}

func plain(text string) bool {
	for i := range len(text) {
		if text[i] < ' ' || text[i] > '~' {
			return false
		}
	}
	return true
}
