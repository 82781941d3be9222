package varistor

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 8: worn from 10 µA at half the voltage (CHEMI-MOV), −0.05 %/K (STET) [S].
	booktest.Figures(t, figuresCSV, `
tolerance 0.10 from-memory
worn-change 0.10 house
half 0.5 published
worn-leakage 10e-6 published
ac-ratio 1.6 from-memory
shorted 1e6 common-practice
knee-least 15 from-memory
knee-most 50 from-memory
drift -0.0005 published
`, "name", "value", "status")
}
