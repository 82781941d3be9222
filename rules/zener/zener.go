// Package zener is the rulebook of Zener diodes: the voltage at the current for which it is printed, brought there from half to twice that
// current by what the sheet allows of its slope; and the unmarked ones, kept as measured.
//
// A marked Zener outside its band is rejected, on either side: below, it is damaged or soft; above, it is not what it says. Where the
// marking was misread, judge it without a claim: then it is kept as measured.
package zener

import (
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind = types.Zener

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "3"

// The characteristics of a Zener.
var (
	// VZ is its voltage at a stated reverse current.
	VZ = screening.Definition{Name: "vz", Symbol: "VZ", Label: "Zener voltage", Unit: quantity.Volt}
	// ZZ is its slope resistance at a stated current.
	ZZ = screening.Definition{Name: "zz", Symbol: "ZZ", Label: "slope resistance", Unit: quantity.Ohm}
	// IZT is a rating: the current at which VZ is printed.
	IZT = screening.Definition{Name: "izt", Symbol: "IZT", Label: "test current", Unit: quantity.Ampere}
)

// The criteria.
const (
	voltageCriterion screening.Criterion = "zener-voltage"
	slopeCriterion   screening.Criterion = "slope"
	leakageCriterion screening.Criterion = "leakage"
	forwardCriterion screening.Criterion = "forward"
)

// rulebook is the rulebook's functions with the table of types that they look names up in.
type rulebook struct{ types *types.Table }

// Book returns the rulebook for a table of types.
func Book(t *types.Table) *screening.Rulebook {
	b := rulebook{t}
	return &screening.Rulebook{
		Kind: Kind, Label: "Zener diode", Tables: book.Version(Kind, edition, figuresCSV, lettersCSV) + ", " + t.Version(Kind),
		Claims: b.claims(), Bench: bench(), Look: book.Look(),
		Complete: b.complete, Limits: limits, Convert: convert, Adjust: adjust, Lesser: lesser, Untested: untested, Cautions: cautions,
		Recipes: recipes,
	}
}

func (b rulebook) claims() []screening.Field {
	return []screening.Field{
		{
			Definition: book.Trait(screening.TraitType, "type"), Trait: true, Example: "BZX79-C5V1", AcceptText: b.acceptType,
			Help: "the type number as printed; a known one says all the rest",
		},
		{Definition: VZ, Example: "5V1", Help: "the voltage printed on it; leave it out where nothing is printed"},
		{
			Definition: screening.Tolerance, Example: "5%", AcceptRange: toleranceLetter, Ambiguous: toleranceMeanings,
			Help: "in percent: letters A, C and D mean different things on different families",
		},
		{Definition: IZT, Example: "izt=5mA", Help: "the current at which its voltage is printed, from its sheet"},
		{Definition: screening.Ptot, Example: "500mW", Help: "the power it claims; not tested"},
		{Definition: ZZ, Example: "rated:zz@5mA=..60", Help: "the highest slope resistance its sheet allows, at the test current"},
		{Definition: screening.IR, Example: "rated:ir@2V=..1uA", Help: "the highest reverse current its sheet allows, at a voltage"},
		book.CaseField("case=DO-35"),
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
			Definition: VZ, Effort: 30 * time.Second, Example: "vz@5mA=5.12", FollowsNominal: true,
			Help: "volts across it, cathode (the band) to plus, with the current that flows: vz@5mA=5.12",
		},
		{
			Definition: screening.VF, Effort: 5 * time.Second, Default: screening.At(screening.Current, testerCurrent),
			Fit: screening.Fit{screening.Current: {Low: 0.2, High: 20}}, Example: "vf=0.72", Help: "diode test, red on the anode",
		},
		{
			Definition: ZZ, Effort: 2 * time.Minute, Example: "zz@5mA=20",
			Help: "change of volts over change of amperes around the test current",
		},
		{Definition: screening.IR, Effort: time.Minute, Example: "ir@2V=0.1uA", Help: "reverse current below the knee, at the voltage stated"},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the room", Example: "22C"},
	}
}

// testerCurrent is what a diode test is taken to send where no current is stated, A (house).
const testerCurrent = 1e-3
