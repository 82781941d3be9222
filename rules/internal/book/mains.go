package book

import "goodbin/screening"

// MainsOrCracked is the look that every rulebook begins with. It bars a part whatever it reads: a part across the mains needs approvals
// that no bench reading shows, and a cracked body lets moisture in long before a reading changes.
func MainsOrCracked() screening.Check {
	return screening.Check{
		Name:     "mains-or-cracked",
		Words:    []string{"mains", "cracked"},
		Question: "Is it, or will it be, across the mains, or is it cracked?",
		Help: "Across the mains: line to line, line to earth, or anywhere that a short connects a person to the supply. " +
			"Cracked: any split, chip or hole in body, sleeve or seal, however small.",
		Verdict: screening.Barred,
		Reason: "no reading shows that a salvaged part is safe across the mains, and a cracked part can read well until the day it burns: " +
			"fit a new, approved part",
		Do: "scrap it, or keep it apart marked \"exhibit, not for use\"; never open it, and dispose of it by your local rules",
		Source: screening.Source{
			Document: "house rule; cracked mains capacitors that still measured well have smoked on power-up (restorers' reports)",
			Status:   screening.House,
		},
	}
}
