// Package polymer is the rulebook of capacitors with a conductive polymer, aluminium and tantalum.
//
// Nothing in them dries out as a wet electrolyte does, and nothing heals as manganese dioxide does: they fail as shorts, or by an ESR that creeps
// up. Their leakage limit is generous, ten to twenty times that of other solid types, and makers differ: for a part of unknown series the
// laxest published limit counts. Capacitance and the absence of a short are required, which a pocket meter answers; the ESR, for which such a
// part is chosen, is wanted, and held against the part's own data sheet where that is claimed.
package polymer

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
const Kind screening.Kind = "polymer"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

// The technologies; a part that could be either is held to the laxest.
const (
	aluminium = "aluminium"
	tantalum  = "tantalum"
	unknown   = "unknown"
)

const criterionRatedESR screening.Criterion = "rated-esr"

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
	t, err := oxide.Read(leakageCSV, tanDeltaCSV, figuresCSV, aluminium, tantalum, unknown)
	if err != nil {
		panic("polymer: embedded tables: " + err.Error())
	}
	return t
})

var shared = sync.OnceValue(func() *oxide.Rules {
	return &oxide.Rules{
		Span: capacitor.Span{Kind: "a polymer capacitor", Least: 10e-9, Most: 0.1}, Tables: tables(), Technology: technology,
		LossNeed: func(screening.Claim) screening.Need { return screening.Wanted },
		LossLines: []string{
			"tens of milliohms are common, so use four wires or clips on the leads at the body, and zero the meter with them shorted; 120 Hz says little of " +
				"what it does at 100 kHz: its data sheet's figure there can be claimed as rated:esr@100kHz=..25m",
		},
	}
})

// Book returns the rulebook.
func Book() *screening.Rulebook {
	rules := shared()
	return &screening.Rulebook{
		Kind: Kind, Label: "conductive polymer capacitor", Tables: book.Version(Kind, edition, leakageCSV, tanDeltaCSV, figuresCSV),
		Claims: claims(), Bench: oxide.Bench(), Look: looks(), Complete: complete,
		Limits: limits, Convert: rules.Convert, Adjust: rules.Adjust, Untested: untested, Cautions: cautions, Recipes: rules.Recipes,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		capacitor.CapacitanceClaim("470uF"),
		{
			Definition: screening.RatedVoltage, Required: true, Example: "6V3",
			Help: "as printed",
		},
		capacitor.ToleranceClaim("M"),
		{
			Definition: screening.ESR, Example: "rated:esr@100kHz=..25m",
			Help: "the most that its data sheet prints, with the frequency",
		},
		{
			Definition: book.Trait(screening.TraitTechnology, "technology"), Trait: true, Example: aluminium,
			Help: "aluminium (cans, and some chips) or tantalum (chips); leave it out where you cannot tell",
			Words: []screening.Word{
				{Word: aluminium, Text: aluminium},
				{Word: "aluminum", Text: aluminium},
				{Word: "al", Text: aluminium},
				{Word: tantalum, Text: tantalum},
				{Word: "ta", Text: tantalum},
			},
		},
		{
			Definition: book.Trait(screening.TraitCase, "case"), Trait: true, Example: "can",
			Help: "can (round, with no vent marks: aluminium) or chip (moulded; its stripe is plus)",
			Words: []screening.Word{
				{Word: "can", Text: "can"},
				{Word: "radial", Text: "can"},
				{Word: "chip", Text: "chip"},
				{Word: "smd", Text: "chip"},
			},
		},
		capacitor.DatedClaim("year or decade"),
	}
}

// technology is what the claim says, aluminium of a can, else unknown.
func technology(claim screening.Claim) string {
	switch t := claim.Trait(screening.TraitTechnology); {
	case t != "":
		return t
	case claim.Trait(screening.TraitCase) == "can":
		return aluminium
	}
	return unknown
}

