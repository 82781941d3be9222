package thermistor

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// The temperatures between which a reading is brought to 25 °C (house): further off the B formula and the thermometer leave too much open, and a
// PTC comes near to where it switches.
const (
	coldest, warmest       = 0.0, 50.0
	ptcColdest, ptcWarmest = 15.0, 35.0
)

// curve is how much the B formula departs from a real NTC's table, as a ratio per kelvin away from 25 °C, one kelvin being let off: a maker's 10 kΩ
// type reads 32.56 kΩ at 0 °C where B25/85 = 3977 K (from memory) makes 33.9 kΩ, 4.1 % in 25 K.
const curve = 0.0017

// ptcSlope is how much a switching PTC below its switching temperature may move, as a ratio per kelvin (from memory).
const ptcSlope = 0.01

// assumedKelvins is the half-width taken for a temperature that was typed with a reading and not measured: that of the assumed thermometer.
var assumedKelvins = func() float64 {
	m := screening.AssumedMeter()
	return m.HalfWidth(screening.Reading{Of: screening.Temperature.Name, Unit: quantity.Celsius, Value: reference})
}()

// kelvins returns the half-width in kelvin of a temperature at which a reading was taken, and its standard uncertainty.
func kelvins(part screening.Part, celsius float64) (half, u float64) {
	if a, ok := part.Ambient(); ok && a.Value == celsius && a.Sense == quantity.Exactly && a.U > 0 {
		return math.Max(a.Spec, a.U), a.U
	}
	return assumedKelvins, assumedKelvins / math.Sqrt(3)
}

// convert brings a resistance to 25 °C. Its uncertainty joins the meter's, the thermometer's by the slope, the B value's, and the formula's own.
func convert(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	celsius, stated := r.At.Get(screening.PartTemperature)
	if l.On != screening.Resistance.Name || !stated {
		return screening.Conversion{}
	}
	from, to := coldest, warmest
	if isPTC(part.Claim) {
		from, to = ptcColdest, ptcWarmest
	}
	if celsius < from || celsius > to {
		return screening.Conversion{Why: fmt.Sprintf("taken at %.3g °C; measure between %.0f and %.0f °C", celsius, from, to)}
	}
	half, u := kelvins(part, celsius)
	off := math.Abs(celsius - reference)
	factor, slope, open := 1.0, ptcSlope, ptcSlope*off
	rule := fmt.Sprintf("%.3g °C ± %.2g K, where a PTC moves by %s per kelvin or less", celsius, half, percent(ptcSlope))
	source := screening.Source{Document: "switching PTC types below their switching temperature", Status: screening.FromMemory}
	if !isPTC(part.Claim) {
		low, high, from := bOf(part.Claim)
		b := (low + high) / 2
		factor, slope = Ratio(b, celsius), Slope(b, celsius)
		open = (high-low)/2*math.Abs(inverse(celsius)) + curve*math.Max(0, off-1)
		rule = fmt.Sprintf("÷ exp(%.0f K·(1/%.2f K − 1/298.15 K)) = ÷ %.4g from %.3g °C ± %.2g K to 25 °C", b, celsius+kelvin, factor, celsius, half)
		source = screening.Source{Document: "R = R25·exp(B·(1/T − 1/298.15 K)), B: " + from.Document, Clause: from.Clause, Status: screening.FromMemory}
		if from.Status == screening.Published {
			source.Document = "R = R25·exp(B·(1/T − 1/298.15 K)), B as claimed"
		}
	}
	result := screening.Conversion{OK: true, Reading: r, Rule: rule, Source: source}
	result.Reading.Value = r.Value / factor
	result.Reading.At = l.At
	result.U = result.Reading.Value * math.Hypot(slope*u, open/math.Sqrt(3))
	result.Reading.U = math.Hypot(r.U/factor, result.U)
	result.Reading.Spec = r.Spec/factor + result.Reading.Value*(slope*half+open)
	result.Reading.Rule = rule
	return result
}

// thermometerShare says how much of a converted reading's width the thermometer makes: its half-width as a ratio of
// the value, and in kelvin.
func thermometerShare(part screening.Part, f *screening.Finding) (share, half float64) {
	celsius, ok := f.Reading.At.Get(screening.PartTemperature)
	if !ok || isPTC(part.Claim) {
		return 0, 0
	}
	low, high, _ := bOf(part.Claim)
	half, _ = kelvins(part, celsius)
	return Slope((low+high)/2, celsius) * half, half
}

