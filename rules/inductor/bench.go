package inductor

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/winding"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	kicksFrom    = 0.1   // H, from which the current of a meter or supply is broken with a kick that people feel (house)
	meterCurrent = 1e-3  // A, what an ohmmeter sends on its lower ranges (from memory)
	resonateWith = 10e-9 // F, a film or mica capacitor that every bench has
)

// cautions warns of the kick: the energy ½·L·I² goes into whatever bridges the gap when the current is broken.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	l, ok := part.Claim.Nominal(Inductance.Name, "")
	if at != screening.AtMeasure || !ok {
		return nil
	}
	amperes, from := meterCurrent, "an ohmmeter's"
	if sat, ok := part.Claim.Nominal(ISat.Name, ""); ok {
		amperes, from = sat, "its saturation current of"
	}
	if l < kicksFrom && amperes == meterCurrent {
		return nil
	}
	energy := l * amperes * amperes / 2
	return []screening.Caution{{
		Code: "inductive-kick", Level: screening.Notice,
		Text: fmt.Sprintf("%s %s stores %s in this part (½·L·I²); broken suddenly, it jumps to hundreds of volts. Do not hold both leads, clip them "+
			"on; at more than a meter's current put a diode across the part, cathode to plus, and turn the supply down before you unclip it",
			from, quantity.Format(amperes, quantity.Ampere, 2), book.Joules(energy)),
		Values: map[string]float64{"current": amperes, "energy": energy}, Source: book.Practice,
	}}
}

// recipes says how to measure what a limit asks with what people own.
func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	henry, ok := part.Claim.Nominal(Inductance.Name, "")
	if !ok {
		low, high, claimed := band(part.Claim)
		if !claimed || math.IsInf(low, 0) || math.IsInf(high, 0) {
			return nil
		}
		henry = (low + high) / 2
	}
	switch {
	case l.On == screening.DCR.Name:
		return []screening.Recipe{winding.Recipe(screening.DCR, part.Claim, l.Section)}
	case l.Criterion == saturationCriterion:
		return nil // it takes a bias supply that few benches have
	case l.On == Inductance.Name:
		return []screening.Recipe{byMeter(henry), byResonance(henry)}
	case l.On == Q.Name:
		f, _ := l.At.Get(screening.Frequency)
		return []screening.Recipe{qRecipe(henry, f)}
	}
	return nil
}

func byMeter(henry float64) screening.Recipe {
	f := meterFrequency(henry)
	return screening.Recipe{
		Title: "Component meter", Source: book.Practice,
		Lines: []string{
			"out of circuit, clear of steel and of other coils",
			fmt.Sprintf("choose %s where the meter asks (its reactance is then about %s), and type the frequency with the reading",
				quantity.Format(f, quantity.Hertz, 0), book.About(2*math.Pi*f*henry, quantity.Ohm)),
		},
		Values: map[string]float64{"frequency": f, "reactance": 2 * math.Pi * f * henry},
	}
}

// meterFrequency is the one of the usual frequencies at which reactance comes nearest to a kilohm: there the meter's resistance and its stray
// capacitance matter least.
func meterFrequency(henry float64) float64 {
	best := 120.0
	for _, f := range []float64{1e3, 10e3, 100e3} {
		if math.Abs(math.Log(2*math.Pi*f*henry/1e3)) < math.Abs(math.Log(2*math.Pi*best*henry/1e3)) {
			best = f
		}
	}
	return best
}

func byResonance(henry float64) screening.Recipe {
	f := 1 / (2 * math.Pi * math.Sqrt(henry*resonateWith))
	return screening.Recipe{
		Title: "Generator and a known capacitor", Source: book.Practice,
		Lines: []string{
			fmt.Sprintf("put the coil in parallel with a measured %s film or mica capacitor, and feed both from the generator through 100 kΩ, 1 V or so",
				quantity.Format(resonateWith, quantity.Farad, 0)),
			fmt.Sprintf("turn the frequency until the volts across them are highest: about %s for this value", quantity.Format(f, quantity.Hertz, 3)),
			"inductance = 1/((2πf)²·C)",
		},
		Values: map[string]float64{"capacitance": resonateWith, "series-resistance": 100e3, "resistor-power": 1e-5, "frequency": f},
	}
}

func qRecipe(henry, f float64) screening.Recipe {
	c := 1 / (4 * math.Pi * math.Pi * f * f * henry)
	return screening.Recipe{
		Title: "Q beside a twin", Source: book.Practice,
		Lines: []string{
			fmt.Sprintf("measure Q of a sound twin at %s and claim it; then this one on the same meter, same place", quantity.Format(f, quantity.Hertz, 3)),
			fmt.Sprintf("without a Q meter: resonate it with %s, and note the frequencies to both sides at which the volts fall to 0.707; "+
				"Q = f/(upper − lower), the generator coupled through 1 MΩ or a few pF", book.About(c, quantity.Farad)),
			"or type the series resistance that the meter shows: esr@…=…; Q = 2πfL/R is computed",
		},
		Values: map[string]float64{"frequency": f, "capacitance": c},
	}
}
