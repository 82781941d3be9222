package bipolar

import (
	"fmt"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/junction"
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
			Set: screening.GeneralSet, InUse: true, Source: junction.DoublingSource,
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
	rule.At = p.atVoltage(rule.At).With(screening.PartTemperature, junction.Reference)
	first := len(all)
	all = append(all, rule)
	for i := range p.row.Points {
		point := &p.row.Points[i]
		if point.Of != ICEO.Name {
			continue
		}
		l := limitOf(&ICEO, CriterionLeakage, point)
		l.At = l.At.With(screening.PartTemperature, junction.Reference)
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
	reject.At = p.atVoltage(reject.At).With(screening.PartTemperature, junction.Reference)
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
	l.Source = weakened(book.SourceOf(&icbo))
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
	l.At = where.With(screening.PartTemperature, junction.Reference)
	if reverseBiased {
		l.Note = "the sheet states it as ICEX, with the base reverse-biased: the same junction's leakage in another set-up"
		l.Source = weakened(l.Source)
	}
	return l
}

// convert brings a leakage to the limit's voltage and to 25 °C by the law of package junction. A germanium part must be seen cool: what leaks
// much of its limit while warm is not passed on a reading taken warm.
func convert(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	if l.On != ICEO.Name && l.On != ICBO.Name {
		return screening.Conversion{}
	}
	across := screening.VCE
	if l.On == ICBO.Name {
		across = screening.VCB
	}
	ge := part.Claim.Trait(screening.TraitMaterial) == germanium
	want, _ := l.At.Get(across)
	return junction.Bring(part, r, l, junction.Rule{
		Across: across, Same: leakageFit[across], AnyVoltage: atAnyVoltage(l), LeastVoltage: want * leakageFit[across].Low,
		NeedTemperature: ge, SeenCool: ge,
	})
}

// atAnyVoltage reports whether a limit is a trade rule that names no voltage; the one it is stated at is then only what to aim for.
func atAnyVoltage(l screening.Limit) bool {
	f := figures()
	return l.Source == f["iceo-silicon"].source || l.Source == f["iceo-germanium"].source || l.Source == f["iceo-germanium-new"].source
}
