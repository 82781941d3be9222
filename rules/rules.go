// Package rules is the table of all rulebooks: one line a kind. A new kind is one package beside these and one line here.
package rules

import (
	"strings"

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

// Tables returns the version of all embedded tables together. A verdict that was given under another version is stale.
func Tables() string {
	var versions []string
	for _, b := range All() {
		versions = append(versions, b.Tables)
	}
	return strings.Join(versions, "; ")
}
