package relay

import (
	"fmt"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/winding"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// cautions warns of the coil's kick and of what the contacts carried.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	if at != screening.AtMeasure {
		return nil
	}
	text := "a coil kicks with hundreds of volts when it is switched off: clip a diode across it, cathode to plus, or turn its supply down slowly; " +
		"do not hold its tags. Test contacts on a low-voltage supply only: mains and high-voltage work belongs to your local code and licensed practice"
	values := map[string]float64{}
	volts, hasVolts := coilVolts(part.Claim)
	ohms, hasOhms := part.Claim.Nominal(CoilResistance.Name, "")
	if r, ok := part.Reading(CoilResistance.Name, ""); ok && !hasOhms && !r.Over && r.Value > 0 {
		ohms, hasOhms = r.Value, true
	}
	if hasVolts && hasOhms && part.Claim.Trait(TraitSupply) != ac {
		values["coil-current"], values["coil-power"] = volts/ohms, volts*volts/ohms
		text = fmt.Sprintf("at %s the coil takes %s (%s). ", quantity.Format(volts, quantity.Volt, 0), book.About(volts/ohms, quantity.Ampere),
			book.About(volts*volts/ohms, quantity.Watt)) + "A" + text[1:]
	}
	all := []screening.Caution{{Code: "inductive-kick", Level: screening.Notice, Text: text, Values: values, Source: book.Practice}}
	if hasVolts && volts > book.TouchVoltage {
		all = append(all, screening.Caution{
			Code: "high-coil-voltage", Level: screening.Danger,
			Text: fmt.Sprintf("%s on the coil can kill: measure its resistance, and leave pull-in and drop-out untested",
				quantity.Format(volts, quantity.Volt, 0)),
			Values: map[string]float64{"voltage": volts}, Source: book.TouchSource,
		})
	}
	return all
}

// recipes says how to measure what a limit asks with what people own.
func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	switch l.On {
	case CoilResistance.Name:
		return []screening.Recipe{winding.Recipe(CoilResistance, part.Claim, "")}
	case ContactResistance.Name:
		return []screening.Recipe{byOhmmeter(), atCurrent(part.Claim)}
	case OpenContact.Name:
		return []screening.Recipe{{
			Title: "Highest ohms range", Source: book.Practice,
			Lines: []string{"across each contact where it should be open: normally open ones at rest, normally closed ones with the coil on; OL is sound"},
		}}
	case PullIn.Name, DropOut.Name:
		return operationRecipe(part.Claim)
	}
	return nil
}

func byOhmmeter() screening.Recipe {
	return screening.Recipe{
		Title: "Ohms range", Source: book.Practice,
		Lines: []string{
			"hold the probes together first and subtract what they read; normally closed contacts at rest, the others with the coil on",
			"work each contact a few times, then read; a reading that passes counts, one that fails only asks for the next recipe",
		},
	}
}

// atCurrent judges a contact at its own current: 6 V and 1 A, or 1 V and 10 mA, through a resistor that makes the current.
func atCurrent(c screening.Claim) screening.Recipe {
	amperes, volts := judgedAt(c)
	ohms, watts := volts/amperes, volts*amperes
	return screening.Recipe{
		Title: "A known current through it, millivolts across it", Source: load()["power"].source,
		Lines: []string{
			fmt.Sprintf("send %s through the closed contact from %s DC through %s (it takes %s; use twice that)", quantity.Format(amperes, quantity.Ampere, 0),
				quantity.Format(volts, quantity.Volt, 0), quantity.Format(ohms, quantity.Ohm, 0), book.About(watts, quantity.Watt)),
			fmt.Sprintf("read the volts with a second pair of probes on the contact's own tags: 100 mΩ shows %s", quantity.Format(0.1*amperes, quantity.Volt, 0)),
			fmt.Sprintf("open and close it three times and average; resistance = volts ÷ amperes: contact-resistance/1@%s=…",
				compact(amperes)),
		},
		Values: map[string]float64{
			"supply": volts, "series-resistance": ohms, "resistor-power": watts, "test-current": amperes, "expected-voltage": 0.1 * amperes,
		},
	}
}

// compact prints a current as it is typed: "1A", "10mA".
func compact(amperes float64) string {
	if amperes < 1 {
		return fmt.Sprintf("%.3gmA", amperes*1e3)
	}
	return fmt.Sprintf("%.3gA", amperes)
}

func operationRecipe(c screening.Claim) []screening.Recipe {
	volts, ok := coilVolts(c)
	if !ok || volts > book.TouchVoltage || c.Trait(TraitSupply) == ac {
		return nil
	}
	f := load()
	on, off := f["pull-in"].value*volts, f["drop-out"].value*volts
	return []screening.Recipe{{
		Title: "A supply that can be turned up", Source: book.Practice,
		Lines: []string{
			"a diode across the coil, cathode to plus; an ohmmeter or a lamp on a contact shows when it changes over",
			fmt.Sprintf("turn up slowly from 0 V: it clicks at %s or less. Go to %s, no further", quantity.Format(on, quantity.Volt, 3),
				quantity.Format(volts, quantity.Volt, 0)),
			fmt.Sprintf("turn down slowly: it lets go before %s", quantity.Format(off, quantity.Volt, 3)),
		},
		Values: map[string]float64{"supply": volts, "pull-in": on, "drop-out": off},
	}}
}
