package inductor

import (
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// derive computes Q from a series resistance at the same frequency, and from the winding's direct-current resistance the most that Q can be:
// losses only come on top of it.
func derive(part screening.Part) ([]screening.Reading, []screening.Reason) {
	l, ok := part.Reading(Inductance.Name, "")
	if !ok || l.Sense != quantity.Exactly || l.Value <= 0 {
		return nil, nil
	}
	if esr, ok := part.Reading(screening.ESR.Name, ""); ok && esr.Sense == quantity.Exactly && esr.Value > 0 {
		if f, stated := esr.At.Get(screening.Frequency); stated && f > 0 {
			q := 2 * math.Pi * f * l.Value / esr.Value
			return []screening.Reading{{
				Of: Q.Name, Unit: Q.Unit, Value: q, At: screening.At(screening.Frequency, f), Meter: l.Meter, Assumed: l.Assumed || esr.Assumed,
				U: q * math.Hypot(l.U/l.Value, esr.U/esr.Value), Spec: q * (l.Spec/l.Value + esr.Spec/esr.Value),
				Rule: "2πfL/R of the readings of inductance and series resistance",
				From: []screening.Input{
					{Of: l.Of, U: l.U, Sensitivity: q / l.Value}, {Of: esr.Of, U: esr.U, Sensitivity: -q / esr.Value},
				},
			}}, nil
		}
	}
	_, measured := part.Reading(Q.Name, "")
	dcr, ok := part.Reading(screening.DCR.Name, "")
	_, f, claimed := ratedQ(part.Claim)
	least := dcr.Value - dcr.Spec
	if !ok || !claimed || measured || dcr.Sense != quantity.Exactly || least <= 0 {
		return nil, nil
	}
	// The most that it can be with both meters off as far as they may be: a bound, so it has no uncertainty of its own.
	return []screening.Reading{{
		Of: Q.Name, Unit: Q.Unit, Value: 2 * math.Pi * f * (l.Value + l.Spec) / least, Sense: quantity.AtMost,
		At: screening.At(screening.Frequency, f), Meter: l.Meter, Assumed: l.Assumed || dcr.Assumed,
		Rule: "at most 2πfL over the direct-current resistance: other losses come on top",
	}}, nil
}

// adjust explains what a failure points to.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	for i := range findings {
		f := &findings[i]
		if f.Outcome != screening.Fail && !f.Unconfirmed {
			continue
		}
		switch {
		case f.Limit.Criterion == windingCriterion:
			reasons = append(reasons, book.Note(f.Limit.On, "the winding is open: fine wire breaks or corrodes at its ends; make sure that the probes touch bright metal"))
		case f.Limit.Criterion == valueCriterion && f.Side == screening.Below:
			reasons = append(reasons, book.Note(f.Limit.On, "low inductance is a shorted turn, a broken core or a lost slug; Q beside a sound twin tells them apart"))
		case f.Limit.Criterion == valueCriterion:
			reasons = append(reasons, book.Note(f.Limit.On, "near its own resonance a coil reads high: measure at a lower frequency; an iron core reads high without its direct current"))
		case f.Limit.Criterion == turnsCriterion:
			reasons = append(reasons, book.Note(f.Limit.On, "a Q far below the twin's at the same frequency is a shorted turn (from memory)"))
		}
	}
	return findings, reasons
}

// ladder is the tolerances that a lesser claim may name, as ratios.
var ladder = []float64{0.02, 0.05, 0.10, 0.20}

// How far from its printed value a part may lie and still be kept as measured, as ratios (house). Below, only where Q was measured and held
// against a twin or a sheet: low inductance with no Q to vouch for it may be a shorted turn.
const mostAbove, mostBelow = 0.50, 0.30

// lesser answers an inductance out of tolerance, or too near its edge: a wider tolerance, or the value as measured.
func lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	vouched := false
	for i := range findings {
		vouched = vouched || findings[i].Limit.Criterion == turnsCriterion && findings[i].Outcome == screening.Pass
	}
	var answers []screening.Lesser
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion != valueCriterion || f.Reading == nil || f.Reading.Sense != quantity.Exactly {
			continue
		}
		if f.Outcome == screening.Close {
			answers = append(answers, wider(part.Claim, f)...)
		}
		if f.Outcome == screening.Fail && (vouched || f.Side == screening.Above) {
			answers = append(answers, asMeasured(part.Claim, f)...)
		}
	}
	return answers
}

func wider(c screening.Claim, f *screening.Finding) []screening.Lesser {
	claimed, _ := c.Rating(screening.Tolerance.Name, "")
	if _, ok := c.Nominal(Inductance.Name, ""); !ok {
		return nil
	}
	var answers []screening.Lesser
	for _, t := range ladder {
		if t <= math.Max(-claimed.Low, claimed.High) {
			continue
		}
		rating := withSource(screening.RangeRating(screening.Tolerance, -t, t), "the printed value at a wider tolerance")
		text := rating.String() + " proven; " + claimed.String() + " not provable with this meter"
		if f.Wants.Accuracy > 0 && f.Reading.Value >= f.Limit.Low && f.Reading.Value <= f.Limit.High {
			text += " (needs ±" + quantity.Format(f.Wants.Accuracy, quantity.Ratio, 2) + ")"
		}
		answers = append(answers, screening.Lesser{
			Claim: c.WithRating(rating), Answers: valueCriterion, Tolerance: true, Text: text, Source: rating.Source,
		})
	}
	return answers
}

func withSource(r screening.Rating, document string) screening.Rating {
	r.Source = screening.Source{Document: document, Status: screening.House}
	r.Typed = r.String()
	return r
}

// asMeasured offers the reading itself, at the closest tolerance from ±10 % up that the meter proves.
func asMeasured(c screening.Claim, f *screening.Finding) []screening.Lesser {
	nominal, ok := c.Nominal(Inductance.Name, "")
	r := f.Reading
	if !ok || r.Value/nominal-1 > mostAbove || r.Value/nominal-1 < -mostBelow {
		return nil
	}
	value := book.Honest(r.Value, r.U, 3)
	for _, t := range ladder[2:] {
		below, above := screening.ConformanceProbability(r.Value, r.U, value*(1-t), value*(1+t))
		if 1-below-above < 0.95 {
			continue
		}
		const why = "kept at its measured value, not too far from the printed one"
		rating := withSource(screening.NominalRating(Inductance, value), why)
		tolerance := withSource(screening.RangeRating(screening.Tolerance, -t, t), why)
		return []screening.Lesser{{
			Claim: c.WithRating(rating).WithRating(tolerance), Answers: valueCriterion,
			Text: "as measured, " + quantity.Format(value, quantity.Henry, 0) + " " + tolerance.String(), Source: rating.Source,
		}}
	}
	return nil
}

func untested(part screening.Part, findings []screening.Finding) []string {
	said := []string{"current: saturation and heating", "insulation from winding to core"}
	for i := range findings {
		if findings[i].Limit.Criterion == turnsCriterion && findings[i].Outcome == screening.Pass {
			return said
		}
	}
	return append(said, "shorted turns: no Q held against a twin's or a sheet's")
}
