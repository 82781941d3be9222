package bipolar

import (
	"fmt"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// validGain is the share of the collector current up to which leakage leaves a gain reading valid (ASTM F528).
const validGain = 0.10

// A base current below this leaves the second transistor of a power Darlington off: VBE over its built-in resistor, about 0.7 V / 10 kΩ
// (derived; a simulated TIP122 reaches a gain of 376 at 100 µA and 20 at 70 µA).
const turnOnCurrent = 100e-6

// adjust holds the rules that look across readings: what leakage makes of a gain, where a low gain says nothing, what a base-emitter
// voltage outside its band looks like.
func (b rulebook) adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	p := b.promiseOf(part.Claim)
	var why []screening.Reason
	undecided := gainUndecided(findings)
	proven := provenVoltage(part, findings)
	for i := range findings {
		f := &findings[i]
		if undecided && informative(&f.Limit) && f.Limit.Criterion == CriterionGain {
			unanswer(f, "a reading at the sheet's own current is there, and it decides")
		}
		switch f.Limit.On {
		case HFE.Name, HFENet.Name:
			why = appendNote(why, p.adjustGain(part, f))
		case VBE.Name:
			why = appendNote(why, p.adjustVBE(f))
		case screening.Temperature.Name:
			if f.Outcome == screening.Missing && leakageStatesTemperature(part) {
				f.Outcome, f.Probability, f.Why = screening.Pass, 1, ""
			}
		case screening.VBR.Name:
			if f.Outcome == screening.Missing && proven > 0 {
				f.Wants = screening.Gap{} // untested words how far it was proved
			}
		case ICEO.Name:
			if f.Outcome == screening.Fail && f.Limit.Grade == screening.WithinSpec && p.material == germanium {
				why = appendNote(why, "more than 300 µA of open-base leakage is suspicious in a small germanium part; watch it for drift")
			}
		}
	}
	return turnProbes(part, oncePerGain(findings)), why
}

// oncePerGain keeps one finding of a gain limit that asks the same of a new part and of a serviceable one, where both came out alike. They
// differ only in how sure the meter must be, and so only near a bound.
func oncePerGain(findings []screening.Finding) []screening.Finding {
	kept := 0
	for i := range findings {
		f := &findings[i]
		if kept > 0 && f.Limit.Grade == screening.Serviceable && sameGain(&findings[kept-1], f) {
			findings[kept-1].Limit.Grade = screening.AnyGrade
			continue
		}
		if kept < i {
			findings[kept] = *f
		}
		kept++
	}
	return findings[:kept]
}

func sameGain(spec, serviceable *screening.Finding) bool {
	a, b := &spec.Limit, &serviceable.Limit
	return a.Criterion == CriterionGain && b.Criterion == CriterionGain && a.Grade == screening.WithinSpec && a.On == b.On && a.Section == b.Section &&
		a.At == b.At && a.Low == b.Low && a.High == b.High && a.Source == b.Source && spec.Outcome == serviceable.Outcome
}

// turnProbes keeps a base-emitter junction that reads open from rejecting until the probes were turned: it asks for that reading, and takes
// it. Only open both ways is open. Which probe was plus is nowhere written down, so a known polarity does not settle it.
func turnProbes(part screening.Part, findings []screening.Finding) []screening.Finding {
	turned, read := part.Reading(VEB.Name, "")
	if read && readsOpen(&turned) {
		return findings
	}
	for i := range findings {
		f := &findings[i]
		if f.Limit.On != VBE.Name || f.Outcome != screening.Fail || !readsOpen(f.Reading) {
			continue
		}
		if read {
			unanswer(f, "it conducts with the probes turned, at "+quantity.Format(turned.Value, quantity.Volt, 3)+
				": find which probe is plus and which lead the base; then type what conducts as vbe, or another polarity")
			continue
		}
		unanswer(f, "it reads open this way round: turn the probes")
		if f.Limit.Grade == screening.AnyGrade {
			findings = append(findings, turnedFinding(f.Limit.Criterion))
		}
	}
	return findings
}

