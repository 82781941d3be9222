package polymer

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 5: PSA 0.2·CV, 2 min; PSC or 500 µA; ESRD 0.06·CV to 4 V, 0.04·CV or 3 µA to 16 V; F31 0.1·CV, 5 min [S].
	booktest.Figures(t, leakageCSV, `
aluminium general - - 120 0.2 500 published
aluminium no-floor - - 120 0.2 - published
aluminium low-leakage - 4 120 0.06 - published
aluminium low-leakage 4 16 120 0.04 3 published
tantalum general - - 300 0.1 - published
unknown general - - 120 0.2 500 published
`, "technology", "set", "over_volts", "to_volts", "after_s", "factor", "floor_ua", "status")
	// Section 5: PSA 0.08, PSC 0.10 [S]; of polymer tantalum none was read.
	booktest.Figures(t, tanDeltaCSV, `
aluminium general 0.10 published
aluminium radial 0.08 published
tantalum general 0.10 from-memory
unknown general 0.10 published
`, "technology", "set", "tan_delta", "status")
	// Section 5: after 2000 h ±20 % and 150 % (PSA), after damp heat 1.5 × (F31) [S].
	booktest.Figures(t, figuresCSV, `
tolerance 0.20 common-practice
fall 0.20 published
rise 0.20 published
loss 1.5 published
loss/tantalum 1.5 published
leakage 1 house
short 10 house
short-ohms 1e6 house
capacitance 0.5 house
leakage-drop 0.03 house
`, "name", "value", "status")
}
