package capacitor

import (
	"fmt"
	"math"
	"slices"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// widestDerived is the relative standard uncertainty beyond which a derived insulation resistance is only a bound: 1/x is no longer about
// normal there (house).
const widestDerived = 0.15

// Derive computes tan δ from ESR and ESR from tan δ where the other was not read at that frequency, and insulation resistance from leakage
// current (U/I) and from self-discharge (τ/C); or says why not. It serves as [screening.Rulebook.Derive].
func Derive(part screening.Part) ([]screening.Reading, []screening.Reason) {
	var derived []screening.Reading
	var why []screening.Reason
	for _, r := range part.Readings {
		var d screening.Reading
		var reason string
		switch r.Of {
		case screening.ESR.Name:
			d, reason = tanDeltaFrom(part, r)
		case screening.TanDelta.Name:
			d, reason = esrFrom(part, r)
		case screening.Leakage.Name:
			d, reason = insulationFromLeakage(r)
		case screening.TimeConstant.Name:
			d, reason = insulationFromTime(part, r)
		default:
			continue
		}
		if r.Of == screening.Leakage.Name && d.Sense == quantity.AtLeast && r.Sense == quantity.Exactly && r.Value > 0 {
			why = append(why, book.Note(r.Of, "a leakage of %s may be off by %s on this meter, so it shows only that insulation is at least %s: type "+
				"every digit, on the lowest range", quantity.Format(r.Value, quantity.Ampere, 3), quantity.Format(r.Spec, quantity.Ampere, 2),
				quantity.Format(d.Value, quantity.Ohm, 2)))
		}
		switch {
		case reason != "":
			why = append(why, book.Note(r.Of, "%s", reason))
		case d.Of != "" && !readThere(part, d):
			derived = append(derived, d)
		}
	}
	return derived, why
}

// readThere reports whether what would be derived was read at the same condition anyway.
func readThere(part screening.Part, d screening.Reading) bool {
	return slices.ContainsFunc(part.Readings, func(r screening.Reading) bool {
		if r.Of != d.Of || r.Section != d.Section {
			return false
		}
		_, _, fits := NearFrequency.Misfit(&r.At, &d.At)
		return fits
	})
}

// capacity is a capacitance to compute with: farad, its standard uncertainty, how far it may be off, and where it is from.
type capacity struct {
	farad, u, spec float64
	name           string
}

// capacitanceOf returns the capacitance to compute with: the one read, else the nominal one with its tolerance as a rectangle.
func capacitanceOf(part screening.Part, section string) (c capacity, ok bool) {
	if r, measured := part.Reading(screening.Capacitance.Name, section); measured && r.Sense == quantity.Exactly && r.Value > 0 {
		return capacity{r.Value, r.U, r.Spec, "capacitance as read"}, true
	}
	c.name = "capacitance as claimed, with its tolerance"
	c.farad, ok = part.Claim.Nominal(screening.Capacitance.Name, section)
	t, _ := part.Claim.Rating(screening.Tolerance.Name, section)
	c.spec = c.farad * math.Max(math.Abs(t.Low), math.Abs(t.High))
	c.u = c.spec / math.Sqrt(3)
	return c, ok && c.farad > 0
}

// scaled returns r as another characteristic, its value times factor, which holds the capacitance as a factor or divisor.
func scaled(r screening.Reading, d screening.Definition, factor float64, c capacity) screening.Reading {
	n := r
	n.Of, n.Unit, n.Value = d.Name, d.Unit, r.Value*factor
	n.U = math.Hypot(r.U*factor, n.Value*c.u/c.farad)
	n.Spec = r.Spec*factor + n.Value*c.spec/c.farad
	n.Repeats, n.Step, n.Typed, n.Over = nil, 0, "", false
	n.From = []screening.Input{
		{Of: r.Of, U: r.U, Sensitivity: factor},
		{Of: screening.Capacitance.Name, Name: c.name, U: c.u, Sensitivity: n.Value / c.farad},
	}
	return n
}

func tanDeltaFrom(part screening.Part, r screening.Reading) (screening.Reading, string) {
	hertz, stated := r.At.Get(screening.Frequency)
	c, ok := capacitanceOf(part, r.Section)
	switch {
	case !stated:
		return screening.Reading{}, "say at which frequency the ESR was read: esr@1kHz=…"
	case !ok || hertz <= 0:
		return screening.Reading{}, ""
	}
	d := scaled(r, screening.TanDelta, TanDeltaOf(1, hertz, c.farad), c)
	d.Rule = fmt.Sprintf("2π·%s·%s·%s", quantity.Format(hertz, quantity.Hertz, 0), Farads(c.farad), quantity.Format(r.Value, quantity.Ohm, 3))
	return d, ""
}

func esrFrom(part screening.Part, r screening.Reading) (screening.Reading, string) {
	hertz, stated := r.At.Get(screening.Frequency)
	c, ok := capacitanceOf(part, r.Section)
	if !stated || !ok || hertz <= 0 {
		return screening.Reading{}, "" // the limit on tan δ itself asks for the frequency
	}
	d := scaled(r, screening.ESR, ESROf(1, hertz, c.farad), c)
	d.Rule = fmt.Sprintf("%.3g/(2π·%s·%s)", r.Value, quantity.Format(hertz, quantity.Hertz, 0), Farads(c.farad))
	return d, ""
}

// insulationFromLeakage: R = U/I. A current that the meter can hardly tell from nothing bounds R from below by U/(I + what the meter may be
// off).
func insulationFromLeakage(r screening.Reading) (screening.Reading, string) {
	volts, stated := r.At.Get(screening.Voltage)
	if !stated || volts <= 0 {
		return screening.Reading{}, "say at which voltage the leakage was read: leakage@100V=…"
	}
	d := r
	d.Of, d.Unit = screening.InsulationResistance.Name, quantity.Ohm
	d.Repeats, d.Step, d.Typed, d.Over = nil, 0, "", false
	d.Rule = fmt.Sprintf("%s/%s", quantity.Format(volts, quantity.Volt, 0), quantity.Format(r.Value, quantity.Ampere, 3))
	most := r.Value + math.Max(r.Spec, 2*r.U)
	switch {
	case r.Sense == quantity.AtLeast && r.Value > 0:
		d.Sense, d.Value = quantity.AtMost, volts/r.Value
		d.U = d.Value * r.U / r.Value
	case most <= 0:
		return screening.Reading{}, "a leakage of exactly nothing is none: type what the meter's last digit would show, as in <0.1uA"
	case r.Sense == quantity.AtMost, tooCoarse(&r):
		d.Sense, d.Value, d.U, d.Spec = quantity.AtLeast, volts/most, 0, 0
		d.Rule = fmt.Sprintf("%s over at most %s", quantity.Format(volts, quantity.Volt, 0), quantity.Format(most, quantity.Ampere, 3))
	default:
		d.Value = volts / r.Value
		d.U, d.Spec = d.Value*r.U/r.Value, d.Value*r.Spec/r.Value
		d.From = []screening.Input{{Of: r.Of, U: r.U, Sensitivity: -d.Value / r.Value}}
	}
	return d, ""
}

// tooCoarse reports whether a current is so near to what its meter may be off that it only bounds the insulation.
func tooCoarse(r *screening.Reading) bool { return r.U > widestDerived*r.Value }

// insulationFromTime: R = τ/C. Dielectric absorption and the air take charge too, so that the part insulates at least so well.
func insulationFromTime(part screening.Part, r screening.Reading) (screening.Reading, string) {
	c, ok := capacitanceOf(part, r.Section)
	if !ok {
		return screening.Reading{}, ""
	}
	if !r.At.Has(screening.Voltage) {
		return screening.Reading{}, "say at which voltage the self-discharge began: time-constant@100V=…"
	}
	d := scaled(r, screening.InsulationResistance, 1/c.farad, c)
	if d.Sense == quantity.Exactly {
		d.Sense = quantity.AtLeast
	}
	d.Rule = fmt.Sprintf("%s/%s", quantity.Format(r.Value, quantity.Second, 3), Farads(c.farad))
	return d, ""
}