func complete(claim screening.Claim) (screening.Claim, []screening.Reason, error) {
	switch t := claim.Trait(screening.TraitTechnology); {
	case t != "" && t != aluminium && t != tantalum:
		return claim, nil, fmt.Errorf("technology: %s is neither aluminium nor tantalum", quantity.Quote(t))
	case t == tantalum && claim.Trait(screening.TraitCase) == "can":
		return claim, nil, fmt.Errorf("technology: a polymer can is aluminium; tantalum types are chips")
	}
	if r, ok := claim.Rating(screening.ESR.Name, ""); ok && !r.At.Has(screening.Frequency) {
		return claim, nil, fmt.Errorf("esr: the data sheet's figure holds at one frequency: write it as rated:esr@100kHz=..%s",
			quantity.Format(r.High, quantity.Ohm, 0))
	}
	t := tables().Named("tolerance", "")
	return capacitor.Complete(claim, shared().Span, capacitor.Default{Low: -t.Value, High: t.Value, Source: t.Source})
}

// limits adds to the shared ones the ESR that the part's own data sheet prints.
func limits(claim screening.Claim) ([]screening.Limit, error) {
	all, err := shared().Limits(claim)
	if err != nil {
		return nil, err
	}
	for _, r := range claim.Ratings {
		if r.Of != screening.ESR.Name || math.IsInf(r.High, 1) {
			continue
		}
		l := screening.Limit{
			On: screening.ESR.Name, Unit: quantity.Ohm, Section: r.Section, Criterion: criterionRatedESR, At: r.At, Low: math.Inf(-1), High: r.High,
			Need: screening.Wanted, Set: screening.GeneralSet, InUse: true, Source: book.SourceOf(&r),
			Formula: func() string { return "as its data sheet prints" },
		}
		all = append(all, oxide.Grades(l, tables().Named("loss", technology(claim)))...)
	}
	return all, nil
}

func looks() []screening.Check {
	return book.Look(
		screening.Check{
			Name: "burnt", Words: []string{"burnt", "charred", "bulged", "leaking"},
			Question: "Is it charred, discoloured, bulged or split?",
			Help:     "a polymer can has no liquid that could leak; one that is bulged or wet has been far too hot, or is another kind",
			Verdict:  screening.Reject,
			Reason:   "it has been overheated or overloaded: its polymer is damaged",
			Do:       "SCRAP it, and find out what overloaded it before you fit another",
			Source:   screening.Source{Document: "repairers' rule", Status: screening.CommonPractice},
		},
		screening.Check{
			Name: "polarity-unknown", Words: []string{"polarity-unknown", "no-polarity"},
			Question: "Can you not tell which end is plus?",
			Help:     "chip: the stripe is PLUS; can: the coloured half or stripe on top is minus",
			Verdict:  screening.Undecided,
			Reason:   "which end is plus is not known: reversed it shorts",
			Do:       "FIND which end is plus from its marking or a twin's; do not try it out",
			Source:   screening.Source{Document: "repairers' rule", Status: screening.CommonPractice},
		},
	)
}

func untested(part screening.Part, findings []screening.Finding) []string {
	lines := shared().Untested(part, findings)
	if _, claimed := part.Claim.Rating(screening.ESR.Name, ""); !claimed {
		lines = append(lines, "whether its ESR is low enough for its place (100 kHz): compare it with the part that it replaces")
	}
	return lines
}

// cautions: the stored charge at every step, and before any voltage what a reversed or weak part does.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	all := capacitor.Cautions(part, at, shared().Span, nil)
	if at != screening.AtMeasure {
		return all
	}
	return append(all, shared().UnderVoltage(part, "the stripe of a chip is plus, that of a can minus; it stands next to no reverse voltage",
		"It fails as a short, and a hot one smokes: eye protection.",
		screening.Source{Document: "makers on failure of solid electrolytic capacitors: short circuit", Status: screening.FromMemory})...)
}
