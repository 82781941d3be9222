package bridge

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
	// testerCurrent is what a diode test is taken to send through a leg where no current is stated, A (house).
	testerCurrent = 1e-3
	// blocksAt is the reverse voltage that shows that a leg blocks at all: the 2 V of a diode test less its error (house).
	blocksAt = 1.9
	// usualSupply is the reverse voltage that a bench has, V (house).
	usualSupply = 30.0
	// leastRating is the lowest VRRM that bridges are sold with, V. What breaks down below it is damaged, whatever it is.
	leastRating = 50.0
)

var (
	leastSource  = screening.Source{Document: "no text seen; recalled", Clause: "series of bridges begin at 50 V", Status: screening.FromMemory}
	testerSource = screening.Source{Document: "a diode test in reverse, 2 V less its error", Status: screening.House}
	twoLegs      = screening.Source{Document: "the sum of two legs", Status: screening.Derived}
)

// mostLimits is how many limits a bridge has at most.
const mostLimits = 30

func limits(c screening.Claim) ([]screening.Limit, error) {
	all := make([]screening.Limit, 0, mostLimits)
	for _, leg := range legs {
		all = forwardLimits(all, c, leg)
	}
	for _, w := range ways {
		all = blockingLimits(all, c, w)
		all = append(all, breakdownLimit(c, w))
		all = leakageLimit(all, c, w)
	}
	sound := load()["sound"]
	l := limit(screening.VF, seriesCriterion, wholeBridge)
	l.Need, l.At = screening.Wanted, screening.At(screening.Current, testerCurrent)
	l.Low, l.High, l.Source = 2*sound.low, 2*sound.high, twoLegs
	l.Formula = func() string {
		return fmt.Sprintf("2·%s to 2·%s", quantity.Format(sound.low, quantity.Volt, 2), quantity.Format(sound.high, quantity.Volt, 2))
	}
	l.Note = "a quick look at the whole: it shows the better of the two ways through, so it proves no leg by itself"
	return append(all, l, apartLimit("apart", screening.WithinSpec), apartLimit("far-apart", screening.Serviceable)), nil
}

func limit(of screening.Definition, criterion screening.Criterion, section string) screening.Limit {
	return screening.Limit{
		On: of.Name, Unit: of.Unit, Criterion: criterion, Section: section, Low: math.Inf(-1), High: inf,
		Set: screening.GeneralSet, InUse: true,
	}
}

func apartLimit(row string, grade screening.Grade) screening.Limit {
	b := load()[row]
	l := limit(VFApart, balanceCriterion, "")
	l.Need, l.High, l.Grade, l.Source = screening.Wanted, b.high, grade, b.source
	l.Note = "computed once all four legs are read"
	return l
}

// forwardLimits ask each leg for its forward voltage at a tester's current; the sheet's maximum at its own current answers as well.
func forwardLimits(all []screening.Limit, c screening.Claim, leg string) []screening.Limit {
	for _, g := range [...]struct {
		row   string
		grade screening.Grade
	}{{"expected", screening.WithinSpec}, {"sound", screening.Serviceable}} {
		b := load()[g.row]
		l := limit(screening.VF, forwardCriterion, leg)
		l.At, l.Low, l.High, l.Grade, l.Source = screening.At(screening.Current, testerCurrent), b.low, b.high, g.grade, b.source
		l.Formula = func() string {
			return fmt.Sprintf("a silicon leg: %s to %s from %s to %s", quantity.Format(b.low, quantity.Volt, 2),
				quantity.Format(b.high, quantity.Volt, 2), quantity.Format(b.from, quantity.Ampere, 0), quantity.Format(b.to, quantity.Ampere, 0))
		}
		all = append(all, l)
	}
	if r, at, ok := sheet.At(c, screening.VF.Name, screening.Current); ok && r.High > load()["sound"].low {
		l := limit(screening.VF, forwardCriterion, leg)
		l.At, l.Low, l.High, l.Source = screening.At(screening.Current, at), load()["sound"].low, r.High, book.SourceOf(&r)
		l.Note = "the lower bound is that at a tester's current: at more current it drops no less"
		all = append(all, l)
	}
	return all
}

// blockingLimits ask that two legs block at whatever voltage there was: by the voltage that they stood, or by the current that they leaked.
func blockingLimits(all []screening.Limit, c screening.Claim, w across) []screening.Limit {
	stands := limit(screening.VBR, blockingCriterion, w.section)
	stands.Low, stands.Source = blocksAt, testerSource
	stands.Note = "tests " + w.legs[0] + " and " + w.legs[1] + "; what voltage was proved is said with the verdict"
	leaks := limit(screening.IR, blockingCriterion, w.section)
	leaks.High, leaks.Source = leakMost(c)
	leaks.At = screening.At(screening.Voltage, testVoltage(c)).With(screening.PartTemperature, junction.Reference)
	leaks.Note = "two legs together, at whatever voltage is stated, from " + quantity.Format(blocksAt, quantity.Volt, 0) + " up"
	return append(all, stands, leaks)
}

// leakMost is the most that two legs may leak at 25 °C before they do not block: the rule for silicon, or what the sheet allows where that
// is more, for each of two.
func leakMost(c screening.Claim) (float64, screening.Source) {
	b := load()["leakage"]
	if r, _, ok := sheet.At(c, screening.IR.Name, screening.Voltage); ok && r.High > b.high {
		return 2 * r.High, book.SourceOf(&r)
	}
	return 2 * b.high, b.source
}

// testVoltage is a reverse voltage that a bench has and that the bridge claims to block.
func testVoltage(c screening.Claim) float64 {
	if _, v, ok := sheet.Least(c, screening.VRRM.Name); ok {
		return math.Min(v, usualSupply)
	}
	return usualSupply
}

// breakdownLimit holds a measured breakdown against the rating. It can only refute or, at the rating and above, prove.
func breakdownLimit(c screening.Claim, w across) screening.Limit {
	l := limit(screening.VBR, breakdownCriterion, w.section)
	l.Need = screening.Wanted
	r, v, ok := sheet.Least(c, screening.VRRM.Name)
	if !ok {
		l.Low, l.Source, l.Note = leastRating, leastSource, "its own rating is not known"
		return l
	}
	l.Low, l.Source = v, book.SourceOf(&r)
	l.Note = "a breakdown above the rating is normal, below it a leg is damaged"
	return l
}

func leakageLimit(all []screening.Limit, c screening.Claim, w across) []screening.Limit {
	r, at, ok := sheet.At(c, screening.IR.Name, screening.Voltage)
	if !ok {
		return all
	}
	l := limit(screening.IR, leakageCriterion, w.section)
	l.Need, l.Grade, l.High, l.Source = screening.Wanted, screening.WithinSpec, 2*r.High, book.SourceOf(&r)
	l.At = screening.At(screening.Voltage, at).With(screening.PartTemperature, junction.Reference)
	l.Formula = func() string {
		return "2·" + quantity.Format(r.High, quantity.Ampere, 0) + " for two legs = " + quantity.Format(2*r.High, quantity.Ampere, 0)
	}
	most := l
	most.Grade, most.Formula = screening.Serviceable, nil
	most.High, most.Source = leakMost(c)
	return append(all, l, most)
}
