package ceramic

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/capacitor"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

// Where makers measure (TDK and Kyocera on measuring capacitance: published).
const (
	smallClass1 = 1000e-12 // farad up to which class 1 is measured at 1 MHz, above at 1 kHz
	largeClass2 = 10e-6    // farad up to which class 2 is measured at 1 kHz, above at 120 Hz
)

// frequencyFor is where capacitance and loss of a new part are stated, Hz. A part of unknown class is measured as class 2.
func frequencyFor(d *dielectric, farad float64) float64 {
	switch {
	case d.class == 1 && farad <= smallClass1:
		return 1e6
	case d.class != 1 && farad > largeClass2:
		return 120
	}
	return 1e3
}

// testVolts is the voltage of the insulation test: the rated one (every sheet read), 500 V at most, 10 V where none is claimed.
func testVolts(u capacitor.Unit) float64 {
	if u.Volts == 0 {
		return capacitor.TestVolts(0)
	}
	return math.Min(u.Volts, 500)
}

// The ages that ageing is counted to and from. A verdict must not change with the calendar, so parts are taken to be as old as they will be in
// agedUntil; an undated one as made in oldest, before which there was no class 2 to speak of (house).
const (
	agedUntil, oldest = 2040, 1950
	hoursPerYear      = 8766.0
	ageingFrom        = 1000.0 // h after the last heating, where the tolerance holds (published: TDK, Kyocera)
)

// Ageing returns the share of its capacitance at 1000 h that a dielectric has lost after so many hours since it was last heated, losing k in a
// decade of time: k·log10(t/1000 h). It is negative before 1000 h.
func Ageing(k, hours float64) float64 { return k * math.Log10(hours/ageingFrom) }

// ageOf returns the hours that a claim's part has aged at most.
func ageOf(claim screening.Claim) (hours float64, dated bool) {
	year, dated := claim.Year()
	if !dated {
		year = oldest
	}
	return math.Max(1, float64(agedUntil-year)) * hoursPerYear, dated
}

// Conditioning allowances of MIL-PRF-123D 3.11–3.12: how far outside its tolerance a part may lie after heat and rest before it counts as
// a defect.
var (
	class1Allowance = capacitor.Allowance{Ratio: 0.01, Farad: 0.3e-12, Source: conditioning("class 1: 1 % or 0.3 pF outside its tolerance")}
	class2Allowance = capacitor.Allowance{Ratio: 0.05, Farad: 0.5e-12, Source: conditioning("class 2: 5 % or 0.5 pF outside its tolerance")}
)

func conditioning(clause string) screening.Source {
	return screening.Source{Document: "MIL-PRF-123D", Clause: clause, Status: screening.Published}
}

func limits(claim screening.Claim) ([]screening.Limit, error) {
	us, err := capacitor.Units(claim, span)
	if err != nil {
		return nil, err
	}
	d, _ := dielectricOf(claim)
	var all []screening.Limit
	for _, u := range us {
		at := screening.At(screening.Frequency, frequencyFor(&d, u.Farad))
		worn := serviceable(claim, &d, u, at)
		all = append(all, capacitor.CapacitanceLimit(u, at), worn)
		all = append(all, capacitor.Floor(worn)...)
		if d.class == 1 {
			all = append(all, class1Loss(u, d.source)...)
		} else {
			all = append(all, tableLoss(claim, &d, u)...)
		}
		all = append(all, insulation(&d, u)...)
	}
	return all, nil
}

// serviceable is the band of a part that has aged.
func serviceable(claim screening.Claim, d *dielectric, u capacitor.Unit, at screening.Condition) screening.Limit {
	if !d.ages() {
		return capacitor.ServiceableCapacitance(u, at, class1Allowance)
	}
	hours, dated := ageOf(claim)
	lost := math.Max(Ageing(d.ageing, hours), d.worn)
	more := class2Allowance.Of(u.Farad)
	l := capacitor.CapacitanceLimit(u, at)
	l.Low, l.High = math.Max(0, u.Bottom()*(1-lost)-more), u.Top()+more
	l.Grade, l.Soft = screening.Serviceable, true
	l.Source = capacitor.Weaker(screening.Source{
		Document: d.source.Document + "; " + class2Allowance.Source.Document, Clause: d.source.Clause + "; " + class2Allowance.Source.Clause,
		Status: d.source.Status,
	}, u.ToleranceSource)
	l.Formula = func() string {
		age := "of unknown age"
		if dated {
			age = "dated " + claim.Trait(screening.TraitDated)
		}
		return fmt.Sprintf("%s %s, %s less for ageing or wear (%s, %s a decade of time at most), %s more either way = %s to %s", capacitor.Farads(u.Farad),
			capacitor.Percents(u.Low, u.High), quantity.Format(lost, quantity.Ratio, 2), age, quantity.Format(d.ageing, quantity.Ratio, 2),
			capacitor.Farads(more), capacitor.Farads(l.Low), capacitor.Farads(l.High))
	}
	l.Note = "heat above its Curie point brings an aged part back for a while; that is no treatment, and no reason to refuse it"
	return l
}

// Class1TanDelta is the largest tan δ of a new class 1 part by the form of IEC 60384-8: 0.0015 above 50 pF, below 0.0015·(15/C[pF] + 0.7).
func Class1TanDelta(farad float64) float64 {
	if pf := farad * 1e12; pf < 50 {
		return 0.0015 * (15/pf + 0.7)
	}
	return 0.0015
}

