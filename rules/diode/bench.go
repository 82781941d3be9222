package diode

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	reverseCurrent = 1e-3 // A, to which a reverse test is limited even into a short (house)
	battery        = 9.0  // V
	longTest       = 5.0  // W, above which a forward test is a matter of a second or of a heat sink (house)
)

// reverseTest computes the series resistor that holds a supply to 1 mA into a short: R = V/1 mA, P = V²/R.
func reverseTest(volts float64) (ohms, watts float64) {
	ohms = volts / reverseCurrent
	return ohms, volts * reverseCurrent
}

// cautions warns before a reverse test: the current limit, and from 60 V the supply itself.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	if at != screening.AtMeasure {
		return nil
	}
	supply := testVoltage(part.Claim)
	rated, known := ratedVoltage(part.Claim)
	ohms, watts := reverseTest(supply)
	all := []screening.Caution{{
		Code: "reverse-test", Level: screening.Notice,
		Text: fmt.Sprintf("limit every reverse test to %s: %s in series at %s (%s into a short). Without it one slip of the supply destroys a good diode",
			quantity.Format(reverseCurrent, quantity.Ampere, 0), book.About(ohms, quantity.Ohm), quantity.Format(supply, quantity.Volt, 0),
			book.About(watts, quantity.Watt)),
		Values: map[string]float64{"supply": supply, "series-resistance": ohms, "resistor-power": watts}, Source: book.Practice,
	}}
	if known && rated > book.TouchVoltage {
		all = append(all, book.TestVoltage(rated, reverseCurrent))
	}
	return all
}

func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	switch l.On {
	case screening.VF.Name:
		return []screening.Recipe{forwardRecipe(part.Claim, l)}
	case screening.VBR.Name:
		if l.Criterion == blockingCriterion {
			return []screening.Recipe{turnedProbes(), reverseRecipe(testVoltage(part.Claim))}
		}
		return []screening.Recipe{reverseRecipe(l.Low)}
	case screening.IR.Name:
		if v, ok := l.At.Get(screening.Voltage); ok {
			return []screening.Recipe{reverseRecipe(v)}
		}
	}
	return nil
}

// forwardRecipe sends the limit's current through the diode: R = (supply − VF)/I.
func forwardRecipe(c screening.Claim, l screening.Limit) screening.Recipe {
	current, _ := l.At.Get(screening.Current)
	drop := math.Min(l.High, technologyOf(c).sound.high)
	if current <= 0 {
		current = testerCurrent
	}
	ohms := (battery - drop) / current
	watts := current * (battery - drop)
	lines := []string{
		"diode test, red probe on the anode (the end without the band): read volts",
		"without a diode test: " + quantity.Format(battery, quantity.Volt, 0) + " through " + book.About(ohms, quantity.Ohm) + " (" +
			book.About(watts, quantity.Watt) + " in it) gives " + quantity.Format(current, quantity.Ampere, 0) + "; read the volts across the diode",
	}
	if current > smallCurrent {
		lines[0] = "a diode test sends too little current for this one"
	}
	if watts > longTest {
		lines = append(lines, "the resistor gets hot: a current-limited supply does it better; a second is enough, the diode takes "+
			book.About(current*l.High, quantity.Watt))
	}
	return screening.Recipe{
		Title: "Forward voltage", Lines: lines, Source: book.Practice,
		Values: map[string]float64{"supply": battery, "series-resistance": ohms, "resistor-power": watts, "test-current": current},
	}
}

func turnedProbes() screening.Recipe {
	return screening.Recipe{
		Title:  "Blocking, with the diode test",
		Lines:  []string{"turn the probes round: a sound diode shows OL; type OL. Any number of volts is leakage or a breakdown: type that"},
		Values: map[string]float64{"supply": screening.VBR.Over.Value}, Source: book.Practice,
	}
}

// reverseRecipe proves blocking at a voltage with a series resistor and a voltmeter of 10 MΩ across that.
func reverseRecipe(volts float64) screening.Recipe {
	ohms, watts := reverseTest(volts)
	text := quantity.Format(volts, quantity.Volt, 0)
	lines := []string{
		"supply " + text + ", " + book.About(ohms, quantity.Ohm) + " (" + book.About(watts, quantity.Watt) +
			" into a short) in series, cathode (the band) to plus",
		"read the volts across the resistor: current = volts ÷ " + book.About(ohms, quantity.Ohm) + "; near 0 V it blocks: type vbr=>" +
			volt(volts) + ", or the current as ir@" + volt(volts) + "=…",
		"if the resistor takes volts, the rest stands across the diode: that is its breakdown, type it as vbr",
	}
	if volts > book.TouchVoltage {
		lines = append([]string{"only with the caution for this voltage; a lower one proves less and is said so"}, lines...)
	}
	return screening.Recipe{
		Title: "Blocking at " + text, Lines: lines, Source: book.Practice,
		Values: map[string]float64{"supply": volts, "series-resistance": ohms, "resistor-power": watts, "test-current": reverseCurrent},
	}
}

// volt prints a voltage as it is typed.
func volt(x float64) string { return fmt.Sprintf("%gV", x) }
