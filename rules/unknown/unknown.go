// Package unknown is the rulebook of parts that nobody can name. It claims nothing, so nothing can be accepted of it: it says what a part
// may be by its leads and a few safe readings, which reading would tell the remaining ones apart, and keeps what was measured.
package unknown

import (
	"fmt"
	"slices"
	"strings"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

// Kind is the kind's name.
const Kind screening.Kind = "unknown"

const edition = "2"

// Identity is what the part is not known to have: no reading answers it, so a part of this kind stays undecided until it is named.
var Identity = book.Trait("identity", "what it is")

const identityCriterion screening.Criterion = "identity"

const (
	traitLeads   = "leads"
	traitMarking = "marking"
	traitColours = "colours"
)

// Book returns the rulebook. decode says what a marking may mean, a line a meaning; it may be nil.
func Book(decode func(marking string) []string) *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "part that nobody can name", Tables: book.Version(Kind, edition, candidatesCSV, classesCSV),
		Claims: claims(), Bench: bench(), Look: book.Look(),
		Complete: func(c screening.Claim) (screening.Claim, []screening.Reason, error) { return complete(c, decode) },
		Limits:   limits, Adjust: adjust, Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		{
			Definition: book.Trait(traitLeads, "number of leads"), Trait: true, Required: true, Example: "leads=2", Words: leadWords(),
			Ask: "COUNT its leads: leads=2, leads=3 or leads=4", Help: "2, 3 or 4; number them as you like and keep to it",
		},
		{Definition: book.Trait(screening.TraitCase, "case"), Trait: true, Example: "case=TO-92", Help: "what it looks like: glass, disc, can, TO-92"},
		{Definition: book.Trait(traitMarking, "marking"), Trait: true, Example: "marking=104", Help: "whatever can be read on it; goodbin marking says what it can mean"},
		{Definition: book.Trait(traitColours, "colours"), Trait: true, Example: "colours=brown-black-red", Help: "bands or dots in their order"},
		{
			Definition: Identity, Trait: true, Effort: time.Hour, Example: "identity=trimmer?", Help: "what you take it for; it is kept and decides nothing",
			Ask: "NAME it, and judge it as one of the kinds above",
		},
		book.DatedField(),
	}
}

func leadWords() []screening.Word {
	return []screening.Word{
		{Word: "2", Text: "2"},
		{Word: "3", Text: "3"},
		{Word: "4", Text: "4"},
		{Word: "two-leads", Text: "2"},
		{Word: "three-leads", Text: "3"},
		{Word: "four-leads", Text: "4"},
	}
}

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.VF, Example: "vf/1-2=0.62", Effort: 10 * time.Second, Band: screening.Span{Low: 0, High: 100},
			Help: "diode test, red probe on the first lead of the pair, black on the second; OL counts as above 2 V. A meter that stops sooner: vf/1-2=1.5V..",
			Ask:  "READ the diode test, red probe on the first lead of the pair, black on the second (OL counts)",
		},
		{
			Definition: screening.Resistance, Example: "resistance/1-2=4.7k", Effort: 12 * time.Second,
			Help: "ohms between the two leads, fingers off; OL counts",
			Ask:  "READ the ohms between the two leads, fingers off (OL counts)",
		},
		{
			Definition: screening.Capacitance, Example: "capacitance=100n", Effort: 15 * time.Second,
			Help: "discharged, on the capacitance range; what the open probes show is subtracted",
		},
		{Definition: screening.Temperature, PerPart: true, Effort: 20 * time.Second, Example: "temperature=22C", Help: "of the room"},
	}
}

