package capacitor

import (
	"fmt"
	"math"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// The criteria of a capacitor.
const (
	CriterionCapacitance screening.Criterion = "capacitance"
	CriterionLoss        screening.Criterion = "loss"       // tan δ at one of its frequencies
	CriterionInsulation  screening.Criterion = "insulation" // ohms, seconds or amperes
)

// CapacitanceLimit is the tolerance band of a new part: at is where it is stated.
func CapacitanceLimit(u Unit, at screening.Condition) screening.Limit {
	return screening.Limit{
		On: screening.Capacitance.Name, Unit: quantity.Farad, Section: u.Section, Criterion: CriterionCapacitance, At: at,
		Low: u.Bottom(), High: u.Top(), Set: screening.GeneralSet, InUse: true, Grade: screening.WithinSpec, Source: u.ToleranceSource,
		Formula: func() string {
			return fmt.Sprintf("%s %s = %s to %s", Farads(u.Farad), Percents(u.Low, u.High), Farads(u.Bottom()), Farads(u.Top()))
		},
	}
}

// Allowance is how far outside its tolerance a part may lie that has seen service: so much of its nominal, or so many farad where that is
// more (both where Sum is set).
type Allowance struct {
	Ratio, Farad float64
	Sum          bool
	Source       screening.Source
}

// Of returns the allowance for a nominal capacitance, farad.
func (a Allowance) Of(farad float64) float64 {
	if a.Sum {
		return a.Ratio*farad + a.Farad
	}
	return math.Max(a.Ratio*farad, a.Farad)
}

// ServiceableCapacitance widens a tolerance band by an allowance.
func ServiceableCapacitance(u Unit, at screening.Condition, a Allowance) screening.Limit {
	l := CapacitanceLimit(u, at)
	more := a.Of(u.Farad)
	l.Low, l.High = math.Max(0, u.Bottom()-more), u.Top()+more
	l.Grade, l.Soft, l.Source = screening.Serviceable, true, Weaker(a.Source, u.ToleranceSource)
	l.Formula = func() string {
		return fmt.Sprintf("%s %s and %s more = %s to %s", Farads(u.Farad), Percents(u.Low, u.High), Farads(more), Farads(l.Low), Farads(l.High))
	}
	return l
}

// criterionPlain is a capacitance that is plainly another one; it stands beside a tolerance that nobody printed.
const criterionPlain screening.Criterion = "capacitance-floor"

// plainly is how far beyond its serviceable band, as a factor, a part without a printed tolerance is open or another value (house).
const plainly = 2.0

// Floor returns, for a serviceable band that rests on a tolerance from memory and so rejects nothing, the band outside which a part is open,
// shorted or another value whatever its tolerance; nothing where a printed tolerance rejects by itself.
func Floor(serviceable screening.Limit) []screening.Limit {
	if serviceable.Source.Status.MayReject() {
		return nil
	}
	l := serviceable
	l.Criterion, l.Grade, l.Soft = criterionPlain, screening.AnyGrade, false
	l.Low, l.High = l.Low/plainly, l.High*plainly
	l.Source = screening.Source{Document: "the program's rule: no tolerance is so wide: it is open, shorted, or another value", Status: screening.House}
	l.Formula = func() string {
		return fmt.Sprintf("half of %s to twice %s, whatever the tolerance", Farads(serviceable.Low), Farads(serviceable.High))
	}
	return []screening.Limit{l}
}

// Weaker returns a, unless the other source may not reject by itself: what is built on a weak figure is weak.
func Weaker(a, other screening.Source) screening.Source {
	if a.Status.MayReject() && !other.Status.MayReject() {
		a.Status = other.Status
		a.Clause = joined(a.Clause, "on "+other.Document)
	}
	return a
}

func joined(a, b string) string {
	if a == "" {
		return b
	}
	return a + ", " + b
}

// LossLimit bounds tan δ at a frequency. ESR at the same frequency answers it through [Derive]. how says where the figure comes from, in
// words with the part's numbers, "" for a plain figure.
func LossLimit(u Unit, hertz, tanDelta float64, grade screening.Grade, how string, source screening.Source) screening.Limit {
	return screening.Limit{
		On: screening.TanDelta.Name, Unit: quantity.One, Section: u.Section, Criterion: CriterionLoss,
		At: screening.At(screening.Frequency, hertz), Low: math.Inf(-1), High: tanDelta, Need: screening.Wanted,
		Set: screening.GeneralSet, InUse: true, Grade: grade, Soft: grade == screening.Serviceable, Source: source,
		Formula: func() string {
			esr := fmt.Sprintf("ESR %s at %s", quantity.Format(ESROf(tanDelta, hertz, u.Farad), quantity.Ohm, 3), Farads(u.Farad))
			if how == "" {
				return esr
			}
			return how + "; " + esr
		},
	}
}

// ESROf returns ESR = tan δ/(2π·f·C) in ohm, all at one frequency.
func ESROf(tanDelta, hertz, farad float64) float64 { return tanDelta / (2 * math.Pi * hertz * farad) }

// TanDeltaOf returns tan δ = 2π·f·C·ESR, all at one frequency.
func TanDeltaOf(esr, hertz, farad float64) float64 { return 2 * math.Pi * hertz * farad * esr }

// Insulation is what is asked of a dielectric: so many ohms, or so many seconds (ohms times farads; 1 MΩ·µF is 1 s), the less. A bound that
// the source does not state is +Inf.
type Insulation struct {
	Ohms, Seconds float64
	Source        screening.Source
}

// At returns the least ohms for a capacitance in farad.
func (i Insulation) At(farad float64) float64 { return math.Min(i.Ohms, i.Seconds/farad) }

// TestVolts is the voltage at which insulation is measured, by rated voltage: 10 V below 100 V, 100 V below 500 V, else 500 V, and never more
// than the rated voltage. Where none is claimed it is 10 V. The steps are from memory (IEC 60384-1, 4.5.2).
func TestVolts(rated float64) float64 {
	switch {
	case rated >= 500:
		return 500
	case rated >= 100:
		return 100
	case rated > 0:
		return math.Min(10, rated)
	}
	return 10
}

// InsulationLimit bounds insulation resistance from below at a voltage, 1 min after it was applied. Leakage current and self-discharge answer
// it through [Derive].
func InsulationLimit(u Unit, volts float64, i Insulation, grade screening.Grade) screening.Limit {
	least := i.At(u.Farad)
	return screening.Limit{
		On: screening.InsulationResistance.Name, Unit: quantity.Ohm, Section: u.Section, Criterion: CriterionInsulation,
		At:  screening.At(screening.Voltage, volts).With(screening.After, minute),
		Low: least, High: math.Inf(1), Need: screening.Wanted, Set: screening.GeneralSet, InUse: true, Grade: grade, Source: i.Source,
		Formula: func() string { return i.formula(u, volts) },
	}
}

// LeakageLimit is [InsulationLimit] as a current: U/R, for kinds where the current is what people read.
func LeakageLimit(u Unit, volts float64, i Insulation, grade screening.Grade) screening.Limit {
	l := InsulationLimit(u, volts, i, grade)
	l.On, l.Unit, l.Low, l.High = screening.Leakage.Name, quantity.Ampere, math.Inf(-1), volts/i.At(u.Farad)
	return l
}

func (i Insulation) formula(u Unit, volts float64) string {
	least := i.At(u.Farad)
	ohms, current := quantity.Format(least, quantity.Ohm, 3), quantity.Format(volts/least, quantity.Ampere, 2)
	if least < i.Ohms {
		ohms = fmt.Sprintf("%s/%s = %s", fmt.Sprintf("%g s", i.Seconds), Farads(u.Farad), ohms)
	}
	return fmt.Sprintf("%s, that is %s at %s", ohms, current, quantity.Format(volts, quantity.Volt, 0))
}
