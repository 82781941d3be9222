// Package film is the rulebook of plastic film capacitors by dielectric: polyester, polypropylene, polystyrene, polycarbonate, PEN, PPS.
//
// The capacitance decides: metallised film that has healed itself often has lost some of it, and at the end of its life film is open, not
// shorted. Loss by frequency and insulation are wanted: few benches can read what these dielectrics ask.
package film

import (
	"fmt"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's word.
const Kind screening.Kind = "film"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

// traitDielectric is what the film is made of.
const traitDielectric = "dielectric"

// span is what film capacitors are made in.
var span = capacitor.Span{Kind: "a film capacitor", Least: 1e-12, Most: 10e-3}

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "film capacitor", Tables: book.Version(Kind, edition, dielectricsCSV, lossCSV, insulationCSV),
		Claims: claims(), Bench: bench(), Look: looks(), Bars: capacitor.Bars,
		Complete: complete, Limits: limits, Derive: capacitor.Derive, Convert: capacitor.Convert, Adjust: adjust, Lesser: lesser,
		Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims() []screening.Field {
	return append([]screening.Field{
		capacitor.CapacitanceClaim("100nF"),
		capacitor.VoltageClaim("250V", false),
		capacitor.ToleranceClaim("K"),
		capacitor.PicofaradClaim(),
		{
			Definition: book.Trait(traitDielectric, "dielectric"), Trait: true, Words: dielectricWords(), Example: "pet", Ambiguous: letterCodes,
			Help: "pet (MKT), pp (MKP), ps (polystyrene), pc (MKC), pen, pps; leave it out where nothing says",
		},
		capacitor.DatedClaim("year or decade of making"),
	}, capacitor.MainsClaims()...)
}

// letterCodes lists the meanings of a code that makers disagree on.
func letterCodes(word string) []string {
	switch word {
	case "MKS", "mks", "FKS", "fks":
		return []string{"polystyrene by the usual letters: write dielectric=ps", "polyester in one maker's code: write dielectric=pet"}
	}
	return nil
}

func bench() []screening.Field {
	return append([]screening.Field{
		capacitor.CapacitanceReading("capacitance=98.5nF", "out of circuit, discharged; the frequency hardly matters on film", capacitor.AnyFrequency),
		capacitor.TanDeltaReading("tan-delta@1kHz=0.006"),
		capacitor.ESRReading("esr@100kHz=0.2"),
		capacitor.InsulationReading("insulation-resistance@100V=>30G"),
		capacitor.LeakageReading("leakage@100V=3nA"),
		capacitor.TimeConstantReading("time-constant@100V=12000s"),
	}, capacitor.Rest()...)
}

func looks() []screening.Check {
	return book.Look(screening.Check{
		Name: "melted", Words: []string{"melted", "burnt", "bulged"},
		Question: "Is it melted, shrunk, scorched or bulged?",
		Help:     "film shrinks and shifts from a soldering iron or a hot neighbour; a swollen box has healed itself too often",
		Verdict:  screening.Reject,
		Reason:   "heat has reached the film: its value has shifted for good, and its insulation will not last",
		Do:       "SCRAP it, or mark it so that it is not used",
		Source:   screening.Source{Document: "repairers' rule", Status: screening.CommonPractice},
	})
}

// defaultTolerance is taken where none is printed; from memory, so it rejects nothing.
var defaultTolerance = capacitor.Default{
	Low: -0.20, High: 0.20, Source: screening.Source{Document: "the widest usual for film where nothing is printed", Status: screening.FromMemory},
}

func complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	if _, known := dielectricOf(c); !known {
		return c, nil, fmt.Errorf("dielectric: %q is not known; one of %s", c.Trait(traitDielectric), dielectricNames())
	}
	return capacitor.Complete(c, span, defaultTolerance)
}

func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	all := capacitor.Cautions(part, at, span, testVolts)
	if d, _ := dielectricOf(part.Claim); d.heat > 0 && at != screening.AtMeasure {
		all = append(all, screening.Caution{
			Code: "no-heat", Level: screening.Notice,
			Text: fmt.Sprintf("%s shifts for good above %s: keep the iron short, a clip on the lead as a heat sink, and never dry, bake or wash it in "+
				"solvents", d.name, quantity.Format(d.heat, quantity.Celsius, 0)),
			Values: map[string]float64{"temperature": d.heat},
			Source: screening.Source{Document: "general articles on polystyrene capacitors", Clause: "never above 70 to 85 °C", Status: d.heatStatus},
		})
	}
	return all
}

func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	return capacitor.Recipes(part, l, span)
}

func untested(part screening.Part, _ []screening.Finding) []string {
	return capacitor.Untested(part, span)
}
