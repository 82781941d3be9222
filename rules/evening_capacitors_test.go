package rules_test

import (
	"fmt"
	"math"
	"strings"

	"goodbin/screening/quantity"
)

// printed is a value as a person types it from a part.
func printed(x float64, unit quantity.Unit) string {
	return strings.NewReplacer(" ", "", "µ", "u", "Ω", "ohm").Replace(quantity.Format(x, unit, 4))
}

func farads(x float64) string { return printed(x, quantity.Farad) }

// What befalls a capacitor. A shorted one shows over-range on a pocket meter's capacitance range, an open one what its leads have.
var (
	shortedC = fault{name: "shorted", strike: func(b *bench, s *specimen) {
		ohms := b.decades(0.1, 200)
		s.with("capacitance", open).with("resistance", is(ohms)).with("insulation-resistance", is(ohms)).with("esr", is(ohms))
	}}
	openC = fault{name: "open", strike: func(b *bench, s *specimen) { s.with("capacitance", is(b.between(0, 5e-12))).with("esr", open) }}
	halfC = fault{name: "half", strike: func(b *bench, s *specimen) { s.scale("capacitance", b.between(0.4, 0.55)) }}
	// leakyC is found by who goes on to the ohms range: of film, mica and ceramic insulation is wanted and not required. Who does not go on is told
	// with every such part that its insulation was not tested.
	leakyC = fault{name: "leaky (looked for)", further: true, strike: func(b *bench, s *specimen) {
		s.with("insulation-resistance", is(b.decades(2e3, 1e6)))
	}}
	leakyUnseen = fault{
		name: "leaky (not asked)", strike: leakyC.strike, most: 1, why: "insulation is wanted and not required; that it was not tested is said with the part",
	}
	// leakyOxide leaks more than the ohms range is asked to show: its bound is that resistance.
	leakyOxide = fault{name: "leaky", strike: func(b *bench, s *specimen) { s.with("resistance", is(s.bound*b.decades(1e-3, 0.9))) }}
)

// oxideEvenings are the capacitors whose dielectric is an oxide.
func oxideEvenings() []evening {
	return []evening{
		{
			kind: "electrolytic", name: "radial after 1985, under 63 V: C −5 ± 6 %, tan δ half its limit", with: "ESR meter", sound: soundElectrolytic,
			unseen: "leakage", ill: []fault{
				shortedC, halfC,
				{name: "−35 to −50 %", strike: func(b *bench, s *specimen) { s.with("capacitance", is(s.bound*b.between(0.5, 0.65))) }},
				{name: "dried out", strike: func(b *bench, s *specimen) { s.with("esr", is(max(1, s.reads["esr"].value)*b.between(5, 20))) }},
			},
		},
		{
			kind: "electrolytic", name: "the same without an ESR meter", sound: func(b *bench) *specimen {
				s := soundElectrolytic(b)
				delete(s.reads, "esr")
				return s
			}, why: "a capacitance without ESR or loss does not show drying out", ill: []fault{shortedC, halfC},
		},
		{
			kind: "tantalum", name: "beads and chips: C ± 4 % of K; leaks a tenth to all of its limit", sound: soundTantalum, unseen: "leakage",
			ill: []fault{shortedC, halfC, leakyOxide},
		},
		{
			kind: "tantalum", name: "wet: C ± 5 % of M, tan δ 0.12 ± 20 %", with: "ESR meter", sound: func(b *bench) *specimen {
				c, v := b.pick(22e-6, 47e-6, 100e-6), b.pick(25, 50)
				return part(fmt.Sprintf("%s %gV wet", farads(c), v)).with("capacitance", is(c*b.about(1, 0.05))).with("resistance", open).
					with("esr", is(0.12/(2*math.Pi*120*c)*math.Exp(b.about(0, 0.2))))
			}, unseen: "leakage", ill: []fault{
				shortedC, halfC, {name: "dried out", strike: func(b *bench, s *specimen) { s.scale("esr", b.between(15, 50)) }},
			},
		},
		{
			kind: "polymer", name: "aluminium and tantalum: C ± 7 % of M; leaks a tenth to all of its limit", sound: soundPolymer, unseen: "ESR",
			ill: []fault{shortedC, halfC, leakyOxide},
		},
	}
}

