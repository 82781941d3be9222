package oxide

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// The criteria.
const (
	CriterionCapacitance screening.Criterion = "capacitance"
	CriterionShort       screening.Criterion = "short"
	CriterionLoss        screening.Criterion = "loss"
	CriterionLeakage     screening.Criterion = "leakage"
)

// LossFrequency is where capacitance, tan δ and ESR are stated, Hz; RoomTemperature where leakage is, °C.
const (
	LossFrequency   = 120.0
	RoomTemperature = 20.0
)

// Rules is one rulebook's: its tables, how it names the technology of a completed claim, and how much the losses are needed.
type Rules struct {
	Span       capacitor.Span
	Tables     *Tables
	Technology func(screening.Claim) string
	LossNeed   func(screening.Claim) screening.Need
	// LeakageNote says what a person should know of leakage beyond the limit: what it may be when hot. It may be nil.
	LeakageNote func(screening.Claim, capacitor.Unit) string
	// LossLines are further lines of the recipe for ESR.
	LossLines []string
}

// Units lists the sections of a completed claim; voltage is required of these parts.
func (r *Rules) Units(claim screening.Claim) ([]capacitor.Unit, error) {
	us, err := capacitor.Units(claim, r.Span)
	if err != nil {
		return nil, err
	}
	for _, u := range us {
		if u.Volts == 0 {
			return nil, fmt.Errorf("voltage: none is claimed; type it as printed, such as 16V")
		}
		if u.Volts > mostVolts {
			return nil, fmt.Errorf("voltage: %s is beyond %s; it is at most %g V", quantity.Format(u.Volts, quantity.Volt, 0), r.Span.Kind, mostVolts)
		}
	}
	return us, nil
}

// mostVolts is the highest voltage that any part of these kinds is rated for; beyond it a digit is wrong (house).
const mostVolts = 700.0

// Limits lists every known limit for a completed claim, section by section: capacitance, the short, the losses, leakage.
func (r *Rules) Limits(claim screening.Claim) ([]screening.Limit, error) {
	us, err := r.Units(claim)
	if err != nil {
		return nil, err
	}
	technology := r.Technology(claim)
	all := make([]screening.Limit, 0, 16*len(us))
	for _, u := range us {
		all = r.capacitance(all, technology, u)
		all = r.short(all, technology, u)
		all = r.loss(all, claim, technology, u)
		all = r.leakage(all, claim, technology, u)
	}
	return all, nil
}

// capacitance: within the tolerance as new; serviceable, what the makers allow by the end of life on top of it.
func (r *Rules) capacitance(limits []screening.Limit, technology string, u capacitor.Unit) []screening.Limit {
	fall, rise := r.Tables.Named(figureFall, technology), r.Tables.Named(figureRise, technology)
	l := screening.Limit{
		On: screening.Capacitance.Name, Unit: quantity.Farad, Section: u.Section, Criterion: CriterionCapacitance,
		At: screening.At(screening.Frequency, LossFrequency), Low: u.Bottom(), High: u.Top(), Set: screening.GeneralSet, InUse: true,
		Grade: screening.WithinSpec, Source: u.ToleranceSource,
	}
	band := capacitor.Farads(u.Farad) + " " + capacitor.Percents(u.Low, u.High)
	l.Formula = func() string {
		return fmt.Sprintf("%s = %s to %s", band, capacitor.Farads(u.Bottom()), capacitor.Farads(u.Top()))
	}
	worn := l
	worn.Low, worn.High = u.Bottom()*(1-fall.Value), u.Top()*(1+rise.Value)
	worn.Grade, worn.Soft, worn.Source = screening.Serviceable, true, capacitor.Weaker(fall.Source, u.ToleranceSource)
	worn.Formula = func() string {
		return fmt.Sprintf("%s, then %s by the end of life = %s to %s", band, capacitor.Percents(-fall.Value, rise.Value),
			capacitor.Farads(worn.Low), capacitor.Farads(worn.High))
	}
	return append(limits, l, worn)
}

