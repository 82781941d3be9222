package diode

import (
	"goodbin/rules/internal/junction"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// convert brings a reading to a limit's condition. Forward voltage grows with current, so a reading at another current bounds; a band
// holds for the currents that its row names. Reverse current goes by the law of package junction.
func convert(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	switch l.On {
	case screening.VF.Name:
		return forward(part, r, l)
	case screening.IR.Name:
		return junction.Bring(part, r, l, junction.Rule{
			AnyVoltage: l.Criterion == blockingCriterion, LeastVoltage: blocksAt,
			NeedTemperature: technologyOf(part.Claim).material == germanium, ClearsAnyRoom: true,
		})
	}
	return screening.Conversion{}
}

var growsSource = screening.Source{Document: "forward voltage grows with current", Status: screening.CommonPractice}

func forward(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	i, stated := r.At.Get(screening.Current)
	want, _ := l.At.Get(screening.Current)
	if !stated || i <= 0 {
		return screening.Conversion{Why: "the current of the reading is not stated: vf@" + quantity.Format(want, quantity.Ampere, 0) + "=…"}
	}
	c := screening.Conversion{OK: true, Reading: r, Source: growsSource}
	c.Reading.At = l.At
	from, to := want, want
	if s := bandOf(part.Claim, l); s != nil {
		from, to = s.from, s.to
		c.Source = s.source
	}
	amperes := quantity.Format(i, quantity.Ampere, 0)
	switch {
	case i >= from*0.999 && i <= to*1.001:
		c.Rule = "the band is taken for " + quantity.Format(from, quantity.Ampere, 0) + " to " + quantity.Format(to, quantity.Ampere, 0)
	case i > to && l.Grade == screening.AnyGrade && r.Sense == quantity.Exactly && r.Value <= l.High:
		// The sheet's maximum is kept even at more current, and the lower bound is one for any current above a tester's.
		c.Rule = "at " + amperes + " it keeps what is allowed at " + quantity.Format(want, quantity.Ampere, 0)
	case i < from && r.Sense != quantity.AtMost:
		c.Reading.Sense, c.Rule = quantity.AtLeast, "at more current it drops no less than at "+amperes
	case i > to && r.Sense != quantity.AtLeast:
		c.Reading.Sense, c.Rule = quantity.AtMost, "at less current it drops no more than at "+amperes
	default:
		return screening.Conversion{Why: "taken at " + amperes + ", which says nothing of " + quantity.Format(want, quantity.Ampere, 0)}
	}
	c.Reading.Rule = c.Rule
	return c
}

// bandOf returns the band that a limit was made of; nil for the sheet's own maximum.
func bandOf(c screening.Claim, l screening.Limit) *span {
	tech := technologyOf(c)
	switch l.Grade {
	case screening.WithinSpec:
		return tech.expected
	case screening.Serviceable:
		return &tech.sound
	}
	return nil
}
