package mosfet

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more. semiconductors.md 3.2: 0.4 to 0.7 V of body diode (from memory), 10 to 100 nA of gate leakage, any that an ohmmeter
// shows is damage; 2 MΩ less its error is what OL shows.
func TestTheTableHoldsItsFigures(t *testing.T) {
	booktest.Figures(t, limitsCSV, `
gate-open 1.9e6 - - common-practice
gate-readable 10e6 - - common-practice
gate-leak - 1e-6 - house
body-diode 0.30 0.90 - house
switches - 50 vgs=9V house
threshold 0.4 6 id=0.5mA house
off-leak - 10e-6 - common-practice
`, "name", "low", "high", "at", "status")
}
