package marking

import (
	"slices"
	"strings"
	"unicode"
	"unicode/utf8"
)

// maxText is how many characters a marking may have; no part has room for more.
const maxText = 80

// decoder is one run of Decode.
type decoder struct {
	text       string // folded: one sort of space, µ as u, Cyrillic letters as the Latin ones that they stand for
	cyrillic   bool
	percent    bool // there is a percent sign in it
	areColours bool
	today      day
	hint       kindSet
	tables     *tables
	schemes    *[schemeCount]scheme

	sayings  []saying
	found    []piece
	stack    []piece
	picks    []*saying
	meanings []Meaning
	besides  int // how far a date behind a value stands behind
}

// separators stand between pieces.
func isSeparator(c byte) bool { return c == ' ' || c == '/' || c == ';' }

func isSpace(r rune) bool { return unicode.Is(unicode.Zs, r) }

// cyrillicLetters are those of Soviet print, by what they stand for.
var cyrillicLetters = strings.NewReplacer(
	"мкФ", "uF", "МКФ", "uF", "пФ", "pF", "ПФ", "pF", "нФ", "nF", "кОм", "kΩ", "КОм", "kΩ", "МОм", "MΩ", "ГОм", "GΩ", "Ом", "Ω", "ОМ", "Ω",
	"К", "K", "к", "k", "М", "M", "Г", "G", "Т", "T", "Е", "E", "П", "p", "п", "p", "Н", "n", "н", "n", "В", "V", "Ф", "F", "С", "C", "А", "A",
)

// fold brings a text into the form that is read: refused is what is wrong with it as a print at all.
func fold(text string) (folded, refused string, cyrillic bool) {
	text = strings.TrimFunc(text, isSpace)
	if text == "" {
		return "", "is empty; type what is printed on the part", false
	}
	ascii, spaces := true, false
	for i, r := range text {
		switch {
		case i > maxText*utf8.UTFMax:
			return "", "is too long for what a part has room for", false
		case r == utf8.RuneError:
			return "", "is not readable text", false
		case isSpace(r):
			spaces = true
		case !unicode.IsGraphic(r):
			return "", "holds a control character", false
		}
		cyrillic = cyrillic || unicode.Is(unicode.Cyrillic, r)
		ascii = ascii && r < utf8.RuneSelf
	}
	if utf8.RuneCountInString(text) > maxText {
		return "", "is too long for what a part has room for", false
	}
	if spaces {
		text = strings.Join(strings.FieldsFunc(text, isSpace), " ")
	}
	if ascii {
		return text, "", false
	}
	if cyrillic {
		text = cyrillicLetters.Replace(text)
	}
	return strings.Map(func(r rune) rune {
		switch r {
		case 'µ', 'μ':
			return 'u'
		case '\u2126':
			return 'Ω'
		case '−', '–':
			return '-'
		}
		return r
	}, text), "", cyrillic
}

// newDecoder reads a folded text once.
func newDecoder(text string, cyrillic bool, opt Options) *decoder {
	return &decoder{
		text: text, cyrillic: cyrillic, percent: strings.IndexByte(text, '%') >= 0, today: dayOf(opt.Now), hint: kindBit(opt.Kind),
		tables: load(), schemes: schemes(),
		sayings: make([]saying, 0, 24), found: make([]piece, 0, 16), stack: make([]piece, 0, 8), picks: make([]*saying, 0, 8),
		meanings: make([]Meaning, 0, 4),
	}
}

// read finds every meaning of the text, in the order of likelihood.
func (d *decoder) read() []Meaning {
	if !d.colours() {
		d.alone()
		d.cover(0, 0)
	}
	d.order()
	return d.meanings
}

// order sorts the meanings, the likeliest first: what the hinted kind of part carries, then by rank.
func (d *decoder) order() {
	slices.SortStableFunc(d.meanings, func(a, b Meaning) int { return a.rank - b.rank })
}

// alone reads the schemes that make no piece of a longer print.
func (d *decoder) alone() {
	text := d.text
	d.dateToken(0, len(text), true)
	if strings.Trim(text, "0") == "" && len(text) <= 4 {
		d.add(piece{role: asValue, from: 0, to: len(text)}, d.value(zeroOhm, 0))
	}
	switch len(text) {
	case 2:
		d.chipCapacitor()
	case 3:
		d.eia96()
	}
	for _, p := range slices.Clone(d.found) {
		if p.from == 0 && p.to == len(text) {
			d.stack = append(d.stack[:0], p)
			d.emit()
		}
	}
	d.stack, d.found = d.stack[:0], d.found[:0]
}

// tried lists the schemes that an unknown text was held against.
func (d *decoder) tried() []string {
	if d.areColours {
		return []string{"resistor bands in both directions", "choke bands", "tantalum beads", "mica, paper, ceramic and polyester colours"}
	}
	return []string{
		"letter-and-digit values", "three- and four-digit codes", "EIA-96", "chip capacitor codes", "colour names", "values with new and old units",
		"tolerance letters", "voltage codes", "ceramic temperature codes", "dielectric letters", "date codes",
	}
}
