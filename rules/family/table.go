package family

import (
	_ "embed"
	"errors"
	"slices"
	"strconv"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

var (
	//go:embed families.csv
	familiesCSV string
	//go:embed keep.csv
	keepCSV string
)

// Builtin returns the families that the program brings along: those refused, then those not refused for age alone. The slice is the
// caller's. A test holds the embedded files to load.
func Builtin() []Family { return slices.Clone(builtin()) }

var builtin = sync.OnceValue(func() []Family {
	all, err := read(familiesCSV, keepCSV)
	if err != nil {
		panic("family: embedded tables: " + err.Error())
	}
	return all
})

func read(families, keep string) ([]Family, error) {
	var all []Family
	refused := book.ReadTable("families.csv", families)
	for _, r := range refused.Rows() {
		all = append(all, refusedFamily(r))
	}
	kept := book.ReadTable("keep.csv", keep)
	for _, r := range kept.Rows() {
		all = append(all, keptFamily(r))
	}
	for i := range all {
		if slices.ContainsFunc(all[:i], func(f Family) bool { return f.ID == all[i].ID }) {
			return all, errors.New("family: " + all[i].ID + " stands twice")
		}
	}
	return all, errors.Join(refused.Err(), kept.Err())
}

func refusedFamily(r book.Row) Family {
	f := common(r)
	f.Types = foldAll(list(r.Text("types")))
	f.Unless = traitsIn(r, "unless")
	f.Undated = r.Text("undated") == "yes"
	f.Roles, f.Position = list(r.Text("roles")), r.Text("position")
	f.Margin, f.OhmPerVolt, f.LeastOhm = r.NumberOr("margin", 0), r.NumberOr("ohm-per-volt", 0), r.NumberOr("least-ohm", 0)
	f.Dispose, f.Do = Dispose(r.Required("dispose")), r.Required("do")
	if !slices.Contains([]Dispose{Scrap, Hazardous, Exhibit}, f.Dispose) {
		r.Errorf("dispose", "%q is none of scrap, hazardous, exhibit", f.Dispose)
	}
	if (f.Roles == nil) != (f.Position == "") {
		r.Errorf("position", "it words the roles: both or none")
	}
	f.Check = screening.Check{
		Name: r.Text("check"), Words: list(r.Text("words")), Question: r.Text("question"), Help: r.Text("help"),
		Verdict: screening.Barred, Reason: f.Label + ": " + f.Reason, Do: f.Do, Source: f.Source,
	}
	if (f.Check.Question == "") != (f.Check.Words == nil) || f.Check.Question != "" && f.Check.Name == "" {
		r.Errorf("question", "a check of its own has a name, words and a question")
	}
	if f.Check.Name == "" && f.Types == nil && f.Traits == nil && f.Unless == nil {
		r.Errorf("types", "nothing tells this family: no type, trait, exception or check")
	}
	f.row = rowText(r, "types", "unless", "undated", "check", "words", "roles", "position", "margin", "ohm-per-volt", "least-ohm", "do") + f.row
	return f
}

func keptFamily(r book.Row) Family {
	f := common(r)
	f.List = NotForAge
	return f
}

// common reads the columns that both tables have.
func common(r book.Row) Family {
	f := Family{
		ID: r.Required("id"), Label: r.Required("label"), Traits: traitsIn(r, "traits"), Reason: r.Required("reason"), Source: r.Source(),
		row: rowText(r, "id", "label", "kinds", "traits", "before", "reason", "source", "status"),
	}
	for _, k := range list(r.Required("kinds")) {
		f.Kinds = append(f.Kinds, screening.Kind(k))
	}
	if text := r.Text("before"); text != "" {
		before, ok := earliest(text)
		if !ok {
			r.Errorf("before", "%q is no day such as 1979-07-02", text)
		}
		f.Before = before
	}
	return f
}

func rowText(r book.Row, columns ...string) string {
	var b strings.Builder
	for _, c := range columns {
		b.WriteString(strconv.Quote(r.Text(c)))
	}
	return b.String()
}

// list splits a cell at its bars; an empty cell is nil.
func list(cell string) []string {
	var items []string
	for item := range strings.SplitSeq(cell, "|") {
		if item = strings.TrimSpace(item); item != "" {
			items = append(items, item)
		}
	}
	return items
}

func foldAll(names []string) []string {
	for i := range names {
		names[i] = fold(names[i])
	}
	return names
}

func traitsIn(r book.Row, column string) []TraitMatch {
	matches, wrong := traitMatches(r.Text(column))
	if wrong != "" {
		r.Errorf(column, "%q is not TRAIT=TEXT|TEXT", wrong)
	}
	return matches
}

// traitMatches reads "technology=oil*|paper-oil; case=can"; wrong is the first item that it cannot read.
func traitMatches(cell string) (matches []TraitMatch, wrong string) {
	for item := range strings.SplitSeq(cell, ";") {
		if item = strings.TrimSpace(item); item == "" {
			continue
		}
		name, texts, ok := strings.Cut(item, "=")
		m := TraitMatch{Name: strings.ToLower(strings.TrimSpace(name)), Texts: list(strings.ToLower(texts))}
		if !ok || m.Name == "" || m.Texts == nil {
			return nil, item
		}
		matches = append(matches, m)
	}
	return matches, ""
}
