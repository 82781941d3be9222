package mainscap

import (
	"fmt"
	"math"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// proof is the DC test voltage of an X part in the factory over its AC rating (published: component makers' safety pages).
const proof = 4.3

// Impulse returns the voltage of the type test that a class stands for at a capacitance in farad: above 1 µF that of X1, X2 and Y2 is divided
// by √(C/µF), that of Y1 and Y4 is not. ok is false for a class without one.
func Impulse(name string, farad float64) (volts float64, ok bool) {
	c, known := tables().classes[name]
	if !known || c.impulse == 0 {
		return 0, false
	}
	if micro := farad * 1e6; c.root && micro > 1 {
		return c.impulse / math.Sqrt(micro), true
	}
	return c.impulse, true
}

// classNotes says what each class of the marking claims.
func classNotes(claim screening.Claim) []screening.Reason {
	farad, ok := claim.Nominal(screening.Capacitance.Name, "")
	if !ok {
		return nil
	}
	var notes []screening.Reason
	for name := range strings.SplitSeq(claim.Trait(capacitor.TraitMainsClass), "/") {
		c, known := tables().classes[name]
		if !known {
			continue
		}
		text := fmt.Sprintf("%s claims: %s", name, c.place)
		if volts, ok := Impulse(name, farad); ok {
			text += fmt.Sprintf("; type test with %s impulses", quantity.Format(volts, quantity.Volt, 2))
			if c.root && farad > 1e-6 {
				text += fmt.Sprintf(" (%s/√%.3g)", quantity.Format(c.impulse, quantity.Volt, 0), farad*1e6)
			}
		}
		if v, stated := acVolts(claim); stated && name[0] == 'X' {
			text += fmt.Sprintf("; proof in the factory %.2g × %g V = %s DC", proof, v, quantity.Format(proof*v, quantity.Volt, 3))
		}
		notes = append(notes, book.Note(capacitor.TraitMainsClass, "%s (%s). No bench repeats that", text, c.source.Status))
	}
	return notes
}

var barSource = screening.Source{
	Document: "IEC 60384-14 classes as component makers' safety pages describe them",
	Clause:   "a class is a type approval; the rule against reuse is the house's", Status: screening.House,
}

// bars refuses every part of this kind: what it claims says why, and what to fit instead.
func bars(claim screening.Claim) []screening.Stop {
	s := screening.Stop{Check: capacitor.TraitMainsClass, Verdict: screening.Barred, Source: barSource}
	name := claim.Trait(capacitor.TraitMainsClass)
	switch name {
	case motorRun, motorStart:
		s.Reason = "a motor capacitor lies across the mains with a winding; how it fails when it does (safe, or as a short with fire) is a type approval that " +
			"no reading shows, and a used one may have lost part of its plates already"
	case "", unmarked:
		s.Reason = "no class is marked: nothing says that it was ever approved for the mains, whatever it reads"
	default:
		s.Reason = name + " is a type approval (impulse, endurance at 1.25 or 1.7 times its voltage, flame): no reading shows that a used part would pass it again"
		if claim.Trait(screening.TraitTechnology) != "ceramic" {
			s.Reason += ", and a used metallised one may have lost part of its plates already"
		}
	}
	s.Do = instead(claim, name) + "; scrap this one, or keep it apart marked \"exhibit, not for use\"; never open it"
	return []screening.Stop{s}
}

// instead words what to fit: new, approved, of what class, value and voltage.
func instead(claim screening.Claim, name string) string {
	value := "of the value that the equipment's diagram gives"
	if c, ok := claim.Nominal(screening.Capacitance.Name, ""); ok {
		value = "of " + capacitor.Farads(c)
	}
	volts, claimed := acVolts(claim)
	rated := fmt.Sprintf("for %g V AC or more", volts)
	if !claimed {
		rated = "for the voltage of your network or more"
	}
	switch {
	case name == motorRun:
		return fmt.Sprintf("FIT a new, approved motor-run part %s, %s, of safety class P2 (from memory), and not a motor-start one", value, rated)
	case name == motorStart:
		return fmt.Sprintf("FIT a new, approved motor-start part %s, %s", value, rated)
	case name == "" || name == unmarked:
		return fmt.Sprintf("FIT a new, approved part %s, %s: class X1 or X2 from line to line, Y1 or Y2 wherever a short would connect a person to the line",
			value, rated)
	}
	text := fmt.Sprintf("FIT a new, approved %s part %s, %s", name, value, rated)
	if strings.Contains(name, "Y") {
		return text + "; never an X part in its place"
	}
	return text + " (a Y part may stand in for an X part, never the reverse; from memory)"
}

// limits lists what data sheets ask of new parts of its technology.
func limits(claim screening.Claim) ([]screening.Limit, error) {
	if _, ok := claim.Rating(screening.Capacitance.Name, ""); !ok && claim.Sections()[0] == "" {
		return nil, nil // barred without it too; the value is only asked for
	}
	us, err := capacitor.Units(claim, span)
	if err != nil {
		return nil, err
	}
	a := askedOf(claim)
	var all []screening.Limit
	for _, u := range us {
		at := screening.At(screening.Frequency, a.hertz)
		all = append(all, capacitor.CapacitanceLimit(u, at), capacitor.LossLimit(u, a.hertz, a.tan, screening.WithinSpec, "", a.tanSource))
		if a.volts > 0 {
			all = append(all, capacitor.InsulationLimit(u, a.volts, a.insulation, screening.WithinSpec))
		}
	}
	return all, nil
}

func askedOf(claim screening.Claim) asked {
	technology := claim.Trait(screening.TraitTechnology)
	if technology == "" {
		technology = unknown
		if claim.Trait(capacitor.TraitMainsClass) == motorStart {
			technology = "electrolytic"
		}
	}
	return tables().asked[technology]
}

// The resistance that parts with a discharge resistor inside show, Ω (from memory: 220 kΩ to 2.2 MΩ are usual).
const leastBleeder, mostBleeder = 10e3, 20e6

// adjust explains a steady resistance and a low capacitance.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	for _, of := range []screening.Characteristic{screening.Resistance.Name, screening.InsulationResistance.Name} {
		r, read := part.Reading(of, "")
		if read && r.Sense == quantity.Exactly && r.Value >= leastBleeder && r.Value <= mostBleeder {
			reasons = append(reasons, book.Note(of, "a steady %s may be a discharge resistor inside (220 kΩ to 2.2 MΩ are usual, from memory), not a leak; "+
				"where none is printed on the part it is a leak", quantity.Format(r.Value, quantity.Ohm, 3)))
			break
		}
	}
	for i := range findings {
		f := &findings[i]
		if f.Limit.Criterion == capacitor.CriterionCapacitance && f.Side == screening.Below && f.Outcome == screening.Fail {
			reasons = append(reasons, book.Note(f.Limit.On, "a mains part that reads low has burned its plates away clearing small breakdowns: "+
				"that is how it wears"))
			break
		}
	}
	return findings, reasons
}

// testVolts is the DC voltage at which a part's insulation is read.
func testVolts(claim screening.Claim) float64 { return askedOf(claim).volts }

func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	return capacitor.Recipes(part, l, span)
}
