// Package mica is the rulebook of mica capacitors: silver mica, dipped or moulded, clamped and transmitting types.
//
// Mica keeps its value for decades. What goes wrong is silver that creeps between the plates of old moulded parts: the insulation drops and
// jumps, which a capacitance meter does not show. So capacitance decides, and insulation at voltage is wanted, most of all on moulded parts.
package mica

import (
	_ "embed"
	"fmt"
	"math"
	"strings"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's word.
const Kind screening.Kind = "mica"

// edition goes up when a rule in code changes; a change of the table changes the version by itself.
const edition = "1"

// The technologies.
const (
	silver       = "silver"
	moulded      = "moulded"
	dipped       = "dipped"
	transmitting = "transmitting"
)

//go:embed limits.csv
var limitsCSV string

// span is what mica capacitors are made in.
var span = capacitor.Span{Kind: "a mica capacitor", Least: 0.5e-12, Most: 10e-6}

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "mica capacitor", Tables: book.Version(Kind, edition, limitsCSV),
		Claims: claims(), Bench: bench(), Look: looks(), Bars: capacitor.Bars,
		Complete: complete, Limits: limits, Derive: capacitor.Derive, Convert: capacitor.Convert, Lesser: lesser,
		Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims() []screening.Field {
	return append([]screening.Field{
		capacitor.CapacitanceClaim("470pF"),
		capacitor.VoltageClaim("500V", false),
		capacitor.ToleranceClaim("J"),
		capacitor.PicofaradClaim(),
		{
			Definition: book.Trait(screening.TraitTechnology, "technology"), Trait: true, Example: moulded,
			Help: "silver (silver mica of any build), moulded (a flat brown block, often with dots), dipped, transmitting (a bolted block)",
			Words: []screening.Word{
				{Word: silver, Text: silver},
				{Word: "silver-mica", Text: silver},
				{Word: "silvered", Text: silver},
				{Word: moulded, Text: moulded},
				{Word: "molded", Text: moulded},
				{Word: dipped, Text: dipped},
				{Word: transmitting, Text: transmitting},
			},
		},
		capacitor.DatedClaim("year or decade of making"),
	}, capacitor.MainsClaims()...)
}

func bench() []screening.Field {
	return append([]screening.Field{
		capacitor.CapacitanceReading("capacitance=468pF", "out of circuit; zero the leads first, a few picofarads count; at whatever frequency the meter has", capacitor.AnyFrequency),
		capacitor.TanDeltaReading("tan-delta@100kHz=0.001"),
		capacitor.ESRReading("esr@100kHz=5"),
		capacitor.InsulationReading("insulation-resistance@500V=>10G"),
		capacitor.LeakageReading("leakage@500V=20nA"),
		capacitor.TimeConstantReading("time-constant@500V=40s"),
	}, capacitor.Rest()...)
}

func looks() []screening.Check {
	return book.Look(screening.Check{
		Name: "noisy", Words: []string{"noisy", "silver-migration"},
		Question: "Does its insulation or leakage jump about at voltage?",
		Help:     "with the voltage on and settled, watch the leakage for a minute: silver that has crept makes it jump; crackle in a set is the same",
		Verdict:  screening.Reject,
		Reason:   "silver has crept between its plates: it crackles today and shorts one day, whatever its capacitance reads",
		Do:       "SCRAP it, or mark it so that it is not used",
		Source:   screening.Source{Document: "restorers' rule on old moulded silver mica", Status: screening.CommonPractice},
	})
}

// defaultTolerance is taken where none is printed; from memory, so it rejects nothing.
var defaultTolerance = capacitor.Default{
	Low: -0.20, High: 0.20, Source: screening.Source{Document: "the widest usual for mica where nothing is printed", Status: screening.FromMemory},
}

func complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	return capacitor.Complete(c, span, defaultTolerance)
}

// row is one line of limits.csv.
type row struct {
	what, technology string
	over, to         float64 // pF
	hertz            float64
	fresh, worn      float64
	source           screening.Source
	wornSource       screening.Source
}

var rows = sync.OnceValue(func() []row {
	all, err := readRows(limitsCSV)
	if err != nil {
		panic("mica: embedded table: " + err.Error())
	}
	return all
})

