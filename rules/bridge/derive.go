package bridge

import (
	"fmt"
	"math"

	"goodbin/rules/internal/junction"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// derive computes what the readings of single legs say of two together, and how far the legs lie apart.
func derive(part screening.Part) ([]screening.Reading, []screening.Reason) {
	var derived []screening.Reading
	for _, w := range ways {
		a, hasA := own(part, screening.VBR.Name, w.legs[0])
		b, hasB := own(part, screening.VBR.Name, w.legs[1])
		_, direct := own(part, screening.VBR.Name, w.section)
		hasA, hasB = hasA && !turnedRound(part, w.legs[0]), hasB && !turnedRound(part, w.legs[1])
		switch {
		case hasA && hasB && (!direct || weaker(a, b).Sense == quantity.Exactly):
			derived = append(derived, asWay(weaker(a, b), w))
		case hasA && !hasB && a.Sense == quantity.Exactly:
			derived = append(derived, asWay(a, w))
		case hasB && !hasA && b.Sense == quantity.Exactly:
			derived = append(derived, asWay(b, w))
		}
		if r, ok := leakTogether(part, w); ok {
			derived = append(derived, r)
		}
	}
	if r, ok := apart(part); ok {
		derived = append(derived, r)
	}
	return derived, nil
}

// own returns the last reading of a characteristic that was taken of this section and no other.
func own(part screening.Part, of screening.Characteristic, section string) (screening.Reading, bool) {
	for i := len(part.Readings) - 1; i >= 0; i-- {
		if r := part.Readings[i]; r.Of == of && r.Section == section {
			return r, true
		}
	}
	return screening.Reading{}, false
}

// weaker returns the reading of the leg that gives way first.
func weaker(a, b screening.Reading) screening.Reading {
	if a.Sense == b.Sense && a.Value <= b.Value || a.Sense == quantity.Exactly && b.Sense != quantity.Exactly {
		return a
	}
	return b
}

func asWay(r screening.Reading, w across) screening.Reading {
	r.Rule = "of leg " + r.Section + ", the weaker of the two"
	r.Section = w.section
	return r
}

// leakTogether adds the leakage of two legs that were read at one voltage and temperature.
func leakTogether(part screening.Part, w across) (screening.Reading, bool) {
	a, okA := own(part, screening.IR.Name, w.legs[0])
	b, okB := own(part, screening.IR.Name, w.legs[1])
	if _, direct := own(part, screening.IR.Name, w.section); direct || !okA || !okB || a.At != b.At || a.Sense != b.Sense {
		return screening.Reading{}, false
	}
	a.Value, a.U, a.Spec, a.Step = a.Value+b.Value, a.U+b.U, a.Spec+b.Spec, math.Max(a.Step, b.Step)
	a.Section, a.Repeats, a.Rule = w.section, nil, "the sum of legs "+w.legs[0]+" and "+w.legs[1]
	return a, true
}

// apart is the highest forward voltage less the lowest, where all four legs were read at one current. The meter's error in common falls out;
// what is left is taken as the larger of the two uncertainties.
func apart(part screening.Part) (screening.Reading, bool) {
	low, high := math.Inf(1), math.Inf(-1)
	var first screening.Reading
	for i, leg := range legs {
		r, ok := own(part, screening.VF.Name, leg)
		if !ok || r.Sense != quantity.Exactly {
			return screening.Reading{}, false
		}
		if i == 0 {
			first = r
		}
		a, _ := r.At.Get(screening.Current)
		b, _ := first.At.Get(screening.Current)
		if a != b {
			return screening.Reading{}, false
		}
		low, high = math.Min(low, r.Value), math.Max(high, r.Value)
		first.U, first.Step = math.Max(first.U, r.U), math.Max(first.Step, r.Step)
	}
	return screening.Reading{
		Of: VFApart.Name, Unit: VFApart.Unit, Value: high - low, U: first.U, Step: first.Step, At: first.At, Assumed: first.Assumed,
		Rule: "highest less lowest of the four legs",
	}, true
}

// convert brings a reading to a limit's condition. Forward voltage grows with current, so a reading at another current bounds; a band holds
// for the currents that its row names. Reverse current goes by the law of package junction.
func convert(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	switch l.On {
	case screening.VF.Name:
		b, isBand := bandOf(l)
		return junction.Forward(r, l, junction.Currents{From: b.from, To: b.to, Source: b.source}, !isBand)
	case screening.IR.Name:
		return junction.Bring(part, r, l, junction.Rule{AnyVoltage: l.Criterion == blockingCriterion, LeastVoltage: blocksAt, ClearsAnyRoom: true})
	}
	return screening.Conversion{}
}

// bandOf returns the band that a limit was made of; false for the sheet's own maximum.
func bandOf(l screening.Limit) (band, bool) {
	switch {
	case l.Grade == screening.WithinSpec:
		return load()["expected"], true
	case l.Grade == screening.Serviceable || l.Criterion == seriesCriterion:
		return load()["sound"], true
	}
	return band{}, false
}

// asPrinted writes a voltage as it stands on parts and in sheets: "1000 V", never "1 kV".
func asPrinted(volts float64) string { return fmt.Sprintf("%g V", volts) }
