package book

import (
	"crypto/sha256"
	"encoding/csv"
	"encoding/hex"
	"errors"
	"fmt"
	"io"
	"math"
	"slices"
	"strconv"
	"strings"

	"goodbin/screening"
)

// Table is an embedded CSV with a header line. Lines that begin with # are comments. Its getters never stop a load half way: they note
// what is wrong with row and column, and Err hands it all over at the end.
type Table struct {
	name    string
	columns []string
	rows    []Row
	errs    []error
}

// Row is one line of a table.
type Row struct {
	table *Table
	line  int // in the file, from 1
	cells []string
}

// ReadTable reads a CSV; name is the file's, for errors. It always returns a table: what is wrong with it is in Err.
func ReadTable(name, text string) *Table {
	t := &Table{name: name}
	r := csv.NewReader(strings.NewReader(text))
	r.Comment = '#'
	r.TrimLeadingSpace = true
	for {
		cells, err := r.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if err != nil {
			t.errs = append(t.errs, fmt.Errorf("%s: %w", name, err))
			break
		}
		for i := range cells {
			cells[i] = strings.TrimSpace(cells[i])
		}
		if t.columns == nil {
			t.columns = cells
			continue
		}
		line, _ := r.FieldPos(0)
		t.rows = append(t.rows, Row{table: t, line: line, cells: cells})
	}
	t.checkHeader()
	return t
}

func (t *Table) checkHeader() {
	if len(t.rows) == 0 && len(t.errs) == 0 {
		t.errs = append(t.errs, fmt.Errorf("%s: no rows", t.name))
	}
	for i, c := range t.columns {
		if c == "" || slices.Contains(t.columns[:i], c) {
			t.errs = append(t.errs, fmt.Errorf("%s: column %d: header %q is empty or a repeat", t.name, i+1, c))
		}
	}
}

// Rows returns the rows in the order of the file.
func (t *Table) Rows() []Row { return t.rows }

// Columns returns the header, in the order of the file; nil where there is none.
func (t *Table) Columns() []string { return t.columns }

// Has reports whether the table has a column.
func (t *Table) Has(column string) bool { return slices.Contains(t.columns, column) }

// Err returns everything that was wrong with the table and with what was asked of it so far.
func (t *Table) Err() error { return errors.Join(t.errs...) }

// Errorf notes something wrong with a cell that only the caller can see ("low above high").
func (r Row) Errorf(column, format string, args ...any) {
	r.table.errs = append(r.table.errs, fmt.Errorf("%s: line %d, %s: %s", r.table.name, r.line, column, fmt.Sprintf(format, args...)))
}

// Has reports whether a cell holds anything.
func (r Row) Has(column string) bool {
	i := slices.Index(r.table.columns, column)
	return i >= 0 && r.cells[i] != ""
}

// Text returns a cell, which may be empty. A column that the table does not have is noted.
func (r Row) Text(column string) string {
	i := slices.Index(r.table.columns, column)
	if i < 0 {
		r.Errorf(column, "there is no such column; the table has %s", strings.Join(r.table.columns, ", "))
		return ""
	}
	return r.cells[i]
}

// Required returns a cell that may not be empty.
func (r Row) Required(column string) string {
	s := r.Text(column)
	if s == "" {
		r.Errorf(column, "is empty")
	}
	return s
}

// Number returns a cell that must hold a finite number in plain digits ("0.22", "1e-6").
func (r Row) Number(column string) float64 {
	s := r.Required(column)
	if s == "" {
		return math.NaN()
	}
	x, err := strconv.ParseFloat(s, 64)
	if err != nil || math.IsNaN(x) || math.IsInf(x, 0) {
		r.Errorf(column, "%q is not a number such as 0.22", s)
		return math.NaN()
	}
	return x
}

// NumberOr returns a cell's number, or fallback where the cell is empty.
func (r Row) NumberOr(column string, fallback float64) float64 {
	if r.Text(column) == "" {
		return fallback
	}
	return r.Number(column)
}

// Source returns where the row's figures come from: the columns source, clause (which a table may lack) and status. Document and status may
// not be empty, and the status must be one of the known ones.
func (r Row) Source() screening.Source {
	s := screening.Source{Document: r.Required("source")}
	if r.table.Has("clause") {
		s.Clause = r.Text("clause")
	}
	status, ok := screening.StatusNamed(r.Required("status"))
	if !ok {
		r.Errorf("status", "%q is no status; one of published, second-hand, common practice, from memory, derived, house", r.Text("status"))
	}
	s.Status = status
	return s
}

// Fingerprint returns eight hexadecimal digits that change when any of the texts changes: the version of a rulebook's embedded tables.
func Fingerprint(texts ...string) string {
	h := sha256.New()
	for _, t := range texts {
		fmt.Fprintf(h, "%d:", len(t))
		io.WriteString(h, t)
	}
	return hex.EncodeToString(h.Sum(nil)[:4])
}