func readRows(text string) ([]row, error) {
	t := book.ReadTable("limits.csv", text)
	all := make([]row, 0, len(t.Rows()))
	for _, r := range t.Rows() {
		x := row{
			what: r.Required("what"), technology: r.Required("technology"), over: r.NumberOr("over_pf", 0), to: r.NumberOr("to_pf", math.Inf(1)),
			hertz: r.NumberOr("hz", 0), fresh: r.Number("new"), worn: r.Number("worn"), source: r.Source(),
		}
		x.wornSource = x.source
		var ok bool
		if x.wornSource.Status, ok = screening.StatusNamed(r.Required("worn_status")); !ok {
			r.Errorf("worn_status", "is no status")
		}
		tan := x.what == "tan"
		if !tan && x.what != "ins" || tan != (x.hertz > 0) || tan && x.worn < x.fresh || !tan && x.worn > x.fresh || x.over >= x.to {
			r.Errorf("what", "is neither tan nor ins, or its figures do not belong together")
		}
		all = append(all, x)
	}
	return all, t.Err()
}

// drift is what a mica part may have drifted beyond its tolerance (house; class 1 ceramic is allowed 1 % or 0.3 pF, published).
var drift = capacitor.Allowance{Ratio: 0.01, Farad: 0.5e-12, Source: screening.Source{
	Document: "the program's rule: 1 % or 0.5 pF beyond the tolerance, as MIL-PRF-123D allows class 1 ceramic about as much", Status: screening.House,
}}

func limits(claim screening.Claim) ([]screening.Limit, error) {
	us, err := capacitor.Units(claim, span)
	if err != nil {
		return nil, err
	}
	technology := claim.Trait(screening.TraitTechnology)
	var all []screening.Limit
	for _, u := range us {
		at := screening.At(screening.Frequency, 1e3)
		if u.Farad <= 1000e-12 {
			at = screening.At(screening.Frequency, 1e6)
		}
		kept := capacitor.ServiceableCapacitance(u, at, drift)
		all = append(all, capacitor.CapacitanceLimit(u, at), kept)
		all = append(all, capacitor.Floor(kept)...)
		insulated := false
		for _, r := range rows() {
			switch pf := u.Farad * 1e12; {
			case r.technology != "*" && r.technology != technology || pf <= r.over || pf > r.to*(1+1e-9):
			case r.what == "tan":
				all = append(all, capacitor.LossLimit(u, r.hertz, r.fresh, screening.WithinSpec, "", r.source),
					capacitor.LossLimit(u, r.hertz, r.worn, screening.Serviceable, "twice or so what a new part keeps", r.wornSource))
			case !insulated:
				insulated = true
				all = append(all, insulation(u, r.fresh, r.source, screening.WithinSpec), insulation(u, r.worn, r.wornSource, screening.Serviceable))
			}
		}
	}
	return all, nil
}

// testVolts is the voltage of the insulation test. Transmitting mica prints it at 100 V.
func testVolts(u capacitor.Unit) float64 { return capacitor.TestVolts(u.Volts) }

func insulation(u capacitor.Unit, ohms float64, source screening.Source, grade screening.Grade) screening.Limit {
	return capacitor.InsulationLimit(u, testVolts(u), capacitor.Insulation{Ohms: ohms, Seconds: math.Inf(1), Source: source}, grade)
}

// measured is how far from its printed value a part may be kept as measured: mica does not go on drifting (house).
const widest, measured = 0.20, 0.20

func lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	return append(capacitor.AsMeasured(part, findings, measured), capacitor.Wider(part, findings, widest)...)
}

func untested(part screening.Part, findings []screening.Finding) []string {
	lines := capacitor.Untested(part, span)
	read := false
	for i := range findings {
		f := &findings[i]
		read = read || f.Limit.Criterion == capacitor.CriterionInsulation && f.Outcome != screening.Missing
	}
	if t := part.Claim.Trait(screening.TraitTechnology); !read && (t == moulded || t == silver || t == "") {
		lines = append(lines, "silver that has crept between the plates of an old moulded part: only insulation at voltage shows it")
	}
	return lines
}

func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	return capacitor.Cautions(part, at, span, testVolts)
}

func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	all := capacitor.Recipes(part, l, span)
	if l.On == screening.InsulationResistance.Name && part.Claim.Trait(screening.TraitTechnology) != transmitting {
		for i := range all {
			all[i].Lines = append(all[i].Lines, fmt.Sprintf("watch it for a minute more at %s: a reading that jumps is silver on the move, seen=noisy",
				strings.TrimSpace(quantity.Format(voltsOf(l), quantity.Volt, 0))))
		}
	}
	return all
}

func voltsOf(l screening.Limit) float64 {
	v, _ := l.At.Get(screening.Voltage)
	return v
}
