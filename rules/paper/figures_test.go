package paper

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 4: wax paper 1 %, some 1000s MΩ·µF [M]; 100 MΩ at working volts [S, a forum]. Section 13: paper limits are not verified.
	booktest.Figures(t, figuresCSV, `
new-tan 0.01 from-memory
metallised-tan 0.015 from-memory
worn-tan 0.05 house
new-ohms 10e9 from-memory
new-seconds 1000 from-memory
coupling-ohms 100e6 second-hand
floor-ohms 10e6 house
floor-seconds 4 house
coupling-seconds 10 derived
tolerance 0.20 from-memory
worn-capacitance 0.10 house
leaky-before 1960 common-practice
`, "name", "value", "status")
}
