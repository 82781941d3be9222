package bridge

import (
	"fmt"
	"math"
	"slices"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/sheet"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	reverseCurrent = 1e-3 // A, to which a reverse test is limited even into a short (house)
	battery        = 9.0  // V
	longTest       = 5.0  // W, above which a forward test is a matter of a second or of a heat sink (house)
)

// cautions warns before a reverse test, and says when a bridge counts as being across the mains.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	if at != screening.AtMeasure {
		return nil
	}
	supply := testVoltage(part.Claim)
	ohms, watts := supply/reverseCurrent, supply*reverseCurrent
	all := []screening.Caution{{
		Code: "reverse-test", Level: screening.Notice,
		Text: fmt.Sprintf("with a supply, limit every reverse test to %s: %s in series at %s (%s into a short). Behind a transformer a bridge is "+
			"not across the mains; straight at the line (switch-mode supply, AC/DC set) it is, and salvage does not go there",
			quantity.Format(reverseCurrent, quantity.Ampere, 0), book.About(ohms, quantity.Ohm), quantity.Format(supply, quantity.Volt, 0),
			book.About(watts, quantity.Watt)),
		Values: map[string]float64{"supply": supply, "series-resistance": ohms, "resistor-power": watts}, Source: book.Practice,
	}}
	if _, rated, known := sheet.Least(part.Claim, screening.VRRM.Name); known && rated > book.TouchVoltage {
		all = append(all, book.TestVoltage(rated, reverseCurrent))
	}
	return all
}

func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	switch l.On {
	case screening.VF.Name:
		return []screening.Recipe{forwardRecipe(l)}
	case screening.VBR.Name:
		if l.Criterion == blockingCriterion {
			return []screening.Recipe{acrossRecipe(l), reverseRecipe(l, testVoltage(part.Claim))}
		}
		return []screening.Recipe{reverseRecipe(l, l.Low)}
	case screening.IR.Name:
		if v, ok := l.At.Get(screening.Voltage); ok {
			return []screening.Recipe{reverseRecipe(l, v)}
		}
	}
	return nil
}

// probes says which leads a section names, red first.
func probes(section string) string {
	names := map[string]string{
		"ac1-plus": "red on the first AC lead (~), black on plus", "ac2-plus": "red on the second AC lead (~), black on plus",
		"minus-ac1": "red on minus, black on the first AC lead (~)", "minus-ac2": "red on minus, black on the second AC lead (~)",
		wholeBridge: "red on minus, black on plus", "ac1-ac2": "red on the first AC lead (~), black on the second",
		"ac2-ac1": "red on the second AC lead (~), black on the first",
	}
	return names[section]
}

// forwardRecipe sends the limit's current through a leg: R = (supply − VF)/I.
func forwardRecipe(l screening.Limit) screening.Recipe {
	current, ok := l.At.Get(screening.Current)
	if !ok || current <= 0 {
		current = testerCurrent
	}
	drop := math.Min(l.High, 2*load()["sound"].high)
	ohms, watts := (battery-drop)/current, current*(battery-drop)
	lines := []string{
		"diode test, " + probes(l.Section) + ": read volts; which AC lead is the first is your choice, keep to it",
		"without a diode test: " + quantity.Format(battery, quantity.Volt, 0) + " through " + book.About(ohms, quantity.Ohm) + " (" +
			book.About(watts, quantity.Watt) + " in it) gives " + quantity.Format(current, quantity.Ampere, 0) + "; read the volts across the two leads",
	}
	if current > 2*testerCurrent {
		lines[0] = "a diode test sends too little current for this one: " + probes(l.Section)
	}
	if watts > longTest {
		lines = append(lines, "the resistor gets hot: a current-limited supply does it better; a second is enough, the leg takes "+
			book.About(current*l.High, quantity.Watt))
	}
	return screening.Recipe{
		Title: "Forward voltage", Lines: lines, Source: book.Practice,
		Values: map[string]float64{"supply": battery, "series-resistance": ohms, "resistor-power": watts, "test-current": current},
	}
}

func acrossRecipe(l screening.Limit) screening.Recipe {
	i := max(0, slices.IndexFunc(ways[:], func(w across) bool { return w.section == l.Section }))
	return screening.Recipe{
		Title: "Blocking, with the diode test",
		Lines: []string{
			probes(l.Section) + ": a sound bridge shows OL; type OL. Any number of volts is leakage or a short: type that",
			"this way round " + ways[i].legs[0] + " and " + ways[i].legs[1] + " must block; the other way round it is the other two",
		},
		Values: map[string]float64{"supply": screening.VBR.Over.Value}, Source: book.Practice,
	}
}

// reverseRecipe proves blocking at a voltage with a series resistor and a voltmeter of 10 MΩ across that.
func reverseRecipe(l screening.Limit, volts float64) screening.Recipe {
	ohms, watts := volts/reverseCurrent, volts*reverseCurrent
	lines := []string{
		"supply " + asPrinted(volts) + ", " + book.About(ohms, quantity.Ohm) + " (" + book.About(watts, quantity.Watt) +
			" into a short) in series; plus of the supply where the red probe goes: " + probes(l.Section),
		fmt.Sprintf("wait a second, then read the volts across the resistor: current = volts ÷ %s; near 0 V it blocks: type vbr/%s=>%gV, or the "+
			"current as ir/%s@%gV=…", book.About(ohms, quantity.Ohm), l.Section, volts, l.Section, volts),
		"if the resistor takes volts, the rest stands across the legs: that is where they break down, type it as vbr/" + l.Section,
	}
	if volts > book.TouchVoltage {
		lines = append([]string{"only with the caution for this voltage; a lower one proves less and is said so"}, lines...)
	}
	return screening.Recipe{
		Title: "Blocking at " + asPrinted(volts), Lines: lines, Source: book.Practice,
		Values: map[string]float64{"supply": volts, "series-resistance": ohms, "resistor-power": watts, "test-current": reverseCurrent},
	}
}
