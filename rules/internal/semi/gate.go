package semi

import (
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// The channels.
const (
	N, P = "n-channel", "p-channel"
	// TraitChannel says of which channel a field-effect transistor is.
	TraitChannel = "channel"
)

// ChannelField is the claim of a channel.
func ChannelField() screening.Field {
	return screening.Field{
		Definition: book.Trait(TraitChannel, "channel"), Trait: true, Required: true, Example: "n-channel",
		Help: "n-channel or p-channel; a known type says it", Ask: "SAY whether it is n-channel or p-channel: channel=n-channel or channel=p-channel",
		Words: []screening.Word{
			{Word: N, Text: N},
			{Word: "nch", Text: N},
			{Word: P, Text: P},
			{Word: "pch", Text: P},
		},
	}
}

// Channel returns N, P, or "" where neither is claimed.
func Channel(c screening.Claim) string { return c.Trait(TraitChannel) }

// Ends orders two leads by sign: plus then minus for an n-channel part, turned for a p-channel one.
func Ends(c screening.Claim, plus, minus string) (string, string) {
	if Channel(c) == P {
		return minus, plus
	}
	return plus, minus
}

// StaticGuard is what keeps a gate from being destroyed by a touch.
const StaticGuard = "a touch can destroy a gate: wear an earthed wrist strap (1 MΩ in it) or touch bare earthed metal first; keep the leads " +
	"shorted with foam, foil or a clip until the test; supply off while you connect; never a drain voltage with the gate floating: " +
	"about 100 kΩ from gate to source"

// StaticSource is where that comes from.
var StaticSource = screening.Source{Document: "handling guides for static-sensitive parts (interfacebus, Toshiba); the 1 MΩ is from memory", Status: screening.Published}

// Static warns of static discharge before a field-effect part is touched or measured.
func Static() screening.Caution {
	return screening.Caution{
		Code: "static", Text: StaticGuard, Values: map[string]float64{"gate-resistance": 100e3}, Source: StaticSource,
	}
}

// SuspectStatic words what a gate that leaks looks like.
const SuspectStatic = "suspect a static discharge: the gate's insulation or junction is pierced, and it gets worse, not better"

// Over10M is the current that a 10 MΩ voltmeter in series carries at a reading, A.
func Over10M(volts float64) float64 { return volts / 10e6 }

// GateRecipe measures a gate's leakage with a voltmeter in series: 10 mV are 1 nA.
func GateRecipe(volts, most float64, gatePlus bool, tied string) screening.Recipe {
	shown := math.Min(most*10e6, volts)
	plus, minus := "gate", tied
	if !gatePlus {
		plus, minus = tied, "gate"
	}
	return screening.Recipe{
		Title: "gate leakage at " + Volts(volts),
		Lines: []string{
			"supply " + Volts(volts) + ", its plus to the " + plus + ", its minus to the " + minus +
				"; a voltmeter of 10 MΩ in series with the gate, on its DC volts range",
			"wait half a minute; volts ÷ 10 MΩ is the current: " + Volts(Honest2(shown)) + " is " + Amps(Honest2(shown/10e6)) +
				". Keep fingers and breath away",
		},
		Values: map[string]float64{"supply": volts, "series-resistance": 10e6, "limit-voltage": shown}, Source: book.Practice,
	}
}

// Honest2 rounds to two figures.
func Honest2(x float64) float64 { return book.Honest(x, 0, 2) }

// GateOpen makes the two limits of an insulated gate on an ohmmeter: OL passes, and a number that is shown must be a large one.
func GateOpen(all []screening.Limit, f Figures, on screening.Definition, criterion screening.Criterion) []screening.Limit {
	return append(all, f.Limit(on, criterion, "gate-open"), f.Limit(on, criterion, "gate-readable"))
}

// GateOpenRecipe measures it.
func GateOpenRecipe(on screening.Definition, source string) screening.Recipe {
	return screening.Recipe{
		Title: "gate to " + source + " with an ohmmeter",
		Lines: []string{
			"drain or collector left open; the highest ohms range, gate to " + source + ", both ways round: OL both ways, type " + string(on.Name) + "=OL",
			"a number is current through what must be an insulator: type it. Fingers off the leads, they are a megohm or less",
		},
		Values: map[string]float64{}, Source: book.Practice,
	}
}

// OpenGate declares a gate's resistance on an ohmmeter: to source, or to emitter.
func OpenGate(name screening.Characteristic, symbol, label string) screening.Definition {
	return screening.Definition{
		Name: name, Symbol: symbol, Label: label, Unit: quantity.Ohm,
		Over: screening.OverRange{Sense: quantity.AtLeast, Value: 2e6, Why: "taken as above 2 MΩ, the top range of even a simple pocket meter"},
	}
}

// Turned reports whether a junction's readings are those of a sound one whose probes were the wrong way round: open forward, and a
// junction's drop in reverse.
func Turned(part screening.Part, forward, reverse screening.Characteristic) bool {
	a, ok1 := part.Reading(forward, "")
	b, ok2 := part.Reading(reverse, "")
	return ok1 && ok2 && a.Over && b.Sense == quantity.Exactly && b.Value >= 0.3 && b.Value <= 1.0
}

var leaksSource = screening.Source{Document: "a gate leaks no less at more voltage", Status: screening.CommonPractice}

// GateLeakage takes the leakage of an insulated gate at another gate voltage for the bound that it is. A limit at any voltage takes what was
// read at least volts or more.
func GateLeakage(r screening.Reading, l screening.Limit, across screening.Variable, anyVoltage bool, least float64) screening.Conversion {
	got, stated := r.At.Get(across)
	want, _ := l.At.Get(across)
	c := screening.Conversion{OK: true, Reading: r, Source: leaksSource}
	c.Reading.At = l.At
	switch {
	case !stated:
		return screening.Conversion{Why: "the gate voltage of the reading is not stated: " + string(l.On) + "@" + Typed(want, quantity.Volt) + "=…"}
	case anyVoltage && (got >= least || r.Value > l.High):
		c.Rule = "the limit holds at whatever gate voltage is stated"
	case anyVoltage:
		return screening.Conversion{Why: "taken at " + Volts(got) + ", which shows nothing; at least " + Volts(least) + " is needed"}
	case got > want && r.Sense != quantity.AtLeast:
		c.Reading.Sense, c.Rule = quantity.AtMost, "at "+Volts(want)+" it leaks no more than at "+Volts(got)
	case got < want && r.Sense != quantity.AtMost:
		c.Reading.Sense, c.Rule = quantity.AtLeast, "at "+Volts(want)+" it leaks no less than at "+Volts(got)
	default:
		return screening.Conversion{Why: "taken at " + Volts(got) + ", which says nothing of " + Volts(want)}
	}
	c.Reading.Rule = c.Rule
	return c
}

var thresholdGrows = screening.Source{Document: "a threshold is a function of its test current: with more it is no less", Status: screening.Derived}

// Threshold takes a threshold at another current for the bound that it is. from and to are the currents, A, for which a limit holds as it
// stands; both 0 where it holds at its own alone.
func Threshold(r screening.Reading, l screening.Limit, current screening.Variable, from, to float64) screening.Conversion {
	got, stated := r.At.Get(current)
	want, _ := l.At.Get(current)
	c := screening.Conversion{OK: true, Reading: r, Source: thresholdGrows}
	c.Reading.At = l.At
	switch {
	case !stated:
		return screening.Conversion{Why: "the current of the reading is not stated: " + string(l.On) + "@" + Typed(want, quantity.Ampere) + "=…"}
	case to > 0 && got >= from && got <= to:
		c.Rule = "the limit holds from " + Amps(from) + " to " + Amps(to)
	case got < want && r.Sense != quantity.AtMost:
		c.Reading.Sense, c.Rule = quantity.AtLeast, "at "+Amps(want)+" it is no less than at "+Amps(got)
	case got > want && r.Sense != quantity.AtLeast:
		c.Reading.Sense, c.Rule = quantity.AtMost, "at "+Amps(want)+" it is no more than at "+Amps(got)
	default:
		return screening.Conversion{Why: "taken at " + Amps(got) + ", which says nothing of " + Amps(want)}
	}
	c.Reading.Rule = c.Rule
	return c
}

// The currents for which the threshold of any type holds, A (house): a battery and a resistor set them.
const ThresholdFrom, ThresholdTo = 0.2e-3, 1.25e-3

// Middle is the middle of a limit, or the bound that it has.
func Middle(l screening.Limit) float64 {
	switch {
	case math.IsInf(l.Low, -1):
		return l.High
	case math.IsInf(l.High, 1):
		return l.Low
	}
	return (l.Low + l.High) / 2
}
