package thyristor

import (
	"math"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/semi"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// What a bench is assumed to own (house): 12 V and a lamp.
const (
	supply    = 12.0 // V
	lampWatts = 5.0
	gateDrop  = 0.75 // V, from gate to cathode when it triggers, where the sheet says nothing
	below     = 0.9  // of the limit: what is driven into the gate, so that latching clears the limit
)

// Supply returns the voltage, V, of a supply that drives a current, A, through a resistance, Ω, and a drop, V, behind it: that which triggers a
// gate, and that at which a part that latches falls to its holding current. V = I·R + VT.
func Supply(amperes, ohms, drop float64) float64 { return amperes*ohms + drop }

func (b rulebook) cautions(part screening.Part, at screening.Moment) []screening.Caution {
	if at != screening.AtMeasure {
		return nil
	}
	all := append([]screening.Caution{{
		Code: "beryllia",
		Text: "some isolated thyristors and triacs hold beryllia ceramic, whose dust is poisonous: never file, grind, drill or crush one; dispose of it whole, by " +
			"your local rules",
		Source: screening.Source{Document: "safety notes on beryllia in semiconductors (HP glossary, time-nuts, hamradioacademy)", Status: screening.Published},
	}}, b.forward(part.Claim).Cautions()...)
	return append(all, screening.Caution{
		Code:   "test-at-low-voltage",
		Text:   "test it on " + semi.Volts(supply) + " and never on the mains: most of these parts came from there, and none goes back there from salvage",
		Values: map[string]float64{"supply": supply}, Source: screening.Source{Document: "house rule", Status: screening.House},
	})
}

func (b rulebook) recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	c := part.Claim
	anode, cathode := b.leads()
	switch l.On {
	case VBO.Name, IDRM.Name:
		return b.forward(c).Recipes(l, anode, cathode)
	case screening.VBR.Name, screening.IR.Name:
		return b.backward(c).Recipes(l, cathode, anode)
	case screening.VF.Name, RGK.Name:
		return []screening.Recipe{{
			Title: "the gate, with a meter",
			Lines: []string{
				"diode test, red probe on the gate, black on the " + cathode + ": a junction's drop (vf=…); near 0 V in types with a resistor across it",
				"then ohms the same two ways round: type the lower as rgk. Open both ways on both ranges is a dead gate",
				"the trigger test says more: one that latches has a sound gate",
			},
			Values: map[string]float64{}, Source: book.Practice,
		}}
	case IGT.Name, VGT.Name:
		return []screening.Recipe{b.triggerRecipe(c, l)}
	case VT.Name:
		if l.Criterion == latches {
			return []screening.Recipe{b.triggerRecipe(c, b.triggerLimit(c, IGT, l.Section))}
		}
		return []screening.Recipe{dropRecipe(l)}
	case IH.Name:
		return []screening.Recipe{b.holdingRecipe(l)}
	}
	return nil
}

func (b rulebook) leads() (anode, cathode string) {
	if b.triac() {
		return "T2", "T1"
	}
	return "anode", "cathode"
}

// named puts an article before a lead that has a word for a name: "the anode", "T2".
func named(lead string) string {
	if strings.HasPrefix(lead, "T") {
		return lead
	}
	return "the " + lead
}

