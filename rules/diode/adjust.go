package diode

import (
	"fmt"
	"math"
	"slices"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/junction"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Forward voltages at a tester's current that tell what a junction is made of, V: below shorted it is none; between that and lowDrop it is
// Schottky or germanium; above severalJunctions it is not one silicon junction (all from memory, for words only).
const (
	shorted          = 0.1
	lowDrop          = 0.40
	severalJunctions = 1.0
	smallCurrent     = 2e-3 // A
)

// adjust applies the rules that look across readings: a breakdown below a rating that is only recalled holds the part back until the figure
// is confirmed; a diode of unknown make that drops like silicon may not leak more than silicon.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	said := map[string]bool{}
	say := func(of screening.Characteristic, text string) {
		if text != "" && !said[text] {
			said[text] = true
			reasons = append(reasons, book.Note(of, "%s", text))
		}
	}
	for i := range findings {
		f := &findings[i]
		if turnedRound(part, f.Limit.Section) {
			f.Outcome, f.Unconfirmed, f.Why = screening.Missing, false, turnedWords
			if f.Limit.Criterion == breakdownCriterion {
				f.Wants = screening.Gap{}
			}
			continue
		}
		if f.Outcome == screening.Missing {
			wordGap(f)
		} else if f.Limit.Criterion == blockingCriterion && f.Limit.On == screening.IR.Name {
			takeVoltage(f)
		}
		switch {
		case f.Limit.Criterion == breakdownCriterion && f.Unconfirmed:
			f.Need = screening.Required
			say(f.Limit.On, breakdownWords(f.Reading.Value))
		case f.Limit.On == screening.VF.Name && f.Reading != nil:
			say(f.Limit.On, forwardWords(part, f))
		case f.Limit.Criterion == leakageCriterion && f.Limit.Grade == screening.WithinSpec:
			say(f.Limit.On, leakageWords(findings, f))
		case f.Limit.On == screening.IR.Name && f.Outcome == screening.Pass && roomAssumed(part, f):
			say(f.Limit.On, "no temperature stated: assumed a room's, and in no room from 15 to 35 °C does it leak too much")
		case f.Limit.Criterion == blockingCriterion && f.Limit.On == screening.IR.Name && leaksLikeBadSilicon(part, f):
			f.Outcome, f.Side, f.Limit.High = screening.Fail, screening.Above, load().leakage[silicon].value
			f.Limit.Source = load().leakage[silicon].source
			say(f.Limit.On, "it drops like silicon, so it may leak no more than silicon")
		}
	}
	return findings, reasons
}

// turnedWords says what a diode measured the wrong way round looks like.
const turnedWords = "open forward and a junction's drop in reverse: the probes were the wrong way round; type each reading as the other"

// turnedRound reports whether a section's readings are those of a sound diode whose probes were the wrong way round: that is no fault of the
// diode, and not evidence of anything else either.
func turnedRound(part screening.Part, section string) bool {
	forward, ok1 := part.Reading(screening.VF.Name, section)
	reverse, ok2 := part.Reading(screening.VBR.Name, section)
	return ok1 && ok2 && forward.Over && reverse.Sense == quantity.Exactly && reverse.Value >= shorted && reverse.Value <= severalJunctions
}

// wordGap says of a limit without evidence what its reading lacks, and leaves it to untested to say how far blocking was proved.
func wordGap(f *screening.Finding) {
	switch {
	case f.Why == junction.StateTemperature:
		f.Unstated = screening.PartTemperature
	case f.Limit.Criterion == breakdownCriterion:
		f.Wants = screening.Gap{}
	case f.Limit.Criterion == blockingCriterion && f.Limit.On == screening.VBR.Name && f.Reading == nil:
		f.Why = "whether it blocks was not tried"
	}
}

func breakdownWords(volts float64) string {
	if volts < shorted {
		return "reversed it reads shorted"
	}
	return "it breaks down at " + asPrinted(volts) + ": damaged, or a Zener diode"
}

// roomAssumed reports whether germanium passes on a reading without its temperature.
func roomAssumed(part screening.Part, f *screening.Finding) bool {
	return technologyOf(part.Claim).material == germanium && f.Converted != nil && !f.Reading.At.Has(screening.PartTemperature)
}

// takeVoltage states a limit that holds at whatever voltage is stated at the reading's. One that needed nothing else was not converted.
func takeVoltage(f *screening.Finding) {
	v, ok := f.Reading.At.Get(screening.Voltage)
	if !ok {
		return
	}
	f.Limit.At = f.Limit.At.With(screening.Voltage, v)
	if c := f.Converted; c != nil && c.U == 0 && c.Reading.Value == f.Reading.Value && c.Reading.Sense == f.Reading.Sense {
		f.Converted = nil
	}
}

