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
	Reference  = 25.0
	Reach      = 25.0
	HotAbove   = 30.0
	Room       = 5.0  // half-width, K, of what a room may be where no temperature was stated (house)
	WidestRoom = 10.0 // the same where the worst that it can be must still clear the limit: 15 to 35 °C (house)
)

// Doubling is the kelvins in which leakage doubles; quickest and slowest are the ends of its range.
const Doubling, quickest, slowest = 10.0, 8.0, 11.0

// DoublingSource is where the law comes from.
var DoublingSource = screening.Source{
	Document: "textbooks: reverse current doubles each 10 K; 8 to 11 K as its range is from memory", Status: screening.Published,
}

// StateTemperature says why a reading without its temperature is no evidence.
const StateTemperature = "germanium leakage doubles about every 10 K: let the part lie an hour indoors, do not touch it, and state its " +
	"temperature (temperature=22C)"

// Rule says how strictly a reading is taken.
type Rule struct {
	Across          screening.Variable // the voltage that counts; NoVariable is Voltage itself
	Same            screening.Span     // ratio reading/limit within which two voltages are the same; zero is within 2 %
	AnyVoltage      bool               // the limit is a trade rule that holds at whatever voltage was stated, from LeastVoltage up
	LeastVoltage    float64            // V
	NeedTemperature bool               // germanium: without a stated temperature the reading says nothing
	ClearsAnyRoom   bool               // but for NeedTemperature: one that clears the limit in the coldest room passes all the same
	SeenCool        bool               // a reading taken hot never passes, not even where it clears the limit as it stands
}

// Scale returns a reverse current, amperes, brought from one temperature to another, °C, when it doubles every perOctave kelvin.
func Scale(i, from, to, perOctave float64) float64 { return i * math.Exp2((to-from)/perOctave) }

// Bring brings a reverse current to the limit's voltage and to 25 °C.
func Bring(part screening.Part, r screening.Reading, l screening.Limit, rule Rule) screening.Conversion {
	if rule.Across == screening.NoVariable {
		rule.Across = screening.Voltage
	}
	if rule.Same == (screening.Span{}) {
		rule.Same = screening.Span{Low: 0.98, High: 1.02}
	}
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
	want, asked := l.At.Get(rule.Across)
	got, stated := r.At.Get(rule.Across)
	ratio := got / want
	switch {
	case !asked:
		return ""
	case !stated:
		return "the voltage of the reading is not stated: " + string(l.On) + "@" + volts(want) + "=…"
	case ratio >= rule.Same.Low && ratio <= rule.Same.High:
		return ""
	case rule.AnyVoltage && got >= rule.LeastVoltage:
		c.Rule = "the limit holds at whatever voltage is stated"
		return ""
	case rule.AnyVoltage && (r.Sense == quantity.AtMost || r.Value <= l.High):
		return "taken at " + volts(got) + ", which shows nothing; at least " + volts(rule.LeastVoltage) + " is needed"
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
	case !stated:
		return inARoom(c, r, l, rule)
	case math.Abs(t-Reference) > Reach:
		return fmt.Sprintf("taken at %.0f °C: leakage is brought to 25 °C only from within %.0f K; measure between 0 and 50 °C", t, Reach)
	case math.Abs(t-Reference) <= 0.5:
		return ""
	case t > HotAbove && !rule.SeenCool && c.Reading.Sense != quantity.AtLeast && r.Value+2*r.U <= l.High:
		// It clears the limit as it stands, and cooler it leaks less.
		c.Reading.Sense = quantity.AtMost
		c.Rule = join(c.Rule, fmt.Sprintf("at 25 °C it leaks less than at %.0f °C", t))
		return ""
	}
	factor := Scale(1, t, Reference, Doubling)
	a, b := Scale(1, t, Reference, quickest), Scale(1, t, Reference, slowest)
	law := r.Value * math.Max(math.Abs(a-factor), math.Abs(b-factor)) / math.Sqrt(3)
	thermometer := r.Value * factor * math.Ln2 / Doubling * temperatureUncertainty(part)
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

// inARoom takes a reading without a temperature as taken in a room. Where the temperature matters too much for that, only a reading that
// clears the limit even if the room was as cold as a room can be counts, and only as an upper bound.
func inARoom(c *screening.Conversion, r screening.Reading, l screening.Limit, rule Rule) (why string) {
	if !rule.NeedTemperature {
		c.U = r.Value * (Scale(1, Reference-Room, Reference, Doubling) - 1) / math.Sqrt(3)
		c.Reading.U = math.Hypot(r.U, c.U)
		c.Rule = join(c.Rule, fmt.Sprintf("no temperature stated: taken as a room's, %.0f ± %.0f °C", Reference, Room))
		return ""
	}
	worst := Scale(1, Reference-WidestRoom, Reference, quickest)
	if !rule.ClearsAnyRoom || c.Reading.Sense == quantity.AtLeast || worst*(r.Value+2*r.U) > l.High {
		return StateTemperature
	}
	c.Reading.Value, c.Reading.U, c.Reading.Sense = worst*r.Value, worst*r.U, quantity.AtMost
	c.Rule = join(c.Rule, fmt.Sprintf("no temperature stated: assumed a room's, %.0f to %.0f °C; at 25 °C that is at most ×%.2f "+
		"(2 per %.0f K)", Reference-WidestRoom, Reference+WidestRoom, worst, quickest))
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
