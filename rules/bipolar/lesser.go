package bipolar

import (
	"math"
	"slices"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// asMeasured marks the gain of a lesser claim that keeps the type's minimum and drops its maximum.
const asMeasured = "as measured"

// lesser answers a gain that its claim does not promise: the other groups of the type that hold it, the type without a group, and above
// the type's range its minimum alone. Nothing looser than the type's own minimum is offered, and nothing for any other failure.
func (b rulebook) lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	p := b.promiseOf(part.Claim)
	failed := failedGain(findings)
	if !p.known || failed == nil {
		return nil
	}
	x := failed.Evidence().Value
	var claims []screening.Lesser
	group, grouped := p.claimedGroup()
	plain := part.Claim.WithTrait(screening.TraitGroup, "")
	plain.Ratings = book.Without(plain.Ratings, HFE.Name)
	promised, hasType := p.row.Rating(HFE.Name)
	for _, g := range p.row.Groups {
		if g.Name == group.Name || x < g.Gain.Low || x > g.Gain.High || hasType && x < promised.Low {
			continue
		}
		claims = append(claims, screening.Lesser{
			Claim: plain.WithTrait(screening.TraitGroup, g.Name), Answers: CriterionGain,
			Text: p.row.Type + " group " + g.Name + ", gain " + quantity.Format(x, quantity.One, 3), Source: g.Gain.Source,
		})
	}
	// Of overlapping groups the one whose middle lies nearest comes first.
	slices.SortStableFunc(claims, func(a, b screening.Lesser) int {
		return compareDistance(p, a, b, x)
	})
	if !hasType {
		return claims
	}
	if grouped && x >= promised.Low && x <= promised.High {
		claims = append(claims, screening.Lesser{
			Claim: plain, Answers: CriterionGain, Source: promised.Source,
			Text: p.row.Type + " without a group, gain " + quantity.Format(x, quantity.One, 3),
		})
	}
	if x > promised.High {
		open := promised
		open.High, open.Typed = inf, asMeasured
		claims = append(claims, screening.Lesser{
			Claim: plain.WithRating(open), Answers: CriterionGain, Source: promised.Source,
			Text: p.row.Type + " as measured: gain " + quantity.Format(x, quantity.One, 3) + ", above its sheet's " +
				quantity.Format(promised.High, quantity.One, 0),
		})
	}
	return claims
}

// failedGain returns the finding of a gain that fails what the claim promises at the sheet's current.
func failedGain(findings []screening.Finding) *screening.Finding {
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion == CriterionGain && f.Outcome == screening.Fail && f.Evidence() != nil && !informative(&f.Limit) {
			return f
		}
	}
	return nil
}

func compareDistance(p *promise, a, b screening.Lesser, x float64) int {
	da, db := distanceFromMiddle(p, a, x), distanceFromMiddle(p, b, x)
	switch {
	case da < db:
		return -1
	case da > db:
		return 1
	}
	return 0
}

// distanceFromMiddle is how far x lies from the geometric middle of a lesser claim's group, as a ratio's logarithm.
func distanceFromMiddle(p *promise, l screening.Lesser, x float64) float64 {
	g, _ := p.row.FindGroup(l.Claim.Trait(screening.TraitGroup))
	return math.Abs(math.Log(x / math.Sqrt(g.Gain.Low*g.Gain.High)))
}
