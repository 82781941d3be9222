package family

import (
	"encoding/csv"
	"fmt"
	"io"
	"slices"
	"strings"
	"unicode"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/entry"
)

// HouseColumns are the columns of a group's own list, in the order in which they are kept. Only id, kinds, list and reason must be there.
//
//	id       a word of its own: letters, digits and hyphens
//	kinds    the kinds it is about, with bars between: film|paper
//	list     never-keep or always-keep
//	types    patterns of type numbers with bars between: ? is a digit, * anything; letters may follow
//	traits   TRAIT=TEXT|TEXT; TRAIT=TEXT: all must be met; * in a text stands for anything
//	before   made before this day: 1979-07-02, 1979-07 or 1979
//	undated  yes: a part without a date counts as made before
//	roles    never-keep only in these positions, with bars between; empty: everywhere
//	dispose  scrap, hazardous or exhibit; scrap where empty
//	reason   why, shown with the verdict
//	do       what to do with such a part, shown with the verdict
var HouseColumns = [...]string{"id", "kinds", "list", "types", "traits", "before", "undated", "roles", "dispose", "reason", "do"}

// Bounds of a group's list.
const (
	MaxHouseBytes = 1 << 20 // of a file
	MaxHouseRows  = 2000
	maxID         = 40  // bytes
	maxText       = 400 // bytes of a cell
)

var houseSource = screening.Source{Document: "your group's list", Status: screening.House}

// ReadHouse reads a group's list from a CSV with the columns of [HouseColumns]; name is the file's, for errors. Kinds, traits and their
// words are held against the rulebooks, ids against the built-in table, and a row that would keep what the built-in table always refuses is
// an error. All that is wrong is in the error, a line each; the families are only to be used where it is nil.
func ReadHouse(name, text string, books screening.Kinds) ([]Family, error) {
	if len(text) > MaxHouseBytes {
		return nil, fmt.Errorf("%s: longer than %d bytes", name, MaxHouseBytes)
	}
	table := book.ReadTable(name, withCommas(strings.TrimPrefix(text, "\ufeff")))
	if err := headerError(name, table); err != nil {
		return nil, err
	}
	if n := len(table.Rows()); n > MaxHouseRows {
		return nil, fmt.Errorf("%s: %d rows; at most %d", name, n, MaxHouseRows)
	}
	own := Builtin()
	var all []Family
	for _, r := range table.Rows() {
		f := houseFamily(houseRow{r}, books)
		switch {
		case f.ID == "":
		case slices.ContainsFunc(own, func(b Family) bool { return b.ID == f.ID }):
			r.Errorf("id", "%q is a family of the built-in table; give yours another id", f.ID)
		case slices.ContainsFunc(all, func(b Family) bool { return b.ID == f.ID }):
			r.Errorf("id", "%q stands twice", f.ID)
		}
		if by := refusedAltogether(f, own); by != "" {
			r.Errorf("list", "always-keep lifts only what your group never keeps: %q always bars these parts, and no row lifts that", by)
		}
		all = append(all, f)
	}
	if err := table.Err(); err != nil {
		return nil, err
	}
	return all, nil
}

// withCommas brings a file whose header is delimited by semicolons or tabs to commas; one that cannot be read so is left as it is.
func withCommas(text string) string {
	header, _, _ := strings.Cut(text, "\n")
	comma := rune(0)
	switch {
	case strings.Contains(header, ","):
	case strings.Contains(header, ";"):
		comma = ';'
	case strings.Contains(header, "\t"):
		comma = '\t'
	}
	if comma == 0 {
		return text
	}
	r := csv.NewReader(strings.NewReader(text))
	r.Comma = comma
	records, err := r.ReadAll()
	if err != nil {
		return text
	}
	var b strings.Builder
	if err := csv.NewWriter(&b).WriteAll(records); err != nil {
		return text
	}
	return b.String()
}

// headerError says which columns are unknown or lacking.
func headerError(name string, table *book.Table) error {
	known := strings.Join(HouseColumns[:], ", ")
	for _, c := range table.Columns() {
		if !slices.Contains(HouseColumns[:], c) {
			return fmt.Errorf("%s: line 1: %q is no column of a list of families; they are %s", name, c, known)
		}
	}
	if table.Columns() == nil {
		return table.Err()
	}
	for _, c := range []string{"id", "kinds", "list", "reason"} {
		if !table.Has(c) {
			return fmt.Errorf("%s: line 1: the column %q is missing; the columns are %s", name, c, known)
		}
	}
	return nil
}

