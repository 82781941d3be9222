package entry

import (
	"math"
	"strings"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Rating reads what a data sheet says of one characteristic as tables keep it: VALUE[@COND,…], where VALUE is x, L..H, L.. or ..H:
// "..44mohm@vgs=10V,id=16A". Conditions after the "@" come before those of at, which the column's header stated. suffix is the unit of a
// bare number, "" for none. Typed keeps the text. Errors are of type [*Error].
func Rating(f screening.Field, at screening.Condition, text, suffix string) (screening.Rating, error) {
	p := parser{quiet: true}
	return p.sheetRating(f, at, text, suffix)
}

func (p *parser) sheetRating(f screening.Field, at screening.Condition, text, suffix string) (screening.Rating, error) {
	text, err := tidy(text)
	if err != nil {
		return screening.Rating{}, err
	}
	value, cond, hasCond := strings.Cut(text, "@")
	value = strings.TrimSpace(value)
	if value == "" {
		return screening.Rating{}, problem(string(f.Name), "the value is missing")
	}
	if f.Unit != quantity.Ratio {
		f.AcceptRange = nil // a bare 400V on a part bears that much or more; in a table it is the figure
	}
	t := target{what: toRating, field: f, at: at, name: string(f.Name)}
	if hasCond {
		own, err := Condition(f.Definition, cond)
		if err != nil {
			return screening.Rating{}, err
		}
		t.at = own.Fill(at)
	}
	if suffix != "" {
		value = withSuffix(value, suffix)
	}
	var r screening.Rating
	if f.Unit == quantity.Ratio && f.AcceptRange == nil && !strings.Contains(value, "..") && !strings.ContainsAny(value, "+-±/<>≤≥") {
		// A percentage of something else, such as a transfer ratio: 100% is a value here and no tolerance of ±100 %.
		n, err := p.number(f.Definition, value)
		if err != nil {
			return r, err
		}
		r = screening.NominalRating(f.Definition, n.Number)
		r.At = t.at
	} else if r, err = p.rating(&t, value); err != nil {
		return r, err
	}
	if math.IsNaN(r.Low) || math.IsNaN(r.High) || r.Low > r.High {
		return r, problem(string(f.Name), "%s is no range", shown(value))
	}
	r.Typed = text
	return r, nil
}
