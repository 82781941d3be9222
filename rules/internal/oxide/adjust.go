package oxide

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Codes of reasons.
const (
	codeSeriesUnknown = "series-unknown"
	codeConfirmed     = "broken-whatever-its-series"
)

// oneSided95 is the normal quantile at which a reading lies beyond a bound with probability 0.95.
const oneSided95 = 1.645

// surelyAbove reports whether a reading lies above a bound: with probability 0.95, and by more than its meter may be off.
func surelyAbove(r *screening.Reading, bound float64) bool {
	return r.Value-math.Max(oneSided95*r.U, r.Spec) > bound
}

func surelyBelow(r *screening.Reading, bound float64) bool {
	return r.Value+math.Max(oneSided95*r.U, r.Spec) < bound
}

// Adjust applies the rules across findings: losses that some ladder allows reject nothing while the series is unknown; what is broken
// whatever its series is rejected though its own figures may not; an ohms reading that looks like a short is worth a second look.
func (r *Rules) Adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	us, err := r.Units(part.Claim)
	if err != nil {
		return findings, nil // the limits have said so already
	}
	var reasons []screening.Reason
	for _, u := range us {
		only, lower := r.readOnlyBelow(part, u, findings)
		for i := range findings {
			f := &findings[i]
			if f.Limit.Section != u.Section {
				continue
			}
			switch f.Limit.Criterion {
			case CriterionLoss:
				reasons = append(reasons, r.forgive(part.Claim, u, f)...)
			case CriterionCapacitance:
				reasons = append(reasons, r.confirm(part.Claim, u, f)...)
			case CriterionShort:
				if f.Outcome == screening.Fail && f.Limit.On == screening.Resistance.Name {
					reasons = append(reasons, book.Note(f.Limit.On, "so few ohms are a short, unless the meter's plus probe was on minus or the part was "+
						"still charging: swap the probes once and wait before you scrap it"))
				}
			case CriterionLeakage:
				if lower && only > 0 {
					f.Wants = screening.Gap{} // untested words it
				}
			}
		}
	}
	return findings, reasons
}

// forgive keeps losses that some ladder known allows from rejecting a part whose series is not known.
func (r *Rules) forgive(claim screening.Claim, u capacitor.Unit, f *screening.Finding) []screening.Reason {
	e := f.Evidence()
	if f.Outcome != screening.Fail || e == nil || f.Limit.Grade != screening.Serviceable {
		return nil // a part above a ladder is not within it, whatever others print
	}
	technology := r.Technology(claim)
	laxest := r.Tables.laxestLoss(technology, u)
	bound := laxest * r.Tables.Named(figureLoss, technology).Value
	if f.Limit.On == screening.ESR.Name {
		bound = capacitor.ESROf(bound, LossFrequency, u.Farad)
	}
	if surelyAbove(e, bound) {
		return nil
	}
	f.Outcome, f.Unconfirmed = screening.Close, true
	f.Why = "too much for one published series, but others may allow it: look up this part's own"
	return []screening.Reason{{Code: codeSeriesUnknown, Of: f.Limit.On, Text: fmt.Sprintf(
		"the losses are above the ladder that was read whole, but up to tan δ %.2g others allow this capacitance (not confirmed)", laxest)}}
}

// confirm rejects a capacitance of less than half, or more than twice, its nominal, whatever the figures of its series are worth.
func (r *Rules) confirm(claim screening.Claim, u capacitor.Unit, f *screening.Finding) []screening.Reason {
	e := f.Evidence()
	half := r.Tables.Named(figureHalf, r.Technology(claim))
	if !f.Unconfirmed || e == nil || f.Limit.Grade != screening.Serviceable ||
		!surelyBelow(e, half.Value*u.Farad) && !surelyAbove(e, u.Farad/half.Value) {
		return nil
	}
	f.Outcome, f.Unconfirmed, f.Why, f.Limit.Source = screening.Fail, false, "", half.Source
	return []screening.Reason{{Code: codeConfirmed, Of: f.Limit.On, Text: fmt.Sprintf(
		"below %g or above %g of its nominal a part is broken, or is another part, whatever its series", half.Value, 1/half.Value)}}
}

// readOnlyBelow returns the highest voltage at which leakage was read, and whether it was read below the rated voltage only and settled
// nothing.
func (r *Rules) readOnlyBelow(part screening.Part, u capacitor.Unit, findings []screening.Finding) (volts float64, lower bool) {
	for i := range part.Readings {
		x := &part.Readings[i]
		if v, ok := x.At.Get(screening.Voltage); x.Of == screening.Leakage.Name && x.Section == u.Section && ok {
			volts = math.Max(volts, v)
		}
	}
	if volts >= nearlyAtRated[screening.Voltage].Low*u.Volts {
		return volts, false
	}
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion == CriterionLeakage && f.Limit.Section == u.Section && f.Outcome != screening.Missing {
			return volts, false
		}
	}
	return volts, volts > 0
}

// Untested words what the readings leave open: leakage at rated voltage where it was read lower, and what only a surge would show.
func (r *Rules) Untested(part screening.Part, findings []screening.Finding) []string {
	us, err := r.Units(part.Claim)
	if err != nil {
		return nil
	}
	var lines []string
	for _, u := range us {
		if volts, lower := r.readOnlyBelow(part, u, findings); lower {
			lines = append(lines, fmt.Sprintf("leakage at its rated %s: read only at %s", quantity.Format(u.Volts, quantity.Volt, 0),
				quantity.Format(volts, quantity.Volt, 0)))
		}
	}
	return lines
}
