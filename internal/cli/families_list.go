package cli

import (
	"strings"

	"goodbin/rules/family"
	"goodbin/screening"
)

// listFamilies prints the families that match every word, list by list.
func (a *app) listFamilies(words []string) error {
	all, err := a.families()
	if err != nil {
		a.env.note("goodbin: your group's list is left out: %v", err)
	}
	var shown []family.Family
	for _, f := range all {
		if matchesFamily(&f, words) {
			shown = append(shown, f)
		}
	}
	if a.json {
		for i := range shown {
			if err := a.writeJSON(familyJSON(&shown[i])); err != nil {
				return err
			}
		}
	} else if err := a.printFamilies(shown); err != nil {
		return err
	}
	if len(shown) == 0 {
		a.env.note("goodbin: no family matches")
		return silent(ExitNotAccepted)
	}
	return nil
}

// matchesFamily reports whether every word is a kind or a type number of the family or stands in what is said of it.
func matchesFamily(f *family.Family, words []string) bool {
	said := strings.ToLower(strings.Join([]string{
		f.ID, f.Label, f.List.String(), kindsOf(f), strings.Join(f.Types, " "), f.Scope(), string(f.Dispose), f.Reason, f.Source.String(),
	}, " "))
	for _, w := range words {
		if !strings.Contains(said, strings.ToLower(w)) && !f.NamesType(w) {
			return false
		}
	}
	return true
}

func kindsOf(f *family.Family) string {
	kinds := make([]string, len(f.Kinds))
	for i, k := range f.Kinds {
		kinds[i] = string(k)
	}
	return strings.Join(kinds, ", ")
}

var familyHeadings = [...]string{
	family.NeverKeep:  "refused whatever they read",
	family.NotForAge:  "not refused for their age alone",
	family.AlwaysKeep: "always kept by your group (goes before what it never keeps, and before nothing that is built in)",
}

func (a *app) printFamilies(shown []family.Family) error {
	first := true
	for list, heading := range familyHeadings {
		begun := false
		for i := range shown {
			f := &shown[i]
			if int(f.List) != list {
				continue
			}
			if !begun {
				if !first {
					if err := a.env.line(""); err != nil {
						return err
					}
				}
				if err := a.env.strong(heading); err != nil {
					return err
				}
				begun, first = true, false
			}
			if err := a.printFamily(f); err != nil {
				return err
			}
		}
	}
	return nil
}

func (a *app) printFamily(f *family.Family) error {
	head := f.ID + ": " + f.Label
	if f.House {
		head = f.ID + " (your group's)"
	}
	switch {
	case f.Always():
		head += "  (always; " + string(f.Dispose) + ")"
	case f.List == family.NeverKeep:
		head += "  (" + scopeText(f) + ")"
	}
	for _, row := range []struct{ label, text string }{
		{"", head},
		{"    kinds    ", kindsOf(f)},
		{"    told by  ", toldBy(f)},
		{"    reason   ", f.Reason},
		{"    do       ", f.Do},
		{"    source   ", f.Source.String()},
	} {
		if row.text == "" {
			continue
		}
		if err := a.env.wrapped(row.label, row.text); err != nil {
			return err
		}
	}
	return nil
}

// scopeText says where a family is refused.
func scopeText(f *family.Family) string {
	switch {
	case f.Roles == nil:
		return "always"
	case f.Position == "":
		return "only as " + f.Scope()
	}
	return "only in " + f.Position + ": " + f.Scope()
}

// toldBy says what tells a part of the family, in the words of the command line.
func toldBy(f *family.Family) string {
	var by []string
	if f.Types != nil {
		by = append(by, "type="+strings.Join(f.Types, "|"))
	}
	for _, m := range f.Traits {
		by = append(by, m.Name+"="+strings.Join(m.Texts, "|"))
	}
	for _, m := range f.Unless {
		by = append(by, "not "+m.Name+"="+strings.Join(m.Texts, "|"))
	}
	if f.Before != 0 && f.List != family.NotForAge {
		text := "made before " + f.Before.String()
		if f.Undated {
			text += " or undated"
		}
		by = append(by, text)
	}
	text := strings.Join(by, ", ")
	switch {
	case f.Check.Name == "":
		return text
	case f.Types == nil && f.Traits == nil:
		return "seen=" + seenWord(f)
	}
	return text + "; or seen=" + seenWord(f)
}

// seenWord is the word that reports a family seen by eye.
func seenWord(f *family.Family) string {
	if len(f.Check.Words) > 0 {
		return f.Check.Words[0]
	}
	return f.Check.Name
}

type jsonFamily struct {
	Schema  int        `json:"schema"`
	ID      string     `json:"id"`
	Label   string     `json:"label"`
	List    string     `json:"list"`
	House   bool       `json:"house"`
	Kinds   []string   `json:"kinds"`
	Types   []string   `json:"types"`
	ToldBy  *string    `json:"told_by"`
	Seen    []string   `json:"seen"`
	Before  *string    `json:"before"`
	Undated bool       `json:"undated"`
	Roles   []string   `json:"roles"`
	Scope   *string    `json:"scope"`
	Verdict *string    `json:"verdict"`
	Dispose *string    `json:"dispose"`
	Reason  string     `json:"reason"`
	Do      *string    `json:"do"`
	Source  jsonSource `json:"source"`
}

func familyJSON(f *family.Family) jsonFamily {
	out := jsonFamily{
		Schema: schema, ID: f.ID, Label: f.Label, List: f.List.String(), House: f.House, Types: orEmpty(f.Types), ToldBy: text(toldBy(f)),
		Seen: orEmpty(f.Check.Words), Before: text(f.Before.String()), Undated: f.Undated, Roles: orEmpty(f.Roles), Dispose: text(string(f.Dispose)),
		Reason: f.Reason, Do: text(f.Do), Source: sourceJSON(f.Source), Kinds: []string{},
	}
	for _, k := range f.Kinds {
		out.Kinds = append(out.Kinds, string(k))
	}
	if f.List == family.NeverKeep {
		out.Scope, out.Verdict = text(scopeText(f)), text(screening.Barred.String())
	}
	return out
}

func orEmpty(s []string) []string {
	if s == nil {
		return []string{}
	}
	return s
}
