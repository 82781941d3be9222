package regulator

import (
	"fmt"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// What a body sheds of its heat without a heat sink, K per watt of what it turns into heat: TO-220 and TO-92 (from memory).
const bigCase, smallCase = 65.0, 200.0

// reference is the supply for a shunt reference, V: above twice the voltage of most, so that its resistor sets the current.
const reference = 9.0

func typed(x float64, u quantity.Unit) string {
	return strings.ReplaceAll(quantity.Format(x, u, 0), " ", "")
}

// heat computes what a regulator turns into heat at the test, W, and how much warmer it gets without a heat sink, K.
func heat(c screening.Claim) (watts, kelvin float64) {
	_, amperes := testLoad(c)
	watts = (testInput(c) - middle(c)) * amperes
	perWatt := bigCase
	if c.Trait(screening.TraitCase) == "TO-92" {
		perWatt = smallCase
	}
	return watts, watts * perWatt
}

// shuntResistor is R = (supply − VREF)/I for a shunt reference, ohms and watts, and the supply: 9 V or twice its voltage.
func shuntResistor(c screening.Claim) (supply, ohms, watts float64) {
	_, amperes := testLoad(c)
	supply = reference
	if 2*middle(c) > supply {
		supply = 2 * middle(c)
	}
	return supply, (supply - middle(c)) / amperes, (supply - middle(c)) * amperes
}

// capacitors is what stands at its legs for the test; the values are from memory, from the sheets of each family.
func capacitors(c screening.Claim) string {
	if c.Trait(traitSign) == negative {
		return "2.2 µF at the input and 1 µF at the output (tantalum, or 25 µF aluminium), plus to ground"
	}
	if functionOf(c) == adjustable {
		return "0.1 µF at the input and 1 µF at the output"
	}
	return "0.33 µF at the input and 0.1 µF at the output"
}

// cautions warns of mistaken legs, oscillation and heat.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	c := part.Claim
	if at != screening.AtMeasure || middle(c) == 0 {
		return nil
	}
	_, amperes := testLoad(c)
	legs := c.Trait(screening.TraitPinout)
	if legs == "" {
		legs = "its legs are not known here: find its sheet first"
	}
	if functionOf(c) == shunt {
		supply, ohms, watts := shuntResistor(c)
		return []screening.Caution{{
			Code: "shunt-test", Level: screening.Notice,
			Text:   fmt.Sprintf("legs: %s. Never without its resistor: %s (%s) from %s", legs, book.About(ohms, quantity.Ohm), book.About(watts, quantity.Watt), volts(supply)),
			Values: map[string]float64{"supply": supply, "series-resistance": ohms, "resistor-power": watts, "test-current": amperes},
			Source: book.Practice,
		}}
	}
	watts, kelvin := heat(c)
	text := fmt.Sprintf("legs: %s. Types that look alike differ, and mistaken legs destroy it. Limit the supply to twice the load (%s); at %s in and %s out it "+
		"turns %s into heat and gets about %.0f K warmer without a heat sink", legs, quantity.Format(2*amperes, quantity.Ampere, 0), volts(testInput(c)),
		quantity.Format(amperes, quantity.Ampere, 0), book.About(watts, quantity.Watt), kelvin)
	if c.Trait(traitSign) == negative {
		text += ". It is negative: plus of the supply to ground, and its tab is not ground"
	}
	return []screening.Caution{{
		Code: "regulator-test", Level: screening.Notice, Text: text, Source: book.Practice,
		Values: map[string]float64{
			"supply": testInput(c), "test-current": amperes, "current-limit": 2 * amperes, "part-power": watts, "temperature-rise": kelvin,
		},
	}}
}

func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	c := part.Claim
	if l.Criterion == grossCriterion {
		l.Criterion = voltageCriterion
	}
	switch {
	case middle(c) == 0:
		return nil
	case functionOf(c) == shunt && l.Criterion == voltageCriterion:
		return []screening.Recipe{shuntRecipe(c)}
	case l.Criterion == voltageCriterion:
		return []screening.Recipe{voltageRecipe(c, l)}
	case l.Criterion == quiescentCriterion:
		return []screening.Recipe{{
			Title: "Quiescent current",
			Lines: []string{
				"set it up as for its output voltage, without the load; milliammeter from its ground leg to ground, and " + volts(testInput(c)) + " in",
				"read after a second; type iq@" + typed(testInput(c), quantity.Volt) + "=…",
			},
			Values: map[string]float64{"supply": testInput(c)}, Source: book.Practice,
		}}
	}
	return nil
}

// voltageRecipe sets a regulator to work: supply, two capacitors, a load. The adjust leg of an adjustable one goes to ground, so that the
// output is the reference.
func voltageRecipe(c screening.Claim, l screening.Limit) screening.Recipe {
	ohms, amperes := testLoad(c)
	in, watts := testInput(c), middle(c)*amperes
	legs, sign := c.Trait(screening.TraitPinout), ""
	if legs == "" {
		legs = "from its sheet"
	}
	if c.Trait(traitSign) == negative {
		sign = ", plus of the supply to ground and minus to the input"
	}
	wiring := "legs: " + legs + sign
	if functionOf(c) == adjustable {
		wiring += "; adjust leg to ground: the output is then the reference itself"
	}
	heated, kelvin := heat(c)
	return screening.Recipe{
		Title: "Its voltage at work",
		Lines: []string{
			wiring,
			capacitors(c) + ", close to the legs: without them it oscillates and reads wrong",
			"load " + book.About(ohms, quantity.Ohm) + " (" + book.About(watts, quantity.Watt) + " in it) from output to ground: " + quantity.Format(amperes, quantity.Ampere, 0),
			volts(in) + " in, limited to " + quantity.Format(2*amperes, quantity.Ampere, 0) + "; after ten seconds read the volts at its output leg: type " +
				string(l.On) + "@" + typed(in, quantity.Volt) + "," + typed(amperes, quantity.Ampere) + "=…",
		},
		Values: map[string]float64{
			"supply": in, "load-resistance": ohms, "resistor-power": watts, "test-current": amperes, "current-limit": 2 * amperes, "part-power": heated,
			"temperature-rise": kelvin, "expected-voltage": middle(c),
		},
		Source: book.Practice,
	}
}

func shuntRecipe(c screening.Claim) screening.Recipe {
	supply, ohms, watts := shuntResistor(c)
	_, amperes := testLoad(c)
	legs := c.Trait(screening.TraitPinout)
	if legs == "" {
		legs = "from its sheet"
	}
	return screening.Recipe{
		Title: "Its voltage, as a shunt",
		Lines: []string{
			"legs: " + legs + "; of three with a reference leg, tie that to the cathode; an adjust leg stays open",
			volts(supply) + " through " + book.About(ohms, quantity.Ohm) + " (" + book.About(watts, quantity.Watt) + " in it) to the cathode (plus), anode to minus: about " +
				quantity.Format(amperes, quantity.Ampere, 0),
			"after ten seconds read the volts across it: type vref@" + typed(amperes, quantity.Ampere) + "=…; with the resistor's volts ÷ ohms for the current",
		},
		Values: map[string]float64{
			"supply": supply, "series-resistance": ohms, "resistor-power": watts, "test-current": amperes, "expected-voltage": middle(c),
		},
		Source: book.Practice,
	}
}
