package jfet

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more. semiconductors.md 3.1: 0.6 to 0.7 V from the gate, tens to hundreds of ohms of channel, leakage of 1 to 5 nA on sheets;
// the bounds around them are the house's.
func TestTheTableHoldsItsFigures(t *testing.T) {
	booktest.Figures(t, limitsCSV, `
gate-forward 0.45 1.0 - house
channel 3 50e3 vgs=0V house
gate-leak - 100e-9 - house
`, "name", "low", "high", "at", "status")
}
