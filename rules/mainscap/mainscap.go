// Package mainscap is the rulebook of capacitors for the mains: interference suppression (classes X and Y) and motor-run and motor-start.
//
// Every one of them is barred from the mains, whatever it reads: a class is a type approval, an impulse, an endurance and a flame test that no
// bench repeats, and a used metallised film has already burned away some of its plates. What the person gets is an answer all the same: what the
// part claims, its readings beside the limits of new parts, what to fit instead, and how its charge is got rid of.
package mainscap

import (
	"fmt"
	"math"
	"regexp"
	"strconv"
	"strings"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's word.
const Kind screening.Kind = "mains-capacitor"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

// The classes that are no X or Y.
const (
	motorRun   = "motor-run"
	motorStart = "motor-start"
	unmarked   = "unmarked"
)

// unknown is the technology of a part that states none.
const unknown = "unknown"

var span = capacitor.Span{Kind: "a mains capacitor", Least: 10e-12, Most: 2e-3}

// The AC voltages that such a part may be rated for, V; and the network taken where none is printed.
const leastVolts, mostVolts, network = 50.0, 1000.0, 230.0

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "mains capacitor (X, Y, motor)", Tables: book.Version(Kind, edition, classesCSV, limitsCSV),
		Claims: claims(), Bench: bench(), Look: looks(), Bars: bars, Complete: complete, Limits: limits,
		Derive: capacitor.Derive, Convert: capacitor.Convert, Adjust: adjust, Cautions: cautions, Recipes: recipes,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		capacitor.CapacitanceClaim("470nF"),
		{
			Definition: screening.RatedVoltage, Example: "275VAC", AcceptRange: acceptAC,
			Help: "the AC voltage as printed: 275VAC, 250V~; 230 V is taken where none is",
		},
		classField(),
		capacitor.ToleranceClaim("K"),
		{
			Definition: book.Trait(screening.TraitTechnology, "technology"), Trait: true, Example: "pp",
			Help: "pp, pet, paper (metallised: a clear or amber block), ceramic, oil or electrolytic (motor-start)",
			Words: []screening.Word{
				{Word: "pp", Text: "pp"},
				{Word: "mkp", Text: "pp"},
				{Word: "pet", Text: "pet"},
				{Word: "mkt", Text: "pet"},
				{Word: "paper", Text: "paper"},
				{Word: "mp", Text: "paper"},
				{Word: "ceramic", Text: "ceramic"},
				{Word: "oil", Text: "oil"},
				{Word: "electrolytic", Text: "electrolytic"},
			},
		},
		capacitor.DatedClaim("year or decade; oil-filled parts of unknown date or before July 1979 may hold PCB"),
		{
			Definition: book.Trait(traitNoPCB, "marked \"No PCBs\""), Trait: true, Example: "no-pcb", Help: "only where the part itself is marked so",
			Words: []screening.Word{{Word: "no-pcb", Text: "no-PCBs"}, {Word: "no-pcbs", Text: "no-PCBs"}, {Word: "pcb-free", Text: "no-PCBs"}},
		},
	}
}

// traitNoPCB lifts the warning of oil that may hold PCB.
const traitNoPCB = "no-pcb"

// classField takes the classes that other kinds refuse, and the ones that have no letter.
func classField() screening.Field {
	f := capacitor.MainsClaims()[0]
	f.Help = "X1 to X3, Y1 to Y4, X1/Y2; motor-run or motor-start; unmarked where no class is printed"
	f.Words = []screening.Word{
		{Word: motorRun, Text: motorRun},
		{Word: "run", Text: motorRun},
		{Word: motorStart, Text: motorStart},
		{Word: "start", Text: motorStart},
		{Word: unmarked, Text: unmarked},
	}
	return f
}

var acPattern = regexp.MustCompile(`^~?(\d{2,4})(?:[vV]?~|[vV]\.?[aA]\.?[cC]\.?|[vV][rR][mM][sS]|[aA][cC])$`)

// acceptAC takes a bare word as an AC voltage: "275VAC", "250V~".
func acceptAC(word string) (low, high float64, ok bool) {
	m := acPattern.FindStringSubmatch(strings.TrimSpace(word))
	if m == nil {
		return 0, 0, false
	}
	volts, err := strconv.ParseFloat(m[1], 64)
	return volts, volts, err == nil
}

