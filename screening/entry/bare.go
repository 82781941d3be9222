package entry

import (
	"errors"
	"math"
	"strings"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// taking is one claim that may take a bare word.
type taking struct {
	field  screening.Field
	text   string           // of a trait
	rating screening.Rating // of a rating
}

// meaning says in words what the taking would make of a word, and how to write it so that only this is meant.
func (t taking) meaning(word string) string {
	if t.field.Trait {
		return t.field.Label + " " + clean(t.text) + ": write " + string(t.field.Name) + "=" + clean(word)
	}
	return t.field.Label + " " + t.rating.String() + ": write " + ratedPrefix + string(t.field.Name) + "=" + clean(word)
}

// bare offers a word without "=" to every claim of the kind. A known type number comes before everything; then words that could mean two
// things are refused; then words, letters and dates; then, where none of these takes it, numbers with their units.
func (p *parser) bare(word string) error {
	if strings.EqualFold(word, claimsNothing) {
		p.echo(word, func() string { return "claims nothing" })
		return nil
	}
	if f, ok := p.book.ClaimField(screening.TraitType); ok && f.AcceptText != nil {
		if text, ok := f.AcceptText(word); ok {
			return p.addTrait(&f, text, word)
		}
	}
	var meanings []string
	for i := range p.book.Claims {
		if f := &p.book.Claims[i]; f.Ambiguous != nil {
			meanings = append(meanings, f.Ambiguous(word)...)
		}
	}
	if len(meanings) > 0 {
		return &Error{Problem: shown(word) + " could mean", Meanings: meanings, Hint: "write the one that is meant"}
	}
	takings := p.takenAsWord(word)
	if takings == nil {
		if sections, ok, err := p.takenAsSections(word); ok || err != nil {
			return p.addSections(sections, word, err)
		}
		var err error
		if takings, err = p.takenAsValue(word); err != nil {
			return err
		}
	}
	switch len(takings) {
	case 0:
		return p.unknownWord(word)
	case 1:
		t := takings[0]
		if t.field.Trait {
			return p.addTrait(&t.field, t.text, word)
		}
		return p.addRating(t.rating, word)
	}
	for _, t := range takings {
		meanings = append(meanings, t.meaning(word))
	}
	return &Error{Problem: shown(word) + " could be claimed as", Meanings: meanings}
}

// takenAsWord lists the claims that take a word as it stands: a trait's words, a type number, a date, a tolerance letter.
func (p *parser) takenAsWord(word string) []taking {
	var takings []taking
	for i := range p.book.Claims {
		f := &p.book.Claims[i]
		switch {
		case f.Trait:
			if text, ok := traitWord(f, word); ok {
				takings = append(takings, taking{field: *f, text: text})
			}
		case f.AcceptRange != nil:
			if low, high, ok := f.AcceptRange(word); ok {
				takings = append(takings, taking{field: *f, rating: boundRating(f, low, high, word)})
			}
		}
	}
	return takings
}

func traitWord(f *screening.Field, word string) (string, bool) {
	for _, w := range f.Words {
		if strings.EqualFold(w.Word, word) {
			return w.Text, true
		}
	}
	switch {
	case f.AcceptText != nil:
		return f.AcceptText(word)
	case f.Name == screening.TraitDated:
		return word, isYear(word)
	}
	return "", false
}

// isYear reports whether a word is a year or decade that a maker may have printed: "1974", "197x".
func isYear(word string) bool {
	_, ok := screening.Claim{}.WithTrait(screening.TraitDated, word).Year()
	return ok && len(word) == 4
}

func boundRating(f *screening.Field, low, high float64, typed string) screening.Rating {
	return screening.Rating{Of: f.Name, Unit: f.Unit, Nominal: math.NaN(), Low: low, High: high, Typed: typed}
}

// takenAsValue lists the ratings whose unit a word states, or implies as letter-and-digit values do.
func (p *parser) takenAsValue(word string) ([]taking, error) {
	var takings []taking
	if strings.HasSuffix(word, "%") {
		low, high, err := quantity.ParseTolerance(word)
		if err != nil {
			return nil, unnamedValue(word, err)
		}
		for i := range p.book.Claims {
			if f := &p.book.Claims[i]; f.Unit == quantity.Ratio && !f.Trait {
				takings = append(takings, taking{field: *f, rating: boundRating(f, low, high, word)})
			}
		}
		return takings, nil
	}
	if !startsLikeNumber(word) && !isUpper(word[0]) {
		return nil, nil
	}
	found, err := quantity.ParseAny(word)
	if err != nil {
		if startsLikeNumber(word) {
			return nil, unnamedValue(word, err).hint("it claims %s; a reading has its name before it: NAME=VALUE", p.examples())
		}
		return nil, nil
	}
	for i := range p.book.Claims {
		f := &p.book.Claims[i]
		v, ok := meanings(found).in(f.Unit)
		if f.Trait || !ok {
			continue
		}
		if v.Over || v.Sense != quantity.Exactly {
			return nil, problem("", "%s is a bound, and a bare word claims a value", shown(word)).hint("write rated:%s=L..H", f.Name)
		}
		r := screening.Rating{Of: f.Name, Unit: f.Unit, Nominal: v.Number, Low: v.Number, High: v.Number, Typed: word}
		takings = append(takings, taking{field: *f, rating: r})
	}
	if takings == nil && startsLikeNumber(word) {
		return nil, p.noSuchClaim(word, found)
	}
	return takings, nil
}

// unnamedValue words why a bare value cannot be read.
func unnamedValue(word string, err error) *Error {
	var q *quantity.Error
	if !errors.As(err, &q) {
		return problem("", "%s: %s", shown(word), err)
	}
	return &Error{Problem: shown(word) + " " + q.Problem, Meanings: q.Meanings}
}

func isUpper(c byte) bool { return c >= 'A' && c <= 'Z' }

func startsLikeNumber(word string) bool {
	return word != "" && (word[0] >= '0' && word[0] <= '9' || strings.ContainsRune(".,<>+-", rune(word[0])))
}

func (p *parser) noSuchClaim(word string, found meanings) error {
	return problem("", "%s is %s, which %s does not claim", shown(word), found[0].Unit.Noun(), kindWithArticle(p.book.Kind)).
		hint("it claims %s; a reading has its name before it: NAME=VALUE", p.examples())
}

func (p *parser) unknownWord(word string) error {
	e := problem("", "no claim of %s takes %s", kindWithArticle(p.book.Kind), shown(word))
	name, _, _ := strings.Cut(word, "@")
	if f, ok := p.book.Find(screening.Characteristic(strings.ToLower(name))); ok {
		return e.hint("to give it a value, write %s=%s", clean(word), exampleOr(f, "VALUE"))
	}
	var words []string
	for i := range p.book.Claims {
		for _, w := range p.book.Claims[i].Words {
			words = append(words, w.Word)
		}
	}
	if near := Nearest(word, words); near != nil {
		return e.hint("did you mean %s?", orList(near))
	}
	if _, ok := p.book.ClaimField(screening.TraitType); ok && looksLikeType(word) {
		return e.hint("a type that no table here holds is written %s=%s, with what else is known of it", screening.TraitType, clean(word))
	}
	return e.hint("it claims %s; a reading has its name before it: NAME=VALUE", p.examples())
}

// mostExamples bounds the examples in an error: it is read out loud, too.
const mostExamples = 6

// examples lists what the kind's claims look like.
func (p *parser) examples() string {
	var examples []string
	for i := range p.book.Claims {
		f := &p.book.Claims[i]
		if f.Example == "" {
			continue
		}
		if len(examples) == mostExamples {
			return strings.Join(examples, ", ") + " and others"
		}
		examples = append(examples, string(f.Name)+" ("+f.Example+")")
	}
	return strings.Join(examples, ", ")
}

// looksLikeType reports whether a word is letters and digits as a maker's type number is: "GT308B", "2SC945", "OC71".
func looksLikeType(word string) bool {
	letters, digits := 0, 0
	for _, r := range word {
		switch {
		case r >= 'A' && r <= 'Z':
			letters++
		case r >= '0' && r <= '9':
			digits++
		case r != '-' && r != '/':
			return false
		}
	}
	return letters > 0 && digits > 1
}