// turnedFinding asks for the reading with the probes turned, beside the reading that a criterion asks of VBE.
func turnedFinding(criterion screening.Criterion) screening.Finding {
	asked := limit(&VEB, criterion, "conducts-vbe")
	asked.Note = "where it conducts, the probes were the wrong way round, or the polarity or the leads are others"
	return screening.Finding{
		Limit: asked, Need: asked.Need, Probability: nan, Margin: nan, Wants: screening.Gap{Of: VEB.Name}, Why: "not measured",
	}
}

// readsOpen reports whether a junction's forward voltage is the open display of a diode test, or above what two junctions drop.
func readsOpen(r *screening.Reading) bool {
	return r != nil && r.Sense != quantity.AtMost && (r.Over || r.Value > figures()["vbe-darlington"].high+0.3)
}

// unanswer takes a reading back as evidence for a limit, and says why.
func unanswer(f *screening.Finding, why string) {
	f.Outcome, f.Why = screening.Missing, why
	f.Probability, f.Margin, f.NearLimit, f.Unconfirmed = nan, nan, false, false
}

// gainUndecided reports whether a gain taken at a current of the sheet is too near its limit or fails an unconfirmed one. The weak bound
// must not answer in its place.
func gainUndecided(findings []screening.Finding) bool {
	for i := range findings {
		l := &findings[i].Limit
		if l.Criterion == CriterionGain && l.Grade != screening.WithinSpec && !informative(l) && findings[i].Outcome == screening.Close {
			return true
		}
	}
	return false
}

// appendNote adds a note once.
func appendNote(notes []screening.Reason, text string) []screening.Reason {
	if text == "" {
		return notes
	}
	for _, n := range notes {
		if n.Text == text {
			return notes
		}
	}
	return append(notes, book.Note("", "%s", text))
}

// adjustGain refuses a gain that is mostly leakage, and takes a low one away from the sheet's current for what it is: no evidence.
func (p *promise) adjustGain(part screening.Part, f *screening.Finding) string {
	r := f.Reading
	if r == nil {
		if f.Limit.On == HFENet.Name {
			f.Why = "needs hfe with its collector current, and iceo at the same temperature and the same VCE or more"
		}
		return ""
	}
	if ib, ok := r.At.Get(screening.IB); ok && f.Outcome == screening.Missing && f.Unstated == screening.IC {
		f.Unstated = screening.NoVariable
		f.Why = "taken at a base current of " + quantity.Format(ib, quantity.Ampere, 0) + ", a collector current of " +
			quantity.Format(ib*r.Value, quantity.Ampere, 2)
	}
	if share, ok := leakageShare(part, *r); ok && f.Limit.On == HFE.Name && p.material != germanium && f.Limit.Criterion == CriterionGain {
		unanswer(f, fmt.Sprintf("leakage is %.0f %% of the collector current; from %.0f %% on a gain reading is not valid (ASTM F528)",
			100*share, 100*validGain))
		return ""
	}
	if low, ok := p.betweenCurrents(f); ok {
		unanswer(f, "between the currents of the sheet a gain may be as low as at either, "+quantity.Format(low, quantity.One, 0))
		return ""
	}
	if f.Outcome == screening.Fail && informative(&f.Limit) && (p.power() || p.darlington) {
		unanswer(f, "a power type or a Darlington can read no gain at a small current: measure at the sheet's")
	}
	if p.powerDarlington() && f.Outcome == screening.Missing {
		return p.smallBaseCurrent(*r)
	}
	if f.Outcome == screening.Pass && informative(&f.Limit) && f.Limit.Criterion == CriterionGain {
		return p.informativeNote(part)
	}
	return ""
}

// betweenCurrents reports whether a gain that is too low for one current of the sheet, but was not taken at it, is still as high as the
// sheet asks around the current it was taken at. The minima of a sheet rise and fall with current (2N3904: 60 at 50 mA, 30 at 100 mA).
func (p *promise) betweenCurrents(f *screening.Finding) (low float64, yes bool) {
	if f.Limit.Criterion != CriterionGain || f.Side != screening.Below || f.Outcome != screening.Fail && f.Outcome != screening.Close {
		return 0, false
	}
	ic, ok := f.Reading.At.Get(screening.IC)
	if !ok || !f.Limit.At.Has(screening.IC) {
		return 0, false
	}
	low = p.lowestAround(ic)
	return low, low < f.Limit.Low && f.Reading.Value+coverage*f.Reading.U >= low
}

// coverage is the normal quantile of 0.95.
const coverage = 1.645

