// Package ceramic is the rulebook of ceramic capacitors: class 1, which keeps its value; class 2, which loses some with every decade of time
// and gets it back from heat; class 3, the barrier layers; and parts whose class nobody knows.
//
// The capacitance decides. What is known of ageing belongs in its limit: an old part of class 2 that reads low is no failed part. Loss and
// insulation are wanted: few benches can read them.
package ceramic

import (
	"fmt"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
)

// Kind is the kind's word.
const Kind screening.Kind = "ceramic"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

// traitClass is the dielectric by its EIA or IEC code.
const traitClass = "class"

// span is what ceramic capacitors are made in.
var span = capacitor.Span{Kind: "a ceramic capacitor", Least: 0.1e-12, Most: 1e-3}

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "ceramic capacitor", Tables: book.Version(Kind, edition, classesCSV, limitsCSV),
		Claims: claims(), Bench: bench(), Look: looks(), Bars: capacitor.Bars,
		Complete: complete, Limits: limits, Derive: capacitor.Derive, Convert: capacitor.Convert, Adjust: adjust, Lesser: lesser,
		Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims() []screening.Field {
	return append([]screening.Field{
		capacitor.CapacitanceClaim("100nF"),
		capacitor.VoltageClaim("50V", false),
		capacitor.ToleranceClaim("K"),
		capacitor.PicofaradClaim(),
		{
			Definition: book.Trait(traitClass, "dielectric class"), Trait: true, Words: classWords(), AcceptText: acceptClass, Example: "X7R",
			Help: "C0G or NP0, N750, X7R, Z5U, barrier; class1 or class2 where no more is known; leave it out where nothing is",
		},
		capacitor.DatedClaim("year or decade of making: it says how much ageing explains"),
	}, capacitor.MainsClaims()...)
}

func bench() []screening.Field {
	return append([]screening.Field{
		capacitor.CapacitanceReading("capacitance=92nF", "at room temperature, not just after soldering; class 2 reads low above its frequency",
			capacitor.AnyFrequency),
		capacitor.TanDeltaReading("tan-delta@1kHz=0.015"),
		capacitor.ESRReading("esr@1kHz=25"),
		capacitor.InsulationReading("insulation-resistance@50V=>10G"),
		capacitor.LeakageReading("leakage@50V=2nA"),
		capacitor.TimeConstantReading("time-constant@50V=900s"),
	}, capacitor.Rest()...)
}

func looks() []screening.Check {
	return book.Look(screening.Check{
		Name: "burnt", Words: []string{"burnt", "discoloured", "chipped"},
		Question: "Is it burnt, blistered, or are its end caps chipped?",
		Help:     "look at the ends of a chip under a lens: a hairline near the solder counts as cracked; at the coating of a disc where the leads enter",
		Verdict:  screening.Reject,
		Reason:   "heat or bending has reached the ceramic: such a part shorts later, however it reads today",
		Do:       "SCRAP it, and look for what it fed",
		Source:   screening.Source{Document: "repairers' rule; that ceramic fails short is published (film maker's comparison of dielectrics)", Status: screening.CommonPractice},
	})
}

// defaults are the tolerances taken where none is printed: none was read anywhere, so they reject nothing.
func defaultFor(d dielectric) capacitor.Default {
	low, high := -0.20, 0.80
	switch {
	case d.class == 1, d.code == "X7R", d.code == "X5R", d.code == "Y5P":
		high = 0.20
	}
	return capacitor.Default{Low: low, High: high, Source: screening.Source{
		Document: "usual where nothing else is printed on a ceramic of this class", Status: screening.FromMemory,
	}}
}

func complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	d, known := dielectricOf(c)
	if !known {
		return c, nil, fmt.Errorf("class: %q is no dielectric class such as C0G, N750, X7R, Z5U or barrier", c.Trait(traitClass))
	}
	return capacitor.Complete(c, span, defaultFor(d))
}

func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	return capacitor.Cautions(part, at, span, testVolts)
}

func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	all := capacitor.Recipes(part, l, span)
	if d, _ := dielectricOf(part.Claim); l.On == screening.Capacitance.Name && d.ages() {
		for i := range all {
			all[i].Lines = append(all[i].Lines,
				"too little AC voltage reads low: 1 V at 1 kHz, or 0.5 V at 120 Hz above 10 µF, is what makers use (published); hand-held meters use less",
				"a part that was soldered or heated today reads high: let it rest a day or two")
		}
	}
	return all
}

func untested(part screening.Part, _ []screening.Finding) []string {
	lines := capacitor.Untested(part, span)
	switch d, _ := dielectricOf(part.Claim); {
	case d.class == 0:
		lines = append(lines, "which class it is; of class 2 or 3 it loses much of its capacitance under direct voltage, and by temperature")
	case d.ages():
		lines = append(lines, "its capacitance under direct voltage, which falls much on class 2 and 3: meters measure without")
	}
	return lines
}