// bench lists what is read of such a part beside what it claims.
func bench() []screening.Field {
	return append([]screening.Field{
		capacitor.CapacitanceReading("capacitance=462nF", "discharged, out of circuit; a used metallised part reads low", capacitor.AnyFrequency),
		{
			Definition: screening.Resistance, Example: "resistance=OL", Effort: 10 * time.Second, Band: screening.Span{Low: 0, High: 1e12},
			Help: "ohms range; a discharge resistor inside reads as a steady resistance",
		},
		capacitor.TanDeltaReading("tan-delta@1kHz=0.002"),
		capacitor.ESRReading("esr@1kHz=0.7"),
		capacitor.InsulationReading("insulation-resistance@100V=>2000M"),
		capacitor.LeakageReading("leakage@100V=<0.1uA"),
	}, capacitor.Rest()...)
}

func looks() []screening.Check {
	return book.Look(
		screening.Check{
			Name: "oily", Words: []string{"oily", "bulged", "leaking"},
			Question: "Is it oily, wet, bulged or its seal open?",
			Help:     "oil round the terminals of a can, a lid pushed up, a smell",
			Verdict:  screening.Barred,
			Reason:   "a motor capacitor that leaks or bulges has failed, and oil from before July 1979, or of unknown date, is to be taken for PCB",
			Do: "bag it with gloves on; never open, drain, heat or puncture it; hand it in as hazardous waste by your local rules unless it is marked " +
				"\"No PCBs\"",
			Source: pcbRule,
		},
		screening.Check{
			Name: "no-approval", Words: []string{"no-approval", "unreadable"},
			Question: "Is its class or approval mark missing or unreadable?",
			Help:     "X1 to Y4, and the signs of the test houses; parts bought loose carry all of them",
			Verdict:  screening.Barred,
			Reason:   "without class and approvals nothing says what it was ever tested for",
			Do:       "never fit it across the mains; scrap it",
			Source:   screening.Source{Document: "approved parts only, by component makers' safety pages", Status: screening.House},
		},
	)
}

// complete makes one voltage of "275VAC", and says what the class claims.
func complete(claim screening.Claim) (screening.Claim, []screening.Reason, error) {
	for _, r := range claim.Ratings {
		if r.Of != screening.RatedVoltage.Name {
			continue
		}
		if !r.HasNominal() && r.Low == r.High {
			r.Nominal = r.Low
			claim = claim.WithRating(r)
		}
		if !r.HasNominal() || r.Nominal < leastVolts || r.Nominal > mostVolts {
			return claim, nil, fmt.Errorf("voltage: %s is no AC rating of a mains part; it is one value of %g to %g V such as 275VAC", r, leastVolts, mostVolts)
		}
	}
	if t := claim.Trait(screening.TraitTechnology); t != "" && tables().asked[t].words == "" {
		return claim, nil, fmt.Errorf("technology: %s is not known; one of pp, pet, paper, ceramic, oil, electrolytic", quantity.Quote(t))
	}
	if c := claim.Trait(capacitor.TraitMainsClass); c != "" && c != motorRun && c != motorStart && c != unmarked {
		if text, ok := classField().AcceptText(c); !ok || text != c {
			return claim, nil, fmt.Errorf("mains-class: %s is no class such as X2, Y1, X1/Y2, motor-run, motor-start or unmarked", quantity.Quote(c))
		}
	}
	claim, notes, err := capacitor.Complete(claim, span, defaultTolerance(claim))
	if err != nil {
		return claim, nil, err
	}
	return claim, append(notes, classNotes(claim)...), nil
}

// defaultTolerance is what parts that print none have (from memory).
func defaultTolerance(claim screening.Claim) capacitor.Default {
	s := screening.Source{Document: "mains parts that print no tolerance", Clause: "±20 % (X, Y), ±10 % (motor-run), −0/+20 % (motor-start)", Status: screening.FromMemory}
	switch claim.Trait(capacitor.TraitMainsClass) {
	case motorRun:
		return capacitor.Default{Low: -0.10, High: 0.10, Source: s}
	case motorStart:
		return capacitor.Default{Low: 0, High: 0.20, Source: s}
	}
	return capacitor.Default{Low: -0.20, High: 0.20, Source: s}
}

// acVolts is the claimed AC voltage; 230 V where none is.
func acVolts(claim screening.Claim) (volts float64, claimed bool) {
	if v, ok := claim.Nominal(screening.RatedVoltage.Name, ""); ok {
		return v, true
	}
	return network, false
}

// peak is the crest of the claimed AC voltage: √2·U.
func peak(claim screening.Claim) float64 {
	v, _ := acVolts(claim)
	return math.Sqrt2 * v
}
