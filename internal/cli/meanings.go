package cli

import (
	"regexp"
	"slices"
	"strings"

	"goodbin/rules/electrolytic"
	"goodbin/rules/marking"
	"goodbin/rules/paper"
	"goodbin/rules/potentiometer"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/tui"
)

// meanings lists what a print may mean as parts that the bench can take up: a kind, and the words that it then claims. Type numbers of the
// tables come first, then markings. A meaning that no kind of the program carries, or whose words its kind does not take, is left out; the
// command marking lists those too. What only the shape of a type number suggests comes last.
func (a *app) meanings(text string) []tui.Meaning {
	all := append(a.typesNamed(text), a.tracksNamed(text)...)
	named := len(all) > 0
	decoded, err := marking.Decode(text, marking.Options{Now: a.env.Now()})
	if err != nil {
		decoded = nil
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
	if len(all) == 0 {
		all = a.cansNamed(text)
	}
	if !named {
		all = append(all, a.typesGuessed(strings.Join(strings.Fields(text), ""))...)
	}
	return all
}

// cansNamed lists what a print with several sections may be, such as 8+8/450 or 3x0.1/600.
func (a *app) cansNamed(text string) []tui.Meaning {
	if !strings.Contains(text, "/") {
		return nil
	}
	var all []tui.Meaning
	for _, kind := range []screening.Kind{electrolytic.Kind, paper.Kind} {
		book, ok := a.books.Find(kind)
		if !ok {
			continue
		}
		parsed, err := entry.Words(book, strings.Fields(text))
		if err != nil || len(parsed.Readings)+len(parsed.Look) > 0 {
			continue
		}
		if _, err := screening.Judge(book, screening.Part{Claim: parsed.Claim}, screening.DefaultPolicy()); err != nil {
			continue
		}
		all = append(all, tui.Meaning{Kind: kind, Header: text, Text: parsed.Claim.String(), Source: "sections in µF, then volts"})
	}
	return all
}

// trackPrint is a potentiometer's print: a taper letter before or behind the ohms of its track, such as B10K or 500KA.
var trackPrint = regexp.MustCompile(`^(?:([A-Ca-c])[ -]?(\d+[kKM])|(\d+[kKM])[ -]?([A-Ca-c]))$`)

// trackOhms returns the ohms of a potentiometer's print, such as 10k of B10K, and its letter.
func trackOhms(text string) (ohms, letter string, ok bool) {
	m := trackPrint.FindStringSubmatch(strings.TrimSpace(text))
	if m == nil {
		return "", "", false
	}
	return strings.ReplaceAll(m[2]+m[3], "K", "k"), strings.ToUpper(m[1] + m[4]), true
}

// tracksNamed lists a potentiometer whose print has a taper letter. The letter is not claimed: it means different tapers in different
// countries, and the reading in mid-travel tells which.
func (a *app) tracksNamed(text string) []tui.Meaning {
	ohms, letter, ok := trackOhms(text)
	book, known := a.books.Find(potentiometer.Kind)
	if !ok || !known {
		return nil
	}
	if _, err := entry.Words(book, []string{ohms}); err != nil {
		return nil
	}
	return []tui.Meaning{{
		Kind: potentiometer.Kind, Header: ohms, Text: ohms + ", taper " + letter, Source: "its taper is measured: the letter differs by country",
	}}
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
			if trait := row.Trait(name); trait != "" && !strings.HasSuffix(row.Type, trait) { // BF245A says its group itself
				says = append(says, trait)
			}
		}
		all = append(all, tui.Meaning{
			Kind: book.Kind, Header: word, Text: strings.Join(says, " "), Source: "type number, " + row.Source.Status.String(),
		})
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
