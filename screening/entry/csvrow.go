package entry

import (
	"errors"
	"strings"

	"goodbin/screening"
)

// Row understands a record.
func (c *CSV) Row(rec Record) Row {
	row := Row{Line: rec.Line}
	if rec.err != nil {
		row.fail(0, "", rec.err)
		return row
	}
	if len(rec.Cells) > len(c.columns) {
		for _, extra := range rec.Cells[len(c.columns):] {
			if extra != "" {
				row.fail(0, "", problem("", "the row has %d columns, the header %d", len(rec.Cells), len(c.columns)))
				return row
			}
		}
		rec.Cells = rec.Cells[:len(c.columns)]
	}
	if !c.head(&row, rec) {
		return row
	}
	p := parser{book: row.Book, decimalComma: c.comma, quiet: true}
	p.parsed.Readings = make([]screening.Reading, 0, c.entries(rec.Cells))
	c.claim(&row, &p, rec)
	for i, cell := range rec.Cells {
		if cell == "" || c.columns[i].kind != columnEntry {
			continue
		}
		c.cell(&row, &p, i, cell)
	}
	row.Parsed = p.parsed
	return row
}

func (r *Row) fail(column int, name string, err error) {
	if len(r.Errors) < maxRowErrors {
		r.Errors = append(r.Errors, &CellError{Line: r.Line, Column: column, Name: clean(name), Err: err})
	}
}

// head takes the cells that are no entries: the kind, and where the part belongs.
func (c *CSV) head(row *Row, rec Record) bool {
	kindColumn := -1
	for i, cell := range rec.Cells {
		to := (*string)(nil)
		switch c.columns[i].kind {
		case columnKindOf:
			kindColumn = i
			row.Book, _ = c.books.Find(screening.Kind(strings.ToLower(cell)))
		case columnLot:
			to = &row.Lot
		case columnPart:
			to = &row.Part
		case columnPlace:
			to = &row.Place
		case columnSource:
			to = &row.Source
		case columnNote:
			to = &row.Note
		case columnIgnored:
			if cell != "" {
				row.fail(i+1, "", problem("", "%s stands in a column without a name", shown(cell)))
			}
		}
		if to == nil {
			continue
		}
		*to = strings.Join(strings.Fields(unguard(cell)), " ")
		if len(cell) > MaxWordBytes {
			row.fail(i+1, c.columns[i].name, problem("", "the text is longer than %d bytes", MaxWordBytes))
		}
	}
	switch {
	case row.Book != nil:
		return true
	case kindColumn < 0 && len(c.books) == 1:
		row.Book = c.books[0]
		return true
	case kindColumn < 0:
		row.fail(0, "", problem("", "no column says what kind of part this is").hint("add a column named kind"))
	case rec.Cells[kindColumn] == "":
		row.fail(kindColumn+1, "kind", problem("", "the kind is missing").hint("the kinds are %s", orList(kindNames(c.books))))
	default:
		row.fail(kindColumn+1, "kind", UnknownKind(c.books, rec.Cells[kindColumn]))
	}
	return false
}

// UnknownKind is the error for a kind that no rulebook has, with the nearest ones as its hint.
func UnknownKind(books screening.Kinds, name string) error {
	e := problem("", "%s is no kind of part", shown(name))
	if near := Nearest(name, kindNames(books)); near != nil {
		return e.hint("did you mean %s?", orList(near))
	}
	return e.hint("the kinds are %s", orList(kindNames(books)))
}

func kindNames(books screening.Kinds) []string {
	names := make([]string, len(books))
	for i, b := range books {
		names[i] = string(b.Kind)
	}
	return names
}

type claimKey struct {
	kind screening.Kind
	text string
}

type cachedClaim struct {
	parsed Parsed
	err    error
}

