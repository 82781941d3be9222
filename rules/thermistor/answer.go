package thermistor

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// noClaim is the note of the limit of a thermistor on which nothing is printed.
const noClaim = "nothing is claimed: its resistance at 25 °C is taken as measured"

func limits(c screening.Claim) ([]screening.Limit, error) {
	l := screening.Limit{
		On: screening.Resistance.Name, Unit: quantity.Ohm, Criterion: r25Criterion, At: screening.At(screening.PartTemperature, reference),
		Low: math.Inf(-1), High: math.Inf(1), Need: screening.Required, Set: screening.GeneralSet, InUse: true, Grade: screening.WithinSpec,
	}
	r, ok := c.Rating(screening.Resistance.Name, "")
	if !ok {
		l.Source, l.Note = screening.Source{Document: "no resistance is claimed", Status: screening.House}, noClaim
		return []screening.Limit{l, temperatureLimit()}, nil
	}
	if !r.HasNominal() {
		l.Low, l.High, l.Source = r.Low, r.High, book.SourceOf(&r)
		return []screening.Limit{l, temperatureLimit()}, nil
	}
	t, _ := c.Rating(screening.Tolerance.Name, "")
	l.Low, l.High, l.Source = r.Nominal*(1+t.Low), r.Nominal*(1+t.High), toleranceSource(t)
	l.Formula = func() string {
		text := fmt.Sprintf("%s %s = %s to %s", ohms(r.Nominal), t, quantity.Format(l.Low, quantity.Ohm, 4), quantity.Format(l.High, quantity.Ohm, 4))
		if isPTC(c) {
			return text
		}
		low, high, _ := bOf(c)
		return text + fmt.Sprintf(", that is ±%.2g K at %s per kelvin", Kelvins(math.Max(-t.Low, t.High), Slope((low+high)/2, reference)),
			percent(Slope((low+high)/2, reference)))
	}
	if isPTC(c) {
		l.Note = "below its switching temperature; that it switches is not shown"
	}
	return []screening.Limit{l, temperatureLimit()}, nil
}

// temperatureLimit makes a walk ask for the temperature, before the resistance that says nothing without it.
func temperatureLimit() screening.Limit {
	return screening.Limit{
		On: screening.Temperature.Name, Unit: quantity.Celsius, Criterion: temperatureCriterion, Low: math.Inf(-1), High: math.Inf(1),
		Need: screening.Required, Set: screening.GeneralSet, InUse: true,
		Source: screening.Source{Document: "a thermistor's resistance says nothing without its temperature", Status: screening.House},
		Note:   "whatever it is, it must be stated",
	}
}

// statesTemperature reports whether a resistance was typed with the temperature it was read at.
func statesTemperature(part screening.Part) bool {
	r, ok := part.Reading(screening.Resistance.Name, "")
	return ok && r.At.Has(screening.PartTemperature)
}

// toleranceSource is where the band comes from: the letter's meaning, the default's source, or the part's own print.
func toleranceSource(t screening.Rating) screening.Source {
	if s := book.ToleranceSource(t.Typed); s.Status != screening.NoStatus {
		return s
	}
	return book.SourceOf(&t)
}

// adjust leaves the resistance open where nothing is claimed, keeps a thermometer from failing a sound part, and says what the thermometer costs.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion == temperatureCriterion {
			if f.Outcome == screening.Missing && statesTemperature(part) {
				f.Outcome, f.Probability, f.Why = screening.Pass, 1, ""
			}
			continue
		}
		if f.Limit.Note == noClaim {
			f.Outcome, f.Probability, f.Margin = screening.Missing, math.NaN(), math.NaN()
			if f.Why == "" {
				f.Why = noClaim
			}
			f.Limit.Note = ""
		}
		if f.Reading == nil {
			continue
		}
		if f.Outcome == screening.Missing && f.Unstated == screening.PartTemperature && f.Reading.Sense == quantity.Exactly {
			f.Why = "it changes by 3 to 5 % per kelvin, and the temperature it was read at is not stated: temperature=22.5C"
		}
		// The meter, the thermometer and the formula may all be off by their whole width and the part be sound.
		if e := f.Evidence(); f.Outcome == screening.Fail && f.Converted != nil && beyond(e.Value, f.Limit) <= e.Spec {
			f.Outcome, f.Why = screening.Close, "too near the limit for this meter and thermometer"
		}
		if f.Outcome == screening.Close && !f.Unconfirmed {
			thermometerDecides(part, f)
		}
		if f.Reading.Sense == quantity.AtLeast {
			reasons = append(reasons, book.Note(f.Limit.On, "it reads open"))
		}
	}
	return findings, reasons
}