// complete holds the number of leads to what the table knows, and says what the marking can mean.
func complete(c screening.Claim, decode func(string) []string) (screening.Claim, []screening.Reason, error) {
	if n := c.Trait(traitLeads); n != "" && !slices.Contains([]string{"2", "3", "4"}, n) {
		return c, nil, fmt.Errorf("leads: %q; parts with 2, 3 or 4 leads can be told apart by a meter, anything else by its marking only", n)
	}
	var notes []screening.Reason
	if text := c.Trait(traitMarking); text != "" && decode != nil {
		meanings := decode(text)
		for i, m := range meanings {
			if i == mostMeanings {
				notes = append(notes, book.Note("", "and %d more meanings: goodbin marking %s", len(meanings)-i, text))
				break
			}
			notes = append(notes, book.Note("", "its marking can mean %s", m))
		}
		if len(meanings) == 0 {
			notes = append(notes, book.Note("", "no scheme of marking fits %q", text))
		}
	}
	return c, notes, nil
}

// mostMeanings is how many meanings of a marking are said with a verdict.
const mostMeanings = 4

// limits asks for every reading that may tell something, with any value; Adjust raises the one that tells most. What it is stays open.
func limits(c screening.Claim) ([]screening.Limit, error) {
	n := leadsOf(c)
	if n == 0 {
		return nil, nil
	}
	source := screening.Source{Document: "what tells parts apart that nobody can name", Status: screening.House}
	asked := func(on screening.Definition, section, note string) screening.Limit {
		return screening.Limit{
			On: on.Name, Section: section, Unit: on.Unit, Criterion: screening.Criterion("tells:" + string(on.Name)), Low: negInf, High: inf,
			Need: screening.Wanted, Set: screening.GeneralSet, InUse: true, Grade: screening.AnyGrade, Source: source, Note: note,
		}
	}
	var all []screening.Limit
	for _, m := range measurements(n) {
		all = append(all, asked(definitions[m.of], m.section, "any value: it tells what the part may be"))
	}
	identity := asked(Identity, "", "a part that nobody can name is accepted for nothing")
	identity.Criterion, identity.Need = identityCriterion, screening.Required
	return append(all, identity), nil
}

func leadsOf(c screening.Claim) int {
	text := c.Trait(traitLeads)
	if len(text) != 1 || text[0] < '2' || text[0] > '4' {
		return 0
	}
	return int(text[0] - '0')
}

// adjust says what the part may be, and asks for the reading that tells the remaining ones apart.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	n := leadsOf(part.Claim)
	if n == 0 {
		return findings, nil
	}
	left := possible(n, part.Readings)
	next, tells := separating(n, part.Readings, left)
	names := make([]string, len(left))
	for i, p := range left {
		names[i] = p.text()
	}
	reasons := []screening.Reason{}
	switch {
	case len(left) == 0:
		reasons = append(reasons, book.Note("", "no part in the table reads like this: measure again, or it has more inside than a meter shows (a chip, a module)"))
	case len(left) > mostNamed:
		reasons = append(reasons, book.Note("", "%d sorts of part remain possible", len(left)))
	default:
		for _, p := range left {
			reasons = append(reasons, p.reason())
		}
		reasons = append(reasons, book.Note("", doubt))
	}
	for i := range findings {
		f := &findings[i]
		switch {
		case tells && f.Limit.On == definitions[next.of].Name && f.Limit.Section == next.section:
			f.Need = screening.Required
		case f.Limit.Criterion != identityCriterion && f.Outcome == screening.Missing:
			f.Wants = screening.Gap{} // one reading at a time: what the others would tell is not known yet
		case f.Limit.Criterion == identityCriterion:
			f.Why = "not known"
			if len(left) > 0 && len(left) <= mostNamed {
				f.Why = "it may be " + strings.Join(names, ", or ")
			}
		}
	}
	return findings, reasons
}

// doubt stands with whatever remains.
const doubt = "a damaged part, or one with a chip inside, can read like another sort: its print and its place say more"

// mostNamed is how many sorts are named; above that more is to be measured first.
const mostNamed = 5

func untested(screening.Part, []screening.Finding) []string {
	return []string{"everything that only a named part can be held against"}
}
