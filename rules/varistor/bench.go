package varistor

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// headroom is how much of the highest voltage at 1 mA the series resistor may take when 1 mA flows (house).
const headroom = 0.2

// e12 are the values of IEC 60063 E12 in which the series resistor is given.
var e12 = []float64{1, 1.2, 1.5, 1.8, 2.2, 2.7, 3.3, 3.9, 4.7, 5.6, 6.8, 8.2, 10}

// roundUp returns the E12 value at or above x ohms.
func roundUp(x float64) float64 {
	decade := math.Pow10(int(math.Floor(math.Log10(x))))
	for _, v := range e12 {
		if v*decade >= x*(1-1e-9) {
			return v * decade
		}
	}
	return 10 * decade
}

// drive is a supply and a series resistor, SI: how much the supply must reach, the drop that shows the current, and what flows and burns in the
// resistor when the part is a dead short.
type drive struct {
	supply, ohms, drop, short, watts float64
}

// voltageDrive raises 1 mA: R takes a fifth of the highest voltage at 1 mA, Vs = V + R·1 mA.
func voltageDrive(high float64) drive {
	d := drive{ohms: roundUp(headroom * high / testCurrent)}
	d.drop = d.ohms * testCurrent
	d.supply = high + d.drop
	d.short, d.watts = d.supply/d.ohms, d.supply*d.supply/d.ohms
	return d
}

// leakageDrive puts half the voltage on it: R lets 1 mA through a dead short, and drops little at 10 µA.
func leakageDrive(half float64) drive {
	d := drive{supply: half, ohms: roundUp(half / testCurrent)}
	d.drop = d.ohms * figures()["worn-leakage"].value
	d.short, d.watts = half/d.ohms, half*half/d.ohms
	return d
}

// cautions: the voltage that the test needs, and a gate before the part is touched where it can hurt.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	_, _, high, ok := named(part.Claim)
	if !ok || !(high > 0) || math.IsInf(high, 1) || at == screening.AtVerdict {
		return nil
	}
	d := voltageDrive(high)
	c := screening.Caution{
		Code: "high-voltage", Level: screening.Notice, Source: book.TouchSource,
		Values: map[string]float64{
			"supply": d.supply, "series-resistance": d.ohms, "resistor-power": d.watts, "short-circuit-current": d.short,
			"test-power": high * testCurrent, "safe-voltage": screening.SafeVoltage,
		},
		Text: fmt.Sprintf("to be tested it takes up to %s through %s: %s and %s in the resistor into a dead short, %s in the part at 1 mA, so a few "+
			"seconds only", book.About(d.supply, quantity.Volt), quantity.Format(d.ohms, quantity.Ohm, 0), book.About(d.short, quantity.Ampere),
			book.About(d.watts, quantity.Watt), book.About(high*testCurrent, quantity.Watt)),
	}
	if d.supply <= book.TouchVoltage {
		if at == screening.AtLook {
			return nil
		}
		return []screening.Caution{c}
	}
	c.Level, c.Gate = screening.Danger, true
	c.Text += fmt.Sprintf(". Above %.0f V that can kill: insulated clips fitted with the supply off, one hand, a shield over the part (it may burst), nobody "+
		"alone; then supply off, its output capacitor discharged, and the volts across the part measured. Without such a supply and practice, leave it "+
		"undecided: a new one costs little. Mains and high-voltage work: your local code and licensed practice", book.TouchVoltage)
	return []screening.Caution{c}
}

// recipes says how to take each reading.
func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	nominal, _, high, ok := named(part.Claim)
	if !ok || !(nominal > 0) || math.IsInf(high, 1) {
		return nil
	}
	switch l.On {
	case screening.Resistance.Name:
		return []screening.Recipe{{
			Title: "Ohms on the highest range, to reject quickly", Source: book.Practice, Values: map[string]float64{"least-resistance": l.Low},
			Lines: []string{
				"take it out, or lift one lead",
				"a sound one reads open (OL); " + quantity.Format(l.Low, quantity.Ohm, 0) + " or less is a varistor that has failed",
				"open proves nothing yet: a worn one reads open too, at the few volts of a meter",
			},
		}}
	case VV.Name:
		return []screening.Recipe{voltageRecipe(nominal, high)}
	case screening.Leakage.Name:
		return []screening.Recipe{leakageRecipe(nominal)}
	}
	return nil
}

func recipeValues(d drive) map[string]float64 {
	return map[string]float64{
		"supply": d.supply, "series-resistance": d.ohms, "resistor-power": d.watts, "resistor-voltage": d.drop, "short-circuit-current": d.short,
	}
}

func voltageRecipe(nominal, high float64) screening.Recipe {
	d := voltageDrive(high)
	return screening.Recipe{
		Title: "A DC supply raised from zero until 1 mA flows", Source: book.Practice, Values: recipeValues(d),
		Lines: []string{
			fmt.Sprintf("put %s in series, rated for %s and %s (a dead short at full supply), and the varistor behind it", quantity.Format(d.ohms, quantity.Ohm, 0),
				book.About(d.supply, quantity.Volt), book.About(d.watts, quantity.Watt)),
			fmt.Sprintf("set the supply's current limit low if it has one, and raise it from zero, up to %s at most, until the resistor shows %s: that is 1 mA",
				book.About(d.supply, quantity.Volt), quantity.Format(d.drop, quantity.Volt, 3)),
			fmt.Sprintf("if the resistor shows it at a few volts of supply, the varistor is shorted: stop. Else read the volts across the varistor, about %s, "+
				"with a meter rated for it, within 3 s", volts(nominal)),
			fmt.Sprintf("less current than 1 mA does too, from 0.1 mA on: type what flowed, vv@0.5mA=…; each 10 K of warmth takes %s off it",
				quantity.Format(-10*figures()["drift"].value, quantity.Ratio, 1)),
			"supply to zero, off, and measure the volts that remain before you touch it",
		},
	}
}

func leakageRecipe(nominal float64) screening.Recipe {
	half := figures()["half"].value * nominal
	d := leakageDrive(half)
	return screening.Recipe{
		Title: "Half its voltage, DC, through a resistor", Source: book.Practice, Values: recipeValues(d),
		Lines: []string{
			fmt.Sprintf("put %s in series, rated for %s and %s: a dead short then draws 1 mA at most", quantity.Format(d.ohms, quantity.Ohm, 0),
				quantity.Format(half, quantity.Volt, 3), book.About(d.watts, quantity.Watt)),
			fmt.Sprintf("raise the supply to %s and read the volts across the resistor: %s is 10 µA, from which it is worn", quantity.Format(half, quantity.Volt, 3),
				quantity.Format(d.drop, quantity.Volt, 2)),
			fmt.Sprintf("leakage = those volts ÷ %s; type it with the voltage: leakage@%sV=2uA (a meter's own 10 MΩ in parallel makes it read up to %s low)",
				quantity.Format(d.ohms, quantity.Ohm, 0), fmt.Sprintf("%.4g", half), percentLow(d.ohms)),
			"supply to zero, off, and measure the volts that remain before you touch it",
		},
	}
}

// meterOhms is the resistance of a usual digital voltmeter (common practice).
const meterOhms = 10e6

// percentLow is how much too little a voltmeter across a resistor shows: R/(R + 10 MΩ).
func percentLow(r float64) string { return quantity.Format(r/(r+meterOhms), quantity.Ratio, 1) }
