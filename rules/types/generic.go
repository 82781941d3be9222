package types

import (
	"embed"
	"errors"
	"fmt"
	"iter"
	"slices"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/entry"
	"goodbin/screening/quantity"
)

//go:embed *.csv
var files embed.FS

// ownFormat are the embedded files that are no table of a kind in the general format.
var ownFormat = []string{"transistors", "diodes", "zeners", "groups", "points", "grammar", "traps"}

// The columns that every table in the general format has. Of the others those that begin with "rated:" are ratings, the rest traits.
var commonColumns = []string{"type", "alias", "source", "status", "except", "note"}

const ratedColumn = "rated:"

// shared are the definitions that say which voltage and current a condition without a name is. A rating of a kind's own has its conditions
// named, and its unit is the one that its cells state; a test holds all of it against the rulebooks.
var shared = []screening.Definition{
	screening.ICEO, screening.IDSS, screening.IGSS, screening.VGSOff, screening.VGSTh, screening.RDSOn, screening.VF, screening.IR,
	screening.VRRM, screening.IFAV, screening.IFSM, screening.VCEO, screening.VDSS, screening.Ptot,
}

// general yields every embedded table in the general format: <kind>.csv, whose header is type,alias,<trait>…,rated:NAME…,pinout,case,
// source,status,except,note and whose ratings are VALUE[@COND,…] with units, as on the command line.
func general() iter.Seq2[screening.Kind, string] {
	return func(yield func(screening.Kind, string) bool) {
		entries, _ := files.ReadDir(".") // embedded: neither this nor the reading can fail
		for _, e := range entries {
			kind := strings.TrimSuffix(e.Name(), ".csv")
			if slices.Contains(ownFormat, kind) {
				continue
			}
			text, _ := files.ReadFile(e.Name())
			if !yield(screening.Kind(kind), string(text)) {
				return
			}
		}
	}
}

// readKind reads one table in the general format.
func (t *content) readKind(kind screening.Kind, text string) error {
	table := book.ReadTable(string(kind)+".csv", text)
	for _, c := range commonColumns {
		if !table.Has(c) {
			return errors.Join(table.Err(), fmt.Errorf("%s.csv: column %s is missing", kind, c))
		}
	}
	for _, r := range table.Rows() {
		l := newLine(r)
		for _, column := range table.Columns() {
			switch name, rated := strings.CutPrefix(column, ratedColumn); {
			case !r.Has(column) || slices.Contains(commonColumns, column):
			case rated:
				l.rating(screening.Characteristic(name), column)
			default:
				l.traits(column)
			}
		}
		if len(l.row.Ratings)+len(l.row.Traits) < 2 {
			r.Errorf("type", "%s says nothing", l.row.Type)
		}
		t.add(kind, r, l.row)
	}
	return table.Err()
}

// rating adds the rating of a cell.
func (l *line) rating(name screening.Characteristic, column string) {
	text := l.Text(column)
	d := screening.Definition{Name: name, Symbol: string(name), Label: string(name), Unit: unitOf(text)}
	if i := slices.IndexFunc(shared, func(d screening.Definition) bool { return d.Name == name }); i >= 0 {
		d = shared[i]
	}
	rating, err := entry.Rating(screening.Field{Definition: d}, screening.Condition{}, text, "")
	if err != nil {
		l.Errorf(column, "%s", err)
		return
	}
	rating.Typed, rating.Source = "", l.source(string(name))
	l.row.Ratings = append(l.row.Ratings, rating)
}

// unitOf finds the unit that a value's own letters name; a bare number has none.
func unitOf(text string) quantity.Unit {
	value, _, _ := strings.Cut(text, "@")
	for _, part := range strings.Split(value, "..") {
		if found, err := quantity.ParseAny(part); err == nil {
			return found[0].Unit
		}
	}
	return quantity.One
}
