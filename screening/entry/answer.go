package entry

import (
	"strings"
	"unicode"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Answer reads what a person types at a prompt for one reading: VALUE or VALUE@COND, or several values separated by spaces for a series of
// repeats. A bare number counts in the unit that the prompt shows, [PromptUnit]. Without a condition the reading is taken to hold where the
// question asked for it; what is typed overrides that. Typed keeps the text.
func Answer(q screening.Question, text string) (screening.Reading, error) {
	typed, err := tidy(text)
	if err != nil {
		return screening.Reading{}, err
	}
	name := string(q.Field.Name)
	value, cond, hasCond := strings.Cut(typed, "@")
	value = strings.TrimSpace(value)
	if value == "" {
		return screening.Reading{}, problem(name, "the value is missing")
	}
	if strings.Contains(value, "=") {
		return screening.Reading{}, problem(name, "%s: type the value alone, with a condition after @ if it differs", shown(typed)).
			hint("such as %s", exampleOr(q.Field, "1.5"))
	}
	t := target{what: toReading, field: q.Field, section: q.Section, at: q.At, name: name}
	if hasCond {
		at, err := Condition(q.Field.Definition, cond)
		if err != nil {
			return screening.Reading{}, err
		}
		t.at = at.Fill(q.At)
	}
	list, err := promptList(q, value)
	if err != nil {
		return screening.Reading{}, err
	}
	p := parser{}
	r, err := p.reading(&t, list)
	if err != nil {
		return screening.Reading{}, err
	}
	r.Typed = typed
	return r, nil
}

// Asked completes a reading that was given by its name, NAME=VALUE, while a walk is under way: a condition that was left out is the one that
// the walk asks this reading at, as it would be at the prompt.
func Asked(r screening.Reading, questions []screening.Question) screening.Reading {
	for _, q := range questions {
		if q.Ask == screening.AskReading && q.Field.Name == r.Of && q.Section == r.Section {
			r.At = r.At.Fill(q.At)
			return r
		}
	}
	return r
}

// AnswerClaim reads what a person types where a walk asks for one rating or trait that is missing.
func AnswerClaim(book *screening.Rulebook, q screening.Question, text string) (screening.Claim, error) {
	value, err := tidy(text)
	if err != nil {
		return screening.Claim{}, err
	}
	p := parser{book: book}
	t := target{what: toRating, field: q.Field, section: q.Section, name: string(q.Field.Name)}
	if q.Field.Trait {
		t.what = toTrait
	}
	err = p.assign(&t, value, value)
	return p.parsed.Claim, err
}

// promptList turns an answer into the list syntax of readings: spaces between values separate repeats, spaces between a value and its unit
// do not count, and bare numbers get the prompt's unit.
func promptList(q screening.Question, value string) (string, error) {
	var items []string
	for _, token := range strings.Fields(value) {
		glue := len(items) > 0 && isUnitWord(token) && !strings.ContainsFunc(items[len(items)-1], unicode.IsLetter)
		switch {
		case len(items) > 0 && (glue || isBoundSign(items[len(items)-1])):
			items[len(items)-1] += token
		default:
			items = append(items, token)
		}
	}
	if len(items) == 1 {
		list, err := splitRepeats(string(q.Field.Name), items[0])
		if err != nil {
			return "", err
		}
		items = list
	} else {
		for i := range items {
			items[i] = strings.TrimRight(items[i], ",;")
		}
		items = shareSuffix(items)
	}
	if suffix := PromptUnit(q); suffix != "" {
		for i := range items {
			items[i] = withSuffix(items[i], suffix)
		}
	}
	if len(items) == 1 {
		return items[0], nil
	}
	return strings.Join(items, ";"), nil
}

// isUnitWord reports whether a token typed after a space is the unit of the number before it.
func isUnitWord(token string) bool {
	first := []rune(token)[0]
	return !isOver(token) && (unicode.IsLetter(first) || first == '%' || first == '°')
}

func isBoundSign(token string) bool {
	return token == "<" || token == ">" || token == ".." || token == "-"
}

// PromptUnit is the unit in which a bare number at a prompt counts, with the prefix that the limit or the nominal value is printed in: "µF",
// "µA", "kΩ". Prompts must show it. Volts, ohms that follow no nominal (a meter shows 0.06 as often as 60 m), and everything else count in
// the plain unit; nothing but the prefix of farads, henries, amperes and nominal ohms is chosen, since those are never measured in the plain one.
func PromptUnit(q screening.Question) string {
	unit := q.Field.Unit
	switch unit {
	case quantity.Farad, quantity.Henry, quantity.Ampere:
	case quantity.Ohm:
		if !q.Field.FollowsNominal || q.Limit == nil || !finite(q.Limit.Low) || !finite(q.Limit.High) {
			return unit.Symbol() // "at most 100 kΩ" tells an open winding, and not what a sound one reads
		}
	default:
		return unit.Symbol()
	}
	x := promptScale(q)
	if x == 0 {
		return unit.Symbol()
	}
	_, printed, ok := strings.Cut(quantity.Format(x, unit, 0), " ")
	if !ok {
		return unit.Symbol()
	}
	return printed
}

// promptScale is the value whose printed prefix the prompt takes: the middle of the limit, or its one bound.
func promptScale(q screening.Question) float64 {
	if q.Limit == nil {
		return 0
	}
	low, high := q.Limit.Low, q.Limit.High
	switch {
	case finite(low) && finite(high):
		return (low + high) / 2
	case finite(high):
		return high
	case finite(low):
		return low
	}
	return 0
}