// thermometerDecides says where the temperature leaves more open than the meter. Where no wider tolerance is proven either, the reading settles
// nothing, and the temperature is what to take again.
func thermometerDecides(part screening.Part, f *screening.Finding) {
	share, half := thermometerShare(part, f)
	if share <= 0 {
		return
	}
	f.Why = fmt.Sprintf("the temperature is known to ±%.2g K, which is ±%s of its resistance: state it to ±0.5 K", half, percent(share))
	f.Wants.Accuracy = 0
	nominal, ok := part.Claim.Nominal(screening.Resistance.Name, "")
	widest := ladder[len(ladder)-1]
	e := f.Evidence()
	below, above := screening.ConformanceProbability(e.Value, e.U, nominal*(1-widest), nominal*(1+widest))
	if !ok || 1-below-above < 0.95 {
		f.Outcome = screening.Missing
	}
}

// beyond is how far x lies outside a limit.
func beyond(x float64, l screening.Limit) float64 { return math.Max(l.Low-x, x-l.High) }

// ladder is the tolerances that a lesser claim may name.
var ladder = []float64{0.01, 0.02, 0.03, 0.05, 0.10, 0.15, 0.20, 0.25, 0.30}

// leastAsMeasured is the closest tolerance at which a part is kept as measured: its B value is not known (house).
const leastAsMeasured = 0.10

// lesser answers a resistance too near its edge for this thermometer with a wider tolerance, and one outside, or unclaimed, with the resistance as
// measured.
func lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	var wide, measured []screening.Lesser
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion != r25Criterion || f.Reading == nil || f.Reading.Sense != quantity.Exactly || f.Converted == nil {
			continue
		}
		switch f.Outcome {
		case screening.Close:
			wide = wider(part, f)
		case screening.Fail:
			measured = asMeasured(part.Claim, f, false)
		case screening.Missing:
			if _, claimed := part.Claim.Rating(screening.Resistance.Name, ""); !claimed {
				measured = asMeasured(part.Claim, f, true)
			}
		}
	}
	return append(wide, measured...)
}

var houseSource = screening.Source{Document: "the printed value at a wider tolerance", Status: screening.House}

func wider(part screening.Part, f *screening.Finding) []screening.Lesser {
	claimed, ok := part.Claim.Rating(screening.Tolerance.Name, "")
	if !ok {
		return nil
	}
	var answers []screening.Lesser
	for _, t := range ladder {
		if t <= math.Max(-claimed.Low, claimed.High) {
			continue
		}
		rating := screening.RangeRating(screening.Tolerance, -t, t)
		rating.Source = houseSource
		rating.Typed = rating.String()
		text := rating.String() + " proven; " + claimed.String() + " not provable with this meter"
		if share, half := thermometerShare(part, f); share > 0 {
			text = fmt.Sprintf("%s proven; %s not provable with the temperature known to ±%.2g K", rating, claimed, half)
		}
		if f.Unconfirmed {
			text = rating.String() + " proven; " + claimed.String() + " is only taken for granted (" + f.Limit.Source.Status.String() + ")"
		}
		answers = append(answers, screening.Lesser{
			Claim: part.Claim.WithRating(rating), Answers: r25Criterion, Tolerance: true, Text: text, Source: houseSource,
		})
	}
	return answers
}

// asMeasured offers the resistance that a part comes to at 25 °C, at the closest tolerance that is proven.
func asMeasured(c screening.Claim, f *screening.Finding, fromMissing bool) []screening.Lesser {
	r := f.Converted.Reading
	value := book.Honest(r.Value, r.U, 3)
	if nominal, ok := c.Nominal(screening.Resistance.Name, ""); ok {
		if kept := figures()["kept"]; r.Value < nominal*kept.low || r.Value > nominal*kept.high {
			return nil
		}
	}
	for _, t := range ladder {
		below, above := screening.ConformanceProbability(r.Value, r.U, value*(1-t), value*(1+t))
		if t < leastAsMeasured || 1-below-above < 0.95 {
			continue
		}
		source := screening.Source{Document: "kept at its measured resistance", Status: screening.House}
		rating, tolerance := screening.NominalRating(screening.Resistance, value), screening.RangeRating(screening.Tolerance, -t, t)
		rating.Source, tolerance.Source = source, source
		rating.Typed, tolerance.Typed = rating.String(), tolerance.String()
		text := "as measured, " + ohms(value) + " " + tolerance.String() + " at 25 °C"
		if _, known := c.Rating(B.Name, ""); !known && !isPTC(c) {
			text += ", its B value not known"
		}
		return []screening.Lesser{{
			Claim: c.WithRating(rating).WithRating(tolerance), Answers: r25Criterion, FromMissing: fromMissing, Source: source,
			Text: text,
		}}
	}
	return nil
}

func untested(part screening.Part, _ []screening.Finding) []string {
	if isPTC(part.Claim) {
		return []string{"switching temperature, hot resistance, rated voltage: that it switches is not shown"}
	}
	return []string{"B value (a second reading in melting ice would show it), rated power or current, drift"}
}