// houseRow is a row in which most columns may be missing.
type houseRow struct{ book.Row }

func (r houseRow) text(column string) string {
	if !r.Has(column) {
		return ""
	}
	text := r.Text(column)
	if len(text) > 1 && entry.Guard(text[1:]) == text {
		text = text[1:] // it was guarded against spreadsheets when it was written
	}
	switch {
	case len(text) > maxText:
		r.Errorf(column, "longer than %d bytes", maxText)
	case strings.ContainsFunc(text, func(c rune) bool { return !unicode.IsPrint(c) }):
		r.Errorf(column, "%q holds a control character", text)
	default:
		return text
	}
	return ""
}

func houseFamily(r houseRow, books screening.Kinds) Family {
	f := Family{
		ID: strings.ToLower(r.text("id")), Reason: r.text("reason"), Do: r.text("do"), House: true, Source: houseSource,
		Types: foldAll(list(r.text("types"))), Roles: list(strings.ToLower(r.text("roles"))), Dispose: Dispose(r.text("dispose")),
	}
	f.Label = "your group's list, " + f.ID
	if f.ID == "" || len(f.ID) > maxID || strings.Trim(f.ID, "abcdefghijklmnopqrstuvwxyz0123456789-") != "" {
		r.Errorf("id", "%q is no id; it is a word of letters, digits and hyphens such as no-carbon-film", r.text("id"))
	}
	if !r.Has("reason") {
		r.Errorf("reason", "is empty; say why, it is shown with the verdict")
	}
	switch r.text("list") {
	case NeverKeep.String():
	case AlwaysKeep.String():
		f.List = AlwaysKeep
	default:
		r.Errorf("list", "%q is neither never-keep nor always-keep", r.text("list"))
	}
	f.readMade(r)
	f.readKinds(r, books)
	f.readTraits(r, books)
	f.readDisposal(r)
	f.row = strings.Join(f.Record(), "\x00")
	return f
}

func (f *Family) readMade(r houseRow) {
	if text := r.text("before"); text != "" {
		before, ok := earliest(text)
		if !ok {
			r.Errorf("before", "%q is no day of making such as 1979-07-02, 1979-07 or 1979", text)
		}
		f.Before = before
	}
	switch text := r.text("undated"); {
	case text == "" || text == "no":
	case text == "yes" && r.text("before") != "":
		f.Undated = true
	case text == "yes":
		r.Errorf("undated", "says nothing without a day in before")
	default:
		r.Errorf("undated", "%q is neither yes nor no", text)
	}
}

func (f *Family) readKinds(r houseRow, books screening.Kinds) {
	names := make([]string, len(books))
	for i, b := range books {
		names[i] = string(b.Kind)
	}
	for _, k := range list(strings.ToLower(r.text("kinds"))) {
		if _, ok := books.Find(screening.Kind(k)); !ok {
			hint := "the kinds are " + strings.Join(names, ", ")
			if near := entry.Nearest(k, names); near != nil {
				hint = "did you mean " + strings.Join(near, " or ") + "?"
			}
			r.Errorf("kinds", "%q is no kind; %s", k, hint)
			continue
		}
		f.Kinds = append(f.Kinds, screening.Kind(k))
	}
	if f.Kinds == nil && r.text("kinds") == "" {
		r.Errorf("kinds", "is empty; name the kinds it is about: %s", strings.Join(names, ", "))
	}
}

// readTraits reads traits and types, and holds them against what the kinds claim: a word is brought to the text that it stands for.
func (f *Family) readTraits(r houseRow, books screening.Kinds) {
	matches, wrong := traitMatches(r.text("traits"))
	if wrong != "" {
		r.Errorf("traits", "%q is not TRAIT=TEXT, as in technology=carbon-film|metal-film", wrong)
	}
	f.Traits = matches
	for _, k := range f.Kinds {
		b, _ := books.Find(k)
		if _, ok := b.ClaimField(screening.TraitType); f.Types != nil && !ok {
			r.Errorf("types", "a %s claims no type number", k)
		}
		for i := range matches {
			f.holdTrait(r, b, &matches[i])
		}
	}
}

