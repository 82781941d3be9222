package entry

import (
	"maps"
	"slices"
	"strings"

	"goodbin/screening"
)

// columnKind says what a column holds.
type columnKind uint8

const (
	columnEntry  columnKind = iota // a reading, rating, trait, seen or treated: what a word's left side names
	columnKindOf                   // the kind of part
	columnLot
	columnPart
	columnPlace
	columnSource
	columnNote
	columnClaim // bare words, several separated by spaces
	columnIgnored
	columnOutcome // of an earlier judging; not read
)

var columnNames = map[string]columnKind{
	"kind": columnKindOf, "lot": columnLot, "part": columnPart, "place": columnPlace, "source": columnSource, "note": columnNote,
	"claim": columnClaim,
	// What an export says besides, and a screening finds out anew.
	"verdict": columnOutcome, "grade": columnOutcome, "held-as": columnOutcome, "not-tested": columnOutcome, "why": columnOutcome,
	"next": columnOutcome, "tables": columnOutcome, "judged": columnOutcome, "count": columnOutcome, "left": columnOutcome,
}

// column is one column of the file.
type column struct {
	kind   columnKind
	name   string // as written, without the unit in brackets
	suffix string // unit for bare numbers, from brackets in the header: "esr@120Hz [mohm]"
}

// sniff chooses the delimiter under which most of the header's names are known; a tie goes to the one with more columns.
func sniff(line string, known func(string) bool) byte {
	best, bestScore := byte(','), -1
	for _, delimiter := range []byte{',', ';', '\t'} {
		r := records{delimiter: delimiter, in: nil}
		cells, err := r.header(line)
		score := len(cells)
		if err != nil {
			score = MaxColumns // too many columns, most likely: say so
		}
		for _, cell := range cells {
			if known(cell) {
				score += MaxColumns
			}
		}
		if score > bestScore {
			best, bestScore = delimiter, score
		}
	}
	return best
}

// header cuts the header line; it may not span lines.
func (r *records) header(line string) ([]string, error) {
	if strings.IndexByte(line, '"') < 0 {
		return r.split(line)
	}
	if strings.Count(line, `"`)%2 != 0 {
		return nil, &recordError{"a quote in the header is never closed"}
	}
	return r.quoted(line)
}

// baseName returns the name that a header begins with, without section, condition, unit and "rated:".
func baseName(header string) string {
	header = strings.TrimPrefix(strings.TrimSpace(header), ratedPrefix)
	if i := strings.IndexAny(header, "@/["); i >= 0 {
		header = header[:i]
	}
	return strings.ToLower(strings.TrimSpace(header))
}

// knownTo reports whether any kind knows the name of a header.
func knownTo(books screening.Kinds, header string) bool {
	name := baseName(header)
	if _, ok := columnNames[name]; ok || name == seenName || name == treatedName || name == string(screening.Temperature.Name) {
		return true
	}
	for _, b := range books {
		if _, ok := b.Find(screening.Characteristic(name)); ok {
			return true
		}
	}
	return false
}

// readHeader understands the header's cells. Every name must be known to some kind: a misspelt column would leave its readings out of
// every verdict.
func readHeader(books screening.Kinds, cells []string) ([]column, error) {
	columns := make([]column, len(cells))
	seen := map[string]int{}
	for i, cell := range cells {
		name, suffix := cutUnit(cell)
		low := strings.ToLower(name)
		kind, meta := columnNames[low]
		switch {
		case name == "":
			columns[i] = column{kind: columnIgnored}
			continue
		case meta:
		case !knownTo(books, name):
			return nil, headerError(books, i, name)
		default:
			if err := anyTarget(books, name); err != nil {
				return nil, &CellError{Line: 1, Column: i + 1, Name: clean(name), Err: err}
			}
		}
		if first, twice := seen[low]; twice {
			return nil, &CellError{Line: 1, Column: i + 1, Name: clean(name), Err: problem("", "stands in column %d too", first+1)}
		}
		seen[low] = i
		columns[i] = column{kind: kind, name: name, suffix: suffix}
	}
	return columns, nil
}

// cutUnit splits "esr@120Hz [mohm]" into the name and the unit of its bare numbers.
func cutUnit(header string) (name, suffix string) {
	header = strings.TrimSpace(header)
	if before, unit, ok := strings.Cut(header, "["); ok && strings.HasSuffix(unit, "]") {
		return strings.TrimSpace(before), strings.TrimSpace(strings.TrimSuffix(unit, "]"))
	}
	return header, ""
}

// anyTarget returns nil where the header reads well for one kind at least, else the error of the first kind that knows its name.
func anyTarget(books screening.Kinds, header string) error {
	var first error
	for _, b := range books {
		if _, known := b.Find(screening.Characteristic(baseName(header))); !known && first != nil {
			continue
		}
		_, err := parseTarget(b, header)
		if err == nil {
			return nil
		}
		if _, known := b.Find(screening.Characteristic(baseName(header))); known || first == nil {
			first = err
		}
	}
	return first
}

func headerError(books screening.Kinds, i int, name string) error {
	names := append([]string{seenName, treatedName}, slices.Sorted(maps.Keys(columnNames))...)
	for _, b := range books {
		names = append(append(names, benchNames(b)...), claimNames(b)...)
	}
	e := problem("", "no kind of part has such a reading or claim")
	if near := Nearest(baseName(name), names); near != nil {
		e = e.hint("did you mean %s?", orList(near))
	}
	return &CellError{Line: 1, Column: i + 1, Name: clean(name), Err: e}
}
