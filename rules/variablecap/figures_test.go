package variablecap

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Nothing of them stands in the sources.
	booktest.Figures(t, figuresCSV, `
max-within-spec 0.10 0 from-memory
max-serviceable 0.20 5 house
min-within-spec 0.20 3 from-memory
min-serviceable 1.00 10 house
insulation 0 0 common-practice
open-share 0.10 10 house
`, "name", "share", "pf", "status")
}
