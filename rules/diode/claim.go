package diode

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var inf = math.Inf(1)

// complete adds what the type's row says, and refuses a claim that contradicts it.
func (b rulebook) complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	if text := c.Trait(screening.TraitTechnology); text != "" {
		if _, ok := technologyNamed(text); !ok {
			return c, nil, fmt.Errorf("technology: %q is not known; one of %s", text, technologyNames())
		}
	}
	if text := c.Trait(screening.TraitMaterial); text != "" && text != "si" && text != "ge" {
		return c, nil, fmt.Errorf("material: %q is not known; si or ge", text)
	}
	if v, ok := ratedVoltage(c); ok && v <= 0 {
		return c, nil, fmt.Errorf("vrrm: %s is no reverse voltage to block", quantity.Format(v, quantity.Volt, 0))
	}
	var notes []screening.Reason
	name := c.Trait(screening.TraitType)
	if name != "" {
		row, ok := b.types.Lookup(Kind, name)
		if !ok {
			notes = append(notes, b.types.UnknownNote(screening.VF.Name, Kind, c,
				"type "+name+" is not in the table: claim what its sheet says, such as rated:vrrm=400V"))
		} else {
			if err := contradicts(c, row); err != nil {
				return c, nil, err
			}
			c = withRow(c, row)
		}
	}
	for _, r := range c.Ratings {
		_, hasCurrent := r.At.Get(screening.Current)
		_, hasVoltage := r.At.Get(screening.Voltage)
		if r.Of == screening.VF.Name && !hasCurrent || r.Of == screening.IR.Name && !hasVoltage {
			notes = append(notes, book.Note(r.Of, "rated:%s=%s is not used: it does not say at which current or voltage it holds", r.Of, r))
		}
	}
	return c, notes, nil
}

func technologyNames() string {
	var names []string
	for _, t := range load().technologies {
		names = append(names, t.name)
	}
	return strings.Join(names, ", ")
}

// contradicts says where a claim and the table's row for its type cannot both be true.
func contradicts(c screening.Claim, row types.Row) error {
	for _, name := range []string{screening.TraitTechnology, screening.TraitMaterial} {
		claimed, tabled := c.Trait(name), row.Trait(name)
		if claimed != "" && claimed != unknown && tabled != "" && claimed != tabled {
			return fmt.Errorf("%s: %q is claimed, but %s is %s", name, claimed, row.Type, tabled)
		}
	}
	claimed, ok := ratedVoltage(c)
	tabled, has := row.Rating(screening.VRRM.Name)
	if ok && has && claimed > tabled.Low {
		return fmt.Errorf("vrrm: %s is claimed, but %s is rated %s", quantity.Format(claimed, quantity.Volt, 0), row.Type,
			quantity.Format(tabled.Low, quantity.Volt, 0))
	}
	return nil
}

// withRow adds to a claim what the row says and the claim does not.
func withRow(c screening.Claim, row types.Row) screening.Claim {
	own := c
	c.Ratings = slices.Grow(slices.Clone(c.Ratings), len(row.Ratings))
	for _, r := range row.Ratings {
		if _, claimed := own.Rating(r.Of, ""); !claimed {
			c.Ratings = append(c.Ratings, r)
		}
	}
	c.Traits = slices.Grow(slices.Clone(c.Traits), len(row.Traits)+1)
	for _, t := range row.Traits {
		switch old := c.Trait(t.Name); {
		case old == "":
			c.Traits = append(c.Traits, t)
		case old == unknown || t.Name == screening.TraitType && old != t.Text:
			c = c.WithTrait(t.Name, t.Text)
		}
	}
	if v := load().variants[row.Type]; v.dual != "" && c.Trait(TraitDual) == "" {
		c = c.WithTrait(TraitDual, v.dual)
	}
	return c
}

// ratedVoltage returns the reverse voltage in volts that the diode claims to block.
func ratedVoltage(c screening.Claim) (float64, bool) {
	r, ok := c.Rating(screening.VRRM.Name, "")
	return r.Low, ok && !math.IsInf(r.Low, 0)
}

// sections lists the diodes in one case: two of a dual, four of a bridge.
func sections(c screening.Claim) []string {
	switch {
	case c.Trait(screening.TraitTechnology) == "bridge":
		return []string{"1", "2", "3", "4"}
	case c.Trait(TraitDual) != "":
		return []string{"1", "2"}
	}
	return []string{""}
}

// sheet returns a rating of the claim that states its condition, and its value there.
func sheet(c screening.Claim, of screening.Characteristic, at screening.Variable) (r screening.Rating, x float64, ok bool) {
	for _, r := range c.Ratings {
		if r.Of != of || math.IsInf(r.High, 1) {
			continue
		}
		if x, stated := r.At.Get(at); stated && x > 0 {
			return r, x, true
		}
	}
	return screening.Rating{}, 0, false
}

// leakMost is the most that this diode may leak at 25 °C before it does not block: the rule for its material, or what its sheet allows
// where that is more.
func leakMost(c screening.Claim) most {
	m := load().leakage[technologyOf(c).material]
	if r, _, ok := sheet(c, screening.IR.Name, screening.Voltage); ok && r.High > m.value {
		return most{r.High, book.SourceOf(&r)}
	}
	return m
}
