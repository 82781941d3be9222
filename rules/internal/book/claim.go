package book

import (
	"fmt"
	"math"
	"strings"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Trait defines a characteristic that is claimed in words.
func Trait(name, label string) screening.Definition {
	return screening.Definition{Name: screening.Characteristic(name), Symbol: name, Label: label}
}

// CaseField is the outline of a part with leads; example is what to type.
func CaseField(example string) screening.Field {
	return screening.Field{Definition: Trait(screening.TraitCase, "case"), Trait: true, Example: example, Help: "the outline"}
}

// DatedField is the year or decade in which a part was made.
func DatedField() screening.Field {
	return screening.Field{
		Definition: Trait(screening.TraitDated, "maker's date"), Trait: true, Example: "dated=1974", Help: "year or decade of making",
	}
}

// SourceOf is the source of a rating: its table's, or, where it has none, the part's own claim.
func SourceOf(r *screening.Rating) screening.Source {
	if r.Source.Status != screening.NoStatus {
		return r.Source
	}
	return screening.Source{Document: "claimed for the part", Clause: string(r.Of), Status: screening.Published}
}

// CheckStands refuses a rating that must say what a part stands and does not: no lower bound, or none above zero.
func CheckStands(c screening.Claim, ratings ...*screening.Definition) error {
	for i := range c.Ratings {
		r := &c.Ratings[i]
		for _, d := range ratings {
			if r.Of == d.Name && !(r.Low > 0 && !math.IsInf(r.Low, 1)) {
				return fmt.Errorf("%s: %s does not say what it stands; a rating is above zero, such as rated:%s=5%s", d.Name, r, d.Name, d.Unit.ASCII())
			}
		}
	}
	return nil
}

// Note is a reason that a person should know and no script needs to tell from others.
func Note(of screening.Characteristic, format string, args ...any) screening.Reason {
	return screening.Reason{Code: screening.CodeNote, Of: of, Text: fmt.Sprintf(format, args...)}
}

// Without returns the ratings that are not of this characteristic.
func Without(ratings []screening.Rating, of screening.Characteristic) []screening.Rating {
	kept := make([]screening.Rating, 0, len(ratings)+1)
	for i := range ratings {
		if ratings[i].Of != of {
			kept = append(kept, ratings[i])
		}
	}
	return kept
}

// Version names the state of a rulebook: its edition, which goes up when a rule in code changes, and a print of its tables, which changes by
// itself.
func Version(kind screening.Kind, edition string, tables ...string) string {
	return string(kind) + "-" + edition + "-" + Fingerprint(tables...)
}

// AtLeastIn takes a bare value that states its unit as "at least so much": what stands on a part is what it claims to bear. symbol is the
// unit's, without which the word is not taken.
func AtLeastIn(unit quantity.Unit, symbol string) func(string) (low, high float64, ok bool) {
	return func(word string) (low, high float64, ok bool) {
		if !strings.HasSuffix(word, symbol) {
			return 0, 0, false
		}
		v, err := quantity.Parse(word, unit)
		if err != nil || v.Sense != quantity.Exactly || v.Over || v.Number <= 0 {
			return 0, 0, false
		}
		return v.Number, math.Inf(1), true
	}
}
