package potentiometer

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 8: cermet ±10 % (39035), wirewound ±5 % (39015) [S]; composition ±10 or 20 % [M].
	booktest.Figures(t, technologiesCSV, `
carbon 0.20 from-memory
cermet 0.10 published
wirewound 0.05 published
conductive-plastic 0.20 from-memory
unknown 0.20 from-memory
`, "technology", "tolerance", "status")
	// Section 8: 39035 CRV 3 % or 20 Ω, end 2 Ω or 2 %; 39002/1 end 3 % or 1 Ω [S]; trimmer 1 % or 3 Ω [M].
	booktest.Figures(t, limitsCSV, `
end cermet - within-spec 0.02 2 published
end wirewound - within-spec 0.03 1 published
end - - within-spec 0.03 2 derived
end - - serviceable 0.05 10 house
crv cermet trimmer within-spec 0.01 3 from-memory
crv cermet - within-spec 0.03 20 published
crv wirewound - within-spec 0.03 100 from-memory
crv - - within-spec 0.03 20 derived
crv wirewound - serviceable 0.05 100 house
crv - - serviceable 0.05 20 house
`, "on", "technology", "form", "grade", "share", "ohms", "status")
	// Section 8: linear near 50 %, log 10 to 20 % (TAPER), within ±20 % of the curve (MIL94) [S].
	booktest.Figures(t, tapersCSV, `
linear 0.40 0.60 published
log 0.08 0.24 published
reverse-log 0.76 0.92 published
`, "taper", "low", "high", "status")
}
