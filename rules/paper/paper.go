// Package paper is the rulebook of paper capacitors: waxed and moulded paper, metallised paper, paper in oil.
//
// Paper leaks. Capacitance says little: a part that reads its value can pass enough current to ruin what it feeds. So insulation, or leakage,
// at the working voltage decides; an ohms range, which puts a volt on the part, can show it bad and never good. No lower voltage and no
// treatment answers a leak.
package paper

import (
	_ "embed"
	"fmt"
	"math"
	"slices"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's word.
const Kind screening.Kind = "paper"

// edition goes up when a rule in code changes; a change of the table changes the version by itself.
const edition = "1"

// The technologies. Oil is what the table of families bars where its date is not known.
const (
	waxed      = "waxed"
	moulded    = "moulded"
	metallised = "metallised"
	oil        = "oil"
)

// TraitNoPCB is the mark on an oil-filled part that lifts the bar.
const TraitNoPCB = "no-pcb"

//go:embed figures.csv
var figuresCSV string

// span is what paper capacitors are made in.
var span = capacitor.Span{Kind: "a paper capacitor", Least: 10e-12, Most: 1e-3}

// figure is one number with where it comes from.
type figure struct {
	value  float64
	source screening.Source
}

var figureNames = []string{
	"new-tan", "metallised-tan", "worn-tan", "new-ohms", "new-seconds", "coupling-ohms", "coupling-seconds", "floor-ohms", "floor-seconds",
	"tolerance", "worn-capacitance", "leaky-before",
}

func readFigures(text string) (map[string]figure, error) {
	t := book.ReadTable("figures.csv", text)
	all := map[string]figure{}
	for _, r := range t.Rows() {
		all[r.Required("name")] = figure{r.Number("value"), r.Source()}
	}
	for _, name := range figureNames {
		if all[name].value <= 0 {
			return nil, fmt.Errorf("figures.csv: %s is missing or not positive", name)
		}
	}
	return all, t.Err()
}

var figures = sync.OnceValue(func() map[string]figure {
	all, err := readFigures(figuresCSV)
	if err != nil {
		panic("paper: embedded table: " + err.Error())
	}
	return all
})

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "paper capacitor", Tables: book.Version(Kind, edition, figuresCSV),
		Claims: claims(), Bench: bench(), Look: looks(), Bars: capacitor.Bars,
		Complete: complete, Limits: limits, Derive: derive, Convert: capacitor.Convert, Adjust: adjust,
		Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims() []screening.Field {
	return append([]screening.Field{
		capacitor.CapacitanceClaim("0.1uF"),
		capacitor.VoltageClaim("400V", true),
		capacitor.ToleranceClaim("M"),
		{
			Definition: book.Trait(screening.TraitTechnology, "technology"), Trait: true, Example: waxed,
			Help: "waxed (a cardboard or wax tube), moulded (in plastic or pitch), metallised (MP), oil (a sealed can or block)",
			Words: []screening.Word{
				{Word: waxed, Text: waxed},
				{Word: "wax", Text: waxed},
				{Word: moulded, Text: moulded},
				{Word: "molded", Text: moulded},
				{Word: metallised, Text: metallised},
				{Word: "metallized", Text: metallised},
				{Word: "mp", Text: metallised},
				{Word: oil, Text: oil},
				{Word: "oil-filled", Text: oil},
				{Word: "paper-in-oil", Text: oil},
				{Word: "pio", Text: oil},
			},
		},
		capacitor.DatedClaim("year or decade of making; of an oil-filled part it decides"),
		{
			Definition: book.Trait(TraitNoPCB, "marked \"No PCBs\""), Trait: true, Example: "no-pcb",
			Help:  "where it is printed on an oil-filled part; nothing else shows it",
			Words: []screening.Word{{Word: "no-pcb", Text: "no-PCBs"}, {Word: "no-pcbs", Text: "no-PCBs"}, {Word: "pcb-free", Text: "no-PCBs"}},
		},
	}, capacitor.MainsClaims()...)
}

func bench() []screening.Field {
	return append([]screening.Field{
		capacitor.CapacitanceReading("capacitance=103nF", "out of circuit, discharged; a leaky or damp part reads high", capacitor.AnyFrequency),
		capacitor.LeakageReading("leakage@400V=0.5uA"),
		capacitor.InsulationReading("insulation-resistance@400V=800M"),
		capacitor.TanDeltaReading("tan-delta@1kHz=0.012"),
		capacitor.ESRReading("esr@1kHz=20"),
		capacitor.TimeConstantReading("time-constant@400V=90s"),
	}, capacitor.Rest()...)
}

func looks() []screening.Check {
	return book.Look(screening.Check{
		Name: "seeping", Words: []string{"seeping", "wax-run", "swollen"},
		Question: "Has wax run out, is an end loose, or is it swollen?",
		Help:     "wax on the board or the chassis, cracked pitch at the ends, a lead that turns, a tube that bulges",
		Verdict:  screening.Reject,
		Reason:   "its seal is gone: damp is in the paper, and it will leak more when it is warm",
		Do:       "SCRAP it; an empty tube may be kept as a cover for a new part",
		Source:   screening.Source{Document: "restorers' rule", Status: screening.CommonPractice},
	})
}

func complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	t := figures()["tolerance"]
	c, notes, err := capacitor.Complete(c, span, capacitor.Default{Low: -t.value, High: t.value, Source: t.source})
	if err != nil {
		return c, nil, err
	}
	before := figures()["leaky-before"]
	year, dated := c.Year()
	switch technology := c.Trait(screening.TraitTechnology); {
	case technology == oil, technology == metallised:
	case !dated || float64(year) < before.value:
		notes = append(notes, book.Note(screening.Leakage.Name, "waxed and moulded paper from before about %.0f leaks nearly always (%s): where it must "+
			"not leak, fit film", before.value, before.source.Status))
	}
	return c, notes, nil
}

