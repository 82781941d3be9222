package tui

import (
	"slices"
	"strings"

	"github.com/charmbracelet/x/ansi"

	"goodbin/screening"
)

// nameOf words a characteristic: by its label where its rulebook is known, else by the word of the command line.
func (c *cardData) nameOf(of screening.Characteristic, section string) string {
	name := strings.ReplaceAll(string(of), "-", " ")
	if c.book != nil {
		name = c.book.Definition(of).Label
	}
	if section != "" {
		name += " of section " + section
	}
	return name
}

// ambiguous reports whether one reading answers several criteria, so that its name alone does not say which one is meant.
func (c *cardData) ambiguous(f *screening.Finding) bool {
	return slices.ContainsFunc(c.judged.Findings, func(other screening.Finding) bool {
		return other.Limit.On == f.Limit.On && other.Limit.Section == f.Limit.Section && other.Limit.Criterion != f.Limit.Criterion
	})
}

func criterionName(f *screening.Finding) string {
	return strings.ReplaceAll(string(f.Limit.Criterion), "-", " ")
}

func (c *cardData) findingName(f *screening.Finding) string {
	name := strings.ReplaceAll(string(f.Limit.On), "-", " ")
	if c.ambiguous(f) {
		name = criterionName(f)
	}
	if f.Limit.Section != "" {
		name += " " + f.Limit.Section
	}
	return name
}

// shortName is the finding's name in w cells. What is cut where there is no room for it is never the section: it alone tells one line from
// the next.
func (c *cardData) shortName(f *screening.Finding, w int, more string) string {
	name := c.findingName(f)
	room := w - 1 - width(f.Limit.Section)
	if f.Limit.Section == "" || width(name) <= w || room < 2 {
		return name
	}
	head := criterionName(f)
	if !c.ambiguous(f) && c.book != nil {
		if head = c.book.Definition(f.Limit.On).Symbol; head == "" {
			head = strings.ReplaceAll(string(f.Limit.On), "-", " ")
		}
	}
	return ansi.Truncate(head, room, more) + " " + f.Limit.Section
}
