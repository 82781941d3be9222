package electrolytic

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// leakagePractice is how makers measure it.
var leakagePractice = screening.Source{
	Document: "Nippon Chemi-Con on leakage current; MIL-C-62F", Clause: "4.5.3: rated voltage through a limiting resistor, read at the end",
	Status: screening.Published,
}

// recipes says how to measure what a limit asks with what people own.
func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	us, err := units(part.Claim)
	if err != nil {
		return nil
	}
	u := us[0]
	for _, x := range us {
		if x.section == l.Section {
			u = x
		}
	}
	switch l.On {
	case screening.Capacitance.Name:
		if u.farad < timedFarad {
			return []screening.Recipe{capacitanceByMeter()}
		}
		return []screening.Recipe{capacitanceByMeter(), capacitanceByTime(part.Claim, u)}
	case screening.ESR.Name:
		return []screening.Recipe{esrByMeter(u, l), esrFromTanDelta(u, l)}
	case screening.TanDelta.Name:
		return []screening.Recipe{tanDeltaByMeter()}
	case screening.Leakage.Name, LeakageReversed.Name:
		return []screening.Recipe{leakageRecipe(part.Claim, u, l)}
	}
	return nil
}

func capacitanceByMeter() screening.Recipe {
	return screening.Recipe{
		Title: "capacitance with a meter", Source: book.Practice,
		Lines: []string{
			"discharge the part and read the volts that remain: under 10 V for you, 0 V for the meter",
			"take it out of circuit, or lift one lead",
			"choose 100 or 120 Hz where the meter asks; a charging (DC) meter reads about 10 % more",
			"wait until the display stands still, and type what it shows",
		},
	}
}

// timedFarad is the least capacitance worth timing: below it the series resistor would rival the voltmeter's 10 MΩ.
const timedFarad = 20e-6

// capacitanceByTime: charge through a known resistor from a low voltage, t at 63 % of it is R·C.
func capacitanceByTime(claim screening.Claim, u unit) screening.Recipe {
	supply := math.Min(9, 0.9*u.volts)
	ohms := roundUp(20 / u.farad)
	return screening.Recipe{
		Title: "capacitance with a watch and a voltmeter", Source: book.Practice,
		Lines: []string{
			"discharge the part and read the volts that remain",
			fmt.Sprintf("charge it from %s through %s, %s, and start the watch", quantity.Format(supply, quantity.Volt, 2),
				quantity.Format(ohms, quantity.Ohm, 0), connect(claim, screening.Capacitance.Name)),
			fmt.Sprintf("stop the watch at %s (63.2 %%): about %s for a good part", quantity.Format(0.632*supply, quantity.Volt, 3),
				duration(ohms*u.farad)),
			fmt.Sprintf("capacitance = seconds / %s; it reads about 10 %% more than at 120 Hz, and the voltmeter's own 10 MΩ is in parallel",
				quantity.Format(ohms, quantity.Ohm, 0)),
		},
		Values: map[string]float64{
			"supply": supply, "series-resistance": ohms, "resistor-power": supply * supply / ohms, "time-constant": ohms * u.farad,
		},
	}
}

func esrByMeter(u unit, l screening.Limit) screening.Recipe {
	hertz, _ := l.At.Get(screening.Frequency)
	r := screening.Recipe{
		Title: "ESR with a meter", Source: book.Practice,
		Lines: []string{
			"discharge the part and read the volts that remain: 0 V, or the meter is gone",
			"touch the probes together and subtract what they show",
			fmt.Sprintf("choose %s where the meter offers it: at most %s there", hz(hertz), quantity.Format(l.High, quantity.Ohm, 3)),
		},
		Values: map[string]float64{"frequency": hertz},
	}
	kilo := "a meter that works at 100 kHz reads two to eight times less: it can show this part bad, not good"
	if l.Grade == screening.Serviceable && u.volts <= esrRuleVolts && u.farad > esrRuleFarad {
		most := l.High / named("esr-ratio").value
		kilo = fmt.Sprintf("on a meter that works at 100 kHz, %s or less is enough to call it serviceable", quantity.Format(most, quantity.Ohm, 3))
		r.Values["at-100kHz"] = most
	}
	r.Lines = append(r.Lines, kilo+"; type the frequency with the reading: esr@100kHz=…")
	return r
}

