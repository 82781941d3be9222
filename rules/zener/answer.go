package zener

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// ladder is the tolerances that Zeners are sold in. As measured nothing closer than asMeasured is claimed: the voltage moves with
// temperature by up to 0.12 %/K, and a salvaged part's slope is not known (house).
var ladder = []float64{0.02, 0.05, 0.10, 0.20}

const asMeasuredTolerance = 0.05

// adjust leaves the voltage open where the claim says nothing to hold it against, and says what a failure looks like.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion != voltageCriterion {
			continue
		}
		if f.Limit.Note == noClaim || f.Limit.Note == noCurrent {
			f.Outcome, f.Probability, f.Margin, f.Unconfirmed, f.Why = screening.Missing, math.NaN(), math.NaN(), false, f.Limit.Note
			f.Limit.Note = "" // said already
			if f.Reading != nil && !f.Reading.At.Has(screening.Current) {
				f.Why, f.Unstated = "the current of the reading is not stated: vz@5mA=…", screening.Current
			}
		}
		if f.Reading == nil {
			continue
		}
		if f.Outcome == screening.Missing && f.Converted != nil {
			reasons = append(reasons, book.Note(VZ.Name, "%s", f.Converted.Rule))
		}
		if text := failWords(f); text != "" {
			reasons = append(reasons, book.Note(VZ.Name, "%s", text))
		}
		if text := overPower(part.Claim, f.Reading); text != "" {
			reasons = append(reasons, book.Note(VZ.Name, "%s", text))
		}
	}
	return findings, reasons
}

func failWords(f *screening.Finding) string {
	e := f.Evidence()
	switch {
	case f.Outcome != screening.Fail || e == nil:
		return ""
	case e.Value < shorted:
		return "shorted"
	case e.Value < noZener:
		return "turned round, or damaged: reversed it drops like any silicon diode"
	case f.Side == screening.Below:
		return "below its band it is damaged or soft; if the marking was misread, judge it without a claim"
	}
	return "above its band it is not what it says; if the marking was misread, judge it without a claim"
}

// Voltages in V: below shorted there is no junction at all (from memory, for words only); below noZener nothing is a Zener but one forward
// junction (house).
const shorted, noZener = 0.1, 1.0

// overPower says where the reading itself was taken above the rated power.
func overPower(c screening.Claim, r *screening.Reading) string {
	p, claimed := c.Nominal(screening.Ptot.Name, "")
	i, stated := r.At.Get(screening.Current)
	if !claimed || !stated || i*r.Value <= p {
		return ""
	}
	return fmt.Sprintf("that reading put %s into a part of %s", quantity.Format(i*r.Value, quantity.Watt, 2), quantity.Format(p, quantity.Watt, 0))
}

// lesser answers a voltage too near its edge with a wider tolerance, and one that cannot be held against the claim (none, no test current,
// taken far from it) with the voltage as measured, at the current at which it was measured.
func lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	var answers []screening.Lesser
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion != voltageCriterion || f.Reading == nil || f.Reading.Sense != quantity.Exactly {
			continue
		}
		switch {
		case f.Outcome == screening.Close && !f.Unconfirmed:
			answers = append(answers, wider(part.Claim, f)...)
		case f.Outcome == screening.Missing:
			answers = append(answers, asMeasured(part.Claim, f)...)
		}
	}
	return answers
}

func wider(c screening.Claim, f *screening.Finding) []screening.Lesser {
	vz, ok := c.Rating(VZ.Name, "")
	if !ok || !vz.HasNominal() {
		return nil
	}
	had := math.Max(f.Limit.High/vz.Nominal-1, 1-f.Limit.Low/vz.Nominal)
	var answers []screening.Lesser
	for _, t := range ladder {
		if t <= had {
			continue
		}
		answers = append(answers, screening.Lesser{
			Claim: claimOf(c, vz.Nominal, t, 0), Answers: voltageCriterion, Tolerance: true, Text: widerText(f, t), Source: houseSource,
		})
	}
	return answers
}

// widerText says why a wider tolerance is taken: a reading inside the band is too near its edge for this meter, and a better one might prove
// it; a reading outside would only be confirmed by it.
func widerText(f *screening.Finding, t float64) string {
	band := volts(f.Limit.Low) + " to " + volts(f.Limit.High)
	if e := f.Evidence(); e.Value < f.Limit.Low || e.Value > f.Limit.High {
		return fmt.Sprintf("reads outside %s; accepted at ±%.0f %%", band, 100*t)
	}
	text := fmt.Sprintf("±%.0f %% proven; %s not provable with this meter", 100*t, band)
	if f.Wants.Accuracy > 0 {
		text += " (needs ±" + quantity.Format(f.Wants.Accuracy, quantity.Ratio, 2) + ")"
	}
	return text
}

var houseSource = screening.Source{Document: "taken at what was measured", Status: screening.House}

// claimOf is the claim with a voltage of explicit bounds, which the type's row does not replace, and where current is not 0 a test current.
func claimOf(c screening.Claim, nominal, tolerance, current float64) screening.Claim {
	c.Ratings = book.Without(book.Without(c.Ratings, VZ.Name), screening.Tolerance.Name)
	vz := screening.NominalRating(VZ, nominal)
	vz.Low, vz.High = nominal*(1-tolerance), nominal*(1+tolerance)
	vz.Typed, vz.Source = fmt.Sprintf("%s ±%.0f %%", volts(nominal), 100*tolerance), houseSource
	c.Ratings = append([]screening.Rating{vz}, c.Ratings...)
	if current > 0 {
		c.Ratings = book.Without(c.Ratings, IZT.Name)
		izt := screening.NominalRating(IZT, current)
		izt.Typed = amperes(current)
		c.Ratings = append(c.Ratings, izt)
	}
	return c
}

// asMeasured keeps the part at its measured voltage and current. Its power stays what was claimed; where nothing was, the smallest for its
// body must be assumed.
func asMeasured(c screening.Claim, f *screening.Finding) []screening.Lesser {
	r := f.Reading
	i, stated := r.At.Get(screening.Current)
	if !stated || i <= 0 || r.Value < noZener {
		return nil
	}
	nominal := book.Honest(r.Value, r.U, 3)
	for _, t := range ladder {
		if t < asMeasuredTolerance {
			continue
		}
		below, above := screening.ConformanceProbability(r.Value, r.U, nominal*(1-t), nominal*(1+t))
		if 1-below-above < 0.95 {
			continue
		}
		text := fmt.Sprintf("as measured, %s ±%.0f %% at %s", volts(nominal), 100*t, amperes(i))
		if c.IsZero() {
			text = "unmarked, " + text
		}
		if _, known := c.Nominal(screening.Ptot.Name, ""); !known {
			text += "; power unknown: assume the smallest for this body"
		}
		return []screening.Lesser{{
			Claim: claimOf(c, nominal, t, i), Answers: voltageCriterion, Text: text, FromMissing: true, Source: houseSource,
		}}
	}
	return nil
}

// untested says that power is not tested. What was wanted and not measured, such as the slope, is listed without it.
func untested(part screening.Part, _ []screening.Finding) []string {
	if p, ok := part.Claim.Nominal(screening.Ptot.Name, ""); ok {
		return []string{"power (rated " + quantity.Format(p, quantity.Watt, 0) + ")"}
	}
	return []string{"power (unknown: assume the smallest for this body)"}
}
