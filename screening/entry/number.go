package entry

import (
	"errors"
	"strings"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// number reads one value of a characteristic. A comma is a decimal comma where the file's delimiter leaves it to be nothing else, and after a
// lone zero, which begins no thousands: 0,061.
func (p *parser) number(d screening.Definition, text string) (quantity.Value, error) {
	if (p.decimalComma || zeroBeforeComma(text)) && strings.Count(text, ",") == 1 && !strings.Contains(text, ".") {
		text = strings.Replace(text, ",", ".", 1)
	}
	v, err := quantity.Parse(text, d.Unit)
	if err != nil {
		return v, named(d, err)
	}
	if v.Over {
		return v, problem(string(d.Name), "%s is what a meter shows above its range, not a value", shown(text))
	}
	return v, nil
}

func zeroBeforeComma(text string) bool {
	before, _, _ := strings.Cut(strings.TrimLeft(text, "<>=≤≥+- "), ",")
	return before == "0"
}

// named says of which characteristic a value is wrong. A value of another unit is the commonest slip: the error names what it is and what
// it should be.
func named(d screening.Definition, err error) error {
	var q *quantity.Error
	if !errors.As(err, &q) {
		return problem(string(d.Name), "%s", err)
	}
	if len(q.Meanings) > 0 {
		return &Error{Of: string(d.Name), Problem: shown(q.Text) + " " + q.Problem, Meanings: q.Meanings}
	}
	said := q.Problem
	if !strings.Contains(d.Unit.Noun(), string(d.Name)) {
		said = strings.Replace(said, "; want ", "; "+string(d.Name)+" is ", 1)
	}
	return problem(string(d.Name), "%s %s", shown(q.Text), said)
}

// plain reads a value that is neither a bound nor over-range.
func plain(text string, unit quantity.Unit) (float64, error) {
	v, err := quantity.Parse(text, unit)
	switch {
	case err != nil:
		return 0, err
	case v.Over || v.Sense != quantity.Exactly:
		return 0, problem("", "%s is a bound, not a value", shown(text))
	}
	return v.Number, nil
}

// meanings are the values that a text without a known unit could be.
type meanings []quantity.Value

// in returns the meaning that has the unit.
func (m meanings) in(unit quantity.Unit) (quantity.Value, bool) {
	for _, v := range m {
		if v.Unit == unit {
			return v, true
		}
	}
	return quantity.Value{}, false
}

// finite reports whether x is a number.
func finite(x float64) bool { return x-x == 0 }
