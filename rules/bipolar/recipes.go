package bipolar

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// What a bench is assumed to own (house): a 9 V battery or a small supply, resistors, a 12 V 5 W lamp and a 12 V battery or supply.
const (
	battery     = 9.0
	lampVolts   = 12.0
	lampWatts   = 5.0
	lampBase    = 1e-3 // A, well above a power Darlington's turn-on current
	leakResists = 10e3 // Ω in series with an open-base test: 10 mV per microampere, and a shorted part draws 2 mA at 20 V
)

// recipes say how to measure what a limit asks with what people own.
func (b rulebook) recipes(part screening.Part, l screening.Limit) []screening.Recipe {
	p := b.promiseOf(part.Claim)
	switch l.On {
	case VBE.Name:
		return []screening.Recipe{vbeRecipe(p)}
	case HFE.Name, HFENet.Name:
		var all []screening.Recipe
		if p.powerDarlington() {
			all = append(all, lampRecipe(p))
		}
		if ic, ok := l.At.Get(screening.IC); ok && ic <= 0.5 || !ok {
			all = append(all, gainRecipe(p, l))
		} else if !p.powerDarlington() {
			all = append(all, lampRecipe(p))
		}
		return all
	case ICEO.Name:
		if v, stated := l.At.Get(screening.VCE); stated && v > 0 {
			return []screening.Recipe{leakageRecipe(p, l)}
		}
	case ICBO.Name:
		if v, stated := l.At.Get(screening.VCB); stated && v > 0 { // a limit that is claimed without its voltage says nothing of the supply
			return []screening.Recipe{collectorRecipe(p, l)}
		}
	case screening.VBR.Name:
		return []screening.Recipe{breakdownRecipe(p)}
	case screening.Temperature.Name:
		return []screening.Recipe{{
			Title:  "the part's temperature",
			Lines:  []string{"let the part lie for an hour where you measure, away from lamp, sun and soldering iron", "read a room thermometer beside it"},
			Source: book.Practice,
		}}
	}
	return nil
}

func house(document string) screening.Source {
	return screening.Source{Document: document, Status: screening.House}
}

// signs words the connections for a polarity.
func (p *promise) signs() (collector, base, emitter string) {
	if p.polarity == pnp {
		return "minus", "minus", "plus"
	}
	return "plus", "plus", "minus"
}

func vbeRecipe(p *promise) screening.Recipe {
	_, base, emitter := p.signs()
	return screening.Recipe{
		Title: "base-emitter voltage with a diode test",
		Lines: []string{
			fmt.Sprintf("red probe to the %s lead, black to the %s lead (red is plus on most testers; check on a known diode)",
				leadAt(base, "plus"), leadAt(emitter, "minus")),
			"read the volts; OL both ways round is an open junction, near 0 V both ways a short",
		},
		Source: book.Practice,
	}
}

// leadAt names base or emitter, whichever carries the sign.
func leadAt(sign, want string) string {
	switch {
	case want == "plus" && sign == "plus", want == "minus" && sign != "minus":
		return "base"
	}
	return "emitter"
}

// gainRecipe computes a two-resistor set-up for the limit's collector current: R_C drops what is left of the supply, R_B feeds the base
// current of a middling gain.
func gainRecipe(p *promise, l screening.Limit) screening.Recipe {
	ic, ok := l.At.Get(screening.IC)
	if !ok {
		ic = 1e-3
	}
	vce, ok := l.At.Get(screening.VCE)
	if !ok || vce < 1 {
		vce = 5
	}
	supply := battery
	if vce > battery-2 {
		supply = vce + 5
	}
	gain := middlingGain(p)
	vbe := (figures()[p.vbeFigure()].low + figures()[p.vbeFigure()].high) / 2
	rc, rb := (supply-vce)/ic, (supply-vbe)/(ic/gain)
	collector, _, emitter := p.signs()
	lines := []string{
		fmt.Sprintf("emitter to supply %s; collector through R_C = %s (%s) to supply %s, %s", emitter, ohms(rc),
			quantity.Format((supply-vce)*ic, quantity.Watt, 2), collector, volts(supply)),
		fmt.Sprintf("base through R_B ≈ %s to supply %s; change it until R_C carries %s, that is until the part shows %s", ohms(rb), collector,
			quantity.Format(ic, quantity.Ampere, 0), volts(vce)),
		"IB is the voltage across R_B over R_B; gain is IC over IB",
	}
	if p.material == germanium {
		lines = append(lines, "first read R_C's voltage with the base open: over R_C that is iceo at this VCE; both readings give the net gain")
	}
	return screening.Recipe{
		Title: "gain at " + quantity.Format(ic, quantity.Ampere, 0) + ", " + volts(vce), Lines: lines,
		Values: map[string]float64{
			"supply": supply, "collector-resistance": rc, "base-resistance": rb, "resistor-power": (supply - vce) * ic, "part-power": vce * ic,
		},
		Source: screening.Source{Document: "hFE = (V2 − V1)/R_C ÷ ((V_supply − VBE)/R_B), germanium gain method page", Status: screening.Published},
	}
}

