package zener

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	warmPower     = 0.1  // W in the part, from which its voltage drifts as it warms (house)
	settleSeconds = 90.0 // s after which 1N4728A to 1N4764A are read, leads at 30 °C (published)
	firstCurrent  = 5e-3 // A, to begin with on a part of unknown power (house)
	smallestPower = 0.25 // W, to stay under on a part of unknown power (house)
)

// supplies are the voltages that a bench makes from batteries and supplies, V.
var supplies = []float64{5, 9, 12, 18, 24, 30, 48, 60, 120, 200, 300}

// preferred are the values of IEC 60063 E12 in which the series resistor is given.
var preferred = []float64{1, 1.2, 1.5, 1.8, 2.2, 2.7, 3.3, 3.9, 4.7, 5.6, 6.8, 8.2, 10}

var settleSource = screening.Source{
	Document: "Fairchild 1N4728A-1N4764A data sheet", Clause: "VZ is read 90 s after switching on, leads at 30 °C", Status: screening.Published,
}

// drive is a supply and a series resistor that send a current through a Zener: R = (Vs − Vz)/I, in the nearest E12 value; watts in the
// resistor and in the part; the current that then flows.
type drive struct {
	supply, ohms, watts, current, part float64
}

// driveFor chooses the lowest supply that leaves the resistor at least 2 V and a third of the Zener's voltage, so that the current hardly
// depends on the part.
func driveFor(vz, current float64) drive {
	needed := vz + math.Max(2, vz/3)
	supply := math.Ceil(needed/100) * 100
	for _, s := range supplies {
		if s >= needed {
			supply = s
			break
		}
	}
	d := drive{supply: supply, ohms: nearest((supply - vz) / current)}
	d.current = (supply - vz) / d.ohms
	d.watts, d.part = d.current*(supply-vz), d.current*vz
	return d
}

// nearest returns the E12 value nearest to x in ratio; x itself where that is no resistance.
func nearest(x float64) float64 {
	if !(x > 0) || math.IsInf(x, 1) {
		return x
	}
	decade := math.Pow10(int(math.Floor(math.Log10(x))))
	best := preferred[0]
	for _, p := range preferred {
		if math.Abs(math.Log(p*decade/x)) < math.Abs(math.Log(best*decade/x)) {
			best = p
		}
	}
	if decade < 1 {
		return best / math.Round(1/decade)
	}
	return best * decade
}

// operating returns the voltage and current at which a claim is tested. Without one, a current that a small part stands.
func operating(c screening.Claim) (vz, current float64, known bool) {
	r, ok := c.Rating(VZ.Name, "")
	vz = r.Nominal
	if ok && !r.HasNominal() {
		vz = (r.Low + r.High) / 2
	}
	current, has := testCurrent(c)
	if !has {
		current = firstCurrent
	}
	return vz, current, ok && vz > 0 && !math.IsInf(vz, 0)
}

func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	vz, current, known := operating(part.Claim)
	switch {
	case l.On == VZ.Name && !known:
		return []screening.Recipe{unknownRecipe()}
	case l.On == VZ.Name:
		return []screening.Recipe{voltageRecipe(part.Claim, vz, current)}
	case l.On == ZZ.Name && known:
		return []screening.Recipe{slopeRecipe(vz, current)}
	case l.On == screening.IR.Name:
		v, _ := l.At.Get(screening.Voltage)
		ohms := nearest(v / 1e-3)
		return []screening.Recipe{{
			Title: "Reverse current below the knee", Source: book.Practice,
			Lines: []string{
				fmt.Sprintf("supply %s, %s in series, cathode (the band) to plus; read the volts across the resistor", volts(v), quantity.Format(ohms, quantity.Ohm, 0)),
				"current = volts ÷ " + quantity.Format(ohms, quantity.Ohm, 0),
			},
			Values: map[string]float64{"supply": v, "series-resistance": ohms, "resistor-power": v * v / ohms},
		}}
	case l.On == screening.VF.Name:
		return []screening.Recipe{{
			Title: "Forward voltage", Lines: []string{"diode test, red probe on the anode (the end without the band): it reads like any silicon diode"},
			Source: book.Practice,
		}}
	}
	return nil
}