// esrFromTanDelta is for those whose capacitance meter shows D.
func esrFromTanDelta(u unit, l screening.Limit) screening.Recipe {
	return screening.Recipe{
		Title: "without an ESR meter", Source: book.Practice,
		Lines: []string{
			"a capacitance meter that shows D or tan δ answers the same question: type tan-delta=…",
			fmt.Sprintf("ESR of this part is D / (2π·120 Hz·%s); the limit of %s is D = %.2g", microfarads(u.farad),
				quantity.Format(l.High, quantity.Ohm, 3), l.High*2*math.Pi*lossFrequency*u.farad),
			"a plain capacitance reading says nothing of ESR",
		},
	}
}

func tanDeltaByMeter() screening.Recipe {
	return screening.Recipe{
		Title: "tan δ with a meter", Source: book.Practice,
		Lines: []string{
			"discharge the part and read the volts that remain: 0 V, or the meter is gone",
			"choose 100 or 120 Hz; at 1 kHz the figure means something else",
			"type what it shows as D or tan δ; ESR at the same frequency does as well",
		},
	}
}

// senseDrop is how far the part may stand below its rated voltage while the current is read: 3 %, as far as the comparison takes it as equal.
const senseDrop = 0.03

// senseWatts is the most that the resistor put in after charging may take from a part that fails short, W: nobody owns a hotter one.
const senseWatts = 2.5

// leakageRecipe: a supply, a series resistor of known ohms, and a voltmeter across it and across the part. Where the charging resistor would
// hold the part too far below its rated voltage, a smaller one takes its place once the part is charged. The supply never goes above the
// rated voltage: the current falls while one watches, and the part would rise beyond it.
func leakageRecipe(claim screening.Claim, u unit, l screening.Limit) screening.Recipe {
	c := chargingOf(claim, u)
	after, _ := l.At.Get(screening.After)
	supply, ohms := quantity.Format(c.supply, quantity.Volt, 0), c.ohms
	values := c.values()
	lines := []string{
		"discharge the part and read the volts that remain",
		fmt.Sprintf("supply %s, %s, through %s", supply, connect(claim, l.On), c.resistor()),
		fmt.Sprintf("wait until the volts across the part stand still (about %s)", duration(c.seconds)),
	}
	sense := math.Min(math.Max(roundDown(senseDrop*c.supply/l.High), roundUp(c.supply*c.supply/senseWatts)), ohms)
	if l.High*ohms > senseDrop*c.supply && sense < ohms {
		ohms = sense
		watts := c.supply * c.supply / ohms
		values["sense-resistance"], values["sense-power"] = ohms, watts
		lines = append(lines, fmt.Sprintf("then put %s in its place (%s W or more: %.2g W if the part fails short)",
			quantity.Format(ohms, quantity.Ohm, 0), rating(2*watts), watts))
	}
	if l.High*ohms > senseDrop*c.supply {
		lines = append(lines, fmt.Sprintf("never set the supply above %s: as the current falls the part rises to it. Where the part itself stays more "+
			"than 3 %% below, type the volts that it has with the reading; a lower voltage can show a part bad, not good", supply))
	}
	drop := l.High * ohms
	lines = append(lines,
		fmt.Sprintf("%s after the part reached %s read the volts across the resistor: leakage = volts / %s; the limit of %s is %s there",
			duration(after), supply, quantity.Format(ohms, quantity.Ohm, 0), quantity.Format(l.High, quantity.Ampere, 3),
			quantity.Format(drop, quantity.Volt, 3)),
		"switch off, discharge the part through its discharge resistor, and read the volts that remain before you touch it")
	if u.volts > book.TouchVoltage {
		lines = append(lines, "shield, eye protection, one hand, isolated supply; high voltage: your local code and licensed practice")
	}
	values["after"], values["volts-at-limit"] = after, drop
	return screening.Recipe{Title: "leakage with a supply and a voltmeter", Lines: lines, Values: values, Source: leakagePractice}
}

// roundDown rounds down to one significant digit of 1, 2 or 5.
func roundDown(x float64) float64 {
	scale := math.Pow(10, math.Floor(math.Log10(x)))
	switch digit := x / scale; {
	case digit >= 5:
		return 5 * scale
	case digit >= 2:
		return 2 * scale
	}
	return scale
}