// leakageWords says of a diode that leaks more than its sheet allows whether its material may: only where that limit, too, was held and
// passes.
func leakageWords(findings []screening.Finding, f *screening.Finding) string {
	if !f.Unconfirmed && f.Outcome != screening.Fail {
		return ""
	}
	more := "it leaks more than its sheet allows (" + f.Limit.Source.Status.String() + ")"
	i := slices.IndexFunc(findings, func(g screening.Finding) bool {
		return g.Limit.Criterion == leakageCriterion && g.Limit.Section == f.Limit.Section && g.Limit.Grade == screening.Serviceable
	})
	switch {
	case i < 0:
		return more
	case findings[i].Outcome == screening.Pass:
		return more + ", and less than its material may"
	case findings[i].Outcome == screening.Fail:
		return "" // the failure says it all
	}
	return more + "; whether its material may leak that much is too near to call"
}

// forwardWords says what a forward voltage looks like; VF alone cannot tell germanium from Schottky.
func forwardWords(part screening.Part, f *screening.Finding) string {
	r := f.Reading
	if i, ok := r.At.Get(screening.Current); !ok || i > smallCurrent {
		return ""
	}
	material := technologyOf(part.Claim).material
	switch {
	case r.Sense == quantity.AtLeast && f.Outcome == screening.Fail:
		return "forward it reads open: turned round, an open junction, several junctions in series (high-voltage stacks), or a light-emitting diode"
	case r.Sense != quantity.Exactly:
		return ""
	case r.Value < shorted && f.Outcome == screening.Fail:
		return "forward it reads shorted"
	case r.Value > severalJunctions && f.Outcome == screening.Fail:
		return "more than one junction's drop: turned round, several in series, a Zener, or a light-emitting diode"
	case r.Value < lowDrop && material == silicon && f.Outcome == screening.Fail:
		return "it drops like a Schottky or germanium diode, or leaks: look at what it claims again"
	case r.Value < lowDrop && r.Value >= shorted && material == unknown:
		return "it drops like a Schottky or a germanium diode; forward voltage alone cannot tell which. Germanium leaks tens to hundreds of " +
			"microamperes that rise steadily with reverse voltage"
	case r.Value > lowDrop && (material == germanium || material == schottky) && f.Outcome == screening.Fail:
		return "it drops like silicon: look at what it claims again"
	}
	return ""
}

// leaksLikeBadSilicon reports whether a diode of unknown make drops like silicon and leaks clearly more than silicon may.
func leaksLikeBadSilicon(part screening.Part, f *screening.Finding) bool {
	if technologyOf(part.Claim).material != unknown || f.Outcome != screening.Pass {
		return false
	}
	vf, ok := part.Reading(screening.VF.Name, f.Limit.Section)
	e := f.Evidence()
	return ok && e != nil && vf.Sense == quantity.Exactly && vf.Value > lowDrop && e.Sense != quantity.AtMost &&
		e.Value-2*e.U > load().leakage[silicon].value
}

// untested says how far blocking was proved, and what else the readings leave open.
func untested(part screening.Part, findings []screening.Finding) []string {
	var lines []string
	proven := inf
	for _, section := range sections(part.Claim) {
		proven = math.Min(proven, provenVoltage(part, findings, section))
	}
	rated, known := ratedVoltage(part.Claim)
	switch {
	case proven == 0:
	case !known:
		lines = append(lines, "reverse blocking untested above "+asPrinted(proven)+" (no rating known)")
	case proven < rated:
		lines = append(lines, fmt.Sprintf("reverse blocking untested above %s (rated %s)", asPrinted(proven), asPrinted(rated)))
	}
	if _, at, ok := sheet(part.Claim, screening.VF.Name, screening.Current); ok && measuredNear(part, 0) && !measuredNear(part, at) {
		lines = append(lines, "forward voltage at "+quantity.Format(at, quantity.Ampere, 0))
	}
	if r, ok := part.Claim.Rating(TRR.Name, ""); ok {
		lines = append(lines, "recovery time ("+r.String()+")")
	}
	return lines
}

// asPrinted writes a voltage as it stands on parts and in sheets: "1000 V", never "1 kV".
func asPrinted(volts float64) string { return fmt.Sprintf("%g V", volts) }

// provenVoltage is the highest reverse voltage at which a section was seen to block, V; 0 where it was not tried.
func provenVoltage(part screening.Part, findings []screening.Finding, section string) float64 {
	var proven float64
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion != blockingCriterion || f.Outcome != screening.Pass || f.Reading == nil || section != "" && f.Limit.Section != section {
			continue
		}
		if f.Limit.On == screening.VBR.Name {
			proven = math.Max(proven, f.Reading.Value)
			continue
		}
		for _, r := range part.Readings {
			if v, ok := r.At.Get(screening.Voltage); ok && r.Of == f.Limit.On && r.Section == f.Limit.Section && r.Sense != quantity.AtLeast && r.Value <= f.Limit.High {
				proven = math.Max(proven, v)
			}
		}
	}
	return proven
}

// measuredNear reports whether forward voltage was read at a current, A, or at more.
func measuredNear(part screening.Part, current float64) bool {
	for _, r := range part.Readings {
		if i, ok := r.At.Get(screening.Current); ok && r.Of == screening.VF.Name && i >= current*0.98 {
			return true
		}
	}
	return false
}
