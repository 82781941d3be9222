package diode

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/junction"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	// blocksAt is the reverse voltage that shows that a junction blocks at all: the 2 V of a diode test less its error (house).
	blocksAt = 1.9
	// usualSupply is the reverse voltage that a bench has, V (house).
	usualSupply = 30.0
	// leastRating is the lowest VRRM that any diode of the type table claims, V. What breaks down below it is damaged, or a Zener.
	leastRating = 20.0
)

// mostLimits is how many limits one diode has at most.
const mostLimits = 9

func limits(c screening.Claim) ([]screening.Limit, error) {
	all := make([]screening.Limit, 0, mostLimits*len(sections(c)))
	for _, section := range sections(c) {
		all = forwardLimits(all, c, section)
		all = blockingLimits(all, c, section)
		all = breakdownLimits(all, c, section)
		all = leakageLimits(all, c, section)
	}
	return all, nil
}

func limit(of screening.Definition, criterion screening.Criterion, section string) screening.Limit {
	return screening.Limit{
		On: of.Name, Unit: of.Unit, Criterion: criterion, Section: section, Low: math.Inf(-1), High: inf,
		Set: screening.GeneralSet, InUse: true,
	}
}

// forwardLimits ask for the forward voltage at a tester's current; the sheet's own maximum at its current answers as well.
func forwardLimits(all []screening.Limit, c screening.Claim, section string) []screening.Limit {
	tech := technologyOf(c)
	add := func(s *span, grade screening.Grade) {
		l := limit(screening.VF, forwardCriterion, section)
		l.At, l.Low, l.High, l.Grade, l.Source = screening.At(screening.Current, testerCurrent), s.low, s.high, grade, s.source
		l.Formula = func() string {
			return fmt.Sprintf("%s diode: %s to %s from %s to %s", tech.name, quantity.Format(s.low, quantity.Volt, 2),
				quantity.Format(s.high, quantity.Volt, 2), quantity.Format(s.from, quantity.Ampere, 0), quantity.Format(s.to, quantity.Ampere, 0))
		}
		all = append(all, l)
	}
	switch _, claimed := c.Rating(screening.VF.Name, ""); {
	case tech.expected != nil:
		add(tech.expected, screening.WithinSpec)
	case !claimed:
		all = append(all, nothingToExpect(section))
	}
	add(&tech.sound, screening.Serviceable)
	if r, at, ok := sheet(c, screening.VF.Name, screening.Current); ok && r.High > tech.sound.low {
		l := limit(screening.VF, forwardCriterion, section)
		l.At, l.Low, l.High, l.Source = screening.At(screening.Current, at), tech.sound.low, r.High, book.SourceOf(&r)
		l.Note = "the lower bound is that at a tester's current: at more current it drops no less"
		all = append(all, l)
	}
	return all
}

// nothingToExpect keeps a diode of unknown make from passing as one that is as good as new: there is nothing to hold it against.
func nothingToExpect(section string) screening.Limit {
	l := limit(screening.VF, forwardCriterion, section)
	l.Grade, l.Evidence = screening.WithinSpec, screening.ByRating
	l.Source = screening.Source{Document: "no type or technology is claimed", Status: screening.House}
	l.Note = "what a new one should drop is not known, so it can be serviceable and no more"
	return l
}

// blockingLimits ask that it blocks at whatever voltage there was: by the voltage that it stood, or by the current that it leaked.
func blockingLimits(all []screening.Limit, c screening.Claim, section string) []screening.Limit {
	stands := limit(screening.VBR, blockingCriterion, section)
	stands.Low = blocksAt
	stands.Source = screening.Source{Document: "a diode test in reverse, 2 V less its error", Status: screening.House}
	stands.Note = "as far as the bench goes: what is proved is said with the verdict"

	leaks := limit(screening.IR, blockingCriterion, section)
	m := leakMost(c)
	leaks.High, leaks.Source = m.value, m.source
	leaks.At = screening.At(screening.Voltage, testVoltage(c)).With(screening.PartTemperature, junction.Reference)
	leaks.Note = "at whatever voltage is stated, from " + quantity.Format(blocksAt, quantity.Volt, 0) + " up"
	return append(all, stands, leaks)
}

// testVoltage is a reverse voltage that a bench has and that the diode claims to block.
func testVoltage(c screening.Claim) float64 {
	if v, ok := ratedVoltage(c); ok {
		return math.Min(v, usualSupply)
	}
	return math.Min(leastRating, usualSupply)
}

// breakdownLimits hold a measured breakdown against the rating. It can only refute or, at the rating and above, prove.
func breakdownLimits(all []screening.Limit, c screening.Claim, section string) []screening.Limit {
	l := limit(screening.VBR, breakdownCriterion, section)
	l.Need = screening.Wanted
	rating, ok := c.Rating(screening.VRRM.Name, "")
	if !ok || math.IsInf(rating.Low, 0) {
		l.Low = leastRating
		l.Source = screening.Source{Document: "the lowest VRRM of the type table (1N5817, 1N5820)", Status: screening.Derived}
		l.Note = "its own rating is not known"
		return append(all, l)
	}
	l.Low, l.Source = rating.Low, book.SourceOf(&rating)
	l.Note = "a breakdown above the rating is normal, below it the diode is damaged"
	v, lax := load().variants[c.Trait(screening.TraitType)]
	if !lax || v.least == 0 || v.least >= rating.Low || rating.Typed != "" {
		return append(all, l)
	}
	least := l
	l.Grade, least.Grade = screening.WithinSpec, screening.Serviceable
	least.Low, least.Source = v.least, v.source
	return append(all, l, least)
}

// leakageLimits hold the reverse current at the sheet's voltage against the sheet, and against what its material may leak: sheets print
// nanoamperes that no pocket meter resolves and few circuits need.
func leakageLimits(all []screening.Limit, c screening.Claim, section string) []screening.Limit {
	r, at, ok := sheet(c, screening.IR.Name, screening.Voltage)
	if !ok {
		return all
	}
	l := limit(screening.IR, leakageCriterion, section)
	l.Need = screening.Wanted
	l.At = screening.At(screening.Voltage, at).With(screening.PartTemperature, junction.Reference)
	within := l
	within.High, within.Grade, within.Source = r.High, screening.WithinSpec, book.SourceOf(&r)
	m := leakMost(c)
	l.High, l.Grade, l.Source = m.value, screening.Serviceable, m.source
	return append(all, within, l)
}
