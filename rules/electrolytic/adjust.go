package electrolytic

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Codes of this kind's own reasons.
const (
	codeLeakageSuspected = "leakage-suspected"
	codeFaultEra         = "electrolyte-fault-era"
	codeConfirmed        = "fails-published-too"
	codeUnconfirmed      = "figure-unconfirmed"
	codeSeriesUnknown    = "series-unknown"
	codeCold             = "cold"
)

// Years of the water-driven electrolyte fault (from memory).
const faultFrom, faultTo = 1999, 2007

// mostTreatments is how many times a part is worth re-forming (house).
const mostTreatments = 2

// coldBelow is the temperature in °C below which ESR reads 20 to 50 % high (derived from the impedances that makers print at −10 and 20 °C: 2.3
// to 4.7 % per kelvin).
const coldBelow = 10

// view is one section's findings, sorted for the rules across readings.
type view struct {
	part                                screening.Part
	unit                                unit
	capacitance, loss, leakage, ceiling []*screening.Finding
}

// adjust applies the rules that look across readings, section by section.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	us, err := units(part.Claim)
	if err != nil {
		return findings, nil // the limits have said so already
	}
	reasons := neverReversed(part)
	var unproved []screening.Finding
	for _, u := range us {
		v := viewOf(part, u, findings)
		reasons = append(reasons, v.confirm()...)
		reasons = append(reasons, v.confirmDry()...)
		reasons = append(reasons, v.confirmLoss()...)
		reasons = append(reasons, v.forgive()...)
		suspected := v.suspectLeakage()
		if slices.ContainsFunc(suspected, func(r screening.Reason) bool { return r.Code == codeFaultEra }) {
			unproved = append(unproved, seriesMustBeProved(u.section))
		}
		reasons = append(reasons, suspected...)
		reasons = append(reasons, v.giveUp()...)
		for _, f := range v.ceiling {
			if f.Outcome == screening.Missing {
				f.Wants = screening.Gap{} // the same reading as leakage, which is listed
			}
		}
		if _, ok := v.leakageOnlyBelow(); ok {
			for _, f := range v.leakage {
				f.Wants = screening.Gap{} // untested words it
			}
		}
	}
	if t, ok := part.Ambient(); ok && t.Value < coldBelow {
		reasons = append(reasons, screening.Reason{
			Code: codeCold, Of: screening.ESR.Name,
			Text: fmt.Sprintf("at %g °C ESR reads high by 2 to 5 %% per kelvin below 20 °C: let the part warm up and measure again if it fails", t.Value),
		})
	}
	return append(findings, unproved...), reasons
}

func viewOf(part screening.Part, u unit, findings []screening.Finding) view {
	v := view{part: part, unit: u}
	for i := range findings {
		f := &findings[i]
		if f.Limit.Section != u.section {
			continue
		}
		switch f.Limit.Criterion {
		case criterionCapacitance:
			v.capacitance = append(v.capacitance, f)
		case criterionLoss:
			v.loss = append(v.loss, f)
		case criterionLeakage, criterionReversed:
			v.leakage = append(v.leakage, f)
		case criterionCeiling, criterionCeilingReversed:
			v.ceiling = append(v.ceiling, f)
		}
	}
	return v
}

func hasOutcome(findings []*screening.Finding, outcome screening.Outcome) bool {
	for _, f := range findings {
		if f.Outcome == outcome {
			return true
		}
	}
	return false
}

// holds reports whether leakage passes each way that the part must hold.
func (v *view) holds() bool {
	for _, w := range ways(v.part.Claim) {
		if !slices.ContainsFunc(v.leakage, func(f *screening.Finding) bool {
			return f.Limit.Criterion == w.leakage && f.Outcome == screening.Pass
		}) {
			return false
		}
	}
	return true
}

// leaking returns the first leakage criterion that fails.
func (v *view) leaking() screening.Criterion {
	for _, f := range v.leakage {
		if f.Outcome == screening.Fail {
			return f.Limit.Criterion
		}
	}
	return criterionLeakage
}

