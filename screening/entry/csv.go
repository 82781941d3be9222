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
// numbers. Kind and claim may be left empty in the rows of a lot after its first; the claim "nothing" is a part's own. The delimiter is a comma, a semicolon or a tab; a comma inside a cell is a decimal comma where it is not the delimiter.
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

// claimsNothing is the claim, in words, of a part that claims nothing whatever the other parts of its lot claim.
const claimsNothing = "nothing"

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
	if claim != nil && !strings.EqualFold(*claim, claimsNothing) {
		take(claim, &head.claim)
	}
	if known || len(c.heads) < maxClaims {
		c.heads[lot] = head
	}
}
