package ceramic

import (
	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	// freshDecades is how far before 1000 h a part may be that was just unsoldered: one hour, three decades.
	freshDecades = 3
	// aboveFrequency is how far above its limit's frequency a class 2 part must be read for it to count as read there, as a ratio.
	aboveFrequency = 2
)

// adjust explains what ageing and heat do to class 2, and takes back failures that only they, or the meter's frequency, may have made.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	d, _ := dielectricOf(part.Claim)
	var reasons []screening.Reason
	for i := range findings {
		f := &findings[i]
		e := f.Evidence()
		if f.Limit.Criterion != capacitor.CriterionCapacitance || e == nil || e.Sense != quantity.Exactly {
			continue
		}
		if !d.ages() {
			continue
		}
		u, ok := capacitor.UnitOf(part.Claim, span, f.Limit.Section)
		if !ok {
			continue
		}
		switch serviceable := f.Limit.Grade == screening.Serviceable; {
		case f.Outcome == screening.Fail && f.Side == screening.Below && readFast(e, &f.Limit):
			at, _ := e.At.Get(screening.Frequency)
			want, _ := f.Limit.At.Get(screening.Frequency)
			f.Outcome = screening.Missing
			f.Why = "read at " + quantity.Format(at, quantity.Hertz, 0) + ", where class 2 reads low, not at " + quantity.Format(want, quantity.Hertz, 0)
		case serviceable && f.Outcome == screening.Fail && f.Side == screening.Above && e.Value <= u.Top()*(1+freshDecades*d.ageing):
			f.Outcome, f.Why = screening.Missing, "heat of soldering makes it read high: let it rest two days first"
			reasons = append(reasons, book.Note(f.Limit.On, "reads high: just after heat by up to %s (%s a decade from 1 h to 1000 h)",
				quantity.Format(freshDecades*d.ageing, quantity.Ratio, 2), quantity.Format(d.ageing, quantity.Ratio, 2)))
		case serviceable && f.Outcome == screening.Pass && e.Value < u.Bottom():
			reasons = append(reasons, ageingNote(part.Claim, &d, 1-e.Value/u.Bottom()))
		}
	}
	return findings, reasons
}

// readFast reports whether a reading was taken well above its limit's frequency.
func readFast(r *screening.Reading, l *screening.Limit) bool {
	got, stated := r.At.Get(screening.Frequency)
	want, _ := l.At.Get(screening.Frequency)
	return stated && got > aboveFrequency*want
}

const (
	widest   = 0.20 // the widest tolerance that a lesser claim names (house)
	measured = 0.20 // how far from its printed value a class 1 part may be kept as measured (house)
)

// lesser: of class 1, which does not go on drifting, the value as measured; else a wider tolerance.
func lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	var all []screening.Lesser
	if d, _ := dielectricOf(part.Claim); d.class == 1 {
		all = capacitor.AsMeasured(part, findings, measured)
	}
	return append(all, capacitor.Wider(part, findings, widest)...)
}
