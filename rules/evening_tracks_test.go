package rules_test

import (
	"fmt"
	"math"

	"goodbin/screening/quantity"
)

func ohmsOf(x float64) string { return printed(x, quantity.Ohm) }

// trackEvenings are the parts that an ohmmeter reads: resistors, controls, varistors.
func trackEvenings() []evening {
	return []evening{
		{
			kind: "resistor", name: "5 %, 10 Ω to 1 MΩ: R + 0.5 ± 1.2 %", sound: func(b *bench) *specimen {
				r := b.e12(10, 1e6)
				return part(ohmsOf(r)+" 5%").with("resistance", is(r*b.about(1.005, 0.012)))
			}, unseen: "rated power", ill: []fault{
				{name: "open", strike: func(_ *bench, s *specimen) { s.with("resistance", open) }},
				{name: "+10 to +60 %", strike: func(b *bench, s *specimen) { s.scale("resistance", b.between(1.1, 1.6)) }},
			},
		},
		{kind: "potentiometer", name: "carbon, linear or log, clean: R ± 7 %, jumps to 2 %", sound: soundControl("carbon", 0.07, ""), unseen: "noise", ill: worn},
		{kind: "potentiometer", name: "cermet, linear: R ± 3 %, jumps to 2 %", sound: soundControl("cermet", 0.03, ""), unseen: "noise", ill: worn},
		{
			kind: "potentiometer", name: "carbon, stereo, with a switch: R ± 7 %", sound: soundControl("carbon", 0.07, " dual switched"), unseen: "noise", ill: worn,
			most: 9, ask: "three readings a track, and two of the switch",
		},
		{
			kind: "varistor", name: "14 to 20 V: V at 1 mA ± 3.3 %", with: "a supply to 30 V and a resistor", sound: func(b *bench) *specimen {
				v := b.pick(14, 18, 20)
				return part(fmt.Sprintf("rated:vv=%gV 10%%", v)).with("resistance", open).with("vv", is(v*b.about(1, 0.033))).
					with("leakage", is(b.decades(0.2e-6, 3e-6)))
			}, unseen: "surge", ill: []fault{
				{name: "shorted", strike: func(b *bench, s *specimen) {
					s.with("resistance", is(b.decades(0.1, 1e3))).with("vv", is(b.between(0, 0.5))).with("leakage", says(">1mA"))
				}},
				{name: "worn", strike: func(b *bench, s *specimen) {
					s.scale("vv", b.between(0.5, 0.75))
					s.with("leakage", is(b.decades(30e-6, 1e-3)))
				}},
			},
		},
		{
			kind: "varistor", name: "275 V AC", sound: func(*bench) *specimen { return part("ac-voltage=275V").with("resistance", open) },
			why: "its voltage at 1 mA decides, at 440 V, and no pocket meter has that",
			ill: []fault{{name: "shorted", strike: func(b *bench, s *specimen) { s.with("resistance", is(b.decades(0.1, 1e3))) }}},
		},
	}
}

var worn = []fault{
	{name: "open track", strike: func(_ *bench, s *specimen) { s.with("resistance", open) }},
	{name: "scratchy", strike: func(b *bench, s *specimen) { s.with("crv", is(s.reads["resistance"].value*b.between(0.07, 0.5))) }},
	{name: "lifts off", strike: func(_ *bench, s *specimen) { s.with("crv", open) }},
	{name: "+40 to +80 %", strike: func(b *bench, s *specimen) { s.with("resistance", is(s.bound*b.between(1.4, 1.8))) }},
}

// soundControl is a clean control: the middle of its travel is set by eye to ±4 %, a log track has 10 to 20 % of its resistance there.
func soundControl(technology string, spread float64, more string) func(*bench) *specimen {
	return func(b *bench) *specimen {
		r := b.pick(1, 2.2, 4.7) * b.pick(1e3, 10e3, 100e3)
		whole := r * b.about(1, spread)
		taper, share := "linear", 0.5+b.between(-0.04, 0.04)
		if technology == "carbon" && b.IntN(2) == 0 {
			taper, share = "log", b.between(0.1, 0.2)
		}
		s := part(fmt.Sprintf("%s %s %s%s", ohmsOf(r), taper, technology, more)).with("resistance", is(whole)).with("midpoint", is(whole*share)).
			with("crv", is(whole*b.between(0, 0.02))).with("switch-closed", is(b.decades(0.01, 0.3))).with("switch-open", open)
		s.bound = r
		return s
	}
}

var brokenThermistor = []fault{
	{name: "open", strike: func(_ *bench, s *specimen) { s.with("resistance", open) }},
	{name: "shorted", strike: func(b *bench, s *specimen) {
		s.with("resistance", is(s.reads["resistance"].value*b.decades(1e-4, 0.05)))
	}},
	{name: "half", strike: func(b *bench, s *specimen) { s.scale("resistance", b.between(0.4, 0.6)) }},
}

