package led

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/junction"
	"goodbin/rules/internal/sheet"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	// blocksAt is the reverse voltage that shows that a junction blocks at all: the 2 V of a diode test less its error (house).
	blocksAt = 1.9
	// reverseMost is the reverse voltage that no test goes beyond, and the rating where none is claimed, V.
	reverseMost = 5.0
)

var (
	reverseSource = screening.Source{Document: "no text seen; recalled", Clause: "most sheets rate 5 V in reverse", Status: screening.FromMemory}
	testerSource  = screening.Source{Document: "a diode test in reverse, 2 V less its error", Status: screening.House}
)

// asMeasured marks the voltage of a lesser claim.
const asMeasured = "as measured"

const noColour = "no colour is claimed: say it (colour=red), or it is taken as measured"

func limits(c screening.Claim) ([]screening.Limit, error) {
	names, sections := colours(c)
	all := make([]screening.Limit, 0, 7*len(names))
	for i, name := range names {
		col, _ := colourNamed(name)
		all = forwardLimits(all, c, col, sections[i])
		all = append(all, reverseLimits(c, sections[i], len(names) > 1)...)
	}
	if _, claimed := c.Rating(screening.VF.Name, ""); !claimed && (names[0] == "" || names[0] == unknown) {
		l := limit(screening.VF, colourCriterion, "")
		l.Evidence, l.Note = screening.ByRating, noColour
		l.Source = screening.Source{Document: "no colour is claimed", Status: screening.House}
		all = append(all, l)
	}
	return all, nil
}

func limit(of screening.Definition, criterion screening.Criterion, section string) screening.Limit {
	return screening.Limit{
		On: of.Name, Unit: of.Unit, Criterion: criterion, Section: section, Low: math.Inf(-1), High: inf,
		Set: screening.GeneralSet, InUse: true,
	}
}

// testCurrent is the current to read it at: 20 mA, or what it claims to carry where that is less.
func testCurrent(c screening.Claim) float64 {
	if _, i, ok := sheet.Least(c, screening.IFAV.Name); ok && i > 0 {
		return math.Min(i, publishedCurrent)
	}
	return publishedCurrent
}

// atTester is the highest published voltage at whose start a diode test, which gives up at about 2 V, still reads a colour, V (house).
const atTester = 2.1

// askedAt is the current at which a colour is asked for first: a tester's where that reaches it, else that of a test through a resistor.
func askedAt(c screening.Claim, col *colour) float64 {
	if col.low <= atTester {
		return testerCurrent
	}
	return testCurrent(c)
}

// forwardLimits ask for the sound band at a tester's current or through a resistor, for the published one at 20 mA, and for the sheet's own
// maximum. The question that stands for them all is that of the first.
func forwardLimits(all []screening.Limit, c screening.Claim, col *colour, section string) []screening.Limit {
	l := limit(screening.VF, forwardCriterion, section)
	l.At, l.Grade = screening.At(screening.Current, askedAt(c, col)), screening.Serviceable
	l.Low, l.High, l.Source = col.soundLow, col.soundHigh, soundSource
	l.Formula = func() string {
		return fmt.Sprintf("%s: %s to %s from %s to %s", col.name, quantity.Format(col.soundLow, quantity.Volt, 2),
			quantity.Format(col.soundHigh, quantity.Volt, 2), quantity.Format(soundFrom, quantity.Ampere, 0),
			quantity.Format(soundCurrent, quantity.Ampere, 0))
	}
	all = append(all, l)
	switch {
	case col.name == unknown:
		// There is nothing that a new one should read, so it can be serviceable and no more.
		l := limit(book.Trait(TraitColour, "colour"), forwardCriterion, section)
		l.Grade, l.Evidence, l.Note = screening.WithinSpec, screening.ByRating, "what a new one should drop is not known"
		l.Source = screening.Source{Document: "no colour is claimed", Status: screening.House}
		all = append(all, l)
	case testCurrent(c) >= publishedCurrent*0.75:
		l := limit(screening.VF, forwardCriterion, section)
		l.At, l.Grade = screening.At(screening.Current, publishedCurrent), screening.WithinSpec
		l.Low, l.High, l.Source = col.low, col.high, col.source
		all = append(all, l)
	}
	if r, at, ok := sheet.At(c, screening.VF.Name, screening.Current); ok && section == "" && r.High > col.soundLow {
		l := limit(screening.VF, forwardCriterion, section)
		l.At, l.Low, l.High, l.Source = screening.At(screening.Current, at), col.soundLow, r.High, book.SourceOf(&r)
		l.Note = "the lower bound is that at a tester's current: at more current it drops no less"
		if r.Typed == asMeasured {
			l.Grade, l.Note = screening.Serviceable, ""
		}
		all = append(all, l)
	}
	return all
}

// reverseLimits ask that it blocks a tester's voltage, and hold a measured breakdown against the rating. In a case with several, what is read
// in reverse may be the other one's light.
func reverseLimits(c screening.Claim, section string, several bool) []screening.Limit {
	stands := limit(screening.VBR, blockingCriterion, section)
	stands.Low, stands.Source = blocksAt, testerSource
	stands.Note = "a diode test is enough; never more than " + quantity.Format(reverseMost, quantity.Volt, 0) + " this way round"
	if several {
		stands.Need = screening.Wanted
		stands.Note = "only where the leads of its own are out: in reverse a pair on two leads lights the other one"
	}
	breaks := limit(screening.VBR, breakdownCriterion, section)
	breaks.Need, breaks.Low, breaks.Source = screening.Wanted, reverseMost, reverseSource
	if r, v, ok := sheet.Least(c, screening.VRRM.Name); ok {
		breaks.Low, breaks.Source = v, book.SourceOf(&r)
	}
	breaks.Note = "a breakdown above the rating is normal, below it it is damaged; never tried on purpose"
	return []screening.Limit{stands, breaks}
}

// convert brings a forward voltage to a limit's current: the sound band holds for tester and supply alike, else a reading at another current
// bounds.
func convert(_ screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	if l.On != screening.VF.Name {
		return screening.Conversion{}
	}
	if l.Grade == screening.Serviceable && l.Source == soundSource {
		return junction.Forward(r, l, junction.Currents{From: soundFrom, To: soundCurrent, Source: soundSource}, false)
	}
	return junction.Forward(r, l, junction.Currents{}, l.Grade != screening.WithinSpec)
}