// Class1Q is the least Q of a new part by data sheets of chips and discs: 400 + 20·C[pF] below 30 pF, else 1000.
func Class1Q(farad float64) float64 {
	if pf := farad * 1e12; pf < 30 {
		return 400 + 20*pf
	}
	return 1000
}

// class1WornQ is the least Q after endurance: 350 from 30 pF, 275 + 5·C/2 from 10 pF, below that 200 + 10·C.
func class1WornQ(farad float64) float64 {
	switch pf := farad * 1e12; {
	case pf < 10:
		return 200 + 10*pf
	case pf < 30:
		return 275 + 2.5*pf
	}
	return 350
}

var (
	class1Source = screening.Source{
		Document: "Knowles class I (the form of IEC 60384-8); AVX C0G and a ceramic disc data sheet (Q); a film maker's table (0.10 % at 1, 10 and 100 kHz)",
		Clause:   "the laxest of them", Status: screening.Published,
	}
	class1WornSource = screening.Source{Document: "ceramic disc data sheet", Clause: "section 5, class I, Q after life", Status: screening.Published}
)

// class1Loss lists the limits at 1 MHz and, for what a bench owns, at 1, 10 and 100 kHz: class 1 loses no more there than at 1 MHz.
func class1Loss(u capacitor.Unit, _ screening.Source) []screening.Limit {
	form, q, worn := Class1TanDelta(u.Farad), Class1Q(u.Farad), class1WornQ(u.Farad)
	frequencies := []float64{1e3, 10e3, 100e3}
	if u.Farad <= smallClass1 {
		frequencies = append(frequencies, 1e6)
	}
	var all []screening.Limit
	for _, f := range frequencies {
		fresh := math.Max(form, 1/q)
		how := fmt.Sprintf("Q %.3g, or 0.0015 with 15/C + 0.7 below 50 pF: %.2g", q, fresh)
		all = append(all, capacitor.LossLimit(u, f, fresh, screening.WithinSpec, how, class1Source),
			capacitor.LossLimit(u, f, math.Max(fresh, 1/worn), screening.Serviceable, fmt.Sprintf("Q %.3g after life", worn), class1WornSource))
	}
	return all
}

// oldSeriesBefore is the year before which the older data sheets count (house).
const oldSeriesBefore = 2000

// tableLoss lists the limits of classes 2 and 3 and of unknown ones, which hold at one frequency.
func tableLoss(claim screening.Claim, d *dielectric, u capacitor.Unit) []screening.Limit {
	rows := rowsFor("tan", d, u.Volts)
	inUse := setFor(claim, rows)
	hertz := frequencyFor(d, u.Farad)
	var all []screening.Limit
	for _, r := range rows {
		fresh := capacitor.LossLimit(u, hertz, r.fresh, screening.WithinSpec, "", r.source)
		fresh.Set, fresh.InUse = r.set, r.set == inUse
		all = append(all, fresh)
		if !math.IsNaN(r.worn) {
			worn := capacitor.LossLimit(u, hertz, r.worn, screening.Serviceable, "after life", r.wornSource)
			worn.Set, worn.InUse = fresh.Set, fresh.InUse
			all = append(all, worn)
		}
	}
	return all
}

func setFor(claim screening.Claim, rows []row) screening.LimitSet {
	if year, ok := claim.Year(); ok && year < oldSeriesBefore {
		for _, r := range rows {
			if r.set == olderSeries {
				return olderSeries
			}
		}
	}
	return screening.GeneralSet
}

const olderSeries screening.LimitSet = "older-series"

func insulation(d *dielectric, u capacitor.Unit) []screening.Limit {
	var all []screening.Limit
	for _, r := range rowsFor("ins", d, u.Volts) {
		volts := testVolts(u)
		fresh := capacitor.InsulationLimit(u, volts, capacitor.Insulation{Ohms: r.fresh, Seconds: r.freshS, Source: r.source}, screening.WithinSpec)
		fresh.Set, fresh.InUse = r.set, r.set == screening.GeneralSet
		all = append(all, fresh)
		if !math.IsNaN(r.worn) {
			worn := capacitor.InsulationLimit(u, volts, capacitor.Insulation{Ohms: r.worn, Seconds: r.wornS, Source: r.wornSource}, screening.Serviceable)
			worn.Set, worn.InUse = fresh.Set, fresh.InUse
			all = append(all, worn)
		}
	}
	return all
}

// Note on a reading: what ageing explains.
func ageingNote(claim screening.Claim, d *dielectric, below float64) screening.Reason {
	hours, dated := ageOf(claim)
	age := "its age is not known"
	if dated {
		age = "dated " + claim.Trait(screening.TraitDated)
	}
	return book.Note(screening.Capacitance.Name, "it reads %s below its tolerance, which holds 1000 h after the last heat: ageing explains up to %s "+
		"(%s a decade of time, %s). Heat would bring it back for a while; that is no treatment", quantity.Format(below, quantity.Ratio, 2),
		quantity.Format(Ageing(d.ageing, hours), quantity.Ratio, 2), quantity.Format(d.ageing, quantity.Ratio, 2), age)
}
