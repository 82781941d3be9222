package regulator

import (
	"math"
	"slices"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// nearInput is how close output and input lie where nothing regulates between them, V (house).
const nearInput = 0.5

// adjust applies the rules that look across readings: a regulator without the input or the load that it needs is not judged by what it gives
// then, and a failure is named.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	say := func(of screening.Characteristic, text string) {
		if n := book.Note(of, "%s", text); text != "" && !slices.Contains(reasons, n) {
			reasons = append(reasons, n)
		}
	}
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion != voltageCriterion && f.Limit.Criterion != grossCriterion || f.Reading == nil {
			continue
		}
		if why, unstated := starved(part.Claim, f); why != "" {
			f.Outcome, f.Unconfirmed, f.Why, f.Unstated = screening.Missing, false, why, unstated
			f.Probability, f.Margin = math.NaN(), math.NaN()
			continue
		}
		say(f.Limit.On, failWords(part.Claim, f))
	}
	return findings, reasons
}

// starved says why a reading is no evidence: its input or its current was too low to regulate, or may have been.
func starved(c screening.Claim, f *screening.Finding) (why string, unstated screening.Variable) {
	in, hasInput := f.Reading.At.Get(screening.VIN)
	i, hasCurrent := f.Reading.At.Get(screening.Current)
	outside := f.Outcome == screening.Fail || f.Unconfirmed
	need := leastInput(c)
	kind := functionOf(c)
	if kind != shunt {
		switch in = math.Abs(in); {
		case hasInput && in < need && !(f.Side == screening.Above && outside):
			return "taken with " + volts(in) + " at its input: it needs " + volts(need) + " or more", screening.NoVariable
		case !hasInput && outside && f.Side == screening.Below:
			return "it reads low, as any regulator does whose input is too low: state the input voltage (" + string(f.Limit.On) + "@vin=10V,…)", screening.VIN
		}
	}
	atLeast := least(c)
	switch {
	case kind == fixed || atLeast == 0 || !outside:
	case hasCurrent && i < atLeast*0.98:
		return "taken at " + quantity.Format(i, quantity.Ampere, 0) + ": it regulates from " + quantity.Format(atLeast, quantity.Ampere, 0) + " up", screening.NoVariable
	case !hasCurrent:
		return "it is off, as any is that gets too little current: state the current (" + string(f.Limit.On) + "@" +
			typed(atLeast, quantity.Ampere) + "=…)", screening.Current
	}
	return "", screening.NoVariable
}

func failWords(c screening.Claim, f *screening.Finding) string {
	in, hasInput := f.Reading.At.Get(screening.VIN)
	e := f.Evidence()
	switch {
	case f.Outcome != screening.Fail || f.Limit.Grade == screening.WithinSpec || e == nil:
		return ""
	case hasInput && functionOf(c) != shunt && math.Abs(math.Abs(in)-e.Value) < nearInput:
		return "the input stands at its output: shorted inside, or the legs were mistaken"
	case e.Value < nearInput:
		return "it gives nothing: mistaken legs, no input at its leg, or dead"
	case f.Side == screening.Above:
		return "above its band it endangers what it feeds; read it again with both capacitors at its legs, an oscillating one reads wrong"
	}
	return "below its band: read it again with both capacitors at its legs, an oscillating one reads wrong; if it stays, it is damaged"
}

// proven is the tolerance that a pocket meter can show of a reference (house): 1 % and two counts of a range of 20 V are already 2 % of 2.5 V.
const proven = 0.05

// lesser answers a reference whose band is too tight for the meter with one that the reading proves.
func lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	d, r, ok := voltageOf(part.Claim)
	if !ok || functionOf(part.Claim) != shunt {
		return nil
	}
	for i := range findings {
		f := &findings[i]
		e := f.Evidence()
		if f.Limit.Criterion != voltageCriterion || f.Outcome != screening.Close || f.Unconfirmed || e == nil {
			continue
		}
		mid := (r.Low + r.High) / 2
		wide := screening.RangeRating(d, book.Honest(mid*(1-proven), 0, 3), book.Honest(mid*(1+proven), 0, 3))
		below, above := screening.ConformanceProbability(e.Value, e.U, wide.Low, wide.High)
		if wide.Low >= r.Low || wide.High <= r.High || 1-below-above < 0.95 {
			continue
		}
		wide.At = r.At
		wide.Source = screening.Source{Document: "what a pocket meter proves of a reference", Status: screening.House}
		wide.Typed = volts(wide.Low) + ".." + volts(wide.High)
		claim := part.Claim
		claim.Ratings = append(book.Without(claim.Ratings, d.Name), wide)
		return []screening.Lesser{{
			Claim: claim, Answers: voltageCriterion, Tolerance: true, Source: wide.Source,
			Text: volts(wide.Low) + " to " + volts(wide.High) + " proven (±" + quantity.Format(proven, quantity.Ratio, 0) + "); " + volts(r.Low) + " to " +
				volts(r.High) + " not provable with this meter",
		}}
	}
	return nil
}

// untested says what the readings leave open: the load above all.
func untested(part screening.Part, _ []screening.Finding) []string {
	var most float64
	measured := false
	for _, r := range part.Readings {
		if r.Of == VOut.Name || r.Of == VRef.Name {
			i, _ := r.At.Get(screening.Current)
			measured, most = true, math.Max(most, i)
		}
	}
	var lines []string
	rating, known := part.Claim.Rating(IOut.Name, "")
	switch {
	case !measured:
	case most == 0:
		lines = append(lines, "its voltage under load (no load was stated)")
	case known && most < rating.Low:
		lines = append(lines, "load above "+quantity.Format(most, quantity.Ampere, 0)+" (rated "+rating.String()+")")
	case !known:
		lines = append(lines, "load above "+quantity.Format(most, quantity.Ampere, 0)+" (no rating known)")
	}
	if functionOf(part.Claim) == shunt {
		return append(lines, "noise and drift")
	}
	return append(lines, "current limit, thermal shutdown and ripple rejection")
}