// testVolts is the voltage at which paper is judged: its rated one, not a step below it.
func testVolts(u capacitor.Unit) float64 { return u.Volts }

// unreadable is the voltage that a part is taken to hold where nobody can read its own, V: the highest that is usual on oil (house).
const unreadable = 600

func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	if _, ok := part.Claim.Rating(screening.RatedVoltage.Name, part.Claim.Sections()[0]); ok {
		return capacitor.Cautions(part, at, span, testVolts)
	}
	// Only what is barred comes here without a voltage: it is bagged and not measured, and may be charged all the same.
	part.Claim = part.Claim.WithRating(screening.NominalRating(screening.RatedVoltage, unreadable))
	all := capacitor.Cautions(part, at, span, nil)
	for i := range all {
		all[i].Text = "its voltage is not known, and is taken as " + quantity.Format(unreadable, quantity.Volt, 0) + ": " + all[i].Text
	}
	return all
}

func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	all := capacitor.Recipes(part, l, span)
	if l.Criterion == capacitor.CriterionInsulation {
		for i := range all {
			all[i].Lines = append(all[i].Lines, "an ohms range puts a volt on it and proves nothing; paper leaks several times more when it is warm")
		}
	}
	return all
}

func untested(part screening.Part, _ []screening.Finding) []string {
	return append(capacitor.Untested(part, span), "leakage when warm, which is several times what it is on the bench")
}

func limits(claim screening.Claim) ([]screening.Limit, error) {
	us, err := capacitor.Units(claim, span)
	if err != nil {
		return nil, err
	}
	var all []screening.Limit
	for _, u := range us {
		if u.Volts == 0 {
			return nil, fmt.Errorf("voltage: none is claimed; paper is judged at its working voltage, such as 400V")
		}
		at := screening.At(screening.Frequency, 1e3)
		worn := figures()["worn-capacitance"]
		kept := capacitor.ServiceableCapacitance(u, at, capacitor.Allowance{Ratio: worn.value, Source: worn.source})
		all = append(all, capacitor.CapacitanceLimit(u, at), kept)
		all = append(all, capacitor.Floor(kept)...)
		all = append(all, leakage(u)...)
		all = append(all, loss(claim, u)...)
	}
	return all, nil
}

// criterionFloor is what leaks plainly; it stands beside the second-hand figure, and rejects where that may not.
const criterionFloor screening.Criterion = "plain-leak"

