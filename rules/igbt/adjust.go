package igbt

import (
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/semi"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const chargedGate = "it conducts, and it is not said that the gate was tied to the emitter: a charged gate holds a sound part on. Tie them, read " +
	"again, and type vbr@vge=0V=…"

// adjust applies the rules that look across readings.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var say semi.Say
	o := off(part.Claim)
	for i := range findings {
		f := &findings[i]
		o.Tidy(f)
		failed := f.Outcome == screening.Fail
		switch {
		case f.Limit.On == screening.VBR.Name && (failed || f.Unconfirmed) && !tied(f.Reading):
			semi.Unanswer(f, chargedGate)
		case f.Limit.Criterion == reverse && failed && f.Side == screening.Below && f.Reading.Value < 0.25 && !tied(f.Reading):
			semi.Unanswer(f, "it reads shorted, and it is not said that the gate was tied to the emitter: tie them, and type vf@vge=0V=…")
		case f.Limit.Criterion == reverse && failed && part.Claim.Trait(TraitDiode) == noDiode && !f.Reading.Over:
			semi.Unanswer(f, "emitter to collector it conducts as a co-packed diode does: if its sheet shows one, say diode=co-packed; else it is damaged")
		case failed && (f.Limit.Criterion == gateInsulates || f.Limit.Criterion == turnsOn):
			say.Note(f.Limit.On, semi.SuspectStatic)
		}
	}
	semi.AsNew(findings, turnsOn, threshold)
	return findings, say.Reasons
}

func tied(r *screening.Reading) bool {
	if r == nil {
		return true
	}
	v, ok := r.At.Get(screening.VGE)
	return ok && v == 0
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
	switch l.On {
	case RGE.Name:
		return []screening.Recipe{semi.GateOpenRecipe(RGE, "emitter")}
	case screening.VBR.Name, ICES.Name:
		return off(part.Claim).Recipes(l, "collector", "emitter")
	case screening.VF.Name:
		return []screening.Recipe{{
			Title:  "emitter to collector, with a diode test",
			Lines:  []string{"gate tied to emitter; red probe on the emitter, black on the collector: OL, or a diode's drop where one is packed with it"},
			Values: map[string]float64{}, Source: book.Practice,
		}}
	case VCEOn.Name:
		return []screening.Recipe{lampRecipe(l)}
	case VGETh.Name:
		return []screening.Recipe{thresholdRecipe(l)}
	case IGES.Name:
		v, _ := l.At.Get(screening.VGE)
		return []screening.Recipe{semi.GateRecipe(v, l.High, true, "emitter, which is tied to the collector")}
	}
	return nil
}

// lampRecipe turns it on with the supply itself and a lamp as load.
func lampRecipe(l screening.Limit) screening.Recipe {
	amps, limit := lampWatts/supply, ""
	if !math.IsInf(l.High, 1) {
		limit = ": the limit is " + quantity.Format(l.High, quantity.Volt, 2)
	}
	return screening.Recipe{
		Title: "on with a lamp",
		Lines: []string{
			"emitter to minus of " + semi.Volts(supply) + " with a 1 A fuse, collector through a " + semi.Volts(supply) + " " + semi.Watts(lampWatts) + " lamp to plus",
			"100 kΩ from gate to emitter: the lamp is dark. 10 kΩ from gate to plus instead: it lights",
			"volts from collector to emitter, 0.7 to 1.5 V is usual" + limit + ". Type vce-on@ic=" +
				semi.Typed(semi.Honest2(amps), quantity.Ampere) + ",vge=" + semi.Typed(supply, quantity.Volt) + "=…",
			"half on it takes up to " + semi.Watts(lampWatts/4) + ": a second or two; the lamp gets hot",
		},
		Values: map[string]float64{"supply": supply, "lamp-power": lampWatts, "collector-current": amps, "part-power": lampWatts / 4},
		Source: book.Practice,
	}
}

func thresholdRecipe(l screening.Limit) screening.Recipe {
	amps, _ := l.At.Get(screening.IC)
	ohms := (supply - semi.Middle(l)) / amps
	return screening.Recipe{
		Title: "threshold, collector tied to gate",
		Lines: []string{
			"collector tied to gate; " + semi.Volts(supply) + ", its plus through " + semi.Ohms(ohms) + " (" + semi.Watts(supply*supply/ohms) +
				" at most) to them, its minus to the emitter",
			"read volts from gate to emitter and across the resistor; the current is that over " + semi.Ohms(ohms) + ". Type vge-th@ic=" +
				semi.Typed(amps, quantity.Ampere) + "=…",
		},
		Values: map[string]float64{"supply": supply, "series-resistance": ohms, "resistor-power": supply * supply / ohms, "collector-current": amps},
		Source: book.Practice,
	}
}
