package cli

import (
	"slices"
	"strings"

	"goodbin/rules/marking"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/tui"
)

// meanings lists what a print may mean as parts that the bench can take up: a kind, and the words that it then claims. Type numbers of the
// tables come first, then markings. A meaning that no kind of the program carries, or whose words its kind does not take, is left out; the
// command marking lists those too.
func (a *app) meanings(text string) []tui.Meaning {
	all := a.typesNamed(text)
	decoded, err := marking.Decode(text, marking.Options{Now: a.env.Now()})
	if err != nil {
		return all
	}
	for i := range decoded {
		m := &decoded[i]
		for _, kind := range m.Kinds {
			book, ok := a.books.Find(kind)
			if !ok || len(m.Words) == 0 {
				continue
			}
			parsed, err := entry.Words(book, m.Words)
			if err != nil || len(parsed.Readings)+len(parsed.Look) > 0 {
				continue
			}
			if _, err := screening.Judge(book, screening.Part{Claim: parsed.Claim}, screening.DefaultPolicy()); err != nil {
				continue
			}
			all = append(all, tui.Meaning{
				Kind: kind, Header: strings.Join(m.Words, " "), Text: m.String(), Source: m.Scheme + ", " + m.Source.Status.String(),
			})
		}
	}
	return all
}

// typesNamed lists the kinds whose table knows a text as a type number.
func (a *app) typesNamed(text string) []tui.Meaning {
	word := strings.Join(strings.Fields(text), "")
	var all []tui.Meaning
	for _, book := range a.books {
		row, ok := a.types.Lookup(book.Kind, text)
		if !ok {
			continue
		}
		if parsed, err := entry.Words(book, []string{word}); err != nil || parsed.Claim.IsZero() {
			continue
		}
		says := []string{row.Type}
		for _, name := range []string{screening.TraitGroup, screening.TraitPolarity, screening.TraitMaterial, screening.TraitTechnology} {
			if trait := row.Trait(name); trait != "" {
				says = append(says, trait)
			}
		}
		all = append(all, tui.Meaning{
			Kind: book.Kind, Header: word, Text: strings.Join(says, " "), Source: "type number, " + row.Source.Status.String(),
		})
	}
	if all == nil {
		return a.typesGuessed(word)
	}
	return all
}

// typesGuessed lists the kinds that a type number of no table may be, by its shape: the number is claimed and nothing that is guessed of it,
// so that a family that bars it is told before anything is measured.
func (a *app) typesGuessed(word string) []tui.Meaning {
	var all []tui.Meaning
	for _, g := range a.types.Guess(word) {
		kinds := g.Kinds
		if g.Material == "ge" && len(kinds) > 1 {
			kinds = kinds[:1] // germanium field-effect transistors were not sold
		}
		for _, kind := range kinds {
			book, ok := a.books.Find(kind)
			if !ok || slices.ContainsFunc(all, func(m tui.Meaning) bool { return m.Kind == kind }) {
				continue
			}
			header := screening.TraitType + "=" + word
			if _, err := entry.Words(book, []string{header}); err != nil {
				continue
			}
			all = append(all, tui.Meaning{Kind: kind, Header: header, Text: g.Is, Source: g.Scheme + ", in no table"})
		}
	}
	return all
}
