package diode

import (
	"fmt"
	"math"
	"slices"

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
			reasons = append(reasons, note(of, "%s", text))
		}
	}
	for i := range findings {
		f := &findings[i]
		switch {
		case f.Limit.Criterion == breakdownCriterion && f.Unconfirmed:
			f.Need = screening.Required
			say(f.Limit.On, fmt.Sprintf("it breaks down at %s: damaged, or a Zener diode", quantity.Format(f.Reading.Value, quantity.Volt, 0)))
		case f.Limit.On == screening.VF.Name && f.Reading != nil:
			say(f.Limit.On, forwardWords(part, f))
		case f.Limit.On == screening.IR.Name && f.Limit.Grade == screening.WithinSpec && (f.Unconfirmed || f.Outcome == screening.Fail):
			say(f.Limit.On, "it leaks more than its sheet allows ("+f.Limit.Source.Status.String()+"), and less than its material may")
		case f.Limit.Criterion == blockingCriterion && f.Outcome == screening.Missing && f.Reading != nil && !answered(findings, f):
			say(f.Limit.On, f.Why)
		case f.Limit.Criterion == blockingCriterion && f.Limit.On == screening.IR.Name && leaksLikeBadSilicon(part, f):
			f.Outcome, f.Side, f.Limit.High = screening.Fail, screening.Above, load().leakage[silicon].value
			f.Limit.Source = load().leakage[silicon].source
			say(f.Limit.On, "it drops like silicon, so it may leak no more than silicon")
		}
	}
	return findings, reasons
}

// answered reports whether an alternative of a finding's criterion passes.
func answered(findings []screening.Finding, f *screening.Finding) bool {
	return slices.ContainsFunc(findings, func(g screening.Finding) bool {
		return g.Limit.Criterion == f.Limit.Criterion && g.Limit.Section == f.Limit.Section && g.Outcome == screening.Pass
	})
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
		lines = append(lines, "reverse blocking above "+quantity.Format(proven, quantity.Volt, 0)+" (no rating known)")
	case proven < rated:
		lines = append(lines, fmt.Sprintf("reverse blocking above %s (rated %s)",
			quantity.Format(proven, quantity.Volt, 0), quantity.Format(rated, quantity.Volt, 0)))
	}
	if _, at, ok := sheet(part.Claim, screening.VF.Name, screening.Current); ok && !measuredNear(part, at) {
		lines = append(lines, "forward voltage at "+quantity.Format(at, quantity.Ampere, 0))
	}
	if r, ok := part.Claim.Rating(TRR.Name, ""); ok {
		lines = append(lines, "recovery time ("+r.String()+")")
	}
	return lines
}

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

func measuredNear(part screening.Part, current float64) bool {
	for _, r := range part.Readings {
		if i, ok := r.At.Get(screening.Current); ok && r.Of == screening.VF.Name && i >= current*0.98 {
			return true
		}
	}
	return false
}
