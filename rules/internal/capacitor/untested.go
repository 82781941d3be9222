package capacitor

import (
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Untested words what bench readings leave open on any capacitor: whether it stands its rated voltage, or what that is.
func Untested(part screening.Part, span Span) []string {
	us, err := Units(part.Claim, span)
	if err != nil {
		return nil
	}
	volts := us[0].Volts
	for _, u := range us {
		volts = min(volts, u.Volts)
	}
	if volts == 0 {
		return []string{"no rated voltage is claimed: nothing here says what it stands"}
	}
	return []string{"that it stands its rated voltage (" + quantity.Format(volts, quantity.Volt, 0) + ") in use, pulses and alternating current included"}
}
