package varistor

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

func limit(on screening.Definition, criterion screening.Criterion) screening.Limit {
	return screening.Limit{
		On: on.Name, Unit: on.Unit, Criterion: criterion, Low: math.Inf(-1), High: math.Inf(1), Need: screening.Required,
		Set: screening.GeneralSet, InUse: true,
	}
}

// named returns the voltage at 1 mA that a claim names and its bounds: a nominal with its tolerance, or a range whose middle is taken.
func named(c screening.Claim) (nominal, low, high float64, ok bool) {
	r, claimed := c.Rating(VV.Name, "")
	if !claimed {
		return 0, 0, 0, false
	}
	if !r.HasNominal() {
		middle := (r.Low + r.High) / 2
		return middle, r.Low, r.High, middle-middle == 0
	}
	t, _ := c.Rating(screening.Tolerance.Name, "")
	return r.Nominal, r.Nominal * (1 + t.Low), r.Nominal * (1 + t.High), true
}

func limits(c screening.Claim) ([]screening.Limit, error) {
	nominal, low, high, ok := named(c)
	if !ok {
		return nil, nil
	}
	short := limit(screening.Resistance, shortCriterion)
	f := figures()["shorted"]
	short.Low, short.Source = f.value, f.source
	short.Note = "an ohmmeter can only reject: it never reaches the voltage at which a varistor works"

	r, _ := c.Rating(VV.Name, "")
	band := limit(VV, voltageCriterion)
	band.At, band.Low, band.High, band.Grade, band.Source = screening.At(screening.Current, testCurrent), low, high, screening.WithinSpec, bandSource(c)
	band.Formula = func() string {
		if !r.HasNominal() {
			return r.String() + " as claimed"
		}
		t, _ := c.Rating(screening.Tolerance.Name, "")
		return fmt.Sprintf("%s %s = %s to %s", volts(nominal), t, volts(low), volts(high))
	}
	change := figures()["worn-change"]
	worn := band
	worn.Low, worn.High, worn.Grade, worn.Source = low*(1-change.value), high*(1+change.value), screening.Serviceable, change.source
	if r.Source.Status != screening.NoStatus {
		worn.Source = r.Source // no better than the voltage it is computed from
	}
	worn.Formula = func() string {
		return fmt.Sprintf("%s to %s, and ±10 %% of change in use = %s to %s", volts(low), volts(high), quantity.Format(worn.Low, quantity.Volt, 4),
			quantity.Format(worn.High, quantity.Volt, 4))
	}

	half, most := figures()["half"], figures()["worn-leakage"]
	leak := limit(screening.Leakage, leakageCriterion)
	leak.At, leak.Source = screening.At(screening.Voltage, half.value*nominal), most.source
	if r.Source.Status != screening.NoStatus {
		leak.Source = r.Source
	}
	// Worn from 10 µA on: the bound itself is not good any more.
	leak.High = math.Nextafter(most.value, 0)
	leak.Formula = func() string {
		return fmt.Sprintf("less than %s at half of %s = %s", quantity.Format(most.value, quantity.Ampere, 0), volts(nominal), volts(half.value*nominal))
	}
	return []screening.Limit{short, band, worn, leak}, nil
}

// bandSource is where the band comes from: the voltage's source where it was computed, else the tolerance's.
func bandSource(c screening.Claim) screening.Source {
	r, _ := c.Rating(VV.Name, "")
	t, ok := c.Rating(screening.Tolerance.Name, "")
	switch {
	case r.Source.Status != screening.NoStatus || !ok || !r.HasNominal():
		return book.SourceOf(&r)
	case book.ToleranceSource(t.Typed).Status != screening.NoStatus:
		return book.ToleranceSource(t.Typed)
	}
	return book.SourceOf(&t)
}

// Currents between which a voltage is brought to 1 mA, as ratios to it (house): further off the exponent leaves too much open.
const least, most = 0.1, 3.0

