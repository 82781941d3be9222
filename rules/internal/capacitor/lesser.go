package capacitor

import (
	"math"
	"slices"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// ladder is the tolerances that capacitors are sold in, and so those that a lesser claim may name.
var ladder = []float64{0.01, 0.02, 0.05, 0.10, 0.20}

// Wider offers the wider tolerances that answer a capacitance out of its tolerance or too near its edge, none beyond widest: a value that far
// off is no matter of tolerance.
func Wider(part screening.Part, findings []screening.Finding, widest float64) []screening.Lesser {
	var all []screening.Lesser
	for i := range slices.Backward(findings) { // the serviceable grade, which is laxer, comes last
		f := &findings[i]
		e := f.Reading
		if f.Limit.Criterion != CriterionCapacitance || f.Limit.Section != "" || e == nil || e.Sense != quantity.Exactly ||
			f.Outcome != screening.Close && f.Outcome != screening.Fail || len(all) > 0 {
			continue
		}
		nominal, ok := part.Claim.Nominal(screening.Capacitance.Name, "")
		claimed, has := part.Claim.Rating(screening.Tolerance.Name, "")
		if !ok || !has {
			return nil
		}
		for _, t := range ladder {
			if t > math.Max(-claimed.Low, claimed.High) && t <= widest && math.Abs(e.Value/nominal-1) <= t {
				all = append(all, wider(part.Claim, f, nominal, claimed, t))
			}
		}
	}
	return all
}

func wider(claim screening.Claim, f *screening.Finding, nominal float64, claimed screening.Rating, t float64) screening.Lesser {
	rating := screening.RangeRating(screening.Tolerance, -t, t)
	rating.Source = screening.Source{Document: "the printed value at a wider tolerance", Status: screening.House}
	rating.Typed = rating.String()
	from := Percents(claimed.Low, claimed.High)
	text := rating.String() + ": it reads " + quantity.Format(book.Honest(f.Reading.Value, f.Reading.U, 4), quantity.Farad, 0) + ", " +
		signedPercent(f.Reading.Value/nominal-1) + " from its value"
	if f.Outcome == screening.Close && !f.Unconfirmed {
		text = rating.String() + " proven; " + from + " not provable with this meter"
		if f.Wants.Accuracy > 0 {
			text += " (needs ±" + quantity.Format(f.Wants.Accuracy, quantity.Ratio, 2) + ")"
		}
	}
	return screening.Lesser{
		Claim: claim.WithTrait(TraitTolerancePF, "").WithRating(rating), Answers: CriterionCapacitance, Tolerance: true, Text: text, Source: rating.Source,
	}
}

func signedPercent(x float64) string {
	sign := "+"
	if x < 0 {
		sign, x = "−", -x
	}
	return sign + quantity.Format(x, quantity.Ratio, 2)
}

// AsMeasured offers a capacitance that fails its tolerance as the value itself, rounded to what the meter can say, at ±10 %; only within a
// ratio of the printed value. It is for dielectrics that do not go on drifting.
func AsMeasured(part screening.Part, findings []screening.Finding, within float64) []screening.Lesser {
	const kept = 0.10
	for i := range findings {
		f := &findings[i]
		e := f.Reading
		if f.Limit.Criterion != CriterionCapacitance || f.Limit.Section != "" || f.Outcome != screening.Fail || e == nil || e.Sense != quantity.Exactly {
			continue
		}
		nominal, ok := part.Claim.Nominal(screening.Capacitance.Name, "")
		if !ok || math.Abs(e.Value/nominal-1) > within {
			return nil
		}
		source := screening.Source{
			Document: "kept at its measured value within " + quantity.Format(within, quantity.Ratio, 0) + " of the printed one", Status: screening.House,
		}
		value := screening.NominalRating(screening.Capacitance, book.Honest(e.Value, e.U, 3))
		tolerance := screening.RangeRating(screening.Tolerance, -kept, kept)
		value.Source, tolerance.Source = source, source
		value.Typed, tolerance.Typed = value.String(), tolerance.String()
		return []screening.Lesser{{
			Claim:   part.Claim.WithTrait(TraitTolerancePF, "").WithRating(value).WithRating(tolerance),
			Answers: CriterionCapacitance, Text: "as measured, " + value.String() + " " + tolerance.String(), Source: source,
		}}
	}
	return nil
}
