package entry

import (
	"errors"
	"io"
	"strings"

	"goodbin/screening"
)

// TypeRow is one row of a file of type numbers: what a data sheet says of one type.
type TypeRow struct {
	Line   int // at which it begins
	Book   *screening.Rulebook
	Claim  screening.Claim // trait type is its name
	Alias  string
	Source string
	Note   string
	Errors []*CellError // what could not be read; a row with errors is not to be used
}

// MaxTypeRows is how many rows one file of type numbers may have: more than any bench keeps sheets for.
const MaxTypeRows = 20_000

const aliasName = "alias"

// typesCSV reads the rows of a file of type numbers.
type typesCSV struct {
	CSV
	alias int // its column; -1 where there is none
}

// ReadTypes reads a CSV file of type numbers whose header names them by the words of the command line: kind, type, alias, source, note, the
// traits of the kinds, and rated:NAME[@COND,…]. A unit in brackets after a name is the unit of that column's bare numbers, and a cell may
// carry its own condition: "110..450@ic=2mA,vce=5V". Delimiters and quoting are those of [CSV]. What is wrong with a row is in the row;
// the error ends the matter as that of [NewCSV] does.
func ReadTypes(in io.Reader, books screening.Kinds) ([]TypeRow, error) {
	t := typesCSV{CSV: CSV{books: books, records: newRecords(in), targets: map[screening.Kind][]boundTarget{}}, alias: -1}
	if err := t.readHeader(); err != nil {
		return nil, err
	}
	var rows []TypeRow
	for {
		cells, line, err := t.records.next()
		var spoiled *recordError
		switch {
		case errors.Is(err, io.EOF):
			return rows, nil
		case errors.As(err, &spoiled):
			rows = append(rows, TypeRow{Line: line, Errors: []*CellError{{Line: line, Err: spoiled}}})
			continue
		case err != nil:
			return rows, err
		case len(rows) == MaxTypeRows:
			return rows, &CellError{Line: line, Err: problem("", "the file has more than %d rows", MaxTypeRows)}
		}
		rows = append(rows, t.row(line, cells))
	}
}

// readHeader understands the first line. Every column must be one that a type has: what is left out without a word would be lost.
func (t *typesCSV) readHeader() error {
	cells, err := t.firstLine()
	if err != nil {
		return err
	}
	for i, cell := range cells {
		name, _ := cutUnit(cell)
		if strings.EqualFold(name, aliasName) {
			if t.alias >= 0 {
				return &CellError{Line: 1, Column: i + 1, Name: aliasName, Err: problem("", "stands in column %d too", t.alias+1)}
			}
			t.alias, cells[i] = i, ""
		}
	}
	if t.columns, err = readHeader(t.books, cells); err != nil {
		return err
	}
	for i, c := range t.columns {
		at := func(e *Error) error { return &CellError{Line: 1, Column: i + 1, Name: clean(c.name), Err: e} }
		switch c.kind {
		case columnKindOf, columnSource, columnNote, columnIgnored:
		case columnEntry:
			if err := t.bind(i, c.name); err != nil {
				return at(err)
			}
		default:
			return at(problem("", "is of a part, and no column of a file of types").
				hint("the columns are kind, type, alias, source, note, rated:NAME[@CONDITION] and the traits of the kind, such as polarity"))
		}
	}
	if !t.has("type") {
		return &CellError{Line: 1, Err: problem("", "no column names the type").hint("add a column named type")}
	}
	return nil
}

func (t *typesCSV) has(name string) bool {
	for _, c := range t.columns {
		if strings.EqualFold(c.name, name) {
			return true
		}
	}
	return false
}

// bind finds what a column means for each kind. A name that is both measured and claimed must say that it is claimed.
func (t *typesCSV) bind(i int, name string) *Error {
	usable := false
	var understood *Error // of a kind that understands the name, and says why it stands here in vain
	for _, b := range t.books {
		if t.targets[b.Kind] == nil {
			t.targets[b.Kind] = make([]boundTarget, len(t.columns))
		}
		bound := &t.targets[b.Kind][i]
		bound.target, bound.err = parseTarget(b, name)
		switch {
		case bound.err != nil:
		case bound.target.section != "":
			understood = problem("", "a type has no sections here")
			bound.err = understood
		case bound.target.what != toRating && bound.target.what != toTrait:
			understood = problem("", "is measured or seen on a part, and nothing that a sheet says").hint("what a sheet says is rated:%s", baseName(name))
			bound.err = understood
		default:
			usable = true
		}
	}
	switch {
	case usable:
		return nil
	case understood != nil:
		return understood
	}
	for _, b := range t.books {
		var e *Error
		if _, known := b.Find(screening.Characteristic(baseName(name))); known && errors.As(t.targets[b.Kind][i].err, &e) {
			return e
		}
	}
	return problem("", "is nothing that a sheet says of a type").hint("the columns are kind, type, alias, source, note, rated:NAME[@CONDITION] and traits")
}