// short: a part that passes many times its leakage limit is shorted, or about to be. Leakage rises at least in proportion to the voltage, so
// an ohmmeter's volt or two shows it: at rated voltage at least UR/R would flow.
func (r *Rules) short(limits []screening.Limit, technology string, u capacitor.Unit) []screening.Limit {
	times, most := r.Tables.Named(figureShort, technology), r.Tables.Named(figureOhms, technology)
	amperes := times.Value * r.Tables.LeakageLimit(technology, u)
	ohms := math.Min(u.Volts/amperes, most.Value)
	l := screening.Limit{
		On: screening.Resistance.Name, Unit: quantity.Ohm, Section: u.Section, Criterion: CriterionShort, Low: ohms, High: math.Inf(1),
		Set: screening.GeneralSet, InUse: true, Source: times.Source,
	}
	l.Formula = func() string {
		return fmt.Sprintf("%s / (%g × the leakage limit of %s), at most %s = %s", quantity.Format(u.Volts, quantity.Volt, 0), times.Value,
			quantity.Format(amperes/times.Value, quantity.Ampere, 3), quantity.Format(most.Value, quantity.Ohm, 0), book.About(ohms, quantity.Ohm))
	}
	under := l
	under.On, under.Unit, under.At = screening.Leakage.Name, quantity.Ampere, screening.At(screening.Voltage, u.Volts)
	under.Low, under.High = math.Inf(-1), amperes
	under.Formula = func() string {
		return fmt.Sprintf("%g × the leakage limit = %s", times.Value, quantity.Format(amperes, quantity.Ampere, 3))
	}
	return append(limits, l, under)
}

// loss lists the ladders' tan δ and ESR at 120 Hz, as of a new part and by the end of life where makers allow more then.
func (r *Rules) loss(limits []screening.Limit, claim screening.Claim, technology string, u capacitor.Unit) []screening.Limit {
	worse := r.Tables.Named(figureLoss, technology)
	for i := range r.Tables.loss {
		row := &r.Tables.loss[i]
		if !row.covers(technology, u) {
			continue
		}
		for _, on := range []screening.Definition{screening.ESR, screening.TanDelta} {
			l := screening.Limit{
				On: on.Name, Unit: on.Unit, Section: u.Section, Criterion: CriterionLoss, At: screening.At(screening.Frequency, LossFrequency),
				Low: math.Inf(-1), High: row.tanDelta, Need: r.LossNeed(claim), Set: row.set, InUse: row.set == screening.GeneralSet,
				Source: row.source, Note: row.note,
			}
			l.Formula = func() string { return fmt.Sprintf("tan δ %g", row.tanDelta) }
			if on.Name == screening.ESR.Name {
				l.High = capacitor.ESROf(row.tanDelta, LossFrequency, u.Farad)
				ohms := l.High
				l.Formula = func() string {
					return fmt.Sprintf("tan δ %g; /(2π·120 Hz·%s) = %s", row.tanDelta, capacitor.Farads(u.Farad), quantity.Format(ohms, quantity.Ohm, 3))
				}
			}
			limits = append(limits, Grades(l, worse)...)
		}
	}
	return limits
}

// Grades splits an upper limit into that of a new part and that of the end of life, `worse` times as much.
func Grades(l screening.Limit, worse Figure) []screening.Limit {
	l.Grade = screening.WithinSpec
	worn, formula := l, l.Formula
	worn.Grade, worn.High = screening.Serviceable, worse.Value*l.High
	worn.Soft = l.Criterion != CriterionLeakage
	worn.Source.Clause += ", and " + worse.Source.Clause + " (" + worse.Source.Document + ")"
	if l.Source.Status.MayReject() {
		worn.Source.Status = worse.Source.Status
	}
	worn.Formula = func() string {
		if worse.Value == 1 {
			return formula() + "; no more by the end of life"
		}
		return fmt.Sprintf("%s; ×%g = %s", formula(), worse.Value, quantity.Format(worn.High, worn.Unit, 3))
	}
	return []screening.Limit{l, worn}
}

// leakage lists the leakage limits of every set.
func (r *Rules) leakage(limits []screening.Limit, claim screening.Claim, technology string, u capacitor.Unit) []screening.Limit {
	worse, noted := r.Tables.Named(figureLeakage, technology), false
	for i := range r.Tables.leakage {
		row := &r.Tables.leakage[i]
		if !row.covers(technology, u) {
			continue
		}
		l := screening.Limit{
			On: screening.Leakage.Name, Unit: quantity.Ampere, Section: u.Section, Criterion: CriterionLeakage,
			At:  screening.At(screening.Voltage, u.Volts).With(screening.After, row.after).With(screening.PartTemperature, RoomTemperature),
			Low: math.Inf(-1), High: row.amperes(u), Need: screening.Wanted, Set: row.set, InUse: row.set == screening.GeneralSet,
			Source: row.source, Note: row.note,
		}
		l.Formula = func() string { return row.formula(u) }
		grades := Grades(l, worse)
		if r.LeakageNote != nil && l.InUse && l.Note == "" && !noted {
			grades[0].Note, noted = r.LeakageNote(claim, u), true // once is enough
		}
		limits = append(limits, grades...)
	}
	return limits
}