// leakage lists insulation and leakage: as for a new part, as the least for a coupling position, and the floor. All are required.
func leakage(u capacitor.Unit) []screening.Limit {
	f := figures()
	// The source is that of the figure which counts for this capacitance.
	asked := func(name string) capacitor.Insulation {
		ohms, seconds := f[name+"-ohms"], f[name+"-seconds"]
		i := capacitor.Insulation{Ohms: ohms.value, Seconds: seconds.value, Source: ohms.source}
		if seconds.value/u.Farad < ohms.value {
			i.Source = seconds.source
		}
		return i
	}
	var all []screening.Limit
	for _, x := range []struct {
		i         capacitor.Insulation
		grade     screening.Grade
		criterion screening.Criterion
	}{
		{asked("new"), screening.WithinSpec, capacitor.CriterionInsulation},
		{asked("coupling"), screening.Serviceable, capacitor.CriterionInsulation},
		{asked("floor"), screening.AnyGrade, criterionFloor},
	} {
		for _, l := range []screening.Limit{capacitor.LeakageLimit(u, testVolts(u), x.i, x.grade), capacitor.InsulationLimit(u, testVolts(u), x.i, x.grade)} {
			l.Criterion, l.Need = x.criterion, screening.Required
			all = append(all, l)
		}
	}
	return all
}

func loss(claim screening.Claim, u capacitor.Unit) []screening.Limit {
	fresh, worn := figures()["new-tan"], figures()["worn-tan"]
	if claim.Trait(screening.TraitTechnology) == metallised {
		fresh = figures()["metallised-tan"]
	}
	return []screening.Limit{
		capacitor.LossLimit(u, 1e3, fresh.value, screening.WithinSpec, "", fresh.source),
		capacitor.LossLimit(u, 1e3, worn.value, screening.Serviceable, "", worn.source),
	}
}

// derive is the shared one without insulation from a leakage that has limits of its own here.
func derive(part screening.Part) ([]screening.Reading, []screening.Reason) {
	derived, why := capacitor.Derive(part)
	return slices.DeleteFunc(derived, func(d screening.Reading) bool {
		return d.Of == screening.InsulationResistance.Name && slices.ContainsFunc(part.Readings, func(r screening.Reading) bool {
			return r.Of == screening.Leakage.Name && r.Section == d.Section
		})
	}), why
}

// leaksPlainly reports whether a section fails the floor.
func leaksPlainly(findings []screening.Finding, section string) bool {
	return slices.ContainsFunc(findings, func(f screening.Finding) bool {
		return f.Limit.Criterion == criterionFloor && f.Limit.Section == section && f.Outcome == screening.Fail
	})
}

// adjust says what a high capacitance, and a leak that no published figure refuses, mean on paper.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion == capacitor.CriterionInsulation && leaksPlainly(findings, f.Limit.Section) {
			f.Need = screening.Wanted // the floor has decided
			continue
		}
		e := f.Evidence()
		if e == nil {
			continue
		}
		switch f.Limit.Criterion {
		case capacitor.CriterionCapacitance:
			u, ok := capacitor.UnitOf(part.Claim, span, f.Limit.Section)
			if ok && f.Limit.Grade == screening.Serviceable && e.Sense != quantity.AtMost && e.Value > u.Top() {
				reasons = append(reasons, book.Note(f.Limit.On, "it reads above its tolerance: damp and leakage raise paper"))
			}
		case capacitor.CriterionInsulation:
			if f.Unconfirmed && f.Limit.Grade == screening.Serviceable {
				reasons = append(reasons, book.Note(f.Limit.On, "it leaks %s at %s: too much for a coupling position by what repairers say, which no sheet read "+
					"confirms; as a bypass it may serve", quantity.Format(leak(e), quantity.Ampere, 2), quantity.Format(voltsOf(f.Limit), quantity.Volt, 0)))
			}
		}
	}
	return findings, reasons
}

// leak is the current of a leakage or insulation reading.
func leak(r *screening.Reading) float64 {
	if r.Of == screening.Leakage.Name {
		return r.Value
	}
	v, _ := r.At.Get(screening.Voltage)
	return v / math.Max(r.Value, 1)
}

func voltsOf(l screening.Limit) float64 {
	v, _ := l.At.Get(screening.Voltage)
	return v
}
