package electrolytic

import (
	"fmt"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// A non-polar electrolytic has oxide on both foils, so each direction is a part of its own: the same leakage limits hold both ways, and one
// reading proves one way only.

// The technologies: what is not stated is polar.
const (
	techPolar    = "polar"
	techNonPolar = "non-polar"
)

// nonPolarSet is the limit set of non-polar types, in use for them.
const nonPolarSet screening.LimitSet = "non-polar"

// LeakageReversed is the leakage of a non-polar part with its leads swapped against the first leakage reading.
var LeakageReversed = screening.Definition{
	Name: "leakage-reversed", Symbol: "IL rev", Label: "leakage current the other way round", Unit: quantity.Ampere,
}

// The criteria of the second direction.
const (
	criterionReversed        screening.Criterion = "leakage-reversed"
	criterionCeilingReversed screening.Criterion = "leakage-reversed-ceiling"
)

// way is a direction in which leakage is read.
type way struct {
	on               screening.Definition
	leakage, ceiling screening.Criterion
}

var (
	forward  = way{screening.Leakage, criterionLeakage, criterionCeiling}
	reversed = way{LeakageReversed, criterionReversed, criterionCeilingReversed}
)

// ways lists the directions in which a part must hold its voltage.
func ways(claim screening.Claim) []way {
	if nonPolar(claim) {
		return []way{forward, reversed}
	}
	return []way{forward}
}

func isLeakage(of screening.Characteristic) bool {
	return of == screening.Leakage.Name || of == LeakageReversed.Name
}

func isCeiling(c screening.Criterion) bool {
	return c == criterionCeiling || c == criterionCeilingReversed
}

func nonPolar(claim screening.Claim) bool {
	return claim.Trait(screening.TraitTechnology) == techNonPolar
}

func technologyField() screening.Field {
	return screening.Field{
		Definition: book.Trait(screening.TraitTechnology, "technology"), Trait: true, Example: techNonPolar,
		Help: "np, bp or non-polar as printed, and no polarity mark: its leakage is read both ways round; polar where nothing is given",
		Words: []screening.Word{
			{Word: "np", Text: techNonPolar},
			{Word: "bp", Text: techNonPolar},
			{Word: "non-polar", Text: techNonPolar},
			{Word: "nonpolar", Text: techNonPolar},
			{Word: "bipolar", Text: techNonPolar},
			{Word: "polar", Text: techPolar},
		},
	}
}

func checkTechnology(claim screening.Claim) error {
	switch t := claim.Trait(screening.TraitTechnology); t {
	case "", techPolar, techNonPolar:
		return nil
	default:
		return fmt.Errorf("technology: %q is neither polar nor non-polar (np, bp); solid types are the kinds tantalum and polymer", t)
	}
}

// connect says which way round a supply goes to a part: "plus to plus", or "either way round" for the first direction of a non-polar one.
func connect(claim screening.Claim, on screening.Characteristic) string {
	switch {
	case !nonPolar(claim):
		return "plus to plus"
	case on == LeakageReversed.Name:
		return "with the leads swapped against the first leakage reading"
	}
	return "either way round"
}

// neverReversed says so where a polar part was read the other way round.
func neverReversed(part screening.Part) []screening.Reason {
	if _, read := part.Reading(LeakageReversed.Name, ""); !read || nonPolar(part.Claim) {
		return nil
	}
	return []screening.Reason{book.Note(LeakageReversed.Name, "leakage the other way round counts for non-polar parts only: a polar part reversed by "+
		"more than 1 V is damaged and can burst; if it is marked NP or BP, claim np")}
}
