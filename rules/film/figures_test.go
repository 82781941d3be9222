package film

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 4: two-year drift of PET 3 % (ICEL), 1 % + 5 pF (KP375) [S]; polystyrene never above 70 °C by hobby pages.
	booktest.Figures(t, dielectricsCSV, `
pet 0.03 0 - - published
pp 0.01 5 - - published
ps 0.01 5 70 second-hand house
pc 0.03 0 - - house
pen 0.03 0 - - house
pps 0.03 0 - - house
unknown 0.03 0 - - published
`, "dielectric", "allow", "allow_pf", "heat", "heat_status", "status")
	// Section 4: WIMA table, R40, R41, ICEL MTB (10 kHz to 1 µF) and MPL (100 kHz to 0.1 µF) [S]; polystyrene and polycarbonate [M].
	booktest.Figures(t, lossCSV, `
general pet 1000 - 0.010 published
general pet 10000 1 0.015 published
general pet 100000 0.1 0.030 published
typical pet 1000 - 0.008 published
general pp 1000 - 0.003 published
general pp 10000 1 0.003 derived
general pp 100000 0.1 0.003 published
typical pp 1000 - 0.0005 published
typical pp 10000 1 0.0008 published
typical pp 100000 0.1 0.0025 published
general pen 1000 - 0.008 published
general pen 10000 1 0.015 published
general pen 100000 0.1 0.030 published
general pps 1000 - 0.002 published
general pps 10000 1 0.0025 published
general pps 100000 0.1 0.005 published
general ps 1000 - 0.0005 from-memory
general ps 10000 1 0.0005 from-memory
general ps 100000 0.1 0.0005 from-memory
general pc 1000 - 0.003 from-memory
general pc 10000 1 0.005 from-memory
general pc 100000 0.1 0.010 from-memory
general unknown 1000 - 0.010 published
general unknown 10000 1 0.015 published
general unknown 100000 0.1 0.030 published
`, "set", "dielectric", "hz", "to", "tan", "status")
	// Section 4: ICTI 30 000 and 2700 MΩ, WIMA 10 000 MΩ·µF, PPB and R41 100 GΩ or 30 000 s, at least half after damp heat [S]; PET to 100 V, PS, PC [M].
	booktest.Figures(t, insulationCSV, `
pet 100 - 30e9 10000 2.7e9 900 published
pet - 100 3.75e9 1250 337e6 112 from-memory
pp - - 100e9 30000 50e9 15000 published
pen - - 30e9 10000 2.7e9 900 derived
pps - - 30e9 10000 2.7e9 900 derived
ps - - 100e9 1e6 50e9 500000 from-memory
pc - - 30e9 10000 2.7e9 900 from-memory
unknown - - 3.75e9 1250 337e6 112 from-memory
`, "dielectric", "over_volts", "to_volts", "new", "new_s", "worn", "worn_s", "status")
}
