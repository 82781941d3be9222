package entry

import (
	"slices"
	"strconv"
	"strings"

	"goodbin/screening"
)

// Parsed is what the words of one part say.
type Parsed struct {
	Claim    screening.Claim
	Readings []screening.Reading
	Look     []screening.Observation
	Treated  int      // how often it was treated already
	Echo     []string // what each word was taken as, in words: "2200uF: capacitance 2200 µF"
}

// Part returns the part that the words describe.
func (p Parsed) Part(book *screening.Rulebook) screening.Part {
	return screening.Part{Kind: book.Kind, Claim: p.Claim, Look: p.Look, Readings: p.Readings, Treated: p.Treated}
}

// Words reads the words of one part as the command line gives them. Errors are of type [*Error].
func Words(book *screening.Rulebook, words []string) (Parsed, error) {
	if len(words) > MaxWords {
		return Parsed{}, problem("", "%d words are too many for one part; at most %d", len(words), MaxWords)
	}
	p := parser{book: book}
	for _, w := range words {
		if err := p.word(w); err != nil {
			return Parsed{}, err
		}
	}
	return p.parsed, nil
}

// parser collects what the words of one part say.
type parser struct {
	book   *screening.Rulebook
	parsed Parsed
	// decimalComma is set where the file's delimiter leaves the comma to be nothing but a decimal comma.
	decimalComma bool
	quiet        bool // no echo
}

// word takes one word.
func (p *parser) word(word string) error {
	word, err := tidy(word)
	if err != nil || word == "" {
		return err
	}
	i := strings.LastIndexByte(word, '=')
	if i < 0 {
		return p.bare(word)
	}
	t, err := parseTarget(p.book, word[:i])
	if err != nil {
		return err
	}
	return p.assign(&t, word[i+1:], word)
}

// tidy trims a word and makes one sign of the minus signs that people paste.
func tidy(word string) (string, error) {
	if len(word) > MaxWordBytes {
		return "", problem("", "%s is longer than %d bytes", shown(word), MaxWordBytes)
	}
	return strings.TrimSpace(strings.ReplaceAll(word, "\u2212", "-")), nil
}

// target is what the left side of a "=" names.
type target struct {
	what    targetKind
	field   screening.Field
	section string
	at      screening.Condition
	name    string // as typed
}

type targetKind uint8

const (
	toReading targetKind = iota
	toRating
	toTrait
	toSeen
	toTreated
)

// The names that every kind takes besides those of its fields.
const (
	seenName    = "seen"
	treatedName = "treated"
	ratedPrefix = "rated:"
)

// parseTarget reads NAME[/SECTION][@COND,…], with "rated:" before it for a rating.
func parseTarget(book *screening.Rulebook, text string) (target, error) {
	t := target{name: text}
	left, rated := strings.CutPrefix(strings.TrimSpace(text), ratedPrefix)
	left, cond, hasCond := strings.Cut(left, "@")
	name, section, hasSection := strings.Cut(left, "/")
	name = strings.ToLower(strings.TrimSpace(name))
	if err := t.find(book, name, rated); err != nil {
		return t, err
	}
	if hasSection {
		t.section = strings.TrimSpace(section)
		switch {
		case t.what != toReading && t.what != toRating || t.field.PerPart:
			return t, problem(name, "belongs to the whole part; it has no section")
		case t.section == "" || len(t.section) > 16 || strings.Trim(t.section, sectionLetters) != "":
			return t, problem(name, "%s is no name of a section", shown(section)).hint("sections are named by letters and digits: %s/2", name)
		}
	}
	if hasCond {
		if t.what != toReading && t.what != toRating {
			return t, problem(name, "holds at no condition")
		}
		if _, variable := screening.VariableNamed(strings.ToLower(cond)); variable {
			return t, problem(name, "the value is missing").hint("the last \"=\" separates the value: %s@%s=CONDITION=VALUE", name, cond)
		}
		at, err := Condition(t.field.Definition, cond)
		if err != nil {
			return t, err
		}
		t.at = at
	}
	return t, nil
}

const sectionLetters = "abcdefghijklmnopqrstuvwxyzABCDEFGHIJKLMNOPQRSTUVWXYZ0123456789-"