// middlingGain is the geometric middle of the promised range, four times its minimum's where it has no maximum, 100 where none is claimed.
func middlingGain(p *promise) float64 {
	r, ok := p.claim.Rating(HFE.Name, "")
	switch {
	case !ok || r.Low <= 0 || !finite(r.Low):
		return 100
	case !finite(r.High):
		return 2 * r.Low
	}
	return math.Sqrt(r.Low * r.High)
}

// lampRecipe tests a power type at a current that means something: a lamp as collector load, about 1 mA or more of base current.
func lampRecipe(p *promise) screening.Recipe {
	current := lampWatts / lampVolts
	vbe := 0.7
	base := lampBase
	if p.darlington {
		vbe = 1.4
	} else if g := middlingGain(p); g > 0 {
		base = current / g
	}
	rb := (lampVolts - vbe) / base
	collector, _, emitter := p.signs()
	return screening.Recipe{
		Title: fmt.Sprintf("lamp test at about %s", quantity.Format(current, quantity.Ampere, 2)),
		Lines: []string{
			fmt.Sprintf("emitter to supply %s; collector through a %s %s lamp to supply %s, %s with a 1 A fuse", emitter, volts(lampVolts),
				quantity.Format(lampWatts, quantity.Watt, 0), collector, volts(lampVolts)),
			"base open: the lamp stays dark; glowing is a short or heavy leakage",
			fmt.Sprintf("base through R_B = %s (%s) to supply %s: the lamp lights. Read the volts collector to emitter and across R_B", ohms(rb),
				quantity.Format((lampVolts-vbe)*base, quantity.Watt, 2), collector),
			fmt.Sprintf("IC is about %s when the lamp is fully lit; IC over IB is the least the gain can be: enter it as hfe@ic=%s=%.0f..",
				quantity.Format(current, quantity.Ampere, 2), quantity.Format(current, quantity.Ampere, 2), math.Floor(current/base)),
			fmt.Sprintf("a part that stays half on turns up to %s into heat: a second or two only, or fix it to metal; the lamp gets hot too",
				quantity.Format(lampWatts/4, quantity.Watt, 2)),
		},
		Values: map[string]float64{
			"supply": lampVolts, "lamp-power": lampWatts, "collector-current": current, "base-current": base, "base-resistance": rb,
			"resistor-power": (lampVolts - vbe) * base, "part-power": lampWatts / 4,
		},
		Source: house("lamp test; the base current lies above the turn-on current VBE/R of a power Darlington's resistors"),
	}
}

func leakageRecipe(p *promise, l screening.Limit) screening.Recipe {
	v, _ := l.At.Get(screening.VCE)
	collector, _, emitter := p.signs()
	r := leakResists
	if l.High*r > v/4 {
		r = v / 4 / l.High
	}
	return screening.Recipe{
		Title: "open-base leakage at " + volts(v),
		Lines: []string{
			fmt.Sprintf("base open and not touched; emitter to supply %s, collector through %s to supply %s, %s (less will do; state it)",
				emitter, ohms(r), collector, volts(v)),
			fmt.Sprintf("read the volts across the resistor: the limit of %s is %s", quantity.Format(l.High, quantity.Ampere, 3), volts(l.High*r)),
			"wait until it is steady; keep light, breath and fingers away",
		},
		Values: map[string]float64{"supply": v, "series-resistance": r, "resistor-power": v * v / r, "limit-voltage": l.High * r},
		Source: book.Practice,
	}
}

func collectorRecipe(p *promise, l screening.Limit) screening.Recipe {
	v, _ := l.At.Get(screening.VCB)
	collector, _, emitter := p.signs()
	r := 1e6
	if l.High*r > v/4 {
		r = v / 4 / l.High
	}
	return screening.Recipe{
		Title: "collector-base leakage at " + volts(v),
		Lines: []string{
			fmt.Sprintf("emitter open; base to supply %s, collector through %s to supply %s, %s", emitter, ohms(r), collector, volts(v)),
			fmt.Sprintf("read the volts across the resistor with a 10 MΩ meter: the limit of %s is %s; mind the meter's own current",
				quantity.Format(l.High, quantity.Ampere, 3), volts(l.High*r)),
		},
		Values: map[string]float64{"supply": v, "series-resistance": r, "resistor-power": v * v / r, "limit-voltage": l.High * r},
		Source: book.Practice,
	}
}

func breakdownRecipe(p *promise) screening.Recipe {
	v := p.vceo
	collector, _, emitter := p.signs()
	r := v / 1e-3
	return screening.Recipe{
		Title: "blocking, as far as your supply goes",
		Lines: []string{
			fmt.Sprintf("base open; emitter to supply %s, collector through %s to supply %s", emitter, ohms(r), collector),
			fmt.Sprintf("raise the supply slowly, never above %s; if the volts across the part follow all the way, enter vbr=V.. with the last value", volts(v)),
			"if they stop rising, that is the breakdown: enter it and turn the supply down at once",
		},
		Values: map[string]float64{"supply": v, "series-resistance": r, "resistor-power": v * 1e-3},
		Source: house("bench practice; the current is limited to 1 mA"),
	}
}

func volts(x float64) string { return quantity.Format(x, quantity.Volt, 2) }
func ohms(x float64) string  { return quantity.Format(x, quantity.Ohm, 2) }
