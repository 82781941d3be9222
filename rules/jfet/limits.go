package jfet

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/semi"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	battery      = 9.0   // V, what a bench has (house)
	meterCurrent = 1e-6  // A, at most what a 10 MΩ voltmeter draws up to 10 V
	sheetCurrent = 10e-9 // A, at which sheets state VGS(off), where the page does not say
	// mostCorrection is how far the square law may carry a gate voltage to the cut-off before another reading is asked for (house).
	mostCorrection = 0.25
)

// mostLimits is how many limits a part has at most.
const mostLimits = 10

func (b rulebook) limits(c screening.Claim) ([]screening.Limit, error) {
	all := make([]screening.Limit, 0, mostLimits)
	if semi.Channel(c) == "" {
		all = append(all, semi.MustBeClaimed(book.Trait(semi.TraitChannel, "channel"), channelClaimed,
			"the way round in which the gate conducts says it: red on the gate, n-channel; black on the gate, p-channel"))
	}
	all = append(all, figures().Limit(screening.VF, gateForward, "gate-forward"))
	all = gates(c).Limits(all, c)
	all = semi.Graded(all, channelLimit(c), "as good as new only where IDSS is seen inside its sheet's range")
	all = currentLimits(all, c)
	return cutOffLimits(all, c), nil
}

// channelLimit asks for a plain resistance from drain to source; the formula says what the sheet's ranges make of it.
func channelLimit(c screening.Claim) screening.Limit {
	l := figures().Limit(screening.RDSOn, channel, "channel")
	i, ok1 := c.Rating(screening.IDSS.Name, "")
	v, ok2 := c.Rating(screening.VGSOff.Name, "")
	if ok1 && ok2 && i.Low > 0 && v.Low > 0 && !math.IsInf(i.High, 1) && !math.IsInf(v.High, 1) {
		l.Formula = func() string {
			ohm := func(v, i float64) string { return semi.Ohms(ChannelResistance(i, v)) }
			return fmt.Sprintf("about VGS(off)/(2·IDSS): between %s and %s over the sheet's ranges", ohm(v.Low, i.High), ohm(v.High, i.Low))
		}
	}
	return l
}

// currentLimits hold IDSS against the sheet's range. A part sold as a group must show it; else it is worth knowing and not required.
func currentLimits(all []screening.Limit, c screening.Claim) []screening.Limit {
	r, ok := c.Rating(screening.IDSS.Name, "")
	if !ok || r.HasNominal() && r.Low == r.High {
		return all
	}
	l := semi.LimitOf(screening.IDSS, current, &r)
	if !l.At.Has(screening.VDS) {
		l.At = l.At.With(screening.VDS, 15)
	}
	l.Need = screening.Wanted
	if c.Trait(screening.TraitGroup) != "" {
		l.Need = screening.Required
		l.Note = "group " + c.Trait(screening.TraitGroup) + " is this range of IDSS"
	}
	return append(all, l)
}

// cutOffLimits hold VGS(off) against the sheet's range, at the sheet's drain current.
func cutOffLimits(all []screening.Limit, c screening.Claim) []screening.Limit {
	r, ok := c.Rating(screening.VGSOff.Name, "")
	if !ok || r.HasNominal() && r.Low == r.High {
		return all
	}
	l := semi.LimitOf(screening.VGSOff, cutOff, &r)
	l.Need = screening.Wanted
	if !l.At.Has(screening.ID) {
		l.At = l.At.With(screening.ID, sheetCurrent)
		l.Note = "the sheet's drain current was not kept: taken as " + semi.Amps(sheetCurrent)
	}
	return append(all, l)
}

// convert brings gate leakage to the limit's voltage and temperature, and a gate voltage taken at more current to the sheet's.
func convert(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	if c, ok := gates(part.Claim).Convert(part, r, l); ok {
		return c
	}
	switch l.Criterion {
	case cutOff:
		return toCutOff(part, r, l)
	case current:
		return toSaturation(r, l)
	}
	return screening.Conversion{}
}

// toCutOff corrects by the square law with the measured IDSS, else with the least that the sheet allows; the whole correction is the rule's
// uncertainty, because far below IDSS the law is only near.
func toCutOff(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	id, stated := r.At.Get(screening.ID)
	want, _ := l.At.Get(screening.ID)
	if !stated || id < want {
		return screening.Conversion{Why: "the drain current of the reading is not stated, or below the sheet's: vgs-off@id=1uA=…"}
	}
	idss, from := 0.0, "measured"
	if m, ok := part.Reading(screening.IDSS.Name, ""); ok && m.Sense == quantity.Exactly {
		idss = math.Abs(m.Value)
	} else if rated, ok := part.Claim.Rating(screening.IDSS.Name, ""); ok && rated.Low > 0 {
		idss, from = rated.Low, "the least that it claims"
	}
	if !(idss > 0) || math.Sqrt(id/idss) > mostCorrection {
		return screening.Conversion{Why: "taken at " + semi.Amps(id) + ", too much of IDSS for its cut-off: measure IDSS, or take it through a 10 MΩ voltmeter"}
	}
	c := screening.Conversion{OK: true, Reading: r, Source: squareLaw}
	value, correction := ToCutOff(r.Value, id, idss)
	c.U = math.Abs(correction) / math.Sqrt(3)
	c.Reading.Value, c.Reading.U, c.Reading.At = value, math.Hypot(r.U, c.U), l.At
	c.Rule = fmt.Sprintf("VGS/(1 − √(ID/IDSS)) from %s with IDSS %s, %s", semi.Amps(id), quantity.Format(idss, quantity.Ampere, 2), from)
	c.Reading.Rule = c.Rule
	return c
}

// toSaturation takes a drain current at another voltage for the bound that it is: at more voltage it draws no less.
func toSaturation(r screening.Reading, l screening.Limit) screening.Conversion {
	got, stated := r.At.Get(screening.VDS)
	want, _ := l.At.Get(screening.VDS)
	c := screening.Conversion{OK: true, Reading: r, Source: squareLaw}
	c.Reading.At = l.At
	switch {
	case !stated:
		return screening.Conversion{Why: "the drain-source voltage of the reading is not stated: idss@9V=…"}
	case got < want && r.Sense != quantity.AtMost:
		c.Reading.Sense, c.Rule = quantity.AtLeast, "at "+semi.Volts(want)+" it draws no less than at "+semi.Volts(got)
	case got > want && r.Sense != quantity.AtLeast:
		c.Reading.Sense, c.Rule = quantity.AtMost, "at "+semi.Volts(want)+" it draws no more than at "+semi.Volts(got)
	default:
		return screening.Conversion{Why: "taken at " + semi.Volts(got) + ", which says nothing of " + semi.Volts(want)}
	}
	c.Reading.Rule = c.Rule
	return c
}
