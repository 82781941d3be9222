// Package tantalum is the rulebook of tantalum capacitors, solid (dipped beads, moulded chips, sealed cans) and wet.
//
// A solid part has nothing in it that could dry out: it fails by its oxide, as a short, and then it can ignite. So capacitance and the absence
// of a short are required, which a pocket meter answers, while leakage at rated voltage and the losses are wanted. A wet part can dry out or leak
// acid: its losses are required too, as of any wet electrolytic. No reading shows how a solid part takes the surge of a low-impedance rail.
package tantalum

import (
	_ "embed"
	"fmt"
	"math"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/rules/internal/oxide"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's word.
const Kind screening.Kind = "tantalum"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

// The technologies, and the cases that change what is said.
const (
	solid = "solid"
	wet   = "wet"

	caseBead = "bead"
	caseChip = "chip"
	caseCan  = "can"
)

var (
	//go:embed leakage.csv
	leakageCSV string
	//go:embed tan_delta.csv
	tanDeltaCSV string
	//go:embed figures.csv
	figuresCSV string
)

// tables panics on a bad table; TestEmbeddedTablesLoad reads every one of them.
var tables = sync.OnceValue(func() *oxide.Tables {
	t, err := oxide.Read(leakageCSV, tanDeltaCSV, figuresCSV, solid, wet)
	if err != nil {
		panic("tantalum: embedded tables: " + err.Error())
	}
	return t
})

var shared = sync.OnceValue(func() *oxide.Rules {
	return &oxide.Rules{
		Span: capacitor.Span{Kind: "a tantalum capacitor", Least: 1e-9, Most: 0.1}, Tables: tables(), Technology: technology,
		LossNeed: lossNeed, LeakageNote: hotLeakage,
		LossLines: []string{
			"at 100 kHz standard solid types are remembered at 7.5 Ω (1 µF 35 V), 2 to 3 Ω (10 µF 16 V) and 0.9 Ω (100 µF 10 V): for comparison only",
		},
	}
})

func named(name string) oxide.Figure { return tables().Named(name, "") }

// Book returns the rulebook.
func Book() *screening.Rulebook {
	rules := shared()
	return &screening.Rulebook{
		Kind: Kind, Label: "tantalum capacitor", Tables: book.Version(Kind, edition, leakageCSV, tanDeltaCSV, figuresCSV),
		Claims: claims(), Bench: oxide.Bench(), Look: looks(), Complete: complete,
		Limits: rules.Limits, Convert: rules.Convert, Adjust: adjust, Untested: untested, Cautions: cautions, Recipes: rules.Recipes,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		capacitor.CapacitanceClaim("10uF"),
		{
			Definition: screening.RatedVoltage, Required: true, Example: "16V",
			Help: "as printed; a colour, letter or code is read by \"marking\"",
		},
		capacitor.ToleranceClaim("K"),
		{
			Definition: book.Trait(screening.TraitTechnology, "technology"), Trait: true, Example: solid,
			Help: "solid (nearly all), or wet: a metal can of 6 to 125 V with a glass seal; solid is taken where nothing is given",
			Words: []screening.Word{
				{Word: solid, Text: solid},
				{Word: "mno2", Text: solid},
				{Word: wet, Text: wet},
			},
		},
		{
			Definition: book.Trait(screening.TraitCase, "case"), Trait: true, Example: caseBead,
			Help: "bead (dipped, two leads one side), chip (moulded) or can (sealed metal); the stripe of a chip is plus",
			Words: []screening.Word{
				{Word: caseBead, Text: caseBead},
				{Word: "dipped", Text: caseBead},
				{Word: caseChip, Text: caseChip},
				{Word: "smd", Text: caseChip},
				{Word: "moulded", Text: caseChip},
				{Word: caseCan, Text: caseCan},
			},
		},
		capacitor.DatedClaim("year or decade; early dipped beads are the ones that fail on low-impedance rails"),
	}
}

// technology is solid unless the claim says wet.
func technology(claim screening.Claim) string {
	if claim.Trait(screening.TraitTechnology) == wet {
		return wet
	}
	return solid
}

func lossNeed(claim screening.Claim) screening.Need {
	if technology(claim) == wet {
		return screening.Required
	}
	return screening.Wanted
}

func complete(claim screening.Claim) (screening.Claim, []screening.Reason, error) {
	switch t := claim.Trait(screening.TraitTechnology); t {
	case "", solid, wet:
	default:
		return claim, nil, fmt.Errorf("technology: %s is neither solid nor wet; polymer types are the kind polymer", quantity.Quote(t))
	}
	if c := claim.Trait(screening.TraitCase); technology(claim) == wet && (c == caseBead || c == caseChip) {
		return claim, nil, fmt.Errorf("technology: a %s is solid; wet types are sealed metal cans", c)
	}
	tolerance := named("tolerance")
	return capacitor.Complete(claim, shared().Span, capacitor.Default{Low: -tolerance.Value, High: tolerance.Value, Source: tolerance.Source})
}

// hotLeakage says what may flow at 85 °C: information, since nobody measures there.
func hotLeakage(claim screening.Claim, u capacitor.Unit) string {
	if technology(claim) == wet {
		return ""
	}
	return fmt.Sprintf("at 85 °C up to %s: %s", quantity.Format(HotLimit(u.Farad, u.Volts), quantity.Ampere, 3), named("hot").Source)
}

// HotLimit is the leakage of a new solid part at 85 °C and rated voltage, ampere: 0.1·CV, at least 5 µA (Nichicon F93, published).
func HotLimit(farad, volts float64) float64 {
	return math.Max(named("hot").Value*farad*volts, named("hot-floor").Value)
}

func looks() []screening.Check {
	return book.Look(
		screening.Check{
			Name: "burnt", Words: []string{"burnt", "charred", "blistered"},
			Question: "Is it charred, blistered or discoloured?",
			Help:     "a brown spot, a bubble, a hole with soot: it has been a short once",
			Verdict:  screening.Reject,
			Reason:   "it has been hot inside: a tantalum part that has burned once burns again",
			Do:       "SCRAP it, and find out what overloaded or reversed it before you fit another",
			Source:   screening.Source{Document: "repairers' rule", Status: screening.CommonPractice},
		},
		screening.Check{
			Name: "leaking", Words: []string{"leaking", "crusted", "bulged"},
			Question: "Is it wet, crusted at the seal or bulged?",
			Help:     "white or blue crust at the glass seal of a can",
			Verdict:  screening.Reject,
			Reason:   "the seal of a wet part has gone; what comes out is acid",
			Do:       "bag it with gloves on, wash what it touched, never open it; your local rules for acid waste",
			Source:   screening.Source{Document: "wet tantalum types hold sulphuric acid", Status: screening.FromMemory},
		},
		screening.Check{
			Name: "polarity-unknown", Words: []string{"polarity-unknown", "no-polarity"},
			Question: "Can you not tell which end is plus?",
			Help: "bead: a +, a line or the longer lead is plus; chip: the stripe is PLUS, the other way round than on an aluminium can; axial can: " +
				"the end with the glass seal is plus",
			Verdict: screening.Undecided,
			Reason:  "which end is plus is not known: reversed it is damaged, and can short later and ignite",
			Do:      "FIND which end is plus from its marking or a twin's; do not try it out",
			Source:  screening.Source{Document: "restorers' reports: reversed parts failed months later", Status: screening.CommonPractice},
		},
	)
}
