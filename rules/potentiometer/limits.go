package potentiometer

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	totalCriterion  screening.Criterion = "resistance"
	ccwCriterion    screening.Criterion = "end-ccw"
	cwCriterion     screening.Criterion = "end-cw"
	wiperCriterion  screening.Criterion = "crv"
	taperCriterion  screening.Criterion = "taper"
	closedCriterion screening.Criterion = "switch-closed"
	openCriterion   screening.Criterion = "switch-open"
)

// lifeChange is how much of its value a track may change in its load life.
const lifeChange = 0.10

var lifeSource = screening.Source{
	Document: "the program's rule: the claimed band and the 10 % that MIL-PRF-94 lets a track change in its load life", Status: screening.House,
}

// closedMost and openLeast are what a switch for signals and low voltages must show, ohms.
const closedMost, openLeast = 1.0, 1e6

func limit(on screening.Definition, section string, criterion screening.Criterion, need screening.Need) screening.Limit {
	return screening.Limit{
		On: on.Name, Unit: on.Unit, Section: section, Criterion: criterion, Low: math.Inf(-1), High: math.Inf(1), Need: need,
		Set: screening.GeneralSet, InUse: true,
	}
}

func limits(c screening.Claim) ([]screening.Limit, error) {
	var all []screening.Limit
	for _, s := range book.Sections(c) {
		if _, ok := total(c, s); !ok {
			continue
		}
		all = append(all, totalLimits(c, s)...)
		all = append(all, mostLimits(c, s, CRV, "crv", wiperCriterion, screening.Required)...)
		all = append(all, mostLimits(c, s, EndCCW, "end", ccwCriterion, screening.Wanted)...)
		all = append(all, mostLimits(c, s, EndCW, "end", cwCriterion, screening.Wanted)...)
		all = append(all, taperLimits(c, s)...)
	}
	if c.Trait(TraitSwitch) != "" && len(all) > 0 {
		closed := limit(SwitchClosed, "", closedCriterion, screening.Required)
		closed.High, closed.Source = closedMost, screening.Source{Document: "the program's rule for a switch of signals and low voltages", Status: screening.House}
		open := limit(SwitchOpen, "", openCriterion, screening.Required)
		open.Low, open.Source = openLeast, screening.Source{Document: "an open switch reads open on an ohmmeter", Status: screening.CommonPractice}
		all = append(all, closed, open)
	}
	return all, nil
}

func totalLimits(c screening.Claim, section string) []screening.Limit {
	r, _ := c.Rating(screening.Resistance.Name, section)
	l := limit(screening.Resistance, section, totalCriterion, screening.Required)
	if !r.HasNominal() {
		l.Low, l.High, l.Grade, l.Source = r.Low, r.High, screening.AnyGrade, book.SourceOf(&r)
		return []screening.Limit{l}
	}
	t, _ := c.Rating(screening.Tolerance.Name, "")
	l.Low, l.High, l.Grade, l.Source = r.Nominal*(1+t.Low), r.Nominal*(1+t.High), screening.WithinSpec, toleranceSource(t)
	l.Formula = bandFormula(r.Nominal, t.String(), l.Low, l.High)
	worn := limit(screening.Resistance, section, totalCriterion, screening.Required)
	worn.Low, worn.High = r.Nominal*math.Max(0, 1+t.Low-lifeChange), r.Nominal*(1+t.High+lifeChange)
	worn.Grade, worn.Soft, worn.Source = screening.Serviceable, true, lifeSource
	worn.Formula = bandFormula(r.Nominal, "("+t.String()+" and 10 % of life)", worn.Low, worn.High)
	return []screening.Limit{l, worn}
}

func bandFormula(nominal float64, width string, low, high float64) func() string {
	return func() string {
		return fmt.Sprintf("%s %s = %s to %s", ohms(nominal), width, quantity.Format(low, quantity.Ohm, 4), quantity.Format(high, quantity.Ohm, 4))
	}
}

// toleranceSource is where the band comes from: the letter's meaning, the default's source, or the part's own print.
func toleranceSource(t screening.Rating) screening.Source {
	if s := book.ToleranceSource(t.Typed); s.Status != screening.NoStatus {
		return s
	}
	return book.SourceOf(&t)
}

func mostLimits(c screening.Claim, section string, on screening.Definition, name string, criterion screening.Criterion, need screening.Need) []screening.Limit {
	whole, _ := total(c, section)
	var list []screening.Limit
	for _, grade := range []screening.Grade{screening.WithinSpec, screening.Serviceable} {
		m, ok := mostOf(name, c, grade)
		if !ok {
			continue
		}
		l := limit(on, section, criterion, need)
		l.High, l.Grade, l.Source, l.Soft = m.of(whole), grade, m.source, grade == screening.Serviceable
		l.Formula = func() string {
			return fmt.Sprintf("the greater of %s·%s = %s and %s", percent(m.share), ohms(whole), ohms(m.share*whole), ohms(m.ohms))
		}
		list = append(list, l)
	}
	return list
}

// The note of the midpoint's own limit, which asks for the reading and holds it against nothing.
const midpointNote = "divided by the whole track it says which taper this is"

// taperLimits ask for the resistance in mid-travel, and hold its share of the track against the taper that is claimed.
func taperLimits(c screening.Claim, section string) []screening.Limit {
	ask := limit(Midpoint, section, taperCriterion, screening.Wanted)
	ask.Source = screening.Source{Document: "a taper is known by its middle; letters contradict each other", Status: screening.Published}
	ask.Note = midpointNote
	t, claimed := taperNamed(c.Trait(TraitTaper))
	if !claimed {
		return []screening.Limit{ask}
	}
	ask.Need = screening.Required
	share := limit(MidpointShare, section, taperCriterion, screening.Required)
	share.Low, share.High, share.Source, share.Soft, share.Grade = t.low, t.high, t.source, true, screening.Serviceable
	share.Formula = func() string { return t.name + ": " + t.formula + ", in mid-travel" }
	return []screening.Limit{ask, share}
}