// lowestAround returns the least gain that the sheet asks at a collector current: what it prints there, else the lower of its neighbours.
func (p *promise) lowestAround(ic float64) float64 {
	var below, above, lowBelow, lowAbove float64 = 0, inf, inf, inf
	consider := func(r *screening.Rating) {
		at, ok := r.At.Get(screening.IC)
		if r.Of != HFE.Name || !ok {
			return
		}
		if at <= ic*sameValue && at > below {
			below, lowBelow = at, r.Low
		}
		if at >= ic/sameValue && at < above {
			above, lowAbove = at, r.Low
		}
	}
	if promised, ok := p.claim.Rating(HFE.Name, ""); ok {
		consider(&promised)
	}
	points := p.gainPoints()
	for i := range points {
		consider(&points[i])
	}
	return min(lowBelow, lowAbove)
}

// smallBaseCurrent says why a power Darlington seems to have no gain.
func (p *promise) smallBaseCurrent(r screening.Reading) string {
	ib, ok := r.At.Get(screening.IB)
	if ic, stated := r.At.Get(screening.IC); !ok && stated && r.Value > 0 {
		ib, ok = ic/r.Value, true
	}
	if ok && ib >= turnOnCurrent {
		return ""
	}
	return p.name() + " may hold resistors across its junctions: below about 100 µA of base current they take it all and the gain reads near " +
		"nothing. That is not a fault; test it with a lamp"
}

// leakageShare returns ICEO over IC of a gain reading where it reaches the share that makes the gain invalid.
func leakageShare(part screening.Part, gain screening.Reading) (float64, bool) {
	ic, ok := collectorCurrent(gain)
	if !ok {
		return 0, false
	}
	leak, ok := leakageBeside(part, gain)
	if !ok || leak.Sense == quantity.AtMost {
		return 0, false
	}
	return leak.Value / ic, leak.Value >= validGain*ic
}

// informativeNote says that gain was judged by the weak bound only, unless a reading met the sheet's current too.
func (p *promise) informativeNote(part screening.Part) string {
	promised, ok := p.claim.Rating(HFE.Name, "")
	if !ok {
		return ""
	}
	for _, r := range part.Readings {
		if r.Of != HFE.Name && r.Of != HFENet.Name {
			continue
		}
		if _, _, fits := gainFit.Misfit(&r.At, &promised.At); fits {
			return ""
		}
		for _, s := range p.gainPoints() {
			if _, _, fits := gainFit.Misfit(&r.At, &s.At); fits && s.Of == HFE.Name {
				return ""
			}
		}
	}
	return "the gain is informative only: " + p.name() + " states it at " + promised.At.String()
}

// adjustVBE says what a voltage outside the band looks like. A part without a type number that reads like a Darlington is asked whether it
// is one; nothing is ever passed silently as another family.
func (p *promise) adjustVBE(f *screening.Finding) string {
	e := f.Evidence()
	if f.Outcome != screening.Fail || e == nil || f.Limit.Criterion != CriterionVBE {
		return ""
	}
	x := e.Value
	pair := figures()["vbe-darlington"]
	switch {
	case readsOpen(e):
		return "base to emitter reads open: the wrong way round, the wrong pins, or an open junction"
	case !p.darlington && x >= pair.low:
		if !p.known {
			unanswer(f, "it looks like a Darlington: if it is one, say darlington")
		}
		return fmt.Sprintf("it looks like a Darlington: %s is two junctions in series", quantity.Format(x, quantity.Volt, 3))
	case p.darlington && x < pair.low && f.Side == screening.Below:
		return fmt.Sprintf("%s is one junction: it does not look like a Darlington", quantity.Format(x, quantity.Volt, 3))
	case p.material == silicon && x >= figures()["vbe-germanium"].low && x <= figures()["vbe-germanium"].high:
		return "it reads like germanium, or like a leaking junction"
	case p.material == germanium && x >= figures()["vbe-silicon-power"].low:
		return "it reads like silicon"
	case x < figures()["conducts-vbe"].low:
		return "base to emitter reads as a short"
	}
	return ""
}

func leakageStatesTemperature(part screening.Part) bool {
	for _, r := range part.Readings {
		if r.Of == ICEO.Name && r.At.Has(screening.PartTemperature) {
			return true
		}
	}
	return false
}
