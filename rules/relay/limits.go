package relay

import (
	_ "embed"
	"errors"
	"fmt"
	"math"
	"slices"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/winding"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

//go:embed figures.csv
var figuresCSV string

type figure struct {
	value  float64
	source screening.Source
}

var load = sync.OnceValue(func() map[string]figure {
	f, err := read(figuresCSV)
	if err != nil {
		panic("relay: embedded table: " + err.Error())
	}
	return f
})

func read(text string) (map[string]figure, error) {
	t, named := book.ReadTable("figures.csv", text), map[string]figure{}
	for _, r := range t.Rows() {
		named[r.Required("name")] = figure{r.Number("value"), r.Source()}
	}
	for _, name := range []string{"closed", "new", "open", "pull-in", "drop-out", "power", "power-volts", "signal", "signal-volts", "least"} {
		if named[name].value <= 0 {
			return named, errors.Join(t.Err(), fmt.Errorf("figures.csv: there is no %s", name))
		}
	}
	return named, t.Err()
}

func limit(on screening.Definition, criterion screening.Criterion, need screening.Need, low, high float64, source screening.Source) screening.Limit {
	return screening.Limit{
		On: on.Name, Unit: on.Unit, Criterion: criterion, Low: low, High: high, Need: need, Set: screening.GeneralSet, InUse: true,
		Source: source,
	}
}

func limits(c screening.Claim) ([]screening.Limit, error) {
	f := load()
	all := []screening.Limit{winding.Conducts(CoilResistance, "", screening.Required)}
	all = append(all, winding.Claimed(CoilResistance, c, "")...)
	opens := limit(OpenContact, openCriterion, screening.Wanted, f["open"].value, inf, f["open"].source)
	opens.Note = "one that conducts is welded, bridged by soot, or not in the state that you think"
	closes := limit(ContactResistance, contactCriterion, screening.Required, math.Inf(-1), f["closed"].value, f["closed"].source)
	closes.Note = "one contact is enough for a verdict; measure every one that will be used"
	all = append(all, opens, closes)
	all = append(all, asNew(c)...)
	return append(all, operation(c)...), nil
}

// asNew is what a new contact reads at the current at which its sort is judged, and what a used one may: enough to be closed.
func asNew(c screening.Claim) []screening.Limit {
	f := load()
	amperes, volts := judgedAt(c)
	l := limit(ContactResistance, newCriterion, screening.Wanted, math.Inf(-1), f["new"].value, f["new"].source)
	l.At = screening.At(screening.Current, amperes).With(screening.Voltage, volts)
	l.Grade = screening.WithinSpec
	used := l
	used.Grade, used.High, used.Source = screening.Serviceable, f["closed"].value, f["closed"].source
	if r, ok := c.Rating(ContactResistance.Name, ""); ok && !math.IsInf(r.High, 1) {
		l.High, l.Source = r.High, book.SourceOf(&r)
	}
	return []screening.Limit{l, used}
}

// operation holds pull-in and drop-out to the sheet's own figures, or those of a DC coil to shares of its voltage.
func operation(c screening.Claim) []screening.Limit {
	var all []screening.Limit
	volts, known := coilVolts(c)
	known = known && c.Trait(TraitSupply) != ac
	for _, o := range []struct {
		on        screening.Definition
		criterion screening.Criterion
		name      string
		below     bool
	}{{PullIn, pullInCriterion, "pull-in", true}, {DropOut, dropOutCriterion, "drop-out", false}} {
		f := load()[o.name]
		if r, ok := c.Rating(o.on.Name, ""); ok {
			low, high := r.Low, r.High
			if r.HasNominal() && o.below {
				low = math.Inf(-1)
			} else if r.HasNominal() {
				high = inf
			}
			all = append(all, limit(o.on, o.criterion, screening.Wanted, low, high, book.SourceOf(&r)))
			continue
		}
		if !known {
			continue
		}
		low, high := f.value*volts, inf
		if o.below {
			low, high = math.Inf(-1), f.value*volts
		}
		l := limit(o.on, o.criterion, screening.Wanted, low, high, f.source)
		l.Formula = func() string {
			return fmt.Sprintf("%s of %s = %s", quantity.Format(f.value, quantity.Ratio, 0), quantity.Format(volts, quantity.Volt, 0),
				quantity.Format(f.value*volts, quantity.Volt, 3))
		}
		all = append(all, l)
	}
	return all
}

// adjust takes the word from an ohmmeter that calls a closed contact bad: its current does not break the film on it.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	for i := range findings {
		f := &findings[i]
		if f.Outcome != screening.Fail || f.Reading == nil {
			continue
		}
		switch f.Limit.Criterion {
		case contactCriterion:
			amperes, volts := judgedAt(part.Claim)
			if x, stated := f.Reading.At.Get(screening.Current); stated && x >= load()["least"].value*amperes {
				continue
			}
			f.Limit.At = screening.At(screening.Current, amperes).With(screening.Voltage, volts)
			f.Outcome, f.Wants.At = screening.Missing, f.Limit.At
			f.Why = "so small a current does not break the film on a contact: only a reading at " + quantity.Format(amperes, quantity.Ampere, 0) +
				" may refuse it"
			reasons = append(reasons, book.Note(f.Limit.On, "make sure that the contact is in the state in which it should be closed"))
		case openCriterion:
			reasons = append(reasons, book.Note(f.Limit.On, "make sure that the contact is in the state in which it should be open"))
		}
	}
	return findings, slices.Compact(reasons)
}
