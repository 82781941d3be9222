package capacitor

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// insulationPractice is how makers measure it.
var insulationPractice = screening.Source{
	Document: "film capacitor makers on insulation resistance; MIL-STD-202 method 302", Clause: "read 1 min after the voltage is applied, at 20 °C",
	Status: screening.Published,
}

// Recipes says how to measure what a limit asks, with this part's numbers. It serves as [screening.Rulebook.Recipes].
func Recipes(part screening.Part, l screening.Limit, span Span) []screening.Recipe {
	u, ok := UnitOf(part.Claim, span, l.Section)
	if !ok {
		return nil
	}
	switch l.On {
	case screening.Capacitance.Name:
		return []screening.Recipe{capacitanceRecipe(u, l)}
	case screening.TanDelta.Name, screening.ESR.Name:
		return []screening.Recipe{lossRecipe(u, l)}
	case screening.InsulationResistance.Name, screening.Leakage.Name:
		return insulationRecipes(u, l)
	}
	return nil
}

// straysBelow is the capacitance below which leads and clips matter, farad: a few picofarads are 2 % of it (house).
const straysBelow = 200e-12

func capacitanceRecipe(u Unit, l screening.Limit) screening.Recipe {
	lines := []string{
		"discharge the part and read the volts that remain: under 10 V for you, 0 V for the meter",
		"take it out of circuit, or lift one lead; at room temperature, and not just after soldering",
	}
	values := map[string]float64{"expected-capacitance": u.Farad}
	if hertz, ok := l.At.Get(screening.Frequency); ok {
		lines = append(lines, fmt.Sprintf("choose %s where the meter offers it, else the nearest", quantity.Format(hertz, quantity.Hertz, 0)))
		values["frequency"] = hertz
	}
	if u.Farad < straysBelow {
		lines = append(lines, "short leads: hold the open clips as far apart as the part will, note or zero what the meter shows, and subtract it; "+
			"keep your hands away")
	}
	lines = append(lines, fmt.Sprintf("type what it shows: %s to %s for a part in its tolerance", Farads(u.Bottom()), Farads(u.Top())))
	return screening.Recipe{Title: "capacitance with a meter", Lines: lines, Values: values, Source: book.Practice}
}

func lossRecipe(u Unit, l screening.Limit) screening.Recipe {
	hertz, _ := l.At.Get(screening.Frequency)
	tan, esr := l.High, ESROf(l.High, hertz, u.Farad)
	if l.On == screening.ESR.Name {
		tan, esr = TanDeltaOf(l.High, hertz, u.Farad), l.High
	}
	f := quantity.Format(hertz, quantity.Hertz, 0)
	return screening.Recipe{
		Title: "loss with a component meter", Source: book.Practice,
		Lines: []string{
			"discharge the part and read the volts that remain: 0 V, or the meter is gone",
			"choose " + f + ", zero the meter with its leads open and then shorted",
			fmt.Sprintf("D (tan δ) may be %.2g at most, which is Q = %.3g or an ESR of %s: any of the three does; 1/Q is D", tan, 1/tan,
				quantity.Format(esr, quantity.Ohm, 3)),
			fmt.Sprintf("type tan-delta@%s=… or esr@%s=…; a plain capacitance range says nothing of loss", compact(hertz), compact(hertz)),
		},
		Values: map[string]float64{"frequency": hertz, "tan-delta": tan, "esr": esr},
	}
}

// compact prints a frequency as it is typed: "1kHz".
func compact(hertz float64) string {
	switch {
	case hertz >= 1e6:
		return fmt.Sprintf("%gMHz", hertz/1e6)
	case hertz >= 1e3:
		return fmt.Sprintf("%gkHz", hertz/1e3)
	}
	return fmt.Sprintf("%gHz", hertz)
}

// insulationRecipes: a supply, a series resistor, and a meter in series with the part: a µA range where the current is large enough for it, else
// the voltmeter's own 10 MΩ.
func insulationRecipes(u Unit, l screening.Limit) []screening.Recipe {
	volts, _ := l.At.Get(screening.Voltage)
	current, ohms := l.High, volts/l.High
	if l.On == screening.InsulationResistance.Name {
		current, ohms = volts/l.Low, l.Low
	}
	if !(current > 0) || math.IsInf(current, 0) || volts <= 0 {
		return nil
	}
	var all []screening.Recipe
	if current >= microammeter {
		all = append(all, microammeterRecipe(u, volts, current))
	}
	all = append(all, voltmeterRecipe(u, volts, ohms))
	return append(all, testerRecipe(volts, ohms))
}

