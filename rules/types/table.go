package types

import (
	"maps"
	"slices"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

// Table is a table of type numbers, by kind. It is a value that does not change: [Table.With] makes another one. Its rows are read when
// they are first asked for: most runs of the program need only the versions.
type Table struct {
	versions map[screening.Kind]string
	content  func() *content
}

// content is the rows of a table.
type content struct {
	rows   map[screening.Kind][]Row
	byName map[screening.Kind]map[string]int // folded name or alias to index in rows
}

func newContent() *content {
	return &content{rows: map[screening.Kind][]Row{}, byName: map[screening.Kind]map[string]int{}}
}

// Builtin returns the table that the program brings along. A test holds the embedded files to load.
func Builtin() *Table { return builtin() }

var builtin = sync.OnceValue(func() *Table {
	return &Table{versions: builtinVersions(), content: sync.OnceValue(func() *content {
		c, err := read()
		if err != nil {
			panic("types: embedded tables: " + err.Error())
		}
		return c
	})}
})

// Version names the state of the rows of these kinds, house rows included, or of the whole table where none is named; a verdict under
// another version is stale.
func (t *Table) Version(kinds ...screening.Kind) string {
	if len(kinds) == 0 {
		kinds = slices.Sorted(maps.Keys(t.versions))
	}
	versions := make([]string, len(kinds))
	for i, kind := range kinds {
		versions[i] = t.versions[kind]
	}
	return book.Version("types", edition, versions...)
}

// edition goes up when the meaning of a table changes rather than its text.
const edition = "3"

// Kinds lists the kinds that the table has rows for, in the order of their names.
func (t *Table) Kinds() []screening.Kind {
	return slices.Sorted(maps.Keys(t.versions))
}

// Rows lists every row of a kind in the order of the table. They are there to be read.
func (t *Table) Rows(kind screening.Kind) []Row { return t.content().rows[kind] }

// Names lists every type number of a kind in the order of the table.
func (t *Table) Names(kind screening.Kind) []string {
	rows := t.Rows(kind)
	names := make([]string, len(rows))
	for i, r := range rows {
		names[i] = r.Type
	}
	return names
}

// GroupNamed reports whether any transistor has a gain group of this name, and how it is printed: "-25" and "25" are "25", "gr" is "GR".
func (t *Table) GroupNamed(name string) (string, bool) {
	for _, r := range t.Rows(Bipolar) {
		if g, ok := r.FindGroup(name); ok {
			return g.Name, true
		}
	}
	return "", false
}

// Lookup finds the row that a marking means: the type number as printed, whatever its case, spaces and hyphens, alone or followed by one
// of that type's gain groups ("bc547b", "BC337-25"); a Zener's tolerance letter may differ from the table's where the maker's rule for it
// is printed ("1N4733C"). The longest type that matches wins. Anything else is unknown.
//
// The row's slices are the table's own: they are there to be read.
func (t *Table) Lookup(kind screening.Kind, word string) (Row, bool) {
	folded := fold(word)
	if folded == "" {
		return Row{}, false
	}
	return t.content().lookup(kind, folded)
}

func (t *content) lookup(kind screening.Kind, folded string) (Row, bool) {
	if i, ok := t.byName[kind][folded]; ok {
		return t.rows[kind][i], true
	}
	for n := len(folded) - 1; n >= shortestType; n-- {
		i, ok := t.byName[kind][folded[:n]]
		if !ok {
			continue
		}
		if g, ok := t.rows[kind][i].FindGroup(folded[n:]); ok {
			row := t.rows[kind][i]
			row.Group = g.Name
			row.Traits = append(slices.Clip(row.Traits), screening.Trait{Name: screening.TraitGroup, Text: g.Name})
			return row, true
		}
	}
	if kind == Zener {
		return t.otherTolerance(folded)
	}
	return Row{}, false
}