// thermistorEvenings lie in a room of 18 to 27 °C, which a thermometer tells within its ±3 K.
func thermistorEvenings() []evening {
	const thermometer = "a thermometer"
	return []evening{
		{
			kind: "thermistor", name: "NTC, 5 %, B printed: R25 ± 1.7 %, B ± 0.3 %", with: thermometer, sound: soundNTC(" 5%", true), unseen: "B value",
			ill: brokenThermistor,
		},
		{
			kind: "thermistor", name: "NTC of which only the ohms are printed: R25 ± 1.7 %", with: thermometer, sound: soundNTC("", false), unseen: "B value",
			ill: brokenThermistor,
		},
		{
			kind: "thermistor", name: "PTC: R25 ± 8 %, up to 0.5 % a kelvin", with: thermometer, sound: func(b *bench) *specimen {
				r, celsius := b.pick(4.7, 18, 27, 100), b.between(18, 27)
				return part(ohmsOf(r)+" ptc").with("temperature", is(celsius)).
					with("resistance", is(r*b.about(1, 0.08)*(1+b.between(-0.005, 0.005)*(celsius-25))))
			}, unseen: "switch", ill: []fault{
				brokenThermistor[0], brokenThermistor[1],
				{
					name: "a third", strike: func(b *bench, s *specimen) {
						s.with("resistance", is(max(0.1, s.reads["resistance"].value*b.between(0.2, 0.35))))
					},
					most: 0.3, why: "leads that are not zeroed add up to 0.3 Ω to the 2 Ω of one that should have 4.7 Ω",
				},
			},
		},
		{
			kind: "thermistor", name: "NTC, 5 %, and nobody says how warm it is", sound: func(b *bench) *specimen {
				s := soundNTC(" 5%", true)(b)
				delete(s.reads, "temperature")
				return s
			}, why: "it changes by 4 % a kelvin: without its temperature the ohms say nothing", ill: brokenThermistor,
		},
	}
}

func soundNTC(tolerance string, printsB bool) func(*bench) *specimen {
	return func(b *bench) *specimen {
		r, beta, celsius := b.pick(1e3, 5e3, 10e3, 100e3), b.pick(3435, 3950, 3977), b.between(18, 27)
		claim := ohmsOf(r) + tolerance
		if printsB {
			claim += fmt.Sprintf(" B%g", beta)
		}
		truth := r * b.about(1, 0.05/3) * math.Exp(beta*b.about(1, 0.003)*(1/(celsius+273.15)-1/298.15))
		return part(claim).with("resistance", is(truth)).with("temperature", is(celsius))
	}
}

func windingEvenings() []evening {
	return []evening{
		{
			kind: "inductor", name: "10 µH to 10 mH, K: L ± 3.3 %", with: "a component meter", sound: func(b *bench) *specimen {
				l := b.e12(10e-6, 10e-3)
				return part(printed(l, quantity.Henry)+" K").with("inductance", is(l*b.about(1, 0.033)))
			}, unseen: "saturation", ill: []fault{
				{name: "open", strike: func(_ *bench, s *specimen) { s.with("inductance", open).with("dcr", open) }},
				{name: "shorted turn", strike: func(b *bench, s *specimen) { s.scale("inductance", b.between(0.1, 0.7)) }},
			},
		},
		{
			kind: "inductor", name: "the same without a component meter", sound: func(b *bench) *specimen {
				return part(printed(b.e12(10e-6, 10e-3), quantity.Henry)+" K").with("dcr", is(b.decades(0.1, 50)))
			}, why: "a pocket meter has no range for inductance",
		},
		{
			kind: "transformer", name: "two windings of 0.5 to 400 Ω, ± 5 % of a twin's", sound: func(b *bench) *specimen {
				s := part("").with("insulation-resistance", open)
				for _, winding := range []string{"1", "2"} {
					r := b.decades(0.5, 400)
					s.claim += fmt.Sprintf(" rated:dcr/%s=%.3g", winding, r)
					s.with("dcr/"+winding, is(r*b.about(1, 0.05)))
				}
				return s
			}, unseen: "insulation at working voltage", ill: []fault{
				{name: "open", strike: func(b *bench, s *specimen) { s.with("dcr/"+b.word("1", "2"), open) }},
				{name: "to its core", strike: func(b *bench, s *specimen) { s.with("insulation-resistance", is(b.decades(1, 9e5))) }},
			},
		},
		{
			kind: "relay", name: "coils of 50 Ω to 3 kΩ ± 4 %, contacts to 0.2 Ω", sound: func(b *bench) *specimen {
				r := b.pick(50, 120, 270, 700, 3000)
				return part(fmt.Sprintf("12V %gR", r)).with("coil-resistance", is(r*b.about(1, 0.04))).with("contact-resistance", is(b.decades(0.01, 0.2)))
			}, unseen: "that it pulls in", ill: []fault{
				{name: "coil open", strike: func(_ *bench, s *specimen) { s.with("coil-resistance", open) }},
				{name: "burnt contact", strike: func(b *bench, s *specimen) { s.with("contact-resistance", is(b.decades(3, 1e4))) }},
				{name: "contact open", strike: func(_ *bench, s *specimen) { s.with("contact-resistance", open) }},
			},
		},
	}
}
