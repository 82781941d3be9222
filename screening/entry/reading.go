package entry

import (
	"math"
	"strconv"
	"strings"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// reading reads the value of a reading: x, ..x, x.., <x, >x, OL, or repeats.
func (p *parser) reading(t *target, text string) (screening.Reading, error) {
	r := screening.Reading{Of: t.field.Name, Section: t.section, At: t.at, Unit: t.field.Unit, Typed: text}
	if isOver(text) {
		over := t.field.Over
		if over.Sense == quantity.Exactly {
			return r, problem(string(t.field.Name), "%s proves nothing here", shown(text)).
				hint("write what the meter's range proves, such as >%s", strings.TrimLeft(exampleOr(t.field, "2"), ".<>="))
		}
		r.Over, r.Sense, r.Value = true, over.Sense, over.Value
		return r, nil
	}
	items, err := splitRepeats(string(t.field.Name), text)
	if err != nil {
		return r, err
	}
	if len(items) == 1 {
		return p.single(&t.field, r, items[0])
	}
	series := make([]screening.Reading, 0, len(items))
	for _, item := range items {
		one := r
		if one, err = p.single(&t.field, one, item); err != nil {
			return r, err
		}
		if one.Sense != quantity.Exactly {
			return r, problem(string(t.field.Name), "%s is a bound, and repeats are values", shown(item))
		}
		series = append(series, one)
	}
	r = screening.Series(series...)
	r.Typed = text
	return r, nil
}

// single reads one value with its sense.
func (p *parser) single(f *screening.Field, r screening.Reading, text string) (screening.Reading, error) {
	value, sense := text, quantity.Exactly
	if v, ok := strings.CutPrefix(value, ".."); ok {
		value, sense = v, quantity.AtMost
	} else if v, ok := strings.CutSuffix(value, ".."); ok {
		value, sense = v, quantity.AtLeast
	}
	if strings.Contains(value, "..") {
		return r, problem(string(f.Name), "%s is a range; a reading is one value, ..x (at most) or x.. (at least)", shown(text)).
			hint("what the part claims is written rated:%s=%s", f.Name, clean(text))
	}
	n, err := p.number(f.Definition, value)
	if err != nil {
		return r, err
	}
	if sense != quantity.Exactly && n.Sense != quantity.Exactly {
		return r, problem(string(f.Name), "%s states its bound twice", shown(text))
	}
	if sense == quantity.Exactly {
		sense = n.Sense
	}
	r.Value, r.Sense, r.Step = n.Number, sense, n.Step
	plausible, err := screening.Plausible(*f, r)
	if err != nil {
		return r, problem(string(f.Name), "%s: %s", shown(text), err)
	}
	return plausible, nil
}

// exampleOr is an example of a field's value alone.
func exampleOr(f screening.Field, otherwise string) string {
	if f.Example == "" {
		return otherwise
	}
	return f.Example[strings.LastIndexByte(f.Example, '=')+1:]
}

// readingText prints a reading as it was understood.
func readingText(f screening.Field, r screening.Reading) string {
	text := f.Label
	if r.Section != "" {
		text += " of section " + r.Section
	}
	text += " " + Value(r)
	if at := r.At.String(); at != "" {
		text += " at " + at
	}
	return text
}

// coarse is how large the last digit of a reading may be against it before Coarse speaks: one digit up to five.
const coarse = 0.2

// Coarse says that a reading was typed with so few digits that its last one alone decides much: "1 kΩ" proves no tolerance where the meter
// showed 1.002. It is "" for any other reading.
func Coarse(r screening.Reading) string {
	if r.Over || r.Sense != quantity.Exactly || len(r.Repeats) > 1 || r.Value == 0 || r.Step < coarse*math.Abs(r.Value)*(1-1e-9) {
		return ""
	}
	return "to the nearest " + quantity.Format(r.Step, r.Unit, 1) + ": type every digit that is shown"
}

// Value prints what a reading says: "2010 µF", "< 0.1 µA", "OL (> 2 MΩ)", "180.7 (mean of 3)".
func Value(r screening.Reading) string {
	v := quantity.Value{Number: r.Value, Unit: r.Unit, Sense: r.Sense, Step: r.Step}
	n := len(r.Repeats)
	if n > 1 {
		v.Step /= 10 // the mean of several is finer than each
	}
	switch text := v.String(); {
	case r.Over:
		return "OL (" + text + ")"
	case n > 1:
		return text + " (mean of " + strconv.Itoa(n) + ")"
	default:
		return text
	}
}

// Coverage is the coverage factor k of the uncertainties that people are shown: ±2 standard uncertainties, about 95 % (JCGM 100, 6.3.3).
const Coverage = 2

// Measured prints what a reading says with its expanded uncertainty: "61 ± 29 mΩ". One that only bounds prints as [Value].
func Measured(r screening.Reading) string {
	if r.Over || r.Sense != quantity.Exactly || !(r.U > 0) {
		return Value(r)
	}
	v := quantity.Value{Number: r.Value, Unit: r.Unit, Step: r.Step}
	if n := len(r.Repeats); n > 1 {
		v.Step /= 10
		return v.PlusMinus(Coverage*r.U) + " (mean of " + strconv.Itoa(n) + ")"
	}
	return v.PlusMinus(Coverage * r.U)
}
