package thyristor

import (
	"math"
	"strings"
	"testing"

	"goodbin/rules/internal/booktest"
	"goodbin/rules/types"
	"goodbin/screening"
)

// The figures once more: all house but the rule for leakage.
func TestTheTableHoldsItsFigures(t *testing.T) {
	booktest.Figures(t, limitsCSV, `
gate-junction 0.30 1.2 - house
gate-ohms 1 100e3 - house
trigger - 100e-3 - house
on 0.5 1.9 current=0.4A house
off-leak - 10e-6 - common-practice
`, "name", "low", "high", "at", "status")
}

// The quadrants: I both plus, III both minus, IV T2 minus and gate plus; gate and T2 against T1.
func TestTheQuadrantsAreWiredAsNamed(t *testing.T) {
	b := TriacBook(types.Builtin())
	j := booktest.Judge(t, b, "BT234", screening.DefaultPolicy())
	seen := 0
	for _, f := range j.Findings {
		if f.Limit.On != IGT.Name {
			continue
		}
		seen++
		want := map[string][2]string{
			"1": {"plus side to T2, minus side to T1", "to plus of the supply"}, "3": {"plus side to T1, minus side to T2", "to minus of the supply"},
			"4": {"plus side to T1, minus side to T2", "to plus of the supply"},
		}[f.Limit.Section]
		lines := strings.ReplaceAll(strings.Join(b.Recipes(j.Part, f.Limit)[0].Lines, "\n"), " the T", " T")
		if want[0] == "" || !strings.Contains(lines, want[0]) || !strings.Contains(lines, want[1]) {
			t.Errorf("quadrant %s: %s", f.Limit.Section, lines)
		}
	}
	if seen != 3 {
		t.Errorf("%d quadrants", seen)
	}
}

// IH·R + VT as in Malvino 15-4: 15 mA through 100 Ω and 0.7 V is 2.2 V; 12 V into a short is 1.44 W in 100 Ω. VT of 1.5 V at 6 A takes
// (12 − 1.5)/6 = 1.75 Ω and 63 W in it, 9 W in the part.
func TestTheOtherRecipesAreComputed(t *testing.T) {
	b := TriacBook(types.Builtin())
	j := booktest.Judge(t, b, "BT234", screening.DefaultPolicy())
	for _, f := range j.Findings {
		want := map[string]float64{"drop-out-voltage": 2.2, "series-resistance": 100, "resistor-power": 1.44}
		switch f.Limit.Criterion {
		case onDrop:
			want = map[string]float64{"series-resistance": 1.75, "resistor-power": 63, "part-power": 9}
		case holding:
		default:
			continue
		}
		v := b.Recipes(j.Part, f.Limit)[0].Values
		for name, x := range want {
			if math.Abs(v[name]-x) > 1e-9 {
				t.Errorf("%s %s: %v, want %v", f.Limit.On, name, v[name], x)
			}
		}
	}
}
