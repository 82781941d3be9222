// Package rules is the table of all rulebooks: one line a kind. A new kind is one package beside these and one line here.
package rules

import (
	"goodbin/rules/bipolar"
	"goodbin/rules/bridge"
	"goodbin/rules/ceramic"
	"goodbin/rules/diode"
	"goodbin/rules/electrolytic"
	"goodbin/rules/film"
	"goodbin/rules/igbt"
	"goodbin/rules/inductor"
	"goodbin/rules/jfet"
	"goodbin/rules/led"
	"goodbin/rules/mainscap"
	"goodbin/rules/mica"
	"goodbin/rules/mosfet"
	"goodbin/rules/optocoupler"
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
	"goodbin/rules/variablecap"
	"goodbin/rules/varistor"
	"goodbin/rules/zener"
	"goodbin/screening"
)

// All returns the rulebooks in the order in which kinds are offered.
func All() screening.Kinds {
	t := types.Builtin()
	return screening.Kinds{
		electrolytic.Book(),
		tantalum.Book(),
		polymer.Book(),
		film.Book(),
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
	}
}
