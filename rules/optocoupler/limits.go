package optocoupler

import (
	"fmt"
	"math"

	"goodbin/rules/internal/book"
	"goodbin/rules/internal/junction"
	"goodbin/rules/internal/sheet"
	"goodbin/screening"
	"goodbin/screening/quantity"
)

const (
	// testerCurrent is what a diode test is taken to send where no current is stated, A (house).
	testerCurrent = 1e-3
	// blocksAt is the reverse voltage that shows that the LED blocks at all: the 2 V of a diode test less its error (house).
	blocksAt = 1.9
	// leastReverse is the reverse rating of the LED where none is claimed, V.
	leastReverse = 3.0
	// usualCurrent and usualVCE are what a ratio is measured at where the claim names nothing, A and V (house).
	usualCurrent, usualVCE = 5e-3, 5.0
)

const noRatio = "no transfer ratio is claimed: it is taken as measured"

var (
	testerSource = screening.Source{Document: "a diode test in reverse, 2 V less its error", Status: screening.House}
	leastSource  = screening.Source{Document: "no text seen; recalled", Clause: "the lowest reverse rating of an optocoupler's LED, 3 V", Status: screening.FromMemory}
)

func limits(c screening.Claim) ([]screening.Limit, error) {
	channels := sections(c)
	all := make([]screening.Limit, 0, 9*len(channels))
	for _, s := range channels {
		all = ledLimits(all, c, s)
		all = ratioLimits(all, c, s)
		all = darkLimits(all, c, s)
	}
	return all, nil
}

func limit(of screening.Definition, criterion screening.Criterion, section string) screening.Limit {
	return screening.Limit{
		On: of.Name, Unit: of.Unit, Criterion: criterion, Section: section, Low: math.Inf(-1), High: inf,
		Set: screening.GeneralSet, InUse: true,
	}
}

// ledLimits hold the LED side: its drop, by tester or by the sheet's maximum, and that it blocks.
func ledLimits(all []screening.Limit, c screening.Claim, section string) []screening.Limit {
	f := load()["led"]
	l := limit(screening.VF, ledCriterion, section)
	l.At, l.Low, l.High, l.Source = screening.At(screening.Current, testerCurrent), f.low, f.high, f.source
	l.Formula = func() string {
		return fmt.Sprintf("an infrared LED: %s to %s from %s to %s", quantity.Format(f.low, quantity.Volt, 2), quantity.Format(f.high, quantity.Volt, 2),
			quantity.Format(f.from, quantity.Ampere, 0), quantity.Format(f.to, quantity.Ampere, 0))
	}
	all = append(all, l)
	if r, at, ok := sheet.At(c, screening.VF.Name, screening.Current); ok && r.High > f.low {
		m := limit(screening.VF, ledCriterion, section)
		m.At, m.Low, m.High, m.Source = screening.At(screening.Current, at), f.low, r.High, book.SourceOf(&r)
		m.Note = "the lower bound is that at a tester's current: at more current it drops no less"
		all = append(all, m)
	}
	stands := limit(screening.VBR, blockingCriterion, section)
	stands.Low, stands.Source = blocksAt, testerSource
	stands.Note = "the LED side; a diode test is enough"
	breaks := limit(screening.VBR, breakdownCriterion, section)
	breaks.Need, breaks.Low, breaks.Source = screening.Wanted, leastReverse, leastSource
	if r, v, ok := sheet.Least(c, screening.VRRM.Name); ok {
		breaks.Low, breaks.Source = v, book.SourceOf(&r)
	}
	breaks.Note = "a breakdown above the rating is normal, below it the LED is damaged; never tried on purpose"
	return append(all, stands, breaks)
}

