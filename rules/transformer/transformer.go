// Package transformer is the rulebook of transformers in short form: a winding is a section, and what is asked of it is that it conducts,
// that it is insulated from the others and from the core, and that the windings' voltages stand in their ratio.
//
// A transformer from the mains side of a set never goes back across the mains on a reading. What is decided here is whether it may serve
// elsewhere: behind an approved isolating supply, in an audio stage, as a choke.
package transformer

import (
	_ "embed"
	"errors"
	"fmt"
	"math"
	"slices"
	"sync"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/winding"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind screening.Kind = "transformer"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

// The characteristics of a transformer.
var (
	// WindingVoltage is a rating: the volts r.m.s. of a winding, as printed.
	WindingVoltage = screening.Definition{Name: "winding-voltage", Symbol: "U", Label: "rated voltage of a winding", Unit: quantity.Volt}
	// Ratio is a winding's unloaded voltage over that of the winding with the highest rated voltage, which is fed.
	Ratio = screening.Definition{Name: "voltage-ratio", Symbol: "U2/U1", Label: "voltage ratio to the fed winding", Unit: quantity.One}
)

// The criteria.
const (
	insulationCriterion screening.Criterion = "insulation"
	testedCriterion     screening.Criterion = "insulation-at-voltage"
	ratioCriterion      screening.Criterion = "ratio"
)

// testVolts is the DC voltage of an insulation test: condition B of MIL-STD-202 method 302 (published).
const testVolts = 500

//go:embed figures.csv
var figuresCSV string

type figure struct {
	value  float64
	source screening.Source
}

var load = sync.OnceValue(func() map[string]figure {
	f, err := read(figuresCSV)
	if err != nil {
		panic("transformer: embedded table: " + err.Error())
	}
	return f
})

func read(text string) (map[string]figure, error) {
	t, named := book.ReadTable("figures.csv", text), map[string]figure{}
	for _, r := range t.Rows() {
		named[r.Required("name")] = figure{r.Number("value"), r.Source()}
	}
	for _, name := range []string{"insulation", "insulation-500", "below", "above"} {
		if named[name].value <= 0 {
			return named, errors.Join(t.Err(), fmt.Errorf("figures.csv: there is no %s", name))
		}
	}
	return named, t.Err()
}

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "transformer", Tables: book.Version(Kind, edition, figuresCSV, winding.CSV),
		Claims: claims(), Bench: bench(), Look: look(),
		Complete: complete, Limits: limits, Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		{
			Definition: WindingVoltage, Example: "winding-voltage/1=24V",
			Help: "of each winding, as printed: winding-voltage/1=24V winding-voltage/2=6.3V",
		},
		{Definition: screening.DCR, Example: "rated:dcr/1=38", Help: "the resistance that a winding claims, or a twin's"},
		book.DatedField(),
	}
}

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.DCR, Example: "dcr/1=38", Effort: 5 * time.Second, Band: screening.Span{Low: 0, High: 1e9},
			Help: "of each winding by its name: dcr/1=… dcr/2=…; OL is an open winding",
		},
		{
			Definition: screening.InsulationResistance, Example: "insulation-resistance/1-core=OL", Effort: 10 * time.Second,
			Fit: screening.Fit{screening.Voltage: {Low: 0.9, High: 1.1}}, Band: screening.Span{Low: 0, High: 1e15},
			Help: "from every winding to the core and to the others: /1-core, /1-2; OL on the highest ohms range is what a sound one shows",
		},
		{
			Definition: Ratio, Example: "voltage-ratio/2=0.27", Effort: 2 * time.Minute, Band: screening.Span{Low: 0, High: 1e4},
			Help: "a few volts AC on the winding with the highest rated voltage; a winding's volts over those",
		},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the room", Example: "22C"},
	}
}

func look() []screening.Check {
	repairers := screening.Source{Document: "repairers' rule", Status: screening.CommonPractice}
	return book.Look(
		screening.Check{
			Name: "burnt", Words: []string{"burnt", "charred", "smells"}, Question: "Is a winding dark, does it smell, has wax or pitch run?",
			Help:    "brown paper, a burnt smell close to the winding, drops of wax or pitch below it; leave the pitch where it is",
			Verdict: screening.Reject, Reason: "it has been overheated: turns touch, or will, and its insulation is gone",
			Do: "SCRAP it, and find out what overloaded it before you fit another", Source: repairers,
		},
		screening.Check{
			Name: "bare", Words: []string{"bare", "brittle"}, Question: "Are wires bare, or is their insulation brittle?",
			Help:    "old rubber that crumbles when a lead is bent, a bare joint that can touch the core",
			Verdict: screening.Reject, Reason: "insulation that crumbles will fail at the next bend",
			Do: "SCRAP it, or keep it apart marked \"exhibit, not for use\"", Source: repairers,
		},
	)
}

