package book

import (
	"fmt"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// TestVoltage warns before a rated voltage, V, is proved with a supply, through a resistor that holds a short to so many amperes.
func TestVoltage(volts, amperes float64) screening.Caution {
	ohms, watts := volts/amperes, volts*amperes
	return screening.Caution{
		Code: "test-voltage", Level: screening.Danger,
		Text: fmt.Sprintf("proving %g V needs a supply that can kill. It is not needed for a first verdict: what was proved is said with it. "+
			"If you must: %s in series, %s into a short, rated for the voltage; a cover over the part (it may burst), one hand, nobody alone, "+
			"volts measured down to %.0f V before you touch anything; above %.0f V do as your local code and licensed practice say",
			volts, About(ohms, quantity.Ohm), About(watts, quantity.Watt), float64(screening.SafeVoltage), TouchVoltage),
		Values: map[string]float64{
			"supply": volts, "series-resistance": ohms, "resistor-power": watts, "touch-voltage": TouchVoltage, "safe-voltage": screening.SafeVoltage,
		},
		Source: TouchSource,
	}
}
