package bridge

import (
	"math"
	"slices"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/sheet"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Forward voltages at a tester's current that tell what is wrong with a leg, V (from memory, for words only).
const (
	shorted     = 0.1
	oneJunction = 1.0 // above it, it is not one silicon junction
)

// sumsUp is how far the whole bridge may lie from the sum of its legs before one of the readings was a slip, V (house).
const sumsUp = 0.15

// adjust applies the rules that look across readings: a bridge whose every leg reads open was measured with the probes the wrong way round,
// a breakdown below a rating that is only recalled holds it back, and a failing leg is named.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	say := func(of screening.Characteristic, text string) {
		if n := book.Note(of, "%s", text); text != "" && !slices.Contains(reasons, n) {
			reasons = append(reasons, n)
		}
	}
	dark := nothingConducts(part)
	for i := range findings {
		f := &findings[i]
		switch {
		case f.Limit.Criterion == forwardCriterion && turnedRound(part, f.Limit.Section):
			f.Outcome, f.Unconfirmed = screening.Missing, false
			f.Why = "open forward and a junction's drop in reverse: the probes were the wrong way round; type each reading as the other"
		case f.Limit.Criterion == forwardCriterion && f.Outcome == screening.Fail && f.Reading.Over && dark && !openBothWays(part, f.Limit.Section):
			// Close, not missing: the next leg may settle it.
			f.Outcome = screening.Close
			f.Why = "no leg was seen to conduct yet: are plus and minus, or the probes, the wrong way round? Turn the probes; OL that way too is " +
				"an open leg (vbr/" + f.Limit.Section + "=OL)"
		case f.Limit.Criterion == forwardCriterion && f.Reading != nil:
			say(f.Limit.On, legWords(f))
		case f.Limit.Criterion == blockingCriterion && f.Outcome == screening.Fail:
			say(f.Limit.On, wayWords(part, f))
		case f.Limit.Criterion == breakdownCriterion && f.Outcome == screening.Missing:
			f.Wants = screening.Gap{} // untested says how far blocking was proved
		case f.Limit.Criterion == breakdownCriterion && f.Unconfirmed:
			f.Need = screening.Required
			say(f.Limit.On, "it breaks down at "+asPrinted(f.Evidence().Value)+": damaged, if its rating is right")
		case f.Limit.Criterion == balanceCriterion && f.Outcome == screening.Missing:
			f.Wants = screening.Gap{} // it is computed, never asked for
		case f.Outcome == screening.Missing && (f.Limit.Criterion == seriesCriterion || f.Limit.Criterion == leakageCriterion):
			f.Wants = screening.Gap{} // the legs say more than the whole, and untested says how far blocking was proved
		case f.Limit.Criterion == balanceCriterion && f.Outcome == screening.Fail && f.Limit.Grade == screening.WithinSpec:
			say(f.Limit.On, "its legs drop unlike each other: read them again, cold; one may have been overloaded")
		}
		if f.Limit.Criterion == blockingCriterion && f.Limit.On == screening.IR.Name && f.Reading != nil {
			takeVoltage(f)
		}
	}
	say(screening.VF.Name, sumWords(part))
	if _, whole := own(part, screening.VF.Name, ""); whole {
		say(screening.VF.Name, "a forward voltage without a leg is not used: type it as vf/ac1-plus=…")
	}
	if _, whole := own(part, screening.VBR.Name, ""); whole {
		say(screening.VBR.Name, "a reverse reading without its leads is not used: type it as vbr/ac1-ac2=… and vbr/ac2-ac1=…")
	}
	return findings, reasons
}

// takeVoltage states a limit that holds at whatever voltage is stated at the reading's.
func takeVoltage(f *screening.Finding) {
	if v, ok := f.Reading.At.Get(screening.Voltage); ok {
		f.Limit.At = f.Limit.At.With(screening.Voltage, v)
	}
}

// nothingConducts reports whether every leg that was read forward reads open.
func nothingConducts(part screening.Part) bool {
	for _, leg := range legs {
		if r, ok := own(part, screening.VF.Name, leg); ok && !r.Over {
			return false
		}
	}
	return true
}

func turnedRound(part screening.Part, leg string) bool {
	f, ok1 := own(part, screening.VF.Name, leg)
	r, ok2 := own(part, screening.VBR.Name, leg)
	return ok1 && ok2 && f.Over && r.Sense == quantity.Exactly && r.Value >= shorted && r.Value <= oneJunction
}

func openBothWays(part screening.Part, leg string) bool {
	f, ok1 := own(part, screening.VF.Name, leg)
	r, ok2 := own(part, screening.VBR.Name, leg)
	return ok1 && ok2 && f.Over && r.Sense == quantity.AtLeast
}

