package inductor

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/winding"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var inf = math.Inf(1)

// band returns the bounds in henry that a claim implies.
func band(c screening.Claim) (low, high float64, ok bool) {
	r, claimed := c.Rating(Inductance.Name, "")
	if !claimed {
		return 0, 0, false
	}
	if !r.HasNominal() {
		return r.Low, r.High, true
	}
	t, _ := c.Rating(screening.Tolerance.Name, "")
	// Twelve digits keep an edge where it is printed: 0.01·0.9 is a little more than 0.009.
	return book.Honest(r.Nominal*(1+t.Low), 0, 12), book.Honest(r.Nominal*(1+t.High), 0, 12), true
}

func bandFormula(c screening.Claim) string {
	r, _ := c.Rating(Inductance.Name, "")
	if !r.HasNominal() {
		return r.String() + " as claimed"
	}
	low, high, _ := band(c)
	t, _ := c.Rating(screening.Tolerance.Name, "")
	return fmt.Sprintf("%s %s = %s to %s", quantity.Format(r.Nominal, quantity.Henry, 0), t,
		quantity.Format(low, quantity.Henry, 4), quantity.Format(high, quantity.Henry, 4))
}

func toleranceSource(c screening.Claim) screening.Source {
	if r, _ := c.Rating(Inductance.Name, ""); !r.HasNominal() {
		return book.SourceOf(&r)
	}
	t, _ := c.Rating(screening.Tolerance.Name, "")
	if s := book.ToleranceSource(t.Typed); s.Status != screening.NoStatus {
		return s
	}
	return book.SourceOf(&t)
}

// limit is a limit of this kind that counts by default at every grade.
func limit(on screening.Definition, criterion screening.Criterion, need screening.Need, low, high float64, source screening.Source) screening.Limit {
	return screening.Limit{
		On: on.Name, Unit: on.Unit, Criterion: criterion, Low: low, High: high, Need: need, Set: screening.GeneralSet, InUse: true,
		Source: source,
	}
}

func limits(c screening.Claim) ([]screening.Limit, error) {
	low, high, ok := band(c)
	if !ok {
		return nil, nil
	}
	conducts := winding.Conducts(screening.DCR, "", screening.Wanted)
	conducts.Note += "; a reading of inductance shows as well that the winding conducts"
	value := limit(Inductance, valueCriterion, screening.Required, low, high, toleranceSource(c))
	value.Grade = screening.WithinSpec
	value.Formula = func() string { return bandFormula(c) }
	if c.Trait(screening.TraitTechnology) == laminated {
		value.Note = "an iron core reads with the meter's volts and frequency; the printed value holds at the printed current"
	}
	all := []screening.Limit{conducts, value}
	all = append(all, winding.Claimed(screening.DCR, c, "")...)
	all = append(all, claimedQ(c)...)
	return append(all, saturation(c)...), nil
}

// claimedQ asks for the Q that a sheet states as a minimum, or for a share of what a twin has.
func claimedQ(c screening.Claim) []screening.Limit {
	r, f, ok := ratedQ(c)
	if !ok {
		return nil
	}
	least, source := r.Low, book.SourceOf(&r)
	var formula func() string
	if r.HasNominal() {
		twin := load().twin
		least, source = r.Nominal*twin.value, twin.source
		formula = func() string { return fmt.Sprintf("%.3g of the twin's %.3g", twin.value, r.Nominal) }
	}
	if math.IsInf(least, -1) {
		return nil
	}
	l := limit(Q, turnsCriterion, screening.Wanted, least, inf, source)
	l.At, l.Formula = screening.At(screening.Frequency, f), formula
	l.Note = "a shorted turn takes inductance and Q away together"
	return []screening.Limit{l}
}

// ratedQ returns the Q that is claimed at a stated frequency, and that frequency in hertz.
func ratedQ(c screening.Claim) (screening.Rating, float64, bool) {
	for _, r := range c.Ratings {
		if f, stated := r.At.Get(screening.Frequency); r.Of == Q.Name && stated && f > 0 {
			return r, f, true
		}
	}
	return screening.Rating{}, 0, false
}

// saturation holds the inductance under its saturation current to what is left of it by the sheet's own share.
func saturation(c screening.Claim) []screening.Limit {
	amperes, ok := c.Nominal(ISat.Name, "")
	drop, stated := satDrop(c)
	low, _, _ := band(c)
	if !ok || !stated || amperes <= 0 || low <= 0 {
		return nil
	}
	t, _ := c.Rating(screening.Tolerance.Name, "")
	source := book.SourceOf(&t)
	l := limit(Biased, saturationCriterion, screening.Wanted, low*(1-drop), inf, source)
	l.At = screening.At(screening.Current, amperes)
	l.Formula = func() string {
		return fmt.Sprintf("%s less %s = %s", quantity.Format(low, quantity.Henry, 4), quantity.Format(drop, quantity.Ratio, 0),
			quantity.Format(low*(1-drop), quantity.Henry, 4))
	}
	return []screening.Limit{l}
}
