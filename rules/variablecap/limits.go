package variablecap

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// noClaim is the note of the limits of a part on which nothing is printed.
const noClaim = "nothing is claimed: its range is taken as measured"

// touching is the resistance below which plates touch, or dirt bridges them, ohms.
const touching = 1e6

func limit(on screening.Definition, section string, criterion screening.Criterion, need screening.Need) screening.Limit {
	return screening.Limit{
		On: on.Name, Unit: on.Unit, Section: section, Criterion: criterion, Low: math.Inf(-1), High: math.Inf(1), Need: need,
		Set: screening.GeneralSet, InUse: true,
	}
}

func limits(c screening.Claim) ([]screening.Limit, error) {
	var all []screening.Limit
	for _, s := range book.Sections(c) {
		short := limit(screening.InsulationResistance, s, shortCriterion, screening.Required)
		short.Low, short.Source = touching, figures()["insulation"].source
		short.Note = "the lowest on the whole way from end to end"
		all = append(all, short)
		r, ok := c.Rating(screening.Capacitance.Name, s)
		if !ok || math.IsInf(r.High, 1) {
			all = append(all, unclaimed(CapacitanceMax, s, maxCriterion, screening.Required), unclaimed(CapacitanceMin, s, minCriterion, screening.Wanted))
			continue
		}
		all = append(all, maxLimit(s, r.High, screening.WithinSpec), maxLimit(s, r.High, screening.Serviceable))
		if r.HasNominal() || !(r.Low > 0) {
			all = append(all, unclaimed(CapacitanceMin, s, minCriterion, screening.Wanted))
			continue
		}
		all = append(all, minLimit(s, r.Low, screening.WithinSpec), minLimit(s, r.Low, screening.Serviceable))
	}
	return all, nil
}

func unclaimed(on screening.Definition, section string, criterion screening.Criterion, need screening.Need) screening.Limit {
	l := limit(on, section, criterion, need)
	l.Source, l.Note = screening.Source{Document: "no value is claimed", Status: screening.House}, noClaim
	return l
}

func maxLimit(section string, claimed float64, grade screening.Grade) screening.Limit {
	f := figures()["max-"+grade.String()]
	l := limit(CapacitanceMax, section, maxCriterion, screening.Required)
	width := f.share*claimed + f.farad
	l.Low, l.High, l.Grade, l.Source, l.Soft = math.Max(0, claimed-width), claimed+width, grade, f.source, grade == screening.Serviceable
	l.Formula = func() string {
		allowed := quantity.Format(f.share, quantity.Ratio, 0)
		if f.farad > 0 {
			allowed = "(" + allowed + " + " + farads(f.farad) + ")"
		}
		return fmt.Sprintf("%s ±%s = %s to %s", farads(claimed), allowed,
			quantity.Format(l.Low, quantity.Farad, 3), quantity.Format(l.High, quantity.Farad, 3))
	}
	return l
}

func minLimit(section string, claimed float64, grade screening.Grade) screening.Limit {
	f := figures()["min-"+grade.String()]
	l := limit(CapacitanceMin, section, minCriterion, screening.Wanted)
	l.High, l.Grade, l.Source, l.Soft = claimed*(1+f.share)+f.farad, grade, f.source, grade == screening.Serviceable
	l.Formula = func() string {
		return fmt.Sprintf("at most %s +%s and %s = %s", farads(claimed), quantity.Format(f.share, quantity.Ratio, 0), farads(f.farad),
			quantity.Format(l.High, quantity.Farad, 3))
	}
	return l
}

// adjust leaves the range open where nothing is claimed, gives plates that can be bent back a second chance, and says what a failure looks like.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	strict(findings)
	for i := range findings {
		f := &findings[i]
		switch {
		case f.Limit.Note == noClaim && f.Limit.On == CapacitanceMax.Name:
			f.Outcome, f.Probability, f.Margin, f.Why = screening.Missing, math.NaN(), math.NaN(), noClaim
			if f.Reading == nil {
				f.Why = "not measured, and " + noClaim
			}
			f.Limit.Note = ""
		case f.Outcome != screening.Fail || f.Reading == nil || f.Limit.Grade == screening.WithinSpec:
		case f.Limit.On == screening.InsulationResistance.Name && part.Treated == 0 && mendable(part.Claim):
			f.Outcome, f.Why = screening.Missing, "it fell to "+quantity.Format(f.Reading.Value, quantity.Ohm, 3)+
				": plates touch, or dirt bridges them; straighten or clean them, then measure again and say treated=1"
		case f.Limit.On == screening.InsulationResistance.Name && !mendable(part.Claim):
			reasons = append(reasons, book.Note(f.Limit.On, "its plates touch through worn %s, which cannot be mended", part.Claim.Trait(TraitDielectric)))
		case f.Limit.On == CapacitanceMax.Name && open(f.Reading, f.Limit.High):
			reasons = append(reasons, book.Note(f.Limit.On, "so little is a lead, or the contact to the rotor, that is off"))
		}
	}
	return findings, reasons
}

// strict keeps a part from passing as new on a remembered figure that it only comes close to, where it fails what is serviceable.
func strict(findings []screening.Finding) {
	for i := range findings {
		worn := &findings[i]
		if worn.Outcome != screening.Fail || worn.Limit.Grade != screening.Serviceable {
			continue
		}
		for k := range findings {
			if f := &findings[k]; f.Limit.Criterion == worn.Limit.Criterion && f.Limit.Section == worn.Limit.Section {
				f.Need = screening.Required
			}
		}
	}
}

