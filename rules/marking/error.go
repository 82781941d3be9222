package marking

import (
	"strings"

	"goodbin/screening/quantity"
)

// Error says why a marking has no meaning. Its text is safe to put on a screen.
type Error struct {
	Text    string
	Problem string   // "is none of the markings known here"
	Tried   []string // the schemes that were tried; nil where the text is no print at all
}

// Error quotes the text and says what is wrong with it and what was tried.
func (e *Error) Error() string {
	s := quantity.Quote(e.Text) + " " + e.Problem
	if e.Tried != nil {
		s += "; tried " + strings.Join(e.Tried, ", ")
	}
	return s
}

// Unknown reports whether the text was readable and yet has no meaning in any scheme.
func (e *Error) Unknown() bool { return e.Tried != nil }
