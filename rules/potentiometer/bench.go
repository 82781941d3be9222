package potentiometer

import (
	"fmt"
	"math"
	"slices"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

var partSource = screening.Source{Document: "MIL-R-39002", Clause: "power falls with the part of the track in use", Status: screening.Published}

// someTrack is the share of the track that the caution on power takes as its example.
const someTrack = 0.1

// cautions: a dead circuit to measure in; and with the verdict what current the wiper may carry, I = √(P/R), anywhere on the track.
func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	switch at {
	case screening.AtMeasure:
		return []screening.Caution{{
			Code: "power-off", Level: screening.Notice, Source: book.Practice, Values: map[string]float64{"safe-voltage": screening.SafeVoltage},
			Text: "an ohmmeter belongs on a dead circuit: unplug it, discharge its capacitors, and take the potentiometer out; a switch on its " +
				"shaft may still be wired to the mains",
		}}
	case screening.AtVerdict:
		return append(cleaning(part), partOfTrack(part)...)
	}
	return nil
}

// cleaning says how, where a wiper or switch reads high and was not cleaned yet.
func cleaning(part screening.Part) []screening.Caution {
	if part.Treated > 0 || !dirty(part) {
		return nil
	}
	return []screening.Caution{{
		Code: "cleaning", Level: screening.Notice, Source: book.Practice,
		Text: "clean it unplugged and out of the set where you can, with a cleaner made for potentiometers, a drop through the slot at the lugs; " +
			"air the room, no flame, let it dry before any power; other solvents take the track, the grease or the plastic away",
	}}
}

// dirty reports whether a contact was read beyond what is serviceable, so that cleaning comes next.
func dirty(part screening.Part) bool {
	all, err := limits(part.Claim)
	if err != nil {
		return false
	}
	for i := range all {
		l := &all[i]
		if l.Grade == screening.WithinSpec || l.On != CRV.Name && l.On != EndCCW.Name && l.On != EndCW.Name && l.On != SwitchClosed.Name {
			continue
		}
		for k := range part.Readings {
			if r := &part.Readings[k]; r.Of == l.On && (r.Section == l.Section || l.Section == "") && r.Sense != quantity.AtMost &&
				r.Value-l.High > r.Spec {
				return true
			}
		}
	}
	return false
}

// partOfTrack says what the wiper may carry, where a power is claimed.
func partOfTrack(part screening.Part) []screening.Caution {
	p, claimed := part.Claim.Nominal(screening.Power.Name, "")
	whole, ok := total(part.Claim, book.Sections(part.Claim)[0])
	if !claimed || !ok || !(p > 0) || !(whole > 0) {
		return nil
	}
	current := math.Sqrt(p / whole)
	return []screening.Caution{{
		Code: "part-of-track", Level: screening.Notice, Source: partSource,
		Text: fmt.Sprintf("%s is for the whole track: the wiper may carry %s at most, wherever it stands, and a tenth of the track stands %s",
			quantity.Format(p, quantity.Watt, 0), book.About(current, quantity.Ampere), book.About(someTrack*p, quantity.Watt)),
		Values: map[string]float64{"wiper-current": current, "tenth-power": someTrack * p},
	}}
}

// recipes says how to take each reading with an ohmmeter.
func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	whole, ok := total(part.Claim, l.Section)
	if !ok {
		return nil
	}
	recipe := func(title string, lines ...string) []screening.Recipe {
		if l.Section == "1" {
			lines = append(slices.Clip(lines), "section 1 is the one nearest the knob; count from there, and keep to it")
		}
		return []screening.Recipe{{Title: title, Lines: lines, Source: book.Practice, Values: map[string]float64{"expected-resistance": whole}}}
	}
	jump := l.High
	switch l.On {
	case screening.Resistance.Name:
		return recipe("Ohms between the two ends",
			"take it out, or lift two of its three lugs: what lies in parallel makes it read low",
			"measure between the outer lugs: about "+ohms(whole)+", and it must not move while you turn the shaft",
			"one that moves: you have the wiper; try the other pair")
	case CRV.Name:
		return recipe("Ohms from one end to the wiper, turning",
			"set one range by hand that holds "+ohms(whole)+", so that the meter does not hunt",
			"turn from stop to stop and back in about 20 s, and watch: the way should be smooth; 0 where it is",
			fmt.Sprintf("type the largest jump away from it: more than %s counts; a moment of open is OL", quantity.Format(jump, quantity.Ohm, 3)),
			"a meter shows a few readings a second: it misses short clicks, and what it does see is real")
	case EndCCW.Name, EndCW.Name:
		lug, way := "lug 1", "anticlockwise"
		if l.On == EndCW.Name {
			lug, way = "lug 3", "clockwise"
		}
		return recipe("Ohms from the wiper to the end it stands at",
			"hold the probes together first and subtract what they read (0.1 to 0.6 Ω)",
			fmt.Sprintf("turn it fully %s, measure from the wiper to %s, the end it now stands at: at most %s", way, lug, quantity.Format(jump, quantity.Ohm, 3)),
			"end resistance is read at the stop itself; a little before it may read less")
	case Midpoint.Name, MidpointShare.Name:
		return recipe("Ohms to the wiper in the middle of the travel",
			"find lug 1: the outer lug that reads near 0 Ω to the wiper when fully anticlockwise",
			"set the shaft midway between the stops (of 300° that is 150° from either; of a multi-turn half its turns)",
			fmt.Sprintf("measure lug 1 to wiper: linear about %s, log %s to %s, reverse log %s to %s", ohms(whole/2), ohms(0.1*whole), ohms(0.2*whole),
				ohms(0.8*whole), ohms(0.9*whole)),
			"a log taper measured from the other end looks like a reverse log one")
	case SwitchClosed.Name, SwitchOpen.Name:
		return recipe("Ohms across the switch",
			"only out of the set: in it the switch may be wired to the mains",
			"hold the probes together first and subtract what they read; work the switch ten times",
			"on: 0 to 1 Ω, the same each time; off: open (OL)")
	}
	return nil
}
