// Package selenium is the rulebook of selenium rectifiers. Every one is barred: they age as they stand, and one that fails gives off toxic
// gas. Readings are kept all the same, so that an exhibit is described.
package selenium

import (
	"errors"
	"fmt"
	"math"
	"time"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Kind is the kind's name.
const Kind screening.Kind = "selenium"

// edition goes up when a rule in code changes.
const edition = "1"

// Plates is how many plates stand in series between two neighbouring terminals.
var Plates = screening.Definition{Name: "plates", Symbol: "n", Label: "plates in series", Unit: quantity.One}

const forwardCriterion screening.Criterion = "forward"

// What a plate does, V: it drops about 1 V and blocks about 25 to 30 V.
const dropPerPlate, blocksLeast, blocksMost = 1.0, 25.0, 30.0

var (
	platesSource = screening.Source{
		Document: "restorers' notes on selenium rectifiers", Clause: "about 1 V forward and 25 to 30 V reverse per plate", Status: screening.Published,
	}
	safetySource = screening.Source{
		Document: "restorers' safety notes on selenium rectifiers", Clause: "failing ones give off toxic, foul-smelling gas", Status: screening.Published,
	}
	replacingSource = screening.Source{
		Document: "restorers' notes on selenium rectifiers", Clause: "the output rises with silicon: add a series resistor", Status: screening.Published,
	}
)

// Book returns the rulebook.
func Book() *screening.Rulebook {
	return &screening.Rulebook{
		Kind: Kind, Label: "selenium rectifier", Tables: book.Version(Kind, edition),
		Claims: claims(), Bench: bench(), Look: book.Look(), Bars: bars, Complete: complete, Limits: limits, Cautions: cautions,
	}
}

func claims() []screening.Field {
	return []screening.Field{
		{
			Definition: book.Trait(screening.TraitType, "type"), Trait: true, Example: "type=B250C100",
			Help: "as printed: B is a bridge, then volts of AC input, then milliamperes",
		},
		{Definition: Plates, Example: "rated:plates=6", Help: "count them between two neighbouring terminals"},
		{Definition: screening.VRRM, Example: "rated:vrrm=180V", Help: "the reverse voltage it claims; 25 to 30 V for each plate"},
		{Definition: screening.IFAV, Example: "rated:if-av=100mA", Help: "the current it claims to have carried"},
		book.CaseField("case=stack"),
		book.DatedField(),
	}
}

func bench() []screening.Field {
	return []screening.Field{
		{
			Definition: screening.VF, Effort: 5 * time.Second, Example: "vf@1mA=1.1V", Fit: screening.Fit{screening.Current: screening.Any},
			Help: "diode test, only to describe an exhibit: about 1 V for each plate, so most stacks read OL",
		},
		{Definition: screening.VBR, Effort: 5 * time.Second, Example: "vbr=OL", Help: "diode test turned round; never from a supply"},
		{Definition: screening.IR, Effort: time.Minute, Example: "ir@2V=1uA", Help: "only where it was measured before; do not put it under voltage"},
		{Definition: screening.Temperature, PerPart: true, Effort: 10 * time.Second, Help: "of the part, lying in the room", Example: "22C"},
	}
}

func bars(c screening.Claim) []screening.Stop {
	do := "KEEP it disconnected and marked \"exhibit, not for use\", or bag it as hazardous waste by your local rules; never power it up, burn or grind it. " +
		"Replacing it in a set: silicon drops " + replaced(c) + ", so the output rises (" + replacingSource.Status.String() + "); fit a resistor in series that brings the loaded voltage back to " +
		"what the set's papers say, rated for its watts, and see that the capacitors behind it stand the voltage without load"
	return []screening.Stop{{
		Check: "selenium", Verdict: screening.Barred,
		Reason: "selenium rectifiers are not used again: the drop rises with age and heat, and one that fails gives off toxic, foul-smelling gas",
		Do:     do, Source: safetySource,
	}}
}

// replaced says how much less silicon drops; the amount is known where the plates were counted.
func replaced(c screening.Claim) string {
	n, ok := plates(c)
	if !ok {
		return "about 1 V where selenium drops about 1 V for each plate"
	}
	return fmt.Sprintf("about 1 V where these %.0f plates drop about %s", n, quantity.Format(n*dropPerPlate, quantity.Volt, 0))
}

func plates(c screening.Claim) (float64, bool) { return c.Nominal(Plates.Name, "") }

func complete(c screening.Claim) (screening.Claim, []screening.Reason, error) {
	n, ok := plates(c)
	if !ok {
		return c, nil, nil
	}
	if n < 1 || n > 200 || n != math.Trunc(n) {
		return c, nil, errors.New("plates: " + quantity.Format(n, quantity.One, 0) + " is no number of plates such as 6")
	}
	return c, []screening.Reason{book.Note(Plates.Name, "%.0f plates: about %s forward, %s to %s in reverse when new", n,
		quantity.Format(n*dropPerPlate, quantity.Volt, 0), quantity.Format(n*blocksLeast, quantity.Volt, 0), quantity.Format(n*blocksMost, quantity.Volt, 0))}, nil
}

// limits hold one figure, for information: what the plates should drop. No reading makes a selenium rectifier fit for use.
func limits(c screening.Claim) ([]screening.Limit, error) {
	n, ok := plates(c)
	if !ok {
		n = 1
	}
	l := screening.Limit{
		On: screening.VF.Name, Unit: screening.VF.Unit, Criterion: forwardCriterion, Low: math.Inf(-1), High: 2 * n * dropPerPlate,
		Need: screening.Wanted, Set: screening.GeneralSet, InUse: true,
		Source: screening.Source{Document: platesSource.Document, Clause: "twice the 1 V of a plate", Status: screening.House},
		Note:   "for information: it is barred whatever it reads",
	}
	l.Formula = func() string {
		return fmt.Sprintf("2·%.0f·%s = %s", n, quantity.Format(dropPerPlate, quantity.Volt, 0), quantity.Format(l.High, quantity.Volt, 0))
	}
	return []screening.Limit{l}, nil
}

// cautions warns at every step.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	if at == screening.AtMeasure {
		return []screening.Caution{{
			Code: "selenium", Level: screening.Danger, Source: safetySource,
			Text:   "do not put it under voltage. If one smells foul under power: switch off, leave the room, air it, and touch nothing with bare hands",
			Values: map[string]float64{"drop-per-plate": dropPerPlate, "reverse-per-plate-low": blocksLeast, "reverse-per-plate-high": blocksMost},
		}}
	}
	return nil
}
