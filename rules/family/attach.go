package family

import (
	"slices"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

// edition goes up when a rule in this package changes; a change of the tables changes a rulebook's version by itself.
const edition = "1"

// Attach makes the families that concern a rulebook's kind part of it: their bars stop a claim before any number, their checks by eye are
// asked with the kind's own, a part that is refused in some positions says so with its verdict, and one that is old says that its age alone
// refuses nothing. The rulebook's version changes with the families, so that verdicts under others are stale. The rulebook is changed in
// place: hand in one that nobody uses yet.
func Attach(b *screening.Rulebook, families []Family) {
	var mine []Family
	for _, f := range families {
		if slices.Contains(f.Kinds, b.Kind) {
			mine = append(mine, f)
		}
	}
	if mine == nil {
		return
	}
	b.Tables += ", families-" + version(mine)
	b.Look = withChecks(b.Look, mine)
	b.Bars = bars(b.Kind, b.Bars, mine)
	b.Complete = complete(b.Kind, b.Complete, mine)
	b.Untested = untested(b.Kind, b.Untested, mine)
}

// version is a print of the families' rows.
func version(families []Family) string {
	rows := make([]string, 0, len(families)+1)
	for i := range families {
		rows = append(rows, families[i].row)
	}
	return edition + "-" + book.Fingerprint(rows...)
}

// withChecks adds the families' checks after the kind's own and before those that hold for whatever has leads. A kind that bars by one of a
// check's words already keeps its own.
func withChecks(look []screening.Check, families []Family) []screening.Check {
	var added []screening.Check
	for i := range families {
		c := families[i].Check
		if c.Question == "" || slices.ContainsFunc(look, func(has screening.Check) bool { return has.Verdict == screening.Barred && shareWord(has, c) }) {
			continue
		}
		added = append(added, c)
	}
	at := slices.IndexFunc(look, func(c screening.Check) bool { return c.Name == book.InCircuit().Name })
	if at < 0 {
		at = len(look)
	}
	return slices.Insert(slices.Clone(look), at, added...)
}

func shareWord(a, b screening.Check) bool {
	return a.Name == b.Name || slices.ContainsFunc(a.Words, func(w string) bool { return slices.Contains(b.Words, w) })
}

func bars(kind screening.Kind, own func(screening.Claim) []screening.Stop, families []Family) func(screening.Claim) []screening.Stop {
	return func(c screening.Claim) []screening.Stop {
		var stops []screening.Stop
		if own != nil {
			stops = own(c)
		}
		return append(stops, Barred(families, kind, c, Position{})...)
	}
}

type completion = func(screening.Claim) (screening.Claim, []screening.Reason, error)

func complete(kind screening.Kind, own completion, families []Family) completion {
	return func(c screening.Claim) (screening.Claim, []screening.Reason, error) {
		var notes []screening.Reason
		if own != nil {
			var err error
			if c, notes, err = own(c); err != nil {
				return c, notes, err
			}
		}
		for i := range families {
			f := &families[i]
			if f.List == NeverKeep || !f.Holds(kind, c) {
				continue
			}
			text := "age alone is no reason to refuse it (" + f.Label + "): " + f.Reason + "; " + f.Source.String()
			if f.List == AlwaysKeep {
				text = "your group always keeps it (" + f.ID + "): " + f.Reason
			}
			notes = append(slices.Clip(notes), screening.Reason{Code: screening.CodeNote, Text: text})
		}
		return c, notes, nil
	}
}

type untestedFunc = func(screening.Part, []screening.Finding) []string

func untested(kind screening.Kind, own untestedFunc, families []Family) untestedFunc {
	return func(p screening.Part, findings []screening.Finding) []string {
		var said []string
		if own != nil {
			said = own(p, findings)
		}
		return append(slices.Clip(said), NotFor(families, kind, p.Claim)...)
	}
}

// NotFor words the positions for which a claimed part is not to be used, with the reason.
func NotFor(families []Family, kind screening.Kind, c screening.Claim) []string {
	var said []string
	kept := groupKeeps(families, kind, c)
	for i := range families {
		f := &families[i]
		if f.List != NeverKeep || f.Roles == nil || f.House && kept || !f.Holds(kind, c) {
			continue
		}
		where := f.Position
		if where == "" {
			where = strings.Join(f.Roles, ", ")
		}
		said = append(said, "not for: "+where+" ("+f.Reason+")")
	}
	return said
}
