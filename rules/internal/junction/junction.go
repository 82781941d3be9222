// Package junction brings a junction's reverse current to the voltage and temperature at which a limit holds.
//
// Leakage doubles each 10 K; how steeply, for one part, lies between a doubling per 8 and per 11 K, and that range is carried as the rule's
// uncertainty. Voltage only bounds: at a higher voltage it leaks no less. A reading taken hot and scaled down can refute and never prove.
package junction

import (
	"fmt"
	"math"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// The reference temperature of limits, how far from it the law is used, and from where on a part counts as hot, °C and K. The reach is
// recommended beside the law; that a part above 30 °C is warmer than a room is the house's.
const (
	Reference = 25.0
	Reach     = 25.0
	HotAbove  = 30.0
	Room      = 5.0 // half-width, K, of what a room may be where no temperature was stated (house)
)

// doubling, quickest and slowest are the kelvins in which leakage doubles.
const doubling, quickest, slowest = 10.0, 8.0, 11.0

// DoublingSource is where the law comes from.
var DoublingSource = screening.Source{
	Document: "textbooks: reverse current doubles each 10 K; 8 to 11 K as its range is from memory", Status: screening.Published,
}

// Rule says how strictly a reading is taken.
type Rule struct {
	AnyVoltage      bool    // the limit is a trade rule that holds at whatever voltage was stated, from LeastVoltage up
	LeastVoltage    float64 // V
	NeedTemperature bool    // germanium: without a stated temperature the reading says nothing
}

// Scale returns a reverse current, amperes, brought from one temperature to another, °C, when it doubles every perOctave kelvin.
func Scale(i, from, to, perOctave float64) float64 { return i * math.Exp2((to-from)/perOctave) }

// Bring brings a reverse current to the limit's voltage and to 25 °C.
func Bring(part screening.Part, r screening.Reading, l screening.Limit, rule Rule) screening.Conversion {
	c := screening.Conversion{OK: true, Reading: r, Source: DoublingSource}
	if why := toVoltage(&c, r, l, rule); why != "" {
		return screening.Conversion{Why: why}
	}
	if why := toReference(&c, part, r, l, rule); why != "" {
		return screening.Conversion{Why: why}
	}
	c.Reading.At = l.At
	c.Reading.Rule = c.Rule
	return c
}

func toVoltage(c *screening.Conversion, r screening.Reading, l screening.Limit, rule Rule) (why string) {
	want, asked := l.At.Get(screening.Voltage)
	got, stated := r.At.Get(screening.Voltage)
	switch {
	case !asked:
		return ""
	case !stated:
		return "the reverse voltage of the reading is not stated: " + string(l.On) + "@" + volts(want) + "=…"
	case rule.AnyVoltage && got >= rule.LeastVoltage:
		if math.Abs(got/want-1) > 0.02 {
			c.Rule = "the limit holds at whatever voltage is stated"
		}
		return ""
	case rule.AnyVoltage:
		return "taken at " + volts(got) + ", which shows nothing; at least " + volts(rule.LeastVoltage) + " is needed"
	case math.Abs(got/want-1) <= 0.02:
		return ""
	case got > want && r.Sense != quantity.AtLeast:
		c.Reading.Sense, c.Rule = quantity.AtMost, "at "+volts(want)+" it leaks no more than at "+volts(got)
		return ""
	case got < want && r.Sense != quantity.AtMost:
		c.Reading.Sense, c.Rule = quantity.AtLeast, "at "+volts(want)+" it leaks no less than at "+volts(got)
		return ""
	}
	return "taken at " + volts(got) + ", which says nothing of " + volts(want)
}

func volts(x float64) string { return quantity.Format(x, quantity.Volt, 0) }

// toReference applies the temperature law to what toVoltage left in c.
func toReference(c *screening.Conversion, part screening.Part, r screening.Reading, l screening.Limit, rule Rule) (why string) {
	t, stated := r.At.Get(screening.PartTemperature)
	switch {
	case !stated && rule.NeedTemperature:
		return "germanium leakage doubles about every 10 K: state the part's temperature (temperature=22C)"
	case !stated:
		c.U = r.Value * (Scale(1, Reference-Room, Reference, doubling) - 1) / math.Sqrt(3)
		c.Reading.U = math.Hypot(r.U, c.U)
		c.Rule = join(c.Rule, fmt.Sprintf("no temperature stated: taken as a room's, %.0f ± %.0f °C", Reference, Room))
		return ""
	case math.Abs(t-Reference) > Reach:
		return fmt.Sprintf("taken at %.0f °C: leakage is brought to 25 °C only from within %.0f K; measure between 0 and 50 °C", t, Reach)
	case math.Abs(t-Reference) <= 0.5:
		return ""
	case t > HotAbove && c.Reading.Sense != quantity.AtLeast && r.Value+2*r.U <= l.High:
		// It clears the limit as it stands, and cooler it leaks less.
		c.Reading.Sense = quantity.AtMost
		c.Rule = join(c.Rule, fmt.Sprintf("at 25 °C it leaks less than at %.0f °C", t))
		return ""
	}
	factor := Scale(1, t, Reference, doubling)
	a, b := Scale(1, t, Reference, quickest), Scale(1, t, Reference, slowest)
	law := r.Value * math.Max(math.Abs(a-factor), math.Abs(b-factor)) / math.Sqrt(3)
	thermometer := r.Value * factor * math.Ln2 / doubling * temperatureUncertainty(part)
	c.U = math.Hypot(law, thermometer)
	c.Reading.Value = r.Value * factor
	c.Reading.U = math.Hypot(r.U*factor, c.U)
	c.NeverPasses = t > HotAbove
	c.Rule = join(c.Rule, fmt.Sprintf("×%.2f from %.0f °C to 25 °C (2 per 10 K; %.2f to %.2f for 8 to 11 K)",
		factor, t, math.Min(a, b), math.Max(a, b)))
	if c.NeverPasses {
		c.Rule += "; let it cool to the room and measure again"
	}
	return ""
}

func join(a, b string) string {
	if a == "" {
		return b
	}
	return a + "; " + b
}

// temperatureUncertainty returns the standard uncertainty of the part's temperature, K: the ambient reading's, else the assumed thermometer's.
func temperatureUncertainty(part screening.Part) float64 {
	if t, ok := part.Ambient(); ok && t.U > 0 {
		return t.U
	}
	m := screening.AssumedMeter()
	return m.Uncertainty(screening.Reading{Of: screening.Temperature.Name, Unit: screening.Temperature.Unit})
}
