// Package rules is the table of all rulebooks: one line a kind. A new kind is one package beside these and one line here.
package rules

import (
	"slices"

	"goodbin/rules/bipolar"
	"goodbin/rules/bridge"
	"goodbin/rules/ceramic"
	"goodbin/rules/diode"
	"goodbin/rules/electrolytic"
	"goodbin/rules/family"
	"goodbin/rules/film"
	"goodbin/rules/igbt"
	"goodbin/rules/inductor"
	"goodbin/rules/jfet"
	"goodbin/rules/led"
	"goodbin/rules/mainscap"
	"goodbin/rules/marking"
	"goodbin/rules/mica"
	"goodbin/rules/mosfet"
	"goodbin/rules/optocoupler"
	"goodbin/rules/paper"
	"goodbin/rules/polymer"
	"goodbin/rules/potentiometer"
	"goodbin/rules/regulator"
	"goodbin/rules/relay"
	"goodbin/rules/resistor"
	"goodbin/rules/selenium"
	"goodbin/rules/tantalum"
	"goodbin/rules/thermistor"
	"goodbin/rules/thyristor"
	"goodbin/rules/transformer"
	"goodbin/rules/types"
	"goodbin/rules/unknown"
	"goodbin/rules/variablecap"
	"goodbin/rules/varistor"
	"goodbin/rules/zener"
	"goodbin/screening"
)

// House is what the user's group adds to the tables that the program brings along.
type House struct {
	Types    []types.Row     // their own data sheets; they win over the built-in rows of the same kind and name
	Families []family.Family // what they never keep, and what they always keep
}

// All returns the rulebooks with the built-in tables, in the order in which kinds are offered.
func All() screening.Kinds { return With(House{}) }

// With returns the rulebooks with house tables added.
func With(h House) screening.Kinds {
	t := types.Builtin().With(h.Types)
	kinds := screening.Kinds{
		electrolytic.Book(),
		tantalum.Book(),
		polymer.Book(),
		film.Book(),
		paper.Book(),
		mica.Book(),
		ceramic.Book(),
		mainscap.Book(),
		variablecap.Book(),
		diode.Book(t),
		zener.Book(t),
		bridge.Book(t),
		led.Book(t),
		selenium.Book(),
		bipolar.Book(t),
		jfet.Book(t),
		mosfet.Book(t),
		igbt.Book(t),
		thyristor.Book(t),
		thyristor.TriacBook(t),
		resistor.Book(),
		potentiometer.Book(),
		thermistor.Book(),
		varistor.Book(),
		inductor.Book(),
		transformer.Book(),
		relay.Book(),
		optocoupler.Book(t),
		regulator.Book(t),
		unknown.Book(meaningsOf),
	}
	families := slices.Concat(family.Builtin(), h.Families)
	for _, b := range kinds {
		family.Attach(b, families)
	}
	return kinds
}

// meaningsOf lists what is printed on a part in words, a line a meaning. Without a
// clock there are no dates: they say nothing of what the part is.
func meaningsOf(text string) []string {
	meanings, err := marking.Decode(text, marking.Options{})
	if err != nil {
		return nil
	}
	var lines []string
	for _, m := range meanings {
		lines = append(lines, m.String()+" ("+m.Scheme+")")
	}
	return lines
}
