package entry

import (
	"fmt"
	"strings"
	"unicode/utf8"
)

// Limits on what is read. Nothing a person types or a bench writes comes near them; what does is not an entry.
const (
	MaxWords     = 400 // words of one part
	MaxWordBytes = 1000
	MaxRepeats   = 200 // readings in one series
	MaxSections  = 12  // sections of one part
	shownRunes   = 40  // of an offending text, in an error
)

// Error is a word or cell that cannot be understood: what was read, where, and what would be right.
type Error struct {
	Of       string   // the name before the value; "" for a bare word
	Problem  string   // in words, with the offending text quoted
	Meanings []string // where it could mean several things
	Hint     string   // what would be right; "" where Problem says it
}

// Error returns the message in one line.
func (e *Error) Error() string {
	var b strings.Builder
	if e.Of != "" {
		b.WriteString(e.Of)
		b.WriteString(": ")
	}
	b.WriteString(e.Problem)
	for i, m := range e.Meanings {
		b.WriteString([]string{": ", "; or "}[min(i, 1)])
		b.WriteString(m)
	}
	return b.String()
}

// problem builds an Error without a hint.
func problem(of, format string, args ...any) *Error {
	return &Error{Of: clean(of), Problem: fmt.Sprintf(format, args...)}
}

func (e *Error) hint(format string, args ...any) *Error {
	e.Hint = fmt.Sprintf(format, args...)
	return e
}

// shown quotes a text for an error: control characters and terminal escapes become visible, and what is too long is cut.
func shown(text string) string { return fmt.Sprintf("%q", clip(text)) }

// clean makes a name fit to be printed without quotes.
func clean(name string) string {
	quoted := shown(name)
	return quoted[1 : len(quoted)-1]
}

func clip(text string) string {
	if utf8.RuneCountInString(text) <= shownRunes {
		return text
	}
	runes := 0
	for i := range text {
		if runes == shownRunes {
			return text[:i] + "…"
		}
		runes++
	}
	return text
}
