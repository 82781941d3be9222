package mosfet

import (
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/semi"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	battery = 9.0 // V, what a bench has at the gate (house)
	leastOn = 4.0 // V, the least gate voltage that switches a logic-level type (house)
	// setCurrent is how well a current that was set is known: the assumed meter's 2 %, rectangular.
	setCurrent = 0.02
	mostLimits = 16
)

func limits(c screening.Claim) ([]screening.Limit, error) {
	all := make([]screening.Limit, 0, mostLimits)
	if semi.Channel(c) == "" {
		all = append(all, semi.MustBeClaimed(book.Trait(semi.TraitChannel, "channel"), channelClaimed,
			"the way round in which the body diode conducts says it: red on the source, n-channel; red on the drain, p-channel"))
	}
	all = append(all, figures().Limit(VSD, bodyDiode, "body-diode"))
	all = semi.GateOpen(all, figures(), RGS, gateInsulates)
	all = gateLimits(all, c)
	all = off(c).Limits(all, c)
	all = semi.Graded(all, figures().Limit(screening.RDSOn, turnsOn, "switches"), "as good as new only where its sheet's on-resistance is proved")
	return onLimits(all, c), nil
}

// gateLimits hold gate leakage against what a gate may leak at all, which answers for the ohmmeter, and against the sheet.
func gateLimits(all []screening.Limit, c screening.Claim) []screening.Limit {
	l := figures().Limit(screening.IGSS, gateInsulates, "gate-leak")
	l.At, l.Note = screening.At(screening.VGS, battery), "at whatever gate voltage is stated, from "+semi.Volts(leastOn)+" up"
	if r, ok := c.Rating(screening.IGSS.Name, ""); ok && !math.IsInf(r.High, 1) {
		within := semi.LimitOf(screening.IGSS, gateLeakage, &r)
		within.Need, within.Grade = screening.Wanted, screening.WithinSpec
		loose := l
		loose.Criterion, loose.At, loose.Need, loose.Grade = gateLeakage, r.At, screening.Wanted, screening.Serviceable
		loose.Note = ""
		all = append(all, within, loose)
	}
	return append(all, l)
}

// onLimits hold on-resistance and threshold against the sheet, and the threshold of an unknown type against what any may have.
func onLimits(all []screening.Limit, c screening.Claim) []screening.Limit {
	if r, ok := c.Rating(screening.RDSOn.Name, ""); ok && r.At.Has(screening.VGS) && !math.IsInf(r.High, 1) {
		l := semi.LimitOf(screening.RDSOn, onResistance, &r)
		l.Low, l.Need = math.Inf(-1), screening.Wanted
		l.At = screening.Condition{}.With(screening.VGS, value(r.At, screening.VGS))
		all = append(all, l)
	}
	l := figures().Limit(screening.VGSTh, threshold, "threshold")
	l.Need, l.Grade = screening.Wanted, screening.AnyGrade
	if r, ok := c.Rating(screening.VGSTh.Name, ""); ok && !(r.HasNominal() && r.Low == r.High) {
		at := l.At
		l = semi.LimitOf(screening.VGSTh, threshold, &r)
		l.Need, l.Note = screening.Wanted, "drain tied to gate"
		if l.At = at; r.At.Has(screening.ID) {
			l.At = screening.At(screening.ID, value(r.At, screening.ID))
		}
	}
	return append(all, l)
}

func value(at screening.Condition, v screening.Variable) float64 {
	x, _ := at.Get(v)
	return x
}

// derive drops signs and computes the on-resistance VDS(on)/ID from a drop at a known current.
func derive(part screening.Part) ([]screening.Reading, []screening.Reason) {
	all, why := semi.Magnitudes(part)
	for _, r := range append(all, part.Readings...) {
		if r.Of != VDSOn.Name || r.Value < 0 {
			continue
		}
		id, ok := r.At.Get(screening.ID)
		if !ok || id <= 0 {
			why = append(why, book.Note(VDSOn.Name, "no on-resistance from it: its drain current is not stated: vds-on@id=1A,vgs=10V=…"))
			continue
		}
		ohms := r
		ohms.Of, ohms.Unit, ohms.Value = screening.RDSOn.Name, screening.RDSOn.Unit, r.Value/id
		ohms.U = math.Hypot(r.U/id, ohms.Value*setCurrent/math.Sqrt(3))
		ohms.From = []screening.Input{
			{Of: r.Of, U: r.U, Sensitivity: 1 / id}, {Name: "the drain current as set", U: setCurrent * id / math.Sqrt(3), Sensitivity: -ohms.Value / id},
		}
		ohms.Spec = r.Spec/id + ohms.Value*setCurrent
		ohms.Step, ohms.Repeats, ohms.Typed = 0, nil, ""
		ohms.Rule = quantity.Format(r.Value, quantity.Volt, 3) + " over " + semi.Amps(id)
		all = append(all, ohms)
	}
	return all, why
}

// convert brings leakages to the limit's condition, and takes an on-resistance at another gate voltage for the bound that it is.
func convert(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	if c, ok := off(part.Claim).Convert(part, r, l); ok {
		return c
	}
	switch {
	case l.On == screening.RDSOn.Name:
		return toGateVoltage(r, l)
	case l.On == screening.VGSTh.Name && l.Source == figures()["threshold"].Source:
		return semi.Threshold(r, l, screening.ID, semi.ThresholdFrom, semi.ThresholdTo)
	case l.On == screening.VGSTh.Name:
		return semi.Threshold(r, l, screening.ID, 0, 0)
	case l.On == screening.IGSS.Name:
		return semi.GateLeakage(r, l, screening.VGS, l.Criterion == gateInsulates, leastOn)
	}
	return screening.Conversion{}
}

var fallsSource = screening.Source{Document: "on-resistance falls as the gate voltage rises", Status: screening.CommonPractice}

func toGateVoltage(r screening.Reading, l screening.Limit) screening.Conversion {
	got, stated := r.At.Get(screening.VGS)
	want := value(l.At, screening.VGS)
	c := screening.Conversion{OK: true, Reading: r, Source: fallsSource}
	c.Reading.At = l.At
	switch {
	case !stated:
		return screening.Conversion{Why: "the gate voltage of the reading is not stated: rds-on@vgs=9V=…"}
	case l.Criterion == turnsOn && got >= leastOn:
		c.Rule = "the limit holds at whatever gate voltage is stated"
	case l.Criterion == turnsOn:
		return screening.Conversion{Why: "taken at " + semi.Volts(got) + " on the gate; at least " + semi.Volts(leastOn) + " is needed"}
	case got < want && r.Sense != quantity.AtLeast:
		c.Reading.Sense, c.Rule = quantity.AtMost, "at "+semi.Volts(want)+" on the gate it is no more than at "+semi.Volts(got)
	case got > want && r.Sense != quantity.AtMost:
		c.Reading.Sense, c.Rule = quantity.AtLeast, "at "+semi.Volts(want)+" on the gate it is no less than at "+semi.Volts(got)
	default:
		return screening.Conversion{Why: "taken at " + semi.Volts(got) + " on the gate, which says nothing of " + semi.Volts(want)}
	}
	c.Reading.Rule = c.Rule
	return c
}
