package resistor

import (
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// composition is the technology that moisture raises and drying brings back.
const composition = "carbon-composition"

// driesBack is how much of its value a carbon-composition resistor may lose in drying: twice the 15 % that users report at most (house).
// One that reads higher than that is not merely damp.
const driesBack = 0.30

// leastAsMeasured is the closest tolerance at which a part is kept at its measured value: it has drifted, and a drifted part goes on (house).
// Composition goes on moving by its nature: allowed life change 15 % (MIL-R-39008).
const leastAsMeasured, leastComposition = 0.05, 0.10

// ladder is the tolerances that resistors are sold in, and so those that a lesser claim may name.
var ladder = []float64{0.01, 0.02, 0.05, 0.10, 0.20}

// mayBeDamp reports whether a part reads above its band by no more than drying brings back: then what it is made of decides what to do.
func mayBeDamp(_ screening.Part, findings []screening.Finding) bool {
	for i := range findings {
		f := &findings[i]
		if f.Limit.On == screening.Resistance.Name && f.Outcome == screening.Fail && f.Side == screening.Above && f.Reading != nil &&
			f.Reading.Sense == quantity.Exactly && f.Reading.Value*(1-driesBack) <= f.Limit.High {
			return true
		}
	}
	return false
}

// adjust takes the treatment away where it cannot help: after it was tried, and where drying cannot bring back so much.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	for i := range findings {
		f := &findings[i]
		if f.Outcome != screening.Fail || f.Reading == nil {
			continue
		}
		open := f.Reading.Sense == quantity.AtLeast
		switch {
		case open:
			f.Limit.TreatHigh = ""
			reasons = append(reasons, book.Note(f.Limit.On, "it reads open, or far above its value"))
		case f.Side == screening.Below:
			reasons = append(reasons, book.Note(f.Limit.On, "a resistor seldom reads low by itself: make sure that it was out of circuit"))
		case f.Limit.TreatHigh == screening.Dry && part.Treated > 0:
			f.Limit.TreatHigh = ""
			reasons = append(reasons, screening.Reason{
				Code: screening.CodeTreatedBefore, Of: f.Limit.On,
				Text: "dried before and still out of tolerance: a failure by MIL-R-39008C 6.9 (second-hand)",
			})
		case f.Limit.TreatHigh == screening.Dry && f.Reading.Value*(1-driesBack) > f.Limit.High:
			f.Limit.TreatHigh = ""
			reasons = append(reasons, book.Note(f.Limit.On, "too high to be moisture alone: drying returns 15 %% at most by users' reports, %s is allowed for",
				quantity.Format(driesBack, quantity.Ratio, 0)))
		case f.Limit.TreatHigh == screening.Dry:
			reasons = append(reasons, book.Note(f.Limit.On, "moisture raises carbon composition: drying may bring it back, and drying out in use may drop it"))
		case technologyOf(part.Claim).name == unknown:
			reasons = append(reasons, book.Note(f.Limit.On, "technology not stated: if it is carbon composition, dry it and measure again first"))
		}
	}
	return findings, reasons
}

// lesser answers a value out of tolerance, or too near its edge: a wider tolerance of the same value, or the value as measured. Carbon
// composition is sold by wide tolerances, so there they come first.
func lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	var wide, measured []screening.Lesser
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion != valueCriterion || f.Reading == nil || f.Reading.Sense != quantity.Exactly {
			continue
		}
		switch f.Outcome {
		case screening.Close:
			wide = append(wide, wider(part.Claim, f)...)
		case screening.Fail:
			wide = append(wide, wider(part.Claim, f)...)
			measured = append(measured, asMeasured(part.Claim, f)...)
		}
	}
	if technologyOf(part.Claim).name == composition {
		return append(wide, measured...)
	}
	return append(measured, wide...)
}

func wider(c screening.Claim, f *screening.Finding) []screening.Lesser {
	nominal, ok := c.Nominal(screening.Resistance.Name, "")
	claimed, has := c.Rating(screening.Tolerance.Name, "")
	if !ok || !has {
		return nil
	}
	var answers []screening.Lesser
	for _, t := range ladder {
		if t <= width(claimed) {
			continue
		}
		rating := screening.RangeRating(screening.Tolerance, -t, t)
		rating.Source = screening.Source{Document: "the printed value at a wider tolerance", Status: screening.House}
		rating.Typed = rating.String()
		answers = append(answers, screening.Lesser{
			Claim: c.WithRating(rating), Answers: f.Limit.Criterion, Tolerance: true, Text: widerText(f, nominal, claimed, rating),
			Source: rating.Source,
		})
	}
	return answers
}

func widerText(f *screening.Finding, nominal float64, claimed, proven screening.Rating) string {
	switch {
	case f.Outcome == screening.Fail:
		return proven.String() + ": it reads " + quantity.Format(book.Honest(f.Reading.Value, f.Reading.U, 4), quantity.Ohm, 0) + ", " +
			signedPercent(f.Reading.Value/nominal-1) + " from its value"
	case f.Unconfirmed:
		return proven.String() + " proven; " + claimed.String() + " is only taken for granted (" + f.Limit.Source.Status.String() + ")"
	case f.Reading.Value < f.Limit.Low || f.Reading.Value > f.Limit.High:
		// A better meter would only confirm it.
		return "reads outside " + claimed.String() + "; accepted at " + proven.String()
	case f.Wants.Accuracy > 0:
		return proven.String() + " proven; " + claimed.String() + " not provable with this meter (needs ±" +
			quantity.Format(f.Wants.Accuracy, quantity.Ratio, 2) + ")"
	}
	return proven.String() + " proven; " + claimed.String() + " not provable with this meter"
}

func signedPercent(x float64) string {
	sign := "+"
	if x < 0 {
		sign, x = "−", -x
	}
	return sign + quantity.Format(x, quantity.Ratio, 2)
}

// asMeasured offers the reading itself as the value, rounded to what the meter can say, at the closest tolerance that it proves and that a
// drifted part may be given; only within the house's range of the printed value.
func asMeasured(c screening.Claim, f *screening.Finding) []screening.Lesser {
	tech := technologyOf(c)
	r := f.Reading
	if nominal, ok := c.Nominal(screening.Resistance.Name, ""); !ok || math.Abs(r.Value/nominal-1) > tech.asMeasured {
		return nil
	}
	value := book.Honest(r.Value, r.U, 4)
	for _, t := range ladder {
		if t < leastAsMeasured || tech.name == composition && t < leastComposition {
			continue
		}
		below, above := screening.ConformanceProbability(r.Value, r.U, value*(1-t), value*(1+t))
		if 1-below-above < 0.95 {
			continue
		}
		source := screening.Source{
			Document: "kept at its measured value within " + quantity.Format(tech.asMeasured, quantity.Ratio, 0) + " of the printed one",
			Status:   screening.House,
		}
		rating := screening.NominalRating(screening.Resistance, value)
		tolerance := screening.RangeRating(screening.Tolerance, -t, t)
		rating.Source, tolerance.Source = source, source
		rating.Typed, tolerance.Typed = rating.String(), tolerance.String()
		return []screening.Lesser{{
			Claim: c.WithRating(rating).WithRating(tolerance), Answers: f.Limit.Criterion,
			Text:   "as measured, " + quantity.Format(value, quantity.Ohm, 0) + " " + tolerance.String(),
			Source: source,
		}}
	}
	return nil
}
