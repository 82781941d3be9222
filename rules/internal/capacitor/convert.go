package capacitor

import (
	"fmt"
	"math"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

var (
	lossBound = screening.Source{
		Document: "tan δ = ω·R·C of the leads and plates, 1/(ω·R·C) of a leak, and the dielectric's own, which moves more slowly than either",
		Status:   screening.Derived,
	}
	insulationFalls = screening.Source{
		Document: "insulation falls with voltage and rises with the time it is applied", Status: screening.CommonPractice,
	}
)

// Convert brings loss read at another frequency and insulation read at another voltage or time to a limit. Both rules only bound. It serves as
// [screening.Rulebook.Convert].
func Convert(_ screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	switch l.On {
	case screening.TanDelta.Name:
		return convertLoss(r, l)
	case screening.InsulationResistance.Name, screening.Leakage.Name:
		return convertInsulation(r, l)
	}
	return screening.Conversion{}
}

// convertLoss: between two frequencies tan δ changes at most in their ratio, either way, so that a reading times the ratio is the most that
// it can be at the limit's. It can pass a limit, never fail it.
func convertLoss(r screening.Reading, l screening.Limit) screening.Conversion {
	want, _ := l.At.Get(screening.Frequency)
	got, stated := r.At.Get(screening.Frequency)
	if !stated || got <= 0 {
		return screening.Conversion{}
	}
	ratio := math.Max(want/got, got/want)
	if r.Sense == quantity.AtLeast || ratio*(r.Value+r.Spec) > l.High {
		return screening.Conversion{Why: fmt.Sprintf("read at %s; it may be up to %s times as much at %s: measure it there",
			quantity.Format(got, quantity.Hertz, 0), fmt.Sprintf("%.3g", ratio), quantity.Format(want, quantity.Hertz, 0))}
	}
	c := screening.Conversion{OK: true, Reading: r, Source: lossBound}
	c.Reading.At = r.At.With(screening.Frequency, want)
	c.Reading.Sense, c.Reading.Value, c.Reading.U = quantity.AtMost, ratio*(r.Value+r.Spec), 0
	c.Rule = fmt.Sprintf("tan δ at %s is at most %.3g times what it is at %s", quantity.Format(want, quantity.Hertz, 0), ratio,
		quantity.Format(got, quantity.Hertz, 0))
	c.Reading.Rule = c.Rule
	return c
}

// convertInsulation: at a lower voltage, or longer after it was applied, a part insulates at least as well as at the limit's point: such a
// reading can show it bad, not good. At a higher voltage, or sooner, it is the other way round.
func convertInsulation(r screening.Reading, l screening.Limit) screening.Conversion {
	volts, stated := r.At.Get(screening.Voltage)
	after, timed := r.At.Get(screening.After)
	rated, _ := l.At.Get(screening.Voltage)
	limitAfter, _ := l.At.Get(screening.After)
	if !stated || !timed {
		return screening.Conversion{Why: fmt.Sprintf("say at which voltage: %s@%gV=…", l.On, rated)}
	}
	kind := off(volts, rated, atVolts[screening.Voltage])
	when := off(after, limitAfter, atVolts[screening.After])
	flatters, strains := kind < 0 || when > 0, kind > 0 || when < 0
	current := l.On == screening.Leakage.Name
	beyond := !current && r.Value < l.Low || current && r.Value > l.High
	// A reading that flatters is the best case, one that strains the worst.
	best, worst := quantity.AtMost, quantity.AtLeast
	if current {
		best, worst = worst, best
	}
	sense := best
	switch at := quantity.Format(rated, quantity.Volt, 0); {
	case flatters == strains:
		return screening.Conversion{Why: "taken at " + r.At.String() + ": this bounds it on neither side"}
	case flatters && (!beyond || r.Sense == worst):
		return screening.Conversion{Why: fmt.Sprintf("at %s it can show the part bad, not good; measure at %s", quantity.Format(volts, quantity.Volt, 0), at)}
	case strains && (beyond || r.Sense == best):
		return screening.Conversion{Why: "taken at " + r.At.String() + " it can show the part good, not bad; this one does not"}
	case strains:
		sense = worst
	}
	c := screening.Conversion{OK: true, Reading: r, Source: insulationFalls}
	c.Reading.At, c.Reading.Sense = l.At, sense
	c.Rule = "taken at " + r.At.String() + ": it is " + sense.String() + " this at " + l.At.String()
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
