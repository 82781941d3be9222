package oxide

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// leakagePractice is how it is measured.
var leakagePractice = screening.Source{
	Document: "MIL-PRF-49137E", Clause: "4.8.4: rated voltage through 1000 Ω, at most 5 min; a larger resistor only spares the part", Status: screening.Published,
}

// Charging is what puts a voltage on a part without harm, SI.
type Charging struct {
	Supply, Ohms float64 // rated voltage, series resistance
	Watts        float64 // of the resistor when the part is a dead short: U²/R
	Fault        float64 // the most that a fault in the part can take, half of the voltage across each: U²/(4·R)
	Current      float64 // into a dead short
	Seconds      float64 // five time constants at worst-case capacitance
}

// The resistor of a leakage test, Ω: more than the most and a 10 MΩ voltmeter across it would falsify the reading (house).
const mostOhms, leastOhms = 100e3, 100.0

// What the resistor may have to stand when the part is a dead short, W: half of a wirewound one of 10 W, which a bench has (house).
const mostWatts = 5.0

// leastDrop is the share of the rated voltage from which what the resistor takes is made good by the supply.
const leastDrop = 0.03

// ChargingOf computes it: as large a resistor as leaves a part at its leakage limit within 3 % of the rated voltage, and 100 kΩ at most.
// The slower the part charges, the less a weak spot in its oxide can burn. A dead short never puts more than 5 W into it: where that asks for more
// ohms, the supply makes good what the resistor takes.
func (r *Rules) ChargingOf(claim screening.Claim, u capacitor.Unit) Charging {
	technology := r.Technology(claim)
	ohms := r.Tables.Named(figureDrop, technology).Value * u.Volts / r.Tables.LeakageLimit(technology, u)
	ohms = roundDown(math.Min(math.Max(ohms, leastOhms), mostOhms))
	if least := u.Volts * u.Volts / mostWatts; ohms < least {
		ohms = roundUp(least)
	}
	return Charging{
		Supply: u.Volts, Ohms: ohms, Watts: u.Volts * u.Volts / ohms, Fault: u.Volts * u.Volts / ohms / 4, Current: u.Volts / ohms,
		Seconds: 5 * ohms * u.Top(),
	}
}

// roundDown rounds down to one significant digit of 1, 2 or 5.
func roundDown(x float64) float64 {
	scale := math.Pow(10, math.Floor(math.Log10(x)*(1+1e-12)))
	switch digit := x / scale * (1 + 1e-9); {
	case digit >= 5:
		return 5 * scale
	case digit >= 2:
		return 2 * scale
	}
	return scale
}

// roundUp rounds up to one significant digit of 1, 2 or 5.
func roundUp(x float64) float64 {
	for _, step := range []float64{1, 2, 2.5} {
		if up := roundDown(x * step); up >= x*(1-1e-9) {
			return up
		}
	}
	return roundDown(x * 10)
}

// Values are the computed numbers by name.
func (c Charging) Values() map[string]float64 {
	return map[string]float64{
		"supply": c.Supply, "series-resistance": c.Ohms, "resistor-power": c.Watts, "fault-power": c.Fault, "current": c.Current, "charge-time": c.Seconds,
	}
}

// Resistor words the series resistor: "100 kΩ, 0.25 W or more (2.6 mW if the part is a dead short)".
func (c Charging) Resistor() string {
	sold := math.Ceil(2*c.Watts/5) * 5
	for _, w := range []float64{10, 5, 3, 2, 1, 0.5, 0.25} {
		if 2*c.Watts <= w {
			sold = w
		}
	}
	return fmt.Sprintf("%s, %g W or more (%s if the part is a dead short)", quantity.Format(c.Ohms, quantity.Ohm, 0), sold,
		quantity.Format(c.Watts, quantity.Watt, 2))
}

// UnderVoltage is the caution of a leakage test: reverse says what a reversed part does, fails what a weak one does.
func (r *Rules) UnderVoltage(part screening.Part, reverse, fails string, source screening.Source) []screening.Caution {
	us, err := r.Units(part.Claim)
	if err != nil {
		return nil
	}
	u := us[0]
	for _, x := range us {
		if x.Volts > u.Volts {
			u = x
		}
	}
	c := r.ChargingOf(part.Claim, u)
	text := fmt.Sprintf("before any voltage: plus to plus (%s), supply at 0 V, through %s, then turn it up slowly over 10 s or more. %s "+
		"The resistor limits what a fault can draw to %s, and what it can take to %s.", reverse, c.Resistor(), fails,
		book.About(c.Current, quantity.Ampere), book.About(c.Fault, quantity.Watt))
	level := screening.Notice
	if u.Volts > book.TouchVoltage {
		level = screening.Danger
		text += " Isolated supply, one hand, eye protection; high voltage: your local code and licensed practice."
	}
	return []screening.Caution{{
		Code: "test-under-voltage", Level: level, Text: text, Values: c.Values(), Source: source, Gate: u.Volts > book.TouchVoltage,
	}}
}

