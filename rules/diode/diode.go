// Package diode is the rulebook of rectifier, signal, Schottky and germanium diodes, single, dual and in bridges.
//
// A diode is told by its forward voltage at a tester's small current, and proved by what it blocks in reverse, as far as the bench goes. A
// breakdown above the rating is normal; below it the diode is damaged and no lesser claim helps.
package diode

import (
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind = types.Diode

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "3"

// TRR is the time that a diode claims to need to block again.
var TRR = screening.Definition{Name: "trr", Symbol: "trr", Label: "reverse recovery time", Unit: quantity.Second}

// The criteria.
const (
	forwardCriterion   screening.Criterion = "forward"
	blockingCriterion  screening.Criterion = "blocking"
	breakdownCriterion screening.Criterion = "breakdown"
	leakageCriterion   screening.Criterion = "leakage"
)

// TraitDual says that one case holds two diodes and how they are joined.
const TraitDual = "dual"

// testerCurrent is what a diode test is taken to send through a junction where no current is stated (house).
const testerCurrent = 1e-3

// rulebook is the rulebook's functions with the table of types that they look names up in.
type rulebook struct{ types *types.Table }

// Book returns the rulebook for a table of types.
func Book(t *types.Table) *screening.Rulebook {
	b := rulebook{t}
	return &screening.Rulebook{
		Kind: Kind, Label: "diode", Tables: book.Version(Kind, edition, expectedCSV, soundCSV, leakageCSV, variantsCSV) + ", " + t.Version(Kind),
		Claims: b.claims(), Bench: bench(), Look: book.Look(),
		Complete: b.complete, Limits: limits, Convert: convert, Adjust: adjust, Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func (b rulebook) claims() []screening.Field {
	return []screening.Field{
		{
			Definition: book.Trait(screening.TraitType, "type"), Trait: true, Example: "1N4148", AcceptText: b.acceptType,
			Help: "the type number as printed; a known one says all the rest",
		},
		{
			Definition: book.Trait(screening.TraitTechnology, "technology"), Trait: true, Example: "rectifier", Words: technologyWords(),
			Help: "rectifier, signal, fast, ultrafast, schottky, point-contact, gold-bonded; unknown where you cannot tell",
		},
		{
			Definition: book.Trait(screening.TraitMaterial, "material (si or ge)"), Trait: true, Example: "si", Help: "si or ge",
			Words: []screening.Word{
				{Word: "si", Text: "si"}, {Word: silicon, Text: "si"}, {Word: "ge", Text: "ge"}, {Word: germanium, Text: "ge"},
			},
		},
		{
			Definition: screening.VRRM, Example: "400V", AcceptRange: book.AtLeastIn(quantity.Volt, "V"),
			Help: "the reverse voltage it claims to block",
		},
		{
			Definition: screening.IFAV, Example: "1A", AcceptRange: book.AtLeastIn(quantity.Ampere, "A"),
			Help: "the forward current it claims to carry; not tested",
		},
		{
			Definition: book.Trait(TraitDual, "two diodes in one case"), Trait: true, Example: "dual",
			Help: "dual, common-cathode, common-anode or series; measure both: vf/1=… vf/2=…",
			Words: []screening.Word{
				{Word: "dual", Text: "dual"},
				{Word: "common-cathode", Text: "common cathode"},
				{Word: "common-anode", Text: "common anode"},
				{Word: "series", Text: "in series"},
			},
		},
		{Definition: screening.IFSM, Example: "rated:ifsm=30A", Help: "the surge of one half-wave that its sheet allows; not tested"},
		{Definition: screening.VF, Example: "rated:vf@1A=..1.1V", Help: "the highest forward voltage its sheet allows, at a current"},
		{Definition: screening.IR, Example: "rated:ir@400V=..5uA", Help: "the highest reverse current its sheet allows, at a voltage"},
		{Definition: TRR, Example: "rated:trr=50ns", Help: "the recovery time of its sheet; not tested"},
		book.CaseField("case=DO-41"),
		book.DatedField(),
	}
}

func (b rulebook) acceptType(word string) (string, bool) {
	row, ok := b.types.Lookup(Kind, word)
	return row.Type, ok
}

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.VF, Effort: 5 * time.Second, Default: screening.At(screening.Current, testerCurrent), Example: "vf=0.62",
			Help: "diode test, red on the anode; at another current say which: vf@10mA=0.72",
		},
		{
			Definition: screening.VBR, Effort: 5 * time.Second, Example: "vbr=OL",
			Ask:  "TURN THE PROBES and read again: OL shows that it blocks (vbr=OL)",
			Help: "turn the probes: OL is what a sound one shows; >30V where it blocked 30 V through a resistor",
		},
		{
			Definition: screening.IR, Effort: time.Minute, Example: "ir@20V=0.1uA",
			Help: "reverse current through a series resistor, at the voltage stated",
		},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the part, lying in the room", Example: "22C"},
	}
}