// dryEvenings are the capacitors with neither electrolyte nor polarity but ceramic and film, which have their own.
func dryEvenings() []evening {
	return []evening{
		{
			kind: "mica", name: "47 pF to 10 nF, J: C ± a third of it", sound: func(b *bench) *specimen {
				c := b.e12(47e-12, 10e-9)
				return part(fmt.Sprintf("%s 500V J %s", farads(c), b.word("silver", "moulded", "dipped"))).with("capacitance", is(c*b.about(1, 0.05/3)))
			}, unseen: "insulation", ill: []fault{openC, halfC, leakyC, leakyUnseen},
		},
		{
			kind: "mica", name: "silver, F: C ± a third of it, proven to 5 % only", sound: func(b *bench) *specimen {
				c := b.e12(470e-12, 10e-9)
				return part(farads(c)+" 500V F silver").with("capacitance", is(c*b.about(1, 0.01/3)))
			}, unseen: "insulation", ill: []fault{openC, halfC, leakyC, leakyUnseen},
		},
		{
			kind: "paper", name: "metallised, after 1960: C ± 5 %", sound: func(b *bench) *specimen {
				c := b.e12(10e-9, 1e-6)
				return part(fmt.Sprintf("%s 400V M mp dated=%d", farads(c), 1960+b.IntN(20))).with("capacitance", is(c*b.about(1, 0.05)))
			}, why: "its leakage at its own voltage decides, and a pocket meter has none", ill: []fault{shortedC, halfC},
		},
		{
			kind: "variable-capacitor", name: "air, one to three gangs: C ± 3 %", sound: func(b *bench) *specimen {
				c := b.pick(120e-12, 160e-12, 365e-12, 500e-12)
				return part(fmt.Sprintf("%s air %s", farads(c), b.word("", "2-gang", "3-gang"))).with("capacitance-max", is(c*b.about(1, 0.03))).
					with("insulation-resistance", open)
			}, unseen: "tracks", most: 7, ask: "two readings a gang: that its plates do not touch, and its highest capacitance", ill: []fault{
				{name: "plates touch", strike: func(b *bench, s *specimen) { s.with("insulation-resistance", is(b.decades(0.1, 1e3))) }},
				{name: "leaky", strike: func(b *bench, s *specimen) { s.with("insulation-resistance", is(b.decades(1e4, 9e5))) }},
				{name: "half its plates", strike: func(b *bench, s *specimen) { s.scale("capacitance-max", 0.5) }},
			},
		},
	}
}

func soundElectrolytic(b *bench) *specimen {
	// tanDeltaMax is the ladder that low-impedance and normal-size series print (Nichicon UPW, Rubycon ZL: published).
	tanDeltaMax := map[float64]float64{6.3: .22, 10: .19, 16: .16, 25: .14, 35: .12, 50: .10}
	c := b.pick(1, 2.2, 4.7) * b.pick(1e-6, 10e-6, 100e-6)
	if b.IntN(4) == 0 {
		c = b.pick(1000e-6, 2200e-6)
	}
	v := b.pick(6.3, 10, 16, 25, 35, 50)
	truth := c * b.about(0.95, 0.06)
	// A printed maximum is about twice the typical value (EPCOS B41456 rows: derived).
	tan := (tanDeltaMax[v] + 0.02*max(0, math.Floor(c/1000e-6)-1)) * 0.55 * math.Exp(b.about(0, 0.2))
	s := part(fmt.Sprintf("%s %gV radial dated=%d", farads(c), v, 1986+b.IntN(30))).
		with("capacitance", is(truth)).with("esr", is(tan/(2*math.Pi*120*truth)))
	s.bound = c
	return s
}

// soundTantalum may leak 0.01·CV, or 0.5 µA; ten times that is what the ohms range must rule out, and no more than 1 MΩ is asked of it.
func soundTantalum(b *bench) *specimen {
	c, v := b.pick(1, 2.2, 4.7)*b.pick(0.1e-6, 1e-6, 10e-6), b.pick(6.3, 10, 16, 25, 35)
	most := max(0.01*c*v, 0.5e-6)
	s := part(fmt.Sprintf("%s %gV K %s", farads(c), v, b.word("bead", "chip"))).
		with("capacitance", is(c*b.about(1, 0.04))).with("resistance", is(v/(most*b.decades(0.1, 1))))
	s.bound = min(1e6, v/(10*most))
	return s
}

// soundPolymer may leak 0.1·CV (tantalum), or 0.2·CV and 500 µA (aluminium).
func soundPolymer(b *bench) *specimen {
	c, v := b.pick(47e-6, 100e-6, 220e-6, 470e-6), b.pick(2.5, 4, 6.3, 10)
	what, most := "al", max(0.2*c*v, 500e-6)
	if b.IntN(2) == 0 {
		what, most = "ta", 0.1*c*v
	}
	s := part(fmt.Sprintf("%s %gV M %s", farads(c), v, what)).with("capacitance", is(c*b.about(1, 0.07))).
		with("resistance", is(v/(most*b.decades(0.1, 1))))
	s.bound = v / (10 * most)
	return s
}