// firstLine reads the header's cells and finds the delimiter.
func (t *typesCSV) firstLine() ([]string, error) {
	if err := t.records.check(); err != nil {
		return nil, err
	}
	var line string
	for strings.TrimSpace(line) == "" {
		var err error
		if line, err = t.records.nextLine(); err != nil {
			if errors.Is(err, io.EOF) {
				return nil, ErrEmptyFile
			}
			return nil, placed(t.records.line, err)
		}
	}
	if err := checkText(line); err != nil {
		return nil, placed(t.records.line, err)
	}
	t.records.delimiter = sniff(line, func(header string) bool {
		return knownTo(t.books, header) || baseName(header) == aliasName
	})
	t.comma = t.records.delimiter != ','
	cells, err := t.records.header(line)
	return append([]string(nil), cells...), placed(t.records.line, err)
}

// row understands one record.
func (t *typesCSV) row(line int, cells []string) TypeRow {
	head := Row{Line: line}
	row := TypeRow{Line: line}
	alias := ""
	for i, cell := range cells {
		switch {
		case i >= len(t.columns) && cell != "":
			head.fail(0, "", problem("", "the row has %d columns, the header %d", len(cells), len(t.columns)))
		case i == t.alias:
			alias, cells[i] = cell, ""
		}
	}
	cells = cells[:min(len(cells), len(t.columns))]
	if head.Errors == nil && t.head(&head, Record{Line: line, Cells: cells}) && t.hasTypes(&head) {
		p := parser{book: head.Book, decimalComma: t.comma, quiet: true}
		for i, cell := range cells {
			if cell != "" && t.columns[i].kind == columnEntry {
				t.typeCell(&head, &p, i, cell)
			}
		}
		row.Claim = p.parsed.Claim
		if row.Claim.Trait(screening.TraitType) == "" && head.Errors == nil {
			head.fail(0, "", problem("", "the type is missing"))
		}
	}
	var err error
	if row.Alias, err = traitText(&screening.Field{Definition: screening.Definition{Name: aliasName}}, unguard(alias)); err != nil {
		head.fail(t.alias+1, aliasName, unnamed(err, &target{name: aliasName}))
	}
	row.Book, row.Source, row.Note, row.Errors = head.Book, head.Source, head.Note, head.Errors
	return row
}

// hasTypes refuses a kind that has no type numbers.
func (t *typesCSV) hasTypes(row *Row) bool {
	if _, ok := row.Book.ClaimField(screening.TraitType); ok {
		return true
	}
	var kinds []string
	for _, b := range t.books {
		if _, ok := b.ClaimField(screening.TraitType); ok {
			kinds = append(kinds, string(b.Kind))
		}
	}
	row.fail(0, "", problem("", "%s has no type numbers", kindWithArticle(row.Book.Kind)).hint("the kinds that have are %s", orList(kinds)))
	return false
}

// typeCell takes one cell of a trait or rating.
func (t *typesCSV) typeCell(row *Row, p *parser, i int, cell string) {
	name := t.columns[i].name
	bound := &t.targets[p.book.Kind][i]
	if bound.err != nil {
		row.fail(i+1, name, unnamed(bound.err, &bound.target))
		return
	}
	cell = unguard(cell)
	var err error
	if bound.target.what == toTrait {
		if cell, err = tidy(cell); err == nil {
			err = p.assign(&bound.target, cell, name)
		}
	} else {
		var r screening.Rating
		r, err = p.sheetRating(bound.target.field, bound.target.at, cell, t.columns[i].suffix)
		if err == nil {
			err = p.addRating(r, name)
		}
	}
	if err != nil {
		row.fail(i+1, name, unnamed(err, &bound.target))
	}
}
