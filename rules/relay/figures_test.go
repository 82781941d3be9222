package relay

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 9: new 50 to 100 mΩ [M]; 6 V 1 A [S], 1 V 10 mA [S, quoted].
	booktest.Figures(t, figuresCSV, `
closed 2 house
new 0.1 from-memory
open 1e6 common-practice
pull-in 0.8 common-practice
drop-out 0.05 common-practice
power 1 published
power-volts 6 published
signal 0.01 second-hand
signal-volts 1 second-hand
least 0.5 house
`, "name", "value", "status")
}
