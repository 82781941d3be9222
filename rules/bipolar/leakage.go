package bipolar

import (
	"fmt"
	"math"

	"goodbin/screening"
	"goodbin/screening/quantity"
)

// leakageLimits ask how much may leak from collector to emitter with the base open, and from collector to base with the emitter open.
func (p *promise) leakageLimits(all []screening.Limit) []screening.Limit {
	from := len(all)
	if p.material != germanium {
		all = p.openBase(all)
	} else {
		all = append(p.openBaseGermanium(all), screening.Limit{
			On: screening.Temperature.Name, Unit: screening.Temperature.Unit, Criterion: CriterionTemperature, Low: -inf, High: inf,
			Set: screening.GeneralSet, InUse: true, Source: doubling,
			Note: "whatever it is, it must be stated: germanium leakage doubles about every 10 K",
		})
	}
	return p.openEmitter(all, all[from])
}

// openBase lists the limits on the ICEO of silicon; the first is the required one of the lowest grade.
func (p *promise) openBase(all []screening.Limit) []screening.Limit {
	rule := limit(&ICEO, CriterionLeakage, "iceo-silicon")
	if p.highPower() {
		rule = limit(&ICEO, CriterionLeakage, "iceo-silicon-power")
	}
	rule.At = p.atVoltage(rule.At).With(screening.PartTemperature, cool)
	first := len(all)
	all = append(all, rule)
	for i := range p.row.Points {
		point := &p.row.Points[i]
		if point.Of != ICEO.Name {
			continue
		}
		l := limitOf(&ICEO, CriterionLeakage, point)
		l.At = l.At.With(screening.PartTemperature, cool)
		if p.highPower() && point.Source.Status.MayReject() {
			all[first] = l
			continue
		}
		l.Grade = screening.WithinSpec
		all = append(all, l)
	}
	return all
}

// openBaseGermanium holds a small germanium part to what builders take; a power type to its own (1 + hFE)·ICBO.
func (p *promise) openBaseGermanium(all []screening.Limit) []screening.Limit {
	reject := limit(&ICEO, CriterionLeakage, "iceo-germanium")
	reject.Grade = screening.Serviceable
	reject.At = p.atVoltage(reject.At).With(screening.PartTemperature, cool)
	icbo, ok1 := p.claim.Rating(ICBO.Name, "")
	gain, ok2 := p.claim.Rating(HFE.Name, "")
	if !p.highPower() || !ok1 || !ok2 || !finite(gain.Low) {
		suspicious := limit(&ICEO, CriterionLeakage, "iceo-germanium-new")
		suspicious.Grade, suspicious.At = screening.WithinSpec, reject.At
		return append(all, reject, suspicious)
	}
	l := reject
	l.Grade = screening.AnyGrade
	l.High = ICEOFrom(icbo.High, gain.Low)
	l.Source = weakened(sourceOf(&icbo))
	l.Formula = func() string {
		return fmt.Sprintf("(1 + %s)·%s = %s", quantity.Format(gain.Low, quantity.One, 0), quantity.Format(icbo.High, quantity.Ampere, 0),
			quantity.Format(l.High, quantity.Ampere, 3))
	}
	return append(all, l)
}

// weakened is the source of a figure computed from another, which is no better known for it.
func weakened(s screening.Source) screening.Source {
	if s.Status != screening.FromMemory {
		s.Status = screening.Derived
	}
	return s
}

// ICEOFrom returns the open-base leakage ICEO = (1 + β)·ICBO, amperes (identity of the junction transistor, published in textbooks).
func ICEOFrom(icbo, beta float64) float64 { return (1 + beta) * icbo }

// CollectorCurrent returns IC = β·IB + (1 + β)·ICBO, amperes.
func CollectorCurrent(beta, ib, icbo float64) float64 { return beta*ib + ICEOFrom(icbo, beta) }

