package diode

import (
	"goodbin/rules/internal/junction"
	"goodbin/screening"
)

// convert brings a reading to a limit's condition. Forward voltage grows with current, so a reading at another current bounds; a band
// holds for the currents that its row names. Reverse current goes by the law of package junction.
func convert(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	switch l.On {
	case screening.VF.Name:
		var holds junction.Currents
		if s := bandOf(part.Claim, l); s != nil {
			holds = junction.Currents{From: s.from, To: s.to, Source: s.source}
		}
		return junction.Forward(r, l, holds, l.Grade == screening.AnyGrade)
	case screening.IR.Name:
		return junction.Bring(part, r, l, junction.Rule{
			AnyVoltage: l.Criterion == blockingCriterion, LeastVoltage: blocksAt,
			NeedTemperature: technologyOf(part.Claim).material == germanium, ClearsAnyRoom: true,
		})
	}
	return screening.Conversion{}
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
