package types

import (
	"fmt"
	"slices"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

// brandPrefixes are what makers put before another maker's number, the longest first.
var brandPrefixes = []string{"P2N", "MPS", "KSP", "PN", "SS", "S", "C", "A"}

// numberStems are what the digits after a brand's prefix go by elsewhere.
var numberStems = []string{"", "2N", "PN", "S"}

var brandSource = screening.Source{Document: "house rule: the digits after a brand's prefix are mostly those of the JEDEC type", Status: screening.House}

// Guess says what a type number suggests that stands in no table of any kind: a brand's prefix or an unknown suffix on a known number, else
// what its grammar says. A number that a table holds has no guess: the table is over the grammar.
func (t *Table) Guess(text string) []Guess {
	if len(text) > longestNumber || len(t.KindsOf(text)) > 0 {
		return nil
	}
	s := spell(text)
	if g, ok := t.branded(s); ok {
		return []Guess{g}
	}
	if g, ok := t.suffixed(s); ok {
		return []Guess{g}
	}
	return Grammar(text)
}

// KindsOf lists the kinds whose tables hold a type number.
func (t *Table) KindsOf(word string) []screening.Kind {
	var kinds []screening.Kind
	for _, kind := range t.Kinds() {
		if _, ok := t.Lookup(kind, word); ok {
			kinds = append(kinds, kind)
		}
	}
	return kinds
}

// first finds a type number in the table of any kind.
func (t *Table) first(word string) (Row, bool) {
	for _, kind := range t.Kinds() {
		if row, ok := t.Lookup(kind, word); ok {
			return row, true
		}
	}
	return Row{}, false
}

// guessOf is a guess that takes a number for a known type under another name.
func guessOf(row Row, scheme, is, doubt string) Guess {
	name := row.Type
	if row.Group != "" {
		name += " group " + row.Group
	}
	polarity := row.Trait(screening.TraitPolarity)
	if channel := row.Trait("channel"); channel != "" {
		polarity = channel
	}
	return Guess{
		Scheme: scheme, Name: name, Is: is, Kinds: []screening.Kind{row.Kind}, Polarity: polarity, Material: row.Trait(screening.TraitMaterial),
		Doubt: doubt, Source: brandSource,
	}
}

func (t *Table) branded(s string) (Guess, bool) {
	for _, prefix := range brandPrefixes {
		rest, ok := strings.CutPrefix(s, prefix)
		if !ok || len(fold(rest)) < shortestType {
			continue
		}
		for _, stem := range numberStems {
			if len(prefix) == 1 && prefix != "S" && stem != "" {
				continue // a lone letter is too weak to add another
			}
			if row, ok := t.first(stem + rest); ok {
				return guessOf(row, "a brand's prefix", fmt.Sprintf("%s %s under a brand's prefix %s", row.Kind, row.Type, prefix),
					"the same digits are no promise of the same sheet: makers differ"), true
			}
		}
	}
	return Guess{}, false
}

// longestSuffix is how long a packing or selection suffix may be.
const longestSuffix = 4

func (t *Table) suffixed(s string) (Guess, bool) {
	for n := len(s) - 1; n >= shortestType && n >= len(s)-longestSuffix; n-- {
		if c := s[n]; c >= '0' && c <= '9' {
			continue // another number, not a suffix
		}
		if row, ok := t.first(s[:n]); ok && row.Group == "" {
			return guessOf(row, "a suffix", fmt.Sprintf("%s %s with the suffix %s", row.Kind, row.Type, strings.TrimPrefix(s[n:], "-")),
				"no rule here names that suffix: packing, a selection or another part"), true
		}
	}
	return Guess{}, false
}

// Question words what there is to ask about the type of a claim that the kind's own table does not hold: that another kind's table holds it,
// or what its grammar suggests, and as a question where that is another kind, polarity or material than the claim's. It is "" where there is
// nothing to say.
func (t *Table) Question(kind screening.Kind, c screening.Claim) string {
	word := c.Trait(screening.TraitType)
	if word == "" {
		return ""
	}
	if others := t.KindsOf(word); len(others) > 0 {
		if slices.Contains(others, kind) {
			return ""
		}
		return fmt.Sprintf("it stands there as %s, not as %s: is the kind right?", kindWords(others), kind)
	}
	guesses := t.Guess(word)
	if guesses == nil {
		return ""
	}
	if i := slices.IndexFunc(guesses, func(g Guess) bool { return slices.Contains(g.Kinds, kind) }); i > 0 {
		guesses[0], guesses[i] = guesses[i], guesses[0] // what fits the claim first
	}
	var texts []string
	for _, g := range guesses {
		text := strings.TrimSuffix(g.String(), "; no ratings known")
		if fold(g.Name) != fold(word) {
			text = "as " + g.Name + " it " + text
		} else {
			text = "it " + text
		}
		texts = append(texts, text)
	}
	return strings.Join(texts, ", or ") + "; no ratings known" + doubts(guesses[0], kind, c)
}

// UnknownNote is the note on a claim whose type the table of its kind does not hold: what follows from that, in text, and what there is to ask.
func (t *Table) UnknownNote(of screening.Characteristic, kind screening.Kind, c screening.Claim, text string) screening.Reason {
	if question := t.Question(kind, c); question != "" {
		text += "; " + question
	}
	return book.Note(of, "%s", text)
}

// doubts asks where a guess says another kind, polarity or material than the claim.
func doubts(g Guess, kind screening.Kind, c screening.Claim) string {
	var asks []string
	if !slices.Contains(g.Kinds, kind) {
		asks = append(asks, "is "+string(kind)+" the right kind?")
	}
	claimed := c.Trait(screening.TraitPolarity)
	if channel := c.Trait("channel"); channel != "" {
		claimed = channel
	}
	if g.Polarity != "" && claimed != "" && g.Polarity != claimed {
		asks = append(asks, fmt.Sprintf("it would be %s, and %s is claimed: which is it?", g.Polarity, claimed))
	}
	if m := c.Trait(screening.TraitMaterial); g.Material != "" && m != "" && g.Material != m {
		asks = append(asks, fmt.Sprintf("it would be %s, and %s is claimed: which is it?", g.Material, m))
	}
	if asks == nil {
		return ""
	}
	return "; " + strings.Join(asks, " ")
}

func kindWords(kinds []screening.Kind) string {
	words := make([]string, len(kinds))
	for i, k := range kinds {
		words[i] = string(k)
	}
	return strings.Join(words, " and ")
}

// Trap is where a type number or its sheets mislead.
type Trap struct {
	Match  string // a type, or with * the beginning of one
	Text   string
	Source screening.Source
}

var traps = sync.OnceValue(func() []Trap {
	all, err := readTraps()
	if err != nil {
		panic("types: embedded traps: " + err.Error())
	}
	return all
})

func readTraps() ([]Trap, error) {
	text, err := files.ReadFile("traps.csv")
	if err != nil {
		return nil, err
	}
	t := book.ReadTable("traps.csv", string(text))
	var all []Trap
	for _, r := range t.Rows() {
		all = append(all, Trap{Match: r.Required("match"), Text: r.Required("text"), Source: r.Source()})
	}
	return all, t.Err()
}

// Traps lists the traps of a type number, as typed or as the table spells it.
func Traps(word string) []Trap {
	var found []Trap
	for _, trap := range traps() {
		begin, open := strings.CutSuffix(trap.Match, "*")
		if fold(word) == fold(trap.Match) || open && strings.HasPrefix(fold(word), fold(begin)) {
			found = append(found, trap)
		}
	}
	return found
}
