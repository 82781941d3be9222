package bipolar

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/rules/types"
	"goodbin/screening"
)

// complete adds what the type number promises: polarity, material, ratings, and the range of the gain group. A part that names no type is
// taken as silicon unless it says otherwise; one whose type is in no table must say what it is made of, for its name cannot.
//
// It returns an error where the claim contradicts its type: another polarity or material, or a group that the type does not have.
func (b rulebook) complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	if err := book.CheckStands(c, &screening.VCEO, &VCBO, &VEBO, &ICMax, &screening.Ptot); err != nil {
		return c, nil, err
	}
	name := c.Trait(screening.TraitType)
	row, known := b.types.Lookup(Kind, name)
	var notes []screening.Reason
	switch {
	case known:
		var err error
		if c, err = completeFrom(c, &row); err != nil {
			return c, nil, err
		}
	case name != "":
		notes = append(notes, b.types.UnknownNote("", Kind, c, name+" is not in the table: it is judged on general limits only"))
	case c.Trait(screening.TraitMaterial) == "":
		c = c.WithTrait(screening.TraitMaterial, silicon)
		notes = append(notes, book.Note("", "no material claimed: taken as silicon; say ge for germanium"))
	}
	if !known && c.Trait(screening.TraitGroup) != "" {
		notes = append(notes, book.Note(HFE.Name, "a gain group belongs to its type: without a known type it says nothing"))
	}
	return c, notes, nil
}

// completeFrom adds one row of the type table to a claim. What the part itself claims stays; what an earlier completion added from the
// table is replaced.
func completeFrom(c screening.Claim, row *types.Row) (screening.Claim, error) {
	gain, _ := row.Rating(HFE.Name)
	group := c.Trait(screening.TraitGroup)
	if group == "" {
		group = row.Group
	}
	if group != "" {
		g, ok := row.FindGroup(group)
		if !ok {
			return c, groupError(row, group)
		}
		if row.Group != "" && g.Name != row.Group {
			return c, fmt.Errorf("group: %q after the type %s, whose marking already says group %s", group, row.Type, row.Group)
		}
		group, gain = g.Name, g.Gain
	}
	traits, err := completeTraits(c, row, group)
	if err != nil {
		return c, err
	}
	return screening.Claim{Ratings: completeRatings(c, row, gain), Traits: traits}, nil
}

// completeTraits is the part's own traits, then those of its type.
func completeTraits(c screening.Claim, row *types.Row, group string) ([]screening.Trait, error) {
	traits := make([]screening.Trait, len(c.Traits), len(c.Traits)+len(row.Traits)+1)
	copy(traits, c.Traits)
	set := func(name, text string) {
		for i := range traits {
			if traits[i].Name == name {
				traits[i].Text = text
				return
			}
		}
		traits = append(traits, screening.Trait{Name: name, Text: text})
	}
	set(screening.TraitType, row.Type)
	if group != "" {
		set(screening.TraitGroup, group)
	}
	for _, t := range row.Traits {
		switch claimed := c.Trait(t.Name); {
		case t.Name == screening.TraitType || t.Name == screening.TraitGroup:
		case claimed == "":
			set(t.Name, t.Text)
		case claimed != t.Text && (t.Name == screening.TraitPolarity || t.Name == screening.TraitMaterial):
			return nil, fmt.Errorf("%s: %q is claimed, but %s is %s", t.Name, claimed, row.Type, t.Text)
		}
	}
	return traits, nil
}

// completeRatings is the part's own ratings, then those of its type that it does not claim otherwise, with the gain of its group.
func completeRatings(c screening.Claim, row *types.Row, gain screening.Rating) []screening.Rating {
	ratings := make([]screening.Rating, 0, len(c.Ratings)+len(row.Ratings))
	for i := range c.Ratings {
		if isOwn(&c.Ratings[i]) {
			ratings = append(ratings, c.Ratings[i])
		}
	}
	own := len(ratings)
	for i := range row.Ratings {
		r := &row.Ratings[i]
		if slices.ContainsFunc(ratings[:own], func(x screening.Rating) bool { return x.Of == r.Of }) {
			continue
		}
		if r.Of == HFE.Name {
			r = &gain
		}
		ratings = append(ratings, *r)
	}
	return ratings
}

func groupError(row *types.Row, group string) error {
	if row.Groups == nil {
		return fmt.Errorf("group: %q, but no gain group of %s is known; leave it out", group, row.Type)
	}
	names := make([]string, len(row.Groups))
	for i, g := range row.Groups {
		names[i] = g.Name
	}
	return fmt.Errorf("group: %q is no gain group of %s; it has %s", group, row.Type, strings.Join(names, ", "))
}

// isOwn reports whether a rating is the part's own rather than its type's.
func isOwn(r *screening.Rating) bool { return r.Typed != "" || r.Source == (screening.Source{}) }

// promise is a completed claim seen as the limits need it.
type promise struct {
	claim      screening.Claim
	row        types.Row
	known      bool // the type is in the table
	polarity   string
	material   string
	darlington bool
	vceo       float64 // V; NaN where not claimed
	icMax      float64 // A; NaN where not claimed
}

// From these collector currents on a type counts as a power type. At powerCurrent a gain at milliamperes says little, and its large
// junction reads a lower VBE; from highPower on sheets allow leakage in the hundreds of microamperes, and Darlingtons carry built-in
// resistors (house).
const powerCurrent, highPower = 1.0, 3.0

func (b rulebook) promiseOf(c screening.Claim) *promise {
	p := &promise{
		claim: c, polarity: c.Trait(screening.TraitPolarity), material: c.Trait(screening.TraitMaterial),
		darlington: c.Trait(screening.TraitTechnology) == darlington, vceo: nan, icMax: nan,
	}
	p.row, p.known = b.types.Lookup(Kind, c.Trait(screening.TraitType))
	if r, ok := c.Rating(VCEO.Name, ""); ok {
		p.vceo = r.Low
	}
	if r, ok := c.Rating(ICMax.Name, ""); ok {
		p.icMax = r.Low
	}
	return p
}

// power reports whether the part is a power type; a part that does not say may be one.
func (p *promise) power() bool { return math.IsNaN(p.icMax) || p.icMax >= powerCurrent }

func (p *promise) highPower() bool { return p.icMax >= highPower }

// powerDarlington reports whether the part may hold built-in base-emitter resistors, which swallow a tester's base current.
func (p *promise) powerDarlington() bool {
	return p.darlington && (math.IsNaN(p.icMax) || p.highPower())
}

// name is how sentences call the part.
func (p *promise) name() string {
	if t := p.claim.Trait(screening.TraitType); t != "" {
		if g, ok := p.row.FindGroup(p.claim.Trait(screening.TraitGroup)); ok {
			return t + " group " + g.Name
		}
		return t
	}
	return "the part"
}