// holdPower bounds self-heating: dissipation of a small bead in still air per kelvin (from memory).
const holdPower = 2e-3

// meterCurrents are the currents of usual ohms ranges by the resistance they reach to, amperes (from memory).
var meterCurrents = []struct{ to, current float64 }{{2e3, 1e-3}, {20e3, 100e-6}, {200e3, 10e-6}, {math.Inf(1), 1e-6}}

// selfHeating returns the power in watts that an ohms range puts into a resistance, and the kelvins that warms a small bead.
func selfHeating(r float64) (watts, warms float64) {
	for _, m := range meterCurrents {
		if r <= m.to {
			watts = m.current * m.current * r
			break
		}
	}
	return watts, watts / holdPower
}

// inrush is the resistance up to which an NTC may be an inrush limiter, ohms (house).
const inrush = 50.0

func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	r, ok := part.Claim.Nominal(screening.Resistance.Name, "")
	var all []screening.Caution
	if at != screening.AtLook && ok && r <= inrush || isPTC(part.Claim) && at == screening.AtVerdict {
		all = append(all, screening.Caution{
			Code: "mains-position", Level: screening.Notice, Source: book.Practice, Values: map[string]float64{"inrush-resistance": inrush},
			Text: "NTC types of a few ohms limit the inrush of mains supplies, and PTC types degauss or protect them: in the mains no salvaged one " +
				"is fitted. In use they run far too hot to touch; let it cool for 5 min before it is measured",
		})
	}
	if at == screening.AtMeasure && ok {
		watts, warms := selfHeating(r)
		all = append(all, screening.Caution{
			Code: "self-heating", Level: screening.Notice,
			Text: fmt.Sprintf("the meter warms it: about %s at %s, up to %.2g K in a small bead; read within a few seconds, and do not hold it",
				quantity.Format(watts, quantity.Watt, 2), ohms(r), warms),
			Values: map[string]float64{"power": watts, "warms-by": warms},
			Source: screening.Source{Document: "usual ohms-range currents, 2 mW per kelvin", Status: screening.FromMemory},
		})
	}
	return all
}

// recipes says how to measure at a known temperature, and what it then should read.
func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	switch l.On {
	case screening.Resistance.Name:
	case screening.Temperature.Name:
		return []screening.Recipe{{
			Title: "Its temperature", Values: map[string]float64{"reference-temperature": reference}, Source: book.Practice,
			Lines: []string{
				"lay it beside a room thermometer, on wood or cloth, out of draught, sun and hand, for 5 min",
				"type what the thermometer shows, to a tenth, before the ohms; near 25 °C it costs the least accuracy",
			},
		}}
	default:
		return nil
	}
	lines := []string{
		"lay it beside the thermometer on wood or cloth, out of draught, sun and hand, for 5 min; ice water or a cup of oil holds both alike",
		"measure with clips, not fingers, within a few seconds; then read the thermometer to a tenth",
	}
	r, ok := part.Claim.Nominal(screening.Resistance.Name, "")
	values := map[string]float64{"reference-temperature": reference}
	if ok && !isPTC(part.Claim) {
		low, high, _ := bOf(part.Claim)
		b := (low + high) / 2
		values["resistance-at-20"], values["resistance-at-30"] = r*Ratio(b, 20), r*Ratio(b, 30)
		lines = append(lines, fmt.Sprintf("a sound one reads about %s at 20 °C, %s at 25 °C, %s at 30 °C", quantity.Format(r*Ratio(b, 20), quantity.Ohm, 3),
			ohms(r), quantity.Format(r*Ratio(b, 30), quantity.Ohm, 3)))
		lines = append(lines, fmt.Sprintf("each kelvin is worth %s: type the temperature, temperature=22.5C", percent(Slope(b, reference))))
	} else {
		lines = append(lines, "type the temperature with it: temperature=22.5C")
	}
	return []screening.Recipe{{Title: "Ohms at a known temperature", Lines: lines, Values: values, Source: book.Practice}}
}
