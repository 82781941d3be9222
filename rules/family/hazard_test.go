package family

import (
	"slices"
	"strings"
	"testing"

	"goodbin/screening"
)

// semiconductors.md 9: beryllia in RF power transistors, some isolated thyristors and TO-3 regulators; selenium; mercury in relays (from
// memory). Whatever kind such a part is taken for, it is refused, and nobody is told to open, crush, grind or heat it.
func TestHazardsAreRefusedInEveryKindThatMayHoldThem(t *testing.T) {
	for id, want := range map[string]struct {
		kinds []screening.Kind
		never []string
	}{
		"beryllia":           {[]screening.Kind{"bipolar", "mosfet", "thyristor", "triac", "unknown"}, []string{"do not open", "crush", "grind"}},
		"beryllia-regulator": {[]screening.Kind{"regulator"}, []string{"do not open", "crush", "grind"}},
		"selenium-stack":     {[]screening.Kind{"bridge", "diode", "unknown"}, []string{"do not power", "burn", "open"}},
		"mercury-relay":      {[]screening.Kind{"relay", "unknown"}, []string{"do not open"}},
	} {
		i := slices.IndexFunc(Builtin(), func(f Family) bool { return f.ID == id })
		if i < 0 {
			t.Errorf("no family %s", id)
			continue
		}
		f := Builtin()[i]
		kinds := slices.Sorted(slices.Values(f.Kinds))
		if !slices.Equal(kinds, want.kinds) || f.Dispose != Hazardous || f.Roles != nil || f.Check.Verdict != screening.Barred {
			t.Errorf("%s: %v %s %v %v", id, kinds, f.Dispose, f.Roles, f.Check.Verdict)
		}
		for _, words := range append(want.never, "local rules") {
			if !strings.Contains(f.Check.Do, words) {
				t.Errorf("%s does not say %q: %s", id, words, f.Check.Do)
			}
		}
	}
}
