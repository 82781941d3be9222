package screening

import (
	"math"

	"goodbin/screening/quantity"
	"goodbin/screening/uncertainty"
)

// Leads are what the leads or the jig of a meter add to a reading, found by shorting and by opening them: every reading that they affect is
// corrected for them. The zero Leads add nothing.
type Leads struct {
	SeriesR, SeriesRU float64 // Ω and its standard uncertainty: read with the leads shorted
	StrayC, StrayCU   float64 // F and its standard uncertainty: read with nothing in the leads
	Found             string  // the date at which they were found, as 2006-01-02; "" where not said
}

// impedance is a magnitude of which the leads' resistance is a part at an unknown angle.
const impedance Characteristic = "impedance"

// offset returns what the leads make of a reading: the correction to add to it, its standard uncertainty, and in words what it is for. A
// meter with leads of R in series shows R more ohms, and one with C across its terminals C more farads. Insulation is not affected; of an
// impedance the leads are somewhere between nothing and all of R, which is no correction but a doubt. An over-range display is left alone.
func (l *Leads) offset(r *Reading) (correction, u float64, what string) {
	switch {
	case r.Over || r.Of == InsulationResistance.Name:
	case r.Unit == quantity.Ohm && r.Of == impedance && l.SeriesR != 0:
		return 0, math.Hypot(uncertainty.Rectangular(l.SeriesR), l.SeriesRU), "the leads' resistance, of unknown phase"
	case r.Unit == quantity.Ohm:
		return -l.SeriesR, l.SeriesRU, "the leads' resistance"
	case r.Unit == quantity.Farad:
		return -l.StrayC, l.StrayCU, "the leads' capacitance"
	}
	return 0, 0, ""
}

// correct takes the leads' part out of a reading. A value that this would bring below zero is zero: the part is then no more than the leads.
func (l *Leads) correct(r *Reading) {
	correction, _, _ := l.offset(r)
	if correction == 0 {
		return
	}
	shown := r.Value
	r.Value = math.Max(math.Min(shown, 0), shown+correction)
	r.Correction = r.Value - shown
}