// aged is what is left of a class 2 part after so many years, losing k in a decade of time from 1000 h on.
func aged(k, years float64) float64 { return 1 - k*math.Log10(years*8766/1000) }

func ceramicEvenings() []evening {
	return []evening{
		{
			kind: "ceramic", name: "class 1, 10 pF to 1 nF, J: C ± a third of it", sound: func(b *bench) *specimen {
				c := b.e12(10e-12, 1e-9)
				return part(farads(c)+" 50V J C0G").with("capacitance", is(c*b.about(1, 0.05/3)))
			}, unseen: "insulation", ill: []fault{openC, halfC, leakyC, leakyUnseen},
		},
		{
			kind: "ceramic", name: "X7R, K: C ± a third of it, aged 1 to 40 years by 1 to 2.5 % a decade", sound: func(b *bench) *specimen {
				c, years := b.e12(1e-9, 470e-9), b.decades(1, 40)
				return part(fmt.Sprintf("%s 50V K X7R dated=%.0f", farads(c), 2025-years)).
					with("capacitance", is(c*b.about(1, 0.1/3)*aged(b.between(0.01, 0.025), years)))
			}, unseen: "insulation", ill: []fault{
				shortedC, openC, halfC, leakyC, leakyUnseen, {name: "−35 to −45 %", strike: func(b *bench, s *specimen) { s.scale("capacitance", b.between(0.55, 0.65)) }},
			},
		},
		{
			// It is read between 18 and 26 °C, which takes up to 10 %.
			kind: "ceramic", name: "Y5V, Z: C −15 to +60 %, aged 1 to 40 years by 4 to 8 % a decade", sound: func(b *bench) *specimen {
				c, years := b.e12(10e-9, 1e-6), b.decades(1, 40)
				return part(fmt.Sprintf("%s 25V Z Y5V dated=%.0f", farads(c), 2025-years)).
					with("capacitance", is(c*b.between(0.85, 1.6)*b.between(0.9, 1)*aged(b.between(0.04, 0.08), years)))
			}, unseen: "direct voltage", ill: []fault{
				shortedC, openC, leakyC, leakyUnseen,
				{name: "a fifth left", strike: func(b *bench, s *specimen) { s.scale("capacitance", b.between(0.1, 0.25)) }},
				{
					name: "half", strike: halfC.strike, most: 0.5,
					why: "half of a part made with 80 % too much, and not aged, is what a sound one may read that was made with 20 % too little, and aged",
				},
			},
		},
		{
			kind: "ceramic", name: "a disc of no known class or date: C −15 to +60 %, aged 1 to 40 years by 1 to 7 % a decade", sound: func(b *bench) *specimen {
				c := b.e12(1e-9, 100e-9)
				return part(farads(c)).with("capacitance", is(c*b.between(0.85, 1.6)*aged(b.between(0.01, 0.07), b.decades(1, 40))))
			}, unseen: "which class", ill: []fault{
				shortedC, openC, leakyC, leakyUnseen, {name: "a fifth left", strike: func(b *bench, s *specimen) { s.scale("capacitance", b.between(0.1, 0.25)) }},
			},
		},
	}
}

func filmEvenings() []evening {
	var all []evening
	for _, f := range []struct {
		name, dielectric, tolerance string
		ratio, allow                float64 // what it may be off, and have drifted
	}{
		{"polyester, K", "pet", "K", .1, .03},
		{"polypropylene, J", "pp", "J", .05, .01},
		{"polystyrene, J", "ps", "J", .05, .01},
		{"polystyrene, F, proven to 5 % only", "ps", "F", .01, .01},
		{"polycarbonate, K", "pc", "K", .1, .03},
		{"polyethylene naphthalate, K", "pen", "K", .1, .03},
		{"polyphenylene sulphide, J", "pps", "J", .05, .03},
		{"film of no known dielectric or tolerance", "", "", .2, .03},
	} {
		all = append(all, evening{
			kind: "film", name: f.name + ", 1 nF to 1 µF: C ± a third of its tolerance, less up to 1 %",
			sound: func(b *bench) *specimen {
				c := b.e12(1e-9, 1e-6)
				s := part(fmt.Sprintf("%s 100V %s %s", farads(c), f.tolerance, f.dielectric)).
					with("capacitance", is(c*b.about(1, f.ratio/3)*b.between(0.99, 1)))
				s.bound = c
				return s
			},
			unseen: "insulation", ill: []fault{shortedC, openC, leakyC, leakyUnseen, halfC, {
				name: "worn", strike: func(b *bench, s *specimen) {
					s.with("capacitance", is(s.bound*(1-f.ratio-f.allow-b.between(0.02, 0.15))))
				}, most: 0.15, why: "2 % beyond what it may have drifted lies within the meter's 3 %",
			}},
		})
	}
	return all
}
