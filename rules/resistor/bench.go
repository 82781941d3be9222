package resistor

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var kelvinSource = screening.Source{
	Document: "four-terminal measuring notes: leads 0.1 to 0.2 Ω each, contacts up to 0.15 Ω, four wires below 10 Ω", Status: screening.Published,
}

const (
	fourWireBelow = 10.0  // Ω (published: kelvinSource)
	fingersAbove  = 100e3 // Ω; a hand across the probes is of the order of a megohm (common practice)
	testCurrent   = 0.1   // A, what a bench supply regulates well (house)
	testShare     = 0.1   // of the rated power, so that the reading does not warm the part (house)
	smallestPower = 0.125 // W, taken where none is claimed (house)
)

// cautions warns before measuring in a set, and says how to dry safely where drying is the answer.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	switch at {
	case screening.AtMeasure:
		return []screening.Caution{{
			Code: "power-off", Level: screening.Notice,
			Text: "an ohmmeter belongs on a dead circuit: unplug it and discharge its capacitors first, and lift one lead of the resistor",
			Values: map[string]float64{
				"safe-voltage": screening.SafeVoltage,
			},
			Source: book.Practice,
		}}
	case screening.AtVerdict:
		if dries(part) {
			return []screening.Caution{dryingCaution(part.Claim)}
		}
	}
	return nil
}

// dries reports whether the part is carbon composition that was not dried yet and reads high, beyond what the meter may be off: one that
// only may be high is accepted at a wider tolerance, and there is nothing to dry.
func dries(part screening.Part) bool {
	r, measured := part.Reading(screening.Resistance.Name, "")
	low, high, ok := band(part.Claim)
	if !ok || !measured || part.Treated > 0 || technologyOf(part.Claim).name != composition || r.Sense != quantity.Exactly {
		return false
	}
	_, above := screening.ConformanceProbability(r.Value, r.U, low, high)
	return above >= surely && r.Value-high > r.Spec && r.Value*(1-driesBack) <= high
}

// surely is the probability at which a part fails under the default policy.
const surely = 0.95

func dryingCaution(c screening.Claim) screening.Caution {
	power := 0.0
	if p, ok := c.Nominal(Power.Name, ""); ok {
		power = p
	}
	d := dryingFor(power)
	size := "this size (" + d.style + ")"
	if power == 0 {
		size = "middle sizes; 25 h for ⅛ W and 130 h for 2 W"
	}
	return screening.Caution{
		Code: "drying", Level: screening.Notice,
		Text: fmt.Sprintf("dry it at 100 ± 5 °C for %.0f h (%s) in an oven or drying box with a thermostat and a thermal cut-out, never over a "+
			"flame, on a hotplate or in an oven used for food; wax and lacquer smell and may smoke: ventilate, and stay within reach. "+
			"Hot parts burn: let it cool to room temperature, measure it the same day, and keep it dry after. Drying out in use may drop it again.",
			d.hours, size),
		Values: map[string]float64{"temperature": 100, "temperature-tolerance": 5, "time": d.hours * 3600},
		Source: d.source,
	}
}

// recipes says how to measure: two wires, or below 10 Ω four.
func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	if l.On != screening.Resistance.Name {
		return nil
	}
	nominal, ok := part.Claim.Nominal(screening.Resistance.Name, "")
	if !ok || nominal <= 0 {
		return nil
	}
	if nominal < fourWireBelow {
		return []screening.Recipe{fourWire(part.Claim, nominal)}
	}
	lines := []string{
		"take it out, or lift one lead: anything in parallel makes it read low",
		"hold the probes together first and note what they read (0.1 to 0.6 Ω); subtract it, or zero the meter",
	}
	if nominal >= fingersAbove {
		lines = append(lines, "do not touch both probe tips: your body is a resistor of about a megohm")
	}
	return []screening.Recipe{{
		Title: "Ohms range, two wires", Lines: lines, Values: map[string]float64{"expected-resistance": nominal}, Source: book.Practice,
	}}
}

// fourWire computes a current that puts at most a tenth of the rated power into the part, and the volts then read across it: I = √(0.1·P/R),
// 100 mA at most; U = I·R.
func fourWire(c screening.Claim, nominal float64) screening.Recipe {
	power, ok := c.Nominal(Power.Name, "")
	if !ok {
		power = smallestPower
	}
	current := math.Min(testCurrent, math.Sqrt(testShare*power/nominal))
	volts := current * nominal
	return screening.Recipe{
		Title: "Four wires: a known current through it, volts at its body",
		Lines: []string{
			"on two wires the leads and clips add 0.2 to 0.5 Ω, " + quantity.Format(0.3/nominal, quantity.Ratio, 2) + " of this value",
			"set a current-limited supply to " + quantity.Format(current, quantity.Ampere, 3) + " (at most " +
				quantity.Format(testShare, quantity.Ratio, 0) + " of its power: " + quantity.Format(current*volts, quantity.Watt, 2) +
				") and send it through the resistor",
			"read the volts with a second pair of probes at the resistor's body, inside the current clips: about " +
				quantity.Format(volts, quantity.Volt, 3),
			"resistance = volts ÷ amperes; swap the current's direction and average, which cancels thermal voltages (from memory)",
		},
		Values: map[string]float64{
			"test-current": current, "expected-voltage": volts, "resistor-power": current * volts, "expected-resistance": nominal,
		},
		Source: kelvinSource,
	}
}
