package bipolar

import (
	_ "embed"
	"math"
	"sync"

	"goodbin/rules/internal/book"
	"goodbin/screening"
)

//go:embed limits.csv
var limitsCSV string

// figure is one row of limits.csv.
type figure struct {
	low, high float64
	at        screening.Condition
	source    screening.Source
}

func readFigures(text string) (map[string]figure, error) {
	t := book.ReadTable("limits.csv", text)
	figures := make(map[string]figure, len(t.Rows()))
	for _, row := range t.Rows() {
		f := figure{low: row.NumberOr("low", -inf), high: row.NumberOr("high", inf), source: row.Source()}
		f.at = f.at.With(screening.VCE, row.NumberOr("vce", nan)).With(screening.IC, row.NumberOr("ic", nan))
		if f.low >= f.high {
			row.Errorf("high", "is not above low")
		}
		figures[row.Required("name")] = f
	}
	return figures, t.Err()
}

// figures reads the embedded table once; a test holds it to load and to hold every name used.
var figures = sync.OnceValue(func() map[string]figure {
	f, err := readFigures(limitsCSV)
	if err != nil {
		panic("bipolar: embedded table: " + err.Error())
	}
	return f
})

// limit makes a limit of a named figure.
func limit(on *screening.Definition, criterion screening.Criterion, name string) screening.Limit {
	f := figures()[name]
	return screening.Limit{
		On: on.Name, Unit: on.Unit, Criterion: criterion, At: f.at, Low: f.low, High: f.high,
		Set: screening.GeneralSet, InUse: true, Source: f.source,
	}
}

// limitOf makes a limit of what a sheet prints.
func limitOf(on *screening.Definition, criterion screening.Criterion, r *screening.Rating) screening.Limit {
	return screening.Limit{
		On: on.Name, Unit: on.Unit, Criterion: criterion, At: r.At, Low: r.Low, High: r.High,
		Set: screening.GeneralSet, InUse: true, Source: book.SourceOf(r),
	}
}

// mustBeClaimed makes a criterion that only a claim answers.
func mustBeClaimed(of *screening.Definition, criterion screening.Criterion, grade screening.Grade, why string) screening.Limit {
	return screening.Limit{
		On: of.Name, Unit: of.Unit, Criterion: criterion, Low: -inf, High: inf, Evidence: screening.ByRating, Grade: grade,
		Set: screening.GeneralSet, InUse: true, Source: screening.Source{Document: "house rule", Status: screening.House}, Note: why,
	}
}

// fewestLimits is how many limits most transistors have; each further gain of their sheet adds two.
const fewestLimits = 10

// limits lists what a transistor of this claim must meet.
func (b rulebook) limits(c screening.Claim) ([]screening.Limit, error) {
	p := b.promiseOf(c)
	all := p.polarityLimits(make([]screening.Limit, 0, fewestLimits+2*len(p.row.Points)))
	if p.material == "" {
		material := book.Trait(screening.TraitMaterial, materialLabel)
		return append(all, mustBeClaimed(&material, CriterionMaterial, screening.AnyGrade,
			"every limit of a transistor depends on what it is made of, and a type number that is in no table does not say")), nil
	}
	all = p.vbeLimits(all)
	all = p.gainLimits(all)
	all = p.leakageLimits(all)
	return p.breakdownLimits(all), nil
}

// polarityLimits ask that the part conducts or amplifies the way round that its polarity says.
func (p *promise) polarityLimits(all []screening.Limit) []screening.Limit {
	if p.polarity == "" {
		polarity := book.Trait(screening.TraitPolarity, polarityLabel)
		return append(all, mustBeClaimed(&polarity, CriterionPolarity, screening.AnyGrade,
			"the readings prove a polarity only where one is claimed"))
	}
	byVBE := limit(&VBE, CriterionPolarity, "conducts-vbe")
	byGain := limit(&HFE, CriterionPolarity, "conducts-gain")
	byVBE.Note = "taken as " + p.polarity
	byGain.Note = byVBE.Note
	return append(all, byVBE, byGain)
}

// vbeLimits ask for the forward voltage of the material, once for a single junction and twice for a Darlington, at a tester's current; and
// for what the sheet prints at its own. A sheet figure inside the reach of a tester's current is what is asked of a new part; at high
// currents it stands alone.
func (p *promise) vbeLimits(all []screening.Limit) []screening.Limit {
	band := limit(&VBE, CriterionVBE, p.vbeFigure())
	all = append(all, band)
	testers, _ := band.At.Get(screening.IC)
	for i := range p.row.Points {
		point := &p.row.Points[i]
		if point.Of != VBE.Name {
			continue
		}
		l := limitOf(&VBE, CriterionVBE, point)
		if ic, _ := point.At.Get(screening.IC); ic <= testers*vbeFit[screening.IC].High {
			l.Grade = screening.WithinSpec
		}
		all = append(all, l)
	}
	return all
}

func (p *promise) vbeFigure() string {
	switch {
	case p.material == germanium:
		return "vbe-germanium"
	case p.powerDarlington():
		return "vbe-darlington-power"
	case p.darlington:
		return "vbe-darlington"
	case p.icMax >= powerCurrent:
		return "vbe-silicon-power"
	}
	return "vbe-silicon"
}

// breakdownLimits ask that a measured breakdown does not lie below the rated voltage. Above it is normal and no new rating.
func (p *promise) breakdownLimits(all []screening.Limit) []screening.Limit {
	r, ok := p.claim.Rating(VCEO.Name, "")
	if !ok {
		return all
	}
	l := limitOf(&screening.VBR, CriterionBreakdown, &r)
	l.At, l.High, l.Need = screening.Condition{}, inf, screening.Wanted
	l.Note = "collector to emitter, base open; a breakdown above the rating is normal and no new rating"
	return append(all, l)
}

// atVoltage returns the limit's condition with another collector voltage: never above the rated one.
func (p *promise) atVoltage(at screening.Condition) screening.Condition {
	if v, ok := at.Get(screening.VCE); ok && v > p.vceo {
		return at.With(screening.VCE, p.vceo)
	}
	return at
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }
