package electrolytic

import (
	_ "embed"
	"fmt"
	"math"
	"slices"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// lossFrequency is where tan δ and ESR limits hold in most data sheets, Hz; European ones state 100 Hz.
const lossFrequency = 120

//go:embed tan_delta.csv
var tanDeltaCSV string

// ladderVolts are the rated voltages at which tan δ is printed.
var ladderVolts = []float64{6.3, 10, 16, 25, 35, 40, 50, 63, 100, 160, 200, 250, 315, 350, 400, 450}

// lossRow is one series' ladder of tan δ by rated voltage.
type lossRow struct {
	set       screening.LimitSet // "" for a ladder that only counts for the laxest
	group     string             // radial, smd, snap-in, screw, non-polar
	frequency float64            // Hz
	perStep   float64            // added per 1000 µF above 1000 µF
	ladder    []float64          // as ladderVolts; NaN where nothing is printed
	source    screening.Source
	worn      screening.Source // of the serviceable limit: the endurance rule on this ladder
}

func readLoss(text string, endurance screening.Source) ([]lossRow, error) {
	t := book.ReadTable("tan_delta.csv", text)
	rows := make([]lossRow, 0, len(t.Rows()))
	for _, row := range t.Rows() {
		r := lossRow{
			set: screening.LimitSet(row.Text("set")), group: row.Required("group"), frequency: row.Number("frequency_hz"),
			perStep: row.Number("per_1000uf"), ladder: make([]float64, len(ladderVolts)), source: row.Source(),
		}
		r.worn = screening.Source{
			Document: r.source.Document, Clause: r.source.Clause + ", and " + endurance.Clause + " (" + endurance.Document + ")", Status: r.source.Status,
		}
		if r.source.Status == screening.Published {
			r.worn.Status = endurance.Status
		}
		for i, v := range ladderVolts {
			column := fmt.Sprintf("%g", v)
			r.ladder[i] = row.NumberOr(column, math.NaN())
			if r.ladder[i] <= 0 || r.ladder[i] > 1 {
				row.Errorf(column, "a tan δ lies between 0 and 1")
			}
		}
		switch r.group {
		case "radial", "smd", "snap-in", caseScrew, techNonPolar:
		default:
			row.Errorf("group", "%q is none of radial, smd, snap-in, screw, non-polar", r.group)
		}
		rows = append(rows, r)
	}
	return rows, t.Err()
}

// step is tan δ's base value for a rated voltage and how it was found.
type step struct {
	tanDelta float64
	volts    float64 // the printed voltage whose figure is taken
	between  bool    // the rated voltage lies between two that are printed: volts is the laxer neighbour
	beyond   bool    // it lies outside the ladder: the figure is carried over from its end, not printed
}

// words say where the figure stands: "at 35 V", "at 35 V, the laxer neighbour of 40 V".
func (s step) words(rated float64) string {
	switch {
	case s.between:
		return fmt.Sprintf("at %g V, the laxer neighbour of %g V", s.volts, rated)
	case s.beyond:
		return fmt.Sprintf("at %g V, the end of the ladder, for %g V", s.volts, rated)
	}
	return fmt.Sprintf("at %g V", s.volts)
}

// at returns the base value for a rated voltage. Between two printed voltages the laxer neighbour counts; outside the ladder its end. It
// reports false for a ladder that prints neither.
func (r *lossRow) at(volts float64) (step, bool) {
	below, above := -1, -1
	for i, v := range ladderVolts {
		if math.IsNaN(r.ladder[i]) {
			continue
		}
		if math.Abs(v-volts) < 0.01*v {
			return step{tanDelta: r.ladder[i], volts: v}, true
		}
		if v < volts {
			below = i
		} else if above < 0 {
			above = i
		}
	}
	switch {
	case below >= 0 && above >= 0:
		if r.ladder[above] > r.ladder[below] {
			below = above
		}
		return step{tanDelta: r.ladder[below], volts: ladderVolts[below], between: true}, true
	case below >= 0 || above >= 0:
		end := max(below, above)
		return step{tanDelta: r.ladder[end], volts: ladderVolts[end], beyond: true}, true
	}
	return step{}, false
}

// wholeSteps is how many whole 1000 µF a capacitance in farad lies above 1000 µF: the reading of "add 0.02 for every 1000 µF" that most
// series' printed values follow.
func wholeSteps(farad float64) float64 { return math.Max(0, math.Floor(farad/1e-3*(1+1e-9))-1) }

// linearSteps is the same, continuous, as some series have it.
func linearSteps(farad float64) float64 { return math.Max(0, farad/1e-3-1) }

// lenientSteps is the larger of the two, for a part of unknown series.
func lenientSteps(farad float64) float64 { return math.Max(wholeSteps(farad), linearSteps(farad)) }

// esrOf returns ESR = tan δ/(2π·f·C) in ohm, tan δ and C at the same frequency.
func esrOf(tanDelta, hertz, farad float64) float64 { return tanDelta / (2 * math.Pi * hertz * farad) }

// counts reports whether a ladder's group belongs to a claim's case.
func (r *lossRow) counts(claim screening.Claim) bool {
	switch r.group {
	case "snap-in":
		return largeCan(claim)
	case caseSMD, caseScrew:
		return claim.Trait(screening.TraitCase) == r.group
	case techNonPolar:
		return nonPolar(claim)
	}
	return true
}

// laxestTanDelta returns the largest tan δ that any published series of this case allows at a unit's voltage and capacitance.
func laxestTanDelta(claim screening.Claim, u unit) float64 {
	laxest := 0.0
	rows := embedded().loss
	for i := range rows {
		r := &rows[i]
		if !r.counts(claim) {
			continue
		}
		if s, ok := r.at(u.volts); ok && !s.beyond {
			laxest = math.Max(laxest, s.tanDelta+r.perStep*lenientSteps(u.farad))
		}
	}
	return laxest
}

// lossSetFor returns the ladder that counts for a claim.
func lossSetFor(claim screening.Claim) screening.LimitSet {
	switch {
	case nonPolar(claim):
		return nonPolarSet
	case largeCan(claim):
		return screening.SnapInSet
	}
	return screening.GeneralSet
}

// lossLimits lists tan δ and ESR limits of every ladder that is a limit set, at both grades. Where a set has several ladders, the first that
// prints the voltage counts.
func lossLimits(limits []screening.Limit, claim screening.Claim, u *unit) []screening.Limit {
	inUse := lossSetFor(claim)
	rows := embedded().loss
	done := make([]screening.LimitSet, 0, 4)
	for _, edges := range []bool{false, true} {
		for i := range rows {
			r := &rows[i]
			if r.set == "" || slices.Contains(done, r.set) || (r.group == caseScrew || r.group == techNonPolar) && !r.counts(claim) {
				continue
			}
			s, ok := r.at(u.volts)
			if !ok || s.beyond && !edges {
				continue
			}
			done = append(done, r.set)
			limits = r.limits(limits, u, s, r.set == inUse)
		}
	}
	return limits
}

// limits adds the four limits of one ladder: ESR and tan δ, as for a new part and serviceable.
func (r *lossRow) limits(limits []screening.Limit, u *unit, s step, inUse bool) []screening.Limit {
	adder := r.perStep * lenientSteps(u.farad)
	tan := s.tanDelta + adder
	source, wornSource := r.source, r.worn
	if s.beyond {
		source.Status, wornSource.Status = screening.Derived, screening.Derived
	}
	worn := named("serviceable-loss").value
	base := screening.Limit{
		Section: u.section, Criterion: criterionLoss, At: screening.At(screening.Frequency, r.frequency), Low: math.Inf(-1),
		Set: r.set, InUse: inUse, Grade: screening.WithinSpec, Source: source,
	}
	render := func(grade screening.Grade, ohms bool) func() string {
		return func() string { return r.formula(u, grade, ohms) }
	}
	for _, on := range []screening.Definition{screening.ESR, screening.TanDelta} {
		l := base
		l.On, l.Unit, l.High = on.Name, on.Unit, tan
		ohms := on.Name == screening.ESR.Name
		if ohms {
			l.High = esrOf(tan, r.frequency, u.farad)
		}
		l.Formula = render(screening.WithinSpec, ohms)
		worse := l
		worse.Grade, worse.Soft, worse.Source, worse.High = screening.Serviceable, true, wornSource, worn*l.High
		worse.Formula = render(screening.Serviceable, ohms)
		limits = append(limits, l, worse)
	}
	return limits
}

// formula renders "tan δ 0.14 at 35 V + 0.024 above 1000 µF = 0.164; /(2π·120 Hz·2200 µF) = 98.9 mΩ".
func (r *lossRow) formula(u *unit, grade screening.Grade, ohms bool) string {
	s, _ := r.at(u.volts)
	tan, adder := s.tanDelta, r.perStep*lenientSteps(u.farad)
	text := fmt.Sprintf("tan δ %.3g %s", tan, s.words(u.volts))
	if adder > 0 {
		tan += adder
		text += fmt.Sprintf(" + %.3g above 1000 µF = %.3g", adder, tan)
	}
	if ohms {
		text += fmt.Sprintf("; /(2π·%g Hz·%s) = %s", r.frequency, microfarads(u.farad),
			quantity.Format(esrOf(tan, r.frequency, u.farad), quantity.Ohm, 3))
	}
	if grade == screening.Serviceable {
		worn := named("serviceable-loss").value
		text += fmt.Sprintf("; ×%g = ", worn)
		if ohms {
			text += quantity.Format(worn*esrOf(tan, r.frequency, u.farad), quantity.Ohm, 3)
		} else {
			text += fmt.Sprintf("%.3g", worn*tan)
		}
	}
	return text
}
