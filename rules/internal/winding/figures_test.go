package winding

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 9: 10 to 20 % [M].
	booktest.Figures(t, CSV, `
open 100e3 common-practice
tolerance 0.20 from-memory
`, "name", "value", "status")
}
