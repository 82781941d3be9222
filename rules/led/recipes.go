package led

import (
	"fmt"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/sheet"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	battery        = 9.0  // V
	reverseCurrent = 1e-3 // A, to which a reverse test is limited (house)
)

// series computes the resistor between a battery of 9 V and an LED of this drop: R = (9 V − VF)/I, and the watts in it.
func series(drop, current float64) (ohms, watts float64) {
	return (battery - drop) / current, (battery - drop) * current
}

// dropOf is the drop that a claim leads one to expect, V.
func dropOf(c screening.Claim, section string) float64 {
	name := c.Trait(TraitColour)
	if section != "" {
		name = section
	}
	col, _ := colourNamed(name)
	return (col.low + col.high) / 2
}

// cautions warns of what destroys an LED, and of light that is not seen.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	if at != screening.AtMeasure {
		return nil
	}
	current := testCurrent(part.Claim)
	ohms, watts := series(dropOf(part.Claim, ""), current)
	most := reverseMost
	if _, v, ok := sheet.Least(part.Claim, screening.VRRM.Name); ok && v < most {
		most = v
	}
	return []screening.Caution{{
		Code: "led-test", Level: screening.Notice,
		Text: fmt.Sprintf("never without a resistor: from %s about %s (%s) for %s; never more than %s in reverse. Do not look into a bright, "+
			"ultraviolet or infrared one: the eye does not turn away from what it does not see",
			quantity.Format(battery, quantity.Volt, 0), book.About(ohms, quantity.Ohm), book.About(watts, quantity.Watt),
			quantity.Format(current, quantity.Ampere, 0), quantity.Format(most, quantity.Volt, 0)),
		Values: map[string]float64{
			"supply": battery, "series-resistance": ohms, "resistor-power": watts, "test-current": current, "reverse-voltage": most,
		},
		Source: reverseSource,
	}}
}

func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	switch {
	case l.On == screening.VF.Name:
		if at, _ := l.At.Get(screening.Current); at <= testerCurrent {
			return []screening.Recipe{testerRecipe(part.Claim, l), forwardRecipe(part.Claim, l)}
		}
		return []screening.Recipe{forwardRecipe(part.Claim, l)}
	case l.On == screening.VBR.Name && l.Criterion == blockingCriterion:
		ohms, watts := reverseMost/reverseCurrent, reverseMost*reverseCurrent
		return []screening.Recipe{{
			Title: "Blocking, with the diode test",
			Lines: []string{
				"turn the probes round: a sound one shows OL; type OL. Any number of volts is leakage, or a second LED: type that",
				"or " + quantity.Format(reverseMost, quantity.Volt, 0) + ", never more, through " + book.About(ohms, quantity.Ohm) + " (" +
					book.About(watts, quantity.Watt) + "): read the volts across the LED at once; all of them there is vbr=>5V",
			},
			Values: map[string]float64{"supply": reverseMost, "series-resistance": ohms, "resistor-power": watts, "test-current": reverseCurrent},
			Source: reverseSource,
		}}
	}
	return nil
}

// nameOf is how a reading of a section is typed.
func nameOf(l screening.Limit) string {
	if l.Section != "" {
		return "vf/" + l.Section
	}
	return "vf"
}

// testerRecipe takes a diode test; what it sends without one is computed: R = (9 V − VF)/1 mA.
func testerRecipe(c screening.Claim, l screening.Limit) screening.Recipe {
	ohms, watts := series(dropOf(c, l.Section), testerCurrent)
	return screening.Recipe{
		Title: "Forward voltage, with the diode test",
		Lines: []string{
			"red on the long lead (the small electrode inside): read volts, see whether it glows; type " + nameOf(l) + "=…; OL with blue, white and " +
				"ultraviolet says nothing",
			"without a diode test: " + quantity.Format(battery, quantity.Volt, 0) + " through " + book.About(ohms, quantity.Ohm) + " (" +
				book.About(watts, quantity.Watt) + " in it) gives about " + quantity.Format(testerCurrent, quantity.Ampere, 0),
		},
		Values: map[string]float64{"supply": battery, "series-resistance": ohms, "resistor-power": watts, "test-current": testerCurrent},
		Source: book.Practice,
	}
}

// forwardRecipe lights it: R = (9 V − VF)/I. What flows is then read, not assumed.
func forwardRecipe(c screening.Claim, l screening.Limit) screening.Recipe {
	current, ok := l.At.Get(screening.Current)
	if !ok || current <= testerCurrent {
		current = testCurrent(c)
	}
	drop := dropOf(c, l.Section)
	ohms, watts := series(drop, current)
	return screening.Recipe{
		Title: "Forward voltage, lit",
		Lines: []string{
			quantity.Format(battery, quantity.Volt, 0) + " through " + book.About(ohms, quantity.Ohm) + " (" + book.About(watts, quantity.Watt) +
				" in it) gives about " + quantity.Format(current, quantity.Ampere, 0) + " at a drop of " + book.About(drop, quantity.Volt) +
				"; plus to the long lead",
			"after ten seconds read the volts across the LED, type " + nameOf(l) + "@" +
				strings.ReplaceAll(quantity.Format(current, quantity.Ampere, 0), " ", "") + "=…; another resistor does too: current = volts across it ÷ ohms",
		},
		Values: map[string]float64{"supply": battery, "series-resistance": ohms, "resistor-power": watts, "test-current": current},
		Source: book.Practice,
	}
}