// find looks a name up among the fields of the kind.
func (t *target) find(book *screening.Rulebook, name string, rated bool) error {
	claim, claimed := book.ClaimField(screening.Characteristic(name))
	bench, measured := book.BenchField(screening.Characteristic(name))
	switch {
	case rated && claimed && claim.Trait:
		return problem(name, "is claimed in words").hint("write %s=TEXT", name)
	case rated && claimed:
		t.what, t.field = toRating, claim
	case rated:
		return unknownName(book, name, true)
	case measured:
		t.what, t.field = toReading, bench
	case claimed && claim.Trait:
		t.what, t.field = toTrait, claim
	case claimed:
		t.what, t.field = toRating, claim
	case name == seenName:
		t.what = toSeen
	case name == treatedName:
		t.what = toTreated
	case name == string(screening.Temperature.Name):
		t.what, t.field = toReading, screening.Field{Definition: screening.Temperature, PerPart: true, Band: screening.Span{Low: -100, High: 500}}
	default:
		return unknownName(book, name, false)
	}
	return nil
}

func unknownName(book *screening.Rulebook, name string, rated bool) error {
	names := claimNames(book)
	e := problem(name, "%s has no such claim", kindWithArticle(book.Kind))
	if !rated {
		names = append(benchNames(book), names...)
		names = append(names, seenName, treatedName)
		e = problem(name, "%s has no such reading or claim", kindWithArticle(book.Kind))
	}
	if near := Nearest(name, names); near != nil {
		return e.hint("did you mean %s?", orList(near))
	}
	slices.Sort(names)
	return e.hint("it has %s", strings.Join(slices.Compact(names), ", "))
}

func kindWithArticle(k screening.Kind) string {
	if k != "" && strings.ContainsRune("aeiou", rune(k[0])) {
		return "an " + string(k)
	}
	return "a " + string(k)
}

// assign gives a target its value.
func (p *parser) assign(t *target, value, typed string) error {
	value = strings.TrimSpace(value)
	if value == "" {
		return problem(t.name, "the value is missing")
	}
	switch t.what {
	case toReading:
		r, err := p.reading(t, value)
		if err != nil {
			return err
		}
		p.parsed.Readings = append(p.parsed.Readings, r)
		p.echo(typed, func() string { return readingText(t.field, r) })
		return nil
	case toRating:
		r, err := p.rating(t, value)
		if err != nil {
			return err
		}
		return p.addRating(r, typed)
	case toTrait:
		text, err := traitText(&t.field, value)
		if err != nil {
			return err
		}
		return p.addTrait(&t.field, text, typed)
	case toSeen:
		return p.seen(value, typed)
	}
	n, err := strconv.Atoi(value)
	if err != nil || n < 0 || n > 1000 {
		return problem(t.name, "%s is no count; write how often the part was treated: treated=1", shown(value))
	}
	p.parsed.Treated = n
	p.echo(typed, func() string { return "treated " + strconv.Itoa(n) + " times before" })
	return nil
}

// seen takes what was found by eye. "nothing" says that every check was made and found nothing; a word of a check reports that one.
func (p *parser) seen(value, typed string) error {
	for word := range strings.FieldsFuncSeq(strings.ToLower(value), func(r rune) bool { return r == ',' || r == ';' || r == ' ' }) {
		switch word {
		case "nothing", "sound":
			for _, c := range p.book.Look {
				p.parsed.Look = append(p.parsed.Look, screening.Observation{Check: c.Name})
			}
			p.echo(typed, func() string { return "looked at, and sound" })
			continue
		}
		c, ok := checkOf(p.book, word)
		if !ok {
			return p.unknownSight(word)
		}
		p.parsed.Look = append(p.parsed.Look, screening.Observation{Check: c.Name, Fault: true})
		p.echo(typed, func() string { return "seen: " + word })
	}
	return nil
}

func checkOf(book *screening.Rulebook, word string) (screening.Check, bool) {
	if i := checkNamed(book.Look, word); i >= 0 {
		return book.Look[i], true
	}
	return screening.Check{}, false
}

func (p *parser) unknownSight(word string) error {
	var words []string
	for _, c := range p.book.Look {
		words = append(words, c.Words...)
	}
	words = append(words, "nothing")
	e := problem(seenName, "nothing to look for on %s is called %s", kindWithArticle(p.book.Kind), shown(word))
	if near := Nearest(word, words); near != nil {
		return e.hint("did you mean %s?", orList(near))
	}
	return e.hint("write %s", orList(words))
}

// echo says what a word was taken as. The rows of a file are not echoed, and the text is made only where it is.
func (p *parser) echo(typed string, meaning func() string) {
	if p.quiet {
		return
	}
	p.parsed.Echo = append(p.parsed.Echo, clean(typed)+": "+meaning())
}
