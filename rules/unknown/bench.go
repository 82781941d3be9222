package unknown

import (
	"fmt"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// What an unnamed part with two leads is taken for until it is known: the largest capacitor that a domestic set charges (house).
const chargedFarad, chargedVolts = 100e-6, 450

// cautions warns of what an unnamed part may be: charged, or hazardous inside.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	switch {
	case at == screening.AtLook && leadsOf(part.Claim) == 2:
		c := book.StoredCharge(chargedFarad, chargedFarad, chargedVolts)[0]
		c.Source = screening.Source{Document: "a part without a name is taken for a charged capacitor until its volts were measured", Status: screening.House}
		c.Text = fmt.Sprintf("it may be a charged capacitor: %s at %s holds %s, which can kill. Measure the volts between its leads before you touch them. Above %.0f V "+
			"discharge it with insulated leads through %s, %.0f W: %.1f W at first, %.0f s to %.0f V. Never a screwdriver. Then measure again",
			quantity.Format(chargedFarad, quantity.Farad, 0), quantity.Format(chargedVolts, quantity.Volt, 0), book.Joules(c.Values["energy"]),
			float64(screening.SafeVoltage), quantity.Format(c.Values["discharge-resistance"], quantity.Ohm, 0), c.Values["discharge-rated-power"],
			c.Values["discharge-power"], c.Values["discharge-time"], float64(screening.SafeVoltage))
		return []screening.Caution{c}
	case at == screening.AtVerdict:
		return []screening.Caution{{
			Code: "unnamed", Level: screening.Notice,
			Text: "leave it whole: what nobody can name may hold mercury, beryllia, selenium or an old oil. Never open, heat or grind it; " +
				"where you suspect one of them, bag it and ask your local waste authority",
			Source: screening.Source{Document: "hazards of old parts", Status: screening.CommonPractice},
		}}
	}
	return nil
}

func recipes(_ screening.Part, l screening.Limit) []screening.Recipe {
	source := screening.Source{Document: "bench practice", Status: screening.CommonPractice}
	switch {
	case l.Criterion == identityCriterion:
		return []screening.Recipe{{Title: "Name it", Lines: []string{
			"read what is printed, with a glass and slanting light: goodbin marking TEXT lists every meaning",
			"look where it came from: the circuit says more than the part",
			"judge it again as the kind that remains; the readings are kept here",
		}, Source: source}}
	case l.On == screening.VF.Name:
		return []screening.Recipe{{Title: "Diode test from lead to lead", Lines: []string{
			"short its leads through 1 kΩ first: an unnamed part may be a charged capacitor",
			"number the leads from the left with the print towards you, and keep to it",
			"red probe on the first lead of the pair, black on the second; wait until the display stands",
			"a display that climbs to OL is a capacitor being charged: type OL, and read the capacitance",
		}, Values: map[string]float64{"discharge-resistance": 1000}, Source: source}}
	case l.On == screening.Resistance.Name:
		return []screening.Recipe{{Title: "Ohms from lead to lead", Lines: []string{
			"short its leads through 1 kΩ first", "fingers off the metal: your hands are about a megohm",
			"from the lowest range up, until the display stands",
		}, Source: source}}
	case l.On == screening.Capacitance.Name:
		return []screening.Recipe{{Title: "Capacitance", Lines: []string{
			"short its leads through 1 kΩ, then directly", "note what the open probes show and subtract it",
			"either way round: the meter's volts hurt nothing",
		}, Source: source}}
	}
	return nil
}

// dearness prefers the diode test where ohms tell little more: the probes stay where they are (house).
func dearness(m measurement) float64 {
	if m.of == "vf" {
		return 1
	}
	return 1.06
}