// windings lists the sections whose rated voltage is claimed, that with the highest first: it is the one that is fed.
func windings(c screening.Claim) []screening.Rating {
	var all []screening.Rating
	for _, r := range c.Ratings {
		if r.Of == WindingVoltage.Name && r.Section != "" && r.HasNominal() && r.Nominal > 0 {
			all = append(all, r)
		}
	}
	slices.SortStableFunc(all, func(a, b screening.Rating) int {
		switch {
		case a.Nominal > b.Nominal:
			return -1
		case a.Nominal < b.Nominal:
			return 1
		}
		return 0
	})
	return all
}

func complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	for _, r := range c.Ratings {
		if r.Of == WindingVoltage.Name && (!r.HasNominal() || r.Nominal <= 0) {
			return c, nil, fmt.Errorf("winding-voltage: %s is no voltage of a winding; it is one such as 24V", r)
		}
	}
	if _, whole := c.Rating(WindingVoltage.Name, ""); whole && len(windings(c)) == 0 {
		return c, []screening.Reason{book.Note(WindingVoltage.Name, "say which winding has which voltage, so that the ratio can be held: winding-voltage/1=24V")}, nil
	}
	return c, nil, nil
}

// sections lists the windings that the claim names.
func sections(c screening.Claim) []string {
	var named []string
	for _, r := range c.Ratings {
		if r.Section != "" && !slices.Contains(named, r.Section) {
			named = append(named, r.Section)
		}
	}
	if named == nil {
		return []string{""} // whatever is measured, each by its own name
	}
	return named
}

func limits(c screening.Claim) ([]screening.Limit, error) {
	f := load()
	var all []screening.Limit
	for _, s := range sections(c) {
		all = append(all, winding.Conducts(screening.DCR, s, screening.Required))
		all = append(all, winding.Claimed(screening.DCR, c, s)...)
	}
	insulation := func(name string, criterion screening.Criterion, need screening.Need) screening.Limit {
		return screening.Limit{
			On: screening.InsulationResistance.Name, Unit: quantity.Ohm, Criterion: criterion, Low: f[name].value, High: math.Inf(1), Need: need,
			Set: screening.GeneralSet, InUse: true, Source: f[name].source,
		}
	}
	low := insulation("insulation", insulationCriterion, screening.Required)
	low.Note = "an ohms range finds a short to the core and wet paper, and says nothing of the working voltage"
	tested := insulation("insulation-500", testedCriterion, screening.Wanted)
	tested.At = screening.At(screening.Voltage, testVolts)
	return append(append(all, low, tested), ratios(c)...), nil
}

// ratios holds each winding's unloaded voltage against the ratio of the rated voltages, as two limits of one criterion: the lower bound may
// reject, the upper one is remembered.
func ratios(c screening.Claim) []screening.Limit {
	all := windings(c)
	if len(all) < 2 {
		return nil
	}
	f, fed := load(), all[0]
	var found []screening.Limit
	for _, w := range all[1:] {
		n := w.Nominal / fed.Nominal
		l := screening.Limit{
			On: Ratio.Name, Unit: Ratio.Unit, Section: w.Section, Criterion: ratioCriterion, Low: n * (1 - f["below"].value), High: math.Inf(1),
			Need: screening.Wanted, Set: screening.GeneralSet, InUse: true, Source: f["below"].source,
			Note: "a shorted turn pulls the ratio down, or takes so much current that the fed winding's volts fall",
			Formula: func() string {
				return fmt.Sprintf("%s/%s = %.3g of winding %s", quantity.Format(w.Nominal, quantity.Volt, 0), quantity.Format(fed.Nominal, quantity.Volt, 0),
					n, fed.Section)
			},
		}
		top := l
		top.Low, top.High, top.Source = math.Inf(-1), n*(1+f["above"].value), f["above"].source
		found = append(found, l, top)
	}
	return found
}

func untested(screening.Part, []screening.Finding) []string {
	return []string{
		"not for: across the mains, whatever it was made for (fit a new, approved one there)",
		"insulation at working voltage, power and heating",
	}
}
