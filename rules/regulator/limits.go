package regulator

import (
	"fmt"
	"math"
	"strings"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/sheet"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

func limit(of screening.Definition, criterion screening.Criterion, need screening.Need) screening.Limit {
	return screening.Limit{
		On: of.Name, Unit: of.Unit, Criterion: criterion, Low: math.Inf(-1), High: inf, Need: need, Set: screening.GeneralSet, InUse: true,
	}
}

func limits(c screening.Claim) ([]screening.Limit, error) {
	all := make([]screening.Limit, 0, 5)
	d, r, ok := voltageOf(c)
	if !ok {
		l := limit(book.Trait(screening.TraitType, "type"), typeCriterion, screening.Required)
		l.Evidence, l.Note = screening.ByRating, "neither its type nor its voltage is known: there is nothing to hold it against"
		l.Source = screening.Source{Document: "no voltage is claimed", Status: screening.House}
		return append(all, l), nil
	}
	all = append(all, voltageLimits(c, d, r)...)
	if q, has := c.Rating(IQ.Name, ""); has && !math.IsInf(q.High, 1) {
		all = append(all, quiescentLimits(q)...)
	}
	if functionOf(c) != shunt {
		f := load()["dropout"]
		l := limit(Dropout, dropoutCriterion, screening.Wanted)
		l.High, l.Source, l.Note = f.value, f.source, "at whatever load is stated, up to 1 A"
		all = append(all, l)
	}
	return all, nil
}

// voltageLimits hold the voltage against the band of the sheet at 25 °C, and against that band widened by a quarter.
func voltageLimits(c screening.Claim, d screening.Definition, r screening.Rating) []screening.Limit {
	within := limit(d, voltageCriterion, screening.Required)
	within.Low, within.High, within.Grade, within.Source = r.Low, r.High, screening.WithinSpec, book.SourceOf(&r)
	if r.Typed != "" && !strings.Contains(r.Typed, "..") {
		within.Source = load()["nominal"].source
	}
	within.At = testCondition(c)
	wider, ok := load()["wider-"+c.Trait(screening.TraitType)]
	if !ok || r.Typed != "" {
		wider = load()["wider"]
	}
	mid, half := (r.Low+r.High)/2, (r.High-r.Low)/2
	lax := within
	lax.Grade, lax.Source = screening.Serviceable, noBetterThan(within.Source, wider.source)
	lax.Low, lax.High = round(mid-wider.value*half), round(mid+wider.value*half)
	lax.Formula = func() string {
		return fmt.Sprintf("%s to %s, ×%.2f about its middle = %s to %s", volts(r.Low), volts(r.High), wider.value, volts(lax.Low), volts(lax.High))
	}
	if lax.Source.Status.MayReject() {
		return []screening.Limit{within, lax}
	}
	// What is only remembered rejects nothing; a voltage far off is still a fault.
	f := load()["gross"]
	gross := lax
	gross.Criterion, gross.Source = grossCriterion, f.source
	gross.Low, gross.High = round(mid-f.value*math.Abs(mid)), round(mid+f.value*math.Abs(mid))
	gross.Formula = func() string {
		return fmt.Sprintf("%s ±%s = %s to %s", volts(mid), quantity.Format(f.value, quantity.Ratio, 0), volts(gross.Low), volts(gross.High))
	}
	return []screening.Limit{within, lax, gross}
}

// noBetterThan is the source of a figure widened by a rule: what rests on a figure that may not reject may not either.
func noBetterThan(figure, rule screening.Source) screening.Source {
	if !figure.Status.MayReject() {
		rule.Status = figure.Status
	}
	return rule
}

// round keeps a bound that was computed free of the last bits of floating point.
func round(x float64) float64 { return math.Round(x*1e6) / 1e6 }

func volts(x float64) string { return quantity.Format(x, quantity.Volt, 0) }

func quiescentLimits(r screening.Rating) []screening.Limit {
	within := limit(IQ, quiescentCriterion, screening.Wanted)
	within.High, within.Grade, within.Source = r.High, screening.WithinSpec, book.SourceOf(&r)
	f := load()["quiescent"]
	lax := within
	lax.Grade, lax.High, lax.Source = screening.Serviceable, f.value*r.High, noBetterThan(within.Source, f.source)
	return []screening.Limit{within, lax}
}

// middle is the voltage that it is meant to give.
func middle(c screening.Claim) float64 {
	_, r, ok := voltageOf(c)
	if !ok {
		return 0
	}
	return (r.Low + r.High) / 2
}

// least is the least current at which it regulates, A; 0 where its sheet asks for none.
func least(c screening.Claim) float64 {
	_, i, ok := sheet.Least(c, MinLoad.Name)
	if !ok {
		return 0
	}
	return i
}

// leastInput is the input from which on it regulates at any load, V.
func leastInput(c screening.Claim) float64 { return middle(c) + load()["headroom"].value }

// testCondition is what a recipe sets: of a fixed or adjustable one input and load, of a shunt its current.
func testCondition(c screening.Claim) screening.Condition {
	_, current := testLoad(c)
	at := screening.At(screening.Current, current)
	if functionOf(c) == shunt {
		return at
	}
	return at.With(screening.VIN, testInput(c))
}

// testInput is an input voltage that leaves headroom and little heat: 5 V above the output, within what the part stands, V.
func testInput(c screening.Claim) float64 {
	in := math.Ceil(middle(c) + 5)
	if _, most, ok := sheet.Least(c, VInMax.Name); ok {
		in = math.Min(in, most)
	}
	return in
}

// testLoad chooses a load: 100 mA, less where the part gives less, and never below what it needs to regulate. Ohms and amperes.
func testLoad(c screening.Claim) (ohms, amperes float64) {
	amperes = 0.1
	if functionOf(c) != fixed {
		amperes = 10e-3
	}
	if _, r, ok := voltageOf(c); ok {
		if i, stated := r.At.Get(screening.Current); stated && i > 0 {
			amperes = i
		}
	}
	if _, most, ok := sheet.Least(c, IOut.Name); ok && most > 0 {
		amperes = math.Min(amperes, most/2)
	}
	amperes = math.Max(amperes, least(c))
	return middle(c) / amperes, amperes
}

// derive makes a magnitude of a voltage typed with its sign.
func derive(part screening.Part) ([]screening.Reading, []screening.Reason) {
	var derived []screening.Reading
	for _, r := range part.Readings {
		if (r.Of == VOut.Name || r.Of == VRef.Name) && r.Value < 0 && r.Sense == quantity.Exactly {
			r.Value, r.Repeats, r.Rule = -r.Value, nil, "without its sign"
			derived = append(derived, r)
		}
	}
	return derived, nil
}
