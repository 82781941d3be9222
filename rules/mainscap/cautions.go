package mainscap

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var pcbRule = screening.Source{
	Document: "40 CFR 761.2(a)(4)", Clause: "a capacitor made before 2 July 1979, or of unknown date, is assumed to hold 500 ppm PCB or more unless marked " +
		"\"No PCBs\"", Status: screening.Published,
}

var crackRule = screening.Source{
	Document: "restorers' reports on metallised-paper suppressors", Clause: "cracked cases let moisture in; they smoke on power-up though they read well",
	Status: screening.SecondHand,
}

var dischargeRules = screening.Source{
	Document: "34 V in 1 s for X parts over 0.1 µF (power supply makers' newsletter; thought to be IEC 60335); IEC 60950 2.1.1.7 as quoted: time constant 1 s " +
		"(plug type A), 10 s (type B); machinery rule 60 V in 5 s, 1 s at plugs", Status: screening.SecondHand,
}

// The rules of discharge.
const (
	touchVolts, touchSeconds   = 34.0, 1.0 // V, s after unplugging
	plugA, plugB               = 1.0, 10.0 // s, time constants
	machineVolts, machineAfter = 60.0, 5.0 // V, s
	ruleAbove                  = 0.1e-6    // F: below it no resistor is asked for
	pcbUntil                   = 1979      // the last year of making that counts as PCB
)

// DischargeConstant is the longest R·C, in seconds, that falls from a peak to a voltage in a time: t/ln(peak/U). +Inf where the peak is no
// higher.
func DischargeConstant(peak, volts, seconds float64) float64 {
	if peak <= volts {
		return math.Inf(1)
	}
	return seconds / math.Log(peak/volts)
}

// cautions: the stored charge, at the crest of its AC voltage, at every step; oil and paper at the look; the discharge rules with the verdict.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	claim := part.Claim
	if _, err := capacitor.Units(claim, span); err != nil {
		return oilAndPaper(claim, at)
	}
	crest := screening.NominalRating(screening.RatedVoltage, math.Ceil(peak(claim)))
	charged := part
	charged.Claim = claim.WithRating(crest)
	var test func(capacitor.Unit) float64
	if testVolts(claim) > 0 {
		test = func(capacitor.Unit) float64 { return testVolts(claim) }
	}
	all := append(capacitor.Cautions(charged, at, span, test), oilAndPaper(claim, at)...)
	if at == screening.AtVerdict {
		all = append(all, dischargeCaution(claim)...)
	}
	return all
}

func oilAndPaper(claim screening.Claim, at screening.Moment) []screening.Caution {
	if at == screening.AtMeasure {
		return nil
	}
	var all []screening.Caution
	class, technology := claim.Trait(capacitor.TraitMainsClass), claim.Trait(screening.TraitTechnology)
	year, dated := claim.Year()
	if oily := technology == "oil" || technology == "" && class == motorRun; oily && claim.Trait(traitNoPCB) == "" && (!dated || year <= pcbUntil) {
		all = append(all, screening.Caution{
			Code: "pcb", Level: screening.Danger, Source: pcbRule,
			Text: "an oil-filled part of unknown date, or from before July 1979, is to be taken for PCB unless it is marked \"No PCBs\": never open, drain, heat " +
				"or puncture it; gloves where it is oily; bag it and hand it in by your local rules for hazardous waste",
		})
	}
	if technology == "paper" {
		all = append(all, screening.Caution{
			Code: "metallised-paper", Level: screening.Danger, Source: crackRule,
			Text: "metallised paper in a clear or amber block cracks with age, takes up moisture and smokes when it is powered, however well it reads: " +
				"take it out of any equipment before that is switched on",
		})
	}
	return all
}

// dischargeCaution says what resistor the equipment needs across the part that is fitted instead, at the top of its tolerance, and how long the part on the bench takes.
func dischargeCaution(claim screening.Claim) []screening.Caution {
	us, err := capacitor.Units(claim, span)
	if err != nil {
		return nil
	}
	u, crest := us[0], peak(claim)
	volts, _ := acVolts(claim)
	touch := DischargeConstant(crest, touchVolts, touchSeconds) / u.Top()
	machine := DischargeConstant(crest, machineVolts, machineAfter) / u.Top()
	bench, benchWatts := book.DischargeResistor(u.Top(), crest)
	values := map[string]float64{
		"peak": crest, "resistance-34V-1s": touch, "power-34V-1s": volts * volts / touch, "resistance-plug-a": plugA / u.Top(),
		"resistance-plug-b": plugB / u.Top(), "resistance-60V-5s": machine, "bench-resistance": bench, "bench-power": benchWatts,
		"bench-time": book.DischargeTime(bench, u.Top(), crest),
	}
	ohms := func(x float64) string { return quantity.Format(roundDown(x), quantity.Ohm, 2) }
	text := fmt.Sprintf("%s holds its charge when the plug is pulled, at worst the crest of %g V AC: %s. ", capacitor.Farads(u.Farad), volts,
		quantity.Format(crest, quantity.Volt, 3))
	switch class := claim.Trait(capacitor.TraitMainsClass); {
	case class == motorRun || class == motorStart:
		text += "The rules quoted for discharge are those of suppressors: keep the discharge resistor that the equipment has. "
	case u.Farad > ruleAbove:
		text += fmt.Sprintf("The equipment needs a resistor across it, rated for the voltage, for up to %s: to %g V in %g s at most %s (%s in it all the time), for a time constant of "+
			"%g s (plug) %s, of %g s %s, to %g V in %g s %s (rules second-hand: yours may differ; licensed practice). ", capacitor.Farads(u.Top()), touchVolts, touchSeconds,
			ohms(touch), quantity.Format(volts*volts/touch, quantity.Watt, 2), plugA, ohms(plugA/u.Top()), plugB, ohms(plugB/u.Top()), machineVolts,
			machineAfter, ohms(machine))
	default:
		text += "Up to 0.1 µF the rules quoted ask for no discharge resistor. "
	}
	text += fmt.Sprintf("On the bench: %s, %s at first, to %d V in %s, then measure what remains.", quantity.Format(bench, quantity.Ohm, 0),
		quantity.Format(benchWatts, quantity.Watt, 2), int(screening.SafeVoltage), inSeconds(values["bench-time"]))
	return []screening.Caution{{Code: "discharge-rules", Level: screening.Notice, Text: text, Values: values, Source: dischargeRules}}
}

// inSeconds words a time; what is over before a hand moves is no number to read.
func inSeconds(s float64) string {
	if s < 0.1 {
		return "less than 0.1 s"
	}
	if s >= 10 {
		return fmt.Sprintf("%.0f s", s)
	}
	return fmt.Sprintf("%.2g s", s)
}

// roundDown rounds down to two significant digits: a resistor at most this large.
func roundDown(x float64) float64 {
	scale := math.Pow(10, math.Floor(math.Log10(x))-1)
	return math.Floor(x/scale*(1+1e-9)) * scale
}