// claim takes the words of the claim column. Readings are no claims.
func (c *CSV) claim(row *Row, p *parser, rec Record) {
	for i, cell := range rec.Cells {
		if c.columns[i].kind != columnClaim || cell == "" {
			continue
		}
		cell = unguard(cell)
		key := claimKey{p.book.Kind, cell}
		known, ok := c.claims.Load(key)
		if !ok {
			known = c.readClaim(key, p.book)
		}
		cached := known.(cachedClaim)
		if cached.err != nil {
			row.fail(i+1, c.columns[i].name, cached.err)
			continue
		}
		row.Header = strings.Join(strings.Fields(cell), " ")
		p.parsed.Claim = cached.parsed.Claim
	}
}

func (c *CSV) readClaim(key claimKey, book *screening.Rulebook) cachedClaim {
	parsed, err := wordsIn(book, key.text, c.comma)
	if err == nil && (len(parsed.Readings) > 0 || len(parsed.Look) > 0 || parsed.Treated > 0) {
		// The other parts of the lot would take it over with the claim.
		err = problem("", "%s says what was measured or seen, which is one part's own and no claim", shown(key.text)).
			hint("give it a column of its own, such as esr@120Hz or seen")
	}
	entry := cachedClaim{parsed, err}
	c.cachedMu.Lock()
	defer c.cachedMu.Unlock()
	if c.cached < maxClaims {
		c.cached++
		c.claims.Store(key, entry)
	}
	return entry
}

// wordsIn reads several words from one text.
func wordsIn(book *screening.Rulebook, text string, decimalComma bool) (Parsed, error) {
	p := parser{book: book, decimalComma: decimalComma, quiet: true}
	words := strings.Fields(text)
	if len(words) > MaxWords {
		return Parsed{}, problem("", "%d words are too many for one part; at most %d", len(words), MaxWords)
	}
	for _, w := range words {
		if err := p.word(w); err != nil {
			return Parsed{}, err
		}
	}
	return p.parsed, nil
}

// entries counts the cells that may hold readings.
func (c *CSV) entries(cells []string) int {
	n := 0
	for i, cell := range cells {
		if cell != "" && c.columns[i].kind == columnEntry {
			n++
		}
	}
	return n
}

// cell takes one cell under a header that a word's left side could be.
func (c *CSV) cell(row *Row, p *parser, i int, cell string) {
	name := c.columns[i].name
	bound := &c.targets[p.book.Kind][i]
	if bound.err != nil {
		row.fail(i+1, name, bound.err)
		return
	}
	value, err := tidy(unguard(cell))
	if err == nil {
		if suffix := c.columns[i].suffix; suffix != "" {
			value = withSuffix(value, suffix)
		}
		err = p.assign(&bound.target, value, name)
	}
	if err != nil {
		row.fail(i+1, name, unnamed(err, &bound.target))
		return
	}
	if bound.target.what == toRating || bound.target.what == toTrait {
		row.Header = strings.TrimSpace(row.Header + " " + name + "=" + value)
	}
}

// unnamed drops the name from an error whose place already says it.
func unnamed(err error, t *target) error {
	var e *Error
	if errors.As(err, &e) && (e.Of == string(t.field.Name) || e.Of == t.name) {
		bare := *e
		bare.Of = ""
		return &bare
	}
	return err
}

// Guard puts an apostrophe before a text that a spreadsheet would run as a formula; unguard takes it away again.
func Guard(text string) string {
	if text != "" && strings.ContainsRune("=+-@\t\r'", rune(text[0])) {
		return "'" + text
	}
	return text
}

func unguard(text string) string {
	if len(text) > 1 && text[0] == '\'' && strings.ContainsRune("=+-@\t\r'", rune(text[1])) {
		return text[1:]
	}
	return text
}

// withSuffix gives the bare numbers of a cell the unit of its column. A number that ends in a letter carries its own.
func withSuffix(value, suffix string) string {
	open := strings.TrimSuffix(value, "..")
	if open == "" || !isDigit(open[len(open)-1]) || strings.Trim(open, "0123456789.,;+-<>=≤≥ ") != "" {
		return value
	}
	return open + suffix + value[len(open):]
}
