package tantalum

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var ignites = screening.Source{
	Document: "NASA paper on derating surge currents of tantalum capacitors",
	Clause:   "parts with MnO2 short and can ignite on the first turn-on at low impedance; a slow ramp with the current limited heals", Status: screening.Published,
}

var silverCase = screening.Source{
	Document: "restorers' notes on wet tantalum in a silver case", Clause: "no reverse voltage at all", Status: screening.SecondHand,
}

// adjust adds to the shared rules the one explanation that is a solid part's own: damp.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	findings, reasons := shared().Adjust(part, findings)
	damp := named("damp")
	for i := range findings {
		f := &findings[i]
		e := f.Evidence()
		if f.Limit.On != screening.Capacitance.Name || f.Limit.Grade != screening.WithinSpec || e == nil || technology(part.Claim) == wet ||
			e.Value <= f.Limit.High || e.Value > f.Limit.High*(1+damp.Value) {
			continue
		}
		reasons = append(reasons, book.Note(f.Limit.On, "it reads above its tolerance: damp alone raises a solid tantalum by up to %s (%s): keep it dry for some "+
			"days and measure again", quantity.Format(damp.Value, quantity.Ratio, 0), damp.Source))
	}
	return findings, reasons
}

// untested says what no reading here shows.
func untested(part screening.Part, findings []screening.Finding) []string {
	lines := shared().Untested(part, findings)
	us, err := shared().Units(part.Claim)
	if err != nil {
		return nil
	}
	u := us[0]
	if technology(part.Claim) == wet {
		return append(lines, fmt.Sprintf("reverse voltage: allow none, not even while switching (%s)", silverCase.Status))
	}
	share, ohms, least := named("surge-share"), named("surge-ohms"), named("surge-least")
	return append(lines, fmt.Sprintf("surge current: on a low-impedance rail use it only up to %s (half its voltage; %s), with %s or more in series "+
		"(%g Ω/V, at least %g Ω; %s)", quantity.Format(share.Value*u.Volts, quantity.Volt, 0), share.Source.Status,
		book.About(math.Max(least.Value, ohms.Value*u.Volts), quantity.Ohm), ohms.Value, least.Value, ohms.Source.Status))
}

// cautions: the stored charge at every step, and before any voltage what a reversed or weak part does.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	all := capacitor.Cautions(part, at, shared().Span, nil)
	if at != screening.AtMeasure {
		return all
	}
	if technology(part.Claim) == wet {
		return append(all, shared().UnderVoltage(part, "a silver case stands no reverse voltage at all",
			"A weak part gases, and can burst and spray acid: eye protection.", silverCase)...)
	}
	return append(all, shared().UnderVoltage(part, "the stripe of a chip is plus; it stands next to no reverse voltage",
		"It fails as a short and can ignite: nothing that burns near it, eye protection; a weak spot heals when the voltage rises slowly.", ignites)...)
}
