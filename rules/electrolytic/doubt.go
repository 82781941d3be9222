package electrolytic

import (
	"fmt"
	"math"
	"slices"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// What becomes of a failure against a figure that may not reject by itself, and of one against a series that may not be this part's.

// oneSided95 is the normal quantile at which a reading lies beyond a bound with probability 0.95.
const oneSided95 = 1.645

// surelyAbove reports whether a reading lies above a bound with probability 0.95, and by more than its meter may be off.
func surelyAbove(r *screening.Reading, bound float64) bool {
	return r.Value-math.Max(oneSided95*r.U, r.Spec) > bound
}

// confirm turns a failure against an unpublished figure into one that counts where a published figure fails too: a leakage above the
// vintage or snap-in limit that is above what data sheets allow a new part as well. Where none does, it says so.
func (v *view) confirm() []screening.Reason {
	var reasons []screening.Reason
	for _, f := range slices.Concat(v.leakage, v.ceiling) {
		e := f.Evidence()
		if !f.Unconfirmed || e == nil {
			continue
		}
		after, _ := f.Limit.At.Get(screening.After)
		published, ok := publishedLeakage(v.part.Claim, v.unit, after)
		if !ok || isCeiling(f.Limit.Criterion) || !surelyAbove(e, published) {
			reasons = append(reasons, screening.Reason{Code: codeUnconfirmed, Of: f.Limit.On, Text: fmt.Sprintf(
				"leakage reads %s, above the %s limit of %s; that figure is %s and rejects nothing by itself",
				quantity.Format(e.Value, quantity.Ampere, 3), f.Limit.Set, quantity.Format(f.Limit.High, quantity.Ampere, 3), f.Limit.Source.Status)})
			continue
		}
		f.Outcome, f.Unconfirmed, f.Why = screening.Fail, false, ""
		reasons = append(reasons, screening.Reason{Code: codeConfirmed, Of: f.Limit.On, Text: fmt.Sprintf(
			"the %s limit is %s, but the leakage is also above the %s that published data sheets allow a new part", f.Limit.Set,
			f.Limit.Source.Status, quantity.Format(published, quantity.Ampere, 3))})
	}
	return reasons
}

// confirmDry: a capacitance below 0.70 of nominal fails a published figure, even where the tolerance is an assumed one from memory.
func (v *view) confirmDry() []screening.Reason {
	kept := named("serviceable-capacitance")
	for _, f := range v.capacitance {
		if !f.Unconfirmed || f.Side != screening.Below || f.Limit.Grade != screening.Serviceable {
			continue
		}
		f.Outcome, f.Unconfirmed, f.Why = screening.Fail, false, ""
		f.Limit.Source = kept.source
		return []screening.Reason{{Code: codeConfirmed, Of: f.Limit.On, Text: fmt.Sprintf(
			"only the assumed tolerance is from memory; the lower bound of %.2f of nominal is published", kept.value)}}
	}
	return nil
}

// lossBound is the most that the laxest series known allows a serviceable part, in the limit's own unit; ok is false where none is printed for
// its voltage.
func (v *view) lossBound(l *screening.Limit) (most float64, ok bool) {
	laxest := laxestTanDelta(v.part.Claim, v.unit) * named("serviceable-loss").value
	if l.On != screening.ESR.Name {
		return laxest, laxest > 0
	}
	hertz, _ := l.At.Get(screening.Frequency)
	return esrOf(laxest, hertz, v.unit.farad), laxest > 0
}

// confirmLoss: a loss that is out of a derived ladder and above what any series prints fails all the same.
func (v *view) confirmLoss() []screening.Reason {
	var reasons []screening.Reason
	for _, f := range v.loss {
		e := f.Evidence()
		if !f.Unconfirmed || e == nil || f.Limit.Grade != screening.Serviceable {
			continue
		}
		if most, ok := v.lossBound(&f.Limit); ok && surelyAbove(e, most) {
			f.Outcome, f.Unconfirmed, f.Why = screening.Fail, false, ""
			reasons = append(reasons, screening.Reason{Code: codeConfirmed, Of: f.Limit.On, Text: fmt.Sprintf(
				"the limit is %s, but the losses are also above what any published series allows", f.Limit.Source.Status)})
		}
	}
	return reasons
}

// forgive keeps a loss that fails the ladder in use from rejecting while some published series would still allow it.
func (v *view) forgive() []screening.Reason {
	if !hasOutcome(v.loss, screening.Fail) {
		return nil
	}
	forgiven := false
	for _, f := range v.loss {
		e := f.Evidence()
		if f.Outcome != screening.Fail || e == nil || f.Limit.Grade != screening.Serviceable {
			continue
		}
		if most, _ := v.lossBound(&f.Limit); surelyAbove(e, most) {
			continue
		}
		f.Outcome, f.Unconfirmed, forgiven = screening.Close, true, true
		f.Why = "too much for an ordinary series, but some series print a limit that allows it: look up this part's own"
	}
	if !forgiven {
		return nil
	}
	return []screening.Reason{{Code: codeSeriesUnknown, Of: screening.ESR.Name, Text: fmt.Sprintf(
		"the losses are out for an ordinary series, but up to tan δ %.2g would be serviceable in the laxest series known",
		laxestTanDelta(v.part.Claim, v.unit)*named("serviceable-loss").value)}}
}
