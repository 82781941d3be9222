package entry

import (
	"math"
	"strings"
	"unicode"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// maxTraitRunes bounds the text of a trait.
const maxTraitRunes = 80

// rating reads the value of a rating: x, L..H, L.., ..H, and for a tolerance the percents of either side.
func (p *parser) rating(t *target, value string) (screening.Rating, error) {
	f := &t.field
	r := screening.Rating{Of: f.Name, Section: t.section, At: t.at, Unit: f.Unit, Nominal: math.NaN(), Typed: value}
	if f.AcceptRange != nil {
		if low, high, ok := f.AcceptRange(value); ok {
			r.Low, r.High = low, high
			return r, nil
		}
	}
	if f.Unit == quantity.Ratio && strings.HasSuffix(value, "%") && !strings.Contains(value, "..") {
		var err error
		if r.Low, r.High, err = quantity.ParseTolerance(value); err != nil {
			return r, named(f.Definition, err)
		}
		return r, nil
	}
	if strings.Contains(value, "..") {
		var err error
		if r.Low, r.High, err = quantity.ParseRange(value, f.Unit); err != nil {
			return r, named(f.Definition, err)
		}
		return r, nil
	}
	n, err := p.number(f.Definition, value)
	if err != nil {
		return r, err
	}
	switch n.Sense {
	case quantity.AtMost:
		r.Low, r.High = math.Inf(-1), n.Number
	case quantity.AtLeast:
		r.Low, r.High = n.Number, math.Inf(1)
	default:
		r.Nominal, r.Low, r.High = n.Number, n.Number, n.Number
	}
	return r, nil
}

// traitText turns what was typed for a trait into its canonical text. A trait with listed words and nothing else takes only these.
func traitText(f *screening.Field, value string) (string, error) {
	for _, w := range f.Words {
		if strings.EqualFold(w.Word, value) || strings.EqualFold(w.Text, value) {
			return w.Text, nil
		}
	}
	if f.AcceptText != nil {
		if text, ok := f.AcceptText(value); ok {
			return text, nil
		}
	}
	if len([]rune(value)) > maxTraitRunes {
		return "", problem(string(f.Name), "%s is longer than %d letters", shown(value), maxTraitRunes)
	}
	if strings.ContainsFunc(value, func(r rune) bool { return !unicode.IsPrint(r) }) {
		return "", problem(string(f.Name), "%s holds a control character", shown(value))
	}
	if len(f.Words) > 0 && f.AcceptText == nil {
		var words []string
		for _, w := range f.Words {
			words = append(words, w.Word)
		}
		e := problem(string(f.Name), "%s is none of its words", shown(value))
		if near := Nearest(value, words); near != nil {
			return "", e.hint("did you mean %s?", orList(near))
		}
		return "", e.hint("write %s", orList(words))
	}
	return value, nil
}

func (p *parser) addRating(r screening.Rating, typed string) error {
	for _, old := range p.parsed.Claim.Ratings {
		if old.Of == r.Of && old.Section == r.Section && old.At == r.At {
			twice := problem(string(r.Of), "is claimed twice: %s, then %s", old, r)
			if f, ok := p.book.ClaimField(r.Of); ok && r.Section == "" && strings.Contains(f.Example, "/1=") {
				return twice.hint("say which is which, by a number or a name: %s/1=… %s/2=…", r.Of, r.Of)
			}
			return twice
		}
	}
	p.parsed.Claim = p.parsed.Claim.WithRating(r)
	p.echo(typed, func() string { return ratingText(p.book, r) })
	return nil
}

func (p *parser) addTrait(f *screening.Field, text, typed string) error {
	if old := p.parsed.Claim.Trait(string(f.Name)); old != "" && old != text {
		return problem(string(f.Name), "is claimed twice: %s, then %s", shown(old), shown(text))
	}
	p.parsed.Claim = p.parsed.Claim.WithTrait(string(f.Name), text)
	p.echo(typed, func() string { return f.Label + " " + clean(text) })
	return nil
}

func ratingText(book *screening.Rulebook, r screening.Rating) string {
	text := book.Definition(r.Of).Label
	if r.Section != "" {
		text += " of section " + r.Section
	}
	text += " " + r.String()
	if at := r.At.String(); at != "" {
		text += " at " + at
	}
	return text + " (claimed)"
}
