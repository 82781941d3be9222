// Package regulator is the rulebook of three-terminal regulators, fixed and adjustable, and of shunt references.
//
// Its voltage is read at work: an input, its two capacitors, a load. A regulator measured without what it needs reads low or high and is no
// worse for it, so input and load are part of the reading. Legs differ between types that look alike: the 7905's tab is its input.
package regulator

import (
	_ "embed"
	"errors"
	"fmt"
	"math"
	"strings"
	"sync"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/sheet"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind screening.Kind = "regulator"

// edition goes up when a rule in code changes; a change of the tables changes the version by itself.
const edition = "1"

// The characteristics of a regulator. Voltages are magnitudes: the trait sign says which way they point.
var (
	// VOut is the output voltage of a fixed regulator; a bare voltage is its input, a bare current its load.
	VOut = screening.Definition{Name: "vout", Symbol: "VO", Label: "output voltage", Unit: quantity.Volt, AtVolts: screening.VIN}
	// VRef is the reference voltage: between output and adjust leg, or across a shunt reference; a bare current is load or cathode current.
	VRef = screening.Definition{Name: "vref", Symbol: "VREF", Label: "reference voltage", Unit: quantity.Volt, AtVolts: screening.VIN}
	// IQ is the current that flows out of the ground leg without a load.
	IQ = screening.Definition{Name: "iq", Symbol: "IQ", Label: "quiescent current", Unit: quantity.Ampere, AtVolts: screening.VIN}
	// Dropout is how far the input must stay above the output, at a load.
	Dropout = screening.Definition{Name: "dropout", Symbol: "VDO", Label: "dropout voltage", Unit: quantity.Volt, AtVolts: screening.VIN}
	// MinLoad is a rating: the least current at which it regulates.
	MinLoad = screening.Definition{Name: "min-load", Symbol: "IL(min)", Label: "least current to regulate", Unit: quantity.Ampere}
	// IOut is a rating: the current that it claims to deliver, or of a shunt to sink.
	IOut = screening.Definition{Name: "iout", Symbol: "IO", Label: "rated output current", Unit: quantity.Ampere}
	// VInMax is a rating: the highest input voltage.
	VInMax = screening.Definition{Name: "vin-max", Symbol: "VI(max)", Label: "highest input voltage", Unit: quantity.Volt}
)

// The traits of its own and their words.
const (
	traitFunction = "function"
	traitSign     = "sign"

	fixed, adjustable, shunt = "fixed", "adjustable", "shunt"
	positive, negative       = "positive", "negative"
)

// The criteria.
const (
	typeCriterion      screening.Criterion = "type"
	voltageCriterion   screening.Criterion = "voltage"
	grossCriterion     screening.Criterion = "voltage-far-off"
	quiescentCriterion screening.Criterion = "quiescent"
	dropoutCriterion   screening.Criterion = "dropout"
)

var inf = math.Inf(1)

//go:embed figures.csv
var figuresCSV string

type figure struct {
	value  float64
	source screening.Source
}

var load = sync.OnceValue(func() map[string]figure {
	all, err := readFigures(figuresCSV)
	if err != nil {
		panic("regulator: embedded table: " + err.Error())
	}
	return all
})

func readFigures(text string) (map[string]figure, error) {
	t := book.ReadTable("figures.csv", text)
	all := map[string]figure{}
	for _, r := range t.Rows() {
		all[r.Required("of")] = figure{r.Number("value"), r.Source()}
	}
	var missing error
	for _, name := range []string{"wider", "nominal", "quiescent", "dropout", "headroom", "gross"} {
		if all[name].value <= 0 {
			missing = errors.Join(missing, errors.New("figures.csv: no row "+name))
		}
	}
	return all, errors.Join(t.Err(), missing)
}

// Book returns the rulebook; t is the table of type numbers.
func Book(t *types.Table) *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "voltage regulator or reference", Tables: book.Version(Kind, edition, figuresCSV) + ", " + t.Version(Kind),
		Claims: claims(t), Bench: bench(), Look: book.Look(burnt()),
		Complete: func(c screening.Claim) (screening.Claim, []screening.Reason, error) { return complete(t, c) },
		Limits:   limits, Derive: derive, Adjust: adjust, Lesser: lesser, Untested: untested, Cautions: cautions, Recipes: recipes,
	}
}

func claims(t *types.Table) []screening.Field {
	named := sheet.Field(t, Kind, "7805")
	named.Required = true
	named.Ask = "SAY its type number: type=7805; legs and voltage follow from it"
	named.Help = "as printed, without the maker's letters where it is not found; legs and voltage follow from it"
	return []screening.Field{
		named,
		{
			Definition: book.Trait(traitFunction, "function"), Trait: true, Example: fixed, Help: "fixed, adjustable (three legs) or shunt (a reference)",
			Words: []screening.Word{{Word: fixed, Text: fixed}, {Word: adjustable, Text: adjustable}, {Word: shunt, Text: shunt}},
		},
		{
			Definition: book.Trait(traitSign, "sign of the output"), Trait: true, Example: negative, Help: "positive or negative against ground",
			Words: []screening.Word{{Word: positive, Text: positive}, {Word: negative, Text: negative}},
		},
		{
			Definition: VOut, Example: "5V", AcceptRange: nominalIn, Help: "the output it claims: 5V, or rated:vout=4.8V..5.2V",
		},
		{Definition: VRef, Example: "rated:vref=1.2V..1.3V", Help: "the reference voltage its sheet allows"},
		{Definition: IQ, Example: "rated:iq=..8mA", Help: "the highest quiescent current its sheet allows"},
		{Definition: MinLoad, Example: "rated:min-load=10mA", Help: "the least load its sheet asks for"},
		{Definition: IOut, Example: "rated:iout=1A", Help: "the current it claims to deliver"},
		{Definition: VInMax, Example: "rated:vin-max=35V", Help: "the highest input voltage of its sheet"},
		{
			Definition: book.Trait(screening.TraitPinout, "pinout"), Trait: true, Example: "pinout=in-ground-out",
			Help: "the legs in order, print towards you; same case is not same legs",
		},
		book.CaseField("case=TO-220"),
		book.DatedField(),
	}
}