func (f *Family) holdTrait(r houseRow, b *screening.Rulebook, m *TraitMatch) {
	field, ok := b.ClaimField(screening.Characteristic(m.Name))
	if !ok || !field.Trait {
		var names []string
		for _, c := range b.Claims {
			if c.Trait {
				names = append(names, string(c.Name))
			}
		}
		r.Errorf("traits", "%q is nothing that a %s claims in words; it has %s", m.Name, b.Kind, strings.Join(names, ", "))
		return
	}
	if len(field.Words) == 0 || field.AcceptText != nil {
		return
	}
	for i, text := range m.Texts {
		at := slices.IndexFunc(field.Words, func(w screening.Word) bool {
			return strings.EqualFold(w.Word, text) || glob(text, strings.ToLower(w.Text))
		})
		if at < 0 {
			r.Errorf("traits", "no %s has %s %q", b.Kind, m.Name, text)
		} else if !strings.Contains(text, "*") {
			m.Texts[i] = strings.ToLower(field.Words[at].Text)
		}
	}
}

func (f *Family) readDisposal(r houseRow) {
	switch {
	case f.List == AlwaysKeep && (f.Roles != nil || f.Dispose != "" || f.Do != ""):
		r.Errorf("list", "a part that is always kept has no roles, dispose or do")
	case f.List == AlwaysKeep:
	case f.Dispose == "":
		f.Dispose = Scrap
	case !slices.Contains([]Dispose{Scrap, Hazardous, Exhibit}, f.Dispose):
		r.Errorf("dispose", "%q is none of scrap, hazardous, exhibit", f.Dispose)
	}
	if f.Do == "" {
		f.Do = map[Dispose]string{
			Scrap:     "SCRAP it: your group never keeps these",
			Hazardous: "HAZARDOUS by your group's list: bag it whole, and hand it in by your local rules",
			Exhibit:   "KEEP it apart marked \"exhibit, not for use\"",
		}[f.Dispose]
	}
}

// Record returns a group's family as the cells of [HouseColumns]: what [ReadHouse] reads back.
func (f *Family) Record() []string {
	kinds := make([]string, len(f.Kinds))
	for i, k := range f.Kinds {
		kinds[i] = string(k)
	}
	traits := make([]string, len(f.Traits))
	for i, m := range f.Traits {
		traits[i] = m.Name + "=" + strings.Join(m.Texts, "|")
	}
	undated := ""
	if f.Undated {
		undated = "yes"
	}
	return []string{
		f.ID, strings.Join(kinds, "|"), f.List.String(), strings.Join(f.Types, "|"), strings.Join(traits, "; "), f.Before.String(), undated,
		strings.Join(f.Roles, "|"), string(f.Dispose), f.Reason, f.Do,
	}
}

// WriteHouse writes a group's families as a CSV that [ReadHouse] reads and no spreadsheet takes for formulas.
func WriteHouse(out io.Writer, families []Family) error {
	w := csv.NewWriter(out)
	records := make([][]string, 0, len(families)+1)
	records = append(records, HouseColumns[:])
	for i := range families {
		record := families[i].Record()
		for k := range record {
			record[k] = entry.Guard(record[k])
		}
		records = append(records, record)
	}
	return w.WriteAll(records)
}

// refusedAltogether names the built-in family that always bars every part that an always-keep row means, "" where there is none.
func refusedAltogether(keep Family, own []Family) string {
	if keep.List != AlwaysKeep || len(keep.Kinds) == 0 {
		return ""
	}
	by := ""
	for _, k := range keep.Kinds {
		for _, c := range keep.examples() {
			i := slices.IndexFunc(own, func(f Family) bool { return f.Always() && f.Holds(k, c) })
			if i < 0 {
				return ""
			}
			by = own[i].ID
		}
	}
	return by
}

// examples are claims that a family means: one for each of its type patterns, or of its traits' texts.
func (f *Family) examples() []screening.Claim {
	all := []screening.Claim{{}}
	spell := func(name string, patterns []string) {
		if patterns == nil {
			return
		}
		var more []screening.Claim
		for _, c := range all {
			for _, p := range patterns[:min(len(patterns), 20)] {
				more = append(more, c.WithTrait(name, strings.NewReplacer("?", "1", "*", "").Replace(p)))
			}
		}
		all = more[:min(len(more), 400)]
	}
	spell(screening.TraitType, f.Types)
	for _, m := range f.Traits {
		spell(m.Name, m.Texts)
	}
	return all
}

// StillBarred lists the built-in families that refuse some of the parts that an always-keep row is about: the row does not lift them.
func StillBarred(keep Family) []Family {
	var still []Family
	for _, f := range builtin() {
		if keep.List == AlwaysKeep && f.Always() && slices.ContainsFunc(f.Kinds, func(k screening.Kind) bool { return slices.Contains(keep.Kinds, k) }) {
			still = append(still, f)
		}
	}
	return still
}
