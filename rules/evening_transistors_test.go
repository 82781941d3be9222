package rules_test

import "slices"

func transistorEvenings() []evening {
	return []evening{
		{
			kind: "bipolar", name: "small silicon: gain ± 12 to 20 % about the middle of its range", with: "a 20 V supply and a resistor",
			sound: func(b *bench) *specimen {
				k := []struct {
					name         string
					gain, spread float64
				}{{"2N3904", 190, 0.12}, {"BC547B", 300, 0.12}, {"2SC1815", 200, 0.2}, {"BC557B", 300, 0.12}, {"npn", 200, 0.2}}[b.IntN(5)]
				return soundBipolar(b, k.name, k.gain*b.about(1, k.spread))
			}, unseen: "collector", ill: deadBipolar,
		},
		{
			kind: "bipolar", name: "small silicon: gain anywhere in its range", with: "a 20 V supply and a resistor", sound: func(b *bench) *specimen {
				k := []struct {
					name      string
					low, high float64
				}{{"2N3904", 100, 300}, {"BC547B", 200, 450}, {"BC557C", 420, 800}}[b.IntN(3)]
				return soundBipolar(b, k.name, b.between(k.low, k.high))
			}, least: 0.88, why: "at either end of a range the meter's 10 % reaches beyond it", unseen: "collector", ill: deadBipolar,
		},
		{
			kind: "bipolar", name: "small silicon, without a supply", sound: func(b *bench) *specimen {
				s := soundBipolar(b, "BC547B", 300)
				delete(s.reads, "iceo")
				return s
			}, why: "its leakage is required, and a pocket meter puts no voltage on it", ill: deadBipolar[:2],
		},
		{
			kind: "bipolar", name: "germanium: gain 50 to 120, leaks 50 to 300 µA", with: "a 9 V battery, a resistor and a thermometer",
			sound: func(b *bench) *specimen {
				return part(b.word("AC128", "OC71")).with("vbe", is(b.about(0.2, 0.02))).with("hfe", is(b.between(50, 120))).
					with("iceo", is(b.decades(50e-6, 300e-6))).with("temperature", is(b.between(18, 26)))
			}, why: "a meter's transistor range does not say its collector current, so the leakage cannot be taken off the gain",
			ill: []fault{shortedJunction("vbe"), {name: "leaky", strike: func(b *bench, s *specimen) { s.with("iceo", is(b.decades(1e-3, 5e-3))) }}},
		},
		{
			kind: "jfet", name: "n-channel without groups: gate 0.7 V ± 20 mV, channel 100 to 600 Ω", sound: func(b *bench) *specimen {
				return soundJFET(b, b.word("2N3819", "MPF102", "n-channel", "2N5457"))
			}, unseen: "gate blocking", ill: deadJFET,
		},
		{
			kind: "jfet", name: "BF245 of a group: IDSS anywhere in it", with: "a 9 V battery", sound: func(b *bench) *specimen {
				k := []struct {
					group     string
					low, high float64
				}{{"A", 2e-3, 6.5e-3}, {"B", 6e-3, 15e-3}, {"C", 12e-3, 25e-3}}[b.IntN(3)]
				return soundJFET(b, "BF245"+k.group).with("idss", is(b.between(k.low, k.high)))
			}, least: 0.90, why: "at either end of a group the meter's 2 % reaches beyond it", unseen: "gate blocking",
			ill: append(slices.Clone(deadJFET), fault{
				name: "of no group", strike: func(b *bench, s *specimen) { s.scale("idss", b.pick(0.05, 5)) },
			}),
		},
	}
}

func soundBipolar(b *bench, name string, gain float64) *specimen {
	return part(name).with("vbe", is(b.about(0.66, 0.015))).with("hfe", is(gain)).with("iceo", says("<0.1uA"))
}

func soundJFET(b *bench, name string) *specimen {
	return part(name).with("vf", is(b.about(0.70, 0.02))).with("vbr", open).with("rds-on", is(b.between(100, 600)))
}

var (
	deadBipolar = []fault{
		shortedJunction("vbe"), openJunction("vbe"),
		{name: "leaky", strike: func(b *bench, s *specimen) { s.with("iceo", is(b.decades(15e-6, 5e-3))) }},
		{
			name: "no gain", strike: func(b *bench, s *specimen) { s.with("hfe", is(b.between(1, 15))) },
			most: 0.3, why: "of a transistor without a name no gain is promised",
		},
	}
	deadJFET = []fault{
		shortedJunction("vf", "vbr"), leakyJunction("vbr"), {name: "channel open", strike: func(_ *bench, s *specimen) { s.with("rds-on", open) }},
	}
)