// legWords names a leg that fails and what it looks like.
func legWords(f *screening.Finding) string {
	r := f.Reading
	leg := f.Limit.Section
	switch {
	case f.Outcome != screening.Fail:
		return ""
	case r.Sense == quantity.AtLeast:
		return "leg " + leg + " reads open"
	case r.Value < shorted:
		return "leg " + leg + " reads shorted"
	case r.Value > oneJunction:
		return "leg " + leg + " drops more than one silicon junction: selenium, several in series, or burnt"
	case r.Value < f.Limit.Low:
		return "leg " + leg + " drops too little for silicon: it leaks, or something lies in parallel"
	}
	return "leg " + leg + " drops too much for silicon at a tester's current"
}

// wayWords says which of two legs lets current through backwards, where the other readings tell.
func wayWords(part screening.Part, f *screening.Finding) string {
	i := slices.IndexFunc(ways[:], func(w across) bool { return w.section == f.Limit.Section })
	if i < 0 {
		return ""
	}
	var guilty []string
	for _, leg := range ways[i].legs {
		v, read := own(part, screening.VF.Name, leg)
		b, turned := own(part, screening.VBR.Name, leg)
		if read && v.Sense == quantity.Exactly && v.Value < shorted || turned && b.Sense == quantity.Exactly {
			guilty = append(guilty, leg)
		}
	}
	if len(guilty) == 1 {
		return "it is leg " + guilty[0] + " that does not block"
	}
	return "leg " + ways[i].legs[0] + " or " + ways[i].legs[1] + " does not block"
}

// sumWords says where the whole bridge does not drop what its legs add up to: the lower of its two ways through.
func sumWords(part screening.Part) string {
	whole, ok := own(part, screening.VF.Name, wholeBridge)
	if !ok || whole.Sense != quantity.Exactly {
		return ""
	}
	sum := inf
	for _, way := range [...][2]string{{"minus-ac1", "ac1-plus"}, {"minus-ac2", "ac2-plus"}} {
		a, okA := own(part, screening.VF.Name, way[0])
		b, okB := own(part, screening.VF.Name, way[1])
		if !okA || !okB || a.Sense != quantity.Exactly || b.Sense != quantity.Exactly {
			return ""
		}
		sum = math.Min(sum, a.Value+b.Value)
	}
	if math.Abs(whole.Value-sum) <= sumsUp {
		return ""
	}
	return "from minus to plus it drops " + quantity.Format(whole.Value, quantity.Volt, 3) + ", and its legs add up to " +
		quantity.Format(sum, quantity.Volt, 3) + ": one of the readings is a slip, or a lead was taken for another"
}

// untested says how far blocking was proved, and what else the readings leave open.
func untested(part screening.Part, findings []screening.Finding) []string {
	var lines []string
	proven := inf
	for _, w := range ways {
		proven = math.Min(proven, provenVoltage(part, findings, w.section))
	}
	_, rated, known := sheet.Least(part.Claim, screening.VRRM.Name)
	switch {
	case proven == 0:
	case !known:
		lines = append(lines, "reverse blocking above "+asPrinted(proven)+" (no rating known)")
	case proven < rated:
		lines = append(lines, "reverse blocking above "+asPrinted(proven)+" (rated "+asPrinted(rated)+")")
	}
	if r, i, ok := sheet.Least(part.Claim, screening.IFAV.Name); ok {
		lines = append(lines, "forward voltage and heat at its current ("+r.String()+", half of it through each leg)")
		if s, _, has := sheet.Least(part.Claim, screening.IFSM.Name); has && i > 0 {
			lines[len(lines)-1] += ", and the surge (" + s.String() + ")"
		}
	} else {
		lines = append(lines, "what current it carries (none is claimed)")
	}
	return lines
}

// provenVoltage is the highest voltage at which two legs were seen to block, V; 0 where that was not tried.
func provenVoltage(part screening.Part, findings []screening.Finding, section string) float64 {
	var proven float64
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion != blockingCriterion || f.Outcome != screening.Pass || f.Reading == nil || f.Limit.Section != section {
			continue
		}
		if f.Limit.On == screening.VBR.Name {
			proven = math.Max(proven, f.Reading.Value)
			continue
		}
		for _, r := range part.Readings {
			if v, ok := r.At.Get(screening.Voltage); ok && r.Of == f.Limit.On && r.Section == section && r.Sense != quantity.AtLeast && r.Value <= f.Limit.High {
				proven = math.Max(proven, v)
			}
		}
	}
	return proven
}
