package inductor

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 9 has no tolerances: [M].
	booktest.Figures(t, technologiesCSV, `
air -0.20 0.20 from-memory
ferrite -0.20 0.20 from-memory
iron-powder -0.20 0.20 from-memory
laminated -0.30 1.00 from-memory
unknown -0.20 0.50 from-memory
`, "technology", "low", "high", "status")
	// Section 9: a shorted turn drops Q sharply [M]; how much is the program's.
	booktest.Figures(t, figuresCSV, `
twin 0.5 house
`, "name", "value", "status")
}
