package screening

import (
	"math"
	"slices"
	"strings"

	"goodbin/screening/quantity"
)

// Rating is what a part claims of a characteristic in numbers: a nominal value, a range, a maximum or a minimum.
type Rating struct {
	Of      Characteristic
	Section string // "" for the whole part
	At      Condition
	Unit    quantity.Unit
	Nominal float64 // SI; NaN where only bounds are claimed
	Low     float64 // SI; -Inf where open. Equal to Nominal where only a nominal is claimed
	High    float64 // SI; +Inf where open
	Typed   string  // as printed or typed; "" where a table supplied it
	Source  Source  // where a table supplied it
}

// HasNominal reports whether the rating states a nominal value.
func (r Rating) HasNominal() bool { return !math.IsNaN(r.Nominal) }

// NominalRating is a rating that states one value.
func NominalRating(d Definition, x float64) Rating {
	return Rating{Of: d.Name, Unit: d.Unit, Nominal: x, Low: x, High: x}
}

// RangeRating is a rating that states bounds; use ±Inf for an open one.
func RangeRating(d Definition, low, high float64) Rating {
	return Rating{Of: d.Name, Unit: d.Unit, Nominal: math.NaN(), Low: low, High: high}
}

// String prints the rating as a label would: "2200 µF", "100 .. 300", "≤ 50 nA".
func (r Rating) String() string {
	switch {
	case r.HasNominal():
		return quantity.Format(r.Nominal, r.Unit, 0)
	case math.IsInf(r.Low, -1) && math.IsInf(r.High, 1):
		return ""
	case r.Low == r.High:
		return quantity.Format(r.Low, r.Unit, 0)
	case math.IsInf(r.Low, -1):
		return "≤ " + quantity.Format(r.High, r.Unit, 0)
	case math.IsInf(r.High, 1):
		return "≥ " + quantity.Format(r.Low, r.Unit, 0)
	case r.Unit == quantity.Ratio && r.Low == -r.High:
		return "±" + quantity.Format(r.High, r.Unit, 0)
	case r.Unit == quantity.Ratio:
		return strings.TrimSuffix(quantity.Format(r.Low, r.Unit, 0), " %") + "/+" + quantity.Format(r.High, r.Unit, 0)
	}
	return quantity.Format(r.Low, r.Unit, 0) + " .. " + quantity.Format(r.High, r.Unit, 0)
}

// Trait is what a part claims in words: polarity, material, type, group, technology, case, pinout, dated.
type Trait struct {
	Name string
	Text string
}

// The trait names that more than one kind uses.
const (
	TraitType       = "type"
	TraitGroup      = "group"
	TraitPolarity   = "polarity"
	TraitMaterial   = "material"
	TraitTechnology = "technology"
	TraitCase       = "case"
	TraitPinout     = "pinout"
	TraitDated      = "dated" // maker's date: a year such as "1974", or a decade such as "197x"
)

// Claim is what a part says it is. The order of ratings and traits is the order in which they were claimed.
type Claim struct {
	Ratings []Rating
	Traits  []Trait
}

// Rating returns the first rating of a characteristic that holds for a section: the section's own, else the whole part's.
func (c Claim) Rating(of Characteristic, section string) (Rating, bool) {
	found := -1
	for i, r := range c.Ratings {
		if r.Of != of {
			continue
		}
		if r.Section == section {
			return r, true
		}
		if r.Section == "" && found < 0 {
			found = i
		}
	}
	if found >= 0 {
		return c.Ratings[found], true
	}
	return Rating{}, false
}

// Nominal returns the nominal value of a characteristic for a section in SI, and whether one is claimed.
func (c Claim) Nominal(of Characteristic, section string) (float64, bool) {
	r, ok := c.Rating(of, section)
	return r.Nominal, ok && r.HasNominal()
}

// Trait returns the text of a trait, "" where it is not claimed.
func (c Claim) Trait(name string) string {
	for _, t := range c.Traits {
		if t.Name == name {
			return t.Text
		}
	}
	return ""
}

