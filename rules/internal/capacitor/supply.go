package capacitor

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	shortCurrent    = 1e-3  // A that may flow if the part is a dead short (house)
	leastSeries     = 10e3  // Ω
	voltmeterOhms   = 10e6  // Ω, the input of a digital voltmeter (common practice; the meter's sheet says)
	voltmeterStep   = 1e-4  // V that its lowest range resolves (house: one count of 200.0 mV)
	microammeter    = 1e-6  // A below which a µA range shows too few digits (house: ten counts of 0.1 µA)
	fiveTimes       = 5.0   // time constants until a charge has settled within 1 %
	longestSettling = 600.0 // s; beyond it the meter is bridged while the part charges (house)
)

// charging is what puts a voltage on a part without harm.
type charging struct{ supply, ohms, watts, seconds float64 }

// chargingOf computes it: so much series resistance that a dead short draws 1 mA, at least 10 kΩ.
func chargingOf(u Unit, volts float64) charging {
	ohms := roundUp(math.Max(leastSeries, volts/shortCurrent))
	return charging{supply: volts, ohms: ohms, watts: volts * volts / ohms, seconds: fiveTimes * ohms * u.Top()}
}

// roundUp rounds up to two significant digits.
func roundUp(x float64) float64 {
	scale := math.Pow(10, math.Floor(math.Log10(x))-1)
	return math.Ceil(x/scale*(1-1e-9)) * scale
}

// resistor words the series resistor: "100 kΩ, 0.25 W or more (0.1 W if the part is a dead short), rated for 100 V".
func (c charging) resistor() string {
	return fmt.Sprintf("%s, %s W or more (%.2g W if the part is a dead short), rated for %s or several in series",
		quantity.Format(c.ohms, quantity.Ohm, 0), soldWatts(2*c.watts), c.watts, quantity.Format(c.supply, quantity.Volt, 0))
}

// soldWatts rounds up to a resistor that is sold.
func soldWatts(watts float64) string {
	for _, w := range []float64{0.25, 0.5, 1, 2, 3, 5, 10} {
		if watts <= w {
			return fmt.Sprintf("%g", w)
		}
	}
	return fmt.Sprintf("%.0f", math.Ceil(watts/5)*5)
}

func (c charging) values() map[string]float64 {
	return map[string]float64{"supply": c.supply, "series-resistance": c.ohms, "resistor-power": c.watts, "charge-time": c.seconds}
}

// Cautions warns of the charge that the part may hold, at every moment, and before measuring of the test under voltage. volts is the voltage
// of the test for a unit; it may be nil where none is made.
func Cautions(part screening.Part, at screening.Moment, span Span, volts func(Unit) float64) []screening.Caution {
	us, err := Units(part.Claim, span)
	if err != nil {
		return nil // nothing is known of it yet; its claim is asked for first
	}
	// Sections may share a lead: together they hold the sum.
	var farad, top, rated float64
	test := us[0]
	for _, u := range us {
		farad, top, rated = farad+u.Farad, top+u.Top(), math.Max(rated, u.Volts)
		if u.Volts > test.Volts {
			test = u
		}
	}
	all := book.StoredCharge(farad, top, rated)
	if at == screening.AtMeasure && volts != nil {
		all = append(all, underVoltage(test, volts(test))...)
	}
	return all
}

// underVoltage is the caution before and after an insulation reading above the touch voltage.
func underVoltage(u Unit, volts float64) []screening.Caution {
	if volts <= book.TouchVoltage {
		return nil
	}
	c := chargingOf(u, volts)
	energy := u.Top() * volts * volts / 2
	values := c.values()
	values["energy"], values["charge"] = energy, u.Top()*volts
	return []screening.Caution{{
		Code: "test-under-voltage", Level: screening.Danger, Gate: true, Values: values, Source: book.TouchSource,
		Text: fmt.Sprintf("insulation is read with %s on the part, through %s. It leaves %s (%s) in the part, which the resistor does not limit: "+
			"discharge it through the same resistor for %s and read the volts that remain. Isolated supply, one hand, eye protection; high voltage: "+
			"your local code and licensed practice.",
			quantity.Format(volts, quantity.Volt, 0), c.resistor(), book.Coulombs(u.Top()*volts), book.Joules(energy), seconds(c.seconds)),
	}}
}

func seconds(s float64) string {
	switch {
	case s >= 7200:
		return fmt.Sprintf("%.1f h", s/3600)
	case s >= 120:
		return fmt.Sprintf("%.0f min", math.Ceil(s/60))
	}
	return fmt.Sprintf("%.0f s", math.Max(1, math.Ceil(s)))
}
