package film

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// capacitanceAt is where film's capacitance is stated, Hz.
const capacitanceAt = 1e3

// wornLoss is how many times a new part's tan δ is serviceable: the house's, as makers allow electrolytics; film makers print only a rise of
// 0.001 in damp heat (published), which counts where it is more.
const wornLoss, dampRise = 2.0, 0.001

// floor is the least insulation of any film (house): a coupling capacitor of 100 MΩ is the least that repairers accept (second-hand).
var floor = capacitor.Insulation{
	Ohms: 100e6, Seconds: 33,
	Source: screening.Source{Document: "the program's rule: no sound film insulates less; repairers ask 100 MΩ of a coupling capacitor (second-hand)", Status: screening.House},
}

// testVolts is the voltage of the insulation test.
func testVolts(u capacitor.Unit) float64 { return capacitor.TestVolts(u.Volts) }

func limits(claim screening.Claim) ([]screening.Limit, error) {
	us, err := capacitor.Units(claim, span)
	if err != nil {
		return nil, err
	}
	d, _ := dielectricOf(claim)
	var all []screening.Limit
	for _, u := range us {
		at := screening.At(screening.Frequency, capacitanceAt)
		worn := capacitor.ServiceableCapacitance(u, at, d.allowance)
		all = append(all, capacitor.CapacitanceLimit(u, at), worn)
		all = append(all, capacitor.Floor(worn)...)
		all = append(all, loss(d, u)...)
		all = append(all, insulation(d, u)...)
	}
	return all, nil
}

func loss(d dielectric, u capacitor.Unit) []screening.Limit {
	var all []screening.Limit
	micro := u.Farad * 1e6
	for _, r := range load().loss {
		if r.film != d.word || micro <= r.over || micro > r.to {
			continue
		}
		fresh := capacitor.LossLimit(u, r.hertz, r.tan, screening.WithinSpec, "", r.source)
		fresh.Set, fresh.InUse = r.set, r.set == screening.GeneralSet
		all = append(all, fresh)
		if !fresh.InUse {
			continue
		}
		most := math.Max(wornLoss*r.tan, r.tan+dampRise)
		source := screening.Source{
			Document: r.source.Document, Clause: r.source.Clause + "; the program's rule: serviceable is twice that, or 0.001 more", Status: screening.House,
		}
		worn := capacitor.LossLimit(u, r.hertz, most, screening.Serviceable, fmt.Sprintf("%.3g·%.2g, or %.2g + %.2g", wornLoss, r.tan, r.tan, dampRise),
			capacitor.Weaker(source, r.source))
		all = append(all, worn)
		if !r.source.Status.MayReject() {
			all = append(all, lossFloor(u, r.hertz))
		}
	}
	return all
}

// lossFloor is twice the largest tan δ of any film at a frequency: it rejects where the film's own figure is from memory.
func lossFloor(u capacitor.Unit, hertz float64) screening.Limit {
	most := 0.0
	var source screening.Source
	for _, r := range load().loss {
		if r.film == unknown && r.hertz == hertz {
			most, source = wornLoss*r.tan, r.source
		}
	}
	source.Clause, source.Status = source.Clause+"; the program's rule: twice that is no sound film", screening.House
	l := capacitor.LossLimit(u, hertz, most, screening.AnyGrade, "twice the laxest film", source)
	l.Criterion = criterionLossFloor
	return l
}

func insulation(d dielectric, u capacitor.Unit) []screening.Limit {
	r, volts := insulationFor(d.word, u.Volts), testVolts(u)
	all := []screening.Limit{
		capacitor.InsulationLimit(u, volts, r.fresh, screening.WithinSpec),
		capacitor.InsulationLimit(u, volts, r.worn, screening.Serviceable),
	}
	least := capacitor.InsulationLimit(u, volts, floor, screening.AnyGrade)
	if floor.At(u.Farad) < r.worn.At(u.Farad) && !r.worn.Source.Status.MayReject() {
		// A criterion of its own: a figure from memory may leave a part in doubt, and this one rejects it.
		least.Criterion = criterionFloor
		all = append(all, least)
	}
	return all
}

// Criteria of what any film keeps; they stand beside figures that may not reject.
const (
	criterionFloor     screening.Criterion = "insulation-floor"
	criterionLossFloor screening.Criterion = "loss-floor"
)

// adjust says what a low or an open reading means on film.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	for i := range findings {
		f := &findings[i]
		e := f.Evidence()
		if f.Limit.Criterion == criterionFloor || f.Limit.Criterion == criterionLossFloor {
			f.Wants.Of = "" // its neighbour asks for the same reading
		}
		if f.Limit.Criterion != capacitor.CriterionCapacitance || f.Limit.Grade != screening.Serviceable || e == nil || e.Sense == quantity.AtLeast {
			continue
		}
		u, ok := capacitor.UnitOf(part.Claim, span, f.Limit.Section)
		if !ok {
			continue
		}
		switch below := e.Value < u.Bottom(); {
		case e.Value < open*u.Farad:
			reasons = append(reasons, book.Note(f.Limit.On, "it reads nearly nothing: open, as film fails at the end of its life"))
		case below && f.Outcome != screening.Missing:
			reasons = append(reasons, book.Note(f.Limit.On, "it reads below its tolerance: metallised film loses capacitance as it heals itself, and goes on "+
				"losing it"))
		case f.Outcome == screening.Fail && f.Side == screening.Above:
			reasons = append(reasons, book.Note(f.Limit.On, "film does not gain capacitance: read the marking again, and make sure that it was out of circuit"))
		}
	}
	return findings, reasons
}

const (
	open   = 0.1  // of nominal: below it the part is open (house)
	widest = 0.10 // the widest tolerance that a lesser claim names: film that is further off has lost what it will go on losing (house)
)

func lesser(part screening.Part, findings []screening.Finding) []screening.Lesser {
	return capacitor.Wider(part, findings, widest)
}
