package bipolar

import (
	"math"

	"goodbin/rules/types"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// gainLimits ask for the gain that the type or its group promises, at the current and voltage of the sheet, and at the other currents the
// sheet prints. Away from all of them a gain shows that the part amplifies, no more: that answers the question at grade serviceable,
// except for a power Darlington, whose built-in resistors swallow a tester's base current; it is asked at a lamp's current instead.
//
// Germanium is always asked net of its leakage; the gain as read is asked too, because the net one is computed from it.
func (p *promise) gainLimits(all []screening.Limit) []screening.Limit {
	on := &HFE
	if p.material == germanium {
		on = &HFENet
		asRead := limit(&HFE, CriterionGainAsRead, "conducts-gain")
		asRead.Note = "the leakage is subtracted from it: state its collector current, and measure iceo at the same VCE"
		all = append(all, asRead)
	}
	if promised, ok := p.claim.Rating(HFE.Name, ""); ok {
		all = p.promisedGain(all, on, &promised)
	} else {
		all = append(all, mustBeClaimed(&HFE, CriterionGain, screening.WithinSpec,
			"no type and no gain is claimed, so what a new part must have is not known"))
	}
	points := p.gainPoints()
	for i := range points {
		if points[i].Of == HFE.Name {
			all = p.promisedGain(all, on, &points[i])
		}
	}
	return append(all, p.informativeGain(on))
}

// promisedGain asks for a gain that a sheet prints: as printed of a new part; serviceable near its limits too, since a gain range is
// vaguer than the meter.
func (p *promise) promisedGain(all []screening.Limit, on *screening.Definition, promised *screening.Rating) []screening.Limit {
	all = append(all, limitOf(on, CriterionGain, promised))
	spec := &all[len(all)-1]
	spec.Grade = screening.WithinSpec
	low, high, where := promised.Low, promised.High, promised.At
	spec.Formula = func() string {
		text := p.name() + ": " + boundsText(low, high)
		if !where.IsZero() {
			text += " at " + where.String()
		}
		return text
	}
	if where.Has(screening.VCB) {
		spec.Note = "the sheet's 0 V is from collector to base, so VCE equals VBE"
	}
	serviceable := *spec
	serviceable.Grade, serviceable.Soft = screening.Serviceable, true
	serviceable.Note = join(spec.Note, "asked as of a new part; a reading too near the bound to be sure is enough")
	return append(all, serviceable)
}

func join(a, b string) string {
	if a == "" {
		return b
	}
	return a + "; " + b
}

func boundsText(low, high float64) string {
	switch {
	case math.IsInf(high, 1):
		return "at least " + quantity.Format(low, quantity.One, 0)
	case math.IsInf(low, -1):
		return "at most " + quantity.Format(high, quantity.One, 0)
	}
	return quantity.Format(low, quantity.One, 0) + " to " + quantity.Format(high, quantity.One, 0)
}

// gainPoints lists the figures that hold at other currents, gain among them: the group's where one is claimed and the sheet prints them,
// else the type's. A part that claims a gain of its own is held to that alone.
func (p *promise) gainPoints() []screening.Rating {
	if own, ok := p.claim.Rating(HFE.Name, ""); ok && isOwn(&own) && own.Typed != asMeasured {
		return nil
	}
	if g, ok := p.claimedGroup(); ok && g.Points != nil {
		return g.Points
	}
	return p.row.Points
}

func (p *promise) claimedGroup() (types.Group, bool) {
	return p.row.FindGroup(p.claim.Trait(screening.TraitGroup))
}

// informativeGain is the weak bound that a gain away from the sheet's current can answer.
func (p *promise) informativeGain(on *screening.Definition) screening.Limit {
	figure := "gain-informative"
	if p.powerDarlington() {
		figure = "gain-lamp"
	}
	l := limit(on, CriterionGain, figure)
	l.Grade = screening.Serviceable
	l.Note = "informative only: it shows that the part amplifies"
	return l
}

// informative reports whether a limit is only the weak bound on gain, wherever it was read.
func informative(l *screening.Limit) bool {
	return l.Source == figures()["gain-informative"].source || l.Source == figures()["conducts-gain"].source
}
