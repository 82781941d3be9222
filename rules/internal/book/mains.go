package book

import "goodbin/screening"

// MainsOrCracked is the look that every rulebook begins with. It bars a part whatever it reads: a part across the mains needs approvals
// that no bench reading shows, and a cracked body lets moisture in long before a reading changes.
func MainsOrCracked() screening.Check {
	return screening.Check{
		Name:     "mains-or-cracked",
		Words:    []string{"mains", "cracked"},
		Question: "Across the mains, now or planned, or cracked?",
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

// Look is a kind's whole inspection: the stop that every kind begins with, what is looked for in this kind, and what holds for whatever has
// leads. A kind may add at most [screening.MaxLook] less these four.
func Look(checks ...screening.Check) []screening.Check {
	all := append([]screening.Check{MainsOrCracked()}, checks...)
	return append(all, InCircuit(), Intermittent(), Leads())
}

// InCircuit holds every verdict back: what is measured in circuit is the circuit.
func InCircuit() screening.Check {
	return screening.Check{
		Name:     "in-circuit",
		Words:    []string{"in-circuit", "incircuit"},
		Question: "Is it still in circuit, with both ends connected?",
		Help:     "one end lifted counts as removed. In circuit everything in parallel is measured too, and a charged capacitor may hide in it",
		Verdict:  screening.Undecided,
		Reason:   "it was measured in circuit: whatever lies in parallel was measured with it",
		Do:       "LIFT one lead, with the supply off and its capacitors discharged, and measure again",
		Source:   screening.Source{Document: "repairers' rule", Status: screening.CommonPractice},
	}
}

// Intermittent rejects a part whose reading jumps when it is moved.
func Intermittent() screening.Check {
	return screening.Check{
		Name:     "intermittent",
		Words:    []string{"intermittent", "wiggles"},
		Question: "Does a reading jump when you tap it or wiggle a lead?",
		Help:     "tap the body with a plastic rod, bend each lead a little, and watch the meter; reseat the probes first",
		Verdict:  screening.Reject,
		Reason:   "a joint inside is loose: it will read well on the bench and fail in use",
		Do:       "SCRAP it, or mark it so that it is not used",
		Source:   screening.Source{Document: "repairers' rule", Status: screening.CommonPractice},
	}
}

// Leads is kept with the part: it says where the part still fits.
func Leads() screening.Check {
	return screening.Check{
		Name:     "poor-leads",
		Words:    []string{"poor-leads", "short-leads", "dull-leads", "corroded"},
		Question: "Are its leads short, dull or corroded?",
		Help:     "short: less than 10 mm, it fits few boards; dull or green: it will not take solder as it is",
		Reason:   "its leads are short, dull or corroded: see that it fits, and try on the lead's end that it takes solder",
		Source:   screening.Source{Document: "repairers' rule", Status: screening.CommonPractice},
	}
}