// Year returns the maker's year where the trait "dated" states one; a decade such as "197x" gives its last year.
func (c Claim) Year() (int, bool) {
	year := 0
	text := c.Trait(TraitDated)
	if len(text) < 4 {
		return 0, false
	}
	for _, r := range text[:4] {
		switch {
		case r >= '0' && r <= '9':
			year = year*10 + int(r-'0')
		case (r == 'x' || r == 'X') && year > 99:
			year = year*10 + 9
		default:
			return 0, false
		}
	}
	return year, year >= 1850 && year <= 2199
}

// Sections lists the sections that ratings name, in the order of their first mention; a part without sections has the one section "".
func (c Claim) Sections() []string {
	var sections []string
	for _, r := range c.Ratings {
		if r.Section != "" && !slices.Contains(sections, r.Section) {
			sections = append(sections, r.Section)
		}
	}
	if sections == nil {
		return []string{""}
	}
	return sections
}

// WithRating returns a copy of the claim in which r replaces the rating of the same characteristic, section and condition, or is added.
func (c Claim) WithRating(r Rating) Claim {
	c.Ratings = slices.Clone(c.Ratings)
	for i, old := range c.Ratings {
		if old.Of == r.Of && old.Section == r.Section && old.At == r.At {
			c.Ratings[i] = r
			return c
		}
	}
	c.Ratings = append(c.Ratings, r)
	return c
}

// WithTrait returns a copy of the claim in which the trait has this text; an empty text removes it.
func (c Claim) WithTrait(name, text string) Claim {
	c.Traits = slices.Clone(c.Traits)
	i := slices.IndexFunc(c.Traits, func(t Trait) bool { return t.Name == name })
	switch {
	case text == "" && i >= 0:
		c.Traits = slices.Delete(c.Traits, i, i+1)
	case text == "":
	case i >= 0:
		c.Traits[i].Text = text
	default:
		c.Traits = append(c.Traits, Trait{name, text})
	}
	return c
}

// IsZero reports whether nothing is claimed.
func (c Claim) IsZero() bool { return len(c.Ratings) == 0 && len(c.Traits) == 0 }

// String prints what the part itself claims in one line, numbers first: "2200 µF 35 V ±20 % 1974", of a can with sections "32+32 µF 350 V".
// Ratings that a table supplied are left out.
func (c Claim) String() string {
	var words []string
	for i, r := range c.Ratings {
		switch {
		case r.Typed == "" && r.Source.Status != NoStatus:
		case r.Section == "" && r.Unit == quantity.One:
			words = append(words, string(r.Of)+" "+r.String()) // a bare number says nothing
		case r.Section == "":
			words = append(words, r.String())
		case !slices.ContainsFunc(c.Ratings[:i], func(o Rating) bool { return o.Of == r.Of && o.Section != "" }):
			words = append(words, c.bySection(r.Of))
		}
	}
	for _, t := range c.Traits {
		switch {
		case t.Name == TraitPinout: // it stands by itself wherever a verdict does
		case t.Text != "" && t.Name != TraitType && t.Name != TraitDated && strings.Trim(t.Text, "0123456789") == "":
			words = append(words, t.Name+" "+t.Text) // a bare number says nothing here either
		default:
			words = append(words, t.Text)
		}
	}
	return strings.Join(slices.DeleteFunc(words, func(w string) bool { return w == "" }), " ")
}

// bySection prints the ratings that sections have of one characteristic as on the can: "32+32 µF", "8+16 µF", and once what is the same
// for all, as a voltage mostly is.
func (c Claim) bySection(of Characteristic) string {
	var texts []string
	for _, r := range c.Ratings {
		if r.Of == of && r.Section != "" {
			texts = append(texts, r.String())
		}
	}
	if of != Capacitance.Name && len(slices.Compact(slices.Clone(texts))) == 1 {
		return texts[0]
	}
	last := texts[len(texts)-1]
	if _, unit, ok := strings.Cut(last, " "); ok {
		for i, text := range texts[:len(texts)-1] {
			number, same := strings.CutSuffix(text, " "+unit)
			if !same {
				return strings.Join(texts, " + ")
			}
			texts[i] = number
		}
	}
	return strings.Join(texts, "+")
}
