package electrolytic

import (
	"fmt"
	"math"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Where an ESR reading above 120 Hz may count as evidence: the ratio of 4 between 120 Hz and 100 kHz holds up to 50 V and above 33 µF; at 1 kHz
// it is about half of that, so 4 is safe there too (derived: esr-ratio of figures.csv).
const (
	esrRuleVolts = 50
	esrRuleFarad = 33e-6
	lowestKilo   = 900.0
	highestESR   = 110e3
)

// How far from room temperature a leakage reading may be brought over, K (house).
const leakageReach = 25

// convert brings a reading to a limit's condition.
func convert(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	switch l.On {
	case screening.ESR.Name:
		return convertESR(part, r, l)
	case screening.TanDelta.Name:
		return screening.Conversion{Why: "tan δ holds at 100 or 120 Hz only: measure it, or ESR, there"}
	case screening.Leakage.Name, LeakageReversed.Name:
		return convertLeakage(r, l)
	}
	return screening.Conversion{}
}

var (
	fallsWithFrequency = screening.Source{Document: "general article \"Aluminum electrolytic capacitor\"", Clause: "ESR falls with frequency", Status: screening.Published}
	leakageRises       = screening.Source{
		Document: "general article \"Aluminum electrolytic capacitor\"", Clause: "leakage rises with voltage and temperature, falls with time",
		Status: screening.Published,
	}
)

// convertESR: ESR falls with frequency, so a reading above 120 Hz is the least that the part can have there; above the limit, it fails. At or
// under half of the limit of a new part it is evidence for serviceable, since ESR at 120 Hz is at most four times that at 100 kHz.
func convertESR(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	want, _ := l.At.Get(screening.Frequency)
	hertz, stated := r.At.Get(screening.Frequency)
	switch {
	case !stated:
		return screening.Conversion{Why: "say at which frequency the ESR was read: esr@120Hz=… or esr@100kHz=…"}
	case hertz <= want:
		return screening.Conversion{Why: fmt.Sprintf("read at %s; measure ESR at %s", hz(hertz), hz(want))}
	}
	c := screening.Conversion{OK: true, Reading: r, Source: fallsWithFrequency}
	c.Reading.At = r.At.With(screening.Frequency, want)
	if r.Sense != quantity.AtMost && r.Value > l.High {
		c.Reading.Sense = quantity.AtLeast
		c.Rule = fmt.Sprintf("ESR at %s is at least what it is at %s", hz(want), hz(hertz))
		c.Reading.Rule = c.Rule
		return c
	}
	ratio := named("esr-ratio")
	if r.Sense != quantity.AtLeast && l.Grade == screening.Serviceable && esrEvidence(part, l.Section, hertz) && ratio.value*r.Value <= l.High {
		c.Reading.Sense = quantity.AtMost
		c.Reading.Value, c.Reading.U = ratio.value*r.Value, ratio.value*r.U
		c.Source = ratio.source
		c.Rule = fmt.Sprintf("ESR at %s is at most %g times what it is at %s", hz(want), ratio.value, hz(hertz))
		c.Reading.Rule = c.Rule
		return c
	}
	return screening.Conversion{Why: fmt.Sprintf("at %s ESR is two to eight times less than at %s, so this reading cannot pass the limit; measure it at %s",
		hz(hertz), hz(want), hz(want))}
}

func hz(x float64) string { return quantity.Format(x, quantity.Hertz, 0) }

// esrEvidence reports whether the ratio rule's range of validity holds for a section.
func esrEvidence(part screening.Part, section string, hertz float64) bool {
	volts, ok1 := part.Claim.Nominal(screening.RatedVoltage.Name, section)
	farad, ok2 := part.Claim.Nominal(screening.Capacitance.Name, section)
	return ok1 && ok2 && volts <= esrRuleVolts && farad > esrRuleFarad && hertz >= lowestKilo && hertz <= highestESR
}

// convertLeakage: the current rises with voltage and temperature and falls with time. A reading at a lower voltage, later or colder is the
// least that the limit's point would show and can only fail; at a higher voltage, earlier or hotter it is the most and can only pass. Where
// only the temperature is off, a stated factor brings it over.
func convertLeakage(r screening.Reading, l screening.Limit) screening.Conversion {
	volts, hasVolts := r.At.Get(screening.Voltage)
	after, hasAfter := r.At.Get(screening.After)
	rated, _ := l.At.Get(screening.Voltage)
	limitAfter, _ := l.At.Get(screening.After)
	celsius, _ := r.At.Get(screening.PartTemperature)
	if !hasVolts || !hasAfter {
		return screening.Conversion{Why: fmt.Sprintf("say at which voltage and after how long: %s@%s,%gmin=…", r.Of,
			compact(rated, "V"), limitAfter/60)}
	}
	if math.Abs(celsius-roomTemperature) > leakageReach {
		return screening.Conversion{Why: fmt.Sprintf("read at %g °C; leakage can be compared between %d and %d °C", celsius,
			roomTemperature-leakageReach, roomTemperature+leakageReach)}
	}
	most := off(volts, rated, nearlyAtRated[screening.Voltage]) > 0 || off(after, limitAfter, nearlyAtRated[screening.After]) < 0
	least := off(volts, rated, nearlyAtRated[screening.Voltage]) < 0 || off(after, limitAfter, nearlyAtRated[screening.After]) > 0
	warm := off(celsius, roomTemperature, nearlyAtRated[screening.PartTemperature])
	if !most && !least {
		return scaleLeakage(r, l, celsius, warm)
	}
	most, least = most || warm > 0, least || warm < 0
	if most && least {
		return screening.Conversion{Why: "taken at " + r.At.String() + ": this bounds the leakage on neither side"}
	}
	return boundLeakage(r, l, most)
}

// off says on which side of a span of ratios a value lies: −1 below, 0 within, +1 above.
func off(x, want float64, span screening.Span) int {
	switch ratio := x / want; {
	case ratio < span.Low:
		return -1
	case ratio > span.High:
		return 1
	}
	return 0
}

// boundLeakage takes a reading as the most, or the least, that the limit's point would show. Where that cannot settle the limit it says so.
func boundLeakage(r screening.Reading, l screening.Limit, most bool) screening.Conversion {
	switch {
	case most && (r.Sense == quantity.AtLeast || r.Value > l.High):
		return screening.Conversion{Why: "a reading at a higher voltage, sooner or warmer can show it good, not bad; this one does not"}
	case !most && (r.Sense == quantity.AtMost || r.Value <= l.High):
		return screening.Conversion{Why: "a reading at a lower voltage, later or colder can show it bad, not good; this one does not"}
	}
	c := screening.Conversion{OK: true, Reading: r, Source: leakageRises}
	c.Reading.At = l.At
	c.Reading.Sense, c.Rule = quantity.AtLeast, "at least"
	if most {
		c.Reading.Sense, c.Rule = quantity.AtMost, "at most"
	}
	c.Rule = "taken at " + r.At.String() + ": it is " + c.Rule + " this at " + l.At.String()
	c.Reading.Rule = c.Rule
	return c
}

// scaleLeakage brings a reading at rated voltage from another temperature to 20 °C. A reading that settles the limit as it stands is left
// unscaled: too much already when cold, little enough even when hot. A hot reading scaled down alone never passes.
func scaleLeakage(r screening.Reading, l screening.Limit, celsius float64, warm int) screening.Conversion {
	if warm > 0 && r.Value <= l.High || warm < 0 && r.Value > l.High {
		return boundLeakage(r, l, warm > 0)
	}
	low, high := named("leakage-doubling-low"), named("leakage-doubling-high")
	perKelvin := (math.Log(low.value) + math.Log(high.value)) / 2 / 40
	spread := (math.Log(high.value) - math.Log(low.value)) / 2 / 40 / math.Sqrt(3)
	kelvin := celsius - roomTemperature
	factor := math.Exp(-perKelvin * kelvin)
	c := screening.Conversion{OK: true, Reading: r, Source: low.source, NeverPasses: warm > 0}
	c.Source.Status = screening.Derived
	c.Reading.At = l.At
	c.Reading.Value = r.Value * factor
	c.U = c.Reading.Value * spread * math.Abs(kelvin)
	c.Reading.U = math.Hypot(r.U*factor, c.U)
	c.Rule = fmt.Sprintf("×%.2f from %g °C to %d °C (2 to 3 times from 20 to 60 °C)", factor, celsius, roomTemperature)
	c.Reading.Rule = c.Rule
	return c
}

func compact(x float64, unit string) string { return fmt.Sprintf("%g%s", x, unit) }