// Recipes says how to measure what a limit asks with what people own.
func (r *Rules) Recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	u, ok := capacitor.UnitOf(part.Claim, r.Span, l.Section)
	if !ok || u.Volts <= 0 {
		return nil
	}
	switch l.On {
	case screening.Resistance.Name:
		return []screening.Recipe{shortByOhms(u, l)}
	case screening.ESR.Name, screening.TanDelta.Name:
		all := capacitor.Recipes(part, l, r.Span)
		for i := range all {
			all[i].Lines = append(all[i].Lines, r.LossLines...)
		}
		return all
	case screening.Leakage.Name:
		return []screening.Recipe{r.leakageRecipe(part.Claim, u, l)}
	}
	return capacitor.Recipes(part, l, r.Span)
}

// shortByOhms: whatever an ohmmeter shows on a capacitor climbs towards its leak's resistance and never past it, so a reading that has passed
// the limit proves it. A part that does not leak passes it within R·C of the limit, on a constant current as on a divider; one that stays below
// has all but settled after five times that.
func shortByOhms(u capacitor.Unit, l screening.Limit) screening.Recipe {
	passes := l.Low * u.Top()
	settle := 5 * passes
	return screening.Recipe{
		Title: "ohms range of a pocket meter", Source: book.Practice,
		Lines: []string{
			"discharge the part and read the volts that remain: 0 V, or the meter is gone",
			"auto range, or else the highest ohms range; the meter's plus probe to the part's plus (on some analogue meters the black one is plus); hands off the leads",
			fmt.Sprintf("it starts low and climbs while the part charges, a sound one past %s within about %s: then it is no short; type resistance=>… "+
				"with what it has reached, or resistance=OL", book.About(l.Low, quantity.Ohm), waiting(2*passes)),
			fmt.Sprintf("where it still stands below that after %s, type what it shows", waiting(settle)),
			"it shows a short, not that the part stands its voltage",
		},
		Values: map[string]float64{"resistance-at-limit": l.Low, "charge-time": settle},
	}
}

func (r *Rules) leakageRecipe(claim screening.Claim, u capacitor.Unit, l screening.Limit) screening.Recipe {
	c := r.ChargingOf(claim, u)
	after, timed := l.At.Get(screening.After)
	if !timed {
		after = 300
	}
	volts := l.High * c.Ohms
	rated := quantity.Format(c.Supply, quantity.Volt, 0)
	upTo := fmt.Sprintf("to %s, never above; it charges in about %s", rated, waiting(c.Seconds))
	if volts > leastDrop*c.Supply {
		upTo = fmt.Sprintf("until a second voltmeter shows %s on the part itself, never above: the resistor takes up to %s besides, less as the part recovers, so turn "+
			"the supply down with it; it charges in about %s", rated, quantity.Format(volts, quantity.Volt, 2), waiting(c.Seconds))
	}
	lines := []string{
		"discharge the part and read the volts that remain; leads clean and dry",
		fmt.Sprintf("supply at 0 V, plus to plus, through %s; turn it up over 10 s or more %s", c.Resistor(), upTo),
		fmt.Sprintf("%s after the part reached it read the volts across the resistor: leakage = volts / %s; the limit of %s is %s there", waiting(after),
			quantity.Format(c.Ohms, quantity.Ohm, 0), quantity.Format(l.High, quantity.Ampere, 3), quantity.Format(volts, quantity.Volt, 2)),
		"volts that rise or jump are a weak oxide: turn the supply down at once",
		"turn it down to 0 V, wait as long again, and read the volts that remain before you touch it",
	}
	values := c.Values()
	values["after"], values["volts-at-limit"] = after, volts
	return screening.Recipe{Title: "leakage with a supply and a voltmeter", Lines: lines, Values: values, Source: leakagePractice}
}

func waiting(seconds float64) string {
	if seconds >= 120 {
		return fmt.Sprintf("%.0f min", math.Ceil(seconds/60))
	}
	return fmt.Sprintf("%.0f s", math.Max(1, math.Ceil(seconds)))
}
