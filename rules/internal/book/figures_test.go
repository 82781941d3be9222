package book

import (
	"testing"

	"goodbin/rules/internal/booktest"
)

// The figures once more, transcribed from passives.md: [S] was read in the document named, [M] is from memory.
func TestTheTablesHoldTheFiguresOfTheirSources(t *testing.T) {
	// Section 1.2: B C D F G J K M, Q S T Z [S].
	booktest.Figures(t, toleranceCSV, `
B any -0.001 0.001 published
C any -0.0025 0.0025 published
D any -0.005 0.005 published
F any -0.01 0.01 published
G any -0.02 0.02 published
J any -0.05 0.05 published
K any -0.10 0.10 published
M any -0.20 0.20 published
Q capacitor -0.10 0.30 published
S capacitor -0.20 0.50 published
T capacitor -0.10 0.50 published
Z capacitor -0.20 0.80 published
A any - - second-hand
E any - - second-hand
H any - - second-hand
L any - - second-hand
N any - - second-hand
P any - - second-hand
R any - - second-hand
U any - - second-hand
V any - - second-hand
W any - - second-hand
X any - - second-hand
Y any - - second-hand
`, "letter", "for", "low", "high", "status")
}
