package mainscap

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 6: X1 4 kV, X2 2.5, Y1 8, Y2 5, root above 1 µF but Y1 and Y4 [S]; X3, Y3 [M]; Y4 [S]/[M].
	booktest.Figures(t, classesCSV, `
X1 4000 root published
X2 2500 root published
X3 1200 - from-memory
Y1 8000 - published
Y2 5000 root published
Y3 - - from-memory
Y4 2500 - second-hand
`, "class", "impulse_v", "above_1uf", "status")
	// Section 4: R41 0.30 %, 100 GΩ or 30 000 s; R40 1.00 %; WIMA; section 3.4 KEMET Y 5 %, 10 GΩ at 500 V [S]; the others [M].
	booktest.Figures(t, limitsCSV, `
pp 1000 0.003 published 1e11 30000 100 published
pet 1000 0.010 published - 10000 100 published
paper 1000 0.013 from-memory 1.2e10 4000 100 from-memory
ceramic 1000 0.05 published 1e10 - 500 published
oil 1000 0.010 from-memory - 2000 100 from-memory
electrolytic 120 0.15 from-memory - - - -
unknown 1000 0.05 published - 2000 100 from-memory
`, "technology", "hertz", "tan_delta", "tan_status", "ir_ohms", "ir_seconds", "ir_volts", "ir_status")
}