// readsHigh reports whether the capacitance reads above the top of its tolerance, and the reading.
func (v *view) readsHigh() (*screening.Reading, bool) {
	for _, f := range v.capacitance {
		e := f.Evidence()
		if e != nil && e.Sense != quantity.AtMost && e.Value > f.Limit.High {
			return e, true
		}
	}
	return nil, false
}

// suspectLeakage: a capacitance above its tolerance is a leakage suspicion. Leakage then decides: unmeasured it is required, passed it
// leaves the reading unexplained, failed it is to be re-formed, but on parts of the electrolyte fault's years that is not to be trusted.
func (v *view) suspectLeakage() []screening.Reason {
	reading, high := v.readsHigh()
	if !high {
		return nil
	}
	for _, f := range v.leakage {
		f.Need = screening.Required
		if f.Outcome == screening.Missing && f.Reading == nil {
			f.Why = "capacitance reads high, so leakage decides"
		}
	}
	text := fmt.Sprintf("capacitance reads %s, above its tolerance: a leaky part reads high, so leakage at %s decides",
		microfarads(reading.Value), quantity.Format(v.unit.volts, quantity.Volt, 0))
	failed := hasOutcome(v.leakage, screening.Fail)
	passed := v.holds() && !failed
	switch {
	case failed && inFaultEra(v.part.Claim):
		return v.suspectFaultEra()
	case passed:
		why := "capacitance reads high although leakage at rated voltage passes: measure again at 120 Hz with another meter, and check the marking"
		for _, f := range v.capacitance {
			if f.Outcome == screening.Fail {
				f.Outcome, f.Why = screening.Close, why
			}
		}
		text = why
	case !failed && inFaultEra(v.part.Claim):
		// Hours of treatment are not recommended to a part of these years before its leakage is known.
		text += fmt.Sprintf(", before any treatment: parts of %d to %d are suspect", faultFrom, faultTo)
		setAside(v.capacitance)
	case v.part.Treated >= mostTreatments && !failed:
		for _, f := range v.capacitance {
			if f.Outcome == screening.Fail {
				f.Outcome, f.Why = screening.Close, "reads high after re-forming; leakage at rated voltage decides"
			}
		}
	}
	return []screening.Reason{{Code: codeLeakageSuspected, Text: text, Of: screening.Capacitance.Name}}
}

// inFaultEra reports whether a part may be of the electrolyte fault's years and nothing proves its series sound.
func inFaultEra(claim screening.Claim) bool {
	if claim.Trait(traitSeries) == seriesSound {
		return false
	}
	year, _ := claim.Year()
	return year >= faultFrom && year <= faultTo || strings.EqualFold(claim.Trait(screening.TraitDated), "200x")
}

// suspectFaultEra leaves the verdict to what is known of the series: no reading of this part can settle it.
func (v *view) suspectFaultEra() []screening.Reason {
	setAside(v.capacitance)
	setAside(v.leakage)
	dated := v.part.Claim.Trait(screening.TraitDated)
	return []screening.Reason{{Code: codeFaultEra, Of: screening.Leakage.Name, Text: fmt.Sprintf(
		"high capacitance with high leakage on a part of %s is how the electrolyte fault of %d to %d shows (from memory): re-forming does not last",
		dated, faultFrom, faultTo)}}
}

// seriesMustBeProved asks for the one thing that settles a part with the signs of the electrolyte fault: the word on its series.
func seriesMustBeProved(section string) screening.Finding {
	return screening.Finding{
		Limit: screening.Limit{
			On: traitSeries, Unit: quantity.One, Section: section, Criterion: criterionSeries, Low: math.Inf(-1), High: math.Inf(1),
			Evidence: screening.ByRating, Set: screening.HouseSet, InUse: true,
			Note:   "others of the same maker, series and years that have lasted would prove it",
			Source: screening.Source{Document: "re-forming a part of the electrolyte fault's years does not last", Status: screening.FromMemory},
		},
		By: screening.ByRating, Probability: math.NaN(), Margin: math.NaN(), Wants: screening.Gap{Of: traitSeries},
		Why: "not known to have lasted",
	}
}