// nominalIn takes a bare voltage as an output within the tolerance of the 78xx series.
func nominalIn(word string) (low, high float64, ok bool) {
	if !strings.HasSuffix(word, "V") {
		return 0, 0, false
	}
	v, err := quantity.Parse(word, quantity.Volt)
	if err != nil || v.Sense != quantity.Exactly || v.Over || v.Number <= 0 {
		return 0, 0, false
	}
	t := load()["nominal"].value
	return v.Number * (1 - t), v.Number * (1 + t), true
}

func bench() []screening.Field {
	anyhow := screening.Fit{screening.VIN: screening.Any, screening.Current: screening.Any}
	return []screening.Field{
		{
			Definition: VOut, Effort: time.Minute, Example: "vout@10V,100mA=5.02", Fit: anyhow, Band: screening.Span{Low: -60, High: 60},
			Help: "at work: say input and load, vout@10V,100mA=5.02; the sign may be left out",
		},
		{
			Definition: VRef, Effort: time.Minute, Example: "vref@10mA=2.49", Fit: anyhow, Band: screening.Span{Low: -60, High: 60},
			Help: "output to adjust leg, or across the shunt; say the current: vref@10mA=2.49; the sign may be left out",
		},
		{
			Definition: IQ, Effort: 2 * time.Minute, Example: "iq@10V=4.2mA", Fit: anyhow,
			Help: "in the ground leg, no load, output capacitor in place",
		},
		{
			Definition: Dropout, Effort: 3 * time.Minute, Example: "dropout@1A=1.8", Fit: anyhow,
			Help: "lower the input until the output falls by 100 mV: input less output, at the load stated",
		},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the part, lying in the room", Example: "22C"},
	}
}

func burnt() screening.Check {
	return screening.Check{
		Name: "burnt", Words: []string{"burnt", "scorched"}, Question: "Is it burnt, blistered, or its print baked away?",
		Help:    "look at the legs too: a brown leg was hot for years",
		Verdict: screening.Reject, Reason: "it has been far too hot: it may still regulate, and not for long",
		Do: "SCRAP it, or mark it so that it is not used", Source: screening.Source{Document: "repairers' rule", Status: screening.CommonPractice},
	}
}

func functionOf(c screening.Claim) string {
	if f := c.Trait(traitFunction); f != "" {
		return f
	}
	if _, ok := c.Rating(VRef.Name, ""); ok {
		return adjustable
	}
	return fixed
}

// voltageOf is the characteristic that a claim promises, and the promise.
func voltageOf(c screening.Claim) (screening.Definition, screening.Rating, bool) {
	d := VOut
	if functionOf(c) != fixed {
		d = VRef
	}
	r, ok := c.Rating(d.Name, "")
	return d, r, ok && !math.IsInf(r.Low, 0) && !math.IsInf(r.High, 0) && r.Low > 0
}

// legsStatus is what the table's legs are: no text was seen for them, whatever the status of the row.
const legsStatus = screening.FromMemory

// complete adds what the type's row says, shows the legs, and refuses a claim that cannot be.
func complete(t *types.Table, c screening.Claim) (screening.Claim, []screening.Reason, error) {
	own := c
	c, notes := sheet.Complete(t, Kind, c, "5V, or rated:vref=1.2V..1.3V")
	row, tabled := t.Lookup(Kind, c.Trait(screening.TraitType))
	for _, name := range []string{traitFunction, traitSign} {
		if claimed := own.Trait(name); tabled && claimed != "" && row.Trait(name) != claimed {
			return c, nil, fmt.Errorf("%s: %q is claimed, but %s is %s", name, claimed, row.Type, row.Trait(name))
		}
	}
	if r, ok := own.Rating(VOut.Name, ""); ok && tabled && r.Typed != "" {
		promised, has := row.Rating(VOut.Name)
		switch {
		case !has:
			return c, nil, fmt.Errorf("vout: %s is %s: its output is set by resistors, so it claims a reference voltage", row.Type, row.Trait(traitFunction))
		case r.Low > promised.High || r.High < promised.Low:
			return c, nil, fmt.Errorf("vout: %s is claimed, but %s gives %s", r.Typed, row.Type, promised)
		}
	}
	if tabled && row.Trait(screening.TraitPinout) != "" {
		notes = append(notes, book.Note("", "%s: %s (%s); check against its own sheet before power", row.Type, row.Trait(screening.TraitPinout), legsStatus))
	}
	return c, notes, nil
}
