package transformer

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 7: 302 condition B is 500 V [S]; figures are practice or [M].
	booktest.Figures(t, figuresCSV, `
insulation 1e6 common-practice
insulation-500 100e6 from-memory
below 0.05 house
above 0.25 from-memory
`, "name", "value", "status")
}
