// Package winding holds what everything that is wound shares: that a winding conducts, how near to its claimed resistance it is, and how to
// measure that.
package winding

import (
	_ "embed"
	"errors"
	"fmt"
	"math"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// CSV is the embedded table: part of the version of whatever rulebook uses it.
//
//go:embed figures.csv
var CSV string

type figure struct {
	value  float64
	source screening.Source
}

type figures struct{ open, tolerance figure }

var load = sync.OnceValue(func() figures {
	f, err := read(CSV)
	if err != nil {
		panic("winding: embedded table: " + err.Error())
	}
	return f
})

func read(text string) (figures, error) {
	t := book.ReadTable("figures.csv", text)
	named := map[string]figure{}
	for _, r := range t.Rows() {
		named[r.Required("name")] = figure{r.Number("value"), r.Source()}
	}
	f := figures{named["open"], named["tolerance"]}
	if f.open.value <= 0 || f.tolerance.value <= 0 {
		return f, errors.Join(t.Err(), errors.New("figures.csv: open or tolerance is missing"))
	}
	return f, t.Err()
}

// Conducts is the limit that tells an open winding.
func Conducts(on screening.Definition, section string, need screening.Need) screening.Limit {
	open := load().open
	return screening.Limit{
		On: on.Name, Unit: on.Unit, Section: section, Criterion: "winding", Low: math.Inf(-1), High: open.value, Need: need,
		Set: screening.GeneralSet, InUse: true, Source: open.source, Note: "a winding that reads more is open",
	}
}

// Claimed holds a winding to the resistance that it claims: a sheet's bounds as they stand, a nominal value or a twin's within what
// windings are made to. It is wanted, and its criterion is "dcr".
func Claimed(on screening.Definition, c screening.Claim, section string) []screening.Limit {
	r, ok := c.Rating(on.Name, section)
	if !ok {
		return nil
	}
	l := screening.Limit{
		On: on.Name, Unit: on.Unit, Section: section, Criterion: "dcr", Low: r.Low, High: r.High, Need: screening.Wanted,
		Set: screening.GeneralSet, InUse: true, Source: book.SourceOf(&r),
	}
	if r.HasNominal() {
		t := load().tolerance
		l.Low, l.High, l.Source = r.Nominal*(1-t.value), r.Nominal*(1+t.value), t.source
		l.Note = "copper changes by 0.39 % per kelvin"
		l.Formula = func() string {
			return fmt.Sprintf("%s ±%s", quantity.Format(r.Nominal, on.Unit, 0), quantity.Format(t.value, quantity.Ratio, 0))
		}
	}
	return []screening.Limit{l}
}

const (
	fourWireBelow = 10.0 // Ω (published: kelvinSource)
	testCurrent   = 0.1  // A, what a bench supply regulates well (house)
)

var kelvinSource = screening.Source{
	Document: "four-terminal measuring notes: leads 0.1 to 0.2 Ω each, contacts up to 0.15 Ω, four wires below 10 Ω", Status: screening.Published,
}

// Recipe says how to measure a winding's resistance; below 10 Ω, where the claim says so, with four wires.
func Recipe(on screening.Definition, c screening.Claim, section string) screening.Recipe {
	lines := []string{
		"out of circuit, or one end lifted; hold the probes together first and subtract what they read",
		"clip on, wait until a large coil has settled, read; turn the probes and read again: both ways the same",
	}
	values := map[string]float64{}
	if r, ok := c.Rating(on.Name, section); ok && !math.IsInf(r.High, 1) && r.High < fourWireBelow {
		lines = append(lines, fmt.Sprintf("below 10 Ω use four wires: %s from a limited supply, volts read at the winding's own ends (about %s)",
			quantity.Format(testCurrent, quantity.Ampere, 0), book.About(testCurrent*r.High, quantity.Volt)))
		values["test-current"], values["expected-voltage"] = testCurrent, testCurrent*r.High
	}
	return screening.Recipe{Title: "Ohms range", Lines: lines, Values: values, Source: kelvinSource}
}