// open reports whether a reading of the highest capacitance is that of leads alone.
func open(r *screening.Reading, limitHigh float64) bool {
	f := figures()["open-share"]
	return r.Value < math.Max(f.share*limitHigh, f.farad)
}

// lesser answers a range that is off, or not claimed, with the range as measured in all sections.
func lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	claim := part.Claim
	claim.Ratings = book.Without(claim.Ratings, screening.Capacitance.Name)
	source := screening.Source{Document: "kept at the range it reads", Status: screening.House}
	text, off, missing := "as measured", false, false
	answers := maxCriterion
	for i := range findings {
		f := &findings[i]
		if f.Outcome == screening.Fail && f.Limit.On == CapacitanceMin.Name {
			off, answers = true, minCriterion
		}
		if f.Limit.On != CapacitanceMax.Name || f.Limit.Grade == screening.WithinSpec {
			continue
		}
		if f.Reading == nil || f.Reading.Sense != quantity.Exactly || open(f.Reading, math.Min(f.Limit.High, largest)) && !math.IsInf(f.Limit.High, 1) {
			return nil
		}
		if f.Outcome == screening.Fail {
			off, answers = true, maxCriterion
		}
		missing = missing || f.Outcome == screening.Missing
		rating, ok := rangeRead(part, f)
		if !ok {
			return nil
		}
		rating.Source, rating.Typed = source, rating.String()
		claim = claim.WithRating(rating)
		text += ", " + sectionNamed(f.Limit.Section) + rating.String()
	}
	if !off && !missing {
		return nil
	}
	return []screening.Lesser{{Claim: claim, Answers: answers, Text: text, FromMissing: missing && !off, Source: source}}
}

// leastRange is how many times its lowest capacitance a variable capacitor reaches at least (house): one that hardly changes is none.
const leastRange = 1.5

// rangeRead returns what a section reads as its rating: lowest to highest, or the highest alone.
func rangeRead(part screening.Part, f *screening.Finding) (screening.Rating, bool) {
	high := book.Honest(f.Reading.Value, f.Reading.U, 3)
	rating := screening.NominalRating(screening.Capacitance, high)
	if low, ok := part.Reading(CapacitanceMin.Name, f.Limit.Section); ok && low.Section == f.Limit.Section && low.Sense == quantity.Exactly {
		if low.Value*leastRange > f.Reading.Value {
			return rating, false
		}
		rating = screening.RangeRating(screening.Capacitance, book.Honest(low.Value, low.U, 3), high)
	}
	rating.Section = f.Limit.Section
	return rating, true
}

func untested(screening.Part, []screening.Finding) []string {
	return []string{"working voltage, Q, how it tracks between its ends"}
}

func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	switch at {
	case screening.AtMeasure:
		return []screening.Caution{{
			Code: "power-off", Level: screening.Notice, Source: book.Practice, Values: map[string]float64{"safe-voltage": screening.SafeVoltage},
			Text: "take it out, or lift the coil from its stator: a coil in parallel reads as a short. In valve sets and transmitters its plates may " +
				"stand at supply voltage: unplug, discharge, and measure below 10 V before you touch it",
		}}
	case screening.AtVerdict:
		r, ok := lowestInsulation(part)
		if !ok || r >= touching || part.Treated > 0 || !mendable(part.Claim) {
			return nil
		}
		return []screening.Caution{{
			Code: "cleaning", Level: screening.Notice,
			Text: "blow or brush dust out gently and rinse with a solvent that dries clean, aired and away from flames; no sandpaper or wire brush: " +
				"old plating may be cadmium, and its dust is poison",
			Source: screening.Source{Document: "restorers' reports", Status: screening.CommonPractice},
		}}
	}
	return nil
}

func lowestInsulation(part screening.Part) (lowest float64, ok bool) {
	lowest = math.Inf(1)
	for i := range part.Readings {
		if r := &part.Readings[i]; r.Of == screening.InsulationResistance.Name && r.Sense != quantity.AtLeast {
			lowest, ok = math.Min(lowest, r.Value), true
		}
	}
	return lowest, ok
}

// recipes says how to take each reading.
func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	recipe := func(title string, values map[string]float64, lines ...string) []screening.Recipe {
		return []screening.Recipe{{Title: title, Lines: lines, Values: values, Source: book.Practice}}
	}
	switch l.On {
	case screening.InsulationResistance.Name:
		return recipe("Ohms from stator to rotor, turning", map[string]float64{"least-resistance": touching},
			"highest ohms range, one probe on the stator lug, one on the rotor or frame; other sections' lugs free",
			"turn slowly from end to end and back, about 20 s, and watch: it should stay open (OL); trimmers a full turn",
			"type the lowest it showed: below 1 MΩ plates touch or dirt bridges them, and where it happens shows which")
	case CapacitanceMax.Name, CapacitanceMin.Name:
		end, about := "fully meshed (a trimmer where it reads most)", ""
		values := map[string]float64{}
		if l.On == CapacitanceMin.Name {
			end = "fully open (a trimmer where it reads least)"
		}
		if r, ok := part.Claim.Rating(screening.Capacitance.Name, l.Section); ok && !math.IsInf(r.High, 1) && l.On == CapacitanceMax.Name {
			about = ": about " + farads(r.High)
			values["expected-capacitance"] = r.High
		}
		return recipe("Capacitance at the end of its travel", values,
			"clip the leads on with the part's own lug still off, note what they read (often 1 to 10 pF) and take it off, or zero the meter",
			"rotor or frame to the meter's low side, stator to the other; hands away: a finger adds pF",
			"turn it "+end+" and read"+about+"; each section by itself, the others free",
			"a meter that starts at 1 nF cannot do this: use one with a pF range")
	}
	return nil
}
