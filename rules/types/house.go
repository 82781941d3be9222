package types

import (
	"fmt"
	"maps"
	"slices"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

// HouseDocument names the source of a house figure whose row names none.
const HouseDocument = "your own table of types"

// HouseRow makes a row of the user's own table from what was claimed on its behalf: the trait type is its name, the trait group makes it a row
// of one gain group of that type. Every figure counts as house; document is the sheet that it was read from, "" where none is named.
func HouseRow(kind screening.Kind, claim screening.Claim, alias, note, document string) Row {
	if document == "" {
		document = HouseDocument
	}
	source := screening.Source{Document: document, Status: screening.House}
	row := Row{
		Kind: kind, Type: claim.Trait(screening.TraitType), Alias: alias, Note: note, Source: source,
		Traits: slices.Clone(claim.Traits), TempCoLow: notGiven, TempCoHigh: notGiven, House: true,
	}
	if kind == Bipolar { // elsewhere a group's letter stands in the type itself
		row.Group = claim.Trait(screening.TraitGroup)
	}
	for _, r := range claim.Ratings {
		r.Typed, r.Source = "", source
		row.Ratings = append(row.Ratings, r)
	}
	row.settle()
	return row
}

// settle sets what follows from a row's traits and ratings.
func (r *Row) settle() {
	r.Darlington = r.Trait(screening.TraitTechnology) == "darlington"
	if icbo, ok := r.Rating("icbo"); ok && icbo.Source.Status == screening.House {
		r.LeakageAs = "icbo"
	}
	r.Ratings, r.Traits = slices.Clip(r.Ratings), slices.Clip(r.Traits)
}

// With returns the table with house rows added. A row wins over the built-in row of the same kind and name: the figures and traits that it
// states replace the built-in ones, the others stay with their own sources. Rows that come later win over earlier ones of the same name.
func (t *Table) With(rows []Row) *Table {
	if len(rows) == 0 {
		return t
	}
	rows, versions := slices.Clone(rows), maps.Clone(t.versions)
	for i := range rows {
		versions[rows[i].Kind] = book.Fingerprint(versions[rows[i].Kind], fmt.Sprintf("%+v", rows[i]))
	}
	return &Table{versions: versions, content: sync.OnceValue(func() *content { return t.content().with(rows) })}
}

// with returns the content with house rows added; that of kinds without any is shared.
func (t *content) with(rows []Row) *content {
	n := &content{rows: maps.Clone(t.rows), byName: maps.Clone(t.byName)}
	own := map[screening.Kind]bool{} // the kinds whose rows are no longer shared with t
	for i := range rows {
		kind := rows[i].Kind
		if !own[kind] {
			own[kind] = true
			n.rows[kind] = slices.Clone(t.rows[kind])
			n.byName[kind] = map[string]int{}
			maps.Copy(n.byName[kind], t.byName[kind])
		}
		n.addHouse(&rows[i])
	}
	return n
}

// addHouse adds one house row to a table whose rows of that kind are its own.
func (t *content) addHouse(house *Row) {
	row := *house
	group := row.Group
	if group != "" { // its gain is the group's, the rest the type's
		row.Group = ""
		row.Traits = screening.Claim{Traits: row.Traits}.WithTrait(screening.TraitGroup, "").Traits
		row.Ratings = slices.DeleteFunc(slices.Clone(row.Ratings), func(r screening.Rating) bool { return r.Of == gain })
	}
	if base, known := t.lookup(row.Kind, fold(row.Type)); known {
		row = base.overruledBy(&row)
	}
	if g, ok := house.Rating(gain); ok && group != "" {
		row = row.withGroup(group, g, house.Note)
	}
	row.Kind = house.Kind
	name := fold(row.Type)
	i, stands := t.byName[row.Kind][name]
	if stands && fold(t.rows[row.Kind][i].Type) == name {
		t.rows[row.Kind][i] = row
	} else {
		i = len(t.rows[row.Kind])
		t.rows[row.Kind] = append(t.rows[row.Kind], row)
	}
	t.byName[row.Kind][name] = i
	if house.Alias != "" {
		t.byName[row.Kind][fold(house.Alias)] = i
	}
}

// gain is the characteristic that gain groups are of.
const gain screening.Characteristic = "hfe"

// overruledBy is r with the figures and traits of a house row in the place of its own.
func (r Row) overruledBy(house *Row) Row {
	if r.Group != "" { // the house row names one group of r as a type of its own
		if g, ok := r.FindGroup(r.Group); ok {
			r.Ratings = replaced(r.Ratings, []screening.Rating{g.Gain})
			r.Points = slices.Concat(r.Points, g.Points)
		}
		r.Groups, r.Group = nil, ""
		r.Traits = screening.Claim{Traits: r.Traits}.WithTrait(screening.TraitGroup, "").Traits
	}
	r.Type, r.House = house.Type, true
	for _, trait := range house.Traits {
		r.Traits = screening.Claim{Traits: r.Traits}.WithTrait(trait.Name, trait.Text).Traits
	}
	r.Ratings = replaced(r.Ratings, house.Ratings)
	r.Points = slices.DeleteFunc(slices.Clone(r.Points), func(p screening.Rating) bool { return states(house.Ratings, p.Of) })
	if states(house.Ratings, "vz") {
		r.TempCoLow, r.TempCoHigh = notGiven, notGiven
	}
	if house.Alias != "" {
		r.Alias = house.Alias
	}
	if house.Note != "" {
		r.Note = house.Note
	}
	r.Source = house.Source
	r.settle()
	return r
}

// withGroup is r with the gain of one group as a house row states it. A type of which nothing but groups is known has the gain of them all.
func (r Row) withGroup(name string, g screening.Rating, note string) Row {
	r.Groups = slices.Clone(r.Groups)
	at := slices.IndexFunc(r.Groups, func(x Group) bool { return fold(x.Name) == fold(name) || fold(x.Alias) == fold(name) })
	if at < 0 {
		at = len(r.Groups)
		r.Groups = append(r.Groups, Group{Name: strings.TrimPrefix(name, "-")})
	}
	r.Groups[at] = Group{Name: r.Groups[at].Name, Alias: r.Groups[at].Alias, Gain: g, Note: note}
	r.House = true
	if all, ok := r.Rating(gain); !ok || all.Source.Clause == groupsTogether {
		all = g
		for _, other := range r.Groups {
			all.Low, all.High = min(all.Low, other.Gain.Low), max(all.High, other.Gain.High)
		}
		all.Nominal, all.Source.Clause = notGiven, groupsTogether
		r.Ratings = replaced(r.Ratings, []screening.Rating{all})
	}
	return r
}

const groupsTogether = "its gain groups together"

// replaced is ratings with every one whose characteristic the others state replaced by those, in the place of the first.
func replaced(ratings, others []screening.Rating) []screening.Rating {
	var all []screening.Rating
	done := map[screening.Characteristic]bool{}
	for _, r := range ratings {
		switch {
		case !states(others, r.Of):
			all = append(all, r)
		case !done[r.Of]:
			done[r.Of] = true
			all = append(all, of(others, r.Of)...)
		}
	}
	for _, r := range others {
		if !done[r.Of] {
			done[r.Of] = true
			all = append(all, of(others, r.Of)...)
		}
	}
	return all
}

func of(ratings []screening.Rating, name screening.Characteristic) []screening.Rating {
	return slices.DeleteFunc(slices.Clone(ratings), func(r screening.Rating) bool { return r.Of != name })
}

func states(ratings []screening.Rating, name screening.Characteristic) bool {
	return slices.ContainsFunc(ratings, func(r screening.Rating) bool { return r.Of == name })
}
