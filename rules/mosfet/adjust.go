package mosfet

import (
	"goodbin/rules/internal/book"
	"goodbin/rules/internal/semi"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	turnedWords = "open forward and a junction's drop in reverse: the probes were the wrong way round, or it is of the other channel"
	chargedGate = "it conducts, and it is not said that the gate was tied to the source: a charged gate holds a sound part on. Tie them, read " +
		"again, and type vbr@vgs=0V=…"
	twoLeads = "an ohmmeter's two leads are tenths of an ohm themselves: send an ampere through it and type the millivolts, vds-on@id=1A,vgs=10V=…"
	// leadOhms is what leads and clips may add to a two-wire reading, Ω (house).
	leadOhms = 1.0
)

// adjust applies the rules that look across readings.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var say semi.Say
	turned := semi.Turned(part, VSD.Name, screening.VBR.Name)
	o := off(part.Claim)
	for i := range findings {
		f := &findings[i]
		o.Tidy(f)
		failed := f.Outcome == screening.Fail
		switch {
		case turned && f.Limit.On == VSD.Name:
			semi.Unanswer(f, turnedWords)
		case turned && f.Limit.On == screening.VBR.Name:
			semi.Unanswer(f, "turn the probes and read both again")
		case f.Limit.On == screening.VBR.Name && (failed || f.Unconfirmed) && !tied(f.Reading):
			semi.Unanswer(f, chargedGate)
		case f.Limit.On == VSD.Name && failed && f.Side == screening.Below && !tied(f.Reading):
			semi.Unanswer(f, "it reads shorted, and it is not said that the gate was tied to the source: tie them, read again, and type vsd@vgs=0V=…")
		case f.Limit.Criterion == onResistance && twoWire(f) && (failed || f.Outcome == screening.Close):
			semi.Unanswer(f, twoLeads)
		case failed && (f.Limit.Criterion == gateInsulates || f.Limit.Criterion == onResistance || f.Limit.Criterion == turnsOn):
			say.Note(f.Limit.On, semi.SuspectStatic)
		case failed && f.Limit.Criterion == gateLeakage && f.Limit.Grade == screening.WithinSpec:
			say.Note(f.Limit.On, "the gate leaks more than its sheet allows; "+semi.SuspectStatic)
		case failed && f.Limit.Criterion == turnsOff:
			say.Note(f.Limit.On, "with the gate tied to the source it conducts: damaged, or a depletion type, which is not judged here")
		}
	}
	semi.AsNew(findings, turnsOn, onResistance)
	return findings, say.Reasons
}

// tied reports whether a reading says that the gate was at the source.
func tied(r *screening.Reading) bool {
	if r == nil {
		return true
	}
	v, ok := r.At.Get(screening.VGS)
	return ok && v == 0
}

// twoWire reports whether a finding's on-resistance was read with an ohmmeter and is small enough for its leads to matter.
func twoWire(f *screening.Finding) bool {
	return f.Reading != nil && f.Reading.Rule == "" && !f.Reading.At.Has(screening.ID) && f.Reading.Sense != quantity.AtLeast &&
		f.Reading.Value-f.Limit.High < leadOhms
}

func untested(part screening.Part, findings []screening.Finding) []string {
	return off(part.Claim).Untested(findings)
}

func cautions(part screening.Part, at screening.Moment) []screening.Caution {
	if at != screening.AtMeasure {
		return nil
	}
	return append([]screening.Caution{semi.Static()}, off(part.Claim).Cautions()...)
}

func recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	c := part.Claim
	drain, source := semi.Ends(c, "drain", "source")
	switch l.On {
	case RGS.Name:
		return []screening.Recipe{semi.GateOpenRecipe(RGS, "source")}
	case VSD.Name:
		return []screening.Recipe{{
			Title: "the body diode, with a diode test",
			Lines: []string{
				"gate tied to source; red probe on the " + source + ", black on the " + drain + ": read volts, 0.4 to 0.7 V is usual",
				"near 0 V both ways round: say that the gate was tied, vsd@vgs=0V=0.02, and it is shorted",
			},
			Values: map[string]float64{}, Source: book.Practice,
		}}
	case screening.VBR.Name, screening.IDSS.Name:
		return off(c).Recipes(l, drain, source)
	case screening.RDSOn.Name:
		if l.Criterion == turnsOn {
			return []screening.Recipe{switchRecipe(c), ampereRecipe(c, l, battery)}
		}
		return []screening.Recipe{ampereRecipe(c, l, value(l.At, screening.VGS))}
	case screening.VGSTh.Name:
		return []screening.Recipe{thresholdRecipe(c, l)}
	case screening.IGSS.Name:
		v, ok := l.At.Get(screening.VGS)
		if !ok {
			v = battery
		}
		return []screening.Recipe{semi.GateRecipe(v, l.High, semi.Channel(c) != semi.P, "source, which is tied to the drain")}
	}
	return nil
}

