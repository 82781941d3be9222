package tantalum

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 5: 0.01·CV or 0.5 µA, 1 min (F93), 5 min (MIL-PRF-49137) [S]; wet "a few µA" [M].
	booktest.Figures(t, leakageCSV, `
solid general 60 0.01 0.5 published
solid general 300 0.01 0.5 published
wet general 300 - 10 from-memory
`, "technology", "set", "after_s", "factor", "floor_ua", "status")
	// Section 5: 4, 6, 8 % by capacitance [S]; the second set is rebuilt from scrambled text, wet and dipped are [M].
	booktest.Figures(t, tanDeltaCSV, `
solid general - 1 0.04 published
solid general 1 68 0.06 published
solid general 68 220 0.08 published
solid general 220 - 0.12 derived
solid other-series - 1 0.04 derived
solid other-series 1 10 0.06 derived
solid other-series 10 68 0.08 derived
solid other-series 68 330 0.10 derived
solid other-series 330 - 0.16 derived
solid dipped 1.5 6.8 0.06 from-memory
solid dipped 6.8 68 0.08 from-memory
solid dipped 68 - 0.10 from-memory
wet general - 30 0.10 from-memory
wet general 30 150 0.25 from-memory
wet general 150 - 0.40 from-memory
`, "technology", "set", "over_uf", "to_uf", "tan_delta", "status")
	// Section 5: after life 125 % leakage, ±10 %, tan δ in its limit [S]; wet 200 %, −25/+10 % [S or M: taken as M]; 0.1 Ω/V [S]; decision.md 6.1.
	booktest.Figures(t, figuresCSV, `
tolerance 0.20 common-practice
fall/solid 0.10 published
rise/solid 0.10 published
fall/wet 0.25 from-memory
rise/wet 0.10 from-memory
loss/solid 1 published
loss/wet 2 from-memory
leakage/solid 1.25 published
leakage/wet 1.25 from-memory
hot 0.1 published
hot-floor 5e-6 published
damp 0.12 published
short 10 house
short-ohms 1e6 house
capacitance 0.5 house
leakage-drop 0.03 house
surge-ohms 0.1 published
surge-least 1 published
surge-share 0.5 derived
`, "name", "value", "status")
}
