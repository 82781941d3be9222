// Package rules is the table of all rulebooks: one line a kind. A new kind is one package beside these and one line here.
package rules

import (
	"goodbin/rules/bipolar"
	"goodbin/rules/diode"
	"goodbin/rules/electrolytic"
	"goodbin/rules/resistor"
	"goodbin/rules/zener"
	"goodbin/screening"
)

// All returns the rulebooks in the order in which kinds are offered.
func All() screening.Kinds {
	return screening.Kinds{
		electrolytic.Book(),
		diode.Book(),
		zener.Book(),
		bipolar.Book(),
		resistor.Book(),
	}
}