// openEmitter lists the limits on ICBO: the sheet's own of a new part; of a serviceable one what is required of ICEO, because ICBO is
// never more than ICEO.
func (p *promise) openEmitter(all []screening.Limit, required screening.Limit) []screening.Limit {
	if r, ok := p.claim.Rating(ICBO.Name, ""); ok {
		all = append(all, p.sheetICBO(&r, r.At, p.row.LeakageAs == asICEX))
	}
	for i := range p.row.Points {
		if point := &p.row.Points[i]; point.Of == asICEX {
			v, _ := point.At.Get(screening.VCE)
			all = append(all, p.sheetICBO(point, screening.At(screening.VCB, v), true))
		}
	}
	v, _ := required.At.Get(screening.VCE)
	required.On, required.Criterion, required.Need = ICBO.Name, CriterionCollectorLeakage, screening.Wanted
	required.Grade, required.Formula = screening.Serviceable, nil
	required.Note = "ICBO is never more than ICEO, so what is required of ICEO is required of it"
	required.At = required.At.Without(screening.VCE).With(screening.VCB, v)
	return append(all, required)
}

// asICEX is how some sheets state the collector's cut-off current: with the base reverse-biased.
const asICEX = "icex"

func (p *promise) sheetICBO(r *screening.Rating, where screening.Condition, reverseBiased bool) screening.Limit {
	l := limitOf(&ICBO, CriterionCollectorLeakage, r)
	l.Need, l.Grade = screening.Wanted, screening.WithinSpec
	l.At = where.With(screening.PartTemperature, cool)
	if reverseBiased {
		l.Note = "the sheet states it as ICEX, with the base reverse-biased: the same junction's leakage in another set-up"
		l.Source = weakened(l.Source)
	}
	return l
}

// The temperature law of leakage. Doubling each 10 K is published for silicon and germanium; that germanium lies between 8 and 11 K is
// from memory. Limit pairs of data sheets imply anything from 7.5 to 54 K, because hot limits are guard values: they are no law.
const doublingKelvin, quickestDoubling, slowestDoubling = 10.0, 8.0, 11.0

var doubling = screening.Source{
	Document: "textbooks: cut-off current doubles each 10 K; 8 to 11 K as its range is from memory", Status: screening.Published,
}

// ScaleLeakage returns the leakage i, amperes, brought from one temperature to another, °C, when it doubles every perOctave kelvin.
func ScaleLeakage(i, from, to, perOctave float64) float64 { return i * math.Exp2((to-from)/perOctave) }

// Scaling holds within 25 K of the reference, and a part above 30 °C is hot: warmer than a room (house).
const scalingReach, hotAbove = 25.0, 30.0

// convert brings a leakage to the limit's voltage and to 25 °C. A higher voltage than the limit's only clears it and a lower one only
// refutes it, except of rules that hold at whatever voltage was stated. A reading taken hot, scaled down, can refute but never prove.
func convert(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	if l.On != ICEO.Name && l.On != ICBO.Name {
		return screening.Conversion{}
	}
	c := screening.Conversion{OK: true, Reading: r, Source: doubling}
	c.Reading.At = l.At
	material := part.Claim.Trait(screening.TraitMaterial)
	if why := toVoltage(&c, r, l); why != "" {
		return screening.Conversion{Why: why}
	}
	if why := toTemperature(&c, part, r, l, material); why != "" {
		return screening.Conversion{Why: why}
	}
	c.Reading.Rule = c.Rule
	return c
}

