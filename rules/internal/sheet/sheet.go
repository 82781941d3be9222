// Package sheet is how a rulebook takes type numbers: the field that asks for one, and what its row in the type table adds to a claim.
package sheet

import (
	"math"
	"slices"

	"goodbin/rules/internal/book"
	"goodbin/rules/types"
	"goodbin/screening"
)

// Field is the claim of a type number; example is one that the table holds.
func Field(t *types.Table, kind screening.Kind, example string) screening.Field {
	return screening.Field{
		Definition: book.Trait(screening.TraitType, "type"), Trait: true, Example: example,
		Help: "the type number as printed; a known one says all the rest",
		AcceptText: func(word string) (string, bool) {
			row, ok := t.Lookup(kind, word)
			return row.Type, ok
		},
	}
}

// Complete adds to a claim what the row of its type says and the claim does not. hint is what to claim of a type that the table does not
// hold, for the note that says so.
func Complete(t *types.Table, kind screening.Kind, c screening.Claim, hint string) (screening.Claim, []screening.Reason) {
	name := c.Trait(screening.TraitType)
	if name == "" {
		return c, nil
	}
	row, ok := t.Lookup(kind, name)
	if !ok {
		return c, []screening.Reason{Unknown(t, kind, c, hint)}
	}
	return fill(c, row), nil
}

// Unknown notes that a claim's type is in no table, what to claim of it instead, and what there is to ask.
func Unknown(t *types.Table, kind screening.Kind, c screening.Claim, hint string) screening.Reason {
	return t.UnknownNote("", kind, c, "type "+c.Trait(screening.TraitType)+" is not in the table: claim what its sheet says, such as "+hint)
}

func fill(c screening.Claim, row types.Row) screening.Claim {
	own := c
	c.Ratings = slices.Grow(slices.Clone(c.Ratings), len(row.Ratings))
	for _, r := range row.Ratings {
		if _, claimed := own.Rating(r.Of, ""); !claimed {
			c.Ratings = append(c.Ratings, r)
		}
	}
	c.Traits = slices.Grow(slices.Clone(c.Traits), len(row.Traits))
	for _, t := range row.Traits {
		switch own.Trait(t.Name) {
		case "":
			c.Traits = append(c.Traits, t)
		default:
			if t.Name == screening.TraitType {
				c = c.WithTrait(t.Name, t.Text)
			}
		}
	}
	return c
}

// Tabled returns what the table promises of a characteristic for the claim's type, and whether it promises anything.
func Tabled(t *types.Table, kind screening.Kind, c screening.Claim, of screening.Characteristic) (screening.Rating, bool) {
	row, ok := t.Lookup(kind, c.Trait(screening.TraitType))
	if !ok {
		return screening.Rating{}, false
	}
	return row.Rating(of)
}

// At returns the first rating of a characteristic that states a condition, and the value of that condition. Ratings without an upper bound
// do not count.
func At(c screening.Claim, of screening.Characteristic, v screening.Variable) (r screening.Rating, x float64, ok bool) {
	for _, r := range c.Ratings {
		if r.Of != of || math.IsInf(r.High, 1) {
			continue
		}
		if x, stated := r.At.Get(v); stated && x > 0 {
			return r, x, true
		}
	}
	return screening.Rating{}, 0, false
}

// Least returns what the part claims at least: its lower bound or nominal, and whether there is one.
func Least(c screening.Claim, of screening.Characteristic) (r screening.Rating, x float64, ok bool) {
	r, ok = c.Rating(of, "")
	return r, r.Low, ok && !math.IsInf(r.Low, 0)
}