// switchEvenings are the parts that are off until they are driven.
func switchEvenings() []evening {
	const lamp = "12 V, a lamp and a resistor"
	return []evening{
		{
			kind: "mosfet", name: "enhancement, both channels: body diode 0.5 V ± 30 mV, on-resistance ± 10 %", with: "a 9 V battery", sound: soundMOSFET,
			unseen: "blocking", ill: []fault{
				{name: "gate shorted", strike: func(b *bench, s *specimen) { s.with("rgs", is(b.decades(1, 1e6))) }},
				shortedJunction("vsd", "vbr"),
				{name: "stays on", strike: func(b *bench, s *specimen) { s.with("vbr", is(b.between(0, 0.5))) }},
				{name: "never on", strike: func(_ *bench, s *specimen) { s.with("rds-on", open) }},
				{name: "hardly on", strike: func(b *bench, s *specimen) { s.with("rds-on", is(b.decades(80, 1e4))) }},
			},
		},
		{
			kind: "mosfet", name: "the same without a battery", sound: func(b *bench) *specimen {
				s := soundMOSFET(b)
				delete(s.reads, "rds-on")
				return s
			}, why: "that it turns on is required, and takes a battery on its gate",
		},
		{
			kind: "igbt", name: "with and without diode: 0.9 to 1.6 V at 0.4 A", with: lamp, sound: func(b *bench) *specimen {
				s := part("IRG4BC20U").with("vf", open)
				if b.IntN(2) == 0 {
					s = part("IRG4BC10UD").with("vf", is(b.about(0.45, 0.03)))
				}
				return s.with("rge", open).with("vbr", open).with("vce-on", is(b.between(0.9, 1.6)))
			}, unseen: "blocking", ill: []fault{
				{name: "gate shorted", strike: func(b *bench, s *specimen) { s.with("rge", is(b.decades(1, 1e6))) }},
				shortedJunction("vbr", "vf"),
				{name: "never on", strike: func(b *bench, s *specimen) { s.with("vce-on", is(b.between(11, 12.5))) }},
			},
		},
		{
			kind: "thyristor", name: "1 to 12 A: triggers through its recipe's resistor, 0.7 to 1.1 V", with: lamp, sound: func(b *bench) *specimen {
				k := []struct{ name, driven string }{{"BT151", "<13.5mA"}, {"C106", "<0.18mA"}, {"600V 12A", "<90mA"}}[b.IntN(3)]
				return soundThyristor(b, k.name, k.driven)
			}, unseen: "forward blocking", ill: deadThyristor,
		},
		{
			kind: "triac", name: "BT234 and unknown: triggers both ways through its recipe's resistor, 0.7 to 1.1 V", with: lamp, sound: func(b *bench) *specimen {
				k := []struct{ name, driven string }{{"BT234", "<9.0mA"}, {"BT234-600", "<9.0mA"}, {"600V 8A", "<90mA"}}[b.IntN(3)]
				return soundThyristor(b, k.name, k.driven)
			}, unseen: "forward blocking", ill: deadThyristor, most: 7, ask: "it blocks, triggers and holds, each in both directions",
		},
	}
}

func soundMOSFET(b *bench) *specimen {
	k := []struct {
		name string
		ohms float64
	}{{"2N7000", 1.8}, {"BS170", 1.8}, {"IRF540N", 0.04}, {"IRF9540N", 0.1}, {"IRF840", 0.7}, {"n-channel", 0.3}}[b.IntN(6)]
	return part(k.name).with("rgs", open).with("vsd", is(b.about(0.5, 0.03))).with("vbr", open).with("rds-on", is(k.ohms*b.about(1, 0.1)))
}

func soundThyristor(b *bench, name, driven string) *specimen {
	return part(name).with("vbo", open).with("vbr", open).with("vf", is(b.between(0.05, 0.65))).with("igt", says(driven)).with("vt", is(b.between(0.7, 1.1)))
}

var deadThyristor = []fault{
	{name: "shorted", strike: func(b *bench, s *specimen) { s.with("vbo", is(b.between(0, 0.05))).with("vbr", is(b.between(0, 0.05))) }},
	leakyJunction("vbr"),
	{name: "does not trigger", strike: func(_ *bench, s *specimen) { s.with("igt", says(">"+s.reads["igt"].text[1:])).with("vt", open) }},
	{name: "does not hold", strike: func(_ *bench, s *specimen) { s.with("vt", open) }},
}
