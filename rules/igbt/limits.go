package igbt

import (
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/semi"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	leastGate  = 8.0   // V, the least at the gate that must turn it on (house)
	leastIC    = 20e-3 // A, the least collector current at which its drop says something (house)
	leastLeak  = 4.0   // V, the least at the gate that shows a leak (house)
	supply     = 12.0  // V
	lampWatts  = 5.0
	mostLimits = 12
)

func limits(c screening.Claim) ([]screening.Limit, error) {
	all := make([]screening.Limit, 0, mostLimits)
	all = semi.GateOpen(all, figures(), RGE, gateInsulates)
	gate := figures().Limit(IGES, gateInsulates, "gate-leak")
	all = append(all, gate)
	if r, ok := c.Rating(IGES.Name, ""); ok && !math.IsInf(r.High, 1) {
		within := semi.LimitOf(IGES, gateLeakage, &r)
		within.Need, within.Grade = screening.Wanted, screening.WithinSpec
		gate.Criterion, gate.At, gate.Need, gate.Grade, gate.Note = gateLeakage, r.At, screening.Wanted, screening.Serviceable, ""
		all = append(all, within, gate)
	}
	all = off(c).Limits(all, c)
	name := "either"
	switch c.Trait(TraitDiode) {
	case coPacked:
		name = "with-diode"
	case noDiode:
		name = "no-diode"
	}
	all = append(all, figures().Limit(screening.VF, reverse, name))
	all = semi.Graded(all, figures().Limit(VCEOn, turnsOn, "on"), "as good as new only where its sheet's threshold is proved")
	th := figures().Limit(VGETh, threshold, "threshold")
	if r, ok := c.Rating(VGETh.Name, ""); ok && !(r.HasNominal() && r.Low == r.High) {
		at := th.At
		th = semi.LimitOf(VGETh, threshold, &r)
		th.Note = "collector tied to gate"
		if ic, ok := r.At.Get(screening.IC); ok {
			at = screening.At(screening.IC, ic)
		}
		th.At = at
	}
	th.Need = screening.Wanted
	return append(all, th), nil
}

// convert brings leakages to the limit's condition, and takes the drop at whatever gate voltage turned it on.
func convert(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	if c, ok := off(part.Claim).Convert(part, r, l); ok {
		return c
	}
	switch l.On {
	case IGES.Name:
		return semi.GateLeakage(r, l, screening.VGE, l.Criterion == gateInsulates, leastLeak)
	case VCEOn.Name:
		return turnedOn(r, l)
	case VGETh.Name:
		if l.Source == figures()["threshold"].Source {
			return semi.Threshold(r, l, screening.IC, semi.ThresholdFrom, semi.ThresholdTo)
		}
		return semi.Threshold(r, l, screening.IC, 0, 0)
	}
	return screening.Conversion{}
}

func turnedOn(r screening.Reading, l screening.Limit) screening.Conversion {
	vge, stated := r.At.Get(screening.VGE)
	ic, known := r.At.Get(screening.IC)
	switch {
	case !stated || !known:
		return screening.Conversion{Why: "gate voltage and collector current of the reading are not stated: vce-on@ic=0.4A,vge=12V=…"}
	case vge < leastGate:
		return screening.Conversion{Why: "taken at " + semi.Volts(vge) + " on the gate; at least " + semi.Volts(leastGate) + " is needed"}
	}
	c := screening.Conversion{OK: true, Reading: r, Source: book.Practice, Rule: "the limit holds at whatever gate voltage and current are stated"}
	c.Reading.At, c.Reading.Rule = l.At, c.Rule
	if ic < leastIC && r.Sense != quantity.AtMost {
		c.Reading.Sense, c.Rule = quantity.AtLeast, "at more current it drops no less than at "+semi.Amps(ic)
	}
	return c
}