// triggerRecipe lights a lamp through the part by a computed gate current, and reads what is left across it when the gate was let go.
func (b rulebook) triggerRecipe(c screening.Claim, l screening.Limit) screening.Recipe {
	trigger := b.triggerLimit(c, IGT, l.Section)
	if l.On == IGT.Name && l.High < math.Inf(1) {
		trigger = l
	}
	drop := gateDrop
	if r, ok := c.Rating(VGT.Name, ""); ok && r.High < math.Inf(1) {
		drop = math.Min(r.High, 1)
	}
	amps, lamp := below*trigger.High, lampWatts/supply
	ohms := (supply - drop) / amps
	anode, cathode := b.leads()
	plus, minus, gateTo, slash := anode, cathode, "plus", ""
	switch l.Section {
	case "1":
		slash = "/1"
	case "3":
		plus, minus, gateTo, slash = cathode, anode, "minus", "/3"
	case "4":
		plus, minus, gateTo, slash = cathode, anode, "plus", "/4"
	}
	return screening.Recipe{
		Title: "trigger and latch with a lamp" + quadrant(l.Section),
		Lines: []string{
			semi.Volts(supply) + " with a 1 A fuse and a " + semi.Volts(supply) + " " + semi.Watts(lampWatts) + " lamp in series with " + named(anode) + ": plus side to " +
				named(plus) + ", minus side to " + named(minus) + ". Gate open: the lamp stays dark; wait ten seconds",
			"touch the gate through " + semi.Ohms(ohms) + " (" + semi.Watts((supply-drop)*amps) + ") to " + gateTo + " of the supply, that is " +
				quantity.Format(semi.Honest2(amps), quantity.Ampere, 2) + " into it: the lamp lights. Type igt" + slash + "=.." +
				semi.Typed(semi.Honest2(amps), quantity.Ampere) + "; where it does not, igt" + slash + "=" + semi.Typed(semi.Honest2(amps), quantity.Ampere) + "..",
			"let the gate go: the lamp stays lit. Read the volts across the part and type vt" + slash + "@" +
				semi.Typed(semi.Honest2(lamp), quantity.Ampere) + "=…; where it goes dark, vt" + slash + "@" + semi.Typed(semi.Honest2(lamp), quantity.Ampere) + "=OL",
			"break the lamp's circuit for a moment: dark again. The part takes about " + semi.Watts(lamp) + ", the lamp gets hot",
		},
		Values: map[string]float64{
			"supply": supply, "lamp-power": lampWatts, "series-resistance": ohms, "resistor-power": (supply - drop) * amps, "gate-current": amps,
			"load-current": lamp,
		},
		Source: book.Practice,
	}
}

func quadrant(section string) string {
	switch section {
	case "1":
		return ", quadrant I"
	case "3":
		return ", quadrant III"
	case "4":
		return ", quadrant IV"
	}
	return ""
}

// dropRecipe reads the drop at the sheet's current from a supply that can give it.
func dropRecipe(l screening.Limit) screening.Recipe {
	amps, _ := l.At.Get(screening.Current)
	ohms := 5.0
	if amps > 0 {
		ohms = (supply - l.High) / amps
	}
	watts := amps * l.High
	return screening.Recipe{
		Title: "on-state voltage at " + semi.Amps(amps),
		Lines: []string{
			"a current-limited supply, or " + semi.Volts(supply) + " through " + semi.Ohms(ohms) + " (" + semi.Watts(amps*amps*ohms) + " in it)",
			"trigger it, let the gate go, and read right at the leads within a second: the part takes " + semi.Watts(watts) + "; fix it to metal",
		},
		Values: map[string]float64{"supply": supply, "series-resistance": ohms, "resistor-power": amps * amps * ohms, "part-power": watts},
		Source: book.Practice,
	}
}

// holdingRecipe turns the supply down until it lets go: it must not do so above IH·R + VT.
func (b rulebook) holdingRecipe(l screening.Limit) screening.Recipe {
	const ohms, vt = 100.0, 0.7
	volts := Supply(l.High, ohms, vt)
	anode, cathode := b.leads()
	return screening.Recipe{
		Title: "holding current",
		Lines: []string{
			"supply " + semi.Volts(supply) + " through " + semi.Ohms(ohms) + " (" + semi.Watts(supply*supply/ohms) + ") to " + named(anode) + ", minus to " + named(cathode) +
				"; trigger it and let the gate go",
			"turn the supply down slowly and watch the volts across the resistor: the last before it lets go, over " + semi.Ohms(ohms) + ", is IH. With " +
				semi.Amps(l.High) + " it lets go at " + quantity.Format(volts, quantity.Volt, 2),
		},
		Values: map[string]float64{"supply": supply, "series-resistance": ohms, "resistor-power": supply * supply / ohms, "drop-out-voltage": volts},
		Source: book.Practice,
	}
}