func toVoltage(c *screening.Conversion, r screening.Reading, l screening.Limit) (why string) {
	across := screening.VCE
	if l.On == ICBO.Name {
		across = screening.VCB
	}
	want, _ := l.At.Get(across)
	got, stated := r.At.Get(across)
	span := leakageFit[across]
	switch {
	case !stated:
		return fmt.Sprintf("the voltage of the reading is not stated: %s@%s=…", l.On, quantity.Format(want, quantity.Volt, 0))
	case got >= want*span.Low && got <= want*span.High:
		return ""
	case got > want && atAnyVoltage(l):
		c.Rule = "the limit holds at whatever voltage is stated"
		return ""
	case got > want && r.Sense != quantity.AtLeast:
		c.Reading.Sense = quantity.AtMost
		c.Rule = "at a lower voltage it leaks no more than at " + quantity.Format(got, quantity.Volt, 0)
		return ""
	case got < want && r.Sense != quantity.AtMost:
		c.Reading.Sense = quantity.AtLeast
		c.Rule = "at a higher voltage it leaks no less than at " + quantity.Format(got, quantity.Volt, 0)
		return ""
	}
	return fmt.Sprintf("taken at %s, which says nothing about %s", quantity.Format(got, quantity.Volt, 0), quantity.Format(want, quantity.Volt, 0))
}

// atAnyVoltage reports whether a limit is a trade rule that names no voltage; the one it is stated at is then only what to aim for.
func atAnyVoltage(l screening.Limit) bool {
	f := figures()
	return l.Source == f["iceo-silicon"].source || l.Source == f["iceo-germanium"].source || l.Source == f["iceo-germanium-new"].source
}

const stateTemperature = "germanium leakage doubles about every 10 K: let the part lie an hour indoors, do not touch it, and state its temperature"

func toTemperature(c *screening.Conversion, part screening.Part, r screening.Reading, l screening.Limit, material string) (why string) {
	t, stated := r.At.Get(screening.PartTemperature)
	switch {
	case !stated && material == germanium:
		return stateTemperature
	case !stated:
		c.Rule = join(c.Rule, "no temperature stated: taken as a room's")
		return ""
	case math.Abs(t-cool) > scalingReach:
		return fmt.Sprintf("taken at %.0f °C: leakage is brought to 25 °C only from within 25 K; measure between 0 and 50 °C", t)
	case math.Abs(t-cool) <= 0.5:
		return ""
	case t > hotAbove && material != germanium && r.Sense != quantity.AtLeast && r.Value+2*r.U <= l.High:
		// It clears the limit without any help from the law, and cooler it leaks less. Not for germanium: what leaks that much of its
		// limit while warm must be seen cool.
		c.Reading.Sense = quantity.AtMost
		c.Rule = join(c.Rule, fmt.Sprintf("at 25 °C it leaks less than at %.0f °C", t))
		return ""
	}
	factor := ScaleLeakage(1, t, cool, doublingKelvin)
	a, b := ScaleLeakage(1, t, cool, quickestDoubling), ScaleLeakage(1, t, cool, slowestDoubling)
	law := r.Value * math.Abs(a-b) / 2 / math.Sqrt(3)
	thermometer := r.Value * factor * math.Ln2 / doublingKelvin * temperatureUncertainty(part)
	c.U = math.Hypot(law, thermometer)
	c.Reading.Value = r.Value * factor
	c.Reading.U = math.Hypot(r.U*factor, c.U)
	c.NeverPasses = t > hotAbove
	c.Rule = join(c.Rule, fmt.Sprintf("×%.2f from %.0f °C to 25 °C (2 per 10 K; %.2f to %.2f for 8 to 11 K)",
		factor, t, math.Min(a, b), math.Max(a, b)))
	if c.NeverPasses {
		c.Rule += "; let it cool to the room and measure again"
	}
	return ""
}

func join(a, b string) string {
	if a == "" {
		return b
	}
	return a + "; " + b
}

// temperatureUncertainty returns the standard uncertainty of the part's temperature, kelvin: the ambient reading's, else that of the
// assumed thermometer.
func temperatureUncertainty(part screening.Part) float64 {
	if t, ok := part.Ambient(); ok && t.U > 0 {
		return t.U
	}
	m := screening.AssumedMeter()
	return m.Uncertainty(screening.Reading{Of: screening.Temperature.Name, Unit: screening.Temperature.Unit})
}
