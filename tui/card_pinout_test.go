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
		"from the type table": {screening.Claim{}, "pinout C-B-E from the type table; same case is not same pinout: check with a meter"},
		"claimed":             {judged.Claim, "pinout C-B-E; same case is not same pinout: check with a meter"},
	} {
		c := cardData{id: "1-01", part: inventory.Part{}, own: tt.own, judged: judged}
		for where, lines := range map[string][]string{"card": th.card(c, 120, 30), "all": th.allOf(c, 120)} {
			if !strings.Contains(strings.Join(lines, "\n"), tt.want) {
				t.Errorf("%s, %s: %q", name, where, lines)
			}
		}
	}
}

// What holds the verdict, as a part in circuit, is said before the readings, and the limits stay in sight.
func TestAHeldVerdictSaysWhatToDoFirst(t *testing.T) {
	th := newTheme(io.Discard, false, true)
	c := cardData{id: "1-01", open: true, questions: 1, judged: screening.Judgement{
		Verdict:  screening.Undecided,
		Stops:    []screening.Stop{{Verdict: screening.Undecided, Do: "LIFT one lead"}},
		Findings: []screening.Finding{{Limit: screening.Limit{On: "esr", Low: 0, High: 1}}},
	}}
	for _, want := range []string{"LIFT one lead", "missing"} {
		if text := strings.Join(th.card(c, 80, 30), "\n"); !strings.Contains(text, want) {
			t.Errorf("%q is not in\n%s", want, text)
		}
	}
	c.judged.Stops[0].Verdict = screening.Reject
	if text := strings.Join(th.card(c, 80, 30), "\n"); strings.Contains(text, "missing") {
		t.Errorf("what was not measured is shown after a reject:\n%s", text)
	}
}