// switchRecipe turns it on with a battery and off with a short.
func switchRecipe(c screening.Claim) screening.Recipe {
	gate, source := semi.Ends(c, "gate", "source")
	drain, other := semi.Ends(c, "drain", "source")
	return screening.Recipe{
		Title: "on with a battery, off with a short",
		Lines: []string{
			"ohmmeter red on the " + drain + ", black on the " + other + ", its lowest range",
			"a " + semi.Volts(battery) + " battery, its plus to the " + gate + ", its minus to the " + source + ": a few ohms or less. Type rds-on@vgs=9V=…",
			"take the battery away and tie gate to source: OL. A gate that is left alone holds what it had",
		},
		Values: map[string]float64{"supply": battery}, Source: book.Practice,
	}
}

// ampereRecipe reads the drop at a current that makes it legible: an ampere, or half of what a small type carries. The resistor takes it from
// 12 V.
func ampereRecipe(c screening.Claim, l screening.Limit, vgs float64) screening.Recipe {
	const supply = 12.0
	amps := 1.0
	if r, ok := c.Rating(IDMax.Name, ""); ok && r.Low/2 < amps {
		amps = r.Low / 2
	}
	if l.Criterion != turnsOn && amps*l.High > mostDrop {
		amps = semi.Honest2(mostDrop / l.High)
	}
	drop := amps * l.High
	on := "the limit is " + quantity.Format(drop, quantity.Volt, 2) + ", " + semi.Watts(drop*amps) + " in the part"
	watts := drop * amps
	if l.Criterion == turnsOn {
		// Any type: what is asked is that it switches, and half on it takes most.
		drop, watts = 0, supply*amps/4
		on = semi.Volts(supply) + " there is off, a volt or less is on; half on the part takes up to " + semi.Watts(watts)
	}
	ohms := (supply - drop) / amps
	gate, source := semi.Ends(c, "gate", "source")
	drain, other := semi.Ends(c, "drain", "source")
	return screening.Recipe{
		Title: "on-resistance with " + semi.Amps(amps) + " and millivolts",
		Lines: []string{
			"gate first: " + semi.Volts(vgs) + ", plus on the " + gate + ", minus on the " + source,
			"then " + semi.Volts(supply) + " through " + semi.Ohms(ohms) + " (" + semi.Watts(supply*supply/ohms) + " in it, it gets hot; or a current-limited supply), plus side to the " +
				drain + ", minus to the " + other,
			"volts right at the two leads, not at the clips: " + on + "; a few seconds. Type vds-on@id=" + semi.Typed(amps, quantity.Ampere) + ",vgs=" + semi.Typed(vgs, quantity.Volt) + "=…",
		},
		Values: map[string]float64{
			"supply": supply, "series-resistance": ohms, "resistor-power": supply * supply / ohms, "drain-current": amps, "part-power": watts,
			"limit-voltage": drop,
		},
		Source: book.Practice,
	}
}

// mostDrop is what a part may drop in the test of its on-resistance, V (house).
const mostDrop = 1.0

// thresholdRecipe ties drain to gate: R = (supply − VGS(th))/ID.
func thresholdRecipe(c screening.Claim, l screening.Limit) screening.Recipe {
	amps := value(l.At, screening.ID)
	ohms := (battery - semi.Middle(l)) / amps
	drain, source := semi.Ends(c, "drain and gate", "source")
	return screening.Recipe{
		Title: "threshold, drain tied to gate",
		Lines: []string{
			"drain tied to gate; a " + semi.Volts(battery) + " battery, its plus to the " + drain + ", its minus to the " + source + ", " +
				semi.Ohms(ohms) + " in series (" + semi.Watts(battery*battery/ohms) + " at most)",
			"read volts from gate to source and across the resistor; the current is that over " + semi.Ohms(ohms) + ". Type vgs-th@id=" +
				semi.Typed(amps, quantity.Ampere) + "=…",
			"it falls by 2 to 6 mV per kelvin (from memory), and grows with the test current",
		},
		Values: map[string]float64{"supply": battery, "series-resistance": ohms, "resistor-power": battery * battery / ohms, "drain-current": amps},
		Source: book.Practice,
	}
}