// setAside takes failures out of the verdict: measuring again would settle nothing, so what decides is asked for instead.
func setAside(findings []*screening.Finding) {
	for _, f := range findings {
		if f.Outcome == screening.Fail {
			f.Outcome, f.Need, f.Why = screening.Close, screening.Wanted, "reads out of its limits, which by itself decides nothing here"
		}
	}
}

// giveUp takes re-forming away from a part that was re-formed twice and still leaks.
func (v *view) giveUp() []screening.Reason {
	if v.part.Treated < mostTreatments || !hasOutcome(v.leakage, screening.Fail) {
		return nil
	}
	for _, group := range [][]*screening.Finding{v.capacitance, v.leakage} {
		for _, f := range group {
			f.Limit.TreatHigh = ""
		}
	}
	return []screening.Reason{{Code: screening.CodeTreatedBefore, Of: screening.Leakage.Name, Text: fmt.Sprintf(
		"re-formed %d times and still leaking: the oxide does not come back", v.part.Treated)}}
}

// lesser offers lower voltages: only for leakage, only at a voltage at which leakage was read, and only to a part whose other readings do
// not fail its own claim. Capacitance and loss are never answered by a lesser claim.
func lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	us, err := units(part.Claim)
	if err != nil {
		return nil
	}
	var all []screening.Lesser
	for _, u := range us {
		v := viewOf(part, u, findings)
		if !hasOutcome(v.leakage, screening.Fail) {
			continue
		}
		if spoilt(v.capacitance) || spoilt(v.loss) {
			return nil
		}
		for _, volts := range lowerVoltages(part, u) {
			all = append(all, lowerVoltage(part.Claim, u, volts, v.leaking()))
		}
	}
	return all
}

// spoilt reports whether a criterion fails or is open to doubt at the grade serviceable, so that no lower voltage may hide it.
func spoilt(findings []*screening.Finding) bool {
	pass, doubt := false, false
	for _, f := range findings {
		if f.Limit.Grade == screening.WithinSpec {
			continue
		}
		switch f.Outcome {
		case screening.Fail:
			return true
		case screening.Close:
			doubt = true
		case screening.Pass:
			pass = true
		}
	}
	return doubt && !pass
}

// lowerVoltages lists the voltages below the rated one at which leakage of a section was read, each way that the part must hold, highest first.
func lowerVoltages(part screening.Part, u unit) []float64 {
	var volts []float64
	for i, w := range ways(part.Claim) {
		read := voltagesRead(part, u, w.on.Name)
		if i == 0 {
			volts = read
			continue
		}
		volts = slices.DeleteFunc(volts, func(v float64) bool { return !slices.Contains(read, v) })
	}
	return volts
}

// voltagesRead lists the voltages below the rated one at which one leakage was read; a reading within 3 % of a printed rating counts for
// that rating.
func voltagesRead(part screening.Part, u unit, of screening.Characteristic) []float64 {
	var volts []float64
	for _, r := range part.Readings {
		x, ok := r.At.Get(screening.Voltage)
		if r.Of != of || r.Section != u.section || !ok || x < leastVolts || x >= u.volts*nearlyAtRated[screening.Voltage].Low {
			continue
		}
		for _, v := range ladderVolts {
			if math.Abs(x/v-1) <= 0.03 {
				x = v
			}
		}
		volts = insertDescending(volts, x)
	}
	return volts
}

func insertDescending(list []float64, x float64) []float64 {
	i := 0
	for i < len(list) && list[i] > x {
		i++
	}
	if i < len(list) && list[i] == x {
		return list
	}
	list = append(list, 0)
	copy(list[i+1:], list[i:])
	list[i] = x
	return list
}

func lowerVoltage(claim screening.Claim, u unit, volts float64, answers screening.Criterion) screening.Lesser {
	r, _ := claim.Rating(screening.RatedVoltage.Name, u.section)
	r.Nominal, r.Low, r.High, r.Typed = volts, volts, volts, ""
	r.Source = screening.Source{Document: "leakage read at this voltage", Status: screening.House}
	return screening.Lesser{
		Claim: claim.WithRating(r), Answers: answers, Source: r.Source,
		Text: fmt.Sprintf("for use up to %g V instead of %g V, on the leakage read there: mark it %g V", volts, u.volts, volts),
	}
}
