package entry

import (
	"errors"
	"fmt"
	"io"
	"strings"
	"sync"

	"goodbin/screening"
)

// Row is one part of a CSV file.
type Row struct {
	Line   int // at which it begins
	Book   *screening.Rulebook
	Lot    string
	Part   string
	Place  string
	Source string
	Note   string
	Header string // what it claims, as written
	Parsed Parsed
	Errors []*CellError // what could not be read; a row with errors is not to be used
}

// CellError is what is wrong in one place of a file. Column counts from 1 and is 0 for the whole line.
type CellError struct {
	Line   int
	Column int
	Name   string // of the column
	Err    error
}

// Error returns the message with its place.
func (e *CellError) Error() string {
	switch {
	case e.Column == 0:
		return fmt.Sprintf("line %d: %v", e.Line, e.Err)
	case e.Name == "":
		return fmt.Sprintf("line %d, column %d: %v", e.Line, e.Column, e.Err)
	}
	return fmt.Sprintf("line %d, column %d (%s): %v", e.Line, e.Column, e.Name, e.Err)
}

// Unwrap returns the error without its place.
func (e *CellError) Unwrap() error { return e.Err }

// maxRowErrors is how many errors of one row are reported.
const maxRowErrors = 10

// maxClaims bounds the cache of claim cells; rows of one lot repeat theirs.
const maxClaims = 10_000

// CSV reads parts from a CSV file whose header names them by the words of the command line: kind, lot, part, place, source, note and claim
// (bare words), and NAME[/SECTION][@COND,…], rated:NAME, TRAIT, seen, treated. A unit in brackets after a name is the unit of that column's bare
// numbers. Kind and claim may be left empty in the rows of a lot after its first. The delimiter is a comma, a semicolon or a tab; a comma inside a cell is a decimal comma where it is not the delimiter.
type CSV struct {
	books    screening.Kinds
	records  *records
	columns  []column
	comma    bool // commas in cells are decimal commas
	targets  map[screening.Kind][]boundTarget
	heads    map[string]lotHead
	claims   sync.Map // claimKey → cachedClaim
	cached   int
	cachedMu sync.Mutex
}

type boundTarget struct {
	target target
	err    error
}

// NewCSV reads the header. Its errors end the matter: [ErrEmptyFile], [ErrBinaryFile], [ErrUTF16File], a [*CellError] for a column that no
// kind knows, or what reading gave.
func NewCSV(in io.Reader, books screening.Kinds) (*CSV, error) {
	c := &CSV{books: books, records: newRecords(in), heads: map[string]lotHead{}, targets: map[screening.Kind][]boundTarget{}}
	if err := c.records.check(); err != nil {
		return nil, err
	}
	var line string
	for strings.TrimSpace(line) == "" {
		var err error
		if line, err = c.records.nextLine(); err != nil {
			if errors.Is(err, io.EOF) {
				return nil, ErrEmptyFile
			}
			return nil, placed(c.records.line, err)
		}
	}
	if err := checkText(line); err != nil {
		return nil, placed(c.records.line, err)
	}
	c.records.delimiter = sniff(line, func(header string) bool { return knownTo(books, header) })
	c.comma = c.records.delimiter != ','
	cells, err := c.records.header(line)
	if err != nil {
		return nil, placed(c.records.line, err)
	}
	if c.columns, err = readHeader(books, cells); err != nil {
		return nil, err
	}
	for _, b := range books {
		bound := make([]boundTarget, len(c.columns))
		for i, col := range c.columns {
			if col.kind == columnEntry {
				bound[i].target, bound[i].err = parseTarget(b, col.name)
			}
		}
		c.targets[b.Kind] = bound
	}
	return c, nil
}

func placed(line int, err error) error {
	var spoiled *recordError
	if errors.As(err, &spoiled) {
		return &CellError{Line: max(line, 1), Err: spoiled}
	}
	return err
}

// Record is a row as it stands in the file, not yet understood.
type Record struct {
	Line  int
	Cells []string
	err   error
}

// Scan returns the next record, io.EOF at the end, or what ended the reading before it. It is not safe for concurrent use; Row is.
func (c *CSV) Scan() (Record, error) {
	cells, line, err := c.records.next()
	var spoiled *recordError
	switch {
	case errors.As(err, &spoiled):
		return Record{Line: line, err: spoiled}, nil
	case err != nil:
		return Record{}, err
	}
	rec := Record{Line: line, Cells: append([]string(nil), cells...)}
	c.inherit(rec.Cells)
	return rec, nil
}

// lotHead is what the first row of a lot says for those after it.
type lotHead struct{ kind, claim string }

// inherit fills in kind and claim of a row from the first row of its lot that states them.
func (c *CSV) inherit(cells []string) {
	var lot string
	var kind, claim *string
	for i := range min(len(cells), len(c.columns)) {
		switch c.columns[i].kind {
		case columnLot:
			lot = cells[i]
		case columnKindOf:
			kind = &cells[i]
		case columnClaim:
			claim = &cells[i]
		}
	}
	if lot == "" {
		return
	}
	head, known := c.heads[lot]
	take := func(cell *string, from *string) {
		switch {
		case cell == nil:
		case *cell == "":
			*cell = *from
		case *from == "":
			*from = *cell
		}
	}
	take(kind, &head.kind)
	take(claim, &head.claim)
	if known || len(c.heads) < maxClaims {
		c.heads[lot] = head
	}
}

// Next reads and understands the next row. Errors in the row are in the row; the error is io.EOF at the end, or what ended the reading.
func (c *CSV) Next() (Row, error) {
	r, err := c.Scan()
	if err != nil {
		return Row{}, err
	}
	return c.Row(r), nil
}

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
	p := parser{book: row.Book, decimalComma: c.comma}
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

// claim takes the bare words of the claim column. Readings are no claims.
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
		p.parsed.Treated = cached.parsed.Treated
		p.parsed.Look = append(p.parsed.Look, cached.parsed.Look...)
		p.parsed.Readings = append(p.parsed.Readings, cached.parsed.Readings...)
		p.parsed.Echo = append(p.parsed.Echo, cached.parsed.Echo...)
	}
}

func (c *CSV) readClaim(key claimKey, book *screening.Rulebook) cachedClaim {
	parsed, err := wordsIn(book, key.text, c.comma)
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
	p := parser{book: book, decimalComma: decimalComma}
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
		err = p.assign(bound.target, value, name+"="+cell)
	}
	if err != nil {
		row.fail(i+1, name, unnamed(err, bound.target))
		return
	}
	if bound.target.what == toRating || bound.target.what == toTrait {
		row.Header = strings.TrimSpace(row.Header + " " + name + "=" + value)
	}
}

// unnamed drops the name from an error whose place already says it.
func unnamed(err error, t target) error {
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
