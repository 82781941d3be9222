package rules_test

import "math"

// shortedJunction reads a few hundredths of a volt at most, whichever way round.
func shortedJunction(names ...string) fault {
	return fault{name: "shorted", strike: func(b *bench, s *specimen) {
		for _, name := range names {
			s.with(name, is(b.between(0, 0.05)))
		}
	}}
}

func openJunction(name string) fault {
	return fault{name: "open", strike: func(_ *bench, s *specimen) { s.with(name, open) }}
}

// leakyJunction blocks a diode test no more: it shows a volt or so in reverse.
func leakyJunction(name string) fault {
	return fault{name: "leaky", strike: func(b *bench, s *specimen) { s.with(name, is(b.between(0.2, 1.5))) }}
}

func diodeEvenings() []evening {
	const supply = "a supply to 30 V and a resistor"
	return []evening{
		{
			kind: "diode", name: "silicon, Schottky, germanium: VF ± 20 mV at 1 mA", sound: func(b *bench) *specimen {
				k := []struct {
					name  string
					volts float64
				}{{"1N4148", 0.62}, {"1N4007", 0.54}, {"1N5408", 0.49}, {"1N5819", 0.21}, {"1N34A", 0.28}}[b.IntN(5)]
				return part(k.name).with("vf", is(b.about(k.volts, 0.02))).with("vbr", open)
			}, unseen: "reverse blocking", ill: []fault{shortedJunction("vf", "vbr"), openJunction("vf"), leakyJunction("vbr")},
		},
		{
			kind: "zener", name: "BZX79 4.7 to 12 V: VZ ± 1.6 % at 5 mA", with: supply, sound: func(b *bench) *specimen {
				k := []struct {
					name  string
					volts float64
				}{{"4V7", 4.7}, {"5V1", 5.1}, {"6V2", 6.2}, {"9V1", 9.1}, {"12", 12}}[b.IntN(5)]
				return part("BZX79-C"+k.name).with("vz", is(k.volts*b.about(1, 0.016)))
			}, unseen: "power", ill: []fault{
				shortedJunction("vz"), {name: "another's voltage", strike: func(b *bench, s *specimen) { s.scale("vz", b.pick(0.8, 1.25)) }},
			},
		},
		{
			// A drop of 0.34 V for each factor of e, as 7 Ω at 49 mA makes it.
			kind: "zener", name: "1N4733A, 5.1 V ± 1.6 % at 49 mA, read at 5 mA", with: supply, sound: func(b *bench) *specimen {
				return part("1N4733A").with("vz", is(5.1*b.about(1, 0.016)-0.34*math.Log(49.0/5)))
			}, why: "the prompt asks at 49 mA and takes what is typed as read there, so it is rejected; as a row without its current it is left undecided",
		},
		{
			kind: "bridge", name: "0.5 to 25 A: VF ± 20 mV a leg at 1 mA", sound: func(b *bench) *specimen {
				s := part(b.word("KBP208", "GBPC2510", "DB107", "W10M")).with("vbr", open)
				for _, leg := range legs {
					s.with("vf/"+leg, is(b.about(0.53, 0.02)))
				}
				return s
			}, unseen: "reverse blocking", most: 7,
			ask: "four legs forward; and of the four in reverse, two each way across the AC leads: fewer readings leave a leg out, or do not tell which it is",
			ill: []fault{
				{name: "one leg shorted", strike: func(b *bench, s *specimen) { s.with("vf/"+b.word(legs...), is(b.between(0, 0.05))) }},
				{name: "one leg open", strike: func(b *bench, s *specimen) { s.with("vf/"+b.word(legs...), open) }},
				{name: "leaky", strike: func(b *bench, s *specimen) { s.with("vbr/"+b.word("ac1-ac2", "ac2-ac1"), is(b.between(0.6, 1.5))) }},
			},
		},
	}
}

var legs = []string{"ac1-plus", "ac2-plus", "minus-ac1", "minus-ac2"}