// ratioLimits hold the transfer ratio against the claim; serviceable is an LED that has faded by less than a third.
func ratioLimits(all []screening.Limit, c screening.Claim, section string) []screening.Limit {
	r, current, vce, ok := ratio(c)
	l := limit(CTR, ratioCriterion, section)
	l.At = screening.At(screening.Current, current).With(screening.VCE, vce)
	floor := load()["works"]
	works := l
	works.Criterion, works.Need, works.Low, works.Source = worksCriterion, screening.Wanted, floor.low, floor.source
	all = append(all, works)
	if !ok {
		l.Note, l.Source = noRatio, screening.Source{Document: "no transfer ratio is claimed", Status: screening.House}
		return append(all, l)
	}
	l.Low, l.High, l.Grade, l.Source = r.Low, r.High, screening.WithinSpec, book.SourceOf(&r)
	if math.IsInf(r.Low, -1) || r.Low <= 0 {
		l.Grade = screening.AnyGrade
		return append(all, l)
	}
	aged := load()["aged"]
	a := l
	a.Grade, a.Low, a.Soft = screening.Serviceable, aged.low*r.Low, true
	// A figure that was only recalled stays so when it is multiplied.
	if r.Source.Status == screening.NoStatus || r.Source.Status.MayReject() {
		a.Source = aged.source
	}
	a.Formula = func() string {
		return fmt.Sprintf("%.1f·%s = %s: the LED has faded", aged.low, quantity.Format(r.Low, quantity.Ratio, 0), quantity.Format(aged.low*r.Low, quantity.Ratio, 0))
	}
	return append(all, l, a)
}

// darkLimits ask that the transistor is off in the dark; what a sheet allows, nanoamperes, no pocket meter resolves.
func darkLimits(all []screening.Limit, c screening.Claim, section string) []screening.Limit {
	f := load()["dark-current"]
	r, at, ok := sheet.At(c, screening.ICEO.Name, screening.VCE)
	volts := usualVCE * 2
	if ok {
		volts = at
	}
	l := limit(screening.ICEO, darkCriterion, section)
	l.At, l.High, l.Source = screening.At(screening.VCE, volts).With(screening.PartTemperature, junction.Reference), f.high, f.source
	if ok && r.High > l.High {
		l.High, l.Source = r.High, book.SourceOf(&r)
	}
	all = append(all, l)
	if ok {
		m := limit(screening.ICEO, sheetDarkCriterion, section)
		m.Need, m.At, m.High, m.Grade, m.Source = screening.Wanted, l.At, r.High, screening.WithinSpec, book.SourceOf(&r)
		lax := l
		lax.Criterion, lax.Need, lax.Grade = sheetDarkCriterion, screening.Wanted, screening.Serviceable
		all = append(all, m, lax)
	}
	return all
}

// derive computes the transfer ratio from a collector current whose LED current is stated: IC/IF.
func derive(part screening.Part) ([]screening.Reading, []screening.Reason) {
	var derived []screening.Reading
	var notes []screening.Reason
	for _, r := range part.Readings {
		if r.Of != IC.Name {
			continue
		}
		i, ok := r.At.Get(screening.Current)
		if !ok || i <= 0 {
			notes = append(notes, book.Note(IC.Name, "the LED's current of the collector current is not stated: ic@10mA,10V=…"))
			continue
		}
		r.Rule = "IC/IF = " + quantity.Format(r.Value, quantity.Ampere, 3) + "/" + quantity.Format(i, quantity.Ampere, 3)
		// The LED's current was set with a meter of the same sort.
		r.From = []screening.Input{
			{Of: r.Of, U: r.U, Sensitivity: 1 / i}, {Name: "the LED's current as set", U: currentError * i, Sensitivity: -r.Value / (i * i)},
		}
		r.U = math.Hypot(r.U, currentError*r.Value) / i
		r.Of, r.Unit, r.Value, r.Spec, r.Step, r.Repeats = CTR.Name, CTR.Unit, r.Value/i, r.Spec/i, r.Step/i, nil
		derived = append(derived, r)
	}
	return derived, notes
}

// currentError is the standard uncertainty of an LED current that was set with a pocket meter or a 1 % resistor, as a ratio (house).
const currentError = 0.02

// convert brings a reading to a limit's condition: the LED's drop by the rule of package junction, dark current by its law.
func convert(part screening.Part, r screening.Reading, l screening.Limit) screening.Conversion {
	switch {
	case l.On == screening.VF.Name && l.Criterion == ledCriterion:
		f := load()["led"]
		if at, _ := l.At.Get(screening.Current); at == testerCurrent && l.High == f.high {
			return junction.Forward(r, l, junction.Currents{From: f.from, To: f.to, Source: f.source}, false)
		}
		return junction.Forward(r, l, junction.Currents{}, true)
	case l.On == screening.ICEO.Name:
		return junction.Bring(part, r, l, junction.Rule{
			Across: screening.VCE, Same: screening.Span{Low: 0.15, High: 1.02}, AnyVoltage: l.Criterion == darkCriterion, LeastVoltage: leastDark,
			ClearsAnyRoom: true,
		})
	}
	return screening.Conversion{}
}

// leastDark is the collector voltage from which a dark current says something, V (house).
const leastDark = 3.0
