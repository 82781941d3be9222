package tui

import (
	"io"
	"strings"
	"testing"

	"goodbin/inventory"
	"goodbin/screening"
)

// The pinout of a type stands with the verdict, and with everything of the part, with the advice to check it.
func TestPinoutStandsWithTheVerdict(t *testing.T) {
	th := newTheme(io.Discard, false, true)
	judged := screening.Judgement{Verdict: screening.Accept, Claim: screening.Claim{}.WithTrait(screening.TraitPinout, "C-B-E")}
	for name, tt := range map[string]struct {
		own  screening.Claim
		want string
	}{
		"from the sheet": {screening.Claim{}, "pinout C-B-E from the sheet; same case is not same pinout: check with a meter"},
		"claimed":        {judged.Claim, "pinout C-B-E; same case is not same pinout: check with a meter"},
	} {
		c := cardData{id: "1-01", part: inventory.Part{}, own: tt.own, judged: judged}
		for where, lines := range map[string][]string{"card": th.card(c, 120, 30), "all": th.allOf(c, 120)} {
			if !strings.Contains(strings.Join(lines, "\n"), tt.want) {
				t.Errorf("%s, %s: %q", name, where, lines)
			}
		}
	}
}