func lightEvenings() []evening {
	return []evening{
		{
			kind: "led", name: "infrared, red, yellow, green: VF ± 50 mV at 1 mA", sound: func(b *bench) *specimen {
				k := []struct {
					colour string
					volts  float64
				}{{"infrared", 1.08}, {"red", 1.70}, {"yellow", 1.80}, {"green", 1.82}}[b.IntN(4)]
				return part(k.colour).with("vf", is(b.about(k.volts, 0.05))).with("vbr", open)
			}, unseen: "how brightly", ill: []fault{shortedJunction("vf", "vbr"), openJunction("vf"), leakyJunction("vbr")},
		},
		{
			kind: "led", name: "blue and white: VF 3.1 ± 0.1 V at 18 mA", with: "a 9 V battery and a resistor", sound: func(b *bench) *specimen {
				return part(b.word("blue", "white")).with("vf", is(b.about(3.1, 0.1))).with("vbr", open)
			}, unseen: "how brightly", ill: []fault{
				shortedJunction("vf", "vbr"), {name: "open", strike: func(b *bench, s *specimen) { s.with("vf", is(b.between(8.5, 9.5))) }}, leakyJunction("vbr"),
			},
		},
		{
			kind: "led", name: "blue and white, on the diode test", sound: func(b *bench) *specimen {
				return part(b.word("blue", "white")).with("vf", open).with("vbr", open)
			}, why: "a diode test that ends at 2 V does not reach them: OL says nothing", ill: []fault{shortedJunction("vf", "vbr"), leakyJunction("vbr")},
		},
	}
}

func circuitEvenings() []evening {
	return []evening{
		{
			kind: "optocoupler", name: "4N25, 4N35, PC817: a ratio of its range, faded by up to 25 %", with: "5 to 20 V and two resistors",
			sound: soundCoupler, unseen: "insulation", ill: []fault{
				shortedJunction("vf", "vbr"), openJunction("vf"),
				{name: "leaky", strike: func(b *bench, s *specimen) { s.with("iceo", is(b.decades(20e-6, 1e-3))) }},
				{
					name: "faded by half and more", strike: func(b *bench, s *specimen) { s.with("ctr", is(s.bound*b.between(0.15, 0.5))) },
					most: 0.2, why: "a PC817B that is too faded for its letter is accepted as the PC817 that it still is",
				},
			},
		},
		{
			kind: "regulator", name: "fixed, adjustable: V ± 1.3 %; shunt ± 0.5 %", with: "a supply and a load", sound: func(b *bench) *specimen {
				k := []struct {
					name, of string
					volts    float64
					spread   float64
				}{
					{"7805", "vout", 5, 0.013}, {"7812", "vout", 12, 0.013}, {"78L05", "vout", 5, 0.013}, {"LM317", "vref", 1.25, 0.013}, {"TL431", "vref", 2.495, 0.005},
				}[b.IntN(5)]
				s := part("type="+k.name).with(k.of, is(k.volts*b.about(1, k.spread)))
				s.bound = k.volts
				return s
			}, ill: []fault{
				{name: "no output", strike: func(b *bench, s *specimen) { s.each(b.between(0, 0.04)) }},
				{name: "input through", strike: func(b *bench, s *specimen) { s.each(b.between(1.6, 2)) }},
				{name: "9 % high", strike: func(_ *bench, s *specimen) { s.each(1.09) }},
				{name: "9 % low", strike: func(_ *bench, s *specimen) { s.each(0.91) }},
			},
		},
	}
}

// each makes all that it reads a multiple of its bound.
func (s *specimen) each(by float64) {
	for name := range s.reads {
		s.with(name, is(by*s.bound))
	}
}

func soundCoupler(b *bench) *specimen {
	k := []struct {
		name      string
		low, high float64
	}{{"4N25", 0.2, 1}, {"4N35", 1, 2}, {"PC817B", 1.3, 2.6}, {"PC817", 0.5, 6}}[b.IntN(4)]
	s := part(k.name).with("vf", is(b.about(1.1, 0.03))).with("vbr", open).with("iceo", says("<0.1uA")).
		with("ctr", is(b.between(k.low, 0.95*k.high)*b.between(0.75, 1)))
	s.bound = k.low
	return s
}