// convert brings a voltage to 1 mA: I = k·V^a makes V(1 mA) = V·(1 mA/I)^(1/a), with the exponent anywhere between its bounds.
func convert(_ screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	if l.On != VV.Name {
		return screening.Conversion{}
	}
	i, stated := r.At.Get(screening.Current)
	if !stated || i <= 0 {
		return screening.Conversion{Why: "the current of the reading is not stated: vv@1mA=…"}
	}
	ratio := testCurrent / i
	if 1/ratio < least*0.999 || 1/ratio > most*1.001 {
		return screening.Conversion{Why: fmt.Sprintf("taken at %s; measure between %s and %s", quantity.Format(i, quantity.Ampere, 0),
			quantity.Format(least*testCurrent, quantity.Ampere, 0), quantity.Format(most*testCurrent, quantity.Ampere, 0))}
	}
	steep, flat := math.Pow(ratio, 1/figures()["knee-least"].value), math.Pow(ratio, 1/figures()["knee-most"].value)
	factor := (steep + flat) / 2
	c := screening.Conversion{OK: true, Reading: r, Source: figures()["knee-least"].source}
	c.Reading.Value *= factor
	c.Reading.At = l.At
	c.U = r.Value * math.Abs(steep-flat) / 2 / math.Sqrt(3)
	c.Reading.U = math.Hypot(r.U*factor, c.U)
	c.Reading.Spec = r.Spec*factor + r.Value*math.Abs(steep-flat)/2
	c.Rule = fmt.Sprintf("×%.3f ± %.3f from %s to %s (I = k·V^15 to V^50)", factor, math.Abs(steep-flat)/2, quantity.Format(i, quantity.Ampere, 0),
		quantity.Format(testCurrent, quantity.Ampere, 0))
	c.Reading.Rule = c.Rule
	return c
}

// mainsFrom is the voltage at 1 mA from which a varistor may be one for the mains: the peak of 120 V, V (derived: 120 V·√2).
const mainsFrom = 170.0

// adjust spares the ohmmeter where the leakage passed, keeps a conversion from failing a sound part, and says what a failure means.
func adjust(part screening.Part, findings []screening.Finding) ([]screening.Finding, []screening.Reason) {
	var reasons []screening.Reason
	if nominal, _, _, ok := named(part.Claim); ok && nominal >= mainsFrom {
		reasons = append(reasons, book.Note(VV.Name,
			"its usual place is across the mains, and there no salvaged one goes, whatever it reads: this is for other places"))
	}
	blocks := false
	for i := range findings {
		blocks = blocks || findings[i].Limit.On == screening.Leakage.Name && findings[i].Outcome == screening.Pass
	}
	for i := range findings {
		f := &findings[i]
		switch {
		case f.Limit.On == screening.Resistance.Name && f.Outcome == screening.Missing && f.Reading == nil && blocks:
			f.Need, f.Wants = screening.Wanted, screening.Gap{}
		case f.Outcome == screening.Fail && f.Converted != nil:
			if e := f.Evidence(); math.Max(f.Limit.Low-e.Value, e.Value-f.Limit.High) <= e.Spec {
				f.Outcome, f.Why = screening.Close, "too near the limit for the current it was read at"
			}
		}
		if f.Outcome != screening.Fail || f.Limit.Grade == screening.WithinSpec {
			continue
		}
		reasons = append(reasons, book.Note(f.Limit.On, "%s", failWords(f)))
	}
	return findings, reasons
}

func failWords(f *screening.Finding) string {
	switch {
	case f.Limit.On == screening.Resistance.Name:
		return "it conducts at the few volts of an ohmmeter: shorted, as a varistor mostly ends"
	case f.Limit.On == screening.Leakage.Name:
		return "it leaks at half its voltage: worn by surges, and leakage heats it until it burns"
	case f.Side == screening.Below:
		return "its voltage has fallen: worn by surges; a lower voltage is no lesser claim, it goes on falling"
	}
	return "its voltage lies too high to be wear: read the print again"
}

func untested(screening.Part, []screening.Finding) []string {
	return []string{"surge current, energy and clamping voltage: no bench reading shows what it still stands"}
}
