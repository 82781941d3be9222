// Package bipolar is the rulebook of bipolar transistors: silicon and germanium, single and Darlington.
//
// A transistor is told by its base-emitter voltage (which way round it conducts, of what it is made, one junction or two), by its gain at
// the current its sheet names, and by what leaks from collector to emitter with the base open. Two traps run through all of it. Gain
// depends on current, so a reading away from the sheet's current shows that the part amplifies and no more. And leakage doubles about
// every 10 K and is itself amplified, so a germanium part without its temperature says nothing, and a gain that contains the leakage is
// not a gain.
package bipolar

import (
	"goodbin/rules/internal/book"
	"goodbin/rules/types"
	"goodbin/screening"
)

// Kind is the kind's word.
const Kind screening.Kind = types.Bipolar

// The questions that a transistor must answer, and those worth asking.
const (
	CriterionPolarity         screening.Criterion = "polarity"
	CriterionMaterial         screening.Criterion = "material"
	CriterionVBE              screening.Criterion = "vbe"
	CriterionGain             screening.Criterion = "gain"
	CriterionGainAsRead       screening.Criterion = "gain-as-read" // germanium: the reading that leakage is taken from
	CriterionLeakage          screening.Criterion = "leakage"
	CriterionCollectorLeakage screening.Criterion = "collector-leakage"
	CriterionBreakdown        screening.Criterion = "breakdown"
	CriterionTemperature      screening.Criterion = "temperature" // germanium: stated, whatever it is
)

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "3"

// rulebook is the rulebook's functions with the table of types that they look names up in.
type rulebook struct{ types *types.Table }

// Book returns the rulebook of bipolar transistors for a table of types.
func Book(t *types.Table) *screening.Rulebook {
	b := rulebook{t}
	return &screening.Rulebook{
		Kind:     Kind,
		Label:    "bipolar transistor",
		Tables:   book.Version(Kind, edition, limitsCSV) + ", " + t.Version(Kind),
		Claims:   b.claims(),
		Bench:    bench(),
		Look:     book.Look(),
		Complete: b.complete,
		Limits:   b.limits,
		Derive:   derive,
		Convert:  convert,
		Adjust:   b.adjust,
		Lesser:   b.lesser,
		Untested: b.untested,
		Cautions: b.cautions,
		Recipes:  b.recipes,
	}
}
