package thermistor

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 8 has no tolerances: all are [M] or the program's.
	booktest.Figures(t, figuresCSV, `
ntc-tolerance -0.25 0.25 house
ptc-tolerance -0.50 0.50 house
b-tolerance -0.03 0.03 from-memory
slope 0.03 0.05 from-memory
b-range 1500 7000 from-memory
kept 0.7 1.3 house
`, "name", "low", "high", "status")
}
