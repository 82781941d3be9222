package electrolytic

import (
	"fmt"
	"math"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// limits lists every known limit for a completed claim: capacitance, then loss (ESR or tan δ), then leakage, per section.
func limits(claim screening.Claim) ([]screening.Limit, error) {
	us, err := units(claim)
	if err != nil {
		return nil, err
	}
	all := make([]screening.Limit, 0, 24*len(us))
	for i := range us {
		// The formulas keep the unit for as long as the limits live.
		all = capacitanceLimits(all, &us[i])
		all = lossLimits(all, claim, &us[i])
		all = leakageLimits(all, claim, &us[i])
	}
	return all, nil
}

// capacitanceLimits: within the tolerance as new; serviceable from 0.70 of nominal to the top of the tolerance. A part that reads high is
// suspected of leakage, which re-forming can undo; one that reads low is dry, which nothing undoes.
func capacitanceLimits(limits []screening.Limit, u *unit) []screening.Limit {
	l := screening.Limit{
		On: screening.Capacitance.Name, Unit: quantity.Farad, Section: u.section, Criterion: criterionCapacitance,
		At: screening.At(screening.Frequency, lossFrequency), Low: u.farad * (1 + u.low), High: u.top(), TreatHigh: screening.Reform,
		Set: screening.GeneralSet, InUse: true, Grade: screening.WithinSpec, Source: u.toleranceSource,
	}
	l.Formula = func() string {
		return fmt.Sprintf("%s %s = %s to %s", microfarads(u.farad), percents(u.low, u.high), microfarads(u.farad*(1+u.low)), microfarads(u.top()))
	}
	worn := l
	kept := named("serviceable-capacitance")
	worn.Low = math.Min(l.Low, kept.value*u.farad)
	worn.Grade, worn.Soft = screening.Serviceable, true
	worn.Source = kept.source
	if u.toleranceSource.Status != screening.Published {
		worn.Source = u.toleranceSource
		worn.Note = "the lower bound is " + kept.source.String()
	}
	low := worn.Low
	worn.Formula = func() string {
		return fmt.Sprintf("%.2f·%s to %s %s = %s to %s", low/u.farad, microfarads(u.farad), microfarads(u.farad), percents(u.low, u.high),
			microfarads(low), microfarads(u.top()))
	}
	return append(limits, l, worn)
}

// percents prints a tolerance: "±20 %", "−10/+50 %".
func percents(low, high float64) string {
	if low == -high {
		return fmt.Sprintf("±%.3g %%", 100*high)
	}
	return fmt.Sprintf("−%.3g/+%.3g %%", -100*low, 100*high)
}