func voltageRecipe(c screening.Claim, vz, current float64) screening.Recipe {
	d := driveFor(vz, current)
	lines := []string{
		fmt.Sprintf("supply %s, %s (%s in it) in series, cathode (the band) to plus: about %s", volts(d.supply), quantity.Format(d.ohms, quantity.Ohm, 0),
			book.About(d.watts, quantity.Watt), book.About(d.current, quantity.Ampere)),
		"read the volts across the Zener, and those across the resistor: current = those ÷ " + quantity.Format(d.ohms, quantity.Ohm, 0),
		fmt.Sprintf("type both: vz@%s=…; from %s to %s it counts", typed(current), amperes(least*current), amperes(most*current)),
	}
	if d.part >= warmPower {
		lines = append(lines, fmt.Sprintf("it takes %s and warms: read it %.0f s after switching on, leads clamped cool", book.About(d.part, quantity.Watt), settleSeconds))
	}
	if _, ok := testCurrent(c); !ok {
		lines = append(lines, "its test current is not known: "+amperes(current)+" is only to begin with; look it up and state izt")
	}
	return screening.Recipe{
		Title: "Zener voltage at " + amperes(current), Lines: lines, Source: book.Practice,
		Values: map[string]float64{
			"supply": d.supply, "series-resistance": d.ohms, "resistor-power": d.watts, "test-current": d.current, "part-power": d.part,
		},
	}
}

// unknownRecipe measures a Zener of unknown voltage: as much supply as there is, a current that the smallest body stands.
func unknownRecipe() screening.Recipe {
	const supply = 30.0
	ohms := nearest(supply / firstCurrent)
	return screening.Recipe{
		Title: "Zener of unknown voltage", Source: book.Practice,
		Lines: []string{
			fmt.Sprintf("supply %s, %s (%s in it at most) in series, cathode (the band) to plus", volts(supply), quantity.Format(ohms, quantity.Ohm, 0),
				book.About(supply*supply/ohms, quantity.Watt)),
			"read the volts across the Zener, and those across the resistor: current = those ÷ " + quantity.Format(ohms, quantity.Ohm, 0),
			"less than 1 V: turn it round. The whole supply: it breaks down above that, or is no Zener. Else type both: vz@3mA=12.1",
		},
		Values: map[string]float64{"supply": supply, "series-resistance": ohms, "resistor-power": supply * supply / ohms},
	}
}

// slopeRecipe takes two readings 20 % above and below the test current.
func slopeRecipe(vz, current float64) screening.Recipe {
	d := driveFor(vz, current)
	return screening.Recipe{
		Title: "Slope resistance by two currents", Source: book.Practice,
		Lines: []string{
			fmt.Sprintf("as for the Zener voltage, supply %s through %s; set the supply for %s, then for %s", volts(d.supply),
				quantity.Format(d.ohms, quantity.Ohm, 0), book.About(0.8*current, quantity.Ampere), book.About(1.2*current, quantity.Ampere)),
			"slope = difference of the Zener's volts ÷ difference of the currents; read quickly, warming adds its own slope",
		},
		Values: map[string]float64{"supply": d.supply, "series-resistance": d.ohms, "resistor-power": d.watts, "test-current": current},
	}
}

// cautions warn of heat at the test current, of the power of unmarked parts, and of supplies that can hurt.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	if at != screening.AtMeasure {
		return nil
	}
	vz, current, known := operating(part.Claim)
	var all []screening.Caution
	if _, rated := part.Claim.Nominal(screening.Ptot.Name, ""); !rated {
		text := "power unknown: assume the smallest for this body, and keep volts × amperes below " + quantity.Format(smallestPower, quantity.Watt, 0)
		values := map[string]float64{"power": smallestPower}
		if known {
			text += ", " + book.About(smallestPower/vz, quantity.Ampere) + " at " + volts(vz)
			values["highest-current"] = smallestPower / vz
		}
		all = append(all, screening.Caution{
			Code: "power-unknown", Level: screening.Notice, Text: text, Values: values,
			Source: screening.Source{Document: "the smallest common body", Status: screening.House},
		})
	}
	if !known {
		return all
	}
	if p := vz * current; p >= warmPower {
		all = append(all, screening.Caution{
			Code: "test-heat", Level: screening.Notice,
			Text: fmt.Sprintf("at %s it takes %s: it gets hot, and its voltage drifts as it does. Read it %.0f s after switching on, leads clamped "+
				"cool, then switch off", amperes(current), book.About(p, quantity.Watt), settleSeconds),
			Values: map[string]float64{"part-power": p, "test-current": current, "time": settleSeconds}, Source: settleSource,
		})
	}
	if d := driveFor(vz, current); d.supply >= book.TouchVoltage {
		all = append(all, screening.Caution{
			Code: "test-voltage", Level: screening.Danger,
			Text: fmt.Sprintf("this test needs %s: from %.0f V a supply can hurt, and kill. Current limited by %s, one hand, nobody alone, switched "+
				"off and measured below %.0f V before you touch it; do as your local code and licensed practice say", volts(d.supply), book.TouchVoltage,
				quantity.Format(d.ohms, quantity.Ohm, 0), float64(screening.SafeVoltage)),
			Values: map[string]float64{"supply": d.supply, "series-resistance": d.ohms, "safe-voltage": screening.SafeVoltage},
			Source: book.TouchSource,
		})
	}
	return all
}

// typed prints a current as it is typed in a reading's condition.
func typed(x float64) string { return fmt.Sprintf("%gmA", math.Round(x*1e6)/1e3) }