// begin and end are the same for both: the supply, and making it safe again.
func begin(u Unit, volts float64) (charging, []string) {
	c := chargingOf(u, volts)
	return c, []string{
		"discharge the part and read the volts that remain; wipe its body dry and clean between the leads",
		fmt.Sprintf("supply %s DC, through %s", quantity.Format(volts, quantity.Volt, 0), c.resistor()),
	}
}

func end(c charging) []string {
	lines := []string{fmt.Sprintf("switch off, discharge the part through the series resistor for %s, and read the volts that remain", seconds(c.seconds))}
	if c.supply > book.TouchVoltage {
		lines = append(lines, "isolated supply, one hand, eye protection; high voltage: your local code and licensed practice")
	}
	return lines
}

func microammeterRecipe(u Unit, volts, current float64) screening.Recipe {
	c, lines := begin(u, volts)
	lines = append(lines,
		fmt.Sprintf("bridge the meter's terminals with a wire while the part charges (%s), then take the wire off, the meter on its lowest µA range in "+
			"series with the part", seconds(c.seconds)),
		fmt.Sprintf("1 min after the voltage stood on the part read the current: at most %s; type leakage@%gV=…",
			quantity.Format(current, quantity.Ampere, 2), volts))
	values := c.values()
	values["current-at-limit"], values["after"] = current, minute
	return screening.Recipe{
		Title: "leakage with a supply and a µA meter in series", Lines: append(lines, end(c)...), Values: values, Source: insulationPractice,
	}
}

// voltmeterRecipe: the meter on volts in series with the part, U = I·10 MΩ.
func voltmeterRecipe(u Unit, volts, ohms float64) screening.Recipe {
	c, lines := begin(u, volts)
	drop := volts * voltmeterOhms / (voltmeterOhms + ohms)
	settle := fiveTimes * voltmeterOhms * u.Top()
	wait := fmt.Sprintf("a digital voltmeter (%s input) in series with the part: wait until it has fallen and stands still (about %s), then 1 min",
		quantity.Format(voltmeterOhms, quantity.Ohm, 0), seconds(settle))
	if settle > longestSettling {
		wait = fmt.Sprintf("a digital voltmeter (%s input) in series with the part, its terminals bridged with a wire while the part charges (%s); "+
			"take the wire off, and wait 1 min", quantity.Format(voltmeterOhms, quantity.Ohm, 0), seconds(c.seconds))
	}
	lines = append(lines, wait,
		fmt.Sprintf("leakage = volts on the meter / %s; the limit of %s is %s there", quantity.Format(voltmeterOhms, quantity.Ohm, 0),
			quantity.Format(ohms, quantity.Ohm, 3), quantity.Format(drop, quantity.Volt, 2)))
	if drop < 10*voltmeterStep {
		lines = append(lines, fmt.Sprintf("a meter that shows 0.1 mV cannot prove this limit; below it type <%s",
			quantity.Format(2*voltmeterStep/voltmeterOhms, quantity.Ampere, 1)))
	}
	lines = append(lines, fmt.Sprintf("type leakage@%gV=…", volts))
	values := c.values()
	values["volts-at-limit"], values["meter-resistance"], values["after"] = drop, voltmeterOhms, minute
	return screening.Recipe{
		Title: "insulation with a supply and a voltmeter in series", Lines: append(lines, end(c)...), Values: values, Source: insulationPractice,
	}
}

func testerRecipe(volts, ohms float64) screening.Recipe {
	return screening.Recipe{
		Title: "insulation with an insulation tester", Source: book.Practice,
		Lines: []string{
			fmt.Sprintf("choose %s, or the next lower step that it has, never more; hold it for 1 min", quantity.Format(volts, quantity.Volt, 0)),
			fmt.Sprintf("at least %s; type insulation-resistance@%gV=…, and >x where it shows over-range", quantity.Format(ohms, quantity.Ohm, 3), volts),
			"wait until it has discharged the part, and read the volts that remain",
		},
		Values: map[string]float64{"supply": volts, "resistance-at-limit": ohms, "after": minute},
	}
}
