package ceramic

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 3.5: X7R and X5R 1 to 4 %, Y5U 4 to 6, Y5V 6 to 10 (HOLY), Z5U 7 (RCD); section 3.4 after life Y5P 10, Z5U 20, Z5V 30 % [S].
	booktest.Figures(t, classesCSV, `
C0G 1 0 0 published
U2J 1 0 0 published
P100 1 0 0 published
N030 1 0 0 published
N075 1 0 0 published
N150 1 0 0 published
N220 1 0 0 from-memory
N330 1 0 0 published
N470 1 0 0 published
N1500 1 0 0 published
N2200 1 0 0 published
SL 1 0 0 published
class1 1 0 0 published
X7R 2 0.04 0 published
X5R 2 0.04 0 published
Z5U 2 0.07 0.20 published
Y5U 2 0.06 0 published
Y5V 2 0.10 0 published
Y5P 2 0.10 0.10 published
Z5V 2 0.10 0.30 published
BX 2 0.10 0 published
class2 2 0.10 0.30 published
barrier 3 0.10 0.30 derived
unknown 0 0.10 0.30 published
`, "code", "class", "ageing", "worn", "status")
	// Section 3.4: AVX, Knowles, Sharma, disc sheet, KEMET Y, MIL-PRF-123, TDK [S].
	booktest.Figures(t, limitsCSV, `
tan general 2 X7R|X5R 49 - 0.10 - - - published -
tan general 2 X7R|X5R - 49 0.125 - - - published -
tan older-series 2 X7R|X5R 49 - 0.025 - 0.05 - published -
tan older-series 2 X7R|X5R 16 49 0.03 - 0.05 - published -
tan older-series 2 X7R|X5R 10 16 0.035 - 0.05 - published -
tan older-series 2 X7R|X5R - 10 0.05 - 0.05 - published -
tan general 2 Z5U - - 0.03 - 0.075 - published -
tan general 2 Y5P - - 0.025 - 0.05 - published -
tan general 2 Y5U - - 0.025 - 0.05 - published -
tan general 2 Z5V - - 0.05 - 0.075 - published -
tan general 2 Y5V 49 - 0.05 - 0.075 - published -
tan general 2 Y5V 24 49 0.07 - 0.075 - published -
tan general 2 Y5V 15 24 0.09 - - - published -
tan general 2 Y5V - 15 0.125 - - - published -
tan general 2 BX - - 0.025 - - - published -
tan general 2 * - - 0.125 - - - published -
tan general 3 * - - 0.05 - 0.10 - published house
tan general 0 * - - 0.125 - - - published -
ins general 1 * - - 10e9 1000 3e9 300 published -
ins chip 1 * - - 100e9 1000 30e9 300 published -
ins general 2 * 16 - 10e9 200 1e9 20 published -
ins general 2 * - 16 10e9 100 1e9 20 published -
ins chip 2 X7R|X5R - - 100e9 1000 30e9 300 published -
ins chip 2 Y5V - - 100e9 500 30e9 150 published -
ins general 3 * - - 1e9 20 - - published -
ins general 0 * - - 1e9 20 - - published -
`, "what", "set", "class", "codes", "over_volts", "to_volts", "new", "new_s", "worn", "worn_s", "status", "worn_status")
}
