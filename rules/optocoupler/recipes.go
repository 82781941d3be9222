package optocoupler

import (
	"fmt"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/sheet"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	supplyVolts = 5.0   // of the LED's side, V
	ledDrop     = 1.2   // typical of an infrared LED, V (published: 4N35 data sheet)
	darkOhms    = 100e3 // Ω: 10 µA makes 1 V
)

func typed(x float64, u quantity.Unit) string {
	return strings.ReplaceAll(quantity.Format(x, u, 0), " ", "")
}

// legs says where the LED is: by the pinout, else by the usual place.
func legs(c screening.Claim) string {
	if p := c.Trait(screening.TraitPinout); p != "" {
		return "legs " + p + " from the dot"
	}
	return "mostly legs 1 and 2 from the dot"
}

// ledResistor is what sets an LED current from 5 V: R = (5 V − 1.2 V)/I.
func ledResistor(current float64) (ohms, watts float64) {
	return (supplyVolts - ledDrop) / current, (supplyVolts - ledDrop) * current
}

// collectorResistor drops a tenth of the supply at the least collector current that is expected, so that VCE stays near what is asked.
func collectorResistor(c screening.Claim) (ohms float64) {
	r, current, vce, ok := ratio(c)
	least := current
	if ok && r.Low > 0 {
		least = current * r.Low
	}
	for _, e := range []float64{10, 22, 47, 100, 220, 470, 1000} {
		if ohms = e; e*least >= 0.1*vce {
			break
		}
	}
	return ohms
}

// cautions warns of reverse voltage on the LED, and says what the part is never used for.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	if at != screening.AtMeasure {
		return nil
	}
	_, current, vce, _ := ratio(part.Claim)
	ohms, watts := ledResistor(current)
	return []screening.Caution{{
		Code: "opto-test", Level: screening.Notice,
		Text: fmt.Sprintf("measure it out of its set, on two low-voltage supplies: its LED never without %s (%s) at %s, never more than %s in reverse. "+
			"Insulation testers prove nothing that counts here and can kill: leave them",
			book.About(ohms, quantity.Ohm), book.About(watts, quantity.Watt), quantity.Format(supplyVolts, quantity.Volt, 0),
			quantity.Format(leastReverse, quantity.Volt, 0)),
		Values: map[string]float64{
			"supply": supplyVolts, "series-resistance": ohms, "resistor-power": watts, "test-current": current, "collector-supply": vce,
			"reverse-voltage": leastReverse,
		},
		Source: book.Practice,
	}}
}

func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	switch l.On {
	case screening.VF.Name:
		current, _ := l.At.Get(screening.Current)
		ohms, watts := ledResistor(current)
		return []screening.Recipe{{
			Title: "LED side, forward",
			Lines: []string{
				"diode test, red on the LED's anode, black on its cathode (" + legs(part.Claim) + "): read volts",
				"without a diode test: 5 V through " + book.About(ohms, quantity.Ohm) + " (" + book.About(watts, quantity.Watt) + " in it) gives " +
					quantity.Format(current, quantity.Ampere, 0) + "; read the volts across the LED's legs",
			},
			Values: map[string]float64{"supply": supplyVolts, "series-resistance": ohms, "resistor-power": watts, "test-current": current},
			Source: book.Practice,
		}}
	case screening.VBR.Name:
		if l.Criterion != blockingCriterion {
			return nil
		}
		return []screening.Recipe{{
			Title:  "LED side, reverse",
			Lines:  []string{"the same two legs with the probes turned: a sound LED shows OL; type OL. Never more than 3 V here"},
			Values: map[string]float64{"supply": screening.VBR.Over.Value, "reverse-voltage": leastReverse}, Source: book.Practice,
		}}
	case CTR.Name:
		return []screening.Recipe{ratioRecipe(part.Claim, l)}
	case screening.ICEO.Name:
		volts, _ := l.At.Get(screening.VCE)
		return []screening.Recipe{darkRecipe(part.Claim, volts)}
	}
	return nil
}

// ratioRecipe takes two resistors and a voltmeter: one sets the LED's current, the other turns the collector's into volts.
func ratioRecipe(c screening.Claim, l screening.Limit) screening.Recipe {
	current, _ := l.At.Get(screening.Current)
	vce, _ := l.At.Get(screening.VCE)
	ohms, watts := ledResistor(current)
	load := collectorResistor(c)
	most := vce * vce / load
	return screening.Recipe{
		Title: "Transfer ratio, with two resistors and a voltmeter",
		Lines: []string{
			"LED: 5 V through " + book.About(ohms, quantity.Ohm) + " (" + book.About(watts, quantity.Watt) + "); its volts ÷ its ohms is the LED's current, about " +
				quantity.Format(current, quantity.Ampere, 0),
			"collector: " + quantity.Format(vce, quantity.Volt, 0) + " through " + quantity.Format(load, quantity.Ohm, 0) + " (up to " +
				book.About(most, quantity.Watt) + ", if it is shorted), emitter to minus; its volts ÷ " + quantity.Format(load, quantity.Ohm, 0) +
				" is the collector's current",
			"wait ten seconds, read both, type ctr@" + typed(current, quantity.Ampere) + "," + typed(vce, quantity.Volt) +
				"=…% or the collector current itself as ic@" + typed(current, quantity.Ampere) + "," + typed(vce, quantity.Volt) +
				"=…; the second resistor may take half the volts, no more",
		},
		Values: map[string]float64{
			"supply": supplyVolts, "series-resistance": ohms, "resistor-power": watts, "test-current": current, "collector-supply": vce,
			"collector-resistance": load, "collector-resistor-power": most,
		},
		Source: book.Practice,
	}
}

func darkRecipe(c screening.Claim, volts float64) screening.Recipe {
	if r, v, ok := sheet.Least(c, screening.VCEO.Name); ok && v < volts {
		volts = r.Low
	}
	return screening.Recipe{
		Title: "Dark current",
		Lines: []string{
			"LED unconnected; " + quantity.Format(volts, quantity.Volt, 0) + " through " + quantity.Format(darkOhms, quantity.Ohm, 0) + " (" +
				book.About(volts*volts/darkOhms, quantity.Watt) + " into a short) to the collector, emitter to minus",
			"read the volts across the resistor after a second: 1 V is 10 µA; less than 10 mV is less than 0.1 µA: type iceo@" + typed(volts, quantity.Volt) + "=..0.1uA",
		},
		Values: map[string]float64{"supply": volts, "series-resistance": darkOhms, "resistor-power": volts * volts / darkOhms}, Source: book.Practice,
	}
}
