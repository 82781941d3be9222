package thyristor

import (
	"goodbin/rules/internal/semi"
	"goodbin/screening"
)

const (
	noJunction = "the diode test shows no junction: many gates have ohms across them. Measure rgk, or make the trigger test, which decides"
	openGate   = "it reads open this way round: turn the probes, measure rgk, or make the trigger test, which decides"
)

// adjust applies the rules that look across readings: a part that latches has a sound gate, whatever a meter makes of it; and only a gate that
// reads open on both ranges, or shorted in ohms, is bad.
func (b rulebook) adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var say semi.Say
	f, r := b.forward(part.Claim), b.backward(part.Claim)
	latched := b.latched(part, findings)
	for i := range findings {
		x := &findings[i]
		f.Tidy(x)
		r.Tidy(x)
		switch {
		case x.Limit.Criterion == gate && latched && x.Outcome != screening.Pass:
			x.Outcome, x.Probability, x.Why = screening.Pass, 1, ""
		case x.Limit.Criterion == gate:
			b.adjustGate(part, x, &say)
		case x.Outcome == screening.Fail && (x.Limit.Criterion == blocks || x.Limit.Criterion == blocksBack):
			say.Note(x.Limit.On, "it conducts without its gate: shorted or worn out, or the leads are others than you think; try each pair once")
		case x.Outcome == screening.Fail && x.Limit.Criterion == latches && (x.Reading.Over || x.Reading.Value > supply/2):
			say.Note(x.Limit.On, "it fell off when the gate was let go: more load current may be needed to latch; a lamp of 0.4 A is enough for most")
		}
	}
	return findings, say.Reasons
}

// latched reports whether it was seen to trigger or to hold in every direction.
func (b rulebook) latched(part screening.Part, findings []screening.Finding) bool {
	for _, section := range b.directions() {
		seen := false
		for i := range findings {
			x := &findings[i]
			held := x.Limit.Criterion == triggers || x.Limit.Criterion == latches
			seen = seen || held && x.Limit.Section == section && x.Outcome == screening.Pass
		}
		if !seen {
			return false
		}
	}
	return true
}

func (b rulebook) adjustGate(part screening.Part, x *screening.Finding, say *semi.Say) {
	if x.Outcome != screening.Fail {
		return
	}
	ohms, measured := part.Reading(RGK.Name, "")
	junction, tested := part.Reading(screening.VF.Name, "")
	switch {
	case x.Limit.On == RGK.Name && x.Side == screening.Above && !(tested && junction.Over):
		b.doubt(x, say, "open on an ohmmeter, which may not reach a junction's drop: use the diode test")
	case x.Limit.On == RGK.Name && x.Side == screening.Above, x.Limit.On == screening.VF.Name && x.Side == screening.Above && measured && ohms.Over:
		say.Note(x.Limit.On, "the gate reads open on both ranges: burnt out, or the leads are others than you think")
	case x.Limit.On == screening.VF.Name && x.Side == screening.Above:
		b.doubt(x, say, openGate)
	case x.Limit.On == screening.VF.Name:
		b.doubt(x, say, noJunction)
	default:
		say.Note(x.Limit.On, "gate to cathode is shorted")
	}
}

// doubt takes a reading of the gate for no answer, and says why: the gate is wanted only, so nothing else would.
func (b rulebook) doubt(x *screening.Finding, say *semi.Say, why string) {
	semi.Unanswer(x, why)
	x.Wants = screening.Gap{} // it was tried
	say.Note(x.Limit.On, why)
}

func (b rulebook) untested(part screening.Part, findings []screening.Finding) []string {
	lines := b.forward(part.Claim).Untested(findings)
	return append(lines, b.backward(part.Claim).Untested(findings)...)
}
