package zener

import (
	"fmt"
	"math"
	"slices"

	"goodbin/rules/internal/book"
	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var inf = math.Inf(1)

// complete adds what the type's row says, or the default tolerance, and refuses a claim that contradicts its type.
func (b rulebook) complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	for _, d := range []screening.Definition{VZ, IZT, screening.Ptot} {
		if x, ok := c.Nominal(d.Name, ""); ok && x <= 0 {
			return c, nil, fmt.Errorf("%s: %s of a Zener is above zero", d.Name, d.Label)
		}
	}
	t, hasTolerance := c.Rating(screening.Tolerance.Name, "")
	if hasTolerance && (t.Low <= -1 || t.High >= 1 || t.Low > 0 || t.High < 0) {
		return c, nil, fmt.Errorf("tolerance: %s is no tolerance of a Zener; it is a band such as ±5 %%", t)
	}
	var notes []screening.Reason
	if name := c.Trait(screening.TraitType); name != "" {
		row, ok := b.types.Lookup(Kind, name)
		if !ok {
			notes = append(notes, b.types.UnknownNote(VZ.Name, Kind, c,
				"type "+name+" is not in the table: claim its voltage, tolerance and test current"))
		} else {
			var err error
			if c, err = withRow(c, row); err != nil {
				return c, nil, err
			}
		}
	}
	vz, ok := c.Rating(VZ.Name, "")
	if _, has := c.Rating(screening.Tolerance.Name, ""); ok && !has && pointlike(vz) {
		f := load().figures["default-tolerance"]
		rating := screening.RangeRating(screening.Tolerance, f.low, f.high)
		rating.Source = f.source
		c = c.WithRating(rating)
		notes = append(notes, book.Note(VZ.Name, "no tolerance claimed: taken as %s, which may not reject (%s)", rating, f.source.Status))
	}
	return c, notes, nil
}

// pointlike reports whether a rating states a nominal and no bounds.
func pointlike(r screening.Rating) bool { return r.HasNominal() && r.Low == r.High }

// withRow adds to a claim what its type's row says. A nominal voltage that agrees with the row takes the row's printed bounds, which are
// rounded and not the nominal's percents.
func withRow(c screening.Claim, row types.Row) (screening.Claim, error) {
	tabled, hasVoltage := row.Rating(VZ.Name)
	_, toleranceClaimed := c.Rating(screening.Tolerance.Name, "")
	own := c
	if vz, ok := c.Rating(VZ.Name, ""); ok && hasVoltage && pointlike(vz) {
		near := math.Abs(vz.Nominal/tabled.Nominal-1) <= 1e-6
		if !tabled.HasNominal() { // a house row may state bounds alone
			near = vz.Nominal >= tabled.Low && vz.Nominal <= tabled.High
		}
		if !near {
			return c, fmt.Errorf("vz: %s is claimed, but %s is %s", vz, row.Type, tabled)
		}
		if !toleranceClaimed {
			c.Ratings = book.Without(c.Ratings, VZ.Name)
			own = c
		}
	}
	c.Ratings = slices.Grow(slices.Clone(c.Ratings), len(row.Ratings)+1)
	for _, r := range row.Ratings {
		if _, claimed := own.Rating(r.Of, ""); claimed {
			continue
		}
		if r.Of == VZ.Name && toleranceClaimed && r.HasNominal() {
			// The tolerance that was claimed stands over the row's.
			r.Low, r.High = r.Nominal, r.Nominal
		}
		c.Ratings = append(c.Ratings, r)
	}
	if izt, ok := tabled.At.Get(screening.Current); ok {
		if _, claimed := own.Rating(IZT.Name, ""); !claimed {
			rating := screening.NominalRating(IZT, izt)
			rating.Source = tabled.Source
			c.Ratings = append(c.Ratings, rating)
		}
	}
	c.Traits = slices.Clone(c.Traits)
	for _, t := range row.Traits {
		switch old := c.Trait(t.Name); {
		case old == "":
			c.Traits = append(c.Traits, t)
		case t.Name == screening.TraitType && old != t.Text:
			c = c.WithTrait(t.Name, t.Text)
		}
	}
	return c, nil
}

// band returns the bounds of the voltage that a claim implies and their source.
func band(c screening.Claim) (low, high float64, source screening.Source, ok bool) {
	vz, claimed := c.Rating(VZ.Name, "")
	if !claimed {
		return 0, 0, source, false
	}
	source = book.SourceOf(&vz)
	if !pointlike(vz) {
		return vz.Low, vz.High, source, true
	}
	t, _ := c.Rating(screening.Tolerance.Name, "")
	return vz.Nominal * (1 + t.Low), vz.Nominal * (1 + t.High), toleranceSource(t), true
}

// toleranceSource is where a tolerance comes from: a default's figure, the letter, or what the part claims.
func toleranceSource(t screening.Rating) screening.Source {
	if l, ok := load().letters[t.Typed]; ok && t.Source.Status == screening.NoStatus {
		return l.source
	}
	return book.SourceOf(&t)
}

// testCurrent returns the current in amperes at which the voltage is claimed.
func testCurrent(c screening.Claim) (float64, bool) {
	r, ok := c.Rating(IZT.Name, "")
	return r.Nominal, ok && r.HasNominal() && r.Nominal > 0
}

// slopeMost returns the highest slope resistance that the sheet allows at the test current, ohms.
func slopeMost(c screening.Claim) (screening.Rating, bool) {
	izt, known := testCurrent(c)
	for _, r := range c.Ratings {
		if at, stated := r.At.Get(screening.Current); r.Of == ZZ.Name && known && !math.IsInf(r.High, 1) && (!stated || math.Abs(at/izt-1) <= 0.02) {
			return r, true
		}
	}
	return screening.Rating{}, false
}

func volts(x float64) string { return quantity.Format(x, quantity.Volt, 0) }

func amperes(x float64) string { return quantity.Format(x, quantity.Ampere, 0) }
