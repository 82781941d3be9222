package book

import (
	"fmt"
	"math"
	"strings"
	"time"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// What a stored charge is warned of. Notice: above 60 V with more than 45 µC. Danger: from 100 V with more than 1 J, from 400 V with more
// than 0.25 J, and above 100 J at any voltage; noticeSource and dangerSource say who says so. The resistor and the times are the house's; that
// a shorted part charges itself again by up to 15 % is published (general article on aluminium electrolytics), as is that it takes 10 to 20
// days (Nippon Chemi-Con on recovery voltage).
const (
	noticeVolts, noticeCharge  = 60.0, 45e-6
	dangerVolts, dangerEnergy  = 100.0, 1.0
	highVolts, highEnergy      = 400.0, 0.25
	anyEnergy                  = 100.0
	dischargeWatts             = 10.0 // of the discharge resistor
	dischargeOhms              = 22e3
	dischargePatience          = 60.0 // s; a slower discharge tempts people to skip it
	recoveryWait               = 5 * time.Minute
	selfRecharge, recoveryDays = 0.15, "10 to 20 days"
)

var (
	noticeSource = screening.Source{
		Document: "touch limits for charge (45 µC, quoted from equipment safety standards) and 60 V", Status: screening.SecondHand,
	}
	dangerSource = screening.Source{
		Document: "100 V with 1 J, 400 V with 0.25 J: stricter than the 100 V with 10 J, and the same as the 100 J at any voltage, of the " +
			"Lawrence Berkeley electrical hazard tables", Clause: "2.2.13, 2.3.3, 2.3.5", Status: screening.FromMemory,
	}
)

// dischargeResistors are what a bench has in 10 W, ohms.
var dischargeResistors = []float64{470, 1e3, 2.2e3, 4.7e3, 10e3, 22e3, 47e3, 100e3, 220e3, 470e3, 1e6}

// DischargeResistor chooses a 10 W resistor for a capacitance in farad at a voltage: 22 kΩ, higher where V²/R would pass its 10 W, lower
// where the discharge to [screening.SafeVoltage] would take longer than a minute and the watts allow it. Ohms and watts at the first moment.
func DischargeResistor(c, v float64) (ohms, watts float64) {
	i := 0
	for dischargeResistors[i] < dischargeOhms {
		i++
	}
	for i < len(dischargeResistors)-1 && v*v/dischargeResistors[i] > dischargeWatts {
		i++
	}
	for i > 0 && DischargeTime(dischargeResistors[i], c, v) > dischargePatience && v*v/dischargeResistors[i-1] <= dischargeWatts {
		i--
	}
	return dischargeResistors[i], v * v / dischargeResistors[i]
}

// DischargeTime returns the seconds in which a capacitance in farad falls from v to [screening.SafeVoltage] through a resistance in ohm:
// t = R·C·ln(v/10 V); 0 at or below that voltage.
func DischargeTime(ohms, c, v float64) float64 {
	if v <= screening.SafeVoltage {
		return 0
	}
	return ohms * c * math.Log(v/screening.SafeVoltage)
}

// StoredCharge warns of the charge that a part may hold: nominal and worst-case (top of the tolerance) capacitance in farad, and the voltage
// it may be charged to. It returns nothing where both are below the notice. Every warning is a gate: it asks for the volts remaining.
func StoredCharge(nominal, worst, volts float64) []screening.Caution {
	energy, charge := worst*volts*volts/2, worst*volts
	danger := volts >= dangerVolts && energy > dangerEnergy || volts >= highVolts && energy > highEnergy || energy > anyEnergy
	notice := volts > noticeVolts && charge > noticeCharge
	if !danger && !notice {
		return nil
	}
	ohms, watts := DischargeResistor(worst, volts)
	c := screening.Caution{
		Code: "stored-charge", Level: screening.Notice, Gate: true, Source: noticeSource,
		Values: map[string]float64{
			"capacitance": worst, "voltage": volts, "energy": energy, "charge": charge,
			"discharge-resistance": ohms, "discharge-power": watts, "discharge-rated-power": dischargeWatts, "discharge-energy": energy,
			"discharge-voltage": volts, "discharge-time": DischargeTime(ohms, nominal, volts),
			"discharge-time-worst": DischargeTime(ohms, worst, volts), "safe-voltage": screening.SafeVoltage,
		},
	}
	if danger {
		c.Level, c.Source = screening.Danger, dangerSource
	}
	c.Text = chargeText(c, nominal, worst, volts)
	return []screening.Caution{c}
}

func chargeText(c screening.Caution, nominal, worst, volts float64) string {
	v := c.Values
	var b strings.Builder
	fmt.Fprintf(&b, "charged to %s this part holds up to %s (%s). ",
		quantity.Format(volts, quantity.Volt, 0), Joules(v["energy"]), Coulombs(v["charge"]))
	if c.Level == screening.Danger {
		b.WriteString("That can kill, burn and throw metal. ")
	} else {
		b.WriteString("That can hurt, and damage a meter. ")
	}
	fmt.Fprintf(&b, "Before you touch it or connect a meter, discharge it with insulated leads through %s, %.0f W, rated for %s or more "+
		"(two or more in series where one is not): %.1f W at first. To %.0f V it takes %s",
		quantity.Format(v["discharge-resistance"], quantity.Ohm, 0), dischargeWatts, quantity.Format(volts, quantity.Volt, 0),
		v["discharge-power"], float64(screening.SafeVoltage), seconds(v["discharge-time"]))
	if worst > nominal && v["discharge-time-worst"] >= 0.1 {
		fmt.Fprintf(&b, ", %s at %+.0f %% of capacitance", seconds(v["discharge-time-worst"]), 100*(worst/nominal-1))
	}
	fmt.Fprintf(&b, ". Never a screwdriver. Then measure the volts that remain. A part that was shorted can charge itself again (dielectric "+
		"absorption, up to %.0f %% and for %s): wait %.0f min, measure again, and keep it shorted through a resistor. One hand, eye "+
		"protection, nobody alone; mains and high-voltage work: your local code and licensed practice.",
		100*selfRecharge, recoveryDays, recoveryWait.Minutes())
	return b.String()
}

func seconds(s float64) string {
	if s >= 120 {
		return fmt.Sprintf("%.0f min", math.Ceil(s/60))
	}
	if s >= 10 {
		return fmt.Sprintf("%.0f s", s)
	}
	if s < 0.1 {
		return "less than 0.1 s"
	}
	return fmt.Sprintf("%.1f s", s)
}

// Joules prints an energy for a warning; Coulombs a charge.
func Joules(x float64) string { return engineering(x, "J") }

// Coulombs prints a charge for a warning.
func Coulombs(x float64) string { return engineering(x, "C") }

func engineering(x float64, unit string) string {
	for _, p := range []struct {
		factor float64
		prefix string
	}{{1e3, "k"}, {1, ""}, {1e-3, "m"}, {1e-6, "µ"}} {
		if x >= p.factor {
			return fmt.Sprintf("%.3g %s%s", x/p.factor, p.prefix, unit)
		}
	}
	return fmt.Sprintf("%.2g %s", x, unit)
}
