package mica

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 4: 0.00075 (75 to 1000 pF at 1 MHz), 0.0014, 0.0013, 0.0012 at 1 kHz, 7500 MΩ [S].
	booktest.Figures(t, limitsCSV, `
tan * - 1000 1000 0.003 0.005 house house
tan * - - 10000 0.003 0.005 house house
tan * - - 100000 0.003 0.005 house house
tan * 74.9 1000 1000000 0.00075 0.0015 published house
tan * - 74.9 1000000 0.0015 0.003 from-memory from-memory
tan * 1000 3500 1000 0.0014 0.0028 published house
tan * 3500 9500 1000 0.0013 0.0026 published house
tan * 9500 - 1000 0.0012 0.0024 published house
ins transmitting - - - 7.5e9 1e9 published house
ins * - - - 7.5e9 1e9 published house
`, "what", "technology", "over_pf", "to_pf", "hz", "new", "worn", "status", "worn_status")
}
