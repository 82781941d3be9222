package quantity

import (
	"strings"
	"unicode"
)

// Error says why a text is not a value, what was wrong with it and what would be right.
type Error struct {
	Text     string   // as given
	Unit     Unit     // that was wanted
	Problem  string   // in words
	Meanings []string // where the text is ambiguous: what it could mean
}

// Error returns one sentence that shows the text sanitised.
func (e *Error) Error() string {
	text := Quote(e.Text) + " " + e.Problem
	if len(e.Meanings) > 0 {
		text += ": " + strings.Join(e.Meanings, ", or ")
	}
	return text
}

const quotedRunes = 40

// Quote returns text in double quotes, fit for a screen: control and escape characters are left out, every sort of space is an ordinary
// one, and it is cut to 40 characters.
func Quote(text string) string {
	var b strings.Builder
	b.WriteByte('"')
	n := 0
	for _, r := range text {
		if unicode.Is(unicode.Zs, r) {
			r = ' '
		}
		if !unicode.IsPrint(r) || r == unicode.ReplacementChar {
			continue
		}
		if n == quotedRunes {
			b.WriteRune('…')
			break
		}
		b.WriteRune(r)
		n++
	}
	b.WriteByte('"')
	return b.String()
}
