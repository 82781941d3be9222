package oxide

import (
	"fmt"
	"math"
	"time"

	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var (
	mainsDoubled  = screening.Fit{screening.Frequency: {Low: 0.8, High: 1.25}}
	nearlyAtRated = screening.Fit{
		screening.Voltage: {Low: 0.97, High: 1.03}, screening.After: {Low: 0.9, High: 1.1}, screening.PartTemperature: {Low: 0.75, High: 1.25},
	}
)

// Bench lists what is measured, the quick readings that could reject first.
func Bench() []screening.Field {
	return append([]screening.Field{
		capacitor.CapacitanceReading("capacitance=9.7uF", "discharged, out of circuit; 100 or 120 Hz where the meter offers it", capacitor.AnyFrequency),
		{
			Definition: screening.Resistance, Example: "resistance=OL", Effort: 20 * time.Second, Band: screening.Span{Low: 0, High: 1e12},
			Help: "ohms range, the meter's plus probe to plus, once it stands still: it climbs while the part charges; OL where it goes over",
		},
		{
			Definition: screening.ESR, Example: "esr@120Hz=2.1", Effort: 10 * time.Second, Fit: mainsDoubled, Band: screening.Span{Low: 0, High: 1e6},
			Help: "say at which frequency: many ESR meters work at 100 kHz, where less is read; touch the probes together first",
		},
		{
			Definition: screening.TanDelta, Example: "tan-delta=0.03", Effort: 15 * time.Second, Fit: mainsDoubled,
			Default: screening.At(screening.Frequency, LossFrequency), Band: screening.Span{Low: 0, High: 1000},
			Help: "also called D or dissipation factor, at 100 or 120 Hz; instead of ESR",
		},
		{
			Definition: screening.Leakage, Example: "leakage@16V,5min=0.2uA", Effort: 6 * time.Minute, UnderVoltage: true, Fit: nearlyAtRated,
			Default: screening.At(screening.PartTemperature, RoomTemperature), Band: screening.Span{Low: 0, High: 10},
			Help: "the current at rated voltage, so many minutes after it stands across the part",
		},
	}, capacitor.Rest()...)
}

var (
	fallsWithFrequency = screening.Source{Document: "ESR falls, or stays, as the frequency rises", Status: screening.CommonPractice}
	leakageRises       = screening.Source{
		Document: "leakage rises with voltage and temperature and falls with time, as the makers' own limits do", Status: screening.CommonPractice,
	}
)

// Convert brings ESR read above 120 Hz, and leakage read at another voltage, time or temperature, to a limit. Both rules only bound.
func (r *Rules) Convert(_ screening.Part, x screening.Reading, l screening.Limit) screening.Conversion {
	switch l.On {
	case screening.ESR.Name:
		return convertESR(x, l)
	case screening.TanDelta.Name:
		return screening.Conversion{Why: "tan δ holds at 100 or 120 Hz: measure it, or ESR, there"}
	case screening.Leakage.Name:
		return convertLeakage(x, l)
	}
	return screening.Conversion{}
}

// convertESR: above the limit's frequency no more is read than at it, so such a reading can show a part bad, not good.
func convertESR(r screening.Reading, l screening.Limit) screening.Conversion {
	want, _ := l.At.Get(screening.Frequency)
	hertz, stated := r.At.Get(screening.Frequency)
	at := quantity.Format(want, quantity.Hertz, 0)
	switch {
	case !stated:
		return screening.Conversion{Why: "say at which frequency the ESR was read: esr@120Hz=… or esr@100kHz=…"}
	case hertz <= want || r.Sense == quantity.AtMost || r.Value <= l.High:
		return screening.Conversion{Why: fmt.Sprintf("read at %s, which can show this part bad, not good; measure it at %s",
			quantity.Format(hertz, quantity.Hertz, 0), at)}
	}
	c := screening.Conversion{OK: true, Reading: r, Source: fallsWithFrequency}
	c.Reading.At, c.Reading.Sense = r.At.With(screening.Frequency, want), quantity.AtLeast
	c.Rule = fmt.Sprintf("ESR at %s is at least what it is at %s", at, quantity.Format(hertz, quantity.Hertz, 0))
	c.Reading.Rule = c.Rule
	return c
}

// convertLeakage: at a lower voltage, later or colder, less flows than at the limit's point: such a reading can show a part bad, not good.
// At a higher voltage, sooner or warmer, it is the other way round.
func convertLeakage(r screening.Reading, l screening.Limit) screening.Conversion {
	volts, hasVolts := r.At.Get(screening.Voltage)
	rated, _ := l.At.Get(screening.Voltage)
	want, timed := l.At.Get(screening.After)
	after, hasAfter := r.At.Get(screening.After)
	if !hasVolts || timed && !hasAfter {
		return screening.Conversion{Why: fmt.Sprintf("say at which voltage and after how long: leakage@%gV,%gmin=…", rated, math.Max(want/60, 1))}
	}
	side := off(volts, rated, nearlyAtRated[screening.Voltage])
	more, less := side > 0, side < 0
	if timed {
		late := off(after, want, nearlyAtRated[screening.After])
		more, less = more || late < 0, less || late > 0
	}
	if celsius, stated := r.At.Get(screening.PartTemperature); stated && l.At.Has(screening.PartTemperature) {
		warm := off(celsius, RoomTemperature, nearlyAtRated[screening.PartTemperature])
		more, less = more || warm > 0, less || warm < 0
	}
	taken := "taken at " + r.At.String()
	switch {
	case more == less:
		return screening.Conversion{Why: taken + ": this bounds the leakage on neither side"}
	case more && (r.Sense == quantity.AtLeast || r.Value > l.High):
		return screening.Conversion{Why: "a reading at a higher voltage, sooner or warmer can show it good, not bad; this one does not"}
	case less && (r.Sense == quantity.AtMost || r.Value <= l.High):
		return screening.Conversion{Why: "a reading at a lower voltage, later or colder can show it bad, not good; this one does not"}
	}
	c := screening.Conversion{OK: true, Reading: r, Source: leakageRises}
	c.Reading.At, c.Reading.Sense = l.At, quantity.AtLeast
	if more {
		c.Reading.Sense = quantity.AtMost
	}
	c.Rule = taken + ": it is " + c.Reading.Sense.String() + " this at " + l.At.String()
	c.Reading.Rule = c.Rule
	return c
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
